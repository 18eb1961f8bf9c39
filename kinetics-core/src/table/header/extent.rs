//! The extent that the head of a column of times names: `t½`, `half-life (d)`, `time to 5 % loss`.

use crate::numeric::decimals::read_decimal;
use crate::text::lower;

/// Which part is gone at the times of a column.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum NamedExtent {
    /// This fraction.
    Gone(f64),
    /// All but this fraction, by a name such as `t90`: what is left, as the names of shelf lives
    /// usually mean it.
    ShelfLife(f64),
    /// A fraction that may be what is gone or what is left, as in `time to 10 %`.
    Unclear(f64),
}

const HALF: [&str; 10] = [
    "t½",
    "t1/2",
    "t₁/₂",
    "t0.5",
    "t0,5",
    "halflife",
    "halftime",
    "halbwertszeit",
    "demivie",
    "half-life",
];
const GONE: [&str; 8] =
    ["gone", "loss", "lost", "conver", "reacted", "degrad", "decompos", "consumed"];
const LEFT: [&str; 3] = ["left", "remain", "retained"];

/// The extent in a header, if it names one.
pub fn named_extent(header: &str) -> Option<NamedExtent> {
    let lower = lower(header);
    let squeezed: String =
        lower.chars().filter(|c| !c.is_whitespace() && !"_()[]{}".contains(*c)).collect();
    let bare = squeezed.replace('-', "");
    let is_half = |word: &&'static str| {
        let starts = squeezed.strip_prefix(*word).or(bare.strip_prefix(*word));
        starts.is_some_and(|rest| !rest.starts_with(|c: char| c.is_ascii_digit()))
            || (word.len() > 5 && bare.contains(*word))
    };
    if HALF.iter().any(is_half) {
        return Some(NamedExtent::Gone(0.5));
    }
    let percent = match squeezed.split_once('%') {
        Some((before, _)) => number_at_end(before)?,
        None => {
            let rest = squeezed.strip_prefix('t')?;
            let end = rest.find(|c: char| !c.is_ascii_digit()).unwrap_or(rest.len());
            rest.get(..end).filter(|digits| digits.len() == 2).and_then(read_decimal)?
        }
    };
    let fraction = percent / 100.0;
    if !(fraction > 0.0 && fraction < 1.0) {
        return None;
    }
    let says = |words: &[&str]| words.iter().any(|word| lower.contains(word));
    Some(match (says(&GONE), says(&LEFT)) {
        (true, false) => NamedExtent::Gone(fraction),
        (false, true) => NamedExtent::Gone(1.0 - fraction),
        // Half gone is half left.
        _ if fraction == 0.5 => NamedExtent::Gone(0.5),
        _ if is_short(&squeezed) && fraction < 0.5 => NamedExtent::Gone(fraction),
        _ if is_short(&squeezed) => NamedExtent::ShelfLife(fraction),
        _ => NamedExtent::Unclear(fraction),
    })
}

/// `t10%`, `t90`: a letter and a number.
fn is_short(squeezed: &str) -> bool {
    squeezed.strip_prefix('t').is_some_and(|rest| rest.starts_with(|c: char| c.is_ascii_digit()))
}

fn number_at_end(text: &str) -> Option<f64> {
    let start = text
        .char_indices()
        .rev()
        .take_while(|(_, c)| c.is_ascii_digit() || matches!(c, '.' | ','))
        .last()
        .map(|(at, _)| at)?;
    read_decimal(&text.get(start..)?.replace(',', "."))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn halves_and_worded_parts_are_clear() {
        for header in [
            "t½",
            "t½ / h",
            "t1/2, d",
            "t_1/2 (h)",
            "t(1/2)",
            "half-life (d)",
            "Half life",
            "t50",
            "t50 / min",
            "Halbwertszeit",
            "t 50%",
            "demi-vie",
        ] {
            assert_eq!(named_extent(header), Some(NamedExtent::Gone(0.5)), "{header}");
        }
        let close = |header: &str, expected: f64| match named_extent(header) {
            Some(NamedExtent::Gone(found)) => (found - expected).abs() < 1e-12,
            _ => false,
        };
        assert!(close("time to 5 % loss, mo", 0.05));
        assert!(close("t (2,5 % gone)", 0.025));
        assert!(close("t to 95 % left (d)", 0.05));
        assert!(close("t90 / h, conversion", 0.9));
        assert!(close("time to 10 % degradation (d)", 0.1));
        assert!(close("t10% (days)", 0.1) && close("t10 / d", 0.1) && close("t5 %", 0.05));
    }

    #[test]
    fn what_may_be_gone_or_left_is_unclear_and_the_rest_says_nothing() {
        assert_eq!(named_extent("t90"), Some(NamedExtent::ShelfLife(0.9)));
        assert_eq!(named_extent("t95, months"), Some(NamedExtent::ShelfLife(0.95)));
        assert_eq!(named_extent("t90 %"), Some(NamedExtent::ShelfLife(0.9)));
        assert_eq!(named_extent("time to 10 %"), Some(NamedExtent::Unclear(0.1)));
        for header in ["", "t", "t/h", "time", "t0", "t100", "temperature", "%", "t500 / s", "T1"] {
            assert_eq!(named_extent(header), None, "{header}");
        }
    }
}
