//! Writes the table of simulated coverage: `cargo run --profile bench -p checks --bin calibrate`,
//! optionally with a number of replicates a cell (10 000 unless told). With words after the number
//! only the cells whose description has all of them are simulated, and printed: `calibrate 2000
//! "plus run-to-run" "two precise ends" "τ = 1"`.
//!
//! Every cell has its own fixed seed, so that the same build writes the same table.

use std::fmt::Write as _;

use checks::simulation::{Cell, Errors, Outcome, simulate};
use kinetics_core::temperature_law::ScatterChoice;

const SIZES: [usize; 4] = [3, 4, 6, 10];
const ERRORS: [Errors; 3] = [Errors::Equal, Errors::Unequal, Errors::PreciseEnds];
const TAUS: [f64; 3] = [0.0, 1.0, 3.0];
/// Each choice, its name, and where its own assumptions hold.
const CHOICES: [(ScatterChoice, &str, &str); 3] = [
    (
        ScatterChoice::AsStatedPlusRunToRun,
        "stated errors plus run-to-run scatter",
        "It takes for granted that stated errors are true and that runs may scatter besides, by how \
         much is not known. That is so in every row.",
    ),
    (
        ScatterChoice::AsStated,
        "as stated",
        "It takes for granted that stated errors are all there is. That is so where τ = 0. The rows \
         with τ = 1 and τ = 3 show what becomes of the intervals where it is not so.",
    ),
    (
        ScatterChoice::FromResiduals,
        "from the residuals",
        "It takes for granted that all runs scatter alike, by how much is not known. That is so where \
         stated errors are equal, whatever τ. The other rows show what becomes of the intervals \
         where it is not so.",
    ),
];
/// The rule that all intervals are held to.
const LOWEST: f64 = 0.94;

/// One simulated cell.
struct Row {
    seed: u64,
    cell: Cell,
    outcomes: Vec<Outcome>,
}

fn main() -> std::io::Result<()> {
    let mut arguments = std::env::args().skip(1);
    let replicates = arguments.next().and_then(|n| n.parse().ok()).unwrap_or(10_000);
    let words: Vec<String> = arguments.collect();
    let mut rows = rows();
    rows.retain(|row| words.iter().all(|word| description(&row.cell).contains(word)));
    fill(&mut rows, replicates);
    let text = document(&rows, replicates);
    if !words.is_empty() {
        print!("{text}");
        return Ok(());
    }
    let path = concat!(env!("CARGO_MANIFEST_DIR"), "/../kinetics-core/docs/coverage.md");
    if let Some(folder) = std::path::Path::new(path).parent() {
        std::fs::create_dir_all(folder)?;
    }
    std::fs::write(path, text)
}

fn rows() -> Vec<Row> {
    let mut rows = Vec::new();
    for (scatter, ..) in CHOICES {
        for runs in SIZES {
            for errors in ERRORS {
                for tau in TAUS {
                    rows.push(Row {
                        seed: 1 + rows.len() as u64,
                        cell: Cell { runs, errors, tau, scatter },
                        outcomes: Vec::new(),
                    });
                }
            }
        }
    }
    rows
}

/// A cell in words.
fn description(cell: &Cell) -> String {
    let named = CHOICES.iter().find(|(scatter, ..)| *scatter == cell.scatter);
    let scatter = named.map_or("", |(_, name, _)| name);
    format!("{scatter}, {} runs, {}, τ = {}", cell.runs, cell.errors.name(), cell.tau)
}

/// Simulates the cells on every processor.
fn fill(rows: &mut [Row], replicates: usize) {
    let workers = std::thread::available_parallelism().map_or(1, usize::from);
    let queue = std::sync::Mutex::new(rows.iter_mut());
    // The lock is let go before the cell is simulated.
    let next = || queue.lock().ok()?.next();
    std::thread::scope(|scope| {
        for _ in 0..workers {
            scope.spawn(|| {
                while let Some(row) = next() {
                    row.outcomes = simulate(&row.cell, replicates, row.seed);
                    eprintln!("{}", description(&row.cell));
                }
            });
        }
    });
}

fn document(rows: &[Row], replicates: usize) -> String {
    let mut text = format!(
        "# Do the intervals cover what they claim?\n\n\
         Written by `cargo run --profile bench -p checks --bin calibrate`; {replicates} simulated studies \
         a cell, fixed seeds. Runs evenly from 50 to 80 °C, Ea = 85 kJ/mol, typical stated error 5 % \
         of k. τ is the true run-to-run scatter in units of the typical stated error. *Log-normal*: \
         stated errors spread by a factor of e about the typical one; *two precise ends*: the coldest \
         and the hottest run are ten times as precise as the rest.\n\n\
         Each entry: share of 95 % intervals (or 95 % bounds) that do not miss the truth, and mean \
         width ÷ that of an oracle which knows every variance. The Monte-Carlo standard error of a \
         share of 0.95 is {:.4}. An answer that sets no limit holds the truth, and a refusal, where \
         the activation energy may be zero, claims nothing: neither misses, and neither has a width. \
         Where there are such, the share of studies with limits is given in brackets. Widths are \
         taken on ln of the time, rate or ratio, in K for temperatures, and on ln(−ln(1 − X)) for \
         an extent X, which is read as 1 − 2·10⁻¹⁶ where it rounds to 1.\n\n\
         Questions ask 25 to 30 K below the coldest run or 8 K above the hottest. Where to measure \
         next has no interval: it recommends and claims none.\n\n\
         The rule: no share below {LOWEST:.2} where the choice's own assumptions hold.\n",
        (0.95_f64 * 0.05 / replicates as f64).sqrt()
    );
    for (scatter, name, assumptions) in CHOICES {
        let rows: Vec<&Row> = rows.iter().filter(|row| row.cell.scatter == scatter).collect();
        let Some(first) = rows.first() else { continue };
        let _ = writeln!(text, "\n## Scatter: {name}\n\n{assumptions} {}\n", verdict(&rows));
        let headers: Vec<&str> = first.outcomes.iter().map(|o| o.question.as_str()).collect();
        let _ = writeln!(text, "| runs | stated errors | τ | {} |", headers.join(" | "));
        let _ = writeln!(text, "|{}", " --- |".repeat(headers.len() + 3));
        for Row { cell, outcomes, .. } in rows {
            let entries: Vec<String> = outcomes.iter().map(|o| entry(o, replicates)).collect();
            let (errors, entries) = (cell.errors.name(), entries.join(" | "));
            let _ = writeln!(text, "| {} | {errors} | {} | {entries} |", cell.runs, cell.tau);
        }
    }
    text
}

/// The lowest coverage where a choice's assumptions hold, and what lies below the rule.
fn verdict(rows: &[&Row]) -> String {
    let mut held: Vec<(&Cell, &Outcome)> = rows
        .iter()
        .filter(|row| row.cell.assumptions_hold())
        .flat_map(|row| row.outcomes.iter().map(|outcome| (&row.cell, outcome)))
        .collect();
    held.sort_by(|a, b| a.1.coverage.total_cmp(&b.1.coverage));
    let Some((cell, lowest)) = held.first() else { return String::new() };
    let place = |cell: &Cell, outcome: &Outcome| {
        let errors = cell.errors.name();
        format!("{} ({} runs, {errors}, τ = {})", outcome.question, cell.runs, cell.tau)
    };
    let below: Vec<String> = held
        .iter()
        .take_while(|(_, outcome)| outcome.coverage < LOWEST)
        .map(|(cell, outcome)| format!("{:.4} for {}", outcome.coverage, place(cell, outcome)))
        .collect();
    let lowest = format!(
        "The lowest share among these {} is {:.4}, for {}",
        held.len(),
        lowest.coverage,
        place(cell, lowest)
    );
    if below.is_empty() {
        format!("{lowest}; none is below {LOWEST:.2}.")
    } else {
        format!("{lowest}. Below {LOWEST:.2} are {}: {}.", below.len(), below.join("; "))
    }
}

fn entry(outcome: &Outcome, replicates: usize) -> String {
    let answered = outcome.answered as f64 / replicates as f64;
    let share = if answered < 0.9995 { format!(" ({answered:.2})") } else { String::new() };
    format!("{:.3}, {:.1}{share}", outcome.coverage, outcome.width / outcome.oracle_width)
}
