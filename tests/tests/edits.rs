//! What is computed again after an edit, by the counters of the caches. Expected numbers follow from what depends on what:
//! a slab's verdict on the layers of the slab and the gas beside it, its tensions, its own acceleration and the cell.

use checks::Engine;
use topheavy_tests::sample::{tower, two_slabs};

/// Verdicts on slabs.
#[derive(Debug, PartialEq)]
struct Slabs {
    remembered: u64,
    computed: u64,
}

/// How many slabs were remembered and computed so far.
fn slabs(engine: &Engine) -> Slabs {
    let usage = engine.slabs_held();
    Slabs { remembered: usage.hits, computed: usage.misses }
}

/// How many slabs were remembered and computed by the check of `edited` right after that of `before`.
fn after(before: &str, edited: &str) -> Slabs {
    let engine = Engine::new();
    checks::analyse(before, &engine, &|| false);
    let first = slabs(&engine);
    assert_eq!(first, Slabs { remembered: 0, computed: 2 }, "two slabs, nothing known");
    checks::analyse(edited, &engine, &|| false);
    let now = slabs(&engine);
    Slabs { remembered: now.remembered - first.remembered, computed: now.computed - first.computed }
}

const NOTHING: Slabs = Slabs { remembered: 2, computed: 0 };

#[test]
fn what_means_the_same_is_not_computed_again() {
    let text = two_slabs(0);
    assert_eq!(after(&text, &text), NOTHING, "the same text");
    assert_eq!(after(&text, &format!("# a comment\n\n{text}")), NOTHING, "a comment moves every place");
    assert_eq!(
        after(&text, &text.replace("\"40 mm\"", "\"4 cm\"")),
        NOTHING,
        "the same length in another unit"
    );
    assert_eq!(after(&text, &text.replace("\"oil 1\"", "\"lower oil\"")), NOTHING, "another name");
}

#[test]
fn an_edit_of_one_slab_that_moves_no_other_costs_one() {
    // The tension of the lower slab's upper face carries nothing: the chain, and with it the upper slab, stay.
    let text = two_slabs(0);
    let edited = format!("{text}[[interface]]\nbetween = [\"air 0\", \"oil 1\"]\ntension = \"20 mN/m\"\n");
    assert_eq!(after(&text, &edited), Slabs { remembered: 1, computed: 1 });
}

#[test]
fn an_edit_that_moves_every_slab_costs_every_slab() {
    // The cell's acceleration is every slab's.
    let text = two_slabs(0);
    let edited = text.replace("13.2 g0", "13.3 g0");
    assert_ne!(text, edited);
    assert_eq!(after(&text, &edited), Slabs { remembered: 0, computed: 2 });
}

#[test]
fn cost_is_one_verdict_a_slab() {
    for many in [2, 5] {
        let engine = Engine::new();
        checks::analyse(&tower(many, 0), &engine, &|| false);
        assert_eq!(slabs(&engine), Slabs { remembered: 0, computed: u64::from(many) });
    }
}
