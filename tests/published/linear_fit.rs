//! The linear least squares behind every temperature law, against certified values of the
//! NIST Statistical Reference Datasets (StRD), linear regression.

use checks::{checks, close};
use kinetics_core::numeric::least_squares::fit;
use nalgebra::DMatrix;

/// (x, y) of NIST StRD Norris, 36 observations, lower difficulty.
const NORRIS: [(f64, f64); 36] = [
    (0.2, 0.1),
    (337.4, 338.8),
    (118.2, 118.1),
    (884.6, 888.0),
    (10.1, 9.2),
    (226.5, 228.1),
    (666.3, 668.5),
    (996.3, 998.5),
    (448.6, 449.1),
    (777.0, 778.9),
    (558.2, 559.2),
    (0.4, 0.3),
    (0.6, 0.1),
    (775.5, 778.1),
    (666.9, 668.8),
    (338.0, 339.3),
    (447.5, 448.9),
    (11.6, 10.8),
    (556.0, 557.7),
    (228.1, 228.3),
    (995.8, 998.0),
    (887.6, 888.8),
    (120.2, 119.6),
    (0.3, 0.3),
    (0.3, 0.6),
    (556.8, 557.6),
    (339.1, 339.3),
    (887.2, 888.0),
    (999.0, 998.5),
    (779.0, 778.9),
    (11.1, 10.2),
    (118.3, 117.6),
    (229.2, 228.9),
    (669.1, 668.4),
    (448.9, 449.2),
    (0.5, 0.2),
];

/// Certified values carry 15 digits; the design's condition number (about 2e3, squared in the
/// intercept's standard deviation) leaves 12 of them.
const TOLERANCE: f64 = 1e-12;

checks! {
    fn norris() {
        let design = DMatrix::from_fn(36, 2, |i, j| if j == 0 { 1.0 } else { NORRIS[i].0 });
        let y: Vec<f64> = NORRIS.iter().map(|p| p.1).collect();
        let line = fit(&design, &y, &[1.0; 36]).unwrap();
        close(line.coefficients[0], -0.262323073774029, TOLERANCE);
        close(line.coefficients[1], 1.00211681802045, TOLERANCE);
        close(line.weighted_sum_of_squares, 26.6173985294224, TOLERANCE);
        let residual_sd = (line.weighted_sum_of_squares / 34.0).sqrt();
        close(residual_sd, 0.884796396144373, TOLERANCE);
        close(residual_sd * line.covariance[(0, 0)].sqrt(), 0.232818234301152, TOLERANCE);
        close(residual_sd * line.covariance[(1, 1)].sqrt(), 0.429796848199937E-03, TOLERANCE);
    }

    /// NIST StRD NoInt1: a line through the origin.
    fn no_intercept() {
        let design = DMatrix::from_fn(11, 1, |i, _| 60.0 + i as f64);
        let y: Vec<f64> = (0..11).map(|i| 130.0 + f64::from(i)).collect();
        let line = fit(&design, &y, &[1.0; 11]).unwrap();
        close(line.coefficients[0], 2.07438016528926, TOLERANCE);
        let residual_sd = (line.weighted_sum_of_squares / 10.0).sqrt();
        close(residual_sd, 3.56753034006338, TOLERANCE);
        close(residual_sd * line.covariance[(0, 0)].sqrt(), 0.165289256198347E-01, TOLERANCE);
    }
}
