//! Order n in one reactant.
//!
//! −dc/dt = k cⁿ, so that with θ = ∫k dt
//! c^(1−n) = c0^(1−n) − (1−n)θ, and c = c0·exp(−θ) at n = 1
//! (Laidler, Chemical Kinetics, 3rd ed. 1987, §2.3; from memory).

use thiserror::Error;

/// A real order of reaction, n ≥ 0.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Order(f64);

/// Why an extent has no time.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Error)]
pub enum ExtentError {
    /// The extent is not in 0 < X ≤ 1.
    #[error("the part that is gone lies outside 0 to 100 %")]
    Outside,
    /// X = 1 is never reached at order 1 and above.
    #[error("a reaction of order 1 or above never uses up all of it")]
    NeverComplete,
    /// More than there is of the other reactant, or than the equilibrium allows.
    #[error("the reaction stops before so much of it is gone")]
    Unreachable,
    /// Order ≠ 1 and no initial concentration.
    #[error("at this order the time depends on the initial concentration")]
    NeedsInitialConcentration,
}

impl Order {
    /// First order.
    pub const FIRST: Self = Self(1.0);

    /// An order of at least zero; none for negative or non-finite numbers.
    pub fn new(order: f64) -> Option<Self> {
        (order >= 0.0 && order.is_finite()).then_some(Self(order))
    }

    /// n.
    pub fn value(self) -> f64 {
        self.0
    }

    /// Whether times depend on the initial concentration.
    pub fn needs_initial_concentration(self) -> bool {
        self.0 != 1.0
    }

    /// "first order", "order 1.5", as in running text.
    pub fn name(self) -> String {
        match self.0 {
            0.0 => "zero order".into(),
            1.0 => "first order".into(),
            2.0 => "second order".into(),
            3.0 => "third order".into(),
            n => format!("order {n}"),
        }
    }

    /// ln θ_X, the natural logarithm of ∫k dt at which the fraction `extent` is gone.
    ///
    /// θ is in the unit of k times s: concentration^(1−n), with `initial_concentration` in the
    /// same concentration unit (ignored at n = 1).
    ///
    /// # Errors
    /// See [`ExtentError`].
    pub fn ln_theta(
        self,
        extent: f64,
        initial_concentration: Option<f64>,
    ) -> Result<f64, ExtentError> {
        let n = self.0;
        if !(extent > 0.0 && extent <= 1.0) {
            return Err(ExtentError::Outside);
        }
        if extent == 1.0 && n >= 1.0 {
            return Err(ExtentError::NeverComplete);
        }
        let ln_left = libm::log1p(-extent);
        if n == 1.0 {
            return Ok(libm::log(-ln_left));
        }
        let c0 = usable(initial_concentration)?;
        // [(c0(1−X))^(1−n) − c0^(1−n)]/(n−1) = c0^(1−n)·expm1((1−n) ln(1−X))/(n−1)
        let reduced = libm::expm1((1.0 - n) * ln_left) / (n - 1.0);
        Ok((1.0 - n) * libm::log(c0) + libm::log(reduced))
    }

    /// The fraction gone after θ = ∫k dt given as its natural logarithm; units as in
    /// [`Order::ln_theta`]. 1 past exhaustion where n < 1.
    ///
    /// # Errors
    /// [`ExtentError::NeedsInitialConcentration`] where n ≠ 1 and there is none.
    pub fn extent(
        self,
        ln_theta: f64,
        initial_concentration: Option<f64>,
    ) -> Result<f64, ExtentError> {
        let n = self.0;
        if n == 1.0 {
            return Ok(-libm::expm1(-libm::exp(ln_theta)));
        }
        let c0 = usable(initial_concentration)?;
        let reduced = libm::exp(ln_theta + (n - 1.0) * libm::log(c0));
        let argument = (n - 1.0) * reduced;
        if argument <= -1.0 {
            return Ok(1.0);
        }
        Ok(-libm::expm1(-libm::log1p(argument) / (n - 1.0)))
    }
}

fn usable(initial_concentration: Option<f64>) -> Result<f64, ExtentError> {
    initial_concentration
        .filter(|c0| *c0 > 0.0 && c0.is_finite())
        .ok_or(ExtentError::NeedsInitialConcentration)
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    #[test]
    fn known_orders_have_their_textbook_times() {
        let theta =
            |n: f64, x: f64, c0: f64| Order::new(n).unwrap().ln_theta(x, Some(c0)).unwrap().exp();
        let close = |a: f64, b: f64| assert!((a / b - 1.0).abs() < 1e-12, "{a} {b}");
        close(theta(1.0, 0.5, 7.0), std::f64::consts::LN_2);
        close(theta(0.0, 0.5, 0.8), 0.4); // c0 X
        close(theta(0.0, 1.0, 0.8), 0.8); // exhaustion
        close(theta(2.0, 0.5, 0.8), 1.25); // 1/c0 · X/(1−X)
        close(theta(0.5, 1.0, 0.81), 1.8); // 2 √c0
        close(theta(1.5, 0.75, 0.25), 4.0); // 2(1/√(c0/4) − 1/√c0)
        close(theta(3.0, 0.5, 1.0), 1.5);
    }

    #[test]
    fn orders_near_one_pass_smoothly_through_it() {
        let first = Order::FIRST.ln_theta(0.3, None).unwrap();
        for n in [1.0 - 1e-9, 1.0 + 1e-9] {
            let near = Order::new(n).unwrap().ln_theta(0.3, Some(1.0)).unwrap();
            assert!((near - first).abs() < 1e-8);
        }
    }

    #[test]
    fn extent_and_theta_are_inverse() {
        for n in [0.0, 0.5, 1.0, 1.000_001, 1.5, 2.0, 3.7] {
            for x in [1e-9, 0.02, 0.5, 0.99] {
                let order = Order::new(n).unwrap();
                let theta = order.ln_theta(x, Some(0.37)).unwrap();
                let back = order.extent(theta, Some(0.37)).unwrap();
                assert!((back / x - 1.0).abs() < 1e-9, "n {n} x {x}: {back}");
            }
        }
    }

    #[test]
    fn what_has_no_time_is_refused() {
        assert_eq!(Order::FIRST.ln_theta(1.0, None), Err(ExtentError::NeverComplete));
        assert_eq!(Order::FIRST.ln_theta(0.0, None), Err(ExtentError::Outside));
        assert_eq!(Order::FIRST.ln_theta(f64::NAN, None), Err(ExtentError::Outside));
        let second = Order::new(2.0).unwrap();
        assert_eq!(second.ln_theta(0.5, None), Err(ExtentError::NeedsInitialConcentration));
        assert_eq!(Order::new(-1.0), None);
    }

    #[test]
    fn nothing_is_left_past_exhaustion() {
        let half = Order::new(0.5).unwrap();
        assert_eq!(half.extent(9.0, Some(1.0)), Ok(1.0));
    }
}
