//! Units in the type, so that a length in bohr is never read as one in ångström.
//!
//! Factors: CODATA 2018 (Tiesinga, Mohr, Newell, Taylor, Rev. Mod. Phys. 93,
//! 025010 (2021)).

/// One bohr in Å (CODATA 2018).
pub const BOHR_IN_ANGSTROM: f64 = 0.529_177_210_903;
/// One hartree in eV (CODATA 2018).
pub const HARTREE_IN_EV: f64 = 27.211_386_245_988;
/// One degree in radians.
pub const DEGREE_IN_RADIANS: f64 = std::f64::consts::PI / 180.0;

macro_rules! unit {
    ($(#[$doc:meta])* $name:ident, $symbol:literal) => {
        $(#[$doc])*
        #[derive(Clone, Copy, Debug, PartialEq, PartialOrd, Default)]
        pub struct $name(pub f64);

        impl std::fmt::Display for $name {
            fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
                std::fmt::Display::fmt(&self.0, f)?;
                f.write_str($symbol)
            }
        }
    };
}

unit!(
    /// A length in Å (10⁻¹⁰ m).
    Angstrom,
    " Å"
);
unit!(
    /// A length in bohr.
    Bohr,
    " bohr"
);
unit!(
    /// An energy in eV.
    ElectronVolt,
    " eV"
);
unit!(
    /// An energy in hartree.
    Hartree,
    " hartree"
);
unit!(
    /// An angle in degrees.
    Degrees,
    "°"
);
unit!(
    /// An angle in radians.
    Radians,
    " rad"
);

macro_rules! convert {
    ($from:ident => $to:ident, $function:expr) => {
        impl From<$from> for $to {
            fn from(value: $from) -> Self {
                let function: fn(f64) -> f64 = $function;
                Self(function(value.0))
            }
        }
    };
}

convert!(Bohr => Angstrom, |x| x * BOHR_IN_ANGSTROM);
convert!(Angstrom => Bohr, |x| x / BOHR_IN_ANGSTROM);
convert!(Hartree => ElectronVolt, |x| x * HARTREE_IN_EV);
convert!(ElectronVolt => Hartree, |x| x / HARTREE_IN_EV);
convert!(Degrees => Radians, |x| x * DEGREE_IN_RADIANS);
convert!(Radians => Degrees, |x| x / DEGREE_IN_RADIANS);

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn conversions_return() {
        let length = Angstrom::from(Bohr(1.0));
        assert!((length.0 - 0.529_177_210_903).abs() < 1e-15);
        assert!((Bohr::from(length).0 - 1.0).abs() < 1e-15);
        assert!((ElectronVolt::from(Hartree(2.0)).0 - 54.422_772_491_976).abs() < 1e-12);
        assert!((Degrees::from(Radians::from(Degrees(37.0))).0 - 37.0).abs() < 1e-13);
        assert!((Radians::from(Degrees(180.0)).0 - std::f64::consts::PI).abs() < 1e-15);
    }

    #[test]
    fn display_names_the_unit() {
        assert_eq!(format!("{:.2}", Angstrom(1.591)), "1.59 Å");
        assert_eq!(Degrees(90.0).to_string(), "90°");
    }
}
