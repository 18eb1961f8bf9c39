//! Roots of monotone functions: bisection, and Newton kept inside a bracket.

/// The point between `low` and `high` where `function`, which never decreases, passes `target`.
///
/// Assumes `function(low) ≤ target ≤ function(high)`; where that fails, the nearer end is
/// returned. Stops when the bracket no longer shrinks in floating point.
pub fn crossing(function: impl Fn(f64) -> f64, target: f64, low: f64, high: f64) -> f64 {
    let (mut below, mut above) = (low, high);
    // 200 halvings exhaust any double bracket.
    for _ in 0..200 {
        let middle = 0.5 * (below + above);
        if middle <= below || middle >= above {
            break;
        }
        if function(middle) < target {
            below = middle;
        } else {
            above = middle;
        }
    }
    0.5 * (below + above)
}

/// Like [`crossing`] with few calls of a smooth function: regula falsi, the weight of an end that
/// stays put halved each time (the Illinois method; Dowell & Jarratt, BIT 1971, 11, 168), and a
/// bisection where that stalls. Stops when the bracket or the misfit is down to `tolerance` of
/// the bracket's own size.
pub fn secant_crossing(
    function: impl Fn(f64) -> f64,
    target: f64,
    low: f64,
    high: f64,
    tolerance: f64,
) -> f64 {
    let (mut below, mut above) = (low, high);
    let (mut under, mut over) = (function(low) - target, function(high) - target);
    let small = tolerance * (over - under).abs();
    let mut kept = 0_i32;
    let mut at = 0.5 * (low + high);
    for round in 0..200 {
        let secant = (below * over - above * under) / (over - under);
        at = if secant > below && secant < above && round % 8 != 7 {
            secant
        } else {
            0.5 * (below + above)
        };
        let misfit = function(at) - target;
        if misfit.abs() <= small || above - below <= tolerance * (high - low) {
            break;
        }
        if misfit < 0.0 {
            (below, under) = (at, misfit);
            if kept == -1 {
                over *= 0.5;
            }
            kept = -1;
        } else {
            (above, over) = (at, misfit);
            if kept == 1 {
                under *= 0.5;
            }
            kept = 1;
        }
    }
    at
}

/// Like [`crossing`] for a smooth function that also tells its slope: Newton steps, with a
/// bisection wherever a step would leave the bracket, from `start` on.
///
/// `function` returns value and slope. Stops when a step no longer changes the sixteenth digit
/// of the bracket's first width or the last two bits of the root.
pub fn smooth_crossing(
    function: impl Fn(f64) -> (f64, f64),
    target: f64,
    (low, start, high): (f64, f64, f64),
) -> f64 {
    let (mut below, mut above) = (low, high);
    let mut at = start;
    let finest = 1e-16 * (high - low);
    for _ in 0..200 {
        let (value, slope) = function(at);
        if value < target {
            below = at;
        } else {
            above = at;
        }
        let newton = at - (value - target) / slope;
        // Before the look at the bracket: at the root, Newton stays on its end.
        if (newton - at).abs() <= finest + 4.0 * f64::EPSILON * at.abs() {
            return newton;
        }
        at = if newton > below && newton < above { newton } else { 0.5 * (below + above) };
    }
    at
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_the_cube_root_to_the_last_bits() {
        let root = crossing(|x| x * x * x, 2.0, 0.0, 4.0);
        assert!((root - 2.0_f64.cbrt()).abs() < 1e-15);
    }

    /// From above the root Newton ends on the bracket's upper end; bisecting from there would take
    /// as many calls as there are bits.
    #[test]
    fn newton_ends_where_it_has_arrived() {
        let calls = std::cell::Cell::new(0);
        let function = |x: f64| {
            calls.set(calls.get() + 1);
            (-(-x).exp_m1(), (-x).exp())
        };
        let root = smooth_crossing(function, 0.5, (0.0, 1.0, 1000.0));
        assert!((root - std::f64::consts::LN_2).abs() < 1e-15 && calls.get() < 12, "{calls:?}");
    }

    #[test]
    fn newton_and_bisection_meet() {
        // Steep on one side and flat on the other, where plain Newton jumps away.
        let value = |x: f64| x.tanh();
        let with_slope = |x: f64| (x.tanh(), 1.0 - x.tanh().powi(2));
        for target in [-0.999_99, -0.3, 0.0, 0.5, 0.999] {
            let smooth = smooth_crossing(with_slope, target, (-40.0, 10.0, 60.0));
            assert!((smooth - crossing(value, target, -40.0, 60.0)).abs() < 1e-9, "{target}");
        }
        assert!(
            (smooth_crossing(|x| (x * x * x, 3.0 * x * x), 2.0, (0.0, 2.0, 4.0)) - 2.0_f64.cbrt())
                .abs()
                < 1e-14
        );
    }

    #[test]
    fn secant_needs_few_calls() {
        let calls = std::cell::Cell::new(0);
        let function = |x: f64| {
            calls.set(calls.get() + 1);
            x.exp()
        };
        let root = secant_crossing(function, 10.0, 0.0, 4.0, 1e-13);
        assert!((root - 10.0_f64.ln()).abs() < 1e-12);
        assert!(calls.get() < 20, "{}", calls.get());
    }

    #[test]
    fn returns_the_nearer_end_without_a_crossing() {
        assert_eq!(crossing(|x| x, 5.0, 0.0, 1.0), 1.0);
        assert!(crossing(|x| x, -5.0, 0.0, 1.0).abs() < 1e-12);
    }
}
