//! Text: which part it plays, where it sits, how much room it takes.

use super::super::geometry::{Point, TurnedBox};
use super::super::text_size::text_width;
use super::Role;

/// The fonts of all text in figures, as CSS names them.
pub const FONT_FAMILY: &str =
    "system-ui, -apple-system, 'Segoe UI', Roboto, 'Noto Sans', 'DejaVu Sans', sans-serif";

/// Which end of the text sits at its place.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Anchor {
    /// The text begins there.
    Start,
    /// The text is centred there.
    Middle,
    /// The text ends there.
    End,
}

/// Which height of the text sits at its place.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Baseline {
    /// The foot of the letters.
    Foot,
    /// Half the height of the digits.
    Middle,
    /// The top of the digits.
    Top,
}

/// The part that a piece of text plays.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum FontRole {
    /// Numbers along an axis.
    Tick,
    /// What an axis shows.
    Title,
    /// Names of lines, sentences in the picture.
    Note,
    /// The number in a flag.
    Flag,
}

impl FontRole {
    /// Size in CSS pixels.
    pub const fn size(self) -> f64 {
        match self {
            Self::Tick | Self::Title => 12.0,
            Self::Note => 12.5,
            Self::Flag => 11.0,
        }
    }

    /// Whether the letters are bold.
    pub const fn is_bold(self) -> bool {
        matches!(self, Self::Flag)
    }

    /// CSS weight.
    pub const fn weight(self) -> u16 {
        if self.is_bold() { 700 } else { 400 }
    }
}

/// One line of text.
#[derive(Debug, Clone, PartialEq)]
pub struct Text {
    /// The words.
    pub content: String,
    /// Where it sits.
    pub at: Point,
    /// Which end sits there.
    pub anchor: Anchor,
    /// Which height sits there.
    pub baseline: Baseline,
    /// The part it plays.
    pub font: FontRole,
    /// What it stands for.
    pub role: Role,
    /// Clockwise turn about its place, in radians.
    pub angle: f64,
}

impl Text {
    /// Upright text that begins, at its foot, at a place.
    pub fn new(content: impl Into<String>, at: Point, font: FontRole, role: Role) -> Self {
        Self {
            content: content.into(),
            at,
            anchor: Anchor::Start,
            baseline: Baseline::Foot,
            font,
            role,
            angle: 0.0,
        }
    }

    /// The same text held otherwise.
    #[must_use]
    pub fn held(mut self, anchor: Anchor, baseline: Baseline) -> Self {
        self.anchor = anchor;
        self.baseline = baseline;
        self
    }

    /// The same text turned clockwise, in radians.
    #[must_use]
    pub fn turned(mut self, angle: f64) -> Self {
        self.angle = angle;
        self
    }

    /// How far below its place the foot of the letters lies, in CSS pixels. Both
    /// painters use this rather than the browser's own middles, which differ.
    pub fn foot(&self) -> f64 {
        match self.baseline {
            Baseline::Foot => 0.0,
            Baseline::Middle => 0.36 * self.font.size(),
            Baseline::Top => 0.74 * self.font.size(),
        }
    }

    /// The room that the text takes.
    pub fn room(&self) -> TurnedBox {
        let size = self.font.size();
        let width = text_width(&self.content, self.font);
        let along = match self.anchor {
            Anchor::Start => 0.5 * width,
            Anchor::Middle => 0.0,
            Anchor::End => -0.5 * width,
        };
        let (above, below) = (0.76 * size, 0.22 * size);
        let down = self.foot() + 0.5 * (below - above);
        let (sin, cos) = self.angle.sin_cos();
        TurnedBox {
            centre: Point::new(
                self.at.x + along * cos - down * sin,
                self.at.y + along * sin + down * cos,
            ),
            half_width: 0.5 * width,
            half_height: 0.5 * (above + below),
            angle: self.angle,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_room_of_text_follows_its_anchor() {
        let text = Text::new("2.9", Point::new(100.0, 50.0), FontRole::Tick, Role::Ink);
        let room = text.clone().held(Anchor::End, Baseline::Top).room();
        assert!(room.centre.x < 100.0 && room.centre.y > 50.0);
        let room = text.held(Anchor::Middle, Baseline::Middle).room();
        assert_eq!(room.centre.x, 100.0);
    }
}
