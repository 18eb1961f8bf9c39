//! The residuals that are left when the linear parameters are at their best, and their Jacobian.

use levenberg_marquardt::LeastSquaresProblem;
use nalgebra::storage::Owned;
use nalgebra::{DMatrix, DVector, Dyn};

use super::{Expansion, Problem};

/// A residual where the model has no value: far above any other, and yet its square is a number,
/// so that the search turns back instead of ending.
const WALL: f64 = 1e100;

/// A basis direction below this share of its column's length counts as none.
const RANK_TOLERANCE: f64 = 1e-13;

/// A problem at some nonlinear parameters.
pub(super) struct Projected<'p> {
    problem: &'p Problem<'p>,
    nonlinear: DVector<f64>,
    here: Option<Here>,
}

/// What is known at the current parameters.
struct Here {
    expansion: Expansion,
    /// Orthonormal columns that span the weighted basis.
    span: DMatrix<f64>,
    linear: DVector<f64>,
    residuals: DVector<f64>,
}

impl<'p> Projected<'p> {
    pub fn new(problem: &'p Problem<'p>, start: &[f64]) -> Self {
        let nonlinear = DVector::from_column_slice(start);
        let here = Here::find(problem, start);
        Self { problem, nonlinear, here }
    }

    pub fn has_value(&self) -> bool {
        self.here.is_some()
    }

    pub fn nonlinear(&self) -> &[f64] {
        self.nonlinear.as_slice()
    }

    pub fn at_end(&self) -> Option<(&Expansion, &DVector<f64>)> {
        self.here.as_ref().map(|here| (&here.expansion, &here.linear))
    }
}

impl Here {
    fn find(problem: &Problem<'_>, nonlinear: &[f64]) -> Option<Self> {
        let expansion = (problem.model)(nonlinear)?;
        let points = problem.observed.len();
        let linear_count = expansion.basis.ncols();
        if !expansion.has_shape(points, nonlinear.len()) {
            return None;
        }
        let root = |row: usize| problem.weights[row].sqrt();
        let mut right =
            DVector::from_fn(points, |i, _| (problem.observed[i] - expansion.offset[i]) * root(i));
        let mut scaled = expansion.basis.clone();
        for (row, mut values) in scaled.row_iter_mut().enumerate() {
            values *= root(row);
        }
        let lengths: Vec<f64> = scaled.column_iter().map(|c| c.norm()).collect();
        if !lengths.iter().all(|length| *length > 0.0 && length.is_finite()) {
            return None;
        }
        for (mut column, length) in scaled.column_iter_mut().zip(&lengths) {
            column /= *length;
        }
        let mut span = DMatrix::zeros(points, 0);
        let mut linear = DVector::zeros(linear_count);
        if linear_count > 0 {
            let decomposition = scaled.qr();
            let triangle = decomposition.r();
            if triangle.diagonal().iter().any(|d| d.abs() < RANK_TOLERANCE) {
                return None;
            }
            span = decomposition.q();
            let along = span.tr_mul(&right);
            linear = triangle.solve_upper_triangular(&along)?;
            for (value, length) in linear.iter_mut().zip(&lengths) {
                *value /= length;
            }
            right -= &span * along;
        }
        let finite = right.iter().chain(&linear).all(|value| value.is_finite());
        finite.then_some(Self { expansion, span, linear, residuals: right })
    }
}

impl LeastSquaresProblem<f64, Dyn, Dyn> for Projected<'_> {
    type ResidualStorage = Owned<f64, Dyn>;
    type JacobianStorage = Owned<f64, Dyn, Dyn>;
    type ParameterStorage = Owned<f64, Dyn>;

    fn set_params(&mut self, parameters: &DVector<f64>) {
        self.nonlinear.copy_from(parameters);
        self.here = Here::find(self.problem, self.nonlinear.as_slice());
    }

    fn params(&self) -> DVector<f64> {
        self.nonlinear.clone()
    }

    fn residuals(&self) -> Option<DVector<f64>> {
        let wall = || DVector::from_element(self.problem.observed.len(), WALL);
        Some(self.here.as_ref().map_or_else(wall, |here| here.residuals.clone()))
    }

    /// −P W ∂y/∂a, with P the projection off the basis.
    fn jacobian(&self) -> Option<DMatrix<f64>> {
        let here = self.here.as_ref()?;
        let mut slopes = here.expansion.slopes(&here.linear);
        for (row, mut values) in slopes.row_iter_mut().enumerate() {
            values *= -self.problem.weights[row].sqrt();
        }
        let along = here.span.tr_mul(&slopes);
        slopes -= &here.span * along;
        slopes.iter().all(|value| value.is_finite()).then_some(slopes)
    }
}
