//! Remarks on the runs and the law.

use super::{Evidence, Remark, Severity};
use crate::temperature_law::{
    ScatterChoice, Target, curvature as test_curvature, fit, influential,
};
use crate::units::EnergyUnit;
use crate::wording::{Figures, fixed, significant};

/// All temperatures below 150 K, and an energy that no reaction in solution has; or a stated
/// energy that the fit gives when the numbers are taken as °C.
pub(super) fn celsius_as_kelvin(evidence: &Evidence) -> Option<Remark> {
    const COLDEST_USUAL_KELVIN: f64 = 150.0;
    const LOWEST_USUAL_ENERGY: f64 = 15_000.0;
    const MATCH: f64 = 0.02;
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
                let temperature = crate::quantity::Kelvin(
                    o.temperature.0 + crate::constants::ZERO_CELSIUS_KELVIN,
                );
                crate::measurements::Observation { temperature, ..*o }
            })
            .collect();
        let as_celsius = fit(fitted.law, &shifted, ScatterChoice::FromResiduals);
        let close = |found: f64| (found / stated.0 - 1.0).abs() < MATCH;
        as_celsius.is_ok_and(|law| close(law.activation_energy(law.reference).0)) && !close(energy)
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

/// Ea ≤ 0, or an interval of Ea that includes zero.
pub(super) fn negative_activation_energy(evidence: &Evidence) -> Option<Remark> {
    let basis = evidence.basis;
    let fitted = &basis.law;
    let target = fitted.law.activation_energy(fitted.reference, fitted.reference);
    let energy = fitted.estimate(&target);
    let low = fitted.interval(&target, Target::Mean, basis.level).map(|i| i.0);
    if energy > 0.0 && low.is_none_or(|low| low > 0.0) {
        return None;
    }
    let sentence = if energy <= 0.0 {
        "The rate falls as the temperature rises: the activation energy is not above zero, and \
         temperatures for a given time have no meaning."
    } else {
        "The interval of the activation energy includes zero: the data do not show that warming \
         makes it faster."
    };
    Some(Remark::new(
        "negative-ea",
        Severity::Caution,
        sentence,
        "Check units and the order of the columns; measure over a wider range of temperatures.",
    ))
}

/// Runs at two temperatures only.
pub(super) fn two_points(evidence: &Evidence) -> Option<Remark> {
    let mut distinct: Vec<f64> = evidence.observations.iter().map(|o| o.temperature.0).collect();
    distinct.sort_by(f64::total_cmp);
    distinct.dedup();
    if distinct.len() != 2 {
        return None;
    }
    let (sentence, remedy) = if evidence.basis.law.has_intervals() {
        (
            "Two temperatures always lie on a line: nothing tests that the law holds between or \
             beyond them.",
            "Measure at a third temperature.",
        )
    } else {
        (
            "Two runs make an exact line: nothing tells how much they scatter, so no answer has an \
             interval.",
            "Measure at a third temperature, or state the error of each rate constant in a third \
             column.",
        )
    };
    Some(Remark::new("two-points", Severity::Caution, sentence, remedy))
}

/// The F test of a quadratic term at 5 %.
pub(super) fn curvature(evidence: &Evidence) -> Option<Remark> {
    const SIGNIFICANCE: f64 = 0.05;
    let basis = evidence.basis;
    let test = test_curvature(&basis.law, evidence.observations)?;
    if test.p >= SIGNIFICANCE {
        return None;
    }
    let decimal = basis.display.decimal;
    Some(Remark::new(
        "curvature",
        Severity::Caution,
        format!(
            "ln k against 1/T is bent (F = {}, p = {}): a straight line misleads most outside the \
             data.",
            significant(test.f, 2, decimal),
            significant(test.p, 2, decimal)
        ),
        "Ask within the data, leave out the end where something else sets in, or measure closer to \
         what you ask for.",
    ))
}

/// A single run that moves the law, and by how much.
pub(super) fn influence(evidence: &Evidence) -> Option<Remark> {
    let basis = evidence.basis;
    let fitted = &basis.law;
    let worst = *influential(fitted).first()?;
    let others: Vec<_> = evidence
        .observations
        .iter()
        .enumerate()
        .filter(|(run, _)| *run != worst.run)
        .map(|(_, o)| *o)
        .collect();
    let without = fit(fitted.law, &others, ScatterChoice::Automatic).ok()?;
    let energy = |law: &crate::temperature_law::FittedLaw| {
        let unit: EnergyUnit = basis.display.energy;
        unit.from_joules_per_mole(law.activation_energy(fitted.reference).0)
    };
    let (with, without) = (energy(fitted), energy(&without));
    let decimal = basis.display.decimal;
    // Three figures show the shift; where it is smaller, one more than it needs.
    let figures = Figures::supported(with, Some((with - (with - without).abs(), with)));
    let name = evidence.run_names.get(worst.run).map_or("One run", String::as_str);
    let target = fitted.law.activation_energy(fitted.reference, fitted.reference);
    let noticeable = fitted.standard_error(&target).is_some_and(|error| {
        let unit = basis.display.energy;
        (with - without).abs() > unit.from_joules_per_mole(error)
    });
    Some(Remark::new(
        "influence",
        if noticeable { Severity::Caution } else { Severity::Note },
        format!(
            "{name} moves the law by itself (Cook's distance {}): without it the activation energy \
             would be {} instead of {} {}.",
            fixed(worst.cooks_distance, 1, decimal),
            figures.number(without, decimal),
            figures.number(with, decimal),
            basis.display.energy
        ),
        "Check that run; repeat it, or leave it out with a reason.",
    ))
}
