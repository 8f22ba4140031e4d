//! From candidate mappings to groups: which sets are closed, and at which tolerance each appears.

use crate::search::Mapping;

/// A closed set of mappings.
#[derive(Clone, Debug)]
pub(crate) struct ClosedSet {
    /// Indices into the mappings, identity first.
    pub(crate) elements: Vec<usize>,
    /// The largest deviation among them, Å.
    pub(crate) deviation: f64,
}

/// Products of mappings, found by their permutations.
pub(crate) struct Products<'a> {
    mappings: &'a [Mapping],
    sorted: Vec<usize>,
}

impl<'a> Products<'a> {
    pub(crate) fn new(mappings: &'a [Mapping]) -> Self {
        let mut sorted: Vec<usize> = (0..mappings.len()).collect();
        sorted.sort_by(|&i, &j| key(&mappings[i]).cmp(&key(&mappings[j])));
        Self { mappings, sorted }
    }

    /// The mapping "first `right`, then `left`".
    pub(crate) fn of(&self, left: usize, right: usize) -> Option<usize> {
        let (l, r) = (&self.mappings[left], &self.mappings[right]);
        let proper = l.proper == r.proper;
        let composed = r.permutation.iter().map(|&k| l.permutation[k]);
        self.sorted
            .binary_search_by(|&i| {
                let m = &self.mappings[i];
                m.proper
                    .cmp(&proper)
                    .then_with(|| m.permutation.iter().copied().cmp(composed.clone()))
            })
            .ok()
            .map(|place| self.sorted[place])
    }
}

fn key(m: &Mapping) -> (bool, &[usize]) {
    (m.proper, &m.permutation)
}

/// Nested closed sets with rising deviation: the identity alone, then each bigger set as soon as
/// the tolerance lets one more operation in.
pub(crate) fn chain(mappings: &[Mapping]) -> Vec<ClosedSet> {
    let products = Products::new(mappings);
    let identity = mappings
        .iter()
        .position(|m| m.proper && m.permutation.iter().enumerate().all(|(i, &j)| i == j));
    let Some(identity) = identity else {
        return Vec::new();
    };
    let mut order: Vec<usize> = (0..mappings.len()).collect();
    order.sort_by(|&i, &j| mappings[i].deviation.total_cmp(&mappings[j].deviation));
    let mut sets = vec![ClosedSet {
        elements: vec![identity],
        deviation: 0.0,
    }];
    let mut generators: Vec<usize> = Vec::new();
    let mut inside = vec![false; mappings.len()];
    inside[identity] = true;
    for candidate in order {
        if inside[candidate] {
            continue;
        }
        generators.push(candidate);
        let Some(elements) = generated(&products, identity, &generators, mappings.len()) else {
            generators.pop();
            continue;
        };
        inside.fill(false);
        let mut deviation = 0.0_f64;
        for &e in &elements {
            inside[e] = true;
            deviation = deviation.max(mappings[e].deviation);
        }
        sets.push(ClosedSet {
            elements,
            deviation,
        });
    }
    sets
}

fn generated(
    products: &Products,
    identity: usize,
    generators: &[usize],
    count: usize,
) -> Option<Vec<usize>> {
    let mut inside = vec![false; count];
    inside[identity] = true;
    let mut elements = vec![identity];
    let mut next = 0;
    while next < elements.len() {
        for &g in generators {
            let product = products.of(elements[next], g)?;
            if !inside[product] {
                inside[product] = true;
                elements.push(product);
            }
        }
        next += 1;
    }
    Some(elements)
}
