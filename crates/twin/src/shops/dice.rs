//! Random figures that are the same for a seed for ever, so that a failing seed can be written down.

/// A source of random figures.
///
/// Source of the generator: G. Steele, D. Lea, C. Flood, "Fast splittable pseudorandom number
/// generators" (2014), the mix function known as SplitMix64.
#[derive(Debug, Clone)]
pub struct Dice(u64);

impl Dice {
    /// Dice of their own for each seed, stream and place in the stream.
    pub fn new(seed: u64, stream: u64, place: u64) -> Self {
        let mut dice = Self(seed);
        for key in [stream, place] {
            dice.0 = dice.next() ^ key;
        }
        dice
    }

    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// Evenly from 0 (included) to 1.
    pub fn share(&mut self) -> f64 {
        // The 53 bits that a figure in [0, 1) can hold.
        (self.next() >> 11) as f64 / (1u64 << 53) as f64
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
        self.between(low.ln(), high.ln()).exp()
    }

    /// A whole number from `low` to `high`, both included.
    pub fn whole(&mut self, low: usize, high: usize) -> usize {
        let choices = (high - low + 1) as f64;
        low + (self.share() * choices) as usize
    }

    /// One of some choices, all alike.
    pub fn pick<T: Clone, const N: usize>(&mut self, choices: [T; N]) -> T {
        choices[self.whole(0, N - 1)].clone()
    }

    /// Something in this share of all throws, else None.
    pub fn maybe(&mut self, share: f64, draw: impl FnOnce(&mut Self) -> f64) -> Option<f64> {
        self.chance(share).then(|| draw(self))
    }
}

/// A figure as data sheets print it: three significant digits.
pub fn figure(x: f64) -> f64 {
    format!("{x:.2e}").parse().unwrap_or(x)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Failing seeds that somebody noted lose their meaning when this changes.
    #[test]
    fn the_figures_of_a_seed_never_change() {
        // The first figure that the authors' own program gives for the seed 0.
        assert_eq!(Dice(0).next(), 0xe220_a839_7b1d_cdaf);
        let mut dice = Dice::new(1, 2, 3);
        assert_eq!((dice.whole(1, 1000), dice.whole(1, 1000)), (815, 268));
    }

    #[test]
    fn figures_have_three_digits() {
        assert_eq!(figure(0.012_345), 0.0123);
        assert_eq!(figure(123_456.0), 123_000.0);
    }
}
