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
/// Share of the perturbed curves that makes a majority, unless the leading argument is against it.
pub const MAJORITY: f64 = 2.0 / 3.0;
/// Share of the perturbed curves that the leading argument of a torsion or of a free range needs.
pub const HALF: f64 = 0.5;
/// Support from which on a verdict can be confident.
pub const CONFIDENT: f64 = 0.9;
/// A ligand whose np level lies this much (eV) above the centre's np inverts the polarity that the
/// parameters were made for.
pub const INVERTED_EV: f64 = 2.0;

/// What the rule looks at.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Evidence {
    /// Shares of all perturbed curves: distorted, symmetric; the rest abstains or is `opposite`.
    pub shares: (f64, f64),
    /// Share that favours the other symmetric form of a torsion or the far end of a free range.
    pub opposite: f64,
    /// How the motion is judged.
    pub way: Way,
    /// Whether a form off the path lies lower.
    pub other_form: bool,
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
    /// Stated class: in a first-row hydride radical the half-filled line falls, but one electron
    /// does not pay for the pyramid (CH3, NH3⁺); against a sum that says planar such a line is silent.
    pub light_hydride: bool,
    /// Whether the centre is Ca, Sr or Ba.
    ///
    /// Stated class: the empty (n−1)d shell that bends their dihalides is not in the basis, so a
    /// symmetric majority is not a verdict.
    pub heavy_alkaline_earth: bool,
    /// Whether a ligand's np lies more than [`INVERTED_EV`] above the centre's.
    pub inverted: bool,
}

/// How a motion is judged.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Way {
    /// From one symmetric form: bend, pyramid, squash, both ends.
    Distortion,
    /// A torsion: the polarised sum with charge response leads, because the sums without it know
    /// nothing of the charges of lone pairs and bonds that meet.
    Torsion,
    /// A coordinate and range of the user's: the polarised sum leads.
    Free,
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
    /// A form off the path lies lower than all that lies on it.
    OtherForm,
    /// Most perturbed curves are against the leading argument, which has no second voice.
    MajorityAgainstLeading,
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
    if evidence.way != Way::Distortion {
        return weigh_forms(evidence);
    }
    let (distorted, symmetric) = evidence.shares;
    let majority = if distorted > symmetric {
        Favour::Distorted
    } else {
        Favour::Symmetric
    };
    let most = distorted.max(symmetric);
    let exempt = evidence.frontier == Favour::Distorted
        && majority == Favour::Symmetric
        && evidence.frontier_single
        && evidence.light_hydride;
    let frontier = if exempt {
        Favour::Silent
    } else {
        evidence.frontier
    };
    let opposed = evidence.leading != Favour::Silent && evidence.leading != majority;
    let (shape, doubt) = if evidence.other_form {
        (Favour::Silent, Some(Doubt::OtherForm))
    } else if evidence.heavy_alkaline_earth && majority == Favour::Symmetric {
        (Favour::Silent, Some(Doubt::MissingShell))
    } else if most >= MAJORITY && opposed && (frontier == Favour::Silent || frontier != majority) {
        (Favour::Silent, Some(Doubt::MajorityAgainstLeading))
    } else if most >= MAJORITY {
        if frontier == Favour::Silent || frontier == majority {
            (majority, None)
        } else {
            (Favour::Silent, Some(Doubt::FrontierAgainstSum))
        }
    } else {
        let first = if evidence.leading == Favour::Silent {
            evidence.response
        } else {
            evidence.leading
        };
        let second = if frontier == Favour::Silent {
            evidence.response
        } else {
            frontier
        };
        if first != Favour::Silent && second == first && !evidence.inverted {
            (first, None)
        } else {
            (Favour::Silent, Some(Doubt::Split))
        }
    };
    let support = match shape {
        Favour::Distorted => distorted,
        Favour::Symmetric => symmetric,
        Favour::Opposite | Favour::Silent => most,
    };
    let confident = shape != Favour::Silent
        && support >= CONFIDENT
        && (evidence.frontier == Favour::Silent || evidence.frontier == shape)
        && evidence.leading == shape
        && evidence.response == shape
        && !evidence.inverted;
    Ruling {
        shape,
        doubt,
        majority,
        support,
        confident,
    }
}

/// The leading argument, where more than half of the perturbed curves agree; no other form votes.
fn weigh_forms(evidence: &Evidence) -> Ruling {
    let (distorted, symmetric) = evidence.shares;
    let share = |form| match form {
        Favour::Distorted => distorted,
        Favour::Symmetric => symmetric,
        Favour::Opposite => evidence.opposite,
        Favour::Silent => 0.0,
    };
    let forms = [Favour::Distorted, Favour::Symmetric, Favour::Opposite];
    let most = forms
        .iter()
        .fold(0.0, |most: f64, &form| most.max(share(form)));
    let majority = forms
        .into_iter()
        .find(|&form| share(form) >= most)
        .unwrap_or(Favour::Silent);
    let (first, second) = match evidence.way {
        Way::Torsion => (evidence.response, evidence.leading),
        _ => (evidence.leading, evidence.response),
    };
    let settled = first != Favour::Silent && share(first) > HALF;
    let shape = if settled { first } else { Favour::Silent };
    Ruling {
        shape,
        doubt: (!settled).then_some(Doubt::Split),
        majority,
        support: if settled { share(first) } else { most },
        // A range of the user's has never been calibrated.
        confident: settled
            && evidence.way == Way::Torsion
            && share(first) >= CONFIDENT
            && second == first,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const CLEAR: Evidence = Evidence {
        shares: (1.0, 0.0),
        opposite: 0.0,
        way: Way::Distortion,
        other_form: false,
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
        let against = weigh(&Evidence {
            frontier: Favour::Symmetric,
            ..CLEAR
        });
        assert_eq!(against.doubt, Some(Doubt::FrontierAgainstSum));
        let split = weigh(&Evidence {
            shares: (0.5, 0.4),
            response: Favour::Symmetric,
            frontier: Favour::Silent,
            ..CLEAR
        });
        assert_eq!(split.doubt, Some(Doubt::Split));
        assert!(
            !weigh(&Evidence {
                inverted: true,
                ..CLEAR
            })
            .confident
        );
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
        let methyl = weigh(&Evidence {
            light_hydride: true,
            ..planar
        });
        assert_eq!((methyl.shape, methyl.confident), (Favour::Symmetric, false));
        let earth = weigh(&Evidence {
            heavy_alkaline_earth: true,
            frontier: Favour::Silent,
            ..planar
        });
        assert_eq!(earth.doubt, Some(Doubt::MissingShell));
    }

    #[test]
    fn a_majority_against_the_leading_sum_and_torsions() {
        let against = weigh(&Evidence {
            shares: (0.7, 0.3),
            leading: Favour::Symmetric,
            frontier: Favour::Silent,
            ..CLEAR
        });
        assert_eq!(against.doubt, Some(Doubt::MajorityAgainstLeading));
        let torsion = Evidence {
            shares: (0.3, 0.1),
            opposite: 0.6,
            way: Way::Torsion,
            response: Favour::Opposite,
            leading: Favour::Symmetric,
            ..CLEAR
        };
        let ruling = weigh(&torsion);
        assert_eq!((ruling.shape, ruling.confident), (Favour::Opposite, false));
        let split = weigh(&Evidence {
            opposite: 0.4,
            ..torsion
        });
        assert_eq!(split.doubt, Some(Doubt::Split));
    }
}
