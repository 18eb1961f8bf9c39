//! From a study to its findings: every floor of the house in turn.

use super::assumptions::{USUAL_LEVEL, level};
use super::basis::{self, Ground};
use super::courses::{Course, CourseFindings, Courses};
use super::document::Study;
use super::findings::{Findings, LawFindings, Read, RunFindings};
use super::record;
use crate::answer::{Answer, Basis};
use crate::measurements::{Grouped, LeftOut, Measurand, Rates, Run, rates};
use crate::numeric::sorting::sort_by;
use crate::question;
use crate::remark::{Evidence, Remark, Severity, remarks};
use crate::table::{ColumnHint, Form, Hints, Table, read_table};
use crate::units::TemperatureUnit;

/// A study's table, read once: reading is the long part of large data.
#[derive(Debug, Clone)]
pub struct Prepared {
    /// What the pasted text was taken to be.
    pub table: Table,
}

/// Findings with what they were made from, for pictures.
#[derive(Debug, Clone)]
pub struct Evaluation {
    /// The document.
    pub findings: Findings,
    /// Law and surroundings; none where no law could be had.
    pub basis: Option<Basis>,
    /// Runs behind it.
    pub rates: Rates,
    /// Their curves, one a run; progress data only.
    pub courses: Vec<Course>,
}

/// How a study's text is to be read.
pub fn hints(study: &Study) -> Hints {
    let measured = &study.measured;
    let columns = measured
        .columns
        .iter()
        .map(|column| ColumnHint {
            role: column.role,
            unit: column.unit.clone(),
            multiplier: column.multiplier,
        })
        .collect();
    Hints { columns, decimal: measured.decimal, form: Some(measured.form) }
}

/// Reads a study's text all at once; a [`Reader`](crate::table::Reader) with [`hints`] does it
/// in slices.
pub fn prepare(study: &Study) -> Prepared {
    Prepared { table: read_table(&study.measured.text, &hints(study)) }
}

/// The findings of a study. Never fails: what cannot be used is said in them.
pub fn evaluate(study: &Study) -> Findings {
    evaluate_prepared(study, &prepare(study)).findings
}

/// The findings of a study whose text is read already.
pub fn evaluate_prepared(study: &Study, prepared: &Prepared) -> Evaluation {
    let table = &prepared.table;
    let excluded: Vec<LeftOut> = study
        .measured
        .excluded
        .iter()
        .map(|e| LeftOut { row: e.row, reason: e.reason.clone() })
        .collect();
    let measurand = match study.measured.form {
        Form::Rates => Some(Measurand::RateConstant),
        Form::Times => Some(Measurand::Time),
        Form::HeatRates => Some(Measurand::HeatRate),
        Form::Progress | Form::Peaks | Form::KnownLaw => None,
    };
    let mut rates = measurand.map_or_else(Rates::default, |measurand| {
        rates(table, measurand, &excluded, study.measured.error_is)
    });

    let mut courses = Courses::read(study, table, &excluded);
    if study.measured.form == Form::Progress {
        rates = courses.rates();
    }

    let Ground { basis, refusal, mut remarks, order, rivals, alternatives, grouped, choices } =
        basis::lay(study, &mut rates, &mut courses);
    let answers: Vec<Answer> = (0..study.asked.len())
        .map(|at| question::answer_among(&study.asked, at, basis.as_ref().ok_or(&refusal)))
        .collect();
    remarks.extend(own_remarks(study, &rates, basis.as_ref(), grouped.as_ref(), &answers));
    remarks.extend(doubts(study, table));
    if let Some(remark) = basis.as_ref().and_then(|basis| courses.disagreement(basis)) {
        // It says of curves what that one says of stated errors.
        remarks.retain(|other| other.code != "excess-scatter");
        remarks.push(remark);
    }
    sort_by(&mut remarks, |remark| f64::from(remark.severity as u8));

    let level = level(study).unwrap_or(USUAL_LEVEL);
    let mut problems = study.problems.clone();
    if study.measured.form != Form::KnownLaw {
        problems.extend(table.problems.iter().cloned());
        problems.extend(rates.problems.iter().cloned());
    }
    let mut findings = Findings {
        kelvinclock_findings: super::VERSION,
        read: read(study, table, &rates, basis.as_ref(), (order, choices)),
        problems,
        runs: runs(&rates, basis.as_ref(), order, level),
        law: basis
            .as_ref()
            .map(|basis| LawFindings::of(basis, &alternatives, &study.measured.assumed))
            .map(|law| LawFindings { groups: grouped.map(|grouped| grouped.groups), ..law }),
        one_stage: basis
            .as_ref()
            .and_then(|basis| courses.one_stage(basis))
            .map(|basis| LawFindings::of(&basis, &[], &[])),
        rivals: rivals.iter().map(|rival| super::Rival::of(rival, order)).collect(),
        remarks,
        answers,
        record: record::empty(&study.measured.text),
    };
    for (run, course) in findings.runs.iter_mut().zip(&courses.fitted) {
        run.course = Some(CourseFindings::of(course));
    }
    findings.read.choices.append(&mut courses.choices);
    record::write(study, &mut findings);
    Evaluation { findings, basis, rates, courses: courses.fitted }
}

/// What was decided in reading that could as well be otherwise and would change every answer.
fn doubts(study: &Study, table: &Table) -> Vec<Remark> {
    if study.measured.form == Form::KnownLaw {
        return Vec::new();
    }
    let remark = |sentence: &str, remedy: &str| {
        Remark::new("decimal-mark", Severity::Caution, sentence, remedy)
    };
    let choices = table.choices.iter();
    choices.filter_map(|c| Some(remark(&c.sentence, c.remedy.as_deref()?))).collect()
}

fn own_remarks(
    study: &Study,
    rates: &Rates,
    basis: Option<&Basis>,
    grouped: Option<&Grouped>,
    answers: &[Answer],
) -> Vec<Remark> {
    let Some(basis) = basis else { return Vec::new() };
    let run_names: Vec<String> = match grouped {
        None => rates.runs.iter().map(run_name).collect(),
        Some(grouped) => grouped.members.iter().map(|cell| group_name(cell, rates)).collect(),
    };
    let stated = &study.measured.stated_activation_energy;
    remarks(&Evidence {
        observations: &basis.law.runs,
        run_names: &run_names,
        read_as_kelvin: rates.temperature_unit == Some(TemperatureUnit::Kelvin),
        stated_activation_energy: stated.as_ref().and_then(|q| q.joules_per_mole().ok()),
        basis,
        answers,
    })
}

fn run_name(run: &Run) -> String {
    format!("The run at {} (row {})", run.name, run.row)
}

/// Runs of one group at one temperature.
fn group_name(cell: &[usize], rates: &Rates) -> String {
    let runs: Vec<&Run> = cell.iter().filter_map(|run| rates.runs.get(*run)).collect();
    match runs.as_slice() {
        [single] => run_name(single),
        several => {
            let rows: Vec<String> = several.iter().map(|run| run.row.to_string()).collect();
            let name = several.first().map(|run| run.name.as_str()).unwrap_or_default();
            format!("The group at {name} (rows {})", rows.join(", "))
        }
    }
}

fn read(
    study: &Study,
    table: &Table,
    rates: &Rates,
    basis: Option<&Basis>,
    (order, choices): (Option<f64>, Vec<String>),
) -> Read {
    let is_table = study.measured.form != Form::KnownLaw;
    Read {
        form: study.measured.form,
        decimal: is_table.then_some(table.decimal),
        columns: if is_table { table.columns.clone() } else { Vec::new() },
        rows_read: rates.runs.len(),
        rows_excluded: rates
            .left_out
            .iter()
            .map(|row| super::Excluded { row: row.row, reason: row.reason.clone() })
            .collect(),
        order,
        scatter: basis.map(|b| b.law.scatter),
        choices: if is_table {
            table.choices.iter().map(|choice| choice.sentence.clone()).chain(choices).collect()
        } else {
            Vec::new()
        },
    }
}

fn runs(rates: &Rates, basis: Option<&Basis>, order: Option<f64>, level: f64) -> Vec<RunFindings> {
    if rates.are_bare_times() {
        return Vec::new();
    }
    let unit = rates.unit.map(|unit| unit.base().code()).unwrap_or_default();
    rates
        .runs
        .iter()
        .map(|run| RunFindings {
            label: run.name.clone(),
            row: run.row,
            temperature_kelvin: run.observation.temperature.0,
            rate_constant: super::findings::stated_rate(run, &unit, level),
            course: None,
            order,
            ln_residual: basis
                .map(|b| run.observation.ln_rate - b.law.ln_rate(run.observation.temperature)),
            group: (!run.groups.is_empty()).then(|| {
                let names: Vec<&str> = run.groups.iter().map(|(_, name)| name.as_str()).collect();
                names.join(", ")
            }),
        })
        .collect()
}
