//! Documents against their schema, and back again.

use serde_json::Value;

use super::*;
use crate::csv_table::{levels_csv, sweep_csv};
use crate::synthetic::{self, n};

fn shape_document() -> ShapeDocument {
    let sweep = synthetic::hydrogen_sulfide();
    ShapeDocument {
        schema: ShapeSchema,
        program: Program::this(),
        units: Units::default(),
        molecule: sweep.molecule,
        method: sweep.method,
        coordinate: sweep.coordinates.into_iter().next(),
        ensemble: Some(Ensemble {
            seed: 1,
            members: 200,
            spreads: vec!["K 1.6 to 2.0".into()],
        }),
        cases: vec![Case {
            formula: None,
            coordinate: None,
            charge: 0,
            electrons: 8,
            unpaired: 0,
            configuration: "4a1:2 2b2:2 5a1:2 2b1:2".into(),
            verdict: "bent".into(),
            confident: true,
            angle: Some(n(92.0)),
            angle_range: Some([n(90.0), n(96.0)]),
            depth: Some(n(1.85)),
            support: Some(n(1.0)),
            arguments: vec![Argument {
                name: "frontier".into(),
                favours: "bent".into(),
                angle: None,
                depth: None,
                line: Some("5a1".into()),
                change: Some(n(-1.7)),
                note: None,
            }],
            because: vec!["5a1 rises towards linear".into()],
            could_be_wrong_because: vec!["the sum carries no electron repulsion".into()],
            would_flip: vec![Flip {
                what: "hii S 3p".into(),
                change: Some(n(2.5)),
                unit: "eV".into(),
                published_spread: Some(n(2.3)),
                to: "linear".into(),
            }],
            curves: vec![Curve {
                name: "sum".into(),
                at: vec![n(90.0)],
                energy: vec![None],
            }],
        }],
        ties: vec![vec![6, 7, 8]],
        warnings: vec![Warning {
            code: "example".into(),
            text: "made up".into(),
        }],
        missing: vec![Missing {
            path: "/cases/0/curves/0/energy/0".into(),
            reason: "test".into(),
        }],
    }
}

fn params_document() -> ParamsDocument {
    let method = synthetic::method();
    let variants = vec![Variant {
        name: "other".into(),
        values: method.values.clone(),
    }];
    ParamsDocument {
        schema: ParamsSchema,
        program: Program::this(),
        units: Units::default(),
        molecule: None,
        method,
        variants,
        sets: vec!["made up".into()],
        warnings: vec![],
        missing: vec![],
    }
}

/// A levels document with every optional part.
fn full_levels() -> LevelsDocument {
    let mut document = synthetic::levels_of(&synthetic::hydrogen_sulfide(), 3);
    document.basis = Some(vec![BasisFunction {
        atom: 1,
        shell: "3p".into(),
        function: "z".into(),
    }]);
    let share = ShellPopulation {
        atom: 1,
        element: "S".into(),
        shell: "3p".into(),
        share: n(0.75),
        lowdin: None,
    };
    let point = &mut document.points[0];
    point.levels[0].coefficients = Some(vec![n(0.5)]);
    point.levels[0].populations = Some(vec![share]);
    point.charges = Some(vec![AtomCharge {
        atom: 1,
        element: "S".into(),
        charge: n(-0.2),
        lowdin: None,
    }]);
    point.overlap_populations = Some(vec![OverlapPopulation {
        atoms: [1, 2],
        population: n(0.6),
    }]);
    document.symmetry.near_misses = vec![NearMiss {
        group: "D2h".into(),
        tolerance_angstrom: n(0.004),
        at: vec![],
    }];
    document.molecule.positions = vec![AtomPosition {
        atom: 1,
        element: "S".into(),
        at: [n(0.1), n(-0.0), n(1e-300)],
    }];
    document.molecule.geometry.bonds = vec![BondLength {
        atoms: [1, 2],
        elements: ["S".into(), "H".into()],
        length: n(1.336),
        source: "made up".into(),
    }];
    document
}

fn documents() -> Vec<(&'static str, String)> {
    let mut documents = vec![
        ("levels", to_json(&full_levels()).unwrap()),
        ("shape", to_json(&shape_document()).unwrap()),
        ("params", to_json(&params_document()).unwrap()),
    ];
    for sweep in [
        synthetic::hydrogen_sulfide(),
        synthetic::silicon_difluoride(),
        synthetic::boron_trifluoride(),
        synthetic::random(11),
    ] {
        documents.push(("sweep", to_json(&sweep).unwrap()));
    }
    documents
}

#[test]
fn every_document_is_valid_under_its_schema() {
    let schemas = schemas();
    for (form, text) in documents() {
        let schema = &schemas.iter().find(|(name, _)| *name == form).unwrap().1;
        let validator = jsonschema::validator_for(schema).unwrap();
        let document: Value = serde_json::from_str(&text).unwrap();
        let errors: Vec<String> = validator
            .iter_errors(&document)
            .map(|error| error.to_string())
            .collect();
        assert!(errors.is_empty(), "{form}: {errors:?}");
        for key in document.as_object().unwrap().keys() {
            let mut broken = document.clone();
            broken
                .as_object_mut()
                .unwrap()
                .insert(key.clone(), Value::Bool(true));
            assert!(
                !validator.is_valid(&broken),
                "{form}: the schema takes a wrong {key}"
            );
        }
    }
}

#[test]
fn the_committed_schemas_are_current() {
    let directory = concat!(env!("CARGO_MANIFEST_DIR"), "/schema");
    for (form, schema) in schemas() {
        let file = format!("{directory}/{form}.schema.json");
        if std::env::var_os("ORBEND_UPDATE").is_some() {
            let text = serde_json::to_string_pretty(&schema).unwrap();
            std::fs::write(&file, format!("{text}\n")).unwrap();
        }
        let committed = std::fs::read_to_string(&file).unwrap_or_default();
        let committed: Value = serde_json::from_str(&committed).unwrap_or_default();
        assert!(
            committed == schema,
            "{file} is stale; refresh it with: ORBEND_UPDATE=1 cargo test -p orbend-report"
        );
    }
}

#[test]
fn energies_and_lengths_have_their_units_in_the_schema() {
    let [(_, levels), ..] = schemas();
    let about = |kind: &str, key: &str| {
        levels["$defs"][kind]["properties"][key]["description"]
            .as_str()
            .unwrap()
            .to_owned()
    };
    assert!(about("LevelRecord", "energy").contains("eV"));
    assert!(about("AtomPosition", "at").contains("Å"));
    assert!(about("ShellValues", "zeta").contains("bohr⁻¹"));
}

#[test]
fn reading_back_gives_the_same_document_and_bytes() {
    for (form, text) in documents() {
        let again = match read_document(&text).unwrap() {
            Document::Levels(document) => to_json(&*document),
            Document::Sweep(document) => to_json(&*document),
            Document::Shape(document) => to_json(&*document),
            Document::Params(document) => to_json(&*document),
            Document::Plan(document) => to_json(&*document),
        };
        assert!(again.unwrap() == text, "{form}");
    }
    let sweep = synthetic::random(3);
    assert_eq!(
        SweepDocument::from_json(&to_json(&sweep).unwrap()),
        Ok(sweep)
    );
    assert_eq!(
        LevelsDocument::from_json(&to_json(&full_levels()).unwrap()),
        Ok(full_levels())
    );
}

#[test]
fn a_grid_has_neither_lines_nor_crossings() {
    let mut grid = synthetic::hydrogen_sulfide();
    grid.lines = None;
    grid.crossings = None;
    for level in grid.points.iter_mut().flat_map(|point| &mut point.levels) {
        level.line = None;
    }
    let document: Value = serde_json::from_str(&to_json(&grid).unwrap()).unwrap();
    assert!(document.get("lines").is_none() && document.get("crossings").is_none());
    assert_eq!(document["points"][0]["levels"][0]["line"], Value::Null);
}

#[test]
fn documents_that_contradict_themselves_are_refused() {
    let place = |document: &SweepDocument| match document.check() {
        Err(DocumentError::Inconsistent { place, .. }) => place,
        other => panic!("{other:?}"),
    };
    let good = synthetic::hydrogen_sulfide();
    let mut wrong = good.clone();
    wrong.points[2].levels.swap(0, 1);
    assert_eq!(place(&wrong), "/points/2/levels");
    let mut wrong = good.clone();
    wrong.points[1].levels[3].line = Some(99);
    assert_eq!(place(&wrong), "/points/1/levels/3/line");
    let mut wrong = good.clone();
    wrong.lines.as_mut().unwrap()[1].energies.pop();
    assert_eq!(place(&wrong), "/lines/1");
    let mut wrong = good;
    wrong.points[5].at.clear();
    assert_eq!(place(&wrong), "/points/5/at");
}

#[test]
fn errors_of_reading_name_the_place() {
    let unknown = read_document("{\"schema\": \"orbend/sweep/9\"}").unwrap_err();
    assert_eq!(
        unknown,
        DocumentError::UnknownSchema("orbend/sweep/9".into())
    );
    let broken = read_document("{\n  \"schema\": oops\n}").unwrap_err();
    assert!(broken.to_string().starts_with("line 2, column"), "{broken}");
    let text = to_json(&synthetic::hydrogen_sulfide()).unwrap();
    let wrong = LevelsDocument::from_json(&text).unwrap_err();
    assert!(
        wrong.to_string().contains("expected \"orbend/levels/1\""),
        "{wrong}"
    );
}

#[test]
fn tables_have_one_row_per_point_and_level() {
    let sweep = synthetic::boron_trifluoride();
    let mut bytes = Vec::new();
    sweep_csv(&sweep, &mut bytes).unwrap();
    let text = String::from_utf8(bytes).unwrap();
    let mut lines = text.split("\r\n");
    assert_eq!(
        lines.next().unwrap(),
        "point,at_1,level,energy_ev,occupation,label,valence_label,full_label,irrep,line,point_group"
    );
    let mut reader = csv::Reader::from_reader(text.as_bytes());
    let rows: Vec<csv::StringRecord> = reader.records().map(Result::unwrap).collect();
    let expected: Vec<&LevelRecord> = sweep
        .points
        .iter()
        .flat_map(|point| &point.levels)
        .collect();
    assert_eq!(rows.len(), expected.len());
    for (row, level) in rows.iter().zip(expected) {
        let energy: f64 = row[3].parse().unwrap();
        assert_eq!(energy.to_bits(), level.energy.get().to_bits());
        assert_eq!(row[5], level.label);
        assert_eq!(row[9].parse::<u32>().ok(), level.line);
    }

    let mut bytes = Vec::new();
    levels_csv(&full_levels(), &mut bytes).unwrap();
    let text = String::from_utf8(bytes).unwrap();
    assert!(text.starts_with("point,level,energy_ev,"));
}
