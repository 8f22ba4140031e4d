//! What is done with the parameters: the form of Hᵢⱼ, K, and the polarised hydrogen.

use std::fmt;

use crate::nearest::nearest;

/// Hᵢᵢ of the 2p shell of a polarised hydrogen: the exact level of the atom, −13.6/4 eV.
pub const POLARISED_HYDROGEN_HII_EV: f64 = -3.4;
/// Exponent (bohr⁻¹) of the 2p shell of a polarised hydrogen: that of its 1s.
pub const POLARISED_HYDROGEN_ZETA: f64 = 1.3;

/// How Hᵢⱼ between two atoms follows from Sᵢⱼ. On one atom Hᵢⱼ is zero in every form.
#[derive(Copy, Clone, Debug, Default, PartialEq)]
pub enum Coupling {
    /// K Sᵢⱼ (Hᵢᵢ+Hⱼⱼ)/2. Wolfsberg & Helmholz, J. Chem. Phys. 20, 837 (1952); with K = 1.75
    /// Hoffmann, J. Chem. Phys. 39, 1397 (1963). The default.
    #[default]
    Constant,
    /// The same with K′ = K + Δ² + Δ⁴(1−K), Δ = (Hᵢᵢ−Hⱼⱼ)/(Hᵢᵢ+Hⱼⱼ). Ammeter, Bürgi, Thibeault &
    /// Hoffmann, J. Am. Chem. Soc. 100, 3686 (1978).
    Weighted,
    /// −K Sᵢⱼ √(Hᵢᵢ Hⱼⱼ), customary with K = 2. Ballhausen & Gray, Inorg. Chem. 1, 111 (1962).
    GeometricMean,
    /// Sᵢⱼ (2−|Sᵢⱼ|) (Hᵢᵢ+Hⱼⱼ)/2, without K. Cusachs, J. Chem. Phys. 43, S157 (1965). Applied to
    /// the σ, π, δ overlaps of each pair of atoms, so that the result does not turn with the axes.
    Cusachs,
    /// K(R) = 1 + (K−1) e^(−δ(R−d₀)), or with the Δ terms of the weighted form; d₀ is the sum of
    /// the two orbital radii, taken as the outermost maximum of the radial density (n/ζ).
    /// Calzaferri, Forss & Kamber, J. Phys. Chem. 93, 5366 (1989).
    DistanceDependent {
        /// δ in Å⁻¹; 0.35 in the papers (from memory).
        delta_per_angstrom: f64,
        /// Whether the Δ terms are kept.
        weighted: bool,
    },
    /// 1.125 (Hᵢᵢ+Hⱼⱼ) Sᵢⱼ e^(−0.13 R/Å): K = 2.25 e^(−0.13 R/Å). Anderson, J. Chem. Phys. 62,
    /// 1187 (1975). K of the method is not used.
    Anderson,
}

impl Coupling {
    /// The words by which [`Coupling::from_name`] knows the forms.
    pub const NAMES: [&'static str; 6] = [
        "constant",
        "weighted",
        "geometric-mean",
        "cusachs",
        "distance-dependent",
        "anderson",
    ];

    /// The form of that name; the distance-dependent one weighted, with δ = 0.35 Å⁻¹.
    ///
    /// # Errors
    /// [`MethodError::UnknownCoupling`], with the names that exist.
    pub fn from_name(name: &str) -> Result<Self, MethodError> {
        match name {
            "constant" => Ok(Self::Constant),
            "weighted" => Ok(Self::Weighted),
            "geometric-mean" => Ok(Self::GeometricMean),
            "cusachs" => Ok(Self::Cusachs),
            "distance-dependent" => Ok(Self::DistanceDependent {
                delta_per_angstrom: 0.35,
                weighted: true,
            }),
            "anderson" => Ok(Self::Anderson),
            _ => Err(MethodError::UnknownCoupling {
                name: name.to_owned(),
                suggestion: nearest(name, &Self::NAMES).map(str::to_owned),
            }),
        }
    }

    /// The word for the form, as in documents and on the command line.
    pub fn name(self) -> &'static str {
        match self {
            Self::Constant => "constant",
            Self::Weighted => "weighted",
            Self::GeometricMean => "geometric-mean",
            Self::Cusachs => "cusachs",
            Self::DistanceDependent { .. } => "distance-dependent",
            Self::Anderson => "anderson",
        }
    }

    /// The publication of the form.
    pub fn citation(self) -> &'static str {
        match self {
            Self::Constant => {
                "Wolfsberg & Helmholz, J. Chem. Phys. 20, 837 (1952); Hoffmann, J. Chem. Phys. 39, 1397 (1963)"
            }
            Self::Weighted => {
                "Ammeter, Bürgi, Thibeault & Hoffmann, J. Am. Chem. Soc. 100, 3686 (1978)"
            }
            Self::GeometricMean => "Ballhausen & Gray, Inorg. Chem. 1, 111 (1962)",
            Self::Cusachs => "Cusachs, J. Chem. Phys. 43, S157 (1965)",
            Self::DistanceDependent { .. } => {
                "Calzaferri, Forss & Kamber, J. Phys. Chem. 93, 5366 (1989)"
            }
            Self::Anderson => "Anderson, J. Chem. Phys. 62, 1187 (1975)",
        }
    }

    /// K customary with the form: 2 for the geometric mean, else 1.75.
    pub fn customary_k(self) -> f64 {
        match self {
            Self::GeometricMean => 2.0,
            _ => 1.75,
        }
    }

    /// Whether K enters the form at all.
    pub fn uses_k(self) -> bool {
        !matches!(self, Self::Cusachs | Self::Anderson)
    }
}

impl fmt::Display for Coupling {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.name())
    }
}

/// The method beside the parameter set.
#[derive(Copy, Clone, Debug, PartialEq)]
pub struct Method {
    /// The form of Hᵢⱼ.
    pub coupling: Coupling,
    /// The Wolfsberg–Helmholz constant K.
    pub k: f64,
    /// Gives every hydrogen a 2p shell at [`POLARISED_HYDROGEN_HII_EV`] with exponent
    /// [`POLARISED_HYDROGEN_ZETA`]. Nothing is fitted.
    pub polarised_hydrogen: bool,
}

impl Default for Method {
    /// Constant form, K = 1.75, minimal basis.
    fn default() -> Self {
        Self::with_coupling(Coupling::Constant)
    }
}

impl Method {
    /// That form with its customary K, minimal basis.
    pub fn with_coupling(coupling: Coupling) -> Self {
        Self {
            coupling,
            k: coupling.customary_k(),
            polarised_hydrogen: false,
        }
    }

    /// Checks that K is finite and between 1 and 3, and δ between 0 and 5 Å⁻¹.
    ///
    /// # Errors
    /// [`MethodError::OutOfRange`] for the first value outside.
    pub fn check(&self) -> Result<(), MethodError> {
        let inside = |name, value: f64, least, most| {
            if value >= least && value <= most {
                Ok(())
            } else {
                Err(MethodError::OutOfRange {
                    name,
                    value,
                    least,
                    most,
                })
            }
        };
        inside("K", self.k, 1.0, 3.0)?;
        if let Coupling::DistanceDependent {
            delta_per_angstrom, ..
        } = self.coupling
        {
            inside("delta (1/Å)", delta_per_angstrom, 0.0, 5.0)?;
        }
        Ok(())
    }
}

/// A method that cannot be used.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum MethodError {
    /// No form of that name.
    #[error("no coupling is called `{name}`{}; known: {}", meant(.suggestion.as_deref()), Coupling::NAMES.join(", "))]
    UnknownCoupling {
        /// The word given.
        name: String,
        /// The known word nearest to it.
        suggestion: Option<String>,
    },
    /// A constant outside the range in which the method means anything (NaN included).
    #[error("{name} = {value} is outside {least} to {most}")]
    OutOfRange {
        /// The constant.
        name: &'static str,
        /// The value given.
        value: f64,
        /// Smallest value allowed.
        least: f64,
        /// Largest value allowed.
        most: f64,
    },
}

fn meant(suggestion: Option<&str>) -> String {
    suggestion.map_or_else(String::new, |word| format!(" (did you mean `{word}`?)"))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_lead_there_and_back() {
        for name in Coupling::NAMES {
            assert_eq!(Coupling::from_name(name).map(Coupling::name), Ok(name));
        }
        let message = Coupling::from_name("wieghted").map_err(|e| e.to_string());
        assert!(message.is_err_and(|text| text.contains("did you mean `weighted`")));
    }

    #[test]
    fn nonsense_constants_are_refused() {
        for k in [f64::NAN, f64::INFINITY, 0.0, -1.75, 17.5] {
            assert!(
                Method {
                    k,
                    ..Method::default()
                }
                .check()
                .is_err(),
                "{k}"
            );
        }
        assert!(Method::default().check().is_ok());
    }
}
