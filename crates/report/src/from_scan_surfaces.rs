//! Surfaces of the orbitals that a user names.

use orbend_scan::{ScanError, Sweep};
use orbend_structure::{BondGraph, Molecule};

use crate::draw::nearest::nearest;
use crate::figure::Numbering;
use crate::scene::{PhaseMesh, SurfaceRecord};

/// Why a surface cannot be had.
#[derive(Debug, thiserror::Error)]
#[non_exhaustive]
pub enum SurfaceChoiceError {
    /// No orbital has that name.
    #[error("no orbital is called \"{name}\"; nearest: {}", nearest.join(", "))]
    Unknown {
        /// The name as written.
        name: String,
        /// The nearest names, nearest first.
        nearest: Vec<String>,
    },
    /// The set has fewer components.
    #[error(
        "\"{name}\": {set} has {size} components; write {set}:1 to {set}:{size}, or {set} for all"
    )]
    Component {
        /// The name as written.
        name: String,
        /// The set.
        set: String,
        /// Its orbitals.
        size: usize,
    },
    /// The surface itself.
    #[error(transparent)]
    Scan(#[from] ScanError),
}

/// The surfaces of orbitals at the first point, in the order of their names (plain, `5a1`, or Unicode);
/// a degenerate set gives all of its components, `6e:2` one of them. `share` of each density lies
/// inside.
///
/// # Errors
/// A name that no orbital has, or a surface that cannot be made.
pub fn named_surfaces(
    sweep: &Sweep,
    names: &[String],
    numbering: Numbering,
    share: f64,
) -> Result<Vec<SurfaceRecord>, SurfaceChoiceError> {
    let known: Vec<(String, String)> = (0..sweep.plan().lines().len())
        .map(|line| {
            let name = sweep.full_name(line, 0).0.clone();
            match numbering {
                Numbering::Core => (name.plain, name.display),
                Numbering::Valence => (name.valence_plain, name.valence_display),
            }
        })
        .collect();
    // All names are looked up before anything is computed.
    let mut chosen: Vec<(usize, String, String)> = Vec::new();
    for name in names {
        for found in look_up(name, &known)? {
            if !chosen.iter().any(|(line, ..)| *line == found.0) {
                chosen.push(found);
            }
        }
    }
    let point = sweep.point(0)?;
    let molecule = sweep.plan().molecule();
    let bonds = BondGraph::new(&Molecule {
        positions: point.positions.clone(),
        ..molecule.clone()
    })
    .bonds();
    let axes = sweep.plan().path_group().axes.rotation();
    chosen
        .into_iter()
        .map(|(line, name, display)| {
            let surface = sweep.surface(line, 0, share)?;
            let level = point.levels.iter().find(|level| level.line == line);
            Ok(SurfaceRecord {
                name,
                display,
                energy: sweep.energy(line, 0),
                electrons: level.map_or(0.0, |level| level.occupation),
                share,
                isovalue: surface.isovalue,
                phases: [surface.positive, surface.negative].map(|mesh| PhaseMesh {
                    volume: mesh.volume(),
                    vertices: mesh.vertices,
                    normals: mesh.normals,
                    triangles: mesh.triangles,
                }),
                axes,
                bonds: bonds.clone(),
            })
        })
        .collect()
}

/// Lines with their names, `:1`, `:2` … behind those of a set.
fn look_up(
    name: &str,
    known: &[(String, String)],
) -> Result<Vec<(usize, String, String)>, SurfaceChoiceError> {
    let (set, component) = match name.split_once(':') {
        Some((set, component)) => (set, Some(component)),
        None => (name, None),
    };
    let mut found: Vec<(usize, String, String)> = known
        .iter()
        .enumerate()
        .filter(|(_, (plain, display))| plain == set || display == set)
        .map(|(line, (plain, display))| (line, plain.clone(), display.clone()))
        .collect();
    if found.is_empty() {
        let offered: Vec<String> = known.iter().map(|(plain, _)| plain.clone()).collect();
        return Err(SurfaceChoiceError::Unknown {
            name: name.to_owned(),
            nearest: nearest(set, &offered),
        });
    }
    let size = found.len();
    if size > 1 {
        for (place, (_, plain, display)) in (1..).zip(&mut found) {
            for text in [plain, display] {
                *text = format!("{text}:{place}");
            }
        }
    }
    match component.map(str::parse::<usize>) {
        None => Ok(found),
        Some(Ok(place)) if (1..=size).contains(&place) => Ok(vec![found.swap_remove(place - 1)]),
        Some(_) => Err(SurfaceChoiceError::Component {
            name: name.to_owned(),
            set: set.to_owned(),
            size,
        }),
    }
}
