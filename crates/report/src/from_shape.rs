//! From shape verdicts to their document.

use orbend_scan::shape::{Favour, ShapeVerdict, SumArgument, Support};

use crate::document::{
    Argument, Case, CoordinateRecord, Curve, Ensemble, Flip, NotFinite, Number, Program,
    ShapeDocument, ShapeSchema, Units,
};
use crate::from_scan::{
    FromScanError, Provenance, coordinate_records, method_record, molecule_record, warnings,
};

/// Sums of different electron counts closer than this (eV) at every point are one curve.
const TIE_EV: f64 = 1e-6;

/// The document of one verdict or of a series; the molecule and the method are those of the first.
/// `None` for no verdict at all.
///
/// # Errors
/// A position or a value that is not finite.
pub fn shape_document(
    verdicts: &[(ShapeVerdict, Provenance)],
) -> Result<Option<ShapeDocument>, FromScanError> {
    let Some((first, provenance)) = verdicts.first() else {
        return Ok(None);
    };
    let coordinate = coordinate(first)?;
    let formula = first.plan.molecule().formula();
    let cases = verdicts
        .iter()
        .map(|(verdict, _)| {
            let own = self::coordinate(verdict)?;
            let mut case = case(verdict)?;
            let other = title_or_formula(verdict);
            if verdict.plan.molecule().formula() != formula || other != title_or_formula(first) {
                case.formula = Some(other);
            }
            if Some(&own) != Some(&coordinate) {
                case.coordinate = Some(own);
            }
            Ok(case)
        })
        .collect::<Result<Vec<_>, FromScanError>>()?;
    let mut method = method_record(&first.plan, provenance)?;
    method.notes.push(
        "verdicts use both coupling forms and hydrogen with and without a 2p shell; the leading sum is \
         the constant form with it"
            .to_owned(),
    );
    let mut said: Vec<_> = Vec::new();
    for (verdict, provenance) in verdicts {
        for warning in warnings(&verdict.plan, provenance) {
            if !said.contains(&warning) {
                said.push(warning);
            }
        }
    }
    Ok(Some(ShapeDocument {
        schema: ShapeSchema,
        program: Program::this(),
        units: Units::default(),
        molecule: molecule_record(&first.plan, provenance)?,
        method,
        coordinate: Some(coordinate),
        ensemble: Some(Ensemble {
            seed: first.seed,
            members: first.support.curves as u32,
            spreads: Support::spreads(first.motion),
        }),
        cases,
        ties: ties(verdicts),
        warnings: said,
        missing: Vec::new(),
    }))
}

/// The formula as the user wrote it, if so.
fn title_or_formula(verdict: &ShapeVerdict) -> String {
    let molecule = verdict.plan.molecule();
    let written = orbend_structure::Formula::is_formula(&molecule.title);
    if written {
        molecule.title.clone()
    } else {
        molecule.formula()
    }
}

fn coordinate(verdict: &ShapeVerdict) -> Result<CoordinateRecord, FromScanError> {
    let records = coordinate_records(&verdict.plan)?;
    records
        .into_iter()
        .next()
        .ok_or(FromScanError::NotFinite(NotFinite(f64::NAN)))
}

fn number(value: Option<f64>) -> Result<Option<Number>, NotFinite> {
    value.map(Number::new).transpose()
}

fn case(verdict: &ShapeVerdict) -> Result<Case, NotFinite> {
    let motion = verdict.motion;
    let electrons = verdict.plan.electrons();
    let mut arguments = verdict
        .sums
        .iter()
        .map(|sum| sum_argument(verdict, sum))
        .collect::<Result<Vec<_>, _>>()?;
    let frontier = &verdict.frontier;
    arguments.insert(
        2,
        Argument {
            name: "frontier".to_owned(),
            favours: frontier.favours.word(motion).to_owned(),
            angle: None,
            depth: None,
            line: frontier.line.map(|_| frontier.label.clone()),
            change: frontier
                .line
                .map(|_| Number::new(frontier.change))
                .transpose()?,
            note: Some(match frontier.line {
                Some(_) => format!(
                    "{}; {} electrons, {:.2} eV in all",
                    if verdict.frontier_votes {
                        "votes"
                    } else {
                        "shown, does not vote"
                    },
                    frontier.electrons,
                    frontier.electrons * frontier.change
                ),
                None => "silent: no occupied line responds".to_owned(),
            }),
        },
    );
    arguments.push(Argument {
        name: "electron-count".to_owned(),
        favours: verdict.electron_count.word(motion).to_owned(),
        angle: None,
        depth: None,
        line: None,
        change: None,
        note: Some(if verdict.electron_count == Favour::Silent {
            "reference: no rule for this motion and number of electrons".to_owned()
        } else {
            format!(
                "reference, does not vote: Walsh 1953 for {} electrons",
                electrons.total()
            )
        }),
    });
    let range = verdict
        .angle_range
        .map(|[low, high]| Ok::<_, NotFinite>([Number::new(low)?, Number::new(high)?]))
        .transpose()?;
    Ok(Case {
        formula: None,
        coordinate: None,
        charge: verdict.plan.molecule().charge,
        electrons: electrons.total(),
        unpaired: electrons.unpaired(),
        configuration: verdict.configuration.clone(),
        verdict: verdict.word().to_owned(),
        confident: verdict.ruling.confident,
        angle: number(verdict.angle)?,
        angle_range: range,
        depth: number(verdict.depth)?,
        support: Some(Number::new(verdict.ruling.support)?),
        arguments,
        because: verdict.because.clone(),
        could_be_wrong_because: verdict.could_be_wrong_because.clone(),
        would_flip: verdict
            .flips
            .iter()
            .map(|flip| {
                Ok(Flip {
                    what: flip.what.clone(),
                    change: number(flip.change)?,
                    unit: flip.unit.to_owned(),
                    published_spread: number(flip.published_spread)?,
                    to: flip.to.word(motion).to_owned(),
                })
            })
            .collect::<Result<_, NotFinite>>()?,
        curves: verdict
            .sums
            .iter()
            .take(2)
            .map(curve)
            .collect::<Result<_, _>>()?,
    })
}

fn sum_argument(verdict: &ShapeVerdict, sum: &SumArgument) -> Result<Argument, NotFinite> {
    let mut notes: Vec<&str> = vec![if sum.votes {
        "votes"
    } else {
        "shown, does not vote"
    }];
    if !sum.at_rest {
        notes.push("charges do not come to rest everywhere");
    }
    if sum.favours == Favour::Silent {
        notes.push("no minimum inside the range");
    }
    Ok(Argument {
        name: sum.name.to_owned(),
        favours: sum.favours.word(verdict.motion).to_owned(),
        angle: number(sum.angle)?,
        depth: number(sum.depth)?,
        line: None,
        change: None,
        note: Some(notes.join("; ")),
    })
}

fn curve(sum: &SumArgument) -> Result<Curve, NotFinite> {
    Ok(Curve {
        name: sum.name.to_owned(),
        at: sum
            .angles
            .iter()
            .map(|&angle| Number::new(angle))
            .collect::<Result<_, _>>()?,
        energy: sum
            .sums
            .iter()
            .map(|&value| Number::new(value).ok())
            .collect(),
    })
}

/// Electron counts of the same atoms whose minimal sums are one curve: where a line is exactly flat
/// its electrons decide nothing.
fn ties(verdicts: &[(ShapeVerdict, Provenance)]) -> Vec<Vec<u32>> {
    let relative = |verdict: &ShapeVerdict| -> Vec<f64> {
        let sums = verdict
            .sums
            .iter()
            .find(|sum| sum.name == "sum")
            .map_or(&[][..], |sum| &sum.sums);
        sums.iter().map(|sum| sum - sums[0]).collect()
    };
    let mut groups: Vec<(String, Vec<f64>, Vec<u32>)> = Vec::new();
    for (verdict, _) in verdicts {
        let molecule = verdict.plan.molecule();
        let key = format!("{} {:?}", molecule.formula(), molecule.positions);
        let curve = relative(verdict);
        let electrons = verdict.plan.electrons().total();
        let same = |other: &[f64]| {
            other.len() == curve.len()
                && other
                    .iter()
                    .zip(&curve)
                    .all(|(a, b)| (a - b).abs() < TIE_EV)
        };
        match groups
            .iter_mut()
            .find(|group| group.0 == key && same(&group.1))
        {
            Some(group) => {
                if !group.2.contains(&electrons) {
                    group.2.push(electrons);
                }
            }
            None => groups.push((key, curve, vec![electrons])),
        }
    }
    groups
        .into_iter()
        .map(|group| group.2)
        .filter(|counts| counts.len() > 1)
        .collect()
}
