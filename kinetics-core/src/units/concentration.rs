//! Units of concentration. Only units of one kind convert into each other:
//! nothing here knows a molar mass, a density, or what 100 % stood for.

use super::unit_list;

/// What a concentration is counted in; each kind has one base unit.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, serde::Serialize, serde::Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum ConcentrationKind {
    /// Amount per volume; base mol/L.
    Molar,
    /// Part of the initial or nominal content; base %.
    Percent,
    /// Mass per volume; base g/L.
    MassPerVolume,
    /// Mass per mass; base g/kg.
    MassPerMass,
    /// Amount per mass; base mol/kg.
    AmountPerMass,
}

unit_list! {
    /// Units of concentration. In a fraction 1 is the initial or nominal
    /// content, 100 %.
    ConcentrationUnit measures "concentration" by in_base:
    /// The size of the unit in the base unit of its kind.
    {
        /// mole per litre
        MolePerLitre = "mol/L", "mol/L", 1.0;
        /// millimole per litre
        MillimolePerLitre = "mmol/L", "mmol/L", 1e-3;
        /// micromole per litre
        MicromolePerLitre = "µmol/L", "µmol/L", 1e-6;
        /// nanomole per litre
        NanomolePerLitre = "nmol/L", "nmol/L", 1e-9;
        /// mole per cubic metre
        MolePerCubicMetre = "mol/m^3", "mol/m³", 1e-3;
        /// mole per cubic centimetre
        MolePerCubicCentimetre = "mol/cm^3", "mol/cm³", 1e3;
        /// molecule per cubic centimetre
        MoleculePerCubicCentimetre = "molecule/cm^3", "molecule/cm³", 1e3 / 6.022_140_76e23;
        /// per cent of the initial or nominal content
        Percent = "%", "%", 1.0;
        /// fraction of the initial or nominal content
        Fraction = "fraction", "fraction", 100.0;
        /// gram per litre
        GramPerLitre = "g/L", "g/L", 1.0;
        /// milligram per millilitre
        MilligramPerMillilitre = "mg/mL", "mg/mL", 1.0;
        /// milligram per litre
        MilligramPerLitre = "mg/L", "mg/L", 1e-3;
        /// microgram per millilitre
        MicrogramPerMillilitre = "µg/mL", "µg/mL", 1e-3;
        /// microgram per litre
        MicrogramPerLitre = "µg/L", "µg/L", 1e-6;
        /// kilogram per cubic metre
        KilogramPerCubicMetre = "kg/m^3", "kg/m³", 1.0;
        /// gram per kilogram
        GramPerKilogram = "g/kg", "g/kg", 1.0;
        /// milligram per gram
        MilligramPerGram = "mg/g", "mg/g", 1.0;
        /// parts per million by mass, mg/kg
        PartsPerMillion = "ppm", "ppm", 1e-3;
        /// mole per kilogram
        MolePerKilogram = "mol/kg", "mol/kg", 1.0;
        /// millimole per kilogram
        MillimolePerKilogram = "mmol/kg", "mmol/kg", 1e-3;
    }
}

impl ConcentrationKind {
    /// The unit in which this kind is counted internally.
    #[must_use]
    pub const fn base(self) -> ConcentrationUnit {
        match self {
            ConcentrationKind::Molar => ConcentrationUnit::MolePerLitre,
            ConcentrationKind::Percent => ConcentrationUnit::Percent,
            ConcentrationKind::MassPerVolume => ConcentrationUnit::GramPerLitre,
            ConcentrationKind::MassPerMass => ConcentrationUnit::GramPerKilogram,
            ConcentrationKind::AmountPerMass => ConcentrationUnit::MolePerKilogram,
        }
    }
}

impl ConcentrationUnit {
    /// What the unit counts.
    #[must_use]
    pub const fn kind(self) -> ConcentrationKind {
        match self {
            ConcentrationUnit::MolePerLitre
            | ConcentrationUnit::MillimolePerLitre
            | ConcentrationUnit::MicromolePerLitre
            | ConcentrationUnit::NanomolePerLitre
            | ConcentrationUnit::MolePerCubicMetre
            | ConcentrationUnit::MolePerCubicCentimetre
            | ConcentrationUnit::MoleculePerCubicCentimetre => ConcentrationKind::Molar,
            ConcentrationUnit::Percent | ConcentrationUnit::Fraction => ConcentrationKind::Percent,
            ConcentrationUnit::GramPerLitre
            | ConcentrationUnit::MilligramPerMillilitre
            | ConcentrationUnit::MilligramPerLitre
            | ConcentrationUnit::MicrogramPerMillilitre
            | ConcentrationUnit::MicrogramPerLitre
            | ConcentrationUnit::KilogramPerCubicMetre => ConcentrationKind::MassPerVolume,
            ConcentrationUnit::GramPerKilogram
            | ConcentrationUnit::MilligramPerGram
            | ConcentrationUnit::PartsPerMillion => ConcentrationKind::MassPerMass,
            ConcentrationUnit::MolePerKilogram | ConcentrationUnit::MillimolePerKilogram => {
                ConcentrationKind::AmountPerMass
            }
        }
    }

    /// A number in this unit, in the base unit of its kind.
    #[must_use]
    pub const fn to_base(self, value: f64) -> f64 {
        value * self.in_base()
    }

    /// A number in the base unit of this kind, in this unit.
    #[must_use]
    pub const fn from_base(self, value_in_base: f64) -> f64 {
        value_in_base / self.in_base()
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    #[test]
    fn usual_spellings_are_read() {
        for (text, unit) in [
            ("M", ConcentrationUnit::MolePerLitre),
            ("mol/L", ConcentrationUnit::MolePerLitre),
            ("mol dm-3", ConcentrationUnit::MolePerLitre),
            ("mol·L⁻¹", ConcentrationUnit::MolePerLitre),
            ("mM", ConcentrationUnit::MillimolePerLitre),
            ("mmol/l", ConcentrationUnit::MillimolePerLitre),
            ("µM", ConcentrationUnit::MicromolePerLitre),
            ("μM", ConcentrationUnit::MicromolePerLitre),
            ("uM", ConcentrationUnit::MicromolePerLitre),
            ("mol/m3", ConcentrationUnit::MolePerCubicMetre),
            ("mol/cm³", ConcentrationUnit::MolePerCubicCentimetre),
            ("%", ConcentrationUnit::Percent),
            ("percent", ConcentrationUnit::Percent),
            ("1", ConcentrationUnit::Fraction),
            ("fraction", ConcentrationUnit::Fraction),
            ("g/L", ConcentrationUnit::GramPerLitre),
            ("mg/ml", ConcentrationUnit::MilligramPerMillilitre),
            ("µg/mL", ConcentrationUnit::MicrogramPerMillilitre),
            ("ppm", ConcentrationUnit::PartsPerMillion),
            ("mg/kg", ConcentrationUnit::PartsPerMillion),
        ] {
            assert_eq!(ConcentrationUnit::parse(text).unwrap(), unit, "{text}");
        }
        for text in ["", "mol", "m", "L/mol", "AU", "2", "mol%"] {
            assert!(ConcentrationUnit::parse(text).is_err(), "{text}");
        }
    }

    #[test]
    fn codes_symbols_and_bases_agree() {
        for unit in ConcentrationUnit::ALL {
            assert_eq!(ConcentrationUnit::parse(unit.code()).unwrap(), *unit);
            assert_eq!(ConcentrationUnit::parse(unit.symbol()).unwrap(), *unit);
            assert_eq!(unit.kind().base().kind(), unit.kind());
            assert_eq!(unit.kind().base().in_base(), 1.0);
        }
        assert_eq!(ConcentrationUnit::Fraction.to_base(0.05), 5.0);
    }
}
