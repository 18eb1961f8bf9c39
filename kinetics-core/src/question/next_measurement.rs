//! Where to measure next: the temperature at which one run more narrows another question's answer
//! most within the time allowed, and how long that run takes.

use serde_json::{Value, json};

use super::{Blank, BlankKind, Blanks, Question, ranges};
use crate::answer::{Answer, Basis, Refusal, Wording, capitalised};
use crate::next_measurement::{Aim, half_width_after, run_sd};
use crate::quantity::{Kelvin, Quantity, Seconds};
use crate::temperature_law::Scatter;
use crate::wording::{Figures, duration, fixed, significant};

pub(super) const QUESTION: Question = Question {
    code: "next-measurement",
    sentence: "Where should I measure next for question [for], from [lowest] to [highest], with \
               an error of [relative_error], within [within]?",
    blanks: &[
        Blank { name: "for", kind: BlankKind::Question, example: "1", optional: false },
        Blank { name: "lowest", kind: BlankKind::Temperature, example: "25 °C", optional: false },
        Blank { name: "highest", kind: BlankKind::Temperature, example: "80 °C", optional: false },
        Blank { name: "relative_error", kind: BlankKind::Part, example: "5 %", optional: true },
        Blank { name: "within", kind: BlankKind::Time, example: "60 d", optional: true },
    ],
    answer,
    range: ranges::temperature,
    aim: |_, _| {
        Err(Refusal::new("It asks where to measure.", "Write the number of another question."))
    },
};

/// How far a run is followed: enough to see, and not yet long.
const EXTENT: f64 = 0.1;
/// The relative error of a run where neither the blank nor earlier runs tell it.
const USUAL_ERROR: f64 = 0.05;
/// Temperatures looked at lie whole multiples of one of these apart, from the lowest on.
const STEPS_KELVIN: [f64; 5] = [1.0, 2.0, 5.0, 10.0, 20.0];
/// About so many of them at most.
const MOST_PLACES: f64 = 60.0;

/// One run that could come next.
struct Prospect {
    temperature: Kelvin,
    /// On the scale of ln k.
    half_width: f64,
    /// To [`EXTENT`]; none where the unit of k or the initial concentration is not known.
    duration: Option<Seconds>,
}

fn answer(blanks: &Blanks, basis: &Basis) -> Result<Answer, Refusal> {
    let subject = blanks.subject.as_ref().ok_or_else(|| {
        Refusal::new("No question is named.", "Write the number of the question it is for.")
    })?;
    let aim = subject.aim(basis)?;
    let places = places(blanks.temperature("lowest")?, blanks.temperature("highest")?)?;
    let stated = blanks.filled("relative_error").map(stated_error).transpose()?;
    let sd = needed_error(basis, stated)?;
    let within = blanks.filled("within").map(|_| blanks.time("within")).transpose()?;
    // ln θ of the run; its refusal is told where a time was asked for.
    let ln_theta = basis.ln_theta(EXTENT);
    if let (Some(_), Err(refusal)) = (within, &ln_theta) {
        return Err(refusal.clone());
    }
    let prospects: Vec<Prospect> = places
        .into_iter()
        .filter_map(|temperature| {
            let half_width = half_width_after(&basis.law, &aim, temperature, sd)?;
            let duration = ln_theta
                .as_ref()
                .ok()
                .map(|ln_theta| Seconds(libm::exp(ln_theta - basis.law.ln_rate(temperature))));
            Some(Prospect { temperature, half_width, duration })
        })
        .collect();
    let best = best(&prospects, within, basis)?;
    if aim.half_width(&basis.law).is_some_and(|now| best.half_width >= now) {
        let error = basis.display.percent(libm::sqrt(libm::expm1(sd * sd)));
        return Err(Refusal::new(
            format!(
                "No run more at these temperatures would narrow that answer: reckoned with an \
                 error of {error}, it would scatter more than the runs there are."
            ),
            "State the error that a run has, or allow temperatures nearer to what is asked.",
        ));
    }
    Ok(recommendation(best, &prospects, &aim, sd, basis))
}

/// The standard deviation of ln k of a run with a relative error in the blank.
fn stated_error(quantity: &Quantity) -> Result<f64, Refusal> {
    let fraction = quantity.fraction().map_err(|error| {
        let reason = format!("The error cannot be used: {}.", error);
        Refusal::new(reason, "Write it as a part of the rate constant, for example 5 %.")
    })?;
    if fraction > 0.0 && fraction <= 10.0 {
        Ok(libm::sqrt(libm::log1p(fraction * fraction)))
    } else {
        Err(Refusal::new(
            "The error of the run is not above zero, or more than ten times the value.",
            "Write it as a part of the rate constant, for example 5 %.",
        ))
    }
}

/// The standard deviation that the run is reckoned with.
fn needed_error(basis: &Basis, stated: Option<f64>) -> Result<f64, Refusal> {
    let law = &basis.law;
    if law.runs.is_empty() && !law.has_intervals() {
        return Err(Refusal::new(
            "The known law states no standard deviations, so nothing tells what a run would add.",
            "State the standard deviations of its activation energy and of its rate constant.",
        ));
    }
    let sd = run_sd(law, stated).unwrap_or(USUAL_ERROR);
    if sd > 0.0 && sd.is_finite() {
        return Ok(sd);
    }
    Err(Refusal::new(
        "The runs lie on the law exactly, so nothing tells what a run more would add.",
        "State the error that a run has, for example 5 %.",
    ))
}

/// The temperatures from the lowest to the highest, evenly spaced at whole kelvins.
fn places(lowest: Kelvin, highest: Kelvin) -> Result<Vec<Kelvin>, Refusal> {
    let span = highest.0 - lowest.0;
    if span < 0.0 {
        return Err(Refusal::new(
            "The lowest temperature allowed lies above the highest.",
            "Exchange the two.",
        ));
    }
    let fits = |step: &&f64| span / **step <= MOST_PLACES;
    let step = STEPS_KELVIN.iter().find(fits).copied().unwrap_or(span / MOST_PLACES);
    let whole = libm::floor(span / step + 1e-9) as usize;
    let mut places: Vec<Kelvin> = (0..=whole).map(|i| Kelvin(lowest.0 + step * i as f64)).collect();
    if places.last().is_some_and(|last| highest.0 - last.0 > 1e-6) {
        places.push(highest);
    }
    Ok(places)
}

/// The most narrowing prospect that is quick enough; of equal ones the hottest, which is the
/// quickest.
fn best<'p>(
    prospects: &'p [Prospect],
    within: Option<Seconds>,
    basis: &Basis,
) -> Result<&'p Prospect, Refusal> {
    let in_time = |prospect: &&Prospect| match (within, prospect.duration) {
        (Some(within), Some(duration)) => duration <= within,
        _ => true,
    };
    let narrowest = prospects
        .iter()
        .rev()
        .filter(in_time)
        .min_by(|one, other| one.half_width.total_cmp(&other.half_width));
    narrowest.ok_or_else(|| {
        let quickest = prospects.iter().filter_map(|prospect| {
            prospect.duration.map(|duration| (duration, prospect.temperature))
        });
        match quickest.min_by(|one, other| one.0.0.total_cmp(&other.0.0)) {
            Some((duration, temperature)) => Refusal::new(
                format!(
                    "No run at these temperatures is done in the time allowed: the quickest, at \
                     {}, takes {} until {} is gone.",
                    basis.display.temperature(temperature, 1),
                    in_words(duration, basis),
                    basis.display.percent(EXTENT)
                ),
                "Allow more time or a higher temperature.",
            ),
            None => Refusal::new(
                "The law with a further run cannot be computed at these temperatures.",
                "Write temperatures nearer to the measured ones.",
            ),
        }
    })
}

fn in_words(time: Seconds, basis: &Basis) -> String {
    duration(time, Figures::exactly(2), &basis.display)
}

fn recommendation(
    best: &Prospect,
    prospects: &[Prospect],
    aim: &Aim,
    sd: f64,
    basis: &Basis,
) -> Answer {
    let display = &basis.display;
    let now = aim.half_width(&basis.law);
    let uncertainty = |half_width: f64| match aim.kelvins {
        Some(kelvins) => {
            format!("±{}\u{a0}K", significant(kelvins * half_width, 2, display.decimal))
        }
        None => {
            format!("a factor of {}", factor_in_words(half_width, best.half_width, display.decimal))
        }
    };
    let without = now.map_or("no interval".into(), uncertainty);
    let with = match (now, aim.kelvins) {
        (Some(_), None) => factor_in_words(best.half_width, best.half_width, display.decimal),
        _ => uncertainty(best.half_width),
    };
    let assumption = match basis.law.scatter {
        Scatter::NoneKnown => "if every run errs by",
        _ => "for a run that errs by",
    };
    let error = libm::sqrt(libm::expm1(sd * sd));
    let mut scatter = format!(
        "{without} becomes {with}, {assumption} {}\u{a0}%",
        significant(100.0 * error, 2, display.decimal)
    );
    scatter.push_str(&match best.duration {
        Some(time) => format!(
            "; the run takes {} (to {} gone)",
            in_words(time, basis),
            display.percent(EXTENT)
        ),
        None => "; how long the run takes, the data do not tell".into(),
    });
    let (grounds, standing) = basis.standing(&[best.temperature]);
    let wording = Wording {
        headline: format!("Measure at {}", display.temperature(best.temperature, 1)),
        scatter,
        standing: capitalised(&standing),
        ..Wording::default()
    };
    let shown = |half_width: f64| match aim.kelvins {
        Some(kelvins) => kelvins * half_width,
        None => libm::exp(half_width),
    };
    let curve: Vec<Value> = prospects
        .iter()
        .map(|prospect| {
            json!({
                "temperature": prospect.temperature.0,
                "after": shown(prospect.half_width),
                "duration": prospect.duration.map(|time| time.0),
            })
        })
        .collect();
    let mut answer = Answer {
        value: Some(best.temperature.0),
        unit: Some("K".into()),
        level: Some(basis.level),
        grounds: Some(grounds),
        wording,
        ..Answer::empty(QUESTION.code)
    }
    .with_detail("now", now.map(shown))
    .with_detail("after", Some(shown(best.half_width)))
    .with_detail("duration", best.duration.map(|time| time.0))
    .with_detail("run_error", Some(error))
    .with_detail("run_extent", Some(EXTENT));
    let unit = if aim.kelvins.is_some() { "K" } else { "factor" };
    answer.detail.insert("after_unit".into(), unit.into());
    answer.detail.insert("curve".into(), curve.into());
    answer
}

/// exp of a half-width: "1.4"; where the smallest factor shown is close to one, more digits.
fn factor_in_words(half_width: f64, smallest: f64, decimal: char) -> String {
    let factor = libm::exp(half_width);
    match libm::exp(smallest) {
        close if close < 1.03 => fixed(factor, 3, decimal),
        close if close < 1.3 => fixed(factor, 2, decimal),
        _ => significant(factor, 2, decimal),
    }
}
