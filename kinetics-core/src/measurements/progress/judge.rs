//! Which of the runs can be fitted at all, and in one sentence why the others cannot.

use super::gather::{Draft, Gathered};
use super::{AboutSignals, Point, ProgressRun, ProgressRuns};
use crate::problem::{Position, Problem};
use crate::quantity::Kelvin;
use crate::table::SignalIs;

/// A run whose rows differ by more kelvin than this has no one temperature.
const STEADY_KELVIN: f64 = 2.0;

/// A correlation with time beyond this shows which way a signal goes.
const CLEAR_CORRELATION: f64 = 0.5;

/// A signal below zero by no more than this part of the run's largest is noise about zero.
const NOISE_ABOUT_ZERO: f64 = 0.05;

pub(super) fn judge(gathered: Gathered, about: AboutSignals) -> ProgressRuns {
    let mut choices = gathered.choices;
    let signal_is = about.signal_is.or(gathered.signal_is).unwrap_or_else(|| {
        let (signal_is, sentence) = direction(&gathered.drafts);
        if !gathered.drafts.is_empty() {
            choices.push(sentence.into());
        }
        signal_is
    });
    let mut problems = gathered.problems;
    let mut runs = Vec::new();
    for draft in gathered.drafts {
        match fault(&draft, signal_is, about.may_be_negative) {
            Some((found, expected, message)) => {
                let position = match &draft.column {
                    Some((column, name)) => Position::column(*column, name),
                    None => draft
                        .points
                        .first()
                        .map_or_else(Position::default, |first| Position::row(first.row)),
                };
                let message = format!("the run {} {message}; it is left out.", quoted(&draft.name));
                problems.push(Problem::said(&position, &found, expected, &message));
            }
            None => runs.extend(usable(draft)),
        }
    }
    ProgressRuns {
        runs,
        signal_is,
        unit: gathered.unit,
        time_unit: gathered.time_unit,
        temperature_unit: gathered.temperature_unit,
        left_out: gathered.left_out,
        problems,
        choices,
    }
}

/// A run's name in a sentence: “50 °C”.
fn quoted(name: &str) -> String {
    if name == "without a name" { name.to_owned() } else { format!("“{name}”") }
}

fn usable(draft: Draft) -> Option<ProgressRun> {
    let (low, high) = draft.temperatures?;
    Some(ProgressRun {
        row: draft.points.first()?.row,
        name: draft.name,
        temperature: Kelvin(0.5 * (low + high)),
        points: draft.points,
    })
}

/// What the signal follows, by the way it goes in most runs.
fn direction(drafts: &[Draft]) -> (SignalIs, &'static str) {
    let rising = drafts.iter().filter(|draft| correlation(&draft.points) > CLEAR_CORRELATION);
    if 2 * rising.count() > drafts.len() {
        (SignalIs::Formed, "The signal rises, and is taken to follow what forms.")
    } else {
        (SignalIs::Left, "The signal falls, and is taken to follow what is left.")
    }
}

/// What is wrong with a run: what was found, what was expected, and the middle of a sentence.
fn fault(
    draft: &Draft,
    signal_is: SignalIs,
    may_be_negative: bool,
) -> Option<(String, &'static str, String)> {
    let points = &draft.points;
    let found =
        |text: String, expected: &'static str, message: String| Some((text, expected, message));
    let back = points.windows(2).find(|pair| pair[1].time_seconds < pair[0].time_seconds);
    if let Some([_, later]) = back {
        return found(
            format!("{} s", later.time_seconds),
            "times that increase",
            format!(
                "goes back in time in row {}: put its rows in the order of time, or name each run \
                 in a column",
                later.row
            ),
        );
    }
    let several_times = points.windows(2).any(|pair| pair[1].time_seconds > pair[0].time_seconds);
    if points.len() < 2 || !several_times {
        let message = if points.len() < 2 {
            "has a single point: a rate needs two times or more"
        } else {
            "has all its points at one time: a rate needs two times or more"
        };
        return found(points.len().to_string(), "two times or more", message.into());
    }
    let Some((low, high)) = draft.temperatures else {
        let expected = "the temperature of the run";
        let message = "has no temperature: name it in the header, in a column, or on a line above";
        return found(String::new(), expected, message.into());
    };
    if high - low > STEADY_KELVIN {
        return found(
            format!("{} K", high - low),
            "one temperature for each run",
            format!(
                "changes its temperature by {:.1} K: give each temperature a run of its own",
                high - low
            ),
        );
    }
    let largest = points.iter().map(|point| point.signal).fold(0.0, f64::max);
    let too_low = |point: &&Point| point.signal < -NOISE_ABOUT_ZERO * largest;
    if let Some(point) = points.iter().find(too_low)
        && !may_be_negative
    {
        return found(
            point.signal.to_string(),
            "a signal from zero up",
            format!(
                "has a negative signal in row {}: leave that row out, or let the end of the signal \
                 be free",
                point.row
            ),
        );
    }
    let first = points.first()?.signal;
    if points.iter().all(|point| point.signal == first) {
        let message = "does not react: its signal stays the same";
        return found(first.to_string(), "a signal that changes", message.into());
    }
    let correlation = correlation(points);
    let (wrong, way, should) = match signal_is {
        SignalIs::Left => (correlation > CLEAR_CORRELATION, "rises", "what is left falls"),
        SignalIs::Formed => (correlation < -CLEAR_CORRELATION, "falls", "what forms rises"),
    };
    if wrong {
        let expected = if way == "rises" { "a signal that falls" } else { "a signal that rises" };
        let message = format!("{way}, although {should}: choose what the signal follows");
        return found(correlation.to_string(), expected, message);
    }
    None
}

/// Correlation of signal and time; 0 where either does not change.
fn correlation(points: &[Point]) -> f64 {
    let count = points.len() as f64;
    let mean = |value: fn(&Point) -> f64| points.iter().map(value).sum::<f64>() / count;
    let (time, signal) = (mean(|p| p.time_seconds), mean(|p| p.signal));
    let (mut both, mut times, mut signals) = (0.0, 0.0, 0.0);
    for point in points {
        let (t, s) = (point.time_seconds - time, point.signal - signal);
        both += t * s;
        times += t * t;
        signals += s * s;
    }
    let scale = (times * signals).sqrt();
    if scale > 0.0 { both / scale } else { 0.0 }
}
