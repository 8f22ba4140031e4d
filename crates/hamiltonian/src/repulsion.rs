//! The pair repulsion of neutral atoms, with its derivative, both in closed form.

use orbend_structure::{Angstrom, Bohr, HARTREE_IN_EV};

use crate::basis::Basis;

/// The electrostatic energy of each pair of neutral atoms, to be added to Σ nᵢεᵢ where asked for.
///
/// Anderson & Hoffmann, J. Chem. Phys. 60, 4271 (1974) (from memory): the energy of the nucleus of
/// one atom in the field of the other, neutral atom,
/// E(AB) = Z_B [Z_A/R − ∫ρ_A(r)/|R_B − r| dr]. It differs with the choice of the nucleus; here the
/// mean of both choices is taken, as in Calzaferri, Forss & Kamber, J. Phys. Chem. 93, 5366 (1989)
/// (from memory), so that no order of the two atoms matters.
///
/// Z counts the valence electrons that the basis holds (core and nucleus are one point charge); ρ is
/// the spherical mean over the ground-state occupation of the atom's shells, from the exponents of
/// the basis.
///
/// # The closed form
/// The charge of one electron in r^(n−1)e^(−ζr), normalised, is (2ζ)^(2n+1)/(2n)! r^(2n−2)e^(−2ζr)/4π.
/// The part inside R acts from the centre, the part outside as 1/r; both integrals are incomplete
/// gamma functions of integer order, and with x = 2ζR
///
/// V(R) = [1 − g(x)]/R,  g(x) = e^(−x) Σₖ (1 − k/2n) xᵏ/k!,  k = 0 … 2n−1.
///
/// For 1s that is the known 1/R − e^(−2ζR)(ζ + 1/R). The 1/R cancels against the nucleus, so that
/// E(AB) = (Z_B G_A + Z_A G_B)/2R, G the sum of g over the electrons: positive and short-ranged.
/// The derivative is g′(x) = −e^(−x)/2n Σₖ xᵏ/k!, k = 0 … 2n−1. A product of two different functions
/// of a double-ζ shell is one more charge of this kind, with the mean exponent.
#[derive(Clone, Debug, PartialEq)]
pub struct PairRepulsion {
    atoms: Vec<Charge>,
}

/// The valence charge of one neutral atom.
#[derive(Clone, Debug, PartialEq)]
struct Charge {
    /// Z: valence electrons, core and nucleus together.
    core: f64,
    parts: Vec<Part>,
}

#[derive(Clone, Debug, PartialEq)]
struct Part {
    electrons: f64,
    /// 2n.
    terms: u32,
    /// 2ζ, bohr⁻¹.
    decay: f64,
}

impl PairRepulsion {
    /// The charges of the atoms of a basis; no geometry is needed.
    pub fn new(basis: &Basis) -> Self {
        let atoms = basis.atoms.iter().map(|atom| {
            let mut parts = Vec::new();
            for occupied in atom.element.occupied_shells() {
                let shells = &basis.shells[atom.shells.clone()];
                let shell = shells
                    .iter()
                    .find(|shell| (shell.n, shell.l) == (occupied.n, occupied.l));
                if let Some(shell) = shell {
                    let electrons = f64::from(occupied.electrons);
                    add_shell(&mut parts, shell.n, electrons, &shell.terms);
                }
            }
            Charge {
                core: f64::from(atom.valence_electrons),
                parts,
            }
        });
        Self {
            atoms: atoms.collect(),
        }
    }

    /// Number of atoms.
    pub fn len(&self) -> usize {
        self.atoms.len()
    }

    /// Whether there are no atoms.
    pub fn is_empty(&self) -> bool {
        self.atoms.is_empty()
    }

    /// The energy (eV) of two atoms (from 0) at a distance in Å, and its derivative, eV Å⁻¹.
    ///
    /// # Panics
    /// If there is no such atom.
    pub fn pair(&self, first: usize, second: usize, distance: Angstrom) -> (f64, f64) {
        let r = Bohr::from(distance).0;
        let (a, b) = (&self.atoms[first], &self.atoms[second]);
        let (of_a, slope_a) = a.outside(r);
        let (of_b, slope_b) = b.outside(r);
        let energy = 0.5 * (b.core * of_a + a.core * of_b) / r;
        let slope = 0.5 * (b.core * slope_a + a.core * slope_b) / r - energy / r;
        let per_angstrom = Bohr::from(Angstrom(1.0)).0;
        (energy * HARTREE_IN_EV, slope * HARTREE_IN_EV * per_angstrom)
    }

    /// Sum over all pairs, eV, at positions in Å.
    ///
    /// # Panics
    /// If there are fewer positions than atoms.
    pub fn energy(&self, positions_angstrom: &[[f64; 3]]) -> f64 {
        let mut sum = 0.0;
        self.each_pair(positions_angstrom, |_, _, _, energy, _| sum += energy);
        sum
    }

    /// The sum (eV); `gradient` is overwritten with its derivatives, eV Å⁻¹, one vector per atom.
    ///
    /// # Panics
    /// If there are fewer positions or gradients than atoms.
    pub fn energy_and_gradient(
        &self,
        positions_angstrom: &[[f64; 3]],
        gradient: &mut [[f64; 3]],
    ) -> f64 {
        gradient.fill([0.0; 3]);
        let mut sum = 0.0;
        self.each_pair(positions_angstrom, |a, b, direction, energy, slope| {
            sum += energy;
            for axis in 0..3 {
                gradient[a][axis] -= slope * direction[axis];
                gradient[b][axis] += slope * direction[axis];
            }
        });
        sum
    }

    /// Calls with both atoms, the direction from the first to the second, energy and slope.
    fn each_pair(
        &self,
        positions: &[[f64; 3]],
        mut visit: impl FnMut(usize, usize, [f64; 3], f64, f64),
    ) {
        for second in 0..self.atoms.len() {
            for first in 0..second {
                let apart: [f64; 3] =
                    std::array::from_fn(|axis| positions[second][axis] - positions[first][axis]);
                let distance = apart.iter().map(|x| x * x).sum::<f64>().sqrt();
                let (energy, slope) = self.pair(first, second, Angstrom(distance));
                visit(first, second, apart.map(|x| x / distance), energy, slope);
            }
        }
    }
}

fn add_shell(parts: &mut Vec<Part>, n: u8, electrons: f64, terms: &[(f64, f64)]) {
    for &(zeta_i, c_i) in terms {
        for &(zeta_j, c_j) in terms {
            let base = 2.0 * (zeta_i * zeta_j).sqrt() / (zeta_i + zeta_j);
            // A plain product: `powi` may differ between machines.
            let overlap = (0..2 * u32::from(n) + 1).fold(1.0, |product, _| product * base);
            parts.push(Part {
                electrons: electrons * c_i * c_j * overlap,
                terms: 2 * u32::from(n),
                decay: zeta_i + zeta_j,
            });
        }
    }
}

impl Charge {
    /// G = Σ electrons g(2ζR) and dG/dR at R in bohr.
    fn outside(&self, r: f64) -> (f64, f64) {
        let (mut value, mut slope) = (0.0, 0.0);
        for part in &self.parts {
            let (x, count) = (part.decay * r, f64::from(part.terms));
            let (mut power, mut weighted, mut plain) = (1.0, 0.0, 0.0);
            for k in 0..part.terms {
                if k > 0 {
                    power *= x / f64::from(k);
                }
                weighted += (1.0 - f64::from(k) / count) * power;
                plain += power;
            }
            let decay = part.electrons * libm::exp(-x);
            value += decay * weighted;
            slope -= decay * plain * part.decay / count;
        }
        (value, slope)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::method::Method;
    use crate::parameters::ParameterSet;
    use orbend_structure::Element;

    fn repulsion(symbols: &[&str]) -> PairRepulsion {
        let elements: Vec<Element> = symbols
            .iter()
            .map(|symbol| Element::from_symbol(symbol).unwrap())
            .collect();
        PairRepulsion::new(
            &Basis::new(&elements, &ParameterSet::default(), &Method::default()).unwrap(),
        )
    }

    /// The 1s form and two numbers worked out by quadrature of the charge in shells.
    #[test]
    fn the_closed_form_against_the_integral() {
        for (n, zeta, r) in [
            (1_u8, 1.3, 1.4),
            (2, 1.625, 2.3),
            (3, 2.1, 1.1),
            (5, 2.4, 4.0),
        ] {
            let mut parts = Vec::new();
            add_shell(&mut parts, n, 1.0, &[(zeta, 1.0)]);
            let charge = Charge { core: 1.0, parts };
            // Midpoints: charge of a shell, seen as 1/max(r, R).
            let mut potential = 0.0;
            let (steps, top) = (400_000, 30.0);
            let factorial: f64 = (1..=2 * u32::from(n)).map(f64::from).product();
            let norm = (2.0 * zeta).powi(2 * i32::from(n) + 1) / factorial;
            for step in 0..steps {
                let at = (f64::from(step) + 0.5) * top / f64::from(steps);
                let shell = norm * at.powi(2 * i32::from(n)) * (-2.0 * zeta * at).exp();
                potential += shell / at.max(r) * top / f64::from(steps);
            }
            let (outside, slope) = charge.outside(r);
            assert!(
                ((1.0 - outside) / r - potential).abs() < 1e-7,
                "{n} {potential}"
            );
            let around = |r| charge.outside(r).0;
            let numeric = (around(r + 1e-5) - around(r - 1e-5)) / 2e-5;
            assert!((slope - numeric).abs() < 1e-8, "{n} {slope} {numeric}");
        }
        let mut parts = Vec::new();
        add_shell(&mut parts, 1, 1.0, &[(1.3, 1.0)]);
        let (outside, _) = Charge { core: 1.0, parts }.outside(1.4);
        let known = 1.4 * (-2.6_f64 * 1.4).exp() * (1.3 + 1.0 / 1.4);
        assert!((outside - known).abs() < 1e-15);
    }

    /// The gradient is the derivative, adds up to nothing, and double-ζ shells are among the cases.
    #[test]
    fn the_gradient_is_the_derivative() {
        let start = [
            [0.1, 0.0, -0.2],
            [0.0, 1.1, 1.0],
            [1.3, -0.9, 0.8],
            [-1.2, -0.7, 0.6],
        ];
        let repulsion = repulsion(&["Fe", "O", "H", "Cl"]);
        let mut gradient = [[0.0; 3]; 4];
        let energy = repulsion.energy_and_gradient(&start, &mut gradient);
        assert!((energy - repulsion.energy(&start)).abs() < 1e-12 && energy > 0.0);
        for axis in 0..3 {
            let total: f64 = gradient.iter().map(|atom| atom[axis]).sum();
            assert!(total.abs() < 1e-12);
            for atom in 0..4 {
                let moved = |by: f64| {
                    let mut positions = start;
                    positions[atom][axis] += by;
                    repulsion.energy(&positions)
                };
                let numeric = (moved(1e-5) - moved(-1e-5)) / 2e-5;
                assert!((gradient[atom][axis] - numeric).abs() < 1e-7);
            }
        }
    }

    /// Each charge is neutral: the energy dies faster than any power, and rises as Z Z/R inwards.
    #[test]
    fn short_range_and_bare_cores() {
        let pair = repulsion(&["F", "Si"]);
        assert!(pair.pair(0, 1, Angstrom(12.0)).0.abs() < 1e-6);
        let (close, slope) = pair.pair(0, 1, Angstrom(1e-3));
        let bare = 7.0 * 4.0 / Bohr::from(Angstrom(1e-3)).0 * HARTREE_IN_EV;
        assert!(
            (close / bare - 1.0).abs() < 5e-3 && slope < 0.0,
            "{close} {bare}"
        );
        let swapped = repulsion(&["Si", "F"]).pair(0, 1, Angstrom(1.6));
        assert!((pair.pair(0, 1, Angstrom(1.6)).0 - swapped.0).abs() < 1e-12);
    }
}
