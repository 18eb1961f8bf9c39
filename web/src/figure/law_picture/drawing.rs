//! The law picture as a drawing.

use super::super::axis::{self, Side};
use super::super::geometry::{Area, Point};
use super::super::marks::curve::{self, CurvePlace};
use super::super::marks::flags::{self, FlagMark};
use super::super::marks::labels::{Room, TOWARDS_ENDS};
use super::super::marks::points::{self, PointMark};
use super::super::marks::residuals::{self, Stick};
use super::super::scale::{Scale, Spacing};
use super::super::scene::{Anchor, Baseline, FontRole, Layer, Role, Scene, Stroke, Text};
use super::super::surround::{self, Foot};
use super::super::ticks::{Tick, level_ticks, number, temperature_ticks, upright_ticks};
use super::{LawPicture, RivalCurve};

/// Room above the plot: a row of titles, a row of numbers.
const ABOVE: f64 = 18.0 + axis::LEVEL_ROOM;
/// The strip of misfits and the row of its title.
const STRIP: f64 = 44.0;
const STRIP_TITLE: f64 = 24.0;
/// A lower picture has no room for the strip.
const LEAST_HEIGHT_WITH_STRIP: f64 = 260.0;
/// Half the width of a number at the very corner.
const LEAST_LEFT: f64 = 24.0;

/// Where everything goes.
struct Layout {
    plot: Area,
    strip: Option<Area>,
    across: Scale,
    up: Scale,
    up_ticks: Vec<Tick>,
    misfit: Option<(Scale, Vec<Tick>)>,
    foot: Foot,
}

impl LawPicture {
    pub(super) fn draw(&self, scene: &Scene) -> Layer {
        let layout = self.layout(scene);
        let (plot, bounds) = (layout.plot, scene.area().grown(-1.0));
        let radius = points::radius(scene.width);
        let mut layer = Layer::default();

        self.draw_span(&mut layer, &layout);
        axis::rules(&mut layer, plot, &layout.up, &layout.up_ticks);
        let places = self.curve_places(&layout);
        let placed = self.place_flags(&layout);
        let mut inside = Layer::default();
        curve::fan(&mut inside, &places, plot);
        let mut room = Room::new(plot.grown(-2.0));
        room.take(flags::rooms(&placed));
        let rivals: Vec<Vec<Point>> = self.rivals.iter().map(|rival| layout.path(rival)).collect();
        for path in rivals.iter().cloned().chain(curve::paths(&places)) {
            room.take_line(path);
        }
        for (rival, path) in self.rivals.iter().zip(&rivals) {
            inside.line(path, Stroke::solid(Role::Faint, 1.0));
            if let Some(name) = room.place_along(&rival.name, Role::Quiet, path, TOWARDS_ENDS) {
                inside.text(name);
            }
        }
        flags::drop_lines(&mut inside, &placed, plot.top);
        curve::line(&mut inside, &places, 1.7, plot);
        layer.clipped(plot, inside);
        self.draw_points(&mut layer, &layout, radius);
        flags::flags(&mut layer, &placed);

        let lowest = self.draw_strip(&mut layer, &layout, radius);
        axis::upright(&mut layer, plot, &layout.up, &layout.up_ticks);
        let degrees = temperature_ticks(&layout.across, self.temperature_unit);
        axis::level(
            &mut layer,
            (plot, Side::Top, bounds),
            &layout.across,
            &degrees,
            Role::Temperature,
        );
        let (coldest, warmest) = layout.across.extremes();
        let reciprocal = Scale::new(
            Spacing::Linear,
            (1000.0 / warmest, 1000.0 / coldest),
            (plot.left, plot.right),
        );
        let ticks = level_ticks(&reciprocal);
        axis::level(&mut layer, (lowest, Side::Bottom, bounds), &reciprocal, &ticks, |_| {
            Role::Quiet
        });
        surround::head(&mut layer, self.rate_label(), self.temperature_unit, scene, plot);
        layout.foot.draw(&mut layer, plot, scene.height);
        if self.points.is_empty() && self.curve.is_empty() {
            layer.text(
                Text::new("nothing measured yet", plot.centre(), FontRole::Note, Role::Quiet)
                    .held(Anchor::Middle, Baseline::Middle),
            );
        }
        layer
    }

    fn layout(&self, scene: &Scene) -> Layout {
        let foot = Foot::fitting(self.shown_grounds(), "1000 K / T", scene.width);
        let (coldest, warmest) = self.temperatures();
        let below = axis::LEVEL_ROOM + foot.height();
        let has_misfits = self.points.iter().any(|point| point.misfit_percent.is_some());
        let with_strip = has_misfits && scene.height >= LEAST_HEIGHT_WITH_STRIP;
        let under_plot = if with_strip { STRIP_TITLE + STRIP } else { 0.0 };
        let bottom = (scene.height - below - under_plot).round();
        let up = Scale::new(Spacing::Linear, self.rates((coldest, warmest)), (bottom, ABOVE));
        let nothing = self.points.is_empty() && self.curve.is_empty();
        let up_ticks = if nothing { Vec::new() } else { upright_ticks(&up) };
        let strip_rows = (bottom + STRIP_TITLE, bottom + STRIP_TITLE + STRIP);
        let misfit = with_strip.then(|| {
            let bound =
                residuals::bound(self.points.iter().filter_map(|point| point.misfit_percent));
            let inset = 6.0;
            let range = (strip_rows.1 - inset, strip_rows.0 + inset);
            let decimals = if bound < 1.0 { (-bound.log10()).ceil() as usize } else { 0 };
            let ticks = [bound, 0.0, -bound].map(|value| Tick {
                value,
                label: match number(value, if value == 0.0 { 0 } else { decimals }) {
                    label if value > 0.0 => format!("+{label}"),
                    label => label,
                },
            });
            (Scale::new(Spacing::Linear, (-bound, bound), range), ticks.to_vec())
        });
        let all_ticks = up_ticks.iter().chain(misfit.iter().flat_map(|(_, ticks)| ticks));
        let left = (axis::upright_room(all_ticks) + 4.0).max(LEAST_LEFT);
        let right = scene.width - surround::RIGHT;
        Layout {
            plot: Area::new(left, ABOVE, right, bottom),
            strip: with_strip.then(|| Area::new(left, strip_rows.0, right, strip_rows.1)),
            across: Scale::new(Spacing::ReciprocalTemperature, (warmest, coldest), (left, right)),
            up,
            up_ticks,
            misfit,
            foot,
        }
    }

    fn curve_places(&self, layout: &Layout) -> Vec<Option<CurvePlace>> {
        self.curve
            .iter()
            .map(|sample| {
                let y = |ln_rate: f64| layout.up.position(ln_rate);
                Some(CurvePlace {
                    at: Point::new(layout.across.position(sample.temperature)?, y(sample.ln_rate)?),
                    interval: sample.interval.and_then(|(low, high)| Some((y(low)?, y(high)?))),
                    grounds: sample.grounds,
                })
            })
            .collect()
    }

    fn place_flags(&self, layout: &Layout) -> Vec<FlagMark> {
        let numbered: Vec<(usize, Point)> = self
            .flags
            .iter()
            .filter_map(|flag| {
                let x = layout.across.position(flag.temperature)?;
                let y = self
                    .ln_rate_at(flag.temperature)
                    .and_then(|(ln_rate, _)| layout.up.position(ln_rate))
                    .unwrap_or(layout.plot.top);
                Some((flag.number, Point::new(x, y)))
            })
            .collect();
        flags::place(&numbered, layout.plot)
    }

    fn draw_span(&self, layer: &mut Layer, layout: &Layout) {
        let Some((from, to)) = self.span else {
            return;
        };
        let ends = (layout.across.position(from), layout.across.position(to));
        if let (Some(a), Some(b)) = ends {
            for area in [Some(layout.plot), layout.strip].into_iter().flatten() {
                let left = a.min(b).max(area.left);
                let right = a.max(b).min(area.right);
                layer.rectangle(Area::new(left, area.top, right, area.bottom), Role::Span);
            }
        }
    }

    fn draw_points(&self, layer: &mut Layer, layout: &Layout, radius: f64) {
        let marks: Vec<PointMark> = self
            .points
            .iter()
            .filter_map(|point| {
                let y = |ln_rate: f64| layout.up.position(ln_rate);
                let x = layout.across.position(point.temperature)?;
                Some(PointMark {
                    at: Point::new(x, y(point.ln_rate)?),
                    interval: point.standard_deviation.and_then(|deviation| {
                        Some((y(point.ln_rate - deviation)?, y(point.ln_rate + deviation)?))
                    }),
                    kelvin: point.temperature,
                    excluded: point.excluded,
                })
            })
            .collect();
        points::points(layer, &marks, radius);
    }

    /// The strip of misfits; returns the area on whose foot the lower axis stands.
    fn draw_strip(&self, layer: &mut Layer, layout: &Layout, radius: f64) -> Area {
        let (Some(strip), Some((scale, ticks))) = (layout.strip, &layout.misfit) else {
            return layout.plot;
        };
        let zero = scale.position(0.0).unwrap_or(strip.bottom);
        let rule = [Point::new(strip.left, zero), Point::new(strip.right, zero)];
        layer.segments([rule], Stroke::solid(Role::Quiet, 1.0));
        let sticks: Vec<Stick> = self
            .points
            .iter()
            .filter_map(|point| {
                let x = layout.across.position(point.temperature)?;
                Some(Stick {
                    head: Point::new(x, scale.position(point.misfit_percent?)?),
                    zero,
                    kelvin: point.temperature,
                    excluded: point.excluded,
                })
            })
            .collect();
        residuals::sticks(layer, &sticks, 0.62 * radius);
        axis::upright(layer, strip, scale, ticks);
        let at = Point::new(strip.left, strip.top - 7.0);
        layer.text(Text::new("misfit, % of k", at, FontRole::Title, Role::Quiet));
        strip
    }
}

impl Layout {
    fn path(&self, rival: &RivalCurve) -> Vec<Point> {
        rival
            .samples
            .iter()
            .filter_map(|(temperature, ln_rate)| {
                Some(Point::new(self.across.position(*temperature)?, self.up.position(*ln_rate)?))
            })
            .collect()
    }
}
