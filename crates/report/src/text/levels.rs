//! The levels of one geometry as text.

use crate::document::{LevelRecord, LevelsDocument, Point};
use crate::draw::ticks::ascii_number;

use super::table::{Align, Table};
use super::{TextOptions, electrons, heading, warnings};

/// The levels of one geometry as a table, highest first, with the share of the shells, the sum,
/// charges and overlap populations where the document has them. Every line fits the width.
#[must_use]
pub fn levels_text(document: &LevelsDocument, options: &TextOptions) -> String {
    let mut out = String::new();
    heading(&mut out, options, &document.molecule, &document.method);
    for point in &document.points {
        let symmetry = &document.symmetry;
        options.paragraph(
            &mut out,
            &format!("point group {}; {}", point.point_group, symmetry.axes),
        );
        for near in &symmetry.near_misses {
            let within = ascii_number(near.tolerance_angstrom.get(), 4);
            options.paragraph(&mut out, &format!("{} within {within} Å", near.group));
        }
        out.push('\n');
        out.push_str(&level_table(point, options).render(options.columns()));
        out.push('\n');
        characters(&mut out, point, options);
        totals(&mut out, point, options);
    }
    if let Some(record) = &document.fragments {
        out.push('\n');
        super::fragments::fragments(&mut out, record, options);
    }
    if let Some(distortions) = &document.distortions {
        out.push('\n');
        for words in super::distortion::distortion_words(distortions, options) {
            options.paragraph(&mut out, &words);
        }
    }
    warnings(&mut out, options, &document.warnings);
    out
}

fn level_table(point: &Point, options: &TextOptions) -> Table {
    let shares = point.levels.iter().any(|level| level.populations.is_some());
    let mut header = vec![
        ("level", Align::Left),
        ("energy/eV", Align::Right),
        ("electrons", Align::Right),
    ];
    if shares {
        header.push(("mostly", Align::Left));
    }
    let mut table = Table::new(&header);
    let mut above: Option<&LevelRecord> = None;
    for level in point.levels.iter().rev() {
        if let Some(lumo) =
            above.filter(|a| a.occupation.get() <= 1e-6 && level.occupation.get() > 1e-6)
        {
            let gap = ascii_number(lumo.energy.get() - level.energy.get(), 3);
            table.rule(&format!("------- HOMO-LUMO gap {gap} eV -------"));
        }
        let label = options.pick(&level.full_label, &level.full_valence_label);
        let mut cells = vec![
            options.label(label),
            ascii_number(level.energy.get(), 4),
            electrons(level.occupation.get()),
        ];
        if shares {
            cells.push(mostly(level));
        }
        table.row(cells);
        above = Some(level);
    }
    table
}

/// The largest shares, shells of like atoms taken together.
fn mostly(level: &LevelRecord) -> String {
    let mut shares: Vec<(String, f64)> = Vec::new();
    for part in level.populations.iter().flatten() {
        let name = format!("{} {}", part.element, part.shell);
        match shares.iter_mut().find(|(other, _)| *other == name) {
            Some((_, share)) => *share += part.share.get(),
            None => shares.push((name, part.share.get())),
        }
    }
    shares.sort_by(|a, b| b.1.total_cmp(&a.1));
    let words: Vec<String> = shares
        .iter()
        .filter(|(_, share)| *share >= 0.05)
        .take(3)
        .map(|(name, share)| format!("{name} {} %", ascii_number(100.0 * share, 0)))
        .collect();
    words.join(", ")
}

/// What each level is, by its tags; members of a set once.
fn characters(out: &mut String, point: &Point, options: &TextOptions) {
    let mut last = "";
    for level in point.levels.iter().rev() {
        let label = options.pick(&level.full_label, &level.full_valence_label);
        let Some(tags) = level.tags.as_ref().filter(|tags| !tags.is_empty()) else {
            continue;
        };
        if label != last {
            options.paragraph(
                out,
                &format!("{}: {}", options.label(label), tags.join(", ")),
            );
        }
        last = label;
    }
    if !last.is_empty() {
        out.push('\n');
    }
}

fn totals(out: &mut String, point: &Point, options: &TextOptions) {
    if let Some(sum) = point.sum {
        options.paragraph(
            out,
            &format!("sum of energies {} eV", ascii_number(sum.get(), 4)),
        );
    }
    if let Some(charges) = &point.charges {
        let words: Vec<String> = charges
            .iter()
            .map(|one| {
                format!(
                    "{}{} {}",
                    one.element,
                    one.atom,
                    ascii_number(one.charge.get(), 3)
                )
            })
            .collect();
        options.paragraph(out, &format!("charges: {}", words.join(", ")));
        let words: Vec<String> = charges
            .iter()
            .filter_map(|one| {
                let charge = ascii_number(one.lowdin?.get(), 3);
                Some(format!("{}{} {charge}", one.element, one.atom))
            })
            .collect();
        if !words.is_empty() {
            options.paragraph(out, &format!("charges by Löwdin: {}", words.join(", ")));
        }
    }
    if let Some(pairs) = &point.overlap_populations {
        let words: Vec<String> = pairs
            .iter()
            .filter(|pair| pair.population.get().abs() >= 0.005)
            .map(|pair| {
                let [a, b] = pair.atoms;
                format!("{a}-{b} {}", ascii_number(pair.population.get(), 3))
            })
            .collect();
        options.paragraph(out, &format!("overlap populations: {}", words.join(", ")));
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::synthetic;
    use crate::text::table::length;

    #[test]
    fn highest_first_with_the_gap_between() {
        let document = synthetic::levels_of(&synthetic::hydrogen_sulfide(), 10);
        let text = levels_text(&document, &TextOptions::default());
        assert!(text.lines().all(|line| length(line) <= 80));
        let place = |word: &str| text.find(word).unwrap();
        assert!(place("3b₂") < place("HOMO-LUMO gap"));
        assert!(place("HOMO-LUMO gap") < place("2b₁"));
        assert!(place("2b₁") < place("4a₁"));
        let plain = TextOptions {
            unicode: false,
            ..TextOptions::default()
        };
        assert!(levels_text(&document, &plain).is_ascii());
    }
}
