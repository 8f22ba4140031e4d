//! Orbital surfaces as glTF 2.0 binary (`.glb`): two phases, nuclei and bonds, with what they are in
//! the file's `extras`.
//!
//! Positions in the file are in Å; the root node draws 1 Å as 0.1 m, since glTF counts in metres.

mod glb;
mod gltf;
mod place;
mod solid;
#[cfg(test)]
mod tests;

use crate::document::{LevelsDocument, Program};
use crate::draw::wording::heading_formula;
use glb::Builder;
use gltf::{Material, Node, Root};
use place::{frame_matrix, span};
use serde_json::{Value, json};

/// Metres in the scene for 1 Å.
const METRES_PER_ANGSTROM: f64 = 0.1;
/// Space between orbitals side by side, Å.
const GAP: f64 = 1.0;

/// One phase: what lies on ψ = +v or ψ = −v.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct PhaseMesh {
    /// Å.
    pub vertices: Vec<[f64; 3]>,
    /// Unit vectors outwards, one per vertex.
    pub normals: Vec<[f64; 3]>,
    /// Three vertices each, anticlockwise from outside.
    pub triangles: Vec<[u32; 3]>,
    /// The volume inside, Å³.
    pub volume: f64,
}

/// The surface of one orbital, ready to be written.
#[derive(Clone, Debug, PartialEq)]
pub struct SurfaceRecord {
    /// Plain name, as in `5a1`; `6e:2` for the second of a degenerate set.
    pub name: String,
    /// The same in Unicode.
    pub display: String,
    /// eV.
    pub energy: f64,
    /// Electrons, 0 to 2.
    pub electrons: f64,
    /// Share of ∫ψ² inside.
    pub share: f64,
    /// |ψ| on the surface, bohr^(−3/2).
    pub isovalue: f64,
    /// The two phases, positive first.
    pub phases: [PhaseMesh; 2],
    /// Unit vectors x, y, z of the point group's axes in the frame of the positions.
    pub axes: [[f64; 3]; 3],
    /// Bonds to draw, atoms from 0.
    pub bonds: Vec<(usize, usize)>,
}

/// Why a scene cannot be written.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum SceneError {
    /// More bytes than the form can count.
    #[error(
        "the surfaces would fill {bytes} bytes, more than a .glb file can hold; ask for fewer orbitals"
    )]
    TooLarge {
        /// Bytes of the file.
        bytes: u64,
    },
    /// The description could not be written.
    #[error("the scene could not be described: {0}")]
    Data(String),
}

/// The surfaces side by side in the order given, each with the nuclei, as glTF 2.0 binary
/// (ISO/IEC 12113:2022). The group's z axis points up and its x axis towards the reader. Equal input
/// gives equal bytes.
///
/// # Errors
/// More than 4 GB, or a description that cannot be written.
pub fn surfaces_glb(
    document: &LevelsDocument,
    surfaces: &[SurfaceRecord],
) -> Result<Vec<u8>, SceneError> {
    let mut builder = Builder::new(Root::new(
        format!("{} {}", Program::this().name, Program::this().version),
        description(document),
    ));
    let inks = [
        ("positive", [0.16, 0.55, 0.45, 0.82]),
        ("negative", [0.42, 0.09, 0.36, 0.82]),
    ]
    .map(|(name, colour)| builder.material(Material::new(name, colour)));
    let mut shapes = solid::Shapes::new();
    let mut groups = Vec::with_capacity(surfaces.len());
    let mut right = 0.0;
    for surface in surfaces {
        let positions = positions(document);
        let mut children = Vec::new();
        for ((phase, &material), sign) in surface.phases.iter().zip(&inks).zip(["+", "−"]) {
            if phase.triangles.is_empty() {
                continue;
            }
            let mesh = builder.mesh(
                &format!("{} {sign}", surface.display),
                &phase.vertices,
                &phase.normals,
                &phase.triangles,
                material,
            );
            children.push(builder.node(Node::of_mesh(&format!("{} {sign}", surface.name), mesh)));
        }
        children.extend(shapes.molecule(&mut builder, document, &positions, &surface.bonds));
        // The next orbital starts where this one ends.
        let (low, high) = span(surface, &positions);
        let shift = right - low;
        right += high - low + GAP;
        groups.push(builder.node(Node {
            name: surface.name.clone(),
            matrix: Some(frame_matrix(surface.axes, shift)),
            children,
            extras: Some(about(surface)),
            ..Node::default()
        }));
    }
    let middle = -0.5 * (right - GAP).max(0.0) * METRES_PER_ANGSTROM;
    let root = builder.node(Node {
        name: heading_formula(&document.molecule).to_owned(),
        scale: Some([METRES_PER_ANGSTROM; 3]),
        translation: Some([middle, 0.0, 0.0]),
        children: groups,
        ..Node::default()
    });
    builder.finish(root)
}

fn positions(document: &LevelsDocument) -> Vec<[f64; 3]> {
    document
        .points
        .first()
        .map(|point| {
            point
                .positions
                .iter()
                .map(|at| at.map(crate::document::Number::get))
                .collect()
        })
        .unwrap_or_default()
}

/// What the numbers of the file mean.
fn description(document: &LevelsDocument) -> Value {
    let (molecule, method) = (&document.molecule, &document.method);
    json!({
        "molecule": heading_formula(molecule),
        "charge": molecule.charge,
        "unit_of_positions": "angstrom",
        "metres_per_angstrom": METRES_PER_ANGSTROM,
        "unit_of_isovalue": "bohr^(-3/2)",
        "point_group": document.symmetry.path_group,
        "axes": document.symmetry.axes,
        "view": "z of the point group up, x towards the reader",
        "parameter_set": method.parameter_set,
        "fingerprint": method.fingerprint,
        "coupling": method.coupling,
        "k": method.k,
    })
}

/// What one surface is.
fn about(surface: &SurfaceRecord) -> Value {
    json!({
        "orbital": surface.name,
        "energy_ev": surface.energy,
        "electrons": surface.electrons,
        "share_enclosed": surface.share,
        "isovalue": surface.isovalue,
        "volume_angstrom3": surface.phases.iter().map(|phase| phase.volume).collect::<Vec<_>>(),
    })
}
