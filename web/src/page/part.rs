//! Elements of the page: made, filled, listened to, and kept in step with the state.

use std::cell::RefCell;

use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;
use web_sys::{Document, Element, Event, HtmlElement, HtmlInputElement, HtmlTextAreaElement, Node};

use super::live::{Scope, enter, follow};

/// One element. Where a browser makes none, all that is done to it is nothing.
#[derive(Clone)]
pub struct Part(Option<Element>);

/// The document.
pub fn document() -> Option<Document> {
    web_sys::window()?.document()
}

/// A new element.
pub fn part(tag: &str) -> Part {
    Part(document().and_then(|document| document.create_element(tag).ok()))
}

/// A new element of a drawing.
pub fn drawn(tag: &str) -> Part {
    let space = Some("http://www.w3.org/2000/svg");
    Part(document().and_then(|document| document.create_element_ns(space, tag).ok()))
}

/// A button that reads so.
pub fn button(words: &str, press: impl Fn() + 'static) -> Part {
    part("button").with("type", "button").text(words).on("click", move |_| press())
}

/// Does something when an event arrives at the window; then all parts look again.
pub fn on_window(event: &str, handle: impl Fn() + 'static) {
    let listener = Closure::<dyn Fn()>::new(move || enter(&handle)).into_js_value();
    if let Some(window) = web_sys::window() {
        // Refused only where there are no events at all.
        let _ = window.add_event_listener_with_callback(event, listener.unchecked_ref());
    }
}

/// What stands in the field that an event comes from.
pub fn value_of(event: &Event) -> String {
    let target = event.target();
    let input = target.as_ref().and_then(|target| target.dyn_ref::<HtmlInputElement>());
    if let Some(input) = input {
        return input.value();
    }
    let area = target.as_ref().and_then(|target| target.dyn_ref::<HtmlTextAreaElement>());
    area.map(HtmlTextAreaElement::value).unwrap_or_default()
}

impl Part {
    /// An element that is there already.
    pub fn of(element: Element) -> Self {
        Self(Some(element))
    }

    /// The element as what it is.
    pub fn element<T: JsCast>(&self) -> Option<T> {
        self.0.clone().and_then(|element| element.dyn_into().ok())
    }

    /// With an attribute.
    #[must_use]
    pub fn with(self, name: &str, value: &str) -> Self {
        self.set(name, Some(value));
        self
    }

    /// With classes.
    #[must_use]
    pub fn class(self, names: &str) -> Self {
        self.with("class", names)
    }

    /// With words after what it holds.
    #[must_use]
    pub fn text(self, words: &str) -> Self {
        if let Some(text) = document().map(|document| document.create_text_node(words)) {
            self.append(&text);
        }
        self
    }

    /// With another element after what it holds.
    #[must_use]
    pub fn add(self, inner: Part) -> Self {
        if let Some(inner) = &inner.0 {
            self.append(inner);
        }
        self
    }

    /// With other elements after what it holds.
    #[must_use]
    pub fn add_all(self, inner: impl IntoIterator<Item = Part>) -> Self {
        inner.into_iter().fold(self, Self::add)
    }

    /// Does something when an event arrives; then all parts look again.
    #[must_use]
    pub fn on(self, event: &str, handle: impl Fn(&Event) + 'static) -> Self {
        self.on_boxed(event, Box::new(handle));
        self
    }

    fn on_boxed(&self, event: &str, handle: Box<dyn Fn(&Event)>) {
        let Some(element) = &self.0 else { return };
        let listener = Closure::<dyn Fn(Event)>::new(move |event: Event| enter(|| handle(&event)));
        // The browser frees the listener with its element.
        let listener = listener.into_js_value();
        // Refused only where there are no events at all.
        let _ = element.add_event_listener_with_callback(event, listener.unchecked_ref());
    }

    /// With words that follow the state, after what it holds.
    #[must_use]
    pub fn says(self, words: impl Fn() -> String + 'static) -> Self {
        self.says_boxed(Box::new(words));
        self
    }

    fn says_boxed(&self, words: Box<dyn Fn() -> String>) {
        let Some(text) = document().map(|document| document.create_text_node("")) else { return };
        self.append(&text);
        let last = RefCell::new(String::new());
        follow(move || {
            let now = words();
            if *last.borrow() != now {
                text.set_data(&now);
                last.replace(now);
            }
        });
    }

    /// With an attribute that follows the state, and is absent where there is none.
    #[must_use]
    pub fn follows(self, name: &'static str, value: impl Fn() -> Option<String> + 'static) -> Self {
        self.follows_boxed(name, Box::new(value));
        self
    }

    fn follows_boxed(&self, name: &'static str, value: Box<dyn Fn() -> Option<String>>) {
        let part = self.clone();
        let last = RefCell::new(None);
        follow(move || {
            let now = value();
            if *last.borrow() != now {
                part.set(name, now.as_deref());
                last.replace(now);
            }
        });
    }

    /// With an attribute that is there or not, such as `disabled`.
    #[must_use]
    pub fn is(self, name: &'static str, holds: impl Fn() -> bool + 'static) -> Self {
        self.follows(name, move || holds().then(String::new))
    }

    /// With a property of its style that follows the state. (A style attribute is forbidden by
    /// the page's policy, its properties are not.)
    #[must_use]
    pub fn styled(self, name: &'static str, value: impl Fn() -> String + 'static) -> Self {
        let style = self.element::<HtmlElement>().map(|element| element.style());
        let style = style.or_else(|| self.element::<web_sys::SvgElement>().map(|svg| svg.style()));
        let last = RefCell::new(String::new());
        if let Some(style) = style {
            follow(move || {
                let now = value();
                if *last.borrow() != now {
                    // An unknown value leaves the look of the style sheet.
                    let _ = style.set_property(name, &now);
                    last.replace(now);
                }
            });
        }
        self
    }

    /// A field whose content follows the state.
    #[must_use]
    pub fn holds(self, value: impl Fn() -> String + 'static) -> Self {
        self.holds_boxed(Box::new(value));
        self
    }

    fn holds_boxed(&self, value: Box<dyn Fn() -> String>) {
        let input = self.element::<HtmlInputElement>();
        let area = self.element::<HtmlTextAreaElement>();
        follow(move || {
            let now = value();
            // Setting what is there already would move the cursor.
            match (&input, &area) {
                (Some(input), _) if input.value() != now => input.set_value(&now),
                (_, Some(area)) if area.value() != now => area.set_value(&now),
                _ => {}
            }
        });
    }

    /// A box that is ticked as the state has it.
    #[must_use]
    pub fn ticked(self, holds: impl Fn() -> bool + 'static) -> Self {
        if let Some(input) = self.element::<HtmlInputElement>() {
            follow(move || input.set_checked(holds()));
        }
        self
    }

    /// With content that is made anew whenever its key changes.
    #[must_use]
    pub fn filled<K: PartialEq + 'static>(
        self,
        key: impl Fn() -> K + 'static,
        make: impl Fn(&K) -> Vec<Part> + 'static,
    ) -> Self {
        let part = self.clone();
        let outer = Scope::current();
        let shown: RefCell<Option<(K, Scope)>> = RefCell::new(None);
        follow(move || {
            let now = key();
            if shown.borrow().as_ref().is_some_and(|(before, _)| *before == now) {
                return;
            }
            drop(shown.take());
            let scope = outer.run(Scope::new);
            let inner = scope.run(|| make(&now));
            part.replace(&inner);
            shown.replace(Some((now, scope)));
        });
        self
    }

    /// With something after what it holds that is there only while a condition holds.
    #[must_use]
    pub fn when(
        self,
        holds: impl Fn() -> bool + 'static,
        make: impl Fn() -> Part + 'static,
    ) -> Self {
        let slot = part("span").class("slot");
        let make = move |holds: &bool| if *holds { vec![make()] } else { Vec::new() };
        self.add(slot.filled(holds, make))
    }

    /// With one element for each key, in their order; an element lives as long as its key.
    #[must_use]
    pub fn list<K: Clone + PartialEq + 'static>(
        self,
        keys: impl Fn() -> Vec<K> + 'static,
        make: impl Fn(&K) -> Part + 'static,
    ) -> Self {
        let part = self.clone();
        let outer = Scope::current();
        let shown: RefCell<Vec<(K, Part, Scope)>> = RefCell::new(Vec::new());
        follow(move || {
            let keys = keys();
            let same = |shown: &Vec<(K, Part, Scope)>| shown.iter().map(|item| &item.0).eq(&keys);
            if same(&shown.borrow()) {
                return;
            }
            let mut before = shown.take();
            let now: Vec<(K, Part, Scope)> = keys
                .iter()
                .map(|key| match before.iter().position(|(old, ..)| old == key) {
                    Some(at) => before.swap_remove(at),
                    None => {
                        let scope = outer.run(Scope::new);
                        let made = scope.run(|| make(key));
                        (key.clone(), made, scope)
                    }
                })
                .collect();
            for (_, gone, _) in before {
                gone.remove();
            }
            part.arrange(now.iter().map(|(_, inner, _)| inner));
            shown.replace(now);
        });
        self
    }

    /// Takes the element off the page.
    fn remove(&self) {
        if let Some(element) = &self.0 {
            element.remove();
        }
    }

    /// Puts the elements into this order, and touches only those that are not in it.
    fn arrange<'a>(&self, parts: impl Iterator<Item = &'a Part>) {
        let Some(element) = &self.0 else { return };
        let mut place = element.first_child();
        for inner in parts.filter_map(|part| part.0.as_ref()) {
            let inner: &Node = inner;
            if place.as_ref().is_some_and(|place| place == inner) {
                place = place.and_then(|place| place.next_sibling());
            } else {
                // What cannot be inserted is not shown.
                let _ = element.insert_before(inner, place.as_ref());
            }
        }
    }

    /// Shows other elements in place of what it holds.
    fn replace(&self, inner: &[Part]) {
        if let Some(element) = &self.0 {
            element.set_text_content(None);
            for inner in inner.iter().filter_map(|part| part.0.as_ref()) {
                self.append(inner);
            }
        }
    }

    fn append(&self, inner: &Node) {
        if let Some(element) = &self.0 {
            // What cannot be appended is not shown.
            let _ = element.append_child(inner);
        }
    }

    fn set(&self, name: &str, value: Option<&str>) {
        let Some(element) = &self.0 else { return };
        // Names are ours and legal.
        let _ = match value {
            Some(value) => element.set_attribute(name, value),
            None => element.remove_attribute(name),
        };
    }
}
