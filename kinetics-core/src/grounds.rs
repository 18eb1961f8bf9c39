//! What an answer stands on: how far its temperatures lie from the measured ones.

use serde::Serialize;

use crate::numeric::sorting::sort_by;
use crate::quantity::Kelvin;
use crate::wording::{Display, significant};

/// How far from the data an answer reaches, from best to worst.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Grounds {
    /// Between the measured temperatures.
    Inside,
    /// At most half the span of 1/T and 15 K outside.
    Near,
    /// At most twice the span of 1/T and 40 K outside.
    Far,
    /// Further than that.
    Beyond,
}

impl Grounds {
    /// "inside the data", as a label.
    pub fn name(self) -> &'static str {
        match self {
            Self::Inside => "inside the data",
            Self::Near => "near the data",
            Self::Far => "far from the data",
            Self::Beyond => "beyond the data",
        }
    }

    fn one_lower(self) -> Self {
        match self {
            Self::Inside => Self::Near,
            Self::Near => Self::Far,
            Self::Far | Self::Beyond => Self::Beyond,
        }
    }
}

/// The temperatures that a law was learnt from.
#[derive(Debug, Clone, PartialEq)]
pub struct Support {
    coldest: Kelvin,
    hottest: Kelvin,
    distinct: usize,
    /// Every run states its error.
    stated_errors: bool,
    /// The law was given, not fitted.
    known_law: bool,
}

/// Temperatures count as equal to the data's ends within this many K: unit conversions round.
const ROUNDING_KELVIN: f64 = 1e-6;

impl Support {
    /// The support of runs at these temperatures; none without runs.
    pub fn of_runs(temperatures: &[Kelvin], stated_errors: bool) -> Option<Self> {
        let mut sorted: Vec<f64> = temperatures.iter().map(|t| t.0).collect();
        sort_by(&mut sorted, |t| *t);
        sorted.dedup();
        let (first, last) = (*sorted.first()?, *sorted.last()?);
        Some(Self {
            coldest: Kelvin(first),
            hottest: Kelvin(last),
            distinct: sorted.len(),
            stated_errors,
            known_law: false,
        })
    }

    /// The support of a law that is known at one temperature.
    pub fn of_known_law(reference: Kelvin) -> Self {
        Self {
            coldest: reference,
            hottest: reference,
            distinct: 1,
            stated_errors: true,
            known_law: true,
        }
    }

    /// The coldest and hottest measured temperature.
    pub fn span(&self) -> (Kelvin, Kelvin) {
        (self.coldest, self.hottest)
    }

    /// How many K a temperature lies outside; negative below the coldest, 0 inside.
    pub fn distance_kelvin(&self, temperature: Kelvin) -> f64 {
        if temperature.0 < self.coldest.0 - ROUNDING_KELVIN {
            temperature.0 - self.coldest.0
        } else if temperature.0 > self.hottest.0 + ROUNDING_KELVIN {
            temperature.0 - self.hottest.0
        } else {
            0.0
        }
    }

    /// Whether it is a stated rate, not runs, that answers stand on.
    pub fn is_known_law(&self) -> bool {
        self.known_law
    }

    /// The grounds of an answer at one temperature.
    pub fn grounds(&self, temperature: Kelvin) -> Grounds {
        let kelvins = self.distance_kelvin(temperature).abs();
        if self.known_law {
            return match kelvins {
                d if d <= 5.0 => Grounds::Inside,
                d if d <= 15.0 => Grounds::Near,
                d if d <= 40.0 => Grounds::Far,
                _ => Grounds::Beyond,
            };
        }
        let span = 1.0 / self.coldest.0 - 1.0 / self.hottest.0;
        let nearest = if temperature.0 < self.coldest.0 { self.coldest } else { self.hottest };
        let outside = (1.0 / temperature.0 - 1.0 / nearest.0).abs() / span;
        let by_distance = if kelvins == 0.0 {
            Grounds::Inside
        } else if outside <= 0.5 && kelvins <= 15.0 + ROUNDING_KELVIN {
            Grounds::Near
        } else if outside <= 2.0 && kelvins <= 40.0 + ROUNDING_KELVIN {
            Grounds::Far
        } else {
            Grounds::Beyond
        };
        match (self.distinct, self.stated_errors) {
            (3.., _) => by_distance,
            (2, true) => by_distance.one_lower(),
            _ => Grounds::Beyond,
        }
    }

    /// The grounds in words: "25 K below your coldest run".
    pub fn words(&self, temperature: Kelvin, display: &Display) -> String {
        let distance = self.distance_kelvin(temperature);
        let size = distance.abs();
        let shown = significant(size, if size < 100.0 { 2 } else { 3 }, display.decimal);
        let shown = shown.strip_suffix(".0").or(shown.strip_suffix(",0")).unwrap_or(&shown);
        let side = if distance < 0.0 { "below" } else { "above" };
        match (self.known_law, distance == 0.0) {
            (true, true) => "at the temperature of the known rate".into(),
            (true, false) => format!("{shown}\u{a0}K {side} the temperature of the known rate"),
            (false, true) => "inside your data".into(),
            (false, false) => {
                let end = if distance < 0.0 { "coldest" } else { "hottest" };
                format!("{shown}\u{a0}K {side} your {end} run")
            }
        }
    }
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    fn celsius(values: &[f64]) -> Vec<Kelvin> {
        values.iter().map(|t| Kelvin(t + 273.15)).collect()
    }

    #[test]
    fn three_temperatures_give_every_grade() {
        let support = Support::of_runs(&celsius(&[50.0, 60.0, 78.0]), false).unwrap();
        let at = |t: f64| support.grounds(Kelvin(t + 273.15));
        assert_eq!(at(50.0), Grounds::Inside);
        assert_eq!(at(40.0), Grounds::Near);
        assert_eq!(at(25.0), Grounds::Far);
        assert_eq!(at(5.0), Grounds::Beyond);
        assert_eq!(at(93.0), Grounds::Near);
        assert_eq!(at(94.0), Grounds::Far);
        let words = support.words(Kelvin(298.15), &Display::default());
        assert_eq!(words, "25\u{a0}K below your coldest run");
    }

    #[test]
    fn a_narrow_span_reaches_less_far() {
        let support = Support::of_runs(&celsius(&[50.0, 52.0, 54.0]), false).unwrap();
        assert_eq!(support.grounds(Kelvin(321.65)), Grounds::Near);
        assert_eq!(support.grounds(Kelvin(318.15)), Grounds::Far);
        assert_eq!(support.grounds(Kelvin(313.15)), Grounds::Beyond);
    }

    #[test]
    fn two_temperatures_stand_lower() {
        let bare = Support::of_runs(&celsius(&[50.0, 60.0]), false).unwrap();
        assert_eq!(bare.grounds(Kelvin(328.15)), Grounds::Beyond);
        let stated = Support::of_runs(&celsius(&[50.0, 60.0]), true).unwrap();
        assert_eq!(stated.grounds(Kelvin(328.15)), Grounds::Near);
        assert_eq!(stated.grounds(Kelvin(320.15)), Grounds::Far);
    }

    #[test]
    fn a_known_law_counts_kelvins() {
        let support = Support::of_known_law(Kelvin(300.0));
        assert_eq!(support.grounds(Kelvin(304.0)), Grounds::Inside);
        assert_eq!(support.grounds(Kelvin(315.0)), Grounds::Near);
        assert_eq!(support.grounds(Kelvin(260.0)), Grounds::Far);
        assert_eq!(support.grounds(Kelvin(250.0)), Grounds::Beyond);
    }
}
