//! Seeded random streams: the same numbers on every machine and for any number of threads.

use rand_chacha::ChaCha8Rng;
use rand_chacha::rand_core::{Rng, SeedableRng};

/// One stream of one seed. Work that is split over threads takes one stream number per block.
///
/// # Source
///
/// ChaCha with eight rounds (Bernstein 2008); normals after Box and Muller, Ann. Math. Statist. 29
/// (1958) 610. From memory.
#[derive(Debug, Clone)]
pub struct Stream {
    generator: ChaCha8Rng,
    spare: Option<f64>,
}

impl Stream {
    /// Stream `number` of `seed`.
    #[must_use]
    pub fn new(seed: u64, number: u64) -> Self {
        let mut key = [0_u8; 32];
        key[..8].copy_from_slice(&seed.to_le_bytes());
        let mut generator = ChaCha8Rng::from_seed(key);
        generator.set_stream(number);
        Self { generator, spare: None }
    }

    /// 64 random bits.
    pub fn bits(&mut self) -> u64 {
        self.generator.next_u64()
    }

    /// Uniform in the open interval (0, 1): an odd multiple of 2⁻⁵³.
    #[expect(clippy::cast_precision_loss, reason = "52 bits fit exactly")]
    pub fn uniform(&mut self) -> f64 {
        const STEP: f64 = 1.0 / 9_007_199_254_740_992.0;
        // 52 bits, so that the odd number is exact and neither 0 nor 1 is ever reached.
        let whole = (self.bits() >> 12) as f64;
        (2.0 * whole + 1.0) * STEP
    }

    /// A whole number in 0..`limit`; 0 when `limit` is 0. Without modulo bias.
    pub fn below(&mut self, limit: u64) -> u64 {
        if limit == 0 {
            return 0;
        }
        let rest = (u64::MAX % limit + 1) % limit;
        loop {
            let bits = self.bits();
            if bits <= u64::MAX - rest {
                return bits % limit;
            }
        }
    }

    /// Standard normal.
    pub fn normal(&mut self) -> f64 {
        if let Some(value) = self.spare.take() {
            return value;
        }
        let radius = libm::sqrt(-2.0 * libm::log(self.uniform()));
        let angle = std::f64::consts::TAU * self.uniform();
        self.spare = Some(radius * libm::sin(angle));
        radius * libm::cos(angle)
    }
}
