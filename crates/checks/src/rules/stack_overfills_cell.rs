//! stack-overfills-cell
//!
//! The layers are thicker than the cell is high.
//!
//! Why it matters: They do not fit: liquid stands above the rim or the lid cannot be closed, and every depth here is another one in the lab.
//!
//! What to do: Correct the height of the cell or the thickness of a layer.
//!
//! Criterion: the sum of the thicknesses at operating pressure exceeds `cell.height` by more than 10 µm (rounding; judgement: finer than anybody measures a cell).
//!
//! Silent when the height is not given or a thickness is not known.

use super::Context;
use super::context::found;
use crate::words;
use setup::finding::Finding;

/// m (judgement, see the page)
const ROUNDING: f64 = 1e-5;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    finding(context).into_iter().collect()
}

fn finding(context: &Context<'_>) -> Option<Finding> {
    let height = context.setup.cell.as_ref()?.height.as_ref()?.value;
    let layers = &context.derived().layers;
    let sum: f64 = layers.iter().map(|layer| layer.thickness).sum();
    if sum <= height + ROUNDING {
        return None;
    }
    let what = format!(
        "The layers are {} high together, the cell is {}: {} too much.",
        words::millimetres(sum),
        words::millimetres(height),
        words::millimetres(sum - height)
    );
    let mut finding =
        found("stack-overfills-cell", "cell.height", context.span("cell.height"), what, String::new());
    finding.values = vec![("stack_height_m", sum), ("cell_height_m", height)];
    finding.related = layers
        .iter()
        .map(|layer| setup::finding::Related {
            span: context.layer_span(&layer.name),
            message: format!("\"{}\": {}.", layer.name, words::millimetres(layer.thickness)),
        })
        .collect();
    Some(finding)
}

#[cfg(test)]
mod tests {
    use crate::derived::testing::layer;
    use crate::rules::testing::*;

    fn case(height: Option<f64>) -> Case {
        let mut case = Case::new(13.0);
        case.setup.cell.as_mut().expect("a cell").height = height.map(|height| given(height, "cell.height"));
        case.outcome.derived.layers = vec![layer("oil", 0.015), layer("cushion", 0.040)];
        case
    }

    #[test]
    fn fires_when_too_low_and_not_when_it_just_fits() {
        let found = case(Some(0.0549)).only("stack-overfills-cell");
        assert!(
            found.message.what.contains("55.0 mm") && found.message.what.contains("0.100 mm"),
            "{found:?}"
        );
        case(Some(0.055)).silent("stack-overfills-cell");
        case(Some(0.1)).silent("stack-overfills-cell");
    }

    #[test]
    fn silent_without_a_height_or_layers() {
        case(None).silent("stack-overfills-cell");
        let mut case = case(Some(0.01));
        case.outcome.derived.layers.clear();
        case.silent("stack-overfills-cell");
    }
}
