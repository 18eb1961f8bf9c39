//! Points, areas and turned boxes on the drawing, in CSS pixels, y downwards.

/// A place on the drawing, in CSS pixels from its top left corner.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point {
    /// Rightwards.
    pub x: f64,
    /// Downwards.
    pub y: f64,
}

/// How far from the drawing a coordinate may lie. Beyond it a line is upright
/// or level to the eye anyway, and painters are spared endless dashes.
const FARTHEST: f64 = 10_000.0;

impl Point {
    /// The point (x, y).
    pub const fn new(x: f64, y: f64) -> Self {
        Self { x, y }
    }

    /// The point held within a fair distance of the drawing, or `None` when a
    /// coordinate is not a number.
    pub fn drawable(self) -> Option<Self> {
        if self.x.is_nan() || self.y.is_nan() {
            return None;
        }
        Some(Self::new(self.x.clamp(-FARTHEST, FARTHEST), self.y.clamp(-FARTHEST, FARTHEST)))
    }

    /// Distance to another point.
    pub fn distance(self, other: Self) -> f64 {
        (self.x - other.x).hypot(self.y - other.y)
    }

    /// The point a fraction of the way to another.
    pub fn toward(self, other: Self, fraction: f64) -> Self {
        Self::new(self.x + (other.x - self.x) * fraction, self.y + (other.y - self.y) * fraction)
    }
}

/// An upright rectangle.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Area {
    /// x of the left edge.
    pub left: f64,
    /// y of the top edge.
    pub top: f64,
    /// x of the right edge.
    pub right: f64,
    /// y of the bottom edge.
    pub bottom: f64,
}

impl Area {
    /// The rectangle between two corners.
    pub const fn new(left: f64, top: f64, right: f64, bottom: f64) -> Self {
        Self { left, top, right, bottom }
    }

    /// Width.
    pub fn width(self) -> f64 {
        self.right - self.left
    }

    /// Height.
    pub fn height(self) -> f64 {
        self.bottom - self.top
    }

    /// The middle.
    pub fn centre(self) -> Point {
        Point::new(0.5 * (self.left + self.right), 0.5 * (self.top + self.bottom))
    }

    /// Whether a point lies in the area or on its edge.
    pub fn contains(self, point: Point) -> bool {
        (self.left..=self.right).contains(&point.x) && (self.top..=self.bottom).contains(&point.y)
    }

    /// The point of the area nearest to a given one.
    pub fn nearest(self, point: Point) -> Point {
        Point::new(point.x.max(self.left).min(self.right), point.y.max(self.top).min(self.bottom))
    }

    /// The area with every edge moved outwards (inwards when negative).
    pub fn grown(self, by: f64) -> Self {
        Self::new(self.left - by, self.top - by, self.right + by, self.bottom + by)
    }

    /// The part of the straight line from `a` to `b` inside the area, by the
    /// parametric clipping of Liang and Barsky (1984).
    pub fn clip_segment(self, a: Point, b: Point) -> Option<(Point, Point)> {
        let (dx, dy) = (b.x - a.x, b.y - a.y);
        let (mut enter, mut leave) = (0.0_f64, 1.0_f64);
        for (step, room) in [
            (-dx, a.x - self.left),
            (dx, self.right - a.x),
            (-dy, a.y - self.top),
            (dy, self.bottom - a.y),
        ] {
            if step == 0.0 {
                if room < 0.0 {
                    return None;
                }
            } else if step < 0.0 {
                enter = enter.max(room / step);
            } else {
                leave = leave.min(room / step);
            }
        }
        (enter <= leave).then(|| (a.toward(b, enter), a.toward(b, leave)))
    }
}

/// A rectangle turned about its centre: the room that a piece of text takes.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct TurnedBox {
    /// The middle.
    pub centre: Point,
    /// Half the length along the text.
    pub half_width: f64,
    /// Half the height across the text.
    pub half_height: f64,
    /// Clockwise turn, in radians.
    pub angle: f64,
}

impl TurnedBox {
    /// An upright area as a box.
    pub fn upright(area: Area) -> Self {
        Self {
            centre: area.centre(),
            half_width: 0.5 * area.width(),
            half_height: 0.5 * area.height(),
            angle: 0.0,
        }
    }

    /// A box around a round mark.
    pub fn around(centre: Point, radius: f64) -> Self {
        Self { centre, half_width: radius, half_height: radius, angle: 0.0 }
    }

    /// The box with every edge moved outwards.
    pub fn grown(self, by: f64) -> Self {
        Self { half_width: self.half_width + by, half_height: self.half_height + by, ..self }
    }

    /// The four corners.
    pub fn corners(self) -> [Point; 4] {
        let (sin, cos) = self.angle.sin_cos();
        let corner = |u: f64, v: f64| {
            Point::new(
                self.centre.x + u * self.half_width * cos - v * self.half_height * sin,
                self.centre.y + u * self.half_width * sin + v * self.half_height * cos,
            )
        };
        [corner(-1.0, -1.0), corner(1.0, -1.0), corner(1.0, 1.0), corner(-1.0, 1.0)]
    }

    /// Whether the whole box lies in an area.
    pub fn within(self, area: Area) -> bool {
        self.corners().iter().all(|corner| area.contains(*corner))
    }

    /// Whether two boxes overlap: they do unless some edge of one parts them.
    pub fn overlaps(self, other: Self) -> bool {
        let (ours, theirs) = (self.corners(), other.corners());
        [self.angle, other.angle].into_iter().all(|angle| {
            let (sin, cos) = angle.sin_cos();
            [(cos, sin), (-sin, cos)].into_iter().all(|(ux, uy)| {
                let shadow = |corners: &[Point; 4]| {
                    corners.iter().fold(
                        (f64::INFINITY, f64::NEG_INFINITY),
                        |(low, high), corner| {
                            let along = corner.x * ux + corner.y * uy;
                            (low.min(along), high.max(along))
                        },
                    )
                };
                let ((a_low, a_high), (b_low, b_high)) = (shadow(&ours), shadow(&theirs));
                a_low < b_high && b_low < a_high
            })
        })
    }

    /// Whether a straight line from `a` to `b` passes through the box.
    pub fn crossed_by(self, a: Point, b: Point) -> bool {
        let (sin, cos) = self.angle.sin_cos();
        let inside = |point: Point| {
            let (dx, dy) = (point.x - self.centre.x, point.y - self.centre.y);
            Point::new(dx * cos + dy * sin, dy * cos - dx * sin)
        };
        Area::new(-self.half_width, -self.half_height, self.half_width, self.half_height)
            .clip_segment(inside(a), inside(b))
            .is_some()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_segment_is_cut_at_the_edges() {
        let area = Area::new(0.0, 0.0, 10.0, 10.0);
        let cut = area.clip_segment(Point::new(-5.0, 5.0), Point::new(15.0, 5.0));
        assert_eq!(cut, Some((Point::new(0.0, 5.0), Point::new(10.0, 5.0))));
        let missed = area.clip_segment(Point::new(-5.0, 8.0), Point::new(2.0, 15.0));
        assert_eq!(missed, None);
    }

    #[test]
    fn turned_boxes_overlap_only_where_they_meet() {
        let flat = TurnedBox::upright(Area::new(0.0, 0.0, 40.0, 10.0));
        // Their upright bounds overlap, the boxes do not.
        let slanted = TurnedBox {
            centre: Point::new(53.0, 26.0),
            half_width: 20.0,
            half_height: 4.0,
            angle: std::f64::consts::FRAC_PI_4,
        };
        assert!(!flat.overlaps(slanted));
        assert!(flat.overlaps(TurnedBox { centre: Point::new(50.0, 22.0), ..slanted }));
    }

    #[test]
    fn a_line_through_the_middle_crosses_and_a_parallel_one_does_not() {
        let slanted = TurnedBox {
            centre: Point::new(0.0, 0.0),
            half_width: 20.0,
            half_height: 4.0,
            angle: std::f64::consts::FRAC_PI_4,
        };
        assert!(slanted.crossed_by(Point::new(-30.0, 30.0), Point::new(30.0, -30.0)));
        assert!(!slanted.crossed_by(Point::new(-20.0, -10.0), Point::new(10.0, 20.0)));
    }

    #[test]
    fn no_drawable_point_is_far_or_without_a_number() {
        assert_eq!(Point::new(f64::NAN, 1.0).drawable(), None);
        assert_eq!(
            Point::new(f64::INFINITY, -1e300).drawable(),
            Some(Point::new(FARTHEST, -FARTHEST))
        );
    }
}
