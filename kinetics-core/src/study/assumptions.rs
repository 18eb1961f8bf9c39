//! What a study assumes, read for use: each a value, or a refusal in words.

use super::document::{LawChoice, OrderChoice, Study};
use crate::answer::{InitialConcentration, Refusal};
use crate::quantity::Quantity;
use crate::rate_law::Order;
use crate::remark::{Remark, Severity};
use crate::temperature_law::TemperatureLaw;
use crate::units::{ConcentrationKind, RateUnit, TimeUnit};
use crate::wording::Display;

/// The level of intervals where a study does not choose one.
pub(super) const USUAL_LEVEL: f64 = 0.95;

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

pub(super) fn temperature_law(study: &Study) -> Result<TemperatureLaw, Refusal> {
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

pub(super) fn stated_order(study: &Study) -> Option<f64> {
    match study.assumed.order {
        Some(OrderChoice::Number(order)) => Some(order),
        _ => None,
    }
}

/// The order of reaction: stated, else that of k's unit, else one.
pub(super) fn order(
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
pub(super) fn initial_concentration(
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

/// Random standard deviation and common offset of the temperatures, in K; zero where not stated.
pub(super) fn thermometer(study: &Study) -> Result<(f64, f64), Refusal> {
    let kelvins = |quantity: &Option<Quantity>, what: &str| {
        let Some(quantity) = quantity else { return Ok(0.0) };
        let refusal = |said: String| {
            Refusal::new(
                format!("The {what} of the thermometer cannot be used: {said}."),
                "Write a number of K from zero up, for example 0.3 K.",
            )
        };
        let kelvins = quantity.kelvin_difference().map_err(|error| refusal(error.to_string()))?;
        if (0.0..1000.0).contains(&kelvins) {
            Ok(kelvins)
        } else {
            Err(refusal(format!("{quantity} is not between 0 and 1000 K")))
        }
    };
    match &study.measured.thermometer {
        None => Ok((0.0, 0.0)),
        Some(thermometer) => Ok((
            kelvins(&thermometer.sd, "standard deviation")?,
            kelvins(&thermometer.offset, "offset")?,
        )),
    }
}

pub(super) fn display(study: &Study) -> Display {
    let usual = Display::default();
    let chosen = &study.display;
    Display {
        temperature: chosen.temperature.unwrap_or(usual.temperature),
        energy: chosen.energy.unwrap_or(usual.energy),
        time: chosen.time.as_deref().and_then(|unit| TimeUnit::parse(unit).ok()),
        decimal: chosen.decimal.map_or(usual.decimal, |d| d.mark()),
    }
}
