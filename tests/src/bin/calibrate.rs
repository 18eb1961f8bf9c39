//! Writes the table of simulated coverage: `cargo run --profile bench -p checks --bin calibrate`,
//! optionally with a number of replicates a cell (10 000 unless told).
//!
//! Every cell has its own fixed seed, so that the same build writes the same table.

use std::fmt::Write as _;

use checks::simulation::{Cell, Errors, Outcome, simulate};
use kinetics_core::temperature_law::ScatterChoice;

const SIZES: [usize; 4] = [3, 4, 6, 10];
const ERRORS: [Errors; 3] = [Errors::Equal, Errors::Unequal, Errors::PreciseEnds];
const TAUS: [f64; 3] = [0.0, 1.0, 3.0];
const CHOICES: [(ScatterChoice, &str); 3] = [
    (ScatterChoice::AsStatedPlusRunToRun, "stated errors plus run-to-run scatter"),
    (ScatterChoice::AsStated, "as stated"),
    (ScatterChoice::FromResiduals, "from the residuals"),
];

fn main() -> std::io::Result<()> {
    let replicates = std::env::args().nth(1).and_then(|n| n.parse().ok()).unwrap_or(10_000);
    let cells: Vec<(usize, Cell)> = CHOICES
        .iter()
        .flat_map(|(scatter, _)| {
            SIZES.iter().flat_map(move |runs| {
                ERRORS.iter().flat_map(move |errors| {
                    TAUS.iter().map(move |tau| Cell {
                        runs: *runs,
                        errors: *errors,
                        tau: *tau,
                        scatter: *scatter,
                    })
                })
            })
        })
        .enumerate()
        .collect();
    let next = std::sync::atomic::AtomicUsize::new(0);
    let results = std::sync::Mutex::new(vec![Vec::new(); cells.len()]);
    let workers = std::thread::available_parallelism().map_or(1, usize::from);
    std::thread::scope(|scope| {
        for _ in 0..workers {
            scope.spawn(|| {
                loop {
                    let at = next.fetch_add(1, std::sync::atomic::Ordering::Relaxed);
                    let Some((seed, cell)) = cells.get(at) else { break };
                    let outcomes = simulate(cell, replicates, 1 + *seed as u64);
                    if let Ok(mut results) = results.lock() {
                        results[at] = outcomes;
                    }
                    eprintln!("{}/{}", at + 1, cells.len());
                }
            });
        }
    });
    let results = results.into_inner().unwrap_or_default();
    let table = table(&cells, &results, replicates);
    let path = concat!(env!("CARGO_MANIFEST_DIR"), "/../kinetics-core/docs/coverage.md");
    if let Some(folder) = std::path::Path::new(path).parent() {
        std::fs::create_dir_all(folder)?;
    }
    std::fs::write(path, table)
}

fn table(cells: &[(usize, Cell)], results: &[Vec<Outcome>], replicates: usize) -> String {
    let mut text = format!(
        "# Do the intervals cover what they claim?\n\n\
         Written by `cargo run --profile bench -p checks --bin calibrate`; {replicates} simulated studies \
         a cell, fixed seeds. Runs evenly from 50 to 80 °C, Ea = 85 kJ/mol, typical stated error 5 % \
         of k. τ is the true run-to-run scatter in units of the typical stated error. Each entry: \
         share of 95 % intervals (or 95 % bounds) that cover the truth, and mean width ÷ that of an \
         oracle which knows every variance. The Monte-Carlo standard error of a share of 0.95 is \
         {:.4}.\n\nQuestions ask 25 to 30 K below the coldest run or 8 K above the hottest. \
         An answer that bounds nothing, or is refused because the activation energy may be zero, is \
         not counted; where that happens the share of answered studies is given in brackets.\n",
        (0.95_f64 * 0.05 / replicates as f64).sqrt()
    );
    for (scatter, name) in CHOICES {
        let _ = writeln!(text, "\n## Scatter: {name}\n");
        let rows: Vec<(&Cell, &Vec<Outcome>)> = cells
            .iter()
            .map(|(_, cell)| cell)
            .zip(results)
            .filter(|(cell, _)| cell.scatter == scatter)
            .collect();
        let Some((_, first)) = rows.first() else { continue };
        let headers: Vec<&str> = first.iter().map(|o| o.question.as_str()).collect();
        let _ = writeln!(text, "| runs | stated errors | τ | {} |", headers.join(" | "));
        let _ = writeln!(text, "|{}", " --- |".repeat(headers.len() + 3));
        for (cell, outcomes) in rows {
            let errors = match cell.errors {
                Errors::Equal => "equal",
                Errors::Unequal => "log-normal",
                Errors::PreciseEnds => "two precise ends",
            };
            let entries: Vec<String> = outcomes.iter().map(|o| entry(o, replicates)).collect();
            let _ = writeln!(
                text,
                "| {} | {errors} | {} | {} |",
                cell.runs,
                cell.tau,
                entries.join(" | ")
            );
        }
    }
    text
}

fn entry(outcome: &Outcome, replicates: usize) -> String {
    let answered = outcome.answered as f64 / replicates as f64;
    let share = if answered < 0.9995 { format!(" ({answered:.2})") } else { String::new() };
    format!("{:.3}, {:.1}{share}", outcome.coverage, outcome.width / outcome.oracle_width)
}
