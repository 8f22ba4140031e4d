//! Nuclei as small spheres, bonds as rods.

use orbend_structure::{BondOrder, Element};

use super::glb::Builder;
use super::gltf::{Material, Node};
use super::place::between;
use crate::document::LevelsDocument;

/// Rings of the sphere from pole to pole, and points around it.
const RINGS: u32 = 12;
const AROUND: u32 = 20;
/// Radius of a sphere: this share of the element's covalent radius.
const NUCLEUS: f64 = 0.22;
/// Radius of a rod, Å.
const ROD: f64 = 0.045;

type Solid = (Vec<[f64; 3]>, Vec<[f64; 3]>, Vec<[u32; 3]>);

/// Shapes that several nodes share.
pub(super) struct Shapes {
    /// Symbol and the mesh of its sphere.
    spheres: Vec<(String, usize)>,
    rod: Option<usize>,
}

impl Shapes {
    pub(super) fn new() -> Self {
        Self {
            spheres: Vec::new(),
            rod: None,
        }
    }

    /// Nodes of the atoms (`F2`) and of the bonds (`Si1-F2`).
    pub(super) fn molecule(
        &mut self,
        builder: &mut Builder,
        document: &LevelsDocument,
        positions: &[[f64; 3]],
        bonds: &[(usize, usize)],
    ) -> Vec<usize> {
        let elements = &document.molecule.elements;
        let name = |atom: usize| format!("{}{}", elements[atom], atom + 1);
        let mut nodes = Vec::new();
        for (atom, (symbol, &at)) in elements.iter().zip(positions).enumerate() {
            let mesh = self.sphere(builder, symbol);
            nodes.push(builder.node(Node {
                translation: Some(at),
                scale: Some([radius(symbol); 3]),
                ..Node::of_mesh(&name(atom), mesh)
            }));
        }
        for &(a, b) in bonds {
            let (Some(&from), Some(&to)) = (positions.get(a), positions.get(b)) else {
                continue;
            };
            let mesh = self.rod(builder);
            nodes.push(builder.node(Node {
                matrix: Some(between(from, to, ROD)),
                ..Node::of_mesh(&format!("{}-{}", name(a), name(b)), mesh)
            }));
        }
        nodes
    }

    fn sphere(&mut self, builder: &mut Builder, symbol: &str) -> usize {
        if let Some((_, mesh)) = self.spheres.iter().find(|(known, _)| known == symbol) {
            return *mesh;
        }
        let material = builder.material(Material::new(symbol, colour(symbol)));
        let (vertices, normals, triangles) = sphere();
        let mesh = builder.mesh(symbol, &vertices, &normals, &triangles, material);
        self.spheres.push((symbol.to_owned(), mesh));
        mesh
    }

    fn rod(&mut self, builder: &mut Builder) -> usize {
        if let Some(mesh) = self.rod {
            return mesh;
        }
        let material = builder.material(Material::new("bond", [0.35, 0.36, 0.38, 1.0]));
        let (vertices, normals, triangles) = rod();
        let mesh = builder.mesh("bond", &vertices, &normals, &triangles, material);
        self.rod = Some(mesh);
        mesh
    }
}

fn radius(symbol: &str) -> f64 {
    Element::from_symbol(symbol)
        .and_then(|element| element.covalent_radius(BondOrder::Single))
        .map_or(0.2, |radius| NUCLEUS * radius.0)
}

/// Linear red, green, blue and opacity: metals grey, other elements by their electrons outside the
/// noble-gas core.
fn colour(symbol: &str) -> [f64; 4] {
    let element = Element::from_symbol(symbol);
    let outer = match element {
        Some(element) if element.is_transition_metal() || element.number() == 1 => 0,
        Some(element) => element.outer_electrons(),
        None => 0,
    };
    let [r, g, b] = match outer {
        3 => [0.62, 0.31, 0.22],
        4 => [0.09, 0.10, 0.11],
        5 => [0.06, 0.16, 0.60],
        6 => [0.64, 0.05, 0.04],
        7 => [0.72, 0.55, 0.05],
        _ if element.is_some_and(|element| element.number() == 1) => [0.85, 0.85, 0.86],
        _ => [0.38, 0.42, 0.47],
    };
    [r, g, b, 1.0]
}

/// The unit sphere.
fn sphere() -> Solid {
    let mut vertices = vec![[0.0, 0.0, 1.0]];
    for ring in 1..RINGS {
        let polar = core::f64::consts::PI * f64::from(ring) / f64::from(RINGS);
        for step in 0..AROUND {
            let turn = core::f64::consts::TAU * f64::from(step) / f64::from(AROUND);
            let (across, up) = (libm::sin(polar), libm::cos(polar));
            vertices.push([across * libm::cos(turn), across * libm::sin(turn), up]);
        }
    }
    vertices.push([0.0, 0.0, -1.0]);
    let last = vertices.len() as u32 - 1;
    let at = |ring: u32, step: u32| 1 + ring * AROUND + step % AROUND;
    let mut triangles = Vec::new();
    for step in 0..AROUND {
        triangles.push([0, at(0, step), at(0, step + 1)]);
        triangles.push([last, at(RINGS - 2, step + 1), at(RINGS - 2, step)]);
        for ring in 0..RINGS - 2 {
            let (a, b) = (at(ring, step), at(ring, step + 1));
            let (c, d) = (at(ring + 1, step), at(ring + 1, step + 1));
            triangles.push([a, c, d]);
            triangles.push([a, d, b]);
        }
    }
    (vertices.clone(), vertices, triangles)
}

/// The mantle of a rod of radius and height 1 along z.
fn rod() -> Solid {
    let (mut vertices, mut normals, mut triangles) = (Vec::new(), Vec::new(), Vec::new());
    for step in 0..AROUND {
        let turn = core::f64::consts::TAU * f64::from(step) / f64::from(AROUND);
        let (x, y) = (libm::cos(turn), libm::sin(turn));
        for height in [0.0, 1.0] {
            vertices.push([x, y, height]);
            normals.push([x, y, 0.0]);
        }
        let (here, next) = (2 * step, 2 * ((step + 1) % AROUND));
        triangles.push([here, next, next + 1]);
        triangles.push([here, next + 1, here + 1]);
    }
    (vertices, normals, triangles)
}
