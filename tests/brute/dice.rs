//! Repeatable random numbers.

/// A small generator (`SplitMix64`: Steele, Lea, Flood, "Fast splittable pseudorandom number
/// generators", OOPSLA 2014).
pub struct Dice(u64);

impl Dice {
    pub fn new(seed: u64) -> Self {
        Self(seed.wrapping_mul(0x9e37_79b9_7f4a_7c15) ^ 0x5bf0_3635)
    }

    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// A whole number below `count`.
    pub fn below(&mut self, count: usize) -> usize {
        (self.next() % count as u64) as usize
    }

    /// A whole number from `low` to `high`, both included.
    pub fn whole(&mut self, low: usize, high: usize) -> usize {
        low + self.below(high - low + 1)
    }

    /// True in so many of a hundred cases.
    pub fn chance(&mut self, percent: usize) -> bool {
        self.below(100) < percent
    }

    /// One of a few.
    pub fn of<T: Copy>(&mut self, all: &[T]) -> T {
        all[self.below(all.len())]
    }

    /// A figure between two, spread evenly over its logarithm, to three digits.
    pub fn spread(&mut self, low: f64, high: f64) -> f64 {
        let along = self.below(1000) as f64 / 999.0;
        let figure = (low.ln() + along * (high.ln() - low.ln())).exp();
        format!("{figure:.2e}").parse().unwrap()
    }

    /// The same, but absent in so many of a hundred cases.
    pub fn maybe(&mut self, absent: usize, low: f64, high: f64) -> Option<f64> {
        let figure = self.spread(low, high);
        (!self.chance(absent)).then_some(figure)
    }
}
