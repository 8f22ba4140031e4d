//! Series of verdicts, and a verdict below a diagram.

use super::{WIDTHS, assert_clean, options};
use crate::document::{Case, Curve, ShapeDocument, ShapeSchema};
use crate::figure::options::{FigureOptions, Theme};
use crate::figure::support::Support;
use crate::figure::{series as rows, sweep, theme};
use crate::synthetic;

/// A series of verdicts with curves, one of them undecided, on two scales of the angle.
fn series(seed: u64) -> ShapeDocument {
    let sweep = synthetic::random(seed);
    let mut random = synthetic::Random(seed);
    let words = ["bent", "linear", "pyramidal", "planar", "undecided"];
    let formulas = ["SiF2", "C2F4", "BCl3", "NF2", "PF3"];
    let cases = (0..2 + random.below(6))
        .map(|number| {
            let (from, to) = if number % 3 == 2 {
                (120.0, 76.0)
            } else {
                (180.0, 70.0)
            };
            let at: Vec<f64> = (0..20)
                .map(|k| from + (to - from) * f64::from(k) / 19.0)
                .collect();
            let depth = random.between(-2.0, 1.0);
            let angle = random.between(to, from);
            Case {
                formula: Some(formulas[random.below(5) as usize].to_owned()),
                coordinate: None,
                charge: random.below(5) as i32 - 2,
                electrons: 10 + random.below(20) as u32,
                unpaired: random.below(4) as u32,
                configuration: String::new(),
                verdict: words[random.below(5) as usize].to_owned(),
                confident: true,
                angle: Some(synthetic::n(angle)),
                angle_range: Some([angle - 3.0, angle + 3.0].map(synthetic::n)),
                depth: None,
                support: Some(synthetic::n(0.9)),
                arguments: vec![],
                because: vec![],
                could_be_wrong_because: vec![],
                would_flip: vec![],
                curves: vec![Curve {
                    name: "sum".to_owned(),
                    energy: at
                        .iter()
                        .map(|angle| Some(synthetic::n(depth * (from - angle) / 40.0)))
                        .collect(),
                    at: at.into_iter().map(synthetic::n).collect(),
                }],
            }
        })
        .collect();
    ShapeDocument {
        schema: ShapeSchema,
        program: sweep.program,
        units: sweep.units,
        molecule: sweep.molecule,
        method: sweep.method,
        coordinate: None,
        ensemble: None,
        cases,
        ties: vec![],
        warnings: vec![],
        missing: vec![],
    }
}

#[test]
fn series_have_no_overlapping_text_and_none_off_the_page() {
    for seed in 0..40 {
        let document = series(seed);
        let width = WIDTHS[seed as usize % 3];
        let canvas = rows::compose(&document, &options(width)).unwrap();
        assert_clean(&canvas, width, &format!("series {seed}"));
        let svg = rows::shape_figure(&document, &options(width)).unwrap();
        let undecided = document.cases.iter().filter(|c| c.verdict == "undecided");
        let hatched = svg.matches("url(#orbend-undecided)").count();
        // Each such row and the key.
        let rows = undecided.count();
        assert_eq!(
            hatched,
            if rows > 0 { rows + 1 } else { 0 },
            "series {seed}"
        );
    }
}

#[test]
fn a_verdict_is_found_for_the_sweep_it_belongs_to() {
    let sweep = synthetic::silicon_difluoride();
    let mut shape = series(1);
    let case = &mut shape.cases[0];
    case.formula = Some("SiF2".to_owned());
    (case.charge, case.unpaired) = (sweep.molecule.charge, sweep.molecule.unpaired);
    case.verdict = "bent".to_owned();
    case.coordinate = Some(sweep.coordinates[0].clone());
    let support = Support::of(&shape, &sweep).unwrap();
    assert_eq!(support.verdict, "bent");
    assert_eq!(support.angle, shape.cases[0].angle.map(|angle| angle.get()));
    // Its atoms in the other direction are the same angle; another angle is not.
    if let Some(coordinate) = &mut shape.cases[0].coordinate {
        coordinate.atoms.reverse();
    }
    assert!(Support::of(&shape, &sweep).is_ok());
    shape.cases[0].charge += 1;
    let refused = Support::of(&shape, &sweep).unwrap_err();
    assert!(
        refused
            .to_string()
            .starts_with("the shape document has no verdict on SiF2"),
        "{refused}"
    );
}

#[test]
fn a_verdict_has_its_band_below_the_lines() {
    let document = synthetic::silicon_difluoride();
    let with = FigureOptions {
        support: Some(Support {
            verdict: "bent".into(),
            share: Some(0.97),
            angle: Some(101.0),
            range: Some((96.0, 104.6)),
        }),
        ..FigureOptions::default()
    };
    let (plain, banded) = (
        sweep::sweep_figure(&document, &FigureOptions::default()).unwrap(),
        sweep::sweep_figure(&document, &with).unwrap(),
    );
    assert!(banded.contains("bent, support 0.97: 101° (96° to 105°)"));
    let band = theme::Colours::of(Theme::Light).band;
    // In the panel and in the key.
    assert_eq!(banded.matches(band).count(), 2);
    assert!(!plain.contains(band));
}
