//! Probability distributions: thin names over `statrs`, with the few
//! arguments that these methods need, and answers at the edges instead of errors.

use statrs::distribution::{
    ChiSquared, Continuous, ContinuousCDF, FisherSnedecor, Normal, StudentsT,
};

/// Probability that a standard normal variate is at most `x`.
pub fn normal_cdf(x: f64) -> f64 {
    Normal::standard().cdf(x)
}

/// The value that a standard normal variate stays below with `probability`.
pub fn normal_quantile(probability: f64) -> f64 {
    Normal::standard().inverse_cdf(probability)
}

/// Density of a standard normal variate.
pub fn normal_density(x: f64) -> f64 {
    Normal::standard().pdf(x)
}

/// Density of Student's t with `degrees_of_freedom` > 0.
pub fn student_t_density(x: f64, degrees_of_freedom: f64) -> f64 {
    StudentsT::new(0.0, 1.0, degrees_of_freedom).map_or(f64::NAN, |t| t.pdf(x))
}

/// Probability that Student's t with `degrees_of_freedom` > 0 is at most `x`.
pub fn student_t_cdf(x: f64, degrees_of_freedom: f64) -> f64 {
    StudentsT::new(0.0, 1.0, degrees_of_freedom).map_or(f64::NAN, |t| t.cdf(x))
}

/// The value that Student's t with `degrees_of_freedom` > 0 stays below with `probability`.
pub fn student_t_quantile(probability: f64, degrees_of_freedom: f64) -> f64 {
    StudentsT::new(0.0, 1.0, degrees_of_freedom).map_or(f64::NAN, |t| t.inverse_cdf(probability))
}

/// Probability that chi-squared with `degrees_of_freedom` > 0 is at most `x`.
pub fn chi_squared_cdf(x: f64, degrees_of_freedom: f64) -> f64 {
    if x.is_infinite() {
        return 1.0;
    }
    ChiSquared::new(degrees_of_freedom).map_or(f64::NAN, |c| c.cdf(x.max(0.0)))
}

/// Density of chi-squared with `degrees_of_freedom` > 0.
pub fn chi_squared_density(x: f64, degrees_of_freedom: f64) -> f64 {
    ChiSquared::new(degrees_of_freedom).map_or(f64::NAN, |c| c.pdf(x.max(0.0)))
}

/// Probability that chi-squared with `degrees_of_freedom` > 0 exceeds `x`.
pub fn chi_squared_tail(x: f64, degrees_of_freedom: f64) -> f64 {
    ChiSquared::new(degrees_of_freedom).map_or(f64::NAN, |c| c.sf(x.max(0.0)))
}

/// Probability that Fisher's F with (`numerator`, `denominator`) degrees of freedom exceeds `x`.
pub fn f_tail(x: f64, numerator: f64, denominator: f64) -> f64 {
    FisherSnedecor::new(numerator, denominator).map_or(f64::NAN, |f| f.sf(x.max(0.0)))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn close(found: f64, expected: f64, relative: f64) {
        assert!((found / expected - 1.0).abs() < relative, "{found} is not {expected}");
    }

    /// Closed forms: t with 1 degree is Cauchy, with 2 has an algebraic quantile; chi-squared
    /// with 2 is exponential. The tolerance is what statrs' incomplete beta keeps.
    #[test]
    fn quantiles_agree_with_closed_forms() {
        close(student_t_quantile(0.975, 1.0), (0.475 * std::f64::consts::PI).tan(), 1e-10);
        let a = 4.0 * 0.975 * 0.025;
        close(student_t_quantile(0.975, 2.0), 2.0 * (0.975 - 0.5) * (2.0_f64 / a).sqrt(), 1e-10);
        close(chi_squared_tail(3.0, 2.0), (-1.5_f64).exp(), 1e-12);
        close(normal_quantile(0.975), 1.959_963_984_540_054, 1e-12);
        // F with (1, n) is t squared.
        let t = student_t_quantile(0.975, 7.0);
        close(f_tail(t * t, 1.0, 7.0), 0.05, 1e-9);
    }

    #[test]
    fn cdf_and_quantile_are_inverse() {
        for nu in [1.0, 2.0, 3.0, 8.0, 40.0, 1000.0] {
            for p in [0.001, 0.025, 0.3, 0.95, 0.975] {
                close(student_t_cdf(student_t_quantile(p, nu), nu), p, 1e-8);
            }
        }
    }
}
