//! How much is gone after a time: X from θ = k(T)·t.

use super::{Blank, BlankKind, Blanks, Question, aims, ranges};
use crate::answer::{Answer, Basis, Refusal, Side, WhyNoInterval, Wording, sentence};
use crate::wording::Figures;

pub(super) const QUESTION: Question = Question {
    code: "extent-after",
    sentence: "After [time] at [temperature], how much is gone?",
    blanks: &[
        Blank { name: "time", kind: BlankKind::Time, example: "24 h", optional: false },
        Blank {
            name: "temperature",
            kind: BlankKind::Temperature,
            example: "40 °C",
            optional: false,
        },
    ],
    answer,
    range: ranges::percent,
    aim: aims::rate,
};

fn answer(blanks: &Blanks, basis: &Basis) -> Result<Answer, Refusal> {
    let temperature = blanks.temperature("temperature")?;
    let ln_time = libm::log(blanks.time("time")?.0);
    let rate = basis.spread(&basis.law.ln_rate_contrast(temperature));
    let extent = |rate: f64| basis.extent(libm::log(rate) + ln_time);
    let gone = extent(rate.value)?;
    // More is gone the faster it is: limits map into limits.
    let mapped = |range: Option<(f64, f64)>| -> Result<Option<(f64, f64)>, Refusal> {
        range.map(|(low, high)| Ok((extent(low)?, extent(high)?))).transpose()
    };
    let (range, prediction) = (mapped(rate.mean)?, mapped(rate.next_run)?);
    let decimal = basis.display.decimal;
    let in_percent = range.map(|(low, high)| (100.0 * low, 100.0 * high));
    let figures = Figures::supported(100.0 * gone, in_percent);
    let largest = in_percent.map_or(100.0 * gone, |(_, high)| high);
    let percent = |value: f64| figures.percent(value, largest, decimal);
    let limits = in_percent.map(|(low, high)| (percent(low), percent(high)));
    let (grounds, standing) = basis.standing(&[temperature]);
    let wording = Wording {
        headline: format!("{}\u{a0}% is gone", percent(100.0 * gone)),
        scatter: basis.scatter_words(limits),
        standing,
        ..Wording::default()
    };
    Ok(Answer {
        value: Some(gone),
        low: range.map(|r| r.0),
        high: range.map(|r| r.1),
        unit: Some("1".into()),
        level: Some(basis.level),
        side: Some(Side::Two),
        grounds: Some(grounds),
        why: range.is_none().then_some(WhyNoInterval::NoScatterKnown),
        sentence: sentence(&wording, Side::Two),
        wording,
        ..Answer::empty(QUESTION.code)
    }
    .with_detail("left", Some(1.0 - gone))
    .with_detail("prediction_low", prediction.map(|p| p.0))
    .with_detail("prediction_high", prediction.map(|p| p.1)))
}
