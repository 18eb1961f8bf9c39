//! How much of a quantity a picture shows.

/// The least and the greatest of some values.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Span {
    low: f64,
    high: f64,
}

impl Default for Span {
    fn default() -> Self {
        Self { low: f64::INFINITY, high: f64::NEG_INFINITY }
    }
}

/// Values beyond this are no measurements, and their differences would overflow.
const GREATEST: f64 = 1e100;

impl Span {
    /// Widens the span to a value; what is no number is passed over.
    pub fn hold(&mut self, value: f64) {
        if value.abs() <= GREATEST {
            self.low = self.low.min(value);
            self.high = self.high.max(value);
        }
    }

    /// The span of all values.
    pub fn of(values: impl IntoIterator<Item = f64>) -> Self {
        let mut span = Self::default();
        for value in values {
            span.hold(value);
        }
        span
    }

    /// The two ends, unless nothing was held.
    pub fn ends(self) -> Option<(f64, f64)> {
        (self.low <= self.high).then_some((self.low, self.high))
    }

    /// Widened to further values, on each side by no more than a fraction of itself.
    #[must_use]
    pub fn stretched(self, values: impl IntoIterator<Item = f64>, most: f64) -> Self {
        let Some((low, high)) = self.ends() else {
            return self;
        };
        let room = most * (high - low).max(1.0);
        let mut span = self;
        for value in values {
            if !value.is_nan() {
                span.hold(value.clamp(low - room, high + room));
            }
        }
        span
    }

    /// The ends with a margin of a fraction on both sides, at least 1 apart; 0 to 1
    /// where nothing was held.
    pub fn padded(self, fraction: f64) -> (f64, f64) {
        let Some((low, high)) = self.ends() else {
            return (0.0, 1.0);
        };
        let margin = (fraction * (high - low)).max(0.5 * (1.0 - (high - low)));
        (low - margin, high + margin)
    }
}

/// The temperatures that a picture shows, in kelvin, for those that matter: with a margin
/// on both sides, even in 1/T, and at least 20 K; 0 to 100 °C where there are none.
pub fn on_view(temperatures: impl IntoIterator<Item = f64>) -> (f64, f64) {
    let sensible = |kelvin: &f64| (1.0..1e5).contains(kelvin);
    let Some((coldest, warmest)) = Span::of(temperatures.into_iter().filter(sensible)).ends()
    else {
        return (273.15, 373.15);
    };
    let widen = (10.0 - 0.5 * (warmest - coldest)).max(0.0);
    let (coldest, warmest) = ((coldest - widen).max(0.5 * coldest), warmest + widen);
    let margin = 0.07 * (1.0 / coldest - 1.0 / warmest);
    let warmest_end = (1.0 / warmest - margin).max(0.5 / warmest);
    (1.0 / (1.0 / coldest + margin), 1.0 / warmest_end)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn a_wide_fan_gets_no_more_than_its_share() {
        let span = Span::of([-8.0, 0.0]).stretched([-100.0, 0.5], 0.25);
        assert_eq!(span.ends(), Some((-10.0, 0.5)));
        assert_eq!(Span::default().stretched([1.0], 0.25).ends(), None);
    }

    #[test]
    fn nothing_shows_the_ordinary_range() {
        assert_eq!(on_view([f64::NAN, -5.0]), (273.15, 373.15));
        assert_eq!(Span::default().padded(0.1), (0.0, 1.0));
    }

    proptest! {
        #[test]
        fn what_matters_is_on_view(a in 1.0..99_999.0_f64, b in 1.0..99_999.0_f64) {
            let (coldest, warmest) = on_view([a, b]);
            prop_assert!(coldest < a.min(b) && warmest > a.max(b));
            prop_assert!(coldest > 0.0 && warmest.is_finite());
        }
    }
}
