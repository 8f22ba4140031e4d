//! Geometry of whole figures, and files to look at.

mod golden;
mod verdicts;

use crate::document::SweepDocument;
use crate::synthetic;

use super::canvas::{Canvas, TextBox};
use super::measure::{Measure, SMALLEST_FONT};
use super::options::{ElectronMarks, EnergyUnit, FigureError, FigureOptions, FigureWidth, Theme};
use super::pictures::{EndPictures, OrbitalPicture};
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

/// A picture of every line: one or two lobes of a size of their own on one of three planes.
fn pictures_of(document: &SweepDocument, seed: u64) -> EndPictures {
    let (points, half) = (25, 3.0);
    let picture = |line: u32, end: u64| {
        let number = (seed * 31 + u64::from(line) * 7 + end * 3) % 11;
        let size = 0.6 + 0.15 * number as f64;
        let values = (0..points * points)
            .map(|k| {
                let place = |k: usize| k as f64 * 2.0 * half / (points - 1) as f64 - half;
                let (x, y) = (place(k % points), -place(k / points));
                let sign = if number.is_multiple_of(3) { 1.0 } else { x };
                0.3 * sign * (-(x * x + 2.0 * y * y) / (size * size)).exp()
            })
            .collect();
        OrbitalPicture {
            line,
            plane: ["the plane of the atoms", "above it", "an upright plane"][number as usize % 3]
                .to_owned(),
            points,
            half,
            values,
            nuclei: vec![[-1.0, 0.2, 0.0], [0.0, 0.0, 0.3], [1.0, 0.2, 0.0]],
            bonds: vec![(0, 1), (1, 2)],
        }
    };
    let all = |end: u64| {
        let lines = document.lines.iter().flatten();
        lines.map(|line| picture(line.id, end)).collect()
    };
    EndPictures {
        start: all(0),
        end: all(1),
    }
}

#[test]
fn pictures_collide_with_nothing_and_stay_on_the_page() {
    for seed in 0..60 {
        let document = synthetic::random(seed);
        let width = WIDTHS[seed as usize % 3];
        let with = FigureOptions {
            pictures: Some(pictures_of(&document, seed)),
            ..options(width)
        };
        let canvas = sweep::compose(&document, &with).unwrap();
        let shown = canvas.boxes.iter().filter(|b| b.text == "orbital").count();
        assert!(shown >= 2, "seed {seed}: {shown} pictures");
        assert_clean(&canvas, width, &format!("seed {seed}"));
        let svg = sweep::sweep_figure(&document, &with).unwrap();
        assert!(svg.contains("cut: "), "the planes are stated");
    }
}

/// Electrons of neighbouring lines do not lie on one another, nor on the mark of a crossing.
#[test]
fn electrons_of_crowded_lines_make_way() {
    let document = synthetic::silicon_difluoride();
    let svg = sweep::sweep_figure(&document, &FigureOptions::default()).unwrap();
    let part = svg.split("<g class=\"electrons\">").nth(1).unwrap();
    let part = part.split("</g>").next().unwrap();
    let number = |text: &str, key: &str| -> f64 {
        let rest = text.split(&format!(" {key}=\"")).nth(1).unwrap();
        rest.split('"').next().unwrap().parse().unwrap()
    };
    let discs: Vec<(f64, f64, f64)> = part
        .split("<circle")
        .skip(1)
        .map(|disc| (number(disc, "cx"), number(disc, "cy"), number(disc, "r")))
        .collect();
    assert!(discs.len() > 10);
    for (k, a) in discs.iter().enumerate() {
        for b in &discs[..k] {
            let distance = (a.0 - b.0).hypot(a.1 - b.1);
            assert!(distance > 2.0 * a.2, "{a:?} {b:?}");
        }
    }
}

/// Where a pair holds two electrons at the last point only, no wedge is shaded beside it.
#[test]
fn the_gap_is_shaded_for_one_number_of_filled_orbitals() {
    let mut document = synthetic::silicon_difluoride();
    let before = sweep::sweep_figure(&document, &FigureOptions::default()).unwrap();
    let last = document.points.last_mut().unwrap();
    let homo = last
        .levels
        .iter()
        .rposition(|level| level.occupation.get() > 1e-6)
        .unwrap();
    last.levels[homo].occupation = synthetic::n(1.0);
    last.levels[homo + 1].occupation = synthetic::n(1.0);
    let after = sweep::sweep_figure(&document, &FigureOptions::default()).unwrap();
    let gap = super::theme::Colours::of(Theme::Light).gap;
    let area = |svg: &str| -> String {
        let path = svg.split(&format!("\" fill=\"{gap}\"")).next().unwrap();
        path.rsplit('"').next().unwrap().to_owned()
    };
    let right = |path: &str| -> f64 {
        path.split(['M', 'L', 'Z'])
            .filter_map(|at| at.split(' ').next()?.parse().ok())
            .fold(0.0, f64::max)
    };
    assert_eq!(area(&after).matches('M').count(), 1);
    assert!(right(&area(&after)) < right(&area(&before)));
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
