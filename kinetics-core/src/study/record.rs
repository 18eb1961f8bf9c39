//! The record: a printable, checkable account of a study. Plain text, the same bytes for the
//! same study on the same build: no clock, no locale.

use sha2::{Digest, Sha256};

use super::document::Study;
use super::findings::{Estimate, Findings, LawFindings, Record};
use crate::answer::Answer;
use crate::citation::{self, Citation};
use crate::question::{Piece, Question};
use crate::temperature_law::Scatter;

/// What a record is not, in its own words.
const LIMITS: &str = "\
This account is an estimate for screening. It is no validated or signed system, and no \
substitute for real-time data, for calorimetry, for local codes or for licensed practice. \
An interval covers the scatter it names, not a change of the reaction outside the data.";

/// Everything but the text, which the findings themselves fill.
pub(super) fn empty(measured_text: &str) -> Record {
    let digest = Sha256::digest(measured_text.as_bytes());
    Record {
        text: String::new(),
        citations: Vec::new(),
        version: env!("CARGO_PKG_VERSION").into(),
        input_sha256: digest.iter().map(|byte| format!("{byte:02x}")).collect(),
    }
}

/// The sources behind what was computed.
pub(super) fn citations(findings: &Findings) -> Vec<Citation> {
    let Some(law) = &findings.law else { return vec![citation::CONSTANTS] };
    let mut sources = vec![match law.kind.as_str() {
        "eyring" => citation::EYRING,
        _ => citation::ARRHENIUS,
    }];
    if law.degrees_of_freedom.is_some() {
        sources.extend([citation::LEAST_SQUARES, citation::REFERENCE_TEMPERATURE]);
        sources.extend([citation::REGRESSION, citation::INFLUENCE]);
    }
    if law.scatter == Scatter::AsStatedPlusRunToRun {
        sources.extend([citation::Q_PROFILE, citation::GENERALISED_INFERENCE]);
    }
    sources.push(citation::CONSTANTS);
    sources
}

/// The whole account.
pub(super) fn text(study: &Study, findings: &Findings) -> String {
    let mut page = Page::default();
    page.title(study, findings);
    page.measured(study, findings);
    page.method(findings);
    page.found(findings);
    page.asked(study, findings);
    page.section("Limits");
    page.line(LIMITS);
    page.text
}

#[derive(Default)]
struct Page {
    text: String,
}

impl Page {
    fn line(&mut self, line: impl AsRef<str>) {
        self.text.push_str(line.as_ref());
        self.text.push('\n');
    }

    fn section(&mut self, heading: &str) {
        self.line("");
        self.line(heading);
        self.line("-".repeat(heading.chars().count()));
    }

    fn title(&mut self, study: &Study, findings: &Findings) {
        let title = if study.title.is_empty() { "Untitled study" } else { &study.title };
        self.line(title);
        self.line("=".repeat(title.chars().count()));
        self.line(format!("Kelvinclock {}", findings.record.version));
        self.line(format!("SHA-256 of the measured text: {}", findings.record.input_sha256));
        if !study.note.is_empty() {
            self.line(format!("Note: {}", study.note));
        }
    }

    fn measured(&mut self, study: &Study, findings: &Findings) {
        let read = &findings.read;
        self.section("Measured");
        self.line(format!("Form: {}. Runs used: {}.", read.form.code(), read.rows_read));
        if let Some(decimal) = read.decimal {
            self.line(format!("Decimal sign: {}", decimal.mark()));
        }
        for (i, column) in read.columns.iter().enumerate() {
            let unit = column.unit.as_deref().map(|u| format!(" in {u}")).unwrap_or_default();
            self.line(format!(
                "Column {}: {}{unit} (“{}”)",
                i + 1,
                column.role.code(),
                column.name
            ));
        }
        for choice in &read.choices {
            self.line(format!("Read: {choice}"));
        }
        for row in &read.rows_excluded {
            let reason = if row.reason.is_empty() { "no reason given" } else { &row.reason };
            self.line(format!("Left out: row {}, {reason}", row.row));
        }
        for problem in &findings.problems {
            self.line(format!("Not used: {}", problem.sentence));
        }
        let stated = &study.measured;
        let optional = [
            ("Initial concentration", &stated.initial_concentration),
            ("Stated activation energy", &stated.stated_activation_energy),
            ("Known law at", &stated.temperature),
        ];
        for (name, quantity) in optional {
            if let Some(quantity) = quantity {
                self.line(format!("{name}: {quantity}"));
            }
        }
        let known = [
            ("Known activation energy", &stated.activation_energy),
            ("Known rate constant", &stated.rate_constant),
        ];
        for (name, quantity) in known {
            if let Some(q) = quantity {
                let sd = q.sd.map(|sd| format!(", sd {sd}")).unwrap_or_default();
                self.line(format!("{name}: {} {}{sd}", q.value, q.unit));
            }
        }
        for assumed in &stated.assumed {
            self.line(format!("Assumed, not measured: {assumed}"));
        }
        if !stated.text.is_empty() {
            self.line("As pasted, to the letter:");
            for line in stated.text.lines() {
                self.line(format!("| {line}"));
            }
        }
    }

    fn method(&mut self, findings: &Findings) {
        self.section("Method");
        if let Some(law) = &findings.law {
            self.line(law_words(&law.kind));
            self.line(scatter_words(law.scatter));
        }
        for citation in &findings.record.citations {
            self.line(format!("[{}]", citation.line()));
        }
    }

    fn found(&mut self, findings: &Findings) {
        self.section("Found");
        match &findings.law {
            None => self.line("No law."),
            Some(law) => self.law(law),
        }
        if !findings.runs.is_empty() {
            self.line("Runs (row, label, T/K, k, residual of ln k):");
            for run in &findings.runs {
                let residual = run.ln_residual.map_or("none".into(), |r| format!("{r:+.4}"));
                self.line(format!(
                    "  {}  {}  {:.2}  {:.6e} {}  {residual}",
                    run.row,
                    run.label,
                    run.temperature_kelvin,
                    run.rate_constant.value,
                    run.rate_constant.unit
                ));
            }
        }
        for remark in &findings.remarks {
            self.line(format!("Remark ({}): {} {}", remark.code, remark.sentence, remark.remedy));
        }
    }

    fn law(&mut self, law: &LawFindings) {
        if !law.assumed.is_empty() {
            self.line(format!("Assumed, not measured: {}.", law.assumed.join(", ")));
        }
        self.line(format!("Reference temperature: {:.2} K", law.reference_temperature_kelvin));
        self.estimate("ln k at the reference", &law.ln_rate_at_reference);
        self.estimate("k at the reference", &law.rate_at_reference);
        self.estimate("Activation energy", &law.activation_energy);
        self.estimate("ln A (moves with the activation energy)", &law.ln_pre_exponential_factor);
        self.estimate("A", &law.pre_exponential_factor);
        self.estimate("Enthalpy of activation", &law.enthalpy_of_activation);
        if let Some(entropy) = &law.entropy_of_activation {
            self.estimate("Entropy of activation", entropy);
        }
        if let Some(degrees) = law.degrees_of_freedom {
            self.line(format!("Degrees of freedom: {degrees}"));
        }
        if let Some(sd) = law.run_to_run_sd {
            self.line(format!("Run-to-run standard deviation of ln k: {sd:.4}"));
        }
        if let (Some(chi), Some(p)) = (law.chi_squared, law.chi_squared_p) {
            self.line(format!("Chi-squared with the stated errors: {chi:.3}, p = {p:.3}"));
        }
        match &law.covariance {
            None => self.line("Covariance: none, no scatter is known."),
            Some(c) => self.line(format!(
                "Covariance of (ln k at the reference, Ea in J/mol): {:.6e}, {:.6e}, {:.6e}",
                c[0][0], c[0][1], c[1][1]
            )),
        }
    }

    fn estimate(&mut self, name: &str, estimate: &Estimate) {
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
                " ({} to {}, {} %)",
                number(low),
                number(high),
                (estimate.level * 1e6).round() / 1e4
            ),
            _ => " (no interval: no scatter is known)".into(),
        };
        self.line(format!("{name}: {}{unit}{interval}", number(estimate.value)));
    }

    fn asked(&mut self, study: &Study, findings: &Findings) {
        self.section("Asked");
        if findings.answers.is_empty() {
            self.line("Nothing.");
        }
        for (i, (asked, answer)) in study.asked.iter().zip(&findings.answers).enumerate() {
            self.line(format!("{}. {}", i + 1, sentence_with_blanks(asked)));
            self.answer(answer);
            for row in answer.rows.iter().flatten() {
                let blanks = row.blanks.iter().flatten();
                let blanks: Vec<String> = blanks.map(|(_, value)| blank_words(value)).collect();
                self.line(format!("   {}:", blanks.join(", ")));
                self.answer(row);
            }
        }
    }

    fn answer(&mut self, answer: &Answer) {
        let grounds = answer.grounds.map(|g| format!(" [{}]", g.name())).unwrap_or_default();
        self.line(format!("   {}{grounds}", answer.sentence));
        let detail: Vec<String> =
            answer.detail.iter().map(|(name, value)| format!("{name} {value}")).collect();
        if let (Some(value), Some(unit)) = (answer.value, &answer.unit) {
            let limits = match (answer.low, answer.high) {
                (None, None) => "no interval".into(),
                (low, high) => format!("{} to {}", open_end(low), open_end(high)),
            };
            self.line(format!("   unrounded: {value:e} {unit} ({limits})"));
        }
        if !detail.is_empty() {
            self.line(format!("   detail: {}", detail.join(", ")));
        }
    }
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
                let filled = asked.get(blank.name).map(blank_words);
                sentence.push_str(filled.as_deref().unwrap_or("…"));
            }
        }
    }
    sentence
}

/// "25 °C", or "5 °C, 25 °C" for a list.
fn blank_words(value: &serde_json::Value) -> String {
    match value {
        serde_json::Value::Array(several) => {
            several.iter().map(blank_words).collect::<Vec<_>>().join(", ")
        }
        other => serde_json::from_value::<crate::quantity::Quantity>(other.clone())
            .map_or_else(|_| "…".into(), |quantity| quantity.to_string()),
    }
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
