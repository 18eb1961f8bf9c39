//! Runs and answers as CSV: every number in full, for a spreadsheet to go on with. With a decimal
//! comma the columns are parted by semicolons, as spreadsheets of such places expect.

use kinetics_core::answer::Answer;
use kinetics_core::question::{Blank, Piece, Question};
use kinetics_core::study::{Evaluation, Study};
use kinetics_core::wording::typed_number;
use serde_json::{Map, Value};

use super::pictures::{code, filled};
use crate::figure::table::{Cell, Table};

/// A table as CSV (RFC 4180), headed by its columns.
pub fn csv(table: &Table, decimal: char) -> String {
    let separator = if decimal == ',' { ';' } else { ',' };
    let mut text = String::new();
    let mut line = |cells: &mut dyn Iterator<Item = String>| {
        let cells: Vec<String> = cells.collect();
        text.push_str(&cells.join(separator.encode_utf8(&mut [0; 4])));
        text.push_str("\r\n");
    };
    line(&mut table.headers.iter().map(|head| escaped(head)));
    for row in &table.rows {
        line(&mut row.iter().map(|cell| match cell {
            Cell::Words(words) => escaped(words),
            cell => cell.text(|number| typed_number(number, decimal)),
        }));
    }
    text
}

/// Words in quotes. Those that a spreadsheet would take for a formula begin with an apostrophe,
/// since a label may come from anywhere.
fn escaped(words: &str) -> String {
    let mark = if words.starts_with(['=', '+', '-', '@', '\t', '\r']) { "'" } else { "" };
    format!("\"{mark}{}\"", words.replace('"', "\"\""))
}

/// One line for each run.
pub fn runs(evaluation: &Evaluation) -> Table {
    let runs = &evaluation.findings.runs;
    let unit = runs.first().map(|run| run.rate_constant.unit.as_str()).unwrap_or_default();
    let level = runs.first().map_or(0.0, |run| 100.0 * run.rate_constant.level);
    let rate = |name: &str| match unit {
        "" => name.to_owned(),
        unit => format!("{name} in {unit}"),
    };
    Table {
        caption: "Runs".into(),
        headers: vec![
            "run".into(),
            "row".into(),
            "temperature in K".into(),
            rate("k"),
            rate("standard error of k"),
            rate(&format!("lower {level} % limit of k")),
            rate(&format!("upper {level} % limit of k")),
            "measured minus fitted ln k".into(),
        ],
        rows: runs
            .iter()
            .map(|run| {
                let rate = &run.rate_constant;
                vec![
                    Cell::words(run.label.as_str()),
                    Cell::number(run.row as f64),
                    Cell::number(run.temperature_kelvin),
                    Cell::number(rate.value),
                    Cell::number(rate.standard_error),
                    Cell::number(rate.low),
                    Cell::number(rate.high),
                    Cell::number(run.ln_residual),
                ]
            })
            .collect(),
    }
}

/// One line for each answer, and for each row of an answer that is a table.
pub fn answers(study: &Study, evaluation: &Evaluation) -> Table {
    let heads =
        ["number", "question", "value", "low", "high", "unit", "level", "grounds", "answer"];
    let mut rows = Vec::new();
    for (at, (asked, answer)) in study.asked.iter().zip(&evaluation.findings.answers).enumerate() {
        let alone = std::slice::from_ref(answer);
        for answer in answer.rows.as_deref().unwrap_or(alone) {
            let blanks = answer.blanks.as_ref().unwrap_or(asked);
            rows.push(line(at + 1, &sentence(code(asked), blanks), answer));
        }
    }
    Table { caption: "Answers".into(), headers: heads.map(String::from).to_vec(), rows }
}

fn line(number: usize, question: &str, answer: &Answer) -> Vec<Cell> {
    vec![
        Cell::number(number as f64),
        Cell::words(question),
        Cell::number(answer.value),
        Cell::number(answer.low),
        Cell::number(answer.high),
        Cell::words(answer.unit.as_deref().unwrap_or_default()),
        Cell::number(answer.level),
        Cell::words(answer.grounds.map(|grounds| grounds.name()).unwrap_or_default()),
        Cell::words(answer.sentence.as_str()),
    ]
}

/// A question with its blanks filled in.
fn sentence(code: &str, blanks: &Map<String, Value>) -> String {
    let Some(question) = Question::of_code(code) else { return code.to_owned() };
    with_blanks(question, |blank| filled(blanks, blank, '.'))
}

/// A question's sentence, something in place of each blank.
pub fn with_blanks(question: &Question, fill: impl Fn(&Blank) -> String) -> String {
    let pieces = question.pieces();
    let words = pieces.iter().map(|piece| match piece {
        Piece::Text(text) => (*text).to_owned(),
        Piece::Blank(blank) => fill(blank),
    });
    words.collect()
}

#[cfg(test)]
mod tests {
    use kinetics_core::study::{evaluate_prepared, prepare};

    use super::super::example;
    use super::*;

    fn evaluated(study: &Study) -> Evaluation {
        evaluate_prepared(study, &prepare(study))
    }

    #[test]
    fn runs_keep_every_digit_and_follow_the_decimal_sign() {
        let evaluation = evaluated(&example::study());
        let table = runs(&evaluation);
        let text = csv(&table, '.');
        let lines: Vec<&str> = text.lines().collect();
        assert_eq!(lines.len(), 7);
        assert!(lines[0].starts_with("\"run\",\"row\",\"temperature in K\",\"k in 1/s\","));
        let first: Vec<&str> = lines[1].split(',').collect();
        assert_eq!(first[..3], ["\"50 °C\"", "2", "323.15"]);
        let rate = evaluation.findings.runs.first().map(|run| run.rate_constant.value);
        assert_eq!(first[3].parse().ok(), rate);
        let with_comma = csv(&table, ',');
        assert!(with_comma.contains("\"50 °C\";2;323,15;"), "{with_comma}");
        assert_eq!(csv(&runs(&evaluated(&example::study())), '.'), text);
    }

    #[test]
    fn a_list_in_a_blank_gives_a_line_for_each_of_its_answers() {
        let mut study = example::study();
        let temperatures = serde_json::json!([
            {"value": 5, "unit": "°C"}, {"value": 25, "unit": "°C"}
        ]);
        study.asked[0].insert("temperature".into(), temperatures);
        let text = csv(&answers(&study, &evaluated(&study)), '.');
        assert_eq!(text.lines().count(), 5);
        assert!(text.contains("1,\"At 5 °C, how long until 5 % is gone?\","), "{text}");
        assert!(text.contains("2,\"How long may it stand at 40 °C"), "{text}");
    }

    #[test]
    fn words_from_a_table_are_no_formulas() {
        assert_eq!(escaped("=1+1"), "\"'=1+1\"");
        assert_eq!(escaped("the \"old\" probe"), "\"the \"\"old\"\" probe\"");
    }
}
