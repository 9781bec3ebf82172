//! Pinned modes against closed forms, bounds from the other side and each other.

use super::*;
use crate::stability::layered::{FluidLayer, Forcing};
use crate::stability::slab_with_line;

fn water(depth: f64, gravity: f64) -> Layered {
    Layered {
        gravity,
        layers: vec![FluidLayer::VACUUM, FluidLayer { density: 998.0, viscosity: 1e-3, thickness: depth }],
        tensions: vec![0.0728],
    }
}

fn assert_close(a: f64, b: f64, tolerance: f64, what: &str) {
    assert!((a - b).abs() <= tolerance * b.abs(), "{what}: {a} against {b}");
}

fn face(layered: &Layered) -> Interface {
    let [above, below] = [layered.layers[0], layered.layers[1]];
    Interface {
        weight: (below.density - above.density) * layered.gravity,
        tension: layered.tensions[0],
        inertia: [(above.density, above.thickness), (below.density, below.thickness)],
    }
}

/// Asserts that tension alone holds the modes of a family upside down up to the gravity that belongs to the slope k_s.
fn assert_onset(plan: Plan, slope: f64, tolerance: f64, pick: impl Fn(&PinnedMode) -> bool) {
    let onset = 0.0728 * slope * slope / 998.0;
    let square = |g: f64| {
        let found = pinned_modes(&water(0.02, -g), plan, 2000.0).unwrap();
        found.modes.iter().filter(|m| pick(m)).map(|m| m.frequency_squared).fold(f64::INFINITY, f64::min)
    };
    let (held, falls) = (square(onset * (1.0 - 2.0 * tolerance)), square(onset * (1.0 + 2.0 * tolerance)));
    assert!(held > 0.0 && falls < 0.0, "{plan:?}: {held} {falls}");
}

#[test]
fn tension_alone_holds_what_a_pinned_membrane_holds() {
    // η is a membrane's: ∇²η + k²η = const, η = 0 on the edge, mean 0. Round: with nodal diameters J_m(kR) = 0, 3.831706
    // (m = 1), 5.135622 (m = 2); without, J₀(kr) − J₀(kR) with mean 0, that is J₂(kR) = 0 (zeros: NIST DLMF §10.21).
    let radius = 0.01;
    for (m, zero) in [(1, 3.831_706), (2, 5.135_622), (0, 5.135_622)] {
        assert_onset(Plan::Circle { diameter: 2.0 * radius }, zero / radius, 2e-5, |mode| {
            mode.indices[0] == m
        });
    }
    // Rectangle, antisymmetric along its length: sin(2πx/L) sin(πy/W).
    let (length, width): (f64, f64) = (0.02, 0.013);
    let slope = (2.0 * PI / length).hypot(PI / width);
    let plan = Plan::Rectangle { length, width };
    assert_onset(plan, slope, 1e-9, |mode| mode.indices[0] % 2 == 1);
    // Even both ways: η = Σ A_pq sin sin, A_pq ∝ 1/(pq (k² − k_pq²)), with mean 0: Σ over odd p, q of 1/(p²q² (k² − k_pq²)) = 0.
    let square = |p: i32, q: i32| (f64::from(p) * PI / length).powi(2) + (f64::from(q) * PI / width).powi(2);
    let mean = |k2: f64| -> f64 {
        let odd = || (0..300).map(|i| 2 * i + 1);
        let term = |p, q| 1.0 / (f64::from(p * q).powi(2) * (k2 - square(p, q)));
        odd().map(|p| odd().map(|q| term(p, q)).sum::<f64>()).sum()
    };
    let (mut low, mut high) = (square(1, 1), square(3, 1));
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        if mean(middle) > 0.0 { low = middle } else { high = middle }
    }
    assert_onset(plan, low.sqrt(), 1e-4, |mode| mode.indices.iter().all(|index| index % 2 == 0));
}

#[test]
fn shallow_liquid_in_a_strip_is_a_clamped_beam() {
    // Shallow and without gravity: ω² η = (σh/ρ) d⁴η/dx⁴, η = 0 and d³η/dx³ = 0 (no flux) at the ends. With dξ/dx = η that
    // is the beam clamped at both ends: μL = 4.730041, 7.853205, 10.995608 (Blevins, Formulas for Natural Frequency
    // and Mode Shape, clamped-clamped beam). ξ even means η odd. The multipliers' sum, in one dimension.
    let (length, depth) = (0.05, 1e-7);
    let face = face(&water(depth, 0.0));
    for (order, (parity, beam)) in
        [(1, 4.730_041_f64), (0, 7.853_205), (1, 10.995_608)].into_iter().enumerate()
    {
        let terms: Vec<Term> = (0..20_000)
            .map(|i| f64::from(2 * i + parity) * PI / length)
            .filter(|k| *k > 0.0)
            .map(|k| Term { part: 1.0, stiffness: face.stiffness(k), inertia: face.inertia(k) })
            .collect();
        let pole = |i: usize| terms[i].stiffness / terms[i].inertia;
        let square = root(&terms, 0.0, pole(order / 2), pole(order / 2 + 1));
        assert_close(
            square,
            0.0728 * depth / 998.0 * (beam / length).powi(4),
            1e-4,
            &format!("beam {order}"),
        );
    }
}

/// I_m(x) by its series (NIST DLMF 10.25.2).
fn modified_bessel(m: u32, x: f64) -> f64 {
    let mut term = (1..=m).fold(1.0, |product, i| product * x / 2.0 / f64::from(i));
    let mut sum = 0.0;
    for i in 1..200u32 {
        sum += term;
        term *= x * x / 4.0 / (f64::from(i) * f64::from(i + m));
    }
    sum
}

#[test]
fn shallow_liquid_in_a_round_cell_follows_a_closed_form() {
    // ω² η = (σh/ρ) ∇⁴η with η = 0 and ∂_r∇²η = 0 on the wall: η = I_m(z) J_m(zr/R) − J_m(z) I_m(zr/R) with
    // J_m I_m' + J_m' I_m = 0 at z, z⁴ = ω² R⁴ ρ/(σh).
    let (radius, depth): (f64, f64) = (0.03, 1e-7);
    let found = pinned_modes(&water(depth, 0.0), Plan::Circle { diameter: 2.0 * radius }, 500.0).unwrap();
    assert!(found.modes.len() > 30);
    for mode in &found.modes {
        let m = mode.indices[0];
        let z = (mode.frequency_squared * 998.0 / (0.0728 * depth)).powf(0.25) * radius;
        let condition = |z: f64| {
            let j = |order: u32| libm::jn(order as i32, z);
            let i = |order: u32| modified_bessel(order, z);
            let (dj, di) = match m {
                0 => (-j(1), i(1)),
                _ => ((j(m - 1) - j(m + 1)) / 2.0, (i(m - 1) + i(m + 1)) / 2.0),
            };
            j(m) * di + dj * i(m)
        };
        let (low, high) = (condition(z * (1.0 - 2e-5)), condition(z * (1.0 + 2e-5)));
        assert!(low * high < 0.0, "{mode:?}: no zero within 2e-5 of {z}: {low} {high}");
    }
}

#[test]
fn a_held_line_only_ever_stiffens() {
    // Rayleigh's theorem on constraints: each pinned ω² lies between its free one and the next of its family.
    let layered = water(0.038, 9.80);
    let face = face(&layered);
    let free = |k: f64| face.stiffness(k) / face.inertia(k);
    let plan = Plan::Circle { diameter: 0.05532 };
    let found = pinned_modes(&layered, plan, 1000.0).unwrap();
    for mode in &found.modes {
        let [m, n] = mode.indices;
        let zeros = derivative_zeros(m, 80.0);
        let own = free(zeros[n as usize - 1] / 0.02766);
        let next = free(zeros[n as usize] / 0.02766);
        assert!(own < mode.frequency_squared && mode.frequency_squared < next, "{mode:?}");
        // The wave that stands for it has its frequency.
        let k = mode.wavenumber;
        let stands = (face.weight + face.tension * mode.stiffening * k * k) / face.inertia(k);
        assert_close(stands, mode.frequency_squared, 1e-9, "stand-in");
    }
    for (length, width) in [(0.05, 0.05), (0.08, 0.02)] {
        let found = pinned_modes(&layered, Plan::Rectangle { length, width }, 600.0).unwrap();
        assert!(found.modes.len() > 20 && found.complete_to > 300.0);
        for mode in &found.modes {
            let k = (f64::from(mode.indices[0]) * PI / length).hypot(f64::from(mode.indices[1]) * PI / width);
            assert!(free(k) < mode.frequency_squared, "{mode:?}");
        }
    }
}

/// The first pinned ω² of a rectangle that is even (0) or odd (1) along its length and even across, from below: the line
/// is held by finitely many forces, cosines along each wall, so that it can still give between them.
fn from_below(face: &Interface, (length, width): (f64, f64), parity: usize, above: f64) -> f64 {
    // Free modes √s cos(mπx/L) · √s cos(nπy/W) of mean square 1, m = 2i + parity, n = 2j, with s_0 = 1 and 2 otherwise.
    let s = |index: usize| if index == 0 { 1.0 } else { 2.0 };
    let along = |i: usize| 2 * i + parity;
    let forces = 24;
    let far = 40 * forces;
    let tail = |size: f64| 2.0 * (size / PI).powi(2) / face.tension / (4.0 * far as f64);
    let inverse = |x: f64, i: usize, j: usize| {
        let k = (along(i) as f64 * PI / length).hypot((2 * j) as f64 * PI / width);
        if k == 0.0 { 0.0 } else { 1.0 / (face.stiffness(k) - x * face.inertia(k)) }
    };
    let negative = |x: f64| {
        let matrix = DMatrix::from_fn(2 * forces, 2 * forces, |r, c| match (r < forces, c < forces) {
            (true, true) if r == c => {
                (0..far).map(|i| s(along(i)) * inverse(x, i, r)).sum::<f64>() + tail(length)
            }
            (false, false) if r == c => {
                (0..far).map(|j| s(j) * inverse(x, r - forces, j)).sum::<f64>() + tail(width)
            }
            (true, false) => (s(along(c - forces)) * s(r)).sqrt() * inverse(x, c - forces, r),
            (false, true) => (s(along(r - forces)) * s(c)).sqrt() * inverse(x, r - forces, c),
            _ => 0.0,
        });
        matrix.symmetric_eigenvalues().iter().filter(|value| **value < 0.0).count()
    };
    let k = (2 - parity) as f64 * PI / length;
    let (mut low, mut high) = (face.stiffness(k) / face.inertia(k) * (1.0 + 1e-9), above);
    assert!(negative(low) == 1 && negative(high) == 0, "{} {}", negative(low), negative(high));
    for _ in 0..40 {
        let middle = 0.5 * (low + high);
        if negative(middle) == 1 { low = middle } else { high = middle }
    }
    0.5 * (low + high)
}

#[test]
fn rectangles_lie_between_bounds_from_both_sides() {
    for (size, parity) in [((0.05, 0.05), 1), ((0.05, 0.02), 1), ((0.05, 0.02), 0)] {
        let layered = water(0.02, 9.81);
        let found = pinned_modes(&layered, Plan::Rectangle { length: size.0, width: size.1 }, 600.0).unwrap();
        // The slowest of its symmetry; a square has the first twice and lists it once.
        let slowest = found.modes.iter().find(|mode| size.0 == size.1 || mode.indices == [2 - parity, 0]);
        let first = slowest.unwrap().frequency_squared;
        let below = from_below(&face(&layered), size, parity as usize, 1.05 * first);
        assert!(below <= first && first < 1.001 * below, "{size:?} {parity}: {below} to {first}");
    }
}

#[test]
fn what_is_kept_is_resolved() {
    // Six sines each way against twelve: what lies below KEPT of the six moves by less than one per cent in ω².
    let (length, width) = (0.05, 0.04);
    let face = face(&water(0.02, 9.81));
    for (x, y) in [(0, 0), (1, 0), (0, 1), (1, 1)] {
        let solve = |sines: usize| {
            let mut found = symmetry(&face, (length, x, sines), (width, y, sines));
            found.sort_by(|a, b| a.0.total_cmp(&b.0));
            found
        };
        let (few, many) = (solve(6), solve(12));
        let kept = few.iter().filter(|(square, inertia)| {
            face.mode([0, 0], *square, *inertia, 60.0).wavenumber < KEPT * 12.0 * PI / length
        });
        let kept = kept.count();
        assert!(kept >= 6, "{kept}");
        for ((coarse, _), (fine, _)) in few.iter().zip(&many).take(kept) {
            assert!(fine <= coarse && *coarse < 1.01 * fine, "({x}, {y}): {coarse} {fine}");
        }
    }
}

#[test]
fn without_tension_or_with_two_interfaces_there_is_no_answer() {
    let plan = Plan::Circle { diameter: 0.05 };
    let mut slack = water(0.02, 9.81);
    slack.tensions[0] = 0.0;
    assert_eq!((pinned_modes(&slack, plan, 300.0), is_held_at(&slack)), (None, false));
    let mut two = water(0.02, 9.81);
    two.layers.push(FluidLayer { density: 1200.0, viscosity: 1e-3, thickness: 0.01 });
    two.tensions.push(0.03);
    assert_eq!((pinned_modes(&two, plan, 300.0), is_held_at(&two)), (None, false));
}

#[test]
fn a_small_upside_down_jar_is_held_by_its_brim() {
    // Without a drive a square of side L hangs up to L = π l_c with a free line, but up to √5 π l_c with a pinned one (k_s² =
    // (2π/L)² + (π/L)²), l_c = √(σ/ρg): the whole solver, viscous.
    let mut layered = water(0.02, 9.81);
    layered.layers.reverse();
    let capillary: f64 = (0.0728_f64 / (998.0 * 9.81)).sqrt();
    let grows = |line: ContactLine, side: f64| {
        let plan = Plan::Rectangle { length: side, width: side };
        let rest = Forcing { omega: 300.0, acceleration: 0.0 };
        slab_with_line(&layered, &rest, plan, line, &|| false).unwrap().worst.growth.rate > 0.0
    };
    for (line, side) in
        [(ContactLine::Free, PI * capillary), (ContactLine::Pinned, 5f64.sqrt() * PI * capillary)]
    {
        assert!(!grows(line, 0.999 * side) && grows(line, 1.001 * side), "{line:?}");
    }
}
