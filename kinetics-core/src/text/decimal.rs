//! Comma or point: which of the two marks decimals?
//!
//! `0,5` and `12,34` can only be decimal commas and `1,234.5` only a decimal
//! point; `1,234` may be either, so its column and then the whole text decide.

use serde::{Deserialize, Serialize};

/// The decimal mark.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
pub enum Decimal {
    /// `1.5`
    #[default]
    #[serde(rename = ".")]
    Point,
    /// `1,5`
    #[serde(rename = ",")]
    Comma,
}

impl Decimal {
    /// The character that marks decimals.
    #[must_use]
    pub const fn mark(self) -> char {
        match self {
            Decimal::Point => '.',
            Decimal::Comma => ',',
        }
    }

    /// The other mark, which then can only group digits.
    #[must_use]
    pub const fn other(self) -> Decimal {
        match self {
            Decimal::Point => Decimal::Comma,
            Decimal::Comma => Decimal::Point,
        }
    }
}

/// What one cell says about the decimal mark.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Evidence {
    /// No mark at all, or no sense in it.
    None,
    /// Only this mark makes sense.
    Certain(Decimal),
    /// One of this mark before exactly three digits: decimals, or a group.
    Ambiguous(Decimal),
}

/// Weighs one cell. Looks at no more than its first 200 characters.
#[must_use]
pub fn evidence(cell: &str) -> Evidence {
    if !cell.contains([',', '.']) {
        return Evidence::None;
    }
    let characters: Vec<char> = cell.chars().take(200).collect();
    let mut doubt = Evidence::None;
    let mut at = 0;
    while at < characters.len() {
        if !starts_number(&characters, at) {
            at += 1;
            continue;
        }
        let end = number_end(&characters, at);
        match weigh(&characters[at..end], characters.get(end).copied()) {
            Evidence::None => {}
            certain @ Evidence::Certain(_) => return certain,
            ambiguous @ Evidence::Ambiguous(_) => {
                if doubt == Evidence::None {
                    doubt = ambiguous;
                }
            }
        }
        at = end;
    }
    doubt
}

fn starts_number(characters: &[char], at: usize) -> bool {
    let before = at.checked_sub(1).and_then(|before| characters.get(before));
    let digit = |index: usize| characters.get(index).is_some_and(char::is_ascii_digit);
    (digit(at) || (matches!(characters.get(at), Some('.' | ',')) && digit(at + 1)))
        && !before.is_some_and(|before| before.is_alphanumeric())
}

fn number_end(characters: &[char], start: usize) -> usize {
    let mut end = start;
    while let Some(character) = characters.get(end) {
        let inside = character.is_ascii_digit()
            || (matches!(character, '.' | ',') || is_group_space(*character))
                && characters.get(end + 1).is_some_and(char::is_ascii_digit);
        if !inside {
            break;
        }
        end += 1;
    }
    end
}

/// Spaces and apostrophes that may group digits.
pub(super) fn is_group_space(character: char) -> bool {
    matches!(character, ' ' | '\u{a0}' | '\u{2009}' | '\u{202f}' | '\u{2007}' | '\'' | '’' | '‘')
}

fn weigh(number: &[char], next: Option<char>) -> Evidence {
    let places = |mark: char| -> Vec<usize> {
        number
            .iter()
            .enumerate()
            .filter(|(_, character)| **character == mark)
            .map(|(at, _)| at)
            .collect()
    };
    let (points, commas) = (places('.'), places(','));
    let (mark, marks) = match (points.last(), commas.last()) {
        (None, None) => return Evidence::None,
        (Some(_), None) => (Decimal::Point, points),
        (None, Some(_)) => (Decimal::Comma, commas),
        (Some(point), Some(comma)) => {
            let (last, count) = if point > comma {
                (Decimal::Point, points.len())
            } else {
                (Decimal::Comma, commas.len())
            };
            return if count == 1 { Evidence::Certain(last) } else { Evidence::None };
        }
    };
    let in_groups = |first: usize| {
        let mut ends: Vec<usize> = marks.iter().skip(1).copied().collect();
        ends.push(number.len());
        (1..=3).contains(&first)
            && number.first() != Some(&'0')
            && marks.iter().zip(ends).all(|(start, end)| end - start == 4)
    };
    let first = marks.first().copied().unwrap_or(0);
    match (marks.len(), in_groups(first)) {
        // A group before a power of ten would be odd: `1,234E-3` is a decimal comma.
        (1, true) if !matches!(next, Some('e' | 'E' | '×' | '(')) => Evidence::Ambiguous(mark),
        (1, _) => Evidence::Certain(mark),
        (_, true) => Evidence::Certain(mark.other()),
        (_, false) => Evidence::None,
    }
}

/// How the cells of a column, or of a whole text, have voted.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Votes {
    point: usize,
    comma: usize,
    ambiguous_point: usize,
    ambiguous_comma: usize,
    unmarked: usize,
}

impl Votes {
    /// Counts one cell.
    pub fn count(&mut self, evidence: Evidence) {
        match evidence {
            Evidence::None => {}
            Evidence::Certain(Decimal::Point) => self.point += 1,
            Evidence::Certain(Decimal::Comma) => self.comma += 1,
            Evidence::Ambiguous(Decimal::Point) => self.ambiguous_point += 1,
            Evidence::Ambiguous(Decimal::Comma) => self.ambiguous_comma += 1,
        }
    }

    /// Counts a cell with its evidence; one without a mark counts if it holds a digit.
    pub fn count_cell(&mut self, cell: &str, evidence: Evidence) {
        self.count(evidence);
        if evidence == Evidence::None && cell.starts_with(|c: char| c.is_ascii_digit()) {
            self.unmarked += 1;
        }
    }

    /// Whether every number has one point and three digits after it: decimals to a fixed number
    /// of places. Of numbers with grouped digits some would be too small for a group.
    #[must_use]
    pub fn has_fixed_decimals(&self) -> bool {
        self.ambiguous_point >= 2
            && self.point + self.comma + self.ambiguous_comma + self.unmarked == 0
    }

    /// Adds the votes of another column.
    pub fn add(&mut self, other: &Votes) {
        self.point += other.point;
        self.comma += other.comma;
        self.ambiguous_point += other.ambiguous_point;
        self.ambiguous_comma += other.ambiguous_comma;
        self.unmarked += other.unmarked;
    }

    /// The mark for which there is certain evidence, by majority.
    #[must_use]
    pub fn certain(&self) -> Option<Decimal> {
        match (self.point, self.comma) {
            (0, 0) => None,
            (point, comma) if comma > point => Some(Decimal::Comma),
            _ => Some(Decimal::Point),
        }
    }

    /// Whether a cell was seen that both marks could explain, given the mark decided.
    #[must_use]
    pub fn doubtful(&self, decided: Decimal) -> bool {
        match decided {
            // `1.234` as 1.234 needs no words.
            Decimal::Point => self.ambiguous_comma > 0,
            Decimal::Comma => self.ambiguous_comma + self.ambiguous_point > 0,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn some_numbers_leave_no_choice() {
        let comma = Evidence::Certain(Decimal::Comma);
        let point = Evidence::Certain(Decimal::Point);
        for (cell, wanted) in [
            ("0,5", comma),
            ("12,34", comma),
            ("0,123", comma),
            ("1234,567", comma),
            ("1.234,5", comma),
            ("1.234.567", comma),
            ("1,234E-3", comma),
            ("1,234×10^-3", comma),
            (",5", comma),
            ("1,234 ± 0,05", comma),
            ("12 345,6", comma),
            ("0.5", point),
            ("1,234.5", point),
            ("1,234,567", point),
            ("-0.0021", point),
            ("<0.05", point),
            ("1'234.5", point),
        ] {
            assert_eq!(evidence(cell), wanted, "{cell}");
        }
    }

    #[test]
    fn three_digits_after_a_single_mark_are_ambiguous() {
        assert_eq!(evidence("1,234"), Evidence::Ambiguous(Decimal::Comma));
        assert_eq!(evidence("123.456"), Evidence::Ambiguous(Decimal::Point));
        assert_eq!(evidence("1,234 ± 1,234"), Evidence::Ambiguous(Decimal::Comma));
    }

    #[test]
    fn the_rest_says_nothing() {
        for cell in ["", "50", "n.d.", "1,2,3", "a.b", "50,", "1.2.3,4,5", "v1.2"] {
            assert_eq!(evidence(cell), Evidence::None, "{cell}");
        }
    }

    #[test]
    fn votes_decide_by_majority_and_remember_doubt() {
        let mut votes = Votes::default();
        for cell in ["1,234", "0,5", "2,5", "1.5"] {
            votes.count(evidence(cell));
        }
        assert_eq!(votes.certain(), Some(Decimal::Comma));
        assert!(votes.doubtful(Decimal::Comma));
    }

    #[test]
    fn three_decimals_throughout_are_no_groups() {
        let fixed = |cells: &[&str]| {
            let mut votes = Votes::default();
            cells.iter().for_each(|cell| votes.count_cell(cell, evidence(cell)));
            votes.has_fixed_decimals()
        };
        assert!(fixed(&["1.210", "4.200", "", "n.d.", "42.100"]));
        assert!(!fixed(&["950", "1.210", "4.200"]));
        assert!(!fixed(&["1,210", "4,200"]));
        assert!(!fixed(&["1.210"]));
    }
}
