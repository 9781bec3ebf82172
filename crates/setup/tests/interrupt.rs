//! Reading that is no longer wanted is given up after a statement at the most.

use std::cell::Cell;
use topheavy_setup::{LARGEST_FILE, understand, understand_unless};

const EXAMPLE: &str = include_str!("examples/levitated.stack.toml");
/// Four statements.
const MORE: &str = "# a line of notes\nsomething = \"12.5 mm\"\n[a.b]\nother = [1, 2, 3]\nbroken = \n";

/// A file of the largest size that is read, and how many statements were added to it.
fn large() -> (String, usize) {
    let times = (LARGEST_FILE - EXAMPLE.len()) / MORE.len();
    (format!("{EXAMPLE}\n{}", MORE.repeat(times)), 4 * times)
}

/// Reads until the question of this number is answered with yes; what came of it, and how many were asked.
fn read_until(text: &str, number: usize) -> (bool, usize) {
    let asked = Cell::new(0);
    let cancel = || {
        asked.set(asked.get() + 1);
        asked.get() >= number
    };
    (understand_unless(text, &cancel).is_some(), asked.get())
}

#[test]
fn it_is_asked_at_every_statement_and_never_again() {
    let (text, statements) = large();
    let (is_read, questions) = read_until(&text, usize::MAX);
    assert!(is_read && questions > 2 * statements, "{questions} for {statements} statements");
    for part in 1..=20 {
        let number = questions * part / 20;
        assert_eq!(read_until(&text, number), (false, number));
    }
}

#[test]
fn what_is_wanted_to_the_end_is_read_as_ever() {
    assert_eq!(understand_unless(EXAMPLE, &|| false), Some(understand(EXAMPLE)));
}
