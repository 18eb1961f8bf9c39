//! The findings document: what comes out.

use nalgebra::DMatrix;
use serde::Serialize;

use super::courses::CourseFindings;
use super::document::Excluded;
use crate::answer::{Answer, Basis, WhyNoInterval};
use crate::citation::Citation;
use crate::constants::MOLAR_GAS_CONSTANT;
use crate::measurements::Run;
use crate::numeric::distributions::normal_quantile;
use crate::problem::Problem;
use crate::quantity::Kelvin;
use crate::remark::Remark;
use crate::table::{Column, Decimal, Form};
use crate::temperature_law::{Component, Contrast, FittedLaw, Scatter, Target, TemperatureLaw};
use crate::units::{ConcentrationKind, RateUnit};

/// Everything found in a study.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Findings {
    /// Version of this document.
    pub kelvinclock_findings: u64,
    /// What the measurements were taken to be.
    pub read: Read,
    /// Everything that could not be used, with its place.
    pub problems: Vec<Problem>,
    /// One entry a run.
    pub runs: Vec<RunFindings>,
    /// The law; none where none could be fitted.
    pub law: Option<LawFindings>,
    /// The fit of all raw data at once, which assumes no run-to-run scatter; progress data only.
    pub one_stage: Option<LawFindings>,
    /// Laws that the data do not exclude.
    pub rivals: Vec<Rival>,
    /// What was noticed.
    pub remarks: Vec<Remark>,
    /// One answer a question.
    pub answers: Vec<Answer>,
    /// The account of it all.
    pub record: Record,
}

/// What the measurements were taken to be.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Read {
    /// Form of the data.
    pub form: Form,
    /// Decimal sign.
    pub decimal: Option<Decimal>,
    /// Roles and units, one a column.
    pub columns: Vec<Column>,
    /// Rows that gave a run.
    pub rows_read: usize,
    /// Rows left out, with reasons.
    pub rows_excluded: Vec<Excluded>,
    /// Order of reaction; none where neither unit nor study says it.
    pub order: Option<f64>,
    /// The scatter choice that was used.
    pub scatter: Option<Scatter>,
    /// What was decided on the user's behalf, in sentences.
    pub choices: Vec<String>,
}

/// One run.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct RunFindings {
    /// "50 °C", or the label given.
    pub label: String,
    /// Physical line of the text.
    pub row: usize,
    /// Temperature.
    pub temperature_kelvin: f64,
    /// Rate constant with its stated error.
    pub rate_constant: Estimate,
    /// Order of reaction.
    pub order: Option<f64>,
    /// The curve behind the rate constant; progress data only.
    #[serde(flatten)]
    pub course: Option<CourseFindings>,
    /// Measured minus fitted ln k; none without a law.
    pub ln_residual: Option<f64>,
    /// What it shares with other runs, where the data say so.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub group: Option<String>,
}

/// A law that was also fitted.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Rival {
    /// Code of the temperature law.
    pub kind: String,
    /// Order of reaction.
    pub order: Option<f64>,
    /// AICc above the best; none where too few runs allow no ranking.
    pub delta_aicc: Option<f64>,
    /// Akaike weight; likewise.
    pub weight: Option<f64>,
}

impl Rival {
    pub(super) fn of(rival: &crate::rivals::Rival, order: Option<f64>) -> Self {
        Self {
            kind: rival.law.law.code().into(),
            order,
            delta_aicc: rival.delta_aicc,
            weight: rival.weight,
        }
    }
}

/// A number with its interval.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Estimate {
    /// Best estimate, unrounded.
    pub value: f64,
    /// Standard error at the best estimate.
    pub standard_error: Option<f64>,
    /// Lower limit.
    pub low: Option<f64>,
    /// Upper limit.
    pub high: Option<f64>,
    /// Level of the interval.
    pub level: f64,
    /// Unit.
    pub unit: String,
    /// Why there is no interval, where there is none.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub why: Option<WhyNoInterval>,
}

impl Estimate {
    /// A linear target of a basis' law.
    pub fn of(target: &Contrast, basis: &Basis, unit: impl Into<String>) -> Self {
        let interval = basis.law.interval(target, Target::Mean, basis.level);
        Self {
            value: basis.law.estimate(target),
            standard_error: basis.law.standard_error(target),
            low: interval.map(|i| i.0),
            high: interval.map(|i| i.1),
            level: basis.level,
            unit: unit.into(),
            why: interval.is_none().then_some(WhyNoInterval::NoScatterKnown),
        }
    }

    /// The exponential of an estimate; the standard error by first order.
    pub fn exponential(&self, unit: impl Into<String>) -> Self {
        let value = libm::exp(self.value);
        Self {
            value,
            standard_error: self.standard_error.map(|s| s * value),
            low: self.low.map(libm::exp),
            high: self.high.map(libm::exp),
            unit: unit.into(),
            ..self.clone()
        }
    }

    /// 1/k in the unit given, times `factor`, of an estimate of ln k.
    fn reciprocal(&self, factor: f64, unit: &str) -> Self {
        let negative = Self {
            value: -self.value,
            low: self.high.map(|high| -high),
            high: self.low.map(|low| -low),
            ..self.clone()
        };
        let reciprocal = negative.exponential(unit);
        Self {
            value: factor * reciprocal.value,
            standard_error: reciprocal.standard_error.map(|s| factor * s),
            low: reciprocal.low.map(|low| factor * low),
            high: reciprocal.high.map(|high| factor * high),
            ..reciprocal
        }
    }
}

/// z = ln 10·R T²/Ea in K at a temperature, from Ea there; none where Ea may be zero.
fn z_value(energy: &Estimate, temperature: Kelvin) -> Option<Estimate> {
    let scale = std::f64::consts::LN_10 * MOLAR_GAS_CONSTANT * temperature.0 * temperature.0;
    let lowest = energy.low.unwrap_or(energy.value);
    (lowest > 0.0).then(|| Estimate {
        value: scale / energy.value,
        standard_error: energy.standard_error.map(|s| s * scale / (energy.value * energy.value)),
        low: energy.high.map(|high| scale / high),
        high: energy.low.map(|low| scale / low),
        unit: "K".into(),
        ..energy.clone()
    })
}

/// A temperature law with its uncertainty.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct LawFindings {
    /// Code of the temperature law.
    pub kind: String,
    /// Unit of k in the findings; empty where it is not known.
    pub rate_unit: String,
    /// Which of its values are assumed, not measured.
    pub assumed: Vec<String>,
    /// T0.
    pub reference_temperature_kelvin: f64,
    /// ln of k at T0 in `rate_unit`.
    pub ln_rate_at_reference: Estimate,
    /// k at T0.
    pub rate_at_reference: Estimate,
    /// Apparent activation energy at T0.
    pub activation_energy: Estimate,
    /// ln A.
    pub ln_pre_exponential_factor: Estimate,
    /// A.
    pub pre_exponential_factor: Estimate,
    /// ΔH‡ at T0.
    pub enthalpy_of_activation: Estimate,
    /// z in K at T0; for the log-linear law alone.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub z_value: Option<Estimate>,
    /// D in s at T0; for the log-linear law of a first-order reaction alone.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub d_value: Option<Estimate>,
    /// ΔS‡ at T0; none where the unit of k does not convert to mol/L.
    pub entropy_of_activation: Option<Estimate>,
    /// Covariance of (ln k at T0, Ea in J/mol); none where no scatter is known.
    pub covariance: Option<Vec<Vec<f64>>>,
    /// Runs, or groups of them, minus parameters; none for a known law.
    pub degrees_of_freedom: Option<usize>,
    /// How many groups count in place of runs, where groups are known and count.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub groups: Option<usize>,
    /// Where the intervals come from.
    pub scatter: Scatter,
    /// Run-to-run standard deviation of ln k, where it is estimated.
    pub run_to_run_sd: Option<f64>,
    /// The components behind averaged intervals.
    pub mixture: Vec<MixtureComponent>,
    /// Σ (r/s)² with stated errors alone.
    pub chi_squared: Option<f64>,
    /// Its upper tail probability.
    pub chi_squared_p: Option<f64>,
    /// What the other scatter choices would give.
    pub other_scatter: Vec<OtherScatter>,
}

/// The law under another scatter choice.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct OtherScatter {
    /// Which.
    pub scatter: Scatter,
    /// Apparent activation energy at the T0 of the law itself.
    pub activation_energy: Estimate,
    /// Width of that interval ÷ width under the chosen scatter.
    pub width_ratio: Option<f64>,
}

impl OtherScatter {
    fn of(law: &FittedLaw, basis: &Basis) -> Self {
        let reference = basis.law.reference;
        let estimate = |law: &FittedLaw| {
            let target = law.law.activation_energy(reference, law.reference);
            let of_law = Basis { law: law.clone(), ..basis.clone() };
            Estimate::of(&target, &of_law, "J/mol")
        };
        let width = |estimate: &Estimate| Some(estimate.high? - estimate.low?);
        let activation_energy = estimate(law);
        let width_ratio = width(&activation_energy)
            .zip(width(&estimate(&basis.law)))
            .map(|(other, own)| other / own)
            .filter(|ratio| ratio.is_finite());
        Self { scatter: law.scatter, activation_energy, width_ratio }
    }
}

/// What the data say if the run-to-run scatter is known.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct MixtureComponent {
    /// Share, 0 to 1.
    pub weight: f64,
    /// Run-to-run standard deviation of ln k.
    pub run_to_run_sd: f64,
    /// ln k at T0.
    pub ln_rate_at_reference: f64,
    /// Ea at T0, J/mol.
    pub activation_energy: f64,
    /// Covariance of the two.
    pub covariance: Vec<Vec<f64>>,
}

/// The account of a study.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Record {
    /// The account as text.
    pub text: String,
    /// The same as HTML without style, for a wiki.
    pub html: String,
    /// Sources of the methods used.
    pub citations: Vec<Citation>,
    /// Version of the program.
    pub version: String,
    /// SHA-256 of the measured text, hexadecimal.
    pub input_sha256: String,
}

impl LawFindings {
    /// What there is to say of a basis' law.
    pub(super) fn of(basis: &Basis, alternatives: &[FittedLaw], assumed: &[String]) -> Self {
        let fitted = &basis.law;
        let (law, reference) = (fitted.law, fitted.reference);
        let rate_unit = basis.base_unit.map(|unit| unit.code()).unwrap_or_default();
        let ln_rate = Estimate::of(&fitted.ln_rate_contrast(reference), basis, "1");
        let ln_factor = Estimate::of(&law.ln_pre_exponential_factor(reference), basis, "1");
        let converts_to_molar = basis.base_unit.is_some_and(|unit| {
            unit.concentration.is_none_or(|c| c.kind() == ConcentrationKind::Molar)
        });
        let energy = Estimate::of(&law.activation_energy(reference, reference), basis, "J/mol");
        let of_thermal_processing = law == TemperatureLaw::LogLinear;
        let mixture = if fitted.scatter == Scatter::AsStatedPlusRunToRun {
            fitted.components.iter().map(MixtureComponent::of).collect()
        } else {
            Vec::new()
        };
        Self {
            kind: law.code().into(),
            assumed: assumed.to_vec(),
            reference_temperature_kelvin: reference.0,
            rate_at_reference: ln_rate.exponential(rate_unit.as_str()),
            pre_exponential_factor: ln_factor.exponential(rate_unit.as_str()),
            ln_pre_exponential_factor: ln_factor,
            enthalpy_of_activation: Estimate::of(
                &law.enthalpy_of_activation(reference),
                basis,
                "J/mol",
            ),
            z_value: of_thermal_processing.then(|| z_value(&energy, reference)).flatten(),
            activation_energy: energy,
            d_value: (of_thermal_processing && basis.base_unit == Some(RateUnit::PER_SECOND))
                .then(|| ln_rate.reciprocal(std::f64::consts::LN_10, "s")),
            entropy_of_activation: converts_to_molar
                .then(|| Estimate::of(&law.entropy_of_activation(reference), basis, "J/(mol K)")),
            covariance: fitted.covariance.as_ref().map(first_two),
            degrees_of_freedom: fitted.degrees_of_freedom,
            groups: None,
            scatter: fitted.scatter,
            run_to_run_sd: fitted.run_to_run_sd,
            mixture,
            chi_squared: fitted.chi_squared.map(|c| c.0),
            chi_squared_p: fitted.chi_squared.map(|c| c.1),
            other_scatter: alternatives.iter().map(|law| OtherScatter::of(law, basis)).collect(),
            ln_rate_at_reference: ln_rate,
            rate_unit,
        }
    }
}

impl MixtureComponent {
    fn of(component: &Component) -> Self {
        Self {
            weight: component.weight,
            run_to_run_sd: component.run_to_run_sd,
            ln_rate_at_reference: component.parameters[0],
            activation_energy: component.parameters[1],
            covariance: first_two(&component.covariance),
        }
    }
}

fn first_two(covariance: &DMatrix<f64>) -> Vec<Vec<f64>> {
    (0..2).map(|i| (0..2).map(|j| covariance[(i, j)]).collect()).collect()
}

/// A run's rate constant with the interval of its stated error (normal on the ln scale).
pub(super) fn stated_rate(run: &Run, unit: &str, level: f64) -> Estimate {
    let rate_constant = libm::exp(run.observation.ln_rate);
    let half_width = run.observation.ln_sd.map(|sd| sd * normal_quantile(0.5 * (1.0 + level)));
    Estimate {
        value: rate_constant,
        standard_error: run.observation.ln_sd.map(|sd| sd * rate_constant),
        low: half_width.map(|h| rate_constant * libm::exp(-h)),
        high: half_width.map(|h| rate_constant * libm::exp(h)),
        level,
        unit: unit.into(),
        why: half_width.is_none().then_some(WhyNoInterval::NoScatterKnown),
    }
}
