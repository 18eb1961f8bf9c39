//! The time map, with flags that can be dragged; the blanks of the sentences are the typed
//! equivalent.

use std::cell::RefCell;
use std::rc::Rc;

use kinetics_core::numeric::decimals::read_decimal;
use kinetics_core::quantity::Quantity;
use kinetics_core::question::{BlankKind, Question};
use kinetics_core::study::{Evaluation, Study};
use kinetics_core::units::{TemperatureUnit, TimeUnit};
use wasm_bindgen::JsCast;
use web_sys::{Element, Event, PointerEvent};

use super::super::canvas::{self, Drawing};
use super::super::live::State;
use super::super::part::{Part, part};
use super::super::picture_table::picture_table;
use super::super::pictures::{self, code, quantities};
use super::super::sheet::Sheet;
use super::super::surroundings::Surroundings;
use super::super::take_along::{Format, take_along};
use crate::figure::Picture;
use crate::figure::time_map::{Place, TimeMap, View};

/// A flag that follows the pointer.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Drag {
    question: usize,
    moves: Moves,
    view: View,
}

/// What a flag's question has a blank for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Moves {
    Temperature(&'static str),
    Time(&'static str),
}

/// The map as it is now; the same one as long as nothing changed.
type Map = Rc<dyn Fn() -> Rc<TimeMap>>;

/// A map, and what it was drawn from.
type Known = (Rc<Study>, Rc<Evaluation>, Option<View>, Rc<TimeMap>);

/// What pointers do to the map.
struct Hand {
    sheet: Sheet,
    map: Map,
    size: State<(f64, f64)>,
    drag: State<Option<Drag>>,
    is_over_flag: State<bool>,
}

/// The map with its table.
pub fn figure(sheet: Sheet, surroundings: State<Surroundings>) -> Part {
    let drag = State::new(None::<Drag>);
    let is_over_flag = State::new(false);
    let map = following(sheet, drag.clone());
    let shown = Rc::clone(&map);
    let drawing: Drawing = Rc::new(move || shown() as Rc<dyn Picture>);
    let over = is_over_flag.clone();
    let canvas = part("canvas").follows("class", move || {
        Some(if over.get() { "map movable".to_owned() } else { "map".to_owned() })
    });
    let size = canvas::paint(&canvas, sheet, Rc::clone(&drawing), surroundings);
    let hand = Rc::new(Hand { sheet, map, size, drag, is_over_flag });
    let with = |act: fn(&Hand, &PointerEvent)| {
        let hand = Rc::clone(&hand);
        move |event: &Event| {
            if let Some(event) = event.dyn_ref() {
                act(&hand, event);
            }
        }
    };
    let canvas = canvas
        .on("pointerdown", with(Hand::press))
        .on("pointermove", with(Hand::follow))
        .on("pointerup", with(Hand::release))
        .on("pointercancel", with(Hand::release));
    let caption = part("figcaption")
        .add(part("span").class("changes").text("Drag a flag, or type into its blank. "))
        .text("Line: solid inside the data, dashed near, dotted far, hatched beyond.");
    part("figure")
        .class("picture")
        .add(canvas)
        .add(caption)
        .add(picture_table(sheet, Rc::clone(&drawing)))
        .add(take_along(sheet, drawing, Format { name: "time-map", slope: 7.0 / 8.0 }))
}

/// The map of the study and its findings, held still while a flag is dragged.
fn following(sheet: Sheet, drag: State<Option<Drag>>) -> Map {
    let known: RefCell<Option<Known>> = RefCell::new(None);
    Rc::new(move || {
        let (study, evaluation) = (sheet.study(), sheet.evaluation());
        let held = drag.get().map(|drag| drag.view);
        if let Some((of, with, view, map)) = known.borrow().as_ref()
            && Rc::ptr_eq(of, &study)
            && Rc::ptr_eq(with, &evaluation)
            && *view == held
        {
            return Rc::clone(map);
        }
        let map = Rc::new(pictures::time_map(&study, &evaluation, &sheet.curve(), held));
        known.replace(Some((study, evaluation, held, Rc::clone(&map))));
        map
    })
}

impl Hand {
    fn under(&self, event: &PointerEvent) -> Option<Drag> {
        let (x, y) = (f64::from(event.offset_x()), f64::from(event.offset_y()));
        drag_at(self.sheet, &(self.map)(), self.size.get(), x, y)
    }

    fn press(&self, event: &PointerEvent) {
        let Some(found) = self.under(event) else { return };
        event.prevent_default();
        let target = event.target().and_then(|target| target.dyn_into::<Element>().ok());
        if let Some(canvas) = target {
            // Without capture the flag follows as long as the pointer is over the map.
            let _ = canvas.set_pointer_capture(event.pointer_id());
        }
        self.drag.set(Some(found));
    }

    fn follow(&self, event: &PointerEvent) {
        match self.drag.get() {
            None => self.is_over_flag.set(self.under(event).is_some()),
            Some(drag) => {
                let (x, y) = (f64::from(event.offset_x()), f64::from(event.offset_y()));
                move_flag(self.sheet, &drag, (self.map)().place_at(self.size.get(), x, y));
            }
        }
    }

    fn release(&self, _: &PointerEvent) {
        if self.drag.get().is_some() {
            self.drag.set(None);
            self.sheet.seal();
        }
    }
}

/// The flag under a pixel, if its question has one blank for it to move.
fn drag_at(sheet: Sheet, map: &TimeMap, size: (f64, f64), x: f64, y: f64) -> Option<Drag> {
    let flag = map.flags.get(map.flag_at(size, x, y)?)?;
    if sheet.is_locked() {
        return None;
    }
    let question = flag.number.checked_sub(1)?;
    let study = sheet.study();
    let asked = study.asked.get(question)?;
    let blanks = Question::of_code(code(asked))?.blanks;
    let named = |kind: BlankKind, name: &str| {
        let mut own = blanks.iter().filter(|blank| blank.kind == kind);
        own.find(|blank| blank.name == name && quantities(asked, name).len() == 1)
    };
    let temperature = named(BlankKind::Temperature, "temperature");
    let time = named(BlankKind::Time, "time");
    let moves = match (temperature, time) {
        (Some(blank), _) => Moves::Temperature(blank.name),
        (None, Some(blank)) => Moves::Time(blank.name),
        (None, None) => return None,
    };
    Some(Drag { question, moves, view: map.view() })
}

/// Writes the place of a flag into its blank, in the unit that stands there.
fn move_flag(sheet: Sheet, drag: &Drag, place: Place) {
    let Drag { question, moves, .. } = *drag;
    let (name, written): (_, fn(&str, Place) -> Option<Quantity>) = match moves {
        Moves::Temperature(name) => (name, |unit, place| {
            let scale = TemperatureUnit::parse(unit).ok()?;
            Some(rounded(Quantity::new(scale.from_kelvin(place.temperature), unit), 0.5))
        }),
        Moves::Time(name) => (name, |unit, place| {
            let time = TimeUnit::parse(unit).ok()?.from_seconds(place.time_seconds);
            let quantity = Quantity::new(time, unit);
            // Two figures: as fine as a hand is steady.
            let step = 10_f64.powf(quantity.value.abs().log10().floor() - 1.0);
            Some(rounded(quantity, step))
        }),
    };
    sheet.change(&format!("flag {question}"), |study| {
        let Some(asked) = study.asked.get_mut(question) else { return };
        let Some(unit) = quantities(asked, name).into_iter().next().map(|q| q.unit) else { return };
        if let Some(value) = written(&unit, place).and_then(|q| serde_json::to_value(q).ok()) {
            asked.insert(name.to_owned(), value);
        }
    });
}

fn rounded(quantity: Quantity, step: f64) -> Quantity {
    // Back through decimals, so that 0.1 steps do not show binary dust.
    let value = (quantity.value / step).round() * step;
    let decimals = (-step.log10().floor()).clamp(0.0, 12.0) as usize;
    let tidy = read_decimal(&format!("{value:.decimals$}")).unwrap_or(value);
    Quantity { value: tidy, ..quantity }
}
