//! A record's parts as plain text and as HTML for a wiki.

use std::fmt::Write as _;

/// A part of a record.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Part {
    /// The title of all of it.
    Title(String),
    /// A heading.
    Heading(&'static str),
    /// A name and what is said of it.
    Entry(String, String),
    /// A sentence or more.
    Sentence(String),
    /// A table with its head.
    Table(Vec<String>, Vec<Vec<String>>),
    /// Text to the letter.
    Verbatim(String),
}

/// As plain text.
pub(super) fn text(parts: &[Part]) -> String {
    let mut text = String::new();
    for part in parts {
        match part {
            Part::Title(title) => underlined(&mut text, title, '='),
            Part::Heading(heading) => {
                text.push('\n');
                underlined(&mut text, heading, '-');
            }
            Part::Entry(name, value) => {
                let _ = writeln!(text, "{name}: {value}");
            }
            Part::Sentence(sentence) => {
                let _ = writeln!(text, "{sentence}");
            }
            Part::Table(head, rows) => table(&mut text, head, rows),
            Part::Verbatim(lines) => {
                for line in lines.lines() {
                    let _ = writeln!(text, "| {line}");
                }
            }
        }
    }
    text
}

fn underlined(text: &mut String, heading: &str, with: char) {
    let _ = writeln!(text, "{heading}");
    text.extend(std::iter::repeat_n(with, heading.chars().count()));
    text.push('\n');
}

/// Columns as wide as their widest cell, two spaces apart.
fn table(text: &mut String, head: &[String], rows: &[Vec<String>]) {
    let mut widths: Vec<usize> = head.iter().map(|cell| cell.chars().count()).collect();
    for row in rows {
        for (width, cell) in widths.iter_mut().zip(row) {
            *width = (*width).max(cell.chars().count());
        }
    }
    let mut line = |cells: &mut dyn Iterator<Item = &str>| {
        let mut line = String::from(" ");
        for (cell, width) in cells.zip(&widths) {
            let _ = write!(line, " {cell}");
            line.extend(std::iter::repeat_n(' ', width + 1 - cell.chars().count().min(*width)));
        }
        let _ = writeln!(text, "{}", line.trim_end());
    };
    line(&mut head.iter().map(String::as_str));
    for row in rows {
        line(&mut row.iter().map(String::as_str));
    }
}

/// As HTML: headings, a table of names and values, tables, and text to the letter, everything
/// escaped and without any style, for a wiki to dress.
pub(super) fn html(parts: &[Part]) -> String {
    let mut html = String::new();
    let mut in_entries = false;
    for part in parts {
        let is_entry = matches!(part, Part::Entry(..));
        if is_entry != in_entries {
            html.push_str(if is_entry { "<table><tbody>\n" } else { "</tbody></table>\n" });
            in_entries = is_entry;
        }
        let _ = match part {
            Part::Title(title) => writeln!(html, "<h1>{}</h1>", escaped(title)),
            Part::Heading(heading) => writeln!(html, "<h2>{}</h2>", escaped(heading)),
            Part::Entry(name, value) => {
                writeln!(html, "<tr><th>{}</th><td>{}</td></tr>", escaped(name), escaped(value))
            }
            Part::Sentence(sentence) => writeln!(html, "<p>{}</p>", escaped(sentence)),
            Part::Table(head, rows) => {
                let cells = |tag: &str, cells: &mut dyn Iterator<Item = &str>| {
                    cells
                        .map(|cell| format!("<{tag}>{}</{tag}>", escaped(cell)))
                        .collect::<String>()
                };
                let body: String = rows
                    .iter()
                    .map(|row| {
                        format!("<tr>{}</tr>\n", cells("td", &mut row.iter().map(String::as_str)))
                    })
                    .collect();
                let head = cells("th", &mut head.iter().map(String::as_str));
                writeln!(
                    html,
                    "<table><thead><tr>{head}</tr></thead><tbody>\n{body}</tbody></table>"
                )
            }
            Part::Verbatim(text) => writeln!(html, "<pre>{}</pre>", escaped(text)),
        };
    }
    if in_entries {
        html.push_str("</tbody></table>\n");
    }
    html
}

fn escaped(text: &str) -> String {
    text.replace('&', "&amp;")
        .replace('<', "&lt;")
        .replace('>', "&gt;")
        .replace('"', "&quot;")
        .replace('\'', "&#39;")
}

#[cfg(test)]
mod tests {
    use super::*;

    fn parts() -> Vec<Part> {
        vec![
            Part::Title("A & B".into()),
            Part::Heading("Measured"),
            Part::Entry("Form".into(), "rates".into()),
            Part::Entry("Left out".into(), "row 3".into()),
            Part::Sentence("Nothing else.".into()),
            Part::Table(vec!["row".into(), "T/K".into()], vec![vec!["2".into(), "323.15".into()]]),
            Part::Verbatim("<b>\n1\t2".into()),
        ]
    }

    #[test]
    fn text_lines_up() {
        let expected = "A & B\n=====\n\nMeasured\n--------\nForm: rates\nLeft out: row 3\n\
                        Nothing else.\n  row  T/K\n  2    323.15\n| <b>\n| 1\t2\n";
        assert_eq!(text(&parts()), expected);
    }

    #[test]
    fn html_escapes_and_closes_what_it_opens() {
        let html = html(&parts());
        assert!(html.contains("<h1>A &amp; B</h1>") && html.contains("<pre>&lt;b&gt;"));
        for tag in ["table", "tbody", "tr", "td", "th", "h1", "h2", "p", "pre"] {
            let count = |text: &str| html.matches(text).count();
            assert_eq!(count(&format!("<{tag}>")), count(&format!("</{tag}>")), "{tag}");
        }
    }
}
