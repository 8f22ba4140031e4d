//! Reading, overlaying and choosing parameter sets; every kind of fault is reported at its place.

// A failed expectation is the message of a test.
#![allow(clippy::unwrap_used, clippy::panic)]

use orbend_hamiltonian::{DEFAULT_SET, ParameterError, ParameterSet, SET_NAMES, ShellName};
use orbend_structure::Element;

const HEAD: &str = "[set]\nname = \"mine\"\nenergy = \"eV\"\nexponent = \"1/bohr\"\n\n";

fn element(symbol: &str) -> Element {
    Element::from_symbol(symbol).unwrap()
}

/// "line:column cause; fix" of every problem in HEAD + `body` (which begins on line 6).
fn problems(body: &str) -> Vec<String> {
    let text = format!("{HEAD}{body}");
    match ParameterSet::from_toml(&text, "mine.toml") {
        Err(ParameterError::InFile(found)) => found
            .problems
            .iter()
            .map(|p| format!("{}:{} {}; {}", p.line, p.column, p.cause, p.fix))
            .collect(),
        other => panic!("accepted or refused otherwise: {other:?}"),
    }
}

fn refused(body: &str, expected: &[&str]) {
    let found = problems(body);
    assert_eq!(found.len(), expected.len(), "{found:#?}");
    for (line, part) in found.iter().zip(expected) {
        assert!(line.contains(part), "{line:?} should contain {part:?}");
    }
}

#[test]
fn built_in_sets_are_sound() {
    for name in SET_NAMES {
        let set = ParameterSet::builtin(name).unwrap();
        assert_eq!(set.name(), name);
        for element in set.elements() {
            for variant in element.variants() {
                assert!(!variant.shells.is_empty());
            }
        }
    }
    assert_eq!(ParameterSet::default().elements().count(), 64);
    assert_eq!(ParameterSet::default().name(), DEFAULT_SET);
    let error = ParameterSet::builtin("hofmann").unwrap_err().to_string();
    assert!(error.contains("did you mean `hoffmann`"), "{error}");
}

#[test]
fn every_value_names_its_source() {
    for name in SET_NAMES {
        for element in ParameterSet::builtin(name).unwrap().elements() {
            for shell in element
                .variants()
                .iter()
                .flat_map(|variant| &variant.shells)
            {
                assert!(!shell.source.starts_with("file "), "{element:?}");
                assert!(
                    shell.zeta_source.is_some() && shell.confidence.is_some(),
                    "{element:?}"
                );
            }
        }
    }
}

#[test]
fn wrong_values_are_all_reported_at_their_places() {
    refused(
        "[S]\nshells = [\n  { shell = \"3s\", hii = 20.0, zeta = 2.122 },\n  { shell = \"3p\", hii = -13.3, zeta = 0.01 },\n  { shell = \"2d\", hii = nan, zeta = inf },\n]\n",
        &[
            "8:25 hii = 20 eV is outside -60 to 0 eV",
            "9:39 zeta = 0.01 is outside 0.2 to 20 1/bohr",
            "10:13 there is no 2d shell: l must be smaller than n",
            "10:25 `hii` is nan; write a finite number",
            "10:37 `zeta` is inf; write a finite number",
        ],
    );
}

#[test]
fn misspelt_keys_and_elements_are_refused_with_the_likely_word() {
    refused(
        "[S]\nsorce = \"x\"\nshells = [{ shell = \"3s\", hi = -20.0, zeta = 2.1 }]\n[Xx]\n[s]\n",
        &[
            "7:1 unknown key `sorce` in [S]; did you mean `source`?",
            "8:11 a shell of [S] has no `hii`",
            "8:27 unknown key `hi` in a shell of [S]; did you mean `hii`?",
            "9:2 `Xx` is no element",
            "10:2 `s` is no element; did you mean `S`?",
        ],
    );
    refused(
        "[S]\nshell = []\n",
        &["7:1 unknown key `shell` in [S]; did you mean `shells`?"],
    );
}

#[test]
fn wrong_types_duplicates_and_syntax() {
    refused(
        "[S]\nshells = [{ shell = \"3s\", hii = \"deep\", zeta = 2.1 }]\n",
        &["7:33 `hii` is of type string; write a number"],
    );
    refused(
        "[S]\nshells = [{ shell = \"3s\", hii = -20, zeta = 2.1 }, { shell = \"3s\", hii = -21, zeta = 2.1 }]\n",
        &["S has the shell 3s twice"],
    );
    refused("[S]\nsource = \"a\"\n[S]\n", &["duplicate key"]);
    refused("[S]\nshells = []\n", &["6:2 [S] has no shells"]);
    refused("[S]\nshells = [1, 2]\n", &["7:11 ", "7:14 "]);
    refused("S = 4\n", &["6:1 unknown key `S` in [set]"]);
}

#[test]
fn the_header_is_required_with_its_units() {
    let found = |text: &str| {
        ParameterSet::from_toml(text, "mine.toml")
            .unwrap_err()
            .to_string()
    };
    assert!(found("").contains("mine.toml:1:1: the table `[set]` is missing"));
    let text = found("[set]\nname = \"mine\"\nenergy = \"kcal\"\nexponents = \"1/bohr\"\n");
    assert!(
        text.contains("mine.toml:3:10: unknown unit of energy `kcal`"),
        "{text}"
    );
    assert!(
        text.contains("mine.toml:4:1: unknown key `exponents` in [set]; did you mean `exponent`?")
    );
    assert!(
        text.contains("[set] has no `exponent`; add exponent = \"1/bohr\""),
        "{text}"
    );
}

#[test]
fn problems_can_be_shown_with_their_line() {
    let text = format!("{HEAD}[S]\nshells = [{{ shell = \"3s\", hii = 20.0, zeta = 2.1 }}]\n");
    let Err(ParameterError::InFile(found)) = ParameterSet::from_toml(&text, "mine.toml") else {
        panic!("accepted")
    };
    let shown = found.render(false);
    assert!(shown.contains("mine.toml:7:33"), "{shown}");
    assert!(
        shown.contains("hii = 20.0, zeta = 2.1") && shown.contains("^^^^"),
        "{shown}"
    );
}

#[test]
fn contractions_are_renormalised_and_wrong_ones_refused() {
    let set = ParameterSet::default();
    let chromium = set.element(element("Cr")).unwrap();
    let d = chromium.shells().find(|shell| shell.l == 2).unwrap();
    // Printed with norm 1.0008 (from memory).
    assert!((orbend_hamiltonian::contraction_norm(3, &d.published) - 1.0).abs() > 1e-4);
    assert!((orbend_hamiltonian::contraction_norm(3, &d.terms) - 1.0).abs() < 1e-14);
    refused(
        "[Pd]\nshells = [{ shell = \"4d\", hii = -12.02, zeta = [[5.983, 0.5535], [2.613, 0.6701]] }]\n",
        &["7:48 Pd 4d has norm 1.10"],
    );
}

#[test]
fn an_overlay_replaces_whole_elements_and_has_its_own_fingerprint() {
    let base = ParameterSet::default();
    let text = format!(
        "{HEAD}[S]\ndefault = \"B\"\n[O]\nsource = \"a fit\"\nshells = [{{ shell = \"2p\", hii = -15.0, zeta = 2.2 }}]\n"
    );
    let set = base.overlay(&text, "mine.toml").unwrap();
    assert_eq!(set.name(), "hoffmann+mine");
    assert_eq!(set.element(element("S")).unwrap().variant().name, "B");
    assert_eq!(set.element(element("O")).unwrap().shells().count(), 1);
    assert_eq!(set.element(element("O")).unwrap().origin(), "mine");
    assert_eq!(set.element(element("C")), base.element(element("C")));
    assert_ne!(set.fingerprint(), base.fingerprint());
    let wrong = base
        .overlay(&format!("{HEAD}[S]\ndefault = \"C\"\n"), "mine.toml")
        .unwrap_err();
    assert_eq!(
        wrong.to_string(),
        "mine.toml:7:11: S has no variant `C`; choose from A, B"
    );
    let lone = ParameterSet::from_toml(&format!("{HEAD}[S]\ndefault = \"B\"\n"), "mine.toml");
    assert!(
        lone.unwrap_err()
            .to_string()
            .contains("the set mine has no S")
    );
}

#[test]
fn energies_may_be_in_hartree() {
    let text = HEAD.replace("eV", "hartree")
        + "[H]\nshells = [{ shell = \"1s\", hii = -0.5, zeta = 1.2 }]\n";
    let set = ParameterSet::from_toml(&text, "mine.toml").unwrap();
    let hii = set
        .element(element("H"))
        .unwrap()
        .shells()
        .next()
        .unwrap()
        .hii_ev;
    // CODATA 2018: 27.211386245988 eV.
    assert!((hii + 13.605_693_122_994).abs() < 1e-12);
}

#[test]
fn choices_change_values_and_fingerprint() {
    let base = ParameterSet::default();
    let set = base.choose(&["S:B+3d", "Cl+3d"]).unwrap();
    let shells = |set: &ParameterSet, symbol: &str| -> Vec<String> {
        set.element(element(symbol))
            .unwrap()
            .shells()
            .map(|s| s.name().to_string())
            .collect()
    };
    assert_eq!(shells(&base, "S"), ["3s", "3p"]);
    assert_eq!(shells(&set, "S"), ["3s", "3p", "3d"]);
    assert_eq!(shells(&set, "Cl"), ["3s", "3p", "3d"]);
    assert_ne!(set.fingerprint(), base.fingerprint());
    let back = set.choose(&["S:A"]).unwrap();
    assert_ne!(back.fingerprint(), set.fingerprint());
    for (choice, part) in [
        ("S:C", "choose from A, B"),
        ("S", "write S:VARIANT or S+SHELL"),
        ("S+4d", "offered: 3d"),
        ("C+3d", "no optional shell"),
        ("Xe:A", "the set hoffmann has no Xe"),
        ("Qq:A", "is no element"),
        ("", "is no element"),
    ] {
        let error = base.choose(&[choice]).unwrap_err().to_string();
        assert!(error.contains(part), "{error}");
    }
}

#[test]
fn a_value_can_be_moved_for_a_test_of_its_weight() {
    let base = ParameterSet::default();
    let name = ShellName { n: 3, l: 2 };
    let moved = base
        .with_changed_shell(element("Fe"), name, |shell| {
            shell.hii_ev -= 0.5;
            shell.terms.iter_mut().for_each(|term| term.0 *= 1.03);
        })
        .unwrap();
    let shell = moved
        .element(element("Fe"))
        .unwrap()
        .shells()
        .find(|s| s.l == 2)
        .unwrap();
    assert!((orbend_hamiltonian::contraction_norm(3, &shell.terms) - 1.0).abs() < 1e-14);
    assert_ne!(moved.fingerprint(), base.fingerprint());
    assert!(
        base.with_changed_shell(element("Xe"), name, |_| ())
            .is_none()
    );
}
