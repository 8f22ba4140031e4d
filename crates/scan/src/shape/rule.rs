//! How the arguments are weighed.
//!
//! The constants were chosen on an open panel of 74 species of known shape and a second one of the
//! same kind and size, held by cross-validation, and then frozen; `tests/reference/shape_score.md`
//! is the score on them and on a third panel that was not looked at.

use super::arguments::Favour;

/// A minimum shallower than this (eV) counts as none: kT at 298 K is 0.026 eV.
pub const FLAT_EV: f64 = 0.025;
/// A line that changes less than this (eV) does not respond.
pub const RESPONSE_EV: f64 = 0.3;
/// Share of the perturbed curves that makes a majority.
pub const MAJORITY: f64 = 2.0 / 3.0;
/// Support from which on a verdict can be confident.
pub const CONFIDENT: f64 = 0.9;
/// A ligand whose np level lies this much (eV) above the centre's np inverts the polarity that the
/// parameters were made for.
pub const INVERTED_EV: f64 = 2.0;

/// What the rule looks at.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Evidence {
    /// Shares of all perturbed curves: distorted, symmetric; the rest abstains.
    pub shares: (f64, f64),
    /// The leading argument: the polarised sum.
    pub leading: Favour,
    /// The polarised sum with charge response.
    pub response: Favour,
    /// The frontier line.
    pub frontier: Favour,
    /// Whether the frontier line holds one electron.
    pub frontier_single: bool,
    /// Whether all ligands are hydrogen and the centre is in period 1 or 2.
    ///
    /// Stated class: in a first-row radical AH3 the half-filled line falls, but one electron does
    /// not pay for the pyramid (CH3, NH3⁺); against a sum that says planar such a line is silent.
    pub light_hydride: bool,
    /// Whether the centre is Ca, Sr or Ba.
    ///
    /// Stated class: the empty (n−1)d shell that bends their dihalides is not in the basis, so a
    /// symmetric majority is not a verdict.
    pub heavy_alkaline_earth: bool,
    /// Whether a ligand's np lies more than [`INVERTED_EV`] above the centre's.
    pub inverted: bool,
}

/// Why a verdict was not given.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Doubt {
    /// The (n−1)d shell of a heavy alkaline earth is missing.
    MissingShell,
    /// The frontier line and the sums disagree.
    FrontierAgainstSum,
    /// The perturbed curves are split and the second opinion does not settle it.
    Split,
}

/// The outcome.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Ruling {
    /// The shape; silent means undecided.
    pub shape: Favour,
    /// Why it is undecided.
    pub doubt: Option<Doubt>,
    /// What most perturbed curves say.
    pub majority: Favour,
    /// Share of the perturbed curves that agree (with the majority where undecided).
    pub support: f64,
    /// Whether the verdict is safe.
    pub confident: bool,
}

/// Weighs the arguments.
pub fn weigh(evidence: &Evidence) -> Ruling {
    let (distorted, symmetric) = evidence.shares;
    let majority = if distorted > symmetric { Favour::Distorted } else { Favour::Symmetric };
    let most = distorted.max(symmetric);
    let exempt = evidence.frontier == Favour::Distorted
        && majority == Favour::Symmetric
        && evidence.frontier_single
        && evidence.light_hydride;
    let frontier = if exempt { Favour::Silent } else { evidence.frontier };
    let (shape, doubt) = if evidence.heavy_alkaline_earth && majority == Favour::Symmetric {
        (Favour::Silent, Some(Doubt::MissingShell))
    } else if most >= MAJORITY {
        if frontier == Favour::Silent || frontier == majority {
            (majority, None)
        } else {
            (Favour::Silent, Some(Doubt::FrontierAgainstSum))
        }
    } else {
        let first =
            if evidence.leading == Favour::Silent { evidence.response } else { evidence.leading };
        let second = if frontier == Favour::Silent { evidence.response } else { frontier };
        if first != Favour::Silent && second == first && !evidence.inverted {
            (first, None)
        } else {
            (Favour::Silent, Some(Doubt::Split))
        }
    };
    let support = match shape {
        Favour::Distorted => distorted,
        Favour::Symmetric => symmetric,
        Favour::Silent => most,
    };
    let confident = shape != Favour::Silent
        && support >= CONFIDENT
        && (evidence.frontier == Favour::Silent || evidence.frontier == shape)
        && evidence.leading == shape
        && evidence.response == shape
        && !evidence.inverted;
    Ruling { shape, doubt, majority, support, confident }
}

#[cfg(test)]
mod tests {
    use super::*;

    const CLEAR: Evidence = Evidence {
        shares: (1.0, 0.0),
        leading: Favour::Distorted,
        response: Favour::Distorted,
        frontier: Favour::Distorted,
        frontier_single: false,
        light_hydride: false,
        heavy_alkaline_earth: false,
        inverted: false,
    };

    #[test]
    fn agreement_is_confident_and_contradiction_undecided() {
        let ruling = weigh(&CLEAR);
        assert_eq!((ruling.shape, ruling.confident), (Favour::Distorted, true));
        let against = weigh(&Evidence { frontier: Favour::Symmetric, ..CLEAR });
        assert_eq!(against.doubt, Some(Doubt::FrontierAgainstSum));
        let split = weigh(&Evidence { shares: (0.5, 0.4), response: Favour::Symmetric, frontier: Favour::Silent, ..CLEAR });
        assert_eq!(split.doubt, Some(Doubt::Split));
        assert!(!weigh(&Evidence { inverted: true, ..CLEAR }).confident);
    }

    #[test]
    fn the_two_stated_classes() {
        let planar = Evidence {
            shares: (0.03, 0.97),
            leading: Favour::Symmetric,
            response: Favour::Symmetric,
            frontier_single: true,
            ..CLEAR
        };
        assert_eq!(weigh(&planar).shape, Favour::Silent);
        let methyl = weigh(&Evidence { light_hydride: true, ..planar });
        assert_eq!((methyl.shape, methyl.confident), (Favour::Symmetric, false));
        let earth = weigh(&Evidence { heavy_alkaline_earth: true, frontier: Favour::Silent, ..planar });
        assert_eq!(earth.doubt, Some(Doubt::MissingShell));
    }
}
