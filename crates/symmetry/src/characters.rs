//! Conjugacy classes and the table of real irreducible characters, from the multiplication
//! table alone.
//!
//! The sums over classes commute (Burnside; Dixon, Numer. Math. 10, 446 (1967)). Taking every
//! class together with the class of its inverses makes the sums symmetric matrices, whose common
//! eigenvectors are the central idempotents; pairs of complex-conjugate irreps come out as the
//! one real irrep that they make.

use nalgebra::{DMatrix, SymmetricEigen};

use crate::multiplication::Multiplication;

/// Conjugacy classes.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Classes {
    /// The operations of each class.
    pub(crate) members: Vec<Vec<usize>>,
    /// The class of each operation.
    pub(crate) of: Vec<usize>,
}

impl Classes {
    pub(crate) fn new(table: &Multiplication) -> Self {
        let order = table.order();
        let mut of = vec![usize::MAX; order];
        let mut members: Vec<Vec<usize>> = Vec::new();
        for g in 0..order {
            if of[g] != usize::MAX {
                continue;
            }
            let mut class = Vec::new();
            for h in 0..order {
                let conjugate = table.times(table.times(h, g), table.inverse(h));
                if of[conjugate] == usize::MAX {
                    of[conjugate] = members.len();
                    class.push(conjugate);
                }
            }
            class.sort_unstable();
            members.push(class);
        }
        Self { members, of }
    }
}

/// One real irreducible representation.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Character {
    /// Dimension over the real numbers.
    pub(crate) dimension: usize,
    /// Whether it is a pair of complex-conjugate irreps taken together.
    pub(crate) paired: bool,
    /// One value per conjugacy class.
    pub(crate) values: Vec<f64>,
}

/// All real irreducible characters, in no particular order.
pub(crate) fn characters(table: &Multiplication, classes: &Classes) -> Option<Vec<Character>> {
    let merged = merge_inverses(table, classes);
    let count = merged.members.len();
    let structure = class_products(table, &merged);
    // Any combination without accidental equalities will do; the weights are tried in turn.
    for attempt in 0..8_u32 {
        let mut sum = DMatrix::<f64>::zeros(count, count);
        for (i, product) in structure.iter().enumerate() {
            let place = f64::from(attempt) + i as f64 + 2.0;
            let weight = (place * place + 1.0).sqrt().fract() + 0.1;
            let size = merged.members[i].len() as f64;
            sum += product * (weight / size);
        }
        let eigen = SymmetricEigen::try_new(sum, 1e-15, 100_000)?;
        let mut values: Vec<f64> = eigen.eigenvalues.iter().copied().collect();
        values.sort_by(f64::total_cmp);
        if values.windows(2).any(|pair| pair[1] - pair[0] < 1e-5) {
            continue;
        }
        let found: Option<Vec<Character>> = (0..count)
            .map(|k| {
                let vector: Vec<f64> = eigen.eigenvectors.column(k).iter().copied().collect();
                from_idempotent(&vector, table.order(), classes, &merged)
            })
            .collect();
        return found.filter(|all| orthogonal(all, table.order(), classes));
    }
    None
}

fn merge_inverses(table: &Multiplication, classes: &Classes) -> Classes {
    let mut merged = Classes {
        members: Vec::new(),
        of: vec![usize::MAX; table.order()],
    };
    for class in &classes.members {
        if merged.of[class[0]] != usize::MAX {
            continue;
        }
        let mut all = class.clone();
        let inverse = table.inverse(class[0]);
        if classes.of[inverse] != classes.of[class[0]] {
            all.extend(&classes.members[classes.of[inverse]]);
        }
        for &g in &all {
            merged.of[g] = merged.members.len();
        }
        merged.members.push(all);
    }
    merged
}

/// Multiplication by each merged class sum, in the basis of normalised class sums.
fn class_products(table: &Multiplication, merged: &Classes) -> Vec<DMatrix<f64>> {
    let count = merged.members.len();
    let mut products = vec![DMatrix::<f64>::zeros(count, count); count];
    for (k, class) in merged.members.iter().enumerate() {
        let target = class[0];
        for x in 0..table.order() {
            let i = merged.of[x];
            let j = merged.of[table.times(table.inverse(x), target)];
            let ratio = merged.members[k].len() as f64 / merged.members[j].len() as f64;
            products[i][(k, j)] += ratio.sqrt();
        }
    }
    products
}

fn from_idempotent(
    vector: &[f64],
    order: usize,
    classes: &Classes,
    merged: &Classes,
) -> Option<Character> {
    let identity = vector[merged.of[0]];
    // |G| E(e) is d² for an irrep and 2d² for a complex pair of dimension d each.
    let weight = order as f64 * identity * identity;
    let (inner, paired) = {
        let single = weight.sqrt();
        let half = (weight / 2.0).sqrt();
        if (single - single.round()).abs() < 1e-6 {
            (single.round(), false)
        } else if (half - half.round()).abs() < 1e-6 {
            (half.round(), true)
        } else {
            return None;
        }
    };
    let values = classes
        .members
        .iter()
        .map(|class| {
            let m = merged.of[class[0]];
            let size = merged.members[m].len() as f64;
            let value = identity * vector[m] / size.sqrt() * order as f64 / inner;
            tidy(value)
        })
        .collect();
    let dimension = if paired { 2.0 * inner } else { inner };
    Some(Character {
        dimension: dimension as usize,
        paired,
        values,
    })
}

/// Removes the last digits, which depend on rounding.
fn tidy(value: f64) -> f64 {
    let whole = value.round();
    if (value - whole).abs() < 1e-9 {
        // Adding zero turns −0 into 0.
        return whole + 0.0;
    }
    (value * 1e13).round() / 1e13
}

fn orthogonal(all: &[Character], order: usize, classes: &Classes) -> bool {
    let squares: usize = all
        .iter()
        .map(|c| {
            if c.paired {
                c.dimension * c.dimension / 2
            } else {
                c.dimension * c.dimension
            }
        })
        .sum();
    if squares != order {
        return false;
    }
    all.iter().enumerate().all(|(i, a)| {
        all[..=i].iter().enumerate().all(|(j, b)| {
            let product: f64 = classes
                .members
                .iter()
                .zip(a.values.iter().zip(&b.values))
                .map(|(class, (x, y))| class.len() as f64 * x * y)
                .sum();
            let expected = match (i == j, a.paired) {
                (false, _) => 0.0,
                (true, false) => 1.0,
                (true, true) => 2.0,
            };
            (product / order as f64 - expected).abs() < 1e-8
        })
    })
}
