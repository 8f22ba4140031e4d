//! The tour in README.md: every command is run, every output is the one
//! printed there. After a wanted change: `ORBEND_UPDATE=1 cargo test -p
//! orbend-checks --test readme`.

use std::fmt::Write as _;
use std::path::Path;
use std::process::Command;

/// A command line split at blanks; double quotes hold words together.
fn words(line: &str) -> Vec<String> {
    let mut words = vec![String::new()];
    let mut quoted = false;
    for letter in line.chars() {
        match letter {
            '"' => quoted = !quoted,
            ' ' if !quoted => words.push(String::new()),
            other => words.last_mut().expect("one word at least").push(other),
        }
    }
    words.retain(|word| !word.is_empty());
    words
}

/// What a command prints: standard output, then standard error.
fn run(line: &str, folder: &Path) -> String {
    let words = words(line);
    assert_eq!(words[0], "orbend", "the tour runs nothing else: {line}");
    let output = Command::new(orbend_checks::orbend_binary())
        .args(&words[1..])
        .current_dir(folder)
        .env("NO_COLOR", "1")
        .output()
        .expect("orbend runs");
    let mut text = String::from_utf8(output.stdout).expect("text");
    text.push_str(&String::from_utf8(output.stderr).expect("text"));
    text.lines()
        .map(|line| format!("{}\n", line.trim_end()))
        .collect()
}

#[test]
fn the_tour_prints_what_it_says() {
    let path = concat!(env!("CARGO_MANIFEST_DIR"), "/../README.md");
    let readme = std::fs::read_to_string(path).expect("README.md");
    let folder = tempfile::tempdir().expect("folder");
    let mut made = String::new();
    let mut lines = readme.lines().peekable();
    let mut commands = 0;
    while let Some(line) = lines.next() {
        writeln!(made, "{line}").expect("memory");
        if line != "```console" {
            continue;
        }
        // A block that ends in an ellipsis line shows the beginning only.
        while let Some(&command) = lines.peek() {
            lines.next();
            writeln!(made, "{command}").expect("memory");
            if command == "```" {
                break;
            }
            let Some(command) = command.strip_prefix("$ ") else {
                panic!("a console block holds `$ ` commands and their output: {command}");
            };
            let mut shown = Vec::new();
            while let Some(&next) = lines.peek() {
                if next == "```" || next.starts_with("$ ") {
                    break;
                }
                shown.push(next);
                lines.next();
            }
            let printed = run(command, folder.path());
            commands += 1;
            let cut = shown.last() == Some(&"…");
            let kept = if cut { shown.len() - 1 } else { usize::MAX };
            for line in printed.lines().take(kept) {
                writeln!(made, "{line}").expect("memory");
            }
            if cut {
                made.push_str("…\n");
            }
        }
    }
    assert!(commands >= 4, "the tour has only {commands} commands");
    if std::env::var_os("ORBEND_UPDATE").is_some() {
        std::fs::write(path, &made).expect("README.md is written");
    } else {
        assert!(
            made == readme,
            "README.md is stale; the tour now prints:\n{made}"
        );
    }
}
