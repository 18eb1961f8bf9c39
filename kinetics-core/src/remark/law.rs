//! Remarks on the runs and the law.

use super::{Evidence, Remark, Severity};
use crate::numeric::sorting::sort_by;
use crate::temperature_law::{
    Scatter, Target, curvature as test_curvature, curvature_beyond_errors, influential,
};
use crate::units::{ConcentrationKind, EnergyUnit, RateUnit};
use crate::wording::{Figures, fixed, significant};

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
    sort_by(&mut distinct, |t| *t);
    distinct.dedup();
    // Where groups are too few for intervals, that is said.
    let grouped = evidence.basis.law.settings.within_groups.is_some();
    if distinct.len() != 2 || (grouped && !evidence.basis.law.has_intervals()) {
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

/// A quadratic term at 5 %: beside the stated errors where the scatter knows them, else by its F
/// test, which with a single degree of freedom left says nothing.
pub(super) fn curvature(evidence: &Evidence) -> Option<Remark> {
    const SIGNIFICANCE: f64 = 0.05;
    let basis = evidence.basis;
    let decimal = basis.display.decimal;
    let shown = |number: f64| significant(number, 2, decimal);
    let (p, said) = if basis.law.scatter == Scatter::FromResiduals {
        let test = test_curvature(&basis.law, evidence.observations)?;
        if test.degrees_of_freedom < 2 {
            return None;
        }
        (test.p, format!("(F = {}, p = {})", shown(test.f), shown(test.p)))
    } else {
        let p = curvature_beyond_errors(&basis.law, evidence.observations)?;
        (p, format!("by more than the stated errors explain (p = {})", shown(p)))
    };
    if p >= SIGNIFICANCE {
        return None;
    }
    Some(Remark::new(
        "curvature",
        Severity::Caution,
        format!("ln k against 1/T is bent {said}: a straight line misleads most outside the data.",),
        "Ask within the data, leave out the end where something else sets in, or measure closer to \
         what you ask for.",
    ))
}

/// A single run that moves the law, and by how much.
pub(super) fn influence(evidence: &Evidence) -> Option<Remark> {
    let basis = evidence.basis;
    let fitted = &basis.law;
    let worst = *influential(fitted).first()?;
    let mut others = fitted.runs.clone();
    others.remove(worst.run);
    let without = fitted.refitted(&others).ok()?;
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

/// The whole interval of a first-order pre-exponential factor outside what elementary steps have.
pub(super) fn implausible_pre_exponential_factor(evidence: &Evidence) -> Option<Remark> {
    const LEAST_PER_SECOND: f64 = 1e9;
    const MOST_PER_SECOND: f64 = 1e17;
    let basis = evidence.basis;
    if basis.base_unit != Some(RateUnit::PER_SECOND) {
        return None;
    }
    let factor = basis.spread(&basis.law.law.ln_pre_exponential_factor(basis.law.reference));
    let (low, high) = factor.mean?;
    if high >= LEAST_PER_SECOND && low <= MOST_PER_SECOND {
        return None;
    }
    let decimal = basis.display.decimal;
    Some(Remark::new(
        "implausible-a",
        Severity::Note,
        format!(
            "The pre-exponential factor, {} to {} s⁻¹, lies outside the 10⁹ to 10¹⁷ s⁻¹ usual for \
             a single step: several steps, a transport limit or a wrong unit may be behind it.",
            significant(low, 2, decimal),
            significant(high, 2, decimal)
        ),
        "Check the units; rely on the law within the data only.",
    ))
}

/// A second-order rate constant faster than molecules meet.
pub(super) fn diffusion_limit(evidence: &Evidence) -> Option<Remark> {
    const ENCOUNTERS: f64 = 1e10;
    let basis = evidence.basis;
    let unit = basis.base_unit?;
    let molar = unit.concentration.is_some_and(|c| c.kind() == ConcentrationKind::Molar);
    if unit.order() != 2.0 || !molar {
        return None;
    }
    let asked = evidence
        .answers
        .iter()
        .flat_map(|answer| answer.rows.iter().flatten().chain(std::iter::once(answer)))
        .filter(|answer| answer.question == "rate-at")
        .filter_map(|answer| answer.value);
    let measured = evidence.observations.iter().map(|o| libm::exp(o.ln_rate));
    let fastest = asked.chain(measured).fold(0.0, f64::max);
    (fastest > ENCOUNTERS).then(|| {
        Remark::new(
            "diffusion-limit",
            Severity::Caution,
            format!(
                "A rate constant of {} L mol⁻¹ s⁻¹ is faster than molecules meet in a liquid \
                 (about 10¹⁰).",
                significant(fastest, 2, basis.display.decimal)
            ),
            "Check the units; in a liquid the rate levels off there.",
        )
    })
}
