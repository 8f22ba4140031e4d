//! Every family of point groups is found and named.
#![allow(missing_docs, clippy::unwrap_used, clippy::panic)]

mod common;

use common::{TOLERANCE, every_group, moved, product, rotation};
use orbend_symmetry::find;

#[test]
fn every_family_is_found_in_any_position() {
    let turn = product(
        &rotation([0.3, 1.0, -0.4], 0.137),
        &rotation([1.0, 0.2, 0.1], 0.291),
    );
    for (name, nuclei) in every_group() {
        let found = find(&nuclei, TOLERANCE).unwrap();
        assert_eq!(found.group.name, name);
        assert!(found.deviation_angstrom < 1e-9, "{name}");
        let again = find(&moved(&nuclei, &turn, [3.0, -7.0, 0.5], 7), TOLERANCE).unwrap();
        assert_eq!(again.group.name, name);
        let names = |g: &orbend_symmetry::PointGroup| -> Vec<(String, Vec<f64>)> {
            g.irreps
                .iter()
                .map(|i| (i.plain.clone(), i.characters.clone()))
                .collect()
        };
        let (first, second) = (names(&found.group), names(&again.group));
        let plain: Vec<&str> = first.iter().map(|(n, _)| n.as_str()).collect();
        let mut unique = plain.clone();
        unique.sort_unstable();
        unique.dedup();
        assert_eq!(unique.len(), plain.len(), "{name}: {plain:?}");
        assert_eq!(
            plain,
            second.iter().map(|(n, _)| n.as_str()).collect::<Vec<_>>()
        );
    }
}
