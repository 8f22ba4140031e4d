//! Arrows between crates run one way: folder order is physics order.

use std::process::Command;

/// The crates from first to last; one may depend on earlier ones only.
const ORDER: [&str; 8] = [
    "orbend-structure",
    "orbend-overlap",
    "orbend-hamiltonian",
    "orbend-eigen",
    "orbend-symmetry",
    "orbend-scan",
    "orbend-report",
    "orbend",
];

/// Arrows that would run in order but must not exist.
const FORBIDDEN: [(&str, &str); 5] = [
    ("orbend-overlap", "orbend-hamiltonian"),
    ("orbend-eigen", "orbend-structure"),
    ("orbend-eigen", "orbend-overlap"),
    ("orbend-eigen", "orbend-hamiltonian"),
    ("orbend-symmetry", "orbend-hamiltonian"),
];

#[test]
fn arrows_run_one_way() {
    let output = Command::new(env!("CARGO"))
        .args([
            "metadata",
            "--no-deps",
            "--offline",
            "--format-version",
            "1",
        ])
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .output()
        .expect("cargo metadata runs");
    let metadata: serde_json::Value =
        serde_json::from_slice(&output.stdout).expect("cargo metadata is JSON");
    let packages = metadata["packages"].as_array().expect("packages");
    let place = |name: &str| ORDER.iter().position(|known| *known == name);
    let mut arrows = 0;
    for package in packages {
        let name = package["name"].as_str().expect("name");
        let Some(from) = place(name) else { continue };
        for dependency in package["dependencies"].as_array().expect("dependencies") {
            if dependency["kind"] == "dev" {
                continue;
            }
            let target = dependency["name"].as_str().expect("name");
            let Some(to) = place(target) else { continue };
            assert!(
                to < from,
                "{name} may not depend on {target}: {}",
                ORDER.join(" → ")
            );
            assert!(
                !FORBIDDEN.contains(&(name, target)),
                "{name} knows nothing of {target}"
            );
            arrows += 1;
        }
    }
    assert!(
        arrows >= 10,
        "only {arrows} arrows were read: is the metadata complete?"
    );
}

#[test]
fn every_crate_stands_in_the_order() {
    let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/../crates");
    let mut folders: Vec<String> = std::fs::read_dir(folder)
        .expect("crates folder")
        .map(|entry| {
            entry
                .expect("entry")
                .file_name()
                .to_string_lossy()
                .into_owned()
        })
        .collect();
    folders.sort();
    let mut expected: Vec<String> = ORDER
        .iter()
        .map(|name| name.trim_start_matches("orbend-").to_owned())
        .collect();
    expected.sort();
    assert_eq!(folders, expected);
}
