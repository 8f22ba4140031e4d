//! How the functions of an atom turn when the atoms move: with the bonds of the atom.
//!
//! A p function of a ligand that swings about its centre stays the function along the bond; that
//! of a CH₂ group turns with the group. What a ledger says of pairs of orbitals depends on this
//! choice, the sums do not: functions turned on their own atoms span the same shells.

use nalgebra::{Matrix3, Rotation3, Unit, Vector3};
use ndarray::Array2;
use orbend_hamiltonian::Basis;
use orbend_overlap::harmonics;
use orbend_structure::BondGraph;

/// Singular values smaller than this share of the largest are none: the bonds lie in line.
const IN_LINE: f64 = 1e-6;

/// The neighbours of every atom.
fn neighbours(graph: &BondGraph, atoms: usize) -> Vec<Vec<usize>> {
    (0..atoms)
        .map(|atom| graph.neighbours(atom).to_vec())
        .collect()
}

fn bond(positions: &[[f64; 3]], from: usize, to: usize) -> Vector3<f64> {
    let [a, b] = [positions[from], positions[to]].map(Vector3::from);
    b - a
}

/// T (n × n, orthogonal, one block per shell): coefficients T c are those of an orbital c whose
/// functions have turned with the bonds of their atoms from the first geometry to the second. The
/// rotation of an atom is the one that lays the directions of its bonds onto the new ones with
/// the least squares (Kabsch, Acta Cryst. A 32, 922 (1976)); where they lie in line, the smallest.
pub(crate) fn turns(
    basis: &Basis,
    graph: &BondGraph,
    from: &[[f64; 3]],
    to: &[[f64; 3]],
) -> Array2<f64> {
    let n = basis.functions.len();
    let mut out = Array2::zeros((n, n));
    for (atom, list) in neighbours(graph, from.len()).iter().enumerate() {
        let mut outer = Matrix3::zeros();
        for &other in list {
            let (old, new) = (bond(from, atom, other), bond(to, atom, other));
            outer += new.normalize() * old.normalize().transpose();
        }
        put(basis, atom, &mut out, |l| {
            let q = nearest_rotation(&outer);
            let rows = [0, 1, 2].map(|i| [0, 1, 2].map(|j| q[(i, j)]));
            harmonics::rotation(l, &rows)
        });
    }
    out
}

/// The rotation Q with the largest trace of Qᵀ M.
fn nearest_rotation(m: &Matrix3<f64>) -> Matrix3<f64> {
    let Some(svd) = m.try_svd(true, true, 1e-15, 200) else {
        return Matrix3::identity();
    };
    let (Some(u), Some(v_t)) = (svd.u, svd.v_t) else {
        return Matrix3::identity();
    };
    let values = svd.singular_values;
    let mut order = [0, 1, 2];
    order.sort_by(|&a: &usize, &b: &usize| values[b].total_cmp(&values[a]));
    let [first, second, third] = order;
    if values[second] <= IN_LINE * values[first].max(1e-300) {
        if values[first] < 1e-12 {
            return Matrix3::identity();
        }
        let (old, new) = (v_t.row(first).transpose(), u.column(first).into_owned());
        return Rotation3::rotation_between(&old, &new)
            .map_or_else(Matrix3::identity, |rotation| *rotation.matrix());
    }
    let mut signs = Matrix3::identity();
    signs[(third, third)] = (u * v_t).determinant().signum();
    u * signs * v_t
}

/// dT along a motion: the antisymmetric generator of [`turns`] at the geometry itself, from the
/// angular velocity of each atom's bonds.
pub(crate) fn turning(
    basis: &Basis,
    graph: &BondGraph,
    positions: &[[f64; 3]],
    speeds: &[[f64; 3]],
) -> Array2<f64> {
    let n = basis.functions.len();
    let mut out = Array2::zeros((n, n));
    for (atom, list) in neighbours(graph, positions.len()).iter().enumerate() {
        let mut inertia = Matrix3::zeros();
        let mut torque = Vector3::zeros();
        for &other in list {
            let arm = bond(positions, atom, other);
            let (length, speed) = (arm.norm(), bond(speeds, atom, other));
            let unit = arm / length;
            inertia += Matrix3::identity() - unit * unit.transpose();
            torque += unit.cross(&(speed / length));
        }
        // In line there is no turning about the line itself.
        if let Some(&other) = list.first() {
            let unit = bond(positions, atom, other).normalize();
            if inertia.determinant().abs() < IN_LINE {
                inertia += unit * unit.transpose();
                torque -= unit * unit.dot(&torque);
            }
        }
        let velocity = inertia
            .try_inverse()
            .map_or_else(Vector3::zeros, |inverse| inverse * torque);
        put(basis, atom, &mut out, |l| generator(l, velocity));
    }
    out
}

/// d/dt at 0 of the matrix of the rotation by ω t on the harmonics of l. Its elements are
/// trigonometric polynomials of degree ≤ 3 in the angle, whose derivative eight equally spaced
/// values give exactly: f′(0) = −Σ ½ (−1)^k cot(kπ/8) f(2πk/8).
fn generator(l: u8, velocity: Vector3<f64>) -> [[f64; 7]; 7] {
    let mut out = [[0.0; 7]; 7];
    let speed = velocity.norm();
    if speed < 1e-300 {
        return out;
    }
    let axis = Unit::new_normalize(velocity);
    for k in 1..8_u8 {
        let half = f64::from(k) * std::f64::consts::PI / 8.0;
        let q = Rotation3::from_axis_angle(&axis, 2.0 * half);
        let rows = [0, 1, 2].map(|i| [0, 1, 2].map(|j| q[(i, j)]));
        let sign = if k % 2 == 0 { -0.5 } else { 0.5 };
        let weight = speed * sign * libm::cos(half) / libm::sin(half);
        let turned = harmonics::rotation(l, &rows);
        for (row, from) in out.iter_mut().zip(&turned) {
            for (target, value) in row.iter_mut().zip(from) {
                *target += weight * value;
            }
        }
    }
    out
}

/// Writes the blocks of all shells of an atom.
fn put(basis: &Basis, atom: usize, out: &mut Array2<f64>, block: impl Fn(u8) -> [[f64; 7]; 7]) {
    for shell in &basis.shells[basis.atoms[atom].shells.clone()] {
        let matrix = block(shell.l);
        for i in 0..2 * usize::from(shell.l) + 1 {
            for j in 0..2 * usize::from(shell.l) + 1 {
                out[[shell.first + i, shell.first + j]] = matrix[i][j];
            }
        }
    }
}
