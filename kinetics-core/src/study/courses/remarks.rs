//! What fitted courses give away.

use super::{Course, Level, ProgressRun, Remark, Settings, Severity};
use crate::rate_constant::aicc_of;

/// A free end is worth its parameters when it lowers AICc by more than this.
const WORTH_IT: f64 = 4.0;

/// Adds what is noticed in the courses.
pub(super) fn add(courses: &[Course], settings: &Settings, remarks: &mut Vec<Remark>) {
    remarks.extend(levels_off(courses, settings));
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
