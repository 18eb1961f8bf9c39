//! Numbered round flags with drop lines: the questions.

use super::super::geometry::{Area, Point, TurnedBox};
use super::super::scene::{Anchor, Baseline, FontRole, Layer, Marker, Role, Shape, Stroke, Text};

/// Radius of a flag, in CSS pixels.
pub const RADIUS: f64 = 9.0;
/// Room between the middles of two flags.
const APART: f64 = 2.0 * RADIUS + 2.0;

/// One flag.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FlagMark {
    /// The number in it.
    pub number: usize,
    /// The place that it speaks of, held within the area.
    pub at: Point,
    /// Where it stands: at that place, or above or below it where another flag stands there.
    pub stands: Point,
}

/// Stands each flag at its place or, where that is taken, as near above or below
/// it as the area allows.
pub fn place(numbered: &[(usize, Point)], area: Area) -> Vec<FlagMark> {
    let mut placed: Vec<FlagMark> = Vec::new();
    let inner = area.grown(-RADIUS - 1.0);
    for (number, at) in numbered {
        let home = inner.nearest(*at);
        let free = |point: &Point| {
            let clear = placed.iter().all(|flag| flag.stands.distance(*point) >= APART);
            clear && (inner.top..=inner.bottom).contains(&point.y)
        };
        let stands = (0..64)
            .flat_map(|step| {
                // Fine steps: two flags a little apart need only a small shift.
                let shift = f64::from(step) * 0.25 * APART;
                [home.y - shift, home.y + shift]
            })
            .map(|y| Point::new(home.x, y))
            .find(free)
            .unwrap_or(home);
        placed.push(FlagMark { number: *number, at: area.nearest(*at), stands });
    }
    placed
}

/// Drop lines from the flags to an axis at a given y.
pub fn drop_lines(layer: &mut Layer, flags: &[FlagMark], axis: f64) {
    let ends = flags.iter().map(|flag| [flag.stands, Point::new(flag.stands.x, axis)]);
    layer.segments(ends, Stroke::solid(Role::Accent, 0.8));
}

/// The flags, with a stem to their place where they stand elsewhere.
pub fn flags(layer: &mut Layer, flags: &[FlagMark]) {
    let moved = |flag: &&FlagMark| flag.stands.distance(flag.at) > 0.5 * RADIUS;
    for flag in flags.iter().filter(moved) {
        layer.line(&[flag.at, flag.stands], Stroke::solid(Role::Ink, 1.0));
        layer.marker(disc(flag.at, 2.2));
    }
    for flag in flags {
        layer.marker(disc(flag.stands, RADIUS));
        layer.text(
            Text::new(flag.number.to_string(), flag.stands, FontRole::Flag, Role::Paper)
                .held(Anchor::Middle, Baseline::Middle),
        );
    }
}

fn disc(centre: Point, radius: f64) -> Marker {
    Marker {
        centre,
        radius,
        shape: Shape::Circle,
        fill: Role::Ink,
        outline: Stroke::solid(Role::Paper, 1.5),
    }
}

/// The flag under the pointer, by its place in the list: the nearest within reach of a finger.
pub fn hit(flags: &[FlagMark], pointer: Point) -> Option<usize> {
    flags
        .iter()
        .enumerate()
        .map(|(index, flag)| (index, flag.stands.distance(pointer)))
        .filter(|(_, distance)| *distance <= RADIUS + 5.0)
        .min_by(|a, b| a.1.total_cmp(&b.1))
        .map(|(index, _)| index)
}

/// The room that flags take from labels.
pub fn rooms(flags: &[FlagMark]) -> impl Iterator<Item = TurnedBox> {
    flags.iter().map(|flag| TurnedBox::around(flag.stands, RADIUS + 1.0))
}

#[cfg(test)]
mod tests {
    use super::*;

    const AREA: Area = Area::new(0.0, 0.0, 300.0, 200.0);

    #[test]
    fn flags_at_one_place_stand_apart() {
        let same = Point::new(100.0, 100.0);
        let placed = place(&[(1, same), (2, same), (3, same), (4, Point::new(112.0, 101.0))], AREA);
        for (index, flag) in placed.iter().enumerate() {
            assert!(AREA.contains(flag.stands));
            for other in &placed[index + 1..] {
                assert!(flag.stands.distance(other.stands) >= APART);
            }
        }
        assert_eq!(placed[0].stands, same);
        assert_eq!(placed[1].at, same);
    }

    #[test]
    fn a_flag_outside_is_held_at_the_edge() {
        let placed = place(&[(1, Point::new(150.0, -500.0))], AREA);
        assert_eq!(placed[0].stands, Point::new(150.0, RADIUS + 1.0));
    }

    #[test]
    fn the_pointer_finds_the_nearest_flag() {
        let placed = place(&[(1, Point::new(100.0, 100.0)), (2, Point::new(125.0, 100.0))], AREA);
        assert_eq!(hit(&placed, Point::new(111.0, 100.0)), Some(0));
        assert_eq!(hit(&placed, Point::new(114.0, 100.0)), Some(1));
        assert_eq!(hit(&placed, Point::new(200.0, 100.0)), None);
    }
}
