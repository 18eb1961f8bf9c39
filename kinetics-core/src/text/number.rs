//! Reads one cell: a number as people and machines print it, with the error and
//! the unit it may carry, or a word that stands in its place.

use super::decimal::Decimal;
use super::marker::{Marker, marker, without_marks};
use super::scan::{scan, vanished};
use super::{is_blank, is_invisible};
use crate::numeric::decimals::read_decimal;

/// A longer cell is no number.
const LONGEST: usize = 120;

/// A number found in a cell.
#[derive(Clone, Debug, PartialEq)]
pub struct Number {
    /// The value as written, before any unit or multiplier.
    pub value: f64,
    /// Its error as written in the cell, in the same unit: `± 0.1`, `(1)`.
    pub error: Option<f64>,
    /// The error is in per cent: `0.5 ± 10 %`.
    pub error_percent: bool,
    /// A unit behind the number, as written.
    pub unit: Option<String>,
    /// A mark such as `*` beside it.
    pub marked: bool,
}

/// What a cell turned out to be.
#[derive(Clone, Debug, PartialEq)]
pub enum Reading {
    /// Nothing.
    Empty,
    /// A number.
    Number(Number),
    /// Below a limit, which is a number if the cell names it.
    Below(Option<f64>),
    /// A word for "no value".
    NotDetermined,
    /// Anything else.
    Text,
}

/// Reads a cell in which `decimal` marks decimals; the other mark may only
/// group digits by threes.
#[must_use]
pub fn read_cell(cell: &str, decimal: Decimal) -> Reading {
    let cell = cell.trim_matches(is_blank);
    if cell.is_empty() {
        return Reading::Empty;
    }
    if let Some(value) = plain(cell, decimal) {
        return Reading::Number(Number {
            value,
            error: None,
            error_percent: false,
            unit: None,
            marked: false,
        });
    }
    match marker(cell) {
        Some(Marker::BelowLimit) => return Reading::Below(None),
        Some(Marker::NotDetermined) => return Reading::NotDetermined,
        None => {}
    }
    if cell.len() > LONGEST {
        return Reading::Text;
    }
    if cell.contains(is_invisible) {
        let seen: String = cell.chars().filter(|character| !is_invisible(*character)).collect();
        return read_cell(&seen, decimal);
    }
    if let Some(limit) = cell.strip_prefix(['<', '≤']) {
        return match read_cell(limit, decimal) {
            Reading::Number(Number { value, error: None, .. }) => Reading::Below(Some(value)),
            _ => Reading::Text,
        };
    }
    let (bare, marked) = without_marks(cell);
    let bare = bare.strip_prefix('\'').unwrap_or(bare);
    let bare = bare.strip_suffix(':').unwrap_or(bare);
    match scan(bare, decimal) {
        Some(found) => Reading::Number(Number { marked, ..found }),
        None => Reading::Text,
    }
}

/// Whether a cell is a number, or a word in place of one, under either mark.
#[must_use]
pub fn looks_numeric(cell: &str) -> bool {
    let known =
        |decimal: Decimal| !matches!(read_cell(cell, decimal), Reading::Empty | Reading::Text);
    known(Decimal::Point) || known(Decimal::Comma)
}

/// The quick way for what most cells are.
fn plain(cell: &str, decimal: Decimal) -> Option<f64> {
    let bytes = cell.as_bytes();
    let simple = |byte: &u8| matches!(byte, b'0'..=b'9' | b'-' | b'+' | b'e' | b'E');
    let point = |byte: &u8| *byte == b'.' && decimal == Decimal::Point;
    if bytes.len() > LONGEST || !bytes.iter().all(|byte| simple(byte) || point(byte)) {
        return None;
    }
    read_decimal(cell).filter(|value| !vanished(*value, cell))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn number(cell: &str, decimal: Decimal) -> Option<(f64, Option<f64>)> {
        match read_cell(cell, decimal) {
            Reading::Number(number) => Some((number.value, number.error)),
            _ => None,
        }
    }

    fn value(cell: &str) -> Option<f64> {
        number(cell, Decimal::Point).map(|(value, _)| value)
    }

    #[test]
    fn numbers_as_machines_and_people_print_them() {
        for (cell, wanted) in [
            ("50", 50.0),
            ("-3.5", -3.5),
            ("−3.5", -3.5),
            ("–3.5", -3.5),
            ("+3.5", 3.5),
            (".5", 0.5),
            ("5.", 5.0),
            ("2.1e-3", 2.1e-3),
            ("2.1E-03", 2.1e-3),
            ("2.1D-03", 2.1e-3),
            ("2.1E−3", 2.1e-3),
            ("1.2×10^-3", 1.2e-3),
            ("1.2 × 10^-3", 1.2e-3),
            ("1.2 x 10-3", 1.2e-3),
            ("1.2·10⁻³", 1.2e-3),
            ("1.2*10^-3", 1.2e-3),
            ("1.2×10^{-3}", 1.2e-3),
            ("1.2×10^(−3)", 1.2e-3),
            ("1.2*10**-3", 1.2e-3),
            ("1.2 10⁻³", 1.2e-3),
            ("10^-3", 1e-3),
            ("10⁻³", 1e-3),
            ("1,234.5", 1234.5),
            ("1,234,567", 1_234_567.0),
            ("12 500", 12_500.0),
            ("12\u{a0}500.25", 12_500.25),
            ("12\u{2009}500", 12_500.0),
            ("1'234.5", 1234.5),
            ("0.002\u{2009}15", 0.002_15),
            ("'0.0021", 0.0021),
            ("0.00\u{200b}21", 0.0021),
        ] {
            assert_eq!(value(cell), Some(wanted), "{cell}");
        }
        for (cell, wanted) in [
            ("2,1e-3", 2.1e-3),
            ("1.234,5", 1234.5),
            ("1,2·10⁻³", 1.2e-3),
            ("50", 50.0),
            ("12 500,5", 12_500.5),
        ] {
            assert_eq!(number(cell, Decimal::Comma), Some((wanted, None)), "{cell}");
        }
    }

    #[test]
    fn errors_inside_the_cell() {
        for (cell, wanted, error) in [
            ("0.0021 ± 0.0001", 0.0021, 0.0001),
            ("0.0021±0.0001", 0.0021, 0.0001),
            ("0.0021 +/- 0.0001", 0.0021, 0.0001),
            ("2.1(1)E-3", 2.1e-3, 1e-4),
            ("2.15(12)×10⁻³", 2.15e-3, 1.2e-4),
            ("2.1 (0.1)", 2.1, 0.1),
            ("(2.1 ± 0.1)×10^-3", 2.1e-3, 1e-4),
            ("(2.1 ± 0.1)e-3", 2.1e-3, 1e-4),
            ("2.1e-3 ± 1e-4", 2.1e-3, 1e-4),
            ("0.5 ± 10%", 0.5, 10.0),
            ("95.2 % ± 0.3 %", 95.2, 0.3),
        ] {
            let found = number(cell, Decimal::Point);
            assert!(found.is_some(), "{cell}");
            let (value, spread) = found.unwrap_or((0.0, None));
            assert_eq!(value, wanted, "{cell}");
            assert!((spread.unwrap_or(0.0) / error - 1.0).abs() < 1e-12, "{cell}: {spread:?}");
        }
    }

    #[test]
    fn units_and_marks_beside_the_number() {
        let read = |cell: &str| read_cell(cell, Decimal::Point);
        let with = |value: f64, unit: Option<&str>, marked: bool| {
            Reading::Number(Number {
                value,
                error: None,
                error_percent: false,
                unit: unit.map(str::to_string),
                marked,
            })
        };
        assert_eq!(read("50 °C"), with(50.0, Some("°C"), false));
        assert_eq!(read("95.2 %"), with(95.2, Some("%"), false));
        assert_eq!(read("0.0021 1/h"), with(0.0021, Some("1/h"), false));
        assert_eq!(read("24h"), with(24.0, Some("h"), false));
        assert_eq!(read("0.0021*"), with(0.0021, None, true));
        assert_eq!(read("50 °C *"), with(50.0, Some("°C"), true));
    }

    #[test]
    fn words_in_place_of_a_number() {
        let read = |cell: &str| read_cell(cell, Decimal::Point);
        assert_eq!(read(""), Reading::Empty);
        assert_eq!(read(" \u{a0}"), Reading::Empty);
        assert_eq!(read("<0.05"), Reading::Below(Some(0.05)));
        assert_eq!(read("< 5e-3"), Reading::Below(Some(5e-3)));
        assert_eq!(read("<LOQ"), Reading::Below(None));
        assert_eq!(read("n.d."), Reading::NotDetermined);
        assert_eq!(read("-"), Reading::NotDetermined);
    }

    #[test]
    fn what_is_no_number_is_not_guessed() {
        for cell in [
            "0.0O59",
            "1.2.3",
            "1,23",
            "0,123",
            "1,2345",
            "12,34,567",
            "inf",
            "NaN5",
            "1e400",
            "1e-400",
            "1.2×103",
            "2.1 ± 0.1×10⁻³",
            "(0.5)",
            "5 5",
            "#DIV/0!",
            "=A1",
            "e5",
            "--5",
            "1e",
            "0x10",
            "50 furlong",
            "12-Mar",
            ">100",
            "1/0",
            "5 ±",
            "2.1(",
        ] {
            assert_eq!(value(cell), None, "{cell}");
        }
        assert_eq!(value(&"9".repeat(100_000)), None);
    }

    proptest! {
        #[test]
        fn never_panics(cell in "\\PC{0,40}") {
            let _ = read_cell(&cell, Decimal::Point);
            let _ = looks_numeric(&cell);
        }

        #[test]
        fn never_panics_on_what_resembles_numbers(cell in "[0-9eE.,±×^()+ ⁻³%*<x'-]{0,24}") {
            let _ = read_cell(&cell, Decimal::Comma);
            let _ = looks_numeric(&cell);
        }

        #[test]
        fn every_printed_style_reads_back(mantissa in -99_999_i32..99_999, power in -12_i32..12, whole in 0_u32..2_000_000_000) {
            let digits = f64::from(mantissa) / 1e4;
            let wanted: f64 = format!("{digits}e{power}").parse().unwrap_or(0.0);
            let raised: String = power.to_string().chars().map(|character| match character {
                '-' => '⁻',
                digit => ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'][digit.to_digit(10).unwrap_or(0) as usize],
            }).collect();
            for cell in [
                format!("{digits}e{power}"), format!("{digits}E{power:+03}"), format!("{digits}×10^{power}"),
                format!("{digits} × 10^({power})"), format!("{digits}·10{raised}"), format!("{wanted}"), format!("{wanted:e}"),
            ] {
                prop_assert_eq!(value(&cell), Some(wanted), "{}", cell);
                let comma = cell.replace('.', ",").replace('-', "−");
                prop_assert_eq!(number(&comma, Decimal::Comma), Some((wanted, None)), "{}", comma);
            }
            for (separator, decimal) in [(",", Decimal::Point), (".", Decimal::Comma), (" ", Decimal::Point), ("'", Decimal::Point), ("\u{202f}", Decimal::Comma)] {
                let plain = whole.to_string();
                let mut grouped = String::new();
                for (at, digit) in plain.chars().enumerate() {
                    if at > 0 && (plain.len() - at) % 3 == 0 {
                        grouped.push_str(separator);
                    }
                    grouped.push(digit);
                }
                prop_assert_eq!(number(&grouped, decimal), Some((f64::from(whole), None)), "{}", grouped);
            }
        }
    }
}
