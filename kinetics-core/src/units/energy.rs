//! Units of molar energy, as activation energies are given.

use super::unit_list;

unit_list! {
    /// Units of energy per amount of substance. The calorie is the
    /// thermochemical one, 4.184 J exactly; 1 eV per particle is e·N_A (both
    /// exact in the SI of 2019).
    EnergyUnit measures "energy per mole" by joules_per_mole:
    /// The size of the unit in J/mol.
    {
        /// kilojoule per mole
        KilojoulePerMole = "kJ/mol", "kJ/mol", 1e3;
        /// joule per mole
        JoulePerMole = "J/mol", "J/mol", 1.0;
        /// kilocalorie per mole
        KilocaloriePerMole = "kcal/mol", "kcal/mol", 4184.0;
        /// calorie per mole
        CaloriePerMole = "cal/mol", "cal/mol", 4.184;
        /// electronvolt per particle
        ElectronvoltPerParticle = "eV", "eV", 1.602_176_634e-19 * 6.022_140_76e23;
    }
}

impl EnergyUnit {
    /// A number in this unit, in J/mol.
    #[must_use]
    pub const fn to_joules_per_mole(self, value: f64) -> f64 {
        value * self.joules_per_mole()
    }

    /// A number of J/mol, in this unit.
    #[must_use]
    pub const fn from_joules_per_mole(self, energy_joules_per_mole: f64) -> f64 {
        energy_joules_per_mole / self.joules_per_mole()
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    #[test]
    fn usual_spellings_are_read() {
        for (text, unit) in [
            ("kJ/mol", EnergyUnit::KilojoulePerMole),
            ("kJ mol-1", EnergyUnit::KilojoulePerMole),
            ("kJ·mol⁻¹", EnergyUnit::KilojoulePerMole),
            ("kJ mol^−1", EnergyUnit::KilojoulePerMole),
            ("kJmol⁻¹", EnergyUnit::KilojoulePerMole),
            ("J/mol", EnergyUnit::JoulePerMole),
            ("kcal per mol", EnergyUnit::KilocaloriePerMole),
            ("cal/mole", EnergyUnit::CaloriePerMole),
            ("eV", EnergyUnit::ElectronvoltPerParticle),
            ("eV/particle", EnergyUnit::ElectronvoltPerParticle),
        ] {
            assert_eq!(EnergyUnit::parse(text).unwrap(), unit, "{text}");
        }
        for text in ["kJ", "kJ/kg", "mol/kJ", "10 kJ/mol"] {
            assert!(EnergyUnit::parse(text).is_err(), "{text}");
        }
    }

    #[test]
    fn an_electronvolt_is_96_485_joules_per_mole() {
        let found = EnergyUnit::ElectronvoltPerParticle.to_joules_per_mole(1.0);
        assert!((found - 96_485.332_123_310).abs() < 1e-7);
        assert_eq!(EnergyUnit::KilocaloriePerMole.from_joules_per_mole(4184.0), 1.0);
    }
}
