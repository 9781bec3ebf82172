//! Whether the reading is still wanted. Loops ask before each step and leave what is then not wanted unfinished.

use std::cell::Cell;

/// Asks until it is told once that the work is no longer wanted.
pub(crate) struct Interrupt<'a> {
    cancel: &'a dyn Fn() -> bool,
    due: Cell<bool>,
}

impl<'a> Interrupt<'a> {
    /// Never due.
    pub fn never() -> Interrupt<'static> {
        Interrupt::by(&|| false)
    }

    /// Due as soon as `cancel` says so.
    pub fn by(cancel: &'a dyn Fn() -> bool) -> Interrupt<'a> {
        Interrupt { cancel, due: Cell::new(false) }
    }

    /// Once due, always due.
    pub fn is_due(&self) -> bool {
        if !self.due.get() {
            self.due.set((self.cancel)());
        }
        self.due.get()
    }
}
