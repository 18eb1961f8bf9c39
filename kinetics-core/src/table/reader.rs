//! Reads a text into a table in slices, so that a long paste never keeps a page
//! from answering: first all lines are cut into cells, then roles and units are
//! decided, then the cells become numbers.

use std::borrow::Cow;
use std::collections::HashMap;

use super::columns::{self, Columns};
use super::convert::Converter;
use super::header;
use super::layout::{Kind, Layout};
use super::refusals;
use super::said;
use super::sample::is_rule;
use super::tally::Lines;
use super::values::{TimeShape, Values};
use super::{Cell, Choice, Content, Decimal, Hints, Role, Row, Separator, Table};
use crate::problem::{Problem, shortened};
use crate::quantity::Quantity;
use crate::text::decimal::{Evidence, Votes, evidence};
use crate::text::lines::{MOST_FIELDS, Record, Records};

/// Notes and problems of lines that are kept one by one.
const MOST_NOTES: usize = 500;
const MOST_LINE_PROBLEMS: usize = 50;
/// Notes that are looked at as headers of a second table.
const MOST_HEADERS: usize = 40;

/// Reads a text row by row.
pub struct Reader<'text> {
    text: Cow<'text, str>,
    hints: Hints,
    layout: Layout,
    records: Records,
    rows: Vec<Row>,
    notes: Vec<(usize, String)>,
    run_titles: Vec<(usize, Quantity)>,
    problems: Vec<Problem>,
    votes: Vec<Votes>,
    /// The first cell of each column that either decimal mark explains.
    ambiguous: Vec<Option<String>>,
    /// A second table with other headers begins.
    other_table: bool,
    cut: bool,
    decided: Option<Decided>,
}

struct Decided {
    columns: Columns,
    decimal: Decimal,
    shapes: Vec<TimeShape>,
    converter: Converter,
    next: usize,
}

/// Reads a text at once.
#[must_use]
pub fn read_table(text: &str, hints: &Hints) -> Table {
    Reader::new(text, hints.clone()).finish()
}

impl<'text> Reader<'text> {
    /// Looks at the beginning of the text and plans the rest.
    #[must_use]
    pub fn new(text: impl Into<Cow<'text, str>>, hints: Hints) -> Reader<'text> {
        let text = text.into();
        let layout = Layout::find(&text, &hints);
        let records = Records::new(&text, layout.separator);
        let notes = layout.notes.clone();
        let problems: Vec<Problem> = layout.refusal.iter().cloned().collect();
        let votes = vec![Votes::default(); layout.columns.min(MOST_FIELDS)];
        let ambiguous = vec![None; votes.len()];
        Reader {
            text,
            hints,
            records,
            rows: Vec::new(),
            run_titles: titles_above(&notes),
            notes,
            problems,
            votes,
            ambiguous,
            other_table: false,
            cut: false,
            decided: None,
            layout,
        }
    }

    /// Goes on by at most so many lines or rows; false when all is read.
    pub fn read_rows(&mut self, at_most: usize) -> bool {
        if !self.cut {
            for _ in 0..at_most.max(1) {
                if !self.cut_record() {
                    self.cut = true;
                    break;
                }
            }
            return true;
        }
        if self.decided.is_none() && self.layout.refusal.is_none() {
            self.decide();
        }
        let Some(decided) = &mut self.decided else { return false };
        let end = decided.next.saturating_add(at_most.max(1)).min(self.rows.len());
        for row in self.rows.get_mut(decided.next..end).unwrap_or_default() {
            decided.converter.convert(&self.text, row);
        }
        decided.next = end;
        end < self.rows.len()
    }

    /// How much is done, from 0 to 1.
    #[must_use]
    pub fn progress(&self) -> f64 {
        let share = |done: usize, all: usize| if all == 0 { 1.0 } else { done as f64 / all as f64 };
        match &self.decided {
            None => 0.5 * share(self.records.position(), self.text.len()),
            Some(decided) => 0.5 + 0.5 * share(decided.next, self.rows.len()),
        }
    }

    /// Reads what is left, and hands over the table.
    #[must_use]
    pub fn finish(mut self) -> Table {
        while self.read_rows(10_000) {}
        let Some(mut decided) = self.decided.take() else { return self.empty() };
        if decided.columns.take_run_titles() {
            let is_title = |line: usize| self.run_titles.iter().any(|title| title.0 == line);
            self.notes.retain(|(line, _)| !is_title(*line));
        } else {
            for (line, temperature) in std::mem::take(&mut self.run_titles) {
                if line >= self.layout.first_line {
                    self.refuse(refusals::run_title(line, &temperature));
                }
            }
        }
        if decided.shapes.contains(&TimeShape::Stamps) {
            self.count_from_start(&decided);
        }
        let mut choices = std::mem::take(&mut self.layout.choices);
        if self.hints.decimal.is_none() {
            choices.extend(said::decimal_marks(
                &decided.columns.columns,
                &self.votes,
                &self.ambiguous,
                self.layout.separator,
            ));
        }
        choices.append(&mut decided.columns.choices);
        choices.extend(said::clocks(&decided.columns.columns, &decided.shapes));
        for (at, column) in decided.columns.columns.iter().enumerate() {
            if let Some(tally) = decided.converter.tallies.get(at) {
                tally.choices(at, column, &mut choices);
            }
        }
        choices.extend(said::run_titles(&self.run_titles));
        choices.extend(self.note_choice());
        let mut problems = self.problems;
        problems.append(&mut decided.columns.problems);
        problems.append(&mut decided.converter.problems);
        for (at, column) in decided.columns.columns.iter().enumerate() {
            problems.extend(
                decided
                    .converter
                    .tallies
                    .get(at)
                    .and_then(|tally| tally.unlisted_problem(at, column)),
            );
        }
        Table {
            form: decided.columns.form,
            columns: decided.columns.columns,
            rows: self.rows,
            problems,
            decimal: decided.decimal,
            separator: self.layout.separator,
            header_lines: self.layout.header_lines,
            units_line: self.layout.units_line,
            notes: self.notes,
            run_titles: self.run_titles,
            choices,
        }
    }

    fn empty(self) -> Table {
        Table {
            form: self.hints.form,
            columns: Vec::new(),
            rows: Vec::new(),
            problems: self.problems,
            decimal: self.hints.decimal.unwrap_or_default(),
            separator: self.layout.separator,
            header_lines: Vec::new(),
            units_line: None,
            notes: self.notes,
            run_titles: Vec::new(),
            choices: Vec::new(),
        }
    }

    /// Cuts one record; false at the end.
    fn cut_record(&mut self) -> bool {
        if self.layout.refusal.is_some() || self.other_table {
            return false;
        }
        let Some(mut record) = self.records.next(&self.text) else { return false };
        if record.too_long {
            self.refuse(refusals::long_line(&self.text, &record));
            return true;
        }
        if record.line < self.layout.first_line || is_rule(&self.text, &record) {
            return true;
        }
        self.join_excess(&mut record);
        if let Some(temperature) = self.layout.run_title(&self.text, &record) {
            if self.run_titles.len() < MOST_NOTES {
                self.run_titles.push((record.line, temperature));
            }
            return true;
        }
        match self.layout.kind(&self.text, &record) {
            Kind::Blank => {}
            Kind::Note => {
                self.note(&record);
                let looked_at = !self.rows.is_empty() && self.notes.len() <= MOST_HEADERS;
                if looked_at && self.layout.is_other_header(&self.text, &record) {
                    self.other_table = true;
                    self.refuse(refusals::other_table(&self.text, &record));
                }
            }
            Kind::Row => self.add_row(&record),
        }
        true
    }

    /// Between spaces the last field may contain some.
    fn join_excess(&self, record: &mut Record) {
        let columns = self.layout.columns;
        if self.layout.separator.is_spaces()
            && record.fields.len() > columns
            && let Some(end) = record.fields.last().map(|span| span.end)
        {
            record.fields.truncate(columns);
            if let Some(last) = record.fields.last_mut() {
                last.end = end;
            }
        }
    }

    fn refuse(&mut self, problem: Problem) {
        if self.problems.len() < MOST_LINE_PROBLEMS {
            self.problems.push(problem);
        }
    }

    fn note(&mut self, record: &Record) {
        if self.notes.len() < MOST_NOTES {
            self.notes
                .push((record.line, shortened(self.text.get(record.span.clone()).unwrap_or(""))));
        }
    }

    fn add_row(&mut self, record: &Record) {
        let columns = self.layout.columns;
        let end = record.fields.last().map_or(record.span.end, |span| span.end);
        let mut cells = Vec::with_capacity(columns);
        for column in 0..columns {
            let span = record.fields.get(column).cloned().unwrap_or(end..end);
            let cell = self.text.get(span.clone()).unwrap_or("");
            let weight = evidence(cell);
            if let Some(votes) = self.votes.get_mut(column) {
                votes.count_cell(cell, weight);
            }
            if matches!(weight, Evidence::Ambiguous(_))
                && let Some(slot @ None) = self.ambiguous.get_mut(column)
            {
                *slot = Some(shortened(cell));
            }
            cells.push(Cell { span, content: Content::Empty });
        }
        if let Some(span) = record.fields.iter().skip(columns).find(|span| !span.is_empty()) {
            let found = self.text.get(span.clone()).unwrap_or("").to_string();
            self.refuse(refusals::field_beyond(record.line, &found, columns));
        }
        self.rows.push(Row { line: record.line, cells });
    }

    fn decide(&mut self) {
        let mut all = Votes::default();
        self.votes.iter().for_each(|votes| all.add(votes));
        let fallback =
            if self.layout.separator == Separator::Semicolon && all.doubtful(Decimal::Point) {
                // Semicolons separate where the comma marks decimals.
                Decimal::Comma
            } else {
                Decimal::Point
            };
        let decimal = self.hints.decimal.or(all.certain()).unwrap_or(fallback);
        let decimals: Vec<Decimal> = self
            .votes
            .iter()
            .map(|votes| {
                let fixed = votes.has_fixed_decimals().then_some(Decimal::Point);
                self.hints.decimal.or(votes.certain()).or(fixed).unwrap_or(decimal)
            })
            .collect();
        let values: Vec<Values> = decimals
            .iter()
            .enumerate()
            .map(|(column, decimal)| Values::of(&self.text, &self.rows, column, *decimal))
            .collect();
        let columns = columns::decide(&self.layout, &self.hints, &values, &decimals);
        let shapes: Vec<TimeShape> = columns
            .columns
            .iter()
            .zip(&values)
            .map(
                |(column, values)| {
                    if column.role == Role::Time { values.time_shape } else { TimeShape::Numbers }
                },
            )
            .collect();
        let converter =
            Converter::new(&columns.columns, &shapes, columns.form, self.hints.decimal.is_some());
        self.decided = Some(Decided { columns, decimal, shapes, converter, next: 0 });
    }

    /// Time stamps count from the first of their run.
    fn count_from_start(&mut self, decided: &Decided) {
        let columns = &decided.columns.columns;
        let Some(time) = columns.iter().position(|column| column.role == Role::Time) else {
            return;
        };
        let runs: Vec<usize> = (0..columns.len())
            .filter(|at| matches!(columns[*at].role, Role::Run | Role::Temperature))
            .collect();
        let key = |row: &Row| -> String {
            runs.iter()
                .map(|at| match row.cells.get(*at).map(|cell| &cell.content) {
                    Some(Content::Text(name)) => name.to_string(),
                    Some(Content::Number { value, .. }) => value.to_string(),
                    _ => String::new(),
                })
                .chain(self.run_titles.iter().rfind(|t| t.0 < row.line).map(|t| t.0.to_string()))
                .collect::<Vec<_>>()
                .join("\t")
        };
        let mut starts: HashMap<String, f64> = HashMap::new();
        for row in &self.rows {
            if let Some((value, _)) = row.cells.get(time).and_then(Cell::number) {
                let start = starts.entry(key(row)).or_insert(value);
                *start = f64::min(*start, value);
            }
        }
        for row in &mut self.rows {
            let start = starts.get(&key(row)).copied().unwrap_or(0.0);
            if let Some(Cell { content: Content::Number { value, .. }, .. }) =
                row.cells.get_mut(time)
            {
                *value -= start;
            }
        }
    }

    /// Notes between rows are named: somebody may have meant them as rows.
    fn note_choice(&self) -> Option<Choice> {
        let (first, last) = (self.rows.first()?.line, self.rows.last()?.line);
        let mut lines = Lines::default();
        for (line, text) in self.notes.iter().filter(|(line, _)| *line > first && *line < last) {
            lines.count(*line, text);
        }
        let example = self
            .notes
            .iter()
            .find(|(line, _)| *line > first && *line < last)
            .map(|(_, text)| text.clone())?;
        let (are, notes) = if lines.count > 1 { ("are", "notes") } else { ("is", "a note") };
        let rows = lines.rows().replacen("row", "Row", 1);
        let sentence = format!("{rows} {are} taken as {notes} and not read (“{example}”).");
        Some(Choice::of_table(sentence))
    }
}

/// Temperatures that stand alone on a line above the first row.
fn titles_above(notes: &[(usize, String)]) -> Vec<(usize, Quantity)> {
    notes
        .iter()
        .filter_map(|(line, text)| Some((*line, header::temperature_alone(text)?)))
        .collect()
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::super::{ColumnHint, Form, Origin};
    use super::*;

    fn values(table: &Table, column: usize) -> Vec<Option<f64>> {
        table.rows.iter().map(|row| row.cells[column].number().map(|(value, _)| value)).collect()
    }

    #[test]
    fn slices_give_what_one_go_gives() {
        let mut text = "T/°C\tk, 1/h\n".to_string();
        for row in 0..500 {
            text.push_str(&format!("{}\t{}\n", 20 + row % 60, f64::from(row) * 1e-4 + 1e-3));
        }
        text.push_str("90\tbad\n");
        let whole = read_table(&text, &Hints::default());
        let mut reader = Reader::new(text.as_str(), Hints::default());
        let mut last = 0.0;
        while reader.read_rows(7) {
            assert!(reader.progress() >= last && reader.progress() <= 1.0);
            last = reader.progress();
        }
        assert_eq!(reader.progress(), 1.0);
        assert_eq!(reader.finish(), whole);
        assert_eq!((whole.rows.len(), whole.problems.len()), (501, 1));
    }

    #[test]
    fn hints_win() {
        let text = "a\tb\n1,234\t50\n2,345\t60\n";
        let columns = vec![
            ColumnHint {
                role: Some(Role::RateConstant),
                unit: Some("L mol⁻¹ s⁻¹".to_string()),
                multiplier: Some(1e-3),
            },
            ColumnHint {
                role: Some(Role::Temperature),
                unit: Some("°F".to_string()),
                multiplier: None,
            },
        ];
        let mut hints = Hints { columns, decimal: Some(Decimal::Comma), form: Some(Form::Rates) };
        let table = read_table(text, &hints);
        assert_eq!(table.columns[0].unit.as_deref(), Some("L/(mol s)"));
        assert_eq!(
            (table.columns[0].role_from, table.columns[0].unit_from),
            (Origin::Stated, Origin::Stated)
        );
        assert_eq!(values(&table, 0), [Some(0.001_234), Some(0.002_345)]);
        assert_eq!(table.columns[1].unit.as_deref(), Some("°F"));
        assert!(table.problems.is_empty() && table.choices.is_empty());
        hints.decimal = Some(Decimal::Point);
        assert_eq!(values(&read_table(text, &hints), 0), [Some(1.234), Some(2.345)]);
    }

    #[test]
    fn what_was_decided_can_be_stated_again_without_change() {
        let text = "T/°C\t10^4 k / s⁻¹\ts(k)\tnote\n50\t2.1\t0.1\tx\n60\t5.9\t0.3\ty\n";
        let first = read_table(text, &Hints::default());
        let stated = |column: &super::super::Column| ColumnHint {
            role: Some(column.role),
            unit: column.unit.clone(),
            multiplier: None,
        };
        let hints = Hints {
            columns: first.columns.iter().map(stated).collect(),
            decimal: Some(first.decimal),
            form: first.form,
        };
        let again = read_table(text, &hints);
        assert_eq!(again.rows, first.rows);
        assert!(again.problems.is_empty());
    }

    #[test]
    fn a_wrong_stated_unit_is_a_problem_and_the_header_counts() {
        let columns = vec![
            ColumnHint::default(),
            ColumnHint { unit: Some("furlong".to_string()), ..ColumnHint::default() },
        ];
        let table = read_table(
            "T/°C\tk, 1/h\n50\t0.0021\n60\t0.0059\n",
            &Hints { columns, ..Hints::default() },
        );
        assert_eq!(table.columns[1].unit.as_deref(), Some("1/h"));
        assert!(table.problems[0].sentence.contains("“furlong” is not a unit of rate constant"));
    }
}
