//! Time against temperature: how long each extent takes, and where the questions stand.

mod drawing;

use kinetics_core::units::TemperatureUnit;

use super::Picture;
use super::describe;
use super::geometry::Point;
use super::grounds::Grounds;
use super::marks::flags;
use super::scene::Scene;
use super::surround::temperature_title;
use super::table::{Cell, Table};
use super::view::{self, Span};

/// The time to one extent at one temperature.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct TimeSample {
    /// Temperature, in kelvin.
    pub temperature: f64,
    /// Time, in seconds.
    pub time_seconds: f64,
    /// The ends of its interval in seconds, where it has one.
    pub interval: Option<(f64, f64)>,
    /// What it stands on.
    pub grounds: Grounds,
}

/// The time to one extent.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct TimeLine {
    /// Its name, such as `5 % gone`.
    pub label: String,
    /// In order of temperature, over the temperatures of [`TimeMap::view`].
    pub samples: Vec<TimeSample>,
}

/// The interval of an answer, drawn through its flag.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum FlagInterval {
    /// From one time to another, in seconds.
    Times(f64, f64),
    /// From one temperature to another, in kelvin.
    Temperatures(f64, f64),
}

/// A question, at its temperature and time.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct TimeFlag {
    /// Its number.
    pub number: usize,
    /// Temperature, in kelvin.
    pub temperature: f64,
    /// Time, in seconds.
    pub time_seconds: f64,
    /// The interval of the answer, where it has one.
    pub interval: Option<FlagInterval>,
    /// What the answer stands on.
    pub grounds: Option<Grounds>,
    /// What it asks, in a few words.
    pub label: String,
}

/// An interval that reaches further than this from its temperature, in kelvin, runs out of view.
const INTERVAL_ON_VIEW: f64 = 30.0;

impl TimeFlag {
    /// Its temperature, and the ends of its interval as far as they are to be on view.
    fn temperatures(&self) -> [f64; 3] {
        let (low, high) = match self.interval {
            Some(FlagInterval::Temperatures(low, high)) => (low, high),
            _ => (self.temperature, self.temperature),
        };
        let near = |end: f64| {
            end.max(self.temperature - INTERVAL_ON_VIEW).min(self.temperature + INTERVAL_ON_VIEW)
        };
        [self.temperature, near(low), near(high)]
    }
}

/// What the measurements cover.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct MeasuredRegion {
    /// The coldest and the warmest temperature, in kelvin.
    pub temperatures: (f64, f64),
    /// The shortest and the longest time followed, in seconds, where times were measured.
    pub times: Option<(f64, f64)>,
}

/// A place on the map.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Place {
    /// Temperature, in kelvin.
    pub temperature: f64,
    /// Time, in seconds.
    pub time_seconds: f64,
}

/// The part of the world on view.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct View {
    /// The coldest and the warmest temperature, in kelvin.
    pub temperatures: (f64, f64),
    /// The shortest and the longest time, in seconds.
    pub times: (f64, f64),
}

/// All that the map shows. Every part may be empty.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct TimeMap {
    /// One line for each extent asked.
    pub lines: Vec<TimeLine>,
    /// Questions.
    pub flags: Vec<TimeFlag>,
    /// What the measurements cover.
    pub measured: Option<MeasuredRegion>,
    /// The unit in which temperatures are written.
    pub temperature_unit: TemperatureUnit,
    /// A view to hold, as while a flag is dragged; else the map shows all that matters.
    pub held_view: Option<View>,
}

/// Times on view reach so many times below and above those that matter.
const TIME_MARGIN: f64 = 4.0;

impl TimeMap {
    /// The coldest and the warmest temperature on view, in kelvin; the lines are to be
    /// sampled from one to the other.
    pub fn temperatures(&self) -> (f64, f64) {
        if let Some(view) = self.held_view {
            return view.temperatures;
        }
        let measured = self.measured.map(|region| region.temperatures);
        view::on_view(
            self.flags
                .iter()
                .flat_map(TimeFlag::temperatures)
                .chain(measured.into_iter().flat_map(|(from, to)| [from, to])),
        )
    }

    /// What is on view: every question, the measured region, and the lines within it;
    /// the rest of a line only as far as it lies in that neighbourhood.
    pub fn view(&self) -> View {
        if let Some(view) = self.held_view {
            return view;
        }
        let temperatures = self.temperatures();
        let (coldest, warmest) = temperatures;
        let mut matters = Span::default();
        let mut hold = |seconds: f64| {
            if seconds > 0.0 {
                matters.hold(seconds.ln());
            }
        };
        for flag in &self.flags {
            hold(flag.time_seconds);
            if let Some(FlagInterval::Times(low, high)) = flag.interval {
                hold(low);
                hold(high);
            }
        }
        let (from, to) = self.measured.map_or(temperatures, |region| {
            if let Some((shortest, longest)) = region.times {
                hold(shortest);
                hold(longest);
            }
            region.temperatures
        });
        let samples = || self.lines.iter().flat_map(|line| &line.samples);
        for sample in samples() {
            if (from.min(to)..=from.max(to)).contains(&sample.temperature) {
                hold(sample.time_seconds);
            }
        }
        let on_view = samples()
            .filter(|sample| (coldest..=warmest).contains(&sample.temperature))
            .map(|sample| sample.time_seconds)
            .filter(|seconds| *seconds > 0.0);
        let whole = Span::of(on_view.map(f64::ln)).ends();
        let Some((low, high)) = matters.ends().or(whole) else {
            return View { temperatures, times: (60.0, 365.25 * 86_400.0) };
        };
        let margin = TIME_MARGIN.ln();
        // A line that ends within the margin needs no empty room beyond its end.
        let (line_low, line_high) = whole.unwrap_or((low, high));
        let low = (low - margin).max(line_low.min(low) - 0.15 * margin);
        let high = (high + margin).min(line_high.max(high) + 0.6 * margin);
        let widen = (0.5 * (10.0_f64.ln() - (high - low))).max(0.0);
        View { temperatures, times: ((low - widen).exp(), (high + widen).exp()) }
    }

    /// The flag under a pixel of the map drawn at that size, by its place in [`TimeMap::flags`].
    pub fn flag_at(&self, (width, height): (f64, f64), x: f64, y: f64) -> Option<usize> {
        let scene = Scene::new(width, height);
        let (indices, placed) = self.layout(&scene).place_flags(self);
        let hit = flags::hit(&placed, Point::new(x, y))?;
        indices.get(hit).copied()
    }

    /// The temperature and the time at a pixel of the map drawn at that size; a pixel
    /// outside the plot stands for the nearest inside.
    pub fn place_at(&self, (width, height): (f64, f64), x: f64, y: f64) -> Place {
        let layout = self.layout(&Scene::new(width, height));
        Place { temperature: layout.across.value(x), time_seconds: layout.up.value(y) }
    }

    fn shown_grounds(&self) -> Vec<Grounds> {
        let shown = |grounds: &Grounds| {
            let mut samples = self.lines.iter().flat_map(|line| &line.samples);
            samples.any(|sample| sample.grounds == *grounds)
        };
        Grounds::ALL.into_iter().filter(shown).collect()
    }

    fn describe(&self) -> String {
        let unit = self.temperature_unit;
        let names: Vec<&str> = self.lines.iter().map(|line| line.label.as_str()).collect();
        let mut sentences = Vec::new();
        if names.is_empty() {
            sentences.push("Nothing asked yet.".to_owned());
        } else {
            sentences.push(format!("Lines: {}.", names.join(", ")));
        }
        if let Some(MeasuredRegion { temperatures, .. }) = self.measured {
            sentences.push(format!(
                "Measured from {} to {}.",
                describe::temperature(temperatures.0, unit),
                describe::temperature(temperatures.1, unit)
            ));
        }
        for flag in &self.flags {
            sentences.push(describe::question(flag.number, flag.temperature, flag.grounds, unit));
        }
        sentences.join(" ")
    }
}

impl Picture for TimeMap {
    fn scene(&self, width: f64, height: f64) -> Scene {
        let mut scene = Scene::new(width, height);
        scene.title = "Time against temperature".to_owned();
        scene.description = self.describe();
        scene.layer = self.draw(&scene);
        scene
    }

    fn table(&self) -> Table {
        let unit = self.temperature_unit;
        let flags = self.flags.iter().map(|flag| {
            let (low, high) = match flag.interval {
                Some(FlagInterval::Times(low, high)) => (Some(low), Some(high)),
                Some(FlagInterval::Temperatures(low, high)) => {
                    (Some(unit.from_kelvin(low)), Some(unit.from_kelvin(high)))
                }
                None => (None, None),
            };
            vec![
                Cell::words(format!("question {} {}", flag.number, flag.label).trim_end()),
                Cell::number(unit.from_kelvin(flag.temperature)),
                Cell::number(flag.time_seconds),
                Cell::number(low),
                Cell::number(high),
                Cell::words(flag.grounds.map_or("", Grounds::phrase)),
            ]
        });
        // A line has many samples; every tenth part of it says enough.
        let lines = self.lines.iter().flat_map(|line| {
            let step = (line.samples.len() / 10).max(1);
            line.samples.iter().step_by(step).map(|sample| {
                vec![
                    Cell::words(line.label.as_str()),
                    Cell::number(unit.from_kelvin(sample.temperature)),
                    Cell::number(sample.time_seconds),
                    Cell::number(sample.interval.map(|(low, _)| low)),
                    Cell::number(sample.interval.map(|(_, high)| high)),
                    Cell::words(sample.grounds.phrase()),
                ]
            })
        });
        Table {
            caption: "Time against temperature".to_owned(),
            headers: vec![
                String::new(),
                temperature_title(unit),
                "time, s".to_owned(),
                "from".to_owned(),
                "to".to_owned(),
                "grounds".to_owned(),
            ],
            rows: flags.chain(lines).collect(),
        }
    }
}
