//! Surfaces against closed forms.

use core::f64::consts::PI;

use orbend_hamiltonian::{Method, ParameterSet};
use orbend_structure::{Angstrom, Bohr, Element, Molecule};

use super::*;
use crate::request::Request;

fn atom(symbol: &str) -> Basis {
    let element = Element::from_symbol(symbol).unwrap();
    Basis::new(&[element], &ParameterSet::default(), &Method::default()).unwrap()
}

/// The radius (bohr) of the sphere that holds a share of a 1s density: 1 − e^(−x)(1 + x + x²/2) at
/// x = 2ζr, by bisection.
fn radius_of_1s(zeta: f64, share: f64) -> f64 {
    let (mut low, mut high) = (0.0, 60.0);
    for _ in 0..100 {
        let x: f64 = 0.5 * (low + high);
        if 1.0 - (-x).exp() * (1.0 + x + x * x / 2.0) < share {
            low = x;
        } else {
            high = x;
        }
    }
    low / (2.0 * zeta)
}

#[test]
fn a_1s_orbital_has_a_sphere_of_known_radius_and_volume() {
    let basis = atom("H");
    let zeta = basis.shells[0].terms[0].0;
    for share in [0.1, 0.5, 0.8, 0.95] {
        let surface = orbital_surface(&basis, &[1.0], &[[0.3, -0.2, 0.1]], share).unwrap();
        let expected = Angstrom::from(Bohr(radius_of_1s(zeta, share))).0;
        let mesh = &surface.positive;
        assert!(mesh.is_closed() && surface.negative.triangles.is_empty());
        let radii: Vec<f64> = mesh
            .vertices
            .iter()
            .map(|at| {
                let away = [at[0] - 0.3, at[1] + 0.2, at[2] - 0.1];
                away.iter().map(|c| c * c).sum::<f64>().sqrt()
            })
            .collect();
        let (least, most) = radii
            .iter()
            .fold((f64::INFINITY, 0.0_f64), |(a, b), r| (a.min(*r), b.max(*r)));
        // All on one sphere, which is the right one as far as the lattice tells the share.
        assert!(most - least < 1e-9, "{share}: {least} to {most}");
        assert!(
            (most / expected - 1.0).abs() < 2e-3,
            "{share}: {most} {expected}"
        );
        // Flat triangles inscribed in a sphere hold a little less than it.
        let volume = mesh.volume() / (4.0 / 3.0 * PI * most.powi(3));
        assert!(volume > 0.995 && volume < 1.0, "{share}: {volume}");
        let area = mesh.area() / (4.0 * PI * most * most);
        assert!(area > 0.995 && area < 1.0, "{share}: {area}");
        for (at, normal) in mesh.vertices.iter().zip(&mesh.normals) {
            let along =
                (at[0] - 0.3) * normal[0] + (at[1] + 0.2) * normal[1] + (at[2] - 0.1) * normal[2];
            assert!((along / most - 1.0).abs() < 1e-9);
        }
    }
}

#[test]
fn the_phases_of_a_2p_orbital_mirror_each_other() {
    let basis = atom("F");
    let shell = basis.shells.iter().find(|shell| shell.l == 1).unwrap();
    let mut coefficients = vec![0.0; basis.functions.len()];
    coefficients[shell.first] = 1.0;
    let surface = orbital_surface(&basis, &coefficients, &[[0.0; 3]], 0.8).unwrap();
    let (up, down) = (&surface.positive, &surface.negative);
    assert!(up.is_closed() && down.is_closed());
    assert!(up.vertices.iter().all(|at| at[2] > 0.0));
    assert!(down.vertices.iter().all(|at| at[2] < 0.0));
    assert!((up.volume() / down.volume() - 1.0).abs() < 1e-3);
}

/// Closed phases, vertices on the isovalue, and the share recomputed on another lattice.
fn check(elements: &[&str], positions: &[[f64; 3]], share: f64) {
    let elements = elements
        .iter()
        .map(|symbol| Element::from_symbol(symbol).unwrap())
        .collect();
    let molecule = Molecule::new(elements, positions.to_vec(), 0, None, "").unwrap();
    let sweep = Request::new(molecule).run().unwrap();
    let positions = sweep.point(0).unwrap().positions;
    let orbitals = sweep.orbitals(0).unwrap();
    for line in 0..sweep.plan().lines().len() {
        let surface = sweep.surface(line, 0, share).unwrap();
        let row = orbitals.coefficients.row(line).to_vec();
        let field = OrbitalField::new(sweep.plan().basis(), &row, &positions);
        for (mesh, sign) in [(&surface.positive, 1.0), (&surface.negative, -1.0)] {
            assert!(mesh.is_closed());
            for &at in &mesh.vertices {
                let value = sign * field.value(at) / surface.isovalue;
                assert!((value - 1.0).abs() < 1e-6, "line {line}: {value}");
            }
        }
        let volume = surface.positive.volume() + surface.negative.volume();
        assert!(volume > 0.0);
        let inside = inside(&field, surface.isovalue);
        assert!((inside - share).abs() < 4e-3, "line {line}: {inside}");
    }
}

/// ∫ψ² where |ψ| ≥ v, on a lattice of its own.
fn inside(field: &OrbitalField, isovalue: f64) -> f64 {
    let step = 0.11;
    let (low, high) = field.reach(1e-3);
    let count = |k: usize| ((high[k] - low[k]) / step) as usize + 1;
    let mut sum = 0.0;
    for x in 0..count(0) {
        for y in 0..count(1) {
            for z in 0..count(2) {
                let at = [
                    low[0] + step * (x as f64 + 0.37),
                    low[1] + step * (y as f64 + 0.71),
                    low[2] + step * (z as f64 + 0.13),
                ];
                let value = field.value(at);
                if value.abs() >= isovalue {
                    sum += value * value;
                }
            }
        }
    }
    sum * Bohr::from(Angstrom(step)).0.powi(3)
}

#[test]
fn every_orbital_of_silicon_difluoride_is_closed_and_holds_its_share() {
    let at = [[0.0, 0.0, 0.0], [0.0, 1.22, 1.02], [0.0, -1.22, 1.02]];
    check(&["Si", "F", "F"], &at, 0.8);
}

#[test]
fn shares_and_lines_that_cannot_be() {
    let basis = atom("H");
    for share in [0.0, 1.0, -0.5, f64::NAN, 80.0] {
        let error = orbital_surface(&basis, &[1.0], &[[0.0; 3]], share).unwrap_err();
        assert!(error.to_string().contains("from 0.01 to 0.99"));
    }
    let atom = Molecule::new(
        vec![Element::from_symbol("H").unwrap()],
        vec![[0.0; 3]],
        0,
        None,
        "",
    )
    .unwrap();
    let sweep = Request::new(atom).run().unwrap();
    let error = sweep.surface(7, 0, 0.8).unwrap_err().to_string();
    assert_eq!(error, "there is no line 7, the last one is 0");
}

#[test]
fn an_open_mesh_is_not_closed() {
    let corners = vec![[0.0; 3], [1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]];
    let mut mesh = Mesh {
        normals: corners.clone(),
        vertices: corners,
        triangles: vec![[0, 2, 1], [0, 1, 3], [0, 3, 2], [1, 2, 3]],
    };
    assert!(mesh.is_closed());
    assert!((mesh.volume() - 1.0 / 6.0).abs() < 1e-15);
    mesh.triangles.pop();
    assert!(!mesh.is_closed());
    mesh.triangles.push([1, 3, 2]);
    assert!(!mesh.is_closed());
}
