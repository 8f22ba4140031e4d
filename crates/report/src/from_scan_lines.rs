//! Crossings and followed lines of a scan as records.

use orbend_scan::{Crossing, MeetingKind, Sweep, SweepPlan};

use crate::document::{
    Certificate, CertificateInterval, CertificateKind, CrossingKind, CrossingRecord,
    CrossingSearch, FollowedRecord, NotFinite, Number,
};

pub(crate) fn followed_records(
    sweep: &Sweep,
    followed: &[orbend_scan::Followed],
) -> Result<Vec<FollowedRecord>, NotFinite> {
    let plan = sweep.plan();
    let end = |point: usize| plan.values(point).first().copied();
    let (Some(first), Some(last)) = (end(0), end(plan.points() - 1)) else {
        return Ok(Vec::new());
    };
    followed
        .iter()
        .enumerate()
        .map(|(line, followed)| {
            let interval = |from: f64, to: f64, kind, overlap: f64| {
                Ok(CertificateInterval {
                    from: Number::new(from)?,
                    to: Number::new(to)?,
                    kind,
                    overlap: Some(Number::new(overlap)?),
                })
            };
            let mut intervals = Vec::new();
            if let Some(overlap) = followed.overlap {
                intervals.push(interval(first, last, CertificateKind::Overlap, overlap)?);
            }
            for (stretches, kind) in [
                (&followed.exchanges, CertificateKind::Overlap),
                (&followed.ambiguous, CertificateKind::Ambiguous),
            ] {
                for stretch in stretches {
                    intervals.push(interval(stretch.from, stretch.to, kind, stretch.overlap)?);
                }
            }
            let weakest = intervals.iter().map(|interval| interval.kind).max();
            Ok(FollowedRecord {
                id: line as u32,
                lines: followed.lines.iter().map(|&line| line as u32).collect(),
                certificate: Certificate {
                    kind: weakest.unwrap_or(CertificateKind::Symmetry),
                    intervals,
                },
            })
        })
        .collect()
}

pub(crate) fn crossing_records(
    sweep: &Sweep,
    crossings: &[Crossing],
) -> Result<Vec<CrossingRecord>, NotFinite> {
    let lines = sweep.plan().lines();
    crossings
        .iter()
        .map(|crossing| {
            let (a, b) = crossing.lines;
            let number = |value: Option<f64>| value.map(Number::new).transpose();
            Ok(CrossingRecord {
                kind: match crossing.kind {
                    MeetingKind::Crossing => CrossingKind::Crossing,
                    MeetingKind::Avoided => CrossingKind::Avoided,
                    MeetingKind::Touching => CrossingKind::Touching,
                },
                lines: [a as u32, b as u32],
                labels: [lines[a].name.plain.clone(), lines[b].name.plain.clone()],
                at: Number::new(crossing.at)?,
                energy: Some(Number::new(crossing.energy)?),
                gap: number(crossing.gap)?,
                exchange: number(crossing.exchange)?,
                changes_configuration: crossing.changes_configuration,
            })
        })
        .collect()
}

pub(crate) fn crossing_search(plan: &SweepPlan) -> Result<Option<CrossingSearch>, NotFinite> {
    let [axis] = plan.path().axes() else {
        return Ok(None);
    };
    let (low, high) = axis.limits();
    Ok(Some(CrossingSearch {
        spacing: Number::new(orbend_scan::resolution(&axis.unit, high - low))?,
        largest_gap: Number::new(orbend_scan::AVOIDED_GAP_EV)?,
        smallest_exchange: Number::new(orbend_scan::SMALLEST_EXCHANGE)?,
    }))
}
