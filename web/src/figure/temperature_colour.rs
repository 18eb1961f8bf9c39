//! From cold to warm: the one thing that colour shows.
//!
//! Colours are mixed in OKLCH (Ottosson 2020), where equal steps look equal. The hue runs
//! one way, from blue over a muted green and gold to red; lightness turns at the gold, so
//! that readers who do not tell red from green still see blue, gold and dark apart.

use super::scene::Shape;

/// The temperatures, in kelvin, between which colours run from coldest to warmest.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct TemperatureRange {
    coldest: f64,
    warmest: f64,
}

/// From the freezing to the boiling point of water.
const ORDINARY: TemperatureRange = TemperatureRange { coldest: 273.15, warmest: 373.15 };

impl Default for TemperatureRange {
    fn default() -> Self {
        ORDINARY
    }
}

impl TemperatureRange {
    /// The range for a study between two temperatures in kelvin. Studies around those of
    /// daily life share one range, so that a colour keeps its meaning from study to study;
    /// others get their own, of at least 60 K and in whole tens.
    pub fn covering(coldest: f64, warmest: f64) -> Self {
        let (low, high) = (coldest.min(warmest), coldest.max(warmest));
        let ordinary = low >= ORDINARY.coldest - 30.0 && high <= ORDINARY.warmest + 30.0;
        if ordinary || !(low.is_finite() && high.is_finite()) {
            return ORDINARY;
        }
        let widen = (30.0 - 0.5 * (high - low)).max(0.0);
        Self {
            coldest: ((low - widen) / 10.0).floor() * 10.0,
            warmest: ((high + widen) / 10.0).ceil() * 10.0,
        }
    }

    /// 0 at the cold end, 1 at the warm one.
    pub fn fraction(self, kelvin: f64) -> f64 {
        let fraction = (kelvin - self.coldest) / (self.warmest - self.coldest);
        if fraction.is_nan() {
            return 0.5;
        }
        fraction.clamp(0.0, 1.0)
    }

    /// The outline that repeats the colour of a temperature in kelvin.
    pub fn shape(self, kelvin: f64) -> Shape {
        match self.fraction(kelvin) {
            fraction if fraction < 0.2 => Shape::TriangleDown,
            fraction if fraction < 0.4 => Shape::Square,
            fraction if fraction < 0.6 => Shape::Circle,
            fraction if fraction < 0.8 => Shape::Diamond,
            _ => Shape::TriangleUp,
        }
    }
}

/// Lightness (0 to 1), chroma and hue (degrees) in OKLCH.
type Stop = (f64, f64, f64);

/// Evenly spaced stops from cold to warm.
pub(super) struct Ramp([Stop; 5]);

/// Marks on light paper.
pub(super) const LIGHT_MARKS: Ramp = Ramp([
    (0.48, 0.150, 258.0),
    (0.57, 0.100, 222.0),
    (0.630, 0.130, 84.0),
    (0.585, 0.165, 47.0),
    (0.475, 0.180, 25.0),
]);
/// Words on light paper: darker, to be read.
pub(super) const LIGHT_WORDS: Ramp = Ramp([
    (0.46, 0.130, 258.0),
    (0.50, 0.085, 220.0),
    (0.53, 0.105, 92.0),
    (0.53, 0.135, 55.0),
    (0.49, 0.175, 27.0),
]);
/// Marks and words on dark paper.
pub(super) const DARK: Ramp = Ramp([
    (0.66, 0.130, 258.0),
    (0.74, 0.085, 220.0),
    (0.83, 0.120, 92.0),
    (0.75, 0.145, 58.0),
    (0.65, 0.180, 27.0),
]);

impl Ramp {
    /// The colour a fraction of the way, as sRGB bytes.
    pub(super) fn colour(&self, fraction: f64) -> [u8; 3] {
        let at = fraction.clamp(0.0, 1.0) * (self.0.len() - 1) as f64;
        let below = (at.floor() as usize).min(self.0.len() - 2);
        let part = at - below as f64;
        let (from, to) = (rectangular(self.0[below]), rectangular(self.0[below + 1]));
        // Mixed along the straight line between neighbours, so that blue turns to
        // gold through a quiet grey-green and not through a loud one.
        let mix = |a: f64, b: f64| a + (b - a) * part;
        srgb(mix(from.0, to.0), mix(from.1, to.1), mix(from.2, to.2))
    }
}

fn rectangular((lightness, chroma, hue): Stop) -> (f64, f64, f64) {
    let (sin, cos) = hue.to_radians().sin_cos();
    (lightness, chroma * cos, chroma * sin)
}

/// OKLab to sRGB bytes, by the matrices of Ottosson (2020).
fn srgb(lightness: f64, a: f64, b: f64) -> [u8; 3] {
    let l = (lightness + 0.396_337_777_4 * a + 0.215_803_757_3 * b).powi(3);
    let m = (lightness - 0.105_561_345_8 * a - 0.063_854_172_8 * b).powi(3);
    let s = (lightness - 0.089_484_177_5 * a - 1.291_485_548 * b).powi(3);
    [
        4.076_741_662_1 * l - 3.307_711_591_3 * m + 0.230_969_929_2 * s,
        -1.268_438_004_6 * l + 2.609_757_401_1 * m - 0.341_319_396_5 * s,
        -0.004_196_086_3 * l - 0.703_418_614_7 * m + 1.707_614_701 * s,
    ]
    .map(|linear| {
        let linear = linear.clamp(0.0, 1.0);
        let encoded = if linear <= 0.003_130_8 {
            12.92 * linear
        } else {
            1.055 * linear.powf(1.0 / 2.4) - 0.055
        };
        (255.0 * encoded).round() as u8
    })
}

#[cfg(test)]
pub(super) mod tests {
    use super::*;

    fn linear(byte: u8) -> f64 {
        let encoded = f64::from(byte) / 255.0;
        if encoded <= 0.040_45 { encoded / 12.92 } else { ((encoded + 0.055) / 1.055).powf(2.4) }
    }

    /// Contrast of two colours (WCAG 2.2, relative luminance).
    pub fn contrast(one: [u8; 3], other: [u8; 3]) -> f64 {
        let luminance = |colour: [u8; 3]| {
            let [r, g, b] = colour.map(linear);
            0.2126 * r + 0.7152 * g + 0.0722 * b
        };
        let (a, b) = (luminance(one), luminance(other));
        (a.max(b) + 0.05) / (a.min(b) + 0.05)
    }

    fn oklab(linear: [f64; 3]) -> [f64; 3] {
        let [r, g, b] = linear;
        let l = (0.412_221_470_8 * r + 0.536_332_536_3 * g + 0.051_445_992_9 * b).cbrt();
        let m = (0.211_903_498_2 * r + 0.680_699_545_1 * g + 0.107_396_956_6 * b).cbrt();
        let s = (0.088_302_461_9 * r + 0.281_718_837_6 * g + 0.629_978_700_5 * b).cbrt();
        [
            0.210_454_255_3 * l + 0.793_617_785 * m - 0.004_072_046_8 * s,
            1.977_998_495_1 * l - 2.428_592_205 * m + 0.450_593_709_9 * s,
            0.025_904_037_1 * l + 0.782_771_766_2 * m - 0.808_675_766 * s,
        ]
    }

    fn distance(one: [f64; 3], other: [f64; 3]) -> f64 {
        one.iter().zip(other).map(|(a, b)| (a - b).powi(2)).sum::<f64>().sqrt()
    }

    /// What a reader without red (protan) or green (deutan) cones sees: Viénot,
    /// Brettel and Mollon (1999), in linear sRGB.
    fn seen_without(cone: char, colour: [u8; 3]) -> [f64; 3] {
        let [r, g, b] = colour.map(linear);
        let (red_green, blue) = if cone == 'p' {
            (0.112_38 * r + 0.887_62 * g, 0.004_01 * r - 0.004_01 * g + b)
        } else {
            (0.292_75 * r + 0.707_25 * g, -0.022_34 * r + 0.022_34 * g + b)
        };
        [red_green, red_green, blue.max(0.0)]
    }

    #[test]
    fn hue_runs_one_way() {
        for ramp in [&LIGHT_MARKS, &LIGHT_WORDS, &DARK] {
            let hues: Vec<f64> = (0..=20)
                .map(|step| {
                    let [_, a, b] = oklab(ramp.colour(f64::from(step) / 20.0).map(linear));
                    b.atan2(a).to_degrees().rem_euclid(360.0)
                })
                .collect();
            assert!(hues.windows(2).all(|pair| pair[1] < pair[0]), "{hues:?}");
        }
    }

    #[test]
    fn quarters_differ_for_every_reader() {
        for ramp in [&LIGHT_MARKS, &DARK] {
            let colours: Vec<[u8; 3]> =
                (0..=4).map(|step| ramp.colour(f64::from(step) / 4.0)).collect();
            for (index, one) in colours.iter().enumerate() {
                for other in &colours[index + 1..] {
                    let full = distance(oklab(one.map(linear)), oklab(other.map(linear)));
                    assert!(full > 0.08, "{one:?} {other:?}: {full}");
                    for cone in ['p', 'd'] {
                        let left = distance(
                            oklab(seen_without(cone, *one)),
                            oklab(seen_without(cone, *other)),
                        );
                        assert!(left > 0.03, "{cone}: {one:?} {other:?}: {left}");
                    }
                }
            }
        }
    }

    #[test]
    fn colours_keep_their_meaning_around_daily_life() {
        let glaze = TemperatureRange::covering(298.15, 351.15);
        let shelf = TemperatureRange::covering(278.15, 313.15);
        assert_eq!(glaze, shelf);
        let kiln = TemperatureRange::covering(873.15, 1073.15);
        assert!((kiln.fraction(873.15) - 3.15 / 210.0).abs() < 1e-12);
        assert_eq!(TemperatureRange::covering(f64::NAN, 300.0), ORDINARY);
        assert_eq!(ORDINARY.fraction(f64::NAN), 0.5);
    }

    #[test]
    fn shapes_change_with_the_temperature() {
        let shapes = [275.0, 300.0, 323.0, 343.0, 370.0].map(|kelvin| ORDINARY.shape(kelvin));
        for (index, shape) in shapes.iter().enumerate() {
            assert!(!shapes[index + 1..].contains(shape));
        }
    }
}
