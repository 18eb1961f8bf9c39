//! The temperature at which a law, or the edge of its band, reaches a given ln k.
//!
//! The two-sided answer is the set of temperatures at which the band contains the target
//! (E. C. Fieller, J. R. Stat. Soc. B 1954, 16, 175): an interval where the activation energy
//! surely differs from zero, else unbounded or two separate rays.

use super::{FittedLaw, Target};
use crate::numeric::distributions::normal_quantile;
use crate::numeric::roots::secant_crossing;
use crate::quantity::Kelvin;

/// Temperatures are searched for between these; a result at the edge counts as none.
const COLDEST: f64 = 10.0;
const HOTTEST: f64 = 10_000.0;

/// The temperatures at which the band contains a target.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum TemperatureSet {
    /// Between two temperatures; an absent end is not reached at any temperature.
    Between(Option<Kelvin>, Option<Kelvin>),
    /// Below one temperature and above another, but not between.
    TwoRays,
    /// No scatter is known.
    Unknown,
}

impl FittedLaw {
    /// The temperature nearest to T0 at which the law's ln k is `ln_rate`.
    pub fn temperature_at(&self, ln_rate: f64) -> Option<Kelvin> {
        reach(|t| self.ln_rate(t), ln_rate, self.reference)
    }

    /// The temperature at which ln k stays below `ln_rate` with `probability`, nearest to
    /// where the law itself reaches it.
    pub fn temperature_bound(
        &self,
        ln_rate: f64,
        whose: Target,
        probability: f64,
    ) -> Option<Kelvin> {
        let start = self.temperature_at(ln_rate)?;
        self.has_intervals().then_some(())?;
        // One look at the distribution a temperature, on the scale on which it is close to a
        // line in 1/T; the warmer, the less probable it is to stay below.
        let standard = |probability: f64| normal_quantile(probability.clamp(1e-15, 1.0 - 1e-15));
        let chance = |t: Kelvin| {
            let below = self.probability_below(&self.ln_rate_contrast(t), whose, ln_rate);
            -standard(below.unwrap_or(f64::NAN))
        };
        reach(chance, -standard(probability), start)
    }

    /// The two-sided set at `level`.
    pub fn temperature_set(&self, ln_rate: f64, whose: Target, level: f64) -> TemperatureSet {
        let tail = 0.5 * (1.0 - level);
        let energy = self.law.activation_energy(self.reference, self.reference);
        let Some((low, high)) = self.interval(&energy, Target::Mean, level) else {
            return TemperatureSet::Unknown;
        };
        if low > 0.0 || high < 0.0 {
            let colder = self.temperature_bound(ln_rate, whose, 1.0 - tail);
            let warmer = self.temperature_bound(ln_rate, whose, tail);
            return TemperatureSet::Between(colder, warmer);
        }
        let outside_somewhere = (0..=SCAN).any(|i| {
            let share = i as f64 / SCAN as f64;
            let t = Kelvin(1.0 / ((1.0 - share) / COLDEST + share / HOTTEST));
            self.interval(&self.ln_rate_contrast(t), whose, level)
                .is_some_and(|(low, high)| ln_rate < low || ln_rate > high)
        });
        if outside_somewhere {
            TemperatureSet::TwoRays
        } else {
            TemperatureSet::Between(None, None)
        }
    }
}

/// Points of the search for a gap in an unbounded set.
const SCAN: usize = 200;

/// Walks from `start` towards where `function` passes `target`, then bisects; the direction is
/// that in which the function rises with temperature.
fn reach(function: impl Fn(Kelvin) -> f64, target: f64, start: Kelvin) -> Option<Kelvin> {
    let at_start = function(start);
    if at_start.is_nan() {
        return None;
    }
    let rises = function(Kelvin(start.0 * 1.001)) >= at_start;
    let warmer = (at_start < target) == rises;
    let mut inner = start.0;
    let mut step = 0.01;
    while (COLDEST..=HOTTEST).contains(&inner) {
        let outer = if warmer { inner * (1.0 + step) } else { inner / (1.0 + step) };
        let passed = (function(Kelvin(outer)) < target) != (at_start < target);
        if passed {
            // In 1/T the law is close to a line, which the secant meets in a few steps.
            let (hot, cold) = if warmer { (outer, inner) } else { (inner, outer) };
            let sign = if rises { -1.0 } else { 1.0 };
            let falling = |x: f64| sign * function(Kelvin(1.0 / x));
            let x = secant_crossing(falling, sign * target, 1.0 / hot, 1.0 / cold, 1e-13);
            return Some(Kelvin(1.0 / x));
        }
        inner = outer;
        step *= 1.3;
    }
    None
}

#[cfg(test)]
#[allow(clippy::unwrap_used, clippy::panic)]
mod tests {
    use super::*;
    use crate::constants::MOLAR_GAS_CONSTANT;
    use crate::measurements::Observation;
    use crate::numeric::distributions::student_t_quantile;
    use crate::temperature_law::{ScatterChoice, TemperatureLaw, fit};

    fn law(noise: &[f64]) -> FittedLaw {
        let observations: Vec<Observation> = noise
            .iter()
            .enumerate()
            .map(|(i, e)| {
                let t = 320.0 + 10.0 * i as f64;
                let ln_rate = -5.0 - 80_000.0 / MOLAR_GAS_CONSTANT * (1.0 / t - 1.0 / 340.0) + e;
                Observation::new(Kelvin(t), ln_rate, None)
            })
            .collect();
        fit(TemperatureLaw::Arrhenius, &observations, ScatterChoice::Automatic).unwrap()
    }

    #[test]
    fn the_law_is_inverted() {
        let law = law(&[0.05, -0.04, 0.02, -0.03]);
        for t in [200.0, 300.0, 335.0, 500.0] {
            let back = law.temperature_at(law.ln_rate(Kelvin(t))).unwrap();
            assert!((back.0 - t).abs() < 1e-9, "{t} {back:?}");
        }
        assert_eq!(law.temperature_at(1000.0), None);
    }

    /// Fieller's closed form for a straight line with Student t (Draper & Smith, Applied
    /// Regression Analysis, §3.2; from memory).
    #[test]
    fn the_set_is_fiellers() {
        let law = law(&[0.05, -0.04, 0.02, -0.03]);
        let y = law.ln_rate(Kelvin(300.0));
        let c = law.covariance.clone().unwrap();
        let r = MOLAR_GAS_CONSTANT;
        let t = student_t_quantile(0.975, 2.0);
        // (y − β₁ + β₂u/R)² = t²(c11 − 2 c12 u/R + c22 u²/R²), u = x − x0
        let (b1, b2) = (law.parameters[0], law.parameters[1]);
        let a = (b2 * b2 - t * t * c[(1, 1)]) / (r * r);
        let b = 2.0 * ((y - b1) * b2 + t * t * c[(0, 1)]) / r;
        let e = (y - b1) * (y - b1) - t * t * c[(0, 0)];
        let root = (b * b - 4.0 * a * e).sqrt();
        let temperature = |u: f64| 1.0 / (1.0 / law.reference.0 + u);
        let expected = [(-b + root) / (2.0 * a), (-b - root) / (2.0 * a)].map(temperature);
        let TemperatureSet::Between(Some(low), Some(high)) =
            law.temperature_set(y, Target::Mean, 0.95)
        else {
            panic!("the set is not an interval")
        };
        assert!((low.0 - expected[0]).abs() < 1e-6, "{low:?} {expected:?}");
        assert!((high.0 - expected[1]).abs() < 1e-6, "{high:?} {expected:?}");
        assert!(low.0 < 300.0 && 300.0 < high.0);
    }

    #[test]
    fn an_energy_that_may_be_zero_bounds_nothing() {
        let law = law(&[2.5, -0.5, 0.8, -2.2]);
        let far = law.temperature_set(law.parameters[0] + 6.0, Target::Mean, 0.95);
        assert_eq!(far, TemperatureSet::TwoRays);
        let near = law.temperature_set(law.parameters[0], Target::Mean, 0.95);
        assert_eq!(near, TemperatureSet::Between(None, None));
    }
}
