//! Remarks on slips that a known or stated activation energy betrays.

use super::{Evidence, Remark, Severity};
use crate::constants::ZERO_CELSIUS_KELVIN;
use crate::measurements::Observation;
use crate::quantity::Kelvin;
use crate::temperature_law::{ScatterChoice, fit};
use crate::wording::significant;

/// Energies count as matching within this part.
const MATCH: f64 = 0.02;

fn matches(found: f64, stated: f64) -> bool {
    (found / stated - 1.0).abs() < MATCH
}

/// All temperatures below 150 K, and an energy that no reaction in solution has; or a stated
/// energy that the fit gives when the numbers are taken as °C.
pub(super) fn celsius_as_kelvin(evidence: &Evidence) -> Option<Remark> {
    const COLDEST_USUAL_KELVIN: f64 = 150.0;
    const LOWEST_USUAL_ENERGY: f64 = 15_000.0;
    let observations = evidence.observations;
    if !evidence.read_as_kelvin || observations.is_empty() {
        return None;
    }
    let fitted = &evidence.basis.law;
    let energy = fitted.activation_energy(fitted.reference).0;
    let all_cold = observations.iter().all(|o| o.temperature.0 < COLDEST_USUAL_KELVIN);
    let matches_stated = evidence.stated_activation_energy.is_some_and(|stated| {
        let shifted: Vec<_> = observations
            .iter()
            .map(|o| {
                let temperature = Kelvin(o.temperature.0 + ZERO_CELSIUS_KELVIN);
                Observation { temperature, ..*o }
            })
            .collect();
        let as_celsius = fit(fitted.law, &shifted, ScatterChoice::FromResiduals);
        as_celsius.is_ok_and(|law| matches(law.activation_energy(law.reference).0, stated.0))
            && !matches(energy, stated.0)
    });
    if !((all_cold && energy < LOWEST_USUAL_ENERGY) || matches_stated) {
        return None;
    }
    let decimal = evidence.basis.display.decimal;
    let kilojoules = significant(energy / 1000.0, 2, decimal);
    Some(Remark::new(
        "celsius-as-kelvin",
        Severity::Caution,
        format!(
            "The temperatures were read as K and give an activation energy of only \
             {kilojoules}\u{a0}kJ/mol: they look like °C, and then every answer is wrong."
        ),
        "If they are °C, choose °C in the head of the temperature column.",
    ))
}

/// The stated energy is the fitted one times or divided by ln 10: log10 taken for ln.
pub(super) fn log_base(evidence: &Evidence) -> Option<Remark> {
    let ratio = stated_over_fitted(evidence)?;
    let off = [std::f64::consts::LN_10, 1.0 / std::f64::consts::LN_10];
    off.iter().any(|factor| matches(ratio, *factor)).then(|| {
        Remark::new(
            "log-base",
            Severity::Caution,
            "The stated activation energy is the fitted one times or divided by 2.303: one of the \
             two took log10 for ln.",
            "Check the head of the column of logarithms, or the source of the stated value.",
        )
    })
}

/// The stated energy is the fitted one times or divided by 4.184 or 1000.
pub(super) fn unit_of_energy(evidence: &Evidence) -> Option<Remark> {
    let ratio = stated_over_fitted(evidence)?;
    let (name, _) = [("4.184 (kcal and kJ)", 4.184), ("1000 (J and kJ)", 1000.0)]
        .into_iter()
        .find(|(_, factor)| matches(ratio, *factor) || matches(ratio, 1.0 / factor))?;
    Some(Remark::new(
        "unit-of-energy",
        Severity::Caution,
        format!(
            "The stated activation energy is the fitted one times or divided by {name}: its unit \
             looks mistaken."
        ),
        "Check the unit of the stated value.",
    ))
}

fn stated_over_fitted(evidence: &Evidence) -> Option<f64> {
    let fitted = &evidence.basis.law;
    let stated = evidence.stated_activation_energy?;
    Some(stated.0 / fitted.activation_energy(fitted.reference).0)
}
