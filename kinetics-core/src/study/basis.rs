//! What answers will stand on: the law under the study's assumptions, or the reason why there is
//! none.

use super::assumptions::{
    display, initial_concentration, level, order, stated_order, temperature_law,
};
use super::courses::Courses;
use super::document::Study;
use super::learning::{Learnt, learn};
use crate::answer::{Basis, InitialConcentration, Refusal};
use crate::grounds::Support;
use crate::measurements::{Grouped, Rates};
use crate::quantity::Quantity;
use crate::rate_law::{ExtentError, Order};
use crate::remark::{Remark, Severity};
use crate::rivals::Rival;
use crate::table::{Form, NamedExtent};
use crate::temperature_law::{FittedLaw, TemperatureLaw};
use crate::units::{ConcentrationKind, RateUnit, TimeUnit};

/// A basis or a refusal, and what was noticed on the way.
pub(super) struct Ground {
    pub basis: Option<Basis>,
    /// Why there is no basis; read only where there is none.
    pub refusal: Refusal,
    pub remarks: Vec<Remark>,
    pub order: Option<f64>,
    pub rivals: Vec<Rival>,
    pub alternatives: Vec<FittedLaw>,
    /// The groups of runs that the law was fitted to, where groups count.
    pub grouped: Option<Grouped>,
    /// What was decided about groups.
    pub choices: Vec<String>,
}

/// Lays the ground for answers; runs that were not rate constants become such on the way.
pub(super) fn lay(study: &Study, rates: &mut Rates, courses: &mut Courses) -> Ground {
    let mut remarks = version_remark(study);
    let outcome = build(study, rates, courses, &mut remarks);
    let stated = stated_order(study).or(unit_of(study, rates).map(RateUnit::order));
    match outcome {
        Ok((basis, learnt)) => Ground {
            refusal: Refusal::new("", ""),
            order: basis.base_unit.map(|_| basis.order.value()).or(stated),
            basis: Some(basis),
            remarks,
            rivals: learnt.rivals,
            alternatives: learnt.alternatives,
            grouped: learnt.grouped,
            choices: learnt.choices,
        },
        Err(refusal) => Ground {
            basis: None,
            refusal,
            remarks,
            order: stated,
            rivals: Vec::new(),
            alternatives: Vec::new(),
            grouped: None,
            choices: Vec::new(),
        },
    }
}

fn build(
    study: &Study,
    rates: &mut Rates,
    courses: &mut Courses,
    remarks: &mut Vec<Remark>,
) -> Result<(Basis, Learnt), Refusal> {
    let level = level(study)?;
    let law = temperature_law(study)?;
    courses.fit(study, rates, remarks)?;
    let order = order(study, unit_of(study, rates), remarks)?;
    let learnt = match study.measured.form {
        Form::KnownLaw => {
            let law = known_law(study, law)?;
            Learnt {
                support: Support::of_known_law(law.reference),
                law,
                rivals: Vec::new(),
                alternatives: Vec::new(),
                shifted: Vec::new(),
                grouped: None,
                choices: Vec::new(),
            }
        }
        Form::Rates | Form::Progress => learn(study, rates, law, remarks)?,
        Form::Times => {
            let choice = times_to_rates(study, rates, order, remarks)?;
            let mut learnt = learn(study, rates, law, remarks)?;
            learnt.choices.extend(choice);
            learnt
        }
        Form::HeatRates => {
            heat_to_rates(study, rates, order)?;
            learn(study, rates, law, remarks)?
        }
        other => {
            return Err(Refusal::new(
                format!("Data of the form “{}” cannot be evaluated yet.", other.code()),
                "Give rate constants at temperatures, or a known law.",
            ));
        }
    };
    let unit = unit_of(study, rates);
    let inferred =
        rates.initial_concentration.map(|(value, kind)| InitialConcentration { value, kind });
    let not_excluded = learnt.rivals.iter().filter(|rival| !rival.is_excluded());
    let basis = Basis {
        law: learnt.law.clone(),
        rivals: not_excluded.map(|rival| rival.law.clone()).collect(),
        shifted: learnt.shifted.clone(),
        order,
        base_unit: unit.map(RateUnit::base),
        shown_unit: unit,
        initial_concentration: initial_concentration(study, unit, order)?.or(inferred),
        support: learnt.support.clone(),
        level,
        display: display(study),
    };
    Ok((basis, learnt))
}

/// Times to one extent, stated or named in their head: ln k = ln θ_X − ln t. Gives what was taken
/// from the head, in words.
fn times_to_rates(
    study: &Study,
    rates: &mut Rates,
    order: Order,
    remarks: &mut Vec<Remark>,
) -> Result<Option<String>, Refusal> {
    if rates.runs.is_empty() {
        return Ok(None);
    }
    let needs = "State the part that is gone at these times, for example 5 %.";
    let initial = initial_concentration(study, None, order)?;
    let percent = |fraction: f64| display(study).percent(fraction);
    let mut choice = None;
    let fraction = match (&study.measured.extent, rates.extent) {
        (Some(extent), _) => match (extent.fraction(), extent.concentration(), initial) {
            (Ok(fraction), ..) => fraction,
            (_, Ok((gone, kind)), Some(initial)) if kind == initial.kind => gone / initial.value,
            _ => {
                return Err(Refusal::new(
                    format!("The extent {extent} is no part of a stated initial concentration."),
                    needs,
                ));
            }
        },
        (None, Some(NamedExtent::Gone(fraction))) => {
            let part = percent(fraction);
            choice = Some(format!("The head of the times says that {part} is gone at them."));
            fraction
        }
        (None, Some(NamedExtent::ShelfLife(left))) => {
            let sentence = format!(
                "The head of the times names a shelf life, which usually means that {} is left: {} \
                 is taken to be gone at them.",
                percent(left),
                percent(1.0 - left)
            );
            let remedy = format!("State the part that is gone if it is {}.", percent(left));
            let code = "extent-by-name";
            remarks.push(Remark::new(code, Severity::Caution, sentence.as_str(), remedy));
            choice = Some(sentence);
            1.0 - left
        }
        (None, Some(NamedExtent::Unclear(fraction))) => {
            let (part, rest) = (percent(fraction), percent(1.0 - fraction));
            return Err(Refusal::new(
                format!("The head of the times may mean that {part} is gone, or that it is left."),
                format!("State the part that is gone at these times, {part} or {rest}."),
            ));
        }
        (None, None) => {
            let reason = "The times do not say to which extent they belong.";
            return Err(Refusal::new(reason, needs));
        }
    };
    let ln_theta = order.ln_theta(fraction, initial.map(|c| c.value)).map_err(|error| {
        let remedy = match error {
            ExtentError::NeedsInitialConcentration => {
                "State the initial concentration below the table of what was measured."
            }
            _ => needs,
        };
        Refusal::new(format!("The times give no rate: {error}."), remedy)
    })?;
    let kind = initial.map_or(ConcentrationKind::Molar, |c| c.kind);
    rates.shift(ln_theta, RateUnit::for_order(order.value(), kind.base(), TimeUnit::Second));
    Ok(choice)
}

/// Heat rates at the start: k = q/Q for first order, where the heat of reaction Q is stated;
/// without it k has no unit, and what needs one is refused.
fn heat_to_rates(study: &Study, rates: &mut Rates, order: Order) -> Result<(), Refusal> {
    let Some(stated) = study.heat.as_ref().and_then(|heat| heat.heat_of_reaction.as_ref()) else {
        return Ok(());
    };
    let heat = stated.joules_per_kilogram().map_err(|error| {
        Refusal::new(format!("The heat of reaction cannot be used: {error}."), "Correct it.")
    })?;
    if !(heat > 0.0) {
        return Err(Refusal::new(
            "The heat of reaction is not above zero.",
            "Write heat that is set free as a positive number.",
        ));
    }
    if order == Order::FIRST {
        rates.shift(-libm::log(heat), RateUnit::PER_SECOND);
    }
    Ok(())
}

/// The law that a study states instead of runs.
fn known_law(study: &Study, law: TemperatureLaw) -> Result<FittedLaw, Refusal> {
    let missing = |what: &str| {
        Refusal::new(
            format!("The known law lacks its {what}."),
            "State the activation energy, and a rate constant with its temperature.",
        )
    };
    let unusable = |said: String| {
        Refusal::new(format!("The known law cannot be used: {said}."), "Correct that value.")
    };
    let measured = &study.measured;
    let energy = measured.activation_energy.as_ref().ok_or_else(|| missing("activation energy"))?;
    let rate = measured.rate_constant.as_ref().ok_or_else(|| missing("rate constant"))?;
    let temperature = measured.temperature.as_ref().ok_or_else(|| missing("temperature"))?;

    let kelvin = temperature.kelvin().map_err(|e| unusable(e.to_string()))?;
    let joules = |value: f64| {
        Quantity::new(value, energy.unit.as_str())
            .joules_per_mole()
            .map(|j| j.0)
            .map_err(|e| unusable(e.to_string()))
    };
    let (k, _) = Quantity::new(rate.value, rate.unit.as_str())
        .rate_constant()
        .map_err(|e| unusable(e.to_string()))?;
    if !(k > 0.0) {
        return Err(unusable("the rate constant is not above zero".into()));
    }
    for sd in [rate.sd, energy.sd].into_iter().flatten() {
        if !(sd > 0.0 && sd.is_finite()) {
            return Err(unusable("a standard deviation is not above zero".into()));
        }
    }
    let relative = rate.sd.map(|sd| sd / rate.value);
    let ln_sd = relative.map(|r| libm::sqrt(libm::log1p(r * r)));
    let energy_sd = energy.sd.map(joules).transpose()?;
    Ok(FittedLaw::known(law, kelvin, (libm::log(k), ln_sd), (joules(energy.value)?, energy_sd)))
}

/// The unit of k as the data or the known law state it.
fn unit_of(study: &Study, rates: &Rates) -> Option<RateUnit> {
    match study.measured.form {
        Form::KnownLaw => {
            let unit = &study.measured.rate_constant.as_ref()?.unit;
            RateUnit::parse(unit).ok()
        }
        _ => rates.unit,
    }
}

fn version_remark(study: &Study) -> Vec<Remark> {
    if study.kelvinclock <= super::VERSION {
        return Vec::new();
    }
    vec![Remark::new(
        "later-version",
        Severity::Caution,
        format!(
            "The study was saved by a later version (format {}): what this version does not know \
             is kept but not evaluated.",
            study.kelvinclock
        ),
        "Open it with a newer Kelvinclock to see all of it.",
    )]
}
