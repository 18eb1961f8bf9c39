//! Measured points in the colour and the shape of their temperature.

use super::super::geometry::Point;
use super::super::scene::{Layer, Marker, Role, Shape, Stroke};

/// One measured point.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PointMark {
    /// Where.
    pub at: Point,
    /// The y of the two ends of its error bar, where there is one.
    pub interval: Option<(f64, f64)>,
    /// Its temperature, in kelvin.
    pub kelvin: f64,
    /// Left out of the fit: drawn hollow.
    pub excluded: bool,
}

/// The radius of the marks on a picture so wide.
pub fn radius(width: f64) -> f64 {
    if width < 420.0 { 3.8 } else { 4.4 }
}

/// Points over their error bars.
pub fn points(layer: &mut Layer, marks: &[PointMark], radius: f64) {
    for mark in marks {
        let colour = Role::Temperature(mark.kelvin);
        if let Some((low, high)) = mark.interval {
            let bar = [Point::new(mark.at.x, low), Point::new(mark.at.x, high)];
            layer.line(&bar, Stroke::solid(colour, 1.2));
        }
        let (fill, outline) = if mark.excluded {
            (Role::Paper, Stroke::solid(colour, 1.3))
        } else {
            // A ring of paper keeps the point apart from the line through it.
            (colour, Stroke::solid(Role::Paper, 1.1))
        };
        layer.marker(Marker {
            centre: mark.at,
            radius,
            shape: Shape::OfTemperature(mark.kelvin),
            fill,
            outline,
        });
    }
}

#[cfg(test)]
mod tests {
    use super::super::super::scene::Item;
    use super::*;

    #[test]
    fn a_point_left_out_is_hollow() {
        let mark = PointMark {
            at: Point::new(10.0, 10.0),
            interval: Some((8.0, 12.0)),
            kelvin: 330.0,
            excluded: true,
        };
        let mut layer = Layer::default();
        points(&mut layer, &[mark], 4.0);
        let fills: Vec<Role> = layer
            .items()
            .iter()
            .filter_map(|item| match item {
                Item::Marker(marker) => Some(marker.fill),
                _ => None,
            })
            .collect();
        assert_eq!(fills, [Role::Paper]);
        assert_eq!(layer.items().len(), 2);
    }
}
