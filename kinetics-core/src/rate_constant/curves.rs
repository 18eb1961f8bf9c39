//! The signals of one or several runs as a model with its linear parameters apart.

use std::ops::Range;

use nalgebra::{DMatrix, DVector};

use super::Settings;
use crate::measurements::ProgressRun;
use crate::numeric::nonlinear::Expansion;
use crate::rate_law::RateLaw;

/// What is known of the signal at one end of its course.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Level {
    /// Found for each run.
    Free,
    /// Found once for all runs.
    Shared,
    /// Given, in the unit of the signals.
    Given(f64),
}

/// Runs under one rate law, ln κ of run i being constant_i + Σ design_ij p_j.
pub(super) struct Curves<'a> {
    pub runs: Vec<&'a ProgressRun>,
    law: RateLaw,
    start: Level,
    end: Level,
    design: DMatrix<f64>,
    constant: DVector<f64>,
}

/// Beyond this a rate or its inverse is no number any more.
const LARGEST_LN_RATE: f64 = 300.0;

impl<'a> Curves<'a> {
    /// Each run with a ln κ of its own.
    pub fn separate(runs: &[&'a ProgressRun], settings: &Settings) -> Self {
        let design = DMatrix::identity(runs.len(), runs.len());
        Self::along(runs, settings, design, DVector::zeros(runs.len()))
    }

    /// ln κ of all runs along a law: `design` has a row for each run.
    pub fn along(
        runs: &[&'a ProgressRun],
        settings: &Settings,
        design: DMatrix<f64>,
        constant: DVector<f64>,
    ) -> Self {
        let Settings { law, start, end, .. } = *settings;
        Self { runs: runs.to_vec(), law, start, end, design, constant }
    }

    pub fn observed(&self) -> Vec<f64> {
        self.runs.iter().flat_map(|run| run.points.iter().map(|point| point.signal)).collect()
    }

    pub fn states_errors(&self) -> bool {
        self.runs.iter().all(|run| run.states_errors())
    }

    /// Which of all points belong to a run.
    pub fn points(&self, run: usize) -> Range<usize> {
        let before: usize = self.runs[..run].iter().map(|run| run.points.len()).sum();
        before..before + self.runs[run].points.len()
    }

    pub fn ln_reduced_rate(&self, run: usize, parameters: &[f64]) -> f64 {
        let row = self.design.row(run);
        self.constant[run] + row.iter().zip(parameters).map(|(d, p)| d * p).sum::<f64>()
    }

    /// The linear parameter that is a run's start.
    fn start_column(&self, run: usize) -> Option<usize> {
        match self.start {
            Level::Free => Some(run),
            Level::Shared => Some(0),
            Level::Given(_) => None,
        }
    }

    fn end_column(&self, run: usize) -> Option<usize> {
        let starts = match self.start {
            Level::Free => self.runs.len(),
            Level::Shared => 1,
            Level::Given(_) => 0,
        };
        match self.end {
            Level::Free => Some(starts + run),
            Level::Shared => Some(starts),
            Level::Given(_) => None,
        }
    }

    fn linear_count(&self) -> usize {
        let last = self.runs.len().saturating_sub(1);
        self.end_column(last).or(self.start_column(last)).map_or(0, |column| column + 1)
    }

    /// Start and end of a run's signal.
    pub fn levels(&self, run: usize, linear: &[f64]) -> (f64, f64) {
        let level = |level: Level, column: Option<usize>| match level {
            Level::Given(value) => value,
            _ => column.and_then(|at| linear.get(at)).copied().unwrap_or(f64::NAN),
        };
        (level(self.start, self.start_column(run)), level(self.end, self.end_column(run)))
    }

    /// Gradient of ln κ + `by_start`·(start − end) of a run in all parameters, nonlinear first.
    pub fn gradient(&self, run: usize, by_start: f64) -> DVector<f64> {
        let searched = self.design.ncols();
        let mut gradient = DVector::zeros(searched + self.linear_count());
        for (j, slope) in self.design.row(run).iter().enumerate() {
            gradient[j] = *slope;
        }
        if let Some(column) = self.start_column(run) {
            gradient[searched + column] = by_start;
        }
        if let Some(column) = self.end_column(run) {
            gradient[searched + column] = -by_start;
        }
        gradient
    }

    pub fn extent_followed(&self, run: usize, ln_reduced_rate: f64) -> f64 {
        let last = self.runs[run].points.last().map_or(0.0, |point| point.time_seconds);
        self.law.reached(libm::exp(ln_reduced_rate) * last).extent
    }

    /// The model around ln κ's parameters; none where a rate is no number.
    pub fn expand(&self, parameters: &[f64]) -> Option<Expansion> {
        let count = self.runs.iter().map(|run| run.points.len()).sum();
        let mut expansion = Expansion::zeros(count, self.design.ncols(), self.linear_count());
        let all = self.law.final_extent();
        for (i, run) in self.runs.iter().enumerate() {
            let ln_rate = self.ln_reduced_rate(i, parameters);
            if !(ln_rate.abs() < LARGEST_LN_RATE) {
                return None;
            }
            let rate = libm::exp(ln_rate);
            for (row, point) in self.points(i).zip(&run.points) {
                let theta = rate * point.time_seconds;
                let reached = self.law.reached(theta);
                let share = reached.extent / all;
                let slope = theta * reached.by_theta / all;
                let parts = [
                    (self.start, self.start_column(i), 1.0 - share, -slope),
                    (self.end, self.end_column(i), share, slope),
                ];
                for (level, column, part, slope) in parts {
                    self.add(&mut expansion, (row, i), (level, column), (part, slope));
                }
            }
        }
        Some(expansion)
    }

    /// Adds level·part at a point of a run, with the slope of the part in ln κ.
    fn add(
        &self,
        expansion: &mut Expansion,
        (row, run): (usize, usize),
        (level, column): (Level, Option<usize>),
        (part, slope): (f64, f64),
    ) {
        let slopes = self.design.row(run);
        if let Level::Given(value) = level {
            expansion.offset[row] += value * part;
            for (j, d) in slopes.iter().enumerate() {
                expansion.offset_derivatives[(row, j)] += value * slope * d;
            }
        } else if let Some(column) = column {
            expansion.basis[(row, column)] += part;
            for (derivatives, d) in expansion.basis_derivatives.iter_mut().zip(slopes.iter()) {
                derivatives[(row, column)] += slope * d;
            }
        }
    }
}
