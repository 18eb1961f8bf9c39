//! Setting hairlines and edges on the pixels of the screen.

use super::geometry::{Area, Point};

/// The width of a level or upright line on a screen with `ratio` pixels to a CSS pixel:
/// a whole number of pixels, at least one; in CSS pixels.
pub fn line_width(width: f64, ratio: f64) -> f64 {
    (width * ratio).round().max(1.0) / ratio
}

/// The middle of a line, moved so that both its edges fall between pixels.
pub fn middle(position: f64, width: f64, ratio: f64) -> f64 {
    let half = 0.5 * line_width(width, ratio);
    ((position - half) * ratio).round() / ratio + half
}

/// The nearest edge between pixels.
pub fn edge(position: f64, ratio: f64) -> f64 {
    (position * ratio).round() / ratio
}

/// A straight stroke: moved sharply onto the pixels when upright or level.
pub fn stroke([from, to]: [Point; 2], width: f64, ratio: f64) -> [Point; 2] {
    if from.x == to.x {
        let x = middle(from.x, width, ratio);
        [Point::new(x, edge(from.y, ratio)), Point::new(x, edge(to.y, ratio))]
    } else if from.y == to.y {
        let y = middle(from.y, width, ratio);
        [Point::new(edge(from.x, ratio), y), Point::new(edge(to.x, ratio), y)]
    } else {
        [from, to]
    }
}

/// An area with sharp edges.
pub fn area(area: Area, ratio: f64) -> Area {
    Area::new(
        edge(area.left, ratio),
        edge(area.top, ratio),
        edge(area.right, ratio),
        edge(area.bottom, ratio),
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn edges_fall_between_pixels_at_every_ratio() {
        for ratio in [1.0, 1.25, 1.5, 2.0, 2.625, 3.0] {
            for position in [10.0, 10.3, 10.5, 77.77] {
                let half = 0.5 * line_width(1.0, ratio);
                let middle = middle(position, 1.0, ratio);
                for edge in [middle - half, middle + half] {
                    let pixels = edge * ratio;
                    assert!((pixels - pixels.round()).abs() < 1e-9, "{ratio} {position}");
                }
                assert!((middle - position).abs() <= 0.5 / ratio + 1e-9);
            }
        }
    }

    #[test]
    fn slanted_strokes_stay_where_they_are() {
        let slanted = [Point::new(0.2, 0.7), Point::new(5.3, 9.1)];
        assert_eq!(stroke(slanted, 1.0, 2.0), slanted);
    }
}
