//! Do applications of a standard differ by more than the looks at one of them?

use super::ftest::FTest;
use super::levels::mean_of;

/// The looks at one application.
#[derive(Debug, Clone, PartialEq)]
pub struct Looks {
    /// The standard, input unit.
    pub x: f64,
    /// What was seen, one entry a look, output unit.
    pub values: Vec<f64>,
}

/// Scatter between applications against scatter within one.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Applications {
    /// F of the mean squares between applications of one standard and within applications, one-sided.
    pub test: FTest,
    /// SD between applications beyond what the looks explain, output unit; 0 when there is none.
    pub between: f64,
    /// SD of a look within its application, output unit.
    pub within: f64,
}

/// Compares applications of one standard with the looks at each of them, pooled over the standards.
///
/// # Formula
/// F = [Σ n_a(ȳ_a − ȳ_i)²/Σ(A_i − 1)]/[Σ(y − ȳ_a)²/Σ(n_a − 1)], n_a looks at application a, A_i
/// applications of standard i; between² = max(0, MS_between − MS_within)/n₀ with n₀ the usual mean
/// number of looks.
///
/// # Shapes and units
/// One entry an application. `None` unless a standard was applied twice and an application looked at
/// twice.
///
/// # Source
/// H. Scheffé (1959), The Analysis of Variance, 5.3 (nested classification); from memory.
#[must_use]
pub fn applications(all: &[Looks]) -> Option<Applications> {
    let mut order: Vec<&Looks> = all.iter().filter(|a| !a.values.is_empty()).collect();
    order.sort_by(|a, b| a.x.total_cmp(&b.x));
    let (mut between, mut within) = (0.0, 0.0);
    let (mut df1, mut df2, mut spread_count) = (0, 0, 0.0);
    for level in order.chunk_by(|a, b| a.x.total_cmp(&b.x).is_eq()) {
        let looks: f64 = level.iter().map(|a| a.values.len() as f64).sum();
        let centre = mean_of(level.iter().flat_map(|a| a.values.iter().copied()));
        for application in level {
            let mean = mean_of(application.values.iter().copied());
            between += application.values.len() as f64 * (mean - centre) * (mean - centre);
            within += application.values.iter().map(|y| (y - mean) * (y - mean)).sum::<f64>();
            df2 += application.values.len() - 1;
        }
        df1 += level.len() - 1;
        let squares: f64 = level.iter().map(|a| (a.values.len() * a.values.len()) as f64).sum();
        spread_count += looks - squares / looks;
    }
    let largest = all.iter().flat_map(|a| &a.values).fold(0.0, |top: f64, y| top.max(y.abs()));
    let unit = 4.0 * f64::EPSILON * largest;
    let test = FTest::new(between, df1, within, df2, unit * unit * (df1 + df2) as f64)?;
    let (ms1, ms2) = (between / df1 as f64, within / df2 as f64);
    let looks_each = spread_count / df1 as f64;
    Some(Applications { test, between: libm::sqrt((ms1 - ms2).max(0.0) / looks_each), within: libm::sqrt(ms2) })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::assert_rate;
    use crate::numerics::streams::Stream;

    /// 4 standards, 3 applications each, `looks` looks.
    fn run(stream: &mut Stream, looks: impl Fn(usize) -> usize, between: f64) -> Vec<Looks> {
        (0..12)
            .map(|i| {
                let x = (i % 4) as f64;
                let centre = 50.0 * x + between * stream.normal();
                Looks { x, values: (0..looks(i)).map(|_| centre + stream.normal()).collect() }
            })
            .collect()
    }

    #[test]
    fn looks_that_are_all_the_scatter_are_suspected_five_times_in_a_hundred() {
        const RUNS: usize = 4000;
        for uneven in [false, true] {
            let mut stream = Stream::new(17, u64::from(uneven));
            let mut p = || {
                let all = run(&mut stream, |i| if uneven { 1 + i % 4 } else { 3 }, 0.0);
                applications(&all).unwrap().test.p
            };
            assert_rate((0..RUNS).filter(|_| p() <= 0.05).count(), RUNS, 0.05);
        }
    }

    #[test]
    fn the_sizes_are_met_on_average() {
        let mut stream = Stream::new(18, 0);
        let all: Vec<Applications> =
            (0..400).map(|_| applications(&run(&mut stream, |i| 2 + i % 3, 3.0)).unwrap()).collect();
        let mean = |f: fn(&Applications) -> f64| all.iter().map(f).sum::<f64>() / 400.0;
        assert!((mean(|a| a.between * a.between) / 9.0 - 1.0).abs() < 0.1);
        assert!((mean(|a| a.within * a.within) - 1.0).abs() < 0.05);
    }

    #[test]
    fn one_look_or_one_application_cannot_tell() {
        let mut stream = Stream::new(19, 0);
        assert_eq!(applications(&run(&mut stream, |_| 1, 1.0)), None);
        let single = [Looks { x: 1.0, values: vec![1.0, 2.0] }, Looks { x: 2.0, values: vec![2.0, 2.5] }];
        assert_eq!(applications(&single), None);
        let same = [Looks { x: 1.0, values: vec![0.1, 0.1] }, Looks { x: 1.0, values: vec![0.1, 0.1] }];
        assert_eq!(applications(&same).unwrap().test.p, 1.0);
    }
}
