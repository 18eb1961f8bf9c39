//! The words that headers use for what a column holds, in English, and in
//! German and French where they can mean nothing else.

use crate::table::{ErrorKind, Role, SignalIs};
use crate::text::lower;

/// What the words of a header say.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Named {
    pub role: Role,
    /// A word rather than a single letter: it stands against a unit that says otherwise.
    pub strong: bool,
    pub signal_is: Option<SignalIs>,
    pub error_is: Option<ErrorKind>,
    /// An error that is relative by its name.
    pub relative: bool,
    /// Why the column cannot be used although it is understood.
    pub refused: Option<&'static str>,
}

impl Named {
    fn of(role: Role, strong: bool) -> Named {
        Named { role, strong, signal_is: None, error_is: None, relative: false, refused: None }
    }

    fn signal(signal_is: SignalIs) -> Named {
        Named { signal_is: Some(signal_is), ..Named::of(Role::Signal, true) }
    }
}

#[rustfmt::skip]
const ERROR: &[&str] = &[
    "sd", "std", "stdev", "stddev", "stdabw", "standardabweichung", "deviation", "abweichung", "error", "errors", "err", "fehler",
    "erreur", "uncertainty", "unsicherheit", "incertitude", "unc", "sigma", "σ", "se", "sem", "rsd", "cv", "ci", "streuung",
    "écart", "ecart", "stderr",
];
#[rustfmt::skip]
const TEMPERATURE: &[&str] = &["temp", "setpoint", "θ", "ϑ", "theta"];
#[rustfmt::skip]
const TIME: &[&str] = &[
    "time", "times", "zeit", "temps", "durée", "duree", "dauer", "duration", "elapsed", "age", "timepoint", "halflife", "halbwertszeit",
    "haltbarkeit", "life", "t90", "t95", "t50", "t10", "t½", "lagerzeit", "storage", "zeitpunkt",
];
#[rustfmt::skip]
const RATE: &[&str] = &[
    "k", "kobs", "kapp", "kdeg", "khyd", "kf", "kd", "rate", "rateconstant", "geschwindigkeitskonstante", "geschwindigkeit",
    "vitesse", "k1", "k2", "k3", "k4", "k5", "k6", "k7", "k8", "k9", "k₁", "k₂", "k′",
];
const GROUP: &[&str] = &[
    "batch", "lot", "charge", "oven", "ofen", "étuve", "etuve", "group", "gruppe", "groupe", "lote",
];
const RUN: &[&str] =
    &["run", "experiment", "expt", "exp", "versuch", "essai", "trial", "series", "nr", "no", "n°"];
const LABEL: &[&str] = &[
    "sample",
    "probe",
    "name",
    "label",
    "id",
    "échantillon",
    "echantillon",
    "muster",
    "code",
    "vial",
];
#[rustfmt::skip]
const UNUSED: &[&str] = &[
    "note", "notes", "comment", "comments", "remark", "remarks", "bemerkung", "bemerkungen", "kommentar", "remarque", "remarques",
    "operator", "analyst", "date", "datum",
];
#[rustfmt::skip]
const LEFT: &[&str] = &[
    "left", "remaining", "residual", "rest", "active", "assay", "content", "potency", "gehalt", "purity", "reinheit", "titer",
    "titre", "undegraded", "unreacted", "survivors", "teneur", "restgehalt", "restant",
];
#[rustfmt::skip]
const FORMED: &[&str] = &[
    "conversion", "converted", "umsatz", "degraded", "gone", "lost", "loss", "verlust", "abbau", "abgebaut", "formed", "impurity",
    "impurities", "degradant", "degradation", "product", "yield", "ausbeute", "reacted", "conv", "verunreinigung", "rendement", "extent",
];
#[rustfmt::skip]
const SIGNAL: &[&str] = &[
    "conc", "concentration", "konzentration", "absorbance", "absorption", "abs", "extinktion", "signal", "area", "peak", "fläche",
    "response", "intensity", "activity", "c0", "au", "mau",
];

const LIMIT: &[&str] =
    &["lower", "upper", "low", "high", "lcl", "ucl", "min", "max", "untere", "obere"];
const LIMITS_REFUSED: &str =
    "limits of an interval are not read; give its half-width, or the standard deviation";

/// What the words of a name say about its column; none if they say nothing.
pub(super) fn named(name: &str) -> Option<Named> {
    let name = name.trim();
    let lower = lower(name);
    if name.is_empty() || name.chars().count() > 120 {
        return None;
    }
    let words: Vec<&str> = lower
        .split(|c: char| !c.is_alphanumeric() && !matches!(c, '½' | '′' | '°' | '₁' | '₂'))
        .filter(|word| !word.is_empty())
        // A lone capital K is the kelvin, or an equilibrium constant.
        .filter(|word| *word != "k" || name.contains('k'))
        .collect();
    if let Some(error) = error(name, &lower, &words) {
        return Some(error);
    }
    if let Some(ratio) = ratio(&lower) {
        return Some(ratio);
    }
    let percent = name.contains('%') || words.contains(&"percent") || words.contains(&"prozent");
    let head = head(&lower);
    let head_words: Vec<&str> =
        words.iter().take_while(|word| head.contains(**word)).copied().collect();
    // English and German put the noun last: "batch assay" is an assay, "product batch" a batch.
    let noun = head_words.iter().rev().find_map(|word| strong(word, &head_words));
    if noun.as_ref().is_some_and(|named| named.role == Role::RateConstant)
        && words.iter().any(|word| LIMIT.contains(word))
    {
        return Some(Named { refused: Some(LIMITS_REFUSED), ..Named::of(Role::Ignore, true) });
    }
    let mut found = noun.or_else(|| percent.then(|| Named::of(Role::Signal, true)))?;
    if found.role == Role::Signal && found.signal_is.is_none() {
        found.signal_is = words.iter().find_map(|word| strong(word, &words)?.signal_is);
    }
    Some(found)
}

/// What a single letter says, which a unit may overrule.
pub(super) fn letter(name: &str) -> Option<Named> {
    let bare: String =
        name.chars().filter(|c| c.is_alphanumeric() || matches!(c, '[' | ']')).collect();
    match bare.as_str() {
        "T" | "Tp" | "Tset" | "TS" | "Tmax" | "Tpeak" => Some(Named::of(Role::Temperature, false)),
        "t" => Some(Named::of(Role::Time, false)),
        "c" | "C" | "A" | "[A]" | "cA" | "CA" | "m" | "y" => Some(Named::of(Role::Signal, false)),
        "x" | "X" | "α" | "alpha" => {
            Some(Named { strong: false, ..Named::signal(SignalIs::Formed) })
        }
        "q" => Some(Named::of(Role::HeatRate, false)),
        "β" | "beta" | "ß" => Some(Named::of(Role::HeatingRate, false)),
        _ => None,
    }
}

/// The part before "at", "of", "to", which holds the noun.
fn head(lower: &str) -> &str {
    let mut end = lower.len();
    for preposition in
        [" at ", " of ", " to ", " for ", " after ", " bei ", " bis ", " de ", " du ", " à "]
    {
        if let Some(at) = lower.find(preposition).filter(|at| *at > 0) {
            end = end.min(at);
        }
    }
    lower.get(..end).unwrap_or(lower)
}

fn strong(word: &str, all: &[&str]) -> Option<Named> {
    let has = |wanted: &str| all.contains(&wanted);
    let within = |list: &[&str]| list.contains(&word);
    if (within(&["rate"]) && has("heating")) || within(&["heizrate", "aufheizrate", "heatingrate"])
    {
        return Some(Named::of(Role::HeatingRate, true));
    }
    if (within(&["rate", "flow", "release", "flux"]) && has("heat"))
        || within(&["wärmestrom", "wärmeleistung", "heatflow"])
    {
        return Some(Named::of(Role::HeatRate, true));
    }
    if within(&["constant", "constante", "konstante"]) {
        return Some(Named::of(Role::RateConstant, true));
    }
    let is_temperature = within(TEMPERATURE)
        || word.ends_with("temperature")
        || word.ends_with("temperatur")
        || word == "température";
    if is_temperature {
        return Some(Named::of(Role::Temperature, true));
    }
    for (list, role) in [
        (TIME, Role::Time),
        (RATE, Role::RateConstant),
        (GROUP, Role::Group),
        (RUN, Role::Run),
        (LABEL, Role::Label),
        (UNUSED, Role::Ignore),
        (SIGNAL, Role::Signal),
    ] {
        if within(list) {
            return Some(Named::of(role, true));
        }
    }
    if within(LEFT) {
        return Some(Named::signal(SignalIs::Left));
    }
    within(FORMED).then(|| Named::signal(SignalIs::Formed))
}

/// `sd`, `s(k)`, `± 95 %`, `error of k`, `Δk`, `RSD`.
fn error(name: &str, lower: &str, words: &[&str]) -> Option<Named> {
    let by_sign = name.starts_with('±') || name.starts_with("+/-") || name.starts_with("+-");
    let by_word = words.iter().any(|word| ERROR.contains(word));
    // "s(k)", "u(k)", "s_k": a letter and what it is the error of.
    let by_letter = words.len() >= 2
        && matches!(words.first(), Some(&("s" | "u" | "sk" | "uk")))
        && name.contains(['(', '_', '['])
        && words
            .get(1)
            .is_some_and(|of| matches!(*of, "k" | "t" | "c" | "ln" | "log" | "x" | "kobs"));
    let by_delta = lower.starts_with(['δ', '∆']) && words.len() == 1 && name.chars().count() <= 5;
    let by_square_word = matches!(words, ["s", "d"] | ["s", "e"]) || words.starts_with(&["s", "d"]);
    if !(by_sign || by_word || by_letter || by_delta || by_square_word) {
        return None;
    }
    let has = |wanted: &[&str]| words.iter().any(|word| wanted.contains(word));
    let interval = has(&["ci", "95"]);
    let limit = has(LIMIT);
    let mean = has(&["se", "sem", "stderr"])
        || (has(&["standard", "std"]) && has(&["error", "err", "fehler"]))
        || matches!(words, ["s", "e"]);
    let deviation = has(&[
        "sd",
        "std",
        "stdev",
        "stddev",
        "stdabw",
        "standardabweichung",
        "deviation",
        "rsd",
        "cv",
        "sigma",
        "σ",
    ]) || by_letter
        || by_square_word;
    let error_is = match (interval, mean, deviation) {
        (true, _, _) => Some(ErrorKind::HalfWidth95),
        (_, true, _) => Some(ErrorKind::StandardError),
        (_, _, true) => Some(ErrorKind::Sd),
        _ => None,
    };
    // An error of the temperatures is none of what was measured.
    let of_temperature =
        name.contains("(T)") || name.ends_with("_T") || has(&["temp", "temperature", "temperatur"]);
    let role = if of_temperature || limit { Role::Ignore } else { Role::Sd };
    let refused = match (of_temperature, limit) {
        (true, _) => Some(
            "errors of single temperatures are not read; state the uncertainty of the thermometer instead",
        ),
        (_, true) => Some(LIMITS_REFUSED),
        _ => None,
    };
    let relative = has(&["rsd", "cv", "relative"]) || (!interval && name.contains('%'));
    Some(Named { error_is, relative, refused, ..Named::of(role, true) })
}

/// `c/c0`, `A/A₀`: a fraction of the start.
fn ratio(lower: &str) -> Option<Named> {
    let squeezed: String =
        lower.chars().filter(|c| !matches!(c, ' ' | '(' | ')' | '[' | ']' | '_')).collect();
    let known = ["c/c0", "c/c₀", "a/a0", "a/a₀", "ca/ca0", "ct/c0", "m/m0", "n/n0"];
    known.iter().any(|ratio| squeezed.starts_with(ratio)).then(|| Named::signal(SignalIs::Left))
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    #[test]
    fn the_noun_decides() {
        for (name, role) in [
            ("Temperature", Role::Temperature),
            ("Oven temperature", Role::Temperature),
            ("Temp.", Role::Temperature),
            ("Lagertemperatur", Role::Temperature),
            ("température", Role::Temperature),
            ("temps", Role::Time),
            ("Zeit", Role::Time),
            ("time to 5 % loss", Role::Time),
            ("half-life", Role::Time),
            ("k", Role::RateConstant),
            ("k_obs", Role::RateConstant),
            ("rate constant k", Role::RateConstant),
            ("Heating rate", Role::HeatingRate),
            ("heat flow", Role::HeatRate),
            ("batch", Role::Group),
            ("product batch", Role::Group),
            ("batch assay", Role::Signal),
            ("Run no.", Role::Run),
            ("sample", Role::Label),
            ("notes", Role::Ignore),
            ("% left", Role::Signal),
            ("%", Role::Signal),
            ("c/c0", Role::Signal),
            ("Umsatz", Role::Signal),
            ("error of temperature", Role::Ignore),
            ("s(T)", Role::Ignore),
        ] {
            assert_eq!(named(name).map(|found| found.role), Some(role), "{name}");
        }
        for name in ["", "T", "t", "xyz", "50 °C"] {
            assert_eq!(named(name), None, "{name}");
        }
        assert_eq!(letter("T").unwrap().role, Role::Temperature);
        assert_eq!(letter("t").unwrap().role, Role::Time);
    }

    #[test]
    fn errors_have_many_names() {
        for (name, kind) in [
            ("sd", Some(ErrorKind::Sd)),
            ("s.d.", Some(ErrorKind::Sd)),
            ("s(k)", Some(ErrorKind::Sd)),
            ("s_k", Some(ErrorKind::Sd)),
            ("std. dev.", Some(ErrorKind::Sd)),
            ("Standardabweichung", Some(ErrorKind::Sd)),
            ("σ", Some(ErrorKind::Sd)),
            ("u(k)", Some(ErrorKind::Sd)),
            ("±", None),
            ("+/-", None),
            ("error", None),
            ("k error", None),
            ("Δk", None),
            ("SE", Some(ErrorKind::StandardError)),
            ("standard error", Some(ErrorKind::StandardError)),
            ("95 % CI", Some(ErrorKind::HalfWidth95)),
            ("± 95 %", Some(ErrorKind::HalfWidth95)),
        ] {
            let found = named(name).unwrap();
            assert_eq!((found.role, found.error_is), (Role::Sd, kind), "{name}");
        }
        assert!(named("% RSD").unwrap().relative && named("CV").unwrap().relative);
        assert!(!named("± 95 %").unwrap().relative && !named("sd").unwrap().relative);
    }

    #[test]
    fn what_a_signal_follows() {
        assert_eq!(named("% left").unwrap().signal_is, Some(SignalIs::Left));
        assert_eq!(named("conversion (%)").unwrap().signal_is, Some(SignalIs::Formed));
        assert_eq!(named("impurity area").unwrap().signal_is, Some(SignalIs::Formed));
        assert_eq!(named("absorbance").unwrap().signal_is, None);
    }
}
