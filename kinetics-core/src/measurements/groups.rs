//! Runs that share an oven or a batch, and with it what makes batches differ.
//!
//! Runs of one group at one temperature are taken together as their mean, weighted by 1/s² where
//! all state their errors. A group with means at m temperatures counts as one run still: each of
//! its means has the weight 1/m. With groups of one temperature that is least squares on the means
//! of groups.
//!
//! It holds whatever ties the runs of a group together. Let the means have the variance σ² each
//! and any correlation R_g within a group, none between groups. The weighted means have the
//! covariance σ² R_g/m, whose largest eigenvalue is at most σ² and whose trace is σ². So with G
//! groups and p parameters the weighted residuals have E(RSS) ≥ σ²(G − p), and the covariance of
//! the estimate is at most σ²(XᵀWX)⁻¹: s² = RSS/(G − p) is not too small on average. RSS/σ² is a
//! sum of chi-squares with weights of at most one that add to G − p or more, which scatters less
//! than χ² with G − p degrees of freedom (its weights majorise them), so t with G − p has tails
//! that are wide enough. Var = s² + τ² is treated alike for each τ.

use std::collections::HashMap;

use super::{Observation, Run};
use crate::numeric::sorting::sort_by;

/// Runs taken together by their groups.
#[derive(Debug, Clone, PartialEq)]
pub struct Grouped {
    /// One for each group and temperature, in the order of its first run.
    pub observations: Vec<Observation>,
    /// Indices of the runs behind each.
    pub members: Vec<Vec<usize>>,
    /// How many groups there are; a run without a group is one.
    pub groups: usize,
    /// Variance of ln k that a single run has beyond that of the mean of its group.
    pub within: f64,
}

/// Takes runs together; none where no two share a group.
pub fn grouped(runs: &[Run]) -> Option<Grouped> {
    let group_of = groups_of(runs);
    let groups = group_of.iter().enumerate().filter(|(run, first)| run == *first).count();
    if groups == runs.len() {
        return None;
    }
    // Runs of one group and one temperature side by side, each set in the order of its runs.
    let temperature = |run: usize| runs[run].observation.temperature.0;
    let mut order: Vec<usize> = (0..runs.len()).collect();
    sort_by(&mut order, |run| temperature(*run));
    sort_by(&mut order, |run| group_of[*run] as f64);
    let mut members: Vec<Vec<usize>> = order
        .chunk_by(|a, b| group_of[*a] == group_of[*b] && temperature(*a) == temperature(*b))
        .map(<[usize]>::to_vec)
        .collect();
    sort_by(&mut members, |cell| cell[0] as f64);
    let mut sizes = vec![0.0; runs.len()];
    for cell in &members {
        sizes[group_of[cell[0]]] += 1.0;
    }
    let observations = members
        .iter()
        .map(|cell| Observation { share: 1.0 / sizes[group_of[cell[0]]], ..mean(runs, cell) })
        .collect();
    Some(Grouped { observations, within: within(runs, &members), members, groups })
}

/// For each run the first run of its group: runs belong together where any column of groups says
/// so.
fn groups_of(runs: &[Run]) -> Vec<usize> {
    fn first(of: &mut [usize], mut run: usize) -> usize {
        while of[run] != run {
            of[run] = of[of[run]];
            run = of[run];
        }
        run
    }
    let mut of: Vec<usize> = (0..runs.len()).collect();
    let mut seen: HashMap<String, usize> = HashMap::new();
    for (run, names) in runs.iter().map(|run| &run.groups).enumerate() {
        for (column, name) in names {
            let other = *seen.entry(format!("{column} {name}")).or_insert(run);
            let (one, other) = (first(&mut of, run), first(&mut of, other));
            of[one.max(other)] = one.min(other);
        }
    }
    (0..runs.len()).map(|run| first(&mut of, run)).collect()
}

/// The mean of runs at one temperature.
fn mean(runs: &[Run], cell: &[usize]) -> Observation {
    let own = |run: &usize| runs[*run].observation;
    let stated: Option<Vec<f64>> = cell.iter().map(|run| own(run).ln_sd).collect();
    let weights: Vec<f64> = match &stated {
        Some(sds) => sds.iter().map(|sd| 1.0 / (sd * sd)).collect(),
        None => vec![1.0; cell.len()],
    };
    let total: f64 = weights.iter().sum();
    let sum: f64 = cell.iter().zip(&weights).map(|(run, weight)| weight * own(run).ln_rate).sum();
    let temperature = cell.first().map(own).map_or(crate::quantity::Kelvin(0.0), |o| o.temperature);
    Observation::new(temperature, sum / total, stated.map(|_| 1.0 / libm::sqrt(total)))
}

/// What the replicates within groups say of a single run's own variance, less what their means
/// keep of it.
fn within(runs: &[Run], members: &[Vec<usize>]) -> f64 {
    let (mut squares, mut degrees, mut kept) = (0.0, 0, 0.0);
    for cell in members {
        let size = cell.len() as f64;
        let ln_rates = || cell.iter().map(|run| runs[*run].observation.ln_rate);
        let mean = ln_rates().sum::<f64>() / size;
        squares += ln_rates().map(|y| (y - mean) * (y - mean)).sum::<f64>();
        degrees += cell.len() - 1;
        kept += 1.0 / size;
    }
    if degrees == 0 {
        return 0.0;
    }
    squares / degrees as f64 * (1.0 - kept / members.len() as f64)
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;
    use crate::quantity::Kelvin;

    fn run(t: f64, ln_rate: f64, sd: Option<f64>, groups: &[(usize, &str)]) -> Run {
        Run {
            row: 0,
            name: String::new(),
            observation: Observation::new(Kelvin(t), ln_rate, sd),
            groups: groups.iter().map(|(column, name)| (*column, (*name).into())).collect(),
        }
    }

    #[test]
    fn runs_of_a_group_and_a_temperature_are_averaged() {
        let runs = [
            run(300.0, 1.0, Some(0.1), &[(0, "a")]),
            run(310.0, 2.0, Some(0.1), &[(0, "a")]),
            run(300.0, 1.5, Some(0.2), &[(0, "a")]),
            run(300.0, 9.0, Some(0.1), &[]),
        ];
        let grouped = grouped(&runs).unwrap();
        assert_eq!(grouped.groups, 2);
        assert_eq!(grouped.members, [vec![0, 2], vec![1], vec![3]]);
        let first = grouped.observations[0];
        // Weights 100 and 25.
        assert!((first.ln_rate - 1.1).abs() < 1e-12);
        assert!((first.ln_sd.unwrap() - 125.0_f64.sqrt().recip()).abs() < 1e-12);
        let shares: Vec<f64> = grouped.observations.iter().map(|o| o.share).collect();
        assert_eq!(shares, [0.5, 0.5, 1.0]);
        // Half of (½)² is the variance within; of three means, one keeps half of it, two all.
        assert!((grouped.within - 0.125 / 6.0).abs() < 1e-12);
    }

    #[test]
    fn any_column_ties_runs_together_and_single_runs_stay() {
        let tied = [
            run(300.0, 1.0, None, &[(0, "oven 1"), (1, "x")]),
            run(310.0, 2.0, None, &[(0, "oven 2"), (1, "y")]),
            run(320.0, 3.0, None, &[(0, "oven 2"), (1, "x")]),
            run(330.0, 4.0, None, &[(0, "x")]),
        ];
        let found = grouped(&tied).unwrap();
        assert_eq!(found.groups, 2);
        assert!(found.observations.iter().all(|o| o.ln_sd.is_none()));
        assert_eq!(grouped(&tied[..2]), None);
        assert_eq!(grouped(&[]), None);
    }
}
