//! Rate constants from concentrations against time, where a source prints them: OpenStax,
//! Chemistry 2e (Flowers et al. 2019), §12.4; Averill & Eldredge, General Chemistry: Principles,
//! Patterns and Applications (2011), Table 14.1; the data sets BOD and Indometh that come with R.
//!
//! The printed constants are slopes of transformed concentrations, read to three figures; here the
//! concentrations themselves are fitted, which may move the third. The sources name one
//! temperature or none: 25 °C stands in where none is needed for k.

use checks::{checks, close, found, remark_codes};
use kinetics_core::numeric::nonlinear::{Expansion, Problem, fit};
use kinetics_core::study::{Findings, RunFindings};
use serde_json::{Value, json};

/// Findings of one run, (time, signal) under the units of a head.
fn run(head: &str, points: &[(f64, f64)], measured: Value, assumed: Value) -> Findings {
    let mut text = format!("T/°C\t{head}\n");
    for (time, signal) in points {
        text.push_str(&format!("25\t{time}\t{signal:e}\n"));
    }
    let mut measured = measured;
    measured["form"] = json!("progress");
    found(&text, json!({"measured": measured, "assumed": assumed}))
}

#[track_caller]
fn only(findings: &Findings) -> &RunFindings {
    assert_eq!(findings.runs.len(), 1, "{:?}", findings.problems);
    &findings.runs[0]
}

const HOUR: f64 = 3600.0;

const BUTADIENE: [(f64, f64); 5] =
    [(0.0, 0.01), (1600.0, 5.04e-3), (3200.0, 3.37e-3), (4800.0, 2.53e-3), (6200.0, 2.08e-3)];

const SULFURYL_CHLORIDE: [(f64, f64); 7] = [
    (0.0, 0.1),
    (5000.0, 0.0896),
    (10000.0, 0.0802),
    (15000.0, 0.0719),
    (25000.0, 0.0577),
    (30000.0, 0.0517),
    (40000.0, 0.0415),
];

const OZONE: [(f64, f64); 7] = [
    (0.0, 1e-5),
    (2000.0, 4.98e-6),
    (7600.0, 2.07e-6),
    (10000.0, 1.66e-6),
    (12300.0, 1.39e-6),
    (14300.0, 1.22e-6),
    (17000.0, 1.05e-6),
];

checks! {
    /// H2O2: halves every 6 h, printed k 0.116/h, exactly ln 2/6. Without any noise there is no
    /// standard error.
    fn hydrogen_peroxide() {
        let points = [(0.0, 1.0), (6.0, 0.5), (12.0, 0.25), (18.0, 0.125), (24.0, 0.0625)];
        let findings = run("t/h\tc, mol/L", &points, json!({}), json!({"order": 1}));
        let run = only(&findings);
        close(run.rate_constant.value, 2.0_f64.ln() / 6.0 / HOUR, 1e-10);
        assert_eq!(run.rate_constant.standard_error, None);
    }

    /// Butadiene: printed second order, k = 0.0614 L/(mol s) from the end points.
    fn butadiene() {
        let findings =
            run("t/s\tc, mol/L", &BUTADIENE, json!({}), json!({"order": "compare"}));
        let run = only(&findings);
        assert_eq!(run.order, Some(2.0));
        assert_eq!(run.rate_constant.unit, "L/(mol s)");
        close(run.rate_constant.value, 0.0614, 0.01);
    }

    /// The same taken as first order is called doubtful.
    fn butadiene_as_first_order() {
        let findings = run("t/s\tc, mol/L", &BUTADIENE, json!({}), json!({"order": 1}));
        let codes = remark_codes(&findings);
        assert!(codes.contains(&"order-doubtful"), "{codes:?} {:?}", findings.remarks);
    }

    /// SO2Cl2: printed first order, 2.20e-5 1/s.
    fn sulfuryl_chloride() {
        let findings =
            run("t/s\tc, mol/L", &SULFURYL_CHLORIDE, json!({}), json!({"order": "compare"}));
        let run = only(&findings);
        assert_eq!(run.order, Some(1.0));
        close(run.rate_constant.value, 2.20e-5, 0.005);
    }

    /// O3: printed second order, 50.1 L/(mol h).
    fn ozone() {
        let findings = run("t/h\tc, mol/L", &OZONE, json!({}), json!({"order": "compare"}));
        let run = only(&findings);
        assert_eq!(run.order, Some(2.0));
        close(run.rate_constant.value * HOUR, 50.1, 0.01);
    }

    /// A zero-order course is a straight line: 0.5 mol/L falls by 0.02 mol/(L min) (closed form).
    fn zero_order() {
        let points: Vec<(f64, f64)> =
            [0.0, 5.0, 10.0, 15.0, 20.0].iter().map(|t| (*t, 0.5 - 0.02 * t)).collect();
        let findings = run("t/min\tc, mol/L", &points, json!({}), json!({"order": 0}));
        close(only(&findings).rate_constant.value, 0.02 / 60.0, 1e-10);
    }

    /// Aspirin at pH 7.0 and 37 °C, rows 40 to 300 h; printed 3.7e-3 1/h, and by what is left as
    /// by what forms: the salicylic acid formed tells the same k, its end being free.
    fn aspirin() {
        let times = [40.0, 50.0, 100.0, 200.0, 300.0];
        let left = [4.78e-3, 4.61e-3, 3.83e-3, 2.64e-3, 1.82e-3];
        let formed = [0.77e-3, 0.94e-3, 1.72e-3, 2.91e-3, 3.73e-3];
        let pairs = |signals: [f64; 5]| -> Vec<(f64, f64)> {
            times.iter().copied().zip(signals).collect()
        };
        let by_left = run("t/h\tc, mol/L", &pairs(left), json!({}), json!({"order": 1}));
        close(only(&by_left).rate_constant.value * HOUR, 3.7158e-3, 0.01);
        let start = json!({"start": {"value": 0, "unit": "mol/L"}});
        let by_formed = run("t/h\tc, mol/L", &pairs(formed), start, json!({"order": 1}));
        close(only(&by_formed).rate_constant.value * HOUR, 3.7158e-3, 0.01);
    }

    /// BOD: demand = A (1 − exp(−k t)) from zero; R's help prints A 19.1426 (2.4959), ln k −0.6328
    /// (0.3824) and a residual standard error of 2.549 on 4 degrees of freedom (after Bates &
    /// Watts 1988, A1.4; from memory).
    fn oxygen_demand() {
        let points = [(1.0, 8.3), (2.0, 10.3), (3.0, 19.0), (4.0, 16.0), (5.0, 15.6), (7.0, 19.8)];
        let start = json!({"signal_is": "formed", "start": {"value": 0, "unit": ""}});
        let findings = run("t/s\tdemand, mg/L", &points, start, json!({"order": 1}));
        let run = only(&findings);
        let course = run.course.as_ref().unwrap();
        close(run.rate_constant.value.ln(), -0.6328, 1e-4);
        close(run.rate_constant.standard_error.unwrap() / run.rate_constant.value, 0.3824, 2e-4);
        close(course.end * 1000.0, 19.1426, 1e-5);
        close(course.residual_sd.unwrap() * 1000.0, 2.549, 2e-4);
    }

    /// Indometh: A1 exp(−k1 t) + A2 exp(−k2 t) for each subject, against Pinheiro & Bates,
    /// Mixed-Effects Models in S and S-PLUS, 2000, §6.2 (from memory): A1, ln k1, A2, ln k2.
    fn two_decays_at_once() {
        for (concentrations, printed) in INDOMETH.iter().zip(INDOMETH_PRINTED) {
            let model = |ln_rates: &[f64]| {
                let mut expansion = Expansion::zeros(11, 2, 2);
                for (i, t) in INDOMETH_TIMES.iter().enumerate() {
                    for (k, ln_rate) in ln_rates.iter().enumerate() {
                        let rate = ln_rate.exp();
                        expansion.basis[(i, k)] = (-rate * t).exp();
                        expansion.basis_derivatives[k][(i, k)] = -rate * t * (-rate * t).exp();
                    }
                }
                Some(expansion)
            };
            let problem = Problem { observed: concentrations, weights: &[1.0; 11], model: &model };
            let found = fit(&problem, &[0.5, -1.5]).unwrap();
            let own = [found.linear[0], found.nonlinear[0], found.linear[1], found.nonlinear[1]];
            for (value, expected) in own.into_iter().zip(printed) {
                assert!((value - expected).abs() < 2e-4, "{own:?} {printed:?}");
            }
        }
    }
}

const INDOMETH_TIMES: [f64; 11] = [0.25, 0.5, 0.75, 1.0, 1.25, 2.0, 3.0, 4.0, 5.0, 6.0, 8.0];

const INDOMETH: [[f64; 11]; 6] = [
    [1.5, 0.94, 0.78, 0.48, 0.37, 0.19, 0.12, 0.11, 0.08, 0.07, 0.05],
    [2.03, 1.63, 0.71, 0.7, 0.64, 0.36, 0.32, 0.2, 0.25, 0.12, 0.08],
    [2.72, 1.49, 1.16, 0.8, 0.8, 0.39, 0.22, 0.12, 0.11, 0.08, 0.08],
    [1.85, 1.39, 1.02, 0.89, 0.59, 0.4, 0.16, 0.11, 0.1, 0.07, 0.07],
    [2.05, 1.04, 0.81, 0.39, 0.3, 0.23, 0.13, 0.11, 0.08, 0.1, 0.06],
    [2.31, 1.44, 1.03, 0.84, 0.64, 0.42, 0.24, 0.17, 0.13, 0.1, 0.09],
];

const INDOMETH_PRINTED: [[f64; 4]; 6] = [
    [2.029277, 0.5793887, 0.1915475, -1.7877849],
    [2.827673, 0.8013195, 0.4989175, -1.6353512],
    [5.468312, 1.7497936, 1.6757522, -0.4122004],
    [2.198132, 0.2423124, 0.2545223, -1.6026859],
    [3.566103, 1.0407660, 0.2914970, -1.5068522],
    [3.002250, 1.0882119, 0.9685230, -0.8731358],
];
