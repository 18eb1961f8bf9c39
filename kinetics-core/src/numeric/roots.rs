//! Roots of monotone functions by bisection: slow, exact to the last bits, never surprised.

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

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_the_cube_root_to_the_last_bits() {
        let root = crossing(|x| x * x * x, 2.0, 0.0, 4.0);
        assert!((root - 2.0_f64.cbrt()).abs() < 1e-15);
    }

    #[test]
    fn returns_the_nearer_end_without_a_crossing() {
        assert_eq!(crossing(|x| x, 5.0, 0.0, 1.0), 1.0);
        assert!(crossing(|x| x, -5.0, 0.0, 1.0).abs() < 1e-12);
    }
}
