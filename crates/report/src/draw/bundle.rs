//! Bundles: the lines of one degenerate set, drawn together.

use crate::document::{CoordinateUnit, LineRecord, SweepDocument};
use crate::figure::Follow;

use super::curve::Curve;

/// One line of the drawing: a single line, or all lines of one degenerate set.
#[derive(Clone, Debug)]
pub(crate) struct Bundle {
    /// The lines' ids.
    pub(crate) ids: Vec<u32>,
    /// The ids of the lines that it ends in: others where character is followed.
    pub(crate) end_ids: Vec<u32>,
    /// Where character is followed, the lines at every point.
    path: Option<Vec<Vec<u32>>>,
    /// Irrep of the path group, plain.
    pub(crate) irrep: String,
    /// Plain label in the chosen numbering.
    pub(crate) label: String,
    /// Plain label at the first point, in that point's own group.
    pub(crate) start: String,
    /// Plain label at the last point, in that point's own group.
    pub(crate) end: String,
    /// Every name by which a user may ask for it.
    pub(crate) names: Vec<String>,
    /// Orbitals in the set.
    pub(crate) multiplicity: usize,
    /// Energy in eV at every point.
    pub(crate) energies: Vec<Option<f64>>,
    /// Electrons per orbital at every point.
    pub(crate) occupations: Vec<f64>,
    /// One curve for every unbroken run of points.
    pub(crate) curves: Vec<Curve>,
}

impl Bundle {
    /// The drawn energy at `x`.
    pub(crate) fn value(&self, x: f64) -> Option<f64> {
        self.curves.iter().find_map(|curve| curve.value(x))
    }

    /// Lowest and highest energy.
    pub(crate) fn extent(&self) -> Option<(f64, f64)> {
        let known = || self.energies.iter().flatten().copied();
        Some((
            known().min_by(f64::total_cmp)?,
            known().max_by(f64::total_cmp)?,
        ))
    }

    /// Whether it runs along the line `id` at a point.
    pub(crate) fn holds(&self, id: u32, point: usize) -> bool {
        match self.path.as_ref().and_then(|path| path.get(point)) {
            Some(here) => here.contains(&id),
            None => self.ids.contains(&id),
        }
    }

    /// Whether any point has electrons in it.
    pub(crate) fn ever_occupied(&self) -> bool {
        self.occupations.iter().any(|electrons| *electrons > 1e-6)
    }
}

/// Coordinates of all points.
pub(crate) fn abscissae(document: &SweepDocument) -> Vec<f64> {
    document
        .points
        .iter()
        .filter_map(|point| point.at.first())
        .map(|at| at.get())
        .collect()
}

/// Whether the document's numbers are angles.
pub(crate) fn in_degrees(document: &SweepDocument) -> bool {
    document
        .coordinates
        .first()
        .is_some_and(|c| c.unit == CoordinateUnit::Degree)
}

/// All bundles of a sweep in the order of the document's lines.
pub(crate) fn bundles(document: &SweepDocument, core: bool, follow: Follow) -> Vec<Bundle> {
    let lines = document.lines.as_deref().unwrap_or_default();
    let mut sets: Vec<Vec<&LineRecord>> = Vec::new();
    for line in lines {
        let kin = sets.iter_mut().find(|set| {
            line.degeneracy > 1
                && set[0].degeneracy == line.degeneracy
                && set[0].label == line.label
        });
        match kin {
            Some(set) => set.push(line),
            None => sets.push(vec![line]),
        }
    }
    let xs = abscissae(document);
    sets.iter()
        .map(|set| bundle(document, set, &xs, (core, follow)))
        .collect()
}

fn bundle(
    document: &SweepDocument,
    set: &[&LineRecord],
    xs: &[f64],
    (core, follow): (bool, Follow),
) -> Bundle {
    let first = set[0];
    let ids: Vec<u32> = set.iter().map(|line| line.id).collect();
    let path = match follow {
        Follow::Energy => None,
        Follow::Character => path(document, &ids, xs.len()),
    };
    let at = |point: usize| {
        let here = path.as_ref().and_then(|path| path.get(point));
        here.unwrap_or(&ids)
    };
    let energies: Vec<Option<f64>> = (0..xs.len())
        .map(|k| {
            let known: Vec<f64> = at(k)
                .iter()
                .filter_map(|id| line(document, *id)?.energies.get(k).copied().flatten())
                .map(|energy| energy.get())
                .collect();
            (!known.is_empty()).then(|| known.iter().sum::<f64>() / known.len() as f64)
        })
        .collect();
    let occupations = document
        .points
        .iter()
        .enumerate()
        .map(|(k, point)| {
            let held: Vec<f64> = point
                .levels
                .iter()
                .filter(|level| level.line.is_some_and(|id| at(k).contains(&id)))
                .map(|level| level.occupation.get())
                .collect();
            if held.is_empty() {
                0.0
            } else {
                held.iter().sum::<f64>() / held.len() as f64
            }
        })
        .collect();
    let end_ids = at(xs.len().saturating_sub(1)).clone();
    let last = end_ids.first().and_then(|id| line(document, *id));
    let last = &last.unwrap_or(first).passport;
    let passport = &first.passport;
    let label = if core {
        &first.label
    } else {
        &first.valence_label
    };
    let or_label = |name: &str| {
        if name.is_empty() {
            label.clone()
        } else {
            name.to_owned()
        }
    };
    let (start, end) = if core {
        (or_label(&passport.start), or_label(&last.end))
    } else {
        (
            or_label(&passport.start_valence),
            or_label(&last.end_valence),
        )
    };
    let mut names = vec![
        first.label.clone(),
        first.valence_label.clone(),
        first.display.clone(),
        passport.start.clone(),
        last.end.clone(),
    ];
    names.extend(ids.iter().map(|id| format!("#{id}")));
    names.retain(|name| !name.is_empty());
    Bundle {
        curves: curves(xs, &energies),
        irrep: first.irrep.clone(),
        label: label.clone(),
        multiplicity: set.len().max(first.degeneracy as usize),
        ids,
        end_ids,
        path,
        start,
        end,
        names,
        energies,
        occupations,
    }
}

/// The line with this id; ids are places in the list as a rule.
fn line(document: &SweepDocument, id: u32) -> Option<&LineRecord> {
    let lines = document.lines.as_deref().unwrap_or_default();
    let direct = lines.get(id as usize).filter(|line| line.id == id);
    direct.or_else(|| lines.iter().find(|line| line.id == id))
}

/// The lines that have the characters of these lines at every point, where the document says it.
fn path(document: &SweepDocument, ids: &[u32], points: usize) -> Option<Vec<Vec<u32>>> {
    let records = document.followed.as_deref()?;
    let of = |id: &u32| records.iter().find(|record| record.id == *id);
    let records: Vec<_> = ids.iter().map(of).collect::<Option<_>>()?;
    let at = |point: usize| {
        let ids = records.iter().map(|record| record.lines.get(point));
        ids.map(|id| id.copied()).collect::<Option<Vec<u32>>>()
    };
    (0..points).map(at).collect()
}

/// One curve for every unbroken run of known values.
pub(crate) fn curves(xs: &[f64], ys: &[Option<f64>]) -> Vec<Curve> {
    let mut found = Vec::new();
    let mut run: (Vec<f64>, Vec<f64>) = (Vec::new(), Vec::new());
    for (x, y) in xs.iter().zip(ys) {
        if let Some(y) = y {
            run.0.push(*x);
            run.1.push(*y);
        } else if run.0.len() > 1 {
            found.push(Curve::new(&run.0, &run.1));
            run = (Vec::new(), Vec::new());
        } else {
            run = (Vec::new(), Vec::new());
        }
    }
    if run.0.len() > 1 {
        found.push(Curve::new(&run.0, &run.1));
    }
    found
}
