//! Which levels hold electrons: aufbau with degenerate sets filled evenly, a
//! number of unpaired electrons, or a configuration named line by line.

use crate::error::FillingError;

/// Levels closer than this (eV) count as one degenerate set when electrons are
/// handed out. Rounding splits an exact set by about 1e-13 eV.
pub const DEGENERACY_EV: f64 = 1e-6;

/// Electrons of a molecule, checked: both spins fit into the orbitals.
#[derive(Clone, Debug, PartialEq)]
pub struct Electrons {
    total: u32,
    unpaired: u32,
}

impl Electrons {
    /// Valence electrons `neutral − charge`, with `unpaired` of them unpaired
    /// (default: 0 or 1, whichever the count allows), in `orbitals` orbitals.
    ///
    /// # Errors
    /// The count is negative or too large, or the number of unpaired electrons
    /// is impossible: the error lists the legal ones.
    pub fn new(
        neutral: u32,
        charge: i32,
        unpaired: Option<u32>,
        orbitals: usize,
    ) -> Result<Self, FillingError> {
        let total = i64::from(neutral) - i64::from(charge);
        let capacity = 2 * orbitals as i64;
        if total < 0 {
            return Err(FillingError::ChargeTooHigh {
                charge,
                valence: neutral,
            });
        }
        if total > capacity {
            return Err(FillingError::ChargeTooLow {
                charge,
                electrons: total,
                capacity,
            });
        }
        let total = total as u32;
        let parity = total % 2;
        let most = total.min(2 * orbitals as u32 - total);
        let unpaired = unpaired.unwrap_or(parity);
        if unpaired % 2 != parity || unpaired > most {
            return Err(FillingError::Unpaired {
                unpaired,
                electrons: total,
                legal: (parity..=most).step_by(2).collect(),
            });
        }
        Ok(Self { total, unpaired })
    }

    /// Valence electrons.
    pub fn total(&self) -> u32 {
        self.total
    }

    /// Unpaired electrons.
    pub fn unpaired(&self) -> u32 {
        self.unpaired
    }
}

/// How the levels of every point are filled.
#[derive(Clone, Debug, PartialEq)]
pub enum Filling {
    /// From the lowest level up, at each point anew; degenerate sets evenly.
    Aufbau(Electrons),
    /// Electrons of each line, the same at every point.
    ByLine {
        /// The electrons in all.
        electrons: Electrons,
        /// One number in 0..=2 per line.
        occupations: Vec<f64>,
    },
}

impl Filling {
    /// The electrons in all.
    pub fn electrons(&self) -> &Electrons {
        match self {
            Self::Aufbau(electrons) | Self::ByLine { electrons, .. } => electrons,
        }
    }

    /// Fills one point: `order` lists the lines by rising energy, `energies`
    /// (eV) is indexed by line; writes one occupation per line to `out`.
    pub fn fill(&self, order: &[usize], energies: &[f64], out: &mut [f64]) {
        match self {
            Self::ByLine { occupations, .. } => out.copy_from_slice(occupations),
            Self::Aufbau(electrons) => {
                out.fill(0.0);
                let up = (electrons.total + electrons.unpaired) / 2;
                let down = (electrons.total - electrons.unpaired) / 2;
                for spin in [up, down] {
                    add_spin(f64::from(spin), order, energies, out);
                }
            }
        }
    }
}

/// One electron per orbital from below; the last set is shared evenly.
fn add_spin(electrons: f64, order: &[usize], energies: &[f64], out: &mut [f64]) {
    let mut left = electrons;
    let mut first = 0;
    while first < order.len() && left > 0.0 {
        let mut end = first + 1;
        while end < order.len() && energies[order[end]] - energies[order[end - 1]] < DEGENERACY_EV {
            end += 1;
        }
        let size = (end - first) as f64;
        let share = left.min(size) / size;
        for &line in &order[first..end] {
            out[line] += share;
        }
        left -= left.min(size);
        first = end;
    }
}

/// An explicit configuration as a user writes it: `1b2:2 3a1:1 1b1:1`.
#[derive(Clone, Debug, PartialEq)]
pub struct Configuration {
    /// Label and electrons, in the order given.
    pub entries: Vec<(String, f64)>,
}

impl Configuration {
    /// Reads `label:electrons` pairs separated by blanks or commas.
    ///
    /// # Errors
    /// A pair without a colon, a number that is none or negative, a label twice.
    pub fn parse(text: &str) -> Result<Self, FillingError> {
        let mut entries: Vec<(String, f64)> = Vec::new();
        for word in text.split([' ', ',', '\t']).filter(|word| !word.is_empty()) {
            let bad = || FillingError::ConfigurationWord {
                word: word.to_owned(),
            };
            let (label, count) = word.rsplit_once(':').ok_or_else(bad)?;
            let count: f64 = count.parse().map_err(|_| bad())?;
            if label.is_empty() || !count.is_finite() || count < 0.0 {
                return Err(bad());
            }
            if entries.iter().any(|(seen, _)| seen == label) {
                return Err(FillingError::ConfigurationTwice {
                    label: label.to_owned(),
                });
            }
            entries.push((label.to_owned(), count));
        }
        if entries.is_empty() {
            return Err(FillingError::ConfigurationWord {
                word: text.to_owned(),
            });
        }
        Ok(Self { entries })
    }

    /// Electrons per line: the named lines as told, the electrons that are left
    /// in the unnamed lines from below. `labels` holds each line's label
    /// (partners of a degenerate set share one), `order` the lines by rising
    /// energy at the first point.
    ///
    /// # Errors
    /// A label that no line has, more electrons than a line takes, or a total
    /// that cannot be met.
    pub fn occupations(
        &self,
        electrons: &Electrons,
        labels: &[String],
        order: &[usize],
    ) -> Result<Vec<f64>, FillingError> {
        let mut occupations: Vec<Option<f64>> = vec![None; labels.len()];
        let mut named = 0.0;
        for (label, count) in &self.entries {
            let lines: Vec<usize> = (0..labels.len()).filter(|&i| labels[i] == *label).collect();
            if lines.is_empty() {
                return Err(FillingError::ConfigurationLabel {
                    label: label.clone(),
                    known: order.iter().map(|&i| labels[i].clone()).fold(
                        Vec::new(),
                        |mut seen: Vec<String>, name| {
                            if seen.last() != Some(&name) {
                                seen.push(name);
                            }
                            seen
                        },
                    ),
                });
            }
            let capacity = 2.0 * lines.len() as f64;
            if *count > capacity {
                return Err(FillingError::ConfigurationFull {
                    label: label.clone(),
                    count: *count,
                    capacity,
                });
            }
            for &line in &lines {
                occupations[line] = Some(count / lines.len() as f64);
            }
            named += count;
        }
        let mut left = f64::from(electrons.total) - named;
        if left < -1e-9 {
            return Err(FillingError::ConfigurationSum {
                named,
                electrons: electrons.total,
            });
        }
        for &line in order {
            if occupations[line].is_none() {
                let share = left.clamp(0.0, 2.0);
                occupations[line] = Some(share);
                left -= share;
            }
        }
        if left > 1e-9 {
            return Err(FillingError::ConfigurationSum {
                named,
                electrons: electrons.total,
            });
        }
        Ok(occupations
            .into_iter()
            .map(Option::unwrap_or_default)
            .collect())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_degenerate_set_is_filled_evenly() {
        let electrons = Electrons::new(4, 0, None, 3).unwrap();
        let mut out = vec![0.0; 3];
        Filling::Aufbau(electrons).fill(&[0, 1, 2], &[-3.0, -1.0, -1.0], &mut out);
        assert_eq!(out, vec![2.0, 1.0, 1.0]);
    }

    #[test]
    fn unpaired_electrons_go_one_to_a_level() {
        let electrons = Electrons::new(4, 0, Some(2), 4).unwrap();
        let mut out = vec![0.0; 4];
        Filling::Aufbau(electrons).fill(&[3, 1, 2, 0], &[0.0, -3.0, -2.0, -9.0], &mut out);
        assert_eq!(out, vec![0.0, 1.0, 1.0, 2.0]);
    }

    #[test]
    fn impossible_counts_list_the_legal_ones() {
        assert!(matches!(
            Electrons::new(8, 1, Some(2), 6),
            Err(FillingError::Unpaired { legal, .. }) if legal == [1, 3, 5]
        ));
        assert!(Electrons::new(8, 9, None, 6).is_err());
        assert!(Electrons::new(8, -5, None, 6).is_err());
    }

    #[test]
    fn a_configuration_leaves_the_rest_to_the_lowest_lines() {
        let electrons = Electrons::new(6, 0, Some(2), 4).unwrap();
        let labels: Vec<String> = ["2a1", "1b2", "3a1", "1b1"].map(str::to_owned).to_vec();
        let configuration = Configuration::parse("1b2:2 3a1:1 1b1:1").unwrap();
        let filled = configuration
            .occupations(&electrons, &labels, &[0, 1, 2, 3])
            .unwrap();
        assert_eq!(filled, vec![2.0, 2.0, 1.0, 1.0]);
        assert!(Configuration::parse("1b2=2").is_err());
        let unknown = Configuration::parse("7a1:2").unwrap();
        assert!(
            unknown
                .occupations(&electrons, &labels, &[0, 1, 2, 3])
                .is_err()
        );
    }
}
