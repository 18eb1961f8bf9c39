//! A picture to take along, as SVG and as PNG: always of one size and in light colours, so that
//! the same study gives the same picture wherever it is opened.

use std::rc::Rc;

use web_sys::HtmlCanvasElement;

use super::canvas::Drawing;
use super::carry::{Carrier, file_name};
use super::part::{Part, button, part};
use super::sheet::Sheet;
use crate::figure::palette::Palette;
use crate::figure::scene::Scene;
use crate::figure::{canvas, svg};

/// Width in CSS pixels.
const WIDTH: f64 = 720.0;
/// Pixels of a PNG to a CSS pixel: sharp in print.
const PIXEL_RATIO: f64 = 3.0;

/// A picture's name in the name of its file, and its height ÷ width.
#[derive(Clone, Copy)]
pub struct Format {
    /// The name.
    pub name: &'static str,
    /// The height ÷ width.
    pub slope: f64,
}

/// The buttons, and where a picture is shown that could not be saved.
pub fn take_along(sheet: Sheet, drawing: Drawing, format: Format) -> Part {
    let carrier = Carrier::new(sheet, format.name);
    let take = |kind: &'static str, address: fn(&Scene, &Palette) -> Option<String>| {
        let (drawing, carrier) = (Rc::clone(&drawing), carrier.clone());
        move || {
            let scene = drawing().scene(WIDTH, (WIDTH * format.slope).round());
            let palette = Palette::light().with_temperatures(sheet.temperatures());
            if let Some(address) = address(&scene, &palette) {
                let ending = format!("{}.{kind}", format.name);
                let description = format!("{}. {}", scene.title, scene.description);
                carrier.picture(&file_name(&sheet.study().title, &ending), address, description);
            }
        }
    };
    let buttons = part("div")
        .class("actions quiet")
        .add(button("Picture as SVG", take("svg", as_svg)))
        .add(button("Picture as PNG", take("png", as_png)));
    part("div").add(buttons).add(carrier.panel())
}

fn as_svg(scene: &Scene, palette: &Palette) -> Option<String> {
    let text = String::from(js_sys::encode_uri_component(&svg::svg(scene, palette)));
    Some(format!("data:image/svg+xml,{text}"))
}

fn as_png(scene: &Scene, palette: &Palette) -> Option<String> {
    let canvas = part("canvas").element::<HtmlCanvasElement>()?;
    canvas::paint(&canvas, scene, palette, PIXEL_RATIO).ok()?;
    canvas.to_data_url().ok()
}
