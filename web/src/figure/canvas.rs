//! A drawing onto a canvas, sharp on every screen.

use std::cell::Cell;

use wasm_bindgen::{JsCast, JsValue};
use web_sys::{CanvasRenderingContext2d, HtmlCanvasElement};

use super::geometry::{Area, Point};
use super::palette::{Colour, Palette};
use super::scene::{Anchor, Dash, FONT_FAMILY, Item, Marker, Role, Scene, Stroke, Text};
use super::sharp;

/// Browsers refuse larger canvases, and some fall silent.
const MOST_PIXELS: f64 = 8192.0;

/// Paints a drawing, in place of what was there.
///
/// The canvas is given a backing store of the size of the drawing times `ratio`
/// (`window.devicePixelRatio`), and its title and description for screen readers. Its
/// size on the page is left to the style sheet, and should be that of the drawing.
///
/// # Errors
/// What the browser says when it gives no drawing context.
pub fn paint(
    canvas: &HtmlCanvasElement,
    scene: &Scene,
    palette: &Palette,
    ratio: f64,
) -> Result<(), JsValue> {
    let context = canvas
        .get_context("2d")?
        .and_then(|context| context.dyn_into::<CanvasRenderingContext2d>().ok())
        .ok_or_else(|| JsValue::from_str("The browser gives no canvas to draw on."))?;
    let (columns, rows) = backing_store(scene, ratio);
    // Setting a size, even the same, clears the canvas and its state.
    canvas.set_width(columns);
    canvas.set_height(rows);
    canvas.set_attribute("role", "img")?;
    canvas.set_attribute("aria-label", &format!("{}. {}", scene.title, scene.description))?;
    // From the rounded sizes, so that the last pixel of the drawing is the last of the store.
    let across = f64::from(columns) / scene.width;
    let down = f64::from(rows) / scene.height;
    context.set_transform(across, 0.0, 0.0, down, 0.0, 0.0)?;
    let painter = Painter { context: &context, palette, ratio: across, font: Cell::default() };
    painter.rectangle(scene.area(), Role::Paper);
    painter.items(scene.layer.items())
}

/// Pixels across and down.
fn backing_store(scene: &Scene, ratio: f64) -> (u32, u32) {
    let ratio = if ratio.is_finite() && ratio > 0.0 { ratio } else { 1.0 };
    let most = MOST_PIXELS / scene.width.max(scene.height);
    let ratio = ratio.min(most);
    let pixels = |length: f64| (length * ratio).round().max(1.0) as u32;
    (pixels(scene.width), pixels(scene.height))
}

struct Painter<'a> {
    context: &'a CanvasRenderingContext2d,
    palette: &'a Palette,
    ratio: f64,
    /// Weight and size of the font in use: a browser takes long to read one, the same or not.
    font: Cell<Option<(u16, f64)>>,
}

impl Painter<'_> {
    fn items(&self, items: &[Item]) -> Result<(), JsValue> {
        items.iter().try_for_each(|item| self.item(item))
    }

    fn item(&self, item: &Item) -> Result<(), JsValue> {
        match item {
            Item::Line { points, stroke } => {
                self.context.begin_path();
                self.trace(points);
                self.stroke(stroke, stroke.width)?;
            }
            Item::Segments { ends, stroke } => {
                self.context.begin_path();
                for ends in ends {
                    self.trace(&sharp::stroke(*ends, stroke.width, self.ratio));
                }
                let upright_or_level = |[from, to]: &[Point; 2]| from.x == to.x || from.y == to.y;
                let width = if ends.iter().all(upright_or_level) {
                    sharp::line_width(stroke.width, self.ratio)
                } else {
                    stroke.width
                };
                self.stroke(stroke, width)?;
            }
            Item::Polygon { points, fill } => {
                self.context.begin_path();
                self.trace(points);
                self.context.close_path();
                self.fill(&self.palette.mark(*fill));
            }
            Item::Rectangle { area, fill } => self.rectangle(*area, *fill),
            Item::Marker(marker) => self.marker(marker)?,
            Item::Text(text) => self.text(text)?,
            Item::Clipped { area, items } => {
                let area = sharp::area(*area, self.ratio);
                self.context.save();
                self.context.begin_path();
                self.context.rect(area.left, area.top, area.width(), area.height());
                self.context.clip();
                let painted = self.items(items);
                self.context.restore();
                painted?;
            }
        }
        Ok(())
    }

    fn trace(&self, points: &[Point]) {
        for (index, point) in points.iter().enumerate() {
            if index == 0 {
                self.context.move_to(point.x, point.y);
            } else {
                self.context.line_to(point.x, point.y);
            }
        }
    }

    fn stroke(&self, stroke: &Stroke, width: f64) -> Result<(), JsValue> {
        let colour = self.palette.mark(stroke.role);
        let pattern: js_sys::Array =
            stroke.dash.pattern(stroke.width).into_iter().map(JsValue::from_f64).collect();
        self.context.set_line_dash(&pattern)?;
        self.context.set_line_cap(if stroke.dash == Dash::Dotted { "round" } else { "butt" });
        self.context.set_line_width(width);
        self.context.set_stroke_style_str(&colour.css);
        self.context.set_global_alpha(colour.opacity);
        self.context.stroke();
        self.context.set_global_alpha(1.0);
        Ok(())
    }

    fn fill(&self, colour: &Colour) {
        self.context.set_fill_style_str(&colour.css);
        self.context.set_global_alpha(colour.opacity);
        self.context.fill();
        self.context.set_global_alpha(1.0);
    }

    fn rectangle(&self, area: Area, fill: Role) {
        let area = sharp::area(area, self.ratio);
        self.context.begin_path();
        self.context.rect(area.left, area.top, area.width(), area.height());
        self.fill(&self.palette.mark(fill));
    }

    fn marker(&self, marker: &Marker) -> Result<(), JsValue> {
        self.context.begin_path();
        match marker.corners(self.palette.shape(marker.shape)) {
            Some(corners) => {
                self.trace(&corners);
                self.context.close_path();
            }
            None => self.context.arc(
                marker.centre.x,
                marker.centre.y,
                marker.radius,
                0.0,
                std::f64::consts::TAU,
            )?,
        }
        self.fill(&self.palette.mark(marker.fill));
        if marker.outline.width > 0.0 {
            self.stroke(&marker.outline, marker.outline.width)?;
        }
        Ok(())
    }

    fn text(&self, text: &Text) -> Result<(), JsValue> {
        let colour = self.palette.words(text.role);
        let (weight, size) = (text.font.weight(), text.font.size());
        if self.font.replace(Some((weight, size))) != Some((weight, size)) {
            self.context.set_font(&format!("{weight} {size}px {FONT_FAMILY}"));
        }
        self.context.set_text_align(match text.anchor {
            Anchor::Start => "left",
            Anchor::Middle => "center",
            Anchor::End => "right",
        });
        self.context.set_fill_style_str(&colour.css);
        if text.angle == 0.0 {
            return self.context.fill_text(&text.content, text.at.x, text.at.y + text.foot());
        }
        self.context.save();
        self.context.translate(text.at.x, text.at.y)?;
        self.context.rotate(text.angle)?;
        let written = self.context.fill_text(&text.content, 0.0, text.foot());
        self.context.restore();
        written
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_backing_store_is_whole_and_bounded() {
        let scene = Scene::new(333.0, 201.0);
        assert_eq!(backing_store(&scene, 1.5), (500, 302));
        assert_eq!(backing_store(&scene, f64::NAN), (333, 201));
        let (columns, rows) = backing_store(&Scene::new(8000.0, 300.0), 4.0);
        assert!(columns <= 8192 && rows <= 8192);
    }
}
