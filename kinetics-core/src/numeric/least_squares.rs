//! Weighted linear least squares by Householder QR of the column-scaled design
//! (Björck, Numerical Methods for Least Squares Problems, 1996, §2.4): the normal
//! equations are never formed.

use nalgebra::{DMatrix, DVector};
use thiserror::Error;

/// Why a linear fit has no answer.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Error)]
pub enum LeastSquaresError {
    /// Fewer rows than parameters.
    #[error("fewer observations than parameters")]
    TooFewRows,
    /// Two columns of the design say the same.
    #[error("the observations do not tell the parameters apart")]
    RankDeficient,
    /// A weight is not positive, or a number is not finite.
    #[error("a weight or value is not a usable number")]
    NotFinite,
}

/// A solved weighted linear fit of n rows and p parameters.
#[derive(Debug, Clone, PartialEq)]
pub struct LinearFit {
    /// p fitted parameters.
    pub coefficients: DVector<f64>,
    /// (XᵀWX)⁻¹, p × p: the covariance when weights are 1/σ².
    pub covariance: DMatrix<f64>,
    /// n residuals, observed minus fitted, not weighted.
    pub residuals: Vec<f64>,
    /// n diagonal elements of the hat matrix of the weighted problem.
    pub leverages: Vec<f64>,
    /// Σ w r².
    pub weighted_sum_of_squares: f64,
}

/// A singular direction below this share of its column's length counts as none.
const RANK_TOLERANCE: f64 = 1e-12;

/// Minimises Σ wᵢ (yᵢ − Xᵢβ)².
///
/// `design` is n × p, `observed` and `weights` have length n, weights > 0.
///
/// # Errors
/// See [`LeastSquaresError`].
pub fn fit(
    design: &DMatrix<f64>,
    observed: &[f64],
    weights: &[f64],
) -> Result<LinearFit, LeastSquaresError> {
    let (rows, parameters) = design.shape();
    if rows < parameters || observed.len() != rows || weights.len() != rows {
        return Err(LeastSquaresError::TooFewRows);
    }
    let usable = weights.iter().all(|w| *w > 0.0 && w.is_finite())
        && observed.iter().all(|y| y.is_finite())
        && design.iter().all(|x| x.is_finite());
    if !usable {
        return Err(LeastSquaresError::NotFinite);
    }

    let root_weights: Vec<f64> = weights.iter().map(|w| w.sqrt()).collect();
    let mut scaled = design.clone();
    for (mut row, root_weight) in scaled.row_iter_mut().zip(&root_weights) {
        row *= *root_weight;
    }
    let lengths: Vec<f64> = scaled.column_iter().map(|c| c.norm()).collect();
    if lengths.contains(&0.0) {
        return Err(LeastSquaresError::RankDeficient);
    }
    for (mut column, length) in scaled.column_iter_mut().zip(&lengths) {
        column /= *length;
    }
    let right =
        DVector::from_iterator(rows, observed.iter().zip(&root_weights).map(|(y, w)| y * w));

    let decomposition = scaled.qr();
    let q = decomposition.q();
    let r = decomposition.r();
    if r.diagonal().iter().any(|d| d.abs() < RANK_TOLERANCE) {
        return Err(LeastSquaresError::RankDeficient);
    }
    let r_inverse = r
        .solve_upper_triangular(&DMatrix::identity(parameters, parameters))
        .ok_or(LeastSquaresError::RankDeficient)?;
    let scaled_coefficients = &r_inverse * q.tr_mul(&right);
    let coefficients = DVector::from_iterator(
        parameters,
        scaled_coefficients.iter().zip(&lengths).map(|(b, l)| b / l),
    );
    let mut covariance = &r_inverse * r_inverse.transpose();
    for i in 0..parameters {
        for j in 0..parameters {
            covariance[(i, j)] /= lengths[i] * lengths[j];
        }
    }

    let fitted = design * &coefficients;
    let residuals: Vec<f64> = observed.iter().zip(&fitted).map(|(y, f)| y - f).collect();
    let weighted_sum_of_squares = residuals.iter().zip(weights).map(|(r, w)| w * r * r).sum();
    let leverages = q.row_iter().map(|row| row.norm_squared()).collect();
    Ok(LinearFit { coefficients, covariance, residuals, leverages, weighted_sum_of_squares })
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    #[test]
    fn a_line_through_two_points_is_exact() {
        let design = DMatrix::from_row_slice(2, 2, &[1.0, 3.0, 1.0, 5.0]);
        let line = fit(&design, &[7.0, 11.0], &[1.0, 1.0]).unwrap();
        assert!((line.coefficients[0] - 1.0).abs() < 1e-13);
        assert!((line.coefficients[1] - 2.0).abs() < 1e-13);
        assert!(line.weighted_sum_of_squares < 1e-25);
        assert!((line.leverages[0] - 1.0).abs() < 1e-13);
    }

    #[test]
    fn leverages_sum_to_the_number_of_parameters() {
        let x = [1.0, 2.0, 4.0, 7.0, 11.0];
        let design = DMatrix::from_fn(5, 2, |i, j| if j == 0 { 1.0 } else { x[i] });
        let line = fit(&design, &[1.0, 3.0, 2.0, 5.0, 8.0], &[1.0, 4.0, 1.0, 9.0, 1.0]).unwrap();
        assert!((line.leverages.iter().sum::<f64>() - 2.0).abs() < 1e-12);
    }

    #[test]
    fn equal_abscissas_are_refused() {
        let design = DMatrix::from_row_slice(3, 2, &[1.0, 3.0, 1.0, 3.0, 1.0, 3.0]);
        let outcome = fit(&design, &[1.0, 2.0, 3.0], &[1.0; 3]);
        assert_eq!(outcome, Err(LeastSquaresError::RankDeficient));
    }

    #[test]
    fn unusable_numbers_are_refused() {
        let design = DMatrix::from_row_slice(2, 1, &[1.0, 1.0]);
        assert_eq!(fit(&design, &[1.0, f64::NAN], &[1.0; 2]), Err(LeastSquaresError::NotFinite));
        assert_eq!(fit(&design, &[1.0, 2.0], &[1.0, 0.0]), Err(LeastSquaresError::NotFinite));
        assert_eq!(fit(&design, &[1.0], &[1.0]), Err(LeastSquaresError::TooFewRows));
    }
}
