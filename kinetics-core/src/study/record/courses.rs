//! The record's account of progress curves: how they were fitted, and how well.

use super::{Account, Findings, Part, Study, estimate_words};
use crate::study::{LevelChoice, LevelWord};
use crate::table::{Form, SignalIs};

impl Account {
    /// What the study says about signals.
    pub(super) fn signals(&mut self, study: &Study) {
        let measured = &study.measured;
        if measured.form != Form::Progress {
            return;
        }
        if let Some(signal_is) = measured.signal_is {
            let follows = match signal_is {
                SignalIs::Left => "what is left",
                SignalIs::Formed => "what forms",
            };
            self.entry("The signal follows", follows);
        }
        for (name, level) in [("Start", &measured.start), ("End", &measured.end)] {
            if let Some(level) = level {
                let words = match level {
                    LevelChoice::Word(LevelWord::Free) => "found for each run".into(),
                    LevelChoice::Word(LevelWord::Shared) => "found once for all runs".into(),
                    LevelChoice::Given(given) => given.to_string(),
                };
                self.entry(format!("{name} of the signal"), words.trim_end());
            }
        }
    }

    /// The fit of each curve, and of all at once.
    pub(super) fn courses(&mut self, findings: &Findings) {
        let rows: Vec<Vec<String>> = findings
            .runs
            .iter()
            .filter_map(|run| {
                let course = run.course.as_ref()?;
                let shown = |number: f64| format!("{number:.5e}");
                Some(vec![
                    run.label.clone(),
                    course.points.to_string(),
                    shown(course.start),
                    shown(course.end),
                    format!("{:.1} %", 100.0 * course.extent_followed),
                    course.residual_sd.map_or("none".into(), shown),
                    course.termination.into(),
                ])
            })
            .collect();
        if rows.is_empty() {
            return;
        }
        let head = ["run", "points", "start", "end", "followed to", "noise", "fit"];
        self.parts.push(Part::Table(head.map(String::from).to_vec(), rows));
        for run in &findings.runs {
            let Some(course) = &run.course else { continue };
            let rows = (0..course.points).filter_map(|at| {
                let (time, signal) = (course.times_seconds.get(at)?, course.signals.get(at)?);
                let residual = course.residuals.get(at)?;
                Some(vec![format!("{time}"), format!("{signal:.6e}"), format!("{residual:+.3e}")])
            });
            self.sentence(format!("The curve of {}:", run.label));
            let head = ["t/s", "signal", "measured − fitted"].map(String::from).to_vec();
            self.parts.push(Part::Table(head, rows.collect()));
        }
        if let Some(law) = &findings.one_stage {
            let name = "Activation energy, all curves at once (assumes no run-to-run scatter)";
            self.entry(name, estimate_words(&law.activation_energy));
        }
    }
}
