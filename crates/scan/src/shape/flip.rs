//! What would flip the leading argument: the smallest single change of one value.

use orbend_hamiltonian::{Basis, Coupling, HamiltonianPlan, Method};
use orbend_structure::Element;

use crate::error::ScanError;
use crate::plan::SweepPlan;

use super::arguments::{Favour, geometries};
use super::centre::Centre;
use super::charge::Response;
use super::engine::{Curve, Engine, Model};
use super::ensemble::{LENGTH, SPREAD};
use super::minimum::read;
use super::motion::{Motion, MotionKind};

/// A single change that turns the leading sum round (not the whole verdict: an ensemble for each
/// trial would cost more than the verdict itself).
#[derive(Clone, Debug, PartialEq)]
pub struct Flip {
    /// `hii O 2p`, `zeta H 1s`, `k`, `coupling weighted` or `length O-H`.
    pub what: String,
    /// By how much, in `unit`; none for a change of form.
    pub change: Option<f64>,
    /// `eV`, `percent` or empty.
    pub unit: &'static str,
    /// Standard deviation or half range of the published values, in the same unit.
    pub published_spread: Option<f64>,
    /// What it speaks for then.
    pub to: Favour,
}

/// Relative changes that are tried, each in both directions.
const STEPS: [f64; 6] = [0.02, 0.05, 0.1, 0.15, 0.2, 0.3];

enum What {
    Energy(Element, u8, u8),
    Exponent(Element, u8, u8),
    K,
    Length(usize),
}

/// The changes that are at most 30 %, smallest first in units of the published spread; at most
/// four.
pub(crate) fn flips(
    plan: &SweepPlan,
    centre: &Centre,
    motion: Motion,
    now: Favour,
) -> Result<Vec<Flip>, ScanError> {
    if now == Favour::Silent {
        return Ok(Vec::new());
    }
    let search = Search {
        plan,
        centre,
        start: geometries(plan, centre, motion, false)?,
        motion,
    };
    let mut engine = Engine::new(plan);
    let mut found: Vec<(f64, Flip)> = Vec::new();
    for what in search.candidates() {
        let Some(change) = search.smallest(&mut engine, &what, now)? else {
            continue;
        };
        let to = search.favours(&mut engine, &what, change)?;
        let (name, unit, published) = search.words(&what);
        let spread = match what {
            What::Length(_) => LENGTH,
            What::K => 0.1 / 1.75,
            _ => SPREAD,
        };
        found.push((
            change.abs() / spread,
            Flip {
                what: name,
                change: Some(change * unit.1),
                unit: unit.0,
                published_spread: Some(published),
                to,
            },
        ));
    }
    found.sort_by(|a, b| a.0.total_cmp(&b.0).then_with(|| a.1.what.cmp(&b.1.what)));
    let mut flips: Vec<Flip> = found.into_iter().map(|(_, flip)| flip).take(3).collect();
    let weighted = search.with_form(&mut engine)?;
    if weighted != now && weighted != Favour::Silent {
        flips.push(Flip {
            what: "coupling weighted".to_owned(),
            change: None,
            unit: "",
            published_spread: None,
            to: weighted,
        });
    }
    Ok(flips)
}

struct Search<'a> {
    plan: &'a SweepPlan,
    centre: &'a Centre,
    start: Vec<Vec<[f64; 3]>>,
    motion: Motion,
}

impl Search<'_> {
    fn candidates(&self) -> Vec<What> {
        let mut shells: Vec<(Element, u8, u8)> = self
            .plan
            .basis
            .shells
            .iter()
            .map(|shell| (self.plan.basis.atoms[shell.atom].element, shell.n, shell.l))
            .filter(|&(element, _, l)| !(element.number() == 1 && l == 1))
            .collect();
        shells.sort_unstable();
        shells.dedup();
        let mut out: Vec<What> = shells
            .iter()
            .map(|&(e, n, l)| What::Energy(e, n, l))
            .collect();
        out.extend(shells.iter().map(|&(e, n, l)| What::Exponent(e, n, l)));
        out.push(What::K);
        for index in 0..self.centre.bonds.len() {
            if (0..index).all(|other| self.pair(other) != self.pair(index)) {
                out.push(What::Length(index));
            }
        }
        out
    }

    /// The elements of a bond.
    fn pair(&self, bond: usize) -> [Element; 2] {
        let bond = &self.centre.bonds[bond];
        [bond.root, bond.end].map(|atom| self.plan.molecule.elements[atom])
    }

    fn smallest(
        &self,
        engine: &mut Engine<'_>,
        what: &What,
        now: Favour,
    ) -> Result<Option<f64>, ScanError> {
        let mut best: Option<f64> = None;
        for sign in [1.0, -1.0] {
            let mut low = 0.0;
            for size in STEPS {
                if best.is_some_and(|best| size > 1.5 * best.abs()) {
                    break;
                }
                if self.turned(engine, what, sign * size, now)? {
                    let mut high = size;
                    for _ in 0..6 {
                        let middle = 0.5 * (low + high);
                        if self.turned(engine, what, sign * middle, now)? {
                            high = middle;
                        } else {
                            low = middle;
                        }
                    }
                    if best.is_none_or(|best| high < best.abs()) {
                        best = Some(sign * high);
                    }
                    break;
                }
                low = size;
            }
        }
        Ok(best)
    }

    fn turned(
        &self,
        engine: &mut Engine<'_>,
        what: &What,
        change: f64,
        now: Favour,
    ) -> Result<bool, ScanError> {
        let then = self.favours(engine, what, change)?;
        Ok(then != now && then != Favour::Silent)
    }

    /// What the polarised sum speaks for after a relative change of one value.
    fn favours(
        &self,
        engine: &mut Engine<'_>,
        what: &What,
        change: f64,
    ) -> Result<Favour, ScanError> {
        let mut basis: Basis = self.plan.basis.clone();
        let mut method: Method = *self.plan.hamiltonian.method();
        let factor = 1.0 + change;
        let mut moved = None;
        match *what {
            What::Energy(element, n, l) | What::Exponent(element, n, l) => {
                let energy = matches!(what, What::Energy(..));
                for shell in &mut basis.shells {
                    if basis.atoms[shell.atom].element != element || (shell.n, shell.l) != (n, l) {
                        continue;
                    }
                    if energy {
                        shell.hii_ev *= factor;
                        let functions = shell.first..shell.first + 2 * usize::from(l) + 1;
                        basis.functions[functions]
                            .iter_mut()
                            .for_each(|f| f.hii_ev *= factor);
                    } else {
                        shell.terms.iter_mut().for_each(|term| term.0 *= factor);
                    }
                }
            }
            What::K => method.k *= factor,
            What::Length(index) => {
                let bonds = 0..self.centre.bonds.len();
                let scale: Vec<f64> = bonds
                    .map(|bond| {
                        if self.pair(bond) == self.pair(index) {
                            factor
                        } else {
                            1.0
                        }
                    })
                    .collect();
                let mut all = self.start.clone();
                all.iter_mut()
                    .for_each(|positions| self.centre.stretch(&scale, positions));
                moved = Some(all);
            }
        }
        let hamiltonian = HamiltonianPlan::new(&basis, &method)?;
        self.judge(engine, &hamiltonian, moved.as_ref().unwrap_or(&self.start))
    }

    fn with_form(&self, engine: &mut Engine<'_>) -> Result<Favour, ScanError> {
        let weighted = super::arguments::with_coupling(&self.plan.hamiltonian, Coupling::Weighted)?;
        self.judge(engine, &weighted, &self.start)
    }

    fn judge(
        &self,
        engine: &mut Engine<'_>,
        hamiltonian: &HamiltonianPlan,
        positions: &[Vec<[f64; 3]>],
    ) -> Result<Favour, ScanError> {
        let curves = engine.curves(
            positions,
            &[Model {
                hamiltonian,
                // The leading sum of a torsion is the one with charge response.
                response: (self.motion.kind == MotionKind::Twist).then_some(Response::ENSEMBLE),
            }],
        );
        let step = self.motion.step(false);
        let read = |curve: &Curve| read(self.motion, step, curve.usable()).0;
        Ok(curves.first().map_or(Favour::Silent, read))
    }

    /// Name, unit with the factor from a relative change, and published spread in that unit.
    fn words(&self, what: &What) -> (String, (&'static str, f64), f64) {
        let shell = |element: Element, n: u8, l: u8| {
            let letter = ['s', 'p', 'd', 'f'][usize::from(l.min(3))];
            format!("{} {n}{letter}", element.symbol())
        };
        match *what {
            What::Energy(element, n, l) => {
                let value = self
                    .plan
                    .basis
                    .shells
                    .iter()
                    .find(|s| {
                        self.plan.basis.atoms[s.atom].element == element && (s.n, s.l) == (n, l)
                    })
                    .map_or(0.0, |s| s.hii_ev);
                (
                    format!("hii {}", shell(element, n, l)),
                    ("eV", value),
                    SPREAD * value.abs(),
                )
            }
            What::Exponent(element, n, l) => (
                format!("zeta {}", shell(element, n, l)),
                ("percent", 100.0),
                100.0 * SPREAD,
            ),
            What::K => ("k".to_owned(), ("percent", 100.0), 100.0 * 0.1 / 1.75),
            What::Length(index) => {
                let [centre, ligand] = self.pair(index);
                (
                    format!("length {}-{}", centre.symbol(), ligand.symbol()),
                    ("percent", 100.0),
                    100.0 * LENGTH,
                )
            }
        }
    }
}
