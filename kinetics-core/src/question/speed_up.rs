//! How much faster it is at one temperature than at another: k(T₂)/k(T₁).

use super::{Blank, BlankKind, Blanks, Question, aims, ranges};
use crate::answer::{Answer, Basis, Refusal, Side, WhyNoInterval, Wording, sentence};
use crate::wording::{Figures, significant};

pub(super) const QUESTION: Question = Question {
    code: "speed-up",
    sentence: "How much faster is [to] than [from]?",
    blanks: &[
        Blank { name: "to", kind: BlankKind::Temperature, example: "60 °C", optional: false },
        Blank { name: "from", kind: BlankKind::Temperature, example: "25 °C", optional: false },
    ],
    answer,
    range: ranges::ratio,
    aim: |blanks, basis| aims::ratio(blanks, basis, "to", "from"),
};

fn answer(blanks: &Blanks, basis: &Basis) -> Result<Answer, Refusal> {
    let (to, from) = (blanks.temperature("to")?, blanks.temperature("from")?);
    let contrast = basis.law.ln_rate_contrast(to).minus(basis.law.ln_rate_contrast(from));
    let ratio = basis.spread(&contrast);
    // Twice as fast for every 10 K: common practice, no source.
    let doubling = libm::exp2((to.0 - from.0) / 10.0);
    let decimal = basis.display.decimal;
    let figures = Figures::supported(ratio.value, ratio.mean);
    let limits = ratio.mean.map(|(low, high)| figures.limits(low, high, decimal));
    let (grounds, standing) = basis.standing(&[to, from]);
    let wording = Wording {
        headline: format!("{} times", figures.number(ratio.value, decimal)),
        scatter: basis.scatter_words(limits),
        standing: format!(
            "{standing}. The doubling rule would say {}",
            significant(doubling, 2, decimal)
        ),
        ..Wording::default()
    };
    Ok(Answer {
        value: Some(ratio.value),
        low: ratio.mean.map(|r| r.0),
        high: ratio.mean.map(|r| r.1),
        unit: Some("1".into()),
        level: Some(basis.level),
        side: Some(Side::Two),
        grounds: Some(grounds),
        why: ratio.mean.is_none().then_some(WhyNoInterval::NoScatterKnown),
        sentence: sentence(&wording, Side::Two),
        wording,
        ..Answer::empty(QUESTION.code)
    }
    .with_detail("doubling_rule", Some(doubling))
    .with_detail("prediction_low", ratio.next_run.map(|p| p.0))
    .with_detail("prediction_high", ratio.next_run.map(|p| p.1)))
}
