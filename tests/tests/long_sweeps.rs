//! A long sweep is written as it runs: the same bytes as the table of the whole document, for every
//! number of threads, in memory that does not grow with the number of points.

#![allow(
    clippy::expect_used,
    reason = "a failed expectation in a check is its message"
)]

use std::process::Command;

use orbend::{
    Coordinate, CoordinateKind, Formula, Molecule, Provenance, Request, ideal_geometry, sweep_csv,
    sweep_document,
};
use orbend_checks::orbend_binary;
use orbend_report::stream_csv;

/// Tables of a request: of the document, and written as it runs on 1 and 3 threads.
fn both_routes(request: &Request) -> (Vec<u8>, Vec<Vec<u8>>) {
    let sweep = request.run().expect("a sweep");
    let document = sweep_document(&sweep, &Provenance::default()).expect("a document");
    let mut whole = Vec::new();
    sweep_csv(&document, &mut whole).expect("a table");
    let streamed = [1, 3].map(|threads| {
        let pool = rayon::ThreadPoolBuilder::new()
            .num_threads(threads)
            .build()
            .expect("threads");
        let plan = request.plan().expect("a plan");
        let mut out = Vec::new();
        let kept = pool
            .install(|| stream_csv(&plan, Some(&mut out)))
            .expect("a table");
        let sums: Vec<f64> = document
            .points
            .iter()
            .filter_map(|point| Some(point.sum?.get()))
            .collect();
        let least = sums.iter().copied().fold(f64::INFINITY, f64::min);
        assert_eq!(sums[kept.lowest].to_bits(), least.to_bits());
        let overview = kept.overview();
        assert_eq!(overview.first(), Some(&0));
        assert_eq!(overview.last(), Some(&(document.points.len() - 1)));
        out
    });
    (whole, streamed.to_vec())
}

fn bend(molecule: Molecule, words: &str) -> Request {
    let coordinate = Coordinate::parse(CoordinateKind::Bend, words).expect("a coordinate");
    Request::new(molecule).coordinate(coordinate)
}

fn ideal(formula: &str) -> Molecule {
    let formula = Formula::parse(formula).expect("a formula");
    ideal_geometry(&formula, None, &[])
        .expect("a geometry")
        .molecule
}

#[test]
fn the_same_bytes_as_the_table_of_the_document() {
    // More than one stretch and no multiple of one; the linear end has a group of its own.
    let bent = bend(ideal("SiF2"), "2-1-3=100..180:0.02");
    // Without symmetry but the plane: lines are not followed for the table.
    let little = bend(ideal("HCN"), "2-1-3=110..170:0.05");
    let mut grid = bend(ideal("SiF2"), "2-1-3=90..180:1");
    let stretch = Coordinate::parse(CoordinateKind::Stretch, "1-2=1.5..1.7:0.01");
    grid.coordinates.push(stretch.expect("a coordinate"));
    for (name, request) in [("bent", bent), ("little", little), ("grid", grid)] {
        let (whole, streamed) = both_routes(&request);
        assert!(whole.len() > 100_000, "{name}: {} bytes", whole.len());
        for table in streamed {
            assert!(table == whole, "{name}: another table");
        }
    }
}

#[test]
fn a_point_that_cannot_be_solved_leaves_no_file() {
    let folder = tempfile::tempdir().expect("a folder");
    // Two groups of atoms with wide functions that move into one another.
    let heights = [0.0, 0.3, 0.6, 4.6, 4.9, 5.2];
    let chain: String = heights.map(|z| format!("Li 0 0 {z}\n")).concat();
    let wide = "[set]\nname = \"wide\"\nenergy = \"eV\"\nexponent = \"1/bohr\"\n\n[Li]\n\
        source = \"a test\"\nchecked = \"memory\"\nshells = [\n\
        { shell = \"2s\", hii = -5.4, zeta = 0.2 },\n{ shell = \"2p\", hii = -3.5, zeta = 0.2 },\n]\n";
    let inputs = [
        ("chain.xyz", format!("6\n\n{chain}")),
        ("wide.toml", wide.to_owned()),
    ];
    for (name, text) in &inputs {
        std::fs::write(folder.path().join(name), text).expect("written");
    }
    let output = Command::new(orbend_binary())
        .args(["sweep", "chain.xyz", "--stretch", "3-4=4..0.25:0.0005"])
        .args(["--params", "wide.toml", "--out", "a.csv"])
        .current_dir(folder.path())
        .output()
        .expect("orbend runs");
    assert_eq!(output.status.code(), Some(2));
    let said = String::from_utf8_lossy(&output.stderr);
    assert!(
        said.contains("at stretch 3-4 = 0.3") && said.contains("Li3 and Li4"),
        "{said}"
    );
    let left = std::fs::read_dir(folder.path()).expect("a folder").count();
    assert_eq!(left, inputs.len(), "a part of the table was left behind");
}

#[test]
fn the_command_line_says_what_it_drew() {
    let folder = tempfile::tempdir().expect("a folder");
    let run = |jobs: &str, file: &str| {
        let output = Command::new(orbend_binary())
            .args(["sweep", "H2S", "--bend", "2-1-3=90..180:0.005"])
            .args(["--jobs", jobs, "--out", file])
            .current_dir(folder.path())
            .output()
            .expect("orbend runs");
        assert!(output.status.success());
        String::from_utf8(output.stdout).expect("text")
    };
    let (one, two) = (run("1", "one.csv"), run("2", "two.csv"));
    assert_eq!(one, two);
    assert!(one.contains("from 90° to 180°, 18001 points ("), "{one}");
    assert!(one.contains("in Dinfh"), "{one}");
    let bytes = |name: &str| std::fs::read(folder.path().join(name)).expect("the table");
    assert!(bytes("one.csv") == bytes("two.csv"));
    let rows = bytes("one.csv")
        .iter()
        .filter(|&&byte| byte == b'\n')
        .count();
    assert_eq!(rows, 1 + 6 * 18_001);
}

/// What the old way, holding every point, could not do: 360 MB for 82 001 points.
#[cfg(target_os = "linux")]
#[test]
fn memory_does_not_grow_with_the_points() {
    let folder = tempfile::tempdir().expect("a folder");
    let status = Command::new("sh")
        .args(["-c", "ulimit -v 300000; exec \"$0\" \"$@\""])
        .arg(orbend_binary())
        .args(["sweep", "H2S", "--bend", "2-1-3=90..180:0.0009"])
        .args(["--jobs", "1", "--out", "a.csv"])
        .current_dir(folder.path())
        .stdout(std::process::Stdio::null())
        .status()
        .expect("orbend runs");
    assert!(status.success());
    assert!(
        std::fs::metadata(folder.path().join("a.csv")).is_ok_and(|file| file.len() > 30_000_000)
    );
}
