//! The line with errors in both coordinates, against Pearson's data with York's weights.

use checks::{checks, close};
use kinetics_core::numeric::errors_in_both::{Point, fit};

/// K. Pearson, Phil. Mag. 1901, 2, 559 (x, y); weights 1/σ² of D. York, Can. J. Phys. 1966, 44,
/// 1079: (x, y, weight of x, weight of y).
const PEARSON_YORK: [(f64, f64, f64, f64); 10] = [
    (0.0, 5.9, 1000.0, 1.0),
    (0.9, 5.4, 1000.0, 1.8),
    (1.8, 4.4, 500.0, 4.0),
    (2.6, 4.6, 800.0, 8.0),
    (3.3, 3.5, 200.0, 20.0),
    (4.4, 3.7, 80.0, 20.0),
    (5.2, 2.8, 60.0, 70.0),
    (6.1, 2.8, 20.0, 70.0),
    (6.5, 2.4, 1.8, 100.0),
    (7.4, 1.5, 1.0, 500.0),
];

checks! {
    /// D. York et al., Am. J. Phys. 2004, 72, 367. Line to 1e-8 relative (the published digits),
    /// standard errors to 1e-6 relative (their nine published digits round there).
    fn pearson_with_york_weights() {
        let points: Vec<Point> = PEARSON_YORK
            .iter()
            .map(|&(x, y, wx, wy)| Point { x, y, x_variance: 1.0 / wx, y_variance: 1.0 / wy })
            .collect();
        let line = fit(&points, -0.5395).unwrap();
        close(line.intercept, 5.47991022403, 1e-8);
        close(line.slope, -0.48053340745, 1e-8);
        close(line.covariance[0][0].sqrt(), 0.294970735, 1e-6);
        close(line.covariance[1][1].sqrt(), 0.057985009, 1e-6);
        close(line.weighted_sum_of_squares / 8.0, 1.483294149, 1e-8);
    }
}
