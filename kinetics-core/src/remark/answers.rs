//! Remarks on what was asked.

use super::{Evidence, Remark, Severity};
use crate::answer::Answer;
use crate::grounds::Grounds;
use crate::wording::significant;

/// Every answer with numbers, rows of tables too, with the number of its question from 1.
fn numbered<'a>(answers: &'a [Answer]) -> impl Iterator<Item = (usize, &'a Answer)> {
    answers.iter().enumerate().flat_map(|(i, answer)| {
        let rows: Vec<&'a Answer> = match &answer.rows {
            Some(rows) => rows.iter().collect(),
            None => vec![answer],
        };
        rows.into_iter().map(move |row| (i + 1, row))
    })
}

/// Answers whose grounds are far or beyond; a place recommended for a measurement is the remedy.
pub(super) fn extrapolation(evidence: &Evidence) -> Option<Remark> {
    let reaching: Vec<(usize, Grounds)> = numbered(evidence.answers)
        .filter(|(_, answer)| answer.question != "next-measurement")
        .filter_map(|(number, answer)| Some((number, answer.grounds?)))
        .filter(|(_, grounds)| *grounds >= Grounds::Far)
        .collect();
    let mut numbers: Vec<usize> = reaching.iter().map(|(number, _)| *number).collect();
    numbers.dedup();
    let severity = if reaching.iter().any(|(_, grounds)| *grounds == Grounds::Beyond) {
        Severity::Caution
    } else {
        Severity::Note
    };
    let has_intervals = evidence.basis.law.has_intervals();
    let sentence = match numbers.as_slice() {
        [] => return None,
        [one] => {
            let but =
                if has_intervals { "its interval knows scatter, not" } else { "nothing tells" };
            format!(
                "Question {one} reaches far outside the data: {but} whether the law still holds there."
            )
        }
        several => {
            let list: Vec<String> = several.iter().map(usize::to_string).collect();
            let but =
                if has_intervals { "their intervals know scatter, not" } else { "nothing tells" };
            format!(
                "Questions {} reach far outside the data: {but} whether the law still holds there.",
                list.join(", ")
            )
        }
    };
    Some(Remark::new(
        "extrapolation",
        severity,
        sentence,
        "Measure nearer to what you ask for, even with one slow run.",
    ))
}

/// A speed-up that the rule of doubling per 10 K misses by more than a factor of 1.5.
pub(super) fn doubling_rule(evidence: &Evidence) -> Option<Remark> {
    const LARGEST_AGREEMENT: f64 = 1.5;
    let off = |answer: &Answer| {
        let rule = answer.detail.get("doubling_rule")?.as_f64()?;
        Some((answer.value?, rule, libm::fabs(libm::log(answer.value? / rule))))
    };
    let (number, (found, rule, misses)) = numbered(evidence.answers)
        .filter(|(_, answer)| answer.question == "speed-up")
        .filter_map(|(number, answer)| Some((number, off(answer)?)))
        .max_by(|a, b| a.1.2.total_cmp(&b.1.2))?;
    if misses <= libm::log(LARGEST_AGREEMENT) {
        return None;
    }
    let decimal = evidence.basis.display.decimal;
    Some(Remark::new(
        "doubling-rule",
        Severity::Note,
        format!(
            "A doubling for every 10\u{a0}K would give {} in question {number}, where your data \
             give {}.",
            significant(rule, 2, decimal),
            significant(found, 2, decimal)
        ),
        "Use the measured law, not the rule.",
    ))
}
