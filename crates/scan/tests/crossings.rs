//! Random families with planted crossings and avoided crossings of known
//! position: none missed, none invented.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use orbend_scan::{LevelModel, MeetingKind, meetings};

/// A small reproducible generator (SplitMix64, Steele, Lea and Flood 2014).
struct Random(u64);

impl Random {
    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        z ^ (z >> 31)
    }

    fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * (self.next() >> 11) as f64 / (1_u64 << 53) as f64
    }
}

/// H(q) = h(q) and S = [[1, s], [s, 1]] in an even and an odd block: levels
/// (a ± b)/(1 ± s). The even block holds a two-level problem in a basis of
/// overlap `s`, whose orthonormal form has the diagonal ±k(q − c) and the
/// coupling d/2: its gap is √(4k²(q − c)² + d²), smallest (d) at c. The odd
/// level is the even one's mean plus a polynomial with planted zeros, plus
/// an offset that keeps it off the second level.
struct Family {
    classes: Vec<usize>,
    slope: f64,
    centre: f64,
    gap: f64,
    overlap: f64,
    zeros: Vec<f64>,
    scale: f64,
}

impl Family {
    /// Lower and upper level of the generalised problem H c = e S c, solved in
    /// closed form from det(H − eS) = 0.
    fn even(&self, q: f64) -> (f64, f64) {
        let s = self.overlap;
        let (x, y) = (self.slope * (q - self.centre), 0.5 * self.gap);
        // H = S^½ (x, y; y, −x) S^½ with S^½ = (p, r; r, p).
        let (p, r) = (
            0.5 * ((1.0 + s).sqrt() + (1.0 - s).sqrt()),
            0.5 * ((1.0 + s).sqrt() - (1.0 - s).sqrt()),
        );
        let h11 = p * (p * x + r * y) + r * (p * y - r * x);
        let h12 = p * (r * x + p * y) + r * (r * y - p * x);
        let h22 = r * (r * x + p * y) + p * (r * y - p * x);
        let (a, b, c) = (
            1.0 - s * s,
            -(h11 + h22 - 2.0 * s * h12),
            h11 * h22 - h12 * h12,
        );
        let root = (b * b - 4.0 * a * c).max(0.0).sqrt();
        ((-b - root) / (2.0 * a), (-b + root) / (2.0 * a))
    }

    fn odd(&self, q: f64) -> f64 {
        let product: f64 = self.zeros.iter().map(|zero| q - zero).product();
        self.even(q).0 - self.scale * product.tanh() * 0.4 * self.gap
    }
}

impl LevelModel for Family {
    type Error = ();
    type Room = ();

    fn room(&self) {}

    fn classes(&self) -> &[usize] {
        &self.classes
    }

    fn energies(&self, (): &mut (), at: &[f64], out: &mut [f64]) -> Result<(), ()> {
        for (row, &q) in out.chunks_exact_mut(3).zip(at) {
            let (low, high) = self.even(q);
            row.copy_from_slice(&[low, high, self.odd(q)]);
        }
        Ok(())
    }
}

fn family(random: &mut Random) -> Family {
    let mut zeros: Vec<f64> = Vec::new();
    for _ in 0..random.next() % 4 {
        let zero = random.between(1.0, 119.0);
        if zeros.iter().all(|other| (zero - other).abs() > 0.75) {
            zeros.push(zero);
        }
    }
    zeros.sort_by(f64::total_cmp);
    Family {
        classes: vec![0, 0, 1],
        slope: random.between(0.005, 0.08),
        centre: random.between(2.0, 118.0),
        gap: random.between(0.02, 0.6),
        overlap: random.between(-0.6, 0.6),
        zeros,
        scale: if random.next().is_multiple_of(2) {
            1.0
        } else {
            -1.0
        },
    }
}

#[test]
fn planted_meetings_are_found_and_none_is_invented() {
    let nodes: Vec<f64> = (0..=240).map(|k| 0.5 * f64::from(k)).collect();
    let mut random = Random(2026);
    let mut farthest = (0.0_f64, 0.0_f64, 0.0_f64);
    let cases = if cfg!(debug_assertions) { 2000 } else { 10_000 };
    for case in 0..cases {
        let family = family(&mut random);
        let found = meetings(&family, &nodes).expect("solved");
        let crossings: Vec<_> = found
            .iter()
            .filter(|one| one.kind == MeetingKind::Crossing)
            .collect();
        assert_eq!(
            crossings.len(),
            family.zeros.len(),
            "case {case}: {found:?} {:?}",
            family.zeros
        );
        for (crossing, zero) in crossings.iter().zip(&family.zeros) {
            farthest.0 = farthest.0.max((crossing.at - zero).abs());
        }
        let avoided: Vec<_> = found
            .iter()
            .filter(|one| one.kind == MeetingKind::Avoided)
            .collect();
        assert_eq!(avoided.len(), 1, "case {case}: {found:?}");
        farthest.1 = farthest.1.max((avoided[0].at - family.centre).abs());
        farthest.2 = farthest.2.max((avoided[0].gap - family.gap).abs());
        assert!(found.len() == crossings.len() + 1, "case {case}: {found:?}");
    }
    assert!(farthest.0 < 1e-3, "crossings are off by {:e}", farthest.0);
    assert!(
        farthest.1 < 1e-3,
        "avoided crossings are off by {:e}",
        farthest.1
    );
    assert!(farthest.2 < 1e-8, "gaps are off by {:e}", farthest.2);
}
