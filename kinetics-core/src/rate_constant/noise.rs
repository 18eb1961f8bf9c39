//! How much signals scatter about their curves, and what that makes of each rate constant.

use serde::{Deserialize, Serialize};

use super::{NoRate, RunFit, Settings};
use crate::measurements::ProgressRun;
use crate::numeric::distributions::chi_squared_tail;

/// How the noise of a signal goes with its size, where no errors are stated.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Noise {
    /// The same at every signal.
    #[default]
    Constant,
    /// In proportion to the signal.
    Proportional,
}

/// Below this level the runs' noises are not taken for one.
const LEVEL: f64 = 0.05;
/// Noise below this part of the signal is rounding.
const EXACT: f64 = 1e-9;

/// Multiplies each run's `ln_sd` by the noise: as stated; or one for all runs where they are
/// alike; or each its own, and runs that cannot tell theirs are refused.
pub(super) fn spread(
    runs: &[ProgressRun],
    settings: &Settings,
    outcomes: &mut [Result<RunFit, NoRate>],
) {
    if runs.iter().all(ProgressRun::states_errors) {
        for fit in outcomes.iter_mut().flatten() {
            fit.residual_sd = Some(1.0);
        }
        return;
    }
    let own: Vec<(f64, f64)> = outcomes
        .iter()
        .flatten()
        .map(|fit| (fit.weighted_sum_of_squares, fit.degrees_of_freedom as f64))
        .collect();
    let freedom: f64 = own.iter().map(|(_, freedom)| freedom).sum();
    let squares: f64 = own.iter().map(|(squares, _)| squares).sum();
    let largest = match settings.noise {
        Noise::Constant => {
            let signals = runs.iter().flat_map(|run| &run.points).map(|p| p.signal.abs());
            signals.fold(0.0, f64::max)
        }
        Noise::Proportional => 1.0,
    };
    let alike = homogeneity(&own) >= LEVEL;
    let pooled = (freedom >= 2.0).then(|| (squares / freedom).sqrt());
    for outcome in outcomes.iter_mut() {
        let Ok(fit) = outcome else { continue };
        let noise = if alike {
            pooled
        } else if fit.degrees_of_freedom >= 2 {
            Some((fit.weighted_sum_of_squares / fit.degrees_of_freedom as f64).sqrt())
        } else {
            *outcome = Err(NoRate::NoiseNotKnown);
            continue;
        };
        fit.residual_sd = noise;
        let known = noise.filter(|noise| *noise > EXACT * largest);
        fit.ln_sd = known.and_then(|noise| Some(noise * fit.ln_sd?));
    }
}

/// Bartlett's test that variances are one (Proc. R. Soc. A 1937, 160, 268): the probability of
/// sums of squares with these degrees of freedom to differ as much; 1 where nothing compares.
fn homogeneity(own: &[(f64, f64)]) -> f64 {
    let compared: Vec<(f64, f64)> = own.iter().copied().filter(|(_, nu)| *nu >= 1.0).collect();
    let freedom: f64 = compared.iter().map(|(_, nu)| nu).sum();
    let pooled = compared.iter().map(|(squares, _)| squares).sum::<f64>() / freedom;
    if compared.len() < 2 || !(pooled > 0.0) {
        return 1.0;
    }
    let groups = compared.len() as f64 - 1.0;
    let mut statistic = 0.0;
    let mut inverse = -1.0 / freedom;
    for (squares, nu) in compared {
        // A run that is exact by chance of rounding is no proof of difference beyond this.
        let ratio = (squares / nu / pooled).max(1e-12);
        statistic -= nu * libm::log(ratio);
        inverse += 1.0 / nu;
    }
    chi_squared_tail(statistic / (1.0 + inverse / (3.0 * groups)), groups)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Worked by hand: s² of 1 and 4 with ν = 10 each; pooled 2.5, statistic
    /// 20 ln 2.5 − 10 ln 4 = 4.4629, correction 1.05, so χ²₁ = 4.2503 and p = 0.03924.
    #[test]
    fn homogeneity_is_bartletts() {
        let p = homogeneity(&[(10.0, 10.0), (40.0, 10.0)]);
        assert!((p - 0.039_24).abs() < 1e-4, "{p}");
        assert_eq!(homogeneity(&[(10.0, 10.0)]), 1.0);
        assert_eq!(homogeneity(&[(0.0, 3.0), (0.0, 3.0)]), 1.0);
        assert!(homogeneity(&[(0.0, 3.0), (5.0, 3.0)]) < 0.01);
    }
}
