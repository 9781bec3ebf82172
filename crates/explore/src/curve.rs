//! Growth and marginal accelerations of one slab against wavenumber: the slab taken alone.

use checks::derived::Derived;
use physics::stability::layered::{Forcing, Response};
use physics::stability::{Failure, Neutral, growth, layered, neutral};

/// A curve.
#[derive(Debug, Clone, PartialEq)]
pub struct Curve {
    /// The slab's name.
    pub slab: String,
    /// The slab's own peak acceleration, m/s².
    pub acceleration: f64,
    /// Hz
    pub frequency: f64,
    /// Marginal accelerations were looked for up to here, m/s².
    pub up_to: f64,
    /// In the order asked for.
    pub points: Vec<CurvePoint>,
}

/// One wavenumber.
#[derive(Debug, Clone, PartialEq)]
pub struct CurvePoint {
    /// 1/m
    pub wavenumber: f64,
    /// Largest Re s of the interface modes, 1/s.
    pub growth_rate: f64,
    /// Its class.
    pub response: Response,
    /// Every marginal acceleration.
    pub neutral: Neutral,
}

/// Why there is no curve.
#[derive(Debug, Clone, PartialEq)]
pub enum NoCurve {
    /// The stack could not be resolved: the findings say why.
    StackUnresolved,
    /// No drive, so no frequency to judge at.
    NoFrequency,
    /// No slab has a layer of that name; these names would do.
    SlabNotFound(Vec<String>),
    /// The slab's own acceleration is not known and none was given.
    NoAcceleration,
    /// The physics has no answer.
    Failure(Failure),
}

/// The curve of the slab that has a layer (or is) named `slab` at the wavenumbers (1/m). `acceleration`: the slab's
/// own, m/s² peak; `None`: the computed one. `up_to`: `None`: twice that, at least 50 standard gravities.
///
/// # Errors
/// [`NoCurve`].
pub fn curve(
    derived: &Derived,
    slab: &str,
    wavenumbers: &[f64],
    acceleration: Option<f64>,
    up_to: Option<f64>,
    cancel: &dyn Fn() -> bool,
) -> Result<Curve, NoCurve> {
    let stack = derived.stack.as_ref().ok_or(NoCurve::StackUnresolved)?;
    let found = derived.slabs.iter().find(|s| s.name == slab || s.layers.iter().any(|layer| layer == slab));
    let found = found.ok_or_else(|| {
        NoCurve::SlabNotFound(derived.slabs.iter().flat_map(|slab| slab.layers.iter().cloned()).collect())
    })?;
    let frequency = derived.drive.ok_or(NoCurve::NoFrequency)?.frequency;
    let computed = found.motion.as_ref().map(|motion| motion.acceleration);
    let acceleration = acceleration.or(computed).ok_or(NoCurve::NoAcceleration)?;
    let up_to = up_to.unwrap_or((2.0 * acceleration).max(AT_LEAST));
    let problem = layered(stack, found.range.clone());
    let omega = std::f64::consts::TAU * frequency;
    let point = |&wavenumber: &f64| {
        let growth = growth(&problem, &Forcing { omega, acceleration }, wavenumber, cancel)?;
        let neutral = neutral(&problem, omega, wavenumber, up_to, cancel)?;
        Ok(CurvePoint { wavenumber, growth_rate: growth.rate, response: growth.response, neutral })
    };
    let points = wavenumbers.iter().map(point).collect::<Result<_, _>>().map_err(NoCurve::Failure)?;
    Ok(Curve { slab: found.name.clone(), acceleration, frequency, up_to, points })
}

/// 50 standard gravities, m/s².
const AT_LEAST: f64 = 490.3325;
