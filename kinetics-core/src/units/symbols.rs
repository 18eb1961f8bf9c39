//! The words and symbols that unit expressions are made of, and what each
//! stands for.

/// Elementary symbol and power: `dm³` is ("L", 1), `M` is ("mol", 1)("L", −1).
pub(super) type Meaning = &'static [(&'static str, f64)];

const LITRE: Meaning = &[("L", 1.0)];
const MILLILITRE: Meaning = &[("mL", 1.0)];
const CUBIC_METRE_SIDE: f64 = 1.0 / 3.0;

/// Short symbols, where upper and lower case differ in meaning.
#[rustfmt::skip]
const SYMBOLS: &[(&str, Meaning)] = &[
    ("s", &[("s", 1.0)]), ("h", &[("h", 1.0)]), ("d", &[("d", 1.0)]), ("w", &[("wk", 1.0)]),
    ("a", &[("yr", 1.0)]), ("y", &[("yr", 1.0)]), ("mo", &[("mo", 1.0)]), ("wk", &[("wk", 1.0)]),
    ("yr", &[("yr", 1.0)]), ("hr", &[("h", 1.0)]), ("Hr", &[("h", 1.0)]), ("an", &[("yr", 1.0)]),
    ("L", LITRE), ("l", LITRE), ("ℓ", LITRE), ("dm", &[("L", CUBIC_METRE_SIDE)]),
    ("mL", MILLILITRE), ("ml", MILLILITRE), ("cc", MILLILITRE), ("cm", &[("mL", CUBIC_METRE_SIDE)]),
    ("µL", &[("µL", 1.0)]), ("µl", &[("µL", 1.0)]), ("uL", &[("µL", 1.0)]), ("ul", &[("µL", 1.0)]),
    ("m", &[("m³", CUBIC_METRE_SIDE)]),
    ("M", &[("mol", 1.0), ("L", -1.0)]), ("mM", &[("mmol", 1.0), ("L", -1.0)]),
    ("µM", &[("µmol", 1.0), ("L", -1.0)]), ("uM", &[("µmol", 1.0), ("L", -1.0)]),
    ("nM", &[("nmol", 1.0), ("L", -1.0)]),
    ("kg", &[("kg", 1.0)]), ("g", &[("g", 1.0)]), ("mg", &[("mg", 1.0)]), ("µg", &[("µg", 1.0)]),
    ("ug", &[("µg", 1.0)]), ("ng", &[("ng", 1.0)]),
    ("J", &[("J", 1.0)]), ("kJ", &[("kJ", 1.0)]), ("KJ", &[("kJ", 1.0)]), ("eV", &[("eV", 1.0)]),
    ("ev", &[("eV", 1.0)]), ("W", &[("W", 1.0)]), ("mW", &[("mW", 1.0)]), ("kW", &[("kW", 1.0)]),
    ("µW", &[("µW", 1.0)]), ("uW", &[("µW", 1.0)]),
    ("K", &[("K", 1.0)]), ("°C", &[("K", 1.0)]), ("ºC", &[("K", 1.0)]), ("℃", &[("K", 1.0)]),
    ("C", &[("K", 1.0)]), ("°F", &[("°F", 1.0)]), ("F", &[("°F", 1.0)]),
    ("%", &[("%", 1.0)]), ("‰", &[("‰", 1.0)]),
];

/// Words, in any case; English, German and French where unambiguous.
#[rustfmt::skip]
const WORDS: &[(&[&str], Meaning)] = &[
    (&["sec", "secs", "second", "seconds", "sekunde", "sekunden", "seconde", "secondes"], &[("s", 1.0)]),
    (&["min", "mins", "minute", "minutes", "minuten"], &[("min", 1.0)]),
    (&["hrs", "hour", "hours", "std", "stunde", "stunden", "heure", "heures"], &[("h", 1.0)]),
    (&["day", "days", "tag", "tage", "jour", "jours"], &[("d", 1.0)]),
    (&["wks", "week", "weeks", "woche", "wochen", "semaine", "semaines"], &[("wk", 1.0)]),
    (&["mos", "mth", "mths", "month", "months", "monat", "monate", "mois"], &[("mo", 1.0)]),
    (&["yrs", "year", "years", "jahr", "jahre", "ans", "année", "années"], &[("yr", 1.0)]),
    (&["litre", "litres", "liter", "liters"], LITRE),
    (&["kmol"], &[("kmol", 1.0)]), (&["mol", "mole", "moles"], &[("mol", 1.0)]),
    (&["mmol", "mmole", "mmoles"], &[("mmol", 1.0)]), (&["µmol", "umol"], &[("µmol", 1.0)]),
    (&["nmol"], &[("nmol", 1.0)]), (&["molar"], &[("mol", 1.0), ("L", -1.0)]),
    (&["gram", "grams", "gramme", "grammes"], &[("g", 1.0)]), (&["mcg"], &[("µg", 1.0)]),
    (&["cal"], &[("cal", 1.0)]), (&["kcal"], &[("kcal", 1.0)]),
    (&["kelvin", "deg", "degc", "celsius"], &[("K", 1.0)]), (&["degf", "fahrenheit"], &[("°F", 1.0)]),
    (&["percent", "pct", "prozent"], &[("%", 1.0)]), (&["fraction"], &[("fraction", 1.0)]),
    (&["ppm"], &[("mg", 1.0), ("kg", -1.0)]), (&["ppb"], &[("µg", 1.0), ("kg", -1.0)]),
    (&["molecule", "molecules", "molec"], &[("molecule", 1.0)]), (&["particle", "particles", "atom"], &[]),
];

/// What a word of a unit stands for: one symbol, or two written together
/// (`Lmol`, `kJmol`) where only one way of cutting it makes sense.
pub(super) fn meanings(word: &str) -> Option<Vec<Meaning>> {
    if let Some(found) = single(word) {
        return Some(vec![found]);
    }
    let mut cuts = word.char_indices().skip(1).filter_map(|(at, _)| {
        let (left, right) = word.split_at(at);
        Some(vec![single(left)?, single(right)?])
    });
    let only = cuts.next()?;
    cuts.next().is_none().then_some(only)
}

fn single(word: &str) -> Option<Meaning> {
    if let Some((_, meaning)) = SYMBOLS.iter().find(|(symbol, _)| *symbol == word) {
        return Some(meaning);
    }
    let lower = word.to_ascii_lowercase();
    WORDS.iter().find(|(words, _)| words.contains(&lower.as_str())).map(|(_, meaning)| *meaning)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn case_matters_for_symbols_and_not_for_words() {
        assert_eq!(single("M"), Some(&[("mol", 1.0), ("L", -1.0)][..]));
        assert_eq!(single("mM"), Some(&[("mmol", 1.0), ("L", -1.0)][..]));
        assert_eq!(single("m"), Some(&[("m³", CUBIC_METRE_SIDE)][..]));
        assert_eq!(single("Hours"), Some(&[("h", 1.0)][..]));
        assert_eq!(single("S"), None);
        assert_eq!(meanings("parsec"), None);
    }

    #[test]
    fn symbols_written_together_are_cut_where_only_one_cut_fits() {
        assert_eq!(meanings("Lmol"), Some(vec![LITRE, &[("mol", 1.0)][..]]));
        assert_eq!(meanings("kJmol"), Some(vec![&[("kJ", 1.0)][..], &[("mol", 1.0)][..]]));
    }
}
