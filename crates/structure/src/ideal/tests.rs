use super::*;
use crate::coordinate::CoordinateKind;
use crate::measure::measure;
use crate::vector::distance;

fn build(text: &str) -> IdealGeometry {
    ideal_geometry(&Formula::parse(text).unwrap(), None, &[]).unwrap()
}

fn refused(text: &str) -> String {
    ideal_geometry(&Formula::parse(text).unwrap(), None, &[])
        .unwrap_err()
        .to_string()
}

#[test]
fn shapes_by_electron_count() {
    use ShapeClass::*;
    let expected = [
        ("CO2", Linear),
        ("BeF2", Linear),
        ("XeF2", Linear),
        ("I3-", Linear),
        ("N2O", Linear),
        ("N3-", Linear),
        ("NO2+", Linear),
        ("HCN", Linear),
        ("HNC", Linear),
        ("HCO+", Linear),
        ("C3", Linear),
        ("OCS", Linear),
        ("Li2O", Linear),
        ("HgCl2", Linear),
        ("HF2-", Linear),
        ("SiF2", Bent),
        ("H2O", Bent),
        ("H2S", Bent),
        ("NO2", Bent),
        ("NO2-", Bent),
        ("O3", Bent),
        ("SO2", Bent),
        ("HNO", Bent),
        ("HOCl", Bent),
        ("HClO", Bent),
        ("FNO", Bent),
        ("HCO", Bent),
        ("Cl2O", Bent),
        ("BF3", TrigonalPlanar),
        ("SO3", TrigonalPlanar),
        ("H2CO", TrigonalPlanar),
        ("CO3(2-)", TrigonalPlanar),
        ("CH3", TrigonalPlanar),
        ("COCl2", TrigonalPlanar),
        ("NF3", TrigonalPyramid),
        ("PF3", TrigonalPyramid),
        ("H3O+", TrigonalPyramid),
        ("XeO3", TrigonalPyramid),
        ("NH2F", TrigonalPyramid),
        ("ClO3-", TrigonalPyramid),
        ("ClF3", TShape),
        ("BrF3", TShape),
        ("CH4", Tetrahedral),
        ("POCl3", Tetrahedral),
        ("NH4+", Tetrahedral),
        ("CHFClBr", Tetrahedral),
        ("SO4(2-)", Tetrahedral),
        ("Ni(CO)4", Tetrahedral),
        ("TiCl4", Tetrahedral),
        ("XeF4", SquarePlanar),
        ("PtCl4(2-)", SquarePlanar),
        ("Ni(CN)4(2-)", SquarePlanar),
        ("SF4", SeeSaw),
        ("PF5", TrigonalBipyramid),
        ("Fe(CO)5", TrigonalBipyramid),
        ("BrF5", SquarePyramid),
        ("XeOF4", SquarePyramid),
        ("SF6", Octahedral),
        ("Cr(CO)6", Octahedral),
        ("C2H2", LinearChain),
        ("N2H2", TransChain),
        ("N2F2", TransChain),
        ("H2O2", TwistedChain),
        ("S2Cl2", TwistedChain),
        ("C2H4", PlanarChain),
        ("N2H4", TwistedPyramids),
        ("HF", Diatomic),
        ("N2", Diatomic),
        ("Ne", Atom),
    ];
    for (formula, class) in expected {
        let built = build(formula);
        assert_eq!(built.shape_class, class, "{formula}: {}", built.because);
        assert_eq!(
            built.molecule.len(),
            Formula::parse(formula).unwrap().elements().len()
        );
        for bond in &built.bonds {
            let [a, b] = bond.atoms.map(|atom| built.molecule.positions[atom]);
            assert!((distance(a, b) - bond.length.0).abs() < 1e-12, "{formula}");
        }
        assert_eq!(built.bonds.len(), built.molecule.len() - 1, "{formula}");
    }
}

#[test]
fn centres_and_order() {
    for (formula, order) in [
        ("H2S", "S H H"),
        ("FNO", "N F O"),
        ("COS", "C O S"),
        ("N2O", "N N O"),
        ("HOCl", "O H Cl"),
        ("HClO", "O H Cl"),
        ("CH2O", "C H H O"),
        ("CH3Li", "C H H H Li"),
        ("NOF", "N O F"),
        ("SOCl2", "S O Cl Cl"),
        ("CH2Te", "C H H Te"),
        ("H2O2", "O O H H"),
        ("HF2-", "H F F"),
        ("HO2", "O H O"),
        ("LiOH", "O Li H"),
        ("S2O", "S S O"),
    ] {
        let symbols: Vec<&str> = build(formula)
            .molecule
            .elements
            .iter()
            .map(|e| e.symbol())
            .collect();
        assert_eq!(symbols.join(" "), order, "{formula}");
    }
}

#[test]
fn places_of_unlike_ligands() {
    let angle = |formula: &str, atoms: [usize; 3]| {
        measure(
            CoordinateKind::Bend,
            &atoms,
            &build(formula).molecule.positions,
        )
        .unwrap()
    };
    assert!((angle("BrF3", [2, 0, 3]) - 180.0).abs() < 1e-9);
    assert!((angle("XeOF4", [1, 0, 2]) - 90.0).abs() < 1e-9); // O apical
    assert!((angle("PtCl2Br2(2-)", [1, 0, 2]) - 180.0).abs() < 1e-9); // trans
    assert!((angle("PF3Cl2", [4, 0, 5]) - 120.0).abs() < 1e-9); // Cl equatorial
    assert!((angle("NF3", [1, 0, 2]) - 107.0).abs() < 1e-9);
    let hydrazine = build("N2H4").molecule.positions;
    for atoms in [[2, 0, 1], [2, 0, 3], [3, 0, 1], [4, 1, 5], [5, 1, 0]] {
        let angle = measure(CoordinateKind::Bend, &atoms, &hydrazine).unwrap();
        assert!((angle - 107.0).abs() < 1e-9, "{atoms:?} {angle}");
    }
    let peroxide = build("H2O2").molecule.positions;
    let twist = measure(CoordinateKind::Twist, &[2, 0, 1, 3], &peroxide).unwrap();
    assert!((twist.abs() - 90.0).abs() < 1e-9);
}

#[test]
fn overrides_come_first() {
    let formula = Formula::parse("SiF2").unwrap();
    let given: BondOverride = "F-Si=1.591".parse().unwrap();
    let built = ideal_geometry(&formula, None, &[given]).unwrap();
    assert_eq!(built.bonds[1].source, "given");
    assert!((built.bonds[1].length.0 - 1.591).abs() < 1e-12);
    let other: BondOverride = "Si-Cl=2".parse().unwrap();
    let error = ideal_geometry(&formula, None, &[other])
        .unwrap_err()
        .to_string();
    assert!(error.contains("Si–Cl is not used"), "{error}");
    for bad in [
        "SiF=1", "Si-F", "Si-Xx=1", "Si-F=nan", "Si-F=-1", "Si-F=0.1",
    ] {
        assert!(bad.parse::<BondOverride>().is_err(), "{bad}");
    }
}

#[test]
fn formulas_that_fix_no_geometry() {
    assert!(refused("C6H6").contains("does not fix a geometry"));
    assert!(refused("C2H6").contains("does not fix a geometry"));
    assert!(refused("CH4O").contains("C would have 5 neighbours"));
    assert!(refused("H2SO4").contains("sits on an oxygen"));
    assert!(refused("IF7").contains("7 neighbours"));
    assert!(refused("Ni(CH3)4").contains("bracketed ligands"));
    let formula = Formula::parse("NO2-").unwrap();
    let error = ideal_geometry(&formula, Some(1), &[])
        .unwrap_err()
        .to_string();
    assert!(error.contains("charge -1, but +1"), "{error}");
    let charged = ideal_geometry(&Formula::parse("NO2").unwrap(), Some(1), &[]).unwrap();
    assert_eq!(
        (charged.molecule.charge, charged.shape_class),
        (1, ShapeClass::Linear)
    );
}

/// |error| of all bond lengths against measured and computed geometries; the
/// sources stand in the last column of the file.
#[test]
fn lengths_against_known_geometries() {
    let file = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("../../tests/data/shapes.csv");
    let text = std::fs::read_to_string(file).unwrap();
    let mut errors: Vec<(f64, String)> = Vec::new();
    for line in text.lines().skip(1) {
        let cells: Vec<&str> = line.split(',').collect();
        let ligands: Vec<&str> = cells[3..6]
            .iter()
            .copied()
            .filter(|c| !c.is_empty())
            .collect();
        // The row names its centre, whatever the rule for formulas would choose.
        let element = |word: &str| Element::from_symbol(word).unwrap();
        let charge: i32 = cells[9].parse().unwrap();
        let plan: Vec<Vec<Element>> = ligands.iter().map(|word| vec![element(word)]).collect();
        let mut lengths = Lengths::new(&[]);
        around_centre(element(cells[2]), &plan, charge, &mut lengths);
        let used = lengths.into_used();
        for (k, bond) in used.iter().enumerate() {
            let known: f64 = cells[6 + k].parse().unwrap();
            let name = format!("{} {}–{}", cells[0], cells[2], ligands[k]);
            errors.push((
                (bond.length.0 - known).abs(),
                format!("{name} {:.3} for {known}", bond.length.0),
            ));
        }
    }
    errors.sort_by(|a, b| a.0.total_cmp(&b.0));
    let at = |share: f64| errors[((errors.len() - 1) as f64 * share) as usize].0;
    println!(
        "{} lengths: median {:.3}, 90 % {:.3}, worst {:.3} Å ({})",
        errors.len(),
        at(0.5),
        at(0.9),
        at(1.0),
        errors[errors.len() - 1].1
    );
    for (error, name) in errors.iter().rev().take(12) {
        println!("{error:.3} {name}");
    }
    assert_eq!(errors.len(), 170);
    assert!(at(0.5) <= 0.04, "median {}", at(0.5));
    assert!(at(0.9) <= 0.09, "90 % {}", at(0.9));
}
