//! From electrons to a shape: how many the ligands leave on the centre.

use super::connect::{is, is_alkali, is_chalcogen, is_halogen, is_hydrogen};
use crate::element::Element;
use crate::units::DEGREE_IN_RADIANS;
use crate::vector::Vector;

/// The shape of an ideal geometry.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
#[allow(missing_docs)] // the names say it
pub enum ShapeClass {
    Atom,
    Diatomic,
    Linear,
    Bent,
    TrigonalPlanar,
    TrigonalPyramid,
    TShape,
    Tetrahedral,
    SquarePlanar,
    SeeSaw,
    TrigonalBipyramid,
    SquarePyramid,
    PentagonalPlanar,
    Octahedral,
    LinearChain,
    TransChain,
    TwistedChain,
    PlanarChain,
    TwistedPyramids,
}

impl ShapeClass {
    /// The name in words (`"trigonal planar"`).
    pub fn name(self) -> &'static str {
        match self {
            Self::Atom => "atom",
            Self::Diatomic => "diatomic",
            Self::Linear => "linear",
            Self::Bent => "bent",
            Self::TrigonalPlanar => "trigonal planar",
            Self::TrigonalPyramid => "trigonal pyramid",
            Self::TShape => "T-shape",
            Self::Tetrahedral => "tetrahedral",
            Self::SquarePlanar => "square planar",
            Self::SeeSaw => "see-saw",
            Self::TrigonalBipyramid => "trigonal bipyramid",
            Self::SquarePyramid => "square pyramid",
            Self::PentagonalPlanar => "pentagonal planar",
            Self::Octahedral => "octahedral",
            Self::LinearChain => "linear chain",
            Self::TransChain => "trans chain",
            Self::TwistedChain => "twisted chain",
            Self::PlanarChain => "planar chain",
            Self::TwistedPyramids => "twisted pyramids",
        }
    }
}

pub(crate) struct Chosen {
    pub(crate) class: ShapeClass,
    /// A unit vector per ligand, in the order of the ligands.
    pub(crate) directions: Vec<Vector>,
    /// A bond order per ligand.
    pub(crate) orders: Vec<f64>,
    pub(crate) because: String,
}

/// Bonds that a ligand forms: 1 for H, halogens, alkali metals and other
/// metals, 2 for chalcogens, 3 for N and P, 4 for C and Si.
fn wanted(ligand: Element) -> i32 {
    if is_chalcogen(ligand) {
        2
    } else if is(ligand, &["N", "P", "As"]) {
        3
    } else if is(ligand, &["C", "Si", "Ge"]) {
        4
    } else {
        1
    }
}

/// Electrons of the centre that a ligand takes up: CO and CS give a pair of
/// their own, CN and NO bind by one.
fn taken(ligand: &[Element]) -> i32 {
    match ligand {
        [head] => wanted(*head),
        [_, tail] if is_chalcogen(*tail) && is(ligand[0], &["C"]) => 0,
        _ => 1,
    }
}

/// Chooses the shape about one centre.
pub(crate) fn choose(centre: Element, units: &[Vec<Element>], charge: i32) -> Chosen {
    let heads: Vec<Element> = units.iter().map(|unit| unit[0]).collect();
    let ligands = &heads[..];
    let used: i32 = units.iter().map(|unit| taken(unit)).sum();
    let left = i32::from(centre.outer_electrons()) - charge - used;
    let metal = centre.is_transition_metal();
    let (class, angle) = if metal {
        (metal_class(centre, units, left), 0.0)
    } else {
        main_group_class(centre, ligands, left.max(0))
    };
    let lone = f64::from(if metal { 0 } else { left.clamp(0, 8) }) / 2.0;
    let orders = bond_orders(centre, ligands, charge, lone);
    let because = match (metal, class) {
        (_, ShapeClass::Bent | ShapeClass::TrigonalPyramid) => format!(
            "{} electrons are left on {centre} beside the bonds; angle set to {angle}°",
            left.max(0)
        ),
        (true, _) => format!("{} d electrons are left on {centre}", left.max(0)),
        (false, _) => format!(
            "{} electrons are left on {centre} beside the bonds",
            left.max(0)
        ),
    };
    Chosen {
        class,
        directions: directions(class, angle, ligands),
        orders,
        because,
    }
}

/// d8 of the second and third transition row, or with (CN): square planar;
/// otherwise the arrangement with the ligands farthest apart.
fn metal_class(centre: Element, units: &[Vec<Element>], left: i32) -> ShapeClass {
    let strong = units.iter().all(|unit| unit.len() > 1);
    match units.len() {
        0..=2 => ShapeClass::Linear,
        3 => ShapeClass::TrigonalPlanar,
        4 if left == 8 && (centre.period() > 4 || strong) => ShapeClass::SquarePlanar,
        4 => ShapeClass::Tetrahedral,
        5 => ShapeClass::TrigonalBipyramid,
        _ => ShapeClass::Octahedral,
    }
}

/// Gillespie & Nyholm's pairs, an odd electron counted as a pair; with two
/// ligands this gives Walsh's counts (16 electrons linear, 17–20 bent, 22
/// linear for AB2; 4 linear, 5–8 bent for AH2).
fn main_group_class(centre: Element, ligands: &[Element], left: i32) -> (ShapeClass, f64) {
    let pairs = (left + 1) / 2;
    let hydrogens = ligands.iter().all(|&ligand| is_hydrogen(ligand));
    let heavy_hydride = hydrogens && centre.period() > 2;
    match (ligands.len(), pairs) {
        (0..=1, _) => (ShapeClass::Linear, 180.0),
        // Alkali oxides are ionic and linear.
        (2, 0 | 3..) => (ShapeClass::Linear, 180.0),
        (2, _) if ligands.iter().any(|&x| is_alkali(x)) => (ShapeClass::Linear, 180.0),
        (2, _) if heavy_hydride => (ShapeClass::Bent, 93.0),
        (2, 1) => (ShapeClass::Bent, 120.0),
        (2, _) => (ShapeClass::Bent, 105.0),
        (3, 0) => (ShapeClass::TrigonalPlanar, 120.0),
        // CH3 and NH3+ are planar, CF3 and SiH3 pyramidal.
        (3, 1) if left == 1 && hydrogens && !heavy_hydride => (ShapeClass::TrigonalPlanar, 120.0),
        (3, 1) if heavy_hydride => (ShapeClass::TrigonalPyramid, 93.0),
        (3, 1) if centre.period() > 2 => (ShapeClass::TrigonalPyramid, 100.0),
        (3, 1) => (ShapeClass::TrigonalPyramid, 107.0),
        (3, _) => (ShapeClass::TShape, 90.0),
        (4, 0) => (ShapeClass::Tetrahedral, 0.0),
        (4, 1) => (ShapeClass::SeeSaw, 0.0),
        (4, _) => (ShapeClass::SquarePlanar, 0.0),
        (5, 0) => (ShapeClass::TrigonalBipyramid, 0.0),
        (5, 1) => (ShapeClass::SquarePyramid, 0.0),
        (5, _) => (ShapeClass::PentagonalPlanar, 0.0),
        _ => (ShapeClass::Octahedral, 0.0),
    }
}

/// Bond orders: what the ligands want, shared evenly where a second-row centre
/// has fewer than four pairs for them (NO2⁻: 1.5, NO3⁻: 1.33).
fn bond_orders(centre: Element, ligands: &[Element], charge: i32, lone: f64) -> Vec<f64> {
    if ligands.len() == 2 && ligands.iter().all(|&x| x == centre) && is_halogen(centre) {
        return vec![0.5; 2]; // the three-centre bond of I3⁻
    }
    let cation = |x: Element| charge > 0 && is_chalcogen(x) && centre.period() == 2;
    let wants = |x: Element| f64::from(wanted(x) + i32::from(cation(x)));
    if centre.period() > 2 || is_hydrogen(centre) {
        return ligands.iter().map(|&x| wants(x).min(3.0)).collect();
    }
    let single = ligands.iter().filter(|&&x| wants(x) < 1.5).count() as f64;
    let multiple: f64 = ligands.iter().map(|&x| wants(x)).filter(|&w| w > 1.5).sum();
    let capacity = match centre.symbol() {
        "Be" | "Li" => 2.0,
        _ => 4.0,
    };
    let pairs = (capacity - lone - single).max(0.0);
    let share = if multiple > pairs {
        pairs / multiple
    } else {
        1.0
    };
    let order = |x: Element| {
        if wants(x) < 1.5 {
            1.0
        } else {
            (wants(x) * share).clamp(1.0, 3.0)
        }
    };
    ligands.iter().map(|&x| order(x)).collect()
}

/// Unit vectors of the ligands. Where places differ, ligands that bind doubly
/// or are least electronegative take the equatorial (trigonal bipyramid,
/// see-saw, T-shape) or apical (square pyramid) places: Bent, Chem. Rev. 61,
/// 275 (1961); equal ligands are trans in squares and octahedra.
fn directions(class: ShapeClass, angle: f64, ligands: &[Element]) -> Vec<Vector> {
    let third = 0.75_f64.sqrt();
    let (up, down) = ([0.0, 0.0, 1.0], [0.0, 0.0, -1.0]);
    let diagonal = (1.0_f64 / 3.0).sqrt();
    let places: Vec<Vector> = match class {
        ShapeClass::Bent => {
            let (s, c) = libm::sincos(0.5 * angle * DEGREE_IN_RADIANS);
            vec![[0.0, s, c], [0.0, -s, c]]
        }
        ShapeClass::TrigonalPlanar if ligands.windows(2).all(|w| w[0] == w[1]) => {
            vec![[1.0, 0.0, 0.0], [-0.5, third, 0.0], [-0.5, -third, 0.0]]
        }
        ShapeClass::TrigonalPlanar => vec![up, [0.0, third, -0.5], [0.0, -third, -0.5]],
        ShapeClass::TrigonalPyramid => {
            let half = 0.5 * angle * DEGREE_IN_RADIANS;
            let s = libm::sin(half) * (4.0_f64 / 3.0).sqrt();
            let c = (1.0 - s * s).max(0.0).sqrt();
            vec![
                [s, 0.0, c],
                [-0.5 * s, third * s, c],
                [-0.5 * s, -third * s, c],
            ]
        }
        ShapeClass::TShape => vec![up, [0.0, 1.0, 0.0], [0.0, -1.0, 0.0]],
        ShapeClass::Tetrahedral => [
            [1.0, 1.0, 1.0],
            [-1.0, -1.0, 1.0],
            [1.0, -1.0, -1.0],
            [-1.0, 1.0, -1.0],
        ]
        .map(|d| d.map(|x| x * diagonal))
        .to_vec(),
        ShapeClass::SquarePlanar => square().to_vec(),
        ShapeClass::SeeSaw => vec![
            [0.0, third, 0.5],
            [0.0, -third, 0.5],
            [1.0, 0.0, 0.0],
            [-1.0, 0.0, 0.0],
        ],
        ShapeClass::TrigonalBipyramid => vec![
            [1.0, 0.0, 0.0],
            [-0.5, third, 0.0],
            [-0.5, -third, 0.0],
            up,
            down,
        ],
        ShapeClass::SquarePyramid => [&[up][..], &square()].concat(),
        ShapeClass::PentagonalPlanar => (0..5)
            .map(|k| {
                let (s, c) = libm::sincos(f64::from(k) * 72.0 * DEGREE_IN_RADIANS);
                [c, s, 0.0]
            })
            .collect(),
        ShapeClass::Octahedral => [&square()[..], &[up, down]].concat(),
        _ => vec![up, down],
    };
    let by_place = match class {
        ShapeClass::SquarePlanar | ShapeClass::Octahedral => trans_pairs(ligands),
        ShapeClass::TrigonalPlanar => {
            // The ligand that differs lies on the axis.
            let mut order: Vec<usize> = (0..ligands.len()).collect();
            let count = |k: usize| ligands.iter().filter(|&&x| x == ligands[k]).count();
            order.sort_by_key(|&k| count(k));
            order
        }
        ShapeClass::Linear | ShapeClass::Bent | ShapeClass::Tetrahedral => {
            (0..ligands.len()).collect()
        }
        _ => {
            let weight = |k: usize| {
                let multiple = if wanted(ligands[k]) > 1 { 10.0 } else { 0.0 };
                ligands[k].electronegativity().unwrap_or(2.0) - multiple
            };
            let mut order: Vec<usize> = (0..ligands.len()).collect();
            order.sort_by(|&i, &j| weight(i).total_cmp(&weight(j)).then(i.cmp(&j)));
            order
        }
    };
    let mut directions = vec![up; ligands.len()];
    for (&ligand, &place) in by_place.iter().zip(&places) {
        directions[ligand] = place;
    }
    directions
}

/// Neighbouring entries are trans.
fn square() -> [Vector; 4] {
    [
        [1.0, 0.0, 0.0],
        [-1.0, 0.0, 0.0],
        [0.0, 1.0, 0.0],
        [0.0, -1.0, 0.0],
    ]
}

/// Ligands in the order that puts equal ones into trans pairs.
fn trans_pairs(ligands: &[Element]) -> Vec<usize> {
    let mut order = Vec::new();
    let mut single: Vec<usize> = Vec::new();
    let mut seen = vec![false; ligands.len()];
    for k in 0..ligands.len() {
        if seen[k] {
            continue;
        }
        let same: Vec<usize> = (k..ligands.len())
            .filter(|&j| ligands[j] == ligands[k])
            .collect();
        for &j in &same {
            seen[j] = true;
        }
        let even = same.len() / 2 * 2;
        order.extend(&same[..even]);
        single.extend(&same[even..]);
    }
    order.extend(single);
    order
}

pub(crate) struct ChosenChain {
    pub(crate) class: ShapeClass,
    /// Bond order of A–A.
    pub(crate) order: f64,
    /// Directions of the ligands of the first A, which sits at +y.
    pub(crate) directions: Vec<Vector>,
    pub(crate) because: String,
}

/// Shape of X–A–A–X (`each` = 1) and X2A–AX2 (2): the octet leaves 8 − e −
/// `each` bonds for A–A; electrons left over on A bend the ends.
pub(crate) fn choose_chain(centre: Element, each: usize, charge: i32) -> ChosenChain {
    let electrons = i32::from(centre.outer_electrons()) - charge / 2;
    let ends = i32::try_from(each).unwrap_or(2);
    let valence = if electrons >= 4 {
        8 - electrons
    } else {
        electrons
    };
    let order = (valence - ends).clamp(1, 3);
    let left = (electrons - ends - order).max(0);
    let (class, angle, azimuths): (ShapeClass, f64, Vec<f64>) = match (each, left, order) {
        (1, 0, _) => (ShapeClass::LinearChain, 180.0, vec![0.0]),
        (1, _, 2..) => (ShapeClass::TransChain, 110.0, vec![90.0]),
        (1, _, _) => (ShapeClass::TwistedChain, 102.0, vec![45.0]),
        (_, 0 | 1, _) => (ShapeClass::PlanarChain, 121.0, vec![90.0, -90.0]),
        _ => {
            // Three equal angles at A: cos 2β = cos α / (1 + cos α).
            let cosine = libm::cos(107.0 * DEGREE_IN_RADIANS);
            let half = 0.5 * libm::acos(cosine / (1.0 + cosine)) / DEGREE_IN_RADIANS;
            (
                ShapeClass::TwistedPyramids,
                107.0,
                vec![45.0 + half, 45.0 - half],
            )
        }
    };
    let (sine, cosine) = libm::sincos((180.0 - angle) * DEGREE_IN_RADIANS);
    let sine = if class == ShapeClass::LinearChain {
        0.0
    } else {
        sine
    };
    let directions = azimuths
        .iter()
        .map(|azimuth| {
            let (s, c) = libm::sincos(azimuth * DEGREE_IN_RADIANS);
            // Exact planes: the cosine of 90° is not exactly zero in floats.
            let c = if (azimuth.abs() - 90.0).abs() < 1e-9 {
                0.0
            } else {
                c
            };
            [sine * s, cosine, sine * c]
        })
        .collect();
    let torsion = match class {
        ShapeClass::TwistedChain => ", torsion set to 90°",
        ShapeClass::TwistedPyramids => ", lone pairs 90° apart",
        _ => "",
    };
    ChosenChain {
        class,
        order: f64::from(order),
        directions,
        because: format!(
            "{left} electrons are left on each {centre} beside {order} {centre}–{centre} bonds; angle set to {angle}°{torsion}"
        ),
    }
}
