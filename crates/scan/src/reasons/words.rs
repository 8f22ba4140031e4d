//! The ledger in words: terms of equivalent pairs taken together, ranked, and said.

use super::ledger::{Change, ShellTerm};
use crate::orbitals::Orbitals;
use crate::plan::SweepPlan;

/// Terms below this (eV), or below this share of the largest, are left to "the rest".
const SMALLEST_EV: f64 = 0.05;
const SMALLEST_SHARE: f64 = 0.1;
/// Terms that a sentence names at most.
const MOST_TERMS: usize = 4;
/// Squared overlap with the line carried along below which a sentence warns.
const LITTLE_KEPT: f64 = 0.5;
/// Overlap populations smaller than this (electrons) are called none.
const NO_OVERLAP: f64 = 0.005;

/// Terms of pairs that the path group makes equivalent.
#[derive(Clone, Debug, PartialEq)]
pub struct TermGroup {
    /// The pairs of atoms, each as in its term; the first names the group.
    pub atoms: Vec<[usize; 2]>,
    /// The shells of the first pair, as indices into the basis.
    pub shells: [usize; 2],
    /// `S 3p–H 1s`.
    pub name: String,
    /// Sum of the terms.
    pub value_ev: f64,
    /// Sums of the overlap populations.
    pub overlap: [f64; 2],
}

impl SweepPlan {
    /// Equivalent pairs taken together, the largest first.
    pub fn grouped(&self, terms: &[ShellTerm]) -> Vec<TermGroup> {
        let mut keys: Vec<[usize; 4]> = Vec::new();
        let mut groups: Vec<TermGroup> = Vec::new();
        for term in terms {
            let key = self.key(term);
            match keys.iter().position(|other| *other == key) {
                Some(at) => {
                    groups[at].atoms.push(term.atoms);
                    groups[at].value_ev += term.value_ev;
                    groups[at].overlap[0] += term.overlap[0];
                    groups[at].overlap[1] += term.overlap[1];
                }
                None => {
                    keys.push(key);
                    groups.push(TermGroup {
                        atoms: vec![term.atoms],
                        shells: term.shells,
                        name: self.pair_name(term),
                        value_ev: term.value_ev,
                        overlap: term.overlap,
                    });
                }
            }
        }
        groups.sort_by(|a, b| b.value_ev.abs().total_cmp(&a.value_ev.abs()));
        groups
    }

    /// The smallest image of a pair of (atom, place of the shell on it) under the path group.
    fn key(&self, term: &ShellTerm) -> [usize; 4] {
        let place = [0, 1].map(|k| term.shells[k] - self.basis.atoms[term.atoms[k]].shells.start);
        let identity: Vec<usize> = (0..self.basis.atoms.len()).collect();
        self.group
            .operations
            .iter()
            .map(|operation| &operation.permutation)
            .chain([&identity])
            .map(|permutation| {
                let [a, b] = term.atoms.map(|atom| permutation[atom]);
                let (one, other) = ([a, place[0]], [b, place[1]]);
                let (low, high) = if one <= other {
                    (one, other)
                } else {
                    (other, one)
                };
                [low[0], low[1], high[0], high[1]]
            })
            .min()
            .unwrap_or_default()
    }

    /// `S 3p–H 1s`, the heavier element first.
    fn pair_name(&self, term: &ShellTerm) -> String {
        let mut parts = [0, 1].map(|k| {
            let atom = &self.basis.atoms[term.atoms[k]];
            (atom.element.number(), self.shell_name(term.shells[k]))
        });
        parts.sort_by_key(|part| std::cmp::Reverse(part.0));
        format!("{}–{}", parts[0].1, parts[1].1)
    }

    /// `3p` of a shell of the basis.
    pub fn shell(&self, shell: usize) -> String {
        let shell = &self.basis.shells[shell];
        let letter = ["s", "p", "d", "f"]
            .get(usize::from(shell.l))
            .unwrap_or(&"?");
        format!("{}{letter}", shell.n)
    }

    /// `S 3p`.
    pub(crate) fn shell_name(&self, shell: usize) -> String {
        let element = self.basis.atoms[self.basis.shells[shell].atom].element;
        format!("{} {}", element.symbol(), self.shell(shell))
    }

    /// The element and shell with the largest Mulliken share of a line, `S 3s`.
    pub fn mostly(&self, orbitals: &Orbitals, line: usize) -> String {
        let populations = orbitals.populations(&self.basis, &vec![0.0; self.lines.len()]);
        let mut shares: Vec<(String, f64)> = Vec::new();
        for (shell, share) in populations.shares.row(line).iter().enumerate() {
            let name = self.shell_name(shell);
            match shares.iter_mut().find(|(other, _)| *other == name) {
                Some((_, sum)) => *sum += share,
                None => shares.push((name, *share)),
            }
        }
        shares
            .into_iter()
            .reduce(|best, next| if next.1 > best.1 { next } else { best })
            .map_or_else(String::new, |(name, _)| name)
    }

    /// The change of a line in one sentence, its largest terms first.
    ///
    /// # Errors
    /// A geometry that cannot be solved.
    pub fn change_in_words(
        &self,
        line: usize,
        change: &Change,
    ) -> Result<String, crate::ScanError> {
        let label = self.label(line);
        let difference = change.difference_ev();
        let orbitals = self.orbitals(&[change.between[0]])?;
        let mut terms: Vec<(f64, String)> = self
            .grouped(&change.first_order)
            .iter()
            .map(|group| (group.value_ev, overlap_words(group)))
            .collect();
        terms.extend(change.mixing.iter().map(|mixing| {
            let other = self.label(mixing.line);
            let mostly = self.mostly(&orbitals, mixing.line);
            let verb = if mixing.value_ev * difference < 0.0 {
                "gives back"
            } else {
                "adds"
            };
            (
                mixing.value_ev,
                format!("mixing with {other} ({mostly}) {verb}"),
            )
        }));
        terms.sort_by(|a, b| b.0.abs().total_cmp(&a.0.abs()));
        let largest = terms.first().map_or(0.0, |term| term.0.abs());
        let limit = SMALLEST_EV.max(SMALLEST_SHARE * largest);
        let named = terms
            .iter()
            .take_while(|term| term.0.abs() >= limit)
            .count()
            .min(MOST_TERMS);
        if difference.abs() < SMALLEST_EV && named == 0 {
            return Ok(format!("{label} hardly moves: {} eV", signed(difference)));
        }
        // The cause comes first: terms with the sign of the change before those against it.
        let (with, against): (Vec<_>, Vec<_>) = terms[..named]
            .iter()
            .partition(|term| term.0 * difference >= 0.0);
        let mut words: Vec<String> = with
            .into_iter()
            .chain(against)
            .map(|(value, words)| format!("{words}: {} eV", signed(*value)))
            .collect();
        let rest: f64 = terms[named..].iter().map(|term| term.0).sum();
        if rest.abs() >= SMALLEST_EV {
            words.push(format!("the rest: {} eV", signed(rest)));
        }
        let verb = match difference {
            x if x.abs() < SMALLEST_EV => "stays where it is",
            x if x > 0.0 => "rises",
            _ => "falls",
        };
        let mut sentence = format!(
            "{label} {verb} ({} eV) because {}",
            signed(difference),
            words.join("; ")
        );
        if change.kept < LITTLE_KEPT {
            sentence.push_str(&format!(
                "; it keeps {:.0} % of its character only, so that other lines' character comes into it",
                100.0 * change.kept
            ));
        }
        Ok(sentence)
    }
}

/// What happens to the overlap of a pair of shells.
fn overlap_words(group: &TermGroup) -> String {
    let [before, after] = group.overlap;
    let name = &group.name;
    let less = after.abs() < before.abs();
    let same_sign = before * after >= 0.0;
    if before.abs() < NO_OVERLAP && after.abs() < NO_OVERLAP {
        return format!("{name} coupling changes");
    }
    let bonding = if before.abs() >= NO_OVERLAP {
        before
    } else {
        after
    } > 0.0;
    match (bonding, less && same_sign, same_sign) {
        (true, true, _) => format!("{name} overlap is lost"),
        (true, false, true) => format!("{name} overlap is gained"),
        (true, false, false) => format!("{name} overlap turns antibonding"),
        (false, true, _) => format!("{name} antibonding is relieved"),
        (false, false, true) => format!("{name} antibonding grows"),
        (false, false, false) => format!("{name} antibonding turns bonding"),
    }
}

/// `+1.70`, with a true minus sign.
fn signed(value: f64) -> String {
    if value < 0.0 {
        format!("−{:.2}", -value)
    } else {
        format!("+{value:.2}")
    }
}
