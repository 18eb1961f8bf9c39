//! `cargo bench -p checks`: the findings of twenty runs with stated errors and eight questions,
//! beside a million exponentials in the same run, since machines differ.

use std::fmt::Write as _;
use std::hint::black_box;

use criterion::{Criterion, criterion_group, criterion_main};
use kinetics_core::study::{Study, evaluate};
use serde_json::json;

fn study() -> Study {
    let mut text = String::from("T/°C\tk, 1/h\ts(k)\n");
    for i in 0..20_u32 {
        let celsius = 40.0 + 2.0 * f64::from(i);
        let off = 0.1 * (f64::from((i * 7) % 11) / 11.0 - 0.5);
        let rate = (off + 28.0 - 10_500.0 / (celsius + 273.15)).exp();
        let _ = writeln!(text, "{celsius}\t{rate:.6e}\t{:.2e}", 0.04 * rate);
    }
    let celsius = |value: f64| json!({"value": value, "unit": "°C"});
    let percent = |value: f64| json!({"value": value, "unit": "%"});
    let days = |value: f64| json!({"value": value, "unit": "d"});
    let study = json!({
        "kelvinclock": 1,
        "measured": {"form": "rates", "text": text},
        "asked": [
            {"question": "rate-at", "temperature": celsius(30.0)},
            {"question": "time-to-extent", "temperature": celsius(25.0), "gone": percent(5.0)},
            {"question": "longest-stand", "temperature": celsius(40.0), "keep": percent(98.0)},
            {"question": "completion-time", "temperature": celsius(90.0), "gone": percent(99.0)},
            {"question": "extent-after", "temperature": celsius(40.0), "time": days(1.0)},
            {"question": "temperature-for", "gone": percent(99.0), "time": days(1.0)},
            {"question": "speed-up", "to": celsius(60.0), "from": celsius(25.0)},
            {"question": "equivalent-time", "temperature": celsius(55.0), "time": days(700.0),
             "other_temperature": celsius(25.0)},
        ],
    });
    Study::from_value(study).unwrap()
}

fn benchmarks(criterion: &mut Criterion) {
    let study = study();
    let mut group = criterion.benchmark_group("study");
    group.bench_function("20 runs, 8 questions", |b| b.iter(|| evaluate(black_box(&study))));
    group.bench_function("1e6 exponentials", |b| {
        b.iter(|| (0..1_000_000).map(|i| black_box(-1e-6 * f64::from(i)).exp()).sum::<f64>())
    });
    group.finish();
}

criterion_group!(benches, benchmarks);
criterion_main!(benches);
