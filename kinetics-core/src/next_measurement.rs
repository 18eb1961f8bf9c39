//! Where one run more narrows an answer most: a c-optimal choice of temperature for one linear
//! target (Dovì, Reverberi & Acevedo-Duarte, Ind. Eng. Chem. Res. 1994, 33, 62).
//!
//! The run to come is put off the present law by what it is expected to be off, the root of
//! jᵀCj + s² + τ², and the law is fitted again. Where intervals come from the residuals this
//! leaves s as it is and gives C⁻¹ one jjᵀ/s² and ν one degree of freedom; with stated errors it
//! gives jjᵀ/s²; with run-to-run scatter it also counts for what the data say of τ. A law that is
//! known rather than fitted takes jjᵀ/s² directly.

use crate::measurements::Observation;
use crate::numeric::sorting::sort_by;
use crate::quantity::Kelvin;
use crate::temperature_law::{
    Component, Contrast, FittedLaw, LawError, Scatter, ScatterChoice, Target, fit,
};

/// What a measurement is to narrow.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Aim {
    /// ln k here is the question's number, up to a constant.
    pub at: Kelvin,
    /// Less ln k here, where the question compares two temperatures.
    pub against: Option<Kelvin>,
    /// Whom its limits cover.
    pub whose: Target,
    /// Probability below the upper limit: 0.975 for two sides at 95 %, 0.95 for one.
    pub probability: f64,
    /// For a question about a temperature: K per unit of ln k.
    pub kelvins: Option<f64>,
}

impl Aim {
    /// ln k at a temperature, with limits on both sides of the law's mean at `level`.
    pub fn two_sided(at: Kelvin, level: f64) -> Self {
        let probability = 0.5 * (1.0 + level);
        Self { at, against: None, whose: Target::Mean, probability, kelvins: None }
    }

    /// ln k at a temperature, with one limit at `level`.
    pub fn one_sided(at: Kelvin, whose: Target, level: f64) -> Self {
        Self { at, against: None, whose, probability: level, kelvins: None }
    }

    fn target(&self, law: &FittedLaw) -> Contrast {
        let at = law.ln_rate_contrast(self.at);
        self.against.map_or(at, |other| at.minus(law.ln_rate_contrast(other)))
    }

    /// Half of what lies between the limits, on the scale of ln k; none where no scatter is known.
    pub fn half_width(&self, law: &FittedLaw) -> Option<f64> {
        let target = self.target(law);
        let limit = |probability| law.quantile(&target, self.whose, probability);
        Some(0.5 * (limit(self.probability)? - limit(1.0 - self.probability)?))
    }
}

/// The standard deviation of ln k that one run more is reckoned with: what is stated for it, else
/// the middle one of the runs so far. Without errors all runs weigh alike, so that one cannot be
/// better than they scatter. None where nothing is known.
pub fn run_sd(law: &FittedLaw, stated: Option<f64>) -> Option<f64> {
    match law.scatter {
        Scatter::NoneKnown => stated,
        Scatter::FromResiduals => {
            let scatter = libm::sqrt(law.components.first()?.run_variance);
            Some(stated.map_or(scatter, |stated| stated.max(scatter)))
        }
        Scatter::AsStated | Scatter::AsStatedPlusRunToRun => stated.or_else(|| {
            let mut sds: Vec<f64> = law.runs.iter().filter_map(|run| run.ln_sd).collect();
            sort_by(&mut sds, |sd| *sd);
            sds.get(sds.len() / 2).copied()
        }),
    }
}

/// Half of what will lie between the limits after one run more at `temperature` with the standard
/// deviation `sd` of ln k; none where that cannot be computed.
pub fn half_width_after(law: &FittedLaw, aim: &Aim, temperature: Kelvin, sd: f64) -> Option<f64> {
    let with = |law: &FittedLaw| aim.half_width(law).filter(|width| width.is_finite());
    if law.runs.is_empty() {
        return with(&known_law_with_run(law, temperature, sd)?);
    }
    let off = expected_misfit(law, temperature, sd)?;
    let one = with(&with_run(law, temperature, sd, off).ok()?)?;
    if law.scatter == Scatter::AsStatedPlusRunToRun {
        // There the side matters on which the run falls.
        let other = with(&with_run(law, temperature, sd, -off).ok()?)?;
        return Some(0.5 * (one + other));
    }
    Some(one)
}

/// How far one run more is expected off the law: the root of jᵀCj + s² + τ².
fn expected_misfit(law: &FittedLaw, temperature: Kelvin, sd: f64) -> Option<f64> {
    let place = law.ln_rate_contrast(temperature);
    let of_law = match law.standard_error(&place) {
        Some(error) => error,
        // Runs that fix the law exactly scatter by what the run to come does.
        None => {
            let runs: Vec<Observation> =
                law.runs.iter().map(|run| Observation { ln_sd: Some(sd), ..*run }).collect();
            fit(law.law, &runs, ScatterChoice::AsStated).ok()?.standard_error(&place)?
        }
    };
    let run_to_run = law.run_to_run_sd.unwrap_or(0.0);
    Some(libm::sqrt(of_law * of_law + sd * sd + run_to_run * run_to_run))
}

/// The law with one run more that is off it by `misfit` in ln k, under the same scatter.
fn with_run(
    law: &FittedLaw,
    temperature: Kelvin,
    sd: f64,
    misfit: f64,
) -> Result<FittedLaw, LawError> {
    let on_residuals = matches!(law.scatter, Scatter::NoneKnown | Scatter::FromResiduals);
    let ln_rate = law.ln_rate(temperature) + misfit;
    let ln_sd = (!on_residuals).then_some(sd);
    let mut runs = law.runs.clone();
    runs.push(Observation::new(temperature, ln_rate, ln_sd));
    law.refitted(&runs)
}

/// C⁻¹ + jjᵀ/s² for a law known beforehand: C − Cj jᵀC/(s² + jᵀCj) (Sherman & Morrison, Ann.
/// Math. Stat. 1950, 21, 124).
fn known_law_with_run(law: &FittedLaw, temperature: Kelvin, sd: f64) -> Option<FittedLaw> {
    let place = law.ln_rate_contrast(temperature);
    let updated = |component: &Component| {
        let covariance = &component.covariance;
        let size = covariance.nrows();
        let along: Vec<f64> = (0..size)
            .map(|i| (0..size).map(|j| covariance[(i, j)] * place.coefficients[j]).sum())
            .collect();
        let own: f64 = along.iter().zip(place.coefficients).map(|(a, j)| a * j).sum();
        let mut narrowed = covariance.clone();
        for i in 0..size {
            for j in 0..size {
                narrowed[(i, j)] -= along[i] * along[j] / (sd * sd + own);
            }
        }
        Component { covariance: narrowed, ..component.clone() }
    };
    let components: Vec<Component> = law.components.iter().map(updated).collect();
    let covariance = components.first().map(|component| component.covariance.clone());
    law.has_intervals().then(|| FittedLaw { components, covariance, ..law.clone() })
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;
    use crate::numeric::distributions::{normal_quantile, student_t_quantile};
    use crate::temperature_law::TemperatureLaw;

    fn runs(sd: Option<f64>) -> Vec<Observation> {
        [(323.15, -4.02), (333.15, -2.88), (343.15, -2.05), (353.15, -1.02)]
            .iter()
            .map(|&(t, y)| Observation::new(Kelvin(t), y, sd))
            .collect()
    }

    fn law(runs: &[Observation], scatter: ScatterChoice) -> FittedLaw {
        fit(TemperatureLaw::Arrhenius, runs, scatter).unwrap()
    }

    fn coldest_half(law: &FittedLaw) -> Vec<f64> {
        let aim = Aim::two_sided(Kelvin(298.15), 0.95);
        let sd = run_sd(law, None).unwrap();
        (0..10)
            .map(|i| half_width_after(law, &aim, Kelvin(300.0 + 3.0 * f64::from(i)), sd).unwrap())
            .collect()
    }

    /// σ·√(1/n + (x − x̄)²/S) of a straight line through temperatures, by the textbook sums.
    fn line_error(temperatures: &[f64], at: f64) -> f64 {
        let n = temperatures.len() as f64;
        let mean = temperatures.iter().map(|t| 1.0 / t).sum::<f64>() / n;
        let spread: f64 = temperatures.iter().map(|t| (1.0 / t - mean).powi(2)).sum();
        (1.0 / n + (1.0 / at - mean).powi(2) / spread).sqrt()
    }

    #[test]
    fn from_the_residuals_it_is_the_closed_form_with_one_more_degree() {
        let law = law(&runs(None), ScatterChoice::FromResiduals);
        let s = law.components[0].run_variance.sqrt();
        let aim = Aim::two_sided(Kelvin(298.15), 0.95);
        let now = student_t_quantile(0.975, 2.0)
            * s
            * line_error(&[323.15, 333.15, 343.15, 353.15], 298.15);
        assert!((aim.half_width(&law).unwrap() / now - 1.0).abs() < 1e-9);
        for t in [305.0, 338.15, 360.0] {
            let with = [323.15, 333.15, 343.15, 353.15, t];
            let expected = student_t_quantile(0.975, 3.0) * s * line_error(&with, 298.15);
            let found = half_width_after(&law, &aim, Kelvin(t), s).unwrap();
            assert!((found / expected - 1.0).abs() < 1e-9, "{t}: {found} {expected}");
        }
    }

    /// With ten times the stated error all that is said of τ is that it is small.
    #[test]
    fn stated_errors_add_their_weight_and_run_to_run_scatter_lies_above() {
        let sd = 0.5;
        let alone = law(&runs(Some(sd)), ScatterChoice::AsStated);
        let aim = Aim::two_sided(Kelvin(298.15), 0.95);
        let with = [323.15, 333.15, 343.15, 353.15, 305.0];
        let expected = normal_quantile(0.975) * sd * line_error(&with, 298.15);
        let found = half_width_after(&alone, &aim, Kelvin(305.0), sd).unwrap();
        assert!((found / expected - 1.0).abs() < 1e-9, "{found} {expected}");
        let scattered = law(&runs(Some(sd)), ScatterChoice::AsStatedPlusRunToRun);
        let wider = half_width_after(&scattered, &aim, Kelvin(305.0), sd).unwrap();
        assert!(wider > found && wider < aim.half_width(&scattered).unwrap());
    }

    /// Two exact runs and a third of the same scatter s: t with one degree of freedom, 12.7.
    #[test]
    fn a_third_run_brings_the_first_interval() {
        let law = law(&runs(None)[..2], ScatterChoice::Automatic);
        let aim = Aim::two_sided(Kelvin(298.15), 0.95);
        assert_eq!(aim.half_width(&law), None);
        assert_eq!(run_sd(&law, None), None);
        let sd = run_sd(&law, Some(0.05)).unwrap();
        let found = half_width_after(&law, &aim, Kelvin(310.0), sd).unwrap();
        let expected =
            student_t_quantile(0.975, 1.0) * sd * line_error(&[323.15, 333.15, 310.0], 298.15);
        assert!((found / expected - 1.0).abs() < 1e-9, "{found} {expected}");
    }

    /// By hand, for a known law with Cov = diag(a², b²) in (ln k0, E) and a run of error s at
    /// u = x − x0, target at v: the gain (a² + b²uv/R²)²/(s² + a² + b²u²/R²) is largest at
    /// u = v(1 + s²/a²), whatever b: a little further out than what is asked for.
    #[test]
    fn for_a_known_law_the_best_place_is_the_one_found_by_hand() {
        let (a, s) = (0.1, 0.05);
        let law = FittedLaw::known(
            TemperatureLaw::Arrhenius,
            Kelvin(333.15),
            (-11.0, Some(a)),
            (85_000.0, Some(6_000.0)),
        );
        let aim = Aim::two_sided(Kelvin(313.15), 0.95);
        let by_hand = {
            let v = 1.0 / 313.15 - 1.0 / 333.15;
            1.0 / (1.0 / 333.15 + v * (1.0 + s * s / (a * a)))
        };
        let width = |t: f64| half_width_after(&law, &aim, Kelvin(t), s).unwrap();
        let best = (0..4000).map(|i| 290.0 + 0.01 * f64::from(i));
        let best = best.min_by(|p, q| width(*p).total_cmp(&width(*q))).unwrap();
        assert!((best - by_hand).abs() < 0.02, "{best} {by_hand}");
        assert!(width(best) < aim.half_width(&law).unwrap());
        assert_eq!(run_sd(&law, None), None);
    }

    /// Towards a target colder than all runs, the colder the run the better, whatever the scatter.
    #[test]
    fn nearer_to_a_cold_target_is_better() {
        for (sd, scatter) in [
            (None, ScatterChoice::FromResiduals),
            (Some(0.05), ScatterChoice::AsStated),
            (Some(0.05), ScatterChoice::AsStatedPlusRunToRun),
            (Some(0.002), ScatterChoice::AsStatedPlusRunToRun),
        ] {
            let law = law(&runs(sd), scatter);
            let widths = coldest_half(&law);
            assert!(widths.windows(2).all(|pair| pair[0] < pair[1]), "{scatter:?} {widths:?}");
        }
    }

    /// A run cannot be better than the residuals say, and a worse one helps less.
    #[test]
    fn the_error_of_the_run_counts() {
        let on_residuals = law(&runs(None), ScatterChoice::FromResiduals);
        let scatter = run_sd(&on_residuals, None).unwrap();
        assert_eq!(run_sd(&on_residuals, Some(0.001)), Some(scatter));
        assert_eq!(run_sd(&on_residuals, Some(1.0)), Some(1.0));
        let stated = law(&runs(Some(0.05)), ScatterChoice::AsStated);
        assert_eq!(run_sd(&stated, None), Some(0.05));
        let aim = Aim::two_sided(Kelvin(298.15), 0.95);
        let after = |sd: f64| half_width_after(&stated, &aim, Kelvin(305.0), sd).unwrap();
        assert!(after(0.01) < after(0.05) && after(0.05) < after(0.2));
    }
}
