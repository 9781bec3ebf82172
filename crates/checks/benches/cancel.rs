//! How long a check goes on after it is no longer wanted: 1,000 checks, each cancelled at a seeded random moment of its
//! run. Prints the 50th and 99th percentile and the largest, in milliseconds.
//!
//! `cargo bench -p topheavy-checks --bench cancel`

#![allow(clippy::print_stdout)] // that is its purpose

use std::sync::atomic::{AtomicBool, Ordering};
use std::time::{Duration, Instant};
use topheavy_checks::{Engine, analyse};

const CANCELS: usize = 1000;
/// Longest head start, whatever the check would take.
const LATEST: Duration = Duration::from_millis(100);

const SETUPS: [(&str, &str); 4] = [
    ("one slab", include_str!("../../../samples/one-slab.stack.toml")),
    ("two slabs", include_str!("../../../samples/two-slabs.stack.toml")),
    ("two slabs, too wide a cell", include_str!("../../../samples/two-slabs-too-wide.stack.toml")),
    ("two liquids", include_str!("../../../samples/two-liquids.stack.toml")),
];

/// SplitMix64, doi 10.1145/2660193.2660195; 0 to 1.
fn random(state: &mut u64) -> f64 {
    *state = state.wrapping_add(0x9E37_79B9_7F4A_7C15);
    let mut z = *state;
    z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
    z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
    ((z ^ (z >> 31)) >> 11) as f64 / (1u64 << 53) as f64
}

/// A file of the largest size that is read, of comments and keys that no setup has.
fn large() -> String {
    let mut text = SETUPS[0].1.to_owned();
    while text.len() < setup::LARGEST_FILE - 100 {
        text += "# a line of notes\nsomething = \"12.5 mm\"\n[a.b]\nother = [1, 2, 3]\n";
    }
    text
}

/// As many slabs on cushions as fit into a tall cell.
fn many_layers() -> String {
    let head = SETUPS[0].1;
    let start = head.find("[[layer]]").unwrap_or(head.len());
    let mut text = head[..start].to_owned();
    for i in 0..95 {
        text += &format!(
            "[[layer]]\nname = \"oil {i}\"\nfluid = \"silicone oil\"\ngrade = \"1000 mm²/s\"\nthickness = \"15 mm\"\n"
        );
        text += &format!("[[layer]]\nname = \"gas {i}\"\nfluid = \"air\"\nthickness = \"40 mm\"\n");
    }
    text
}

fn main() {
    let mut state = 20_240_607;
    let mut setups: Vec<(&str, String)> =
        SETUPS.iter().map(|(name, text)| (*name, (*text).to_owned())).collect();
    setups.push(("a file of a megabyte", large()));
    setups.push(("95 slabs", many_layers()));
    for (name, text) in &setups {
        let started = Instant::now();
        let _ = analyse(text, &Engine::new(), &|| started.elapsed() > Duration::from_secs(5));
        let whole = started.elapsed().min(LATEST);
        println!("{name}: whole {:.1} ms", started.elapsed().as_secs_f64() * 1e3);
        let mut late: Vec<f64> =
            (0..CANCELS / SETUPS.len()).map(|_| late(text, whole.mul_f64(random(&mut state)))).collect();
        late.sort_by(f64::total_cmp);
        let at = |share: f64| late[((late.len() as f64 * share) as usize).min(late.len() - 1)];
        println!(
            "    after a cancel: p50 {:.2} ms, p99 {:.2} ms, longest {:.2} ms",
            at(0.5),
            at(0.99),
            at(1.0)
        );
    }
}

/// Milliseconds from the cancel to the return.
fn late(text: &str, after: Duration) -> f64 {
    let (engine, unwanted) = (Engine::new(), AtomicBool::new(false));
    std::thread::scope(|scope| {
        let work = scope.spawn(|| {
            let _ = analyse(text, &engine, &|| unwanted.load(Ordering::Relaxed));
            Instant::now()
        });
        std::thread::sleep(after);
        unwanted.store(true, Ordering::Relaxed);
        let cancelled = Instant::now();
        let ended = work.join().unwrap_or(cancelled);
        ended.saturating_duration_since(cancelled).as_secs_f64() * 1e3
    })
}
