//! An answer: its headline large, its scatter beside it, and what it stands on below; a list as
//! a table; a refusal with its remedy.

use kinetics_core::answer::Answer;
use kinetics_core::question::Question;

use super::super::part::{Part, part};
use super::super::pictures::{filled, has_gap};
use super::super::sheet::Sheet;

/// The answer to the question at a place of the list.
pub fn answer(sheet: Sheet, at: usize) -> Part {
    let now = move || {
        let evaluation = sheet.evaluation();
        let answer = evaluation.findings.answers.get(at).cloned();
        let has_gap = sheet.study().asked.get(at).is_some_and(has_gap);
        (answer, evaluation.basis.is_some(), has_gap, sheet.decimal())
    };
    let content = part("div").with("aria-live", "polite").with("aria-atomic", "true");
    content.filled(now, |(answer, has_law, has_gap, decimal)| {
        let Some(answer) = answer else { return Vec::new() };
        match (&answer.refused, &answer.rows) {
            // What is expected in the blank, its sentence says.
            (Some(refusal), _) if *has_gap => {
                vec![part("p").class("refused").text("Not answered. ").text(&refusal.reason)]
            }
            // Why there is no law, Found says at length.
            (Some(refusal), _) if !has_law => {
                vec![part("p").class("refused remedy").text(&refusal.reason)]
            }
            (Some(_), _) => vec![refused(answer)],
            (None, Some(rows)) => vec![table(&answer.question, rows, *decimal)],
            (None, None) => alone(answer),
        }
    })
}

fn refused(answer: &Answer) -> Part {
    let (reason, needs) =
        answer.refused.as_ref().map_or(("", ""), |r| (r.reason.as_str(), r.needs.as_str()));
    let remedy = part("span").class("remedy").text(needs);
    part("p").class("refused").text(reason).text(" ").add(remedy)
}

fn alone(answer: &Answer) -> Vec<Part> {
    let wording = &answer.wording;
    let headline = part("p")
        .class("headline")
        .add(part("span").class("big").text(&wording.headline))
        .text(" ")
        .add(part("span").class("scatter-words").text(&wording.scatter));
    vec![headline, grounds(part("p").class("stands"), answer)]
}

/// "**far from the data** · 25 K below your coldest run · if another law holds: 32 to 67 h".
fn grounds(into: Part, answer: &Answer) -> Part {
    let name = answer.grounds.map(|grounds| grounds.name()).unwrap_or_default();
    let standing = answer.wording.standing.as_str();
    let (rival, offset) = (answer.wording.rival.as_str(), answer.wording.offset.as_str());
    // "inside the data" need not be said twice.
    let standing = if standing == "inside your data" { "" } else { standing };
    let rest: String = [standing, rival, offset]
        .iter()
        .filter(|part| !part.is_empty())
        .map(|part| format!(" · {part}"))
        .collect();
    into.add(part("strong").text(name)).text(&rest)
}

fn table(code: &str, rows: &[Answer], decimal: char) -> Part {
    let blanks = Question::of_code(code).map(|question| question.blanks).unwrap_or_default();
    let head = |name: &str| part("th").with("scope", "col").text(name);
    let heads = part("tr")
        .add_all(blanks.iter().map(|blank| head(&blank.name.replace('_', " "))))
        .add(head("answer"));
    let rows = rows.iter().map(|row| {
        let cells = blanks.iter().map(|blank| {
            let words = row.blanks.as_ref().map(|blanks| filled(blanks, blank, decimal));
            part("td").text(&words.unwrap_or_default())
        });
        let said = match &row.refused {
            Some(_) => part("td").add(refused(row)),
            None => {
                let scatter = part("span").class("small").text(&row.wording.scatter).text(" · ");
                part("td")
                    .add(part("span").class("big").text(&row.wording.headline))
                    .add(part("br"))
                    .add(grounds(scatter, row))
            }
        };
        part("tr").add_all(cells).add(said)
    });
    let table = part("table").add(part("thead").add(heads)).add(part("tbody").add_all(rows));
    part("div").class("answers").add(table)
}
