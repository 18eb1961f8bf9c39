//! Ways of cutting a header into name and unit, and a line into headers.

use super::multiplier::leading_power;
use super::read;

/// Most words of a header line that is cut by sense.
const MOST_WORDS: usize = 30;
/// Most words of one header in it.
const LONGEST_PIECE: usize = 8;

/// A name and what may be its unit.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Way {
    pub name: String,
    pub unit: String,
    /// Only a space stands between them.
    pub by_space: bool,
}

impl Way {
    fn new(name: &str, unit: &str) -> Way {
        Way { name: name.to_string(), unit: unit.to_string(), by_space: false }
    }
}

/// Ways of cutting a header, the most telling first: brackets, a slash, a
/// comma, "in", a space.
pub(super) fn ways(header: &str) -> Vec<Way> {
    let mut ways = Vec::new();
    if let Some((open, close)) = last_bracket(header) {
        let (before, inside, after) =
            (&header[..open], &header[open + 1..close], &header[close + 1..]);
        let before = before.trim_end().trim_end_matches(['/', ',', ';']).trim_end();
        let inside = inside.trim();
        let power = leading_power(inside.trim_start_matches(['×', '·', '*', ' ', 'x']));
        if power.is_some_and(|(size, rest)| rest.is_empty() && size != 1.0) {
            // "k / s⁻¹ (×10⁴)": the bracket holds a factor alone.
            let factor = inside.trim_start_matches(['×', '·', '*', ' ', 'x']);
            ways.extend(
                self::ways(before)
                    .into_iter()
                    .map(|way| Way { name: format!("{} × {factor}", way.name), ..way }),
            );
        } else {
            ways.push(Way::new(format!("{before} {after}").trim(), inside));
        }
    }
    let mut depth = 0_usize;
    let mut commas = Vec::new();
    for (at, character) in header.char_indices() {
        match character {
            '(' | '[' | '{' => depth += 1,
            ')' | ']' | '}' => depth = depth.saturating_sub(1),
            '/' | '⁄' | '∕' if depth == 0 && at > 0 => {
                ways.push(Way::new(&header[..at], &header[at + character.len_utf8()..]));
            }
            ',' | ';' | ':' if depth == 0 => commas.push(at),
            _ => {}
        }
    }
    for at in commas.into_iter().rev() {
        ways.push(Way::new(&header[..at], &header[at + 1..]));
    }
    if let Some((name, unit)) = header.rsplit_once(" in ") {
        ways.push(Way::new(name, unit));
    }
    for (at, _) in header.match_indices(' ') {
        ways.push(Way { by_space: true, ..Way::new(&header[..at], &header[at + 1..]) });
    }
    // "T°C", "TempC" is too daring, but a degree sign is clear.
    if let Some(at) = header.find('°').filter(|at| *at > 0) {
        ways.push(Way::new(&header[..at], &header[at..]));
    }
    ways.retain(|way| !way.unit.trim().is_empty());
    ways
}

/// The last pair of brackets that is not inside another, by byte.
fn last_bracket(text: &str) -> Option<(usize, usize)> {
    let mut depth = 0_usize;
    let mut start = 0;
    let mut last = None;
    for (at, character) in text.char_indices() {
        match character {
            '(' | '[' | '{' => {
                if depth == 0 {
                    start = at;
                }
                depth += 1;
            }
            ')' | ']' | '}' if depth > 0 => {
                depth -= 1;
                if depth == 0 {
                    last = Some((start, at));
                }
            }
            _ => {}
        }
    }
    last.filter(|(open, _)| *open > 0)
}

/// Cuts a line of headers that are set apart by spaces into as many as there
/// are columns: at wide gaps, else at every space, else where the pieces make
/// most sense, so that `T / °C k / h⁻¹` gives two.
pub(in crate::table) fn cut_line(line: &str, columns: usize) -> Option<Vec<String>> {
    let wide: Vec<String> = wide_pieces(line);
    if wide.len() == columns {
        return Some(wide);
    }
    let words: Vec<&str> = line.split_whitespace().collect();
    if words.len() == columns {
        return Some(words.into_iter().map(str::to_string).collect());
    }
    if words.len() < columns || words.len() > MOST_WORDS || columns == 0 {
        return None;
    }
    by_sense(&words, columns)
}

fn wide_pieces(line: &str) -> Vec<String> {
    let mut pieces = Vec::new();
    let mut piece = String::new();
    let mut gap = 0;
    for character in line.trim().chars() {
        if character.is_whitespace() {
            gap += if character == '\t' { 2 } else { 1 };
            continue;
        }
        if gap >= 2 {
            pieces.push(std::mem::take(&mut piece));
        } else if gap == 1 {
            piece.push(' ');
        }
        gap = 0;
        piece.push(character);
    }
    pieces.push(piece);
    pieces
}

/// The best cut by dynamic programming: best[j][n] is the best score of the
/// first j words in n pieces.
fn by_sense(words: &[&str], columns: usize) -> Option<Vec<String>> {
    let count = words.len();
    let longest = (count - columns + 1).min(LONGEST_PIECE);
    let mut best: Vec<Vec<Option<(u32, usize)>>> = vec![vec![None; columns + 1]; count + 1];
    best[0][0] = Some((0, 0));
    for end in 1..=count {
        for start in end.saturating_sub(longest)..end {
            let piece = words.get(start..end)?.join(" ");
            let reading = read(&piece, "");
            let known = reading.role.is_some() || reading.run_temperature.is_some();
            let score = u32::from(known) * 2 + u32::from(reading.unit.is_some()) * 2;
            for pieces in 1..=columns.min(end) {
                if let Some((before, _)) = best[start][pieces - 1] {
                    let total = before + score;
                    if best[end][pieces].is_none_or(|(known, _)| total > known) {
                        best[end][pieces] = Some((total, start));
                    }
                }
            }
        }
    }
    let (score, _) = best[count][columns]?;
    if score < columns as u32 * 2 {
        return None;
    }
    let mut pieces = Vec::with_capacity(columns);
    let mut end = count;
    for left in (1..=columns).rev() {
        let (_, start) = best[end][left]?;
        pieces.push(words.get(start..end)?.join(" "));
        end = start;
    }
    pieces.reverse();
    Some(pieces)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn cut(line: &str, columns: usize) -> Vec<String> {
        cut_line(line, columns).unwrap_or_default()
    }

    #[test]
    fn lines_of_headers_are_cut_by_gaps_words_or_sense() {
        assert_eq!(cut("T / °C   k / h⁻¹", 2), ["T / °C", "k / h⁻¹"]);
        assert_eq!(cut("T k s(k)", 3), ["T", "k", "s(k)"]);
        assert_eq!(cut("T / °C k / h⁻¹", 2), ["T / °C", "k / h⁻¹"]);
        assert_eq!(cut("T / °C k / L mol⁻¹ s⁻¹ s(k)", 3), ["T / °C", "k / L mol⁻¹ s⁻¹", "s(k)"]);
        assert_eq!(cut("T (K) 10^4 k (s-1)", 2), ["T (K)", "10^4 k (s-1)"]);
        assert!(cut("Measured by hand in oven two", 2).is_empty());
        assert!(cut("T", 2).is_empty());
    }
}
