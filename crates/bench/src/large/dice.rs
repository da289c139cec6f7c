//! Chance that comes out the same on every machine.

/// A source of figures.
///
/// Source: G. Steele, D. Lea, C. Flood, "Fast splittable pseudorandom number generators" (2014), the
/// mix function known as SplitMix64.
#[derive(Debug, Clone)]
pub struct Dice(u64);

impl Dice {
    /// Dice of their own for each seed, stream and place in the stream, so that a row does not depend
    /// on how many rows there are.
    pub fn new(seed: u64, stream: u64, place: u64) -> Self {
        let mut dice = Self(seed);
        for key in [stream, place] {
            dice.0 = dice.throw() ^ key;
        }
        dice
    }

    fn throw(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// Evenly from 0 (included) to 1.
    pub fn share(&mut self) -> f64 {
        // The 53 bits that a figure in [0, 1) can hold.
        (self.throw() >> 11) as f64 / (1u64 << 53) as f64
    }

    /// True in this share of all throws.
    pub fn chance(&mut self, share: f64) -> bool {
        self.share() < share
    }

    /// Evenly from `low` to `high`.
    pub fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.share()
    }

    /// From `low` to `high` (both > 0), every decade alike.
    pub fn log_between(&mut self, low: f64, high: f64) -> f64 {
        libm::exp(self.between(libm::log(low), libm::log(high)))
    }

    /// A whole number from 0 to below `end`; 0 where `end` is 0.
    pub fn below(&mut self, end: usize) -> usize {
        (self.share() * end as f64) as usize
    }

    /// One of some choices, all alike.
    pub fn pick<T: Copy, const N: usize>(&mut self, choices: [T; N]) -> T {
        choices[self.below(N)]
    }

    /// Something in this share of all throws, else None.
    pub fn maybe(&mut self, share: f64, draw: impl FnOnce(&mut Self) -> f64) -> Option<f64> {
        self.chance(share).then(|| draw(self))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Written down once: a shop of a seed must stay the shop that published figures speak of.
    #[test]
    fn the_figures_of_a_seed_never_change() {
        let mut dice = Dice::new(1, 2, 3);
        let first: Vec<usize> = (0..4).map(|_| dice.below(1_000_000)).collect();
        assert_eq!(first, FIRST_OF_1_2_3);
        assert_eq!(dice.log_between(0.001, 1000.0).to_bits(), LOG_AFTER_THEM);
    }

    const FIRST_OF_1_2_3: [usize; 4] = [814_259, 267_960, 255_022, 334_277];
    const LOG_AFTER_THEM: u64 = 0x402a_85f1_38a4_9fda;
}
