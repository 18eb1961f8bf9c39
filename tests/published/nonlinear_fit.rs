//! The nonlinear least squares behind every progress curve, against certified values of the NIST
//! Statistical Reference Datasets (StRD), nonlinear regression: all 18 sets, from both starts,
//! once with the linear parameters eliminated and once with all of them searched.

use checks::{checks, close};
use kinetics_core::numeric::nonlinear::{Expansion, NonlinearFit, Problem, Unfinished, fit};
use serde_json::Value;

#[path = "nonlinear_models.rs"]
mod models;
use models::{Local, local};

const SETS: &str = include_str!("../reference/nist_strd.json");

/// Certified parameters carry 11 digits; six are asked for.
const PARAMETERS: f64 = 1e-6;
/// Certified standard deviations carry 11 digits; four are asked for.
const DEVIATIONS: f64 = 1e-4;

/// The one search that ends without a minimum, and says so: with the linear parameter eliminated,
/// MGH10 is flat where the far start lies. With all three searched it is found from there too.
const NOT_FOUND: [(&str, &str); 1] = [("MGH10", "far")];

struct Set {
    name: String,
    linear: &'static [usize],
    local: Local,
    rows: Vec<Vec<f64>>,
    observed: Vec<f64>,
    document: Value,
}

fn numbers(value: &Value) -> Vec<f64> {
    value.as_array().unwrap().iter().map(|x| x.as_f64().unwrap()).collect()
}

fn sets() -> Vec<Set> {
    let document: Value = serde_json::from_str(SETS).unwrap();
    let all = document["sets"].as_array().unwrap();
    assert_eq!(all.len(), 18);
    all.iter()
        .map(|set| {
            let name = set["name"].as_str().unwrap().to_owned();
            let rows: Vec<Vec<f64>> = set["rows"].as_array().unwrap().iter().map(numbers).collect();
            // Nelson's model is of the logarithm.
            let measured = |row: &Vec<f64>| if name == "Nelson" { row[0].ln() } else { row[0] };
            let observed = rows.iter().map(measured).collect();
            let (linear, local) = local(&name);
            Set { linear, local, rows, observed, document: set.clone(), name }
        })
        .collect()
}

impl Set {
    fn parameters(&self, key: &str) -> Vec<f64> {
        numbers(&self.document[key])
    }

    fn is_linear(&self, parameter: usize) -> bool {
        self.linear.contains(&parameter)
    }

    /// Only the parameters that do not enter linearly.
    fn nonlinear(&self, all: &[f64]) -> Vec<f64> {
        (0..all.len()).filter(|k| !self.is_linear(*k)).map(|k| all[k]).collect()
    }

    fn projected(&self, a: &[f64]) -> Option<Expansion> {
        let mut expansion = Expansion::zeros(self.rows.len(), a.len(), self.linear.len());
        for (i, row) in self.rows.iter().enumerate() {
            let point = (self.local)(&row[1..], a)?;
            expansion.offset[i] = point.offset;
            for (k, slope) in point.offset_slopes.iter().enumerate() {
                expansion.offset_derivatives[(i, k)] = *slope;
            }
            for (j, value) in point.basis.iter().enumerate() {
                expansion.basis[(i, j)] = *value;
                for (k, slopes) in point.basis_slopes.iter().enumerate() {
                    expansion.basis_derivatives[k][(i, j)] = slopes[j];
                }
            }
        }
        Some(expansion)
    }

    /// The same model with its linear parameters searched like the others.
    fn whole(&self, all: &[f64]) -> Option<Expansion> {
        let apart = self.projected(&self.nonlinear(all))?;
        let mut expansion = Expansion::zeros(self.rows.len(), all.len(), 0);
        expansion.offset = apart.offset;
        let (mut nonlinear, mut linear) = (0, 0);
        for (k, value) in all.iter().enumerate() {
            let mut slope = expansion.offset_derivatives.column_mut(k);
            if self.is_linear(k) {
                slope.copy_from(&apart.basis.column(linear));
                expansion.offset += apart.basis.column(linear) * *value;
                linear += 1;
            } else {
                slope.copy_from(&apart.offset_derivatives.column(nonlinear));
                for (j, of) in self.linear.iter().enumerate() {
                    slope += apart.basis_derivatives[nonlinear].column(j) * all[*of];
                }
                nonlinear += 1;
            }
        }
        Some(expansion)
    }

    fn fit(&self, key: &str, eliminated: bool) -> Result<NonlinearFit, Unfinished> {
        let weights = vec![1.0; self.rows.len()];
        let all = self.parameters(key);
        let projected = |a: &[f64]| self.projected(a);
        let whole = |a: &[f64]| self.whole(a);
        let observed = &self.observed;
        if eliminated {
            let problem = Problem { observed, weights: &weights, model: &projected };
            fit(&problem, &self.nonlinear(&all))
        } else {
            fit(&Problem { observed, weights: &weights, model: &whole }, &all)
        }
    }

    /// How far the fit is from the certified parameters and standard deviations, relatively.
    fn misses(&self, fit: &NonlinearFit, eliminated: bool) -> (f64, f64) {
        let certified = self.parameters("certified");
        let deviations = self.parameters("certified_sd");
        let own: Vec<usize> = if eliminated {
            let apart = (0..certified.len()).filter(|k| !self.is_linear(*k));
            apart.chain(self.linear.iter().copied()).collect()
        } else {
            (0..certified.len()).collect()
        };
        let residual_sd = fit.variance().unwrap().sqrt();
        let values = fit.nonlinear.iter().chain(&fit.linear);
        let mut found = vec![(0.0, 0.0); certified.len()];
        for (at, (value, k)) in values.zip(own).enumerate() {
            found[k] = (*value, residual_sd * fit.covariance[(at, at)].sqrt());
        }
        self.name_as_certified(&mut found);
        let off = |pair: (f64, f64)| (pair.0 / pair.1 - 1.0).abs();
        let worst = |pairs: Vec<(f64, f64)>| pairs.into_iter().map(off).fold(0.0, f64::max);
        (
            worst(found.iter().map(|f| f.0).zip(certified).collect()),
            worst(found.iter().map(|f| f.1).zip(deviations).collect()),
        )
    }

    /// Two models have each minimum twice: a peak of negative width and height is the same peak,
    /// and two decays may change places.
    fn name_as_certified(&self, found: &mut [(f64, f64)]) {
        if self.name == "Eckerle4" && found[1].0 < 0.0 {
            found[0].0 *= -1.0;
            found[1].0 *= -1.0;
        }
        if self.name == "MGH17" && found[3].0 > found[4].0 {
            found.swap(1, 2);
            found.swap(3, 4);
        }
    }
}

fn check(eliminated: bool, not_found: &[(&str, &str)]) {
    let mut wrong = Vec::new();
    for set in sets() {
        for start in ["near", "far"] {
            let outcome = set.fit(start, eliminated);
            let expected = !not_found.contains(&(set.name.as_str(), start));
            let miss = outcome.as_ref().ok().map(|fit| set.misses(fit, eliminated));
            // Lanczos1 has residuals of 1e-13, so that its deviations are rounding errors.
            let deviations = if set.name == "Lanczos1" { f64::INFINITY } else { DEVIATIONS };
            let found = miss.is_some_and(|m| m.0 <= PARAMETERS && m.1 <= deviations);
            if found != expected {
                wrong.push(format!(
                    "{} from the {start} start: {miss:?} {:?}",
                    set.name,
                    outcome.err()
                ));
            }
        }
    }
    assert!(wrong.is_empty(), "\n{}", wrong.join("\n"));
}

checks! {
    fn all_sets_from_both_starts_with_linear_parameters_eliminated() {
        check(true, &NOT_FOUND);
    }

    fn all_sets_with_every_parameter_searched() {
        check(false, &[]);
    }

    /// The sums of squares, but for Lanczos1, whose is 1e-25.
    fn sums_of_squares_are_the_certified_ones() {
        for set in sets().iter().filter(|set| set.name != "Lanczos1") {
            let certified = set.document["sum_of_squares"].as_f64().unwrap();
            close(set.fit("near", true).unwrap().weighted_sum_of_squares, certified, 1e-8);
        }
    }

    /// Central differences with a step of 1e-6 of a parameter err by about 1e-9 of the model's
    /// own size; slopes are compared on that scale.
    fn analytic_slopes_agree_with_differences() {
        for set in sets() {
            let at = set.parameters("certified");
            let slopes = set.whole(&at).unwrap().offset_derivatives;
            for (k, value) in at.iter().enumerate() {
                let moved = |share: f64| {
                    let mut to = at.clone();
                    to[k] = value * (1.0 + share);
                    set.whole(&to).unwrap().offset
                };
                let differences = (moved(1e-6) - moved(-1e-6)) / (2e-6 * value);
                let scale = differences.amax();
                let off = (slopes.column(k) - &differences).amax() / scale;
                assert!(off < 1e-6, "{} parameter {}: off {off:e}", set.name, k + 1);
            }
        }
    }
}
