use super::*;
use crate::measurements::Point;
use crate::quantity::Kelvin;
use crate::rate_law::Order;

const LEFT: Settings = Settings {
    law: RateLaw::Order(Order::FIRST),
    start: Level::Free,
    end: Level::Given(0.0),
    noise: Noise::Constant,
    initial_concentration: None,
};

fn order(n: f64) -> RateLaw {
    RateLaw::Order(Order::new(n).unwrap_or(Order::FIRST))
}

fn run(times: &[f64], signal: impl Fn(f64) -> f64) -> ProgressRun {
    let point =
        |(row, t): (usize, &f64)| Point { row, time_seconds: *t, signal: signal(*t), sd: None };
    ProgressRun {
        name: "50 °C".into(),
        row: 1,
        temperature: Kelvin(323.15),
        points: times.iter().enumerate().map(point).collect(),
    }
}

/// A few fixed errors about 0 with variance near 1.
fn wobble(t: f64) -> f64 {
    1.5 * (12.9898 * t + 1.0).sin()
}

const TIMES: [f64; 7] = [0.0, 1.0, 2.0, 4.0, 6.0, 9.0, 13.0];

fn only(run: ProgressRun, settings: &Settings) -> Result<RunFit, NoRate> {
    fit_runs(&[run], settings).swap_remove(0)
}

#[test]
fn rates_are_found_whatever_their_size_law_and_levels() {
    let laws = [0.0, 0.5, 1.0, 1.5, 2.0].map(order);
    let relatives = [RateLaw::TwoReactants { ratio: 1.4 }, RateLaw::Autocatalytic { seed: 0.02 }];
    for law in laws.into_iter().chain(relatives) {
        for scale in [1e-6, 1.0, 1e5] {
            for (reduced, start, end) in [(0.03, 100.0, 0.0), (0.3, 0.8, 0.1), (0.1, 0.02, 1.9)] {
                let all = law.final_extent();
                let signal =
                    |t: f64| start + (end - start) * law.reached(reduced * t / scale).extent / all;
                let times: Vec<f64> = TIMES.iter().map(|t| t * scale).collect();
                for (first, last) in [
                    (Level::Free, Level::Given(end)),
                    (Level::Given(start), Level::Free),
                    (Level::Given(start), Level::Given(end)),
                ] {
                    // A straight line does not tell where it will end.
                    if law == order(0.0) && last == Level::Free {
                        continue;
                    }
                    let settings = Settings { law, start: first, end: last, ..LEFT };
                    let found = only(run(&times, signal), &settings);
                    let off =
                        found.as_ref().map(|fit| fit.ln_reduced_rate - (reduced / scale).ln());
                    let off = off.unwrap_or(f64::NAN).abs();
                    assert!(off < 1e-6, "{law:?} {scale} {reduced} {first:?} {last:?}: {found:?}");
                }
            }
        }
    }
}

/// At order 0 the signal is a straight line: k is its slope, and the standard deviation that of
/// ordinary least squares.
#[test]
fn order_zero_is_a_straight_line() {
    let settings = Settings { law: order(0.0), ..LEFT };
    let line = run(&TIMES, |t| 100.0 - 3.0 * t + wobble(t));
    let fit = only(line.clone(), &settings).ok();
    let (mut t_mean, mut y_mean) = (0.0, 0.0);
    for point in &line.points {
        t_mean += point.time_seconds / 7.0;
        y_mean += point.signal / 7.0;
    }
    let (mut tt, mut ty) = (0.0, 0.0);
    for point in &line.points {
        tt += (point.time_seconds - t_mean).powi(2);
        ty += (point.time_seconds - t_mean) * (point.signal - y_mean);
    }
    let slope = ty / tt;
    let rest: f64 = line
        .points
        .iter()
        .map(|p| (p.signal - y_mean - slope * (p.time_seconds - t_mean)).powi(2))
        .sum();
    let sd = (rest / 5.0 / tt).sqrt() / slope.abs();
    let found = fit.map(|fit| (fit.ln_rate, fit.ln_sd.unwrap_or_default()));
    let (ln_rate, ln_sd) = found.unwrap_or_default();
    assert!((ln_rate - (-slope).ln()).abs() < 1e-9, "{found:?}");
    assert!((ln_sd / sd - 1.0).abs() < 1e-6, "{found:?} {sd}");
}

#[test]
fn second_order_counts_in_concentration() {
    // 1/c = 1/0.4 + 0.05 t
    let signal = |t: f64| 1.0 / (2.5 + 0.05 * t);
    let settings = Settings { law: order(2.0), ..LEFT };
    let own = only(run(&TIMES, signal), &settings).map(|fit| fit.ln_rate.exp());
    assert!((own.unwrap_or_default() / 0.05 - 1.0).abs() < 1e-9, "{own:?}");
    // The same signal as an absorbance of 2 for 0.4 mol/L.
    let settings = Settings { initial_concentration: Some(0.4), ..settings };
    let given = only(run(&TIMES, |t| 5.0 * signal(t)), &settings).map(|fit| fit.ln_rate.exp());
    assert!((given.unwrap_or_default() / 0.05 - 1.0).abs() < 1e-9, "{given:?}");
}

#[test]
fn noise_is_pooled_where_runs_are_alike() {
    let decay = |size: f64| move |t: f64| 100.0 * (-0.1 * t).exp() + size * wobble(t);
    let short = |size: f64| run(&[0.0, 3.0, 8.0], decay(size));
    let sd =
        |outcome: &Result<RunFit, NoRate>| outcome.as_ref().ok().and_then(|fit| fit.residual_sd);
    let alike = fit_runs(&[run(&TIMES, decay(1.0)), short(1.0)], &LEFT);
    assert_eq!(sd(&alike[0]), sd(&alike[1]));
    assert!(sd(&alike[0]).is_some_and(|s| (0.5..2.0).contains(&s)), "{alike:?}");
    let unlike = fit_runs(&[run(&TIMES, decay(0.001)), short(8.0)], &LEFT);
    assert_eq!(unlike[1], Err(NoRate::NoiseNotKnown));
    assert!(sd(&unlike[0]).is_some_and(|s| s < 0.01), "{unlike:?}");
    // One degree of freedom in all tells no noise.
    let alone = only(short(1.0), &LEFT).map(|fit| fit.ln_sd);
    assert_eq!(alone, Ok(None));
}

#[test]
fn a_shared_start_is_found_once() {
    let decay = |k: f64| move |t: f64| 100.0 * (-k * t).exp() + wobble(t);
    let runs = [run(&TIMES, decay(0.02)), run(&TIMES, decay(0.2))];
    let fits = fit_runs(&runs, &Settings { start: Level::Shared, ..LEFT });
    let starts: Vec<f64> = fits.iter().flatten().map(|fit| fit.start).collect();
    assert_eq!(starts.len(), 2);
    assert_eq!(starts[0], starts[1]);
    let freedom: usize = fits.iter().flatten().map(|fit| fit.degrees_of_freedom).sum();
    assert!((10..=12).contains(&freedom), "{freedom}");
}

#[test]
fn proportional_noise_weighs_by_the_fitted_signal() {
    // Errors of 5 % at every signal: late points tell as much as early ones.
    let signal = |t: f64| 100.0 * (-0.5 * t).exp() * (1.0 + 0.05 * wobble(t));
    let sd = |noise: Noise| {
        let fit = only(run(&TIMES, signal), &Settings { noise, ..LEFT }).ok();
        fit.and_then(|fit| Some((fit.ln_sd?, fit.residual_sd?))).unwrap_or_default()
    };
    let (proportional, relative) = sd(Noise::Proportional);
    let (constant, absolute) = sd(Noise::Constant);
    assert!(proportional < 0.7 * constant, "{proportional} {constant}");
    assert!((0.01..0.1).contains(&relative) && absolute > 0.2, "{relative} {absolute}");
}

#[test]
fn many_points_are_no_other_than_few() {
    let times: Vec<f64> = (0..2000).map(|i| 0.01 * f64::from(i)).collect();
    let fit = only(run(&times, |t| 100.0 * (-0.3 * t).exp() + wobble(t)), &LEFT);
    let off = fit.as_ref().map_or(f64::NAN, |fit| fit.ln_rate - 0.3_f64.ln());
    assert!(off.abs() < 0.02, "{fit:?}");
    assert!(fit.is_ok_and(|fit| fit.residuals.len() == 2000));
}

#[test]
fn what_tells_no_rate_is_refused_with_its_reason() {
    let flat = run(&TIMES, |t| if [1.0, 4.0, 9.0].contains(&t) { 101.0 } else { 99.5 });
    assert_eq!(only(flat, &LEFT), Err(NoRate::NoReaction));
    let free = Settings { end: Level::Free, ..LEFT };
    let short = run(&TIMES, |t| 100.0 * (-0.002 * t).exp() + 0.4 * wobble(t));
    assert_eq!(only(short, &free), Err(NoRate::TooShort));
    let over = run(&TIMES, |t| if t == 0.0 { 100.0 } else { 0.1 * wobble(t) });
    assert_eq!(only(over, &LEFT), Err(NoRate::OverAtOnce));
    let two = run(&[0.0, 5.0], |t| 100.0 * (-0.1 * t).exp());
    assert_eq!(only(two, &free), Err(NoRate::TooFewPoints));
}

#[test]
fn orders_are_told_apart_where_the_runs_go_far_enough() {
    let law = order(2.0);
    let course = |k: f64| move |t: f64| 100.0 * (1.0 - law.reached(k * t).extent) + 0.3 * wobble(t);
    let runs = [run(&TIMES, course(0.3)), run(&TIMES, course(1.0))];
    let ranked = compare_orders(&runs, &LEFT);
    assert_eq!(ranked[0].order, 2.0);
    assert!(ranked[1].delta_aicc.is_some_and(|delta| delta > 4.0), "{ranked:?}");
    let free = free_order(&runs, &LEFT, 0.95);
    let holds = free.is_some_and(|free| {
        (1.9..2.1).contains(&free.order)
            && free.low.is_some_and(|low| low > 1.9 && low < free.order)
            && free.high.is_some_and(|high| high < 2.1 && high > free.order)
    });
    assert!(holds, "{free:?}");
    // Followed to a few per cent only, every order will do.
    let early = [run(&TIMES, course(0.001)), run(&TIMES, course(0.002))];
    let open = free_order(&early, &LEFT, 0.95);
    assert!(open.is_some_and(|open| open.low.is_none() && open.high.is_none()), "{open:?}");
}
