//! A drawing as SVG text.

use std::fmt::Write;

use super::geometry::{Area, Point};
use super::palette::{Colour, Palette};
use super::scene::{Anchor, Dash, FONT_FAMILY, Item, Marker, Role, Scene, Stroke, Text};
use super::sharp;

/// The drawing as one SVG document: a file of its own, or an element of a page. Colours
/// are those of the palette; there are no styles, scripts or links in it.
pub fn svg(scene: &Scene, palette: &Palette) -> String {
    let mut writer = Writer { out: String::new(), palette };
    let (width, height) = (length(scene.width), length(scene.height));
    writer.raw(&format!(
        "<svg xmlns=\"http://www.w3.org/2000/svg\" role=\"img\" width=\"{width}\" height=\"{height}\" \
         viewBox=\"0 0 {width} {height}\" font-family=\"{}\" font-variant=\"tabular-nums\">\n",
        escaped(FONT_FAMILY),
    ));
    writer.raw(&format!("<title>{}</title>\n", escaped(&scene.title)));
    writer.raw(&format!("<desc>{}</desc>\n", escaped(&scene.description)));
    writer.rectangle(scene.area(), Role::Paper);
    writer.items(scene.layer.items());
    writer.raw("</svg>\n");
    writer.out
}

struct Writer<'a> {
    out: String,
    palette: &'a Palette,
}

impl Writer<'_> {
    fn raw(&mut self, text: &str) {
        self.out.push_str(text);
    }

    fn items(&mut self, items: &[Item]) {
        for item in items {
            self.item(item);
        }
    }

    fn item(&mut self, item: &Item) {
        match item {
            Item::Line { points, stroke } => {
                let path = path(points);
                self.stroked(&path, stroke);
            }
            Item::Segments { ends, stroke } => {
                let path: String = ends
                    .iter()
                    .map(|ends| path(&sharp::stroke(*ends, stroke.width, 1.0)))
                    .collect();
                self.stroked(&path, stroke);
            }
            Item::Polygon { points, fill } => {
                let fill = paint("fill", &self.palette.mark(*fill));
                self.raw(&format!("<path d=\"{}Z\"{fill}/>\n", path(points)));
            }
            Item::Rectangle { area, fill } => self.rectangle(*area, *fill),
            Item::Marker(marker) => self.marker(marker),
            Item::Text(text) => self.text(text),
            Item::Clipped { area, items } => self.clipped(*area, items),
        }
    }

    fn stroked(&mut self, path: &str, stroke: &Stroke) {
        let attributes = stroke_attributes(stroke, self.palette);
        self.raw(&format!("<path d=\"{path}\" fill=\"none\"{attributes}/>\n"));
    }

    fn rectangle(&mut self, area: Area, fill: Role) {
        let area = sharp::area(area, 1.0);
        let fill = paint("fill", &self.palette.mark(fill));
        self.raw(&format!("<rect{}{fill}/>\n", bounds(area)));
    }

    fn marker(&mut self, marker: &Marker) {
        let fill = paint("fill", &self.palette.mark(marker.fill));
        let shape = self.palette.shape(marker.shape);
        let outline = if marker.outline.width > 0.0 {
            stroke_attributes(&marker.outline, self.palette)
        } else {
            String::new()
        };
        let element = match marker.corners(shape) {
            Some(corners) => format!("<path d=\"{}Z\"{fill}{outline}/>\n", path(&corners)),
            None => format!(
                "<circle cx=\"{}\" cy=\"{}\" r=\"{}\"{fill}{outline}/>\n",
                length(marker.centre.x),
                length(marker.centre.y),
                length(marker.radius),
            ),
        };
        self.raw(&element);
    }

    fn text(&mut self, text: &Text) {
        let fill = paint("fill", &self.palette.words(text.role));
        let anchor = match text.anchor {
            Anchor::Start => "",
            Anchor::Middle => " text-anchor=\"middle\"",
            Anchor::End => " text-anchor=\"end\"",
        };
        let weight = if text.font.is_bold() {
            format!(" font-weight=\"{}\"", text.font.weight())
        } else {
            String::new()
        };
        let place = if text.angle == 0.0 {
            format!(" x=\"{}\" y=\"{}\"", length(text.at.x), length(text.at.y + text.foot()))
        } else {
            format!(
                " transform=\"translate({} {}) rotate({})\" y=\"{}\"",
                length(text.at.x),
                length(text.at.y),
                length(text.angle.to_degrees()),
                length(text.foot()),
            )
        };
        self.raw(&format!(
            "<text{place} font-size=\"{}\"{weight}{anchor}{fill}>{}</text>\n",
            length(text.font.size()),
            escaped(&text.content),
        ));
    }

    /// A nested `svg` cuts off what lies outside it, and needs no name that could
    /// clash with another picture on the same page.
    fn clipped(&mut self, area: Area, items: &[Item]) {
        let area = sharp::area(area, 1.0);
        self.raw(&format!(
            "<svg{} viewBox=\"{} {} {} {}\" overflow=\"hidden\">\n",
            bounds(area),
            length(area.left),
            length(area.top),
            length(area.width()),
            length(area.height()),
        ));
        self.items(items);
        self.raw("</svg>\n");
    }
}

fn bounds(area: Area) -> String {
    format!(
        " x=\"{}\" y=\"{}\" width=\"{}\" height=\"{}\"",
        length(area.left),
        length(area.top),
        length(area.width()),
        length(area.height()),
    )
}

fn stroke_attributes(stroke: &Stroke, palette: &Palette) -> String {
    let mut attributes = paint("stroke", &palette.mark(stroke.role));
    if stroke.width != 1.0 {
        attributes.push_str(&format!(" stroke-width=\"{}\"", length(stroke.width)));
    }
    let pattern: Vec<String> = stroke.dash.pattern(stroke.width).into_iter().map(length).collect();
    if !pattern.is_empty() {
        attributes.push_str(&format!(" stroke-dasharray=\"{}\"", pattern.join(" ")));
    }
    if stroke.dash == Dash::Dotted {
        attributes.push_str(" stroke-linecap=\"round\"");
    }
    attributes
}

fn paint(attribute: &str, colour: &Colour) -> String {
    if colour.opacity < 1.0 {
        let opacity = length(colour.opacity);
        format!(" {attribute}=\"{}\" {attribute}-opacity=\"{opacity}\"", colour.css)
    } else {
        format!(" {attribute}=\"{}\"", colour.css)
    }
}

fn path(points: &[Point]) -> String {
    let mut path = String::new();
    for (index, point) in points.iter().enumerate() {
        let command = if index == 0 { 'M' } else { 'L' };
        let _ = write!(path, "{command}{} {}", length(point.x), length(point.y));
    }
    path
}

/// A coordinate to a hundredth of a pixel, without idle zeros.
fn length(value: f64) -> String {
    let text = format!("{value:.2}");
    let text = text.trim_end_matches('0').trim_end_matches('.');
    if text == "-0" { "0".to_owned() } else { text.to_owned() }
}

/// Text as SVG can hold it: marks escaped, characters that XML forbids left out.
fn escaped(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for character in text.chars() {
        match character {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            '\t' | '\n' | '\r' => out.push(' '),
            '\u{0}'..='\u{1f}' | '\u{fffe}' | '\u{ffff}' => {}
            character => out.push(character),
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::super::scene::{FontRole, Shape};
    use super::*;

    #[test]
    fn text_is_escaped() {
        let mut scene = Scene::new(300.0, 200.0);
        scene.title = "a < b & \"c\"\u{0}".to_owned();
        let at = Point::new(1.0, 2.0);
        scene.layer.text(Text::new("<script>", at, FontRole::Note, Role::Ink));
        let out = svg(&scene, &Palette::light());
        assert!(out.contains("<title>a &lt; b &amp; &quot;c&quot;</title>"));
        assert!(out.contains(">&lt;script&gt;</text>"));
        assert!(!out.contains("<script>"));
    }

    #[test]
    fn lengths_are_short() {
        assert_eq!(length(10.0), "10");
        assert_eq!(length(0.126), "0.13");
        assert_eq!(length(-0.001), "0");
        assert_eq!(length(100.0), "100");
    }

    #[test]
    fn shapes_follow_the_temperature() {
        let marker = Marker {
            centre: Point::new(50.0, 50.0),
            radius: 4.0,
            shape: Shape::OfTemperature(320.0),
            fill: Role::Temperature(320.0),
            outline: Stroke::solid(Role::Paper, 1.0),
        };
        let mut scene = Scene::new(300.0, 200.0);
        scene.layer.marker(marker);
        assert!(svg(&scene, &Palette::light()).contains("<circle"));
        let mut scene = Scene::new(300.0, 200.0);
        scene.layer.marker(Marker { shape: Shape::OfTemperature(370.0), ..marker });
        assert!(!svg(&scene, &Palette::light()).contains("<circle"));
    }
}
