//! Marks: one surface, several outlines.

use super::super::geometry::Point;
use super::{Role, Stroke};

/// The outline of a mark.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Shape {
    /// A disc.
    Circle,
    /// A square on its corner.
    Diamond,
    /// A square on its side.
    Square,
    /// A triangle, point upwards.
    TriangleUp,
    /// A triangle, point downwards.
    TriangleDown,
    /// The shape by which the palette repeats the colour of a temperature, in kelvin.
    OfTemperature(f64),
}

/// A mark at one place. Shapes of the same radius cover the same surface.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Marker {
    /// Its middle.
    pub centre: Point,
    /// The radius of the disc of the same surface.
    pub radius: f64,
    /// Its outline.
    pub shape: Shape,
    /// What fills it.
    pub fill: Role,
    /// The line around it.
    pub outline: Stroke,
}

impl Marker {
    /// The corners of a shape of this marker's surface; `None` for a disc.
    pub fn corners(&self, shape: Shape) -> Option<Vec<Point>> {
        let Point { x, y } = self.centre;
        let at = |points: &[(f64, f64)], size: f64| {
            let size = size * self.radius;
            let corner = |(u, v): &(f64, f64)| Point::new(x + u * size, y + v * size);
            Some(points.iter().map(corner).collect())
        };
        // Each size gives the shape the surface of a disc of radius 1.
        match shape {
            Shape::Circle | Shape::OfTemperature(_) => None,
            Shape::Square => at(&[(-1.0, -1.0), (1.0, -1.0), (1.0, 1.0), (-1.0, 1.0)], 0.886),
            Shape::Diamond => at(&[(0.0, -1.0), (1.0, 0.0), (0.0, 1.0), (-1.0, 0.0)], 1.253),
            Shape::TriangleUp => at(&[(0.0, -1.0), (0.866, 0.5), (-0.866, 0.5)], 1.555),
            Shape::TriangleDown => at(&[(0.0, 1.0), (0.866, -0.5), (-0.866, -0.5)], 1.555),
        }
    }
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    #[test]
    fn shapes_cover_the_same_surface() {
        let marker = Marker {
            centre: Point::new(10.0, 20.0),
            radius: 5.0,
            shape: Shape::Circle,
            fill: Role::Ink,
            outline: Stroke::solid(Role::Paper, 1.0),
        };
        let disc = std::f64::consts::PI * 25.0;
        for shape in [Shape::Square, Shape::Diamond, Shape::TriangleUp, Shape::TriangleDown] {
            let corners = marker.corners(shape).unwrap();
            let next = corners.iter().cycle().skip(1);
            let twice: f64 = corners.iter().zip(next).map(|(a, b)| a.x * b.y - b.x * a.y).sum();
            assert!((0.5 * twice.abs() / disc - 1.0).abs() < 0.01, "{shape:?}");
        }
    }
}
