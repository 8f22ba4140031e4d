//! Pairs of atoms nearer than a cut-off, in time linear in the atoms.

use std::collections::HashMap;
use std::hash::{BuildHasherDefault, Hasher};

/// Atoms sorted into cubes. The map is only looked up, never iterated, so the
/// order of its entries cannot reach a result.
pub(crate) struct CellGrid<'a> {
    positions: &'a [[f64; 3]],
    edge: f64,
    heads: HashMap<[i64; 3], usize, BuildHasherDefault<CellHasher>>,
    next: Vec<usize>,
}

/// Multiply and rotate: cell numbers are small and need no keyed hash.
#[derive(Default)]
struct CellHasher(u64);

impl Hasher for CellHasher {
    fn finish(&self) -> u64 {
        self.0
    }

    fn write(&mut self, bytes: &[u8]) {
        for chunk in bytes.chunks(8) {
            let mut word = [0; 8];
            word[..chunk.len()].copy_from_slice(chunk);
            self.write_u64(u64::from_le_bytes(word));
        }
    }

    fn write_u64(&mut self, word: u64) {
        // The odd constant is 2⁶⁴ over the golden ratio.
        self.0 = (self.0.rotate_left(23) ^ word).wrapping_mul(0x9e37_79b9_7f4a_7c15);
        self.0 ^= self.0 >> 29;
    }
}

const END: usize = usize::MAX;

impl<'a> CellGrid<'a> {
    /// An empty grid of cubes with this edge (Å).
    pub(crate) fn new(positions: &'a [[f64; 3]], edge: f64) -> Self {
        Self {
            positions,
            edge,
            heads: HashMap::with_capacity_and_hasher(
                positions.len(),
                BuildHasherDefault::default(),
            ),
            next: vec![END; positions.len()],
        }
    }

    /// Puts atom `atom` into its cube.
    pub(crate) fn insert(&mut self, atom: usize) {
        let cell = self.positions[atom].map(|x| self.cell(x));
        let head = self.heads.insert(cell, atom);
        self.next[atom] = head.unwrap_or(END);
    }

    /// Calls `visit` with every inserted atom nearer than `radius` to `place`
    /// and its distance.
    pub(crate) fn near(&self, place: [f64; 3], radius: f64, mut visit: impl FnMut(usize, f64)) {
        let low = place.map(|x| self.cell(x - radius));
        let high = place.map(|x| self.cell(x + radius));
        for i in low[0]..=high[0] {
            for j in low[1]..=high[1] {
                for k in low[2]..=high[2] {
                    let mut atom = self.heads.get(&[i, j, k]).copied().unwrap_or(END);
                    while atom != END {
                        let distance = crate::vector::distance(place, self.positions[atom]);
                        if distance < radius {
                            visit(atom, distance);
                        }
                        atom = self.next[atom];
                    }
                }
            }
        }
    }

    #[allow(clippy::cast_possible_truncation)] // coordinates are checked to be below 10⁶ Å
    fn cell(&self, x: f64) -> i64 {
        (x / self.edge).floor() as i64
    }
}
