//! ln k against 1/T: what was measured, the law through it, and how far it reaches.

mod drawing;

use kinetics_core::units::TemperatureUnit;

use super::Picture;
use super::describe;
use super::grounds::Grounds;
use super::scene::Scene;
use super::surround::temperature_title;
use super::table::{Cell, Table};
use super::view::{self, Span};

/// One measured rate constant.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct LawPoint {
    /// As the reader knows it: "run 3", "50 °C".
    pub label: String,
    /// Temperature, in kelvin.
    pub temperature: f64,
    /// ln of the rate constant in the display unit.
    pub ln_rate: f64,
    /// Its standard deviation, where one is known: that of ln k.
    pub standard_deviation: Option<f64>,
    /// What the law misses, in % of k.
    pub misfit_percent: Option<f64>,
    /// Whether the fit leaves it out.
    pub excluded: bool,
}

/// The law at one temperature.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LawSample {
    /// Temperature, in kelvin.
    pub temperature: f64,
    /// ln of the rate constant in the display unit.
    pub ln_rate: f64,
    /// The ends of its interval, where it has one.
    pub interval: Option<(f64, f64)>,
    /// What it stands on.
    pub grounds: Grounds,
}

/// Another law that the data allow.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct RivalCurve {
    /// Its name.
    pub name: String,
    /// Temperatures in kelvin and ln of the rate constant in the display unit.
    pub samples: Vec<(f64, f64)>,
}

/// A question, at the temperature that it asks about.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct LawFlag {
    /// Its number.
    pub number: usize,
    /// Temperature, in kelvin.
    pub temperature: f64,
    /// What it asks, in a few words.
    pub label: String,
}

/// All that the picture shows. Every part may be empty.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct LawPicture {
    /// What stands upwards, such as `ln (k · h)`.
    pub rate_label: String,
    /// Measured rate constants.
    pub points: Vec<LawPoint>,
    /// The law in order of temperature, over [`LawPicture::temperatures`].
    pub curve: Vec<LawSample>,
    /// Other laws that the data allow.
    pub rivals: Vec<RivalCurve>,
    /// The coldest and the warmest temperature of the fit, in kelvin.
    pub span: Option<(f64, f64)>,
    /// Questions.
    pub flags: Vec<LawFlag>,
    /// The unit in which temperatures are written.
    pub temperature_unit: TemperatureUnit,
}

impl LawPicture {
    /// The coldest and the warmest temperature on view, in kelvin: all that was measured
    /// and all that is asked, with a margin. The law is to be sampled from one to the other.
    pub fn temperatures(&self) -> (f64, f64) {
        view::on_view(
            self.points
                .iter()
                .map(|point| point.temperature)
                .chain(self.flags.iter().map(|flag| flag.temperature))
                .chain(self.span.into_iter().flat_map(|(from, to)| [from, to])),
        )
    }

    /// The least and the greatest ln k on view.
    fn rates(&self, (coldest, warmest): (f64, f64)) -> (f64, f64) {
        let mut span = Span::default();
        for point in &self.points {
            let deviation = point.standard_deviation.unwrap_or(0.0);
            span.hold(point.ln_rate - deviation);
            span.hold(point.ln_rate + deviation);
        }
        let on_view = |kelvin: f64| (coldest..=warmest).contains(&kelvin);
        let samples = || self.curve.iter().filter(|sample| on_view(sample.temperature));
        for sample in samples() {
            span.hold(sample.ln_rate);
        }
        // Fans and rivals that part widely may fill a sixth of the picture on each side, and no more.
        let fans = samples().filter_map(|sample| sample.interval);
        let rivals = self.rivals.iter().flat_map(|rival| rival.samples.iter().copied());
        let rivals = rivals.filter(|(kelvin, _)| on_view(*kelvin)).map(|(_, ln_rate)| ln_rate);
        let further = fans.flat_map(|(low, high)| [low, high]).chain(rivals);
        span.stretched(further, 0.25).padded(0.06)
    }

    /// ln k on the curve at a temperature, straight in 1/T between samples.
    fn ln_rate_at(&self, kelvin: f64) -> Option<(f64, Grounds)> {
        self.curve.windows(2).find_map(|pair| {
            let (from, to) = (pair[0], pair[1]);
            let (low, high) =
                (from.temperature.min(to.temperature), from.temperature.max(to.temperature));
            if !(low..=high).contains(&kelvin) {
                return None;
            }
            let part = (1.0 / kelvin - 1.0 / from.temperature)
                / (1.0 / to.temperature - 1.0 / from.temperature);
            let part = if part.is_finite() { part } else { 0.0 };
            let ln_rate = from.ln_rate + part * (to.ln_rate - from.ln_rate);
            ln_rate.is_finite().then(|| (ln_rate, from.grounds.max(to.grounds)))
        })
    }

    fn shown_grounds(&self) -> Vec<Grounds> {
        Grounds::ALL
            .into_iter()
            .filter(|grounds| self.curve.iter().any(|sample| sample.grounds == *grounds))
            .collect()
    }

    fn describe(&self) -> String {
        let unit = self.temperature_unit;
        let kept = self.points.iter().filter(|point| !point.excluded);
        let mut sentences = vec![describe::measured(
            kept.clone().count(),
            kept.map(|point| point.temperature),
            unit,
        )];
        let left_out = self.points.iter().filter(|point| point.excluded).count();
        if left_out > 0 {
            sentences.push(format!("{left_out} left out of the fit."));
        }
        let rivals: Vec<&str> = self.rivals.iter().map(|rival| rival.name.as_str()).collect();
        if !rivals.is_empty() {
            sentences.push(format!("Other laws drawn: {}.", rivals.join(", ")));
        }
        for flag in &self.flags {
            let grounds = self.ln_rate_at(flag.temperature).map(|(_, grounds)| grounds);
            sentences.push(describe::question(flag.number, flag.temperature, grounds, unit));
        }
        sentences.join(" ")
    }

    /// What stands upwards.
    fn rate_label(&self) -> &str {
        if self.rate_label.is_empty() { "ln k" } else { &self.rate_label }
    }
}

impl Picture for LawPicture {
    fn scene(&self, width: f64, height: f64) -> Scene {
        let mut scene = Scene::new(width, height);
        scene.title = format!("{} against reciprocal temperature", self.rate_label());
        scene.description = self.describe();
        scene.layer = self.draw(&scene);
        scene
    }

    fn table(&self) -> Table {
        let unit = self.temperature_unit;
        let rate = self.rate_label();
        let points = self.points.iter().map(|point| {
            vec![
                Cell::words(point.label.as_str()),
                Cell::number(unit.from_kelvin(point.temperature)),
                Cell::number(point.ln_rate),
                Cell::number(point.standard_deviation),
                Cell::number(point.misfit_percent),
                Cell::words(if point.excluded { "left out" } else { "measured" }),
            ]
        });
        let flags = self.flags.iter().map(|flag| {
            let found = self.ln_rate_at(flag.temperature);
            vec![
                Cell::words(format!("question {} {}", flag.number, flag.label).trim_end()),
                Cell::number(unit.from_kelvin(flag.temperature)),
                Cell::number(found.map(|(ln_rate, _)| ln_rate)),
                Cell::Empty,
                Cell::Empty,
                Cell::words(found.map_or("", |(_, grounds)| grounds.phrase())),
            ]
        });
        Table {
            caption: format!("{rate} against temperature"),
            headers: vec![
                String::new(),
                temperature_title(unit),
                rate.to_owned(),
                "± standard deviation".to_owned(),
                "misfit, % of k".to_owned(),
                "grounds".to_owned(),
            ],
            rows: points.chain(flags).collect(),
        }
    }
}
