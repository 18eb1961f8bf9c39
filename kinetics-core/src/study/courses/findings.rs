//! What the findings say of a fitted curve.

use serde::Serialize;

use super::Course;

/// A fitted progress curve.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct CourseFindings {
    /// How many points were fitted.
    pub points: usize,
    /// Points minus parameters.
    pub run_degrees_of_freedom: usize,
    /// Standard deviation of the noise: of the signal, or relative, or in stated errors.
    pub residual_sd: Option<f64>,
    /// How the fit ended; a fit that did not converge gives no run but a problem with its reason.
    pub termination: &'static str,
    /// The signal at time zero.
    pub start: f64,
    /// The signal when all has reacted.
    pub end: f64,
    /// κ of the fitted curve, start + (end − start)·X(κt), 1/s.
    pub reduced_rate_constant: f64,
    /// The fraction gone at the last point.
    pub extent_followed: f64,
    /// Times of the points, s.
    pub times_seconds: Vec<f64>,
    /// Signals, in the base unit of their kind.
    pub signals: Vec<f64>,
    /// Measured minus fitted signals.
    pub residuals: Vec<f64>,
}

impl CourseFindings {
    /// What there is to say of a course.
    pub fn of(course: &Course) -> Self {
        let (points, fit) = (&course.run.points, &course.fit);
        Self {
            points: points.len(),
            run_degrees_of_freedom: fit.degrees_of_freedom,
            residual_sd: fit.residual_sd,
            termination: "converged",
            start: fit.start,
            end: fit.end,
            reduced_rate_constant: libm::exp(fit.ln_reduced_rate),
            extent_followed: fit.extent,
            times_seconds: points.iter().map(|point| point.time_seconds).collect(),
            signals: points.iter().map(|point| point.signal).collect(),
            residuals: fit.residuals.clone(),
        }
    }
}
