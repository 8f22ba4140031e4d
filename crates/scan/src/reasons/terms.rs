//! Terms of a configuration: which symmetry and multiplicity its states have.

use orbend_symmetry::PointGroup;

/// A partly filled set.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct OpenSet {
    /// Irrep in the group of the terms.
    pub(crate) irrep: usize,
    /// Its electrons, whole.
    pub(crate) electrons: u32,
}

/// A term symbol.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Term {
    /// Plain: `2B1`, `3Sigma_g-`.
    pub plain: String,
    /// For documents and figures: `²B₁`, `³Σg⁻`.
    pub display: String,
}

impl Term {
    fn new(group: &PointGroup, irrep: usize, unpaired: u32) -> Self {
        let irrep = &group.irreps[irrep];
        let multiplicity = (unpaired + 1).to_string();
        let raised: String = multiplicity
            .chars()
            .map(|digit| match digit {
                '1' => '¹',
                '2' => '²',
                '3' => '³',
                other => char::from_u32(0x2070 + (u32::from(other) - 0x30)).unwrap_or(other),
            })
            .collect();
        Self {
            plain: format!("{multiplicity}{}", capital(&irrep.plain)),
            display: format!("{raised}{}", capital(&irrep.display)),
        }
    }
}

fn capital(text: &str) -> String {
    let mut letters = text.chars();
    letters
        .next()
        .map(|first| first.to_uppercase().collect::<String>() + letters.as_str())
        .unwrap_or_default()
}

/// The terms with `unpaired` unpaired electrons; empty where they do not follow from one product
/// (more than one degenerate open set, three electrons in a threefold set).
///
/// Two electrons (or two holes) of a degenerate set have the triplet terms of the antisymmetric
/// square and the singlet terms of the symmetric one; single electrons multiply (Herzberg,
/// *Electronic Spectra of Polyatomic Molecules*, 1966, chapter III).
pub(crate) fn terms(group: &PointGroup, open: &[OpenSet], unpaired: u32) -> Vec<Term> {
    let mut content = vec![0; group.irreps.len()];
    content[group.totally_symmetric()] = 1;
    let mut singles = 0;
    let mut degenerate = 0;
    for set in open {
        let size = group.irreps[set.irrep].dimension as u32;
        let holes = 2 * size - set.electrons;
        let own = if set.electrons == 1 || holes == 1 {
            singles += 1;
            let mut one = vec![0; group.irreps.len()];
            one[set.irrep] = 1;
            one
        } else if set.electrons == 2 || holes == 2 {
            degenerate += 1;
            if open.len() > 1 {
                return Vec::new();
            }
            match unpaired {
                0 => group.symmetric_square(set.irrep),
                _ => {
                    singles += 2;
                    group.antisymmetric_square(set.irrep)
                }
            }
        } else {
            return Vec::new();
        };
        degenerate += usize::from(size > 1 && (set.electrons == 1 || holes == 1));
        let mut next = vec![0; group.irreps.len()];
        for (a, &times) in content.iter().enumerate() {
            for (b, &more) in own.iter().enumerate() {
                if times * more > 0 {
                    for (sum, found) in next.iter_mut().zip(group.product(a, b)) {
                        *sum += times * more * found;
                    }
                }
            }
        }
        content = next;
    }
    if degenerate > 1 || unpaired > singles || (unpaired + singles) % 2 == 1 {
        return Vec::new();
    }
    content
        .iter()
        .enumerate()
        .filter(|(_, times)| **times > 0)
        .map(|(irrep, _)| Term::new(group, irrep, unpaired))
        .collect()
}
