//! How fast it is at a temperature: k, and what follows from it.

use super::{Blank, BlankKind, Blanks, Question, aims, ranges};
use crate::answer::{Answer, Basis, Refusal, Side, WhyNoInterval, Wording, sentence};
use crate::constants::MOLAR_GAS_CONSTANT;
use crate::quantity::{Kelvin, Seconds};
use crate::wording::{Figures, Origin, duration, duration_with_range};

pub(super) const QUESTION: Question = Question {
    code: "rate-at",
    sentence: "How fast is it at [temperature]?",
    blanks: &[Blank {
        name: "temperature",
        kind: BlankKind::Temperature,
        example: "30 °C",
        optional: false,
    }],
    answer,
    range: ranges::rate,
    aim: aims::rate,
};

fn answer(blanks: &Blanks, basis: &Basis) -> Result<Answer, Refusal> {
    let temperature = blanks.temperature("temperature")?;
    let rate = basis.spread(&basis.law.ln_rate_contrast(temperature));
    let energy = basis.law.activation_energy(temperature).0;
    let half_life = basis.ln_theta(0.5).ok().map(|ln| libm::exp(ln) / rate.value);
    let first_order = basis.order.value() == 1.0 && basis.base_unit.is_some();
    let d_value = first_order.then_some(std::f64::consts::LN_10 / rate.value);
    let z_value =
        std::f64::consts::LN_10 * MOLAR_GAS_CONSTANT * temperature.0 * temperature.0 / energy;
    let ten_warmer = basis.law.ln_rate(Kelvin(temperature.0 + 10.0));
    let q10 = libm::exp(ten_warmer - basis.law.ln_rate(temperature));

    // Sentences speak in the unit of the data, findings in the base unit.
    let scale = basis.shown_unit.map_or(1.0, |unit| 1.0 / unit.to_base());
    let unit = match basis.shown_unit {
        Some(unit) => format!("\u{a0}{}", unit.symbol()),
        None => " in the unit of the column, which is not stated".into(),
    };
    let decimal = basis.display.decimal;
    let shown_range = rate.mean.map(|(low, high)| (low * scale, high * scale));
    // At its own temperature a stated rate constant is no estimate.
    let stated = basis.support.is_known_law() && temperature == basis.law.reference;
    let origin = if stated { Origin::Stated } else { Origin::Fitted };
    let figures = Figures::of(origin, rate.value * scale, shown_range);
    let limits = shown_range.map(|(low, high)| figures.limits(low, high, decimal));
    let (grounds, mut standing) = basis.standing(&[temperature]);
    if let Some(seconds) = half_life {
        let theta = seconds * rate.value;
        let half_life = match rate.mean {
            Some((low, high)) => {
                let range = (theta / high, theta / low);
                duration_with_range(Seconds(seconds), range, &basis.display).0
            }
            None => duration(Seconds(seconds), Figures::exactly(2), &basis.display),
        };
        standing = format!("half gone after {half_life}; {standing}");
    }
    let wording = Wording {
        headline: format!("k = {}{unit}", figures.number(rate.value * scale, decimal)),
        scatter: basis.scatter_words(limits),
        standing,
        ..Wording::default()
    };
    Ok(Answer {
        value: Some(rate.value),
        low: rate.mean.map(|r| r.0),
        high: rate.mean.map(|r| r.1),
        unit: basis.base_unit.map(|unit| unit.code()),
        level: Some(basis.level),
        side: Some(Side::Two),
        grounds: Some(grounds),
        why: rate.mean.is_none().then_some(WhyNoInterval::NoScatterKnown),
        sentence: sentence(&wording, Side::Two),
        wording,
        ..Answer::empty(QUESTION.code)
    }
    .with_detail("half_life", half_life)
    .with_detail("d_value", d_value)
    .with_detail("z_value", (energy > 0.0).then_some(z_value))
    .with_detail("q10", Some(q10))
    .with_detail("prediction_low", rate.next_run.map(|p| p.0))
    .with_detail("prediction_high", rate.next_run.map(|p| p.1)))
}
