//! A line whose style tells its grounds, and the fan of its interval.

use super::super::geometry::{Area, Point};
use super::super::grounds::Grounds;
use super::super::scene::{Layer, Role, Stroke};
use super::hatch;

/// One place on a curve.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CurvePlace {
    /// Where the line passes.
    pub at: Point,
    /// The y of the two ends of the interval there, where there is one.
    pub interval: Option<(f64, f64)>,
    /// What it stands on.
    pub grounds: Grounds,
}

/// The fan: filled, and hatched beyond the data. A missing place breaks it.
pub fn fan(layer: &mut Layer, places: &[Option<CurvePlace>], area: Area) {
    let with_interval: Vec<Option<CurvePlace>> =
        places.iter().map(|place| place.filter(|place| place.interval.is_some())).collect();
    for (run, grounds) in runs(&with_interval, |grounds| grounds == Grounds::Beyond) {
        let edge = |end: fn((f64, f64)) -> f64| {
            run.iter().filter_map(move |place| Some(Point::new(place.at.x, end(place.interval?))))
        };
        let low = edge(|interval| interval.0);
        let mut outline: Vec<Point> = edge(|interval| interval.1).collect();
        outline.reverse();
        let outline: Vec<Point> = low.chain(outline).collect();
        if grounds == Grounds::Beyond {
            let outline: Vec<Point> = outline.iter().filter_map(|p| p.drawable()).collect();
            let stroke = Stroke::solid(Role::Faint, 0.6);
            layer.segments(hatch::over(&outline, area), stroke);
        } else {
            layer.polygon(&outline, Role::Band);
        }
    }
}

/// The line: solid, dashed, dotted, or short strokes across it beyond the data.
pub fn line(layer: &mut Layer, places: &[Option<CurvePlace>], width: f64, area: Area) {
    for (run, grounds) in runs(places, |grounds| grounds) {
        let points: Vec<Point> = run.iter().filter_map(|place| place.at.drawable()).collect();
        match grounds.dash() {
            Some(dash) => layer.line(&points, Stroke { role: Role::Ink, width, dash }),
            None => {
                layer.segments(hatch::along(&points, area), Stroke::solid(Role::Ink, 0.75 * width))
            }
        }
    }
}

/// Stretches of a curve in which every step is of the same kind; a step stands on the
/// worse of its two ends.
fn runs<K: PartialEq>(
    places: &[Option<CurvePlace>],
    kind: impl Fn(Grounds) -> K,
) -> Vec<(Vec<CurvePlace>, Grounds)> {
    let mut runs: Vec<(Vec<CurvePlace>, Grounds)> = Vec::new();
    let mut open = false;
    for pair in places.windows(2) {
        let (Some(from), Some(to)) = (pair[0], pair[1]) else {
            open = false;
            continue;
        };
        let grounds = from.grounds.max(to.grounds);
        match runs.last_mut() {
            Some((run, current)) if open && kind(*current) == kind(grounds) => run.push(to),
            _ => runs.push((vec![from, to], grounds)),
        }
        open = true;
    }
    runs
}

/// The paths of a curve, for labels to follow and to keep clear of.
pub fn paths(places: &[Option<CurvePlace>]) -> Vec<Vec<Point>> {
    places
        .split(Option::is_none)
        .map(|run| run.iter().flatten().map(|place| place.at).collect())
        .filter(|path: &Vec<Point>| path.len() >= 2)
        .collect()
}

#[cfg(test)]
mod tests {
    use super::super::super::scene::{Dash, Item};
    use super::*;

    fn place(x: f64, grounds: Grounds) -> Option<CurvePlace> {
        Some(CurvePlace { at: Point::new(x, 50.0), interval: Some((45.0, 55.0)), grounds })
    }

    const AREA: Area = Area::new(0.0, 0.0, 100.0, 100.0);

    #[test]
    fn the_style_follows_the_grounds() {
        let places = [
            place(0.0, Grounds::Far),
            place(10.0, Grounds::Near),
            place(20.0, Grounds::Inside),
            place(30.0, Grounds::Inside),
            place(40.0, Grounds::Near),
            None,
            place(60.0, Grounds::Inside),
            place(70.0, Grounds::Inside),
        ];
        let mut layer = Layer::default();
        line(&mut layer, &places, 1.6, AREA);
        let drawn: Vec<(Dash, f64, f64)> = layer
            .items()
            .iter()
            .filter_map(|item| match item {
                Item::Line { points, stroke } => {
                    Some((stroke.dash, points.first()?.x, points.last()?.x))
                }
                _ => None,
            })
            .collect();
        assert_eq!(
            drawn,
            [
                (Dash::Dotted, 0.0, 10.0),
                (Dash::Dashed, 10.0, 20.0),
                (Dash::Solid, 20.0, 30.0),
                (Dash::Dashed, 30.0, 40.0),
                (Dash::Solid, 60.0, 70.0),
            ]
        );
    }

    #[test]
    fn beyond_the_data_all_is_hatched() {
        let places = [place(0.0, Grounds::Beyond), place(50.0, Grounds::Beyond)];
        let mut layer = Layer::default();
        fan(&mut layer, &places, AREA);
        line(&mut layer, &places, 1.6, AREA);
        assert_eq!(layer.items().len(), 2);
        assert!(layer.items().iter().all(|item| matches!(item, Item::Segments { .. })));
    }

    #[test]
    fn the_fan_is_one_surface_inside_and_outside() {
        let places =
            [place(0.0, Grounds::Far), place(10.0, Grounds::Near), place(20.0, Grounds::Inside)];
        let mut layer = Layer::default();
        fan(&mut layer, &places, AREA);
        assert_eq!(layer.items().len(), 1);
    }
}
