//! What a new user sees: an invented study, already evaluated.

use kinetics_core::study::Study;

/// The title of the example, by which it is known until the user begins with data of their own.
const TITLE: &str = "Glaze hardener, batch 7 (invented example)";

/// A hardener of a small maker of glazes: six rate constants and three questions. Invented.
const STUDY: &str = r#"{
"kelvinclock": 1,
"title": "Glaze hardener, batch 7 (invented example)",
"measured": {"text": "T/°C\tk / 10^-3 h^-1\ts(k) / 10^-3 h^-1\n50\t18.4\t0.9\n55\t33.2\t1.7\n60\t54.7\t2.7\n65\t81.9\t4.1\n70\t133\t6.7\n78\t275\t13.7\n"},
"asked": [
{"question": "time-to-extent", "temperature": {"value": 25, "unit": "°C"}, "gone": {"value": 5, "unit": "%"}},
{"question": "longest-stand", "temperature": {"value": 40, "unit": "°C"}, "keep": {"value": 98, "unit": "%"}},
{"question": "temperature-for", "gone": {"value": 99, "unit": "%"}, "time": {"value": 8, "unit": "h"}}
]}"#;

/// The example's study.
pub fn study() -> Study {
    Study::from_json(STUDY).unwrap_or_default()
}

/// Whether the study is the example, however much it was played with.
pub fn is_shown(study: &Study) -> bool {
    study.title == TITLE
}

/// Takes away what only the example asks and is called; its first question is one that everybody
/// has, and what the user asked stays.
pub fn leave(study: &mut Study) {
    study.title.clear();
    let of_example = self::study().asked;
    let special = of_example.get(1..).unwrap_or_default();
    study.asked.retain(|asked| !special.contains(asked));
}

#[cfg(test)]
mod tests {
    use serde_json::json;

    use super::*;

    #[test]
    fn ones_own_questions_outlast_the_example() {
        let mut study = study();
        study.asked[2]["time"]["value"] = json!(24);
        let kept = vec![study.asked[0].clone(), study.asked[2].clone()];
        leave(&mut study);
        assert_eq!(study.asked, kept);
        assert!(!is_shown(&study));
    }

    #[test]
    fn the_example_is_read_and_answered_without_a_complaint() {
        let findings = kinetics_core::study::evaluate(&study());
        assert_eq!(findings.runs.len(), 6);
        assert!(findings.problems.is_empty(), "{:?}", findings.problems);
        assert!(findings.law.is_some());
        assert_eq!(findings.answers.len(), 3);
        for answer in &findings.answers {
            assert!(answer.refused.is_none() && answer.value.is_some(), "{answer:?}");
        }
    }
}
