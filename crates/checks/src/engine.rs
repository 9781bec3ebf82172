//! Remembers what solvers found, by the values that they were asked with.

use physics::stability::layered::{Forcing, Layered};
use physics::stability::{self, Failure, SlabStability};
use physics::stack::Plan;
use std::collections::HashMap;
use std::sync::{Mutex, PoisonError};

/// Verdicts on slabs that are kept: some hundred keystrokes of a stack with a few slabs.
const MOST_SLABS: usize = 512;

/// Caches of the solvers. Keys are resolved values, never text; bounded; shared between threads.
#[derive(Debug, Default)]
pub struct Engine {
    slabs: Mutex<Cache<SlabStability>>,
}

impl Engine {
    /// With empty caches.
    pub fn new() -> Engine {
        Engine::default()
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
        if let Some(known) = self.slabs.lock().unwrap_or_else(PoisonError::into_inner).get(&key) {
            return Ok(known);
        }
        let found = stability::slab(layered, forcing, plan, &|| cancel())?;
        self.slabs.lock().unwrap_or_else(PoisonError::into_inner).put(key, found.clone(), MOST_SLABS);
        Ok(found)
    }
}

/// Numbers by their bits: two questions are the same when every number is.
type Key = Vec<u64>;

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

/// A map that forgets what was not asked for longest.
#[derive(Debug)]
struct Cache<V> {
    entries: HashMap<Key, (V, u64)>,
    clock: u64,
}

impl<V> Default for Cache<V> {
    fn default() -> Self {
        Cache { entries: HashMap::new(), clock: 0 }
    }
}

impl<V: Clone> Cache<V> {
    fn get(&mut self, key: &Key) -> Option<V> {
        self.clock += 1;
        let (value, used) = self.entries.get_mut(key)?;
        *used = self.clock;
        Some(value.clone())
    }

    fn put(&mut self, key: Key, value: V, most: usize) {
        self.clock += 1;
        self.entries.insert(key, (value, self.clock));
        while self.entries.len() > most {
            let oldest = self.entries.iter().min_by_key(|(_, (_, used))| *used).map(|(key, _)| key.clone());
            match oldest {
                Some(oldest) => self.entries.remove(&oldest),
                None => return,
            };
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_cache_is_bounded_and_keeps_what_is_used() {
        let mut cache = Cache::default();
        for i in 0..10u64 {
            cache.put(vec![i], i, 3);
            assert!(cache.get(&vec![0]).is_some(), "asked for every time, so never forgotten");
        }
        assert_eq!(cache.entries.len(), 3);
        assert_eq!(cache.get(&vec![9]), Some(9));
        assert_eq!(cache.get(&vec![4]), None);
    }
}
