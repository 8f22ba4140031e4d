//! From a hand-off to its document.

use orbend_scan::Sweep;
use orbend_scan::reasons::{
    ActiveSpace, Distortions, HandOff, Makeup, RootFlip, RootKind, SpaceKind, StartKind, Term,
};
use orbend_structure::{Angstrom, Bohr, Molecule};

use crate::document::{
    self, ActiveLine, ChargeRecord, IrrepCount, NotFinite, Number, PlanDocument, PlanSchema,
    Program, QcMolecule, QcProvenance, SpaceStop, StartGeometry, StateRecord, Units,
};
use crate::draw::ticks::ascii_number;
use crate::from_distortion::distortions_record;
use crate::from_scan::{
    FromScanError, Provenance, coordinate_records, method_record, molecule_record, symmetry_record,
    warnings,
};

/// The document of a hand-off; `distortions` name the start geometry that they are of.
///
/// # Errors
/// A position or a value that is not finite.
pub fn plan_document(
    sweep: &Sweep,
    hand_off: &HandOff,
    distortions: &[(usize, Distortions)],
    provenance: &Provenance,
) -> Result<PlanDocument, FromScanError> {
    let plan = sweep.plan();
    let starts = hand_off
        .starts
        .iter()
        .map(|start| {
            Ok(StartGeometry {
                kind: match start.kind {
                    StartKind::Verdict => "verdict",
                    StartKind::LowestSum => "lowest-sum",
                    StartKind::Given => "given",
                    StartKind::HigherSymmetry => "higher-symmetry",
                    StartKind::Flip => "flip",
                }
                .to_owned(),
                at: start.at.map(Number::new).transpose()?.into_iter().collect(),
                point_group: start.point_group.clone(),
                charge: start.molecule.charge,
                unpaired: start.molecule.unpaired.unwrap_or(0),
                positions: start
                    .molecule
                    .positions
                    .iter()
                    .map(|&p| Number::triple(p))
                    .collect::<Result<_, _>>()?,
                reason: start.reason.clone(),
            })
        })
        .collect::<Result<_, NotFinite>>()?;
    let plain = |terms: &[Term]| terms.iter().map(|term| term.plain.clone()).collect();
    let display = |terms: &[Term]| terms.iter().map(|term| term.display.clone()).collect();
    let states = hand_off
        .states
        .iter()
        .map(|state| StateRecord {
            charge: state.charge,
            unpaired: state.unpaired,
            configuration: state.configuration.clone(),
            terms: plain(&state.terms),
            display_terms: display(&state.terms),
            own_terms: plain(&state.terms_there),
            display_own_terms: display(&state.terms_there),
            start: state.start as u32,
            reason: state.reason.clone(),
        })
        .collect();
    let charges = hand_off
        .charges
        .iter()
        .map(|charge| {
            Ok(ChargeRecord {
                charge: charge.charge,
                unpaired: charge.unpaired,
                verdict: charge.verdict.clone(),
                angle: charge.angle.map(Number::new).transpose()?,
                support: Number::new(charge.support)?,
                differs: charge.differs,
                reason: charge.reason.clone(),
            })
        })
        .collect::<Result<_, NotFinite>>()?;
    Ok(PlanDocument {
        schema: PlanSchema,
        program: Program::this(),
        units: Units::default(),
        molecule: molecule_record(plan, provenance)?,
        method: method_record(plan, provenance)?,
        coordinates: coordinate_records(plan)?,
        symmetry: symmetry_record(plan)?,
        starts,
        states,
        charges,
        root_flips: hand_off
            .flips
            .iter()
            .map(|flip| root_flip(sweep, flip))
            .collect::<Result<_, _>>()?,
        active_spaces: hand_off
            .spaces
            .iter()
            .map(|space| active_space(sweep, hand_off, space))
            .collect::<Result<_, _>>()?,
        distortions: distortions
            .iter()
            .map(|(start, one)| distortions_record(one, Some(*start)))
            .collect::<Result<_, _>>()?,
        warnings: warnings(plan, provenance),
        missing: Vec::new(),
    })
}

/// A molecule in the QCSchema form; without a number of unpaired electrons, `unpaired` is taken.
///
/// # Errors
/// A position that is not finite.
pub fn qcschema_molecule(molecule: &Molecule, unpaired: u32) -> Result<QcMolecule, NotFinite> {
    Ok(QcMolecule {
        schema_name: "qcschema_molecule".to_owned(),
        schema_version: 2,
        symbols: molecule
            .elements
            .iter()
            .map(|element| element.symbol().to_owned())
            .collect(),
        geometry: molecule
            .positions
            .iter()
            .flatten()
            .map(|&x| Number::new(Bohr::from(Angstrom(x)).0))
            .collect::<Result<_, _>>()?,
        molecular_charge: Number::new(f64::from(molecule.charge))?,
        molecular_multiplicity: molecule.unpaired.unwrap_or(unpaired) + 1,
        name: molecule.title.clone(),
        fix_com: true,
        fix_orientation: true,
        provenance: QcProvenance::this(),
    })
}

fn root_flip(sweep: &Sweep, flip: &RootFlip) -> Result<document::RootFlip, NotFinite> {
    let lines = sweep.plan().lines();
    let [a, b] = [flip.lines.0, flip.lines.1].map(|line| lines[line].name.plain.clone());
    let ordinal = ["lowest", "lowest", "second", "third", "fourth"];
    let pair = |upper: usize| {
        let name = |place: usize| ordinal.get(place).copied().unwrap_or("higher");
        format!("{} and {}", name(upper - 1), name(upper))
    };
    let text = match flip.kind {
        RootKind::Ground => format!(
            "the ground configuration changes: {b} is emptied for {a} or the other way round; average both states near it"
        ),
        RootKind::Ionised => format!(
            "an electron from {a} or from {b}: the {} states of the ion change places",
            pair(flip.upper)
        ),
        RootKind::Attached => format!(
            "an electron into {a} or into {b}: the {} states of the negative ion change places, and excitations from one level into them",
            pair(flip.upper)
        ),
        RootKind::Mixed => format!(
            "{a} (filled) and {b} (empty) of one irrep exchange character: two configurations of the ground state weigh about the same"
        ),
    };
    Ok(document::RootFlip {
        kind: match flip.kind {
            RootKind::Ground => "ground",
            RootKind::Ionised => "ionised",
            RootKind::Attached => "attached",
            RootKind::Mixed => "mixed",
        }
        .to_owned(),
        at: Number::new(flip.at)?,
        energy: Number::new(flip.energy)?,
        labels: [a, b],
        gap: flip.gap.map(Number::new).transpose()?,
        text,
    })
}

fn active_space(
    sweep: &Sweep,
    hand_off: &HandOff,
    space: &ActiveSpace,
) -> Result<document::ActiveSpace, FromScanError> {
    let plan = sweep.plan();
    let group = plan.path_group();
    let last = sweep.points().saturating_sub(1);
    let occupations = [sweep.point(0)?, sweep.point(last)?].map(|point| {
        let mut electrons = vec![0.0; plan.lines().len()];
        for level in &point.levels {
            electrons[level.line] = level.occupation;
        }
        electrons
    });
    let lines = space
        .lines
        .iter()
        .map(|&line| {
            let head = &plan.lines()[line];
            Ok(ActiveLine {
                label: head.name.plain.clone(),
                valence_label: head.name.valence_plain.clone(),
                end_labels: [0, last].map(|point| sweep.full_name(line, point).0.plain.clone()),
                irrep: group.irreps[head.irrep].plain.clone(),
                degeneracy: head.degeneracy as u32,
                electrons: [
                    Number::new(occupations[0][line])?,
                    Number::new(occupations[1][line])?,
                ],
                character: [0, 1].map(|end| character(&hand_off.makeups[end][line])),
            })
        })
        .collect::<Result<_, NotFinite>>()?;
    let counts = |numbers: &[usize]| {
        group
            .irreps
            .iter()
            .zip(numbers)
            .map(|(irrep, &orbitals)| IrrepCount {
                irrep: irrep.plain.clone(),
                orbitals: orbitals as u32,
            })
            .collect()
    };
    let label = |line: usize| plan.lines()[line].name.plain.clone();
    Ok(document::ActiveSpace {
        kind: match space.kind {
            SpaceKind::Least => "least",
            SpaceKind::Proposed => "proposed",
            SpaceKind::FullValence => "full-valence",
        }
        .to_owned(),
        electrons: space.electrons,
        orbitals: space.lines.len() as u32,
        state_functions: Number::new(space.functions)?,
        lines,
        inactive_counts: counts(&space.inactive_counts),
        active_counts: counts(&space.active_counts),
        separation: space.separation.map(Number::new).transpose()?,
        order_changes: match space.order_changes {
            Some((from, to)) => Some([Number::new(from)?, Number::new(to)?]),
            None => None,
        },
        kept: Number::new(space.kept)?,
        stops: space
            .stops
            .iter()
            .map(|stop| {
                Ok(SpaceStop {
                    at: Number::new(stop.at)?,
                    active: label(stop.active),
                    outside: label(stop.outside),
                    gap: Number::new(stop.gap)?,
                    exchange: Number::new(stop.exchange)?,
                })
            })
            .collect::<Result<_, NotFinite>>()?,
    })
}

/// `N 2p 56 %, F 2p 44 %; antibonding`.
fn character(makeup: &Makeup) -> String {
    let words: Vec<String> = makeup
        .shares
        .iter()
        .filter(|(_, share)| *share >= 0.05)
        .take(3)
        .map(|(name, share)| format!("{name} {} %", ascii_number(100.0 * share, 0)))
        .collect();
    format!("{}; {}", words.join(", "), makeup.word())
}
