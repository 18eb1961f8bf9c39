//! Progress curves of a study: how they are to be fitted, and the rate constants that come of it.

use super::assumptions::{initial_concentration, level};
use super::document::{LevelChoice, LevelWord, OrderChoice, OrderWord, Study};
use crate::answer::{Basis, Refusal};
use crate::measurements::{
    AboutSignals, LeftOut, Observation, ProgressRun, ProgressRuns, Rates, Run, progress,
};
use crate::one_stage::one_stage;
use crate::problem::{Position, Problem};
use crate::quantity::Quantity;
use crate::rate_constant::{Level, RunFit, Settings, fit_runs};
use crate::rate_law::{Order, RateLaw};
use crate::remark::{Remark, Severity};
use crate::table::{Form, SignalIs, Table};
use crate::units::{ConcentrationKind, RateUnit, TimeUnit};

mod findings;
mod order;
mod remarks;

pub use findings::CourseFindings;

/// A run with its fit.
#[derive(Debug, Clone, PartialEq)]
pub struct Course {
    /// What was measured.
    pub run: ProgressRun,
    /// What was found.
    pub fit: RunFit,
}

/// Progress curves: what was read, and once fitted, a course for each run of the rates.
#[derive(Debug, Clone, Default)]
pub(super) struct Courses {
    read: Option<ProgressRuns>,
    pub fitted: Vec<Course>,
    /// How they were fitted.
    pub settings: Option<Settings>,
    /// What was decided on the user's behalf, in sentences.
    pub choices: Vec<String>,
}

impl Courses {
    /// The curves of a table of progress data; nothing for other forms.
    pub fn read(study: &Study, table: &Table, excluded: &[LeftOut]) -> Self {
        let measured = &study.measured;
        let about = AboutSignals {
            signal_is: measured.signal_is,
            may_be_negative: matches!(measured.end, Some(LevelChoice::Word(_))),
            error_is: measured.error_is,
        };
        let read = (measured.form == Form::Progress).then(|| progress(table, excluded, about));
        let choices = read.as_ref().map(|read| read.choices.clone()).unwrap_or_default();
        Self { read, choices, ..Self::default() }
    }

    /// Rates without runs yet: what reading alone says.
    pub fn rates(&self) -> Rates {
        let Some(read) = &self.read else { return Rates::default() };
        Rates {
            left_out: read.left_out.clone(),
            problems: read.problems.clone(),
            temperature_unit: read.temperature_unit,
            ..Rates::default()
        }
    }

    /// Fits the curves and adds a run to the rates for each that has a rate constant.
    pub fn fit(
        &mut self,
        study: &Study,
        rates: &mut Rates,
        remarks: &mut Vec<Remark>,
    ) -> Result<(), Refusal> {
        let Some(read) = self.read.take() else { return Ok(()) };
        let scale = Scale::of(study, &read)?;
        let first = self.settings(study, &read, Order::FIRST)?;
        let order = order::find(study, &read.runs, &first, &mut self.choices, remarks)?;
        let settings = Settings {
            law: RateLaw::Order(order),
            initial_concentration: scale.own.filter(|_| order.needs_initial_concentration()),
            ..first
        };
        self.settings = Some(settings);
        for (run, outcome) in read.runs.iter().zip(fit_runs(&read.runs, &settings)) {
            match outcome {
                Ok(fit) => self.fitted.push(Course { run: run.clone(), fit }),
                Err(reason) => rates.problems.push(Problem::said(
                    &Position::row(run.row),
                    "",
                    "a signal that tells a rate",
                    &format!(
                        "the run “{}” has no rate constant: {reason}; it is left out.",
                        run.name
                    ),
                )),
            }
        }
        rates.runs = self.fitted.iter().map(rate).collect();
        let with_errors = rates.runs.iter().filter(|run| run.observation.ln_sd.is_some()).count();
        rates.errors_missing = if with_errors > 0 { rates.runs.len() - with_errors } else { 0 };
        if read.time_unit.is_some() {
            let kind = scale.kind.base();
            rates.unit = Some(RateUnit::for_order(order.value(), kind, TimeUnit::Second));
        }
        if order.needs_initial_concentration() {
            rates.initial_concentration = self.typical_concentration(&scale);
            self.choices.extend(scale.sentence);
        }
        if let Some(settings) = &self.settings {
            remarks::add(&self.fitted, settings, remarks);
        }
        Ok(())
    }

    /// The law of a basis fitted to all curves at once, with nothing beside it.
    pub fn one_stage(&self, basis: &Basis) -> Option<Basis> {
        let curves: Vec<_> = self.fitted.iter().map(|course| (&course.run, &course.fit)).collect();
        let law = &basis.law;
        let settings = self.settings.as_ref().filter(|_| !curves.is_empty())?;
        let law = one_stage(law.law, law.reference, &curves, settings, &law.parameters).ok()?;
        Some(Basis { law, rivals: Vec::new(), shifted: Vec::new(), ..basis.clone() })
    }

    /// A remark where the rate constants scatter more than the noise of their curves explains.
    pub fn disagreement(&self, basis: &Basis) -> Option<Remark> {
        remarks::stages_disagree(&self.fitted, basis)
    }

    /// What questions reckon with: what was given, else the mean of the runs' own.
    fn typical_concentration(&self, scale: &Scale) -> Option<(f64, ConcentrationKind)> {
        let value = scale.own.unwrap_or_else(|| {
            let own = self.fitted.iter().map(|course| (course.fit.start - course.fit.end).abs());
            own.sum::<f64>() / self.fitted.len() as f64
        });
        (value > 0.0 && value.is_finite()).then_some((value, scale.kind))
    }

    /// How the signals are to be fitted, what the study leaves open decided and said.
    fn settings(
        &mut self,
        study: &Study,
        read: &ProgressRuns,
        order: Order,
    ) -> Result<Settings, Refusal> {
        let measured = &study.measured;
        let kind = read.unit.map(|unit| unit.kind());
        let start = match &measured.start {
            None => Level::Free,
            Some(choice) => level_of(choice, kind, "start")?,
        };
        let end = match (&measured.end, read.signal_is, kind) {
            (Some(choice), ..) => match level_of(choice, kind, "end")? {
                Level::Shared => Level::Free,
                end => end,
            },
            (None, SignalIs::Left, _) => {
                self.choices.push("The signal is taken to end at 0 when all has reacted.".into());
                Level::Given(0.0)
            }
            (None, SignalIs::Formed, Some(ConcentrationKind::Percent)) => {
                self.choices
                    .push("The signal is taken to end at 100 % when all has reacted.".into());
                Level::Given(100.0)
            }
            (None, SignalIs::Formed, _) => {
                self.choices
                    .push("The signal at which each run ends is found with its rate.".into());
                Level::Free
            }
        };
        let noise = measured.noise.unwrap_or_default();
        let some = read.runs.iter().flat_map(|run| &run.points).any(|point| point.sd.is_some());
        if some && !read.runs.iter().all(ProgressRun::states_errors) {
            self.choices.push(
                "Some signals state no error, so that none of the stated ones is used.".into(),
            );
        }
        Ok(Settings { law: RateLaw::Order(order), start, end, noise, initial_concentration: None })
    }
}

/// The concentration that the rate constants of orders other than one count in.
struct Scale {
    /// The initial concentration of every run; none: what each run's signal changes by.
    own: Option<f64>,
    kind: ConcentrationKind,
    sentence: Option<String>,
}

impl Scale {
    fn of(study: &Study, read: &ProgressRuns) -> Result<Self, Refusal> {
        let stated = initial_concentration(study, None, Order::FIRST)?;
        let in_percent = |sentence: &str| Self {
            own: Some(100.0),
            kind: ConcentrationKind::Percent,
            sentence: Some(sentence.into()),
        };
        Ok(match (read.unit.map(|unit| unit.kind()), stated) {
            (Some(kind), Some(stated)) if stated.kind == kind => Self {
                own: Some(stated.value).filter(|_| kind == ConcentrationKind::Percent),
                kind,
                sentence: None,
            },
            (_, Some(stated)) => {
                Self { own: Some(stated.value), kind: stated.kind, sentence: None }
            }
            (Some(ConcentrationKind::Percent), None) => {
                in_percent("Rate constants count in % of the initial concentration.")
            }
            (Some(kind), None) => Self {
                own: None,
                kind,
                sentence: Some(
                    "Each run's initial concentration is what its signal changes by in all; \
                     questions are answered for their mean."
                        .into(),
                ),
            },
            (None, None) => in_percent(
                "The signal has no unit of concentration, so that rate constants count in % of \
                 the initial concentration.",
            ),
        })
    }
}

/// A level as a study states it, in the unit of the signals.
fn level_of(
    choice: &LevelChoice,
    kind: Option<ConcentrationKind>,
    which: &str,
) -> Result<Level, Refusal> {
    let refusal = |given: &Quantity, said: String| {
        Refusal::new(
            format!("The {which} of the signal, {given}, cannot be used: {said}."),
            "State it in the unit of the signal, or let it be free.",
        )
    };
    match choice {
        LevelChoice::Word(LevelWord::Free) => Ok(Level::Free),
        LevelChoice::Word(LevelWord::Shared) => Ok(Level::Shared),
        LevelChoice::Given(given) if !given.value.is_finite() => {
            Err(refusal(given, "it is no number".into()))
        }
        LevelChoice::Given(given) if given.unit.trim().is_empty() => Ok(Level::Given(given.value)),
        LevelChoice::Given(given) => {
            let (value, own) =
                given.concentration().map_err(|error| refusal(given, error.to_string()))?;
            match kind {
                Some(kind) if kind == own => Ok(Level::Given(value)),
                Some(kind) => {
                    Err(refusal(given, format!("the signal counts in {}", kind.base().symbol())))
                }
                None => Err(refusal(given, "the signal has no unit".into())),
            }
        }
    }
}

/// A course as a law sees it.
fn rate(Course { run, fit }: &Course) -> Run {
    let observation = Observation::new(run.temperature, fit.ln_rate, fit.ln_sd);
    Run::new(run.row, run.name.clone(), observation)
}
