//! A quiet menu: what is chosen reads as a part of the text around it, and is as wide.

use leptos::html::Select;
use leptos::prelude::*;

/// One line of a menu.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Choice {
    /// What a choice of it hands over.
    pub value: String,
    /// What it reads as.
    pub text: String,
    /// The heading under which it stands; empty for none.
    pub group: &'static str,
}

impl Choice {
    /// A line under no heading.
    pub fn new(value: impl Into<String>, text: impl Into<String>) -> Self {
        Self { value: value.into(), text: text.into(), group: "" }
    }

    /// The same under a heading.
    #[must_use]
    pub fn under(self, group: &'static str) -> Self {
        Self { group, ..self }
    }
}

/// A menu that shows what is chosen and hands over what the user picks.
pub fn menu(
    label: Signal<String>,
    choices: Signal<Vec<Choice>>,
    chosen: Signal<String>,
    pick: impl Fn(String) + 'static,
) -> AnyView {
    let node = NodeRef::<Select>::new();
    // After the lines are in place: a menu cannot show a line that it does not have yet.
    Effect::new(move |_| {
        choices.track();
        let chosen = chosen.get();
        if let Some(select) = node.get() {
            select.set_value(&chosen);
        }
    });
    let shown = move || {
        let chosen = chosen.get();
        choices.with(|all| {
            all.iter().find(|c| c.value == chosen).map(|c| c.text.clone()).unwrap_or_default()
        })
    };
    view! {
        <span class="menu" data-text=shown>
            <select
                node_ref=node
                aria-label=move || label.get()
                on:change=move |event| {
                    pick(event_target_value(&event));
                    // What was not accepted is shown as it was.
                    if let Some(select) = node.get_untracked() {
                        select.set_value(&chosen.get_untracked());
                    }
                }
            >
                {move || lines(choices.get())}
            </select>
        </span>
    }
    .into_any()
}

/// The lines, those of a heading together under it.
fn lines(choices: Vec<Choice>) -> Vec<AnyView> {
    let mut lines = Vec::new();
    for group in choices.chunk_by(|a, b| a.group == b.group) {
        let options: Vec<AnyView> = group
            .iter()
            .map(|c| view! { <option value=c.value.clone()>{c.text.clone()}</option> }.into_any())
            .collect();
        match group.first().map(|choice| choice.group) {
            Some("") | None => lines.extend(options),
            Some(heading) => {
                lines.push(view! { <optgroup label=heading>{options}</optgroup> }.into_any());
            }
        }
    }
    lines
}
