//! From a quantity to a place along an axis and back.

/// What is evenly spaced along an axis.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Spacing {
    /// The quantity itself.
    Linear,
    /// Its logarithm.
    Log,
    /// The reciprocal of a temperature in kelvin.
    ReciprocalTemperature,
}

impl Spacing {
    fn even(self, value: f64) -> Option<f64> {
        let even = match self {
            Self::Linear => value,
            Self::Log if value > 0.0 => value.ln(),
            Self::ReciprocalTemperature if value > 0.0 => 1.0 / value,
            _ => return None,
        };
        even.is_finite().then_some(even)
    }

    fn value(self, even: f64) -> f64 {
        match self {
            Self::Linear => even,
            Self::Log => even.exp(),
            Self::ReciprocalTemperature => 1.0 / even,
        }
    }

    /// What an axis shows when it is not told otherwise.
    const fn ordinary(self) -> (f64, f64) {
        match self {
            Self::Linear => (0.0, 1.0),
            Self::Log => (1.0, 10.0),
            Self::ReciprocalTemperature => (273.15, 373.15),
        }
    }

    /// Two values around one, for an axis that would have no length.
    fn around(self, value: f64) -> (f64, f64) {
        match self {
            Self::Linear => {
                let margin = if value == 0.0 { 1.0 } else { 0.1 * value.abs() };
                (value - margin, value + margin)
            }
            Self::Log | Self::ReciprocalTemperature => (value / 1.05, value * 1.05),
        }
    }
}

/// A quantity along an axis.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Scale {
    spacing: Spacing,
    domain: (f64, f64),
    range: (f64, f64),
    even: (f64, f64),
}

impl Scale {
    /// A scale that puts the first value of `domain` at the first pixel of `range`
    /// and the second at the second; both may run downwards. A domain that cannot be
    /// shown is replaced by one that can, so that every scale is usable.
    pub fn new(spacing: Spacing, domain: (f64, f64), range: (f64, f64)) -> Self {
        for domain in [domain, spacing.around(domain.0), spacing.ordinary()] {
            if let (Some(from), Some(to)) = (spacing.even(domain.0), spacing.even(domain.1))
                && from != to
                && (to - from).is_finite()
            {
                let even = (from, to);
                return Self { spacing, domain, range, even };
            }
        }
        // The ordinary domain always passes above.
        Self { spacing: Spacing::Linear, domain: (0.0, 1.0), range, even: (0.0, 1.0) }
    }

    /// The values at the two ends, as they stand along the axis.
    pub const fn domain(&self) -> (f64, f64) {
        self.domain
    }

    /// The least and the greatest value on the axis.
    pub fn extremes(&self) -> (f64, f64) {
        let (from, to) = self.domain;
        (from.min(to), from.max(to))
    }

    /// The length of the axis in pixels.
    pub fn length(&self) -> f64 {
        (self.range.1 - self.range.0).abs()
    }

    /// The pixel of a value, also outside the domain; `None` where the value has
    /// no place on such an axis.
    pub fn position(&self, value: f64) -> Option<f64> {
        let fraction = (self.spacing.even(value)? - self.even.0) / (self.even.1 - self.even.0);
        let position = self.range.0 + fraction * (self.range.1 - self.range.0);
        position.is_finite().then_some(position)
    }

    /// The value at a pixel, held within the domain.
    pub fn value(&self, position: f64) -> f64 {
        let (low, high) = self.extremes();
        let length = self.range.1 - self.range.0;
        if length == 0.0 || !position.is_finite() {
            return self.domain.0;
        }
        let fraction = ((position - self.range.0) / length).clamp(0.0, 1.0);
        let even = self.even.0 + fraction * (self.even.1 - self.even.0);
        self.spacing.value(even).clamp(low, high)
    }

    /// The value a fraction of the way along the axis.
    pub fn along(&self, fraction: f64) -> f64 {
        self.value(self.range.0 + fraction * (self.range.1 - self.range.0))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn ends_of_the_domain_sit_at_the_ends_of_the_range() {
        let scale = Scale::new(Spacing::ReciprocalTemperature, (363.15, 273.15), (40.0, 540.0));
        assert_eq!(scale.position(363.15), Some(40.0));
        assert_eq!(scale.position(273.15), Some(540.0));
        // Halfway along stands the harmonic mean.
        let middle = 2.0 / (1.0 / 363.15 + 1.0 / 273.15);
        assert!((scale.along(0.5) - middle).abs() < 1e-9);
    }

    #[test]
    fn what_cannot_be_shown_has_no_place() {
        let scale = Scale::new(Spacing::Log, (1.0, 100.0), (0.0, 200.0));
        assert_eq!(scale.position(10.0), Some(100.0));
        for value in [0.0, -1.0, f64::NAN, f64::INFINITY] {
            assert_eq!(scale.position(value), None);
        }
    }

    fn spacings() -> impl Strategy<Value = Spacing> {
        prop_oneof![Just(Spacing::Linear), Just(Spacing::Log), Just(Spacing::ReciprocalTemperature)]
    }

    proptest! {
        #[test]
        fn there_and_back(spacing in spacings(), from in 200.0..700.0_f64, width in 1.0..500.0_f64, at in 0.0..1.0_f64) {
            let scale = Scale::new(spacing, (from, from + width), (30.0, 500.0));
            let value = scale.along(at);
            let position = scale.position(value).unwrap_or(f64::NAN);
            prop_assert!((position - (30.0 + 470.0 * at)).abs() < 1e-6);
        }

        #[test]
        fn every_scale_is_usable(spacing in spacings(), from in any::<f64>(), to in any::<f64>(), at in any::<f64>()) {
            let scale = Scale::new(spacing, (from, to), (0.0, 100.0));
            prop_assert!(scale.value(at).is_finite());
            let (low, high) = scale.extremes();
            prop_assert!(low < high);
        }
    }
}
