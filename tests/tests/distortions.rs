//! Which geometries distort, and along what, against textbook cases: Jahn & Teller 1937; Renner 1934;
//! Bader 1962; Pearson 1969; Bersuker, The Jahn–Teller Effect (2006) (all from memory).

use orbend_hamiltonian::{Coupling, Method, ParameterSet};
use orbend_scan::Request;
use orbend_scan::reasons::{Distortions, Hint, HintOrder};
use orbend_structure::{Element, Molecule};

fn molecule(atoms: &[(&str, [f64; 3])], charge: i32, unpaired: Option<u32>) -> Molecule {
    Molecule {
        elements: atoms
            .iter()
            .map(|(symbol, _)| Element::from_symbol(symbol).expect("an element"))
            .collect(),
        positions: atoms.iter().map(|(_, position)| *position).collect(),
        charge,
        unpaired,
        title: String::new(),
    }
}

/// Centre with atoms around it at the ends of vectors.
fn around<'a>(
    centre: &'a str,
    other: &'a str,
    length: f64,
    ends: &[[f64; 3]],
) -> Vec<(&'a str, [f64; 3])> {
    let mut all = vec![(centre, [0.0; 3])];
    for end in ends {
        let size = end.iter().map(|x| x * x).sum::<f64>().sqrt();
        all.push((other, end.map(|x| x * length / size)));
    }
    all
}

const LINE: [[f64; 3]; 2] = [[0.0, 0.0, 1.0], [0.0, 0.0, -1.0]];
const TETRAHEDRON: [[f64; 3]; 4] = [
    [1.0, 1.0, 1.0],
    [1.0, -1.0, -1.0],
    [-1.0, 1.0, -1.0],
    [-1.0, -1.0, 1.0],
];
const SQUARE: [[f64; 3]; 4] = [
    [1.0, 0.0, 0.0],
    [-1.0, 0.0, 0.0],
    [0.0, 1.0, 0.0],
    [0.0, -1.0, 0.0],
];

fn triangle() -> Vec<[f64; 3]> {
    let half = 0.75_f64.sqrt();
    vec![[1.0, 0.0, 0.0], [-0.5, half, 0.0], [-0.5, -half, 0.0]]
}

fn octahedron() -> Vec<[f64; 3]> {
    SQUARE.into_iter().chain(LINE).collect()
}

fn distortions(molecule: Molecule) -> Distortions {
    Distortions::new(&Request::new(molecule)).expect("a geometry that can be solved")
}

fn falling(found: &Distortions) -> Vec<&Hint> {
    found.hints.iter().filter(|hint| hint.trial.falls).collect()
}

/// (order, irrep of the vibration, group of the displaced geometry) of those that fall.
fn told(found: &Distortions) -> Vec<(HintOrder, &str, &str)> {
    falling(found)
        .into_iter()
        .map(|hint| (hint.order, hint.irrep.as_str(), hint.trial.group.as_str()))
        .collect()
}

#[test]
fn linear_molecules() {
    // BH2 has one electron in 1πu; NH2's half-filled πu with three; H2S mixes πu with σg+.
    let borane = distortions(molecule(&around("B", "H", 1.18, &LINE), 0, None));
    assert_eq!(told(&borane), [(HintOrder::LinearSplitting, "pi_u", "C2v")]);
    let sulfide = distortions(molecule(&around("S", "H", 1.336, &LINE), 0, None));
    assert_eq!(told(&sulfide), [(HintOrder::Second, "pi_u", "C2v")]);
    let labels: Vec<&str> = sulfide.hints[0]
        .levels
        .iter()
        .map(|l| l.plain.as_str())
        .collect();
    assert_eq!(labels, ["2pi_u", "4sigma_g+"]);
    // CO2 and BeH2 stay linear.
    for stable in [
        molecule(&around("C", "O", 1.16, &LINE), 0, None),
        molecule(&around("Be", "H", 1.33, &LINE), 0, None),
    ] {
        assert_eq!(told(&distortions(stable)), []);
    }
}

#[test]
fn planar_hydrides() {
    for (centre, length, charge, distorts) in [
        ("N", 1.01, 0, true),
        ("Si", 1.5, -1, true),
        ("C", 1.079, 0, false),
        ("B", 1.19, 0, false),
    ] {
        let found = distortions(molecule(
            &around(centre, "H", length, &triangle()),
            charge,
            None,
        ));
        assert_eq!(found.group, "D3h");
        assert_eq!(found.vibrations, "a1' + 2e' + a2''");
        let expected: Vec<_> = distorts
            .then_some((HintOrder::Second, "a2''", "C3v"))
            .into_iter()
            .collect();
        assert_eq!(told(&found), expected, "{centre}H3 {charge:+}");
    }
}

#[test]
fn tetrahedral_and_octahedral_levels() {
    // T ⊗ (e + t2): methane's ion; methane itself stays.
    let ion = distortions(molecule(&around("C", "H", 1.09, &TETRAHEDRON), 1, None));
    assert_eq!(
        told(&ion),
        [
            (HintOrder::First, "e", "D2d"),
            (HintOrder::First, "t2", "C2v")
        ]
    );
    let methane = distortions(molecule(&around("C", "H", 1.09, &TETRAHEDRON), 0, None));
    assert_eq!(told(&methane), []);
    // E ⊗ e: octahedral d9 becomes tetragonal, by bond lengths.
    let copper = distortions(molecule(&around("Cu", "Cl", 2.3, &octahedron()), -4, None));
    assert_eq!(told(&copper), [(HintOrder::First, "eg", "D4h")]);
    assert!(!copper.hints[0].keeps_lengths);
    assert!((copper.hints[0].electrons - 3.0).abs() < 1e-9);
    // d10: the same level filled.
    let zinc_like = distortions(molecule(&around("Cu", "Cl", 2.3, &octahedron()), -5, None));
    assert_eq!(told(&zinc_like), []);
}

#[test]
fn a_half_filled_set_of_one_spin_does_not_split() {
    // N2: triplet with 1πg² … as O2: both electrons of one spin; oxygen has no bend anyway, so the
    // triplet of square cyclobutadiene: no first order.
    let ring = |unpaired| {
        let (a, b) = (1.44 / 2.0_f64.sqrt(), 1.44 / 2.0_f64.sqrt() + 1.08);
        let mut atoms: Vec<(&str, [f64; 3])> =
            SQUARE.iter().map(|v| ("C", v.map(|x| x * a))).collect();
        atoms.extend(SQUARE.iter().map(|v| ("H", v.map(|x| x * b))));
        distortions(molecule(&atoms, 0, Some(unpaired)))
    };
    let singlet = ring(0);
    assert_eq!(singlet.group, "D4h");
    // The rectangle (b2g with C2' through the atoms) before the rhombus (b1g).
    assert_eq!(
        told(&singlet),
        [
            (HintOrder::First, "b2g", "D2h"),
            (HintOrder::First, "b1g", "D2h")
        ]
    );
    assert!(singlet.hints[0].coupling > 3.0 * singlet.hints[1].coupling);
    let triplet = ring(2);
    assert!(
        triplet
            .hints
            .iter()
            .all(|hint| hint.order != HintOrder::First)
    );
}

/// Xenon has no published values in the set: levels from ionisation energies (NIST, from memory),
/// exponents of Clementi, Raimondi & Reinhardt, J. Chem. Phys. 47, 1300 (1967) (from memory).
#[test]
fn square_planar_xenon_tetrafluoride_stays() {
    let text = "[set]\nname = \"xenon\"\nenergy = \"eV\"\nexponent = \"1/bohr\"\n\
        [Xe]\nsource = \"ionisation energies\"\nchecked = \"memory\"\nshells = [\n\
        { shell = \"5s\", hii = -23.40, zeta = 2.84 },\n\
        { shell = \"5p\", hii = -12.56, zeta = 2.485 },\n]\n";
    let set = ParameterSet::default()
        .overlay(text, "xenon.toml")
        .expect("a set");
    for coupling in [Coupling::Constant, Coupling::Weighted] {
        let mut request = Request::new(molecule(&around("Xe", "F", 1.935, &SQUARE), 0, None));
        request.parameters = set.clone();
        request.method = Method::with_coupling(coupling);
        let found = Distortions::new(&request).expect("solved");
        assert_eq!(found.group, "D4h");
        assert_eq!(told(&found), []);
    }
}

/// The coupling that a hint reports is the slope of the levels: against differences of energies.
#[test]
fn the_first_order_slope_is_that_of_the_levels() {
    let start = molecule(&around("C", "H", 1.09, &TETRAHEDRON), 1, None);
    let found = distortions(start.clone());
    let hint = &found.hints[0];
    let energies = |step: f64| {
        let mut moved = start.clone();
        for (p, d) in moved
            .positions
            .iter_mut()
            .flatten()
            .zip(hint.displacement.iter().flatten())
        {
            *p += step * d;
        }
        orbend_checks::energies(&moved, &ParameterSet::default(), &Method::default())
    };
    let (up, down) = (energies(1e-4), energies(-1e-4));
    // 1t2 are the levels 1 to 3 above 1a1; forward and backward they swap their order.
    let split = |e: &[f64]| (e[1], e[3]);
    let ((low, high), (low_back, high_back)) = (split(&up), split(&down));
    let slopes = [(high - low_back) / 2e-4, (low - high_back) / 2e-4];
    let steepest = slopes.iter().fold(0.0_f64, |m, x| m.max(x.abs()));
    assert!(
        (steepest - hint.coupling).abs() < 1e-3,
        "{slopes:?} for {}",
        hint.coupling
    );
}
