//! Stated errors plus a run-to-run scatter τ that only the data tell of.
//!
//! Var(ln kᵢ) = sᵢ² + τ². Q(τ) = Σ w r² is chi-squared with ν degrees of freedom at the true
//! τ, which turns every τ into the probability F(τ) that the true one is larger (a Q-profile:
//! Viechtbauer, Stat. Med. 2007, 26, 37; a generalised pivotal quantity: Iyer, Wang & Mathew,
//! J. Am. Stat. Assoc. 2004, 99, 1060). A target's normal distributions at each τ are averaged
//! with the density −dF/dτ.
//!
//! That leaves the mass 1 − F(0), the chance of a larger misfit if there is no τ at all. It does
//! not say that there is none: near 0 the misfit tells τ² no better than to √(2ν)/tr P, with
//! P = W − WX(XᵀWX)⁻¹XᵀW (the standard error of the moment estimate (Q − ν)/tr P; DerSimonian &
//! Laird, Control. Clin. Trials 1986, 7, 177). So the mass lies evenly over τ² from 0 to there.
//! Left at τ = 0 it would take a law that hangs on a few precise runs to be as precise as these
//! are stated: in simulation, coverage fell to 0.93 where runs scatter as much as the others' errors.
//!
//! The average is an integral over ln τ, in which all is smooth. It is taken by Gauss's rule on
//! panels that are halved until the rule returns the mass F(left) − F(right) of each, which is
//! known: a few dozen fits, where a ladder of equal steps needs hundreds for less.

use super::scatter::{LawError, Problem, Scatter, component};
use super::{Component, FittedLaw, Kernel};
use crate::numeric::distributions::{chi_squared_cdf, chi_squared_density};
use crate::numeric::least_squares::LinearFit;
use crate::numeric::roots::secant_crossing;
use crate::quantity::Kelvin;

/// The first panel begins at this share of the smallest stated error: a scatter below it changes
/// no weight by more than 1e-4.
const FIRST_TAU: f64 = 0.01;
/// Panels end where the true τ is larger with less than this probability.
const LAST_PROBABILITY: f64 = 1e-6;
/// Width of a panel in ln τ before it is halved.
const PANEL: f64 = 1.5;
/// Most panels before halving, e^60 above the first: a bound for data whose Q never falls.
const MOST_PANELS: usize = 40;
/// A panel is halved until its mass is right to this, or so often.
const MASS_TOLERANCE: f64 = 1e-5;
const MOST_HALVINGS: usize = 12;
/// A panel this light is not worth a rule: its mass goes half to either end.
const LIGHT: f64 = 1e-6;
/// Beyond so many degrees of freedom τ² is known to √(2/ν) of the variances, and averaging over it
/// would change a width by 2 % at most, for fifty times the work.
const MANY: f64 = 1000.0;
/// Components lighter than this change no printed digit.
const NEGLIGIBLE_MASS: f64 = 1e-9;
/// Panels of the mass near τ = 0, on a scale from 0 to the largest τ that it reaches: narrower
/// where a precise run's error may be larger than τ.
const NEAR_NONE: [(f64, f64); 2] = [(0.0, 0.3), (0.3, 1.0)];
/// Abscissas and weights of Gauss's rule with four points on (−1, 1); Abramowitz & Stegun,
/// Handbook of Mathematical Functions, 1964, table 25.4.
const GAUSS: [(f64, f64); 4] = [
    (-0.861_136_311_594_052_6, 0.347_854_845_137_453_9),
    (-0.339_981_043_584_856_3, 0.652_145_154_862_546_1),
    (0.339_981_043_584_856_3, 0.652_145_154_862_546_1),
    (0.861_136_311_594_052_6, 0.347_854_845_137_453_9),
];

impl Problem {
    pub(super) fn as_stated_plus_run_to_run(&self, sd: &[f64]) -> Result<FittedLaw, LawError> {
        let degrees = self.degrees_of_freedom as f64;
        let provisional = self.reference(&self.weights(sd, 0.0));
        let smallest = sd.iter().copied().fold(f64::INFINITY, f64::min);
        let as_stated = self.solve(provisional, &self.weights(sd, 0.0))?.weighted_sum_of_squares;
        let tau = self.best_tau(provisional, sd, as_stated)?;

        let final_weights = self.weights(sd, tau);
        let reference = self.reference(&final_weights);
        let fit = self.solve(reference, &final_weights)?;
        let mut mixture = Mixture { problem: self, reference, sd, degrees, components: Vec::new() };
        let kernel = if degrees > MANY {
            mixture.components.push(component(1.0, tau, &fit));
            Kernel::StudentT(degrees)
        } else {
            mixture.average(smallest)?;
            Kernel::Normal
        };
        Ok(FittedLaw {
            scatter: Scatter::AsStatedPlusRunToRun,
            components: mixture.components,
            kernel,
            run_to_run_sd: Some(tau),
            chi_squared: self.chi_squared(as_stated),
            ..self.fitted(reference, final_weights, fit)
        })
    }

    /// The τ at which Q meets its expectation ν, or none where it lies below from the start.
    fn best_tau(&self, reference: Kelvin, sd: &[f64], as_stated: f64) -> Result<f64, LawError> {
        let degrees = self.degrees_of_freedom as f64;
        if as_stated <= degrees {
            return Ok(0.0);
        }
        let misfit = |tau: f64| -> Result<f64, LawError> {
            Ok(self.solve(reference, &self.weights(sd, tau))?.weighted_sum_of_squares)
        };
        let smallest = sd.iter().copied().fold(f64::INFINITY, f64::min);
        let (mut below, mut above) = (0.0, smallest);
        while misfit(above)? > degrees {
            below = above;
            above *= 2.0;
        }
        // ν/Q is nearly a parabola in τ: it begins near 0 and passes 1.
        let rising = |tau: f64| misfit(tau).map_or(f64::INFINITY, |q| degrees / q);
        Ok(secant_crossing(rising, 1.0, below, above, 1e-14))
    }
}

/// The average as it grows.
struct Mixture<'a> {
    problem: &'a Problem,
    reference: Kelvin,
    sd: &'a [f64],
    degrees: f64,
    components: Vec<Component>,
}

/// What the data say at one τ.
struct Node {
    ln_tau: f64,
    fit: LinearFit,
    /// Probability that the true τ is larger.
    larger: f64,
}

/// Gauss's rule between two points.
fn gauss(left: f64, right: f64) -> [(f64, f64); 4] {
    let (middle, half) = (0.5 * (left + right), 0.5 * (right - left));
    GAUSS.map(|(abscissa, weight)| (middle + half * abscissa, half * weight))
}

impl Mixture<'_> {
    fn average(&mut self, smallest: f64) -> Result<(), LawError> {
        let none = self.node(f64::NEG_INFINITY)?;
        let mut left = self.node(libm::log(FIRST_TAU * smallest))?;
        let step = none.larger - left.larger;
        self.near_none(&none)?;
        self.add(&none, 0.5 * step);
        self.add(&left, 0.5 * step);
        for _ in 0..MOST_PANELS {
            if left.larger < LAST_PROBABILITY {
                break;
            }
            let right = self.node(left.ln_tau + PANEL)?;
            self.panel(&left, &right, MOST_HALVINGS)?;
            left = right;
        }
        let rest = left.larger;
        self.add(&left, rest);
        Ok(())
    }

    /// Spreads what is left for no τ evenly over the τ² that cannot be told from none.
    fn near_none(&mut self, none: &Node) -> Result<(), LawError> {
        let mass = 1.0 - none.larger;
        let leverages =
            self.problem.leverages(self.reference, &self.problem.weights(self.sd, 0.0), &none.fit);
        // tr P; a run that the law passes through has no share in it, but for rounding.
        let slope: f64 = self
            .sd
            .iter()
            .zip(&self.problem.shares)
            .zip(&leverages)
            .map(|((s, share), leverage)| (share - leverage).max(0.0) / (s * s))
            .sum();
        let largest = libm::sqrt(libm::sqrt(2.0 * self.degrees) / slope);
        if !(mass > NEGLIGIBLE_MASS && largest > 0.0 && largest.is_finite()) {
            self.add(none, mass);
            return Ok(());
        }
        for (left, right) in NEAR_NONE {
            for (part, weight) in gauss(left, right) {
                let node = self.node(libm::log(part * largest))?;
                self.add(&node, 2.0 * part * weight * mass);
            }
        }
        Ok(())
    }

    fn panel(&mut self, left: &Node, right: &Node, halvings: usize) -> Result<(), LawError> {
        let mass = left.larger - right.larger;
        if mass < LIGHT || halvings == 0 {
            self.add(left, 0.5 * mass);
            self.add(right, 0.5 * mass);
            return Ok(());
        }
        let mut found = Vec::with_capacity(GAUSS.len());
        for (ln_tau, weight) in gauss(left.ln_tau, right.ln_tau) {
            let node = self.node(ln_tau)?;
            let share = weight * self.density(&node);
            found.push((node, share));
        }
        let sum: f64 = found.iter().map(|(_, share)| share).sum();
        if (sum - mass).abs() < MASS_TOLERANCE {
            for (node, share) in &found {
                self.add(node, share * mass / sum);
            }
            return Ok(());
        }
        let middle = self.node(0.5 * (left.ln_tau + right.ln_tau))?;
        self.panel(left, &middle, halvings - 1)?;
        self.panel(&middle, right, halvings - 1)
    }

    fn node(&self, ln_tau: f64) -> Result<Node, LawError> {
        let weights = self.problem.weights(self.sd, libm::exp(ln_tau));
        let fit = self.problem.solve(self.reference, &weights)?;
        let larger = chi_squared_cdf(fit.weighted_sum_of_squares, self.degrees);
        Ok(Node { ln_tau, fit, larger })
    }

    /// −dF/d ln τ. As the fit minimises Σ w r², its change with τ is that of the weights alone:
    /// dQ/d ln τ = −2τ² Σ w² r².
    fn density(&self, node: &Node) -> f64 {
        let variance = libm::exp(2.0 * node.ln_tau);
        let slope: f64 = self
            .sd
            .iter()
            .zip(&node.fit.residuals)
            .zip(&self.problem.shares)
            .map(|((s, r), share)| {
                let weighted = r / (s * s + variance);
                share * weighted * weighted
            })
            .sum();
        let misfit = node.fit.weighted_sum_of_squares;
        2.0 * variance * slope * chi_squared_density(misfit, self.degrees)
    }

    fn add(&mut self, node: &Node, mass: f64) {
        if mass > NEGLIGIBLE_MASS {
            self.components.push(component(mass, libm::exp(node.ln_tau), &node.fit));
        }
    }
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;
    use crate::measurements::Observation;
    use crate::temperature_law::{ScatterChoice, Target, TemperatureLaw, fit};

    fn fitted(runs: &[(f64, f64, f64)], scatter: ScatterChoice) -> FittedLaw {
        fit(TemperatureLaw::Arrhenius, &observations(runs), scatter).unwrap()
    }

    fn observations(runs: &[(f64, f64, f64)]) -> Vec<Observation> {
        let observation = |&(t, y, s): &(f64, f64, f64)| Observation::new(Kelvin(t), y, Some(s));
        runs.iter().map(observation).collect()
    }

    fn four(sd: f64) -> Vec<(f64, f64, f64)> {
        [(323.15, -4.02), (333.15, -2.88), (343.15, -2.05), (353.15, -1.02)]
            .map(|(t, y)| (t, y, sd))
            .to_vec()
    }

    /// With equal errors so small that they do not matter, the averaged interval must become
    /// least squares with t. The tolerance is what panels may miss of a mass.
    #[test]
    fn with_equal_negligible_errors_it_becomes_student_t() {
        let t = fitted(&four(1.0), ScatterChoice::FromResiduals);
        let averaged = fitted(&four(1e-6), ScatterChoice::Automatic);
        assert_eq!(averaged.scatter, Scatter::AsStatedPlusRunToRun);
        for temperature in [293.15, 340.0, 400.0] {
            let target = t.ln_rate_contrast(Kelvin(temperature));
            for probability in [0.001, 0.025, 0.5, 0.95, 0.975] {
                let expected = t.quantile(&target, Target::Mean, probability).unwrap();
                let below = averaged.probability_below(&target, Target::Mean, expected).unwrap();
                assert!((below - probability).abs() < 1e-5, "{probability}: {below}");
            }
        }
    }

    /// The same average by brute force: a fine ladder of τ with the masses between its rungs, and
    /// one of τ² near none.
    #[test]
    fn panels_agree_with_a_fine_ladder() {
        let unequal = [0.01, 0.2, 0.05, 0.003];
        let precise_ends = [0.003, 0.05, 0.05, 0.003];
        let mut many = Vec::new();
        for i in 0..60 {
            let t = 320.0 + f64::from(i);
            let off = f64::from((i * 37) % 11) / 11.0 - 0.5;
            many.push((t, 30.0 - 11_000.0 / t + 0.3 * off, 0.02 + 0.001 * f64::from(i % 7)));
        }
        let with = |sds: [f64; 4]| -> Vec<_> {
            four(0.0).into_iter().zip(sds).map(|((t, y, _), s)| (t, y, s)).collect()
        };
        for runs in [with(unequal), with(precise_ends), four(0.05), four(0.02)[..3].to_vec(), many]
        {
            let averaged = fitted(&runs, ScatterChoice::Automatic);
            assert!(averaged.components.len() < 70, "{}", averaged.components.len());
            let total: f64 = averaged.components.iter().map(|c| c.weight).sum();
            assert!((total - 1.0).abs() < 1e-6, "{total}");

            let ladder = FittedLaw { components: ladder(&runs, &averaged), ..averaged.clone() };
            for target in [
                averaged.ln_rate_contrast(Kelvin(293.15)),
                averaged.law.activation_energy(averaged.reference, averaged.reference),
            ] {
                for whose in [Target::Mean, Target::NextRun] {
                    for value in [0.025, 0.05, 0.95, 0.975] {
                        let expected = ladder.quantile(&target, whose, value).unwrap();
                        let below = averaged.probability_below(&target, whose, expected).unwrap();
                        // A tenth of the Monte-Carlo error of the published coverage.
                        assert!((below - value).abs() < 1e-4, "{below} {value}");
                    }
                }
            }
        }
    }

    fn ladder(runs: &[(f64, f64, f64)], averaged: &FittedLaw) -> Vec<Component> {
        let problem = Problem::new(averaged.law, &observations(runs)).unwrap();
        let sd: Vec<f64> = runs.iter().map(|(_, _, s)| *s).collect();
        let degrees = averaged.degrees_of_freedom.unwrap() as f64;
        let larger = |tau: f64| {
            let fit = problem.solve(averaged.reference, &problem.weights(&sd, tau)).unwrap();
            chi_squared_cdf(fit.weighted_sum_of_squares, degrees)
        };
        let at = |mass: f64, tau: f64| {
            let fit = problem.solve(averaged.reference, &problem.weights(&sd, tau)).unwrap();
            component(mass, tau, &fit)
        };
        let mut above = larger(0.0);
        // P in full.
        let none = problem.solve(averaged.reference, &problem.weights(&sd, 0.0)).unwrap();
        let row = |t: f64| problem.law.ln_rate(Kelvin(t), averaged.reference).coefficients;
        let trace: f64 = runs
            .iter()
            .map(|(t, _, s)| {
                let at = nalgebra::DVector::from_column_slice(&row(*t)[..2]);
                let hat = (at.transpose() * &none.covariance * &at)[(0, 0)];
                1.0 / (s * s) - hat / s.powi(4)
            })
            .sum();
        let standard_error = (2.0 * degrees).sqrt() / trace;
        let near = |i: usize| (standard_error * (i as f64 + 0.5) / 2000.0).sqrt();
        let share = (1.0 - above) / 2000.0;
        let mut components: Vec<_> = (0..2000).map(|i| at(share, near(i))).collect();
        let mut tau = 1e-5;
        while above > 1e-7 {
            let next = larger(tau * 1.01);
            components.push(at(above - next, tau * 1.005));
            (above, tau) = (next, tau * 1.01);
        }
        components
    }

    /// However well precise runs agree, the interval does not shrink to their errors where the
    /// others leave room for a scatter; with alike errors their agreement is worth more.
    #[test]
    fn precise_ends_alone_do_not_rule_scatter_out() {
        let line = |errors: [f64; 4]| -> Vec<_> {
            let at = |(i, s): (usize, f64)| {
                (320.0 + 10.0 * i as f64, 30.0 - 1e4 / (320.0 + 10.0 * i as f64), s)
            };
            errors.into_iter().enumerate().map(at).collect()
        };
        let width = |errors, choice| {
            let law = fitted(&line(errors), choice);
            let energy = law.law.activation_energy(law.reference, law.reference);
            let (low, high) = law.interval(&energy, Target::Mean, 0.95).unwrap();
            high - low
        };
        let ratio = |errors| {
            width(errors, ScatterChoice::Automatic) / width(errors, ScatterChoice::AsStated)
        };
        assert!(ratio([0.005, 0.05, 0.05, 0.005]) > 5.0);
        let alike = ratio([0.05; 4]);
        assert!(alike > 1.0 && alike < 1.6, "{alike}");
    }

    /// On both sides of the bound the same runs, twice as many, give the same limits.
    #[test]
    fn many_runs_need_no_average() {
        let runs = |count: u32| -> Vec<(f64, f64, f64)> {
            let run = |i: u32| {
                let t = 320.0 + 40.0 * f64::from(i) / f64::from(count);
                let off = f64::from((i * 37) % 101) / 101.0 - 0.5;
                (t, 30.0 - 11_000.0 / t + 0.3 * off, 0.02 + 0.001 * f64::from(i % 7))
            };
            (0..count).map(run).collect()
        };
        let few = fitted(&runs(1000), ScatterChoice::Automatic);
        let many = fitted(&runs(1004), ScatterChoice::Automatic);
        assert!(few.components.len() > 4 && many.components.len() == 1);
        let width = |law: &FittedLaw, whose| {
            let (low, high) =
                law.interval(&law.ln_rate_contrast(Kelvin(300.0)), whose, 0.95).unwrap();
            high - low
        };
        for whose in [Target::Mean, Target::NextRun] {
            assert!((width(&many, whose) / width(&few, whose) - 1.0).abs() < 0.01, "{whose:?}");
        }
    }

    #[test]
    fn generous_stated_errors_leave_no_run_to_run_scatter() {
        let fitted = fitted(&four(0.5), ScatterChoice::Automatic);
        assert_eq!(fitted.run_to_run_sd, Some(0.0));
        assert_eq!(fitted.kernel, Kernel::Normal);
        assert!(fitted.chi_squared.unwrap().1 > 0.5);
    }

    /// Runs about a line by their stated errors alone: Q at the estimate is ν.
    #[test]
    fn the_best_scatter_is_where_the_misfit_meets_its_expectation() {
        let runs = four(0.01);
        let problem = Problem::new(TemperatureLaw::Arrhenius, &observations(&runs)).unwrap();
        let fitted = fitted(&runs, ScatterChoice::Automatic);
        let tau = fitted.run_to_run_sd.unwrap();
        let fit = problem.solve(fitted.reference, &problem.weights(&[0.01; 4], tau)).unwrap();
        assert!(tau > 0.0 && (fit.weighted_sum_of_squares - 2.0).abs() < 1e-9);
    }
}
