//! Parts of the page that follow the state: after each change every part looks again, and one
//! that finds nothing new touches nothing.
//!
//! That is simpler and much smaller than tracking what depends on what, and quick enough: a page
//! has a few thousand parts at most, since only the rows in view exist.

use std::cell::{Cell, RefCell};
use std::rc::{Rc, Weak};

/// Looks that change something for others to look at again end after so many rounds.
const MOST_ROUNDS: usize = 20;

/// Parts that come and go together.
#[derive(Clone, Default)]
pub struct Scope(Rc<Members>);

#[derive(Default)]
struct Members {
    looks: RefCell<Vec<Rc<dyn Fn()>>>,
    inner: RefCell<Vec<Weak<Members>>>,
}

thread_local! {
    /// The scope of the whole page, and the one to which parts are being added.
    static PAGE: Scope = Scope::default();
    static CURRENT: RefCell<Scope> = RefCell::new(PAGE.with(Scope::clone));
    /// Whether something changed since the parts last looked, and whether they look right now.
    static CHANGED: Cell<bool> = const { Cell::new(false) };
    static LOOKING: Cell<bool> = const { Cell::new(false) };
}

impl Scope {
    /// A scope within the current one; it ends when it is dropped.
    pub fn new() -> Self {
        let scope = Self::default();
        CURRENT.with_borrow(|outer| outer.0.inner.borrow_mut().push(Rc::downgrade(&scope.0)));
        scope
    }

    /// The scope in which parts are being made.
    pub fn current() -> Self {
        CURRENT.with_borrow(Scope::clone)
    }

    /// Makes parts in this scope.
    pub fn run<T>(&self, make: impl FnOnce() -> T) -> T {
        let outer = CURRENT.replace(self.clone());
        let made = make();
        CURRENT.set(outer);
        made
    }

    fn look(&self) {
        // A look may add to the lists: they are walked by number, and never held.
        let mut at = 0;
        while let Some(look) = { self.0.looks.borrow().get(at).cloned() } {
            look();
            at += 1;
        }
        let inner: Vec<Weak<Members>> = {
            let mut inner = self.0.inner.borrow_mut();
            inner.retain(|scope| scope.strong_count() > 0);
            inner.clone()
        };
        for scope in inner.iter().filter_map(Weak::upgrade) {
            Scope(scope).look();
        }
    }
}

/// Runs `look` now, and after every change as long as the current scope lives.
pub fn follow(look: impl Fn() + 'static) {
    let look: Rc<dyn Fn()> = Rc::new(look);
    look();
    CURRENT.with_borrow(|scope| scope.0.looks.borrow_mut().push(look));
}

/// Says that something changed.
pub fn changed() {
    CHANGED.set(true);
}

/// Does something that the browser asked for, an event or a timer; then all parts look again.
pub fn enter<T>(task: impl FnOnce() -> T) -> T {
    let done = task();
    // What is asked for while parts look, a lost focus for instance, is looked at in turn.
    if LOOKING.replace(true) {
        return done;
    }
    for _ in 0..MOST_ROUNDS {
        if !CHANGED.replace(false) {
            break;
        }
        PAGE.with(Scope::look);
    }
    LOOKING.set(false);
    done
}

/// A value that parts look at.
#[derive(Default)]
pub struct State<T>(Rc<RefCell<T>>);

impl<T> Clone for State<T> {
    fn clone(&self) -> Self {
        Self(Rc::clone(&self.0))
    }
}

impl<T: Clone + PartialEq> State<T> {
    /// A state with its first value.
    pub fn new(value: T) -> Self {
        Self(Rc::new(RefCell::new(value)))
    }

    /// The value.
    pub fn get(&self) -> T {
        self.0.borrow().clone()
    }

    /// Puts another value in its place.
    pub fn set(&self, value: T) {
        let before = self.0.replace(value);
        if before != *self.0.borrow() {
            changed();
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn parts_look_again_after_a_change_and_not_without() {
        let number = State::new(1);
        let seen = Rc::new(RefCell::new(Vec::new()));
        let (look_at, notes) = (number.clone(), Rc::clone(&seen));
        follow(move || notes.borrow_mut().push(look_at.get()));
        enter(|| number.set(2));
        enter(|| number.set(2));
        enter(|| ());
        assert_eq!(*seen.borrow(), [1, 2]);
    }

    #[test]
    fn a_scope_that_ended_looks_no_more() {
        let number = State::new(0);
        let looks = Rc::new(Cell::new(0));
        let scope = Scope::new();
        let count = Rc::clone(&looks);
        scope.run(|| follow(move || count.set(count.get() + 1)));
        enter(|| number.set(1));
        assert_eq!(looks.get(), 2);
        drop(scope);
        enter(|| number.set(2));
        assert_eq!(looks.get(), 2);
    }

    #[test]
    fn changes_made_while_looking_are_looked_at_and_come_to_an_end() {
        let (first, second) = (State::new(0), State::new(0));
        let (from, to) = (first.clone(), second.clone());
        let seen = Rc::new(Cell::new(0));
        let (look_at, note) = (second.clone(), Rc::clone(&seen));
        follow(move || note.set(look_at.get()));
        follow(move || to.set(from.get() * 2));
        enter(|| first.set(3));
        assert_eq!(seen.get(), 6);
        let restless = State::new(0);
        let again = restless.clone();
        follow(move || again.set(again.get() + 1));
        enter(changed);
        assert!(restless.get() <= 2 * MOST_ROUNDS + 1);
    }
}
