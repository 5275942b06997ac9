//! Random numbers that are the same on every machine.

/// SplitMix64: Steele, Lea & Flood, Fast Splittable Pseudorandom Number Generators (2014), constants from memory.
pub struct Random(pub u64);

impl Random {
    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mixed = (self.0 ^ (self.0 >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        let mixed = (mixed ^ (mixed >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        mixed ^ (mixed >> 31)
    }
    pub fn below(&mut self, n: usize) -> usize {
        usize::try_from(self.next() % u64::try_from(n).unwrap()).unwrap()
    }
    /// Above 0, below 1.
    pub fn share(&mut self) -> f64 {
        (f64::from(u32::try_from(self.next() >> 32).unwrap()) + 0.5) / 4_294_967_296.0
    }
    /// Evenly in the logarithm.
    pub fn spread(&mut self, low: f64, high: f64) -> f64 {
        low * libm::exp(libm::log(high / low) * self.share())
    }
}
