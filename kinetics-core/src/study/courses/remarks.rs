//! What fitted courses give away.

use super::{Basis, Course, Level, ProgressRun, Remark, Settings, Severity};
use crate::numeric::distributions::f_tail;
use crate::rate_constant::aicc_of;
use crate::temperature_law::Scatter;

/// A free end is worth its parameters when it lowers AICc by more than this.
const WORTH_IT: f64 = 4.0;

/// Adds what is noticed in the courses.
pub(super) fn add(courses: &[Course], settings: &Settings, remarks: &mut Vec<Remark>) {
    remarks.extend(levels_off(courses, settings));
}

/// Below this probability scatter is no chance.
const SIGNIFICANCE: f64 = 0.05;

/// Q, the sum of squares of ln k about the law in units of what the curves allow, beyond its 0.95
/// point: χ² where errors are stated, F where the noise is known from the curves.
pub(super) fn stages_disagree(courses: &[Course], basis: &Basis) -> Option<Remark> {
    if courses.is_empty() {
        return None;
    }
    let (excess, p_stated) = basis.law.chi_squared?;
    let freedom = basis.law.degrees_of_freedom.filter(|freedom| *freedom > 0)? as f64;
    let noise: f64 = courses.iter().map(|course| course.fit.degrees_of_freedom as f64).sum();
    let stated = courses.iter().all(|course| course.run.states_errors());
    let p = if stated { p_stated } else { f_tail(excess / freedom, freedom, noise) };
    (p < SIGNIFICANCE).then(|| {
        let included = basis.law.scatter == Scatter::AsStatedPlusRunToRun;
        Remark::new(
            "stages-disagree",
            if included { Severity::Note } else { Severity::Caution },
            format!(
                "The rate constants scatter about the law more than the noise of their curves \
                 explains: runs differ from one another, {}, and the fit of all curves at once, \
                 which assumes that they do not, is too sure of itself.",
                if included {
                    "which the intervals include"
                } else {
                    "which the intervals leave out"
                }
            ),
            "Look for what differs between runs: temperature, batch, start of the clock.",
        )
    })
}

/// The signal levels off elsewhere than at the end that is given.
fn levels_off(courses: &[Course], settings: &Settings) -> Option<Remark> {
    let Level::Given(end) = settings.end else { return None };
    let runs: Vec<ProgressRun> = courses.iter().map(|course| course.run.clone()).collect();
    let given = aicc_of(&runs, settings)?;
    let free = aicc_of(&runs, &Settings { end: Level::Free, ..*settings })?;
    (given - free > WORTH_IT).then(|| {
        Remark::new(
            "levels-off",
            Severity::Caution,
            format!(
                "The signals level off elsewhere than at {end} (a free end lowers AICc by {:.1}): \
                 rates that assume that end are off.",
                given - free
            ),
            "Let the end be free, or state where the signal ends; a free end alone does not prove \
             that the reaction is reversible.",
        )
    })
}
