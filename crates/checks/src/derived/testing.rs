//! Hand-made results for the tests of rules.

use super::*;

/// A slab of one layer on a cushion, under open air, not yet judged.
pub(crate) fn slab(name: &str) -> Slab {
    Slab {
        name: name.to_owned(),
        range: 0..1,
        layers: vec![name.to_owned()],
        seat: Seat::Floating,
        mass_per_area: 14.565,
        motion: None,
        faces: vec![
            Face { above: None, below: Some(name.to_owned()), heavier_above: false },
            Face { above: Some(name.to_owned()), below: Some("cushion".to_owned()), heavier_above: true },
        ],
        held_line: false,
        stability: None,
        overtones: None,
        gas_compressibility: None,
        wedges: Vec::new(),
    }
}

/// The same moving with |T| and judged stable between these limits.
pub(crate) fn windows(slab: Slab, amplification: f64, windows: &[(f64, Option<f64>)]) -> Slab {
    let first = windows.first().copied();
    let by = |face, response| SetBy { face, wavenumber: 62.83, mode: Mode::Cell([1, 0]), response };
    Slab {
        motion: Some(Motion {
            acceleration: 0.0,
            amplification,
            phase: 0.0,
            slide: 0.0,
            nonlinear_acceleration: None,
        }),
        stability: Some(Stability {
            growth_rate: -1.0,
            worst: by(1, Response::Harmonic),
            mechanism: Mechanism::None,
            unstable_band: None,
            ring_down: Some(1.0),
            limits: Some(Limits {
                windows: windows.to_vec(),
                windows_set_by: windows
                    .iter()
                    .map(|_| [Some(by(1, Response::Harmonic)), Some(by(0, Response::Subharmonic))])
                    .collect(),
                hold: first.map(|(low, _)| low),
                wave: first.and_then(|(_, high)| high),
                hold_set_by: Some(by(1, Response::Harmonic)),
                wave_set_by: Some(by(0, Response::Subharmonic)),
                searched_up_to: 1000.0,
            }),
        }),
        ..slab
    }
}

/// A layer of so many m, liquid.
pub(crate) fn layer(name: &str, thickness: f64) -> LayerState {
    LayerState {
        name: name.to_owned(),
        place: format!("layer.{name}"),
        phase: Phase::Liquid,
        made_of: "silicone oil, 1000 mm²/s at 25 °C".to_owned(),
        thickness,
        temperature: 293.15,
        pressure: 101_325.0,
        density: 971.0,
        viscosity: 0.971,
        surface_tension: Some(0.0212),
        shear_dependent: None,
        sources: Vec::new(),
    }
}
