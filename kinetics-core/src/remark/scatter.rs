//! Remarks on how the runs scatter.

use super::{Evidence, Remark, Severity};
use crate::temperature_law::{
    Scatter, activation_energy_on_rates, lack_of_fit as test_lack_of_fit, thermometer_share,
};
use crate::wording::{Figures, significant};

const SIGNIFICANCE: f64 = 0.05;

/// Fits on ln k and on k that differ by more than a standard error.
pub(super) fn weighting(evidence: &Evidence) -> Option<Remark> {
    let basis = evidence.basis;
    let fitted = &basis.law;
    if fitted.scatter != Scatter::FromResiduals {
        return None;
    }
    let target = fitted.law.activation_energy(fitted.reference, fitted.reference);
    let error = fitted.standard_error(&target)?;
    let on_logarithms = fitted.estimate(&target);
    let on_rates = activation_energy_on_rates(fitted, evidence.observations)?;
    if (on_rates - on_logarithms).abs() <= error {
        return None;
    }
    let unit = basis.display.energy;
    let [logarithms, rates, error] =
        [on_logarithms, on_rates, error].map(|energy| unit.from_joules_per_mole(energy));
    let figures = Figures::supported(logarithms, Some((logarithms - error, logarithms + error)));
    let shown = |energy: f64| figures.number(energy, basis.display.decimal);
    Some(Remark::new(
        "weighting",
        Severity::Note,
        format!(
            "The activation energy depends on how runs are weighed: {} if each k is equally good \
             in per cent, as taken here, {} {unit} if each is equally good in its unit.",
            shown(logarithms),
            shown(rates)
        ),
        "State the error of each rate constant: then the weights are known.",
    ))
}

/// Replicates agree with each other better than with the law.
pub(super) fn lack_of_fit(evidence: &Evidence) -> Option<Remark> {
    let basis = evidence.basis;
    let test = test_lack_of_fit(&basis.law, evidence.observations)?;
    (test.p < SIGNIFICANCE).then(|| {
        Remark::new(
            "lack-of-fit",
            Severity::Caution,
            format!(
                "Replicates agree with each other better than with the law (F = {}, p = {}): \
                 temperatures scatter as such, or the law does not hold.",
                significant(test.f, 2, basis.display.decimal),
                significant(test.p, 2, basis.display.decimal)
            ),
            "Average replicates that shared an oven or a batch, or try another law.",
        )
    })
}

/// The runs scatter more than their stated errors say.
pub(super) fn excess_scatter(evidence: &Evidence) -> Option<Remark> {
    let basis = evidence.basis;
    let (chi_squared, p) = basis.law.chi_squared?;
    if p >= SIGNIFICANCE {
        return None;
    }
    let decimal = basis.display.decimal;
    let (severity, consequence, remedy) = if basis.law.scatter == Scatter::AsStated {
        (
            Severity::Caution,
            "the intervals are too narrow",
            "Let the intervals include the scatter between runs.",
        )
    } else {
        (
            Severity::Note,
            "the intervals include a scatter between runs",
            "Look for what differs between runs: temperature, batch, start of the clock.",
        )
    };
    Some(Remark::new(
        "excess-scatter",
        severity,
        format!(
            "The runs scatter more than their stated errors say (χ² = {}, p = {}); {consequence}.",
            significant(chi_squared, 2, decimal),
            significant(p, 2, decimal)
        ),
        remedy,
    ))
}

/// The random error of the thermometer makes more than a quarter of what the runs scatter.
pub(super) fn thermometer(evidence: &Evidence) -> Option<Remark> {
    const LARGEST_SHARE: f64 = 0.25;
    let basis = evidence.basis;
    let fitted = &basis.law;
    let kelvins = fitted.settings.thermometer_sd_kelvin;
    let share = thermometer_share(fitted).filter(|share| *share > LARGEST_SHARE)?;
    let decimal = basis.display.decimal;
    let percent = significant(100.0 * share.min(1.0), 2, decimal);
    Some(Remark::new(
        "thermometer",
        Severity::Note,
        format!(
            "The thermometer's random error of {}\u{a0}K makes {percent}\u{a0}% of the variance of \
             the runs, and so of the intervals.",
            significant(kelvins, 2, decimal)
        ),
        "A better thermometer would narrow the answers; better rate constants alone would not.",
    ))
}
