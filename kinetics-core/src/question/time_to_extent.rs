//! How long until a part is gone: t = θ_X/k(T).

use super::{Blank, BlankKind, Blanks, Question, aims, ranges};
use crate::answer::{Answer, Basis, Refusal, Side, WhyNoInterval, Wording, sentence};
use crate::quantity::Seconds;
use crate::wording::{Figures, duration, duration_with_range};

pub(super) const QUESTION: Question = Question {
    code: "time-to-extent",
    sentence: "At [temperature], how long until [gone] is gone?",
    blanks: &[
        Blank {
            name: "temperature",
            kind: BlankKind::Temperature,
            example: "25 °C",
            optional: false,
        },
        Blank { name: "gone", kind: BlankKind::Part, example: "5 %", optional: false },
    ],
    answer,
    range: ranges::time,
    aim: aims::rate,
};

fn answer(blanks: &Blanks, basis: &Basis) -> Result<Answer, Refusal> {
    let temperature = blanks.temperature("temperature")?;
    let theta = libm::exp(basis.ln_theta(blanks.part("gone", basis)?)?);
    let rate = basis.spread(&basis.law.ln_rate_contrast(temperature));
    // The slower the reaction, the longer it takes.
    let times = |(low, high): (f64, f64)| (theta / high, theta / low);
    let time = Seconds(theta / rate.value);
    let range = rate.mean.map(times);
    let (headline, limits) = match range {
        Some(range) => {
            let (time, low, high) = duration_with_range(time, range, &basis.display);
            (time, Some((low, high)))
        }
        None => (duration(time, Figures::supported(time.0, None), &basis.display), None),
    };
    let (grounds, standing) = basis.standing(&[temperature]);
    let wording = Wording {
        headline: format!("About {headline}"),
        scatter: basis.scatter_words(limits),
        standing,
        ..Wording::default()
    };
    let prediction = rate.next_run.map(times);
    Ok(Answer {
        value: Some(time.0),
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
    .with_detail("theta", Some(theta))
    .with_detail("prediction_low", prediction.map(|p| p.0))
    .with_detail("prediction_high", prediction.map(|p| p.1)))
}
