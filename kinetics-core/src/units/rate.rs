//! Units of rate constants: a concentration to the power 1 − n, per time.
//!
//! The power of the concentration tells the order n of the rate law: `1/s` is
//! first order, `mol/(L s)` zero, `L/(mol s)` second, `L^0.5/(mol^0.5 s)` 3/2.

use super::expression::{Expression, readings};
use super::{ConcentrationUnit, TimeUnit, UnitError};
use crate::numeric::sorting::sort_by;

/// The unit of a rate constant.
#[derive(Clone, Copy, Debug, PartialEq, serde::Serialize, serde::Deserialize)]
#[serde(into = "String", try_from = "String")]
pub struct RateUnit {
    /// The concentration in it; none for first order.
    pub concentration: Option<ConcentrationUnit>,
    /// The order n of the rate law.
    pub order: f64,
    /// The time in it.
    pub time: TimeUnit,
}

impl RateUnit {
    /// What these units measure, in words.
    pub const SUBJECT: &str = "rate constant";

    /// The internal unit of a first-order rate constant.
    pub const PER_SECOND: RateUnit = RateUnit::first_order(TimeUnit::Second);

    /// The units worth a line in a menu; any other can be typed.
    pub const ALL: &[RateUnit] = &[
        RateUnit::first_order(TimeUnit::Second),
        RateUnit::first_order(TimeUnit::Minute),
        RateUnit::first_order(TimeUnit::Hour),
        RateUnit::first_order(TimeUnit::Day),
        RateUnit::first_order(TimeUnit::Week),
        RateUnit::first_order(TimeUnit::Month),
        RateUnit::first_order(TimeUnit::Year),
        RateUnit::of_order(2.0, ConcentrationUnit::MolePerLitre, TimeUnit::Second),
        RateUnit::of_order(2.0, ConcentrationUnit::MolePerLitre, TimeUnit::Minute),
        RateUnit::of_order(2.0, ConcentrationUnit::MolePerLitre, TimeUnit::Hour),
        RateUnit::of_order(0.0, ConcentrationUnit::MolePerLitre, TimeUnit::Second),
        RateUnit::of_order(0.0, ConcentrationUnit::MolePerLitre, TimeUnit::Minute),
        RateUnit::of_order(0.0, ConcentrationUnit::MolePerLitre, TimeUnit::Hour),
        RateUnit::of_order(0.0, ConcentrationUnit::Percent, TimeUnit::Hour),
        RateUnit::of_order(0.0, ConcentrationUnit::Percent, TimeUnit::Day),
        RateUnit::of_order(0.0, ConcentrationUnit::Percent, TimeUnit::Month),
    ];

    const fn first_order(time: TimeUnit) -> RateUnit {
        RateUnit { concentration: None, order: 1.0, time }
    }

    const fn of_order(order: f64, concentration: ConcentrationUnit, time: TimeUnit) -> RateUnit {
        RateUnit { concentration: Some(concentration), order, time }
    }

    /// The unit for a rate law of this order; for first order the concentration
    /// drops out.
    #[must_use]
    pub fn for_order(order: f64, concentration: ConcentrationUnit, time: TimeUnit) -> RateUnit {
        if order == 1.0 {
            RateUnit::first_order(time)
        } else {
            RateUnit::of_order(order, concentration, time)
        }
    }

    /// Reads any usual spelling: `1/s`, `s⁻¹`, `min-1`, `per hour`, `L/(mol s)`,
    /// `M⁻¹ s⁻¹`, `dm³ mol⁻¹ s⁻¹`, `(mol/L)^0.5/s`, `%/month` …
    ///
    /// # Errors
    /// [`UnitError::Unknown`], listing the kinds that are accepted.
    pub fn parse(text: &str) -> Result<RateUnit, UnitError> {
        RateUnit::parse_scaled(text)
            .filter(|(scale, _)| *scale == 1.0)
            .map(|(_, unit)| unit)
            .ok_or_else(|| {
                let accepted = [
                    "1/s",
                    "1/min",
                    "1/h",
                    "1/d",
                    "L/(mol s)",
                    "mol/(L s)",
                    "%/h",
                    "another power of a concentration per time",
                ];
                UnitError::unknown(RateUnit::SUBJECT, text, accepted)
            })
    }

    /// Reads a unit with a number in it, as in `10⁻⁴ s⁻¹`.
    pub(crate) fn parse_scaled(text: &str) -> Option<(f64, RateUnit)> {
        readings(text)
            .iter()
            .find_map(|expression| Some((expression.scale, from_expression(expression)?)))
    }

    /// The order of the rate law whose constant has this unit.
    #[must_use]
    pub const fn order(self) -> f64 {
        self.order
    }

    /// What a number in this unit is multiplied by to count in [`base`](Self::base).
    #[must_use]
    pub fn to_base(self) -> f64 {
        let concentration = match self.concentration {
            None => 1.0,
            Some(unit) => libm::pow(unit.in_base(), tidy(1.0 - self.order)),
        };
        concentration / self.time.seconds()
    }

    /// The same kind of unit in seconds and the base unit of concentration.
    #[must_use]
    pub fn base(self) -> RateUnit {
        RateUnit {
            concentration: self.concentration.map(|unit| unit.kind().base()),
            order: self.order,
            time: TimeUnit::Second,
        }
    }

    /// The spelling for files and keyboards, as in `L/(mol s)`.
    #[must_use]
    pub fn code(self) -> String {
        let written = |terms: Vec<&(&str, f64)>| -> Vec<String> {
            terms
                .into_iter()
                .map(|(symbol, power)| match power.abs() {
                    1.0 => (*symbol).to_string(),
                    size => format!("{symbol}^{size}"),
                })
                .collect()
        };
        let terms = self.terms();
        let above = written(terms.iter().filter(|(_, power)| *power > 0.0).collect());
        let below = written(terms.iter().filter(|(_, power)| *power < 0.0).collect());
        let above = if above.is_empty() { "1".to_string() } else { above.join(" ") };
        match below.as_slice() {
            [only] => format!("{above}/{only}"),
            several => format!("{above}/({})", several.join(" ")),
        }
    }

    /// The spelling for the eye, as in `L mol⁻¹ s⁻¹`.
    #[must_use]
    pub fn symbol(self) -> String {
        let mut terms = self.terms();
        sort_by(&mut terms, |(_, power)| -power.signum());
        let written: Vec<String> =
            terms.iter().map(|(symbol, power)| format!("{symbol}{}", raised(*power))).collect();
        written.join(" ")
    }

    /// Symbols and powers: amount, volume, time.
    fn terms(self) -> Vec<(&'static str, f64)> {
        let mut terms = Vec::with_capacity(3);
        if let Some(unit) = self.concentration {
            let power = tidy(1.0 - self.order);
            let (above, below) = unit.code().split_once('/').unwrap_or((unit.code(), ""));
            terms.push((above, power));
            if let Some(side) = below.strip_suffix("^3") {
                terms.push((side, tidy(-3.0 * power)));
            } else if !below.is_empty() {
                terms.push((below, -power));
            }
            terms.retain(|(_, power)| *power != 0.0);
        }
        terms.push((self.time.code(), -1.0));
        terms
    }
}

fn from_expression(expression: &Expression) -> Option<RateUnit> {
    let mut rest = expression.clone();
    let is_time = |symbol: &str| TimeUnit::ALL.iter().find(|unit| unit.code() == symbol).copied();
    let at = rest.factors.iter().position(|(symbol, _)| is_time(symbol).is_some())?;
    let (symbol, power) = rest.factors.remove(at);
    if power != -1.0 {
        return None;
    }
    rest.scale = 1.0;
    let time = is_time(symbol)?;
    if rest.factors.is_empty() {
        return Some(RateUnit::first_order(time));
    }
    let units = || {
        ConcentrationUnit::ALL
            .iter()
            .filter_map(|unit| Some((*unit, readings(unit.code()).first()?.clone())))
    };
    let (unit, power) = units()
        .find_map(|(unit, written)| Some((unit, rest.power_of(&written)?)))
        .or_else(|| {
            let plain = rest.reduced();
            units().find_map(|(unit, written)| Some((unit, plain.power_of(&written.reduced())?)))
        })?;
    Some(RateUnit::of_order(tidy(1.0 - power), unit, time))
}

/// Rid of the dust of binary fractions: 1 − 1.4 is −0.4.
fn tidy(power: f64) -> f64 {
    // Adding zero turns −0 into 0.
    libm::round(power * 1e6) / 1e6 + 0.0
}

fn raised(power: f64) -> String {
    if power == 1.0 {
        return String::new();
    }
    let superscripts = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'];
    power
        .to_string()
        .chars()
        .filter_map(|character| match character {
            '-' => Some('⁻'),
            '.' => Some('·'),
            digit => superscripts.get(digit.to_digit(10)? as usize).copied(),
        })
        .collect()
}

impl std::fmt::Display for RateUnit {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(&self.symbol())
    }
}

impl From<RateUnit> for String {
    fn from(unit: RateUnit) -> String {
        unit.code()
    }
}

impl TryFrom<String> for RateUnit {
    type Error = UnitError;
    fn try_from(text: String) -> Result<RateUnit, UnitError> {
        RateUnit::parse(&text)
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    fn code(text: &str) -> String {
        RateUnit::parse(text).map_or_else(|error| error.to_string(), RateUnit::code)
    }

    #[test]
    fn usual_spellings_are_read() {
        for (wanted, texts) in [
            (
                "1/s",
                &[
                    "1/s",
                    "s⁻¹",
                    "s^-1",
                    "s-1",
                    "/s",
                    "per second",
                    "s−1",
                    "sec-1",
                    "1/sec",
                    "s^(-1)",
                ][..],
            ),
            ("1/min", &["min-1", "min⁻¹", "1/min", "per minute"]),
            ("1/h", &["1/h", "h-1", "hr⁻¹", "1/hour", "per hour", "1/Std"]),
            ("1/yr", &["1/yr", "a⁻¹", "1/year", "y-1"]),
            (
                "L/(mol s)",
                &[
                    "L/(mol s)",
                    "L mol⁻¹ s⁻¹",
                    "M-1 s-1",
                    "M⁻¹ s⁻¹",
                    "M⁻¹·s⁻¹",
                    "dm³ mol⁻¹ s⁻¹",
                    "1/(M s)",
                    "L/mol s",
                    "L/mol·s",
                    "L/mol/s",
                    "mL/(mmol s)",
                    "m3 kmol-1 s-1",
                ],
            ),
            ("cm^3/(mol s)", &["cm³/(mol s)", "cm3 mol-1 s-1"]),
            (
                "cm^3/(molecule s)",
                &["cm3 molecule-1 s-1", "cm³/(molecule s)", "cm^3 molec^-1 s^-1"],
            ),
            ("L/(mmol min)", &["mM-1 min-1", "L mmol⁻¹ min⁻¹"]),
            ("mol/(L s)", &["mol/(L s)", "M/s", "M s-1", "mol L-1 s-1", "mol dm⁻³ s⁻¹"]),
            ("L^0.5/(mol^0.5 s)", &["L^0.5/(mol^0.5 s)", "M^-0.5 s^-1", "L^0,5 mol^-0,5 s^-1"]),
            ("mol^0.5/(L^0.5 s)", &["(mol/L)^0.5/s", "M^½ s⁻¹"]),
            ("L^2/(mol^2 s)", &["L^2 mol^-2 s^-1", "L²/(mol² s)", "M-2 s-1"]),
            ("%/h", &["%/h", "% h-1", "% per hour", "%·h⁻¹"]),
            ("%/mo", &["%/month", "%/mo", "percent per month"]),
            ("1/(% d)", &["%-1 d-1", "1/(% d)"]),
            ("fraction/d", &["fraction/d"]),
            ("mg/(mL h)", &["mg/mL/h", "mg mL-1 h-1"]),
        ] {
            for text in texts {
                assert_eq!(code(text), wanted, "{text}");
            }
        }
    }

    #[test]
    fn the_order_comes_from_the_power_of_the_concentration() {
        for (text, order) in [
            ("1/s", 1.0),
            ("mol/(L s)", 0.0),
            ("L/(mol s)", 2.0),
            ("L^0.5/(mol^0.5 s)", 1.5),
            ("(mol/L)^0.5/s", 0.5),
            ("%/h", 0.0),
            ("L^2 mol^-2 s^-1", 3.0),
            ("L^1.4 mol^-1.4 s^-1", 2.4),
        ] {
            assert_eq!(RateUnit::parse(text).unwrap().order(), order, "{text}");
        }
    }

    #[test]
    fn numbers_go_to_the_base_unit() {
        let close = |text: &str, wanted: f64, base: &str| {
            let unit = RateUnit::parse(text).unwrap();
            assert!((unit.to_base() / wanted - 1.0).abs() < 1e-14, "{text}: {}", unit.to_base());
            assert_eq!(unit.base().code(), base);
        };
        close("1/h", 1.0 / 3600.0, "1/s");
        close("mM-1 min-1", 1000.0 / 60.0, "L/(mol s)");
        close("cm³/(mol s)", 1e-3, "L/(mol s)");
        close("%/d", 1.0 / 86_400.0, "%/s");
        close("fraction/d", 100.0 / 86_400.0, "%/s");
        close("mmol/(L s)", 1e-3, "mol/(L s)");
    }

    #[test]
    fn codes_and_symbols_read_back() {
        for concentration in ConcentrationUnit::ALL {
            for order in [0.0, 0.5, 1.0, 1.5, 2.0, 2.4, 3.0] {
                for time in TimeUnit::ALL {
                    let unit = RateUnit::for_order(order, *concentration, *time);
                    assert_eq!(RateUnit::parse(&unit.code()).unwrap(), unit, "{}", unit.code());
                    assert_eq!(RateUnit::parse(&unit.symbol()).unwrap(), unit, "{}", unit.symbol());
                }
            }
        }
        let three_halves =
            RateUnit::for_order(1.5, ConcentrationUnit::MolePerLitre, TimeUnit::Second);
        assert_eq!(three_halves.symbol(), "L⁰·⁵ mol⁻⁰·⁵ s⁻¹");
        assert_eq!(RateUnit::parse("%/h").unwrap().symbol(), "% h⁻¹");
    }

    #[test]
    fn what_is_no_rate_is_refused_with_a_list() {
        for text in ["", "s", "mol/L", "1/K", "10^-4 s-1", "s^-2", "kJ/mol", "L/(K s)", "mol/s"] {
            assert!(RateUnit::parse(text).is_err(), "{text}");
        }
        assert!(code("furlong").contains("L/(mol s)"));
        assert_eq!(
            RateUnit::parse_scaled("10⁻⁴ s⁻¹").map(|(scale, unit)| (scale, unit.code())),
            Some((1e-4, "1/s".to_string()))
        );
    }
}
