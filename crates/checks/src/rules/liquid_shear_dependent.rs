//! liquid-shear-dependent
//!
//! The viscosity of this liquid depends on how fast it is sheared.
//!
//! Why it matters: The limits are computed with one viscosity. Long-chain silicone oils thin under fast shear and answer elastically at high frequency, so waves may rise at another drive than computed.
//!
//! What to do: Use a liquid of lower molecular weight, or measure the viscosity at the drive's frequency and keep more wave margin.
//!
//! Criterion: a silicone oil of more than 10 000 mm²/s (from memory of makers' data sheets; judgement). Silent for the other built-in fluids, which are Newtonian, and for own fluids, of which nothing is known.

use super::Context;
use super::context::found;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let layers = context.derived().layers.iter();
    layers
        .filter_map(|layer| {
            let caution = layer.shear_dependent.as_ref()?;
            let what = format!("\"{}\" is {caution}.", layer.name);
            let place = &layer.place;
            Some(found("liquid-shear-dependent", place, context.layer_span(&layer.name), what, String::new()))
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use crate::derived::testing::layer;
    use crate::rules::testing::*;

    #[test]
    fn fires_on_a_layer_that_is_flagged() {
        let mut case = Case::new(13.0);
        case.outcome.derived.layers = vec![layer("oil", 0.015)];
        case.silent("liquid-shear-dependent");
        case.outcome.derived.layers[0].shear_dependent = Some("shear thinning".to_owned());
        assert_eq!(case.only("liquid-shear-dependent").place, "layer.oil");
    }
}
