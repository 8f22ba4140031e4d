//! Every name of every line.

use crate::document::SweepDocument;
use crate::draw::wording::value_with_unit;

use super::table::{Align, Table};
use super::{TextOptions, heading, warnings};

/// Every line's name in the path group, under the other usual choice of axes,
/// and in the full group at both ends and at every special point between them;
/// with core orbitals counted and without, highest line first. Of a grid, the
/// heading alone. Lines of a table are as wide as its names need.
#[must_use]
pub fn passport_text(document: &SweepDocument, options: &TextOptions) -> String {
    let mut out = String::new();
    heading(&mut out, options, &document.molecule, &document.method);
    let symmetry = &document.symmetry;
    options.paragraph(
        &mut out,
        &format!("path group {}; {}", symmetry.path_group, symmetry.axes),
    );
    for (title, valence) in [
        ("core orbitals counted", false),
        ("valence levels only", true),
    ] {
        out.push_str(&format!("\n{title}\n"));
        out.push_str(&names(document, valence, options).render(usize::MAX));
    }
    warnings(&mut out, options, &document.warnings);
    out
}

fn names(document: &SweepDocument, valence: bool, options: &TextOptions) -> Table {
    let ends: Vec<f64> = [document.points.first(), document.points.last()]
        .into_iter()
        .flatten()
        .filter_map(|point| point.at.first())
        .map(|at| at.get())
        .collect();
    let lines = document.lines.as_deref().unwrap_or_default();
    let between: Vec<usize> = lines.first().map_or_else(Vec::new, |line| {
        let special = line.passport.special.iter().enumerate();
        special
            .filter(|(_, label)| ends.iter().all(|end| (end - label.at.get()).abs() > 1e-9))
            .map(|(index, _)| index)
            .collect()
    });
    let unit = document
        .coordinates
        .first()
        .map(|coordinate| coordinate.unit);
    let place = |at: Option<f64>, group: &str| {
        let at = at
            .zip(unit)
            .map(|(at, unit)| value_with_unit(at, unit))
            .unwrap_or_default();
        format!("{group} {at}")
    };
    let group = |point: Option<&crate::document::Point>| {
        point
            .map(|point| point.point_group.clone())
            .unwrap_or_default()
    };
    let mut heads = vec![
        document.symmetry.path_group.clone(),
        "other axes".to_owned(),
        place(ends.first().copied(), &group(document.points.first())),
    ];
    for &index in &between {
        let label = &lines[0].passport.special[index];
        heads.push(place(Some(label.at.get()), &label.point_group));
    }
    heads.push(place(ends.last().copied(), &group(document.points.last())));
    let columns: Vec<(&str, Align)> = heads
        .iter()
        .map(|head| (head.as_str(), Align::Left))
        .collect();
    let mut table = Table::new(&columns);
    for line in lines.iter().rev() {
        let passport = &line.passport;
        let pick = |core: &str, without: &str| options.label(if valence { without } else { core });
        let mut cells = vec![
            pick(&line.label, &line.valence_label),
            pick(&passport.other_axes, &passport.other_axes_valence),
            pick(&passport.start, &passport.start_valence),
        ];
        for &index in &between {
            let label = passport.special.get(index);
            cells.push(
                label
                    .map(|label| pick(&label.label, &label.valence_label))
                    .unwrap_or_default(),
            );
        }
        cells.push(pick(&passport.end, &passport.end_valence));
        table.row(cells);
    }
    table
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::synthetic;

    #[test]
    fn both_numberings_and_all_groups() {
        let text = passport_text(&synthetic::hydrogen_sulfide(), &TextOptions::default());
        for word in [
            "other axes",
            "core orbitals counted",
            "valence levels only",
            "C2v",
        ] {
            assert!(text.contains(word), "{text}");
        }
        let names = text
            .lines()
            .filter(|line| line.starts_with("5a₁") || line.starts_with("2a₁"));
        assert!(names.count() >= 2, "{text}");
    }
}
