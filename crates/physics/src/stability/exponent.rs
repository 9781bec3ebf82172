//! The leading Floquet exponent of a slab at one wavenumber.
//!
//! The argument principle (`count`) says how many exponents grow; they are then located one after the other by
//! Muller's method on Hill's determinant (without its normalisation, so that it has no poles there), the exponents
//! already found divided out, until as many are found as were counted. If one cannot be found that way, the line of the
//! count is moved right until it leaves the last exponent behind, which brackets it.
//!
//! When nothing grows, the leading exponent is the least damped *interface* mode. Gas layers have vorticity modes
//! that decay more slowly than the wave; there the determinant has a zero so close to a pole that it turns over a
//! tiny fraction of its distance from the axis, by which they are told apart (`INTERFACE_SHARE`, judgement).

use super::count::{Line, fold};
use super::failure::Failure;
use super::hill::{Hill, Meter, Reference, muller};
use super::layered::{Forcing, Layered, Response};
use super::locus::{Locus, locus};
use super::stiffness::{Size, Stiffness};
use super::unforced;
use nalgebra::DefaultAllocator;
use nalgebra::allocator::Allocator;
use num_complex::Complex64;

/// An acceleration that is none, m/s²: it moves an exponent by k a/4ω at most, which is below 10⁻⁶ 1/s for waves of a
/// millimetre at 50 Hz, and in Hill's determinant it drowns in rounding.
const NO_DRIVE: f64 = 1e-7;
/// A decaying zero counts as an interface mode when the determinant turns there over more than this fraction of
/// the zero's modulus. Vorticity modes of a gas beside a liquid come out near ρ_gas/ρ_liquid.
const INTERFACE_SHARE: f64 = 0.02;
/// Harmonics are kept until the neglected ones change a pivot by less than this.
pub(super) const TRUNCATION: f64 = 1e-11;
/// What one exponent may cost.
const MOST_BLOCKS: u64 = 20_000_000;
/// Im s closer than this (times ω) to 0 or ω/2 is real: harmonic or subharmonic.
const REAL: f64 = 1e-7;
/// Within this (times ω) of those lines an exponent is looked for on the line itself.
const NEARLY_REAL: f64 = 1e-3;
/// Pieces of the axis from whose ends decaying modes are looked for when estimates mislead.
const ALONG: usize = 8;
/// Points a decade of the search for overdamped modes, and the decades below its far end.
const POINTS_A_DECADE: i32 = 8;
const DECADES: i32 = 7;

/// The leading exponent at one wavenumber.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Growth {
    /// Largest Re s, 1/s: positive grows; negative: decay of the least damped interface mode.
    pub rate: f64,
    /// Im s folded into 0 … ω/2, rad/s (without drive: the natural frequency itself).
    pub frequency: f64,
    /// Class of the leading mode.
    pub response: Response,
    /// Certified number of exponents with Re s > 0.
    pub unstable: usize,
    /// The interface that moves most (index into `Layered::tensions`).
    pub interface: usize,
    /// |F| at the exponent over its size a small step away: how well the determinant vanishes.
    pub residual: f64,
    /// Harmonics kept on either side.
    pub harmonics: usize,
}

/// The leading exponent of the slab at wavenumber `wavenumber` (1/m, > 0).
///
/// # Errors
/// [`Failure`]: cancelled, a count that is no whole number, an exponent that was counted and not found, or a
/// number that cannot be used.
pub fn growth(
    layered: &Layered,
    forcing: &Forcing,
    wavenumber: f64,
    cancel: &dyn Fn() -> bool,
) -> Result<Growth, Failure> {
    layered.check()?;
    forcing.check()?;
    super::with_size!(layered, size => leading(layered, forcing, wavenumber, size, cancel))
}

fn leading<D: Size>(
    layered: &Layered,
    forcing: &Forcing,
    k: f64,
    size: D,
    cancel: &dyn Fn() -> bool,
) -> Result<Growth, Failure>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    if forcing.acceleration <= NO_DRIVE {
        let hill = Hill::new(
            Stiffness::new(layered, k, size),
            forcing.omega,
            0.0,
            TRUNCATION,
            Meter::up_to(MOST_BLOCKS),
        );
        let hints = unforced::hints(&hill.stiffness, layered.viscous_decay(k));
        return without_drive(&hill, &hints, k);
    }
    let hill = Hill::new(
        Stiffness::new(layered, k, size),
        forcing.omega,
        forcing.acceleration,
        TRUNCATION,
        Meter::up_to(MOST_BLOCKS),
    );
    let locus = locus(&hill, forcing.acceleration, k)?;
    let hints = unforced::hints(&hill.stiffness, layered.viscous_decay(k));
    leading_of(&hill, &hints, &locus, forcing.acceleration, k, (Care::Thorough, cancel))
}

/// How a decaying mode is looked for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Care {
    /// Where the loci point to, which is enough to compare modes.
    AsEstimated,
    /// Everywhere: overdamped modes and those among vorticity modes may be slower than what the loci point to.
    Thorough,
}

/// The same with everything prepared, for callers that ask for many modes.
pub(super) fn leading_of<D: Size>(
    hill: &Hill<D>,
    hints: &[Complex64],
    locus: &Locus,
    a: f64,
    k: f64,
    (care, cancel): (Care, &dyn Fn() -> bool),
) -> Result<Growth, Failure>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    if cancel() {
        return Err(Failure::Cancelled);
    }
    if a <= NO_DRIVE {
        return without_drive(hill, hints, k);
    }
    let omega = hill.omega;
    let growing = locus.growing(a);
    let references = [hill.reference(false), hill.reference(true)];
    let mut search = Search { hill, a, references: &references, found: Vec::new() };
    let mut starts = locus.exponents_near(a);
    let best = if growing > 0 {
        // The growing ones first, then whatever is near the axis.
        starts.sort_by(|x, y| y.re.total_cmp(&x.re));
        starts.truncate(8);
        starts.extend(hints.iter().map(|hint| Complex64::new(hint.re, fold(hint.im, omega))));
        match search.all_growing(&starts, growing, cancel)? {
            Some(exponent) => Some(exponent),
            None => Some(search.bracketed(hints, k, cancel)?),
        }
    } else {
        starts.truncate(2 * (hints.len() + 1));
        let estimated = match care {
            Care::AsEstimated => search.least_damped_as_estimated(&starts),
            Care::Thorough => None,
        };
        estimated.or_else(|| {
            // Where estimates mislead: from the axis beside them, from the modes at rest, and from all along the axis.
            let beside: Vec<Complex64> = starts.iter().map(|start| Complex64::new(0.0, start.im)).collect();
            starts.extend(beside);
            starts.extend(hints.iter().map(|hint| Complex64::new(hint.re, fold(hint.im, omega))));
            starts.extend((0..=ALONG).map(|i| Complex64::new(0.0, 0.5 * omega * i as f64 / ALONG as f64)));
            search.least_damped(&starts)
        })
    };
    let Some(exponent) = best else {
        return Err(Failure::ExponentLost {
            wavenumber: k,
            acceleration: a,
            above: f64::NEG_INFINITY,
            below: 0.0,
        });
    };
    Ok(Growth {
        rate: exponent.re,
        frequency: exponent.im,
        response: class(exponent.im, omega),
        unstable: growing,
        interface: liveliest(hill, exponent, a),
        residual: search.residual(exponent),
        harmonics: hill.reach,
    })
}

/// Class of an exponent by its folded imaginary part.
fn class(frequency: f64, omega: f64) -> Response {
    if frequency < REAL * omega {
        Response::Harmonic
    } else if frequency > (0.5 - REAL) * omega {
        Response::Subharmonic
    } else {
        Response::Other
    }
}

/// The interface that moves most in the mode at an exponent.
pub(super) fn liveliest<D: Size>(hill: &Hill<D>, exponent: Complex64, a: f64) -> usize
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    let mode = hill.mode(exponent, a);
    let n = hill.stiffness.size().value();
    (0..n)
        .map(|i| mode.iter().map(|z| z[i].norm_sqr()).sum::<f64>())
        .enumerate()
        .max_by(|x, y| x.1.total_cmp(&y.1))
        .map_or(0, |(i, _)| i)
}

/// No drive: the exponents are the roots of det M itself.
fn without_drive<D: Size>(hill: &Hill<D>, hints: &[Complex64], k: f64) -> Result<Growth, Failure>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    let stiffness = &hill.stiffness;
    let det = |z: Complex64| stiffness.at(z).determinant();
    let growing = stiffness.growing_without_drive(0.0);
    let exponent = if growing > 0 {
        // Bracket the largest real root by the count, then polish it.
        let (mut below, mut above) = (0.0, 1.0);
        while stiffness.growing_without_drive(above) > 0 {
            below = above;
            above *= 2.0;
            if above > 1e12 {
                return Err(Failure::ExponentLost {
                    wavenumber: k,
                    acceleration: 0.0,
                    above: below,
                    below: above,
                });
            }
        }
        for _ in 0..200 {
            let middle = 0.5 * (below + above);
            if middle <= below || middle >= above {
                break;
            }
            if stiffness.growing_without_drive(middle) > 0 { below = middle } else { above = middle }
        }
        Complex64::new(0.5 * (below + above), 0.0)
    } else {
        let known = hints.iter().copied().max_by(|x, y| x.re.total_cmp(&y.re));
        let known = known.map(|hint| muller(hint, det, 30, 1e-12).unwrap_or(hint));
        match slowest_at_rest(stiffness, known) {
            Some(exponent) => exponent,
            None => {
                return Err(Failure::ExponentLost {
                    wavenumber: k,
                    acceleration: 0.0,
                    above: f64::NEG_INFINITY,
                    below: 0.0,
                });
            }
        }
    };
    let away = det(exponent * 1.01 + 1e-3).norm();
    Ok(Growth {
        rate: exponent.re,
        frequency: exponent.im.abs(),
        response: Response::None,
        unstable: growing,
        interface: liveliest(hill, exponent, 0.0),
        residual: det(exponent).norm() / away.max(f64::MIN_POSITIVE),
        harmonics: 0,
    })
}

/// The slowest decay at rest: `known`, or a real root of det M closer to the origin, where overdamped modes sit.
fn slowest_at_rest<D: Size>(stiffness: &Stiffness<D>, known: Option<Complex64>) -> Option<Complex64>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    let limit = known?.re;
    let value = |x: f64| stiffness.at(Complex64::new(x, 0.0)).determinant().re;
    let turns = |root: f64| {
        let slope = (value(root * 1.0001) - value(root * 0.9999)) / (2e-4 * root);
        (value(0.5 * root) / slope).abs() > INTERFACE_SHARE * root.abs()
    };
    slowest_zero(value, limit, turns).map(|root| Complex64::new(root, 0.0)).or(known)
}

/// The zero closest to the origin between it and `limit` < 0 of a real function, among those that `accept` takes: a
/// change of sign that is no pole, on a mesh that is geometric towards the origin.
fn slowest_zero(value: impl Fn(f64) -> f64, limit: f64, accept: impl Fn(f64) -> bool) -> Option<f64> {
    let at = |j: i32| limit * 10f64.powf(f64::from(j) / f64::from(POINTS_A_DECADE) - f64::from(DECADES));
    // `limit` is a zero itself: the last point stops short of it.
    let mesh = (0..POINTS_A_DECADE * DECADES).map(at).chain([limit * (1.0 - 1e-6)]);
    let (mut near, mut near_value) = (0.0, value(0.0));
    for far in mesh {
        let far_value = value(far);
        if near_value * far_value < 0.0 {
            let (mut a, mut b) = (near, far);
            for _ in 0..100 {
                let middle = 0.5 * (a + b);
                if middle == a || middle == b {
                    break;
                }
                if value(middle) * near_value > 0.0 { a = middle } else { b = middle }
            }
            let root = 0.5 * (a + b);
            let is_zero = value(root).abs() < 1e-3 * near_value.abs().min(far_value.abs());
            if is_zero && accept(root) {
                return Some(root);
            }
        }
        (near, near_value) = (far, far_value);
    }
    None
}

/// The hunt for exponents at one acceleration.
struct Search<'a, D: Size>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    hill: &'a Hill<D>,
    a: f64,
    references: &'a [Reference; 2],
    /// Exponents found, Im s folded into 0 … ω/2.
    found: Vec<Complex64>,
}

impl<D: Size> Search<'_, D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    /// The determinant near `start`'s half of the strip.
    fn full(&self, s: Complex64, upper_half: bool) -> Complex64 {
        self.hill.characteristic(s, self.a, &self.references[usize::from(upper_half)])
    }

    /// The same with the zeros found so far divided out.
    fn reduced(&self, s: Complex64, upper_half: bool) -> Complex64 {
        self.found.iter().fold(self.full(s, upper_half), |value, zero| value / self.factor(s, *zero))
    }

    fn is_upper(&self, s: Complex64) -> bool {
        s.im > 0.25 * self.hill.omega
    }

    /// 1 − e^{2π(z − s)/ω} and, for a z off the real lines, the same with its conjugate: vanishes at z + inω.
    fn factor(&self, s: Complex64, z: Complex64) -> Complex64 {
        let scale = std::f64::consts::TAU / self.hill.omega;
        let one = |z: Complex64| Complex64::new(1.0, 0.0) - ((z - s) * scale).exp();
        if self.multiplicity(z) == 1 { one(z) } else { one(z) * one(z.conj()) }
    }

    /// 1 on the real lines Im s = 0 and ω/2, else 2 (the conjugate counts too).
    fn multiplicity(&self, z: Complex64) -> usize {
        let folded = fold(z.im, self.hill.omega);
        if folded < REAL * self.hill.omega || folded > (0.5 - REAL) * self.hill.omega { 1 } else { 2 }
    }

    /// The next exponent from a start, polished on F itself; `None` when the method does not settle or finds a
    /// known one.
    fn next(&mut self, start: Complex64) -> Option<Complex64> {
        let omega = self.hill.omega;
        let rough = muller(start, |s| self.reduced(s, self.is_upper(start)), 40, 1e-6)?;
        let rough = Complex64::new(rough.re, fold(rough.im, omega));
        let root = muller(rough, |s| self.full(s, self.is_upper(rough)), 30, 1e-13)?;
        let root = self.on_its_line(Complex64::new(root.re, fold(root.im, omega)));
        // Where fluids are equal their interface has a neutral exponent that means nothing.
        if self.hill.axis > 0.0 && root.norm() < 10.0 * self.hill.axis {
            return None;
        }
        let close = |known: &Complex64| (known - root).norm() < 1e-7 * (root.norm() + 1e-3 * omega);
        // Far left of the axis F oscillates between the poles of vorticity modes: nothing there concerns us.
        if self.found.iter().any(close) || root.re < -2.0 * omega || !root.is_finite() {
            return None;
        }
        if self.residual(root) > 1e-4 {
            return None;
        }
        self.found.push(root);
        Some(root)
    }

    /// All growing exponents, of which the one with the largest real part is returned; `None` when fewer than
    /// `wanted` are found.
    fn all_growing(
        &mut self,
        starts: &[Complex64],
        wanted: usize,
        cancel: &dyn Fn() -> bool,
    ) -> Result<Option<Complex64>, Failure> {
        let mut counted = 0;
        // Several rounds: an exponent found is divided out, which lets the same start find the next one.
        for _ in 0..wanted + 1 {
            for start in starts {
                if cancel() {
                    return Err(Failure::Cancelled);
                }
                if let Some(root) = self.next(*start)
                    && root.re > self.hill.axis
                {
                    counted += self.multiplicity(root);
                    if counted >= wanted {
                        return Ok(self.found.iter().copied().max_by(|x, y| x.re.total_cmp(&y.re)));
                    }
                }
            }
        }
        Ok(None)
    }

    /// The least damped interface mode when the estimates closest to the axis all lead to one.
    fn least_damped_as_estimated(&self, starts: &[Complex64]) -> Option<Complex64> {
        let omega = self.hill.omega;
        let mut best: Option<Complex64> = None;
        // The closest to the axis that could not be confirmed.
        let mut doubtful = f64::INFINITY;
        for start in starts.iter().take(4) {
            // A later estimate, already further from the axis, cannot win.
            if best.is_some_and(|known| start.re.abs() > 2.0 * known.re.abs()) {
                break;
            }
            let upper = self.is_upper(*start);
            let confirmed = muller(*start, |s| self.full(s, upper), 16, 1e-12).and_then(|root| {
                let root = self.on_its_line(Complex64::new(root.re, fold(root.im, omega)));
                let decays = root.re <= 0.0 && root.re > -2.0 * omega;
                (decays && self.residual(root) < 1e-4 && self.is_interface_mode(root)).then_some(root)
            });
            match confirmed {
                Some(root) if best.is_none_or(|known| root.re > known.re) => best = Some(root),
                Some(_) => {}
                None => doubtful = doubtful.min(start.re.abs()),
            }
        }
        best.filter(|root| root.re.abs() < doubtful)
    }

    /// The least damped interface mode, from estimates of the exponents.
    fn least_damped(&mut self, starts: &[Complex64]) -> Option<Complex64> {
        let mut best: Option<Complex64> = None;
        let mut consider = |root: Complex64| {
            if best.is_none_or(|known| root.re > known.re) {
                best = Some(root);
            }
        };
        // Every start several times: what is found is divided out, and the next exponent shows.
        for _ in 0..2 {
            for &start in starts {
                if let Some(root) = self.next(start)
                    && root.re <= 0.0
                    && self.is_interface_mode(root)
                {
                    consider(root);
                }
            }
        }
        starts.iter().filter_map(|start| self.extrapolated(start.im)).for_each(&mut consider);
        let omega = self.hill.omega;
        let limit = best.map_or(-2.0 * omega, |known| known.re);
        for im in [0.0, 0.5 * omega] {
            if let Some(root) = self.slow_on_line(im, limit)
                && best.is_none_or(|known| root.re > known.re)
            {
                best = Some(root);
            }
        }
        best
    }

    /// Left of the axis the vorticity modes of the gas crowd the real line and may stand in the way of any
    /// iteration. Here the determinant is extrapolated from the axis and from points right of it, at a distance
    /// like that of the exponent itself, where the crowd is not felt. The value stands (relative accuracy about
    /// 1e-2) when the determinant nearly vanishes there and polishing leads nowhere.
    fn extrapolated(&self, y: f64) -> Option<Complex64> {
        let omega = self.hill.omega;
        let origin = Complex64::new(0.0, y);
        let upper = self.is_upper(origin);
        let f0 = self.full(origin, upper);
        let mut reach = 1e-3 * omega;
        let mut guess = origin;
        for _ in 0..4 {
            let (f1, f2) = (self.full(origin + reach, upper), self.full(origin + 2.0 * reach, upper));
            let (linear, square) = ((-3.0 * f0 + 4.0 * f1 - f2) / 2.0, (f0 - 2.0 * f1 + f2) / 2.0);
            let root = (linear * linear - 4.0 * square * f0).sqrt();
            let denominator =
                if (linear + root).norm() > (linear - root).norm() { linear + root } else { linear - root };
            let step = -2.0 * f0 / denominator * reach;
            if !step.is_finite() {
                return None;
            }
            guess = origin + step;
            reach = step.norm().clamp(1e-6 * omega, 0.2 * omega);
        }
        if guess.re > 0.0 || (guess - origin).norm() > 0.05 * omega {
            return None;
        }
        let polished = muller(guess, |s| self.full(s, upper), 30, 1e-12).filter(|root| {
            (root - guess).norm() < 0.3 * (guess - origin).norm()
                && root.re <= 0.0
                && self.residual(*root) < 1e-4
                && self.is_interface_mode(*root)
        });
        let vanishes = self.full(guess, upper).norm() < 0.05 * f0.norm();
        let root = polished.or(vanishes.then_some(guess))?;
        let folded = fold(root.im, omega);
        Some(Complex64::new(root.re, if folded < REAL * omega { 0.0 } else { folded }))
    }

    /// An exponent close to Im s = 0 or ω/2, where the determinant is real, is looked for on that line itself: rounding
    /// must not make a lone real exponent look like one of a pair.
    fn on_its_line(&self, root: Complex64) -> Complex64 {
        let omega = self.hill.omega;
        let line = if root.im < 0.25 * omega { 0.0 } else { 0.5 * omega };
        let away = (root.im - line).abs();
        if away < REAL * omega {
            return Complex64::new(root.re, line);
        }
        if away > NEARLY_REAL * omega {
            return root;
        }
        let upper = line > 0.0;
        let real = |x: Complex64| Complex64::new(self.full(Complex64::new(x.re, line), upper).re, 0.0);
        match muller(Complex64::new(root.re, 0.0), real, 30, 1e-13) {
            Some(found)
                if found.im == 0.0 && (found.re - root.re).abs() < (2.0 * away).max(1e-4 * root.norm()) =>
            {
                Complex64::new(found.re, line)
            }
            _ => root,
        }
    }

    /// The slowest decaying interface mode on the real line Im s = `im` (0 or ω/2) with Re s between `limit` < 0 and
    /// 0: a change of sign that is no pole. Overdamped modes sit there, often so close to the origin that nothing on
    /// the axis points to them.
    fn slow_on_line(&self, im: f64, limit: f64) -> Option<Complex64> {
        let upper = im > 0.0;
        let value = |x: f64| self.full(Complex64::new(x, im), upper).re;
        slowest_zero(value, limit, |x| self.is_interface_mode(Complex64::new(x, im)))
            .map(|x| Complex64::new(x, im))
    }

    /// |F| at a point over |F| a small step away.
    fn residual(&self, s: Complex64) -> f64 {
        let step = 1e-2 * s.norm().max(1e-3 * self.hill.omega);
        let upper = self.is_upper(s);
        self.full(s, upper).norm() / self.full(s + step, upper).norm().max(f64::MIN_POSITIVE)
    }

    /// Whether the determinant turns at this zero over a length comparable to the zero's own size.
    fn is_interface_mode(&self, s: Complex64) -> bool {
        let step = 1e-4 * s.norm().max(1e-6 * self.hill.omega);
        let upper = self.is_upper(s);
        let slope = (self.full(s + step, upper) - self.full(s - step, upper)).norm() / (2.0 * step);
        let size = self.full(s + 0.5 * s.norm(), upper).norm();
        size / slope > INTERFACE_SHARE * s.norm()
    }

    /// Brackets the largest real part by counts on lines ever closer to it, then locates the exponent on the last.
    fn bracketed(
        &mut self,
        hints: &[Complex64],
        k: f64,
        cancel: &dyn Fn() -> bool,
    ) -> Result<Complex64, Failure> {
        let (hill, a) = (self.hill, self.a);
        let count_at = |sigma: f64| -> Result<super::count::Count, Failure> {
            if cancel() {
                return Err(Failure::Cancelled);
            }
            Line::new(hill, sigma, hints).count(hill, a, k)
        };
        let known = self.found.iter().map(|root| root.re).fold(0.0, f64::max);
        let (mut below, mut above) = (known, (2.0 * known).max(1e-3 * hill.omega));
        while count_at(above)?.right > 0 {
            below = above;
            above *= 2.0;
            if above > 1e6 * hill.omega {
                return Err(Failure::ExponentLost {
                    wavenumber: k,
                    acceleration: a,
                    above: below,
                    below: above,
                });
            }
        }
        self.found.clear();
        for _ in 0..60 {
            let middle = if below > 0.0 { (below * above).sqrt() } else { 0.1 * above };
            let count = count_at(middle)?;
            if count.right > 0 {
                below = middle
            } else {
                above = middle
            }
            let starts: Vec<_> = count.near.iter().take(3).map(|&(y, _)| Complex64::new(middle, y)).collect();
            for start in starts {
                if let Some(root) = self.next(start)
                    && root.re >= below * (1.0 - 1e-9)
                    && count_at(root.re * (1.0 + 1e-6) + 1e-9 * hill.omega)?.right == 0
                {
                    return Ok(root);
                }
            }
            self.found.clear();
        }
        Err(Failure::ExponentLost { wavenumber: k, acceleration: a, above: below, below: above })
    }
}
