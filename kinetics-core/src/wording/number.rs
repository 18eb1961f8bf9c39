//! Numbers with as many figures as their interval supports.

use crate::numeric::decimals::read_decimal;

/// Down to which decimal place numbers of one kind are printed.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Figures(Kind);

#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Kind {
    /// So many significant figures each.
    Each(usize),
    /// All to one place, that of 10^`place`; with powers of ten or without.
    Common { place: i32, powers: bool },
}

/// Which way a number is rounded; a bound is rounded to the side on which it still holds, the
/// ends of a two-sided interval to the nearest: outwards, each could move by a whole unit of the
/// last place, up to half the half-width, and the level named beside them would no longer be
/// theirs.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Rounding {
    /// To the nearest.
    Nearest,
    /// Downwards.
    Down,
    /// Upwards.
    Up,
}

/// Whether a number was worked out or is the user's own.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Origin {
    /// Worked out from measurements: its interval says how many figures mean something.
    Fitted,
    /// Stated, or computed from stated values alone: repeated as it was stated.
    Stated,
}

/// Figures where no interval says how many are meant.
const WITHOUT_INTERVAL: usize = 2;
/// Figures of what is computed from stated numbers alone, without an interval.
const FROM_STATED: usize = 4;
/// More figures than this help nobody.
const MOST: usize = 6;
/// From this ratio of its limits on, an interval is one of factors: 6.5 from 3.2 to 13.
const WIDE: f64 = 3.0;

impl Figures {
    /// A fixed number of significant figures.
    pub fn exactly(figures: usize) -> Self {
        Self(Kind::Each(figures.clamp(1, 15)))
    }

    /// Estimate and limits to one place: that of the leading digit of the half-width, one further
    /// where that digit is 1, and the estimate to two figures at least: 185.3 ± 6.9 → 185 from 178
    /// to 192, 99.93 from 94.48 to 105.38 → 100 from 94 to 105. Where the limits differ by a
    /// factor of three or more, two figures each: 6.54 from 3.2 to 13 → 6.5.
    pub fn supported(value: f64, range: Option<(f64, f64)>) -> Self {
        let half_width = range.map_or(0.0, |(low, high)| 0.5 * (high - low).abs());
        if !(half_width > 0.0 && half_width.is_finite() && value.is_finite()) {
            let exact = range.is_some() && half_width == 0.0;
            return Self(Kind::Each(if exact { 4 } else { WITHOUT_INTERVAL }));
        }
        let wide = range.is_some_and(|(low, high)| {
            let (small, large) = (low.abs().min(high.abs()), low.abs().max(high.abs()));
            low * high > 0.0 && large >= WIDE * small
        });
        if wide {
            return Self(Kind::Each(WITHOUT_INTERVAL));
        }
        let place = meant_place(half_width);
        let place = if value == 0.0 {
            place
        } else {
            let leading = leading_place(value, WITHOUT_INTERVAL);
            place.min(leading - 1).max(leading + 1 - MOST as i32)
        };
        Self(Kind::Common { place, powers: needs_power_of_ten(value) })
    }

    /// Two numbers of one kind that are compared: two figures of the smaller, both to its place.
    pub fn compared(one: f64, other: f64) -> Self {
        let small = one.abs().min(other.abs());
        let large = one.abs().max(other.abs());
        if !(small > 0.0 && large < WIDE * small) {
            return Self(Kind::Each(WITHOUT_INTERVAL));
        }
        let place = leading_place(small, WITHOUT_INTERVAL) + 1 - WITHOUT_INTERVAL as i32;
        Self(Kind::Common { place, powers: needs_power_of_ten(small) })
    }

    /// As `origin` wants it: a stated number in full, whatever its interval, as 105 and 105.25.
    pub fn of(origin: Origin, value: f64, range: Option<(f64, f64)>) -> Self {
        let supported = Self::supported(value, range);
        if origin == Origin::Fitted || value == 0.0 || !value.is_finite() {
            return supported;
        }
        // Converted to and fro, a stated number keeps its figures but for rounding.
        let as_typed = (1..=MOST).find(|figures| {
            let typed = read_decimal(&format!("{value:.*e}", figures - 1)).unwrap_or(f64::NAN);
            (typed - value).abs() <= 1e-9 * value.abs()
        });
        let stated = |figures: usize| leading_place(value, figures) + 1 - figures as i32;
        let powers = needs_power_of_ten(value);
        match (as_typed, supported.0, range) {
            (Some(figures), Kind::Common { place, .. }, _) => {
                Self(Kind::Common { place: place.min(stated(figures)), powers })
            }
            (Some(figures), Kind::Each(least), Some(_)) => {
                let place = stated(figures.max(least));
                Self(Kind::Common { place, powers })
            }
            (Some(figures), Kind::Each(_), None) => {
                Self(Kind::Common { place: stated(figures), powers })
            }
            (None, _, None) => Self(Kind::Each(FROM_STATED)),
            (None, _, Some(_)) => supported,
        }
    }

    /// Percentages of which what lacks to 100 must show, of the largest of them at least:
    /// 99.97 %, not 100 %.
    pub fn percent(self, value: f64, largest: f64, decimal: char) -> String {
        const FINEST: i32 = -6;
        let lacks = |percent: f64| {
            (percent > 90.0 && percent < 100.0)
                .then(|| leading_place(100.0 - percent, 1).max(FINEST))
        };
        let place = match self.0 {
            Kind::Common { place, .. } => lacks(largest).map(|needed| needed.min(place)),
            Kind::Each(_) => lacks(value),
        };
        match place {
            Some(place) => Self(Kind::Common { place, powers: false }).number(value, decimal),
            None => self.number(value, decimal),
        }
    }

    /// `value` rounded to these figures, never beyond a limit that must hold.
    pub fn rounded(self, value: f64, rounding: Rounding) -> f64 {
        if value == 0.0 || !value.is_finite() {
            return value;
        }
        let place = match self.0 {
            Kind::Common { place, .. } => place,
            // The figures of the number as it is, not as it will be: 9.96 upwards is 10.0.
            Kind::Each(figures) => {
                libm::floor(libm::log10(value.abs())) as i32 + 1 - figures as i32
            }
        };
        at_place(steps(value, place, rounding), place)
    }

    /// One number: "185", "0.0031", "1.4 × 10⁻⁵".
    pub fn number(self, value: f64, decimal: char) -> String {
        let (place, powers) = match self.0 {
            Kind::Each(figures) => return significant(value, figures, decimal),
            Kind::Common { place, powers } => (place, powers),
        };
        if !value.is_finite() {
            return significant(value, WITHOUT_INTERVAL, decimal);
        }
        let whole = steps(value, place, Rounding::Nearest);
        let value = at_place(whole, place);
        if powers && whole != 0.0 {
            let figures = libm::floor(libm::log10(whole.abs()) + 1e-12) as usize + 1;
            return with_power_of_ten(value, figures, decimal);
        }
        fixed(value, (-place).max(0) as usize, decimal)
    }

    /// The limits of an interval in the same style.
    pub fn limits(self, low: f64, high: f64, decimal: char) -> (String, String) {
        (self.number(low, decimal), self.number(high, decimal))
    }
}

/// The place of the leading digit of a half-width, one further where that digit is 1.
pub(super) fn meant_place(half_width: f64) -> i32 {
    let place = libm::floor(libm::log10(half_width));
    let leading = half_width / libm::pow(10.0, place);
    place as i32 - i32::from(leading < 2.0)
}

/// The place of the first digit of `value` as it is printed to so many figures: 9.96 to two
/// figures is 10.
fn leading_place(value: f64, figures: usize) -> i32 {
    let scientific = format!("{value:.*e}", figures.max(1) - 1);
    scientific.split_once('e').and_then(|(_, power)| power.parse().ok()).unwrap_or(0)
}

/// How many whole units of 10^`place`.
fn steps(value: f64, place: i32, rounding: Rounding) -> f64 {
    let steps = value / libm::pow(10.0, f64::from(place));
    // What is a whole number of steps but for rounding stays there.
    let nearest = libm::round(steps);
    if (steps - nearest).abs() < 1e-9 * nearest.abs() {
        return nearest;
    }
    match rounding {
        Rounding::Nearest => nearest,
        Rounding::Down => libm::floor(steps),
        Rounding::Up => libm::ceil(steps),
    }
}

/// So many whole units of 10^`place`, as the number nearest to it in decimals.
fn at_place(steps: f64, place: i32) -> f64 {
    let unit = libm::pow(10.0, f64::from(place.abs()));
    if place < 0 { steps / unit } else { steps * unit }
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
    let exponent: i32 = scientific.split_once('e').and_then(|(_, e)| e.parse().ok()).unwrap_or(0);
    if value != 0.0 && !(-3..5).contains(&exponent) {
        return with_power_of_ten(value, figures, decimal);
    }
    let decimals = figures as i32 - 1 - exponent;
    if decimals >= 0 {
        return fixed(value, decimals as usize, decimal);
    }
    let unit = libm::pow(10.0, f64::from(-decimals));
    fixed(libm::round(value / unit) * unit, 0, decimal)
}

fn with_power_of_ten(value: f64, figures: usize, decimal: char) -> String {
    let scientific = format!("{value:.*e}", figures.max(1) - 1);
    let (mantissa, exponent) = scientific.split_once('e').unwrap_or((&scientific, "0"));
    let power: String = exponent.chars().map(superscript).collect();
    format!("{}\u{a0}×\u{a0}10{power}", signed(mantissa, decimal))
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
        let (low, high) = figures.limits(low, high, '.');
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
        is(shown(56.1, 10.2, 104.9), ["56", "10", "100"]);
    }

    #[test]
    fn percentages_near_all_show_what_they_lack() {
        let shown = |gone: f64, low: f64, high: f64| {
            let figures = Figures::supported(gone, Some((low, high)));
            [gone, low, high].map(|value| figures.percent(value, high, '.'))
        };
        assert_eq!(shown(3.12, 2.21, 4.43), ["3.1", "2.2", "4.4"]);
        assert_eq!(shown(97.3, 96.1, 98.2), ["97.3", "96.1", "98.2"]);
        assert_eq!(shown(99.2, 95.0, 99.9), ["99.2", "95.0", "99.9"]);
        assert_eq!(shown(96.0, 20.0, 99.96), ["96", "20", "99.96"]);
        assert_eq!(Figures::supported(99.97, None).percent(99.97, 99.97, '.'), "99.97");
        assert_eq!(Figures::supported(100.0, None).percent(100.0, 100.0, '.'), "100");
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
