//! Laws that the data do not exclude beside the chosen one: fitted to the same runs under the
//! same scatter choice and ranked by AICc.

use crate::measurements::Observation;
use crate::numeric::sorting::sort_by;
use crate::temperature_law::{FittedLaw, Settings, TemperatureLaw, aicc, fit};

/// A law above the best by more than this in AICc counts as excluded (Burnham & Anderson 2002,
/// §2.6, where 4 to 7 is "considerably less" and above 10 "essentially no" support).
const EXCLUDED_ABOVE: f64 = 7.0;

/// A law beside the chosen one.
#[derive(Debug, Clone, PartialEq)]
pub struct Rival {
    /// The law, fitted.
    pub law: FittedLaw,
    /// AICc above the best of all; none where too few runs allow no ranking.
    pub delta_aicc: Option<f64>,
    /// Akaike weight among all laws ranked; likewise.
    pub weight: Option<f64>,
}

impl Rival {
    /// Whether the data speak against it.
    pub fn is_excluded(&self) -> bool {
        self.delta_aicc.is_some_and(|delta| delta > EXCLUDED_ABOVE)
    }
}

const CANDIDATES: [TemperatureLaw; 4] = [
    TemperatureLaw::Arrhenius,
    TemperatureLaw::Eyring,
    TemperatureLaw::LogLinear,
    TemperatureLaw::Curved,
];

/// The rivals of a fitted law, best first.
///
/// Where AICc is defined for some laws, a law with too many parameters to have one is left out.
/// Where it is defined for none, laws with as many parameters as the chosen one stay, unranked,
/// and none counts as excluded. Without scatter there are no rivals: every law of two parameters
/// meets two runs exactly.
pub fn rivals(
    chosen: &FittedLaw,
    observations: &[Observation],
    settings: impl Into<Settings>,
) -> Vec<Rival> {
    let settings = settings.into();
    if !chosen.has_intervals() || observations.is_empty() {
        return Vec::new();
    }
    let score = |law| aicc(law, observations, chosen.scatter);
    let mut laws: Vec<(TemperatureLaw, Option<f64>)> = CANDIDATES
        .iter()
        .filter(|law| **law != chosen.law)
        .map(|law| (*law, score(*law)))
        .collect();
    let own = score(chosen.law);
    let scores: Vec<f64> = laws.iter().filter_map(|(_, score)| *score).chain(own).collect();
    let best = scores.iter().copied().fold(f64::INFINITY, f64::min);
    let total: f64 = scores.iter().map(|score| libm::exp(-0.5 * (score - best))).sum();
    if scores.is_empty() {
        laws.retain(|(law, _)| law.parameters() == chosen.law.parameters());
    } else {
        laws.retain(|(_, score)| score.is_some());
    }
    let mut found: Vec<Rival> = laws
        .into_iter()
        .filter_map(|(law, score)| {
            let law = fit(law, observations, settings).ok()?;
            let delta_aicc = score.map(|score| score - best);
            let weight = delta_aicc.map(|delta| libm::exp(-0.5 * delta) / total);
            Some(Rival { law, delta_aicc, weight })
        })
        .collect();
    sort_by(&mut found, |rival| rival.delta_aicc.unwrap_or(0.0));
    found
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;
    use crate::quantity::Kelvin;
    use crate::temperature_law::ScatterChoice;

    fn rivals_of(points: usize, bend: f64) -> Vec<Rival> {
        let noise = [0.03, -0.02, 0.01, -0.03, 0.02, 0.015, -0.02, 0.03, -0.01, -0.02];
        let runs: Vec<Observation> = (0..points)
            .map(|i| {
                let t = 310.0 + 8.0 * i as f64;
                let x = (1.0 / t - 1.0 / 345.0) * 1e3;
                let ln_rate = -4.0 - 11.0 * x + bend * x * x + noise[i];
                Observation::new(Kelvin(t), ln_rate, None)
            })
            .collect();
        let choice = ScatterChoice::Automatic;
        let chosen = fit(TemperatureLaw::Arrhenius, &runs, choice).unwrap();
        rivals(&chosen, &runs, choice)
    }

    #[test]
    fn a_straight_line_leaves_its_neighbours_and_a_bent_one_excludes_them() {
        let straight = rivals_of(10, 0.0);
        let eyring = straight.iter().find(|r| r.law.law == TemperatureLaw::Eyring).unwrap();
        assert!(!eyring.is_excluded());
        let bent = rivals_of(10, 12.0);
        assert_eq!(bent[0].law.law, TemperatureLaw::Curved);
        assert_eq!(bent[0].delta_aicc, Some(0.0));
        assert!(bent[1..].iter().all(Rival::is_excluded));
    }

    #[test]
    fn few_runs_rank_nothing_and_exclude_nothing() {
        let few = rivals_of(4, 0.0);
        assert_eq!(few.len(), 2);
        assert!(few.iter().all(|r| r.delta_aicc.is_none() && !r.is_excluded()));
        let five = rivals_of(5, 0.0);
        assert!(five.iter().all(|r| r.law.law != TemperatureLaw::Curved));
        assert!(rivals_of(2, 0.0).is_empty());
    }
}
