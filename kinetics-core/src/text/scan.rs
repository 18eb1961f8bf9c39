//! Goes through a number character by character: sign, groups of digits,
//! decimal mark, an error in brackets or behind ±, a power of ten, a unit.

use super::decimal::{Decimal, is_group_space};
use super::is_blank;
use super::number::Number;
use crate::numeric::decimals::read_decimal;

/// Reads the whole of `cell` as a number, or not at all.
pub(super) fn scan(cell: &str, decimal: Decimal) -> Option<Number> {
    let characters: Vec<char> = cell.chars().map(unified).collect();
    let mut scanner = Scanner { characters: &characters, at: 0, decimal };
    let (value, error) = scanner.value_and_error()?;
    let unit = scanner.unit()?;
    let error_percent = error.is_some() && unit.as_deref() == Some("%");
    let finite = value.is_finite() && error.is_none_or(f64::is_finite);
    finite.then_some(Number { value, error, error_percent, unit, marked: false })
}

/// Zero although a digit of the mantissa is not: too small for a number here.
pub(super) fn vanished(value: f64, written: &str) -> bool {
    let mantissa = written.split(['e', 'E']).next().unwrap_or("");
    value == 0.0 && mantissa.contains(|digit| matches!(digit, '1'..='9'))
}

/// One character for each meaning.
fn unified(character: char) -> char {
    match character {
        '−' | '–' | '‐' | '‑' | '－' | '﹣' => '-',
        '✕' | '✖' | '⨯' | '∗' | '*' | '⋅' | '∙' | '•' | '·' => '×',
        other => other,
    }
}

struct Scanner<'a> {
    characters: &'a [char],
    at: usize,
    decimal: Decimal,
}

/// Digits in the form that Rust parses, and how many of them are decimals.
struct Mantissa {
    written: String,
    decimals: usize,
}

impl Scanner<'_> {
    fn peek(&self, ahead: usize) -> Option<char> {
        self.characters.get(self.at + ahead).copied()
    }

    fn skip_blanks(&mut self) {
        while self.peek(0).is_some_and(is_blank) {
            self.at += 1;
        }
    }

    fn accept(&mut self, wanted: char) -> bool {
        let found = self.peek(0) == Some(wanted);
        self.at += usize::from(found);
        found
    }

    fn value_and_error(&mut self) -> Option<(f64, Option<f64>)> {
        self.skip_blanks();
        // A lone ± belongs to a column of errors.
        if self.plus_minus() {
            self.skip_blanks();
        }
        if self.accept('(') {
            return self.bracketed_value();
        }
        let mut value = self.mantissa()?;
        let ten = value.written == "10"
            && matches!(self.peek(0), Some('^' | '⁻' | '⁰'..='⁹' | '¹' | '²' | '³'));
        if ten {
            value.written = "1".to_string();
            let power = self.power()?;
            return Some((value.with_power(power)?, None));
        }
        self.open_value(&value)
    }

    /// `2.1 ± 0.1)×10⁻³`, behind the bracket.
    fn bracketed_value(&mut self) -> Option<(f64, Option<f64>)> {
        let value = self.mantissa()?;
        self.skip_blanks();
        let error = if self.plus_minus() { Some(self.mantissa()?) } else { None };
        self.skip_blanks();
        if !self.accept(')') {
            return None;
        }
        let power = self.power_of_ten()?;
        // (0.5) alone is how books write −0.5; nobody can know.
        if error.is_none() && power.is_none() {
            return None;
        }
        let power = power.unwrap_or(0);
        let error = match error {
            Some(error) => Some(error.with_power(power)?),
            None => None,
        };
        Some((value.with_power(power)?, error))
    }

    /// A number outside brackets, with what may follow it.
    fn open_value(&mut self, value: &Mantissa) -> Option<(f64, Option<f64>)> {
        let concise = self.concise_error(value)?;
        let power = self.power_of_ten()?;
        let scale = power.unwrap_or(0);
        if let Some(error) = concise {
            let error = error.with_power(scale)?;
            return Some((value.with_power(scale)?, Some(error)));
        }
        let number = value.with_power(scale)?;
        let before = self.at;
        self.skip_blanks();
        // 95.2 % ± 0.3 %: the unit is said twice.
        if self.accept('%') {
            self.skip_blanks();
        }
        if !self.plus_minus() {
            self.at = before;
            return Some((number, None));
        }
        let error = self.mantissa()?;
        let error_power = self.power_of_ten()?;
        // 2.1 ± 0.1×10⁻³ may mean (2.1 ± 0.1)×10⁻³; nobody can know.
        if error_power.is_some() && power.is_none() {
            return None;
        }
        Some((number, Some(error.with_power(error_power.unwrap_or(0))?)))
    }

    fn plus_minus(&mut self) -> bool {
        let long = match (self.peek(0), self.peek(1), self.peek(2)) {
            (Some('±'), _, _) => 1,
            (Some('+'), Some('/'), Some('-')) => 3,
            (Some('+'), Some('-'), _) => 2,
            _ => return false,
        };
        self.at += long;
        true
    }

    /// Sign and digits with grouping and a decimal mark.
    fn mantissa(&mut self) -> Option<Mantissa> {
        self.skip_blanks();
        let mut written = String::new();
        if !self.accept('+') && self.accept('-') {
            written.push('-');
        }
        let sign = written.len();
        let whole = self.digits(&mut written);
        if (1..=3).contains(&whole) {
            let mut grouped = false;
            let separator = self
                .peek(0)
                .filter(|mark| is_group_space(*mark) || *mark == self.decimal.other().mark());
            while separator.is_some() && self.peek(0) == separator && self.group_follows() {
                self.at += 1;
                self.digits(&mut written);
                grouped = true;
            }
            // 0,123 groups nothing: its comma marks decimals.
            if grouped && written.get(sign..).is_some_and(|digits| digits.starts_with('0')) {
                return None;
            }
        }
        let mut decimals = 0;
        let digit_next = self.peek(1).is_some_and(|next| next.is_ascii_digit());
        if self.peek(0) == Some(self.decimal.mark())
            && (digit_next || (whole > 0 && self.decimal == Decimal::Point))
        {
            self.at += 1;
            written.push('.');
            decimals = self.digits(&mut written);
            // A plain space among decimals would join two numbers.
            let thin =
                |mark: &char| is_group_space(*mark) && !matches!(mark, ' ' | '\'' | '’' | '‘');
            while decimals % 3 == 0
                && self.peek(0).as_ref().is_some_and(thin)
                && self.peek(1).is_some_and(|next| next.is_ascii_digit())
            {
                self.at += 1;
                decimals += self.digits(&mut written);
            }
        }
        (whole + decimals > 0).then_some(Mantissa { written, decimals })
    }

    /// Moves over digits, and counts them.
    fn digits(&mut self, written: &mut String) -> usize {
        let before = self.at;
        while let Some(digit) = self.peek(0).filter(char::is_ascii_digit) {
            written.push(digit);
            self.at += 1;
        }
        self.at - before
    }

    /// Exactly three digits behind the next character.
    fn group_follows(&self) -> bool {
        let digit = |ahead: usize| self.peek(ahead).is_some_and(|next| next.is_ascii_digit());
        digit(1) && digit(2) && digit(3) && !digit(4)
    }

    /// `(1)` counts in the last digits, `(0.1)` in the unit.
    #[expect(clippy::option_option, reason = "malformed, absent, or an error")]
    fn concise_error(&mut self, value: &Mantissa) -> Option<Option<Mantissa>> {
        let before = self.at;
        self.skip_blanks();
        let inside_digit = self.peek(1).is_some_and(|next| next.is_ascii_digit());
        if self.peek(0) != Some('(') || !inside_digit {
            self.at = before;
            return Some(None);
        }
        self.at += 1;
        let mut error = self.mantissa()?;
        if !self.accept(')') {
            return None;
        }
        if error.decimals == 0 {
            error.written.push_str(&format!("e-{}", value.decimals));
        }
        Some(Some(error))
    }

    /// `e-3`, `×10^-3`, `x 10⁻³`, `·10-3`; outer none if it is malformed.
    #[expect(clippy::option_option, reason = "malformed, absent, or a power")]
    fn power_of_ten(&mut self) -> Option<Option<i32>> {
        let before = self.at;
        let signed = |ahead: usize| {
            let sign = usize::from(matches!(self.peek(ahead), Some('-' | '+')));
            self.peek(ahead + sign).is_some_and(|next| next.is_ascii_digit())
        };
        match self.peek(0) {
            Some('e' | 'E') if signed(1) => {
                self.at += 1;
                return self.integer().map(Some);
            }
            // Fortran's double precision.
            Some('d' | 'D') if matches!(self.peek(1), Some('-' | '+')) && signed(1) => {
                self.at += 1;
                return self.integer().map(Some);
            }
            _ => {}
        }
        self.skip_blanks();
        let raised = matches!(self.peek(2), Some('^' | '⁻' | '⁰'..='⁹' | '¹' | '²' | '³'));
        if self.at > before && self.peek(0) == Some('1') && self.peek(1) == Some('0') && raised {
            // 1.2 10⁻³ has lost its multiplication sign.
            self.at += 2;
            return self.power().map(Some);
        }
        if !matches!(self.peek(0), Some('×' | 'x' | 'X' | 'х')) {
            self.at = before;
            return Some(None);
        }
        self.at += 1;
        self.skip_blanks();
        if !(self.accept('1') && self.accept('0')) {
            return None;
        }
        // ×103 has lost its superscript: not readable.
        self.power().map(Some)
    }

    /// What stands behind the 10.
    fn power(&mut self) -> Option<i32> {
        let starred = self.peek(0) == Some('×') && self.peek(1) == Some('×');
        if starred {
            self.at += 1;
        }
        if starred && self.accept('×') || self.accept('^') {
            self.skip_blanks();
            let bracket = self.peek(0).filter(|open| matches!(open, '(' | '{'));
            self.at += usize::from(bracket.is_some());
            let power = self.integer()?;
            match bracket {
                Some('(') if !self.accept(')') => return None,
                Some('{') if !self.accept('}') => return None,
                _ => {}
            }
            return Some(power);
        }
        if matches!(self.peek(0), Some('-' | '+')) {
            return self.integer();
        }
        let mut written = String::new();
        while let Some(digit) = self.peek(0).and_then(lowered) {
            written.push(digit);
            self.at += 1;
        }
        written.parse().ok()
    }

    fn integer(&mut self) -> Option<i32> {
        let mut written = String::new();
        if let Some(sign) = self.peek(0).filter(|sign| matches!(sign, '-' | '+')) {
            written.push(sign);
            self.at += 1;
        }
        while let Some(digit) = self.peek(0).filter(char::is_ascii_digit) {
            written.push(digit);
            self.at += 1;
        }
        written.parse().ok()
    }

    /// What is left over: nothing, or a unit. None if it is neither.
    #[expect(clippy::option_option, reason = "rubbish, absent, or a unit")]
    fn unit(&mut self) -> Option<Option<String>> {
        self.skip_blanks();
        let rest: String = self.characters.get(self.at..).unwrap_or_default().iter().collect();
        let rest = rest.trim_matches(is_blank);
        if rest.is_empty() {
            return Some(None);
        }
        // A letter glued to a digit is a slip of the keyboard unless it is a unit.
        let glued_slash = self.characters.get(self.at) == Some(&'/')
            && self.at > 0
            && self.characters.get(self.at - 1).is_some_and(char::is_ascii_digit);
        (!glued_slash && crate::units::is_unit(rest)).then(|| Some(rest.to_string()))
    }
}

impl Mantissa {
    fn with_power(&self, power: i32) -> Option<f64> {
        let written = match self.written.split_once('e') {
            // A concise error brings its own power.
            Some((digits, own)) => {
                format!("{digits}e{}", own.parse::<i32>().ok()?.checked_add(power)?)
            }
            None => format!("{}e{power}", self.written),
        };
        read_decimal(&written).filter(|value| !vanished(*value, &written))
    }
}

fn lowered(superscript: char) -> Option<char> {
    Some(match superscript {
        '⁰' => '0',
        '¹' => '1',
        '²' => '2',
        '³' => '3',
        '⁴' => '4',
        '⁵' => '5',
        '⁶' => '6',
        '⁷' => '7',
        '⁸' => '8',
        '⁹' => '9',
        '⁻' => '-',
        '⁺' => '+',
        _ => return None,
    })
}
