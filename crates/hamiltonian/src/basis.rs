//! The basis of a molecule: its functions, its valence electrons, its core.

use std::ops::Range;

use orbend_overlap::harmonics::function_name;
use orbend_structure::{Element, OccupiedShell};

use crate::method::{Method, MethodError, POLARISED_HYDROGEN_HII_EV, POLARISED_HYDROGEN_ZETA};
use crate::parameters::{ParameterSet, SET_NAMES, ShellName};

/// One function of the basis.
#[derive(Clone, Debug, PartialEq)]
pub struct BasisFunction {
    /// Atom, from 0.
    pub atom: usize,
    /// Its shell, as an index into [`Basis::shells`].
    pub shell: usize,
    /// Principal quantum number.
    pub n: u8,
    /// Angular quantum number.
    pub l: u8,
    /// Place within the shell, in the order of `orbend_overlap::harmonics`.
    pub index: usize,
    /// Diagonal element, eV.
    pub hii_ev: f64,
}

impl BasisFunction {
    /// "3s", "3pz", "3dx2-y2".
    pub fn label(&self) -> String {
        let shell = ShellName {
            n: self.n,
            l: self.l,
        };
        let name = if self.l == 0 {
            ""
        } else {
            function_name(self.l, self.index)
        };
        format!("{shell}{name}")
    }
}

/// One shell of the basis.
#[derive(Clone, Debug, PartialEq)]
pub struct BasisShell {
    /// Atom, from 0.
    pub atom: usize,
    /// Principal quantum number.
    pub n: u8,
    /// Angular quantum number.
    pub l: u8,
    /// Its first function, as an index into [`Basis::functions`]; it has 2l+1.
    pub first: usize,
    /// Diagonal element, eV.
    pub hii_ev: f64,
    /// (exponent in bohr⁻¹, coefficient), normalised.
    pub terms: Vec<(f64, f64)>,
}

/// The part of the basis that sits on one atom.
#[derive(Clone, Debug, PartialEq)]
pub struct AtomFunctions {
    /// The element.
    pub element: Element,
    /// Indices into [`Basis::functions`].
    pub functions: Range<usize>,
    /// Indices into [`Basis::shells`].
    pub shells: Range<usize>,
    /// Electrons of the neutral atom that are in the basis.
    pub valence_electrons: u32,
}

/// The basis of a molecule: atoms in the order given, shells in the order of the parameter file,
/// functions in the order of `orbend_overlap::harmonics`.
#[derive(Clone, Debug, PartialEq)]
pub struct Basis {
    /// One entry per atom.
    pub atoms: Vec<AtomFunctions>,
    /// One entry per shell.
    pub shells: Vec<BasisShell>,
    /// One entry per function.
    pub functions: Vec<BasisFunction>,
    /// Electrons of the neutral atoms that are in the basis: those of the occupied shells of each
    /// atom's ground state that the basis holds. A shell empty in the atom (H 2p, C 3d) adds none.
    pub valence_electrons: u32,
    /// (atom, n, l) of the filled shells of the neutral atoms that are not in the basis.
    pub core_shells: Vec<(usize, u8, u8)>,
}

/// A basis that cannot be made.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum BasisError {
    /// There are no atoms.
    #[error("there are no atoms")]
    NoAtoms,
    /// The set has no values for an element of the molecule.
    #[error(
        "the parameter set {set} has no values for {} ({}): needed are Hii (eV) and exponent (1/bohr) \
         of {}; give them in a file that overlays the set{}",
        .element.symbol(), .element.name(), list(.needed), elsewhere(.sets)
    )]
    MissingElement {
        /// The element.
        element: Element,
        /// The set in use.
        set: String,
        /// The shells for which values are needed.
        needed: Vec<ShellName>,
        /// Built-in sets that have the element.
        sets: Vec<&'static str>,
    },
    /// An open shell of the neutral atom is missing from the element's values.
    #[error(
        "the values of {} in the parameter set {set} leave out the shell {shell}, which holds \
         {electrons} electrons and is not full: add it",
        .element.symbol()
    )]
    OpenShellMissing {
        /// The element.
        element: Element,
        /// The set in use.
        set: String,
        /// The shell.
        shell: ShellName,
        /// Its electrons in the neutral atom.
        electrons: u8,
    },
    /// The method's constants make no sense.
    #[error(transparent)]
    Method(#[from] MethodError),
}

fn list(shells: &[ShellName]) -> String {
    shells
        .iter()
        .map(ToString::to_string)
        .collect::<Vec<_>>()
        .join(", ")
}

fn elsewhere(sets: &[&str]) -> String {
    if sets.is_empty() {
        "; no built-in set has them".to_owned()
    } else {
        format!(", or use the set {}", sets.join(" or "))
    }
}

impl Basis {
    /// The basis of atoms of these elements.
    ///
    /// # Errors
    /// An element without values, an open atomic shell without values, no atoms, a method whose
    /// constants are out of range.
    pub fn new(
        elements: &[Element],
        set: &ParameterSet,
        method: &Method,
    ) -> Result<Self, BasisError> {
        method.check()?;
        if elements.is_empty() {
            return Err(BasisError::NoAtoms);
        }
        let mut basis = Self {
            atoms: Vec::with_capacity(elements.len()),
            shells: Vec::new(),
            functions: Vec::new(),
            valence_electrons: 0,
            core_shells: Vec::new(),
        };
        for &element in elements {
            basis.add_atom(element, set, method)?;
        }
        Ok(basis)
    }

    fn add_atom(
        &mut self,
        element: Element,
        set: &ParameterSet,
        method: &Method,
    ) -> Result<(), BasisError> {
        let atom = self.atoms.len();
        let values = set.element(element).ok_or_else(|| missing(element, set))?;
        let (first_function, first_shell) = (self.functions.len(), self.shells.len());
        for shell in values.shells() {
            self.add_shell(atom, shell.name(), shell.hii_ev, shell.terms.clone());
        }
        let has = |basis: &Self, n, l| {
            basis.shells[first_shell..]
                .iter()
                .any(|shell| shell.n == n && shell.l == l)
        };
        if method.polarised_hydrogen && element.number() == 1 && !has(self, 2, 1) {
            let name = ShellName { n: 2, l: 1 };
            let terms = vec![(POLARISED_HYDROGEN_ZETA, 1.0)];
            self.add_shell(atom, name, POLARISED_HYDROGEN_HII_EV, terms);
        }
        let mut valence_electrons = 0;
        for OccupiedShell { n, l, electrons } in element.occupied_shells() {
            if has(self, n, l) {
                valence_electrons += u32::from(electrons);
            } else if electrons == 4 * l + 2 {
                self.core_shells.push((atom, n, l));
            } else {
                let shell = ShellName { n, l };
                let set = set.name().to_owned();
                return Err(BasisError::OpenShellMissing {
                    element,
                    set,
                    shell,
                    electrons,
                });
            }
        }
        self.valence_electrons += valence_electrons;
        self.atoms.push(AtomFunctions {
            element,
            functions: first_function..self.functions.len(),
            shells: first_shell..self.shells.len(),
            valence_electrons,
        });
        Ok(())
    }

    fn add_shell(&mut self, atom: usize, name: ShellName, hii_ev: f64, terms: Vec<(f64, f64)>) {
        let ShellName { n, l } = name;
        let (shell, first) = (self.shells.len(), self.functions.len());
        self.shells.push(BasisShell {
            atom,
            n,
            l,
            first,
            hii_ev,
            terms,
        });
        for index in 0..2 * usize::from(l) + 1 {
            self.functions.push(BasisFunction {
                atom,
                shell,
                n,
                l,
                index,
                hii_ev,
            });
        }
    }

    /// Number of functions.
    pub fn len(&self) -> usize {
        self.functions.len()
    }

    /// Whether there are no functions; never so for a basis made by [`Basis::new`].
    pub fn is_empty(&self) -> bool {
        self.functions.is_empty()
    }

    /// Number of core orbitals: Σ (2l+1) over [`Basis::core_shells`].
    pub fn core_orbitals(&self) -> usize {
        self.core_shells
            .iter()
            .map(|&(_, _, l)| 2 * usize::from(l) + 1)
            .sum()
    }
}

fn missing(element: Element, set: &ParameterSet) -> BasisError {
    BasisError::MissingElement {
        element,
        set: set.name().to_owned(),
        needed: usual_valence_shells(element),
        sets: SET_NAMES
            .into_iter()
            .filter(|name| {
                ParameterSet::builtin(name).is_ok_and(|set| set.element(element).is_some())
            })
            .collect(),
    }
}

/// What a published set usually has: the outermost s and p shells (hydrogen and helium: s alone),
/// and the d and f shells that are open or stand before a p block.
fn usual_valence_shells(element: Element) -> Vec<ShellName> {
    let occupied = element.occupied_shells();
    let n = element.period();
    let has_p = occupied.iter().any(|shell| shell.n == n && shell.l == 1);
    let mut shells = vec![ShellName { n, l: 0 }];
    if n > 1 {
        shells.push(ShellName { n, l: 1 });
    }
    for shell in occupied {
        let open = shell.electrons < 4 * shell.l + 2;
        let recent = shell.l == 2 && shell.n + 1 == n && !has_p;
        if shell.l >= 2 && (open || recent) {
            shells.push(ShellName {
                n: shell.n,
                l: shell.l,
            });
        }
    }
    shells
}

#[cfg(test)]
mod tests {
    use super::*;

    fn basis(symbols: &[&str], method: &Method) -> Result<Basis, BasisError> {
        let elements: Vec<Element> = symbols
            .iter()
            .map(|symbol| Element::from_symbol(symbol).unwrap())
            .collect();
        Basis::new(&elements, &ParameterSet::default(), method)
    }

    #[test]
    fn hydrogen_sulfide() {
        let basis = basis(&["S", "H", "H"], &Method::default()).unwrap();
        assert_eq!(
            (basis.len(), basis.valence_electrons, basis.core_orbitals()),
            (6, 8, 5)
        );
        let labels: Vec<String> = basis.functions.iter().map(BasisFunction::label).collect();
        assert_eq!(labels, ["3s", "3pz", "3px", "3py", "1s", "1s"]);
        assert_eq!(basis.core_shells, [(0, 1, 0), (0, 2, 0), (0, 2, 1)]);
    }

    #[test]
    fn polarised_hydrogen_adds_functions_and_no_electrons() {
        let method = Method {
            polarised_hydrogen: true,
            ..Method::default()
        };
        let basis = basis(&["O", "H", "H"], &method).unwrap();
        assert_eq!(
            (basis.len(), basis.valence_electrons, basis.core_orbitals()),
            (12, 8, 1)
        );
        assert!((basis.functions[5].hii_ev + 3.4).abs() < 1e-15);
    }

    #[test]
    fn valence_electrons_of_metals() {
        let count = |symbol| {
            basis(&[symbol], &Method::default())
                .unwrap()
                .valence_electrons
        };
        // Zinc's published set has no 3d.
        assert_eq!(
            (count("Zn"), count("Cu"), count("Ni"), count("Pt")),
            (2, 11, 10, 10)
        );
        assert_eq!(
            (count("La"), count("Hf"), count("Hg"), count("Pb")),
            (3, 4, 12, 4)
        );
    }

    #[test]
    fn every_element_of_the_set_makes_a_basis() {
        for element in ParameterSet::default().elements() {
            let element = element.element();
            let basis =
                Basis::new(&[element], &ParameterSet::default(), &Method::default()).unwrap();
            let core: u32 = basis
                .core_shells
                .iter()
                .map(|core| 4 * u32::from(core.2) + 2)
                .sum();
            assert_eq!(core + basis.valence_electrons, u32::from(element.number()));
        }
    }

    #[test]
    fn a_missing_element_is_named_with_what_it_needs() {
        let text = basis(&["Xe", "F", "F"], &Method::default())
            .unwrap_err()
            .to_string();
        assert_eq!(
            text,
            "the parameter set hoffmann has no values for Xe (xenon): needed are Hii (eV) and \
             exponent (1/bohr) of 5s, 5p; give them in a file that overlays the set; no built-in \
             set has them"
        );
        let text = basis(&["Cd"], &Method::default()).unwrap_err().to_string();
        assert!(text.contains("of 5s, 5p, 4d;"), "{text}");
        let set = ParameterSet::builtin("hoffmann-1963").unwrap();
        let oxygen = Element::from_symbol("O").unwrap();
        let text = Basis::new(&[oxygen], &set, &Method::default())
            .unwrap_err()
            .to_string();
        assert!(
            text.contains("of 2s, 2p") && text.ends_with("or use the set hoffmann"),
            "{text}"
        );
    }

    #[test]
    fn an_open_shell_may_not_be_left_out() {
        let text = "[set]\nname = \"x\"\nenergy = \"eV\"\nexponent = \"1/bohr\"\n[O]\nshells = [{ shell = \"2s\", hii = -32.3, zeta = 2.275 }]\n";
        let set = ParameterSet::default().overlay(text, "x.toml").unwrap();
        let oxygen = Element::from_symbol("O").unwrap();
        let error = Basis::new(&[oxygen], &set, &Method::default())
            .unwrap_err()
            .to_string();
        assert!(
            error.contains("leave out the shell 2p, which holds 4 electrons"),
            "{error}"
        );
    }
}
