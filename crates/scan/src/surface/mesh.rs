//! A closed mesh of triangles on ψ = v.

use fast_surface_nets::ndshape::RuntimeShape;
use fast_surface_nets::{SurfaceNetsBuffer, surface_nets};
use rayon::prelude::*;

use super::lattice::Lattice;
use crate::field::OrbitalField;

/// Newton steps onto the surface; three are enough where it is smooth.
const STEPS: usize = 12;

/// Triangles seen anticlockwise from outside.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Mesh {
    /// Å.
    pub vertices: Vec<[f64; 3]>,
    /// Unit vectors outwards, from the analytic gradient of ψ, one per vertex.
    pub normals: Vec<[f64; 3]>,
    /// Three vertices each.
    pub triangles: Vec<[u32; 3]>,
}

impl Mesh {
    /// The surface ψ = `level` (of either sign) from values on a lattice.
    ///
    /// Connected by dual surfaces (naive surface nets: S. F. F. Gibson, MICCAI 1998, LNCS 1496, 888),
    /// vertices then moved onto the surface along ∇ψ.
    pub(super) fn extract(
        field: &OrbitalField,
        lattice: &Lattice,
        values: &[f64],
        level: f64,
    ) -> Self {
        // Negative inside, zero on the surface.
        let distance: Vec<f32> = values
            .iter()
            .map(|value| (1.0 - value / level) as f32)
            .collect();
        let counts = lattice.counts.map(|count| count as u32);
        let mut found = SurfaceNetsBuffer::default();
        surface_nets(
            &distance,
            &RuntimeShape::<u32, 3>::new(counts),
            [0; 3],
            counts.map(|count| count - 1),
            &mut found,
        );
        let (vertices, normals) = found
            .positions
            .par_iter()
            .map(|&at| onto(field, lattice.place(at.map(f64::from)), level, lattice.step))
            .unzip();
        let mut mesh = Self {
            vertices,
            normals,
            triangles: found
                .indices
                .chunks_exact(3)
                .map(|corner| [corner[0], corner[1], corner[2]])
                .collect(),
        };
        if mesh.volume() < 0.0 {
            mesh.triangles
                .iter_mut()
                .for_each(|corner| corner.swap(1, 2));
        }
        mesh
    }

    /// Whether every edge belongs to exactly two triangles that run through it in opposite directions.
    pub fn is_closed(&self) -> bool {
        let mut edges: Vec<(u32, u32, bool)> = Vec::with_capacity(3 * self.triangles.len());
        for &[a, b, c] in &self.triangles {
            for (from, to) in [(a, b), (b, c), (c, a)] {
                edges.push((from.min(to), from.max(to), from < to));
            }
        }
        edges.sort_unstable();
        edges.len().is_multiple_of(2)
            && edges.chunks_exact(2).all(|pair| {
                pair[0].0 == pair[1].0 && pair[0].1 == pair[1].1 && pair[0].2 != pair[1].2
            })
            && edges
                .windows(3)
                .all(|three| (three[0].0, three[0].1) != (three[2].0, three[2].1))
    }

    /// The volume inside, Å³ (the divergence theorem on each triangle).
    pub fn volume(&self) -> f64 {
        self.corners()
            .map(|[a, b, c]| dot(a, cross(b, c)) / 6.0)
            .sum()
    }

    /// The area, Å².
    pub fn area(&self) -> f64 {
        self.corners()
            .map(|[a, b, c]| {
                let across = cross(sub(b, a), sub(c, a));
                0.5 * dot(across, across).sqrt()
            })
            .sum()
    }

    fn corners(&self) -> impl Iterator<Item = [[f64; 3]; 3]> {
        self.triangles
            .iter()
            .map(|corner| corner.map(|vertex| self.vertices[vertex as usize]))
    }
}

/// The nearest place on ψ = level along the gradient, and the unit vector outwards there.
fn onto(field: &OrbitalField, start: [f64; 3], level: f64, step: f64) -> ([f64; 3], [f64; 3]) {
    let mut at = start;
    for _ in 0..STEPS {
        let (value, gradient) = field.value_and_gradient(at);
        let square = dot(gradient, gradient);
        let away = level - value;
        if away.abs() <= 1e-12 * level.abs() || square <= 0.0 {
            break;
        }
        // Gradients are per bohr, places in Å: the step is turned over in bohr.
        let by = gradient
            .map(|g| orbend_structure::Angstrom::from(orbend_structure::Bohr(away * g / square)).0);
        let length = dot(by, by).sqrt();
        let share = (0.5 * step / length).min(1.0);
        at = core::array::from_fn(|k| at[k] + share * by[k]);
    }
    let (_, gradient) = field.value_and_gradient(at);
    let length = dot(gradient, gradient).sqrt();
    // |ψ| falls outwards.
    let outwards = if length > 0.0 {
        gradient.map(|g| -level.signum() * g / length)
    } else {
        [0.0, 0.0, 1.0]
    };
    (at, outwards)
}

fn sub(a: [f64; 3], b: [f64; 3]) -> [f64; 3] {
    core::array::from_fn(|k| a[k] - b[k])
}

fn dot(a: [f64; 3], b: [f64; 3]) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

fn cross(a: [f64; 3], b: [f64; 3]) -> [f64; 3] {
    [
        a[1] * b[2] - a[2] * b[1],
        a[2] * b[0] - a[0] * b[2],
        a[0] * b[1] - a[1] * b[0],
    ]
}
