//! Names set along lines, or at places, where nothing else is.

use super::super::geometry::{Area, Point, TurnedBox};
use super::super::scene::{Anchor, Baseline, FontRole, Role, Text};
use super::super::text_size::text_width;

/// Free room between a label and its own line, and around every other thing.
const OFF_LINE: f64 = 4.0;
const AROUND: f64 = 2.0;

/// How far along the part of a line on view its name tries to sit, best first.
pub type Preference = [f64; 15];

/// For lines that run side by side: all names towards the same end.
pub const TOWARDS_START: Preference =
    [0.25, 0.2, 0.3, 0.35, 0.15, 0.4, 0.45, 0.5, 0.55, 0.6, 0.66, 0.72, 0.8, 0.1, 0.88];

/// For lines that part from another only at their ends.
pub const TOWARDS_ENDS: Preference =
    [0.1, 0.9, 0.15, 0.85, 0.2, 0.8, 0.25, 0.75, 0.3, 0.7, 0.35, 0.65, 0.4, 0.6, 0.5];

/// The free room of a picture.
#[derive(Debug, Clone)]
pub struct Room {
    area: Area,
    boxes: Vec<TurnedBox>,
    lines: Vec<Vec<Point>>,
}

impl Room {
    /// An empty area.
    pub fn new(area: Area) -> Self {
        Self { area, boxes: Vec::new(), lines: Vec::new() }
    }

    /// Takes room for a mark.
    pub fn take(&mut self, taken: impl IntoIterator<Item = TurnedBox>) {
        self.boxes.extend(taken);
    }

    /// Takes room for a line.
    pub fn take_line(&mut self, path: Vec<Point>) {
        self.lines.push(path);
    }

    /// Whether a text lies in the area, clear of all that has room. From lines other than
    /// its own it keeps further away, so that it cannot be read as theirs.
    fn is_free(&self, text: &Text, own: &[Point]) -> bool {
        let room = text.room();
        let around = room.grown(AROUND);
        let from_others = room.grown(OFF_LINE + 1.0);
        around.within(self.area)
            && !self.boxes.iter().any(|taken| taken.overlaps(around))
            && !self.lines.iter().any(|path| {
                let room = if path == own { room } else { from_others };
                path.windows(2).any(|step| room.crossed_by(step[0], step[1]))
            })
    }

    /// The first of some texts that finds room, which it then holds.
    pub fn place(&mut self, candidates: impl IntoIterator<Item = Text>) -> Option<Text> {
        self.place_beside(candidates, &[])
    }

    fn place_beside(
        &mut self,
        candidates: impl IntoIterator<Item = Text>,
        own: &[Point],
    ) -> Option<Text> {
        let text = candidates.into_iter().find(|text| self.is_free(text, own))?;
        self.boxes.push(text.room());
        Some(text)
    }

    /// A name set along a line, parallel to it; `None` where no part of the line has
    /// room beside it. The line must have room of its own already.
    pub fn place_along(
        &mut self,
        name: &str,
        role: Role,
        path: &[Point],
        preference: Preference,
    ) -> Option<Text> {
        let visible = self.longest_visible(path);
        let width = text_width(name, FontRole::Note);
        let length: f64 = visible.windows(2).map(|step| step[0].distance(step[1])).sum();
        let half = 0.5 * width;
        let mut candidates = Vec::new();
        for fraction in preference {
            let middle = fraction * length;
            let ends = (at_length(&visible, middle - half), at_length(&visible, middle + half));
            let (Some(from), Some(to), Some(centre)) =
                (ends.0, ends.1, at_length(&visible, middle))
            else {
                continue;
            };
            // Left to right, so that no name stands on its head.
            let (from, to) = if from.x <= to.x { (from, to) } else { (to, from) };
            let angle = (to.y - from.y).atan2(to.x - from.x);
            let (sin, cos) = angle.sin_cos();
            for side in [-1.0, 1.0] {
                let off = side * (0.5 * FontRole::Note.size() + OFF_LINE);
                let at = Point::new(centre.x - off * sin, centre.y + off * cos);
                candidates.push(
                    Text::new(name, at, FontRole::Note, role)
                        .held(Anchor::Middle, Baseline::Middle)
                        .turned(angle),
                );
            }
        }
        self.place_beside(candidates, path)
    }

    /// The longest unbroken part of a path that lies in the area.
    fn longest_visible(&self, path: &[Point]) -> Vec<Point> {
        let mut parts: Vec<Vec<Point>> = Vec::new();
        for step in path.windows(2) {
            let Some((from, to)) = self.area.clip_segment(step[0], step[1]) else {
                continue;
            };
            match parts.last_mut() {
                Some(part) if part.last().is_some_and(|end| end.distance(from) < 1e-6) => {
                    part.push(to);
                }
                _ => parts.push(vec![from, to]),
            }
        }
        let length = |part: &Vec<Point>| part.windows(2).map(|s| s[0].distance(s[1])).sum::<f64>();
        parts.into_iter().max_by(|a, b| length(a).total_cmp(&length(b))).unwrap_or_default()
    }
}

/// The point so far along a path; `None` before its start and past its end.
fn at_length(path: &[Point], length: f64) -> Option<Point> {
    let mut left = length;
    if left < 0.0 {
        return None;
    }
    for step in path.windows(2) {
        let step_length = step[0].distance(step[1]);
        if left <= step_length && step_length > 0.0 {
            return Some(step[0].toward(step[1], left / step_length));
        }
        left -= step_length;
    }
    None
}

#[cfg(test)]
mod tests {
    use super::*;

    const AREA: Area = Area::new(0.0, 0.0, 400.0, 300.0);

    fn slope(offset: f64) -> Vec<Point> {
        vec![Point::new(-100.0, offset - 100.0), Point::new(500.0, offset + 350.0)]
    }

    #[test]
    fn a_name_runs_along_its_line_without_touching_it() {
        let mut room = Room::new(AREA);
        room.take_line(slope(0.0));
        let text = room.place_along("5 % gone", Role::Ink, &slope(0.0), TOWARDS_START);
        let text = text.as_ref().map(|text| (text.angle, text.room()));
        let Some((angle, taken)) = text else { unreachable!("there is room") };
        assert!((angle - 0.75_f64.atan()).abs() < 1e-9);
        assert!(taken.within(AREA));
        assert!(!taken.crossed_by(slope(0.0)[0], slope(0.0)[1]));
    }

    #[test]
    fn names_of_close_lines_keep_apart() {
        let mut room = Room::new(AREA);
        let lines: Vec<Vec<Point>> = [0.0, 30.0, 60.0].map(slope).to_vec();
        for line in &lines {
            room.take_line(line.clone());
        }
        let names: Vec<Text> = lines
            .iter()
            .filter_map(|line| room.place_along("5 % gone", Role::Ink, line, TOWARDS_ENDS))
            .collect();
        assert_eq!(names.len(), 3);
        for (index, name) in names.iter().enumerate() {
            for other in &names[index + 1..] {
                assert!(!name.room().overlaps(other.room()));
            }
        }
    }

    #[test]
    fn a_name_cannot_be_read_as_that_of_a_close_line() {
        let mut room = Room::new(AREA);
        let (own, other) = (slope(3.0), slope(0.0));
        room.take_line(own.clone());
        room.take_line(other);
        let text = room.place_along("curved", Role::Quiet, &own, TOWARDS_ENDS);
        // Its own line is the lower one.
        assert!(text.is_some_and(|text| text.at.y > 0.75 * text.at.x + 3.0 - 25.0));
    }

    #[test]
    fn where_there_is_no_room_there_is_no_name() {
        let mut room = Room::new(AREA);
        room.take([TurnedBox::upright(AREA)]);
        assert_eq!(room.place_along("5 % gone", Role::Ink, &slope(0.0), TOWARDS_START), None);
        assert_eq!(Room::new(AREA).place_along("x", Role::Ink, &[], TOWARDS_START), None);
    }
}
