//! The documents that the command line hands out: valid by the shipped schema, complete, the same
//! for every number of threads and every orientation of the input, and agreeing with the table and
//! the figure.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use std::path::Path;
use std::process::Command;

use orbend_checks::{file, moved, orbend_binary, random_motion};
use orbend_report::{read_document, to_json};
use serde_json::Value;

const SWEEP: [&str; 4] = ["sweep", "h2s.xyz", "--bend", "2-1-3=60..180:1"];

/// Runs the command line in a folder and returns its standard output.
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

/// A folder with hydrogen sulfide in it, as it is or turned, shifted and with its H atoms swapped.
fn folder(turned: bool) -> tempfile::TempDir {
    let folder = tempfile::tempdir().expect("a folder");
    let mut sulfide = file("hydrogen_sulfide");
    if turned {
        let rotation = random_motion([0.3, -0.7, 0.45, 0.6], false);
        sulfide = moved(&sulfide, rotation, [1.5, -0.25, 3.0], &[0, 2, 1]);
    }
    // Every digit: rounding to 1e-10 Å alone would move an energy by 1e-9 eV.
    let mut text = String::from("3\n\n");
    for (element, [x, y, z]) in sulfide.elements.iter().zip(&sulfide.positions) {
        text.push_str(&format!("{element} {x} {y} {z}\n"));
    }
    std::fs::write(folder.path().join("h2s.xyz"), text).expect("written");
    folder
}

fn document(folder: &Path, more: &[&str]) -> String {
    let mut arguments = SWEEP.to_vec();
    arguments.push("--json");
    arguments.extend(more);
    run(folder, &arguments)
}

fn parse(text: &str) -> Value {
    serde_json::from_str(text).expect("JSON")
}

fn validate(form: &str, document: &Value) {
    let path = format!(
        "{}/../crates/report/schema/{form}.schema.json",
        env!("CARGO_MANIFEST_DIR")
    );
    let schema = parse(&std::fs::read_to_string(path).expect("the shipped schema"));
    let validator = jsonschema::validator_for(&schema).expect("a schema");
    let problems: Vec<String> = validator
        .iter_errors(document)
        .map(|error| format!("{}: {error}", error.instance_path()))
        .collect();
    assert!(problems.is_empty(), "{form}: {}", problems.join("\n"));
}

#[test]
fn sweep_of_hydrogen_sulfide() {
    let folder = folder(false);
    let text = document(folder.path(), &[]);
    let sweep = parse(&text);
    validate("sweep", &sweep);
    assert_eq!(sweep["schema"], "orbend/sweep/1");
    assert_eq!(sweep["symmetry"]["path_group"], "C2v");
    let points = sweep["points"].as_array().expect("points");
    assert_eq!(points.len(), 121);
    let last = &points[120];
    assert_eq!(last["point_group"], "Dinfh");
    for label in ["5a1", "2b1"] {
        let level = last["levels"]
            .as_array()
            .expect("levels")
            .iter()
            .find(|level| level["label"] == label)
            .expect("the level");
        assert_eq!(level["full_label"], "2pi_u", "{label}");
        assert_eq!(level["degeneracy"], 2, "{label}");
    }
    println!(
        "path_group {}, 5a1/2b1 at {}: 2pi_u",
        sweep["symmetry"]["path_group"], last["at"][0]
    );
}

#[test]
fn every_form_is_valid_and_reads_back_to_the_same_bytes() {
    let folder = folder(false);
    let cases: [(&str, &[&str]); 5] = [
        (
            "sweep",
            &["sweep", "h2s.xyz", "--bend", "2-1-3=60..180:5", "--json"],
        ),
        (
            "sweep",
            &[
                "sweep",
                "SiF2",
                "--bend",
                "2-1-3=90..180:30",
                "--stretch",
                "1-2=1.5..1.7:0.1",
                "--json",
            ],
        ),
        ("levels", &["levels", "h2s.xyz", "--json"]),
        (
            "levels",
            &[
                "levels",
                "PF3",
                "--coupling",
                "weighted",
                "--numbering",
                "valence",
                "--json",
            ],
        ),
        ("params", &["params", "Si", "F", "Ni", "--json"]),
    ];
    for (form, arguments) in cases {
        let text = run(folder.path(), arguments);
        validate(form, &parse(&text));
        // JSON knows no NaN; a number that is missing would be null with its place in `missing`.
        let lower = text.to_lowercase();
        assert!(
            !lower.contains("nan,") && !lower.contains("infinity"),
            "{arguments:?}"
        );
        let document =
            read_document(&text).unwrap_or_else(|error| panic!("{arguments:?}: {error}"));
        let again = match &document {
            orbend_report::Document::Levels(document) => to_json(document.as_ref()),
            orbend_report::Document::Sweep(document) => to_json(document.as_ref()),
            orbend_report::Document::Shape(document) => to_json(document.as_ref()),
            orbend_report::Document::Params(document) => to_json(document.as_ref()),
            orbend_report::Document::Plan(document) => to_json(document.as_ref()),
        };
        assert!(
            again.expect("written") == text,
            "{arguments:?}: not the same bytes"
        );
        if let Some(missing) = parse(&text).get("missing") {
            assert_eq!(missing.as_array().map(Vec::len), Some(0), "{arguments:?}");
        }
    }
}

#[test]
fn a_grid_leaves_out_lines_and_crossings() {
    let folder = folder(false);
    let grid = parse(&run(
        folder.path(),
        &[
            "sweep",
            "SiF2",
            "--bend",
            "2-1-3=90..180:30",
            "--stretch",
            "1-2=1.5..1.7:0.1",
            "--json",
        ],
    ));
    let points = grid["points"].as_array().expect("points");
    assert_eq!(points.len(), 4 * 3);
    assert!(
        points
            .iter()
            .all(|point| point["at"].as_array().map(Vec::len) == Some(2))
    );
    assert!(grid.get("lines").is_none_or(Value::is_null));
    assert!(grid.get("crossings").is_none_or(Value::is_null));
    assert_eq!(grid["symmetry"]["path_group"], "C2v");
}

#[test]
fn the_same_bytes_for_every_number_of_threads() {
    let folder = folder(false);
    let one = document(folder.path(), &["--jobs", "1"]);
    for jobs in ["2", "8"] {
        assert!(
            document(folder.path(), &["--jobs", jobs]) == one,
            "--jobs {jobs}"
        );
    }
    let figures: Vec<Vec<u8>> = ["1", "2", "8"]
        .iter()
        .map(|jobs| {
            let mut arguments = SWEEP.to_vec();
            arguments.extend(["--out", "a.svg", "--out", "a.csv", "--jobs", jobs]);
            run(folder.path(), &arguments);
            let mut bytes = std::fs::read(folder.path().join("a.svg")).expect("the figure");
            bytes.extend(std::fs::read(folder.path().join("a.csv")).expect("the table"));
            bytes
        })
        .collect();
    assert!(figures.iter().all(|bytes| *bytes == figures[0]));
}

/// Levels that are degenerate may stand in either order: they are sorted by their lines.
fn in_order(mut document: Value) -> Value {
    for point in document["points"].as_array_mut().expect("points") {
        let levels = point["levels"].as_array_mut().expect("levels");
        levels.sort_by(|a, b| {
            let energy = |level: &Value| (level["energy"].as_f64().expect("energy") * 1e7).round();
            energy(a)
                .total_cmp(&energy(b))
                .then(a["line"].as_u64().cmp(&b["line"].as_u64()))
        });
    }
    document
}

/// Compares trees: texts exactly, numbers within `tolerance`; returns the largest difference.
fn compare(a: &Value, b: &Value, place: &str, tolerance: f64) -> f64 {
    match (a, b) {
        (Value::Number(x), Value::Number(y)) => {
            let (x, y) = (x.as_f64().expect("number"), y.as_f64().expect("number"));
            assert!((x - y).abs() <= tolerance, "{place}: {x} and {y}");
            (x - y).abs()
        }
        (Value::Array(x), Value::Array(y)) => {
            assert_eq!(x.len(), y.len(), "{place}");
            let parts = x.iter().zip(y).enumerate();
            parts
                .map(|(i, (a, b))| compare(a, b, &format!("{place}/{i}"), tolerance))
                .fold(0.0, f64::max)
        }
        (Value::Object(x), Value::Object(y)) => {
            let keys: Vec<&String> = x.keys().collect();
            assert_eq!(keys, y.keys().collect::<Vec<_>>(), "{place}");
            keys.into_iter()
                .filter(|key| *key != "positions")
                .map(|key| compare(&x[key], &y[key], &format!("{place}/{key}"), tolerance))
                .fold(0.0, f64::max)
        }
        _ => {
            assert_eq!(a, b, "{place}");
            0.0
        }
    }
}

#[test]
fn the_same_document_after_turning_the_input_and_swapping_the_hydrogens() {
    let (plain, turned) = (folder(false), folder(true));
    let a = in_order(parse(&document(plain.path(), &[])));
    let b = in_order(parse(&document(turned.path(), &[])));
    let worst = compare(&a, &b, "", 1e-9);
    println!("turned and swapped: all but positions the same, numbers within {worst:.1e}");
}

#[test]
fn the_table_agrees_with_the_document() {
    let folder = folder(false);
    let mut arguments = SWEEP.to_vec();
    arguments.extend(["--out", "a.csv", "--json"]);
    let sweep = parse(&run(folder.path(), &arguments));
    let mut reader = csv::Reader::from_path(folder.path().join("a.csv")).expect("a table");
    let header: Vec<String> = reader
        .headers()
        .expect("header")
        .iter()
        .map(str::to_owned)
        .collect();
    assert_eq!(
        header.join(","),
        "point,at_1,level,energy_ev,occupation,label,valence_label,full_label,irrep,line,point_group"
    );
    let mut rows = reader.records();
    for (point, number) in sweep["points"].as_array().expect("points").iter().zip(1..) {
        for (level, rank) in point["levels"].as_array().expect("levels").iter().zip(1..) {
            let row = rows.next().expect("a row").expect("a row");
            let number_at = |column: usize| row[column].parse::<f64>().expect("a number");
            let same = |column: usize, value: &Value| {
                assert_eq!(
                    number_at(column).to_bits(),
                    value.as_f64().expect("number").to_bits(),
                    "{row:?}"
                );
            };
            assert_eq!(row[0], format!("{number}"));
            same(1, &point["at"][0]);
            assert_eq!(row[2], format!("{rank}"));
            same(3, &level["energy"]);
            same(4, &level["occupation"]);
            for (column, key) in [
                (5, "label"),
                (6, "valence_label"),
                (7, "full_label"),
                (8, "irrep"),
            ] {
                assert_eq!(row[column], *level[key].as_str().expect("text"));
            }
            assert_eq!(row[9], level["line"].to_string());
            assert_eq!(row[10], *point["point_group"].as_str().expect("text"));
        }
    }
    assert!(rows.next().is_none(), "rows that no level has");
}

/// Elements close in the order in which they opened, texts hold no bare `<` or `&`; returns the names.
fn well_formed(text: &str) -> Vec<String> {
    let (mut open, mut names) = (Vec::new(), Vec::new());
    for piece in text.split('<').skip(1) {
        let (tag, after) = piece
            .split_once('>')
            .unwrap_or_else(|| panic!("`<{piece}` is not closed"));
        for part in after.split('&').skip(1).chain(tag.split('&').skip(1)) {
            let entity = part.split_once(';').map_or("", |(entity, _)| entity);
            let known =
                ["lt", "gt", "amp", "quot", "apos"].contains(&entity) || entity.starts_with('#');
            assert!(known, "a bare & before {part:.20}");
        }
        if tag.starts_with(['?', '!']) {
            continue;
        }
        if let Some(name) = tag.strip_prefix('/') {
            assert_eq!(open.pop().as_deref(), Some(name.trim()), "closing tag");
            continue;
        }
        assert_eq!(tag.matches('"').count() % 2, 0, "quotes in {tag}");
        let name: String = tag
            .chars()
            .take_while(|c| c.is_alphanumeric() || *c == ':')
            .collect();
        names.push(name.clone());
        if !tag.ends_with('/') {
            open.push(name);
        }
    }
    assert!(open.is_empty(), "left open: {open:?}");
    names
}

#[test]
fn the_figure_is_well_formed_and_says_what_it_shows() {
    let folder = folder(false);
    let mut arguments = SWEEP.to_vec();
    arguments.extend(["--out", "a.svg"]);
    run(folder.path(), &arguments);
    run(folder.path(), &["levels", "BF3", "--out", "b.svg"]);
    for name in ["a.svg", "b.svg"] {
        let text = std::fs::read_to_string(folder.path().join(name)).expect("the figure");
        let names = well_formed(&text);
        assert_eq!(names[0], "svg");
        for wanted in ["title", "desc", "text"] {
            assert!(
                names.iter().any(|name| name == wanted),
                "{name} has no {wanted}"
            );
        }
        assert!(!text.contains("NaN") && !text.contains("<script"));
    }
}

#[test]
fn version_names_the_values_in_use() {
    let folder = folder(false);
    let long = run(folder.path(), &["--version"]);
    assert!(long.contains("0.1.0") && long.contains("sha256:"), "{long}");
    let levels = parse(&run(folder.path(), &["levels", "h2s.xyz", "--json"]));
    assert!(
        levels["method"]["fingerprint"]
            .as_str()
            .is_some_and(|print| print.starts_with("sha256:"))
    );
    assert_eq!(run(folder.path(), &["-V"]).lines().count(), 1);
    let help = run(folder.path(), &["--help"]);
    assert_eq!(
        help.lines()
            .take(4)
            .filter(|line| line.trim_start().starts_with("orbend "))
            .count(),
        3,
        "{help}"
    );
    assert!(run(folder.path(), &["completions", "bash"]).contains("orbend"));
    assert!(
        run(folder.path(), &["man"]).starts_with(".ie")
            || run(folder.path(), &["man"]).contains(".TH")
    );
}

#[test]
fn a_formula_shows_the_geometry_and_a_file_gives_the_same() {
    let folder = folder(false);
    let text = run(folder.path(), &["levels", "SiF2", "--out", "start.xyz"]);
    assert!(
        text.contains("bond 1-2, 1-3") && text.contains("    1 Si"),
        "{text}"
    );
    assert!(
        text.lines().all(|line| line.chars().count() <= 80),
        "{text}"
    );
    let energies = |word: &str| -> Vec<f64> {
        let document = parse(&run(folder.path(), &["levels", word, "--json"]));
        let levels = document["points"][0]["levels"]
            .as_array()
            .expect("levels")
            .clone();
        levels
            .iter()
            .map(|level| level["energy"].as_f64().expect("energy"))
            .collect()
    };
    for (a, b) in energies("SiF2").iter().zip(energies("start.xyz")) {
        assert!((a - b).abs() < 1e-6, "{a} {b}");
    }
}

#[test]
fn valence_numbering_shows_first_everywhere() {
    let folder = folder(false);
    for arguments in [
        ["levels", "h2s.xyz", "--numbering", "valence"].as_slice(),
        [
            "sweep",
            "h2s.xyz",
            "--bend",
            "2-1-3=60..180:30",
            "--numbering",
            "valence",
            "--out",
            "v.svg",
        ]
        .as_slice(),
    ] {
        let text = run(folder.path(), arguments);
        assert!(text.contains("2a₁") && !text.contains("5a₁"), "{text}");
    }
    let figure = std::fs::read_to_string(folder.path().join("v.svg")).expect("the figure");
    let shown = figure.split("</metadata>").nth(1).expect("a drawing");
    assert!(
        !shown.contains(">5<") && shown.contains("2<"),
        "labels of the figure"
    );
    let chosen = run(
        folder.path(),
        &[
            "levels",
            "h2s.xyz",
            "--numbering",
            "valence",
            "--occupy",
            "1a1:2 1b2:2 2a1:1 1b1:2 3a1:1",
            "--unpaired",
            "2",
        ],
    );
    assert!(chosen.contains("2a₁"), "{chosen}");
}
