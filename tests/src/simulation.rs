//! Simulated studies with a known law: does an interval cover what it claims, and how wide is it?
//!
//! A cell is a number of runs, a pattern of stated errors, a true run-to-run scatter and a
//! scatter choice. Each replicate draws runs, fits them and answers every question; an answer
//! covers when the true value (for a single batch: a newly drawn batch's value) lies within it.

use kinetics_core::answer::{Answer, Basis, Side};
use kinetics_core::grounds::Support;
use kinetics_core::measurements::Observation;
use kinetics_core::quantity::Kelvin;
use kinetics_core::question;
use kinetics_core::rate_law::Order;
use kinetics_core::temperature_law::{ScatterChoice, TemperatureLaw, fit};
use kinetics_core::units::RateUnit;
use kinetics_core::wording::Display;
use rand_distr::{Distribution, StandardNormal};
use rand_pcg::Pcg64Mcg;
use rand_pcg::rand_core::SeedableRng;
use serde_json::{Map, Value, json};

/// True activation energy over R, K.
const ENERGY_KELVIN: f64 = 85_000.0 / 8.314_462_618;
/// True ln k (1/s) at 60 °C.
const LN_RATE: f64 = -11.0;
const CENTRE: f64 = 333.15;
/// Temperatures measured, K: evenly from 50 to 80 °C.
const COLDEST: f64 = 323.15;
const HOTTEST: f64 = 353.15;
/// Typical stated standard deviation of ln k.
const TYPICAL_SD: f64 = 0.05;
/// Level of two-sided intervals and of one-sided bounds.
pub const LEVEL: f64 = 0.95;

/// How stated errors differ from run to run.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Errors {
    /// All the same.
    Equal,
    /// Log-normal about the typical one with σ = 1.
    Unequal,
    /// The two ends ten times as precise as the rest.
    PreciseEnds,
}

impl Errors {
    /// What the table calls it.
    pub fn name(self) -> &'static str {
        match self {
            Self::Equal => "equal",
            Self::Unequal => "log-normal",
            Self::PreciseEnds => "two precise ends",
        }
    }
}

/// One cell of the calibration.
#[derive(Debug, Clone, Copy)]
pub struct Cell {
    /// Number of runs.
    pub runs: usize,
    /// Pattern of the stated errors.
    pub errors: Errors,
    /// True run-to-run scatter in units of the typical stated error.
    pub tau: f64,
    /// Scatter choice under test.
    pub scatter: ScatterChoice,
}

impl Cell {
    /// Whether what the scatter choice takes for granted is true here.
    pub fn assumptions_hold(&self) -> bool {
        match self.scatter {
            ScatterChoice::AsStated => self.tau == 0.0,
            ScatterChoice::FromResiduals => self.errors == Errors::Equal,
            ScatterChoice::AsStatedPlusRunToRun | ScatterChoice::Automatic => true,
        }
    }
}

/// What came out for one question in a cell.
#[derive(Debug, Clone)]
pub struct Outcome {
    /// Code of the question, with its bound where it has one.
    pub question: String,
    /// Share of replicates whose answer does not miss the truth: one that sets no limit holds it,
    /// and a refusal claims nothing.
    pub coverage: f64,
    /// Mean width on the question's scale (ln, or K for temperatures); for a one-sided bound its
    /// mean distance from the best estimate.
    pub width: f64,
    /// The same for an oracle that knows every variance and uses the normal distribution.
    pub oracle_width: f64,
    /// Replicates whose answer has the limits that its question asks for.
    pub answered: usize,
}

struct Asked {
    label: String,
    entry: Map<String, Value>,
    truth: Truth,
}

/// What an answer must cover.
#[derive(Clone, Copy)]
enum Truth {
    /// θ/k at a temperature, for the mean law.
    Time { at: f64, theta: f64 },
    /// θ/k for a new batch.
    BatchTime { at: f64, theta: f64 },
    /// k at a temperature.
    Rate { at: f64 },
    /// k(to)/k(from) times a factor.
    Ratio { to: f64, from: f64, factor: f64 },
    /// 1 − exp(−k t).
    Gone { at: f64, time: f64 },
    /// The temperature at which θ takes a time.
    Temperature { theta: f64, time: f64 },
    /// The same for a new batch, which is faster or slower than the law at every temperature.
    BatchTemperature { theta: f64, time: f64 },
}

fn ln_rate(temperature: f64) -> f64 {
    LN_RATE - ENERGY_KELVIN * (1.0 / temperature - 1.0 / CENTRE)
}

impl Truth {
    /// The true value if a batch is off the law by `batch` on the ln scale.
    fn value(self, batch: f64) -> f64 {
        let temperature = |theta: f64, time: f64, batch: f64| {
            1.0 / (1.0 / CENTRE - ((theta / time).ln() - batch - LN_RATE) / ENERGY_KELVIN)
        };
        match self {
            Self::Time { at, theta } => theta / ln_rate(at).exp(),
            Self::BatchTime { at, theta } => theta / (ln_rate(at) + batch).exp(),
            Self::Rate { at } => ln_rate(at).exp(),
            Self::Ratio { to, from, factor } => factor * (ln_rate(to) - ln_rate(from)).exp(),
            Self::Gone { at, time } => -(-ln_rate(at).exp() * time).exp_m1(),
            Self::Temperature { theta, time } => temperature(theta, time, 0.0),
            Self::BatchTemperature { theta, time } => temperature(theta, time, batch),
        }
    }

    fn is_temperature(self) -> bool {
        matches!(self, Self::Temperature { .. } | Self::BatchTemperature { .. })
    }

    /// Variance of the oracle's estimate, given the covariance of (ln k at the centre, E/R) with
    /// known weights; on the scale on which widths are measured.
    fn oracle_sd(self, covariance: [[f64; 2]; 2], batch_variance: f64) -> f64 {
        let x = |t: f64| -(1.0 / t - 1.0 / CENTRE);
        let along = |l: [f64; 2], own: f64| {
            let mean = l[0] * l[0] * covariance[0][0]
                + 2.0 * l[0] * l[1] * covariance[0][1]
                + l[1] * l[1] * covariance[1][1];
            (mean + own).sqrt()
        };
        match self {
            Self::Time { at, .. } | Self::Rate { at } => along([1.0, x(at)], 0.0),
            Self::BatchTime { at, .. } => along([1.0, x(at)], batch_variance),
            Self::Ratio { to, from, .. } => along([0.0, x(to) - x(from)], 0.0),
            Self::Gone { at, .. } => along([1.0, x(at)], 0.0),
            Self::Temperature { .. } | Self::BatchTemperature { .. } => {
                let t = self.value(0.0);
                let own =
                    if matches!(self, Self::Temperature { .. }) { 0.0 } else { batch_variance };
                along([1.0, x(t)], own) * t * t / ENERGY_KELVIN
            }
        }
    }
}

fn questions() -> Vec<Asked> {
    let kelvin = |t: f64| json!({"value": t, "unit": "K"});
    let seconds = |t: f64| json!({"value": t, "unit": "s"});
    let percent = |p: f64| json!({"value": p, "unit": "%"});
    // 25 °C: 25 K below the coldest run; 40 °C within; 88 °C above.
    let (cold, room, warm) = (293.15, 298.15, 361.15);
    let theta = |extent: f64| -(-extent).ln_1p();
    let year = 3.0e7;
    let time = 8.0 * 3600.0;
    let mut asked = vec![
        ("rate-at", json!({"temperature": kelvin(cold)}), Truth::Rate { at: cold }),
        (
            "time-to-extent",
            json!({"temperature": kelvin(room), "gone": percent(5.0)}),
            Truth::Time { at: room, theta: theta(0.05) },
        ),
        (
            "speed-up",
            json!({"to": kelvin(warm), "from": kelvin(room)}),
            Truth::Ratio { to: warm, from: room, factor: 1.0 },
        ),
        (
            "equivalent-time",
            json!({"temperature": kelvin(warm), "time": seconds(year), "other_temperature": kelvin(room)}),
            Truth::Ratio { to: room, from: warm, factor: year },
        ),
        (
            "extent-after",
            json!({"time": seconds(1.0e6), "temperature": kelvin(room)}),
            Truth::Gone { at: room, time: 1.0e6 },
        ),
        (
            "temperature-for",
            json!({"gone": percent(50.0), "time": seconds(time)}),
            Truth::Temperature { theta: theta(0.5), time },
        ),
    ];
    for bound in ["mean", "next-run"] {
        let single = bound == "next-run";
        let time_truth = |at: f64, extent: f64| {
            let theta = theta(extent);
            if single { Truth::BatchTime { at, theta } } else { Truth::Time { at, theta } }
        };
        let stored = theta(1.0 - 0.98);
        asked.push((
            "longest-stand",
            json!({"temperature": kelvin(room), "keep": percent(98.0), "bound": bound}),
            time_truth(room, 1.0 - 0.98),
        ));
        asked.push((
            "completion-time",
            json!({"temperature": kelvin(warm), "gone": percent(99.0), "bound": bound}),
            time_truth(warm, 0.99),
        ));
        asked.push((
            "warmest-storage",
            json!({"keep": percent(98.0), "time": seconds(1.0e6), "bound": bound}),
            if single {
                Truth::BatchTemperature { theta: stored, time: 1.0e6 }
            } else {
                Truth::Temperature { theta: stored, time: 1.0e6 }
            },
        ));
    }
    asked
        .into_iter()
        .map(|(code, blanks, truth)| {
            let mut entry = Map::from_iter([("question".to_owned(), Value::from(code))]);
            entry.extend(blanks.as_object().cloned().unwrap_or_default());
            let bound = entry.get("bound").and_then(Value::as_str);
            let label = bound.map_or(code.to_owned(), |bound| format!("{code}, {bound}"));
            Asked { label, entry, truth }
        })
        .collect()
}

/// Simulates one cell with a seed of its own.
pub fn simulate(cell: &Cell, replicates: usize, seed: u64) -> Vec<Outcome> {
    let mut random = Pcg64Mcg::seed_from_u64(seed);
    let mut normal = || -> f64 { StandardNormal.sample(&mut random) };
    let asked = questions();
    let mut tallies = vec![Tally::default(); asked.len()];
    let tau = cell.tau * TYPICAL_SD;
    for _ in 0..replicates {
        let temperatures: Vec<f64> = (0..cell.runs)
            .map(|i| COLDEST + (HOTTEST - COLDEST) * i as f64 / (cell.runs - 1) as f64)
            .collect();
        let sds: Vec<f64> = (0..cell.runs)
            .map(|i| match cell.errors {
                Errors::Equal => TYPICAL_SD,
                Errors::Unequal => TYPICAL_SD * normal().exp(),
                Errors::PreciseEnds if i == 0 || i == cell.runs - 1 => 0.1 * TYPICAL_SD,
                Errors::PreciseEnds => TYPICAL_SD,
            })
            .collect();
        let runs: Vec<Observation> = temperatures
            .iter()
            .zip(&sds)
            .map(|(t, sd)| {
                Observation::new(
                    Kelvin(*t),
                    ln_rate(*t) + sd * normal() + tau * normal(),
                    Some(*sd),
                )
            })
            .collect();
        // A new batch scatters by τ; judged by residuals, it also has a typical run's error.
        let batch_variance = match cell.scatter {
            ScatterChoice::FromResiduals => tau * tau + TYPICAL_SD * TYPICAL_SD,
            ScatterChoice::AsStated => 0.0,
            _ => tau * tau,
        };
        let batch = batch_variance.sqrt() * normal();
        let oracle = oracle_covariance(&temperatures, &sds, tau);
        let Some(basis) = basis(&runs, cell.scatter) else { continue };
        for (asked, tally) in asked.iter().zip(&mut tallies) {
            let answer = question::answer(&asked.entry, Ok(&basis));
            tally.missed += usize::from(misses(&answer, asked.truth.value(batch)));
            let Some(width) = width(&answer, asked.truth) else { continue };
            let one_sided = answer.side != Some(Side::Two);
            let quantiles = if one_sided { 1.644_853_627 } else { 2.0 * 1.959_963_985 };
            tally.width += width;
            tally.oracle_width += quantiles * asked.truth.oracle_sd(oracle, batch_variance);
            tally.answered += 1;
        }
    }
    asked
        .into_iter()
        .zip(tallies)
        .map(|(asked, tally)| Outcome {
            question: asked.label,
            coverage: 1.0 - tally.missed as f64 / replicates as f64,
            width: tally.width / tally.answered as f64,
            oracle_width: tally.oracle_width / tally.answered as f64,
            answered: tally.answered,
        })
        .collect()
}

#[derive(Clone, Default)]
struct Tally {
    missed: usize,
    width: f64,
    oracle_width: f64,
    answered: usize,
}

fn basis(runs: &[Observation], scatter: ScatterChoice) -> Option<Basis> {
    let law = fit(TemperatureLaw::Arrhenius, runs, scatter).ok()?;
    let temperatures: Vec<Kelvin> = runs.iter().map(|r| r.temperature).collect();
    Some(Basis {
        law,
        rivals: Vec::new(),
        shifted: Vec::new(),
        order: Order::FIRST,
        base_unit: Some(RateUnit::PER_SECOND),
        shown_unit: Some(RateUnit::PER_SECOND),
        initial_concentration: None,
        support: Support::of_runs(&temperatures, true)?,
        level: LEVEL,
        display: Display::default(),
    })
}

/// Whether a limit of the answer excludes the truth.
fn misses(answer: &Answer, truth: f64) -> bool {
    answer.low.is_some_and(|low| truth < low) || answer.high.is_some_and(|high| truth > high)
}

/// The answer's width on the scale of its question; none where it lacks a limit that the question
/// asks for.
fn width(answer: &Answer, truth: Truth) -> Option<f64> {
    let scale = |number: f64| {
        if truth.is_temperature() {
            number
        } else if matches!(truth, Truth::Gone { .. }) {
            // An extent within the last digit of all is taken a last digit off.
            (-(-number.clamp(f64::MIN_POSITIVE, 1.0 - f64::EPSILON)).ln_1p()).ln()
        } else {
            number.ln()
        }
    };
    let best = answer.value?;
    match (answer.side?, answer.low, answer.high) {
        (Side::Two, low, high) => Some(scale(high?) - scale(low?)),
        (_, Some(low), None) => Some(scale(best) - scale(low)),
        (_, None, high) => Some(scale(high?) - scale(best)),
        _ => None,
    }
}

/// (XᵀWX)⁻¹ of (ln k at the centre, E/R) with the true variances.
fn oracle_covariance(temperatures: &[f64], sds: &[f64], tau: f64) -> [[f64; 2]; 2] {
    let (mut s, mut sx, mut sxx) = (0.0, 0.0, 0.0);
    for (t, sd) in temperatures.iter().zip(sds) {
        let w = 1.0 / (sd * sd + tau * tau);
        let x = -(1.0 / t - 1.0 / CENTRE);
        s += w;
        sx += w * x;
        sxx += w * x * x;
    }
    let determinant = s * sxx - sx * sx;
    [[sxx / determinant, -sx / determinant], [-sx / determinant, s / determinant]]
}
