use super::*;
use crate::table::{Form, Hints, read_table};

fn read(text: &str) -> ProgressRuns {
    let table = read_table(text, &Hints { form: Some(Form::Progress), ..Hints::default() });
    progress(&table, &[], AboutSignals::default())
}

/// Name, kelvin and signals of each run.
fn said(runs: &ProgressRuns) -> Vec<(String, f64, Vec<f64>)> {
    runs.runs
        .iter()
        .map(|run| {
            let signals = run.points.iter().map(|point| point.signal).collect();
            (run.name.clone(), run.temperature.0, signals)
        })
        .collect()
}

fn two_runs() -> Vec<(String, f64, Vec<f64>)> {
    vec![("50 °C".into(), 323.15, vec![100.0, 98.1]), ("60 °C".into(), 333.15, vec![100.0, 94.5])]
}

#[test]
fn every_shape_of_table_gives_the_same_runs() {
    let long = "T/°C\tt/h\t% left\n50\t0\t100\n50\t10\t98.1\n60\t0\t100\n60\t10\t94.5\n";
    let by_time = "T/°C\tt/h\t% left\n50\t0\t100\n60\t0\t100\n50\t10\t98.1\n60\t10\t94.5\n";
    let wide = "t/h\t50 °C\t60 °C\n0\t100\t100\n10\t98.1\t94.5\n";
    let titles = "t/h\t% left\n50 °C\n0\t100\n10\t98.1\n60 °C\n0\t100\n10\t94.5\n";
    let blocks = "50 °C\nt/h\t% left\n0\t100\n10\t98.1\n\n60 °C\nt/h\t% left\n0\t100\n10\t94.5\n";
    for text in [long, by_time, wide, titles, blocks] {
        let runs = read(text);
        assert_eq!(said(&runs), two_runs(), "{text}");
        assert!(runs.problems.is_empty(), "{text}: {:?}", runs.problems);
        assert_eq!(runs.runs[0].points[1].time_seconds, 36_000.0);
    }
}

#[test]
fn runs_at_one_temperature_stay_apart() {
    let restart = "T/°C\tt/h\t% left\n50\t0\t100\n50\t10\t98.1\n50\t0\t100\n50\t10\t97.9\n";
    let named =
        "run\tT/°C\tt/h\t% left\nA\t50\t0\t100\nB\t50\t0\t100\nA\t50\t10\t98\nB\t50\t10\t97\n";
    let names = |text: &str| -> Vec<String> {
        read(text).runs.iter().map(|run| run.name.clone()).collect()
    };
    assert_eq!(names(restart), ["50 °C", "50 °C (2)"]);
    assert_eq!(names(named), ["A", "B"]);
}

#[test]
fn values_below_a_limit_are_left_out_and_said() {
    let runs = read("t/h\t50 °C\t60 °C\n0\t100\t100\n10\t98.1\t50\n20\t96\t<LOQ\n");
    assert_eq!(runs.runs[1].points.len(), 2);
    assert_eq!(runs.left_out.len(), 1);
    assert_eq!(runs.left_out[0].reason, "60 °C: below a limit of quantitation");
}

#[test]
fn each_bad_run_is_said_once_and_the_rest_is_kept() {
    for (bad, expected) in [
        ("60\t0\t100\n60\t20\t90\n60\t10\t95\n", "times that increase"),
        ("60\t0\t100\n", "two times or more"),
        ("60\t5\t100\n60\t5\t99\n", "two times or more"),
        ("60\t0\t100\n60\t10\t-30\n", "a signal from zero up"),
        ("60\t0\t100\n60\t10\t100\n", "a signal that changes"),
        ("60\t0\t80\n60\t10\t100\n", "a signal that falls"),
    ] {
        let text = format!("T/°C\tt/h\t% left\n50\t0\t100\n50\t10\t98.1\n{bad}");
        let runs = read(&text);
        assert_eq!(said(&runs), two_runs()[..1].to_vec(), "{bad}");
        let found: Vec<&str> = runs.problems.iter().map(|p| p.expected.as_str()).collect();
        assert_eq!(found, [expected]);
        assert!(runs.problems[0].sentence.contains("“60 °C”"), "{}", runs.problems[0]);
    }
    let nowhere = read("t/h\t% left\n0\t100\n10\t98.1\n");
    assert!(nowhere.problems[0].sentence.contains("has no temperature"));
}

#[test]
fn what_a_signal_follows_is_seen_or_said() {
    let rising = read("t/h\t50 °C\t60 °C\n0\t0\t0\n10\t2\t6\n20\t4\t11\n");
    assert_eq!(rising.signal_is, SignalIs::Formed);
    assert_eq!(rising.choices.len(), 1);
    let said = read("T/°C\tt/h\tconversion (%)\n50\t0\t0\n50\t10\t2\n");
    assert_eq!(said.signal_is, SignalIs::Formed);
    assert!(said.choices.is_empty());
}

#[test]
fn errors_count_in_the_unit_of_the_signal() {
    let sd = |text: &str| read(text).runs[0].points[0].sd;
    let close = |sd: Option<f64>| assert!((sd.unwrap_or_default() - 0.02).abs() < 1e-15, "{sd:?}");
    close(sd("T/°C\tt/h\tc, mol/L\tsd\n50\t0\t0.8\t0.02\n50\t9\t0.7\t0.02\n"));
    close(sd("T/°C\tt/h\tc, mmol/L\tsd\n50\t0\t800\t20\n50\t9\t700\t20\n"));
    close(sd("T/°C\tt/h\tc, mol/L\tsd, %\n50\t0\t0.8\t2.5\n50\t9\t0.7\t2\n"));
}
