//! Numbers with as many figures as their interval supports.

/// How many figures a number and its limits are printed with.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Figures(usize);

/// Which way a number is rounded; a bound is rounded to the side on which it still holds.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Rounding {
    /// To the nearest.
    Nearest,
    /// Downwards.
    Down,
    /// Upwards.
    Up,
}

/// Figures where no interval says how many are meant.
const WITHOUT_INTERVAL: usize = 2;
/// More figures than this help nobody.
const MOST: usize = 6;

impl Figures {
    /// A fixed number of significant figures.
    pub fn exactly(figures: usize) -> Self {
        Self(figures.clamp(1, 15))
    }

    /// Down to the leading digit of the interval's half-width (one more where that digit is 1),
    /// but two at least: 185.3 ± 6.9 → 185, 44 from 36 to 54 → 44, 6.54 from 3.2 to 13 → 6.5.
    pub fn supported(value: f64, range: Option<(f64, f64)>) -> Self {
        let half_width = range.map_or(0.0, |(low, high)| 0.5 * (high - low).abs());
        if value == 0.0 || !(half_width > 0.0 && half_width.is_finite()) {
            return Self(if range.is_some() && half_width == 0.0 { 4 } else { WITHOUT_INTERVAL });
        }
        let place = libm::floor(libm::log10(half_width));
        let leading = half_width / libm::pow(10.0, place);
        let extra = if leading < 2.0 { 1.0 } else { 0.0 };
        let figures = libm::floor(libm::log10(value.abs())) - place + 1.0 + extra;
        Self(figures.clamp(WITHOUT_INTERVAL as f64, MOST as f64) as usize)
    }

    /// Decimals after the point with which a number near `value` is printed.
    fn decimals(self, value: f64) -> i32 {
        if value == 0.0 {
            return self.0 as i32 - 1;
        }
        self.0 as i32 - 1 - libm::floor(libm::log10(value.abs())) as i32
    }

    /// `value` rounded to these figures, never beyond a limit that must hold.
    pub fn rounded(self, value: f64, rounding: Rounding) -> f64 {
        if value == 0.0 || !value.is_finite() {
            return value;
        }
        let unit = libm::pow(10.0, f64::from(-self.decimals(value)));
        let steps = value / unit;
        // What is a whole number of steps but for rounding stays there.
        let nearest = libm::round(steps);
        let whole = if (steps - nearest).abs() < 1e-9 * nearest.abs() {
            nearest
        } else {
            match rounding {
                Rounding::Nearest => nearest,
                Rounding::Down => libm::floor(steps),
                Rounding::Up => libm::ceil(steps),
            }
        };
        whole * unit
    }

    /// One number: "185", "0.0031", "1.4 × 10⁻⁵".
    pub fn number(self, value: f64, decimal: char) -> String {
        significant(value, self.0, decimal)
    }

    /// The limits of an interval about `value`, in the same style: to the same decimal where
    /// three figures or more are supported, else to two figures each.
    pub fn limits(self, value: f64, low: f64, high: f64, decimal: char) -> (String, String) {
        let style = |limit: f64| {
            if self.0 > WITHOUT_INTERVAL && !needs_power_of_ten(value) && limit != 0.0 {
                let decimals = self.decimals(value).max(0) as usize;
                fixed(limit, decimals, decimal)
            } else {
                significant(limit, self.0, decimal)
            }
        };
        (style(low), style(high))
    }
}

fn needs_power_of_ten(value: f64) -> bool {
    let size = value.abs();
    size != 0.0 && !(1e-3..1e5).contains(&size)
}

/// `value` to so many significant figures; powers of ten below 0.001 and from 100 000.
pub fn significant(value: f64, figures: usize, decimal: char) -> String {
    if !value.is_finite() {
        return if value.is_nan() { "unknown".into() } else { "unlimited".into() };
    }
    // Rounding first decides the power of ten: 9.96 to two figures is 10.
    let scientific = format!("{value:.*e}", figures - 1);
    let (mantissa, exponent) = scientific.split_once('e').unwrap_or((&scientific, "0"));
    let exponent: i32 = exponent.parse().unwrap_or(0);
    if value != 0.0 && !(-3..5).contains(&exponent) {
        let power: String = exponent.to_string().chars().map(superscript).collect();
        return format!("{}\u{a0}×\u{a0}10{power}", signed(mantissa, decimal));
    }
    let decimals = figures as i32 - 1 - exponent;
    if decimals >= 0 {
        return fixed(value, decimals as usize, decimal);
    }
    let unit = libm::pow(10.0, f64::from(-decimals));
    fixed(libm::round(value / unit) * unit, 0, decimal)
}

/// `value` with so many decimals, U+2212 for a minus.
pub fn fixed(value: f64, decimals: usize, decimal: char) -> String {
    let text = format!("{value:.decimals$}");
    // "-0.0" is a rounding of nothing.
    let idle = text.starts_with('-') && text.chars().all(|c| matches!(c, '-' | '0' | '.'));
    signed(if idle { &text[1..] } else { &text }, decimal)
}

fn signed(text: &str, decimal: char) -> String {
    text.chars()
        .map(|c| match c {
            '-' => '\u{2212}',
            '.' => decimal,
            other => other,
        })
        .collect()
}

fn superscript(digit: char) -> char {
    match digit {
        '-' => '⁻',
        '1' => '¹',
        '2' => '²',
        '3' => '³',
        other => other.to_digit(10).and_then(|d| char::from_u32(0x2070 + d)).unwrap_or(other),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn shown(value: f64, low: f64, high: f64) -> (String, String, String) {
        let figures = Figures::supported(value, Some((low, high)));
        let (low, high) = figures.limits(value, low, high, '.');
        (figures.number(value, '.'), low, high)
    }

    #[test]
    fn figures_follow_the_interval() {
        let is = |found: (String, String, String), expected: [&str; 3]| {
            assert_eq!([&found.0[..], &found.1[..], &found.2[..]], expected);
        };
        is(shown(185.31, 178.38, 192.24), ["185", "178", "192"]);
        is(shown(185.31, 184.11, 186.51), ["185.3", "184.1", "186.5"]);
        is(shown(44.2, 36.1, 54.3), ["44", "36", "54"]);
        is(shown(6.54, 3.21, 13.3), ["6.5", "3.2", "13"]);
        is(shown(56.1, 40.2, 79.4), ["56", "40", "79"]);
        is(shown(0.0312, 0.0221, 0.0443), ["0.031", "0.022", "0.044"]);
    }

    #[test]
    fn large_and_small_numbers_take_powers_of_ten() {
        assert_eq!(significant(2.0424e15, 3, '.'), "2.04\u{a0}×\u{a0}10¹⁵");
        assert_eq!(significant(1.4e-5, 2, ','), "1,4\u{a0}×\u{a0}10⁻⁵");
        assert_eq!(significant(99_960.0, 2, '.'), "1.0\u{a0}×\u{a0}10⁵");
        assert_eq!(significant(1234.0, 2, '.'), "1200");
        assert_eq!(significant(0.0, 2, '.'), "0.0");
        assert_eq!(significant(-6.71, 2, '.'), "\u{2212}6.7");
    }

    #[test]
    fn bounds_are_rounded_to_the_side_on_which_they_hold() {
        let two = Figures::exactly(2);
        assert_eq!(two.rounded(9.87, Rounding::Down), 9.8);
        assert_eq!(two.rounded(9.81, Rounding::Up), 9.9);
        assert_eq!(two.rounded(0.3 - 1e-17, Rounding::Down), 0.3);
        assert_eq!(two.rounded(1234.0, Rounding::Up), 1300.0);
        assert_eq!(two.rounded(1234.0, Rounding::Nearest), 1200.0);
    }

    #[test]
    fn nothing_that_is_no_number_is_printed_as_one() {
        for value in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
            assert!(
                !significant(value, 2, '.').contains(['N', 'i', 'n'].as_slice())
                    || !significant(value, 2, '.').contains("NaN")
            );
        }
        assert_eq!(significant(f64::NAN, 2, '.'), "unknown");
        assert_eq!(fixed(-0.04, 1, '.'), "0.0");
    }
}
