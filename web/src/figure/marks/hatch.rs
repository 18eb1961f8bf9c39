//! Slanted strokes: over a surface, or along a line in place of it.

use super::super::geometry::{Area, Point};
use kinetics_core::numeric::sorting::sort_by;

/// Distance between the strokes over a surface, in CSS pixels.
const OVER: f64 = 7.0;
/// Distance between the strokes along a line, and half their length.
const ALONG: f64 = 4.5;
const HALF_STROKE: f64 = 3.0;

/// Rising strokes that fill the outline where it lies in the area. They hang on one
/// common grid, so that neighbouring surfaces are hatched as one.
pub fn over(outline: &[Point], area: Area) -> Vec<[Point; 2]> {
    let mut strokes = Vec::new();
    let (first, last) = outline
        .iter()
        .map(|corner| area.nearest(*corner))
        .map(|corner| corner.x + corner.y)
        .fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), sum| (low.min(sum), high.max(sum)));
    if !(first.is_finite() && last.is_finite()) {
        return strokes;
    }
    let mut sum = (first / OVER).ceil() * OVER;
    while sum <= last {
        // On the stroke x + y = sum; an edge crosses it where its ends lie on either side.
        let mut crossings: Vec<f64> = outline
            .iter()
            .zip(outline.iter().cycle().skip(1))
            .filter_map(|(from, to)| {
                let (a, b) = (from.x + from.y - sum, to.x + to.y - sum);
                ((a < 0.0) != (b < 0.0)).then(|| from.toward(*to, a / (a - b)).x)
            })
            .collect();
        sort_by(&mut crossings, |x| *x);
        for pair in crossings.chunks_exact(2) {
            let (from, to) =
                (Point::new(pair[0], sum - pair[0]), Point::new(pair[1], sum - pair[1]));
            if let Some((from, to)) = area.clip_segment(from, to) {
                strokes.push([from, to]);
            }
        }
        sum += OVER;
    }
    strokes
}

/// Short strokes across a line, where it lies in the area.
pub fn along(points: &[Point], area: Area) -> Vec<[Point; 2]> {
    let mut strokes = Vec::new();
    let mut until_next = 0.5 * ALONG;
    for pair in points.windows(2) {
        let Some((from, to)) = area.clip_segment(pair[0], pair[1]) else {
            continue;
        };
        let length = from.distance(to);
        if length == 0.0 {
            continue;
        }
        let direction = (to.y - from.y).atan2(to.x - from.x) - std::f64::consts::FRAC_PI_3;
        let (sin, cos) = direction.sin_cos();
        let mut at = until_next;
        while at <= length {
            let middle = from.toward(to, at / length);
            strokes.push([
                Point::new(middle.x - HALF_STROKE * cos, middle.y - HALF_STROKE * sin),
                Point::new(middle.x + HALF_STROKE * cos, middle.y + HALF_STROKE * sin),
            ]);
            at += ALONG;
        }
        until_next = at - length;
    }
    strokes
}

#[cfg(test)]
mod tests {
    use super::*;

    const AREA: Area = Area::new(0.0, 0.0, 100.0, 100.0);

    #[test]
    fn strokes_fill_a_square_and_stay_in_it() {
        let square = Area::new(20.0, 20.0, 60.0, 60.0);
        let outline =
            [(20.0, 20.0), (60.0, 20.0), (60.0, 60.0), (20.0, 60.0)].map(|(x, y)| Point::new(x, y));
        let strokes = over(&outline, AREA);
        // One stroke for every seventh pixel from corner to corner.
        assert_eq!(strokes.len(), 12);
        let room = square.grown(1e-9);
        assert!(strokes.iter().flatten().all(|end| room.contains(*end)));
    }

    #[test]
    fn strokes_along_a_line_are_even_across_its_corners() {
        let points = [0.0, 10.0, 13.0, 40.0].map(|x| Point::new(x, 50.0));
        let strokes = along(&points, AREA);
        let middles: Vec<f64> = strokes.iter().map(|[a, b]| 0.5 * (a.x + b.x)).collect();
        assert!(middles.len() > 6);
        assert!(middles.windows(2).all(|pair| (pair[1] - pair[0] - ALONG).abs() < 1e-9));
    }

    #[test]
    fn far_away_lines_cost_nothing() {
        let far = [Point::new(-1e4, 1e4), Point::new(1e4, 1e4)];
        assert!(along(&far, AREA).is_empty());
        assert!(over(&[far[0], far[1], Point::new(0.0, 9e3)], AREA).len() <= 40);
    }
}
