//! From findings to pictures: what was measured, the law and the questions, as figures take them.

use std::rc::Rc;

use kinetics_core::answer::{Answer, Basis};
use kinetics_core::curve::{CurvePoint, ln_rates, ln_times};
use kinetics_core::grounds::Grounds as CoreGrounds;
use kinetics_core::quantity::{Kelvin, Quantity};
use kinetics_core::question::{Blank, BlankKind, Question};
use kinetics_core::study::{Evaluation, Study};
use kinetics_core::temperature_law::{FittedLaw, TemperatureLaw};
use kinetics_core::wording::{logarithm_of, typed};
use serde_json::{Map, Value};

use crate::figure::grounds::Grounds;
use crate::figure::law_picture::{LawFlag, LawPicture, LawPoint, LawSample, RivalCurve};
use crate::figure::temperature_colour::TemperatureRange;
use crate::figure::time_map::{
    FlagInterval, MeasuredRegion, TimeFlag, TimeLine, TimeMap, TimeSample, View,
};

/// Points of a curve: bands bend gently, and each point costs an interval.
const CURVE_POINTS: usize = 40;
/// More flags of one question than this hide each other.
const MOST_FLAGS: usize = 8;
/// More lines than this on the time map cannot be told apart.
const MOST_LINES: usize = 6;
/// More points than this are only a cloud, of which a part says as much.
const MOST_POINTS: usize = 2_000;

/// The law over all temperatures that the pictures show.
pub type Curve = Rc<Vec<CurvePoint>>;

/// The law's curve; an interval at each of its points is the dear part of a picture, so that
/// both share it.
pub fn curve(study: &Study, evaluation: &Evaluation) -> Curve {
    let Some(basis) = &evaluation.basis else { return Curve::default() };
    let of_law = without_curve(study, evaluation).temperatures();
    let of_map = without_lines(study, evaluation, None).temperatures();
    Rc::new(samples(basis, of_law.0.min(of_map.0), of_law.1.max(of_map.1)))
}

/// ln k against 1/T.
pub fn law_picture(study: &Study, evaluation: &Evaluation, curve: &Curve) -> LawPicture {
    let mut picture = without_curve(study, evaluation);
    let Some(basis) = &evaluation.basis else { return picture };
    let shift = ln_unit(evaluation);
    picture.curve = curve
        .iter()
        .map(|point| LawSample {
            temperature: point.temperature.0,
            ln_rate: point.ln_value - shift,
            interval: point.limits.map(|(low, high)| (low - shift, high - shift)),
            grounds: grounds(point.grounds),
        })
        .collect();
    let along = |rival: &FittedLaw| {
        let ln_rate = |point: &CurvePoint| rival.ln_rate(point.temperature) - shift;
        curve.iter().map(|point| (point.temperature.0, ln_rate(point))).collect()
    };
    picture.rivals = basis
        .rivals
        .iter()
        .map(|rival| RivalCurve { name: short_name(rival.law).to_owned(), samples: along(rival) })
        .collect();
    picture
}

/// A law's name beside its line.
const fn short_name(law: TemperatureLaw) -> &'static str {
    match law {
        TemperatureLaw::Arrhenius => "Arrhenius",
        TemperatureLaw::Eyring => "Eyring",
        TemperatureLaw::ArrheniusWithPower(_) => "power of T",
        TemperatureLaw::LogLinear => "log-linear",
        TemperatureLaw::Curved => "bent",
    }
}

/// What of the law's picture needs no law.
fn without_curve(study: &Study, evaluation: &Evaluation) -> LawPicture {
    let basis = evaluation.basis.as_ref();
    let unit = basis.and_then(|b| b.shown_unit).or(evaluation.rates.unit);
    let shift = ln_unit(evaluation);
    let runs = &evaluation.rates.runs;
    let step = runs.len().div_ceil(MOST_POINTS).max(1);
    let points = runs.iter().zip(&evaluation.findings.runs).step_by(step).map(|(run, found)| {
        let seen = run.observation;
        LawPoint {
            label: run.name.clone(),
            temperature: seen.temperature.0,
            ln_rate: seen.ln_rate - shift,
            standard_deviation: seen.ln_sd,
            misfit_percent: found.ln_residual.map(|residual| 100.0 * residual.exp_m1()),
            excluded: false,
        }
    });
    LawPicture {
        rate_label: logarithm_of("k", unit),
        points: points.collect(),
        span: basis.map(span),
        flags: law_flags(study, evaluation),
        temperature_unit: study.display.temperature.unwrap_or_default(),
        ..LawPicture::default()
    }
}

/// Pictures have their axis in the unit of the data, the core has ln k in the base unit: the
/// difference of the two.
fn ln_unit(evaluation: &Evaluation) -> f64 {
    let unit = evaluation.basis.as_ref().and_then(|basis| basis.shown_unit);
    unit.or(evaluation.rates.unit).map_or(0.0, |unit| unit.to_base().ln())
}

/// Time against temperature, for the extents that are asked for.
pub fn time_map(
    study: &Study,
    evaluation: &Evaluation,
    curve: &Curve,
    held_view: Option<View>,
) -> TimeMap {
    let mut map = without_lines(study, evaluation, held_view);
    let Some(basis) = &evaluation.basis else { return map };
    for (label, extent) in extents(study, basis) {
        let Ok(times) = ln_times(basis, curve, extent) else { continue };
        let samples = times
            .iter()
            .map(|point| TimeSample {
                temperature: point.temperature.0,
                time_seconds: point.ln_value.exp(),
                interval: point.limits.map(|(low, high)| (low.exp(), high.exp())),
                grounds: grounds(point.grounds),
            })
            .collect();
        map.lines.push(TimeLine { label, samples });
    }
    map
}

/// What of the time map needs no law.
fn without_lines(study: &Study, evaluation: &Evaluation, held_view: Option<View>) -> TimeMap {
    let measured = evaluation.basis.as_ref().map(span);
    TimeMap {
        flags: time_flags(study, evaluation),
        measured: measured.map(|temperatures| MeasuredRegion { temperatures, times: None }),
        temperature_unit: study.display.temperature.unwrap_or_default(),
        held_view,
        ..TimeMap::default()
    }
}

/// The temperatures between which the colours of a study run.
pub fn temperature_range(evaluation: &Evaluation) -> TemperatureRange {
    let kelvins = || evaluation.rates.runs.iter().map(|run| run.observation.temperature.0);
    TemperatureRange::covering(
        kelvins().fold(f64::NAN, f64::min),
        kelvins().fold(f64::NAN, f64::max),
    )
}

/// The law over some temperatures, with the ends of the data among the points, so that a change
/// of grounds falls where it belongs.
fn samples(basis: &Basis, coldest: f64, warmest: f64) -> Vec<CurvePoint> {
    let (from, to) = span(basis);
    let mut edges = vec![coldest, from, to, warmest];
    edges.retain(|kelvin| (coldest..=warmest).contains(kelvin));
    let mut points: Vec<CurvePoint> = Vec::new();
    for pair in edges.windows(2) {
        let share = (1.0 / pair[0] - 1.0 / pair[1]) / (1.0 / coldest - 1.0 / warmest);
        if share > 0.0 {
            let count = (CURVE_POINTS as f64 * share).ceil() as usize + 2;
            points.extend(ln_rates(basis, Kelvin(pair[0]), Kelvin(pair[1]), count));
        }
    }
    points
}

fn span(basis: &Basis) -> (f64, f64) {
    let (coldest, hottest) = basis.support.span();
    (coldest.0, hottest.0)
}

/// A flag for each temperature that is asked about, or that is the answer.
fn law_flags(study: &Study, evaluation: &Evaluation) -> Vec<LawFlag> {
    let mut flags = Vec::new();
    for (at, (asked, answer)) in study.asked.iter().zip(&evaluation.findings.answers).enumerate() {
        let blanks = Question::of_code(code(asked)).map(|q| q.blanks).unwrap_or_default();
        let is_found = answer.unit.as_deref() == Some("K");
        let temperatures = blanks
            .iter()
            .filter(|blank| !is_found && blank.kind == BlankKind::Temperature)
            .flat_map(|blank| quantities(asked, blank.name))
            .filter_map(|quantity| Some(quantity.kelvin().ok()?.0));
        let found = answer.key_number().filter(|_| is_found);
        flags.extend(temperatures.chain(found).take(MOST_FLAGS).map(|temperature| LawFlag {
            number: at + 1,
            temperature,
            label: String::new(),
        }));
    }
    flags
}

/// A flag for each answer that is a time at a temperature, or a temperature for a time.
fn time_flags(study: &Study, evaluation: &Evaluation) -> Vec<TimeFlag> {
    let mut flags = Vec::new();
    for (at, (asked, answer)) in study.asked.iter().zip(&evaluation.findings.answers).enumerate() {
        let alone = std::slice::from_ref(answer);
        let answers = answer.rows.as_deref().unwrap_or(alone);
        let placed = answers.iter().take(MOST_FLAGS).filter_map(|answer| {
            time_flag(at + 1, answer.blanks.as_ref().unwrap_or(asked), answer)
        });
        flags.extend(placed);
    }
    flags
}

fn time_flag(number: usize, blanks: &Map<String, Value>, answer: &Answer) -> Option<TimeFlag> {
    let value = answer.key_number()?;
    let first = |name: &str| quantities(blanks, name).into_iter().next();
    // Of one side, the flag stands at the bound and the bar reaches to the best guess.
    let limits = answer.low.or(answer.value).zip(answer.high.or(answer.value));
    let limits = limits.filter(|(low, high)| low < high);
    let (temperature, time_seconds, interval) = match answer.unit.as_deref()? {
        "s" => {
            let kelvin = first("temperature")?.kelvin().ok()?;
            (kelvin.0, value, limits.map(|(low, high)| FlagInterval::Times(low, high)))
        }
        "K" => {
            let seconds = first("time")?.seconds().ok()?;
            (value, seconds.0, limits.map(|(low, high)| FlagInterval::Temperatures(low, high)))
        }
        _ => return None,
    };
    Some(TimeFlag {
        number,
        temperature,
        time_seconds,
        interval,
        grounds: answer.grounds.map(grounds),
        label: String::new(),
    })
}

/// The extents asked for, each once, with their names: "5 % gone".
fn extents(study: &Study, basis: &Basis) -> Vec<(String, f64)> {
    let mut found: Vec<(String, f64)> = Vec::new();
    for asked in &study.asked {
        let blanks = Question::of_code(code(asked)).map(|q| q.blanks).unwrap_or_default();
        for blank in blanks.iter().filter(|blank| ["gone", "keep"].contains(&blank.name)) {
            for quantity in quantities(asked, blank.name) {
                let Ok(part) = basis.part(&quantity) else { continue };
                let is_kept = blank.name == "keep";
                let extent = if is_kept { 1.0 - part } else { part };
                let word = if is_kept { "left" } else { "gone" };
                let name = format!("{} {word}", typed(&[quantity], basis.display.decimal));
                if found.iter().all(|(_, known)| (known - extent).abs() > 1e-9) {
                    found.push((name, extent));
                }
            }
        }
    }
    found.truncate(MOST_LINES);
    found
}

/// What stands in a blank of a question.
pub fn quantities(asked: &Map<String, Value>, name: &str) -> Vec<Quantity> {
    let read = |value: &Value| serde_json::from_value(value.clone()).ok();
    match asked.get(name) {
        Some(Value::Array(several)) => several.iter().filter_map(read).collect(),
        Some(single) => read(single).into_iter().collect(),
        None => Vec::new(),
    }
}

/// What stands in a blank, as it reads in its sentence; what could not be read, as it was typed.
pub fn filled(asked: &Map<String, Value>, blank: &Blank, decimal: char) -> String {
    match asked.get(blank.name) {
        Some(Value::String(unread)) => unread.clone(),
        Some(value) => typed(&blank.kind.quantities(value), decimal),
        None => String::new(),
    }
}

/// Whether a blank of a question is empty, or holds what cannot be read.
pub fn has_gap(asked: &Map<String, Value>) -> bool {
    let blanks = Question::of_code(code(asked)).map(|question| question.blanks);
    blanks.unwrap_or_default().iter().any(|blank| match asked.get(blank.name) {
        Some(filled) => blank.kind.quantities(filled).is_empty(),
        None => !blank.optional,
    })
}

/// The code of a question that is asked.
pub fn code(asked: &Map<String, Value>) -> &str {
    asked.get("question").and_then(Value::as_str).unwrap_or_default()
}

const fn grounds(grounds: CoreGrounds) -> Grounds {
    match grounds {
        CoreGrounds::Inside => Grounds::Inside,
        CoreGrounds::Near => Grounds::Near,
        CoreGrounds::Far => Grounds::Far,
        CoreGrounds::Beyond => Grounds::Beyond,
    }
}
