//! The critical drives of a slab along the axis of marginal exponents, and from them every acceleration at which
//! the number of growing exponents of a mode changes.
//!
//! An exponent lies at s = iy on the axis exactly for those drives x = a² for which Hill's system has a solution
//! there. The drive couples harmonics of even and of odd index only with one another, so that with
//! B_n = M(iy + inω)⁻¹ G the x are the eigenvalues of
//!
//! ```text
//! (4/x) ζ_n = B_n [B_{n−1} ζ_{n−2} + (B_{n−1} + B_{n+1}) ζ_n + B_{n+1} ζ_{n+2}],   every second n.
//! ```
//!
//! As y runs over half a period, 0 … ω/2, each eigenvalue draws a *locus* x_j(y) in the complex plane. Where a locus
//! crosses the positive real axis a = √x is a marginal acceleration; the exponent moves with the drive as
//! ds/dx = i/(dx_j/dy), so it starts to grow where Im x_j rises through zero and ceases to where it falls. Counting
//! from the exponents that grow without drive (`Stiffness::growing_without_drive`) therefore gives the number of
//! growing exponents at *every* acceleration at once; it is the argument principle, F(iy) = Π (1 − x/x_j(y)), read
//! for all x together.
//!
//! # Why nothing is missed
//! A tongue may be as narrow as the damping is small, in a, in k and in frequency: F has poles and zeros side by
//! side then, and any grid can step over them. The loci are blind to that. They are products of M, which is smooth in y
//! on the scale of ω whatever the damping (a resonance makes M small, not sharp), and a narrow tongue lies between the
//! crossings of two *different* loci, each of which crosses the axis at a turning point of its own, as plainly as in a wide
//! tongue. What has to be resolved is which locus is which where two pass close by: a piece is halved until the
//! matching of its ends is beyond doubt, or does not matter because all of them lie on the same side of the axis;
//! and until the imaginary part of each follows a parabola through three samples that decides whether it has a zero.
//!
//! # What is not sure yet
//! A locus so steep that it runs through the whole range of drives between two samples is judged by its ends, which lie
//! outside. In nearly inviscid liquids (below about 10⁻⁹ m²/s, a thousandth of water's viscosity) *combination* tongues
//! narrower than about a hundredth of their drive have been seen to be missed that way; harmonic and subharmonic ones of
//! any width tried (10⁻² to 10⁻⁸) were found.

use super::eigenvalues::eigenvalues;
use super::failure::Failure;
use super::hill::Hill;
use super::layered::Response;
use super::stiffness::{Size, Square};
use nalgebra::DefaultAllocator;
use nalgebra::allocator::Allocator;
use num_complex::Complex64;

/// Pieces of half a period before any is halved.
const PIECES: usize = 8;
/// A piece is not halved below this part of half a period.
const SMALLEST: f64 = 1e-13;
/// Loci are followed out to this multiple of the largest x asked for.
const BEYOND: f64 = 4.0;
/// Two loci are told apart when exchanging their ends would make them this many times longer.
const APART: f64 = 2.5;
/// Im x over |x| below which an eigenvalue on Im s = 0 or ω/2, where they are real or in conjugate pairs, is real.
const REAL: f64 = 1e-7;
/// Relative accuracy of x at a crossing.
const ACCURACY: f64 = 1e-11;

/// The critical drives at one point of the axis.
#[derive(Debug, Clone)]
struct Sample {
    y: f64,
    /// x = a², (m/s²)², by modulus.
    drives: Vec<Complex64>,
}

/// A marginal acceleration.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Crossing {
    /// m/s²
    pub acceleration: f64,
    /// Im s of the exponent on the axis, 0 … ω/2.
    pub frequency: f64,
    /// By how much the number of growing exponents changes as the acceleration rises: ±1 on the real lines, ±2
    /// (a conjugate pair) between.
    pub change: i32,
    /// Class of the exponent.
    pub response: Response,
}

/// The loci of one mode.
#[derive(Debug, Clone)]
pub(super) struct Locus {
    /// All marginal accelerations up to the largest asked for, ascending.
    pub crossings: Vec<Crossing>,
    /// Number of growing exponents without drive.
    pub growing_at_rest: usize,
    /// The smallest |x| seen: below √ of it no exponent can reach the axis.
    pub smallest: f64,
    /// By y, from 0 to ω/2.
    samples: Vec<Sample>,
    /// The largest x asked for.
    most: f64,
}

/// Follows the loci of a mode for accelerations up to `up_to`.
///
/// # Errors
/// [`Failure::CountUnsure`] when the crossings do not add up to a possible number of growing exponents;
/// [`Failure::TooMuchWork`].
pub(super) fn locus<D: Size>(hill: &Hill<D>, up_to: f64, wavenumber: f64) -> Result<Locus, Failure>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    let growing_at_rest = hill.stiffness.growing_without_drive(hill.axis);
    let mut pieces = PIECES;
    let mut doubt = (0.0, 0);
    for _ in 0..3 {
        // Between resonances a locus runs out to where inertia alone answers, a ~ ω²/k.
        let inertia = BEYOND * hill.omega * hill.omega / wavenumber;
        let followed = (BEYOND * up_to * up_to).max(inertia * inertia);
        let mut tracer = Tracer { hill, most: up_to * up_to, followed, samples: Vec::new() };
        tracer.mesh(pieces)?;
        let Some(crossings) = tracer.crossings()? else {
            doubt = (f64::NAN, tracer.samples.len());
            pieces *= 4;
            continue;
        };
        let (mut number, mut lowest) = (growing_at_rest as i32, 0);
        for crossing in &crossings {
            number += crossing.change;
            lowest = lowest.min(number);
        }
        if lowest == 0 {
            let moduli = tracer.samples.iter().filter_map(|sample| sample.drives.first()).map(|x| x.norm());
            let smallest = moduli.fold(f64::INFINITY, f64::min);
            return Ok(Locus {
                crossings,
                growing_at_rest,
                smallest,
                samples: tracer.samples,
                most: tracer.most,
            });
        }
        doubt = (f64::from(lowest), tracer.samples.len());
        pieces *= 4;
    }
    Err(Failure::CountUnsure { wavenumber, acceleration: up_to, turns: doubt.0, evaluations: doubt.1 })
}

impl Locus {
    /// Number of growing exponents at an acceleration.
    pub fn growing(&self, a: f64) -> usize {
        let changes = self.crossings.iter().take_while(|crossing| crossing.acceleration < a);
        let number = self.growing_at_rest as i32 + changes.map(|crossing| crossing.change).sum::<i32>();
        number.max(0) as usize
    }

    /// Estimates of the exponents at an acceleration, from the loci extrapolated off the axis; the closest to it first.
    ///
    /// Between two samples a locus is x0 + t (x1 − x0), t = (y − y0)/(y1 − y0); where that equals a² for a complex t
    /// there is an exponent s = iy. Good near the axis, a starting point elsewhere.
    pub fn exponents_near(&self, a: f64) -> Vec<Complex64> {
        let x = Complex64::new(a * a, 0.0);
        let mut found: Vec<Complex64> = Vec::new();
        let last = self.samples.len().saturating_sub(2);
        for (i, pair) in self.samples.windows(2).enumerate() {
            let (start, end) = (&pair[0], &pair[1]);
            for (p, q) in matched(start, end, self.most) {
                let (x0, x1) = (start.drives[p], end.drives[q]);
                let t = (x - x0) / (x1 - x0);
                if t.re > -0.5 && t.re < 1.5 && t.im.abs() < 8.0 {
                    let (re, im) = (-t.im * (end.y - start.y), start.y + t.re * (end.y - start.y));
                    found.push(Complex64::new(re, im.clamp(0.0, self.samples[last + 1].y)));
                }
                // A real locus on either line leaves it as x0 ± i v y + c y², so there is a real exponent.
                let line = match i {
                    0 if x0.im.abs() < REAL * x0.norm() => Some((x0, x1, 1.0, 0.0)),
                    _ if i == last && x1.im.abs() < REAL * x1.norm() => Some((x1, x0, -1.0, end.y)),
                    _ => None,
                };
                if let Some((on, off, side, im)) = line {
                    let width = end.y - start.y;
                    let (v, c) = (side * off.im / width, (off.re - on.re) / (width * width));
                    let root = v * v - 4.0 * c * (a * a - on.re);
                    if root >= 0.0 {
                        let s = 2.0 * (a * a - on.re) / (v + root.sqrt().copysign(v));
                        found.push(Complex64::new(s, im));
                    }
                }
            }
        }
        found.retain(|s| s.is_finite());
        found.sort_by(|a, b| a.re.abs().total_cmp(&b.re.abs()));
        found
    }
}

struct Tracer<'a, D: Size>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    hill: &'a Hill<D>,
    most: f64,
    /// Loci are followed out to here.
    followed: f64,
    samples: Vec<Sample>,
}

impl<D: Size> Tracer<'_, D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    fn sample(&self, y: f64) -> Result<Sample, Failure> {
        self.hill.meter.check()?;
        let drives = self.hill.critical_drives(y, self.followed);
        Ok(Sample { y, drives })
    }

    /// Samples half a period, halving pieces where the loci are not beyond doubt.
    fn mesh(&mut self, pieces: usize) -> Result<(), Failure> {
        let half = 0.5 * self.hill.omega;
        let mut todo = Vec::new();
        for i in (0..pieces).rev() {
            todo.push((self.sample(half * (i + 1) as f64 / pieces as f64)?, i % 2 == 1));
        }
        self.samples.push(self.sample(0.0)?);
        // `todo` holds the samples still ahead, nearest last; the pair of pieces before an even one is judged together.
        let mut ahead: Vec<Sample> = todo.into_iter().map(|(sample, _)| sample).collect();
        while ahead.len() >= 2 {
            let here = &self.samples[self.samples.len() - 1];
            let (middle, end) = (&ahead[ahead.len() - 1], &ahead[ahead.len() - 2]);
            let width = (end.y - here.y) / half;
            if width < 4.0 * SMALLEST || self.is_plain(here, middle, end) {
                let middle = ahead.pop();
                let end = ahead.pop();
                self.samples.extend(middle.into_iter().chain(end));
            } else {
                let (first, second) =
                    (self.sample(0.5 * (here.y + middle.y))?, self.sample(0.5 * (middle.y + end.y))?);
                let middle = ahead.pop();
                ahead.push(second);
                ahead.extend(middle);
                ahead.push(first);
            }
        }
        Ok(())
    }

    /// Whether two neighbouring pieces hide nothing: every locus in them is identified and decides on its zeros.
    fn is_plain(&self, start: &Sample, middle: &Sample, end: &Sample) -> bool {
        let (first, second) = (matched(start, middle, self.most), matched(middle, end, self.most));
        if !self.beyond_doubt(start, middle, &first) || !self.beyond_doubt(middle, end, &second) {
            return false;
        }
        // One that comes into range between the samples must be followed from outside.
        let reaches_in = |x: Complex64| x.re > 0.0 && x.norm() < 1.2 * self.most;
        let lone_start = (0..start.drives.len())
            .any(|p| reaches_in(start.drives[p]) && first.iter().all(|pair| pair.0 != p));
        let lone_end =
            (0..end.drives.len()).any(|q| reaches_in(end.drives[q]) && second.iter().all(|pair| pair.1 != q));
        if lone_start || lone_end {
            return false;
        }
        let half = 0.5 * self.hill.omega;
        let on_line = |y: f64| y <= 0.0 || y >= half * (1.0 - 1e-15);
        (0..middle.drives.len()).all(|m| {
            let x = middle.drives[m];
            let before = first.iter().find(|pair| pair.1 == m).map(|pair| start.drives[pair.0]);
            let after = second.iter().find(|pair| pair.0 == m).map(|pair| end.drives[pair.1]);
            let (Some(before), Some(after)) = (before, after) else {
                // It comes from or goes to beyond what is followed.
                return x.norm() > 1.2 * self.most || x.re < 0.0;
            };
            let reaches = [before, x, after].iter().any(|x| x.re > 0.0 && x.re < 1.2 * self.most);
            if !reaches {
                return true;
            }
            let flat = |x: Complex64, y: f64| {
                if on_line(y) && x.im.abs() < REAL * x.norm() { 0.0 } else { x.im }
            };
            decides(flat(before, start.y), x.im, flat(after, end.y))
        })
    }

    /// Whether no other matching of two samples is nearly as good, or none matters.
    fn beyond_doubt(&self, start: &Sample, end: &Sample, pairs: &[(usize, usize)]) -> bool {
        let near = |x: Complex64| x.re > 0.0 && x.re < 1.5 * self.most;
        for (i, &(p, p1)) in pairs.iter().enumerate() {
            let (p, p1) = (start.drives[p], end.drives[p1]);
            for &(q, q1) in &pairs[i + 1..] {
                let (q, q1) = (start.drives[q], end.drives[q1]);
                let all = [p, p1, q, q1];
                if !all.iter().any(|x| near(*x)) {
                    continue;
                }
                let same_side = all.iter().all(|x| x.im > 0.0) || all.iter().all(|x| x.im < 0.0);
                if same_side {
                    continue;
                }
                let (straight, crossed) = (apart(p, p1) + apart(q, q1), apart(p, q1) + apart(q, p1));
                if crossed < APART * straight {
                    return false;
                }
            }
        }
        true
    }

    /// The crossings of the positive real axis, polished; `None` when one of them is a jump instead.
    fn crossings(&self) -> Result<Option<Vec<Crossing>>, Failure> {
        let half = 0.5 * self.hill.omega;
        let mut found = Vec::new();
        for (i, pair) in self.samples.windows(2).enumerate() {
            let (start, end) = (&pair[0], &pair[1]);
            let (first, last) = (i == 0, i + 2 == self.samples.len());
            for (p, q) in matched(start, end, self.most) {
                let (x0, x1) = (start.drives[p], end.drives[q]);
                let real = |x: Complex64| x.im.abs() < REAL * x.norm();
                if first && real(x0) {
                    if x0.re > 0.0 {
                        found.extend(self.on_line(0.0, x0.re, if x1.im > 0.0 { 1 } else { -1 }));
                    }
                    continue;
                }
                if last && real(x1) {
                    if x1.re > 0.0 {
                        found.extend(self.on_line(half, x1.re, if x0.im < 0.0 { 1 } else { -1 }));
                    }
                    continue;
                }
                if x0.im * x1.im < 0.0 && (x0.re > 0.0 || x1.re > 0.0) {
                    match self.between(start.y, end.y, x0, x1) {
                        Some(crossing) => found.push(crossing),
                        None => return Ok(None),
                    }
                }
            }
        }
        found.retain(|crossing: &Crossing| crossing.acceleration * crossing.acceleration <= self.most);
        found.sort_by(|a, b| a.acceleration.total_cmp(&b.acceleration));
        Ok(Some(found))
    }

    /// A real eigenvalue on Im s = 0 or ω/2, polished on the real determinant there.
    fn on_line(&self, y: f64, x: f64, change: i32) -> Option<Crossing> {
        let harmonics = self.hill.harmonics(Complex64::new(self.hill.axis, y));
        let value = |x: f64| self.hill.determinant_at(&harmonics, Complex64::new(x, 0.0)).re;
        let x = secant(value, x);
        let response = if y == 0.0 { Response::Harmonic } else { Response::Subharmonic };
        (x > 0.0).then(|| Crossing { acceleration: x.sqrt(), frequency: y, change, response })
    }

    /// Where the locus from x0 at y0 to x1 at y1 crosses the real axis (at negative x too); `None` when it does not: the two
    /// are not the same locus.
    fn between(&self, y0: f64, y1: f64, x0: Complex64, x1: Complex64) -> Option<Crossing> {
        let change = if x1.im > x0.im { 2 } else { -2 };
        // Regula falsi with the weight of a retained end halved (Illinois), on Im x.
        let (mut low, mut high) = ((y0, x0, x0.im), (y1, x1, x1.im));
        let mut best = (y0, x0);
        let mut kept = 0;
        for _ in 0..60 {
            let t = (low.2 / (low.2 - high.2)).clamp(1e-6, 1.0 - 1e-6);
            let y = low.0 + t * (high.0 - low.0);
            let x = self.drive_near(y, low.1 + (high.1 - low.1) * t);
            let moved = (x - best.1).norm();
            best = (y, x);
            let settled = x.im.abs() <= ACCURACY * x.norm()
                || (moved <= ACCURACY * x.norm() && x.im.abs() <= 1e3 * ACCURACY * x.norm());
            if settled || high.0 - low.0 <= 1e-15 * self.hill.omega {
                break;
            }
            if (x.im > 0.0) == (low.1.im > 0.0) {
                low = (y, x, x.im);
                if kept == 1 {
                    high.2 *= 0.5;
                }
                kept = 1;
            } else {
                high = (y, x, x.im);
                if kept == -1 {
                    low.2 *= 0.5;
                }
                kept = -1;
            }
        }
        let x = best.1;
        let crosses = x.im.abs() <= 1e-6 * x.norm();
        // Beyond what was asked, or at negative x, it does not matter what it is.
        let outside = x.re <= 0.0 || x.re > 1.1 * self.most;
        (crosses || outside).then(|| Crossing {
            acceleration: if outside { f64::INFINITY } else { x.re.sqrt() },
            frequency: best.0,
            change,
            response: Response::Other,
        })
    }

    /// The critical drive at y next to a guess, by the secant method on the full determinant.
    fn drive_near(&self, y: f64, guess: Complex64) -> Complex64 {
        let harmonics = self.hill.harmonics(Complex64::new(self.hill.axis, y));
        let value = |x: Complex64| self.hill.determinant_at(&harmonics, x);
        let (mut x0, mut x1) = (guess, guess * Complex64::new(1.0, 1e-5));
        let (mut f0, mut f1) = (value(x0), value(x1));
        for _ in 0..12 {
            let slope = f1 - f0;
            if slope.norm() == 0.0 {
                break;
            }
            let step = f1 * (x1 - x0) / slope;
            if !step.is_finite() || step.norm() > 0.3 * x1.norm() {
                break;
            }
            (x0, f0) = (x1, f1);
            x1 -= step;
            // The next step would be of the order of the square of this one.
            if step.norm() <= 1e-8 * x1.norm() {
                break;
            }
            f1 = value(x1);
        }
        if (x1 - guess).norm() > 0.5 * guess.norm() { guess } else { x1 }
    }
}

impl<D: Size> Hill<D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    /// The drives x = a² with |x| ≤ `most` for which an exponent lies at the axis and frequency y, by modulus.
    pub(super) fn critical_drives(&self, y: f64, most: f64) -> Vec<Complex64> {
        let (n, reach) = (self.stiffness.size().value(), self.rough as i64);
        let first = if y > 0.25 * self.omega { -reach - 1 } else { -reach };
        self.meter.charge((reach - first + 1) as usize);
        let follow: Vec<Square<D>> = (first..=reach)
            .map(|harmonic| {
                let block = self.stiffness.at(Complex64::new(self.axis, y + harmonic as f64 * self.omega));
                let mut inverse = block.try_inverse().unwrap_or_else(|| {
                    Square::<D>::zeros_generic(self.stiffness.size(), self.stiffness.size())
                });
                for (c, mut column) in inverse.column_iter_mut().enumerate() {
                    column *= Complex64::new(self.stiffness.weight[c], 0.0);
                }
                inverse
            })
            .collect();
        // Every second harmonic, from the second on.
        let blocks = follow.len() / 2;
        let size = n * blocks;
        let mut matrix = vec![Complex64::new(0.0, 0.0); size * size];
        let mut put = |row: usize, column: usize, block: &Square<D>| {
            for r in 0..n {
                for c in 0..n {
                    matrix[(row * n + r) * size + column * n + c] = block[(r, c)];
                }
            }
        };
        for block in 0..blocks {
            let at = 2 * block + 1;
            let above = follow.get(at + 1).map(|next| &follow[at] * next);
            let below = &follow[at] * &follow[at - 1];
            if block > 0 {
                put(block, block - 1, &below);
            }
            match &above {
                Some(above) => {
                    put(block, block, &(&below + above));
                    if block + 1 < blocks {
                        put(block, block + 1, above);
                    }
                }
                None => put(block, block, &below),
            }
        }
        let inverses = eigenvalues(&mut matrix, size).unwrap_or_default();
        let mut drives: Vec<Complex64> = inverses
            .into_iter()
            .filter(|inverse| inverse.norm() * most >= 4.0)
            .map(|inverse| 4.0 / inverse)
            .collect();
        drives.sort_by(|a, b| a.norm_sqr().total_cmp(&b.norm_sqr()));
        drives
    }
}

/// Distance of two drives.
fn apart(a: Complex64, b: Complex64) -> f64 {
    (a - b).norm()
}

/// Which drive of one sample goes on as which of the next: the closest first.
fn matched(start: &Sample, end: &Sample, most: f64) -> Vec<(usize, usize)> {
    let mut pairs: Vec<(f64, usize, usize)> = Vec::with_capacity(start.drives.len() * end.drives.len());
    for (p, x) in start.drives.iter().enumerate() {
        pairs.extend(end.drives.iter().enumerate().map(|(q, x1)| (apart(*x, *x1), p, q)));
    }
    // What jumps further than its own size is not the same locus: one leaves as another enters what is followed.
    let jumps = |p: Complex64, q: Complex64| 0.6 * (p.norm() + q.norm()).max(0.5 * most);
    pairs.retain(|&(distance, p, q)| distance <= jumps(start.drives[p], end.drives[q]));
    pairs.sort_by(|a, b| a.0.total_cmp(&b.0));
    let mut found: Vec<(usize, usize)> = Vec::with_capacity(start.drives.len());
    for (_, p, q) in pairs {
        if found.iter().all(|pair| pair.0 != p && pair.1 != q) {
            found.push((p, q));
        }
    }
    found
}

/// Whether three equidistant values decide how often the curve through them is zero: at most once between the ends,
/// and the parabola through them has no pair of zeros besides.
fn decides(start: f64, middle: f64, end: f64) -> bool {
    let bend = middle - 0.5 * (start + end);
    let largest = start.abs().max(end.abs());
    if largest == 0.0 {
        return middle == 0.0;
    }
    if bend.abs() > 0.35 * largest {
        return false;
    }
    // Slopes of the parabola at the ends (per half width of the pair): a change of sign of the slope on the side of zero
    // would hide two zeros.
    let (slope_start, slope_end) = (0.5 * (end - start) + 2.0 * bend, 0.5 * (end - start) - 2.0 * bend);
    if start * end > 0.0 {
        let lowest = start.abs().min(end.abs()).min(middle.abs());
        let turns = slope_start * slope_end < 0.0;
        return start * middle > 0.0 && (!turns || bend * start < 0.0 || bend.abs() < 0.5 * lowest);
    }
    // One zero between, or at an end that is exactly zero: the slope must not change.
    slope_start * slope_end > 0.0
        || (start == 0.0 && slope_start * end > 0.0 && middle * end > 0.0)
        || (end == 0.0 && slope_end * start < 0.0 && middle * start > 0.0)
}

/// A simple real root near x by the secant method, or x where that does not settle nearby.
fn secant(f: impl Fn(f64) -> f64, x: f64) -> f64 {
    let (mut x0, mut x1) = (x * (1.0 - 1e-6), x);
    let (mut f0, mut f1) = (f(x0), f(x1));
    for _ in 0..20 {
        let slope = f1 - f0;
        if slope == 0.0 || !slope.is_finite() {
            break;
        }
        let next = x1 - f1 * (x1 - x0) / slope;
        if next.is_nan() || (next - x).abs() > 1e-2 * x.abs() {
            return x;
        }
        (x0, f0) = (x1, f1);
        x1 = next;
        if (x1 - x0).abs() <= 1e-10 * x.abs() {
            break;
        }
        f1 = f(x1);
    }
    x1
}
