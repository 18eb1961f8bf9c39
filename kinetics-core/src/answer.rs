//! What comes back for a question: numbers, what they stand on, and the sentence that says so;
//! or a refusal that names its remedy.

use serde::Serialize;
use serde_json::{Map, Value};

use crate::grounds::{Grounds, Support};
use crate::quantity::{Kelvin, Quantity};
use crate::rate_law::{ExtentError, Order};
use crate::temperature_law::{Contrast, FittedLaw, Target};
use crate::units::{ConcentrationKind, RateUnit};
use crate::wording::Display;

/// Which limit an answer speaks of.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Side {
    /// Both.
    Two,
    /// The lower: what may be relied on at least.
    Lower,
    /// The upper: what must be reckoned with at most.
    Upper,
}

/// Why an estimate has no interval.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[serde(rename_all = "kebab-case")]
pub enum WhyNoInterval {
    /// Nothing tells how much the runs scatter.
    NoScatterKnown,
    /// The other limit is the one that counts.
    OneSided,
    /// The data allow any value.
    Unbounded,
    /// The data allow two separate ranges.
    TwoRays,
    /// The fit did not settle.
    NotConverged,
}

/// Why there is no number, and what would bring one.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct Refusal {
    /// What stands in the way, as a sentence.
    pub reason: String,
    /// What to do about it, as a sentence.
    pub needs: String,
}

impl Refusal {
    /// A refusal of two sentences.
    pub fn new(reason: impl Into<String>, needs: impl Into<String>) -> Self {
        Self { reason: reason.into(), needs: needs.into() }
    }
}

/// The sentence of an answer in the parts that a page sets in different sizes.
#[derive(Debug, Clone, Default, PartialEq, Serialize)]
pub struct Wording {
    /// "About 6.5 years".
    pub headline: String,
    /// "the scatter allows 3.2 to 13 (95 %)", or why there is no interval.
    pub scatter: String,
    /// "25 K below your coldest run".
    pub standing: String,
    /// "if another law holds: 32 to 67 h"; empty without rivals.
    pub rival: String,
    /// "if the thermometer is off by as much as stated: 41 to 47 h"; empty without an offset.
    pub offset: String,
}

/// One answer, in the terms of the findings document.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Answer {
    /// Code of the question.
    pub question: String,
    /// The blanks that this row of a table answers; absent on top.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub blanks: Option<Map<String, Value>>,
    /// Best estimate, unrounded.
    pub value: Option<f64>,
    /// Lower limit.
    pub low: Option<f64>,
    /// Upper limit.
    pub high: Option<f64>,
    /// Unit of the three.
    pub unit: Option<String>,
    /// Level of the interval.
    pub level: Option<f64>,
    /// Which limit counts.
    pub side: Option<Side>,
    /// How far from the data it reaches.
    pub grounds: Option<Grounds>,
    /// Lowest value under a law that the data do not exclude.
    pub rival_low: Option<f64>,
    /// Highest value under a law that the data do not exclude.
    pub rival_high: Option<f64>,
    /// Why there is no interval, where there is none.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub why: Option<WhyNoInterval>,
    /// The whole answer as a sentence.
    pub sentence: String,
    /// The same in parts.
    pub wording: Wording,
    /// More numbers, by name.
    pub detail: Map<String, Value>,
    /// One answer a combination, where a blank holds a list.
    pub rows: Option<Vec<Answer>>,
    /// Why there is no number.
    pub refused: Option<Refusal>,
}

impl Answer {
    /// An answer without numbers.
    pub fn empty(question: &str) -> Self {
        Self {
            question: question.into(),
            blanks: None,
            value: None,
            low: None,
            high: None,
            unit: None,
            level: None,
            side: None,
            grounds: None,
            rival_low: None,
            rival_high: None,
            why: None,
            sentence: String::new(),
            wording: Wording::default(),
            detail: Map::new(),
            rows: None,
            refused: None,
        }
    }

    /// The number that the question is about: the bound where one side counts.
    pub fn key_number(&self) -> Option<f64> {
        match self.side? {
            Side::Two => self.value,
            Side::Lower => self.low,
            Side::Upper => self.high,
        }
    }

    /// A refusal in place of numbers.
    pub fn refused(question: &str, refusal: Refusal) -> Self {
        Self {
            sentence: format!("{} {}", refusal.reason, refusal.needs),
            refused: Some(refusal),
            ..Self::empty(question)
        }
    }

    /// Adds a number to the details; what is not finite is left out.
    pub fn with_detail(mut self, name: &str, value: Option<f64>) -> Self {
        if let Some(number) = value.filter(|v| v.is_finite()) {
            self.detail.insert(name.into(), number.into());
        }
        self
    }
}

/// The initial concentration of a study.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct InitialConcentration {
    /// In the base unit of its kind.
    pub value: f64,
    /// What it counts.
    pub kind: ConcentrationKind,
}

/// Everything that answers are worked out from.
#[derive(Debug, Clone, PartialEq)]
pub struct Basis {
    /// The fitted or known law; ln k in `base_unit`.
    pub law: FittedLaw,
    /// Laws that the data do not exclude.
    pub rivals: Vec<FittedLaw>,
    /// The law with the thermometer off to either side by its stated offset.
    pub shifted: Vec<FittedLaw>,
    /// Order of the rate law.
    pub order: Order,
    /// Unit of k internally; none where the data do not say it.
    pub base_unit: Option<RateUnit>,
    /// Unit of k as the data state it.
    pub shown_unit: Option<RateUnit>,
    /// Initial concentration, where stated or implied by %.
    pub initial_concentration: Option<InitialConcentration>,
    /// Temperatures measured.
    pub support: Support,
    /// Level of intervals, as 0.95.
    pub level: f64,
    /// How to print.
    pub display: Display,
}

/// A quantity that is the exponential of a linear target, with its limits.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Spread {
    /// Best estimate.
    pub value: f64,
    /// Limits of the law's mean; none where no scatter is known.
    pub mean: Option<(f64, f64)>,
    /// Limits for one future run.
    pub next_run: Option<(f64, f64)>,
}

impl Basis {
    /// exp(`target`) with its limits.
    pub fn spread(&self, target: &Contrast) -> Spread {
        let limits = |whose| {
            let (low, high) = self.law.interval(target, whose, self.level)?;
            Some((libm::exp(low), libm::exp(high)))
        };
        Spread {
            value: libm::exp(self.law.estimate(target)),
            mean: limits(Target::Mean),
            next_run: limits(Target::NextRun),
        }
    }

    /// A part of the initial amount as a fraction; a concentration is divided by the initial one.
    ///
    /// # Errors
    /// An unknown unit, or a concentration that cannot be compared with the initial one.
    pub fn part(&self, quantity: &Quantity) -> Result<f64, Refusal> {
        if let Ok(fraction) = quantity.fraction() {
            return Ok(fraction);
        }
        let (value, kind) = quantity.concentration().map_err(|error| {
            Refusal::new(
                format!("{}.", capitalised(&error.to_string())),
                "Write a part such as 5 %, or a concentration such as 0.1 mol/L.",
            )
        })?;
        let initial = self.initial_concentration.ok_or_else(|| {
            Refusal::new(
                format!("{quantity} is a part of an initial concentration that is not stated."),
                "State the initial concentration, or ask in %.",
            )
        })?;
        if initial.kind == kind {
            Ok(value / initial.value)
        } else {
            Err(Refusal::new(
                format!("{quantity} does not convert into the unit of the initial concentration."),
                "Use the same kind of concentration for both, or ask in %.",
            ))
        }
    }

    /// ln θ at which a fraction is gone.
    ///
    /// # Errors
    /// A refusal in words where the order, the unit or the initial concentration forbid it.
    pub fn ln_theta(&self, extent: f64) -> Result<f64, Refusal> {
        self.needs_rate_unit()?;
        let concentration = self.initial_concentration.map(|c| c.value);
        self.order.ln_theta(extent, concentration).map_err(|error| self.extent_refusal(error))
    }

    /// The fraction gone at θ = ∫k dt, given as its natural logarithm.
    ///
    /// # Errors
    /// As [`Basis::ln_theta`].
    pub fn extent(&self, ln_theta: f64) -> Result<f64, Refusal> {
        self.needs_rate_unit()?;
        let concentration = self.initial_concentration.map(|c| c.value);
        self.order.extent(ln_theta, concentration).map_err(|error| self.extent_refusal(error))
    }

    /// Refuses what needs the unit of k where there is none.
    ///
    /// # Errors
    /// Where the data do not state the unit of k.
    pub fn needs_rate_unit(&self) -> Result<RateUnit, Refusal> {
        self.base_unit.ok_or_else(|| {
            Refusal::new(
                "The unit of the rate constants is not known.",
                "Choose it in the head of their column, for example 1/h.",
            )
        })
    }

    /// ln θ at which no more than a fraction is left.
    ///
    /// # Errors
    /// As [`Basis::ln_theta`], in words about what is kept.
    pub fn ln_theta_keeping(&self, left: f64) -> Result<f64, Refusal> {
        self.needs_rate_unit()?;
        let concentration = self.initial_concentration.map(|c| c.value);
        self.order.ln_theta(1.0 - left, concentration).map_err(|error| match error {
            ExtentError::Outside => Refusal::new(
                "The part that is kept must lie below 100 % and not below 0 %.",
                "Write a part between 0 and 100 %.",
            ),
            ExtentError::NeverComplete => Refusal::new(
                format!("At {} it takes for ever until nothing is left.", self.order.name()),
                "Keep more than 0 %, for example 0.1 %.",
            ),
            other => self.extent_refusal(other),
        })
    }

    fn extent_refusal(&self, error: ExtentError) -> Refusal {
        let order = self.order.name();
        match error {
            ExtentError::Outside => Refusal::new(
                "The part that is gone must lie above 0 % and not above 100 %.",
                "Write a part between 0 and 100 %.",
            ),
            ExtentError::NeverComplete => Refusal::new(
                format!("At {order} it takes for ever until all of it is gone."),
                "Ask for less than 100 %, for example 99.9 %.",
            ),
            ExtentError::Unreachable => Refusal::new(
                "The reaction stops before so much of it is gone.",
                "Ask for a smaller part.",
            ),
            ExtentError::NeedsInitialConcentration => Refusal::new(
                format!("At {order} the time depends on the initial concentration."),
                "State the initial concentration below the table of what was measured.",
            ),
        }
    }

    /// "Far from the data" and "25 K below your coldest run", for the worst of the temperatures.
    pub fn standing(&self, temperatures: &[Kelvin]) -> (Grounds, String) {
        let by_distance = |a: &&Kelvin, b: &&Kelvin| {
            let distance = |t: &Kelvin| self.support.distance_kelvin(*t).abs();
            self.support
                .grounds(**a)
                .cmp(&self.support.grounds(**b))
                .then(distance(a).total_cmp(&distance(b)))
        };
        match temperatures.iter().max_by(by_distance) {
            Some(worst) => {
                (self.support.grounds(*worst), self.support.words(*worst, &self.display))
            }
            None => (Grounds::Beyond, String::new()),
        }
    }

    /// "the scatter allows 3.2 to 13 (95 %)", or why no interval can be given.
    pub fn scatter_words(&self, limits: Option<(String, String)>) -> String {
        match limits {
            Some((low, high)) => {
                format!("the scatter allows {low} to {high} ({})", self.display.percent(self.level))
            }
            None if self.law.settings.within_groups.is_some() => {
                "no interval: with so few groups, nothing tells how much groups differ".into()
            }
            None if self.support.is_known_law() => "no interval: the law is stated without the \
                                                    standard deviations of both its numbers"
                .into(),
            None => "no interval: with as many runs as unknowns and no stated errors, nothing \
                     tells how much the runs scatter"
                .into(),
        }
    }
}

/// The refusal of a question that speaks of one side where no scatter is known; the best guess,
/// in words, is no limit.
pub fn no_bound(best: &str, basis: &Basis) -> Refusal {
    let (why, line, needs) = if basis.support.is_known_law() {
        (
            "The law is stated without the standard deviations of both its numbers",
            "the law alone gives",
            "State the standard deviations of the activation energy and of the rate constant.",
        )
    } else if basis.law.settings.within_groups.is_some() {
        (
            "With so few groups, nothing tells how much groups differ",
            "the line alone gives",
            "Measure runs of another group, as in another oven or batch.",
        )
    } else {
        (
            "Nothing tells how much the runs scatter",
            "the line alone gives",
            "Measure at a third temperature, or state the error of each rate constant.",
        )
    };
    Refusal::new(
        format!("{why}, so nothing can be promised; {line} {best}, which is no limit."),
        needs,
    )
}

/// Whom a bound covers, in words.
pub fn whom(bound: Target) -> &'static str {
    match bound {
        Target::NextRun => "for a single batch",
        Target::Mean => "for the mean of many batches",
    }
}

/// "About 6.5 years; the scatter allows 3.2 to 13 (95 %). 25 K below your coldest run. If another
/// law holds: 5.9 to 8.1 years." A bound reads on without a pause: "At most 9 h for a single
/// batch, to be 95 % sure; …"
pub fn sentence(wording: &Wording, side: Side) -> String {
    let pause = if side == Side::Two { ";" } else { "" };
    let mut sentence = format!("{}{pause} {}.", wording.headline, wording.scatter);
    for part in [&wording.standing, &wording.rival, &wording.offset] {
        if !part.is_empty() {
            sentence.push(' ');
            sentence.push_str(&capitalised(part));
            sentence.push('.');
        }
    }
    sentence
}

/// With a capital first letter.
pub fn capitalised(text: &str) -> String {
    let mut text = text.to_owned();
    if let Some(first) = text.get_mut(..1) {
        first.make_ascii_uppercase();
    }
    text
}
