//! Cuts a text into records and fields without copying it.
//!
//! Lines end in LF, CR LF or CR. A field may be quoted, and a quoted field may
//! run over several lines (a spreadsheet's line break within a cell); a quote
//! that is not closed nearby, or not before a separator, is an ordinary
//! character, so that one stray `"` cannot swallow the text. Lines keep their
//! physical number.

use std::ops::Range;

use super::separator::Separator;

/// A line longer than this many bytes is not read.
pub const LONGEST_LINE: usize = 65_536;

/// A record with more fields than this is not read.
pub const MOST_FIELDS: usize = 200;

/// How far the closing quote may be.
const LONGEST_QUOTED: usize = 2_000;

/// One record: usually one line.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Record {
    /// Number of its first line, from 1.
    pub line: usize,
    /// How many lines it covers.
    pub lines: usize,
    /// Where it stands, without the line end.
    pub span: Range<usize>,
    /// Where each field stands: trimmed, inside its quotes.
    pub fields: Vec<Range<usize>>,
    /// Longer than [`LONGEST_LINE`], or more than [`MOST_FIELDS`]: not cut.
    pub too_long: bool,
}

impl Record {
    /// The text of a field; empty beyond the last.
    #[must_use]
    pub fn field<'text>(&self, text: &'text str, index: usize) -> &'text str {
        self.fields.get(index).and_then(|span| text.get(span.clone())).unwrap_or("")
    }

    /// How many fields are not empty.
    #[must_use]
    pub fn filled(&self) -> usize {
        self.fields.iter().filter(|span| !span.is_empty()).count()
    }
}

/// Walks through a text record by record.
#[derive(Clone, Debug)]
pub struct Records {
    separator: Separator,
    at: usize,
    line: usize,
}

impl Records {
    /// Starts at the top, after a byte order mark.
    #[must_use]
    pub fn new(text: &str, separator: Separator) -> Records {
        let at = if text.starts_with('\u{feff}') { '\u{feff}'.len_utf8() } else { 0 };
        Records { separator, at, line: 1 }
    }

    /// How many bytes have been read.
    #[must_use]
    pub const fn position(&self) -> usize {
        self.at
    }

    /// The next record, blank ones included; none at the end.
    pub fn next(&mut self, text: &str) -> Option<Record> {
        if self.at >= text.len() {
            return None;
        }
        let bytes = text.as_bytes();
        let (mut end, mut next) = line_end(bytes, self.at);
        let mut record =
            Record { line: self.line, lines: 1, span: self.at..end, ..Record::default() };
        if end - self.at > LONGEST_LINE {
            record.too_long = true;
        } else if let Some(mark) = self.separator.byte() {
            let mut at = self.at;
            loop {
                let (field, after, lines) = delimited_field(text, at, end, mark);
                if lines > 0 {
                    record.lines += lines;
                    (end, next) = line_end(bytes, after);
                    record.span.end = end;
                }
                record.fields.push(field);
                if after >= end {
                    break;
                }
                at = after + 1;
                if record.fields.len() > MOST_FIELDS {
                    record.too_long = true;
                    break;
                }
            }
            self.separator.drop_edges(text, &mut record);
        } else {
            self.separator.cut_spaces(text, &mut record);
            record.too_long = record.fields.len() > MOST_FIELDS;
        }
        self.at = next;
        self.line += record.lines;
        Some(record)
    }
}

/// End of the line that starts at `from`, and start of the next.
fn line_end(bytes: &[u8], from: usize) -> (usize, usize) {
    let rest = bytes.get(from..).unwrap_or_default();
    match rest.iter().position(|byte| matches!(byte, b'\n' | b'\r')) {
        None => (bytes.len(), bytes.len()),
        Some(length) => {
            let end = from + length;
            let two = bytes.get(end) == Some(&b'\r') && bytes.get(end + 1) == Some(&b'\n');
            (end, end + if two { 2 } else { 1 })
        }
    }
}

/// The field from `at`: its span, where its separator (or the line end) stands,
/// and how many line ends it contains.
fn delimited_field(text: &str, at: usize, end: usize, mark: u8) -> (Range<usize>, usize, usize) {
    let bytes = text.as_bytes();
    let is_space = |byte: &u8| *byte == b' ' || (*byte == b'\t' && mark != b'\t');
    let skip_spaces = |mut from: usize| {
        while bytes.get(from).is_some_and(is_space) {
            from += 1;
        }
        from
    };
    let start = skip_spaces(at);
    if start < end
        && bytes.get(start) == Some(&b'"')
        && let Some(close) = closing_quote(bytes, start)
    {
        let after = skip_spaces(close + 1);
        let at_end = matches!(bytes.get(after), None | Some(b'\n' | b'\r'));
        if at_end || bytes.get(after) == Some(&mark) {
            let inside = bytes.get(start + 1..close).unwrap_or_default();
            let breaks = inside.iter().filter(|byte| **byte == b'\n').count();
            let returns = inside.iter().filter(|byte| **byte == b'\r').count();
            return (trimmed(text, start + 1..close), after, breaks.max(returns));
        }
    }
    let rest = bytes.get(at..end).unwrap_or_default();
    let stop = rest.iter().position(|byte| *byte == mark).map_or(end, |length| at + length);
    (trimmed(text, at..stop), stop, 0)
}

/// The quote that closes the one at `open`; a doubled quote is part of the field.
fn closing_quote(bytes: &[u8], open: usize) -> Option<usize> {
    let mut at = open + 1;
    let last = open + LONGEST_QUOTED;
    while at < last {
        if bytes.get(at)? == &b'"' {
            if bytes.get(at + 1) != Some(&b'"') {
                return Some(at);
            }
            at += 1;
        }
        at += 1;
    }
    None
}

/// The same span without white space at its ends.
pub(super) fn trimmed(text: &str, span: Range<usize>) -> Range<usize> {
    let Some(inside) = text.get(span.clone()) else { return span.start..span.start };
    let begins = inside.trim_start_matches(super::is_blank);
    let start = span.end - begins.len();
    start..start + begins.trim_end_matches(super::is_blank).len()
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    fn cut(text: &str, separator: Separator) -> Vec<(usize, Vec<String>)> {
        let mut records = Records::new(text, separator);
        let mut all = Vec::new();
        while let Some(record) = records.next(text) {
            let fields =
                (0..record.fields.len()).map(|index| record.field(text, index).to_string());
            all.push((record.line, fields.collect()));
        }
        all
    }

    fn plain(text: &str, separator: Separator) -> Vec<Vec<String>> {
        cut(text, separator).into_iter().map(|(_, fields)| fields).collect()
    }

    #[test]
    fn all_line_ends_and_the_byte_order_mark() {
        for text in ["\u{feff}a\tb\nc\td\n", "a\tb\r\nc\td\r\n", "a\tb\rc\td"] {
            assert_eq!(
                cut(text, Separator::Tab),
                [(1, vec!["a".into(), "b".into()]), (2, vec!["c".into(), "d".into()])]
            );
        }
        let blank: Vec<usize> =
            cut("a,b\n\n\nc,d", Separator::Comma).iter().map(|(line, _)| *line).collect();
        assert_eq!(blank, [1, 2, 3, 4]);
    }

    #[test]
    fn quotes_keep_separators_and_line_breaks() {
        assert_eq!(plain("\"50,0\", \"0,0021\" ,x", Separator::Comma), [["50,0", "0,0021", "x"]]);
        assert_eq!(
            cut("\"k\n(1/h)\"\tT\n1\t2", Separator::Tab),
            [(1, vec!["k\n(1/h)".to_string(), "T".into()]), (3, vec!["1".into(), "2".into()])]
        );
        assert_eq!(plain("\"say \"\"no\"\"\",2", Separator::Comma), [["say \"\"no\"\"", "2"]]);
    }

    #[test]
    fn a_stray_quote_swallows_nothing() {
        assert_eq!(plain("\"a,b\nc,d\n", Separator::Comma), [["\"a", "b"], ["c", "d"]]);
        assert_eq!(
            plain("5\" pipe,1\n6\" pipe,2", Separator::Comma),
            [["5\" pipe", "1"], ["6\" pipe", "2"]]
        );
        assert_eq!(plain("\"a\" b,1", Separator::Comma), [["\"a\" b", "1"]]);
    }

    #[test]
    fn spans_point_into_the_text() {
        let text = "T\tk\n 50 \t0.0021";
        let mut records = Records::new(text, Separator::Tab);
        records.next(text).unwrap();
        let record = records.next(text).unwrap();
        assert_eq!(&text[record.fields[0].clone()], "50");
        assert_eq!(record.fields[0], 5..7);
    }

    #[test]
    fn monstrous_lines_are_not_cut() {
        let line = "1,".repeat(2_500_000);
        let mut records = Records::new(&line, Separator::Comma);
        let record = records.next(&line).unwrap();
        assert!(record.too_long && record.fields.is_empty());
        let wide = "1,".repeat(300);
        assert!(Records::new(&wide, Separator::Comma).next(&wide).unwrap().too_long);
    }
}
