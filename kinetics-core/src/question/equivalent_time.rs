//! What time at one temperature does the same as a time at another: t₁ = t₂·k(T₂)/k(T₁).

use super::{Blank, BlankKind, Blanks, Question, aims, ranges};
use crate::answer::{Answer, Basis, Refusal, Side, WhyNoInterval, Wording, sentence};
use crate::quantity::Seconds;
use crate::wording::{Figures, duration, duration_with_range};

pub(super) const QUESTION: Question = Question {
    code: "equivalent-time",
    sentence: "What time at [temperature] equals [time] at [other_temperature]?",
    blanks: &[
        Blank {
            name: "temperature",
            kind: BlankKind::Temperature,
            example: "55 °C",
            optional: false,
        },
        Blank { name: "time", kind: BlankKind::Time, example: "2 yr", optional: false },
        Blank {
            name: "other_temperature",
            kind: BlankKind::Temperature,
            example: "25 °C",
            optional: false,
        },
    ],
    answer,
    range: ranges::time,
    aim: |blanks, basis| aims::ratio(blanks, basis, "other_temperature", "temperature"),
};

fn answer(blanks: &Blanks, basis: &Basis) -> Result<Answer, Refusal> {
    let temperature = blanks.temperature("temperature")?;
    let other = blanks.temperature("other_temperature")?;
    let time = blanks.time("time")?.0;
    let ln_rate = |t| basis.law.ln_rate_contrast(t);
    let ratio = basis.spread(&ln_rate(other).minus(ln_rate(temperature)));
    let scaled = |range: Option<(f64, f64)>| range.map(|(low, high)| (time * low, time * high));
    let (best, range, prediction) =
        (Seconds(time * ratio.value), scaled(ratio.mean), scaled(ratio.next_run));
    // Twice as fast for every 10 K: common practice, no source.
    let doubling = time * libm::exp2((other.0 - temperature.0) / 10.0);
    let (headline, limits) = match range {
        Some(range) => {
            let (best, low, high) = duration_with_range(best, range, &basis.display);
            (best, Some((low, high)))
        }
        None => (duration(best, Figures::supported(best.0, None), &basis.display), None),
    };
    let (grounds, standing) = basis.standing(&[temperature, other]);
    let by_rule = duration(Seconds(doubling), Figures::exactly(2), &basis.display);
    let wording = Wording {
        headline,
        scatter: basis.scatter_words(limits),
        standing: format!("{standing}. Q10 = 2 would say {by_rule}"),
        ..Wording::default()
    };
    Ok(Answer {
        value: Some(best.0),
        low: range.map(|r| r.0),
        high: range.map(|r| r.1),
        unit: Some("s".into()),
        level: Some(basis.level),
        side: Some(Side::Two),
        grounds: Some(grounds),
        why: range.is_none().then_some(WhyNoInterval::NoScatterKnown),
        sentence: sentence(&wording, Side::Two),
        wording,
        ..Answer::empty(QUESTION.code)
    }
    .with_detail("doubling_rule", Some(doubling))
    .with_detail("prediction_low", prediction.map(|p| p.0))
    .with_detail("prediction_high", prediction.map(|p| p.1)))
}
