//! Geometry of whole figures, and files to look at.

use crate::document::SweepDocument;
use crate::synthetic;

use super::canvas::{Canvas, TextBox};
use super::measure::{Measure, SMALLEST_FONT};
use super::options::{ElectronMarks, EnergyUnit, FigureError, FigureOptions, FigureWidth, Theme};
use super::{ladder, sweep};

const WIDTHS: [FigureWidth; 3] = [FigureWidth::Column, FigureWidth::Page, FigureWidth::Slide];

fn overlap(a: &TextBox, b: &TextBox) -> bool {
    let slack = 0.01;
    a.left + slack < b.right
        && b.left + slack < a.right
        && a.top + slack < b.bottom
        && b.top + slack < a.bottom
}

fn assert_clean(canvas: &Canvas, width: FigureWidth, name: &str) {
    let page = Measure::of(width).page;
    for (index, text) in canvas.boxes.iter().enumerate() {
        assert!(
            text.left >= 0.0
                && text.right <= page
                && text.top >= 0.0
                && text.bottom <= canvas.height,
            "{name} {width:?}: {text:?} is off the page of {page} × {}",
            canvas.height
        );
        for other in &canvas.boxes[index + 1..] {
            assert!(
                !overlap(text, other),
                "{name} {width:?}: {text:?} and {other:?} overlap"
            );
        }
    }
}

fn options(width: FigureWidth) -> FigureOptions {
    FigureOptions {
        width,
        ..FigureOptions::default()
    }
}

#[test]
fn two_hundred_random_diagrams_have_no_overlapping_labels_and_none_off_the_page() {
    for seed in 0..200 {
        let document = synthetic::random(seed);
        let width = WIDTHS[seed as usize % 3];
        let unit = if seed % 2 == 0 {
            EnergyUnit::ElectronVolt
        } else {
            EnergyUnit::Hartree
        };
        let options = FigureOptions {
            energy_unit: unit,
            ..options(width)
        };
        let canvas = sweep::compose(&document, &options).unwrap();
        assert!(canvas.boxes.len() > 4);
        assert_clean(&canvas, width, &format!("seed {seed}"));
        let levels = synthetic::levels_of(&document, 0);
        let canvas = ladder::compose(&levels, &options).unwrap();
        assert_clean(&canvas, width, &format!("ladder {seed}"));
    }
}

#[test]
fn a_given_window_moves_no_label_off_the_page() {
    for seed in 200..240 {
        let document = synthetic::random(seed);
        let window = FigureOptions {
            energies: Some((-20.0, -5.0)),
            ..options(FigureWidth::Column)
        };
        match sweep::compose(&document, &window) {
            Ok(canvas) => assert_clean(&canvas, FigureWidth::Column, &format!("seed {seed}")),
            Err(error) => assert!(matches!(error, FigureError::EmptyWindow { .. })),
        }
    }
}

#[test]
fn every_font_is_legible_at_its_width() {
    for width in WIDTHS {
        let measure = Measure::of(width);
        let fonts = [
            measure.label,
            measure.tick,
            measure.title,
            measure.heading,
            measure.key,
        ];
        assert!(fonts.iter().all(|font| *font >= SMALLEST_FONT));
    }
}

#[test]
fn a_degenerate_pair_at_an_end_has_one_label() {
    let document = synthetic::hydrogen_sulfide();
    let canvas = sweep::compose(&document, &options(FigureWidth::Column)).unwrap();
    let count = |text: &str| {
        canvas
            .boxes
            .iter()
            .filter(|found| found.text == text)
            .count()
    };
    assert_eq!(count("2πu"), 1);
    assert_eq!(count("2b₁"), 1);
    assert_eq!(count("5a₁"), 1);
}

#[test]
fn the_file_is_well_formed_and_says_what_it_shows() {
    let document = synthetic::boron_trifluoride();
    let svg = sweep::sweep_figure(&document, &FigureOptions::default()).unwrap();
    let text = |from: &str, to: &str| -> String {
        svg.split(from)
            .nth(1)
            .unwrap()
            .split(to)
            .next()
            .unwrap()
            .to_owned()
    };
    assert!(text("<title", "</title>").contains("BF3"));
    assert!(text("<desc", "</desc>").contains("2e (occupied)"));
    let data = text("<metadata>", "</metadata>").replace("&quot;", "\"");
    let data: serde_json::Value = serde_json::from_str(&data).unwrap();
    assert_eq!(
        data["lines"].as_array().unwrap().len(),
        document.lines.as_ref().unwrap().len()
    );
    let opened = svg.matches("<g").count();
    assert_eq!(opened, svg.matches("</g>").count());
    assert!(!svg.contains("NaN") && !svg.contains("inf\""));
    // Both orbitals of a set are drawn.
    let set = text("data-line=\"1 2\"", "</g>");
    assert_eq!(set.matches("<path").count(), 2);
}

#[test]
fn equal_input_gives_equal_bytes() {
    let document = synthetic::silicon_difluoride();
    let figure = || sweep::sweep_figure(&document, &FigureOptions::default()).unwrap();
    assert_eq!(figure(), figure());
}

#[test]
fn wrong_choices_are_refused_by_name() {
    let document = synthetic::hydrogen_sulfide();
    let ask = |options: FigureOptions| sweep::sweep_figure(&document, &options).unwrap_err();
    let unknown = ask(FigureOptions {
        lines: Some(vec!["5a2".into()]),
        ..FigureOptions::default()
    });
    assert_eq!(
        unknown.to_string(),
        "no line is called \"5a2\"; nearest: 5a1, 2b2, 3b2"
    );
    let empty = ask(FigureOptions {
        energies: Some((50.0, 60.0)),
        ..FigureOptions::default()
    });
    assert!(matches!(empty, FigureError::EmptyWindow { .. }));
    let outside = ask(FigureOptions {
        electrons: ElectronMarks::At(20.0),
        ..FigureOptions::default()
    });
    assert!(matches!(outside, FigureError::ElectronsOutside { .. }));

    let mut grid = document.clone();
    grid.coordinates.push(grid.coordinates[0].clone());
    for point in &mut grid.points {
        point.at.push(synthetic::n(1.0));
    }
    grid.lines = None;
    grid.crossings = None;
    for level in grid.points.iter_mut().flat_map(|point| &mut point.levels) {
        level.line = None;
    }
    assert_eq!(
        sweep::sweep_figure(&grid, &FigureOptions::default()),
        Err(FigureError::Grid)
    );
}

#[test]
fn chosen_lines_alone_are_drawn() {
    let document = synthetic::hydrogen_sulfide();
    let chosen = FigureOptions {
        lines: Some(vec!["5a1".into(), "2b1".into()]),
        ..FigureOptions::default()
    };
    let svg = sweep::sweep_figure(&document, &chosen).unwrap();
    assert_eq!(svg.matches("class=\"line\"").count(), 2);
}

/// Points of no use for a drawing are left out of the line, not drawn as zero.
#[test]
fn a_missing_energy_breaks_the_line() {
    let mut document = synthetic::hydrogen_sulfide();
    let lines = document.lines.as_mut().unwrap();
    lines[4].energies[20] = None;
    let svg = sweep::sweep_figure(&document, &FigureOptions::default()).unwrap();
    let line = svg
        .split("data-line=\"4\"")
        .nth(1)
        .unwrap()
        .split("</g>")
        .next()
        .unwrap();
    assert_eq!(line.matches("<path").count(), 2);
}

/// The committed figures, byte for byte: a change shows in review.
#[test]
fn committed_figures_are_current() {
    let directory = concat!(env!("CARGO_MANIFEST_DIR"), "/golden");
    let documents = [
        ("h2s", synthetic::hydrogen_sulfide()),
        ("sif2", synthetic::silicon_difluoride()),
        ("bf3", synthetic::boron_trifluoride()),
    ];
    for (name, document) in documents {
        let svg = sweep::sweep_figure(&document, &FigureOptions::default()).unwrap();
        let file = format!("{directory}/{name}.svg");
        if std::env::var_os("ORBEND_UPDATE").is_some() {
            std::fs::write(&file, &svg).unwrap();
        }
        assert!(
            std::fs::read_to_string(&file).unwrap_or_default() == svg,
            "{file} differs; after a look refresh it with: ORBEND_UPDATE=1 cargo test -p orbend-report"
        );
    }
}

/// With ORBEND_FIGURES=DIRECTORY the figures are written there, to be looked at.
#[test]
fn figures_to_look_at() {
    let Ok(directory) = std::env::var("ORBEND_FIGURES") else {
        return;
    };
    let write = |name: &str, svg: String| {
        std::fs::write(format!("{directory}/{name}.svg"), svg).unwrap();
    };
    let documents: [(&str, SweepDocument); 4] = [
        ("h2s", synthetic::hydrogen_sulfide()),
        ("sif2", synthetic::silicon_difluoride()),
        ("bf3", synthetic::boron_trifluoride()),
        ("random", synthetic::random(7)),
    ];
    for (name, document) in &documents {
        for width in WIDTHS {
            for theme in [Theme::Light, Theme::Dark, Theme::Grey] {
                let options = FigureOptions {
                    theme,
                    ..options(width)
                };
                let file = format!("{name}-{width:?}-{theme:?}").to_lowercase();
                write(&file, sweep::sweep_figure(document, &options).unwrap());
            }
        }
        let levels = synthetic::levels_of(document, 0);
        write(
            &format!("{name}-ladder"),
            ladder::levels_figure(&levels, &FigureOptions::default()).unwrap(),
        );
    }
}
