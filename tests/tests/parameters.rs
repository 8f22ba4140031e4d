//! The published parameters against other tables: Slater's and Clementi's exponents, spectroscopic
//! orbital energies, norms, and the worked values of the formulas.

// A failed expectation is the message of a test; distributions are printed for a reader.
#![allow(clippy::unwrap_used, clippy::panic, clippy::print_stdout)]

use std::collections::BTreeMap;
use std::path::Path;

use orbend_hamiltonian::{
    Checked, ElementParameters, ParameterSet, SET_NAMES, ShellParameters, contraction_norm,
    distance_dependent_k, weighted_k,
};
use orbend_structure::Element;

/// Rows of a reference table by element; empty cells are left out.
fn table(name: &str) -> BTreeMap<String, BTreeMap<String, f64>> {
    let path = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("reference")
        .join(name);
    let mut reader = csv::Reader::from_path(path).unwrap();
    let headers = reader.headers().unwrap().clone();
    reader
        .records()
        .map(|row| {
            let row = row.unwrap();
            let numbers = headers
                .iter()
                .zip(&row)
                .skip(1)
                .filter_map(|(column, cell)| {
                    cell.parse()
                        .ok()
                        .map(|number: f64| (column.to_owned(), number))
                });
            (row[0].to_owned(), numbers.collect())
        })
        .collect()
}

/// Every s and p shell of every variant of the default set.
fn each_shell(mut work: impl FnMut(&ElementParameters, &str, &ShellParameters)) {
    for element in ParameterSet::default().elements() {
        for variant in element.variants() {
            for shell in variant.shells.iter().filter(|shell| !shell.optional) {
                work(element, &variant.name, shell);
            }
        }
    }
}

/// Worst, 99th percentile and median, printed so that `cargo test -- --nocapture` shows them.
fn distribution(what: &str, mut errors: Vec<(f64, String)>) -> (f64, f64) {
    assert!(!errors.is_empty(), "{what}: nothing was compared");
    errors.sort_by(|a, b| a.0.total_cmp(&b.0));
    let at = |share: f64| &errors[((errors.len() - 1) as f64 * share) as usize];
    let (worst, high, median) = (at(1.0), at(0.99), at(0.5));
    println!(
        "{what}: {} values, worst {:.4} ({}), p99 {:.4}, median {:.4}",
        errors.len(),
        worst.0,
        worst.1,
        high.0,
        median.0
    );
    (worst.0, median.0)
}

#[test]
fn exponents_agree_with_the_tables_that_they_are_said_to_come_from() {
    let exponents = table("exponents.csv");
    let (mut slater, mut clementi) = (Vec::new(), Vec::new());
    each_shell(|element, variant, shell| {
        let symbol = element.element().symbol();
        let source = shell.zeta_source.as_deref().unwrap_or_default();
        let Some(row) = exponents.get(symbol) else {
            return;
        };
        let column = if shell.l == 0 {
            "clementi_s"
        } else {
            "clementi_p"
        };
        let label = format!("{symbol} {} {variant}", shell.name());
        if source.starts_with("Slater") {
            slater.push(((shell.terms[0].0 - row["slater"]).abs(), label));
        } else if source.starts_with("Clementi") {
            // Alkali and alkaline-earth atoms have no p in the table: the s value is used twice.
            if let Some(value) = row.get(column).or_else(|| row.get("clementi_s")) {
                clementi.push(((shell.terms[0].0 - value).abs(), label));
            }
        }
    });
    assert!(
        slater.len() >= 24 && clementi.len() >= 30,
        "{} {}",
        slater.len(),
        clementi.len()
    );
    // Slater's are quoted to three decimals, Clementi's to two or three.
    assert!(distribution("exponents, Slater's rules", slater).0 <= 0.0006);
    assert!(distribution("exponents, Clementi and Raimondi", clementi).0 <= 0.006);
}

#[test]
fn exponents_said_to_be_in_no_table_are_in_none() {
    let exponents = table("exponents.csv");
    let mut compared = 0;
    for element in ParameterSet::default().elements() {
        let symbol = element.element().symbol();
        let Some(row) = exponents.get(symbol) else {
            continue;
        };
        for variant in element.variants() {
            let sp: Vec<&ShellParameters> = variant.shells.iter().filter(|s| !s.optional).collect();
            let source = sp[0].zeta_source.as_deref().unwrap_or_default();
            if !source.starts_with("value of the published set") {
                continue;
            }
            compared += 1;
            let near = |columns: [&str; 2]| {
                sp.iter().zip(columns).all(|(shell, column)| {
                    row.get(column)
                        .is_some_and(|value| (shell.terms[0].0 - value).abs() < 0.006)
                })
            };
            assert!(!near(["slater", "slater"]), "{symbol} {}", variant.name);
            assert!(
                !near(["clementi_s", "clementi_p"]),
                "{symbol} {}",
                variant.name
            );
        }
    }
    assert!(compared >= 8, "{compared}");
}

#[test]
fn spectroscopic_energies_reproduce_allens_electronegativities() {
    // χ = (2 ε_s + m ε_p)/(2 + m): two routes to the same numbers, the table from memory and mendeleev.
    let means = table("exponents.csv");
    let mut errors = Vec::new();
    for (symbol, row) in table("allen.csv") {
        let element = Element::from_symbol(&symbol).unwrap();
        let electrons = |l| -> f64 {
            let period = element.period();
            element
                .occupied_shells()
                .iter()
                .filter(|shell| shell.n == period && shell.l == l)
                .map(|shell| f64::from(shell.electrons))
                .sum()
        };
        let (s, p) = (electrons(0), electrons(1));
        let mean = (s * row["s_ev"] + p * row.get("p_ev").copied().unwrap_or(0.0)) / (s + p);
        errors.push(((mean - means[&symbol]["allen_ev"]).abs(), symbol));
    }
    assert!(errors.len() >= 26);
    assert!(distribution("Allen's mean energies, eV", errors).0 <= 0.0105);
}

#[test]
fn diagonal_elements_stand_near_spectroscopic_energies() {
    // Mann, Meek & Allen, J. Am. Chem. Soc. 122, 2780 (2000), from memory. Hᵢᵢ are valence-state
    // ionisation energies, so this is a check of rank and plausibility.
    let allen = table("allen.csv");
    let (mut second_s, mut second_p, mut heavier) = (Vec::new(), Vec::new(), Vec::new());
    each_shell(|element, variant, shell| {
        let (element, label) = (element.element(), format!("{} {variant}", shell.name()));
        let Some(row) = allen.get(element.symbol()) else {
            return;
        };
        let column = if shell.l == 0 { "s_ev" } else { "p_ev" };
        let Some(known) = row.get(column) else { return };
        let error = (
            (shell.hii_ev + known).abs(),
            format!("{} {label}", element.symbol()),
        );
        // Neon's set is of low confidence (5 eV off in 2s): reported with the heavier ones.
        match (element.number(), shell.l) {
            (3..=9, 0) => second_s.push(error),
            (3..=9, _) => second_p.push(error),
            (1 | 2, _) => {}
            _ => heavier.push(error),
        }
    });
    assert!(distribution("Hii of the second row, s, eV", second_s).0 <= 2.0);
    assert!(distribution("Hii of the second row, p, eV", second_p).0 <= 1.1);
    let (worst, median) = distribution("Hii of neon and heavier rows, eV", heavier);
    assert!(
        worst <= 5.3 && median <= 2.0,
        "worst {worst}, median {median}"
    );
}

#[test]
fn p_levels_lie_above_s_levels_and_deepen_along_a_row() {
    let set = ParameterSet::default();
    for row in ["Li Be B C N O F Ne", "Na Mg Al Si P S Cl", "Ga Ge As Se Br"] {
        let levels: Vec<(f64, f64)> = row
            .split(' ')
            .map(|symbol| {
                let element = set.element(Element::from_symbol(symbol).unwrap()).unwrap();
                let hii: Vec<f64> = element.shells().map(|shell| shell.hii_ev).collect();
                (hii[0], hii[1])
            })
            .collect();
        for (s, p) in &levels {
            assert!(s < p, "{row}");
        }
        for pair in levels.windows(2) {
            assert!(pair[1].0 < pair[0].0, "{row}: s {pair:?}");
        }
    }
}

#[test]
fn published_contractions_are_normalised_within_0_2_percent() {
    let mut errors = Vec::new();
    for name in SET_NAMES {
        for element in ParameterSet::builtin(name).unwrap().elements() {
            for variant in element.variants() {
                for shell in variant.shells.iter().filter(|shell| shell.terms.len() > 1) {
                    let label = format!("{} {}", element.element().symbol(), variant.name);
                    errors.push((
                        (contraction_norm(shell.n, &shell.published) - 1.0).abs(),
                        label,
                    ));
                    assert!((contraction_norm(shell.n, &shell.terms) - 1.0).abs() < 1e-14);
                }
            }
        }
    }
    assert!(errors.len() >= 41, "{}", errors.len());
    let (worst, median) = distribution("norms of double-zeta d functions", errors);
    assert!(worst <= 2e-3 && median <= 1e-4);
}

#[test]
fn reprints_that_are_not_normalised_are_refused() {
    // Coefficients of reprints, from memory, each with its norm.
    for (symbol, shell, zeta_1, c_1, zeta_2, c_2, norm) in [
        ("Pd", "4d", 5.983, 0.5535, 2.613, 0.6701, "1.10"),
        ("Ag", "4d", 6.07, 0.5889, 2.663, 0.6370, "1.1"),
        ("W", "5d", 4.982, 0.6940, 2.068, 0.5631, "1.07"),
        ("Re", "5d", 5.343, 0.6662, 2.277, 0.5910, "1.09"),
        ("Ir", "5d", 5.796, 0.6698, 2.557, 0.5860, "1.11"),
        ("Pt", "5d", 6.013, 0.6562, 2.696, 0.5711, "1.07"),
        ("Au", "5d", 6.163, 0.6851, 2.794, 0.5696, "1.13"),
    ] {
        let text = format!(
            "[set]\nname = \"reprint\"\nenergy = \"eV\"\nexponent = \"1/bohr\"\n[{symbol}]\nshells = \
             [{{ shell = \"{shell}\", hii = -12.0, zeta = [[{zeta_1}, {c_1}], [{zeta_2}, {c_2}]] }}]\n"
        );
        let error = ParameterSet::default()
            .overlay(&text, "reprint.toml")
            .unwrap_err()
            .to_string();
        assert!(error.contains(&format!("has norm {norm}")), "{error}");
    }
}

#[test]
fn worked_values_of_the_weighted_constant() {
    // K′ = K + Δ² + Δ⁴(1−K), Ammeter et al. 1978; numbers recomputed by hand.
    assert!((weighted_k(1.75, -14.8, -32.3) - 1.873_756).abs() < 5e-7);
    assert!((weighted_k(1.75, -21.4, -13.6) - 1.797_815).abs() < 5e-7);
    // dK′/d(Δ²) = 1 at Δ = 0, whatever K.
    for k in [1.5, 1.75, 2.0] {
        let (h, shift): (f64, f64) = (-10.0, 1e-3);
        let squared = (shift / h).powi(2);
        let slope = (weighted_k(k, h + shift, h - shift) - k) / squared;
        assert!((slope - 1.0).abs() < 1e-6, "{slope}");
    }
    // At contact the distance-dependent constant is the weighted one: Calzaferri et al. 1989.
    let contact = distance_dependent_k(1.75, -21.4, -13.6, true, 0.35, 1.1, 1.1);
    assert!((contact - 1.797_815).abs() < 5e-7);
}

#[test]
fn only_pages_that_were_seen_are_marked_so() {
    // Mn B is the one row seen on a page (a mailing-list post that quotes the tables).
    let mut seen = Vec::new();
    each_shell(|element, variant, shell| {
        if shell.checked == Checked::Page {
            seen.push(format!(
                "{} {variant} {}",
                element.element().symbol(),
                shell.name()
            ));
            assert!(shell.source.contains("page seen"), "{}", shell.source);
        }
    });
    assert_eq!(seen, ["Mn B 4s", "Mn B 4p", "Mn B 3d"]);
}
