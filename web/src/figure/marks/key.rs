//! The key at the foot of a picture: which style of line stands on what grounds.

use super::super::geometry::{Area, Point};
use super::super::grounds::Grounds;
use super::super::scene::{Anchor, Baseline, FontRole, Layer, Role, Text};
use super::super::text_size::text_width;
use super::curve::{CurvePlace, line};

const SAMPLE: f64 = 18.0;
const TO_WORD: f64 = 5.0;
const TO_NEXT: f64 = 12.0;
const LAST_WORDS: &str = " the data";

/// The words beside the samples; the last one completes them all.
fn words(shown: &[Grounds]) -> Vec<(Grounds, String)> {
    let last = shown.last();
    shown
        .iter()
        .map(|grounds| {
            let word = if Some(grounds) == last {
                match grounds {
                    Grounds::Far => grounds.phrase().to_owned(),
                    _ => format!("{}{LAST_WORDS}", grounds.word()),
                }
            } else {
                grounds.word().to_owned()
            };
            (*grounds, word)
        })
        .collect()
}

/// The width of a key of these grounds.
pub fn width(shown: &[Grounds]) -> f64 {
    let each = words(shown)
        .iter()
        .map(|(_, word)| SAMPLE + TO_WORD + text_width(word, FontRole::Title) + TO_NEXT)
        .sum::<f64>();
    (each - TO_NEXT).max(0.0)
}

/// A key that begins at a place, its words standing on that y.
pub fn key(layer: &mut Layer, shown: &[Grounds], at: Point) {
    let mut x = at.x;
    for (grounds, word) in words(shown) {
        let middle = at.y - 0.36 * FontRole::Title.size();
        let place =
            |x: f64| Some(CurvePlace { at: Point::new(x, middle), interval: None, grounds });
        let area = Area::new(x, middle - 5.0, x + SAMPLE, middle + 5.0);
        line(layer, &[place(x), place(x + SAMPLE)], 1.6, area);
        x += SAMPLE + TO_WORD;
        let width = text_width(&word, FontRole::Title);
        layer.text(
            Text::new(word, Point::new(x, at.y), FontRole::Title, Role::Quiet)
                .held(Anchor::Start, Baseline::Foot),
        );
        x += width + TO_NEXT;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_last_word_speaks_of_the_data() {
        let all: Vec<String> = words(&Grounds::ALL).into_iter().map(|(_, word)| word).collect();
        assert_eq!(all, ["inside", "near", "far", "beyond the data"]);
        let three: Vec<String> =
            words(&Grounds::ALL[..3]).into_iter().map(|(_, word)| word).collect();
        assert_eq!(three, ["inside", "near", "far from the data"]);
        assert_eq!(width(&[]), 0.0);
    }
}
