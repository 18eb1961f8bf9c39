//! Finds what separates the fields of a text: the separator under which most
//! fields of most lines are numbers, in equally many fields a line.

use std::ops::Range;

use super::lines::{Record, Records, trimmed};
use super::number::looks_numeric;
use serde::{Deserialize, Serialize};

/// What stands between two fields.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Separator {
    /// A tab, as spreadsheets copy.
    Tab,
    /// `;`
    Semicolon,
    /// `|`, with or without one at both ends of the line.
    Bar,
    /// `,`
    Comma,
    /// Two spaces or more.
    WideSpaces,
    /// One space or more.
    Spaces,
}

/// Most lines and bytes that are looked at.
const SAMPLE_LINES: usize = 300;
const SAMPLE_BYTES: usize = 262_144;

impl Separator {
    /// In the order of preference when all else is equal.
    pub const ALL: &[Separator] = &[
        Separator::Tab,
        Separator::Semicolon,
        Separator::Bar,
        Separator::Comma,
        Separator::WideSpaces,
        Separator::Spaces,
    ];

    /// Its name, for sentences.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Separator::Tab => "tabs",
            Separator::Semicolon => "semicolons",
            Separator::Bar => "vertical bars",
            Separator::Comma => "commas",
            Separator::WideSpaces => "runs of spaces",
            Separator::Spaces => "spaces",
        }
    }

    /// The single byte, where it is one.
    pub(super) const fn byte(self) -> Option<u8> {
        match self {
            Separator::Tab => Some(b'\t'),
            Separator::Semicolon => Some(b';'),
            Separator::Bar => Some(b'|'),
            Separator::Comma => Some(b','),
            Separator::WideSpaces | Separator::Spaces => None,
        }
    }

    /// Whether fields are set apart by spaces, which may also stand inside them.
    #[must_use]
    pub const fn is_spaces(self) -> bool {
        self.byte().is_none()
    }

    /// The separator of a text.
    #[must_use]
    pub fn detect(text: &str) -> Separator {
        let sample = text.get(..sample_end(text)).unwrap_or(text);
        if mostly_tabs(sample) {
            return Separator::Tab;
        }
        let mut best = (Separator::Tab, 0.0);
        for separator in Separator::ALL {
            let score = separator.score(sample);
            if score > best.1 {
                best = (*separator, score);
            }
        }
        best.0
    }

    /// Sum over the lines of the usual width of how numeric they are.
    fn score(self, sample: &str) -> f64 {
        let mut records = Records::new(sample, self);
        let mut widths = [0_usize; 32];
        let mut lines: Vec<(usize, f64)> = Vec::new();
        while let Some(record) = records.next(sample) {
            let filled = record.filled();
            if filled < 2 || lines.len() >= SAMPLE_LINES {
                continue;
            }
            let numeric = (0..record.fields.len())
                .filter(|index| looks_numeric(record.field(sample, *index)))
                .count();
            let share = numeric as f64 / filled as f64;
            let width = record.fields.len().min(widths.len() - 1);
            if numeric > 0 {
                widths[width] += 1;
            }
            lines.push((width, share * share));
        }
        let usual = widths
            .iter()
            .enumerate()
            .max_by_key(|(_, count)| **count)
            .map_or(0, |(width, _)| width);
        lines.iter().filter(|(width, _)| *width == usual).map(|(_, share)| share).sum()
    }

    /// `| a | b |` has two fields, not four.
    pub(super) fn drop_edges(self, text: &str, record: &mut Record) {
        if self != Separator::Bar {
            return;
        }
        let line = text.get(record.span.clone()).unwrap_or("").trim();
        if line.ends_with('|') && record.fields.len() > 1 {
            record.fields.pop();
        }
        if line.starts_with('|') && record.fields.len() > 1 {
            record.fields.remove(0);
        }
    }

    /// Cuts a line at its spaces, but not inside `1.2 × 10^-3`, `± 0.1`, `50 °C`.
    pub(super) fn cut_spaces(self, text: &str, record: &mut Record) {
        let span = trimmed(text, record.span.clone());
        let line = text.get(span.clone()).unwrap_or("");
        let mut fields: Vec<Range<usize>> = Vec::new();
        let mut field_start: Option<usize> = None;
        let mut field_end = 0;
        let mut gap = 0;
        for (at, character) in line.char_indices() {
            let blank = character == '\t'
                || character == ' '
                || (self == Separator::WideSpaces && character.is_whitespace());
            if blank {
                gap += if character == '\t' { 2 } else { 1 };
                continue;
            }
            let cut = gap > 0
                && (self == Separator::Spaces || gap >= 2)
                && !belongs_together(line, field_start, field_end, at);
            if cut && let Some(start) = field_start {
                fields.push(span.start + start..span.start + field_end);
                field_start = None;
            }
            field_start = field_start.or(Some(at));
            field_end = at + character.len_utf8();
            gap = 0;
        }
        if let Some(start) = field_start {
            fields.push(span.start + start..span.start + field_end);
        }
        record.fields = fields;
    }
}

/// Whether the space before `next` is part of a number: around `×`, `±` and
/// `·`, before `%` and `°C`, between a date and its time of day.
fn belongs_together(line: &str, start: Option<usize>, end: usize, next: usize) -> bool {
    const JOINING: &[char] = &['×', '±', '·', '*', '⋅', '<', '≤', '∙'];
    let Some(before) = start.and_then(|start| line.get(start..end)) else { return false };
    let after: String = line
        .get(next..)
        .unwrap_or("")
        .chars()
        .take_while(|character| !character.is_whitespace())
        .take(24)
        .collect();
    // A star behind a number is a mark on it.
    let opens = |word: &str| {
        word.starts_with(JOINING)
            && (!word.starts_with(['*', '<', '≤']) || word.starts_with("*10") || word == "*")
    };
    let ends_in_digit = before.ends_with(|last: char| last.is_ascii_digit() || last == ')');
    (ends_in_digit && (opens(&after) || after.starts_with("+/-") || after.starts_with("+-")))
        || before.ends_with(['×', '±', '·', '⋅', '<', '≤', '∙', '~', '≈'])
        || before.ends_with("+/-")
        || before.ends_with("+-")
        || (before.ends_with('*') && after.starts_with("10"))
        || (ends_in_digit
            && after == "x"
            && line
                .get(next..)
                .is_some_and(|rest| rest.trim_start_matches(['x', ' ']).starts_with("10")))
        || (before.ends_with(" x") && after.starts_with("10"))
        || (ends_in_digit && (after == "%" || after.starts_with('°')))
        || (before.len() == 10
            && before.as_bytes().get(4) == Some(&b'-')
            && before.as_bytes().get(7) == Some(&b'-')
            && after.contains(':'))
}

/// Tabs stand in no cell: where most lines have one, they separate.
fn mostly_tabs(sample: &str) -> bool {
    let lines = || {
        sample.split(['\n', '\r']).map(str::trim).filter(|line| !line.is_empty()).take(SAMPLE_LINES)
    };
    let with_tab = lines().filter(|line| line.contains('\t')).count();
    with_tab > 0 && with_tab * 2 > lines().count()
}

fn sample_end(text: &str) -> usize {
    let mut end = text.len().min(SAMPLE_BYTES);
    while !text.is_char_boundary(end) {
        end -= 1;
    }
    end
}

#[cfg(test)]
mod tests {
    use super::*;

    fn fields(line: &str, separator: Separator) -> Vec<String> {
        let mut records = Records::new(line, separator);
        let record = records.next(line).unwrap_or_default();
        (0..record.fields.len()).map(|index| record.field(line, index).to_string()).collect()
    }

    #[test]
    fn each_separator_is_found() {
        for (text, wanted) in [
            ("T\tk\n50\t0.0021\n60\t0.0059", Separator::Tab),
            ("T;k\n50,0;0,0021\n60,0;0,0059", Separator::Semicolon),
            ("T,k\n50,0.0021\n60,0.0059", Separator::Comma),
            ("| T | k |\n|---|---|\n| 50 | 0.0021 |", Separator::Bar),
            ("T / °C   k / h⁻¹\n50   0.0021\n60   0.0059", Separator::WideSpaces),
            ("T k\n50 0,0021\n60 0,0059", Separator::Spaces),
            ("50 1.2 × 10^-3\n60 2.4 × 10^-3", Separator::Spaces),
            ("50, 0.0021\n60, 0.0059", Separator::Comma),
            ("50,5 0,0021 0,0001\n60,5 0,0059 0,0002", Separator::Spaces),
            (" 50   0.0021\n100 0.0059\n120 0.0100", Separator::Spaces),
        ] {
            assert_eq!(Separator::detect(text), wanted, "{text}");
        }
    }

    #[test]
    fn spaces_inside_a_number_do_not_cut_it() {
        assert_eq!(fields("50 1.2 × 10^-3 0.1", Separator::Spaces), ["50", "1.2 × 10^-3", "0.1"]);
        assert_eq!(fields("50 1.2 x 10^-3 0.1", Separator::Spaces), ["50", "1.2 x 10^-3", "0.1"]);
        assert_eq!(fields("50 0.0021 ± 0.0001", Separator::Spaces), ["50", "0.0021 ± 0.0001"]);
        assert_eq!(
            fields("50 0.0021 +/- 0.0001 ok", Separator::Spaces),
            ["50", "0.0021 +/- 0.0001", "ok"]
        );
        assert_eq!(fields("50 °C 95 % 3", Separator::Spaces), ["50 °C", "95 %", "3"]);
        assert_eq!(fields("50 < 0.05", Separator::Spaces), ["50", "< 0.05"]);
        assert_eq!(
            fields("2024-03-01 08:00 95.2", Separator::Spaces),
            ["2024-03-01 08:00", "95.2"]
        );
        assert_eq!(fields("oven 2   12 500   x", Separator::WideSpaces), ["oven 2", "12 500", "x"]);
    }

    #[test]
    fn edges_of_a_wiki_table_are_dropped() {
        assert_eq!(fields("| 50 | 0.0021 |", Separator::Bar), ["50", "0.0021"]);
        assert_eq!(fields("50 | 0.0021", Separator::Bar), ["50", "0.0021"]);
    }
}
