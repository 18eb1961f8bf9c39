//! Roles to colours: light, dark, and the reader's own system colours.

use super::scene::{Role, Shape};
use super::temperature_colour::{DARK, LIGHT_MARKS, LIGHT_WORDS, TemperatureRange};

/// The ground on which all is drawn.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Paper {
    Light,
    Dark,
    /// Forced colours: the system decides, shapes and patterns carry the meaning.
    System,
}

/// A colour that CSS, a canvas and SVG all understand.
#[derive(Debug, Clone, PartialEq)]
pub struct Colour {
    /// `#rrggbb` or the name of a system colour.
    pub css: String,
    /// 0 (unseen) to 1.
    pub opacity: f64,
}

impl Colour {
    fn solid(css: impl Into<String>) -> Self {
        Self { css: css.into(), opacity: 1.0 }
    }

    fn veil(css: impl Into<String>, opacity: f64) -> Self {
        Self { css: css.into(), opacity }
    }
}

/// Colours for every role, and the temperatures between which colours run.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Palette {
    paper: Paper,
    temperatures: TemperatureRange,
}

impl Palette {
    /// Ink on light paper; also for print.
    pub fn light() -> Self {
        Self::on(Paper::Light)
    }

    /// Light ink on dark paper.
    pub fn dark() -> Self {
        Self::on(Paper::Dark)
    }

    /// The reader's system colours.
    pub fn forced() -> Self {
        Self::on(Paper::System)
    }

    fn on(paper: Paper) -> Self {
        Self { paper, temperatures: TemperatureRange::default() }
    }

    /// The same palette for a study between other temperatures.
    #[must_use]
    pub fn with_temperatures(self, temperatures: TemperatureRange) -> Self {
        Self { temperatures, ..self }
    }

    /// The colour of lines and surfaces: at least 3 to 1 against the paper for
    /// ink, quiet, faint, accent and temperatures.
    pub fn mark(&self, role: Role) -> Colour {
        if let Role::Temperature(kelvin) = role {
            let ramp = match self.paper {
                Paper::Light => &LIGHT_MARKS,
                Paper::Dark => &DARK,
                Paper::System => return Colour::solid("CanvasText"),
            };
            return Colour::solid(hexadecimal(ramp.colour(self.temperatures.fraction(kelvin))));
        }
        let (light, dark, system) = match role {
            Role::Paper => ("#fcfbf8", "#14181a", "Canvas"),
            Role::Ink | Role::Temperature(_) => ("#1d2226", "#ece9e1", "CanvasText"),
            Role::Quiet => ("#5a6065", "#a2a6a8", "CanvasText"),
            Role::Faint => ("#83878a", "#73797d", "CanvasText"),
            Role::Accent => ("#0d6b5e", "#5cc6b2", "LinkText"),
            Role::Rule => ("#e2dfd7", "#2b3135", "GrayText"),
            Role::Span => ("#f1eee5", "#1d2327", "GrayText"),
            Role::Band => ("#1d2226", "#ece9e1", "CanvasText"),
        };
        let css = match self.paper {
            Paper::Light => light,
            Paper::Dark => dark,
            Paper::System => system,
        };
        match (role, self.paper) {
            (Role::Band, Paper::Light) => Colour::veil(css, 0.10),
            (Role::Band, _) => Colour::veil(css, 0.13),
            (Role::Rule, Paper::System) => Colour::veil(css, 0.5),
            (Role::Span, Paper::System) => Colour::veil(css, 0.18),
            _ => Colour::solid(css),
        }
    }

    /// The colour of words: at least 4.5 to 1 against the paper.
    pub fn words(&self, role: Role) -> Colour {
        match (role, self.paper) {
            (Role::Temperature(kelvin), Paper::Light) => {
                let fraction = self.temperatures.fraction(kelvin);
                Colour::solid(hexadecimal(LIGHT_WORDS.colour(fraction)))
            }
            _ => self.mark(role),
        }
    }

    /// A shape with that of a temperature resolved.
    pub fn shape(&self, shape: Shape) -> Shape {
        match shape {
            Shape::OfTemperature(kelvin) => self.temperatures.shape(kelvin),
            shape => shape,
        }
    }
}

fn hexadecimal([red, green, blue]: [u8; 3]) -> String {
    format!("#{red:02x}{green:02x}{blue:02x}")
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::super::temperature_colour::tests::contrast;
    use super::*;

    fn bytes(colour: &Colour) -> [u8; 3] {
        let byte = |from: usize| u8::from_str_radix(&colour.css[from..from + 2], 16).unwrap();
        [byte(1), byte(3), byte(5)]
    }

    #[test]
    fn marks_and_words_stand_out_on_paper_and_on_the_measured_span() {
        for palette in [Palette::light(), Palette::dark()] {
            for ground in [Role::Paper, Role::Span] {
                let ground = bytes(&palette.mark(ground));
                for degrees in -10..=110 {
                    let role = Role::Temperature(273.15 + f64::from(degrees));
                    let mark = contrast(bytes(&palette.mark(role)), ground);
                    assert!(mark >= 3.0, "{degrees} °C: {mark}");
                    let words = contrast(bytes(&palette.words(role)), ground);
                    assert!(words >= 4.5, "{degrees} °C: {words}");
                }
                let faint = contrast(bytes(&palette.mark(Role::Faint)), ground);
                assert!(faint >= 3.0, "faint: {faint}");
                for role in [Role::Ink, Role::Quiet, Role::Accent] {
                    let words = contrast(bytes(&palette.words(role)), ground);
                    assert!(words >= 4.5, "{role:?}: {words}");
                }
            }
        }
    }

    #[test]
    fn forced_colours_use_system_names_only() {
        let palette = Palette::forced();
        for role in [
            Role::Ink,
            Role::Quiet,
            Role::Faint,
            Role::Rule,
            Role::Accent,
            Role::Band,
            Role::Span,
            Role::Paper,
            Role::Temperature(300.0),
        ] {
            assert!(palette.mark(role).css.bytes().all(|byte| byte.is_ascii_alphabetic()));
        }
    }
}
