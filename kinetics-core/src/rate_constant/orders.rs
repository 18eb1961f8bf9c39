//! Which order of reaction the runs allow: usual orders ranked by AICc, and a free order with its
//! profile-likelihood interval.

use super::{Level, NoRate, RunFit, Settings, fit_runs};
use crate::measurements::ProgressRun;
use crate::numeric::distributions::student_t_quantile;
use crate::numeric::roots::secant_crossing;
use crate::rate_law::{Order, RateLaw};

/// The orders that are tried.
pub const USUAL_ORDERS: [f64; 5] = [0.0, 0.5, 1.0, 1.5, 2.0];

/// An order fitted to all runs.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RankedOrder {
    /// n.
    pub order: f64,
    /// AICc above the best order's; none where there are too few points to rank.
    pub delta_aicc: Option<f64>,
    /// Σ w r² of all runs.
    pub weighted_sum_of_squares: f64,
}

/// The order that fits best, and the interval that the data allow.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FreeOrder {
    /// Best n within [`FREE_RANGE`].
    pub order: f64,
    /// Lower limit; none where the data allow the lowest order tried.
    pub low: Option<f64>,
    /// Upper limit; none where the data allow the highest order tried.
    pub high: Option<f64>,
    /// Σ w r² at the best n.
    pub weighted_sum_of_squares: f64,
}

/// Orders within which a free one is sought.
pub const FREE_RANGE: (f64, f64) = (0.0, 4.0);

/// What all runs together leave unexplained at one order.
struct Total {
    squares: f64,
    points: usize,
    parameters: usize,
}

/// All runs at order n; none where one of them has no minimum there.
fn total(runs: &[ProgressRun], settings: &Settings, order: f64) -> Option<Total> {
    let law = RateLaw::Order(Order::new(order)?);
    total_under(runs, &Settings { law, ..*settings })
}

fn total_under(runs: &[ProgressRun], settings: &Settings) -> Option<Total> {
    let outcomes: Vec<Result<RunFit, NoRate>> = fit_runs(runs, settings);
    let mut total = Total { squares: 0.0, points: 0, parameters: 0 };
    for outcome in outcomes {
        let fit = outcome.ok()?;
        total.squares += fit.weighted_sum_of_squares;
        total.points += fit.residuals.len();
    }
    let free = |level: Level| match level {
        Level::Free => runs.len(),
        Level::Shared => 1,
        Level::Given(_) => 0,
    };
    total.parameters = runs.len() + free(settings.start) + free(settings.end);
    Some(total)
}

/// Usual orders, the best first. AICc counts the variance of the noise among the parameters and
/// is undefined for K + 1 points and fewer (Burnham & Anderson, Model Selection and Multimodel
/// Inference, 2nd ed. 2002, §2.4); stated errors leave no variance to find.
pub fn compare_orders(runs: &[ProgressRun], settings: &Settings) -> Vec<RankedOrder> {
    let stated = runs.iter().all(ProgressRun::states_errors);
    let mut found: Vec<(RankedOrder, Option<f64>)> = USUAL_ORDERS
        .iter()
        .filter_map(|order| {
            let total = total(runs, settings, *order)?;
            let ranked = RankedOrder {
                order: *order,
                delta_aicc: None,
                weighted_sum_of_squares: total.squares,
            };
            Some((ranked, aicc(&total, stated)))
        })
        .collect();
    let best = found.iter().filter_map(|(_, aicc)| *aicc).fold(f64::INFINITY, f64::min);
    for (ranked, aicc) in &mut found {
        ranked.delta_aicc = aicc.map(|aicc| aicc - best).filter(|delta| delta.is_finite());
    }
    let mut ranked: Vec<RankedOrder> = found.into_iter().map(|(ranked, _)| ranked).collect();
    ranked.sort_by(|a, b| a.weighted_sum_of_squares.total_cmp(&b.weighted_sum_of_squares));
    ranked
}

/// AICc of all runs under these settings; none where it is undefined or a run has no minimum.
pub fn aicc_of(runs: &[ProgressRun], settings: &Settings) -> Option<f64> {
    aicc(&total_under(runs, settings)?, runs.iter().all(ProgressRun::states_errors))
}

fn aicc(total: &Total, stated: bool) -> Option<f64> {
    let (n, k) = (total.points as f64, (total.parameters + usize::from(!stated)) as f64);
    if n - k - 1.0 <= 0.0 {
        return None;
    }
    let twice_ln = if stated { total.squares } else { n * libm::log(total.squares / n) };
    Some(twice_ln + 2.0 * k + 2.0 * k * (k + 1.0) / (n - k - 1.0))
}

/// The order at which the runs leave least unexplained, and those that Σ w r² does not exclude:
/// Σ(n) ≤ Σ_min (1 + t²/ν) (Bates & Watts, Nonlinear Regression Analysis, 1988, §6.1). None where
/// there is nothing to judge by.
pub fn free_order(runs: &[ProgressRun], settings: &Settings, level: f64) -> Option<FreeOrder> {
    let (lowest, highest) = FREE_RANGE;
    let squares = |order: f64| total(runs, settings, order).map_or(f64::INFINITY, |t| t.squares);
    // A ladder finds the valley, golden sections its bottom.
    let ladder: Vec<(f64, f64)> = (0..=16)
        .map(|step| lowest + (highest - lowest) * f64::from(step) / 16.0)
        .map(|order| (order, squares(order)))
        .collect();
    let (at, _) = *ladder.iter().min_by(|a, b| a.1.total_cmp(&b.1))?;
    let rung = (highest - lowest) / 16.0;
    let order = lowest_point(&squares, (at - rung).max(lowest), (at + rung).min(highest));
    let best = total(runs, settings, order)?;
    let stated = runs.iter().all(ProgressRun::states_errors);
    let freedom = best.points.checked_sub(best.parameters + 1).filter(|nu| *nu > 0)? as f64;
    let quantile = student_t_quantile(0.5 * (1.0 + level), freedom);
    let allowed = if stated {
        let normal = crate::numeric::distributions::normal_quantile(0.5 * (1.0 + level));
        best.squares + normal * normal
    } else {
        best.squares * (1.0 + quantile * quantile / freedom)
    };
    let limit = |end: f64| {
        let gap = |share: f64| squares(order + share * (end - order)).min(1e3 * allowed);
        (gap(1.0) > allowed)
            .then(|| order + (end - order) * secant_crossing(gap, allowed, 0.0, 1.0, 1e-6))
    };
    Some(FreeOrder {
        order,
        low: limit(lowest),
        high: limit(highest),
        weighted_sum_of_squares: best.squares,
    })
}

/// The lowest point of a function with one valley, to 1e-5 of the bracket.
fn lowest_point(function: &dyn Fn(f64) -> f64, low: f64, high: f64) -> f64 {
    const GOLDEN: f64 = 0.618_033_988_749_895;
    let (mut low, mut high) = (low, high);
    let mut inner = high - GOLDEN * (high - low);
    let mut outer = low + GOLDEN * (high - low);
    let (mut at_inner, mut at_outer) = (function(inner), function(outer));
    for _ in 0..24 {
        if at_inner <= at_outer {
            high = outer;
            (outer, at_outer) = (inner, at_inner);
            inner = high - GOLDEN * (high - low);
            at_inner = function(inner);
        } else {
            low = inner;
            (inner, at_inner) = (outer, at_outer);
            outer = low + GOLDEN * (high - low);
            at_outer = function(outer);
        }
    }
    0.5 * (low + high)
}
