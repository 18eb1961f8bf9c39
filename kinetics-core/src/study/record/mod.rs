//! The record: a printable, checkable account of a study, as text and as HTML: the same bytes for
//! the same study on the same build, without clock or locale.

mod courses;
mod render;

use self::render::Part;
use super::document::Study;
use super::findings::{Estimate, Findings, LawFindings, Record};
use crate::answer::Answer;
use crate::citation::{self, Citation};
use crate::question::{Blank, BlankKind, Piece, Question};
use crate::temperature_law::Scatter;

/// What a record is not, in its own words.
const LIMITS: &str = "\
This account is an estimate for screening. It is no validated or signed system, and no \
substitute for real-time data, for calorimetry, for local codes or for licensed practice. \
An interval covers the scatter it names, not a change of the reaction outside the data.";

/// Everything but the text, which the findings themselves fill.
pub(super) fn empty(measured_text: &str) -> Record {
    let digest = hmac_sha256::Hash::hash(measured_text.as_bytes());
    Record {
        text: String::new(),
        html: String::new(),
        citations: Vec::new(),
        version: env!("CARGO_PKG_VERSION").into(),
        input_sha256: digest.iter().map(|byte| format!("{byte:02x}")).collect(),
    }
}

/// The sources behind what was computed.
fn citations(findings: &Findings) -> Vec<Citation> {
    let Some(law) = &findings.law else { return vec![citation::CONSTANTS] };
    let mut sources = vec![match law.kind.as_str() {
        "eyring" => citation::EYRING,
        _ => citation::ARRHENIUS,
    }];
    if law.degrees_of_freedom.is_some() {
        sources.extend([citation::LEAST_SQUARES, citation::REFERENCE_TEMPERATURE]);
        sources.extend([citation::REGRESSION, citation::INFLUENCE]);
    }
    if findings.runs.iter().any(|run| run.course.is_some()) {
        sources.extend([citation::LEVENBERG_MARQUARDT, citation::VARIABLE_PROJECTION]);
        sources.extend([citation::MODEL_SELECTION, citation::HOMOGENEITY]);
    }
    if law.scatter == Scatter::AsStatedPlusRunToRun {
        sources.extend([citation::Q_PROFILE, citation::GENERALISED_INFERENCE]);
    }
    if findings.answers.iter().any(|answer| answer.question == "next-measurement") {
        sources.push(citation::SEQUENTIAL_DESIGN);
    }
    sources.push(citation::CONSTANTS);
    sources
}

/// Fills text and HTML of the record from everything else.
pub(super) fn write(study: &Study, findings: &mut Findings) {
    findings.record.citations = citations(findings);
    let parts = parts(study, findings);
    findings.record.text = render::text(&parts);
    findings.record.html = render::html(&parts);
}

fn parts(study: &Study, findings: &Findings) -> Vec<Part> {
    let mut account = Account { parts: Vec::new() };
    account.title(study, findings);
    account.measured(study, findings);
    account.method(findings);
    account.found(findings);
    account.asked(study, findings);
    account.parts.push(Part::Heading("Limits"));
    account.sentence(LIMITS);
    account.parts
}

struct Account {
    parts: Vec<Part>,
}

impl Account {
    fn entry(&mut self, name: impl Into<String>, value: impl Into<String>) {
        self.parts.push(Part::Entry(name.into(), value.into()));
    }

    fn sentence(&mut self, sentence: impl Into<String>) {
        self.parts.push(Part::Sentence(sentence.into()));
    }

    fn title(&mut self, study: &Study, findings: &Findings) {
        let title = if study.title.is_empty() { "Untitled study" } else { &study.title };
        self.parts.push(Part::Title(title.into()));
        self.entry("Made with", format!("Kelvinclock {}", findings.record.version));
        self.entry("SHA-256 of the measured text", findings.record.input_sha256.as_str());
        if !study.note.is_empty() {
            self.entry("Note", study.note.as_str());
        }
    }

    fn measured(&mut self, study: &Study, findings: &Findings) {
        let read = &findings.read;
        self.parts.push(Part::Heading("Measured"));
        self.entry("Form", read.form.code());
        self.entry("Runs used", read.rows_read.to_string());
        if let Some(decimal) = read.decimal {
            self.entry("Decimal sign", decimal.mark().to_string());
        }
        for (i, column) in read.columns.iter().enumerate() {
            let unit = column.unit.as_deref().map(|u| format!(" in {u}")).unwrap_or_default();
            let what = format!("{}{unit} (“{}”)", column.role.words(), column.name);
            self.entry(format!("Column {}", i + 1), what);
        }
        for choice in &read.choices {
            self.entry("Read", choice.as_str());
        }
        for row in &read.rows_excluded {
            let reason = if row.reason.is_empty() { "no reason given" } else { &row.reason };
            self.entry("Left out", format!("row {}, {reason}", row.row));
        }
        for problem in &findings.problems {
            self.entry("Not used", problem.sentence.as_str());
        }
        let stated = &study.measured;
        let thermometer = stated.thermometer.as_ref();
        let heat = study.heat.as_ref();
        let quantities = [
            ("Extent at the times", stated.extent.as_ref()),
            ("Initial concentration", stated.initial_concentration.as_ref()),
            ("Thermometer, random sd", thermometer.and_then(|t| t.sd.as_ref())),
            ("Thermometer, common offset", thermometer.and_then(|t| t.offset.as_ref())),
            ("Stated activation energy", stated.stated_activation_energy.as_ref()),
            ("Heat of reaction", heat.and_then(|h| h.heat_of_reaction.as_ref())),
            ("Known law at", stated.temperature.as_ref()),
        ];
        for (name, quantity) in quantities {
            if let Some(quantity) = quantity {
                self.entry(name, quantity.to_string());
            }
        }
        self.signals(study);
        let known = [
            ("Known activation energy", &stated.activation_energy),
            ("Known rate constant", &stated.rate_constant),
        ];
        for (name, quantity) in known {
            if let Some(q) = quantity {
                let sd = q.sd.map(|sd| format!(", sd {sd}")).unwrap_or_default();
                self.entry(name, format!("{} {}{sd}", q.value, q.unit));
            }
        }
        for assumed in &stated.assumed {
            self.entry("Assumed, not measured", assumed.as_str());
        }
        if !stated.text.is_empty() {
            self.sentence("As pasted, to the letter:");
            self.parts.push(Part::Verbatim(stated.text.clone()));
        }
    }

    fn method(&mut self, findings: &Findings) {
        self.parts.push(Part::Heading("Method"));
        if let Some(law) = &findings.law {
            self.sentence(law_words(&law.kind));
            self.sentence(scatter_words(law.scatter));
        }
        for citation in &findings.record.citations {
            self.sentence(citation.line());
        }
    }

    fn found(&mut self, findings: &Findings) {
        self.parts.push(Part::Heading("Found"));
        match &findings.law {
            None => self.sentence("No law."),
            Some(law) => self.law(law),
        }
        if !findings.runs.is_empty() {
            let rows = findings.runs.iter().map(|run| {
                vec![
                    run.row.to_string(),
                    run.label.clone(),
                    format!("{:.2}", run.temperature_kelvin),
                    format!("{:.6e} {}", run.rate_constant.value, run.rate_constant.unit),
                    run.ln_residual.map_or("none".into(), |residual| format!("{residual:+.4}")),
                ]
            });
            let head = ["row", "run", "T/K", "k", "residual of ln k"].map(String::from).to_vec();
            self.parts.push(Part::Table(head, rows.collect()));
        }
        self.courses(findings);
        if !findings.rivals.is_empty() {
            let shown = |number: Option<f64>| number.map_or("none".into(), |n| format!("{n:.2}"));
            let rows = findings
                .rivals
                .iter()
                .map(|r| vec![r.kind.clone(), shown(r.delta_aicc), shown(r.weight)]);
            let head =
                ["other law", "AICc above the best", "Akaike weight"].map(String::from).to_vec();
            self.parts.push(Part::Table(head, rows.collect()));
        }
        for remark in &findings.remarks {
            self.entry(
                format!("Remark, {}", remark.code),
                format!("{} {}", remark.sentence, remark.remedy),
            );
        }
    }

    fn law(&mut self, law: &LawFindings) {
        if law.rate_unit.is_empty() {
            self.entry("Unit of k and A", "that of the column, which is not stated");
        }
        if !law.assumed.is_empty() {
            self.entry("Assumed, not measured", law.assumed.join(", "));
        }
        self.entry("Reference temperature", format!("{:.2} K", law.reference_temperature_kelvin));
        let estimates = [
            ("ln k at the reference", Some(&law.ln_rate_at_reference)),
            ("k at the reference", Some(&law.rate_at_reference)),
            ("Activation energy", Some(&law.activation_energy)),
            ("ln A (moves with the activation energy)", Some(&law.ln_pre_exponential_factor)),
            ("A", Some(&law.pre_exponential_factor)),
            ("Enthalpy of activation", Some(&law.enthalpy_of_activation)),
            ("Entropy of activation", law.entropy_of_activation.as_ref()),
            ("z at the reference", law.z_value.as_ref()),
            ("D at the reference", law.d_value.as_ref()),
        ];
        for (name, estimate) in estimates {
            if let Some(estimate) = estimate {
                self.entry(name, estimate_words(estimate));
            }
        }
        for other in &law.other_scatter {
            let name = format!("Activation energy, scatter {}", scatter_name(other.scatter));
            self.entry(name, estimate_words(&other.activation_energy));
        }
        if let Some(degrees) = law.degrees_of_freedom {
            let of = law.groups.map(|groups| format!(", of {groups} groups")).unwrap_or_default();
            self.entry("Degrees of freedom", format!("{degrees}{of}"));
        }
        if let Some(sd) = law.run_to_run_sd {
            self.entry("Run-to-run standard deviation of ln k", format!("{sd:.4}"));
        }
        if let (Some(chi), Some(p)) = (law.chi_squared, law.chi_squared_p) {
            self.entry("Chi-squared with the stated errors", format!("{chi:.3}, p = {p:.3}"));
        }
        let covariance = match &law.covariance {
            None => "none, no scatter is known".into(),
            Some(c) => format!("{:.6e}, {:.6e}, {:.6e}", c[0][0], c[0][1], c[1][1]),
        };
        self.entry("Covariance of (ln k at the reference, Ea in J/mol)", covariance);
    }

    fn asked(&mut self, study: &Study, findings: &Findings) {
        self.parts.push(Part::Heading("Asked"));
        if findings.answers.is_empty() {
            self.sentence("Nothing.");
        }
        for (i, (asked, answer)) in study.asked.iter().zip(&findings.answers).enumerate() {
            self.sentence(format!("{}. {}", i + 1, sentence_with_blanks(asked)));
            self.answer(answer);
            for row in answer.rows.iter().flatten() {
                self.sentence(format!("{}:", row_words(row)));
                self.answer(row);
            }
        }
    }

    fn answer(&mut self, answer: &Answer) {
        let grounds = answer.grounds.map(|g| format!(" [{}]", g.name())).unwrap_or_default();
        self.entry("Answer", format!("{}{grounds}", answer.sentence));
        if let (Some(value), Some(unit)) = (answer.value, &answer.unit) {
            let limits = match (answer.low, answer.high) {
                (None, None) => "no interval".into(),
                (low, high) => format!("{} to {}", open_end(low), open_end(high)),
            };
            self.entry("Unrounded", format!("{value:e} {unit} ({limits})"));
        }
        let (series, single): (Vec<_>, Vec<_>) =
            answer.detail.iter().partition(|(_, value)| value.is_array());
        if !single.is_empty() {
            let detail: Vec<String> =
                single.iter().map(|(name, value)| format!("{name} {value}")).collect();
            self.entry("Detail", detail.join(", "));
        }
        for (_, value) in series {
            self.series(value.as_array().map(Vec::as_slice).unwrap_or_default());
        }
    }

    /// A curve as a table: one row a point, one column a number.
    fn series(&mut self, points: &[serde_json::Value]) {
        let Some(first) = points.first().and_then(serde_json::Value::as_object) else { return };
        let shown = |value: &serde_json::Value| match value.as_f64() {
            Some(number) => format!("{number:.6e}"),
            None => "none".into(),
        };
        let row = |point: &serde_json::Value| first.keys().map(|key| shown(&point[key])).collect();
        let head = first.keys().cloned().collect();
        self.parts.push(Part::Table(head, points.iter().map(row).collect()));
    }
}

fn estimate_words(estimate: &Estimate) -> String {
    let unit = if estimate.unit == "1" { String::new() } else { format!(" {}", estimate.unit) };
    let number = |value: f64| {
        let size = value.abs();
        if size != 0.0 && !(1e-3..1e7).contains(&size) {
            format!("{value:.6e}")
        } else {
            format!("{value:.6}")
        }
    };
    let interval = match (estimate.low, estimate.high) {
        (Some(low), Some(high)) => format!(
            "{} to {}, {} %",
            number(low),
            number(high),
            (estimate.level * 1e6).round() / 1e4
        ),
        _ => "no interval: no scatter is known".into(),
    };
    format!("{}{unit} ({interval})", number(estimate.value))
}

fn open_end(limit: Option<f64>) -> String {
    limit.map_or("open".into(), |l| format!("{l:e}"))
}

/// A question with what stands in its blanks.
fn sentence_with_blanks(asked: &serde_json::Map<String, serde_json::Value>) -> String {
    let code = asked.get("question").and_then(|q| q.as_str()).unwrap_or_default();
    let Some(question) = Question::of_code(code) else {
        return format!("(a question unknown to this version: {code})");
    };
    let mut sentence = String::new();
    for piece in question.pieces() {
        match piece {
            Piece::Text(text) => sentence.push_str(text),
            Piece::Blank(blank) => {
                let filled = asked.get(blank.name).map(|value| blank_words(blank.kind, value));
                sentence.push_str(filled.as_deref().unwrap_or("…"));
            }
        }
    }
    sentence
}

/// "25 °C", or "5 °C, 25 °C" for a list.
fn blank_words(kind: BlankKind, filled: &serde_json::Value) -> String {
    let quantities = kind.quantities(filled);
    if quantities.is_empty() {
        return "…".into();
    }
    let words: Vec<String> =
        quantities.iter().map(|quantity| quantity.to_string().trim_end().to_owned()).collect();
    words.join(", ")
}

/// The blanks of a row of a table.
fn row_words(row: &Answer) -> String {
    let blanks = Question::of_code(&row.question).map(|q| q.blanks).unwrap_or_default();
    let filled = |blank: &Blank| {
        let value = row.blanks.as_ref()?.get(blank.name)?;
        Some(blank_words(blank.kind, value))
    };
    blanks.iter().filter_map(filled).collect::<Vec<_>>().join(", ")
}

fn law_words(kind: &str) -> &'static str {
    match kind {
        "eyring" => "Eyring law: ln(k/T) linear in 1/T.",
        "arrhenius-with-power" => "Arrhenius law with a fixed power of T.",
        "log-linear" => "Log-linear law: log10 k linear in T (D and z).",
        "curved" => "Arrhenius law with a quadratic term in 1/T.",
        _ => "Arrhenius law: ln k linear in 1/T.",
    }
}

fn scatter_name(scatter: Scatter) -> &'static str {
    match scatter {
        Scatter::NoneKnown => "unknown",
        Scatter::FromResiduals => "from the residuals",
        Scatter::AsStated => "as stated",
        Scatter::AsStatedPlusRunToRun => "as stated plus run-to-run",
    }
}

fn scatter_words(scatter: Scatter) -> &'static str {
    match scatter {
        Scatter::NoneKnown => "Scatter: none known; there are no intervals.",
        Scatter::FromResiduals => "Scatter: from the residuals; least squares on ln k, Student t.",
        Scatter::AsStated => "Scatter: errors as stated; weights 1/s², normal distribution.",
        Scatter::AsStatedPlusRunToRun => {
            "Scatter: errors as stated plus run-to-run scatter; intervals averaged over what the \
             data say of it."
        }
    }
}
