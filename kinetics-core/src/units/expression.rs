//! Reads a unit as people write it into symbols and powers.
//!
//! `L/(mol s)`, `L mol⁻¹ s⁻¹`, `dm³·mol^-1·s^-1`, `(mol/L)^0.5/s` and `per hour`
//! all go through here. A loose slash is ambiguous: `L/mol s` is strictly
//! L mol⁻¹ s, though whoever writes it means L/(mol s); so both readings are
//! offered, the strict one first.

use super::symbols::meanings;
use crate::numeric::decimals::read_decimal;

/// Longer texts are no unit, and brackets nest no deeper.
const LONGEST: usize = 80;
const DEEPEST: usize = 6;

/// Symbols with a prefix: how many of the plain symbol they are.
#[rustfmt::skip]
const PREFIXED: &[(&str, f64, &str)] = &[
    ("kmol", 1e3, "mol"), ("mmol", 1e-3, "mol"), ("µmol", 1e-6, "mol"), ("nmol", 1e-9, "mol"), ("molecule", 1.0 / 6.022_140_76e23, "mol"),
    ("m³", 1e3, "L"), ("mL", 1e-3, "L"), ("µL", 1e-6, "L"),
    ("kg", 1e3, "g"), ("mg", 1e-3, "g"), ("µg", 1e-6, "g"), ("ng", 1e-9, "g"),
    ("kJ", 1e3, "J"), ("kcal", 1e3, "cal"), ("kW", 1e3, "W"), ("mW", 1e-3, "W"), ("µW", 1e-6, "W"),
];

/// A product of powers of elementary symbols, times a number.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Expression {
    /// A number written in the unit, as in `10⁻⁴ s⁻¹`; 1 if none.
    pub scale: f64,
    /// Symbol and power, sorted by symbol, no power zero.
    pub factors: Vec<(&'static str, f64)>,
}

/// How far a slash reaches.
#[derive(Clone, Copy, PartialEq)]
enum Slash {
    Next,
    Rest,
}

/// The readings of `text` as a unit, the strict one first; none if it is no unit.
pub(crate) fn readings(text: &str) -> Vec<Expression> {
    let mut found: Vec<Expression> = Vec::with_capacity(2);
    for slash in [Slash::Next, Slash::Rest] {
        if let Some(expression) = read(text, slash)
            && !found.contains(&expression)
        {
            found.push(expression);
        }
    }
    found
}

/// The one among `units` whose code means what `text` means.
pub(crate) fn find<Unit: Copy>(
    text: &str,
    units: &[Unit],
    code: impl Fn(Unit) -> &'static str,
) -> Option<Unit> {
    // What is written as the code itself needs no reading, and blanks are read again and again.
    if let Some(exact) = units.iter().find(|unit| code(**unit) == text) {
        return Some(*exact);
    }
    let wanted = readings(text);
    if wanted.is_empty() {
        return None;
    }
    let known: Vec<(Unit, Expression)> = units
        .iter()
        .filter_map(|unit| Some((*unit, readings(code(*unit)).into_iter().next()?)))
        .collect();
    let same = wanted.iter().find_map(|wanted| known.iter().find(|(_, unit)| unit == wanted));
    let equal = || {
        let reduced = wanted.iter().map(Expression::reduced);
        reduced
            .into_iter()
            .find_map(|wanted| known.iter().find(|(_, unit)| unit.reduced().equals(&wanted)))
    };
    same.or_else(equal).map(|(unit, _)| *unit)
}

fn read(text: &str, slash: Slash) -> Option<Expression> {
    let text = text.trim();
    if text.is_empty() || text.len() > LONGEST {
        return None;
    }
    if text == "1" {
        return Some(Expression { scale: 1.0, factors: vec![("fraction", 1.0)] });
    }
    let characters: Vec<char> = text.chars().map(unified).collect();
    let mut reader = Reader { characters: &characters, at: 0, slash };
    let expression = reader.product(0)?;
    (reader.at == characters.len()).then_some(expression)
}

/// One character for each meaning.
fn unified(character: char) -> char {
    match character {
        '−' | '–' | '‐' | '‑' => '-',
        'μ' => 'µ',
        '∕' | '÷' | '⁄' => '/',
        '⋅' | '∙' | '•' | '×' | '∗' => '·',
        '[' | '{' => '(',
        ']' | '}' => ')',
        'º' | '˚' => '°',
        other if other.is_whitespace() => ' ',
        other => other,
    }
}

fn superscript(character: char) -> Option<char> {
    Some(match character {
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

struct Reader<'a> {
    characters: &'a [char],
    at: usize,
    slash: Slash,
}

impl Reader<'_> {
    fn peek(&self, ahead: usize) -> Option<char> {
        self.characters.get(self.at + ahead).copied()
    }

    fn skip_spaces(&mut self) {
        while self.peek(0) == Some(' ') {
            self.at += 1;
        }
    }

    /// Factors until the end or a closing bracket.
    fn product(&mut self, depth: usize) -> Option<Expression> {
        if depth > DEEPEST {
            return None;
        }
        let mut whole = Expression::one();
        let mut sign = 1.0;
        let mut count = 0;
        loop {
            self.skip_spaces();
            match self.peek(0) {
                None | Some(')') => break,
                Some('/') => {
                    self.at += 1;
                    sign = -1.0;
                }
                Some('·' | '*') => self.at += 1,
                // The full stop of `mol.L-1.s-1`.
                Some('.') if count > 0 => self.at += 1,
                Some(_) => {
                    let before = self.at;
                    match self.factor(depth)? {
                        None => sign = -1.0,
                        Some(factor) => {
                            whole.multiply(&factor, sign);
                            if self.slash == Slash::Next {
                                sign = 1.0;
                            }
                        }
                    }
                    count += 1;
                    if self.at == before {
                        return None;
                    }
                }
            }
        }
        whole.settle();
        (count > 0).then_some(whole)
    }

    /// One bracket, number or symbol with its power; `Some(None)` for the word "per".
    #[expect(clippy::option_option, reason = "no unit, the word per, or a factor")]
    fn factor(&mut self, depth: usize) -> Option<Option<Expression>> {
        let first = self.peek(0)?;
        // Of symbols written together the power belongs to the last.
        let mut before = Expression::one();
        let mut factor = Expression::one();
        if first == '(' {
            self.at += 1;
            factor = self.product(depth + 1)?;
            if self.peek(0) != Some(')') {
                return None;
            }
            self.at += 1;
        } else if first.is_ascii_digit() {
            factor.scale = self.number()?;
        } else {
            let word = self.word()?;
            if ["per", "pro", "par"].contains(&word.to_ascii_lowercase().as_str()) {
                return Some(None);
            }
            for meaning in meanings(&word)? {
                before.multiply(&factor, 1.0);
                factor = Expression { scale: 1.0, factors: meaning.to_vec() };
            }
        }
        before.multiply(&factor, self.power()?.unwrap_or(1.0));
        Some(Some(before))
    }

    fn word(&mut self) -> Option<String> {
        let first = self.peek(0)?;
        self.at += 1;
        let mut word = String::from(first);
        if first == '%' || first == '‰' {
            return Some(word);
        }
        if first == '°' {
            self.skip_spaces();
        } else if !first.is_alphabetic() {
            return None;
        }
        while let Some(next) = self.peek(0).filter(|next| next.is_alphabetic()) {
            word.push(next);
            self.at += 1;
        }
        Some(word)
    }

    /// Digits with a decimal point or comma, and an `e-3` after them.
    fn number(&mut self) -> Option<f64> {
        let mut digits = String::new();
        while let Some(next) = self.peek(0) {
            let point = matches!(next, '.' | ',')
                && self.peek(1).is_some_and(|after| after.is_ascii_digit());
            if !next.is_ascii_digit() && !point {
                break;
            }
            digits.push(if point { '.' } else { next });
            self.at += 1;
        }
        let sign = usize::from(matches!(self.peek(1), Some('-' | '+')));
        if matches!(self.peek(0), Some('e' | 'E'))
            && self.peek(1 + sign).is_some_and(|c| c.is_ascii_digit())
        {
            digits.push('e');
            for _ in 0..=sign {
                self.at += 1;
                digits.extend(self.peek(0));
            }
            self.at += 1;
            while let Some(next) = self.peek(0).filter(char::is_ascii_digit) {
                digits.push(next);
                self.at += 1;
            }
        }
        read_decimal(&digits)
    }

    /// The power after a factor: `^-1`, `**2`, `⁻¹`, `⁰·⁵`, `-1`, `3`, `^(1/2)`, `^½`.
    #[expect(clippy::option_option, reason = "malformed, absent, or a power")]
    fn power(&mut self) -> Option<Option<f64>> {
        let before = self.at;
        self.skip_spaces();
        let starred = self.peek(0) == Some('*') && self.peek(1) == Some('*');
        if self.peek(0) == Some('^') || starred {
            self.at += if starred { 2 } else { 1 };
            self.skip_spaces();
            let bracket = self.peek(0) == Some('(');
            self.at += usize::from(bracket);
            let mut power = self.signed()?;
            if bracket {
                self.skip_spaces();
                if self.peek(0) == Some('/') {
                    self.at += 1;
                    power /= self.signed()?;
                    self.skip_spaces();
                }
                if self.peek(0) != Some(')') {
                    return None;
                }
                self.at += 1;
            }
            return power.is_finite().then_some(Some(power));
        }
        if self.peek(0).and_then(superscript).is_some() {
            return self.superscripts().map(Some);
        }
        if self.peek(0) == Some('-') && self.peek(1).is_some_and(|c| c.is_ascii_digit()) {
            return self.signed().map(Some);
        }
        // A digit right behind a symbol (`dm3`); after a space it is a number.
        if self.at == before && self.peek(0).is_some_and(|c| c.is_ascii_digit()) {
            return self.signed().map(Some);
        }
        self.at = before;
        Some(None)
    }

    fn signed(&mut self) -> Option<f64> {
        self.skip_spaces();
        let negative = self.peek(0) == Some('-');
        self.at += usize::from(matches!(self.peek(0), Some('-' | '+')));
        let size = if self.peek(0) == Some('½') {
            self.at += 1;
            0.5
        } else {
            self.number()?
        };
        Some(if negative { -size } else { size })
    }

    fn superscripts(&mut self) -> Option<f64> {
        let mut digits = String::new();
        while let Some(next) = self.peek(0) {
            let point = matches!(next, '·' | '.' | ',')
                && self.peek(1).and_then(superscript).is_some_and(|c| c != '-');
            match superscript(next) {
                Some(digit) => digits.push(digit),
                None if point => digits.push('.'),
                None => break,
            }
            self.at += 1;
        }
        read_decimal(&digits)
    }
}

impl Expression {
    fn one() -> Expression {
        Expression { scale: 1.0, factors: Vec::new() }
    }

    fn add(&mut self, symbol: &'static str, power: f64) {
        match self.factors.iter_mut().find(|(known, _)| *known == symbol) {
            Some((_, sum)) => *sum += power,
            None => self.factors.push((symbol, power)),
        }
    }

    /// The same in as few symbols as possible, prefixes turned into the scale:
    /// mmol/mL is mol/L.
    pub(crate) fn reduced(&self) -> Expression {
        let mut plain = Expression { scale: self.scale, factors: Vec::new() };
        for (symbol, power) in &self.factors {
            let (size, plain_symbol) = PREFIXED
                .iter()
                .find(|(prefixed, _, _)| prefixed == symbol)
                .map_or((1.0, *symbol), |(_, size, plain_symbol)| (*size, *plain_symbol));
            plain.scale *= libm::pow(size, *power);
            plain.add(plain_symbol, *power);
        }
        plain.settle();
        plain
    }

    /// Drops what has cancelled and puts the rest into one order.
    fn settle(&mut self) {
        self.factors.retain(|(_, power)| power.abs() > 1e-9);
        self.factors.sort_by(|a, b| a.0.cmp(b.0));
    }

    fn equals(&self, other: &Expression) -> bool {
        self.factors == other.factors && (self.scale / other.scale - 1.0).abs() < 1e-9
    }

    /// The power p for which this is `base` to the p.
    pub(crate) fn power_of(&self, base: &Expression) -> Option<f64> {
        let same_symbols = self.factors.len() == base.factors.len()
            && self.factors.iter().zip(&base.factors).all(|(a, b)| a.0 == b.0);
        let power = self.factors.first()?.1 / base.factors.first()?.1;
        let fits = same_symbols
            && self
                .factors
                .iter()
                .zip(&base.factors)
                .all(|(a, b)| (a.1 - power * b.1).abs() < 1e-6)
            && (libm::pow(base.scale, power) / self.scale - 1.0).abs() < 1e-9;
        fits.then_some(power)
    }

    fn multiply(&mut self, other: &Expression, power: f64) {
        self.scale *= if power == 1.0 { other.scale } else { libm::pow(other.scale, power) };
        for (symbol, inner) in &other.factors {
            // Thirds come back whole: (dm)³ is L.
            let product = inner * power;
            let whole = libm::round(product * 1e6) / 1e6;
            self.add(symbol, if (whole - product).abs() < 1e-9 { whole } else { product });
        }
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    fn strict(text: &str) -> Option<Vec<(&'static str, f64)>> {
        readings(text).first().map(|expression| expression.factors.clone())
    }

    #[test]
    fn many_spellings_of_one_unit_read_the_same() {
        let wanted = Some(vec![("L", 1.0), ("mol", -1.0), ("s", -1.0)]);
        for text in [
            "L/(mol s)",
            "L mol⁻¹ s⁻¹",
            "L mol-1 s-1",
            "L mol^-1 s^-1",
            "L·mol^{-1}·s^{-1}",
            "dm³ mol⁻¹ s⁻¹",
            "dm3 mol-1 s-1",
            "dm^3/(mol*s)",
            "L/mol/s",
            "M-1 s-1",
            "M⁻¹s⁻¹",
            "1/(M s)",
            "M−1 s−1",
            "M^-1*s^-1",
            "L per mol per s",
            "L**1 mol**-1 s**-1",
            "Lmol-1s-1",
            "l.mol-1.s-1",
            "[L/(mol·s)]",
        ] {
            assert_eq!(strict(text), wanted, "{text}");
        }
    }

    #[test]
    fn a_loose_slash_is_offered_in_both_readings() {
        let found = readings("L/mol s");
        assert_eq!(found[0].factors, [("L", 1.0), ("mol", -1.0), ("s", 1.0)]);
        assert_eq!(found[1].factors, [("L", 1.0), ("mol", -1.0), ("s", -1.0)]);
    }

    #[test]
    fn powers_may_be_broken() {
        let wanted = Some(vec![("L", 0.5), ("mol", -0.5), ("s", -1.0)]);
        for text in [
            "L^0.5/(mol^0.5 s)",
            "L^0,5/(mol^0,5 s)",
            "L⁰·⁵ mol⁻⁰·⁵ s⁻¹",
            "L^½ mol^-½ s^-1",
            "L^(1/2) mol^(-1/2) s^-1",
            "(L/mol)^0.5/s",
            "M^-0.5 s^-1",
        ] {
            assert_eq!(strict(text), wanted, "{text}");
        }
    }

    #[test]
    fn a_number_in_the_unit_is_its_scale() {
        for text in ["10⁻⁴ s⁻¹", "10^-4 s^-1", "10-4 s-1", "1e-4/s", "0.0001 s-1", "1E-4 s-1"]
        {
            let found = readings(text);
            assert!((found[0].scale - 1e-4).abs() < 1e-18, "{text}");
            assert_eq!(found[0].factors, [("s", -1.0)], "{text}");
        }
    }

    #[test]
    fn what_is_no_unit_is_refused() {
        for text in [
            "",
            " ",
            "s)",
            "(s",
            "^2",
            "s^",
            "s^(1",
            "parsec",
            "-1",
            "/",
            "((((((((s))))))))",
            "s^(1/0)",
        ] {
            assert_eq!(strict(text), None, "{text}");
        }
        assert_eq!(strict(&"s".repeat(10_000)), None);
    }
}
