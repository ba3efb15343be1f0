//! The line-up: the residuals of a fit among decoys that the fit could as well have left.
//!
//! If nobody who has not seen the plot before can tell the true panel from the others, neither can the
//! data. Decoys are turned, not drawn anew and refitted: all panels have the same size of residuals, so
//! that the size does not give the true one away.

use super::added::dot;
use super::sphere::{Sphere, whitened};
use crate::fit::Fit;
use crate::numerics::streams::Stream;

/// Panels of a line-up by default: one pick is right by chance once in twenty.
pub const PANELS: usize = 20;

/// Panels of residuals, one of them true.
#[derive(Debug, Clone, PartialEq)]
pub struct LineUp {
    /// Residuals of each panel, output unit, in the order of the fit's points.
    pub panels: Vec<Vec<f64>>,
    /// Which panel is the true one.
    pub seat: usize,
}

/// Seats the residuals of a fit among decoys.
///
/// # Formula
/// Decoy: ‖√w·ê‖·Q·u/√w, u uniform on the unit sphere of the residual space. Under an adequate model with
/// normal errors the true panel and the decoys are exchangeable: any rule that picks one panel picks the
/// true one exactly once in `panels`.
///
/// # Shapes and units
/// `panels` ≥ 2. The same seed gives the same decoys and the same seat. `None` with fewer panels, with
/// ν < 2 (a turned residual would be the same or its mirror image), or without scatter beyond rounding.
///
/// # Source
/// A. Buja et al. (2009), Phil. Trans. R. Soc. A 367, 4361–4383, for the line-up; rotation as
/// [`Sphere::new`]; from memory.
#[must_use]
pub fn line_up(fit: &Fit, panels: usize, seed: u64) -> Option<LineUp> {
    if panels < 2 || fit.degrees_of_freedom < 2 {
        return None;
    }
    let truth = whitened(fit)?;
    let length = libm::sqrt(dot(&truth, &truth));
    let root: Vec<f64> = fit.variance_ratio.iter().map(|v| libm::sqrt(*v)).collect();
    // The seat has its own stream: it does not follow from the number of decoys drawn.
    let seat = usize::try_from(Stream::new(seed, 1).below(panels as u64)).ok()?;
    let mut out: Vec<Vec<f64>> = Vec::with_capacity(panels);
    let plain = |u: &[f64]| u.iter().zip(&root).map(|(u, r)| length * u * r).collect();
    Sphere::new(fit, panels - 1, seed)?.each(|u| out.push(plain(u)));
    out.insert(seat, fit.residuals.clone());
    Some(LineUp { panels: out, seat })
}

/// P(at least `picks` of `viewers` pick the true panel by chance).
///
/// # Formula
/// P(Bin(V, 1/panels) ≥ v): one viewer with one pick gives 1/panels.
///
/// # Shapes and units
/// Each viewer looks once, alone, without having seen the plot before. 1 without picks; not a number for
/// more picks than viewers or without panels.
///
/// # Source
/// M. Majumder, H. Hofmann & D. Cook (2013), J. Amer. Statist. Assoc. 108, 942–956; from memory.
#[must_use]
pub fn line_up_p(viewers: u32, picks: u32, panels: u32) -> f64 {
    if panels == 0 || picks > viewers {
        return f64::NAN;
    }
    if picks == 0 {
        return 1.0;
    }
    let p = 1.0 / f64::from(panels);
    // From the last term of the binomial distribution downwards: no factorial, no cancellation.
    let (mut term, mut sum) = (libm::pow(p, f64::from(viewers)), 0.0);
    for hits in (picks..=viewers).rev() {
        sum += term;
        let (h, v) = (f64::from(hits), f64::from(viewers));
        term *= h / (v - h + 1.0) * (1.0 - p) / p;
    }
    sum.min(1.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::reference::{assert_rate, fitted, simulated};
    use crate::fit::{self, Weights};
    use crate::model::Family;

    /// |arch|, the largest residual, and the funnel of a panel.
    fn features(e: &[f64]) -> [f64; 3] {
        let n = e.len() as f64;
        let place = |i: usize| 2.0 * i as f64 / (n - 1.0) - 1.0;
        let arch = e.iter().enumerate().map(|(i, e)| (place(i).powi(2) - 0.35) * e).sum::<f64>().abs();
        let largest = e.iter().fold(0.0_f64, |m, e| m.max(e.abs()));
        let funnel = e.iter().enumerate().map(|(i, e)| place(i) * e.abs()).sum::<f64>();
        [arch, largest, funnel]
    }

    /// A clean line is the most extreme of twenty in one run of twenty, whatever is looked at.
    #[test]
    fn the_true_panel_stands_out_one_time_in_twenty() {
        const RUNS: u32 = 4000;
        for (number, design) in (0..).zip([(6, 1), (11, 1), (5, 3)]) {
            let mut stream = Stream::new(91, number);
            let mut hits = [0; 3];
            for seed in 0..RUNS {
                let points = simulated(&mut stream, design, |x| 3.0 - x, |_| 0.7);
                let shown = line_up(&fitted(Family::Polynomial(1), &points), PANELS, seed.into()).unwrap();
                let seen: Vec<[f64; 3]> = shown.panels.iter().map(|e| features(e)).collect();
                for (k, hits) in hits.iter_mut().enumerate() {
                    let top = (0..PANELS).max_by(|a, b| seen[*a][k].total_cmp(&seen[*b][k]));
                    *hits += usize::from(top == Some(shown.seat));
                }
            }
            println!("{design:?}: {:?}", hits.map(|h| h as f64 / f64::from(RUNS)));
            for count in hits {
                assert_rate(count, RUNS as usize, 0.05);
            }
        }
    }

    #[test]
    fn an_arch_stands_out_from_its_decoys() {
        let points = simulated(&mut Stream::new(92, 0), (8, 2), |x| x + 0.1 * x * x, |_| 0.1);
        let shown = line_up(&fitted(Family::Polynomial(1), &points), PANELS, 7).unwrap();
        let arch = |e: &Vec<f64>| features(e)[0];
        let truth = arch(&shown.panels[shown.seat]);
        assert!((0..PANELS).filter(|i| *i != shown.seat).all(|i| arch(&shown.panels[i]) < truth));
    }

    /// Weighted, all panels share Σw·e², and every one is what a fit of such readings would leave.
    #[test]
    fn decoys_are_residuals_of_the_same_size() {
        let points = simulated(&mut Stream::new(93, 0), (6, 2), |x| 2.0 * x, |x| 0.1 * x);
        let fit = fit::fit(&Family::Polynomial(2), &points, Weights::InverseX2).unwrap();
        let shown = line_up(&fit, 5, 3).unwrap();
        assert_eq!(shown.panels.len(), 5);
        assert_eq!(shown.panels[shown.seat], fit.residuals);
        for panel in &shown.panels {
            let ss: f64 = panel.iter().zip(&fit.variance_ratio).map(|(e, v)| e * e / v).sum();
            assert!((ss / fit.residual_ss - 1.0).abs() < 1e-12);
            let mut moved = fit.points.clone();
            for (point, e) in moved.iter_mut().zip(panel) {
                point.y = fit.curve.value(point.x) + e;
            }
            let again = fit::fit(&Family::Polynomial(2), &moved, Weights::InverseX2).unwrap();
            assert!(again.residuals.iter().zip(panel).all(|(a, b)| (a - b).abs() < 1e-12));
        }
        assert_eq!(line_up(&fit, 5, 3), Some(shown));
    }

    #[test]
    fn every_seat_is_taken() {
        let fit = fitted(Family::Polynomial(1), &simulated(&mut Stream::new(94, 0), (6, 1), |x| x, |_| 1.0));
        let mut taken = [0_usize; PANELS];
        for seed in 0..4000 {
            taken[line_up(&fit, PANELS, seed).unwrap().seat] += 1;
        }
        for count in taken {
            assert_rate(count, 4000, 0.05);
        }
    }

    #[test]
    fn picks_by_chance() {
        assert!((line_up_p(1, 1, 20) - 0.05).abs() < 1e-16);
        assert_eq!((line_up_p(3, 0, 20), line_up_p(0, 0, 20)), (1.0, 1.0));
        // 3·(1/20)²·(19/20) + (1/20)³.
        assert!((line_up_p(3, 2, 20) - 0.00725).abs() < 1e-16);
        assert!(line_up_p(1, 2, 20).is_nan() && line_up_p(1, 1, 0).is_nan());
    }

    #[test]
    fn no_line_up_without_scatter() {
        let exact: Vec<_> = (1..6).map(|i| fit::Point { x: f64::from(i), y: f64::from(i) }).collect();
        assert_eq!(line_up(&fitted(Family::Polynomial(1), &exact), PANELS, 1), None);
        let few = fitted(Family::Polynomial(1), &simulated(&mut Stream::new(95, 0), (3, 1), |x| x, |_| 1.0));
        assert_eq!(line_up(&few, PANELS, 1), None);
        let enough = fitted(Family::Polynomial(1), &simulated(&mut Stream::new(95, 0), (5, 1), |x| x, |_| 1.0));
        assert_eq!(line_up(&enough, 1, 1), None);
    }
}
