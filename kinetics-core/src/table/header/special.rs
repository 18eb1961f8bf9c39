//! Headers with a shape of their own: `1000/T`, `ln(k/s⁻¹)`, `50 °C`.

use super::multiplier::leading_power;
use crate::numeric::decimals::read_decimal;
use crate::quantity::Quantity;
use crate::text::lower;
use crate::units::{RateUnit, TemperatureUnit, inverse_kelvin_scale};

/// What stands above a column of inverse temperatures.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Inverse {
    /// What a number is multiplied by to be in 1/K, by the letter of the header.
    pub multiplier: f64,
}

/// `1/T`, `1000/T (K⁻¹)`, `10³ K/T`, `1/T × 10³`, `1/T / 10⁻³ K⁻¹`, `inverse temperature`.
pub(super) fn inverse(header: &str) -> Option<Inverse> {
    let squeezed: String = header.chars().filter(|c| !c.is_whitespace()).collect();
    let lower = lower(&squeezed);
    for word in [
        "inversetemperature",
        "reciprocaltemperature",
        "inversetemp",
        "reziproketemperatur",
        "kehrwertdertemperatur",
    ] {
        if let Some(rest) = lower.strip_prefix(word) {
            let rest = squeezed.get(squeezed.len() - rest.len()..).unwrap_or("");
            return Some(Inverse { multiplier: unit_scale(rest).unwrap_or(1.0) });
        }
    }
    let inside = squeezed.trim_start_matches('(');
    for raised in ["T^-1", "T⁻¹", "T-1", "T^(-1)", "T^{-1}", "T−1"] {
        if let Some(rest) = inside.strip_prefix(raised) {
            return finish(1.0, rest);
        }
    }
    let (size, rest) = leading_power(inside)?;
    let rest = rest.trim_start_matches(['·', '×', '*', '(', '1']);
    let rest = rest.strip_prefix('K').unwrap_or(rest);
    let rest = rest.strip_prefix('/')?.trim_start_matches('(');
    let rest = rest.strip_prefix('T')?;
    finish(size, rest)
}

/// What follows the T: `/K`, brackets, a factor, a unit.
fn finish(size: f64, rest: &str) -> Option<Inverse> {
    let mut rest = rest;
    for own_unit in ["/K)", "(K))", "[K])"] {
        rest = rest.strip_prefix(own_unit).unwrap_or(rest);
    }
    rest = rest.trim_start_matches(')');
    let mut size = size;
    let behind = rest.trim_start_matches(['×', '·', '*', 'x']);
    if behind.len() < rest.len()
        && let Some((power, left)) = leading_power(behind)
    {
        size *= power;
        rest = left;
    }
    let scale = match rest {
        "" | "/K" | "(K)" | "[K]" | ",K" => 1.0,
        unit => unit_scale(unit)?,
    };
    Some(Inverse { multiplier: scale / size })
}

/// `/K⁻¹`, `(1/K)`, `[10⁻³K⁻¹]`, `,1/K`.
fn unit_scale(text: &str) -> Option<f64> {
    if text.is_empty() {
        return Some(1.0);
    }
    let bare = text.trim_start_matches(['/', ',', '(', '[', ' ', '×']).trim_end_matches([')', ']']);
    inverse_kelvin_scale(bare).or_else(|| inverse_kelvin_scale(text.trim_start_matches(['/', ','])))
}

/// What stands above a column of logarithms.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Logarithm {
    /// To base 10 rather than e.
    pub decimal: bool,
    /// Written `log`, without its base.
    pub base_unsaid: bool,
    /// What it is the logarithm of, with the unit: `k/s⁻¹`.
    pub of: String,
    /// What stands behind the logarithm, perhaps the unit of k.
    pub behind: String,
}

/// `ln k`, `ln(k/s⁻¹)`, `log10 (k · h)`, `lg k, k in 1/h`.
pub(super) fn logarithm(header: &str) -> Option<Logarithm> {
    let header = header.trim();
    let lower = lower(header);
    if lower.len() != header.len() {
        return None;
    }
    let (prefix, decimal) = [
        ("log10", true),
        ("log_10", true),
        ("log₁₀", true),
        ("log_e", false),
        ("loge", false),
        ("log", true),
        ("lg", true),
        ("ln", false),
    ]
    .into_iter()
    .find(|(prefix, _)| lower.starts_with(prefix))?;
    let rest = header.get(prefix.len()..)?;
    // "logger", "lot", "length" are other words.
    if !rest.starts_with([' ', '(', '[', '{']) && !matches!(rest, "k" | "K") {
        return None;
    }
    let rest = rest.trim_start();
    let base_unsaid = prefix == "log";
    if let Some(inside) = rest.strip_prefix(['(', '[', '{']) {
        let close = matching_bracket(inside)?;
        let of = inside.get(..close)?.trim().to_string();
        let behind = inside.get(close..)?.get(1..)?.trim().to_string();
        return Some(Logarithm { decimal, base_unsaid, of, behind });
    }
    let end = rest.find([' ', '/', '(', '[', ',', ';', '·', '×']).unwrap_or(rest.len());
    let of = rest.get(..end)?.to_string();
    Some(Logarithm { decimal, base_unsaid, of, behind: rest.get(end..)?.trim().to_string() })
}

/// Where the bracket closes that was opened just before `text`.
fn matching_bracket(text: &str) -> Option<usize> {
    let mut depth = 0;
    for (at, character) in text.char_indices() {
        match character {
            '(' | '[' | '{' => depth += 1,
            ')' | ']' | '}' if depth == 0 => return Some(at),
            ')' | ']' | '}' => depth -= 1,
            _ => {}
        }
    }
    None
}

/// The unit of k of which the argument of a logarithm is made a number:
/// `k/s⁻¹`, `k·h`, `k × s`.
pub(super) fn unit_in_argument(of: &str) -> Option<RateUnit> {
    let at = of.find(|c: char| !c.is_alphanumeric() && c != '_' && c != '\'')?;
    let (_, rest) = of.split_at(at);
    let rest = rest.trim();
    if let Some(unit) = rest.strip_prefix(['/', ',']) {
        return rate_unit(unit);
    }
    if rest.starts_with(['(', '[']) {
        return rate_unit(rest);
    }
    let factor = rest.trim_start_matches(['·', '×', '*', '⋅', ' ']);
    RateUnit::parse(&format!("1/({factor})")).ok()
}

/// A unit of k in brackets, behind a slash, a comma or "in".
pub(super) fn rate_unit(text: &str) -> Option<RateUnit> {
    let text = text.trim().trim_start_matches(['/', ',', ';', ':']).trim();
    let after_in = text
        .rsplit_once(" in ")
        .map(|(_, unit)| unit)
        .or_else(|| text.strip_prefix("in "))
        .unwrap_or(text);
    let colon = after_in.rsplit_once(':').map_or(after_in, |(_, unit)| unit);
    [after_in, colon, colon.trim_matches(['(', ')', '[', ']'])]
        .into_iter()
        .find_map(|unit| RateUnit::parse(unit).ok())
}

/// A temperature inside a header, as in `c at 50 °C / mol L⁻¹`, and the header without it.
pub(super) fn temperature(header: &str) -> Option<(Quantity, String)> {
    let mut from = 0;
    while let Some(start) =
        header.get(from..)?.find(|c: char| c.is_ascii_digit()).map(|at| from + at)
    {
        let rest = header.get(start..)?;
        let length = rest
            .find(|c: char| !c.is_ascii_digit() && !matches!(c, '.' | ','))
            .unwrap_or(rest.len());
        let number = rest.get(..length)?.trim_end_matches(['.', ',']);
        let after = rest.get(number.len()..)?;
        if let Some((unit, unit_length)) = leading_degree(after)
            && let Some(value) = read_decimal(&number.replace(',', "."))
        {
            let negative = header.get(..start)?.ends_with(['-', '−', '–']);
            let sign_start = if negative {
                header.get(..start)?.char_indices().last().map_or(start, |(at, _)| at)
            } else {
                start
            };
            let before = header.get(..sign_start)?.trim_end().trim_end_matches(['@', '=', '(']);
            let after = after.get(unit_length..)?.trim_start_matches(')');
            let before = strip_last_word(before, &["at", "bei", "à", "T", "T ="]);
            let kept = format!("{before} {}", after.trim_start())
                .trim()
                .trim_matches([',', ';', ':', '_'])
                .trim()
                .to_string();
            return Some((Quantity::new(if negative { -value } else { value }, unit.code()), kept));
        }
        from = start + length.max(1);
    }
    None
}

/// A condition such as `25 °C/60 % RH` without its humidity; none if it names none.
pub(in crate::table) fn without_humidity(text: &str) -> Option<String> {
    if text.len() > 80 || !text.contains(['R', 'r']) {
        return None;
    }
    let lower = text.to_ascii_lowercase();
    let word = ["rh", "r.h.", "r. h.", "rf", "r.f.", "rel"].into_iter().find_map(|word| {
        let at = lower.rfind(word)?;
        let before = text.get(..at)?.trim_end();
        (before.ends_with('%') || before.ends_with(|c: char| c.is_ascii_digit())).then_some(at)
    })?;
    let before = text.get(..word)?.trim_end().trim_end_matches('%').trim_end();
    let number =
        before.trim_end_matches(|c: char| c.is_ascii_digit() || matches!(c, '.' | '±' | ' '));
    let kept =
        number.trim_end().trim_end_matches(['/', ',', ';', '-', '–', '(', '+', '@']).trim_end();
    let after = text
        .get(word..)?
        .trim_start_matches(|c: char| c.is_alphabetic() || matches!(c, '.' | ' ' | ')'));
    (number.len() < before.len()).then(|| format!("{kept} {after}").trim().to_string())
}

fn strip_last_word<'a>(text: &'a str, words: &[&str]) -> &'a str {
    let text = text.trim_end();
    for word in words {
        if let Some(rest) = text.strip_suffix(word)
            && (rest.is_empty() || rest.ends_with([' ', '(', ',']))
        {
            return rest.trim_end().trim_end_matches(['(', ',']).trim_end();
        }
    }
    text
}

/// A degree sign with its scale, or a bare K, at the start; and its length in bytes.
fn leading_degree(text: &str) -> Option<(TemperatureUnit, usize)> {
    let spaces = text.len() - text.trim_start().len();
    let rest = text.trim_start();
    for (written, unit) in [
        ("°C", TemperatureUnit::Celsius),
        ("° C", TemperatureUnit::Celsius),
        ("ºC", TemperatureUnit::Celsius),
        ("℃", TemperatureUnit::Celsius),
        ("˚C", TemperatureUnit::Celsius),
        ("degC", TemperatureUnit::Celsius),
        ("deg C", TemperatureUnit::Celsius),
        ("oC", TemperatureUnit::Celsius),
        ("C", TemperatureUnit::Celsius),
        ("°F", TemperatureUnit::Fahrenheit),
        ("℉", TemperatureUnit::Fahrenheit),
        ("K", TemperatureUnit::Kelvin),
        ("°", TemperatureUnit::Celsius),
    ] {
        if let Some(after) = rest.strip_prefix(written) {
            // 50C and 323 K, but not 5 C2H6 nor 1000 K/T.
            let ends = !after.starts_with(|c: char| c.is_alphanumeric())
                && !after.trim_start().starts_with("/T")
                && !after.trim_start().starts_with("/min");
            return ends.then_some((unit, spaces + written.len()));
        }
    }
    None
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    #[test]
    fn inverse_temperatures_in_many_shapes() {
        for (header, multiplier) in [
            ("1/T", 1.0),
            ("1/T (1/K)", 1.0),
            ("1/T / K⁻¹", 1.0),
            ("T⁻¹ / K⁻¹", 1.0),
            ("1/(T/K)", 1.0),
            ("1/T [K]", 1.0),
            ("1000/T", 1e-3),
            ("1000/T (K⁻¹)", 1e-3),
            ("10^3/T", 1e-3),
            ("10³ K/T", 1e-3),
            ("1000 K / T", 1e-3),
            ("1e3/T", 1e-3),
            ("1/T × 10³", 1e-3),
            ("1/T*1000", 1e-3),
            ("(1/T)×10^3", 1e-3),
            ("1/T / 10⁻³ K⁻¹", 1e-3),
            ("1/T (10^-3 K^-1)", 1e-3),
            ("10^4/T", 1e-4),
            ("inverse temperature (1/K)", 1.0),
        ] {
            let found = inverse(header).map_or(f64::NAN, |inverse| inverse.multiplier);
            assert!((found / multiplier - 1.0).abs() < 1e-12, "{header}: {found}");
        }
        for header in ["T", "1/h", "k", "1000", "10^4 k", "1/t", "T/°C", "", "1/T (h)"] {
            assert_eq!(inverse(header), None, "{header}");
        }
    }

    #[test]
    fn logarithms_and_their_units() {
        let found = logarithm("ln(k/s⁻¹)").unwrap();
        assert_eq!((found.decimal, found.of.as_str()), (false, "k/s⁻¹"));
        assert_eq!(unit_in_argument("k/s⁻¹").unwrap().code(), "1/s");
        assert_eq!(unit_in_argument("k · h").unwrap().code(), "1/h");
        assert_eq!(unit_in_argument("k·s·mol/L").map(RateUnit::code).unwrap(), "L/(mol s)");
        assert_eq!(unit_in_argument("k (1/h)").unwrap().code(), "1/h");
        assert_eq!(unit_in_argument("k"), None);
        let found = logarithm("log k, k in 1/h").unwrap();
        assert!(found.decimal && found.base_unsaid);
        assert_eq!(
            (found.of.as_str(), rate_unit(&found.behind).unwrap().code()),
            ("k", "1/h".to_string())
        );
        assert_eq!(rate_unit(&logarithm("ln k / h-1").unwrap().behind).unwrap().code(), "1/h");
        assert_eq!(rate_unit(&logarithm("ln k [k: h⁻¹]").unwrap().behind).unwrap().code(), "1/h");
        assert!(!logarithm("log10 (k/min-1)").unwrap().base_unsaid);
        for header in ["logger", "lot", "k", "length", "ln", "login time"] {
            assert_eq!(logarithm(header), None, "{header}");
        }
    }

    #[test]
    fn humidity_is_taken_off_a_condition() {
        for (text, kept) in [
            ("25°C/60%RH", "25°C"),
            ("25 °C / 60 % RH", "25 °C"),
            ("40 °C, 75% r.h.", "40 °C"),
            ("40C/75RH", "40C"),
            ("assay at 30 °C (65 % RH)", "assay at 30 °C"),
        ] {
            assert_eq!(without_humidity(text).as_deref(), Some(kept), "{text}");
        }
        for text in ["", "RH", "25 °C", "% RSD", "% rel. sd", "run 3", "rate 5", "60 % left"] {
            assert_eq!(without_humidity(text), None, "{text}");
        }
    }

    #[test]
    fn temperatures_inside_a_header() {
        for (header, value, unit, kept) in [
            ("50 °C", 50.0, "°C", ""),
            ("50°C", 50.0, "°C", ""),
            ("c at 50 °C / mol L-1", 50.0, "°C", "c / mol L-1"),
            ("% left (50 °C)", 50.0, "°C", "% left"),
            ("T = 323.15 K", 323.15, "K", ""),
            ("-20 °C", -20.0, "°C", ""),
            ("run 1, 60C", 60.0, "°C", "run 1"),
            ("122 °F", 122.0, "°F", ""),
        ] {
            assert_eq!(
                temperature(header),
                Some((Quantity::new(value, unit), kept.to_string())),
                "{header}"
            );
        }
        for header in ["1000 K/T", "k1", "10^4 k", "50", "2 Charge", "5 K/min", ""] {
            assert_eq!(temperature(header), None, "{header}");
        }
    }
}
