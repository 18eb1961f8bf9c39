//! Reads the header of a column: what it holds, in which unit, and by which
//! power of ten its numbers were scaled.
//!
//! A header is taken apart in every usual way, `T/°C`, `T (K)`, `k, 1/h`,
//! `t in min`, `time h`, until a part is a unit that suits what the words say.

mod cut;
mod extent;
mod multiplier;
mod special;
mod units;
mod words;

pub(super) use cut::cut_line;
pub use extent::{NamedExtent, named_extent};
use multiplier::{Factor, factor};
pub(super) use special::without_humidity;
use units::{Family, Measure, measure};
use words::{Named, letter, named};

use super::{ErrorKind, Role, SignalIs};
use crate::numeric::decimals::read_decimal;
use crate::quantity::Quantity;

/// What a header says; everything may be missing.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Reading {
    pub role: Option<Role>,
    /// The code of the unit.
    pub unit: Option<String>,
    /// What a number is multiplied by to count in the unit.
    pub multiplier: f64,
    /// The header holds a factor that many people mean the other way round.
    pub doubtful: bool,
    pub run_temperature: Option<Quantity>,
    pub signal_is: Option<SignalIs>,
    pub error_is: Option<ErrorKind>,
    /// An error that is relative by its name.
    pub relative: bool,
    /// A logarithm whose base is not said.
    pub base_unsaid: bool,
    /// Words that stand where a unit should, but are none.
    pub no_unit: Option<String>,
    /// Why the column cannot be used although it is understood.
    pub refused: Option<&'static str>,
}

impl Reading {
    fn nothing() -> Reading {
        Reading {
            role: None,
            unit: None,
            multiplier: 1.0,
            doubtful: false,
            run_temperature: None,
            signal_is: None,
            error_is: None,
            relative: false,
            base_unsaid: false,
            no_unit: None,
            refused: None,
        }
    }

    fn of(named: &Named) -> Reading {
        Reading {
            refused: named.refused,
            role: Some(named.role),
            signal_is: named.signal_is,
            error_is: named.error_is,
            relative: named.relative,
            ..Reading::nothing()
        }
    }
}

/// Reads a header and the cell of a row of units below it, which may be empty.
pub(super) fn read(header: &str, units_cell: &str) -> Reading {
    let header = cleaned(header);
    let header = without_humidity(&header).unwrap_or(header);
    let units_cell = units::bare(&cleaned(units_cell));
    if header.is_empty() && units_cell.is_empty() || header.chars().count() > 200 {
        return Reading::nothing();
    }
    let is_error =
        named(&header).is_some_and(|named| matches!(named.role, Role::Sd | Role::Ignore));
    if !is_error {
        let with_unit =
            if units_cell.is_empty() { header.clone() } else { format!("{header}/{units_cell}") };
        if let Some(inverse) = special::inverse(&with_unit).or_else(|| special::inverse(&header)) {
            return Reading {
                role: Some(Role::InverseTemperature),
                unit: Some("1/K".to_string()),
                multiplier: inverse.multiplier,
                ..Reading::nothing()
            };
        }
        if let Some(reading) = logarithm(&header, &units_cell) {
            return reading;
        }
    }
    if let Some((temperature, rest)) = special::temperature(&header) {
        let reading = plain(&rest, &units_cell);
        match reading.role {
            None | Some(Role::Run | Role::Label) => {
                return Reading { role: None, run_temperature: Some(temperature), ..reading };
            }
            Some(Role::Signal | Role::Sd) => {
                return Reading { run_temperature: Some(temperature), ..reading };
            }
            Some(_) => {}
        }
    }
    plain(&header, &units_cell)
}

/// Whether a cell below a header can only be a unit: `°C`, `[1/h]`, `in h`, `-`.
pub(super) fn is_unit_cell(cell: &str) -> bool {
    let bare = units::bare(&cleaned(cell));
    matches!(bare.as_str(), "" | "-" | "1" | "–") || measure(&bare).is_some()
}

/// A temperature and nothing beside it: the title of a run.
pub(super) fn temperature_alone(text: &str) -> Option<Quantity> {
    let (temperature, rest) = special::temperature(&cleaned(text))?;
    rest.is_empty().then_some(temperature)
}

/// One kind of space, minus and multiplication sign; what a wrong character set
/// does to the degree sign undone.
fn cleaned(text: &str) -> String {
    let mut kept = String::with_capacity(text.len());
    for character in text.chars().take(400) {
        let character = match character {
            '−' | '–' | '‐' | '‑' => '-',
            '˚' | 'º' => '°',
            'μ' => 'µ',
            other if crate::text::is_blank(other) => ' ',
            other => other,
        };
        if character != ' ' || !kept.ends_with(' ') {
            kept.push(character);
        }
    }
    let kept =
        kept.replace("Â°", "°").replace("\u{fffd}C", "°C").replace("Âµ", "µ").replace("**", "^");
    kept.trim().trim_matches('"').trim_end_matches(':').trim().to_string()
}

fn logarithm(header: &str, units_cell: &str) -> Option<Reading> {
    let logarithm = special::logarithm(header)?;
    let role = if logarithm.decimal { Role::Log10RateConstant } else { Role::LnRateConstant };
    if factor(&logarithm.of).is_some() {
        let refused = Some(
            "a factor inside the logarithm is not read; give k itself, or its plain logarithm",
        );
        return Some(Reading { role: Some(Role::Ignore), refused, ..Reading::nothing() });
    }
    let inner = plain(&logarithm.of, "");
    if !inner.role.is_none_or(|role| role == Role::RateConstant) || letter(&logarithm.of).is_some()
    {
        let refused = Some("the logarithm of a signal is not read; give the signal itself");
        return Some(Reading { role: Some(Role::Ignore), refused, ..Reading::nothing() });
    }
    let unit = special::unit_in_argument(&logarithm.of)
        .or_else(|| special::rate_unit(&logarithm.behind))
        .or_else(|| special::rate_unit(units_cell));
    let no_unit =
        (unit.is_none() && !logarithm.behind.is_empty()).then(|| logarithm.behind.clone());
    Some(Reading {
        role: Some(role),
        unit: unit.map(crate::units::RateUnit::code),
        base_unsaid: logarithm.base_unsaid,
        no_unit,
        ..Reading::nothing()
    })
}

/// A header without a shape of its own.
fn plain(header: &str, units_cell: &str) -> Reading {
    if !units_cell.is_empty()
        && let Some(reading) = fit(header, units_cell)
    {
        return reading;
    }
    let words_of_all = named(header);
    if words_of_all.is_none()
        && let Some(measure) = measure(header)
    {
        return with_unit(
            Reading { role: Some(measure.family.role()), ..Reading::nothing() },
            &measure,
            None,
        );
    }
    let ways = cut::ways(header);
    for way in &ways {
        if let Some(reading) = fit(&way.name, &way.unit) {
            return reading;
        }
    }
    // No unit: words alone, perhaps with a factor, and perhaps words in its place.
    let taken = factor(header);
    let name = taken.as_ref().map_or(header, |factor| factor.name.as_str());
    let spoken = words_of_all.or_else(|| named(name)).or_else(|| letter(name));
    let clear = || ways.iter().filter(|way| !way.by_space);
    let speaking =
        clear().filter(|way| named(&way.name).is_some() || letter(way.name.trim()).is_some());
    let no_unit =
        speaking.map(|way| way.unit.trim()).find(|unit| !unit.is_empty() && !is_factor(unit));
    let spoken = spoken
        .or_else(|| clear().find_map(|way| named(&way.name).or_else(|| letter(way.name.trim()))));
    let mut reading = spoken.as_ref().map_or_else(Reading::nothing, Reading::of);
    if !units_cell.is_empty() && units_cell != "-" {
        reading.no_unit = Some(units_cell.to_string());
    } else {
        reading.no_unit = no_unit.filter(|_| !header.contains('%')).map(str::to_string);
    }
    if reading.role == Some(Role::Signal) && header.contains('%') {
        reading.unit = Some("%".to_string());
    }
    if reading.role == Some(Role::RateConstant)
        && let Some(factor) = &taken
    {
        apply(&mut reading, factor);
    }
    reading
}

/// Nothing but a power of ten.
fn is_factor(text: &str) -> bool {
    let number = text.trim_start_matches(['×', '·', '*', ' ', 'x']);
    multiplier::leading_power(number).is_some_and(|(_, rest)| rest.trim().is_empty())
}

/// A name and a unit that suit each other.
fn fit(name: &str, unit: &str) -> Option<Reading> {
    let measure = measure(unit)?;
    let taken = factor(name);
    let core = taken.as_ref().map_or(name, |factor| factor.name.as_str()).trim();
    let spoken = named(core).or_else(|| letter(core));
    // "7 d" is a time, no column of times.
    if read_decimal(core).is_some() {
        return None;
    }
    let reading = match spoken {
        Some(named) if measure.family.suits(named.role) => Reading::of(&named),
        // "s(k)" holds no seconds, and a label has no unit.
        Some(named) if named.strong => return None,
        _ => Reading { role: Some(measure.family.role()), ..Reading::nothing() },
    };
    Some(with_unit(reading, &measure, taken.as_ref()))
}

fn with_unit(mut reading: Reading, measure: &Measure, taken: Option<&Factor>) -> Reading {
    reading.unit = Some(measure.code.clone());
    reading.multiplier = measure.scale;
    reading.doubtful = measure.scale != 1.0 && (measure.scale > 1.0 || measure.times);
    if reading.role == Some(Role::Sd)
        && measure.family == Family::Concentration
        && measure.code == "%"
    {
        reading.relative = true;
    }
    if let Some(factor) = taken {
        apply(&mut reading, factor);
    }
    reading
}

fn apply(reading: &mut Reading, factor: &Factor) {
    reading.multiplier /= factor.size;
    reading.doubtful |= factor.behind || factor.size < 1.0;
}

#[cfg(test)]
mod tests {
    use super::*;

    fn brief(header: &str) -> (Option<Role>, Option<String>, f64) {
        let reading = read(header, "");
        (reading.role, reading.unit, reading.multiplier)
    }

    #[test]
    fn role_and_unit_from_one_header() {
        for (header, role, unit) in [
            ("T/°C", Role::Temperature, "°C"),
            ("T / °C", Role::Temperature, "°C"),
            ("T (K)", Role::Temperature, "K"),
            ("T/K", Role::Temperature, "K"),
            ("t/°C", Role::Temperature, "°C"),
            ("temperature, °C", Role::Temperature, "°C"),
            ("Temp. [degC]", Role::Temperature, "°C"),
            ("Temperatur in °C", Role::Temperature, "°C"),
            ("T/\u{fffd}C", Role::Temperature, "°C"),
            ("TÂ°C", Role::Temperature, "°C"),
            ("°C", Role::Temperature, "°C"),
            ("K", Role::Temperature, "K"),
            ("k, 1/h", Role::RateConstant, "1/h"),
            ("k 1/h", Role::RateConstant, "1/h"),
            ("k / s⁻¹", Role::RateConstant, "1/s"),
            ("k/s-1", Role::RateConstant, "1/s"),
            ("k (h^-1)", Role::RateConstant, "1/h"),
            ("k per hour", Role::RateConstant, "1/h"),
            ("k_obs (L mol⁻¹ s⁻¹)", Role::RateConstant, "L/(mol s)"),
            ("k / (L/(mol s))", Role::RateConstant, "L/(mol s)"),
            ("k (M-1 s-1)", Role::RateConstant, "L/(mol s)"),
            ("rate constant (%/month)", Role::RateConstant, "%/mo"),
            ("1/h", Role::RateConstant, "1/h"),
            ("t [min]", Role::Time, "min"),
            ("time h", Role::Time, "h"),
            ("days", Role::Time, "d"),
            ("Storage time (months)", Role::Time, "mo"),
            ("Zeit / Std", Role::Time, "h"),
            ("temps (jours)", Role::Time, "d"),
            ("c (mol/L)", Role::Signal, "mol/L"),
            ("c / mmol L⁻¹", Role::Signal, "mmol/L"),
            ("% left", Role::Signal, "%"),
            ("Assay (%)", Role::Signal, "%"),
            ("assay %", Role::Signal, "%"),
            ("% of initial", Role::Signal, "%"),
            ("q (W/kg)", Role::HeatRate, "W/kg"),
            ("β / K min⁻¹", Role::HeatingRate, "K/min"),
            ("sd (1/h)", Role::Sd, "1/h"),
            ("s(k), %", Role::Sd, "%"),
        ] {
            assert_eq!(brief(header), (Some(role), Some(unit.to_string()), 1.0), "{header}");
        }
    }

    #[test]
    fn roles_without_a_unit() {
        for (header, role) in [
            ("T", Role::Temperature),
            ("t", Role::Time),
            ("k", Role::RateConstant),
            ("s(k)", Role::Sd),
            ("±", Role::Sd),
            ("std. dev.", Role::Sd),
            ("u(k)", Role::Sd),
            ("c/c0", Role::Signal),
            ("batch", Role::Group),
            ("run", Role::Run),
            ("sample", Role::Label),
            ("note", Role::Ignore),
            ("absorbance", Role::Signal),
        ] {
            let reading = read(header, "");
            assert_eq!((reading.role, reading.unit), (Some(role), None), "{header}");
        }
        assert_eq!(read("", ""), Reading::nothing());
        assert_eq!(read("xyz", "").role, None);
    }

    #[test]
    fn factors_are_never_lost() {
        for (header, multiplier, doubtful) in [
            ("10^4 k / s⁻¹", 1e-4, false),
            ("10⁴ k (s⁻¹)", 1e-4, false),
            ("k/10⁻⁴ s⁻¹", 1e-4, false),
            ("k (10^-4 s^-1)", 1e-4, false),
            ("k (×10⁻⁴ s⁻¹)", 1e-4, true),
            ("k [x10^-4 s-1]", 1e-4, true),
            ("k × 10⁴ / s⁻¹", 1e-4, true),
            ("k (1/s) × 10^4", 1e-4, true),
            ("k × 10⁻⁴ (s⁻¹)", 1e4, true),
            ("k (10⁴ s⁻¹)", 1e4, true),
            ("k (s⁻¹ × 10⁻⁴)", 1e-4, true),
        ] {
            let reading = read(header, "");
            assert_eq!(
                (reading.role, reading.unit.as_deref()),
                (Some(Role::RateConstant), Some("1/s")),
                "{header}"
            );
            assert!(
                (reading.multiplier / multiplier - 1.0).abs() < 1e-12,
                "{header}: {}",
                reading.multiplier
            );
            assert_eq!(reading.doubtful, doubtful, "{header}");
        }
        let bare = read("k ×10⁴", "");
        assert!(bare.doubtful && (bare.multiplier / 1e-4 - 1.0).abs() < 1e-12);
        assert_eq!(
            brief("1000/T (1/K)"),
            (Some(Role::InverseTemperature), Some("1/K".to_string()), 1e-3)
        );
    }

    #[test]
    fn logarithms_know_the_unit_of_their_argument() {
        for (header, role, unit) in [
            ("ln(k/s⁻¹)", Role::LnRateConstant, Some("1/s")),
            ("ln (k · h)", Role::LnRateConstant, Some("1/h")),
            ("ln k", Role::LnRateConstant, None),
            ("log k (1/h)", Role::Log10RateConstant, Some("1/h")),
            ("log10(k / M-1 s-1)", Role::Log10RateConstant, Some("L/(mol s)")),
        ] {
            let reading = read(header, "");
            assert_eq!((reading.role, reading.unit.as_deref()), (Some(role), unit), "{header}");
        }
        assert!(read("log k", "").base_unsaid);
        assert!(read("ln c", "").refused.is_some() && read("ln(10^4 k)", "").refused.is_some());
        assert_eq!(read("s(ln k)", "").role, Some(Role::Sd));
    }

    #[test]
    fn a_row_of_units_counts_as_the_units() {
        assert_eq!(read("T", "°C").unit.as_deref(), Some("°C"));
        assert_eq!(read("k", "[1/h]").unit.as_deref(), Some("1/h"));
        assert_eq!(read("rate", "10⁻³ h⁻¹").multiplier, 1e-3);
        assert_eq!(read("1/T", "10⁻³ K⁻¹").multiplier, 1e-3);
        assert!(
            is_unit_cell("°C") && is_unit_cell("(1/h)") && is_unit_cell("-") && !is_unit_cell("k")
        );
    }

    #[test]
    fn words_in_place_of_a_unit_are_kept_for_the_message() {
        assert_eq!(read("k (furlong)", "").no_unit.as_deref(), Some("furlong"));
        assert_eq!(read("t / fortnight", "").no_unit.as_deref(), Some("fortnight"));
        assert_eq!(read("k (h)", "").no_unit.as_deref(), Some("h"));
        assert_eq!(read("T", "").no_unit, None);
    }

    #[test]
    fn columns_of_runs_carry_their_temperature() {
        let reading = read("c at 50 °C / mol L-1", "");
        assert_eq!((reading.role, reading.unit.as_deref()), (Some(Role::Signal), Some("mol/L")));
        assert_eq!(reading.run_temperature, Some(Quantity::new(50.0, "°C")));
        assert_eq!(read("50 °C", "").run_temperature, Some(Quantity::new(50.0, "°C")));
        assert_eq!(read("50 °C", "").role, None);
    }
}
