//! A source of pseudo-random numbers that is the same everywhere and for ever.

/// The generator splitmix64: a counter and a mixing function.
///
/// Searches name their seed in the catalogue, so the sequence must never change; that is why it
/// is fixed here. Reference: Steele, Lea & Flood 2014, OOPSLA, 453–472.
#[derive(Clone, Debug)]
pub struct Random {
    state: u64,
}

impl Random {
    /// The sequence that belongs to `seed`.
    #[must_use]
    pub fn new(seed: u64) -> Self {
        Self { state: seed }
    }

    /// The next 64 bits.
    pub fn bits(&mut self) -> u64 {
        self.state = self.state.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.state;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// A number below `n` (0 for n = 0); the bias is below n/2^64.
    pub fn below(&mut self, n: usize) -> usize {
        ((u128::from(self.bits()) * n as u128) >> 64) as usize
    }

    /// The next bits modulo `n` (0 for n = 0); the bias is below n/2^64. The searches whose stored
    /// finds rest on this sequence use it, new ones use [`Random::below`].
    pub fn modulo(&mut self, n: usize) -> usize {
        self.bits().checked_rem(n as u64).unwrap_or(0) as usize
    }

    /// Puts the items in random order.
    pub fn shuffle<T>(&mut self, items: &mut [T]) {
        for i in (1..items.len()).rev() {
            items.swap(i, self.below(i + 1));
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The first values of the published reference code for seed 1234567 \[memory\].
    #[test]
    fn the_sequence_is_splitmix64() {
        let mut random = Random::new(1_234_567);
        let first: Vec<u64> = (0..3).map(|_| random.bits()).collect();
        assert_eq!(first, [6_457_827_717_110_365_317, 3_203_168_211_198_807_973, 9_817_491_932_198_370_423]);
    }

    #[test]
    fn below_and_shuffle_stay_inside() {
        let mut random = Random::new(1);
        assert_eq!(random.below(0), 0);
        assert!((0..1000).all(|_| random.below(7) < 7));
        let mut items: Vec<u32> = (0..50).collect();
        random.shuffle(&mut items);
        assert_ne!(items, (0..50).collect::<Vec<_>>());
        items.sort_unstable();
        assert_eq!(items, (0..50).collect::<Vec<_>>());
    }
}
