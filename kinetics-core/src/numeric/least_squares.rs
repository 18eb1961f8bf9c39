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

    let columns: Vec<&[f64]> = design.as_slice().chunks_exact(rows).collect();
    let length = |column: &&[f64]| -> f64 {
        column.iter().zip(weights).map(|(x, w)| w * x * x).sum::<f64>().sqrt()
    };
    let lengths: Vec<f64> = columns.iter().map(length).collect();
    if lengths.contains(&0.0) {
        return Err(LeastSquaresError::RankDeficient);
    }
    let mut triangle = Triangle::new(parameters);
    let mut entries = vec![0.0; parameters];
    for row in 0..rows {
        let root_weight = weights[row].sqrt();
        for ((entry, column), length) in entries.iter_mut().zip(&columns).zip(&lengths) {
            *entry = root_weight * column[row] / length;
        }
        triangle.rotate_in(&mut entries, root_weight * observed[row]);
    }
    let inverse = triangle.inverse().ok_or(LeastSquaresError::RankDeficient)?;
    let coefficients = DVector::from_fn(parameters, |i, _| {
        let along = |j: usize| inverse[i * parameters + j] * triangle.right[j];
        (i..parameters).map(along).sum::<f64>() / lengths[i]
    });
    let covariance = DMatrix::from_fn(parameters, parameters, |i, j| {
        let along = |k: usize| inverse[i * parameters + k] * inverse[j * parameters + k];
        (i.max(j)..parameters).map(along).sum::<f64>() / (lengths[i] * lengths[j])
    });

    let mut residuals = observed.to_vec();
    for (column, coefficient) in columns.iter().zip(&coefficients) {
        for (residual, x) in residuals.iter_mut().zip(*column) {
            *residual -= coefficient * x;
        }
    }
    let weighted_sum_of_squares = residuals.iter().zip(weights).map(|(r, w)| w * r * r).sum();
    Ok(LinearFit { coefficients, covariance, residuals, weighted_sum_of_squares })
}

impl LinearFit {
    /// The n diagonal elements of the hat matrix, w xᵀ(XᵀWX)⁻¹x, of the design and weights that
    /// this is the fit of.
    pub fn leverages(&self, design: &DMatrix<f64>, weights: &[f64]) -> Vec<f64> {
        let parameters = design.ncols();
        let leverage = |(row, weight): (usize, &f64)| {
            let mut sum = 0.0;
            for i in 0..parameters {
                for j in 0..parameters {
                    sum += design[(row, i)] * self.covariance[(i, j)] * design[(row, j)];
                }
            }
            weight * sum
        };
        weights.iter().enumerate().map(leverage).collect()
    }
}

/// R and Qᵀy as they grow, R row by row.
struct Triangle {
    parameters: usize,
    upper: Vec<f64>,
    right: Vec<f64>,
}

impl Triangle {
    fn new(parameters: usize) -> Self {
        Self { parameters, upper: vec![0.0; parameters * parameters], right: vec![0.0; parameters] }
    }

    /// Turns one more row of the design, and its value, into the triangle and its right side (Golub
    /// & Van Loan, Matrix Computations, 4th ed. 2013, §5.2.5).
    fn rotate_in(&mut self, row: &mut [f64], mut value: f64) {
        for pivot in 0..self.parameters {
            let low = row[pivot];
            if low == 0.0 {
                continue;
            }
            let above = &mut self.upper[pivot * self.parameters..][..self.parameters];
            let length = (above[pivot] * above[pivot] + low * low).sqrt();
            let (cosine, sine) = (above[pivot] / length, low / length);
            let turn = |up: f64, low: f64| (cosine * up + sine * low, cosine * low - sine * up);
            for (up, low) in above.iter_mut().zip(row.iter_mut()).skip(pivot) {
                (*up, *low) = turn(*up, *low);
            }
            (self.right[pivot], value) = turn(self.right[pivot], value);
        }
    }

    /// R⁻¹, row by row; none where a direction hardly counts.
    fn inverse(&self) -> Option<Vec<f64>> {
        let p = self.parameters;
        let mut inverse = vec![0.0; p * p];
        for column in 0..p {
            for row in (0..=column).rev() {
                let pivot = self.upper[row * p + row];
                if pivot.abs() < RANK_TOLERANCE {
                    return None;
                }
                let known: f64 = (row + 1..=column)
                    .map(|k| self.upper[row * p + k] * inverse[k * p + column])
                    .sum();
                let unit = if row == column { 1.0 } else { 0.0 };
                inverse[row * p + column] = (unit - known) / pivot;
            }
        }
        Some(inverse)
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
        assert!((line.leverages(&design, &[1.0, 1.0])[0] - 1.0).abs() < 1e-13);
    }

    #[test]
    fn leverages_sum_to_the_number_of_parameters() {
        let x = [1.0, 2.0, 4.0, 7.0, 11.0];
        let design = DMatrix::from_fn(5, 2, |i, j| if j == 0 { 1.0 } else { x[i] });
        let weights = [1.0, 4.0, 1.0, 9.0, 1.0];
        let line = fit(&design, &[1.0, 3.0, 2.0, 5.0, 8.0], &weights).unwrap();
        assert!((line.leverages(&design, &weights).iter().sum::<f64>() - 2.0).abs() < 1e-12);
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
