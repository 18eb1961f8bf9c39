//! The choices behind what was found, as menus: the law, where its intervals come from, how sure
//! they are, and how numbers are shown.

use kinetics_core::numeric::decimals::read_decimal;
use kinetics_core::study::LawChoice;
use kinetics_core::table::{Decimal, Form};
use kinetics_core::temperature_law::{Scatter, ScatterChoice};
use kinetics_core::units::{EnergyUnit, TemperatureUnit};
use kinetics_core::wording;

use super::menu::{Choice, menu};
use super::part::{Part, part};
use super::sheet::Sheet;

/// The temperature laws in words.
const LAWS: [(LawChoice, &str, &str); 4] = [
    (LawChoice::Arrhenius, "arrhenius", "Arrhenius’ law"),
    (LawChoice::Eyring, "eyring", "Eyring’s law"),
    (LawChoice::LogLinear, "log-linear", "log k linear in T (D and z)"),
    (LawChoice::Curved, "curved", "Arrhenius’ law with a bend"),
];

/// The scatter choices in words.
const SCATTER: [(ScatterChoice, &str, &str); 4] = [
    (ScatterChoice::Automatic, "", "automatic"),
    (ScatterChoice::FromResiduals, "from-residuals", "the scatter of the residuals"),
    (ScatterChoice::AsStated, "as-stated", "the errors as stated"),
    (
        ScatterChoice::AsStatedPlusRunToRun,
        "as-stated-plus-run-to-run",
        "stated errors plus run-to-run scatter",
    ),
];

/// The code of a law that the menu does not offer, but that a study can have.
const WITH_POWER: &str = "arrhenius-with-power";

/// The level of intervals where none is chosen.
const USUAL_LEVEL: f64 = 0.95;
/// Levels of intervals worth a line.
const LEVELS: [f64; 4] = [0.8, 0.9, 0.95, 0.99];

/// "Arrhenius' law; intervals of 95 % from stated errors plus run-to-run scatter."
pub fn sentences(sheet: Sheet) -> [Part; 2] {
    let is_known_law = move || sheet.study().measured.form == Form::KnownLaw;
    let explained = move || {
        let used = sheet.evaluation().findings.read.scatter;
        format!("{} {}", used.map_or("", explanation), other(sheet))
    };
    let choices = part("p")
        .add(law(sheet))
        .text("; intervals of ")
        .add(level(sheet))
        .text(" from ")
        .when(move || !is_known_law(), move || scatter(sheet))
        .when(is_known_law, || part("span").text("what was stated"))
        .text(".");
    [choices, part("p").class("quiet").is("hidden", is_known_law).says(explained)]
}

/// How numbers are shown.
pub fn display(sheet: Sheet) -> Part {
    part("p")
        .class("shown-in")
        .text("Shown in ")
        .add(temperature_unit(sheet))
        .text(" and ")
        .add(energy_unit(sheet))
        .text(", with a decimal ")
        .add(decimal(sheet))
        .text(".")
}

fn law(sheet: Sheet) -> Part {
    let offer = move || {
        let chosen = sheet.study().assumed.temperature_law.unwrap_or_default();
        let mut choices: Vec<Choice> =
            LAWS.iter().map(|(_, code, words)| Choice::new(*code, *words)).collect();
        let known = LAWS.iter().find(|(law, ..)| *law == chosen).map(|(_, code, _)| *code);
        if known.is_none() {
            choices.push(Choice::new(WITH_POWER, "Arrhenius’ law with a power of T"));
        }
        (choices, known.unwrap_or(WITH_POWER).to_owned())
    };
    menu("Temperature law", offer, move |code| {
        let known = LAWS.iter().find(|(_, own, _)| *own == code).map(|(law, ..)| *law);
        sheet.change("", |study| {
            study.assumed.temperature_law = known.filter(|law| *law != LawChoice::Arrhenius);
        });
    })
}

fn level(sheet: Sheet) -> Part {
    let offer = move || {
        let chosen = sheet.study().assumed.level.unwrap_or(USUAL_LEVEL);
        let mut levels = LEVELS.to_vec();
        if !levels.contains(&chosen) {
            levels.push(chosen);
        }
        let words = |level: f64| wording::Display::default().percent(level);
        let choices = levels.into_iter().map(|level| Choice::new(level.to_string(), words(level)));
        (choices.collect(), chosen.to_string())
    };
    menu("Level of the intervals", offer, move |code| {
        sheet.change("", |study| {
            study.assumed.level = read_decimal(code).filter(|level| *level != USUAL_LEVEL);
        });
    })
}

fn scatter(sheet: Sheet) -> Part {
    let offer = move || {
        let chosen = sheet.study().assumed.scatter.unwrap_or_default();
        let first = if chosen == ScatterChoice::Automatic {
            let used = sheet.evaluation().findings.read.scatter;
            Choice::new("", used.map_or("", name)).under("automatic")
        } else {
            Choice::new("", SCATTER[0].2)
        };
        let others = SCATTER.iter().skip(1).map(|(_, code, words)| Choice::new(*code, *words));
        let known = SCATTER.iter().find(|(choice, ..)| *choice == chosen);
        let chosen = known.map_or("", |(_, code, _)| code).to_owned();
        (std::iter::once(first).chain(others).collect(), chosen)
    };
    menu("Where the intervals come from", offer, move |code| {
        let known = SCATTER.iter().find(|(_, own, _)| *own == code).map(|(choice, ..)| *choice);
        sheet.change("", |study| {
            study.assumed.scatter = known.filter(|choice| *choice != ScatterChoice::Automatic);
        });
    })
}

fn name(scatter: Scatter) -> &'static str {
    match scatter {
        Scatter::NoneKnown => "nothing: no scatter is known",
        Scatter::FromResiduals => SCATTER[1].2,
        Scatter::AsStated => SCATTER[2].2,
        Scatter::AsStatedPlusRunToRun => SCATTER[3].2,
    }
}

fn explanation(scatter: Scatter) -> &'static str {
    match scatter {
        Scatter::NoneKnown => {
            "As many runs as unknowns and no stated errors: measure a third temperature, or state \
             errors."
        }
        Scatter::FromResiduals => "How far the runs lie from the law says how much they scatter.",
        Scatter::AsStated => "The stated errors are taken to be all the scatter there is.",
        Scatter::AsStatedPlusRunToRun => {
            "The stated errors, and whatever the runs scatter beyond them."
        }
    }
}

/// What the other scatter choices would give.
fn other(sheet: Sheet) -> String {
    let evaluation = sheet.evaluation();
    let (Some(law), Some(basis)) = (&evaluation.findings.law, &evaluation.basis) else {
        return String::new();
    };
    let unit = basis.display.energy.symbol();
    // "With the errors as stated: 86 to 94 kJ/mol."
    let said = law.other_scatter.iter().filter_map(|other| {
        let estimate = &other.activation_energy;
        let energy = wording::Number {
            value: estimate.value,
            range: estimate.low.zip(estimate.high),
            origin: wording::Origin::Fitted,
        };
        let shown = wording::energy(energy, &basis.display);
        let (low, high) = shown.limits?;
        Some(format!("With {}: {low} to {high}\u{a0}{unit}.", name(other.scatter)))
    });
    said.collect::<Vec<_>>().join(" ")
}

fn temperature_unit(sheet: Sheet) -> Part {
    let offer = move || {
        let units = TemperatureUnit::ALL.iter();
        let choices = units.map(|unit| Choice::new(unit.code(), unit.symbol())).collect();
        let chosen = sheet.study().display.temperature.unwrap_or(TemperatureUnit::Celsius);
        (choices, chosen.code().to_owned())
    };
    menu("Unit of temperatures", offer, move |code| {
        sheet.change("", |study| study.display.temperature = TemperatureUnit::parse(code).ok());
    })
}

fn energy_unit(sheet: Sheet) -> Part {
    let offer = move || {
        let units = EnergyUnit::ALL.iter();
        let choices = units.map(|unit| Choice::new(unit.code(), unit.symbol())).collect();
        let chosen = sheet.study().display.energy.unwrap_or(EnergyUnit::KilojoulePerMole);
        (choices, chosen.code().to_owned())
    };
    menu("Unit of energies", offer, move |code| {
        sheet.change("", |study| study.display.energy = EnergyUnit::parse(code).ok());
    })
}

fn decimal(sheet: Sheet) -> Part {
    let offer = move || {
        let choices = vec![Choice::new(".", "point"), Choice::new(",", "comma")];
        (choices, sheet.decimal().to_string())
    };
    menu("Decimal sign of what is shown", offer, move |mark| {
        let comma = (mark == ",").then_some(Decimal::Comma);
        sheet.change("", |study| study.display.decimal = comma);
    })
}
