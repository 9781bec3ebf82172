//! gas-layer-compressible
//!
//! The gas beside a slab cannot be taken as incompressible for the waves on its faces.
//!
//! Why it matters: The limits of that slab are computed with incompressible gas beside it and may be off by about this share.
//!
//! What to do: Treat the limits with that much more margin, or use a lower frequency, a narrower cell or a thicker gas layer.
//!
//! Criterion: (ω/kc)² ρ_gas/(ρ_liquid tanh kH) at the longest mode of the cell above 1 % (judgement), with c the speed of sound and H the thickness of the gas: the change of the gas's share in a wave's inertia when its density may vary.

use super::Context;
use super::context::found;
use crate::limits::GAS_COMPRESSIBLE;
use crate::words;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let slabs = context.derived().slabs.iter().filter(|slab| !slab.faces.is_empty());
    slabs
        .filter_map(|slab| {
            let share = slab.gas_compressibility.filter(|share| *share > GAS_COMPRESSIBLE)?;
            context.derived().drive?;
            let what = format!(
                "Beside \"{}\" the compressibility of the gas changes the waves by about {}.",
                slab.name,
                words::percent(share)
            );
            let place = context.layer_place(&slab.layers[0]);
            let span = context.layer_span(&slab.layers[0]);
            let mut finding = found("gas-layer-compressible", &place, span, what, String::new());
            finding.values.push(("share", share));
            Some(finding)
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    fn case(share: Option<f64>) -> Case {
        let mut case = Case::new(13.0).slab("oil", 1.7, &[(100.0, Some(1000.0))]);
        case.outcome.derived.slabs[0].gas_compressibility = share;
        case
    }

    #[test]
    fn fires_above_one_per_cent_and_not_below() {
        assert_eq!(case(Some(0.0101)).only("gas-layer-compressible").place, "layer.oil");
        case(Some(0.01)).silent("gas-layer-compressible");
        case(None).silent("gas-layer-compressible");
    }
}
