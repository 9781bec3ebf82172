//! A map that forgets what was not asked for longest, bounded in entries and in bytes.

use std::collections::HashMap;

/// Numbers by their bits: two questions are the same when every number is.
pub(crate) type Key = Vec<u64>;

/// What a value keeps outside of itself.
pub(crate) trait Weigh {
    /// Bytes on the heap.
    fn heap_bytes(&self) -> usize;
}

/// How much a cache may hold; whichever is reached first counts.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Bounds {
    /// Answers.
    pub entries: usize,
    /// Keys, answers and what the map itself needs for them.
    pub bytes: usize,
}

/// What a cache holds and has been asked so far.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Usage {
    /// Answers held.
    pub entries: usize,
    /// Bytes held, counted as for [`Bounds::bytes`].
    pub bytes: usize,
    /// Questions whose answer was there.
    pub hits: u64,
    /// Questions whose answer was not.
    pub misses: u64,
    /// Answers forgotten for want of room.
    pub evictions: u64,
}

/// The answers by the numbers of their questions.
#[derive(Debug)]
pub(crate) struct Cache<V> {
    entries: HashMap<Key, Entry<V>>,
    clock: u64,
    bounds: Bounds,
    usage: Usage,
}

#[derive(Debug)]
struct Entry<V> {
    value: V,
    used: u64,
    bytes: usize,
}

impl<V: Clone + Weigh> Cache<V> {
    pub(crate) fn new(bounds: Bounds) -> Cache<V> {
        Cache { entries: HashMap::new(), clock: 0, bounds, usage: Usage::default() }
    }

    pub(crate) fn usage(&self) -> Usage {
        self.usage
    }

    pub(crate) fn get(&mut self, key: &Key) -> Option<V> {
        self.clock += 1;
        match self.entries.get_mut(key) {
            Some(entry) => {
                self.usage.hits += 1;
                entry.used = self.clock;
                Some(entry.value.clone())
            }
            None => {
                self.usage.misses += 1;
                None
            }
        }
    }

    /// Keeps an answer; one that alone is larger than the bound is not kept.
    pub(crate) fn put(&mut self, key: Key, value: V) {
        self.clock += 1;
        // The map keeps a quarter of its room free at least, and a byte of its own beside each entry.
        let slot = size_of::<(Key, Entry<V>)>() + 1;
        let bytes = 2 * slot + key.capacity() * size_of::<u64>() + value.heap_bytes();
        if bytes > self.bounds.bytes {
            return;
        }
        if let Some(former) = self.entries.insert(key, Entry { value, used: self.clock, bytes }) {
            self.usage.bytes -= former.bytes;
        }
        self.usage.bytes += bytes;
        while self.entries.len() > self.bounds.entries || self.usage.bytes > self.bounds.bytes {
            let oldest = self.entries.iter().min_by_key(|(_, entry)| entry.used).map(|(key, _)| key.clone());
            let Some(forgotten) = oldest.and_then(|oldest| self.entries.remove(&oldest)) else { break };
            self.usage.bytes -= forgotten.bytes;
            self.usage.evictions += 1;
        }
        self.usage.entries = self.entries.len();
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    impl Weigh for Vec<u64> {
        fn heap_bytes(&self) -> usize {
            self.capacity() * size_of::<u64>()
        }
    }

    const ROOMY: Bounds = Bounds { entries: 1000, bytes: 1_000_000 };

    #[test]
    fn it_is_bounded_in_entries_and_keeps_what_is_used() {
        let mut cache = Cache::new(Bounds { entries: 3, ..ROOMY });
        for i in 0..10u64 {
            cache.put(vec![i], vec![i]);
            assert!(cache.get(&vec![0]).is_some(), "asked for every time, so never forgotten");
        }
        assert_eq!(cache.entries.len(), 3);
        assert_eq!(cache.get(&vec![9]), Some(vec![9]));
        assert_eq!(cache.get(&vec![4]), None);
        let usage = cache.usage();
        assert_eq!((usage.entries, usage.hits, usage.misses, usage.evictions), (3, 11, 1, 7));
    }

    #[test]
    fn it_is_bounded_in_bytes_from_both_sides() {
        let one = {
            let mut cache = Cache::new(ROOMY);
            cache.put(vec![0], vec![0; 100]);
            cache.usage().bytes
        };
        assert!(one > 100 * 8);
        for (room, kept) in [(3 * one, 3), (3 * one - 1, 2), (one - 1, 0)] {
            let mut cache = Cache::new(Bounds { bytes: room, ..ROOMY });
            for i in 0..20u64 {
                cache.put(vec![i], vec![i; 100]);
                assert!(cache.usage().bytes <= room);
            }
            assert_eq!(cache.usage().entries, kept, "{room}");
            assert_eq!(cache.usage().bytes, kept * one);
        }
    }

    #[test]
    fn what_is_said_twice_counts_once() {
        let mut cache = Cache::new(ROOMY);
        cache.put(vec![1], vec![1; 10]);
        let before = cache.usage();
        cache.put(vec![1], vec![2; 10]);
        assert_eq!(cache.usage(), before);
        assert_eq!(cache.get(&vec![1]), Some(vec![2; 10]));
    }
}
