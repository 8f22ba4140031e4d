//! Paths along the displacement vectors of an extended XYZ file, as the program runs them.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use std::process::{Command, Output};

use orbend_checks::orbend_binary;
use serde_json::Value;

/// Carbon dioxide with its bending motion: the oxygens up, the carbon down by the ratio of the masses.
const BENDING: &str = "3
Properties=species:S:1:pos:R:3:displacement:R:3
C 0.0 0.0  0.00  0.0 -0.80 0.0
O 0.0 0.0  1.16  0.0  0.30 0.0
O 0.0 0.0 -1.16  0.0  0.30 0.0
";

/// The antisymmetric stretch.
const STRETCHING: &str = "3
Properties=species:S:1:pos:R:3:displacement:R:3
C 0.0 0.0  0.00  0.0 0.0 -0.80
O 0.0 0.0  1.16  0.0 0.0  0.30
O 0.0 0.0 -1.16  0.0 0.0  0.30
";

fn run(geometry: &str, arguments: &[&str]) -> Output {
    let folder = tempfile::tempdir().expect("a folder");
    let file = folder.path().join("mode.xyz");
    std::fs::write(&file, geometry).expect("written");
    Command::new(orbend_binary())
        .arg("sweep")
        .arg(&file)
        .args(arguments)
        .output()
        .expect("orbend runs")
}

fn document(geometry: &str, range: &str) -> Value {
    let output = run(geometry, &["--along-mode", range, "--json"]);
    let message = String::from_utf8_lossy(&output.stderr);
    assert!(output.status.success(), "{message}");
    serde_json::from_slice(&output.stdout).expect("a document")
}

#[test]
fn a_bending_mode_and_a_stretching_mode() {
    let bending = document(BENDING, "-0.5..0.5:0.25");
    assert_eq!(bending["coordinates"][0]["kind"], "mode");
    assert_eq!(bending["symmetry"]["path_group"], "C2v");
    let points = bending["points"].as_array().expect("points");
    let groups: Vec<&Value> = points.iter().map(|point| &point["point_group"]).collect();
    assert_eq!(groups, ["C2v", "C2v", "Dinfh", "C2v", "C2v"]);
    // Amplitude times displacement, and mirror images at opposite amplitudes.
    let place = |point: usize, atom: usize, axis: usize| {
        points[point]["positions"][atom][axis]
            .as_f64()
            .expect("a number")
    };
    let angle = |point: usize| {
        let arm = |atom: usize| [0, 1, 2].map(|k| place(point, atom, k) - place(point, 0, k));
        let (a, b) = (arm(1), arm(2));
        let dot = |a: [f64; 3], b: [f64; 3]| (0..3).map(|k| a[k] * b[k]).sum::<f64>();
        (dot(a, b) / (dot(a, a) * dot(b, b)).sqrt())
            .acos()
            .to_degrees()
    };
    let wanted = 180.0 - 2.0 * (0.5 * 1.1_f64 / 1.16).atan().to_degrees();
    assert!((angle(0) - wanted).abs() < 1e-6 && (angle(4) - wanted).abs() < 1e-6);
    let sum = |point: usize| points[point]["sum"].as_f64().expect("a sum");
    assert!((sum(0) - sum(4)).abs() < 1e-9);

    let stretching = document(STRETCHING, "-0.5..0.5:0.25");
    assert_eq!(stretching["symmetry"]["path_group"], "Cinfv");
    let points = stretching["points"].as_array().expect("points");
    assert_eq!(points[2]["point_group"], "Dinfh");
}

#[test]
fn what_cannot_be_a_mode_is_refused() {
    let plain = "3\nplain\nC 0 0 0\nO 0 0 1.16\nO 0 0 -1.16\n";
    let still = BENDING.replace("-0.80", "0.0").replace("0.30", "0.0");
    let torn = BENDING.replace("-0.80 0.0", "-0.80");
    for (geometry, range, word) in [
        (plain, "-1..1:0.5", "no displacement"),
        (still.as_str(), "-1..1:0.5", "moves no atom"),
        (torn.as_str(), "-1..1:0.5", ":3:"),
        (BENDING, "-1..1", "range of amplitudes"),
        (BENDING, "1..1:0.5", "--along-mode"),
        (STRETCHING, "0..2:0.5", "Å"),
    ] {
        let output = run(geometry, &["--along-mode", range]);
        let message = String::from_utf8_lossy(&output.stderr);
        assert_eq!(output.status.code(), Some(2), "{range}: {message}");
        assert!(message.contains(word), "{word}: {message}");
        assert!(output.stdout.is_empty());
    }
    let output = run(
        BENDING,
        &["--along-mode", "-1..1:0.5", "--bend", "2-1-3=90..180:5"],
    );
    assert_eq!(output.status.code(), Some(2));
}
