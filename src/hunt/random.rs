//! Random numbers whose sequence never changes.

/// The generator SplitMix64 (Steele, Lea & Flood 2014): the same numbers for the same seed in
/// every version of the crate, which library generators do not promise.
#[derive(Clone, Debug)]
pub struct Random {
    state: u64,
}

impl Random {
    /// A generator with the given seed.
    #[must_use]
    pub fn new(seed: u64) -> Self {
        Self { state: seed }
    }

    /// The next 64 random bits.
    pub fn bits(&mut self) -> u64 {
        self.state = self.state.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut z = self.state;
        z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        z ^ (z >> 31)
    }

    /// A number below `n`; the bias is below n / 2^64.
    ///
    /// # Panics
    /// When `n` is 0.
    pub fn below(&mut self, n: usize) -> usize {
        assert!(n > 0, "no number is below 0");
        ((u128::from(self.bits()) * n as u128) >> 64) as usize
    }

    /// Puts the elements into random order.
    pub fn shuffle<T>(&mut self, items: &mut [T]) {
        for i in (1..items.len()).rev() {
            items.swap(i, self.below(i + 1));
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_published_sequence() {
        // The first outputs of SplitMix64 for the seed 1234567, as in widely used test vectors.
        let mut random = Random::new(1_234_567);
        let first: Vec<u64> = (0..3).map(|_| random.bits()).collect();
        assert_eq!(first, [6_457_827_717_110_365_317, 3_203_168_211_198_807_973, 9_817_491_932_198_370_423]);
    }

    #[test]
    fn a_shuffle_keeps_the_elements() {
        let mut items: Vec<u32> = (0..50).collect();
        Random::new(3).shuffle(&mut items);
        assert_ne!(items, (0..50).collect::<Vec<_>>());
        items.sort_unstable();
        assert_eq!(items, (0..50).collect::<Vec<_>>());
    }
}
