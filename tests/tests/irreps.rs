//! Irreps: how many of each a molecule has, in which order photoelectron spectra show them, and the
//! statements on AH2 and AB2 that every course makes.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use std::collections::BTreeMap;
use std::path::Path;

use orbend_checks::{check_point, named};
use orbend_scan::{Request, Sweep};
use orbend_structure::{Coordinate, CoordinateKind, Molecule};

fn rows(name: &str) -> Vec<BTreeMap<String, String>> {
    let path = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("reference")
        .join(name);
    csv::Reader::from_path(path)
        .expect("a table")
        .deserialize()
        .collect::<Result<_, _>>()
        .expect("rows")
}

fn levels(spec: &str) -> Sweep {
    Request::new(named(spec))
        .run()
        .unwrap_or_else(|error| panic!("{spec}: {error}"))
}

/// `3a1` → (3, `a1`); without a number 1.
fn split(word: &str) -> (usize, &str) {
    let digits = word.chars().take_while(char::is_ascii_digit).count();
    (word[..digits].parse().unwrap_or(1), &word[digits..])
}

#[test]
fn irrep_content_of_published_examples() {
    let mut compared = 0;
    for row in rows("irrep_content.csv") {
        // Elements without a published set have no levels here; their content is checked with the groups.
        let Ok(sweep) = Request::new(named(&row["geometry"])).run() else {
            assert_eq!(row["molecule"], "XeF2", "only xenon has no parameters");
            continue;
        };
        check_point(&sweep, 0);
        assert_eq!(sweep.point_group(0), row["group"], "{}", row["molecule"]);
        let mut found: BTreeMap<String, usize> = BTreeMap::new();
        for line in sweep.plan().lines().iter().filter(|line| line.row == 0) {
            *found
                .entry(split(&line.name.plain).1.to_owned())
                .or_default() += 1;
        }
        let wanted: BTreeMap<String, usize> = row["content"]
            .split('|')
            .map(|word| split(word))
            .map(|(n, irrep)| (irrep.to_owned(), n))
            .collect();
        assert_eq!(found, wanted, "{}", row["molecule"]);
        compared += 1;
    }
    assert!(compared >= 27, "{compared}");
}

#[test]
fn order_of_photoelectron_bands() {
    let mut molecules: BTreeMap<String, Vec<BTreeMap<String, String>>> = BTreeMap::new();
    for row in rows("photoelectron.csv")
        .into_iter()
        .filter(|row| row["tested"] == "yes")
    {
        molecules
            .entry(row["molecule"].clone())
            .or_default()
            .push(row);
    }
    assert!(molecules.len() >= 24, "{}", molecules.len());
    let mut wrong = Vec::new();
    for (name, bands) in &molecules {
        let sweep = levels(&bands[0]["geometry"]);
        let left_out: Vec<&str> = bands
            .iter()
            .filter(|row| row["set"] == "needs-d")
            .map(|row| row["label"].as_str())
            .collect();
        let mut found: Vec<String> = Vec::new();
        for level in sweep.point(0).expect("a point").levels.iter().rev() {
            let label = &level.full_name.plain;
            if level.occupation > 1e-9
                && found.last() != Some(label)
                && !left_out.contains(&label.as_str())
            {
                found.push(label.clone());
            }
        }
        // Bands of one set may come in any order.
        let mut wanted: Vec<(String, Vec<String>)> = Vec::new();
        for row in bands.iter().filter(|row| row["set"] != "needs-d") {
            match wanted.last_mut() {
                Some((set, labels)) if !set.is_empty() && *set == row["set"] => {
                    labels.push(row["label"].clone())
                }
                _ => wanted.push((row["set"].clone(), vec![row["label"].clone()])),
            }
        }
        let mut at = 0;
        for (_, mut labels) in wanted {
            let mut here = found
                .get(at..at + labels.len())
                .unwrap_or_default()
                .to_vec();
            at += labels.len();
            here.sort();
            labels.sort();
            if here != labels {
                wrong.push(format!(
                    "{name}: {labels:?} expected, {here:?} found in {found:?}"
                ));
                break;
            }
        }
    }
    println!(
        "{} molecules in the order of their spectra",
        molecules.len() - wrong.len()
    );
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

/// A line's energies and its name at the last point.
struct Line {
    energies: Vec<f64>,
    end: String,
}

fn line(sweep: &Sweep, label: &str) -> Line {
    let index = sweep
        .plan()
        .lines()
        .iter()
        .position(|line| line.name.plain == label)
        .unwrap_or_else(|| panic!("no line {label}"));
    Line {
        energies: sweep.line_energies(index),
        end: sweep.full_name(index, sweep.points() - 1).0.plain.clone(),
    }
}

impl Line {
    fn change(&self) -> f64 {
        self.last() - self.energies[0]
    }

    fn last(&self) -> f64 {
        *self.energies.last().expect("points")
    }
}

fn opened(molecule: Molecule, range: &str) -> Sweep {
    let bend = Coordinate::parse(CoordinateKind::Bend, range).expect("a coordinate");
    Request::new(molecule)
        .coordinate(bend)
        .run()
        .expect("a sweep")
}

#[test]
fn opening_of_ah2() {
    // Common practice: on opening from 90 to 180 degrees 1b2 falls, 3a1 rises and joins 1b1 in the
    // degenerate 1pi_u, 2a1 hardly moves; labels count the core orbital.
    for spec in ["g2:H2O", "g2:NH2", "g2:CH2_s1A1d"] {
        let sweep = opened(named(spec), "2-1-3=90..180:2");
        let [a, b, c, d] = ["2a1", "1b2", "3a1", "1b1"].map(|label| line(&sweep, label));
        println!(
            "{spec}: 2a1 {:+.3}, 1b2 {:+.3}, 3a1 {:+.3}, 1b1 {:+.1e} eV",
            a.change(),
            b.change(),
            c.change(),
            d.change()
        );
        assert!(
            b.change() < -0.3 && b.energies.is_sorted_by(|x, y| x > y),
            "{spec}: 1b2 falls"
        );
        assert!(
            c.change() > 0.3 && c.energies.is_sorted_by(|x, y| x < y),
            "{spec}: 3a1 rises"
        );
        assert!(a.change().abs() < 0.1, "{spec}: 2a1 hardly moves");
        assert_eq!((c.end.as_str(), d.end.as_str()), ("1pi_u", "1pi_u"));
        assert!(
            (c.last() - d.last()).abs() < 1e-9,
            "{spec}: degenerate at 180 degrees"
        );
    }
}

#[test]
fn opening_of_ab2() {
    // Common practice, three core orbitals counted: with 16 electrons 6a1 rises steeply on opening and
    // crosses 4b2, which falls into 1pi_g beside 1a2; 5a1 and 1b1 join in 1pi_u.
    let sweep = opened(named("g2:CO2"), "2-1-3=70..180:2");
    let [six, four, two, five, one] =
        ["6a1", "4b2", "1a2", "5a1", "1b1"].map(|label| line(&sweep, label));
    println!(
        "CO2: 6a1 {:+.3}, 4b2 {:+.3}, 1a2 {:+.3}, 5a1 {:+.3}, 1b1 {:+.3} eV",
        six.change(),
        four.change(),
        two.change(),
        five.change(),
        one.change()
    );
    assert!(six.change() > 3.0, "6a1 rises steeply");
    assert!(four.change() < 0.0, "4b2 falls");
    assert!(
        six.energies[0] < four.energies[0] && six.last() > four.last(),
        "6a1 crosses 4b2"
    );
    assert_eq!((four.end.as_str(), two.end.as_str()), ("1pi_g", "1pi_g"));
    assert_eq!((five.end.as_str(), one.end.as_str()), ("1pi_u", "1pi_u"));
    assert!((four.last() - two.last()).abs() < 1e-9 && (five.last() - one.last()).abs() < 1e-9);
}
