//! A drawing as plain values: what to draw and in which part it plays, with no
//! colour and no screen. Painters turn it into SVG or onto a canvas.
//!
//! Every way into a [`Layer`] drops what is not a finite number, so that no
//! painter ever meets one.

mod marker;
mod text;

use super::geometry::{Area, Point};
pub use marker::{Marker, Shape};
pub use text::{Anchor, Baseline, FONT_FAMILY, FontRole, Text};

/// What a line, a surface or a piece of text stands for. The palette gives the colour.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Role {
    /// Lines and words that carry the message.
    Ink,
    /// Words beside it.
    Quiet,
    /// Lines beside the message.
    Faint,
    /// Hairlines of the grid.
    Rule,
    /// What the reader can move.
    Accent,
    /// The fan of an interval.
    Band,
    /// What the measurements cover.
    Span,
    /// The ground on which all is drawn.
    Paper,
    /// A temperature, in kelvin; nothing else is shown by colour.
    Temperature(f64),
}

impl Role {
    /// The role itself, or [`Role::Quiet`] where a temperature is no number.
    fn drawable(self) -> Self {
        match self {
            Self::Temperature(kelvin) if !kelvin.is_finite() => Self::Quiet,
            role => role,
        }
    }
}

/// The pattern of a line; it tells the grounds.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Dash {
    /// An unbroken line.
    Solid,
    /// Dashes.
    Dashed,
    /// Round dots.
    Dotted,
}

impl Dash {
    /// Lengths of strokes and gaps for a line of the given width.
    pub fn pattern(self, width: f64) -> Vec<f64> {
        match self {
            Self::Solid => Vec::new(),
            Self::Dashed => vec![4.4 * width, 2.9 * width],
            // A round cap turns a stroke of almost no length into a dot.
            Self::Dotted => vec![0.01, 2.3 * width],
        }
    }
}

/// How a line is drawn.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Stroke {
    /// What it stands for.
    pub role: Role,
    /// Width in CSS pixels.
    pub width: f64,
    /// Its pattern.
    pub dash: Dash,
}

impl Stroke {
    /// An unbroken line.
    pub const fn solid(role: Role, width: f64) -> Self {
        Self { role, width, dash: Dash::Solid }
    }
}

/// One thing to draw.
#[derive(Debug, Clone, PartialEq)]
pub enum Item {
    /// A line through points.
    Line {
        /// At least two.
        points: Vec<Point>,
        /// How it is drawn.
        stroke: Stroke,
    },
    /// Separate straight strokes. Upright and level ones are set sharply on
    /// the pixels of the screen.
    Segments {
        /// Their ends.
        ends: Vec<[Point; 2]>,
        /// How they are drawn.
        stroke: Stroke,
    },
    /// A filled outline.
    Polygon {
        /// At least three corners.
        points: Vec<Point>,
        /// What fills it.
        fill: Role,
    },
    /// A filled upright rectangle with sharp edges.
    Rectangle {
        /// Where.
        area: Area,
        /// What fills it.
        fill: Role,
    },
    /// A mark.
    Marker(Marker),
    /// A line of text.
    Text(Text),
    /// Things of which only the part in an area shows.
    Clipped {
        /// The area.
        area: Area,
        /// The things.
        items: Vec<Item>,
    },
}

/// Things to draw, the first at the bottom.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Layer {
    items: Vec<Item>,
}

impl Layer {
    /// The things, the first at the bottom.
    pub fn items(&self) -> &[Item] {
        &self.items
    }

    /// A line through points; one that is no number breaks it.
    pub fn line(&mut self, points: &[Point], stroke: Stroke) {
        let stroke = Stroke { role: stroke.role.drawable(), ..stroke };
        let drawable: Vec<Option<Point>> = points.iter().map(|point| point.drawable()).collect();
        for run in drawable.split(Option::is_none) {
            let points: Vec<Point> = run.iter().flatten().copied().collect();
            if points.len() >= 2 {
                self.items.push(Item::Line { points, stroke });
            }
        }
    }

    /// Separate straight strokes.
    pub fn segments(&mut self, ends: impl IntoIterator<Item = [Point; 2]>, stroke: Stroke) {
        let ends: Vec<[Point; 2]> = ends
            .into_iter()
            .filter_map(|[from, to]| Some([from.drawable()?, to.drawable()?]))
            .collect();
        if !ends.is_empty() {
            let stroke = Stroke { role: stroke.role.drawable(), ..stroke };
            self.items.push(Item::Segments { ends, stroke });
        }
    }

    /// A filled outline; nothing where a corner is no number.
    pub fn polygon(&mut self, points: &[Point], fill: Role) {
        let drawable: Option<Vec<Point>> = points.iter().map(|point| point.drawable()).collect();
        if let Some(points) = drawable.filter(|points| points.len() >= 3) {
            let fill = fill.drawable();
            self.items.push(Item::Polygon { points, fill });
        }
    }

    /// A filled upright rectangle.
    pub fn rectangle(&mut self, area: Area, fill: Role) {
        let corners = (
            Point::new(area.left, area.top).drawable(),
            Point::new(area.right, area.bottom).drawable(),
        );
        if let (Some(from), Some(to)) = corners
            && from.x < to.x
            && from.y < to.y
        {
            self.items.push(Item::Rectangle {
                area: Area::new(from.x, from.y, to.x, to.y),
                fill: fill.drawable(),
            });
        }
    }

    /// A mark.
    pub fn marker(&mut self, marker: Marker) {
        if let Some(centre) = marker.centre.drawable()
            && marker.radius.is_finite()
        {
            let shape = match marker.shape {
                Shape::OfTemperature(kelvin) if !kelvin.is_finite() => Shape::Circle,
                shape => shape,
            };
            self.items.push(Item::Marker(Marker {
                centre,
                shape,
                fill: marker.fill.drawable(),
                ..marker
            }));
        }
    }

    /// A line of text; nothing where there are no words.
    pub fn text(&mut self, text: Text) {
        if let Some(at) = text.at.drawable()
            && text.angle.is_finite()
            && !text.content.is_empty()
        {
            let role = text.role.drawable();
            self.items.push(Item::Text(Text { at, role, ..text }));
        }
    }

    /// The things of another layer, cut off at an area.
    pub fn clipped(&mut self, area: Area, layer: Self) {
        if !layer.items.is_empty() {
            let items = layer.items;
            self.items.push(Item::Clipped { area, items });
        }
    }
}

/// A drawing of a given size.
#[derive(Debug, Clone, PartialEq)]
pub struct Scene {
    /// Width in CSS pixels.
    pub width: f64,
    /// Height in CSS pixels.
    pub height: f64,
    /// What the picture is, for screen readers.
    pub title: String,
    /// What it shows, in a few sentences, for screen readers.
    pub description: String,
    /// What is drawn.
    pub layer: Layer,
}

impl Scene {
    /// The least and the greatest size of a drawing, in CSS pixels.
    const SMALLEST: (f64, f64) = (240.0, 180.0);
    const LARGEST: f64 = 8000.0;

    /// An empty drawing. A size that cannot be drawn is replaced by the nearest that can.
    pub fn new(width: f64, height: f64) -> Self {
        // `max` takes the other value where one is no number.
        Self {
            width: width.max(Self::SMALLEST.0).min(Self::LARGEST),
            height: height.max(Self::SMALLEST.1).min(Self::LARGEST),
            title: String::new(),
            description: String::new(),
            layer: Layer::default(),
        }
    }

    /// The whole drawing.
    pub fn area(&self) -> Area {
        Area::new(0.0, 0.0, self.width, self.height)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_point_that_is_no_number_breaks_a_line() {
        let mut layer = Layer::default();
        let points: Vec<Point> = [0.0, 1.0, f64::NAN, 3.0, 4.0, 5.0, f64::NAN, 7.0]
            .iter()
            .map(|&x| Point::new(x, x))
            .collect();
        layer.line(&points, Stroke::solid(Role::Ink, 1.0));
        // 7 stands alone and is no line.
        let lengths: Vec<usize> = layer
            .items()
            .iter()
            .map(|item| match item {
                Item::Line { points, .. } => points.len(),
                _ => 0,
            })
            .collect();
        assert_eq!(lengths, [2, 3]);
    }

    #[test]
    fn nothing_without_a_number_gets_in() {
        let mut layer = Layer::default();
        let nowhere = Point::new(f64::NAN, 0.0);
        layer.segments([[nowhere, nowhere]], Stroke::solid(Role::Ink, 1.0));
        layer.polygon(&[nowhere; 4], Role::Band);
        layer.rectangle(Area::new(0.0, 0.0, f64::NAN, 1.0), Role::Span);
        layer.text(Text::new("x", nowhere, FontRole::Tick, Role::Ink));
        assert!(layer.items().is_empty());
    }

    #[test]
    fn a_size_that_cannot_be_drawn_becomes_one_that_can() {
        for (width, height) in [(0.0, 0.0), (f64::NAN, f64::INFINITY), (-3.0, 1e12)] {
            let scene = Scene::new(width, height);
            assert!((240.0..=8000.0).contains(&scene.width));
            assert!((180.0..=8000.0).contains(&scene.height));
        }
    }
}
