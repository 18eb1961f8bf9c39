//! The order of reaction behind progress curves: stated, fitted, or chosen among usual ones.

use super::{
    Level, Order, OrderChoice, OrderWord, ProgressRun, RateLaw, Refusal, Remark, Settings,
    Severity, Study, fit_runs, level,
};
use crate::rate_constant::{RankedOrder, compare_orders, free_order};

/// Orders whose AICc is higher by more than this are clearly worse (Burnham & Anderson 2002, §2.6).
const CLEARLY_WORSE: f64 = 4.0;
/// Below this extent no order is told from another.
const LOW_CONVERSION: f64 = 0.4;

/// The order that the curves are fitted with, and what is to be said of it.
pub(super) fn find(
    study: &Study,
    runs: &[ProgressRun],
    settings: &Settings,
    choices: &mut Vec<String>,
    remarks: &mut Vec<Remark>,
) -> Result<Order, Refusal> {
    // Runs that no order explains take no part in the comparison.
    let fits = fit_runs(runs, settings);
    let usable: Vec<ProgressRun> = runs
        .iter()
        .zip(&fits)
        .filter(|(_, outcome)| outcome.is_ok())
        .map(|(run, _)| run.clone())
        .collect();
    let furthest = fits.iter().flatten().map(|fit| fit.extent).fold(0.0, f64::max);
    let ranked = compare_orders(&usable, settings);
    let order = match &study.assumed.order {
        Some(OrderChoice::Number(stated)) => Order::new(*stated).ok_or_else(|| {
            Refusal::new(
                format!("The order {stated} is not a number from zero up."),
                "State an order of 0 or more, or let it be compared.",
            )
        })?,
        Some(OrderChoice::Word(OrderWord::Compare)) => {
            let best = ranked.iter().find(|ranked| ranked.delta_aicc.is_some());
            best.and_then(|best| Order::new(best.order)).unwrap_or(Order::FIRST)
        }
        Some(OrderChoice::Word(OrderWord::Free)) => freely(study, &usable, settings, choices)?,
        None => {
            choices.push("No order is stated; the curves are fitted as first order.".into());
            Order::FIRST
        }
    };
    remarks.extend(doubt(order, &ranked, furthest, settings));
    Ok(order)
}

/// The fitted order to two decimals, as its interval rarely allows more.
fn freely(
    study: &Study,
    runs: &[ProgressRun],
    settings: &Settings,
    choices: &mut Vec<String>,
) -> Result<Order, Refusal> {
    let level = level(study)?;
    let Some(found) = free_order(runs, settings, level) else {
        return Err(Refusal::new(
            "The curves do not tell an order.",
            "Follow runs with more points, or state the order.",
        ));
    };
    let shown = |limit: Option<f64>, open: &str| limit.map_or(open.into(), |n| format!("{n:.2}"));
    choices.push(format!(
        "The order fits best at {:.2}; the curves allow {} to {} ({:.0} %).",
        found.order,
        shown(found.low, "0"),
        shown(found.high, "4 and more"),
        100.0 * level
    ));
    Ok(Order::new(libm::round(100.0 * found.order) / 100.0).unwrap_or(Order::FIRST))
}

/// What the comparison says against the order that is used.
fn doubt(
    order: Order,
    ranked: &[RankedOrder],
    furthest: f64,
    settings: &Settings,
) -> Option<Remark> {
    let deltas: Vec<(f64, f64)> =
        ranked.iter().filter_map(|ranked| Some((ranked.order, ranked.delta_aicc?))).collect();
    if deltas.len() < 2 {
        return None;
    }
    if deltas.iter().all(|(_, delta)| *delta <= CLEARLY_WORSE) {
        if furthest >= LOW_CONVERSION {
            return None;
        }
        let free_end = settings.end == Level::Free;
        return Some(Remark::new(
            "low-conversion",
            Severity::Caution,
            format!(
                "The furthest run has gone {:.0} % of its way, where no order from 0 to 2 is told \
                 from another: answers for larger parts gone rest on the order assumed{}.",
                100.0 * furthest,
                if free_end { ", and on the ends found" } else { "" }
            ),
            "Follow one run until 60 % or more are gone.",
        ));
    }
    let (best, _) = *deltas.iter().min_by(|a, b| a.1.total_cmp(&b.1))?;
    let own = deltas.iter().find(|(n, _)| *n == order.value()).map(|(_, delta)| *delta)?;
    (own > CLEARLY_WORSE).then(|| {
        let better = RateLaw::Order(Order::new(best).unwrap_or(Order::FIRST));
        let name = match better {
            RateLaw::Order(better) => better.name(),
            _ => String::new(),
        };
        Remark::new(
            "order-doubtful",
            Severity::Caution,
            format!(
                "The curves fit {name} clearly better than {} (AICc lower by {own:.1}): rate \
                 constants and all answers depend on it.",
                order.name()
            ),
            "Choose that order, or let the orders be compared.",
        )
    })
}
