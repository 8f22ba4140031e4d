//! Orbitals on a plane: which plane shows most of one, and its values there.

use orbend_hamiltonian::Basis;
use orbend_structure::{BondGraph, Molecule};

use crate::error::ScanError;
use crate::field::OrbitalField;
use crate::sweep::Sweep;

/// A plane through the molecule, in Å. The three directions are orthonormal and right-handed.
#[derive(Clone, Debug, PartialEq)]
pub struct Plane {
    /// The point in the middle of the picture.
    pub origin: [f64; 3],
    /// To the right.
    pub right: [f64; 3],
    /// Upwards.
    pub up: [f64; 3],
    /// What the plane is, in words.
    pub words: String,
    /// Whether it lies beside the middle of the atoms.
    pub lifted: bool,
}

/// Values of an orbital on a square lattice of a plane.
#[derive(Clone, Debug)]
pub struct PlaneValues {
    /// Points along an edge.
    pub points: usize,
    /// Half the edge, Å.
    pub half: f64,
    /// ψ in bohr^(−3/2), row by row from the top, each from the left.
    pub values: Vec<f64>,
}

impl PlaneValues {
    /// Values of an orbital around the origin of a plane.
    fn new(
        (basis, coefficients, positions): (&Basis, &[f64], &[[f64; 3]]),
        plane: &Plane,
        (half, points): (f64, usize),
    ) -> Self {
        let field = OrbitalField::new(basis, coefficients, positions);
        let step = 2.0 * half / (points.max(2) - 1) as f64;
        let mut values = Vec::with_capacity(points * points);
        for row in 0..points {
            for column in 0..points {
                let (across, upward) = (column as f64 * step - half, half - row as f64 * step);
                let at = core::array::from_fn(|k| {
                    plane.origin[k] + across * plane.right[k] + upward * plane.up[k]
                });
                values.push(field.value(at));
            }
        }
        Self {
            points,
            half,
            values,
        }
    }

    /// Σψ².
    fn content(&self) -> f64 {
        self.values.iter().map(|value| value * value).sum()
    }
}

/// One orbital at one geometry, cut by a plane.
#[derive(Clone, Debug)]
pub struct OrbitalPicture {
    /// The plane.
    pub plane: Plane,
    /// ψ on it.
    pub values: PlaneValues,
    /// The nuclei from the origin: right, up and out of the plane, Å.
    pub nuclei: Vec<[f64; 3]>,
    /// Atoms joined by bonds, counted from 0.
    pub bonds: Vec<(usize, usize)>,
}

impl Sweep {
    /// Pictures of all lines at a point, in the order of the lines, with so many points along an edge.
    /// The plane of each is chosen by rule: of a molecule that stays flat the plane of the atoms, or
    /// 0.5 Å above it for an orbital that vanishes there; of any other the one of three planes through
    /// the middle of the atoms, along the main axes of their positions, in which ∫ψ² is largest (the
    /// widest one where no other has 5 % more).
    ///
    /// # Errors
    /// As for the run itself.
    pub fn pictures(&self, point: usize, points: usize) -> Result<Vec<OrbitalPicture>, ScanError> {
        let orbitals = self.orbitals(point)?;
        let positions = self.point(point)?.positions;
        let last = self.points() - 1;
        let geometries = [0, last / 2, last, point]
            .into_iter()
            .map(|index| Ok(self.point(index)?.positions))
            .collect::<Result<Vec<_>, ScanError>>()?;
        let frame = Frame::of(&geometries);
        let mut molecule = self.plan().molecule().clone();
        molecule.positions.clone_from(&positions);
        let bonds = BondGraph::new(&molecule).bonds();
        let half = frame.reach + 2.0;
        Ok((0..self.plan().lines().len())
            .map(|line| {
                let row = orbitals.coefficients.row(line).to_vec();
                let orbital = (self.plan().basis(), row.as_slice(), positions.as_slice());
                let mut plane =
                    frame.best(|plane| PlaneValues::new(orbital, plane, (half, 24)).content());
                let nuclei: Vec<[f64; 3]> = positions
                    .iter()
                    .map(|at| {
                        let away = core::array::from_fn(|k| at[k] - plane.origin[k]);
                        [plane.right, plane.up, cross(plane.right, plane.up)]
                            .map(|axis| dot(away, axis))
                    })
                    .collect();
                if !frame.flat && !plane.lifted {
                    plane.words.push_str(&frame.through(&molecule, &plane));
                }
                OrbitalPicture {
                    values: PlaneValues::new(orbital, &plane, (half, points)),
                    plane,
                    nuclei,
                    bonds: bonds.clone(),
                }
            })
            .collect())
    }
}

/// The main axes of the positions, the longest first.
struct Frame {
    middle: [f64; 3],
    axes: [[f64; 3]; 3],
    flat: bool,
    reach: f64,
    /// Positions from the middle, geometry after geometry.
    away: Vec<[f64; 3]>,
}

impl Frame {
    /// The axes of all geometries together, so that pictures along a path do not turn; the middle of
    /// the last one.
    fn of(geometries: &[Vec<[f64; 3]>]) -> Self {
        let mut middle = [0.0; 3];
        let mut away: Vec<[f64; 3]> = Vec::new();
        for positions in geometries {
            let count = positions.len().max(1) as f64;
            middle =
                core::array::from_fn(|k| positions.iter().map(|at| at[k]).sum::<f64>() / count);
            away.extend(
                positions
                    .iter()
                    .map(|at| core::array::from_fn(|k| at[k] - middle[k])),
            );
        }
        let spread = nalgebra::Matrix3::from_fn(|i, j| {
            away.iter().map(|d: &[f64; 3]| d[i] * d[j]).sum::<f64>()
        });
        let found = spread.symmetric_eigen();
        let mut order = [0, 1, 2];
        order.sort_by(|&a, &b| {
            found.eigenvalues[b]
                .total_cmp(&found.eigenvalues[a])
                .then(a.cmp(&b))
        });
        let size = |k: usize| found.eigenvalues[order[k]];
        let axis = |k: usize| -> [f64; 3] {
            upward(core::array::from_fn(|i| found.eigenvectors[(i, order[k])]))
        };
        let (mut right, mut out) = (axis(0), axis(2));
        let equal = 1e-6 * size(0).max(1e-9);
        // Where two axes are equal the first atom off the third one decides.
        if size(1) - size(2) < equal {
            let up = aside(&away, right).unwrap_or_else(|| axis(1));
            out = cross(right, up);
        } else if size(0) - size(1) < equal {
            right = aside(&away, out).unwrap_or(right);
        }
        let up = upward(cross(out, right));
        let out = cross(right, up);
        let reach = away.iter().map(|d| dot(*d, *d).sqrt()).fold(0.0, f64::max);
        let flat = away.iter().all(|d| dot(*d, out).abs() < 0.05);
        Self {
            middle,
            axes: [right, up, out],
            flat,
            reach,
            away,
        }
    }

    /// The plane that shows most of an orbital; `content` is ∫ψ² in a plane.
    fn best(&self, content: impl Fn(&Plane) -> f64) -> Plane {
        let [u, v, w] = self.axes;
        let plane = |height: f64, [right, up]: [[f64; 3]; 2], words: &str| {
            let out = cross(right, up);
            Plane {
                origin: core::array::from_fn(|k| self.middle[k] + height * out[k]),
                right,
                up,
                words: words.to_owned(),
                lifted: height > 0.0,
            }
        };
        if self.flat {
            let inside = plane(0.0, [u, v], "the plane of the atoms");
            let above = plane(0.5, [u, v], "0.5 Å above the plane of the atoms");
            return if content(&inside) <= 0.02 * content(&above) {
                above
            } else {
                inside
            };
        }
        let mut best = plane(0.0, [u, v], "the widest plane");
        let mut found = content(&best);
        for other in [
            plane(0.0, [u, w], "the upright plane"),
            plane(0.0, [v, w], "the upright cross plane"),
        ] {
            let own = content(&other);
            if own > 1.05 * found {
                best = other;
                found = own;
            }
        }
        // An orbital that changes its sign at all three is cut beside them.
        for other in [
            plane(0.5, [u, v], "0.5 Å above the widest plane"),
            plane(0.5, [u, w], "0.5 Å beside the upright plane"),
        ] {
            let own = content(&other);
            if found <= 0.15 * own {
                best = other;
                found = own;
            }
        }
        best
    }

    /// The atoms that stay in a plane through the middle at all geometries, in words:
    /// ` through B1, Cl2`; empty for none or many.
    fn through(&self, molecule: &Molecule, plane: &Plane) -> String {
        let out = cross(plane.right, plane.up);
        let atoms = molecule.positions.len();
        let inside: Vec<String> = (0..atoms)
            .filter(|&atom| {
                let places = self.away.iter().skip(atom).step_by(atoms.max(1));
                places
                    .map(|at| dot(*at, out))
                    .all(|height| height.abs() < 0.05)
            })
            .map(|atom| molecule.atom_name(atom))
            .collect();
        if (1..=4).contains(&inside.len()) {
            format!(" through {}", inside.join(", "))
        } else {
            String::new()
        }
    }
}

/// The direction of the first atom that is off an axis.
fn aside(away: &[[f64; 3]], axis: [f64; 3]) -> Option<[f64; 3]> {
    away.iter().find_map(|&d| {
        let along = dot(d, axis);
        let off: [f64; 3] = core::array::from_fn(|k| d[k] - along * axis[k]);
        let length = dot(off, off).sqrt();
        (length > 0.01).then(|| off.map(|c| c / length))
    })
}

/// The sign that makes the largest component positive.
fn upward(axis: [f64; 3]) -> [f64; 3] {
    let largest = axis
        .iter()
        .copied()
        .fold(0.0_f64, |a, b| if b.abs() > a.abs() + 1e-6 { b } else { a });
    if largest < 0.0 {
        axis.map(|c| -c)
    } else {
        axis
    }
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

#[cfg(test)]
mod tests {
    use orbend_structure::{Angstrom, Bohr};

    use super::*;

    /// ∫ψ² over a cubic lattice by the midpoint rule: coefficients come from C†SC = 1 with the closed
    /// forms of the overlaps, so that values and overlaps check each other.
    #[test]
    fn every_orbital_of_a_molecule_is_normalised_in_space() {
        let formula = orbend_structure::Formula::parse("H2S").unwrap();
        let molecule = orbend_structure::ideal_geometry(&formula, None, &[])
            .unwrap()
            .molecule;
        let sweep = crate::Request::new(molecule).run().unwrap();
        let orbitals = sweep.orbitals(0).unwrap();
        let positions = sweep.point(0).unwrap().positions;
        let (step, half) = (0.16, 4.4);
        let count = (2.0 * half / step) as usize;
        let place = |k: usize| (k as f64 + 0.5) * step - half;
        for line in 0..sweep.plan().lines().len() {
            let row = orbitals.coefficients.row(line).to_vec();
            let field = OrbitalField::new(sweep.plan().basis(), &row, &positions);
            let mut sum = 0.0;
            for x in 0..count {
                for y in 0..count {
                    for z in 0..count {
                        let at = [place(x), place(y), place(z)];
                        let value = field.value(at);
                        sum += value * value;
                    }
                }
            }
            let norm = sum * Bohr::from(Angstrom(step)).0.powi(3);
            assert!((norm - 1.0).abs() < 0.01, "line {line}: {norm}");
        }
    }

    #[test]
    fn planes_and_their_words() {
        let planes = |text: &str, coordinate: &str, kind| -> Vec<String> {
            let formula = orbend_structure::Formula::parse(text).unwrap();
            let molecule = orbend_structure::ideal_geometry(&formula, None, &[])
                .unwrap()
                .molecule;
            let coordinate = orbend_structure::Coordinate::parse(kind, coordinate).unwrap();
            let sweep = crate::Request::new(molecule)
                .coordinate(coordinate)
                .run()
                .unwrap();
            let mut words: Vec<String> = sweep
                .pictures(0, 12)
                .unwrap()
                .into_iter()
                .map(|picture| picture.plane.words)
                .collect();
            words.sort();
            words.dedup();
            words
        };
        let bend = planes(
            "SF2",
            "2-1-3=100..140:20",
            orbend_structure::CoordinateKind::Bend,
        );
        assert_eq!(
            bend,
            [
                "0.5 Å above the plane of the atoms",
                "the plane of the atoms"
            ]
        );
        let pyramid = planes(
            "BCl3",
            "1=100..120:10",
            orbend_structure::CoordinateKind::Pyramid,
        );
        assert!(pyramid.len() > 1, "{pyramid:?}");
        assert!(
            pyramid.iter().all(|words| words.starts_with("the ")),
            "{pyramid:?}"
        );
        assert!(
            pyramid.contains(&"the upright plane through B1, Cl2".to_owned()),
            "{pyramid:?}"
        );
    }

    #[test]
    fn flat_and_linear_molecules_lie_in_the_picture() {
        for positions in [
            vec![[0.0, 0.0, 0.0], [0.0, 0.9, 0.6], [0.0, -0.9, 0.6]],
            vec![[0.0, 0.0, 0.0], [0.0, 0.0, 1.2], [0.0, 0.0, -1.2]],
        ] {
            let frame = Frame::of(&[positions]);
            assert!(frame.flat);
            for (i, j) in [(0, 1), (0, 2), (1, 2)] {
                assert!(dot(frame.axes[i], frame.axes[j]).abs() < 1e-12);
            }
            assert!((dot(frame.axes[2], frame.axes[2]) - 1.0).abs() < 1e-12);
        }
    }
}
