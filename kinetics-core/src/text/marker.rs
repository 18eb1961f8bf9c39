//! Words that stand in a cell instead of a number, and signs beside one.

/// What a word in place of a number says.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Marker {
    /// Below a limit of detection or quantitation.
    BelowLimit,
    /// Not measured, not determined, lost.
    NotDetermined,
}

/// Below a limit, without the limit.
const BELOW: &[&str] = &[
    "loq",
    "lod",
    "lloq",
    "blq",
    "bloq",
    "bql",
    "bdl",
    "blod",
    "nq",
    "below loq",
    "below lod",
    "below limit",
    "below detection",
    "not quantifiable",
    "<bg",
    "<ng",
    "<nwg",
];

/// No value.
const NOT_DETERMINED: &[&str] = &[
    "nd",
    "na",
    "n/a",
    "n/d",
    "nan",
    "null",
    "none",
    "missing",
    "nm",
    "nb",
    "ka",
    "lost",
    "failed",
    "not determined",
    "not measured",
    "not available",
    "tbd",
    "-",
    "--",
    "---",
    ".",
    "..",
    "…",
    "?",
    "nr",
    "#n/a",
    "#nv",
];

/// The meaning of a cell that is one of the usual words; none for anything else.
#[must_use]
pub fn marker(cell: &str) -> Option<Marker> {
    if cell.len() > 40 {
        return None;
    }
    let lower = cell.to_ascii_lowercase();
    let word: String = lower
        .trim_start_matches(['<', '≤'])
        .trim_matches(|character: char| {
            super::is_blank(character) || matches!(character, '(' | ')' | '[' | ']')
        })
        .chars()
        .map(|character| if matches!(character, '−' | '–' | '—') { '-' } else { character })
        .collect();
    // "n.d." and "n. d." and "nd" are one word; "." alone is another.
    let bare: String =
        word.chars().filter(|character| *character != '.' && *character != ' ').collect();
    let known = |list: &[&str]| {
        list.contains(&word.as_str()) || (bare.len() > 1 && list.contains(&bare.as_str()))
    };
    if known(BELOW) {
        Some(Marker::BelowLimit)
    } else if known(NOT_DETERMINED) && !lower.starts_with(['<', '≤']) {
        Some(Marker::NotDetermined)
    } else {
        None
    }
}

/// Signs that send the reader to a footnote: `*`, `†`, `#`, a raised letter.
#[must_use]
pub fn is_mark(character: char) -> bool {
    matches!(
        character,
        '*' | '†'
            | '‡'
            | '§'
            | '¶'
            | '#'
            | '!'
            | '?'
            | '~'
            | '≈'
            | 'ᵃ'
            | 'ᵇ'
            | 'ᶜ'
            | 'ᵈ'
            | 'ᵉ'
            | 'ª'
    )
}

/// Cuts the marks off both ends of a cell; true if there were any.
#[must_use]
pub fn without_marks(cell: &str) -> (&str, bool) {
    let mark_or_blank = |character: char| is_mark(character) || super::is_blank(character);
    let mut kept = cell.trim_matches(super::is_blank);
    let before = kept.len();
    kept = kept.trim_matches(mark_or_blank);
    for bracketed in ["(*)", "[*]"] {
        kept = kept.strip_suffix(bracketed).unwrap_or(kept).trim_end_matches(mark_or_blank);
    }
    for word in ["ca.", "approx.", "about ", "circa "] {
        kept = kept.strip_prefix(word).unwrap_or(kept).trim_start_matches(super::is_blank);
    }
    (kept, kept.len() < before)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn usual_words_are_known() {
        for cell in ["<LOQ", "< LOQ", "BLQ", "<LOD", "n.q.", "below LOQ", "(BDL)"] {
            assert_eq!(marker(cell), Some(Marker::BelowLimit), "{cell}");
        }
        for cell in [
            "n.d.", "n. d.", "ND", "n/a", "N/A", "NA", "NaN", "-", "–", "—", "--", "#N/A", "k.A.",
            ".",
        ] {
            assert_eq!(marker(cell), Some(Marker::NotDetermined), "{cell}");
        }
        for cell in ["", "50", "k", "a", "<5", "note", "<n.d."] {
            assert_eq!(marker(cell), None, "{cell}");
        }
    }

    #[test]
    fn marks_are_cut_from_both_ends() {
        assert_eq!(without_marks("0.0021*"), ("0.0021", true));
        assert_eq!(without_marks("0.0021 **"), ("0.0021", true));
        assert_eq!(without_marks("~50"), ("50", true));
        assert_eq!(without_marks("ca. 50"), ("50", true));
        assert_eq!(without_marks("50 (*)"), ("50", true));
        assert_eq!(without_marks(" 50 "), ("50", false));
        assert_eq!(without_marks("***"), ("", true));
    }
}
