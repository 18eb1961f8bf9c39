//! Powers of ten in a header: `10^4 k`, `k × 10⁴`, `1000·k`.
//!
//! By the rules of quantity calculus a column headed 10⁴ k holds 10⁴ times k,
//! so that k is the number times 10⁻⁴; but many who write `k × 10⁴` mean the
//! opposite. How it was taken is therefore always said.

use crate::numeric::decimals::read_decimal;

/// A name without its factor, and the factor.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Factor {
    /// What remains of the name.
    pub name: String,
    /// The number that stands before or behind it.
    pub size: f64,
    /// It stands behind, which is read both ways.
    pub behind: bool,
}

/// Takes a factor off a name.
pub(super) fn factor(name: &str) -> Option<Factor> {
    let name = name.trim();
    before(name).or_else(|| behind(name))
}

fn before(name: &str) -> Option<Factor> {
    let (size, rest) = leading_power(name)?;
    let rest = rest.trim_start_matches(|c: char| c == ' ' || is_times(c));
    // "95 % CI" and "1 h" are no factors.
    let fits = rest.starts_with(|c: char| c.is_alphabetic() || c == '[' || c == '(')
        && size >= 10.0
        || size < 1.0;
    (fits && !rest.is_empty()).then(|| Factor { name: rest.to_string(), size, behind: false })
}

fn behind(name: &str) -> Option<Factor> {
    let at = name.char_indices().skip(1).find_map(|(at, c)| {
        let rest = name.get(at..)?;
        let starts = is_times(c)
            || c == ' '
            || ((c == 'x' || c == 'X') && rest.get(1..)?.trim_start().starts_with("10"));
        let number = rest.trim_start_matches(|c: char| c == ' ' || is_times(c));
        let number = number.strip_prefix(['x', 'X']).map_or(number, str::trim_start);
        let (size, left) = leading_power(number)?;
        (starts && left.trim().is_empty() && !(1.0..10.0).contains(&size)).then_some((
            at,
            size,
            c == ' ' && rest.trim_start() == number,
        ))
    });
    let (at, size, only_space) = at?;
    let kept = name.get(..at)?.trim_end();
    // "batch 10" is no factor; "k 10^4" is one.
    let written_as_power =
        name.get(at..)?.contains(['^', '⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'])
            || name.get(at..)?.contains("10-");
    (!only_space || written_as_power).then(|| Factor { name: kept.to_string(), size, behind: true })
}

fn is_times(character: char) -> bool {
    matches!(character, '×' | '·' | '*' | '⋅' | '∙' | '•' | '∗')
}

/// A power of ten at the start, and what follows: `10^4`, `10⁻⁴`, `10-4`, `1e4`, `1000`.
pub(super) fn leading_power(text: &str) -> Option<(f64, &str)> {
    let digits = text.find(|c: char| !c.is_ascii_digit()).unwrap_or(text.len());
    let (number, rest) = text.split_at(digits);
    if number == "10"
        && let Some((power, rest)) = exponent(rest)
    {
        return Some((read_decimal(&format!("1e{power}"))?, rest));
    }
    if let Some(power) = rest.strip_prefix(['e', 'E'])
        && number == "1"
        && let Some((power, rest)) = signed_integer(power)
    {
        return Some((read_decimal(&format!("1e{power}"))?, rest));
    }
    let round = number.len() <= 9
        && number.starts_with('1')
        && number.bytes().skip(1).all(|byte| byte == b'0');
    let decimal = text.strip_prefix("0.").and_then(|decimals| {
        let end = decimals.find(|c: char| c != '0')?;
        decimals.get(end..)?.strip_prefix('1').map(|rest| (end, rest))
    });
    match decimal {
        Some((zeros, rest)) => Some((read_decimal(&format!("1e-{}", zeros + 1))?, rest)),
        None => round.then(|| Some((read_decimal(number)?, rest)))?,
    }
}

fn exponent(text: &str) -> Option<(i32, &str)> {
    if let Some(rest) = text.strip_prefix('^') {
        let rest = rest.strip_prefix(['(', '{']).unwrap_or(rest);
        let (power, rest) = signed_integer(rest)?;
        return Some((power, rest.strip_prefix([')', '}']).unwrap_or(rest)));
    }
    if text.starts_with(['-', '−', '–', '+']) {
        return signed_integer(text);
    }
    let raised = |c: char| "⁰¹²³⁴⁵⁶⁷⁸⁹".chars().position(|digit| digit == c);
    let negative = text.starts_with('⁻');
    let digits = text.trim_start_matches(['⁻', '⁺']);
    let end = digits.find(|c: char| raised(c).is_none()).unwrap_or(digits.len());
    let (digits, rest) = digits.split_at(end);
    let size: i32 =
        digits.chars().take(3).try_fold(0_i32, |sum, c| Some(sum * 10 + raised(c)? as i32))?;
    (!digits.is_empty()).then_some((if negative { -size } else { size }, rest))
}

fn signed_integer(text: &str) -> Option<(i32, &str)> {
    let negative = text.starts_with(['-', '−', '–']);
    let digits = text.strip_prefix(['-', '−', '–', '+']).unwrap_or(text);
    let end = digits.find(|c: char| !c.is_ascii_digit()).unwrap_or(digits.len());
    let (digits, rest) = digits.split_at(end);
    let size: i32 = digits.parse().ok().filter(|size| *size < 300)?;
    Some((if negative { -size } else { size }, rest))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn found(name: &str) -> Option<(String, f64, bool)> {
        factor(name).map(|factor| (factor.name, factor.size, factor.behind))
    }

    #[test]
    fn factors_before_a_name() {
        for name in
            ["10^4 k", "10⁴ k", "10⁴·k", "10^4 × k", "10^{4}k", "1e4 k", "10000 k", "10000·k"]
        {
            assert_eq!(found(name), Some(("k".to_string(), 1e4, false)), "{name}");
        }
        assert_eq!(found("10⁻³ k"), Some(("k".to_string(), 1e-3, false)));
    }

    #[test]
    fn factors_behind_a_name() {
        for name in ["k × 10^4", "k×10⁴", "k x 10^4", "k x10^4", "k*10000", "k 10^4", "k · 10⁴"]
        {
            assert_eq!(found(name), Some(("k".to_string(), 1e4, true)), "{name}");
        }
        assert_eq!(found("k 10-3"), Some(("k".to_string(), 1e-3, true)));
    }

    #[test]
    fn other_numbers_are_no_factors() {
        for name in ["k", "k1", "batch 10", "95 % CI", "1/T", "t 90", "1 h", "", "10", "run 1"] {
            assert_eq!(found(name), None, "{name}");
        }
    }
}
