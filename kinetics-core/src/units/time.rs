//! Units of time.

use super::unit_list;

unit_list! {
    /// Units of time. Months and years are mean Julian ones, as everywhere in
    /// stability work: 365.25 d, and a twelfth of it.
    TimeUnit measures "time" by seconds:
    /// The length of the unit in s.
    {
        /// second
        Second = "s", "s", 1.0;
        /// minute
        Minute = "min", "min", 60.0;
        /// hour
        Hour = "h", "h", 3600.0;
        /// day of 24 h
        Day = "d", "d", 86_400.0;
        /// week of 7 d
        Week = "wk", "wk", 604_800.0;
        /// month of 30.4375 d
        Month = "mo", "mo", 2_629_800.0;
        /// year of 365.25 d
        Year = "yr", "yr", 31_557_600.0;
    }
}

impl TimeUnit {
    /// A number in this unit, in s.
    #[must_use]
    pub const fn to_seconds(self, value: f64) -> f64 {
        value * self.seconds()
    }

    /// A number of s, in this unit.
    #[must_use]
    pub const fn from_seconds(self, time_seconds: f64) -> f64 {
        time_seconds / self.seconds()
    }

    /// The word for the unit, for sentences: "hour" or "hours".
    #[must_use]
    pub const fn word(self, plural: bool) -> &'static str {
        match (self, plural) {
            (TimeUnit::Second, false) => "second",
            (TimeUnit::Second, true) => "seconds",
            (TimeUnit::Minute, false) => "minute",
            (TimeUnit::Minute, true) => "minutes",
            (TimeUnit::Hour, false) => "hour",
            (TimeUnit::Hour, true) => "hours",
            (TimeUnit::Day, false) => "day",
            (TimeUnit::Day, true) => "days",
            (TimeUnit::Week, false) => "week",
            (TimeUnit::Week, true) => "weeks",
            (TimeUnit::Month, false) => "month",
            (TimeUnit::Month, true) => "months",
            (TimeUnit::Year, false) => "year",
            (TimeUnit::Year, true) => "years",
        }
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    #[test]
    fn usual_spellings_are_read() {
        for (text, unit) in [
            ("s", TimeUnit::Second),
            ("sec", TimeUnit::Second),
            ("Seconds", TimeUnit::Second),
            ("min", TimeUnit::Minute),
            ("Min", TimeUnit::Minute),
            ("minutes", TimeUnit::Minute),
            ("h", TimeUnit::Hour),
            ("hr", TimeUnit::Hour),
            ("hours", TimeUnit::Hour),
            ("Std", TimeUnit::Hour),
            ("d", TimeUnit::Day),
            ("days", TimeUnit::Day),
            ("Tage", TimeUnit::Day),
            ("jours", TimeUnit::Day),
            ("wk", TimeUnit::Week),
            ("weeks", TimeUnit::Week),
            ("mo", TimeUnit::Month),
            ("months", TimeUnit::Month),
            ("yr", TimeUnit::Year),
            ("a", TimeUnit::Year),
            ("years", TimeUnit::Year),
        ] {
            assert_eq!(TimeUnit::parse(text).unwrap(), unit, "{text}");
        }
        for text in ["", "m", "M", "ms", "s²", "1/s", "10 s", "fortnight"] {
            assert!(TimeUnit::parse(text).is_err(), "{text}");
        }
    }

    #[test]
    fn a_year_is_twelve_months() {
        assert_eq!(TimeUnit::Month.seconds() * 12.0, TimeUnit::Year.seconds());
        assert_eq!(TimeUnit::Month.seconds(), 30.4375 * 86_400.0);
        assert_eq!(TimeUnit::Week.from_seconds(TimeUnit::Day.to_seconds(7.0)), 1.0);
    }

    #[test]
    fn codes_and_symbols_read_back() {
        for unit in TimeUnit::ALL {
            assert_eq!(TimeUnit::parse(unit.code()).unwrap(), *unit);
            assert_eq!(TimeUnit::parse(unit.symbol()).unwrap(), *unit);
            assert_eq!(TimeUnit::parse(unit.word(true)).unwrap(), *unit);
            assert_eq!(TimeUnit::parse(unit.word(false)).unwrap(), *unit);
        }
    }
}
