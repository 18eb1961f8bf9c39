//! An answer: its headline large, its scatter beside it, and what it stands on below; a list as
//! a table; a refusal with its remedy.

use kinetics_core::answer::{Answer, capitalised};
use kinetics_core::question::Question;
use kinetics_core::wording::typed;
use leptos::prelude::*;

use super::super::pictures::quantities;
use super::super::sheet::Sheet;

/// The answer to the question at a place of the list.
pub fn answer(sheet: Sheet, at: usize) -> AnyView {
    let answer = Memo::new(move |_| sheet.evaluation().findings.answers.get(at).cloned());
    let shown = move || {
        let decimal = untrack(|| sheet.decimal());
        answer.get().map(|answer| match (&answer.refused, &answer.rows) {
            // Why there is no law, Found says at length.
            (Some(refusal), _) if untrack(|| sheet.evaluation().basis.is_none()) => {
                view! { <p class="refused remedy">{refusal.reason.clone()}</p> }.into_any()
            }
            (Some(_), _) => refused(&answer),
            (None, Some(rows)) => table(&answer.question, rows, decimal),
            (None, None) => alone(&answer),
        })
    };
    shown.into_any()
}

fn refused(answer: &Answer) -> AnyView {
    let refusal = answer.refused.clone();
    let (reason, needs) = refusal.map(|r| (r.reason, r.needs)).unwrap_or_default();
    view! { <p class="refused">{reason} " " <span class="remedy">{needs}</span></p> }.into_any()
}

fn alone(answer: &Answer) -> AnyView {
    let wording = answer.wording.clone();
    view! {
        <p class="headline">
            <span class="big">{wording.headline}</span>
            " "
            <span class="scatter-words">{wording.scatter}</span>
        </p>
        <p class="stands">{grounds(answer)}</p>
    }
    .into_any()
}

/// "**far from the data** · 25 K below your coldest run · if another law holds: 32 to 67 h".
fn grounds(answer: &Answer) -> AnyView {
    let name = answer.grounds.map(|grounds| grounds.name()).unwrap_or_default();
    let standing = answer.wording.standing.as_str();
    let rival = answer.wording.rival.as_str();
    // "inside the data" need not be said twice.
    let standing = if standing == "inside your data" { "" } else { standing };
    let rest: String = [standing, rival]
        .iter()
        .filter(|part| !part.is_empty())
        .map(|part| format!(" · {part}"))
        .collect();
    view! { <strong>{name}</strong> {rest} }.into_any()
}

fn table(code: &str, rows: &[Answer], decimal: char) -> AnyView {
    let blanks = Question::of_code(code).map(|question| question.blanks).unwrap_or_default();
    let heads: Vec<AnyView> = blanks
        .iter()
        .map(|blank| {
            let name = capitalised(&blank.name.replace('_', " ")).to_lowercase();
            view! { <th scope="col">{name}</th> }.into_any()
        })
        .collect();
    let rows: Vec<AnyView> = rows
        .iter()
        .map(|row| {
            let cells: Vec<AnyView> = blanks
                .iter()
                .map(|blank| {
                    let filled = row.blanks.as_ref().map(|b| quantities(b, blank.name));
                    let words = typed(&filled.unwrap_or_default(), decimal);
                    view! { <td>{words}</td> }.into_any()
                })
                .collect();
            let said = match &row.refused {
                Some(_) => refused(row),
                None => view! {
                    <span class="big">{row.wording.headline.clone()}</span>
                    <br/>
                    <span class="small">{row.wording.scatter.clone()} " · " {grounds(row)}</span>
                }
                .into_any(),
            };
            view! { <tr>{cells}<td>{said}</td></tr> }.into_any()
        })
        .collect();
    view! {
        <div class="answers">
            <table>
                <thead><tr>{heads}<th scope="col">"answer"</th></tr></thead>
                <tbody>{rows}</tbody>
            </table>
        </div>
    }
    .into_any()
}
