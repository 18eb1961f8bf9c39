//! The straight line through points with errors in both coordinates: D. York, N. M. Evensen,
//! M. López Martínez and J. De Basabe Delgado, Am. J. Phys. 2004, 72, 367, equations 13a–13e,
//! with uncorrelated errors.

/// One point with the variances of its coordinates; that of x may be zero.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point {
    /// Abscissa.
    pub x: f64,
    /// Ordinate.
    pub y: f64,
    /// Variance of the abscissa, ≥ 0.
    pub x_variance: f64,
    /// Variance of the ordinate, > 0.
    pub y_variance: f64,
}

/// y = intercept + slope·x.
#[derive(Debug, Clone, PartialEq)]
pub struct Line {
    /// Value at x = 0.
    pub intercept: f64,
    /// Rise per unit of x.
    pub slope: f64,
    /// Covariance of (intercept, slope) from the stated errors, by the adjusted points.
    pub covariance: [[f64; 2]; 2],
    /// W of each point: the inverse of the variance of its distance along y.
    pub weights: Vec<f64>,
    /// Σ W (y − intercept − slope·x)².
    pub weighted_sum_of_squares: f64,
}

/// Iterations; York's usually settles within ten.
const MOST_ITERATIONS: usize = 200;
/// Relative change of the slope at which it has settled.
const SETTLED: f64 = 1e-14;

/// Fits the line, starting from `slope`; none where it does not settle or the points lie above
/// one another.
pub fn fit(points: &[Point], slope: f64) -> Option<Line> {
    let mut slope = slope;
    for _ in 0..MOST_ITERATIONS {
        let step = Step::at(points, slope);
        let (above, below) = points.iter().zip(&step.weights).zip(&step.shifts).fold(
            (0.0, 0.0),
            |(above, below), ((p, w), shift)| {
                (above + w * shift * (p.y - step.y_mean), below + w * shift * (p.x - step.x_mean))
            },
        );
        let next = above / below;
        if !next.is_finite() {
            return None;
        }
        let settled = (next - slope).abs() <= SETTLED * next.abs();
        slope = next;
        if settled {
            return Some(Step::at(points, slope).line(points));
        }
    }
    None
}

/// What York's equations need at one slope.
struct Step {
    slope: f64,
    weights: Vec<f64>,
    x_mean: f64,
    y_mean: f64,
    /// β: how far the adjusted abscissas lie from the mean.
    shifts: Vec<f64>,
}

impl Step {
    fn at(points: &[Point], slope: f64) -> Self {
        let weights: Vec<f64> =
            points.iter().map(|p| 1.0 / (p.y_variance + slope * slope * p.x_variance)).collect();
        let total: f64 = weights.iter().sum();
        let mean = |of: fn(&Point) -> f64| {
            points.iter().zip(&weights).map(|(p, w)| w * of(p)).sum::<f64>() / total
        };
        let (x_mean, y_mean) = (mean(|p| p.x), mean(|p| p.y));
        let shifts = points
            .iter()
            .zip(&weights)
            .map(|(p, w)| {
                w * ((p.x - x_mean) * p.y_variance + slope * (p.y - y_mean) * p.x_variance)
            })
            .collect();
        Self { slope, weights, x_mean, y_mean, shifts }
    }

    fn line(self, points: &[Point]) -> Line {
        let total: f64 = self.weights.iter().sum();
        let adjusted: Vec<f64> = self.shifts.iter().map(|shift| self.x_mean + shift).collect();
        let centre = adjusted.iter().zip(&self.weights).map(|(x, w)| w * x).sum::<f64>() / total;
        let spread: f64 =
            adjusted.iter().zip(&self.weights).map(|(x, w)| w * (x - centre) * (x - centre)).sum();
        let slope_variance = 1.0 / spread;
        let shared = -centre * slope_variance;
        let intercept = self.y_mean - self.slope * self.x_mean;
        let weighted_sum_of_squares = points
            .iter()
            .zip(&self.weights)
            .map(|(p, w)| w * (p.y - intercept - self.slope * p.x).powi(2))
            .sum();
        Line {
            intercept,
            slope: self.slope,
            covariance: [
                [1.0 / total + centre * centre * slope_variance, shared],
                [shared, slope_variance],
            ],
            weights: self.weights,
            weighted_sum_of_squares,
        }
    }
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    /// Without errors in x it is weighted least squares.
    #[test]
    fn exact_abscissas_give_weighted_least_squares() {
        let points: Vec<Point> =
            [(1.0, 2.0, 0.1), (2.0, 3.5, 0.4), (4.0, 7.1, 0.2), (5.0, 8.4, 0.3)]
                .iter()
                .map(|&(x, y, y_variance)| Point { x, y, x_variance: 0.0, y_variance })
                .collect();
        let line = fit(&points, 1.0).unwrap();
        let design =
            nalgebra::DMatrix::from_fn(4, 2, |i, j| if j == 0 { 1.0 } else { points[i].x });
        let y: Vec<f64> = points.iter().map(|p| p.y).collect();
        let w: Vec<f64> = points.iter().map(|p| 1.0 / p.y_variance).collect();
        let usual = crate::numeric::least_squares::fit(&design, &y, &w).unwrap();
        assert!((line.slope - usual.coefficients[1]).abs() < 1e-12);
        assert!((line.intercept - usual.coefficients[0]).abs() < 1e-12);
        for i in 0..2 {
            for j in 0..2 {
                assert!((line.covariance[i][j] - usual.covariance[(i, j)]).abs() < 1e-12);
            }
        }
    }

    #[test]
    fn points_above_one_another_have_no_line() {
        let point = |y| Point { x: 1.0, y, x_variance: 0.0, y_variance: 1.0 };
        assert_eq!(fit(&[point(1.0), point(2.0)], 1.0), None);
    }
}
