//! Pictures: quantities to places, places to a drawing, a drawing to SVG or a canvas.
//!
//! A picture is a plain struct. `picture.scene(width, height)` makes its drawing,
//! [`canvas::paint`] or [`svg::svg`] paints it with a [`palette::Palette`], and
//! `picture.table()` says the same in numbers. All but `canvas` is pure.
//!
//! Colour means temperature and nothing else, and shape repeats it; the style of a
//! line means grounds.

// Places and sizes.
pub mod geometry;
pub mod scale;
pub mod ticks;
pub mod time_ticks;
pub mod view;

// The drawing and its colours.
pub mod palette;
pub mod scene;
pub mod temperature_colour;
pub mod text_size;

// Parts of pictures.
pub mod axis;
pub mod describe;
pub mod grounds;
pub mod marks;
pub mod surround;
pub mod table;

// Pictures.
pub mod law_picture;
pub mod time_map;

// Painters.
pub mod canvas;
pub mod sharp;
pub mod svg;

#[cfg(test)]
mod golden_tests;
#[cfg(test)]
mod hostile_tests;
#[cfg(test)]
mod samples;

/// Something that can be drawn at any size, and read as a table.
pub trait Picture {
    /// The drawing, in CSS pixels.
    fn scene(&self, width: f64, height: f64) -> scene::Scene;

    /// The same content as a table, to stand beside the drawing.
    fn table(&self) -> table::Table;
}
