//! A short, seeded run of the calibration: intervals cover what they claim where the scatter
//! choice's own assumptions hold. The full table is `kinetics-core/docs/coverage.md`.

use checks::simulation::{Cell, Errors, simulate};
use kinetics_core::temperature_law::ScatterChoice;

const REPLICATES: usize = 400;
/// The rule is 0.94 at 10 000 replicates; 400 have a Monte-Carlo standard error of 0.012 there,
/// and three of those below lies what a sound interval does not fall under.
const LOWEST: f64 = 0.94 - 3.0 * 0.012;

fn covers(cell: Cell, seed: u64) {
    for outcome in simulate(&cell, REPLICATES, seed) {
        assert!(outcome.answered > REPLICATES / 4, "{cell:?} {outcome:?}");
        assert!(outcome.coverage >= LOWEST, "{cell:?} {outcome:?}");
    }
}

#[test]
fn averaged_intervals_cover_with_and_without_run_to_run_scatter() {
    let scatter = ScatterChoice::AsStatedPlusRunToRun;
    for (i, tau) in [0.0, 1.0, 3.0].into_iter().enumerate() {
        covers(Cell { runs: 4, errors: Errors::Equal, tau, scatter }, 11 + i as u64);
        covers(Cell { runs: 6, errors: Errors::Unequal, tau, scatter }, 21 + i as u64);
    }
}

#[test]
fn stated_errors_cover_when_they_are_all_there_is() {
    let scatter = ScatterChoice::AsStated;
    covers(Cell { runs: 3, errors: Errors::Equal, tau: 0.0, scatter }, 31);
    covers(Cell { runs: 6, errors: Errors::PreciseEnds, tau: 0.0, scatter }, 32);
}

#[test]
fn residuals_cover_when_all_runs_scatter_alike() {
    let scatter = ScatterChoice::FromResiduals;
    covers(Cell { runs: 4, errors: Errors::Equal, tau: 1.0, scatter }, 41);
    covers(Cell { runs: 10, errors: Errors::Equal, tau: 0.0, scatter }, 42);
}

/// The harness can fail: stated errors alone do not cover when runs scatter three times as much.
#[test]
fn stated_errors_do_not_cover_when_runs_scatter_more() {
    let cell = Cell { runs: 6, errors: Errors::Equal, tau: 3.0, scatter: ScatterChoice::AsStated };
    let outcomes = simulate(&cell, REPLICATES, 51);
    let time = outcomes.iter().find(|o| o.question == "time-to-extent").unwrap();
    assert!(time.coverage < 0.75, "{time:?}");
}
