//! Remembers what solvers found, by the values that they were asked with.

use crate::cache::{Bounds, Cache, Key, Usage, Weigh};
use physics::response::{
    self, Bounce, BounceFailure, BounceOptions, HarmonicFailure, HarmonicMotion, HarmonicOptions,
    PeriodicDrive,
};
use physics::stability::layered::{Forcing, Layered};
use physics::stability::{self, ContactLine, Failure, SlabStability};
use physics::stack::{Plan, Stack};
use quantity::vocabulary::Effect;
use std::sync::{Mutex, MutexGuard, PoisonError};

/// Verdicts on slabs that are kept: some hundred keystrokes of a stack with a few slabs. A verdict with its key has
/// about a kilobyte, so that the bytes count only where stacks have dozens of layers or windows.
pub const SLABS: Bounds = Bounds { entries: 512, bytes: 2 << 20 };

/// Motions of a stack and what is known of their bounce: one each a keystroke, some kilobytes a motion.
pub const MOTIONS: Bounds = Bounds { entries: 128, bytes: 2 << 20 };

/// Caches of the solvers. Keys are resolved values, never text; each is bounded ([`SLABS`], `MOTIONS`); shared between threads.
/// Nothing else of a check outlives it.
#[derive(Debug)]
pub struct Engine {
    slabs: Mutex<Cache<SlabStability>>,
    motions: Mutex<Cache<HarmonicMotion>>,
    bounces: Mutex<Cache<Option<Bounce>>>,
}

impl Default for Engine {
    fn default() -> Engine {
        Engine {
            slabs: Mutex::new(Cache::new(SLABS)),
            motions: Mutex::new(Cache::new(MOTIONS)),
            bounces: Mutex::new(Cache::new(MOTIONS)),
        }
    }
}

impl Engine {
    /// With empty caches.
    pub fn new() -> Engine {
        Engine::default()
    }

    /// What the cache of the verdicts on slabs holds.
    pub fn slabs_held(&self) -> Usage {
        self.slabs().usage()
    }

    fn slabs(&self) -> MutexGuard<'_, Cache<SlabStability>> {
        self.slabs.lock().unwrap_or_else(PoisonError::into_inner)
    }

    /// The stability of a slab, computed once for each set of values.
    pub(crate) fn slab(
        &self,
        layered: &Layered,
        forcing: &Forcing,
        plan: Plan,
        line: ContactLine,
        cancel: &(dyn Fn() -> bool + Sync),
    ) -> Result<SlabStability, Failure> {
        once(&self.slabs, key(layered, forcing, plan, line), || {
            stability::slab_with_line(layered, forcing, plan, line, &|| cancel())
        })
    }

    /// The periodic motion of a stack with its harmonics.
    pub(crate) fn harmonics(
        &self,
        stack: &Stack,
        drive: &PeriodicDrive,
        cancel: &(dyn Fn() -> bool + Sync),
    ) -> Result<HarmonicMotion, HarmonicFailure> {
        once(&self.motions, key_of_motion(stack, drive), || {
            response::harmonics(stack, drive, &HarmonicOptions::default(), &|| cancel())
        })
    }

    /// Whether that motion is left by itself.
    pub(crate) fn bounce(
        &self,
        stack: &Stack,
        drive: &PeriodicDrive,
        cancel: &(dyn Fn() -> bool + Sync),
    ) -> Result<Option<Bounce>, BounceFailure> {
        once(&self.bounces, key_of_motion(stack, drive), || {
            response::bounce(stack, drive, &BounceOptions::default(), &|| cancel())
        })
    }
}

/// What a cache knows, or the answer that it then keeps. The lock is not held while an answer is sought.
fn once<V: Clone + Weigh, E>(
    cache: &Mutex<Cache<V>>,
    key: Key,
    seek: impl FnOnce() -> Result<V, E>,
) -> Result<V, E> {
    if let Some(known) = cache.lock().unwrap_or_else(PoisonError::into_inner).get(&key) {
        return Ok(known);
    }
    let found = seek()?;
    cache.lock().unwrap_or_else(PoisonError::into_inner).put(key, found.clone());
    Ok(found)
}

impl Weigh for SlabStability {
    fn heap_bytes(&self) -> usize {
        self.windows.capacity() * size_of::<(f64, Option<f64>)>()
    }
}

/// A complex number of a motion.
const PAIR: usize = 2 * size_of::<f64>();

impl Weigh for HarmonicMotion {
    fn heap_bytes(&self) -> usize {
        let slabs = self.slabs.iter().map(|slab| size_of_val(slab) + slab.acceleration.capacity() * PAIR);
        let cushions = self.cushions.iter().map(|one| size_of_val(one) + one.strain.capacity() * PAIR);
        slabs.sum::<usize>() + cushions.sum::<usize>()
    }
}

impl Weigh for Option<Bounce> {
    fn heap_bytes(&self) -> usize {
        let Some(bounce) = self else { return 0 };
        let threshold =
            bounce.threshold.as_ref().map_or(0, |at| at.strokes.capacity() + at.frequencies.capacity());
        bounce.exponents.capacity() * PAIR + (bounce.frequencies.capacity() + threshold) * size_of::<f64>()
    }
}

fn key(layered: &Layered, forcing: &Forcing, plan: Plan, line: ContactLine) -> Key {
    let pinned = f64::from(u8::from(line == ContactLine::Pinned));
    let mut numbers = vec![layered.gravity, forcing.omega, forcing.acceleration, pinned];
    numbers.extend(numbers_of(plan));
    numbers.extend(&layered.tensions);
    numbers.extend(layered.layers.iter().flat_map(|layer| [layer.density, layer.viscosity, layer.thickness]));
    numbers.into_iter().map(f64::to_bits).collect()
}

fn numbers_of(plan: Plan) -> [f64; 3] {
    match plan {
        Plan::Rectangle { length, width } => [0.0, length, width],
        Plan::Circle { diameter } => [1.0, diameter, 0.0],
    }
}

/// All that a motion depends on: tensions and what is outside of the cell do not move slabs up and down.
fn key_of_motion(stack: &Stack, drive: &PeriodicDrive) -> Key {
    let flag = |set: bool| f64::from(u8::from(set));
    let stated = |value: Option<f64>| value.unwrap_or(f64::NAN);
    let mut numbers = vec![drive.fundamental.frequency, drive.fundamental.acceleration];
    numbers.extend(drive.distortion.iter().flat_map(|ratio| [ratio.re, ratio.im]));
    // Lists of any length end with what no number of theirs is.
    numbers.extend([f64::NAN, stack.ambient_pressure, stack.gravity]);
    numbers.extend([flag(stack.cell.sealed_top), flag(stack.cell.open_bottom)]);
    numbers.extend(numbers_of(stack.cell.plan));
    numbers.extend(Effect::ALL.iter().map(|effect| flag(stack.has(*effect))));
    for layer in &stack.layers {
        numbers.extend([layer.thickness, layer.density, layer.viscosity]);
        if let Some(gas) = layer.gas {
            numbers.extend([gas.adiabatic_index, gas.thermal_diffusivity, flag(gas.vented)]);
            numbers.extend([stated(gas.polytropic_exponent), stated(gas.pressure)]);
        }
        numbers.push(f64::INFINITY);
    }
    numbers.into_iter().map(f64::to_bits).collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use physics::stack::{Cell, Drive, Gas, Layer};

    fn stack() -> Stack {
        let gas = Gas {
            adiabatic_index: 1.4,
            thermal_diffusivity: 2.2e-5,
            polytropic_exponent: None,
            vented: false,
            pressure: None,
        };
        let layer = |name: &str, density: f64, viscosity: f64, gas| Layer {
            name: name.to_owned(),
            thickness: 0.02,
            density,
            viscosity,
            gas,
        };
        Stack {
            ambient_pressure: 101_325.0,
            ambient_density: 1.2,
            ambient_viscosity: 1.8e-5,
            gravity: 9.80665,
            cell: Cell {
                plan: Plan::Rectangle { length: 0.05, width: 0.05 },
                height: 0.1,
                sealed_top: false,
                open_bottom: false,
            },
            layers: vec![layer("oil", 970.0, 0.097, None), layer("air", 1.2, 1.8e-5, Some(gas))],
            tensions: vec![0.02],
            top_tension: 0.02,
            bottom_tension: 0.02,
            effects_off: Vec::new(),
        }
    }

    #[test]
    fn motions_are_kept_by_all_that_moves_them() {
        let engine = Engine::new();
        let drive = PeriodicDrive::sine(Drive { frequency: 48.0, acceleration: 100.0 });
        let ask = |stack: &Stack, drive: &PeriodicDrive| {
            let motion = engine.harmonics(stack, drive, &|| false).expect("a motion");
            engine.bounce(stack, drive, &|| false).expect("an answer");
            (motion, engine.motions.lock().expect("no panic").usage())
        };
        let (first, _) = ask(&stack(), &drive);
        let mut tension = stack();
        (tension.tensions, tension.top_tension) = (vec![0.03], 0.03);
        let (again, usage) = ask(&tension, &drive);
        assert_eq!((first, usage.hits, usage.misses), (again, 1, 1));
        let mut oil = stack();
        oil.layers[0].viscosity *= 1.01;
        let mut effect = stack();
        effect.effects_off = vec![Effect::WallDrag];
        let mut gas = stack();
        gas.layers[1].gas.as_mut().expect("a gas").polytropic_exponent = Some(1.3);
        let distorted = PeriodicDrive { distortion: vec![0.01.into()], ..drive.clone() };
        for (n, (stack, drive)) in [(&oil, &drive), (&effect, &drive), (&gas, &drive), (&stack(), &distorted)]
            .into_iter()
            .enumerate()
        {
            let (_, usage) = ask(stack, drive);
            assert_eq!((usage.hits, usage.misses), (1, n as u64 + 2));
        }
    }
}
