//! The time map as a drawing.

use super::super::axis::{self, Side};
use super::super::geometry::{Area, Point};
use super::super::marks::curve::{self, CurvePlace};
use super::super::marks::flags::{self, FlagMark};
use super::super::marks::labels::{Room, TOWARDS_START};
use super::super::scale::{Scale, Spacing};
use super::super::scene::{Anchor, Baseline, FontRole, Layer, Role, Scene, Stroke, Text};
use super::super::surround::{self, Foot, temperature_title};
use super::super::ticks::{Tick, temperature_ticks};
use super::super::time_ticks::time_ticks;
use super::{FlagInterval, TimeLine, TimeMap};

/// Room above the plot: one row of titles.
const ABOVE: f64 = 26.0;
/// Room between two times along the axis.
const TIMES_APART: f64 = 22.0;

/// Where everything goes.
pub(super) struct Layout {
    pub(super) plot: Area,
    pub(super) across: Scale,
    pub(super) up: Scale,
    up_ticks: Vec<Tick>,
    foot: Foot,
}

impl Layout {
    fn place(&self, temperature: f64, time_seconds: f64) -> Option<Point> {
        Some(Point::new(self.across.position(temperature)?, self.up.position(time_seconds)?))
    }

    /// The flags that have a place, with their places in the list of the map.
    pub(super) fn place_flags(&self, map: &TimeMap) -> (Vec<usize>, Vec<FlagMark>) {
        let (indices, numbered): (Vec<usize>, Vec<(usize, Point)>) = map
            .flags
            .iter()
            .enumerate()
            .filter_map(|(index, flag)| {
                let at = self.place(flag.temperature, flag.time_seconds)?;
                Some((index, (flag.number, at)))
            })
            .unzip();
        (indices, flags::place(&numbered, self.plot))
    }

    fn curve(&self, line: &TimeLine) -> Vec<Option<CurvePlace>> {
        line.samples
            .iter()
            .map(|sample| {
                Some(CurvePlace {
                    at: self.place(sample.temperature, sample.time_seconds)?,
                    interval: sample.interval.and_then(|(low, high)| {
                        Some((self.up.position(low)?, self.up.position(high)?))
                    }),
                    grounds: sample.grounds,
                })
            })
            .collect()
    }
}

impl TimeMap {
    pub(super) fn layout(&self, scene: &Scene) -> Layout {
        let view = self.view();
        let title = temperature_title(self.temperature_unit);
        let foot = Foot::fitting(self.shown_grounds(), title, scene.width);
        let bottom = (scene.height - axis::LEVEL_ROOM - foot.height()).round();
        let up = Scale::new(Spacing::Log, view.times, (bottom, ABOVE));
        let up_ticks = time_ticks(&up, TIMES_APART);
        let left = axis::upright_room(&up_ticks) + 4.0;
        let right = scene.width - surround::RIGHT;
        Layout {
            plot: Area::new(left, ABOVE, right, bottom),
            across: Scale::new(Spacing::ReciprocalTemperature, view.temperatures, (left, right)),
            up,
            up_ticks,
            foot,
        }
    }

    /// The part of the plot that the measurements cover.
    fn measured_area(&self, layout: &Layout) -> Option<Area> {
        let region = self.measured?;
        let (a, b) = (
            layout.across.position(region.temperatures.0)?,
            layout.across.position(region.temperatures.1)?,
        );
        let plot = layout.plot;
        let (top, bottom) = region
            .times
            .and_then(|(from, to)| {
                let (a, b) = (layout.up.position(from)?, layout.up.position(to)?);
                Some((a.min(b).max(plot.top), a.max(b).min(plot.bottom)))
            })
            .unwrap_or((plot.top, plot.bottom));
        let area = Area::new(a.min(b).max(plot.left), top, a.max(b).min(plot.right), bottom);
        (area.left < area.right && area.top < area.bottom).then_some(area)
    }

    /// Bars through the flags, as long as the interval of the answer.
    fn draw_intervals(&self, layer: &mut Layer, layout: &Layout) {
        for flag in &self.flags {
            let ends = match flag.interval {
                Some(FlagInterval::Times(low, high)) => {
                    [layout.place(flag.temperature, low), layout.place(flag.temperature, high)]
                }
                Some(FlagInterval::Temperatures(low, high)) => {
                    [layout.place(low, flag.time_seconds), layout.place(high, flag.time_seconds)]
                }
                None => continue,
            };
            // A bar that its flag hides would show as two specks beside it.
            if let [Some(from), Some(to)] = ends
                && from.distance(to) > 2.0 * flags::RADIUS + 8.0
            {
                layer.segments([[from, to]], Stroke::solid(Role::Ink, 2.6));
            }
        }
    }

    pub(super) fn draw(&self, scene: &Scene) -> Layer {
        let layout = self.layout(scene);
        let plot = layout.plot;
        let mut layer = Layer::default();

        let measured = self.measured_area(&layout);
        if let Some(area) = measured {
            layer.rectangle(area, Role::Span);
        }
        axis::rules(&mut layer, plot, &layout.up, &layout.up_ticks);
        let (_, placed) = layout.place_flags(self);
        let curves: Vec<_> = self.lines.iter().map(|line| layout.curve(line)).collect();
        let mut inside = Layer::default();
        for places in &curves {
            curve::fan(&mut inside, places, plot);
        }
        flags::drop_lines(&mut inside, &placed, plot.bottom);
        for places in &curves {
            curve::line(&mut inside, places, 1.7, plot);
        }
        self.draw_intervals(&mut inside, &layout);
        layer.clipped(plot, inside);

        let mut room = Room::new(plot.grown(-2.0));
        room.take(flags::rooms(&placed));
        for path in curves.iter().flat_map(|places| curve::paths(places)) {
            room.take_line(path);
        }
        for flag in &placed {
            let foot = Point::new(flag.stands.x, plot.bottom);
            room.take_line(vec![flag.stands, foot]);
        }
        if let Some(area) = measured
            && let Some(text) = room.place(measured_names(area))
        {
            layer.text(text);
        }
        for (line, places) in self.lines.iter().zip(&curves) {
            let longest = curve::paths(places).into_iter().max_by_key(Vec::len);
            if let Some(path) = longest
                && let Some(name) = room.place_along(&line.label, Role::Ink, &path, TOWARDS_START)
            {
                layer.text(name);
            }
        }
        flags::flags(&mut layer, &placed);

        axis::upright(&mut layer, plot, &layout.up, &layout.up_ticks);
        let degrees = temperature_ticks(&layout.across, self.temperature_unit);
        let side = (plot, Side::Bottom, scene.area());
        axis::level(&mut layer, side, &layout.across, &degrees, Role::Temperature);
        layer.text(Text::new(
            "time",
            Point::new(4.0, 4.0 + 0.74 * FontRole::Title.size()),
            FontRole::Title,
            Role::Quiet,
        ));
        layout.foot.draw(&mut layer, plot, scene.height);
        if self.lines.is_empty() && self.flags.is_empty() {
            let sentence =
                if self.measured.is_some() { "nothing asked yet" } else { "nothing measured yet" };
            layer.text(
                Text::new(sentence, plot.centre(), FontRole::Note, Role::Quiet)
                    .held(Anchor::Middle, Baseline::Middle),
            );
        }
        layer
    }
}

/// "measured", in the middle of the top or of the foot of its box, else in a corner.
fn measured_names(area: Area) -> impl Iterator<Item = Text> {
    let middle = area.centre().x;
    [
        (middle, area.top + 7.0, Anchor::Middle, Baseline::Top),
        (middle, area.bottom - 7.0, Anchor::Middle, Baseline::Foot),
        (area.right - 6.0, area.top + 7.0, Anchor::End, Baseline::Top),
        (area.left + 6.0, area.bottom - 7.0, Anchor::Start, Baseline::Foot),
    ]
    .into_iter()
    .map(|(x, y, anchor, baseline)| {
        Text::new("measured", Point::new(x, y), FontRole::Title, Role::Quiet).held(anchor, baseline)
    })
}
