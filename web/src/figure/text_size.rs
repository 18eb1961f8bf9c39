//! How much room a piece of text takes, without asking a browser.
//!
//! The advance widths are those of a wide sans-serif (DejaVu Sans, 1/1000 em),
//! so that text set in any usual system font is at most as wide as reckoned:
//! labels that are apart here are apart on every screen.

use super::scene::FontRole;

/// Advance widths of the characters from space to tilde.
#[rustfmt::skip]
const PLAIN: [u16; 95] = [
    318, 401, 460, 838, 636, 950, 780, 275, 390, 390, 500, 838, 318, 361, 318, 337,
    636, 636, 636, 636, 636, 636, 636, 636, 636, 636, 337, 337, 838, 838, 838, 531,
    1000, 684, 686, 698, 770, 632, 575, 775, 752, 295, 295, 656, 557, 863, 748, 787,
    603, 787, 695, 635, 611, 732, 684, 989, 685, 611, 685, 390, 337, 390, 838, 500,
    500, 613, 635, 550, 635, 615, 352, 635, 634, 278, 278, 579, 278, 974, 634, 612,
    635, 635, 411, 521, 392, 634, 592, 818, 592, 592, 525, 636, 337, 636, 838,
];

/// Bold letters are this much wider than plain ones.
const BOLD: f64 = 1.13;

fn advance(character: char) -> f64 {
    let thousandths = match character {
        ' '..='~' => PLAIN[character as usize - ' ' as usize],
        '\u{2212}' | '×' | '±' => 838,
        '·' | '\u{2009}' | '\u{202f}' => 318,
        '°' | '–' => 500,
        '⁻' => 528,
        '¹' | '²' | '³' | '⁰' | '⁴'..='⁹' | '₀'..='₉' => 401,
        // Ideographs and their kin fill the em; other letters stay below 0.8.
        '\u{2e80}'.. => 1000,
        '\u{0300}'..='\u{036f}' => 0,
        _ => 780,
    };
    f64::from(thousandths) / 1000.0
}

/// The width of one line of text, in CSS pixels.
pub fn text_width(content: &str, font: FontRole) -> f64 {
    let em: f64 = content.chars().map(advance).sum();
    let weight = if font.is_bold() { BOLD } else { 1.0 };
    em * font.size() * weight
}

/// The text, shortened with an ellipsis until it is no wider than `room`.
pub fn shortened(content: &str, font: FontRole, room: f64) -> String {
    if text_width(content, font) <= room {
        return content.to_owned();
    }
    let mut kept: String = content.to_owned();
    while kept.pop().is_some() {
        let candidate = format!("{}…", kept.trim_end());
        if text_width(&candidate, font) <= room {
            return candidate;
        }
    }
    String::new()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn width_grows_with_the_text() {
        assert_eq!(text_width("", FontRole::Tick), 0.0);
        let one = text_width("8", FontRole::Tick);
        assert!((text_width("88", FontRole::Tick) - 2.0 * one).abs() < 1e-9);
        assert!(
            text_width("8", FontRole::Flag) / FontRole::Flag.size() > one / FontRole::Tick.size()
        );
    }

    #[test]
    fn a_shortened_text_fits_its_room() {
        for room in [0.0, 5.0, 30.0, 80.0, 1000.0] {
            let text = shortened("ln (k · L^0.5/(mol^0.5 h))", FontRole::Title, room);
            assert!(text_width(&text, FontRole::Title) <= room, "{text}");
        }
        assert_eq!(shortened("time", FontRole::Title, 1000.0), "time");
    }
}
