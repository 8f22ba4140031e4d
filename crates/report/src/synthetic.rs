//! Documents made up for tests: their numbers only look like a calculation's.

use crate::document::*;

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

/// Bending of H2S, much as Walsh drew AH2.
pub(crate) fn hydrogen_sulfide() -> SweepDocument {
    let xs: Vec<f64> = (0..=60).map(|k| 60.0 + 2.0 * f64::from(k)).collect();
    let frame = Frame {
        formula: "H2S",
        elements: &["S", "H", "H"],
        kind: MotionKind::Bend,
        unit: CoordinateUnit::Degree,
        atoms: &[2, 1, 3],
        groups: ("C2v", "C2v", "Dinfh"),
        electrons: 8,
    };
    let lines = [
        sketch(
            ("4a1", "1a1", "a1"),
            ("4a1", "4sigma_g+"),
            shape(&xs, &[-23.4, 1.9, -0.6]),
        ),
        sketch(
            ("2b2", "1b2", "b2"),
            ("2b2", "3sigma_u+"),
            shape(&xs, &[-13.1, -5.2, 2.6]),
        ),
        sketch(
            ("5a1", "2a1", "a1"),
            ("5a1", "2pi_u"),
            shape(&xs, &[-15.4, 1.2, 1.4, 1.8]),
        ),
        sketch(("2b1", "1b1", "b1"), ("2b1", "2pi_u"), shape(&xs, &[-11.0])),
        sketch(
            ("6a1", "3a1", "a1"),
            ("6a1", "5sigma_g+"),
            shape(&xs, &[-1.0, 5.2, -1.9, 1.1]),
        ),
        sketch(
            ("3b2", "2b2", "b2"),
            ("3b2", "4sigma_u+"),
            shape(&xs, &[-3.5, 9.0, -1.0, 3.5]),
        ),
    ];
    sweep(&frame, &xs, &lines)
}

/// A triatomic with two second-row ends: twelve lines, two of them deep.
pub(crate) fn silicon_difluoride() -> SweepDocument {
    let xs: Vec<f64> = (0..=50).map(|k| 80.0 + 2.0 * f64::from(k)).collect();
    let frame = Frame {
        formula: "F2Si",
        elements: &["Si", "F", "F"],
        kind: MotionKind::Bend,
        unit: CoordinateUnit::Degree,
        atoms: &[2, 1, 3],
        groups: ("C2v", "C2v", "Dinfh"),
        electrons: 18,
    };
    let lines = [
        sketch(
            ("5a1", "1a1", "a1"),
            ("5a1", "5sigma_g+"),
            shape(&xs, &[-40.9, 0.1]),
        ),
        sketch(
            ("3b2", "1b2", "b2"),
            ("3b2", "4sigma_u+"),
            shape(&xs, &[-40.3, -0.3]),
        ),
        sketch(
            ("6a1", "2a1", "a1"),
            ("6a1", "6sigma_g+"),
            shape(&xs, &[-20.2, 0.9, -0.2]),
        ),
        sketch(
            ("4b2", "2b2", "b2"),
            ("4b2", "5sigma_u+"),
            shape(&xs, &[-19.2, -0.8, 0.3]),
        ),
        sketch(
            ("2b1", "1b1", "b1"),
            ("2b1", "2pi_u"),
            shape(&xs, &[-18.9, 0.1]),
        ),
        sketch(
            ("7a1", "3a1", "a1"),
            ("7a1", "2pi_u"),
            shape(&xs, &[-18.6, 0.2, -0.4]),
        ),
        sketch(
            ("5b2", "3b2", "b2"),
            ("5b2", "1pi_g"),
            shape(&xs, &[-17.7, -0.7, 0.3]),
        ),
        sketch(("1a2", "1a2", "a2"), ("1a2", "1pi_g"), shape(&xs, &[-18.1])),
        sketch(
            ("8a1", "4a1", "a1"),
            ("8a1", "3pi_u"),
            shape(&xs, &[-13.9, 1.4, 3.6]),
        ),
        sketch(
            ("3b1", "2b1", "b1"),
            ("3b1", "3pi_u"),
            shape(&xs, &[-8.3, -0.6]),
        ),
        sketch(
            ("9a1", "5a1", "a1"),
            ("9a1", "7sigma_g+"),
            shape(&xs, &[1.8, 5.0, 7.0]),
        ),
        sketch(
            ("6b2", "4b2", "b2"),
            ("6b2", "6sigma_u+"),
            shape(&xs, &[4.0, 9.0, 12.0]),
        ),
    ];
    let mut document = sweep(&frame, &xs, &lines);
    document.molecule.title = "SiF2".into();
    document
}

/// Pyramidal to planar AX3 with degenerate sets.
pub(crate) fn boron_trifluoride() -> SweepDocument {
    let xs: Vec<f64> = (0..=30).map(|k| 90.0 + f64::from(k)).collect();
    let frame = Frame {
        formula: "BF3",
        elements: &["B", "F", "F", "F"],
        kind: MotionKind::Pyramid,
        unit: CoordinateUnit::Degree,
        atoms: &[1],
        groups: ("C3v", "C3v", "D3h"),
        electrons: 24,
    };
    let set = |names, ends, energies| Sketch {
        degeneracy: 2,
        ..sketch(names, ends, energies)
    };
    let lines = [
        sketch(
            ("3a1", "1a1", "a1"),
            ("3a1", "3a1'"),
            shape(&xs, &[-41.9, 0.2]),
        ),
        set(("2e", "1e", "e"), ("2e", "2e'"), shape(&xs, &[-40.2, -0.4])),
        sketch(
            ("4a1", "2a1", "a1"),
            ("4a1", "4a1'"),
            shape(&xs, &[-20.7, 0.3]),
        ),
        set(("3e", "2e", "e"), ("3e", "3e'"), shape(&xs, &[-18.7, -0.9])),
        sketch(
            ("5a1", "3a1", "a1"),
            ("5a1", "1a2''"),
            shape(&xs, &[-19.4, 0.4, -0.3]),
        ),
        set(("4e", "3e", "e"), ("4e", "4e'"), shape(&xs, &[-17.9, -0.2])),
        set(
            ("5e", "4e", "e"),
            ("5e", "1e''"),
            shape(&xs, &[-17.4, -0.4]),
        ),
        sketch(
            ("1a2", "1a2", "a2"),
            ("1a2", "1a2'"),
            shape(&xs, &[-16.9, -0.3]),
        ),
        sketch(
            ("6a1", "4a1", "a1"),
            ("6a1", "2a2''"),
            shape(&xs, &[-10.8, 3.0, 1.1]),
        ),
        set(
            ("6e", "5e", "e"),
            ("6e", "5e'"),
            shape(&xs, &[4.0, 6.0, 5.0]),
        ),
    ];
    sweep(&frame, &xs, &lines)
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
