//! Under the table: what was decided on the user's behalf, and what could not be used.

use leptos::prelude::*;

use super::super::sheet::Sheet;

/// More than this in a list is counted, not shown.
const MOST: usize = 40;

/// The lists.
pub fn notes(sheet: Sheet) -> AnyView {
    let problems = Memo::new(move |_| {
        let evaluation = sheet.evaluation();
        let problems = &evaluation.findings.problems;
        let shown = problems.iter().take(MOST).map(|problem| problem.sentence.clone());
        (problems.len(), shown.collect::<Vec<String>>())
    });
    let choices = Memo::new(move |_| sheet.evaluation().findings.read.choices.clone());
    let list = |(count, shown): (usize, Vec<String>)| {
        let mut items: Vec<AnyView> =
            shown.into_iter().map(|said| view! { <li>{said}</li> }.into_any()).collect();
        if count > MOST {
            items.push(view! { <li>{format!("and {} more.", count - MOST)}</li> }.into_any());
        }
        items
    };
    let heading = move || match problems.with(|problems| problems.0) {
        1 => "One thing could not be used".to_owned(),
        count => format!("{count} things could not be used"),
    };
    view! {
        <ul class="choices">
            {move || list(choices.with(|all| (all.len(), all.iter().take(MOST).cloned().collect())))}
        </ul>
        <Show when=move || problems.with(|problems| problems.0 > 0)>
            <details class="not-used" open=true>
                <summary>{heading}</summary>
                <ul>{move || list(problems.get())}</ul>
            </details>
        </Show>
    }
    .into_any()
}
