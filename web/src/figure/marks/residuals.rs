//! Sticks from the zero line to what the fit misses.

use super::super::geometry::Point;
use super::super::scene::{Layer, Marker, Role, Shape, Stroke};

/// One misfit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Stick {
    /// The head of the stick.
    pub head: Point,
    /// The y of zero.
    pub zero: f64,
    /// The temperature, in kelvin.
    pub kelvin: f64,
    /// Left out of the fit: drawn hollow.
    pub excluded: bool,
}

/// Sticks with small heads, in the colour and the shape of their temperature.
pub fn sticks(layer: &mut Layer, sticks: &[Stick], radius: f64) {
    for stick in sticks {
        let colour = Role::Temperature(stick.kelvin);
        let foot = Point::new(stick.head.x, stick.zero);
        layer.line(&[foot, stick.head], Stroke::solid(colour, 1.4));
        layer.marker(Marker {
            centre: stick.head,
            radius,
            shape: Shape::OfTemperature(stick.kelvin),
            fill: if stick.excluded { Role::Paper } else { colour },
            outline: Stroke::solid(colour, if stick.excluded { 1.2 } else { 0.0 }),
        });
    }
}

/// The least of 1, 2 or 5 times a power of ten that holds every value; 1 where there is none.
pub fn bound(values: impl IntoIterator<Item = f64>) -> f64 {
    let greatest = values
        .into_iter()
        .filter(|value| value.is_finite())
        .fold(0.0_f64, |greatest, value| greatest.max(value.abs()));
    if !(1e-6..1e12).contains(&greatest) {
        return if greatest >= 1e12 { 1e12 } else { 1.0 };
    }
    let power = 10.0_f64.powf(greatest.log10().floor());
    [1.0, 2.0, 5.0, 10.0]
        .into_iter()
        .map(|factor| factor * power)
        .find(|bound| *bound >= greatest)
        .unwrap_or(10.0 * power)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bounds_are_round_and_hold_all() {
        assert_eq!(bound([1.2, -3.4, f64::NAN]), 5.0);
        assert_eq!(bound([0.7]), 1.0);
        assert_eq!(bound([20.0]), 20.0);
        assert_eq!(bound([]), 1.0);
    }
}
