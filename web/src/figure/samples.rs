//! An invented study for the tests of the pictures: a glaze hardener at six temperatures.

use kinetics_core::units::TemperatureUnit;

use super::grounds::Grounds;
use super::law_picture::{LawFlag, LawPicture, LawPoint, LawSample, RivalCurve};
use super::time_map::{FlagInterval, MeasuredRegion, TimeFlag, TimeLine, TimeMap, TimeSample};

/// Temperatures in °C, rate constants in 10⁻³/h and their standard deviations.
const MEASURED: [(f64, f64, f64); 6] = [
    (50.0, 18.4, 0.9),
    (55.0, 33.2, 1.7),
    (60.0, 54.7, 2.7),
    (65.0, 81.9, 4.1),
    (70.0, 133.0, 6.7),
    (78.0, 275.0, 13.7),
];
/// Student's t for four degrees of freedom at 95 %.
const STUDENT: f64 = 2.776;

fn kelvin(celsius: f64) -> f64 {
    celsius + 273.15
}

/// A straight line through ln k against 1/T, with what its interval needs.
struct Line {
    mean: (f64, f64),
    slope: f64,
    spread: f64,
    scatter: f64,
}

impl Line {
    fn fitted() -> Self {
        let points = MEASURED.map(|(celsius, rate, _)| (1.0 / kelvin(celsius), (rate * 1e-3).ln()));
        let count = points.len() as f64;
        let mean = (
            points.iter().map(|point| point.0).sum::<f64>() / count,
            points.iter().map(|point| point.1).sum::<f64>() / count,
        );
        let about = |x: f64, y: f64| (x - mean.0, y - mean.1);
        let spread: f64 = points.iter().map(|(x, _)| (x - mean.0).powi(2)).sum();
        let product = |(u, v): (f64, f64)| u * v;
        let slope = points.iter().map(|(x, y)| product(about(*x, *y))).sum::<f64>() / spread;
        let left = |(x, y): (f64, f64)| (y - mean.1 - slope * (x - mean.0)).powi(2);
        let scatter = (points.into_iter().map(left).sum::<f64>() / (count - 2.0)).sqrt();
        Self { mean, slope, spread, scatter }
    }

    fn at(&self, kelvin: f64) -> (f64, f64) {
        let from_mean = 1.0 / kelvin - self.mean.0;
        let ln_rate = self.mean.1 + self.slope * from_mean;
        let error = self.scatter * (1.0 / 6.0 + from_mean.powi(2) / self.spread).sqrt();
        (ln_rate, STUDENT * error)
    }
}

fn grounds(temperature: f64) -> Grounds {
    let (coldest, warmest) = (1.0 / kelvin(50.0), 1.0 / kelvin(78.0));
    let outside = (1.0 / temperature - coldest).max(warmest - 1.0 / temperature).max(0.0);
    let away = (kelvin(50.0) - temperature).max(temperature - kelvin(78.0)).max(0.0);
    match outside / (coldest - warmest) {
        _ if away < 1e-9 => Grounds::Inside,
        share if share <= 0.5 && away <= 15.0 => Grounds::Near,
        share if share <= 2.0 && away <= 40.0 => Grounds::Far,
        _ => Grounds::Beyond,
    }
}

fn temperatures((coldest, warmest): (f64, f64)) -> Vec<f64> {
    let mut all: Vec<f64> = (0..=80)
        .map(|step| 1.0 / coldest + (1.0 / warmest - 1.0 / coldest) * f64::from(step) / 80.0)
        .map(|reciprocal| 1.0 / reciprocal)
        .chain([10.0, 40.0, 50.0, 78.0, 87.0].map(kelvin))
        .filter(|kelvin| (coldest..=warmest).contains(kelvin))
        .collect();
    all.sort_by(f64::total_cmp);
    all
}

/// The law of the invented study, with questions at the given temperatures in °C.
pub fn law_picture(asked: &[f64]) -> LawPicture {
    let line = Line::fitted();
    let points = MEASURED.map(|(celsius, rate, deviation)| {
        let ln_rate = (rate * 1e-3).ln();
        LawPoint {
            label: format!("{celsius} °C"),
            temperature: kelvin(celsius),
            ln_rate,
            standard_deviation: Some(deviation / rate),
            misfit_percent: Some(100.0 * ((ln_rate - line.at(kelvin(celsius)).0).exp() - 1.0)),
            excluded: false,
        }
    });
    let flags = asked.iter().enumerate().map(|(index, celsius)| LawFlag {
        number: index + 1,
        temperature: kelvin(*celsius),
        label: String::new(),
    });
    let mut picture = LawPicture {
        rate_label: "ln (k · h)".to_owned(),
        points: points.to_vec(),
        span: Some((kelvin(50.0), kelvin(78.0))),
        flags: flags.collect(),
        temperature_unit: TemperatureUnit::Celsius,
        ..LawPicture::default()
    };
    picture.curve = temperatures(picture.temperatures())
        .into_iter()
        .map(|temperature| {
            let (ln_rate, half) = line.at(temperature);
            LawSample {
                temperature,
                ln_rate,
                interval: Some((ln_rate - half, ln_rate + half)),
                grounds: grounds(temperature),
            }
        })
        .collect();
    let bend = |temperature: f64| {
        let (ln_rate, _) = line.at(temperature);
        let from_middle = 1e3 / temperature - 1e3 * line.mean.0;
        (temperature, ln_rate + 2.5 * (0.012 - from_middle.powi(2)))
    };
    picture.rivals = vec![RivalCurve {
        name: "curved".to_owned(),
        samples: picture.curve.iter().map(|sample| bend(sample.temperature)).collect(),
    }];
    picture
}

/// The time to an extent, in seconds, and its interval so many times as wide; first order.
fn time_to(gone: f64, temperature: f64, wider: f64) -> (f64, (f64, f64)) {
    let (ln_rate, half) = Line::fitted().at(temperature);
    let time = -(1.0 - gone).ln() * (-ln_rate).exp() * 3600.0;
    let factor = (wider * half).exp();
    (time, (time / factor, time * factor))
}

fn time_map_of(wider: f64, completion: (f64, f64), times: Option<(f64, f64)>) -> TimeMap {
    let flag = |number: usize, celsius: f64, gone: f64| {
        let temperature = kelvin(celsius);
        let (time_seconds, (low, high)) = time_to(gone, temperature, wider);
        TimeFlag {
            number,
            temperature,
            time_seconds,
            interval: Some(FlagInterval::Times(low, high)),
            grounds: Some(grounds(temperature)),
            label: String::new(),
        }
    };
    let answered = TimeFlag {
        interval: Some(FlagInterval::Temperatures(kelvin(completion.0), kelvin(completion.1))),
        ..flag(3, 87.0, 0.99)
    };
    let mut map = TimeMap {
        flags: vec![flag(1, 25.0, 0.05), flag(2, 40.0, 0.02), answered],
        measured: Some(MeasuredRegion { temperatures: (kelvin(50.0), kelvin(78.0)), times }),
        ..TimeMap::default()
    };
    let on_view = temperatures(map.temperatures());
    let sample = |gone: f64, temperature: f64| {
        let (time_seconds, interval) = time_to(gone, temperature, wider);
        let grounds = grounds(temperature);
        TimeSample { temperature, time_seconds, interval: Some(interval), grounds }
    };
    map.lines = [(0.05, "5 % gone"), (0.02, "2 % gone"), (0.99, "99 % gone")]
        .map(|(gone, label)| TimeLine {
            label: label.to_owned(),
            samples: on_view.iter().map(|temperature| sample(gone, *temperature)).collect(),
        })
        .to_vec();
    map
}

/// The time map of the invented study.
pub fn time_map() -> TimeMap {
    time_map_of(1.0, (85.4, 88.8), None)
}

/// The time map with intervals many times as wide, and a region followed for some hours.
pub fn scattered_time_map() -> TimeMap {
    let mut map = time_map_of(6.0, (81.0, 94.0), Some((600.0, 2.0 * 86_400.0)));
    for sample in map.lines.iter_mut().flat_map(|line| &mut line.samples) {
        if sample.temperature < kelvin(30.0) {
            sample.grounds = Grounds::Beyond;
        }
    }
    map
}

/// The law with an interval many times as wide.
pub fn scattered_law_picture() -> LawPicture {
    let mut picture = law_picture(&[-5.0, 40.0, 110.0]);
    for sample in &mut picture.curve {
        sample.interval = sample.interval.map(|(low, high)| {
            (
                sample.ln_rate + 5.0 * (low - sample.ln_rate),
                sample.ln_rate + 5.0 * (high - sample.ln_rate),
            )
        });
    }
    for point in &mut picture.points {
        point.standard_deviation = Some(0.3);
    }
    picture
}
