//! Reproducible random numbers for the tests: one seed, one sequence, on every machine.

/// SplitMix64 (Steele, Lea & Flood, OOPSLA 2014, doi 10.1145/2660193.2660195).
#[derive(Debug, Clone)]
pub struct Draw(u64);

impl Draw {
    /// A generator that starts from a seed.
    pub fn new(seed: u64) -> Draw {
        Draw(seed)
    }

    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        z ^ (z >> 31)
    }

    /// Evenly between two numbers.
    pub fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * ((self.next() >> 11) as f64 / (1u64 << 53) as f64)
    }

    /// Evenly in the logarithm between two positive numbers.
    pub fn scaled(&mut self, low: f64, high: f64) -> f64 {
        self.between(low.ln(), high.ln()).exp()
    }

    /// One of 0 … n − 1.
    pub fn one_of(&mut self, n: usize) -> usize {
        (self.next() % n as u64) as usize
    }

    /// True with the given probability.
    pub fn chance(&mut self, probability: f64) -> bool {
        self.between(0.0, 1.0) < probability
    }
}
