//! pinned-line-slides
//!
//! The contact line is said to be pinned, but the slab slides along the wall.
//!
//! Why it matters: A line cannot stay pinned where the slab moves along the wall in every period; the modes of a pinned line mean nothing for this slab, and the sliding line draws a film.
//!
//! What to do: Write `contact-line = "free"`, for which the modes are judged here.
//!
//! Criterion: the slab is levitated and moves along the wall with an amplitude |T − 1|·x above 0.1 mm (judgement: about as far as a meniscus flexes).
//!
//! Silent for slabs that rest in the cell, and without a drive.

use super::Context;
use super::context::found;
use crate::derived::{LINE_FLEXES, Seat};
use crate::words;
use setup::finding::{Edit, Finding, Fix};

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    finding(context).into_iter().collect()
}

fn finding(context: &Context<'_>) -> Option<Finding> {
    let pinned = &context.setup.cell.as_ref()?.pinned_line;
    if !pinned.value {
        return None;
    }
    let slides = context.derived().slabs.iter().filter(|slab| slab.seat == Seat::Floating);
    let (slab, slide) = slides
        .filter_map(|slab| Some((slab, slab.motion.as_ref()?.slide)))
        .max_by(|a, b| a.1.total_cmp(&b.1))
        .filter(|(_, slide)| *slide > LINE_FLEXES)?;
    let what = format!(
        "The contact line is pinned, but \"{}\" slides along the wall by {} peak in every period.",
        slab.name,
        words::millimetres(slide)
    );
    let span = context.span(&pinned.place);
    let mut finding = found("pinned-line-slides", &pinned.place, span.clone(), what, String::new());
    finding.values.push(("slide_m", slide));
    if !span.is_empty() {
        finding.fixable = true;
        finding.fixes.push(Fix {
            title: "Judge with a free contact line".to_owned(),
            keeps_meaning: false,
            edits: vec![Edit { span, new_text: "\"free\"".to_owned() }],
        });
    }
    Some(finding)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::testing::*;

    fn case(slide: f64) -> Case {
        let mut case = Case::new(13.0).slab("oil", 1.7, &[(100.0, Some(1000.0))]);
        case.setup.cell.as_mut().expect("a cell").pinned_line.value = true;
        case.outcome.derived.slabs[0].motion.as_mut().expect("it moves").slide = slide;
        case
    }

    #[test]
    fn fires_when_a_levitated_slab_slides() {
        // D1 of the worked designs: (1.731 − 1) × 1.29 mm.
        let found = case(0.943e-3).only("pinned-line-slides");
        assert_eq!(found.place, "cell.contact-line");
        assert!(found.message.what.contains("0.943 mm"));
        case(1.01e-4).only("pinned-line-slides");
        case(1.0e-4).silent("pinned-line-slides");
    }

    #[test]
    fn silent_when_free_at_rest_or_on_the_floor() {
        let mut free = case(1e-3);
        free.setup.cell.as_mut().expect("a cell").pinned_line.value = false;
        free.silent("pinned-line-slides");
        let mut floor = case(1e-3);
        floor.outcome.derived.slabs[0].seat = Seat::OnFloor;
        floor.silent("pinned-line-slides");
        let mut still = case(1e-3);
        still.outcome.derived.slabs[0].motion = None;
        still.silent("pinned-line-slides");
    }
}
