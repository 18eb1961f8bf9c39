//! Undo and redo: earlier and later studies, one step for each thing done.

use std::rc::Rc;

use kinetics_core::study::Study;

/// More steps than this are forgotten from the far end.
const MOST_STEPS: usize = 200;
/// More text than this, in bytes over all steps, is forgotten likewise.
const MOST_BYTES: usize = 48_000_000;

/// What was and what was taken back.
#[derive(Debug, Default)]
pub struct History {
    past: Vec<Rc<Study>>,
    future: Vec<Rc<Study>>,
    /// The step that is under way, such as typing into one blank; empty when none is.
    step: String,
}

impl History {
    /// Keeps a study as it was before a change. Changes that carry the same `step` without a
    /// [`seal`](Self::seal) between them are one; an empty `step` stands alone.
    pub fn record(&mut self, before: Rc<Study>, step: &str) {
        self.future.clear();
        if !step.is_empty() && step == self.step {
            return;
        }
        step.clone_into(&mut self.step);
        self.past.push(before);
        let mut bytes = 0;
        let kept = self.past.iter().rev().take(MOST_STEPS).take_while(|study| {
            bytes += study.measured.text.len();
            bytes <= MOST_BYTES
        });
        // The last step can be taken back however large it was.
        let kept = kept.count().max(1);
        self.past.drain(..self.past.len() - kept);
    }

    /// Ends the step that is under way.
    pub fn seal(&mut self) {
        self.step.clear();
    }

    /// Forgets the last change, which did not come about.
    pub fn forget_last(&mut self) {
        self.seal();
        self.past.pop();
    }

    /// The study before the last change; `now` can be had back.
    pub fn undo(&mut self, now: Rc<Study>) -> Option<Rc<Study>> {
        self.seal();
        let before = self.past.pop()?;
        self.future.push(now);
        Some(before)
    }

    /// The study before the last undo.
    pub fn redo(&mut self, now: Rc<Study>) -> Option<Rc<Study>> {
        self.seal();
        let after = self.future.pop()?;
        self.past.push(now);
        Some(after)
    }

    /// Whether there is something to undo, and to redo.
    pub fn can(&self) -> (bool, bool) {
        (!self.past.is_empty(), !self.future.is_empty())
    }
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use super::*;

    fn titled(title: &str) -> Rc<Study> {
        Rc::new(Study { title: title.into(), ..Study::new() })
    }

    #[test]
    fn undo_and_redo_walk_the_same_way() {
        let mut history = History::default();
        history.record(titled("a"), "");
        history.record(titled("b"), "");
        assert_eq!(history.undo(titled("c")).unwrap().title, "b");
        assert_eq!(history.undo(titled("b")).unwrap().title, "a");
        assert_eq!(history.undo(titled("a")), None);
        assert_eq!(history.redo(titled("a")).unwrap().title, "b");
        assert_eq!(history.can(), (true, true));
        history.record(titled("b"), "");
        assert_eq!(history.can(), (true, false));
    }

    #[test]
    fn typing_into_one_place_is_one_step() {
        let mut history = History::default();
        for before in ["", "2", "25"] {
            history.record(titled(before), "blank 1");
        }
        history.seal();
        history.record(titled("25 °"), "blank 1");
        assert_eq!(history.undo(titled("25 °C")).unwrap().title, "25 °");
        assert_eq!(history.undo(titled("25 °")).unwrap().title, "");
    }

    #[test]
    fn large_studies_push_out_old_ones_but_never_the_last() {
        let mut history = History::default();
        let mut large = Study::new();
        large.measured.text = "x".repeat(MOST_BYTES + 1);
        history.record(titled("a"), "");
        history.record(Rc::new(large), "");
        assert_eq!(history.undo(titled("c")).unwrap().measured.text.len(), MOST_BYTES + 1);
        assert_eq!(history.undo(titled("c")), None);
        for number in 0..MOST_STEPS + 5 {
            history.record(titled(&number.to_string()), "");
        }
        assert_eq!(history.past.len(), MOST_STEPS);
    }
}
