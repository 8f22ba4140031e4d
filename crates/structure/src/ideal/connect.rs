//! Which atom is the centre.

use crate::element::Element;
use crate::formula::{Formula, FormulaError};

/// How the atoms of a formula hang together.
#[derive(Clone, Debug, PartialEq)]
pub(crate) enum Plan {
    Atom(Element),
    Diatomic([Element; 2]),
    Centre {
        centre: Element,
        /// Every ligand with the bonded atom first.
        ligands: Vec<Vec<Element>>,
    },
    /// Two equal centres, each with `each` ligands.
    Chain {
        centre: Element,
        ligand: Element,
        each: usize,
    },
}

pub(crate) fn is(element: Element, symbols: &[&str]) -> bool {
    symbols.contains(&element.symbol())
}

pub(crate) fn is_hydrogen(element: Element) -> bool {
    element.number() == 1
}

pub(crate) fn is_halogen(element: Element) -> bool {
    is(element, &["F", "Cl", "Br", "I", "At"])
}

pub(crate) fn is_alkali(element: Element) -> bool {
    is(element, &["Li", "Na", "K", "Rb", "Cs"])
}

pub(crate) fn is_chalcogen(element: Element) -> bool {
    is(element, &["O", "S", "Se", "Te", "Po"])
}

fn is_monovalent(element: Element) -> bool {
    is_hydrogen(element) || is_halogen(element) || is_alkali(element)
}

/// Decides centre and ligands.
pub(crate) fn connect(formula: &Formula, charge: i32) -> Result<Plan, FormulaError> {
    let units: Vec<Vec<Element>> = formula
        .parts
        .iter()
        .flat_map(|part| std::iter::repeat_n(part.elements.clone(), part.count))
        .collect();
    if units.iter().any(|unit| unit.len() > 1) {
        return with_groups(formula, units);
    }
    let atoms: Vec<Element> = units.iter().map(|unit| unit[0]).collect();
    match atoms[..] {
        [atom] => return Ok(Plan::Atom(atom)),
        [first, second] => return Ok(Plan::Diatomic([first, second])),
        [a, b, c] => {
            let centre = centre_of_three([a, b, c], charge);
            return Ok(around(&atoms, centre));
        }
        _ => {}
    }
    if let Some(plan) = chain(&atoms) {
        return Ok(plan);
    }
    let centre = single_centre(&atoms).ok_or_else(|| unsupported(formula))?;
    let centre = atoms[centre];
    let ligands = atoms.len() - 1;
    let oxygens = atoms.iter().filter(|atom| is(**atom, &["O"])).count();
    let acid = atoms.iter().any(|&atom| is_hydrogen(atom))
        && oxygens >= if is(centre, &["C"]) { 3 } else { 2 };
    if acid {
        return Err(formula.error(
            "the hydrogen of an acid sits on an oxygen, which a formula does not say",
            "give a geometry file",
        ));
    }
    let most = if centre.period() <= 2 { 4 } else { 6 };
    if ligands > most {
        return Err(formula.error(
            format!("{centre} would have {ligands} neighbours, more than {most}"),
            "give a geometry file",
        ));
    }
    let index = atoms.iter().position(|&atom| atom == centre).unwrap_or(0);
    Ok(around(&atoms, index))
}

fn unsupported(formula: &Formula) -> FormulaError {
    formula.error(
        "the formula does not fix a geometry",
        "ideal geometries exist for one centre with up to six ligands, for HAAH and H2AAH2; give a geometry file",
    )
}

fn around(atoms: &[Element], centre: usize) -> Plan {
    let others = atoms.iter().enumerate().filter(|(k, _)| *k != centre);
    Plan::Centre {
        centre: atoms[centre],
        ligands: others.map(|(_, &atom)| vec![atom]).collect(),
    }
}

/// `Ni(CO)4`: the single element outside the brackets is the centre.
fn with_groups(formula: &Formula, units: Vec<Vec<Element>>) -> Result<Plan, FormulaError> {
    let plain: Vec<usize> = (0..units.len()).filter(|&k| units[k].len() == 1).collect();
    let metals = plain.iter().filter(|&&k| units[k][0].is_transition_metal());
    let centre = match (metals.clone().count(), plain.len()) {
        (1, _) => metals.copied().next(),
        (0, 1) => Some(plain[0]),
        _ => None,
    };
    let allowed = units.iter().all(|unit| {
        let symbols: Vec<&str> = unit.iter().map(|e| e.symbol()).collect();
        unit.len() == 1 || matches!(symbols[..], ["C", "O" | "N" | "S"] | ["N", "O"])
    });
    match centre {
        Some(centre) if allowed && (2..=7).contains(&units.len()) => Ok(Plan::Centre {
            centre: units[centre][0],
            ligands: units
                .iter()
                .enumerate()
                .filter(|(k, _)| *k != centre)
                .map(|(_, unit)| unit.clone())
                .collect(),
        }),
        _ => Err(formula.error(
            "of bracketed ligands only (CO), (CN), (CS) and (NO) about one centre are known",
            "give a geometry file",
        )),
    }
}

/// Two equal centres with two or four equal monovalent ligands.
fn chain(atoms: &[Element]) -> Option<Plan> {
    let first = atoms[0];
    let other = *atoms.iter().find(|&&atom| atom != first)?;
    let count = |element: Element| atoms.iter().filter(|&&atom| atom == element).count();
    if count(first) + count(other) != atoms.len() {
        return None;
    }
    let (centre, ligand) = if is_monovalent(first) {
        (other, first)
    } else {
        (first, other)
    };
    let each = count(ligand) / 2;
    let fits = count(centre) == 2
        && count(ligand) == 2 * each
        && (each == 1 || each == 2)
        && is_monovalent(ligand)
        && !is_monovalent(centre);
    fits.then_some(Plan::Chain {
        centre,
        ligand,
        each,
    })
}

fn centre_of_three(atoms: [Element; 3], charge: i32) -> usize {
    let [a, b, c] = atoms;
    let hydrogens = atoms.iter().filter(|&&atom| is_hydrogen(atom)).count();
    if hydrogens == 1 {
        let heavy: Vec<usize> = (0..3).filter(|&k| !is_hydrogen(atoms[k])).collect();
        // FHF⁻: two equal halogens share the proton.
        if atoms[heavy[0]] == atoms[heavy[1]] && is_halogen(atoms[heavy[0]]) && charge < 0 {
            return (0..3).find(|&k| is_hydrogen(atoms[k])).unwrap_or(1);
        }
        // HAB: the middle letter, but oxygen for HClO and carbon for CHO.
        let oxygen = heavy.iter().find(|&&k| is(atoms[k], &["O"]));
        let halogen = heavy.iter().any(|&k| is_halogen(atoms[k]));
        return match oxygen {
            Some(&oxygen) if halogen => oxygen,
            _ if heavy.contains(&1) => 1,
            _ => single_centre(&atoms).unwrap_or(heavy[0]),
        };
    }
    if a == b && b == c {
        return 1;
    }
    // A2B: N2O, C2O, S2O are chains A–A–B; CO2, Cl2O, Li2O have B in the middle.
    let pair = [(0, 1, 2), (0, 2, 1), (1, 2, 0)]
        .into_iter()
        .find(|&(i, j, _)| atoms[i] == atoms[j]);
    if let Some((i, j, single)) = pair {
        let (twice, once) = (atoms[i], atoms[single]);
        let more = electronegativity(once) > electronegativity(twice);
        let bonded = is(twice, &["C", "N", "P", "S", "Se"]) && !is_monovalent(once);
        let written = i == 0 && j == 1;
        return if more && bonded {
            if written { 1 } else { j.min(1) }
        } else {
            single
        };
    }
    single_centre(&atoms).unwrap_or(1)
}

fn electronegativity(element: Element) -> f64 {
    element.electronegativity().unwrap_or(2.0)
}

/// The element that occurs once and is least electronegative; H, then alkali
/// metals, then halogens only where nothing else is left; carbon before the
/// heavier chalcogens and phosphorus.
fn single_centre(atoms: &[Element]) -> Option<usize> {
    let once = |k: usize| atoms.iter().filter(|&&other| other == atoms[k]).count() == 1;
    let single: Vec<usize> = (0..atoms.len()).filter(|&k| once(k)).collect();
    let rank = |k: usize| {
        let element = atoms[k];
        if is_hydrogen(element) {
            3
        } else if is_alkali(element) {
            2
        } else {
            i32::from(is_halogen(element))
        }
    };
    let carbon = single.iter().any(|&k| is(atoms[k], &["C"]));
    let weight = |k: usize| {
        let heavier = carbon && is(atoms[k], &["S", "Se", "Te", "P", "As"]);
        electronegativity(atoms[k]) + if heavier { 1.0 } else { 0.0 }
    };
    single.into_iter().min_by(|&i, &j| {
        let first = rank(i).cmp(&rank(j));
        first.then(weight(i).total_cmp(&weight(j))).then(i.cmp(&j))
    })
}
