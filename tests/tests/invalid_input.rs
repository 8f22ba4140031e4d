//! The corpus of bad input in `tests/invalid`: each case carries the message it expects.
//!
//! `tests/invalid/README.md` describes the files.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use std::collections::BTreeSet;
use std::fs;
use std::io::Write;
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};

use orbend_checks::orbend_binary;

/// One command line with what it must lead to.
#[derive(Default)]
struct Case {
    name: String,
    /// The case's own input file, which `FILE` stands for.
    file: Option<String>,
    arguments: Vec<String>,
    exit: i32,
    says: Vec<Vec<String>>,
    fix: Vec<Vec<String>>,
    with: Vec<String>,
    stdin: Option<String>,
    directories: Vec<String>,
}

fn corpus() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("invalid")
}

/// Words of a command line; double quotes group.
fn words(line: &str) -> Vec<String> {
    let mut out = Vec::new();
    for (index, part) in line.split('"').enumerate() {
        if index % 2 == 1 {
            out.push(part.to_owned());
        } else {
            out.extend(part.split_whitespace().map(str::to_owned));
        }
    }
    out
}

fn alternatives(text: &str) -> Vec<String> {
    text.split(" | ")
        .map(|word| word.trim().to_lowercase())
        .collect()
}

fn parse(name: &str, file: Option<&str>, entries: &[&str]) -> Case {
    let mut case = Case {
        name: name.to_owned(),
        file: file.map(str::to_owned),
        exit: i32::MIN,
        ..Case::default()
    };
    let mut asked = false;
    for entry in entries {
        let entry = entry.trim();
        let (key, value) = entry.split_once(':').unwrap_or((entry, ""));
        let value = value.trim();
        match key {
            "args" => {
                asked = true;
                case.arguments = words(value);
            }
            "exit" => {
                case.exit = value
                    .parse()
                    .unwrap_or_else(|_| panic!("{name}: exit code `{value}`"))
            }
            "says" => case.says.push(alternatives(value)),
            "fix" => case.fix.push(alternatives(value)),
            "with" => case.with.push(value.to_owned()),
            "stdin" => case.stdin = Some(value.to_owned()),
            "directory" => case.directories.push(value.to_owned()),
            _ => assert!(
                entry.is_empty() || entry.starts_with('#'),
                "{name}: unknown entry `{entry}`"
            ),
        }
    }
    assert!(
        asked && case.exit != i32::MIN,
        "{name}: `args:` and `exit:` are needed"
    );
    case
}

/// All cases, in the order of their names.
fn cases() -> Vec<Case> {
    let names: BTreeSet<String> = fs::read_dir(corpus())
        .expect("tests/invalid")
        .map(|entry| {
            entry
                .expect("entry")
                .file_name()
                .into_string()
                .expect("plain file names")
        })
        .filter(|name| !name.starts_with('.'))
        .collect();
    let mut out = Vec::new();
    let mut helpers = BTreeSet::new();
    for name in &names {
        if names.contains(&format!("{name}.expect")) {
            continue;
        }
        let bytes = fs::read(corpus().join(name)).expect("readable");
        let text = String::from_utf8_lossy(&bytes);
        if let Some(file) = name.strip_suffix(".expect") {
            assert!(names.contains(file), "{name} stands beside no file");
            out.push(parse(name, Some(file), &text.lines().collect::<Vec<_>>()));
        } else if name.ends_with(".cmd") {
            out.push(parse(name, None, &text.lines().collect::<Vec<_>>()));
        } else if name.ends_with(".toml") {
            let head: Vec<&str> = text
                .lines()
                .map_while(|line| line.strip_prefix("# "))
                .skip(1)
                .collect();
            out.push(parse(name, Some(name), &head));
        } else if name.ends_with(".xyz") {
            match text.lines().nth(1) {
                Some(comment) if comment.starts_with("args:") => {
                    out.push(parse(
                        name,
                        Some(name),
                        &comment.split(" ; ").collect::<Vec<_>>(),
                    ));
                }
                _ => {
                    helpers.insert(name.clone());
                }
            }
        } else {
            assert_eq!(name, "README.md", "a file of no known kind");
        }
    }
    let used: BTreeSet<String> = out.iter().flat_map(|case| case.with.clone()).collect();
    assert_eq!(
        helpers, used,
        "geometries without an expectation are those that cases name"
    );
    out
}

fn run(arguments: &[String], directory: &Path, stdin: Option<&Path>) -> Output {
    let input = stdin.map_or_else(Stdio::null, |path| {
        Stdio::from(fs::File::open(path).expect("input"))
    });
    Command::new(orbend_binary())
        .args(arguments)
        .current_dir(directory)
        .env("NO_COLOR", "1")
        .env_remove("RUST_BACKTRACE")
        .stdin(input)
        .output()
        .expect("orbend runs")
}

fn listing(directory: &Path) -> BTreeSet<String> {
    let mut out = BTreeSet::new();
    for entry in fs::read_dir(directory).expect("directory") {
        let entry = entry.expect("entry");
        let name = entry.file_name().to_string_lossy().into_owned();
        if entry.path().is_dir() {
            out.extend(
                listing(&entry.path())
                    .into_iter()
                    .map(|inner| format!("{name}/{inner}")),
            );
        }
        out.insert(name);
    }
    out
}

/// What is wrong with the outcome, in words.
fn judge(
    case: &Case,
    output: &Output,
    before: &BTreeSet<String>,
    after: &BTreeSet<String>,
) -> Vec<String> {
    let mut wrong = Vec::new();
    let message = String::from_utf8_lossy(&output.stderr).into_owned();
    let folded = message.to_lowercase();
    if output.status.code() != Some(case.exit) {
        wrong.push(format!(
            "exit {:?} instead of {}",
            output.status.code(),
            case.exit
        ));
    }
    for wanted in case.says.iter().chain(&case.fix) {
        if !wanted.iter().any(|word| folded.contains(word)) {
            wrong.push(format!("does not say `{}`", wanted.join(" | ")));
        }
    }
    if ["panicked", "rust_backtrace", "unwrap()", ".rs:"]
        .iter()
        .any(|word| folded.contains(word))
    {
        wrong.push("panic text".to_owned());
    }
    if case.exit != 0 {
        if !output.stdout.is_empty() {
            wrong.push(format!("{} bytes on standard output", output.stdout.len()));
        }
        if before != after {
            let left: Vec<&String> = after.symmetric_difference(before).collect();
            wrong.push(format!("files left or lost: {left:?}"));
        }
        if message.lines().count() > 40 {
            wrong.push(format!("{} lines long", message.lines().count()));
        }
        if std::str::from_utf8(&output.stderr).is_err() {
            wrong.push("not UTF-8".to_owned());
        }
        if message
            .chars()
            .any(|c| c.is_control() && c != '\n' && c != '\t')
        {
            wrong.push("raw control characters".to_owned());
        }
    }
    if !wrong.is_empty() {
        let shown: String = message.chars().take(600).collect();
        wrong.push(format!("the message was:\n{shown}"));
    }
    wrong
}

fn check(case: &Case) -> Vec<String> {
    let directory = tempfile::tempdir().expect("temporary directory");
    for file in case.file.iter().chain(&case.with) {
        fs::copy(corpus().join(file), directory.path().join(file)).expect("copied");
    }
    for name in &case.directories {
        fs::create_dir(directory.path().join(name)).expect("made");
    }
    let own = case.file.clone().unwrap_or_default();
    let arguments: Vec<String> = case
        .arguments
        .iter()
        .map(|word| {
            if word == "FILE" {
                own.clone()
            } else {
                word.clone()
            }
        })
        .collect();
    let stdin = case.stdin.as_ref().map(|name| corpus().join(name));
    let before = listing(directory.path());
    let output = run(&arguments, directory.path(), stdin.as_deref());
    judge(case, &output, &before, &listing(directory.path()))
}

#[test]
fn every_case_states_place_cause_and_fix() {
    let cases = cases();
    assert!(cases.len() > 100, "{} cases", cases.len());
    for case in &cases {
        let sound =
            case.exit == 0 || (case.exit == 2 && !case.says.is_empty() && !case.fix.is_empty());
        assert!(
            sound,
            "{}: a refusal needs exit 2, `says:` and `fix:`",
            case.name
        );
    }
}

#[test]
fn every_case_is_refused_in_its_words() {
    let mut report = String::new();
    let mut failed = 0;
    let cases = cases();
    for case in &cases {
        let wrong = check(case);
        if !wrong.is_empty() {
            failed += 1;
            report.push_str(&format!("\n{}: {}\n", case.name, wrong.join("; ")));
        }
    }
    assert!(failed == 0, "{failed} of {} cases:\n{report}", cases.len());
}

/// Runs `orbend levels` on a generated file and expects a refusal that says all of `says`.
fn refuse_generated(name: &str, content: &str, says: &[&str]) {
    let directory = tempfile::tempdir().expect("temporary directory");
    fs::write(directory.path().join(name), content).expect("written");
    let before = listing(directory.path());
    let output = run(
        &["levels".to_owned(), name.to_owned()],
        directory.path(),
        None,
    );
    let case = Case {
        name: name.to_owned(),
        exit: 2,
        says: says.iter().map(|word| alternatives(word)).collect(),
        ..Case::default()
    };
    let wrong = judge(&case, &output, &before, &listing(directory.path()));
    assert!(wrong.is_empty(), "{name}: {}", wrong.join("; "));
}

#[test]
fn a_million_lines_that_belong_to_no_atom() {
    let mut text = String::from("2\nmore lines than the count allows\n");
    for row in 0..1_000_000 {
        text.push_str(&format!("H 0.0 0.0 {row}.0\n"));
    }
    refuse_generated(
        "long.xyz",
        &text,
        &[
            "long.xyz",
            ":5: | line 5 | :1: | line 1",
            "announces | number of atoms",
        ],
    );
}

#[test]
fn a_million_atoms() {
    let mut text = String::from("1000000\na cubic lattice\n");
    for row in 0..1_000_000 {
        text.push_str(&format!(
            "H {} {} {}\n",
            row % 100,
            row / 100 % 100,
            row / 10_000
        ));
    }
    refuse_generated(
        "crystal.xyz",
        &text,
        &["crystal.xyz | 1000000", "1000000", "atoms | functions"],
    );
}

#[test]
fn a_very_long_line() {
    let text = format!(
        "1\none line of ten million characters\nH 0 0 {}\n",
        "0".repeat(10_000_000) + "x"
    );
    refuse_generated("wide.xyz", &text, &["wide.xyz", ":3: | line 3", "number"]);
}

/// A reader that goes away is no error: quiet, exit 0.
#[test]
fn a_closed_pipe_is_quiet() {
    let arguments = ["sweep", "SiF2", "--bend", "2-1-3=80..180:0.1", "--json"];
    let mut child = Command::new(orbend_binary())
        .args(arguments)
        .env("NO_COLOR", "1")
        .stdin(Stdio::null())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("orbend runs");
    drop(child.stdout.take());
    let output = child.wait_with_output().expect("ends");
    let message = String::from_utf8_lossy(&output.stderr);
    assert_eq!(output.status.code(), Some(0), "{message}");
    assert!(message.is_empty(), "{message}");
}

/// A name that cannot be overwritten keeps what it held, and nothing partial appears beside it.
#[test]
fn a_refused_run_leaves_earlier_output_alone() {
    let directory = tempfile::tempdir().expect("temporary directory");
    let kept = directory.path().join("kept.json");
    fs::File::create(&kept)
        .expect("made")
        .write_all(b"earlier")
        .expect("written");
    let arguments: Vec<String> = ["levels", "H2O", "--unpaired", "1", "--out", "kept.json"]
        .iter()
        .map(|&word| word.to_owned())
        .collect();
    let output = run(&arguments, directory.path(), None);
    assert_eq!(
        output.status.code(),
        Some(2),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    assert_eq!(fs::read(&kept).expect("still there"), b"earlier");
    assert_eq!(listing(directory.path()).len(), 1);
}
