//! Nonlinear least squares by Levenberg and Marquardt's method in the lineage of MINPACK (Moré
//! 1978), the parameters that enter linearly eliminated.
//!
//! The model is y ≈ o(a) + Φ(a)·c. For each a the best c solves a linear problem, so that only a
//! is searched (variable projection: Golub & Pereyra, SIAM J. Numer. Anal. 1973, 10, 413). The
//! Jacobian of the projected residuals is Kaufman's (BIT 1975, 15, 49), which leaves out a term
//! that vanishes with the residuals and keeps the gradient exact. Covariances come from the QR
//! decomposition of the whole Jacobian at the minimum.

mod projected;

use levenberg_marquardt::{LeastSquaresProblem, LevenbergMarquardt, TerminationReason};
use nalgebra::{DMatrix, DVector};
use thiserror::Error;

use super::least_squares;
use projected::Projected;

/// A model of m points around given nonlinear parameters a: o + Φ·c, and how both change with a.
#[derive(Debug, Clone, PartialEq)]
pub struct Expansion {
    /// o, of length m.
    pub offset: DVector<f64>,
    /// Φ, m × l for l linear parameters.
    pub basis: DMatrix<f64>,
    /// ∂o/∂a, m × q for q nonlinear parameters.
    pub offset_derivatives: DMatrix<f64>,
    /// ∂Φ/∂a, one m × l matrix for each nonlinear parameter.
    pub basis_derivatives: Vec<DMatrix<f64>>,
}

impl Expansion {
    /// An expansion of zeros to be filled in: m points, q nonlinear and l linear parameters.
    pub fn zeros(points: usize, nonlinear: usize, linear: usize) -> Self {
        Self {
            offset: DVector::zeros(points),
            basis: DMatrix::zeros(points, linear),
            offset_derivatives: DMatrix::zeros(points, nonlinear),
            basis_derivatives: vec![DMatrix::zeros(points, linear); nonlinear],
        }
    }

    /// ∂y/∂a at given c, m × q.
    fn slopes(&self, linear: &DVector<f64>) -> DMatrix<f64> {
        let mut slopes = self.offset_derivatives.clone();
        for (mut slope, derivative) in slopes.column_iter_mut().zip(&self.basis_derivatives) {
            slope += derivative * linear;
        }
        slopes
    }

    fn has_shape(&self, points: usize, nonlinear: usize) -> bool {
        let linear = self.basis.ncols();
        self.offset.len() == points
            && self.basis.nrows() == points
            && self.offset_derivatives.shape() == (points, nonlinear)
            && self.basis_derivatives.len() == nonlinear
            && self.basis_derivatives.iter().all(|d| d.shape() == (points, linear))
    }
}

/// A model: its expansion around nonlinear parameters, or none where it has no value.
pub type Model<'m> = dyn Fn(&[f64]) -> Option<Expansion> + 'm;

/// Points and the model that is to pass through them.
#[derive(Clone, Copy)]
pub struct Problem<'p> {
    /// What was observed, of length m.
    pub observed: &'p [f64],
    /// Weights 1/σ², of length m, above zero.
    pub weights: &'p [f64],
    /// The model.
    pub model: &'p Model<'p>,
}

/// Why a search ended without an answer.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Error)]
pub enum Unfinished {
    /// Fewer points than parameters.
    #[error("there are fewer points than parameters")]
    TooFewPoints,
    /// Start, points or weights cannot be computed with.
    #[error("the model has no value where the search starts")]
    NotComputable,
    /// The search did not end within its number of evaluations.
    #[error("the search did not end")]
    OutOfPatience,
    /// The search ended where the sum of squares still falls.
    #[error("the search stopped before it reached a minimum")]
    NoMinimum,
    /// At the minimum the points do not tell the parameters apart.
    #[error("the points do not tell the parameters apart")]
    NotIdentified,
}

/// A minimum of the weighted sum of squares.
#[derive(Debug, Clone, PartialEq)]
pub struct NonlinearFit {
    /// a, the nonlinear parameters.
    pub nonlinear: Vec<f64>,
    /// c, the linear parameters.
    pub linear: Vec<f64>,
    /// Covariance of (a, c) at weights 1/σ²; to be multiplied by a variance where weights are
    /// relative.
    pub covariance: DMatrix<f64>,
    /// Observed minus fitted, not weighted.
    pub residuals: Vec<f64>,
    /// Σ w r².
    pub weighted_sum_of_squares: f64,
    /// Points minus parameters.
    pub degrees_of_freedom: usize,
    /// How often the model was computed.
    pub evaluations: usize,
}

impl NonlinearFit {
    /// Σ w r²/ν, none where ν = 0.
    pub fn variance(&self) -> Option<f64> {
        let freedom = self.degrees_of_freedom;
        (freedom > 0).then(|| self.weighted_sum_of_squares / freedom as f64)
    }
}

/// Relative tolerances of the search, a few rounding errors: what is left to gain is judged
/// afterwards, see [`relative_offset_squared`].
const TOLERANCE: f64 = 1e-15;
/// Evaluations of the model for each parameter and one more.
const PATIENCE: usize = 1000;
/// A Gauss–Newton step shorter than this share of the confidence region's radius is none
/// (Bates & Watts, Technometrics 1981, 23, 179, who stop at 0.001).
const LARGEST_OFFSET: f64 = 1e-4;
/// Most Gauss–Newton steps after the search.
const POLISHING_STEPS: usize = 4;
/// Residuals below this share of the observed are rounding errors.
const EXACT: f64 = 1e-12;

/// Searches the minimum of Σ w (y − o(a) − Φ(a)c)² from the nonlinear parameters `start` on.
///
/// # Errors
/// See [`Unfinished`]: a search that reached no minimum gives no numbers.
pub fn fit(problem: &Problem<'_>, start: &[f64]) -> Result<NonlinearFit, Unfinished> {
    let points = problem.observed.len();
    let usable = problem.weights.len() == points
        && problem.weights.iter().all(|w| *w > 0.0 && w.is_finite())
        && problem.observed.iter().all(|y| y.is_finite())
        && start.iter().all(|a| a.is_finite());
    let first = (problem.model)(start).filter(|e| e.has_shape(points, start.len()));
    let linear = first.filter(|_| usable).ok_or(Unfinished::NotComputable)?.basis.ncols();
    if points < start.len() + linear {
        return Err(Unfinished::TooFewPoints);
    }
    let searched = Projected::new(problem, start);
    if !searched.has_value() {
        return Err(Unfinished::NotComputable);
    }
    let (ended, evaluations) = if start.is_empty() {
        (searched, 1)
    } else {
        let method = LevenbergMarquardt::new().with_tol(TOLERANCE).with_patience(PATIENCE);
        let (ended, report) = method.minimize(searched);
        match report.termination {
            TerminationReason::LostPatience => return Err(Unfinished::OutOfPatience),
            TerminationReason::User(_) | TerminationReason::Numerical(_) => {
                return Err(Unfinished::NoMinimum);
            }
            _ => (ended, report.number_of_evaluations),
        }
    };
    let reached = polish(problem, ended, evaluations)?;
    if reached.is_minimum { Ok(reached.fit) } else { Err(Unfinished::NoMinimum) }
}

/// Where a search ended, judged.
struct End {
    fit: NonlinearFit,
    /// The next Gauss–Newton step of the nonlinear parameters.
    step: DVector<f64>,
    /// Its relative offset, squared.
    offset: f64,
    is_minimum: bool,
}

/// A few Gauss–Newton steps more: where sums of squares no longer tell two places apart, the
/// gradient still does.
fn polish(
    problem: &Problem<'_>,
    mut ended: Projected<'_>,
    mut evaluations: usize,
) -> Result<End, Unfinished> {
    let mut best = judge(problem, &ended, evaluations)?;
    for _ in 0..POLISHING_STEPS {
        ended.set_params(&(ended.params() + &best.step));
        evaluations += 1;
        match judge(problem, &ended, evaluations) {
            Ok(next) if next.offset < best.offset => best = next,
            _ => break,
        }
    }
    Ok(best)
}

fn judge(
    problem: &Problem<'_>,
    ended: &Projected<'_>,
    evaluations: usize,
) -> Result<End, Unfinished> {
    let (expansion, linear) = ended.at_end().ok_or(Unfinished::NoMinimum)?;
    let slopes = expansion.slopes(linear);
    let (points, nonlinear) = slopes.shape();
    let parameters = nonlinear + linear.len();
    let mut jacobian = DMatrix::zeros(points, parameters);
    jacobian.columns_mut(0, nonlinear).copy_from(&slopes);
    jacobian.columns_mut(nonlinear, linear.len()).copy_from(&expansion.basis);

    let fitted = &expansion.offset + &expansion.basis * linear;
    let residuals: Vec<f64> = problem.observed.iter().zip(&fitted).map(|(y, f)| y - f).collect();
    let squares =
        |values: &[f64]| values.iter().zip(problem.weights).map(|(v, w)| w * v * v).sum::<f64>();
    let weighted_sum_of_squares = squares(&residuals);
    let next = least_squares::fit(&jacobian, &residuals, problem.weights)
        .map_err(|_| Unfinished::NotIdentified)?;
    let exact = weighted_sum_of_squares <= EXACT * EXACT * squares(problem.observed);
    let after = next.weighted_sum_of_squares;
    let offset = relative_offset_squared(weighted_sum_of_squares, after, points, parameters);
    Ok(End {
        step: next.coefficients.rows(0, nonlinear).into_owned(),
        offset,
        is_minimum: exact || offset <= LARGEST_OFFSET * LARGEST_OFFSET,
        fit: NonlinearFit {
            nonlinear: ended.nonlinear().to_vec(),
            linear: linear.iter().copied().collect(),
            covariance: next.covariance,
            residuals,
            weighted_sum_of_squares,
            degrees_of_freedom: points - parameters,
            evaluations,
        },
    })
}

/// The square of what Bates and Watts call the relative offset: how far the next Gauss–Newton
/// step would go, as a share of the confidence region's radius. `here` and `after` are the sums
/// of squares before and after that step on the tangent plane.
fn relative_offset_squared(here: f64, after: f64, points: usize, parameters: usize) -> f64 {
    let freedom = points - parameters;
    if freedom == 0 {
        return f64::INFINITY;
    }
    let gained = (here - after).max(0.0) / parameters.max(1) as f64;
    gained / (after / freedom as f64)
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    const TIMES: [f64; 6] = [0.0, 1.0, 2.0, 4.0, 7.0, 11.0];

    /// c0 exp(−a t) + c1, with a alone nonlinear.
    fn decay(a: &[f64]) -> Option<Expansion> {
        let mut expansion = Expansion::zeros(TIMES.len(), 1, 2);
        for (i, t) in TIMES.iter().enumerate() {
            let value = (-a[0] * t).exp();
            expansion.basis[(i, 0)] = value;
            expansion.basis[(i, 1)] = 1.0;
            expansion.basis_derivatives[0][(i, 0)] = -t * value;
        }
        Some(expansion)
    }

    /// The same with all three nonlinear.
    fn whole(a: &[f64]) -> Option<Expansion> {
        let mut expansion = Expansion::zeros(TIMES.len(), 3, 0);
        for (i, t) in TIMES.iter().enumerate() {
            let value = (-a[0] * t).exp();
            expansion.offset[i] = a[1] * value + a[2];
            let slopes = [-a[1] * t * value, value, 1.0];
            for (k, slope) in slopes.into_iter().enumerate() {
                expansion.offset_derivatives[(i, k)] = slope;
            }
        }
        Some(expansion)
    }

    fn noisy() -> Vec<f64> {
        let noise = [0.3, -0.2, 0.1, -0.4, 0.3, -0.1];
        TIMES.iter().zip(noise).map(|(t, e)| 90.0 * (-0.3 * t).exp() + 8.0 + e).collect()
    }

    #[test]
    fn eliminated_and_searched_parameters_are_the_same_minimum() {
        let observed = noisy();
        let weights = [1.0, 2.0, 1.0, 1.0, 4.0, 1.0];
        let problem = Problem { observed: &observed, weights: &weights, model: &decay };
        let short = fit(&problem, &[1.0]).unwrap();
        let long = fit(&Problem { model: &whole, ..problem }, &[0.5, 50.0, 0.0]).unwrap();
        let both = [short.nonlinear[0], short.linear[0], short.linear[1]];
        for (k, value) in both.into_iter().enumerate() {
            assert!((value / long.nonlinear[k] - 1.0).abs() < 1e-7, "{k}");
            let variances = (short.covariance[(k, k)], long.covariance[(k, k)]);
            assert!((variances.0 / variances.1 - 1.0).abs() < 1e-5, "{k}: {variances:?}");
        }
        assert_eq!((short.degrees_of_freedom, long.degrees_of_freedom), (3, 3));
        let gain = short.weighted_sum_of_squares / long.weighted_sum_of_squares;
        assert!((gain - 1.0).abs() < 1e-9);
    }

    #[test]
    fn points_without_noise_give_back_their_parameters() {
        let observed: Vec<f64> = TIMES.iter().map(|t| 90.0 * (-0.3 * t).exp() + 8.0).collect();
        let problem = Problem { observed: &observed, weights: &[1.0; 6], model: &decay };
        let exact = fit(&problem, &[2.0]).unwrap();
        assert!((exact.nonlinear[0] / 0.3 - 1.0).abs() < 1e-10);
        assert!(exact.variance().unwrap() < 1e-20);
    }

    #[test]
    fn what_has_no_minimum_is_no_number() {
        let start = [1.0];
        let outcome = |observed: &[f64], weights: &[f64]| {
            fit(&Problem { observed, weights, model: &decay }, &start).unwrap_err()
        };
        assert_eq!(
            outcome(&[1.0, f64::NAN, 1.0, 1.0, 1.0, 1.0], &[1.0; 6]),
            Unfinished::NotComputable
        );
        assert_eq!(outcome(&[1.0; 6], &[0.0; 6]), Unfinished::NotComputable);
        assert_eq!(outcome(&[1.0; 2], &[1.0; 2]), Unfinished::NotComputable);
        // All the same: any a does, as its share of the sum vanishes.
        assert_eq!(outcome(&[1.0; 6], &[1.0; 6]), Unfinished::NotIdentified);
        let nowhere = |_: &[f64]| None;
        let problem = Problem { observed: &[1.0; 6], weights: &[1.0; 6], model: &nowhere };
        assert_eq!(fit(&problem, &start), Err(Unfinished::NotComputable));
    }
}
