//! Setups for measurements: the samples with other figures, so that no cache knows them.

use checks::Engine;
use physics::stability;
use physics::stability::layered::Layered;
use physics::stack::Plan;
use std::fmt::Write;

/// What was found for a setup, as measurements need it.
#[derive(Debug)]
pub struct Measured {
    /// Of the drive, rad/s.
    pub omega: f64,
    /// Of the rectangular cell, m.
    pub length: f64,
    /// Of the rectangular cell, m.
    pub width: f64,
    /// Top first.
    pub slabs: Vec<Slab>,
}

/// One slab with its limits, m/s² of its own.
#[derive(Debug)]
pub struct Slab {
    /// With the gas on either side.
    pub layered: Layered,
    /// Acceleration it needs.
    pub hold: f64,
    /// Acceleration at which waves grow.
    pub wave: f64,
    /// Largest acceleration looked at.
    pub searched_up_to: f64,
}

impl Measured {
    /// Checks a text.
    ///
    /// # Panics
    /// When the setup has no rectangular cell, no drive or a slab without both limits.
    #[allow(clippy::expect_used)]
    pub fn of(text: &str) -> Measured {
        let analysis = checks::analyse(text, &Engine::new(), &|| false);
        let derived = analysis.derived.expect("a setup that can be read");
        let stack = derived.stack.clone().expect("a complete stack");
        let Plan::Rectangle { length, width } = stack.cell.plan else {
            panic!("a rectangular cell is wanted")
        };
        let slabs = derived.slabs.iter().map(|slab| {
            let judged = slab.stability.as_ref().and_then(|stability| stability.limits.as_ref());
            let limits = judged.expect("every slab is judged");
            Slab {
                layered: stability::layered(&stack, slab.range.clone()),
                hold: limits.hold.expect("a hold limit"),
                wave: limits.wave.expect("a wave limit"),
                searched_up_to: limits.searched_up_to,
            }
        });
        let slabs = slabs.collect();
        let omega = std::f64::consts::TAU * derived.drive.expect("a drive").frequency;
        Measured { omega, length, width, slabs }
    }
}

/// The sample of two slabs with depths that differ a little from number to number.
pub fn two_slabs(number: u32) -> String {
    storeys(&[(10.0, 18.0), (12.0, 20.0)], number)
}

/// So many slabs of oil on so many cushions, all different.
pub fn tower(slabs: u32, number: u32) -> String {
    let storeys: Vec<(f64, f64)> =
        (0..slabs).map(|i| (10.0 + 0.05 * f64::from(i), 18.0 + 0.05 * f64::from(i))).collect();
    self::storeys(&storeys, number)
}

/// Oil of 1000 mm²/s over air, top first, mm; 40 mm cell at 50 Hz and 13.2 g₀.
fn storeys(depths: &[(f64, f64)], number: u32) -> String {
    cell_of(40.0, 50.0, "13.2 g0 peak", depths, number)
}

/// The same in a square cell of the given width (mm) at a frequency (Hz) and acceleration.
pub fn cell_of(width: f64, hertz: f64, acceleration: &str, depths: &[(f64, f64)], number: u32) -> String {
    let mut text = format!(
        "format = 1\n[ambient]\ntemperature = \"25 °C\"\npressure = \"1013.25 hPa\"\n[cell]\nshape = \"rectangular\"\n\
         length = \"{width} mm\"\nwidth = \"{width} mm\"\n[drive]\nfrequency = \"{hertz} Hz\"\n\
         acceleration = \"{acceleration}\"\n"
    );
    for (i, (oil, air)) in depths.iter().enumerate() {
        // A hundredth of a per cent from number to number.
        let oil = oil * (1.0 + 1e-4 * f64::from(number));
        let grade = "fluid = \"silicone oil\"\ngrade = \"1000 mm²/s\"";
        let _ = write!(
            text,
            "[[layer]]\nname = \"oil {i}\"\n{grade}\nthickness = \"{oil:.6} mm\"\n[[layer]]\nname = \"air {i}\"\n\
             fluid = \"air\"\nthickness = \"{air:.6} mm\"\n"
        );
    }
    text
}
