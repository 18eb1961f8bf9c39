//! From a pasted text to lines, fields and numbers, each with its place.
//!
//! Nothing here knows chemistry or roles of columns: [`lines`] cuts the text
//! into records and fields, [`separator`] finds what stands between the fields,
//! [`decimal`] weighs whether the comma or the point marks decimals, and
//! [`number`] reads one field. All of it is linear in the length of the text.

pub mod decimal;
pub mod lines;
pub mod marker;
pub mod number;
mod scan;
pub mod separator;
pub mod stamp;

pub use decimal::Decimal;
pub use number::{Number, Reading, read_cell};
pub use separator::Separator;

/// Characters without a width that creep in with a paste.
pub(crate) fn is_invisible(character: char) -> bool {
    matches!(
        character,
        '\u{200b}'..='\u{200f}' | '\u{202a}'..='\u{202e}' | '\u{2060}' | '\u{2066}'..='\u{2069}' | '\u{feff}' | '\u{ad}'
    )
}

/// In small letters: Latin as western Europe writes it, Greek and Cyrillic, which is what heads are
/// written in. The tables of all other scripts would be as large as the reader of tables.
pub(crate) fn lower(text: &str) -> String {
    let small = |letter: char| {
        let apart = match letter {
            'A'..='Z' | 'À'..='Ö' | 'Ø'..='Þ' | 'Α'..='Ρ' | 'Σ'..='Ϋ' | 'А'..='Я' => 0x20,
            'Ѐ'..='Џ' => 0x50,
            _ => 0,
        };
        char::from_u32(u32::from(letter) + apart).unwrap_or(letter)
    };
    text.chars().map(small).collect()
}

/// White space of any kind, and what cannot be seen.
pub(crate) fn is_blank(character: char) -> bool {
    character.is_whitespace() || is_invisible(character)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn small_letters_are_those_of_unicode() {
        for letter in ('\0'..='\u{ff}').chain('Α'..='Ϋ').chain('Ѐ'..='я') {
            assert_eq!(lower(&letter.to_string()), letter.to_lowercase().to_string(), "{letter}");
        }
    }
}
