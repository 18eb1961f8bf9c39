//! What answers will stand on: the law fitted under the study's assumptions, or the reason why
//! there is none.

use super::document::{LawChoice, OrderChoice, Study};
use crate::answer::{Basis, InitialConcentration, Refusal};
use crate::grounds::Support;
use crate::measurements::{Observation, Rates};
use crate::quantity::Kelvin;
use crate::rate_law::Order;
use crate::remark::{Remark, Severity};
use crate::rivals::{Rival, rivals};
use crate::table::Form;
use crate::temperature_law::{FittedLaw, LawError, ScatterChoice, TemperatureLaw, fit};
use crate::units::{ConcentrationKind, RateUnit, TimeUnit};
use crate::wording::Display;

/// The level of intervals where a study does not choose one.
pub(super) const USUAL_LEVEL: f64 = 0.95;

/// A basis or a refusal, and what was noticed on the way.
pub(super) struct Ground {
    pub basis: Option<Basis>,
    /// Why there is no basis; read only where there is none.
    pub refusal: Refusal,
    pub remarks: Vec<Remark>,
    pub order: Option<f64>,
    pub rivals: Vec<Rival>,
}

/// Lays the ground for answers.
pub(super) fn lay(study: &Study, rates: &Rates) -> Ground {
    let mut remarks = version_remark(study);
    let outcome = build(study, rates, &mut remarks);
    let order = stated_order(study).or(unit_of(study, rates).map(|u| u.order()));
    match outcome {
        Ok((basis, rivals)) => Ground {
            rivals,
            refusal: Refusal::new("", ""),
            order: basis.base_unit.map(|_| basis.order.value()).or(order),
            basis: Some(basis),
            remarks,
        },
        Err(refusal) => Ground { basis: None, refusal, remarks, order, rivals: Vec::new() },
    }
}

/// The study's level of intervals.
pub(super) fn level(study: &Study) -> Result<f64, Refusal> {
    let level = study.assumed.level.unwrap_or(USUAL_LEVEL);
    if (0.5..1.0).contains(&level) {
        return Ok(level);
    }
    Err(Refusal::new(
        format!("The level {level} of the intervals is not between 0.5 and 1."),
        "Write it as a fraction, for example 0.95.",
    ))
}

/// A law, where it holds, and the laws beside it.
struct Learnt {
    law: FittedLaw,
    support: Support,
    rivals: Vec<Rival>,
}

fn build(
    study: &Study,
    rates: &Rates,
    remarks: &mut Vec<Remark>,
) -> Result<(Basis, Vec<Rival>), Refusal> {
    let level = level(study)?;
    let law = temperature_law(study)?;
    let unit = unit_of(study, rates);
    let order = order(study, unit, remarks)?;
    let Learnt { law: fitted, support, rivals } = match study.measured.form {
        Form::KnownLaw => {
            let law = known_law(study, law)?;
            let support = Support::of_known_law(law.reference);
            Learnt { law, support, rivals: Vec::new() }
        }
        Form::Rates => fit_runs(study, rates, law, remarks)?,
        other => {
            return Err(Refusal::new(
                format!("Data of the form “{}” cannot be evaluated yet.", other.code()),
                "Give rate constants at temperatures, or a known law.",
            ));
        }
    };
    let not_excluded = rivals.iter().filter(|r| !r.is_excluded()).map(|r| r.law.clone()).collect();
    let basis = Basis {
        law: fitted,
        rivals: not_excluded,
        order,
        base_unit: unit.map(RateUnit::base),
        shown_unit: unit,
        initial_concentration: initial_concentration(study, unit, order)?,
        support,
        level,
        display: display(study),
    };
    Ok((basis, rivals))
}

fn fit_runs(
    study: &Study,
    rates: &Rates,
    law: TemperatureLaw,
    remarks: &mut Vec<Remark>,
) -> Result<Learnt, Refusal> {
    let observations: Vec<Observation> = rates.runs.iter().map(|r| r.observation).collect();
    let mut choice = study.assumed.scatter.unwrap_or_default();
    let uses_errors = choice != ScatterChoice::FromResiduals;
    if rates.errors_missing > 0 && uses_errors {
        remarks.push(Remark::new(
            "errors-incomplete",
            Severity::Caution,
            format!(
                "{} of {} runs state no error, so the stated errors are not used: the intervals \
                 come from the residuals.",
                rates.errors_missing,
                rates.runs.len()
            ),
            "State an error for every run, or leave out the runs without one.",
        ));
        choice = ScatterChoice::FromResiduals;
    }
    let no_errors = observations.iter().all(|o| o.ln_sd.is_none());
    let asks_for_errors =
        matches!(choice, ScatterChoice::AsStated | ScatterChoice::AsStatedPlusRunToRun);
    if no_errors && asks_for_errors && !observations.is_empty() {
        remarks.push(Remark::new(
            "errors-incomplete",
            Severity::Caution,
            "The scatter choice needs stated errors and there are none: the intervals come from \
             the residuals.",
            "Paste a column of errors, or choose the scatter of the residuals.",
        ));
        choice = ScatterChoice::FromResiduals;
    }
    let fitted = fit(law, &observations, choice).map_err(|error| law_refusal(&error))?;
    let temperatures: Vec<Kelvin> = observations.iter().map(|o| o.temperature).collect();
    let stated = !no_errors && choice != ScatterChoice::FromResiduals;
    let support = Support::of_runs(&temperatures, stated)
        .ok_or_else(|| law_refusal(&LawError::NothingMeasured))?;
    let rivals = rivals(&fitted, &observations, choice);
    if rivals.iter().any(|r| r.delta_aicc.is_none()) {
        remarks.push(Remark::new(
            "rivals-unranked",
            Severity::Note,
            "Too few runs tell the temperature laws apart: none is ranked and none excluded.",
            "Five runs or more allow a ranking.",
        ));
    }
    Ok(Learnt { law: fitted, support, rivals })
}

fn law_refusal(error: &LawError) -> Refusal {
    match error {
        LawError::NothingMeasured => Refusal::new(
            "Nothing is measured yet.",
            "Paste rate constants at two temperatures or more, or state a known law.",
        ),
        LawError::TooFewTemperatures { needed, .. } => Refusal::new(
            format!("There is no law yet: {error}."),
            format!("Measure at {needed} temperatures or more, or state a known law."),
        ),
        LawError::ErrorsMissing { .. } => Refusal::new(
            format!("There is no law: {error}."),
            "State an error for every run, or choose the scatter of the residuals.",
        ),
        LawError::NotComputable => Refusal::new(
            format!("There is no law: {error}."),
            "Check the units and the errors of the runs.",
        ),
    }
}

fn temperature_law(study: &Study) -> Result<TemperatureLaw, Refusal> {
    Ok(match study.assumed.temperature_law.unwrap_or_default() {
        LawChoice::Arrhenius => TemperatureLaw::Arrhenius,
        LawChoice::Eyring => TemperatureLaw::Eyring,
        LawChoice::LogLinear => TemperatureLaw::LogLinear,
        LawChoice::Curved => TemperatureLaw::Curved,
        LawChoice::ArrheniusWithPower => {
            let power = study.assumed.power.filter(|m| m.is_finite()).ok_or_else(|| {
                Refusal::new(
                    "The law with a power of T needs that power.",
                    "State the power, for example 0.5.",
                )
            })?;
            TemperatureLaw::ArrheniusWithPower(power)
        }
    })
}

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
        crate::quantity::Quantity::new(value, energy.unit.as_str())
            .joules_per_mole()
            .map(|j| j.0)
            .map_err(|e| unusable(e.to_string()))
    };
    let (k, _) = crate::quantity::Quantity::new(rate.value, rate.unit.as_str())
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

fn stated_order(study: &Study) -> Option<f64> {
    match study.assumed.order {
        Some(OrderChoice::Number(order)) => Some(order),
        _ => None,
    }
}

/// The order of reaction: stated, else that of k's unit, else one.
fn order(
    study: &Study,
    unit: Option<RateUnit>,
    remarks: &mut Vec<Remark>,
) -> Result<Order, Refusal> {
    let from_unit = unit.map(|u| u.order());
    let Some(stated) = stated_order(study).or(from_unit) else { return Ok(Order::FIRST) };
    let order = Order::new(stated).ok_or_else(|| {
        Refusal::new(
            format!("The order {stated} is not a number from zero up."),
            "State an order of 0 or more, or let the unit of k say it.",
        )
    })?;
    let Some(unit) = unit else { return Ok(order) };
    if (unit.order() - stated).abs() < 1e-9 {
        return Ok(order);
    }
    let says = Order::new(unit.order()).map_or_else(|| "no order known here".into(), Order::name);
    let sentence = format!(
        "The order is stated as {stated}, but the unit {} is that of {says}.",
        unit.symbol()
    );
    let example = match unit.concentration {
        Some(concentration) => RateUnit::for_order(stated, concentration, unit.time),
        None => {
            let molar = ConcentrationKind::Molar.base();
            RateUnit::for_order(stated, molar, TimeUnit::Second)
        }
    };
    let remedy = format!(
        "Correct the order, or the unit of k (order {stated} has a unit such as {}).",
        example.symbol()
    );
    remarks.push(Remark::new("order-and-unit", Severity::Stop, sentence.clone(), remedy.clone()));
    Err(Refusal::new(sentence, remedy))
}

/// The initial concentration in the base unit of k's concentration; 100 % where k counts in %.
fn initial_concentration(
    study: &Study,
    unit: Option<RateUnit>,
    order: Order,
) -> Result<Option<InitialConcentration>, Refusal> {
    let in_rate = unit.and_then(|u| u.concentration).map(|c| c.kind());
    let Some(stated) = &study.measured.initial_concentration else {
        let whole = InitialConcentration { value: 100.0, kind: ConcentrationKind::Percent };
        return Ok((in_rate == Some(ConcentrationKind::Percent)).then_some(whole));
    };
    let correct = "Correct the initial concentration.";
    let (value, kind) = stated.concentration().map_err(|error| {
        Refusal::new(format!("The initial concentration cannot be used: {error}."), correct)
    })?;
    if !(value > 0.0) {
        return Err(Refusal::new("The initial concentration is not above zero.", correct));
    }
    if order.needs_initial_concentration() && in_rate.is_some_and(|expected| expected != kind) {
        let expected = in_rate.map(|k| k.base().symbol()).unwrap_or_default();
        return Err(Refusal::new(
            format!(
                "The initial concentration, {stated}, does not convert into {expected}, as k has it."
            ),
            "State both in the same kind of concentration.",
        ));
    }
    Ok(Some(InitialConcentration { value, kind }))
}

fn display(study: &Study) -> Display {
    let usual = Display::default();
    let chosen = &study.display;
    Display {
        temperature: chosen.temperature.unwrap_or(usual.temperature),
        energy: chosen.energy.unwrap_or(usual.energy),
        time: chosen.time.as_deref().and_then(|unit| TimeUnit::parse(unit).ok()),
        decimal: chosen.decimal.map_or(usual.decimal, |d| d.mark()),
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
