//! Random numbers that are the same on every machine.

/// SplitMix64 (Steele, Lea & Flood, OOPSLA 2014): one word of state, full period 2⁶⁴.
#[derive(Clone, Debug)]
pub(crate) struct SplitMix64(u64);

impl SplitMix64 {
    /// The stream of one draw: its own start for each draw, so that more draws leave the first
    /// ones as they are.
    pub(crate) fn stream(seed: u64, draw: u64) -> Self {
        let mut state = Self(seed);
        let mixed = state.next() ^ draw.wrapping_mul(0xD134_2543_DE82_EF95);
        Self(mixed)
    }

    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        z ^ (z >> 31)
    }

    /// Uniform in (0, 1).
    pub(crate) fn unit(&mut self) -> f64 {
        ((self.next() >> 11) as f64 + 0.5) / (1u64 << 53) as f64
    }

    /// Uniform between two bounds.
    pub(crate) fn uniform(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.unit()
    }

    /// Standard normal, clipped at ±2.5 (Box & Muller, Ann. Math. Stat. 29, 610 (1958)).
    pub(crate) fn normal(&mut self) -> f64 {
        let radius = (-2.0 * libm::log(self.unit())).sqrt();
        let angle = 2.0 * std::f64::consts::PI * self.unit();
        (radius * libm::cos(angle)).clamp(-2.5, 2.5)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// First outputs of SplitMix64 from state 1234567, as printed with the published algorithm.
    #[test]
    fn the_published_sequence() {
        let mut random = SplitMix64(1_234_567);
        assert_eq!(random.next(), 6_457_827_717_110_365_317);
        assert_eq!(random.next(), 3_203_168_211_198_807_973);
    }

    #[test]
    fn normal_numbers_have_mean_zero_and_variance_one() {
        let mut random = SplitMix64::stream(1, 0);
        let values: Vec<f64> = (0..20_000).map(|_| random.normal()).collect();
        let mean = values.iter().sum::<f64>() / 20_000.0;
        let variance = values.iter().map(|x| x * x).sum::<f64>() / 20_000.0;
        assert!(mean.abs() < 0.03 && (variance - 0.97).abs() < 0.05, "{mean} {variance}");
    }
}
