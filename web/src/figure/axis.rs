//! Axes: a hairline, short ticks, numbers.

use super::geometry::{Area, Point};
use super::scale::Scale;
use super::scene::{Anchor, Baseline, FontRole, Layer, Role, Stroke, Text};
use super::text_size::text_width;
use super::ticks::Tick;

/// Length of a tick, and room between it and its number, in CSS pixels.
const TICK: f64 = 4.0;
const TO_NUMBER: f64 = 4.0;

/// Room that a level axis takes outside its area: tick, gap, number.
pub const LEVEL_ROOM: f64 = TICK + TO_NUMBER + FontRole::Tick.size();

/// The side of an area on which a level axis runs.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Side {
    /// Above it.
    Top,
    /// Below it.
    Bottom,
}

/// A level axis. Numbers that would be cut off by `bounds` are left out with their ticks;
/// `role` gives each number its part, by its value.
pub fn level(
    layer: &mut Layer,
    (area, side, bounds): (Area, Side, Area),
    scale: &Scale,
    ticks: &[Tick],
    role: impl Fn(f64) -> Role,
) {
    let (y, outwards, baseline) = match side {
        Side::Top => (area.top, -1.0, Baseline::Foot),
        Side::Bottom => (area.bottom, 1.0, Baseline::Top),
    };
    for tick in ticks {
        let Some(x) = scale.position(tick.value) else {
            continue;
        };
        let at = Point::new(x, y + outwards * (TICK + TO_NUMBER));
        let part = role(tick.value);
        let text =
            Text::new(tick.label.as_str(), at, FontRole::Tick, part).held(Anchor::Middle, baseline);
        if text.room().within(bounds) {
            let ends = [Point::new(x, y), Point::new(x, y + outwards * TICK)];
            layer.segments([ends], Stroke::solid(Role::Quiet, 1.0));
            layer.text(text);
        }
    }
    let line = [Point::new(area.left, y), Point::new(area.right, y)];
    layer.segments([line], Stroke::solid(Role::Quiet, 1.0));
}

/// Hairlines across an area at the ticks of an upright axis.
pub fn rules(layer: &mut Layer, area: Area, scale: &Scale, ticks: &[Tick]) {
    let ends = ticks
        .iter()
        .filter_map(|tick| scale.position(tick.value))
        .map(|y| [Point::new(area.left, y), Point::new(area.right, y)]);
    layer.segments(ends, Stroke::solid(Role::Rule, 1.0));
}

/// An upright axis on the left of an area.
pub fn upright(layer: &mut Layer, area: Area, scale: &Scale, ticks: &[Tick]) {
    for tick in ticks {
        if let Some(y) = scale.position(tick.value) {
            let at = Point::new(area.left - TICK - TO_NUMBER, y);
            layer.text(
                Text::new(tick.label.as_str(), at, FontRole::Tick, Role::Quiet)
                    .held(Anchor::End, Baseline::Middle),
            );
            let ends = [Point::new(area.left - TICK, y), Point::new(area.left, y)];
            layer.segments([ends], Stroke::solid(Role::Quiet, 1.0));
        }
    }
    let line = [Point::new(area.left, area.top), Point::new(area.left, area.bottom)];
    layer.segments([line], Stroke::solid(Role::Quiet, 1.0));
}

/// Room that an upright axis takes on the left of its area.
pub fn upright_room<'a>(ticks: impl IntoIterator<Item = &'a Tick>) -> f64 {
    let widest =
        ticks.into_iter().map(|tick| text_width(&tick.label, FontRole::Tick)).fold(0.0, f64::max);
    TICK + TO_NUMBER + widest.ceil()
}

#[cfg(test)]
mod tests {
    use super::super::scale::Spacing;
    use super::super::scene::Item;
    use super::super::ticks::level_ticks;
    use super::*;

    #[test]
    fn a_number_that_would_be_cut_off_is_left_out() {
        let area = Area::new(0.0, 20.0, 200.0, 100.0);
        let scale = Scale::new(Spacing::Linear, (0.0, 10.0), (0.0, 200.0));
        let mut layer = Layer::default();
        let bounds = Area::new(0.0, 0.0, 200.0, 130.0);
        let ticks = level_ticks(&scale);
        level(&mut layer, (area, Side::Bottom, bounds), &scale, &ticks, |_| Role::Quiet);
        let written = layer.items().iter().filter(|item| matches!(item, Item::Text(_))).count();
        // The numbers at both ends have only half their width.
        assert_eq!(written, ticks.len() - 2);
    }
}
