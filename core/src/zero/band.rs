//! The zero band: where readings lie while nothing is applied.

use crate::distributions::{chi2_quantile, t_quantile};
use crate::numerics::sums::Deviations;

/// An interval in output units.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Interval {
    /// Lower end, output unit.
    pub low: f64,
    /// Upper end, output unit.
    pub high: f64,
}

/// What n independent applications of nothing show.
#[derive(Debug, Clone, PartialEq)]
pub struct ZeroBand {
    /// Number of zero applications (not of looks at one application).
    pub n: usize,
    /// Their mean ȳ₀, output unit.
    pub mean: f64,
    /// Their SD s₀, output unit; 0 when all are identical, which means a coarse display and not a
    /// perfect instrument: no limit can be built on it.
    pub sd: f64,
    /// Two-sided level of the intervals, e.g. 0.95.
    pub level: f64,
    /// n − 1.
    pub degrees_of_freedom: f64,
    /// Two-sided Student factor t_{(1+level)/2, n−1}.
    pub t: f64,
    /// Where the next single reading of nothing will lie.
    pub next_reading: Interval,
    /// Where the mean of infinitely many zeros lies: another question than the next reading.
    pub mean_interval: Interval,
    /// First autocorrelation in the order of the readings; `None` when all are identical.
    pub lag1: Option<f64>,
    /// Factors that bring s₀ to the lower and upper end of the interval of σ.
    pub sd_factors: (f64, f64),
}

impl ZeroBand {
    /// The band of zero applications; `None` with fewer than three, or with one that is not finite.
    ///
    /// With no zero there is nothing to say; with one there is no scatter; with two the factor is
    /// 12.7 and the SD off by up to 32 times, so no band is drawn from them.
    ///
    /// # Formula
    /// Next reading ȳ₀ ± t·s₀√(1 + 1/n); mean ȳ₀ ± t·s₀/√n;
    /// r₁ = Σ(zᵢ − z̄)(zᵢ₊₁ − z̄)/Σ(zᵢ − z̄)²; SD factors √(ν/χ²_{(1±level)/2, ν}).
    ///
    /// # Shapes and units
    /// `zeros`: the mean indication of each application in run order, output unit.
    ///
    /// # Source
    /// G. J. Hahn & W. Q. Meeker (1991), Statistical Intervals, 4.2–4.4; from memory.
    #[must_use]
    pub fn new(zeros: &[f64], level: f64) -> Option<Self> {
        let n = zeros.len();
        if n < 3 || !(level > 0.0 && level < 1.0) {
            return None;
        }
        let found = Deviations::new(zeros)?;
        let (mean, sd) = (found.mean(), found.sd()?);
        let nu = (n - 1) as f64;
        let t = t_quantile(0.5 * (1.0 + level), nu);
        let factor = |p: f64| libm::sqrt(nu / chi2_quantile(p, nu));
        let mut band = Self {
            n,
            mean,
            sd,
            level,
            degrees_of_freedom: nu,
            t,
            next_reading: Interval { low: mean, high: mean },
            mean_interval: Interval { low: mean, high: mean },
            lag1: found.lag1(),
            sd_factors: (factor(0.5 * (1.0 + level)), factor(0.5 * (1.0 - level))),
        };
        band.next_reading = band.mean_of(1);
        band.mean_interval = band.around(1.0 / n as f64);
        Some(band)
    }

    /// Where the mean of the next k readings of nothing will lie: ȳ₀ ± t·s₀√(1/k + 1/n).
    #[must_use]
    pub fn mean_of(&self, k: usize) -> Interval {
        self.around(1.0 / k.max(1) as f64 + 1.0 / self.n as f64)
    }

    /// All zeros are the same number: the display is too coarse to show the scatter.
    #[must_use]
    pub fn identical(&self) -> bool {
        self.sd == 0.0
    }

    fn around(&self, share: f64) -> Interval {
        let half = self.t * self.sd * libm::sqrt(share);
        Interval { low: self.mean - half, high: self.mean + half }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use serde_json::Value;

    const ZEROS: [f64; 6] = [1.0, 3.0, 2.0, 5.0, 4.0, 3.0];

    /// t_{0.975, 5} = 2.5706: JCGM 100:2008 Table G.2 gives 2.57.
    #[test]
    fn six_zeros() {
        let band = ZeroBand::new(&ZEROS, 0.95).unwrap();
        assert_eq!((band.n, band.mean), (6, 3.0));
        assert!((band.sd - 2f64.sqrt()).abs() < 1e-15);
        assert!((band.t - 2.5706).abs() < 5e-5);
        let half = band.t * (2.0 * (1.0 + 1.0 / 6.0_f64)).sqrt();
        assert!((band.next_reading.high - 3.0 - half).abs() < 1e-13);
        assert!((3.0 - band.mean_interval.low - band.t * (2.0 / 6.0_f64).sqrt()).abs() < 1e-13);
        assert!((band.mean_of(1_000_000_000).high - band.mean_interval.high).abs() < 1e-6);
        assert!((band.lag1.unwrap() - (0.0 - 0.0 - 2.0 + 2.0) / 10.0).abs() < 1e-15);
    }

    macro_rules! strd {
        ($($name:literal),*) => {
            [$(include_str!(concat!("../../../tests/published/strd/", $name, ".json"))),*]
        };
    }

    /// NIST/ITL StRD, univariate (tests/published/strd/SOURCE.md): mean, SD and first autocorrelation to two
    /// units of the last place of an exact calculation from the same doubles, and to as many certified
    /// digits as those doubles can give: 15, except 13.1 for the SD of Mavro, 9.5 and 8.3 for those of
    /// NumAcc3 and NumAcc4, whose 0.2 stands behind 1 000 000 and 10 000 000.
    #[test]
    fn means_and_scatter_of_the_reference_sets() {
        let exact: Value = serde_json::from_str(strd!("means")[0]).unwrap();
        let sets = strd!("Lew", "Lottery", "Mavro", "Michelso", "NumAcc1", "NumAcc2", "NumAcc3", "NumAcc4", "PiDigits");
        for text in sets {
            let set: Value = serde_json::from_str(text).unwrap();
            let zeros: Vec<f64> = set["y"].as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect();
            let exact = exact.as_array().unwrap().iter().find(|row| row["name"] == set["name"]).unwrap();
            let band = ZeroBand::new(&zeros, 0.95).unwrap();
            let found = [("mean", band.mean), ("sd", band.sd), ("lag1", band.lag1.unwrap())];
            for ((key, found), certified) in found.into_iter().zip(set["certified"].as_array().unwrap()) {
                let (exact, certified) = (exact[key].as_f64().unwrap(), certified["estimate"].as_f64().unwrap());
                let error = ((found - exact) / exact).abs();
                assert!(error <= 2.0 * f64::EPSILON, "{} {key}: {found:e} for {exact:e}", set["name"]);
                let digits = |value: f64| (-libm::log10(((value - certified) / certified).abs())).min(15.0);
                assert!(digits(found) >= digits(exact).min(14.5) - 0.1, "{} {key}", set["name"]);
            }
        }
    }

    /// √(ν/χ²) at 95 %: n = 3: 0.52–6.28, 10: 0.69–1.83; any χ² table.
    #[test]
    fn the_sd_is_known_to_a_factor() {
        let of = |n: usize| {
            let zeros: Vec<f64> = (0..n).map(|i| (i * i % 7) as f64).collect();
            ZeroBand::new(&zeros, 0.95).unwrap().sd_factors
        };
        for (n, low, high) in [(3, 0.52, 6.285), (4, 0.57, 3.73), (6, 0.62, 2.45), (10, 0.69, 1.83), (20, 0.76, 1.46)] {
            let (a, b) = of(n);
            assert!((a - low).abs() < 0.005 && (b - high).abs() < 0.005, "{n}: {a} {b}");
        }
    }

    #[test]
    fn too_few_or_not_finite_give_no_band() {
        assert_eq!(ZeroBand::new(&[], 0.95), None);
        assert_eq!(ZeroBand::new(&[1.0], 0.95), None);
        assert_eq!(ZeroBand::new(&[1.0, 2.0], 0.95), None);
        assert_eq!(ZeroBand::new(&[1.0, 2.0, f64::NAN], 0.95), None);
    }

    #[test]
    fn identical_zeros_have_a_band_without_width() {
        let band = ZeroBand::new(&[0.1, 0.1, 0.1, 0.1], 0.95).unwrap();
        assert!(band.identical());
        assert_eq!((band.sd, band.lag1), (0.0, None));
        assert_eq!(band.next_reading, Interval { low: 0.1, high: 0.1 });
    }

    #[test]
    fn shifting_and_scaling_the_zeros_does_the_same_to_the_band() {
        let moved: Vec<f64> = ZEROS.iter().map(|z| 1e6 - 8.0 * z).collect();
        let (a, b) = (ZeroBand::new(&ZEROS, 0.9).unwrap(), ZeroBand::new(&moved, 0.9).unwrap());
        assert!((b.next_reading.low - (1e6 - 8.0 * a.next_reading.high)).abs() < 1e-8);
        assert!((b.sd - 8.0 * a.sd).abs() < 1e-9);
    }
}
