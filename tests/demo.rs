//! The demo studies open, are labelled as invented, and answer what they ask or refuse in words.

#![allow(clippy::unwrap_used)]

use kinetics_core::study::{Study, evaluate};

#[test]
fn demo_studies_open_and_answer() {
    let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/../www-demo");
    let mut studies = 0;
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.extension().is_none_or(|extension| extension != "json") {
            continue;
        }
        studies += 1;
        let study = Study::from_json(&std::fs::read_to_string(&path).unwrap()).unwrap();
        assert!(study.title.contains("invented"), "{path:?}");
        assert!(study.problems.is_empty(), "{path:?} {:?}", study.problems);
        let findings = evaluate(&study);
        assert!(findings.law.is_some() && findings.problems.is_empty(), "{path:?}");
        for answer in &findings.answers {
            let rows = answer.rows.iter().flatten().filter(|row| row.value.is_some()).count();
            let said = answer.refused.as_ref().is_some_and(|r| r.needs.ends_with('.'));
            assert!(answer.value.is_some() || rows > 0 || said, "{path:?} {answer:?}");
        }
    }
    assert!(studies >= 3);
}
