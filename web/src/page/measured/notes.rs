//! Under the table: what was decided on the user's behalf, and what could not be used.

use kinetics_core::problem::Problem;

use super::super::once::once;
use super::super::part::{Part, part};
use super::super::sheet::Sheet;
use super::rows::is_untouched;

/// More than this in a list is counted, not shown.
const MOST: usize = 40;

/// Sentences, and how many there are in all.
type Sentences = (Vec<String>, usize);

/// The lists.
pub fn notes(sheet: Sheet) -> Part {
    let choices = once(sheet, |_, evaluation| {
        some(evaluation.findings.read.choices.iter().map(String::as_str))
    });
    let problems = once(sheet, |study, evaluation| {
        // A table that is about to be typed has nothing wrong yet.
        let found: &[Problem] =
            if is_untouched(study) { &[] } else { &evaluation.findings.problems };
        some(found.iter().map(|problem| problem.sentence.as_str()))
    });
    let count = problems.clone();
    let heading = move || match count().1 {
        1 => "One thing could not be used".to_owned(),
        count => format!("{count} things could not be used"),
    };
    let is_clean = problems.clone();
    let not_used = part("details")
        .class("not-used")
        .with("open", "")
        .is("hidden", move || is_clean().1 == 0)
        .add(part("summary").says(heading))
        .add(part("ul").filled(move || problems(), items));
    part("div").add(part("ul").class("choices").filled(move || choices(), items)).add(not_used)
}

fn some<'a>(sentences: impl ExactSizeIterator<Item = &'a str>) -> Sentences {
    let count = sentences.len();
    (sentences.take(MOST).map(str::to_owned).collect(), count)
}

fn items((sentences, count): &Sentences) -> Vec<Part> {
    let mut items: Vec<Part> = sentences.iter().map(|sentence| part("li").text(sentence)).collect();
    if *count > MOST {
        items.push(part("li").text(&format!("and {} more.", count - MOST)));
    }
    items
}
