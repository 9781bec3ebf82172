//! Hill's determinant of the chain about a periodic motion, and its zeros.
//!
//! Inertia and exponents vary slowly with s and cost most of the time: `rows` keeps their Taylor polynomials, which the hunt
//! uses from afar and takes afresh where a zero is found.

use super::super::harmonics::samples;
use super::super::network::Network;
use nalgebra::DMatrix;
use num_complex::Complex64;
use std::cell::RefCell;
use std::f64::consts::TAU;
use std::rc::Rc;

const MOST_STEPS: usize = 40;
/// A Newton step over ω below which a zero is found; derivatives by differences are good to about 1e-9.
const FOUND: f64 = 1e-10;
/// Step of the differences of inertia and exponents by s, over ω.
const DIFFERENCE: f64 = 1e-4;
/// How far, over ω, Taylor polynomials serve on the way to a zero, and at it: there the third order is below 1e-9.
const FAR: f64 = 2e-2;
const NEAR: f64 = 5e-4;

/// The swing of the springs: strain of each gas layer over a period.
pub(in super::super) struct Swing {
    /// `[gas][sample]`
    pub strain: Vec<Vec<f64>>,
    /// e^{−iθ} at the samples.
    wave: Vec<Complex64>,
}

impl Swing {
    /// From the harmonics of the strains.
    pub fn of(strains: Vec<Vec<Complex64>>) -> Swing {
        let count = strains.iter().map(Vec::len).max().unwrap_or(0);
        // Harmonics of the stiffness up to twice the reach of Hill's matrix are asked for.
        let per_period = (20 * count).max(256);
        Swing::sampled(strains.iter().map(|strain| samples(strain, per_period)).collect())
    }

    /// From evenly spaced samples of the strains over a period.
    pub fn sampled(strain: Vec<Vec<f64>>) -> Swing {
        let count = strain.first().map_or(1, Vec::len);
        let turn = |j: usize| -TAU * j as f64 / count as f64;
        let wave = (0..count).map(|j| Complex64::from_polar(1.0, turn(j))).collect();
        Swing { strain, wave }
    }

    /// G_k for k = −2r … 2r of a gas layer with the exponent ν.
    fn harmonics(&self, gas: usize, nu: f64, reach: usize) -> Vec<Complex64> {
        let swing: Vec<f64> =
            self.strain[gas].iter().map(|xi| nu - nu * (-(nu + 1.0) * xi.ln_1p()).exp()).collect();
        let count = swing.len() as i64;
        let order = |k: i64| {
            let wave = |j: usize| self.wave[(k * j as i64).rem_euclid(count) as usize];
            swing.iter().enumerate().map(|(j, g)| g * wave(j)).sum::<Complex64>() / count as f64
        };
        (-2 * reach as i64..=2 * reach as i64).map(order).collect()
    }
}

/// What a hunt for zeros gave.
pub(super) struct Found {
    /// Im s in [0, ω/2], by growth.
    pub exponents: Vec<Complex64>,
    /// Smallest last step over ω of those that failed; 0 where none did.
    pub step: f64,
}

/// The problem with harmonics −r … r.
pub(super) struct Hill<'a> {
    network: &'a Network<'a>,
    swing: &'a Swing,
    rows: &'a Rows,
    omega: f64,
    reach: usize,
    heaviest: f64,
}

impl<'a> Hill<'a> {
    pub fn new(
        network: &'a Network<'a>,
        swing: &'a Swing,
        rows: &'a Rows,
        omega: f64,
        reach: usize,
    ) -> Hill<'a> {
        let heaviest =
            (0..network.nodes.len()).map(|node| network.mass(node)).fold(f64::MIN_POSITIVE, f64::max);
        Hill { network, swing, rows, omega, reach, heaviest }
    }

    /// The zeros that the starting values lead to, each once.
    pub fn exponents(&self, starts: &[Complex64]) -> Found {
        let mut found: Vec<Complex64> = Vec::new();
        let mut step = f64::INFINITY;
        for &start in starts {
            match self.hunt(start, &found) {
                Ok(s) => {
                    let s = self.folded(s);
                    if found.iter().all(|known| (known - s).norm() > 1e-7 * self.omega) {
                        found.push(s);
                    }
                }
                Err(last) => step = step.min(last),
            }
        }
        found.sort_by(|a, b| b.re.total_cmp(&a.re));
        Found { exponents: found, step: if step.is_finite() { step } else { 0.0 } }
    }

    /// The zero that one starting value leads to, not folded.
    pub fn from(&self, start: Complex64) -> Option<Complex64> {
        self.hunt(start, &[]).ok()
    }

    /// Into Im s in [0, ω/2]: exponents repeat with iω and come in conjugate pairs.
    fn folded(&self, s: Complex64) -> Complex64 {
        let im = s.im - self.omega * (s.im / self.omega).round();
        let im =
            if (im.abs() - self.omega / 2.0).abs() < 1e-9 * self.omega { self.omega / 2.0 } else { im.abs() };
        Complex64::new(s.re, im)
    }

    /// Newton's method on the determinant with known zeros, their conjugates and their repetitions divided out; the
    /// last step over ω where it fails.
    fn hunt(&self, start: Complex64, known: &[Complex64]) -> Result<Complex64, f64> {
        let mut s = start;
        let mut last = f64::INFINITY;
        let mut rows = self.rows.near(self, s, FAR);
        // The exponents ν of the swing belong to the rows' frequencies.
        let mut swing = self.coupling(rows.at.im);
        for _ in 0..MOST_STEPS {
            let reach = if last < 1e-5 { NEAR } else { FAR };
            if (s - rows.at).norm() > reach * self.omega {
                rows = self.rows.near(self, s, reach);
                swing = self.coupling(rows.at.im);
            }
            let Some(trace) = self.logarithmic_derivative(s, &rows, &swing) else { return Err(last) };
            let known: Complex64 = known.iter().map(|zero| self.pole(s, *zero)).sum();
            let mut step = -(trace - known).inv();
            if !step.is_finite() {
                return Err(last);
            }
            // Long steps lead astray.
            let longest = 0.1 * self.omega;
            if step.norm() > longest {
                step *= longest / step.norm();
            }
            s += step;
            last = step.norm() / self.omega;
            if last < FOUND && (s - rows.at).norm() <= NEAR * self.omega {
                return Ok(s);
            }
        }
        Err(last)
    }

    /// What a known zero adds to d ln det/ds: itself and its conjugate, of their repetitions with iω the nearest.
    fn pole(&self, s: Complex64, zero: Complex64) -> Complex64 {
        let nearest = |zero: Complex64| {
            let off = s - zero;
            (off - Complex64::new(0.0, (off.im / self.omega).round() * self.omega)).inv()
        };
        let edge = |value: f64| (zero.im - value).abs() <= 1e-9 * self.omega;
        match edge(0.0) || edge(self.omega / 2.0) {
            true => nearest(zero),
            false => nearest(zero) + nearest(zero.conj()),
        }
    }

    fn order(&self, n: usize) -> Complex64 {
        Complex64::new(0.0, (n as f64 - self.reach as f64) * self.omega)
    }

    /// G_{n−m} for each gas layer and row n: `[gas][n][k]`.
    fn coupling(&self, frequency: f64) -> Vec<Vec<Vec<Complex64>>> {
        let rows = 2 * self.reach + 1;
        (0..self.network.gases.len())
            .map(|gas| {
                let mut known: Option<(f64, Vec<Complex64>)> = None;
                (0..rows)
                    .map(|n| {
                        let at = frequency + self.order(n).im;
                        let nu = self.network.real_exponent(gas, at, self.omega);
                        match &known {
                            Some((same, harmonics)) if *same == nu => harmonics.clone(),
                            _ => {
                                let harmonics = self.swing.harmonics(gas, nu, self.reach);
                                known = Some((nu, harmonics.clone()));
                                harmonics
                            }
                        }
                    })
                    .collect()
            })
            .collect()
    }

    /// d ln det/ds = tr(M⁻¹ dM/ds).
    fn logarithmic_derivative(
        &self,
        s: Complex64,
        linear: &Linear,
        swing: &[Vec<Vec<Complex64>>],
    ) -> Option<Complex64> {
        let rows = 2 * self.reach + 1;
        let size = self.network.nodes.len() * rows;
        let scale = 1.0 / (self.heaviest * self.omega * self.omega);
        let zero = Complex64::default();
        let mut matrix = DMatrix::from_element(size, size, zero);
        let mut slope = DMatrix::from_element(size, size, zero);
        let off = s - linear.at;
        let at = |node: usize, n: usize| node * rows + n;
        for n in 0..rows {
            for (node, inertia) in linear.inertia.iter().enumerate() {
                let (value, by_s) = inertia[n].at(off);
                matrix[(at(node, n), at(node, n))] += value * scale;
                slope[(at(node, n), at(node, n))] += by_s * scale;
            }
            for (index, gas) in self.network.gases.iter().enumerate() {
                let (value, by_s) = linear.exponent[index][n].at(off);
                let stiffness = gas.pressure / gas.thickness * scale;
                for (node, sign) in gas.nodes() {
                    for (other, other_sign) in gas.nodes() {
                        let factor = sign * other_sign * stiffness;
                        matrix[(at(node, n), at(other, n))] += factor * value;
                        slope[(at(node, n), at(other, n))] += factor * by_s;
                        for m in 0..rows {
                            let g = swing[index][n][n + 2 * self.reach - m];
                            matrix[(at(node, n), at(other, m))] -= factor * g;
                        }
                    }
                }
            }
        }
        matrix.lu().solve(&slope).map(|product| product.trace())
    }
}

/// A Taylor polynomial of second order.
#[derive(Clone, Copy)]
struct Taylor([Complex64; 3]);

impl Taylor {
    /// By central differences with step h.
    fn of(f: impl Fn(Complex64) -> Complex64, at: Complex64, h: f64) -> Taylor {
        let (before, here, after) = (f(at - h), f(at), f(at + h));
        Taylor([here, (after - before) / (2.0 * h), (after - 2.0 * here + before) / (2.0 * h * h)])
    }

    /// Value and derivative.
    fn at(&self, off: Complex64) -> (Complex64, Complex64) {
        let [value, first, second] = self.0;
        (value + off * (first + off * second), first + 2.0 * off * second)
    }
}

/// The part of the rows that does not swing, about one s: `[node][row]`, `[gas][row]`.
pub(super) struct Linear {
    at: Complex64,
    reach: usize,
    inertia: Vec<Vec<Taylor>>,
    exponent: Vec<Vec<Taylor>>,
}

/// Those already computed for a network and a frequency.
#[derive(Default)]
pub(super) struct Rows(RefCell<Vec<Rc<Linear>>>);

impl Rows {
    /// About a place within `reach` ω of s.
    fn near(&self, hill: &Hill<'_>, s: Complex64, reach: f64) -> Rc<Linear> {
        let close =
            |linear: &&Rc<Linear>| linear.reach == hill.reach && (linear.at - s).norm() <= reach * hill.omega;
        if let Some(known) = self.0.borrow().iter().find(close) {
            return Rc::clone(known);
        }
        let h = DIFFERENCE * hill.omega;
        let rows = 0..2 * hill.reach + 1;
        let row = |f: &dyn Fn(Complex64) -> Complex64| {
            rows.clone().map(|n| Taylor::of(f, s + hill.order(n), h)).collect()
        };
        let linear = Rc::new(Linear {
            at: s,
            reach: hill.reach,
            inertia: (0..hill.network.nodes.len()).map(|i| row(&|s| hill.network.inertia(i, s))).collect(),
            exponent: (0..hill.network.gases.len()).map(|i| row(&|s| hill.network.exponent(i, s))).collect(),
        });
        self.0.borrow_mut().push(Rc::clone(&linear));
        linear
    }
}
