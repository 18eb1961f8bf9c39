//! Units of heat: of reaction, capacity, release, and how fast an oven warms.

use super::unit_list;

unit_list! {
    /// Units of heat per mass.
    HeatUnit measures "heat per mass" by joules_per_kilogram:
    /// The size of the unit in J/kg.
    {
        /// kilojoule per kilogram
        KilojoulePerKilogram = "kJ/kg", "kJ/kg", 1e3;
        /// joule per gram
        JoulePerGram = "J/g", "J/g", 1e3;
        /// joule per kilogram
        JoulePerKilogram = "J/kg", "J/kg", 1.0;
        /// kilocalorie per kilogram
        KilocaloriePerKilogram = "kcal/kg", "kcal/kg", 4184.0;
        /// calorie per gram
        CaloriePerGram = "cal/g", "cal/g", 4184.0;
    }
}

unit_list! {
    /// Units of heat capacity per mass.
    HeatCapacityUnit measures "heat capacity per mass" by joules_per_kilogram_kelvin:
    /// The size of the unit in J/(kg K).
    {
        /// kilojoule per kilogram and kelvin
        KilojoulePerKilogramKelvin = "kJ/(kg K)", "kJ kg⁻¹ K⁻¹", 1e3;
        /// joule per gram and kelvin
        JoulePerGramKelvin = "J/(g K)", "J g⁻¹ K⁻¹", 1e3;
        /// joule per kilogram and kelvin
        JoulePerKilogramKelvin = "J/(kg K)", "J kg⁻¹ K⁻¹", 1.0;
        /// kilocalorie per kilogram and kelvin
        KilocaloriePerKilogramKelvin = "kcal/(kg K)", "kcal kg⁻¹ K⁻¹", 4184.0;
        /// calorie per gram and kelvin
        CaloriePerGramKelvin = "cal/(g K)", "cal g⁻¹ K⁻¹", 4184.0;
    }
}

unit_list! {
    /// Units of heat release per mass.
    HeatRateUnit measures "heat release per mass" by watts_per_kilogram:
    /// The size of the unit in W/kg.
    {
        /// watt per kilogram
        WattPerKilogram = "W/kg", "W/kg", 1.0;
        /// watt per gram
        WattPerGram = "W/g", "W/g", 1e3;
        /// milliwatt per gram
        MilliwattPerGram = "mW/g", "mW/g", 1.0;
        /// milliwatt per kilogram
        MilliwattPerKilogram = "mW/kg", "mW/kg", 1e-3;
        /// microwatt per gram
        MicrowattPerGram = "µW/g", "µW/g", 1e-3;
    }
}

unit_list! {
    /// Units of heating rate; a kelvin and a Celsius degree are one size here.
    HeatingRateUnit measures "heating rate" by kelvins_per_second:
    /// The size of the unit in K/s.
    {
        /// kelvin per minute
        KelvinPerMinute = "K/min", "K/min", 1.0 / 60.0;
        /// kelvin per second
        KelvinPerSecond = "K/s", "K/s", 1.0;
        /// kelvin per hour
        KelvinPerHour = "K/h", "K/h", 1.0 / 3600.0;
        /// kelvin per day
        KelvinPerDay = "K/d", "K/d", 1.0 / 86_400.0;
        /// Fahrenheit degree per minute
        FahrenheitPerMinute = "°F/min", "°F/min", 1.0 / 108.0;
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    #[test]
    fn usual_spellings_are_read() {
        assert_eq!(HeatUnit::parse("kJ kg-1").unwrap(), HeatUnit::KilojoulePerKilogram);
        assert_eq!(
            HeatCapacityUnit::parse("J/(g·K)").unwrap(),
            HeatCapacityUnit::JoulePerGramKelvin
        );
        assert_eq!(
            HeatCapacityUnit::parse("J/g/°C").unwrap(),
            HeatCapacityUnit::JoulePerGramKelvin
        );
        assert_eq!(
            HeatCapacityUnit::parse("kJ/kg K").unwrap(),
            HeatCapacityUnit::KilojoulePerKilogramKelvin
        );
        assert_eq!(HeatRateUnit::parse("W kg⁻¹").unwrap(), HeatRateUnit::WattPerKilogram);
        assert_eq!(HeatingRateUnit::parse("°C/min").unwrap(), HeatingRateUnit::KelvinPerMinute);
        assert_eq!(HeatingRateUnit::parse("K min-1").unwrap(), HeatingRateUnit::KelvinPerMinute);
        assert!(HeatRateUnit::parse("W").is_err());
    }

    #[test]
    fn codes_and_symbols_read_back() {
        for unit in HeatCapacityUnit::ALL {
            assert_eq!(HeatCapacityUnit::parse(unit.code()).unwrap(), *unit);
            assert_eq!(HeatCapacityUnit::parse(unit.symbol()).unwrap(), *unit);
        }
        for unit in HeatingRateUnit::ALL {
            assert_eq!(HeatingRateUnit::parse(unit.code()).unwrap(), *unit);
        }
    }
}
