//! Weighted linear least squares by QR of the column-scaled design (Björck, Numerical Methods for
//! Least Squares Problems, 1996, §2.4): the normal equations are never formed. The triangle grows
//! row by row through Givens rotations, so that nothing as large as the design is copied.

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

    let lengths: Vec<f64> = design
        .column_iter()
        .map(|column| column.iter().zip(weights).map(|(x, w)| w * x * x).sum::<f64>().sqrt())
        .collect();
    if lengths.contains(&0.0) {
        return Err(LeastSquaresError::RankDeficient);
    }
    let scaled_row = |row: usize, into: &mut [f64]| {
        let root_weight = weights[row].sqrt();
        for (column, entry) in into.iter_mut().enumerate() {
            *entry = root_weight * design[(row, column)] / lengths[column];
        }
        root_weight * observed[row]
    };
    let mut triangle = DMatrix::zeros(parameters, parameters);
    let mut right = DVector::zeros(parameters);
    let mut entries = vec![0.0; parameters];
    for row in 0..rows {
        let value = scaled_row(row, &mut entries);
        rotate_in(&mut triangle, &mut right, &mut entries, value);
    }
    if triangle.diagonal().iter().any(|d| d.abs() < RANK_TOLERANCE) {
        return Err(LeastSquaresError::RankDeficient);
    }
    let inverse = triangle
        .solve_upper_triangular(&DMatrix::identity(parameters, parameters))
        .ok_or(LeastSquaresError::RankDeficient)?;
    let scaled_coefficients = &inverse * right;
    let coefficients = DVector::from_iterator(
        parameters,
        scaled_coefficients.iter().zip(&lengths).map(|(b, l)| b / l),
    );
    let covariance = DMatrix::from_fn(parameters, parameters, |i, j| {
        inverse.row(i).dot(&inverse.row(j)) / (lengths[i] * lengths[j])
    });

    let fitted = design * &coefficients;
    let residuals: Vec<f64> = observed.iter().zip(&fitted).map(|(y, f)| y - f).collect();
    let weighted_sum_of_squares = residuals.iter().zip(weights).map(|(r, w)| w * r * r).sum();
    // The rows of Q are those of the design times R⁻¹.
    let leverages = (0..rows)
        .map(|row| {
            scaled_row(row, &mut entries);
            let along = |column: usize| -> f64 {
                (0..=column).map(|i| entries[i] * inverse[(i, column)]).sum()
            };
            (0..parameters).map(|column| along(column) * along(column)).sum()
        })
        .collect();
    Ok(LinearFit { coefficients, covariance, residuals, leverages, weighted_sum_of_squares })
}

/// Turns one more row of the design, and its value, into the triangle and its right side (Golub &
/// Van Loan, Matrix Computations, 4th ed. 2013, §5.2.5).
fn rotate_in(
    triangle: &mut DMatrix<f64>,
    right: &mut DVector<f64>,
    row: &mut [f64],
    mut value: f64,
) {
    for pivot in 0..row.len() {
        if row[pivot] == 0.0 {
            continue;
        }
        let above = triangle[(pivot, pivot)];
        let length = (above * above + row[pivot] * row[pivot]).sqrt();
        let (cosine, sine) = (above / length, row[pivot] / length);
        let turn = |up: f64, low: f64| (cosine * up + sine * low, cosine * low - sine * up);
        for column in pivot..row.len() {
            (triangle[(pivot, column)], row[column]) = turn(triangle[(pivot, column)], row[column]);
        }
        (right[pivot], value) = turn(right[pivot], value);
    }
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
