//! Every law, scatter choice and question against SciPy and statsmodels.
//!
//! `tests/reference/linear_laws.py` fits the laws in the form that textbooks give them, takes
//! quantiles and roots from SciPy, and writes studies with the numbers that their findings must
//! hold; it shares no code with the core. The data are invented. Whatever is off is reported at
//! once, with its place.

use checks::checks;
use kinetics_core::measurements::Observation;
use kinetics_core::study::{Evaluation, Study, evaluate_prepared, prepare};
use kinetics_core::temperature_law::{curvature, influential};
use serde_json::{Value, json};

const REFERENCE: &str = include_str!("../reference/linear_laws.json");

/// Sums, exponentials and least squares: sixteen digits, of which the textbooks' uncentred
/// designs lose up to six.
const CLOSED: f64 = 1e-9;
/// Quantiles and what is read off them: the core's Student t keeps ten digits.
const QUANTILES: f64 = 1e-7;
/// Quantiles of averaged intervals: the core's panels may miss 1e-5 of a probability, which at
/// the limits of a 95 % interval is half a thousandth of a standard error, itself a tenth of the
/// value at most.
const AVERAGED: f64 = 5e-5;
/// AICc with a run-to-run scatter: the core searches ln τ down to steps of 1e-4, which leaves
/// the square of that in the likelihood.
const LIKELIHOOD: f64 = 1e-7;

fn reference() -> Value {
    serde_json::from_str(REFERENCE).unwrap()
}

struct Case {
    name: String,
    expected: Value,
    evaluation: Evaluation,
    findings: Value,
}

impl Case {
    fn quantiles(&self) -> f64 {
        let averaged = self.findings["law"]["scatter"] == "as-stated-plus-run-to-run";
        if averaged { AVERAGED } else { QUANTILES }
    }
}

fn cases() -> Vec<Case> {
    let reference = reference();
    let of = |expected: &Value| {
        let mut document = expected["study"].clone();
        document["kelvinclock"] = json!(1);
        document["asked"] = reference["asked"].clone();
        let study = Study::from_value(document).unwrap();
        let evaluation = evaluate_prepared(&study, &prepare(&study));
        Case {
            name: expected["name"].as_str().unwrap().to_owned(),
            expected: expected.clone(),
            findings: serde_json::to_value(&evaluation.findings).unwrap(),
            evaluation,
        }
    };
    reference["studies"].as_array().unwrap().iter().map(of).collect()
}

/// What was compared and what was off.
#[derive(Default)]
struct Tally {
    compared: usize,
    off: Vec<String>,
}

impl Tally {
    /// Compares relative to the expected number, or to `floor` where that is larger.
    fn number(&mut self, place: &str, found: &Value, expected: &Value, tolerance: f64, floor: f64) {
        self.compared += 1;
        let expected = expected.as_f64().unwrap();
        let off = found.as_f64().map(|found| (found - expected).abs() / expected.abs().max(floor));
        if off.is_none_or(|off| off.is_nan() || off > tolerance) {
            self.off.push(format!("{place}: found {found}, expected {expected}, off {off:?}"));
        }
    }

    /// Compares all numbers of a map from pointers.
    fn map(&mut self, place: &str, found: &Value, expected: &Value, tolerance: f64) {
        for (pointer, number) in expected.as_object().unwrap() {
            let at = found.pointer(pointer).unwrap_or(&Value::Null);
            self.number(&format!("{place} {pointer}"), at, number, tolerance, 0.0);
        }
    }

    #[track_caller]
    fn end(self, least: usize) {
        assert!(self.compared >= least, "only {} numbers were compared", self.compared);
        assert!(
            self.off.is_empty(),
            "{} of {}:\n{}",
            self.off.len(),
            self.compared,
            self.off.join("\n")
        );
    }
}

checks! {
    /// Estimates, standard errors, T0, τ, χ² and covariances.
    fn estimates_and_standard_errors() {
        let mut tally = Tally::default();
        for case in cases() {
            tally.map(&case.name, &case.findings, &case.expected["exact"], CLOSED);
        }
        tally.end(180);
    }

    /// Limits of the law's parameters: Student, normal, averaged.
    fn limits_of_the_law() {
        let mut tally = Tally::default();
        for case in cases() {
            tally.map(&case.name, &case.findings, &case.expected["quantiles"], case.quantiles());
        }
        tally.end(130);
    }

    /// All ten questions, two-sided, one-sided and for one future batch, inverted temperatures
    /// (Fieller's limits) among them, and what the laws not excluded say.
    fn answers_and_their_limits() {
        let mut tally = Tally::default();
        for case in cases() {
            for (i, expected) in case.expected["answers"].as_array().unwrap().iter().enumerate() {
                let answer = &case.findings["answers"][i];
                let place = format!("{}, {}", case.name, answer["question"]);
                tally.map(&place, answer, expected, case.quantiles());
            }
        }
        tally.end(600);
    }

    /// AICc differences and Akaike weights of the other laws.
    fn rivals_and_their_ranks() {
        let mut tally = Tally::default();
        for case in cases() {
            let Some(expected) = case.expected["rivals"].as_object() else { continue };
            let found = case.findings["rivals"].as_array().unwrap();
            assert_eq!(found.len(), expected.len(), "{}", case.name);
            for rival in found {
                let expected = &expected[rival["kind"].as_str().unwrap()];
                for key in ["delta_aicc", "weight"] {
                    let place = format!("{}, {} {key}", case.name, rival["kind"]);
                    tally.number(&place, &rival[key], &expected[key], LIKELIHOOD, 1.0);
                }
            }
        }
        tally.end(60);
    }

    /// The F test of a quadratic term; Cook's distances and studentised residuals of the runs
    /// that the core calls influential, and of no others.
    fn curvature_and_influence() {
        let mut tally = Tally::default();
        let mut called = 0;
        for case in cases() {
            let Some(expected) = case.expected.get("diagnostics") else { continue };
            let law = &case.evaluation.basis.as_ref().unwrap().law;
            let runs: Vec<Observation> =
                case.evaluation.rates.runs.iter().map(|r| r.observation).collect();
            let test = curvature(law, &runs).unwrap();
            for (key, found) in [("curvature_f", test.f), ("curvature_p", test.p)] {
                tally.number(&case.name, &json!(found), &expected[key], CLOSED, 0.0);
            }
            let distances = &expected["cooks_distances"];
            let found = influential(law);
            for one in &found {
                let studentised = &expected["studentised_residuals"][one.run];
                let place = format!("{}, run {}", case.name, one.run);
                tally.number(&place, &json!(one.cooks_distance), &distances[one.run], CLOSED, 0.0);
                tally.number(&place, &json!(one.studentised_residual), studentised, CLOSED, 0.0);
            }
            let far = |d: &&Value| d.as_f64().unwrap() > 1.0;
            let distant = distances.as_array().unwrap().iter().filter(far).count();
            assert!(found.len() >= distant, "{}", case.name);
            called += found.len();
        }
        assert!(called > 0, "no run was influential");
        tally.end(8);
    }

    /// What the remark on an influential run says of the activation energy without it: fitted under
    /// the same scatter choice, printed to the digits that it shows.
    fn influence_says_what_leaving_out_does() {
        let mut compared = 0;
        for case in cases() {
            let Some(expected) = case.expected.get("diagnostics") else { continue };
            let law = &case.evaluation.basis.as_ref().unwrap().law;
            let Some(worst) = influential(law).first().copied() else { continue };
            let remarks = &case.evaluation.findings.remarks;
            let sentence = &remarks.iter().find(|r| r.code == "influence").unwrap().sentence;
            let (_, from_number) = sentence.split_once("would be ").unwrap();
            let printed = from_number.split(' ').next().unwrap();
            let decimals = printed.split_once('.').map_or(0, |(_, decimals)| decimals.len());
            let energy = expected["kilojoules_without"][worst.run].as_f64().unwrap();
            assert_eq!(printed, format!("{energy:.decimals$}"), "{}", case.name);
            compared += 1;
        }
        assert!(compared >= 2, "only {compared} sentences were compared");
    }
}
