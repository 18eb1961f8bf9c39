//! Which temperature reaches an extent within a time, and how warm it may be kept: the law
//! inverted at ln k = ln θ_X − ln t.

use super::{Blank, BlankKind, Blanks, Question, ranges};
use crate::answer::{
    Answer, Basis, Refusal, Side, WhyNoInterval, Wording, no_bound, sentence, whom,
};
use crate::constants::MOLAR_GAS_CONSTANT;
use crate::next_measurement::Aim;
use crate::quantity::Kelvin;
use crate::temperature_law::{Target, TemperatureSet};
use crate::wording::{Display, Rounding};

pub(super) const TEMPERATURE_FOR: Question = Question {
    code: "temperature-for",
    sentence: "What temperature reaches [gone] within [time]?",
    blanks: &[
        Blank { name: "gone", kind: BlankKind::Part, example: "99 %", optional: false },
        Blank { name: "time", kind: BlankKind::Time, example: "8 h", optional: false },
    ],
    answer: temperature_for,
    range: ranges::temperature,
    aim: |blanks, basis| {
        let ln_theta = basis.ln_theta(blanks.part("gone", basis)?)?;
        let (at, scale) = aimed_at(blanks, basis, ln_theta)?;
        Ok(Aim { kelvins: Some(scale), ..Aim::two_sided(at, basis.level) })
    },
};

pub(super) const WARMEST_STORAGE: Question = Question {
    code: "warmest-storage",
    sentence: "How warm may it be kept and still hold [keep] for [time]?",
    blanks: &[
        Blank { name: "keep", kind: BlankKind::Part, example: "98 %", optional: false },
        Blank { name: "time", kind: BlankKind::Time, example: "2 yr", optional: false },
    ],
    answer: warmest_storage,
    range: ranges::temperature,
    aim: |blanks, basis| {
        let ln_theta = basis.ln_theta_keeping(blanks.part("keep", basis)?)?;
        let (at, scale) = aimed_at(blanks, basis, ln_theta)?;
        Ok(Aim { kelvins: Some(scale), ..Aim::one_sided(at, blanks.bound, basis.level) })
    },
};

/// ln k at which the extent takes just the time, and the temperature of the best estimate.
fn needed(blanks: &Blanks, basis: &Basis, ln_theta: f64) -> Result<(f64, Kelvin), Refusal> {
    let energy = basis.law.law.activation_energy(basis.law.reference, basis.law.reference);
    let low = basis.law.interval(&energy, Target::Mean, basis.level).map(|interval| interval.0);
    if basis.law.estimate(&energy) <= 0.0 {
        return Err(Refusal::new(
            "The rate does not rise with temperature in these data, so no temperature can be \
             worked out from it.",
            "Check units and columns, or measure over a wider range of temperatures.",
        ));
    }
    if low.is_some_and(|low| low <= 0.0) {
        return Err(Refusal::new(
            "The interval of the activation energy includes zero: any temperature agrees with the \
             data.",
            "Measure over a wider range of temperatures, or more precisely.",
        ));
    }
    reached(blanks, basis, ln_theta)
}

fn reached(blanks: &Blanks, basis: &Basis, ln_theta: f64) -> Result<(f64, Kelvin), Refusal> {
    let ln_rate = ln_theta - libm::log(blanks.time("time")?.0);
    let best = basis.law.temperature_at(ln_rate).ok_or_else(|| {
        Refusal::new(
            "No temperature between 10 and 10\u{202f}000 K gives that rate under this law.",
            "Ask for another time or another part.",
        )
    })?;
    Ok((ln_rate, best))
}

/// The temperature of the best estimate, and how many K there are to a unit of ln k. A
/// measurement may narrow what is too wide for an answer yet.
fn aimed_at(blanks: &Blanks, basis: &Basis, ln_theta: f64) -> Result<(Kelvin, f64), Refusal> {
    let (_, best) = reached(blanks, basis, ln_theta)?;
    let slope = basis.law.activation_energy(best).0 / (MOLAR_GAS_CONSTANT * best.0 * best.0);
    Ok((best, 1.0 / libm::fabs(slope)))
}

fn temperature_for(blanks: &Blanks, basis: &Basis) -> Result<Answer, Refusal> {
    let ln_theta = basis.ln_theta(blanks.part("gone", basis)?)?;
    let (ln_rate, best) = needed(blanks, basis, ln_theta)?;
    let set = |whose| basis.law.temperature_set(ln_rate, whose, basis.level);
    let ends = |set: TemperatureSet| match set {
        TemperatureSet::Between(low, high) => (low, high),
        TemperatureSet::TwoRays | TemperatureSet::Unknown => (None, None),
    };
    let mean = set(Target::Mean);
    let (low, high) = ends(mean);
    let to_be_sure = basis.law.temperature_bound(ln_rate, blanks.bound, 1.0 - basis.level);
    let why = match (mean, low, high) {
        (TemperatureSet::Unknown, ..) => Some(WhyNoInterval::NoScatterKnown),
        (TemperatureSet::TwoRays, ..) => Some(WhyNoInterval::TwoRays),
        (_, Some(_), Some(_)) => None,
        _ => Some(WhyNoInterval::Unbounded),
    };
    let display = &basis.display;
    let decimals = decimals(low.zip(high));
    let shown = |t: Kelvin, rounding| display.temperature_rounded(t, decimals, rounding);
    let limits = low
        .zip(high)
        .map(|(low, high)| (shown(low, Rounding::Nearest), shown(high, Rounding::Nearest)));
    let mut scatter = match why {
        Some(WhyNoInterval::Unbounded | WhyNoInterval::TwoRays) => {
            "the data set no limit on one side at least".into()
        }
        _ => basis.scatter_words(limits),
    };
    if let Some(sure) = to_be_sure {
        scatter = format!(
            "{scatter}; at least {} {} to be {} sure",
            shown(sure, Rounding::Up),
            whom(blanks.bound),
            display.percent(basis.level)
        );
    }
    let (grounds, standing) = basis.standing(&[best]);
    let headline = format!("About {}", shown(best, Rounding::Nearest));
    let wording = Wording { headline, scatter, standing, ..Wording::default() };
    let prediction = ends(set(Target::NextRun));
    Ok(Answer {
        value: Some(best.0),
        low: low.map(|t| t.0),
        high: high.map(|t| t.0),
        unit: Some("K".into()),
        level: Some(basis.level),
        side: Some(Side::Two),
        grounds: Some(grounds),
        why,
        sentence: sentence(&wording, Side::Two),
        wording,
        ..Answer::empty(TEMPERATURE_FOR.code)
    }
    .with_detail("to_be_sure", to_be_sure.map(|t| t.0))
    .with_detail("prediction_low", prediction.0.map(|t| t.0))
    .with_detail("prediction_high", prediction.1.map(|t| t.0)))
}

fn warmest_storage(blanks: &Blanks, basis: &Basis) -> Result<Answer, Refusal> {
    let ln_theta = basis.ln_theta_keeping(blanks.part("keep", basis)?)?;
    let (ln_rate, best) = needed(blanks, basis, ln_theta)?;
    if !basis.law.has_intervals() {
        let best = basis.display.temperature_rounded(best, 0, Rounding::Nearest);
        return Err(no_bound(&best, basis));
    }
    // Cold enough that even a fast batch holds.
    let limit = |whose| basis.law.temperature_bound(ln_rate, whose, basis.level);
    let bound = limit(blanks.bound).ok_or_else(|| {
        Refusal::new(
            "However cold, the scatter allows a rate that is too fast.",
            "Measure nearer to the temperature of storage.",
        )
    })?;
    let display = &basis.display;
    let decimals = decimals(Some((bound, Kelvin(2.0 * best.0 - bound.0))));
    let (grounds, standing) = basis.standing(&[best]);
    let wording = Wording {
        headline: format!(
            "At most {}",
            display.temperature_rounded(bound, decimals, Rounding::Down)
        ),
        scatter: format!(
            "{}, to be {} sure; the best guess, {}, is no limit",
            whom(blanks.bound),
            display.percent(basis.level),
            display.temperature_rounded(best, decimals, Rounding::Nearest)
        ),
        standing,
        ..Wording::default()
    };
    Ok(Answer {
        value: Some(best.0),
        low: Some(bound.0),
        unit: Some("K".into()),
        level: Some(basis.level),
        side: Some(Side::Lower),
        grounds: Some(grounds),
        why: Some(WhyNoInterval::OneSided),
        sentence: sentence(&wording, Side::Lower),
        wording,
        ..Answer::empty(WARMEST_STORAGE.code)
    }
    .with_detail("mean_low", limit(Target::Mean).map(|t| t.0))
    .with_detail("prediction_low", limit(Target::NextRun).map(|t| t.0)))
}

/// Decimals of a temperature: down to the leading digit of the half-width.
fn decimals(range: Option<(Kelvin, Kelvin)>) -> usize {
    let half_width = range.map_or(1.0, |(low, high)| 0.5 * (high.0 - low.0).abs());
    Display::temperature_decimals(half_width)
}
