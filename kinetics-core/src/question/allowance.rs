//! How long it may stand, and how long it needs: times of which one side counts.

use super::{Blank, BlankKind, Blanks, Question, aims, ranges};
use crate::answer::{
    Answer, Basis, Refusal, Side, WhyNoInterval, Wording, no_bound, sentence, whom,
};
use crate::quantity::{Kelvin, Seconds};
use crate::temperature_law::Target;
use crate::wording::{Figures, Rounding, duration, duration_bound};

pub(super) const LONGEST_STAND: Question = Question {
    code: "longest-stand",
    sentence: "How long may it stand at [temperature] and keep [keep]?",
    blanks: &[
        Blank {
            name: "temperature",
            kind: BlankKind::Temperature,
            example: "40 °C",
            optional: false,
        },
        Blank { name: "keep", kind: BlankKind::Part, example: "98 %", optional: false },
    ],
    answer: |blanks, basis| {
        let ln_theta = basis.ln_theta_keeping(blanks.part("keep", basis)?)?;
        let time = Allowance::of(blanks, ln_theta)?;
        time.answer(LONGEST_STAND.code, Side::Lower, basis)
    },
    range: ranges::time,
    aim: aims::bound,
};

pub(super) const COMPLETION_TIME: Question = Question {
    code: "completion-time",
    sentence: "How long at [temperature] to be sure that [gone] has reacted?",
    blanks: &[
        Blank {
            name: "temperature",
            kind: BlankKind::Temperature,
            example: "70 °C",
            optional: false,
        },
        Blank { name: "gone", kind: BlankKind::Part, example: "99 %", optional: false },
    ],
    answer: |blanks, basis| {
        let time = Allowance::of(blanks, basis.ln_theta(blanks.part("gone", basis)?)?)?;
        time.answer(COMPLETION_TIME.code, Side::Upper, basis)
    },
    range: ranges::time,
    aim: aims::bound,
};

/// A time to an extent, before one of its sides is chosen.
struct Allowance {
    temperature: Kelvin,
    ln_theta: f64,
    bound: Target,
}

impl Allowance {
    fn of(blanks: &Blanks, ln_theta: f64) -> Result<Self, Refusal> {
        let temperature = blanks.temperature("temperature")?;
        Ok(Self { temperature, ln_theta, bound: blanks.bound })
    }

    /// The time that is long or short enough with the basis' level, for one side.
    fn limit(&self, basis: &Basis, side: Side, whose: Target) -> Option<Seconds> {
        let ln_rate = basis.law.ln_rate_contrast(self.temperature);
        // The fast batch is the one that must not stand long, the slow one is done last.
        let probability = if side == Side::Lower { basis.level } else { 1.0 - basis.level };
        let ln_rate = basis.law.quantile(&ln_rate, whose, probability)?;
        Some(Seconds(libm::exp(self.ln_theta - ln_rate)))
    }

    fn answer(&self, code: &str, side: Side, basis: &Basis) -> Result<Answer, Refusal> {
        let best = Seconds(libm::exp(self.ln_theta - basis.law.ln_rate(self.temperature)));
        let display = &basis.display;
        let limit = self.limit(basis, side, self.bound).ok_or_else(|| {
            no_bound(&duration(best, Figures::supported(best.0, None), display), basis)
        })?;
        let (rounding, headline) = if side == Side::Lower {
            (Rounding::Down, "At most")
        } else {
            (Rounding::Up, "At least")
        };
        let (shown, best_words) = duration_bound(limit, best, rounding, display);
        let guess = if side == Side::Lower {
            format!("the best guess, {best_words}, is no limit")
        } else {
            format!("best guess {best_words}")
        };
        let (grounds, standing) = basis.standing(&[self.temperature]);
        let wording = Wording {
            headline: format!("{headline} {shown}"),
            scatter: format!(
                "{}, to be {} sure; {guess}",
                whom(self.bound),
                display.percent(basis.level)
            ),
            standing,
            ..Wording::default()
        };
        let other_sides = |whose| self.limit(basis, side, whose).map(|t| t.0);
        let (mean, next_run) = (other_sides(Target::Mean), other_sides(Target::NextRun));
        let (suffix, low, high) = match side {
            Side::Lower => ("low", Some(limit.0), None),
            _ => ("high", None, Some(limit.0)),
        };
        Ok(Answer {
            value: Some(best.0),
            low,
            high,
            unit: Some("s".into()),
            level: Some(basis.level),
            side: Some(side),
            grounds: Some(grounds),
            why: Some(WhyNoInterval::OneSided),
            sentence: sentence(&wording, side),
            wording,
            ..Answer::empty(code)
        }
        .with_detail(&format!("mean_{suffix}"), mean)
        .with_detail(&format!("prediction_{suffix}"), next_run))
    }
}
