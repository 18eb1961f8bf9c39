//! Links that hold a whole study: opening them, following them, making them.

use kinetics_core::study::Study;

use super::carry::Carrier;
use super::keeping::Keeping;
use super::part::on_window;
use super::sheet::Sheet;
use super::timer::after;
use crate::keep::fragment::{self, Fragment};

/// Some programs cut longer addresses off.
pub const MOST_LETTERS: usize = 2_000;

/// The study of a link, or a sentence about what is wrong with it.
pub async fn study(packed: String) -> Result<Study, String> {
    let text = fragment::unpack(&packed).await.map_err(|why| {
        format!(
            "The study in the link cannot be read: {why}. Ask for the link again, or for the \
             study as a file."
        )
    })?;
    Study::from_json(&text).map_err(|error| format!("The link holds something else. {error}"))
}

/// Follows the page's address: a new link in it is opened, and undo brings the old study back.
pub fn listen(sheet: Sheet, keeping: &Keeping) {
    let keeping = keeping.clone();
    on_window("hashchange", move || {
        let fragment = Fragment::now();
        sheet.appear(fragment.view, fragment.is_locked);
        let Some(packed) = fragment.packed.clone() else { return };
        let keeping = keeping.clone();
        after(study(packed), move |study| {
            // Of two links in a row, the later counts.
            if fragment != Fragment::now() {
                return;
            }
            match study {
                Ok(study) => {
                    keeping.turn_to_address();
                    sheet.open(study);
                    sheet.tell("The study of the link is opened.");
                }
                Err(complaint) => sheet.tell(complaint),
            }
        });
    });
}

/// Copies a link to the study as it is.
pub fn copy(sheet: Sheet, carrier: &Carrier) {
    let carrier = carrier.clone();
    after(fragment::pack(sheet.study().to_value().to_string()), move |packed| {
        match packed.and_then(|packed| fragment::link(&packed)) {
            Some(link) => {
                let said = advice(link.len());
                carrier.copy(link, None, said);
            }
            None => sheet.tell(
                "There is no link here, since this page has no address of its own: save the study \
                 as a file.",
            ),
        }
    });
}

fn advice(letters: usize) -> String {
    if letters <= MOST_LETTERS {
        return "The link is copied. It holds the whole study.".to_owned();
    }
    format!(
        "The link is copied, but has {letters} characters: some programs cut links after \
         {MOST_LETTERS}. The saved file is the surer way."
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_long_link_comes_with_a_word_about_the_file() {
        assert!(!advice(MOST_LETTERS).contains("file"));
        assert!(
            advice(MOST_LETTERS + 1).contains("2001 characters") && advice(9999).contains("file")
        );
    }
}
