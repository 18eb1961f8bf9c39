//! Reading decimals. The standard library's own reader brings a table of powers that makes the
//! page as much larger as its whole script; `serde_json`, which opens studies, reads to the last
//! bit as well.

/// The number nearest to a decimal such as `12`, `-.5`, `5.` or `+1e-3`; none for anything else,
/// and beyond what a double holds.
pub fn read_decimal(text: &str) -> Option<f64> {
    let as_json = |text: &str| serde_json::from_str::<f64>(text).ok();
    let no_blanks = text.bytes().all(|byte| byte.is_ascii_graphic());
    if !no_blanks {
        return None;
    }
    as_json(text).or_else(|| {
        let (sign, rest) = match text.as_bytes().first()? {
            b'-' => ("-", &text[1..]),
            b'+' => ("", &text[1..]),
            _ => ("", text),
        };
        let (mantissa, exponent) = rest.split_at(rest.find(['e', 'E']).unwrap_or(rest.len()));
        let (whole, fraction) = mantissa.split_once('.').unwrap_or((mantissa, ""));
        let digits = |part: &str| part.bytes().all(|byte| byte.is_ascii_digit());
        if !digits(whole) || !digits(fraction) || whole.len() + fraction.len() == 0 {
            return None;
        }
        let whole = whole.trim_start_matches('0');
        let whole = if whole.is_empty() { "0" } else { whole };
        as_json(&format!("{sign}{whole}.{fraction}0{exponent}"))
    })
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::*;

    #[test]
    fn what_is_no_decimal_is_none() {
        for text in [
            "", "-", ".", "+.", "e5", "1e", "1 ", " 1", "--1", "+-1", "1.2.3", "inf", "nan",
            "0x10", "1e400", "1_000", "½",
        ] {
            assert_eq!(read_decimal(text), None, "{text}");
        }
    }

    proptest! {
        /// The standard library's reader is correctly rounded, and accepts the same spellings.
        #[test]
        fn agrees_with_the_standard_library(
            sign in "[-+]?", whole in "[0-9]{0,22}", point in "[.]?", fraction in "[0-9]{0,22}",
            exponent in "([eE][-+]?[0-9]{1,3})?",
        ) {
            let text = format!("{sign}{whole}{point}{fraction}{exponent}");
            let expected = text.parse().ok().filter(|value: &f64| value.is_finite());
            prop_assert_eq!(read_decimal(&text), expected, "{}", text);
        }
    }
}
