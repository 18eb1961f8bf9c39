//! What stands around a plot: titles above it, the key and a title below it.

use kinetics_core::units::TemperatureUnit;

use super::geometry::{Area, Point};
use super::grounds::Grounds;
use super::marks::key;
use super::scene::{Anchor, Baseline, FontRole, Layer, Role, Scene, Text};
use super::text_size::{shortened, text_width};

/// Free room at the edges of a picture and between two texts of a row.
const EDGE: f64 = 4.0;
const BETWEEN: f64 = 16.0;
const ROW: f64 = 20.0;
/// From the right edge of a plot to that of its picture.
pub const RIGHT: f64 = 14.0;

/// "temperature, °C".
pub fn temperature_title(unit: TemperatureUnit) -> String {
    format!("temperature, {}", unit.symbol())
}

/// The row above the plot: what stands upwards on the left, the temperature on the right,
/// which gives way to its unit alone where both do not fit.
pub fn head(layer: &mut Layer, upwards: &str, unit: TemperatureUnit, scene: &Scene, plot: Area) {
    let y = EDGE + 0.74 * FontRole::Title.size();
    let room = plot.right - EDGE;
    let full = temperature_title(unit);
    let fits = |title: &str| {
        text_width(upwards, FontRole::Title) + text_width(title, FontRole::Title) + BETWEEN <= room
    };
    let title = if fits(&full) { full } else { unit.symbol().to_owned() };
    let left = room - text_width(&title, FontRole::Title) - BETWEEN;
    let upwards = shortened(upwards, FontRole::Title, left.min(scene.width));
    layer.text(Text::new(upwards, Point::new(EDGE, y), FontRole::Title, Role::Quiet));
    layer.text(
        Text::new(title, Point::new(plot.right, y), FontRole::Title, Role::Quiet)
            .held(Anchor::End, Baseline::Foot),
    );
}

/// The rows below a plot: the key of line styles and the title of the axis.
pub struct Foot {
    grounds: Vec<Grounds>,
    title: String,
    rows: usize,
}

impl Foot {
    /// In one row where key and title fit side by side, else in two; without a key where
    /// it does not even fit alone.
    pub fn fitting(grounds: Vec<Grounds>, title: impl Into<String>, width: f64) -> Self {
        let title = title.into();
        let key_width = key::width(&grounds);
        let title_width = text_width(&title, FontRole::Title);
        let (grounds, rows) =
            if grounds.is_empty() || key_width + BETWEEN + title_width <= width - RIGHT - EDGE {
                (grounds, 1)
            } else if key_width <= width - 2.0 * EDGE {
                (grounds, 2)
            } else {
                (Vec::new(), 1)
            };
        Self { grounds, title, rows }
    }

    /// Height of the rows.
    pub fn height(&self) -> f64 {
        ROW * self.rows as f64 + EDGE
    }

    /// Draws them at the foot of the picture.
    pub fn draw(&self, layer: &mut Layer, plot: Area, height: f64) {
        let last = height - EDGE - 2.0;
        let first = last - ROW * (self.rows - 1) as f64;
        let at = Point::new(plot.right, first);
        layer.text(
            Text::new(self.title.as_str(), at, FontRole::Title, Role::Quiet)
                .held(Anchor::End, Baseline::Foot),
        );
        let end = if self.rows == 1 {
            plot.right - text_width(&self.title, FontRole::Title) - BETWEEN
        } else {
            plot.right + RIGHT - EDGE
        };
        let room = end - key::width(&self.grounds);
        // It begins with the plot, or further left where it needs the room.
        let left = plot.left.min(room).max(EDGE);
        key::key(layer, &self.grounds, Point::new(left, last));
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_narrow_picture_gives_the_key_its_own_row() {
        let wide = Foot::fitting(Grounds::ALL.to_vec(), "1000 K / T", 560.0);
        let narrow = Foot::fitting(Grounds::ALL.to_vec(), "1000 K / T", 320.0);
        assert_eq!(narrow.grounds, wide.grounds);
        assert!(narrow.height() > wide.height());
        let none = Foot::fitting(Vec::new(), "1000 K / T", 320.0);
        assert_eq!(none.height(), wide.height());
    }
}
