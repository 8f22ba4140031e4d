//! Documents made up for tests: their numbers only look like a calculation's.

mod examples;

use crate::document::*;

pub(crate) use examples::{boron_trifluoride, hydrogen_sulfide, silicon_difluoride};

/// A small reproducible generator (SplitMix64, Steele, Lea and Flood 2014).
pub(crate) struct Random(pub(crate) u64);

impl Random {
    pub(crate) fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        z ^ (z >> 31)
    }

    pub(crate) fn below(&mut self, count: u64) -> u64 {
        self.next() % count
    }

    pub(crate) fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * (self.next() >> 11) as f64 / (1_u64 << 53) as f64
    }
}

pub(crate) fn n(value: f64) -> Number {
    Number::new(value).unwrap()
}

/// One orbital: label, valence label, irrep, start and end label, set size, electrons, energy along 0..1.
pub(crate) struct Sketch {
    pub(crate) label: String,
    pub(crate) valence: String,
    pub(crate) irrep: String,
    pub(crate) ends: (String, String),
    pub(crate) degeneracy: u32,
    pub(crate) energies: Vec<f64>,
}

pub(crate) fn sketch(
    (label, valence, irrep): (&str, &str, &str),
    ends: (&str, &str),
    energies: Vec<f64>,
) -> Sketch {
    Sketch {
        label: label.into(),
        valence: valence.into(),
        irrep: irrep.into(),
        ends: (ends.0.into(), ends.1.into()),
        degeneracy: 1,
        energies,
    }
}

pub(crate) struct Frame<'a> {
    pub(crate) formula: &'a str,
    pub(crate) elements: &'a [&'a str],
    pub(crate) kind: MotionKind,
    pub(crate) unit: CoordinateUnit,
    pub(crate) atoms: &'a [u32],
    pub(crate) groups: (&'a str, &'a str, &'a str),
    pub(crate) electrons: u32,
}

pub(crate) fn method() -> Method {
    Method {
        parameter_set: "made up".into(),
        fingerprint: format!("sha256:{}", "0".repeat(64)),
        coupling: "constant".into(),
        k: n(1.75),
        polarised_hydrogen: false,
        numbering: "core".into(),
        notes: vec![],
        values: vec![ShellValues {
            element: "S".into(),
            shell: "3s".into(),
            hii: n(-20.0),
            zeta: vec![[n(2.122), n(1.0)]],
            source: "made up for a test".into(),
            checked: Checked::Memory,
        }],
    }
}

fn molecule(frame: &Frame<'_>) -> MoleculeRecord {
    MoleculeRecord {
        formula: frame.formula.into(),
        elements: frame.elements.iter().map(|e| (*e).to_owned()).collect(),
        charge: 0,
        unpaired: frame.electrons % 2,
        valence_electrons: frame.electrons,
        core_orbitals: 5,
        title: String::new(),
        positions: vec![],
        geometry: Geometry {
            origin: "formula".into(),
            notes: vec![],
            bonds: vec![],
        },
    }
}

/// A sweep from sketches, filled by aufbau; `crossings` are found where sketches of different irreps change order.
pub(crate) fn sweep(frame: &Frame<'_>, xs: &[f64], sketches: &[Sketch]) -> SweepDocument {
    let mut lines = Vec::new();
    for sketch in sketches {
        for _ in 0..sketch.degeneracy {
            lines.push(LineRecord {
                id: lines.len() as u32,
                irrep: sketch.irrep.clone(),
                degeneracy: sketch.degeneracy,
                label: sketch.label.clone(),
                valence_label: sketch.valence.clone(),
                display: crate::lettering::Lettering::level(&sketch.label).unicode(),
                passport: Passport {
                    start: sketch.ends.0.clone(),
                    end: sketch.ends.1.clone(),
                    other_axes: sketch.label.clone(),
                    ..Passport::default()
                },
                energies: sketch.energies.iter().map(|e| Some(n(*e))).collect(),
                certificate: None,
            });
        }
    }
    let points = (0..xs.len()).map(|k| point(frame, xs, k, &lines)).collect();
    let mut crossings = Vec::new();
    for (i, a) in lines.iter().enumerate() {
        for b in &lines[i + 1..] {
            crossings.extend(meetings(xs, a, b));
        }
    }
    SweepDocument {
        schema: SweepSchema,
        program: Program::this(),
        units: Units::default(),
        molecule: molecule(frame),
        method: method(),
        coordinates: vec![CoordinateRecord {
            kind: frame.kind,
            atoms: frame.atoms.to_vec(),
            unit: frame.unit,
            moved_along: vec![],
            from: Some(n(xs[0])),
            to: Some(n(xs[xs.len() - 1])),
            step: None,
            text: String::new(),
        }],
        symmetry: SymmetryRecord {
            path_group: frame.groups.1.into(),
            axes: "z along C2, x perpendicular to the plane".into(),
            tolerance_angstrom: n(1e-3),
            near_misses: vec![],
        },
        basis: None,
        points,
        lines: Some(lines),
        crossings: Some(crossings),
        crossing_search: None,
        followed: None,
        minimum: None,
        fragments: None,
        why: None,
        warnings: vec![],
        missing: vec![],
    }
}

fn point(frame: &Frame<'_>, xs: &[f64], k: usize, lines: &[LineRecord]) -> Point {
    let mut order: Vec<&LineRecord> = lines.iter().collect();
    order.sort_by(|a, b| {
        a.energies[k]
            .unwrap()
            .get()
            .total_cmp(&b.energies[k].unwrap().get())
    });
    let mut left = f64::from(frame.electrons);
    let mut levels = Vec::new();
    let mut sum = 0.0;
    let mut place = 0;
    while place < order.len() {
        let line = order[place];
        let size = line.degeneracy as usize;
        let each = (left / size as f64).min(2.0);
        for orbital in &order[place..place + size] {
            let energy = orbital.energies[k].unwrap();
            sum += each * energy.get();
            left -= each;
            let full = match k {
                0 => &orbital.passport.start,
                k if k + 1 == xs.len() => &orbital.passport.end,
                _ => &orbital.label,
            };
            levels.push(LevelRecord {
                energy,
                occupation: n(each),
                line: Some(orbital.id),
                irrep: orbital.irrep.clone(),
                degeneracy: orbital.degeneracy,
                label: orbital.label.clone(),
                valence_label: orbital.valence_label.clone(),
                display: orbital.display.clone(),
                full_label: full.clone(),
                full_display: crate::lettering::Lettering::level(full).unicode(),
                full_valence_label: String::new(),
                coefficients: None,
                populations: None,
                bonds: None,
                tags: None,
            });
        }
        place += size;
    }
    let group = match k {
        0 => frame.groups.0,
        k if k + 1 == xs.len() => frame.groups.2,
        _ => frame.groups.1,
    };
    Point {
        at: vec![n(xs[k])],
        positions: frame.elements.iter().map(|_| [Number::ZERO; 3]).collect(),
        point_group: group.into(),
        sum: Some(n(sum)),
        smallest_overlap_eigenvalue: Some(n(0.34)),
        levels,
        charges: None,
        overlap_populations: None,
    }
}

fn meetings(xs: &[f64], a: &LineRecord, b: &LineRecord) -> Vec<CrossingRecord> {
    let difference = |k: usize| a.energies[k].unwrap().get() - b.energies[k].unwrap().get();
    let record = |kind, at, energy, gap| CrossingRecord {
        exchange: None,
        changes_configuration: false,
        kind,
        lines: [a.id, b.id],
        labels: [a.label.clone(), b.label.clone()],
        at: n(at),
        energy,
        gap,
    };
    let mut found = Vec::new();
    for k in 1..xs.len() {
        let (before, after) = (difference(k - 1), difference(k));
        if before * after < 0.0 && a.irrep != b.irrep {
            let t = before / (before - after);
            let at = xs[k - 1] + t * (xs[k] - xs[k - 1]);
            let (low, high) = (
                a.energies[k - 1].unwrap().get(),
                a.energies[k].unwrap().get(),
            );
            found.push(record(
                CrossingKind::Crossing,
                at,
                Some(n(low + t * (high - low))),
                None,
            ));
        }
        let local = k + 1 < xs.len()
            && difference(k).abs() < difference(k - 1).abs()
            && difference(k).abs() < difference(k + 1).abs()
            && difference(k).abs() < 1.5;
        if a.irrep == b.irrep && local {
            found.push(record(
                CrossingKind::Avoided,
                xs[k],
                None,
                Some(n(difference(k).abs())),
            ));
        }
    }
    found
}

/// Values at `xs` of a polynomial in t = 0..1.
pub(crate) fn shape(xs: &[f64], coefficients: &[f64]) -> Vec<f64> {
    let (from, to) = (xs[0], xs[xs.len() - 1]);
    xs.iter()
        .map(|x| {
            let t = (x - from) / (to - from);
            coefficients.iter().rev().fold(0.0, |sum, c| sum * t + c)
        })
        .collect()
}

/// One geometry out of a sweep.
pub(crate) fn levels_of(sweep: &SweepDocument, point: usize) -> LevelsDocument {
    let mut one = sweep.points[point].clone();
    one.at.clear();
    for level in &mut one.levels {
        level.line = None;
    }
    LevelsDocument {
        schema: LevelsSchema,
        program: sweep.program.clone(),
        units: sweep.units.clone(),
        molecule: sweep.molecule.clone(),
        method: sweep.method.clone(),
        symmetry: sweep.symmetry.clone(),
        basis: None,
        points: vec![one],
        distortions: None,
        fragments: None,
        warnings: vec![],
        missing: vec![],
    }
}

/// A diagram of random size, irreps, sets, curves and range.
pub(crate) fn random(seed: u64) -> SweepDocument {
    const IRREPS: [(&str, u32); 12] = [
        ("a1", 1),
        ("b2g", 1),
        ("e1u", 2),
        ("t2", 3),
        ("a1'", 1),
        ("e''", 2),
        ("sigma_g+", 1),
        ("pi_u", 2),
        ("a2u", 1),
        ("sigma-", 1),
        ("b1", 1),
        ("delta_g", 2),
    ];
    let mut random = Random(seed);
    let from = random.between(0.5, 120.0);
    let range = random.between(0.2, 120.0);
    let count = 2 + random.below(60) as usize;
    let xs: Vec<f64> = (0..count)
        .map(|k| from + range * k as f64 / (count - 1) as f64)
        .collect();
    let angles = random.below(2) == 0;
    let frame = Frame {
        formula: ["H2S", "C6H6", "CClF3", "C12H22O11"][random.below(4) as usize],
        elements: &["S", "H", "H"],
        kind: if angles {
            MotionKind::Bend
        } else {
            MotionKind::Stretch
        },
        unit: if angles {
            CoordinateUnit::Degree
        } else {
            CoordinateUnit::Angstrom
        },
        atoms: &[2, 1, 3],
        groups: ("C2v", "C1", "Dinfh"),
        electrons: 1 + random.below(40) as u32,
    };
    let size = 1 + random.below(34);
    let lines: Vec<Sketch> = (0..size)
        .map(|number| {
            let (irrep, degeneracy) = IRREPS[random.below(12) as usize];
            let end = IRREPS[random.below(12) as usize].0;
            let label = format!("{}{irrep}", number + 1);
            let base = random.between(-30.0, 10.0) - 12.0 * random.below(2) as f64;
            let bends = [base, random.between(-8.0, 8.0), random.between(-9.0, 9.0)];
            let ends = (
                format!("{}{irrep}", number + 1),
                format!("{}{end}", number + 1),
            );
            let energies = shape(&xs, &bends);
            Sketch {
                degeneracy,
                ..sketch((&label, &label, irrep), (&ends.0, &ends.1), energies)
            }
        })
        .collect();
    sweep(&frame, &xs, &lines)
}
