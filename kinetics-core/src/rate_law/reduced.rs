//! Rate laws in reduced form: the fraction gone X as a function of a dimensionless θ = ∫κ dt,
//! with its slopes in θ and in the law's own parameter, for fitting.
//!
//! | law | κ | dX/dθ |
//! | --- | --- | --- |
//! | order n | k c0^(n−1) | (1−X)ⁿ |
//! | two reactants, 1 and 1, B:A = β at the start | k c0(A) | (1−X)(β−X) |
//! | reversible, first order both ways | k_f + k_r | X_e − X |
//! | autocatalytic, seeded with ζ of c0 | k c0 | (X+ζ)(1−X) |
//!
//! Integrated: Laidler, Chemical Kinetics, 3rd ed. 1987, §2.3–2.5 (from memory; the tests hold
//! every law to its differential equation).

use super::{ExtentError, Order};

/// A rate law with its parameter.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum RateLaw {
    /// Order n in one reactant.
    Order(Order),
    /// First order in each of two reactants; X is the fraction of A.
    TwoReactants {
        /// c0(B)/c0(A), above zero.
        ratio: f64,
    },
    /// First order forth and back.
    Reversible {
        /// X at equilibrium, 0 to 1.
        equilibrium: f64,
    },
    /// A product that drives its own formation.
    Autocatalytic {
        /// Product at the start as a fraction of c0, above zero.
        seed: f64,
    },
}

/// Where a reaction stands.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Reached {
    /// X, the fraction gone.
    pub extent: f64,
    /// dX/dθ.
    pub by_theta: f64,
    /// ∂X/∂ of the law's parameter: n, β, X_e or ζ.
    pub by_parameter: f64,
}

/// Below this a quotient of differences loses more digits than its series.
const SERIES_BELOW: f64 = 0.03;

/// Past this θ nothing changes any more, and squares overflow.
const FARTHEST: f64 = 1e100;

impl RateLaw {
    /// X and its slopes at θ ≥ 0.
    pub fn reached(self, theta: f64) -> Reached {
        let theta = theta.min(FARTHEST);
        match self {
            Self::Order(order) => order_n(order.value(), theta),
            Self::TwoReactants { ratio } => two_reactants(ratio, theta),
            Self::Reversible { equilibrium } => {
                let share = -libm::expm1(-theta);
                Reached {
                    extent: equilibrium * share,
                    by_theta: equilibrium * libm::exp(-theta),
                    by_parameter: share,
                }
            }
            Self::Autocatalytic { seed } => autocatalytic(seed, theta),
        }
    }

    /// X after all time.
    pub fn final_extent(self) -> f64 {
        match self {
            Self::Order(_) | Self::Autocatalytic { .. } => 1.0,
            Self::TwoReactants { ratio } => ratio.min(1.0),
            Self::Reversible { equilibrium } => equilibrium,
        }
    }

    /// m in κ = k c0^m.
    pub fn concentration_power(self) -> f64 {
        match self {
            Self::Order(order) => order.value() - 1.0,
            Self::TwoReactants { .. } | Self::Autocatalytic { .. } => 1.0,
            Self::Reversible { .. } => 0.0,
        }
    }

    /// ln θ at which the fraction `extent` is gone.
    ///
    /// # Errors
    /// See [`ExtentError`].
    pub fn ln_theta(self, extent: f64) -> Result<f64, ExtentError> {
        if let Self::Order(order) = self {
            return order.ln_theta(extent, Some(1.0));
        }
        if !(extent > 0.0 && extent <= 1.0) {
            return Err(ExtentError::Outside);
        }
        let theta = match self {
            Self::Order(_) => f64::NAN,
            Self::TwoReactants { ratio } => {
                let grown = extent / (ratio * (1.0 - extent));
                let excess = ratio - 1.0;
                if excess == 0.0 { grown } else { libm::log1p(excess * grown) / excess }
            }
            Self::Reversible { equilibrium } => -libm::log1p(-extent / equilibrium),
            Self::Autocatalytic { seed } => {
                libm::log((extent + seed) / (seed * (1.0 - extent))) / (1.0 + seed)
            }
        };
        if theta > 0.0 && theta.is_finite() {
            Ok(libm::log(theta))
        } else if extent == 1.0 {
            Err(ExtentError::NeverComplete)
        } else {
            Err(ExtentError::Unreachable)
        }
    }
}

/// 1−X = (1 + mθ)^(−1/m) with m = n − 1, e^(−θ) at m = 0, and zero past exhaustion.
fn order_n(n: f64, theta: f64) -> Reached {
    let m = n - 1.0;
    let argument = m * theta;
    if argument <= -1.0 {
        return Reached { extent: 1.0, by_theta: 0.0, by_parameter: 0.0 };
    }
    let ln_left = if m == 0.0 { -theta } else { -libm::log1p(argument) / m };
    let left = libm::exp(ln_left);
    // ∂ ln(1−X)/∂m = ln(1+mθ)/m² − θ/(m(1+mθ)) = Σ (−m)^j θ^(j+2) (j+1)/(j+2)
    let by_order = if argument.abs() < SERIES_BELOW {
        power_series(-argument, |j| (j + 1.0) / (j + 2.0)) * theta * theta
    } else {
        (-ln_left - theta / (1.0 + argument)) / m
    };
    Reached {
        extent: -libm::expm1(ln_left),
        by_theta: libm::exp(n * ln_left),
        by_parameter: -left * by_order,
    }
}

/// X = βv/(1+βv) with v = (e^(mθ) − 1)/m and m = β − 1.
fn two_reactants(ratio: f64, theta: f64) -> Reached {
    let m = ratio - 1.0;
    let argument = m * theta;
    // e^(−mθ) where B is in excess, so that nothing overflows: v = (1 − e^(−mθ))/m·e^(mθ).
    let shrink = libm::exp(-argument.max(0.0));
    let quotient = |argument: f64| {
        if argument.abs() < SERIES_BELOW {
            1.0 + 0.5 * argument * power_series(argument, |j| 2.0 / factorial(j + 2.0))
        } else {
            libm::expm1(argument) / argument
        }
    };
    // v and ∂v/∂m, both times `shrink`.
    let v = theta * if argument > 0.0 { quotient(-argument) } else { quotient(argument) };
    let by_m = if argument.abs() < SERIES_BELOW {
        let series = power_series(argument, |j| (j + 1.0) / factorial(j + 2.0));
        shrink * theta * theta * series
    } else {
        (theta * libm::exp(argument.min(0.0)) - v) / m
    };
    let sum = shrink + ratio * v;
    let extent = ratio * v / sum;
    Reached {
        extent,
        by_theta: shrink / sum * (ratio - extent),
        by_parameter: (v + ratio * by_m) * shrink / (sum * sum),
    }
}

/// X = ζ(1−e)/(e+ζ) with e = exp(−(1+ζ)θ).
fn autocatalytic(seed: f64, theta: f64) -> Reached {
    let e = libm::exp(-(1.0 + seed) * theta);
    let rest = -libm::expm1(-(1.0 + seed) * theta);
    let (above, below) = (seed * rest, e + seed);
    let extent = above / below;
    let (above_slope, below_slope) = (rest + seed * theta * e, 1.0 - theta * e);
    Reached {
        extent,
        by_theta: (extent + seed) * (e * (1.0 + seed) / below),
        by_parameter: (above_slope - extent * below_slope) / below,
    }
}

/// Σ cⱼ xʲ for small x, to the last bit where |x| ≤ [`SERIES_BELOW`].
fn power_series(x: f64, coefficient: impl Fn(f64) -> f64) -> f64 {
    (0..12).rev().fold(0.0, |sum, j| sum * x + coefficient(f64::from(j)))
}

fn factorial(n: f64) -> f64 {
    let mut product = 1.0;
    let mut factor = 2.0;
    while factor <= n {
        product *= factor;
        factor += 1.0;
    }
    product
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    type WithParameter = fn(f64) -> RateLaw;

    const ORDER: WithParameter = |n| RateLaw::Order(Order::new(n).unwrap());
    const TWO: WithParameter = |ratio| RateLaw::TwoReactants { ratio };
    const REVERSIBLE: WithParameter = |equilibrium| RateLaw::Reversible { equilibrium };
    const AUTOCATALYTIC: WithParameter = |seed| RateLaw::Autocatalytic { seed };

    /// Every law at parameters on either side of where its formula changes.
    fn all() -> Vec<(WithParameter, f64)> {
        let orders = [0.0, 0.5, 0.98, 1.0 + 1e-9, 1.0, 1.02, 1.5, 2.0, 3.3].map(|n| (ORDER, n));
        let ratios = [0.4, 0.98, 1.0, 1.0 + 1e-9, 1.02, 1.7, 30.0].map(|b| (TWO, b));
        let rest = [(REVERSIBLE, 0.7), (REVERSIBLE, 1.0), (AUTOCATALYTIC, 0.003)];
        orders.into_iter().chain(ratios).chain(rest).chain([(AUTOCATALYTIC, 0.4)]).collect()
    }

    const THETAS: [f64; 6] = [1e-6, 0.01, 0.3, 0.9, 2.5, 40.0];

    #[test]
    fn slopes_agree_with_differences() {
        for (law, parameter) in all() {
            for theta in THETAS {
                let here = law(parameter).reached(theta);
                let step = 1e-5 * theta;
                let ahead = law(parameter).reached(theta + step).extent;
                let behind = law(parameter).reached(theta - step).extent;
                let slope = (ahead - behind) / (2.0 * step);
                let scale = 1e-6 * here.by_theta.abs() + 1e-9 / theta;
                let what = format!("{:?} at {theta}", law(parameter));
                assert!((slope - here.by_theta).abs() < scale, "{what}: {slope} {here:?}");
                if parameter == 0.0 {
                    continue; // an order has no left neighbour there
                }
                let step = 1e-5 * parameter;
                let above = law(parameter + step).reached(theta).extent;
                let below = law(parameter - step).reached(theta).extent;
                let slope = (above - below) / (2.0 * step);
                let scale = 1e-6 * here.by_parameter.abs() + 1e-9;
                assert!((slope - here.by_parameter).abs() < scale, "{what}: {slope} {here:?}");
            }
        }
    }

    #[test]
    fn laws_obey_their_differential_equations() {
        for (law, parameter) in all() {
            for theta in THETAS {
                let law = law(parameter);
                let Reached { extent, by_theta, .. } = law.reached(theta);
                let left = 1.0 - extent;
                let rate = match law {
                    RateLaw::Order(_) if extent == 1.0 => 0.0,
                    RateLaw::Order(order) => left.powf(order.value()),
                    RateLaw::TwoReactants { ratio } => left * (ratio - extent),
                    RateLaw::Reversible { equilibrium } => equilibrium - extent,
                    RateLaw::Autocatalytic { seed } => (extent + seed) * left,
                };
                assert!((rate - by_theta).abs() < 1e-12, "{law:?} at {theta}: {rate} {by_theta}");
            }
        }
    }

    #[test]
    fn extent_and_theta_are_inverse() {
        for (law, parameter) in all() {
            for extent in [1e-7, 0.02, 0.3, 0.69] {
                let law = law(parameter);
                let Ok(ln_theta) = law.ln_theta(extent) else {
                    assert!(matches!(law, RateLaw::TwoReactants { ratio } if ratio < extent));
                    continue;
                };
                let back = law.reached(ln_theta.exp()).extent;
                assert!((back / extent - 1.0).abs() < 1e-9, "{law:?} {extent}: {back}");
            }
        }
    }

    #[test]
    fn reduced_orders_are_the_orders_themselves() {
        for n in [0.0, 0.5, 1.0, 1.7, 2.0] {
            let order = Order::new(n).unwrap();
            for theta in [0.01_f64, 0.6, 5.0] {
                let whole = order.extent(theta.ln(), Some(1.0)).unwrap();
                let reduced = RateLaw::Order(order).reached(theta).extent;
                assert!((whole - reduced).abs() < 1e-14, "{n} {theta}");
            }
        }
    }

    #[test]
    fn what_is_never_reached_is_refused() {
        let refused = |law: RateLaw, extent: f64| law.ln_theta(extent).unwrap_err();
        assert_eq!(refused(REVERSIBLE(0.7), 0.8), ExtentError::Unreachable);
        assert_eq!(refused(TWO(0.4), 0.5), ExtentError::Unreachable);
        assert_eq!(refused(TWO(2.0), 1.0), ExtentError::NeverComplete);
        assert_eq!(refused(AUTOCATALYTIC(0.1), 1.0), ExtentError::NeverComplete);
        assert_eq!(refused(AUTOCATALYTIC(0.1), f64::NAN), ExtentError::Outside);
    }

    #[test]
    fn nothing_overflows() {
        for (law, parameter) in all() {
            for theta in [0.0, 1e-300, 1e3, 1e10, 1e300] {
                let reached = law(parameter).reached(theta);
                let slopes = [reached.by_theta, reached.by_parameter];
                assert!((0.0..=1.0).contains(&reached.extent), "{parameter} {theta} {reached:?}");
                assert!(slopes.iter().all(|s| s.is_finite()), "{parameter} {theta} {reached:?}");
            }
        }
    }
}
