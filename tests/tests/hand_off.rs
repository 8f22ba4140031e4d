//! The hand-off of ozone and NF2, and the forms that it is written in.

#![allow(
    clippy::expect_used,
    reason = "a failed expectation in a check is its message"
)]

use std::path::Path;
use std::process::Command;

use orbend_checks::orbend_binary;
use orbend_structure::{BOHR_IN_ANGSTROM, XyzOptions, read_xyz};
use serde_json::Value;

fn run(folder: &Path, arguments: &[&str]) -> String {
    let output = Command::new(orbend_binary())
        .args(arguments)
        .current_dir(folder)
        .output()
        .expect("orbend runs");
    assert!(
        output.status.success(),
        "{arguments:?}: {}",
        String::from_utf8_lossy(&output.stderr)
    );
    String::from_utf8(output.stdout).expect("text")
}

fn space<'a>(document: &'a Value, kind: &str) -> &'a Value {
    document["active_spaces"]
        .as_array()
        .expect("spaces")
        .iter()
        .find(|space| space["kind"] == kind)
        .expect("the space")
}

/// Ozone's usual space is 12 electrons in the nine 2p orbitals, 2520 singlet functions (Paldus'
/// formula); the open form and the ring of ozone meet near 80–85° (Xantheas, Atchity, Elbert &
/// Ruedenberg, J. Chem. Phys. 94, 8054 (1991); both from memory).
#[test]
fn ozone() {
    let folder = tempfile::tempdir().expect("folder");
    let text = run(folder.path(), &["plan", "O3", "--json"]);
    let document: Value = serde_json::from_str(&text).expect("JSON");
    let proposed = space(&document, "proposed");
    assert_eq!(proposed["electrons"], 12);
    assert_eq!(proposed["orbitals"], 9);
    assert_eq!(proposed["state_functions"], 2520.0);
    assert!(proposed["stops"].as_array().expect("stops").is_empty());
    let ring = &document["root_flips"][0];
    assert_eq!(ring["kind"], "ground");
    assert!((ring["at"].as_f64().expect("value") - 82.0).abs() < 4.0);
    let start = document["starts"][0]["at"][0].as_f64().expect("angle");
    // Experiment 116.8° (from memory).
    assert!((start - 116.8).abs() < 8.0, "{start}");
    // Active and inactive orbitals are all valence and core orbitals that hold electrons, and more.
    let total = |key: &str| -> u64 {
        proposed[key]
            .as_array()
            .expect("counts")
            .iter()
            .map(|one| one["orbitals"].as_u64().expect("number"))
            .sum()
    };
    assert_eq!(2 * total("inactive_counts") + 12, 24);
    assert_eq!(total("active_counts"), 9);
}

#[test]
fn nitrogen_difluoride_in_every_form() {
    let folder = tempfile::tempdir().expect("folder");
    let files = ["n.json", "n.md", "n.xyz", "n.qcschema.json"];
    let mut arguments = vec!["plan", "NF2"];
    for file in files {
        arguments.extend(["--out", file]);
    }
    let text = run(folder.path(), &arguments);
    let read = |name: &str| std::fs::read_to_string(folder.path().join(name)).expect("written");
    let json = read("n.json");
    let document: Value = serde_json::from_str(&json).expect("JSON");
    assert_eq!(document["schema"], "orbend/plan/1");
    let schema = format!(
        "{}/../crates/report/schema/plan.schema.json",
        env!("CARGO_MANIFEST_DIR")
    );
    let schema: Value =
        serde_json::from_str(&std::fs::read_to_string(schema).expect("schema")).expect("JSON");
    let validator = jsonschema::validator_for(&schema).expect("a schema");
    assert!(validator.is_valid(&document));
    let back = orbend_report::read_document(&json).expect("reads back");
    let orbend_report::Document::Plan(back) = back else {
        panic!("another form")
    };
    assert_eq!(orbend_report::to_json(&*back).expect("JSON"), json);
    // ²B₁ at the bent minimum, ²Πu where linear (Herzberg 1966, from memory).
    let states = document["states"].as_array().expect("states");
    assert_eq!(states[0]["terms"][0], "2B1");
    assert!(
        states
            .iter()
            .any(|state| state["own_terms"][0] == "2Pi_u" && state["terms"][0] == "2A1")
    );
    let page = read("n.md");
    assert!(page.starts_with("# NF2: what to compute next\n"));
    for word in [
        "## Start geometries",
        "## States and charges",
        "## Active space",
        "²B₁",
    ] {
        assert!(page.contains(word), "{word}");
        assert!(word.starts_with('#') || text.contains(word));
    }
    assert!(text.lines().all(|line| line.chars().count() <= 80));
    let frames = read_xyz(&read("n.xyz"), &XyzOptions::default()).expect("XYZ");
    assert!(frames.len() >= 2);
    assert!(
        frames
            .iter()
            .all(|frame| frame.molecule.unpaired == Some(1))
    );
    let molecule: Value = serde_json::from_str(&read("n.qcschema.json")).expect("JSON");
    assert_eq!(molecule["schema_name"], "qcschema_molecule");
    assert_eq!(molecule["schema_version"], 2);
    assert_eq!(molecule["symbols"], serde_json::json!(["N", "F", "F"]));
    assert_eq!(molecule["molecular_multiplicity"], 2);
    let flat: Vec<f64> = molecule["geometry"]
        .as_array()
        .expect("geometry")
        .iter()
        .map(|x| x.as_f64().expect("number"))
        .collect();
    for (bohr, angstrom) in flat
        .iter()
        .zip(frames[0].molecule.positions.iter().flatten())
    {
        assert!((bohr * BOHR_IN_ANGSTROM - angstrom).abs() < 1e-9);
    }
}

/// The same bytes on any number of threads, with a path of one's own and without any.
#[test]
fn threads_and_paths() {
    let folder = tempfile::tempdir().expect("folder");
    let one = run(folder.path(), &["plan", "O3", "--json", "--jobs", "1"]);
    let two = run(folder.path(), &["plan", "O3", "--json", "--jobs", "2"]);
    assert_eq!(one, two);
    let own = run(
        folder.path(),
        &["plan", "HCN", "--stretch", "1-2=1.0..1.6:0.1", "--json"],
    );
    assert!(own.contains("\"kind\": \"stretch\""));
    std::fs::write(folder.path().join("n2.xyz"), "2\n\nN 0 0 0\nN 0 0 1.1\n").expect("written");
    let still = run(folder.path(), &["plan", "n2.xyz"]);
    assert!(still.contains("no path was given"), "{still}");
}
