//! Random stacks with a narrow tongue, and every interval in which they grow.
//!
//! Stacks: a face, two liquids, a slab on gas (its lower face falls, is held, or is kept by tension), two liquids with a
//! free face, two liquids on gas, three liquids under a face; one to three interfaces, some faces under gas and some
//! under nothing, shallow and thin and deep layers. The frequency puts a resonance of the first to the seventh order
//! (sum frequencies included) near the range looked at; of what grows there, a tongue of the wanted width is taken, and
//! the viscosity is set to a wanted share of its growth.

use super::intervals::{Inviscid, Tongue, Viscous};
use super::losses::Losses;
use super::multipliers::Kind;
use super::potential::Potential;
use crate::draw::Draw;
use physics::stability::layered::{FluidLayer, Layered};

const G: f64 = 9.80665;
/// Draws until a stack of the wanted kind is there.
const MOST_DRAWS: u32 = 5000;
/// A tongue whose growth is less than this times the loss may be there or not: what the first order leaves out.
const CERTAIN: f64 = 3.0;

/// Steps of the search for growth outside the tongues.
const STRAY: u32 = 40;
/// Steps of a first look.
const GLANCE: usize = 20;
/// Most of a tongue's growth that viscosity takes away.
const MOST_SHARE: f64 = 0.1;
/// Least loss in a period: a hundredth of it is still more than the rounding of a phase.
const LEAST_LOSS: f64 = 2e-13;
/// Least growth over a period by relative width: the angle of the multipliers must turn with the acceleration, or
/// no solver can say where the tongue lies.
const LEAST_SLOPE: f64 = 2e-4;

/// One question and its true answer.
#[derive(Debug, Clone)]
pub struct Question {
    /// The stack.
    pub layered: Layered,
    /// rad/s
    pub omega: f64,
    /// 1/m
    pub wavenumber: f64,
    /// m/s²
    pub up_to: f64,
    /// The tongue that was wanted (index into `certain`).
    pub wanted: usize,
    /// Loss over growth of that tongue.
    pub share: f64,
    /// All intervals that grow, ascending.
    pub certain: Vec<Tongue>,
    /// Intervals that viscosity takes or nearly takes away.
    pub doubtful: Vec<Tongue>,
}

/// What is asked of the draw.
#[derive(Debug, Clone, Copy)]
struct Wanted {
    /// Relative width between these.
    width: (f64, f64),
    /// What resonates.
    meeting: Meets,
}

/// Whose multipliers meet in the tongue.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Meets {
    /// One mode its mirror image: harmonic or subharmonic.
    Itself,
    /// Two modes that swing at rest.
    Another,
    /// Two modes, of which one falls at rest and is held by the drive.
    Held,
}

/// Number of stacks.
pub const STACKS: usize = super::seeds::SEEDS.len();

/// Six decades of width; three of five meet themselves, one another, one a held mode.
fn wanted(number: usize) -> Wanted {
    let decade = (number % 6) as i32;
    let meeting = match (number / 6) % 5 {
        3 => Meets::Another,
        4 => Meets::Held,
        _ => Meets::Itself,
    };
    Wanted { width: (10f64.powi(decade - 8), 10f64.powi(decade - 7)), meeting }
}

/// The question of this number below [`STACKS`].
///
/// # Panics
/// When its seed no longer gives a stack of the wanted kind: then [`seed`] finds another.
pub fn question(number: usize) -> Question {
    let seed = u64::from(super::seeds::SEEDS[number]);
    drawn(&wanted(number), seed).unwrap_or_else(|| panic!("seed {seed} of stack {number} has no such tongue"))
}

/// The first seed from `from` on that gives a stack of the kind that this number asks for.
pub fn seed(number: usize, from: u32) -> Option<u32> {
    let wanted = wanted(number);
    (from..from + MOST_DRAWS).find(|seed| drawn(&wanted, u64::from(*seed)).is_some())
}

fn drawn(wanted: &Wanted, seed: u64) -> Option<Question> {
    let mut draw = Draw::new(seed);
    let (layered, k) = stack(wanted, &mut draw);
    match layered.interfaces() {
        1 => attempt::<1>(layered, k, wanted, &mut draw),
        2 => attempt::<2>(layered, k, wanted, &mut draw),
        _ => attempt::<3>(layered, k, wanted, &mut draw),
    }
}

/// A stack, its viscosities only in proportion to each other, and a wavenumber.
fn stack(wanted: &Wanted, draw: &mut Draw) -> (Layered, f64) {
    let held = wanted.meeting == Meets::Held;
    let k = std::f64::consts::TAU / if held { draw.scaled(0.012, 0.024) } else { draw.scaled(4e-3, 0.08) };
    let deep = |draw: &mut Draw| draw.scaled(0.3, 8.0) / k;
    // Faces feel each other as e^−kh, and their tongues are as narrow.
    let coupled = -(wanted.width.0 * wanted.width.1).sqrt().ln();
    let inner = |draw: &mut Draw| match draw.one_of(4) {
        0 => draw.scaled(0.05, 0.5) / k,
        1 => draw.scaled(0.5, 9.0) / k,
        _ => (coupled + draw.between(-4.0, 3.0)).max(0.3) / k,
    };
    let liquid = |draw: &mut Draw, density: f64, thickness: f64| FluidLayer {
        density,
        viscosity: density * 1e-6 * draw.scaled(0.3, 3.0),
        thickness,
    };
    let gas = |draw: &mut Draw| match draw.one_of(3) {
        0 => FluidLayer::VACUUM,
        n => FluidLayer {
            density: draw.between(1.0, 2.0),
            viscosity: 1.8e-5,
            thickness: if n == 1 { f64::INFINITY } else { deep(draw) },
        },
    };
    let bottom = |draw: &mut Draw| if draw.chance(0.2) { f64::INFINITY } else { deep(draw) };
    let light = draw.between(700.0, 1000.0);
    let heavy = light * draw.between(1.05, 1.6);
    let face = |draw: &mut Draw| draw.between(0.015, 0.072);
    let between = |draw: &mut Draw| draw.between(0.002, 0.05);
    let family = match wanted.meeting {
        Meets::Itself => draw.one_of(6),
        Meets::Another => 2 + draw.one_of(4),
        Meets::Held => 2 + 2 * draw.one_of(2),
    };
    let (layers, mut tensions) = match family {
        0 => {
            let thickness = bottom(draw);
            (vec![gas(draw), liquid(draw, light, thickness)], vec![face(draw)])
        }
        1 => {
            let (above, below) = (deep(draw), bottom(draw));
            (vec![liquid(draw, light, above), liquid(draw, heavy, below)], vec![between(draw)])
        }
        2 => {
            let thickness = inner(draw);
            (vec![gas(draw), liquid(draw, light, thickness), gas(draw)], vec![face(draw), face(draw)])
        }
        3 => {
            let (middle, below) = (inner(draw), bottom(draw));
            let layers = vec![gas(draw), liquid(draw, light, middle), liquid(draw, heavy, below)];
            (layers, vec![face(draw), between(draw)])
        }
        4 => {
            let (upper, lower) = (inner(draw), inner(draw));
            let layers = vec![gas(draw), liquid(draw, light, upper), liquid(draw, heavy, lower), gas(draw)];
            (layers, vec![face(draw), between(draw), face(draw)])
        }
        _ => {
            let (upper, middle, below) = (inner(draw), inner(draw), bottom(draw));
            let heaviest = heavy * draw.between(1.05, 1.6);
            let layers = vec![
                gas(draw),
                liquid(draw, light, upper),
                liquid(draw, heavy, middle),
                liquid(draw, heaviest, below),
            ];
            (layers, vec![face(draw), between(draw), between(draw)])
        }
    };
    if held {
        // Tension nearly holds the lower face, the drive does the rest.
        let last = tensions.len() - 1;
        tensions[last] = layers[last].density * G / (k * k) * draw.between(0.5, 0.98);
    }
    (Layered { gravity: G, layers, tensions }, k)
}

/// Frequency and range for a stack; the question when they hold what is wanted.
fn attempt<const N: usize>(layered: Layered, k: f64, wanted: &Wanted, draw: &mut Draw) -> Option<Question> {
    let potential = Potential::<N>::new(&layered, k);
    let (omega, up_to) = frequency(&potential, k, wanted, draw)?;
    let inviscid = Inviscid { potential, omega };
    let period = std::f64::consts::TAU / omega;
    let fits = |tongue: &Tongue| {
        (wanted.width.0..wanted.width.1).contains(&tongue.width())
            && (tongue.kinds[0] == Kind::Combination) == (wanted.meeting != Meets::Itself)
            && tongue.kinds[0] == tongue.kinds[1]
            && tongue.high.is_some_and(|high| high < 0.97 * up_to)
            && tongue.growth * period > (LEAST_LOSS / MOST_SHARE).max(LEAST_SLOPE * tongue.width())
    };
    inviscid.tongues_on(up_to, GLANCE).iter().find(|tongue| fits(tongue))?;
    let tongues = inviscid.tongues(up_to);
    let target = *tongues.iter().find(|tongue| fits(tongue))?;
    let losses = Losses::new(&layered, k, &inviscid.potential);
    let mut viscous = Viscous { inviscid, losses, factor: 1.0 };
    let share = draw.scaled(3e-3, MOST_SHARE).max(LEAST_LOSS / (target.growth * period));
    viscous.factor = viscosity_for(&viscous, &target, share * target.growth, up_to)?;
    let mut layered = layered;
    for layer in &mut layered.layers {
        layer.viscosity *= viscous.factor;
    }
    let (mut certain, mut doubtful) = (Vec::new(), Vec::new());
    let mut at = None;
    for tongue in &tongues {
        match viscous.trimmed(tongue, up_to) {
            Some(trimmed) if trimmed.growth > CERTAIN * trimmed.decay => {
                // Different decays may have widened it.
                if *tongue == target && (wanted.width.0..wanted.width.1).contains(&trimmed.width()) {
                    at = Some(certain.len());
                }
                certain.push(trimmed);
            }
            other => doubtful.push(other.unwrap_or(*tongue)),
        }
    }
    let wanted = at?;
    // Growth of the first order that belongs to no tongue is not what is asked here.
    let known = |a: f64| {
        let inside = |tongue: &Tongue| tongue.low <= a && tongue.high.is_none_or(|high| a <= high);
        certain.iter().chain(&doubtful).any(inside)
    };
    let stable = (1..STRAY).map(|i| up_to * f64::from(i) / f64::from(STRAY)).filter(|a| !known(*a));
    if stable.into_iter().any(|a| viscous.leading(a) > 0.0) {
        return None;
    }
    Some(Question { layered, omega, wavenumber: k, up_to, wanted, share, certain, doubtful })
}

/// rad/s, and m/s² up to which to look, such that a tongue of the wanted width may lie there; `None` where none can.
fn frequency<const N: usize>(
    potential: &Potential<N>,
    k: f64,
    wanted: &Wanted,
    draw: &mut Draw,
) -> Option<(f64, f64)> {
    let modes = nalgebra::DMatrix::from_fn(N, N, |r, c| potential.steady[(r, c)]).symmetric_eigen();
    let swing = nalgebra::DMatrix::from_fn(N, N, |r, c| potential.swing[(r, c)]);
    let swing = modes.eigenvectors.transpose() * swing * &modes.eigenvectors;
    let squares = modes.eigenvalues;
    let speed = |i: usize| squares[i].abs().sqrt();
    let falling = (0..N).filter(|i| squares[*i] < 0.0).map(speed).fold(0.0, f64::max);
    if (wanted.meeting == Meets::Held) != (falling > 0.0) {
        return None;
    }
    if falling > 0.0 {
        // From a k/ω² = √2 |Ω|/ω on the held mode swings with 0 to ω/2, and meets another in between.
        let swinging: Vec<usize> = (0..N).filter(|i| squares[*i] > 0.0).collect();
        let other = speed(*swinging.get(draw.one_of(swinging.len().max(1)))?);
        let omega = other / (draw.one_of(3) as f64 + draw.between(0.5, 1.0));
        let least = 2.0 * falling / omega;
        return (least < 0.6).then(|| (omega, draw.between(least, 0.7) * omega * omega / k));
    }
    let width = draw.scaled(wanted.width.0, wanted.width.1);
    let (i, j) = (draw.one_of(N), draw.one_of(N));
    if (i != j) != (wanted.meeting == Meets::Another) {
        return None;
    }
    let order = if i == j { 3 + draw.one_of(6) } else { 1 + draw.one_of(3) };
    let omega = (speed(i) + speed(j)) / order as f64;
    // Shift of a mode by the square of the acceleration, from the sidebands that it drives (second order).
    let shift = |i: usize| -> f64 {
        let sideband = |j: usize, at: f64| match squares[j] - at * at {
            gap if gap.abs() < 0.05 * squares[j] => 0.0,
            gap => swing[(i, j)].powi(2) / gap,
        };
        let of = |j| sideband(j, speed(i) + omega) + sideband(j, speed(i) - omega);
        -(0..N).map(of).sum::<f64>() / (8.0 * speed(i))
    };
    let bend = shift(i) + shift(j);
    let a = if i == j {
        // Mathieu's tongue of order n is 2qⁿ/(4ⁿ⁻¹ (n − 1)!²) high in its parameter and bends as q²/2(n² − 1)
        // (Abramowitz & Stegun 20.2.25 and its leading terms).
        let n = order as f64;
        let factorial: f64 = (1..order).map(|m| m as f64).product();
        let narrowing = 2.0 * (n * n - 1.0) / (4f64.powi(order as i32 - 1) * factorial * factorial);
        let q = (width / narrowing).powf(1.0 / (n - 2.0));
        q * omega * omega / (2.0 * swing[(i, i)].abs())
    } else if order == 1 {
        // Growth a |Q|/4√(Ω₁Ω₂) against a shift of bend·a².
        swing[(i, j)].abs() / (2.0 * (speed(i) * speed(j)).sqrt() * bend.abs() * width)
    } else {
        draw.scaled(0.1, 0.8) * omega * omega / k
    };
    if !(0.02..1.3).contains(&(a * k / (omega * omega))) {
        return None;
    }
    Some((omega + bend * a * a / order as f64, a * draw.between(1.1, 1.5)))
}

/// By what to multiply the viscosities for a wanted decay in a tongue.
fn viscosity_for<const N: usize>(
    viscous: &Viscous<N>,
    tongue: &Tongue,
    decay: f64,
    up_to: f64,
) -> Option<f64> {
    let meeting = viscous.meeting(tongue, up_to)?;
    let (mut low, mut high) = (1e-40, 1.0);
    if meeting.decay(high) < decay {
        return None;
    }
    for _ in 0..100 {
        let middle = f64::sqrt(low * high);
        if meeting.decay(middle) < decay { low = middle } else { high = middle }
    }
    meeting.shifts.iter().all(|shift| shift.at(low).re < 0.0).then_some(low)
}
