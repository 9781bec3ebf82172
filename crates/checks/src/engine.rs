//! Remembers what solvers found, by the values that they were asked with.

use crate::cache::{Bounds, Cache, Key, Usage, Weigh};
use physics::stability::layered::{Forcing, Layered};
use physics::stability::{self, Failure, SlabStability};
use physics::stack::Plan;
use std::sync::{Mutex, MutexGuard, PoisonError};

/// Verdicts on slabs that are kept: some hundred keystrokes of a stack with a few slabs. A verdict with its key has
/// about a kilobyte, so that the bytes count only where stacks have dozens of layers or windows.
pub const SLABS: Bounds = Bounds { entries: 512, bytes: 2 << 20 };

/// Caches of the solvers. Keys are resolved values, never text; each is bounded ([`SLABS`]); shared between threads.
/// Nothing else of a check outlives it.
#[derive(Debug)]
pub struct Engine {
    slabs: Mutex<Cache<SlabStability>>,
}

impl Default for Engine {
    fn default() -> Engine {
        Engine { slabs: Mutex::new(Cache::new(SLABS)) }
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
        cancel: &(dyn Fn() -> bool + Sync),
    ) -> Result<SlabStability, Failure> {
        let key = key(layered, forcing, plan);
        if let Some(known) = self.slabs().get(&key) {
            return Ok(known);
        }
        let found = stability::slab(layered, forcing, plan, &|| cancel())?;
        self.slabs().put(key, found.clone());
        Ok(found)
    }
}

impl Weigh for SlabStability {
    fn heap_bytes(&self) -> usize {
        self.windows.capacity() * size_of::<(f64, Option<f64>)>()
    }
}

fn key(layered: &Layered, forcing: &Forcing, plan: Plan) -> Key {
    let mut numbers = vec![layered.gravity, forcing.omega, forcing.acceleration];
    match plan {
        Plan::Rectangle { length, width } => numbers.extend([0.0, length, width]),
        Plan::Circle { diameter } => numbers.extend([1.0, diameter]),
    }
    numbers.extend(&layered.tensions);
    numbers.extend(layered.layers.iter().flat_map(|layer| [layer.density, layer.viscosity, layer.thickness]));
    numbers.into_iter().map(f64::to_bits).collect()
}
