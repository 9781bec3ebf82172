//! Kinds of quantity: what a key expects, independent of the unit it is written in.

use crate::unit::{self, Dimension};

/// What kind of quantity a key holds. The SI unit of each kind is what every number in the resolved setup has.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Kind {
    /// m
    Length,
    /// m²
    Area,
    /// m³
    Volume,
    /// m⁴
    SecondMomentOfArea,
    /// kg
    Mass,
    /// kg m²
    MomentOfInertia,
    /// s
    Time,
    /// Hz, of a vibration
    Frequency,
    /// frames per second, in Hz
    FrameRate,
    /// K (absolute; `°C` has an offset)
    Temperature,
    /// Pa, `abs` or `gauge` must be said
    Pressure,
    /// Pa, only absolute makes sense
    AbsolutePressure,
    /// Pa, of a solid
    Stress,
    /// m/s², steady: gravity (no amplitude word)
    SteadyAcceleration,
    /// m/s², oscillating: peak, rms or peak-to-peak must be said
    VibrationAcceleration,
    /// m/s, oscillating
    VibrationVelocity,
    /// m, oscillating
    VibrationDisplacement,
    /// m/s, bare: a bare rating of acceleration or a plain speed
    Speed,
    /// kg/m³
    Density,
    /// Pa s or m²/s, by unit
    Viscosity,
    /// m²/s
    KinematicViscosity,
    /// Pa s
    DynamicViscosity,
    /// N/m
    SurfaceTension,
    /// m²/s
    ThermalDiffusivity,
    /// rad
    Angle,
    /// 1, as a bare number, `%` or `ppm`
    Ratio,
    /// N
    Force,
    /// N m
    Moment,
    /// N/m
    Stiffness,
    /// kg/s
    Damping,
    /// kg m²/s
    TiltDamping,
    /// m³/s
    VolumeFlow,
    /// dB
    Level,
    /// 1/m
    Wavenumber,
}

/// How the size of an oscillation is stated.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Amplitude {
    /// Half the distance between the extremes (zero to peak).
    Peak,
    /// Root mean square of a sine: peak / √2.
    Rms,
    /// Distance between the extremes: 2 × peak.
    PeakToPeak,
}

/// What a pressure is counted from.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum PressureReference {
    /// From vacuum.
    Absolute,
    /// From the ambient pressure.
    Gauge,
}

impl Amplitude {
    /// Factor that turns a value stated this way into a peak value (of a sine).
    pub fn to_peak(self) -> f64 {
        match self {
            Amplitude::Peak => 1.0,
            Amplitude::Rms => std::f64::consts::SQRT_2,
            Amplitude::PeakToPeak => 0.5,
        }
    }
}

impl Kind {
    /// Every kind.
    pub const ALL: [Kind; 34] = [
        Kind::Length,
        Kind::Area,
        Kind::Volume,
        Kind::SecondMomentOfArea,
        Kind::Mass,
        Kind::MomentOfInertia,
        Kind::Time,
        Kind::Frequency,
        Kind::FrameRate,
        Kind::Temperature,
        Kind::Pressure,
        Kind::AbsolutePressure,
        Kind::Stress,
        Kind::SteadyAcceleration,
        Kind::VibrationAcceleration,
        Kind::VibrationVelocity,
        Kind::VibrationDisplacement,
        Kind::Speed,
        Kind::Density,
        Kind::Viscosity,
        Kind::KinematicViscosity,
        Kind::DynamicViscosity,
        Kind::SurfaceTension,
        Kind::ThermalDiffusivity,
        Kind::Angle,
        Kind::Ratio,
        Kind::Force,
        Kind::Moment,
        Kind::Stiffness,
        Kind::Damping,
        Kind::TiltDamping,
        Kind::VolumeFlow,
        Kind::Level,
        Kind::Wavenumber,
    ];

    /// In a sentence: 'a length', 'an oscillating acceleration'.
    pub fn words(self) -> &'static str {
        match self {
            Kind::Length => "a length",
            Kind::Area => "an area",
            Kind::Volume => "a volume",
            Kind::SecondMomentOfArea => "a second moment of area",
            Kind::Mass => "a mass",
            Kind::MomentOfInertia => "a moment of inertia",
            Kind::Time => "a time",
            Kind::Frequency => "a frequency",
            Kind::FrameRate => "a frame rate",
            Kind::Temperature => "a temperature",
            Kind::Pressure => "a pressure",
            Kind::AbsolutePressure => "an absolute pressure",
            Kind::Stress => "a stress",
            Kind::SteadyAcceleration => "an acceleration",
            Kind::VibrationAcceleration => "an oscillating acceleration",
            Kind::VibrationVelocity => "an oscillating velocity",
            Kind::VibrationDisplacement => "an oscillating displacement",
            Kind::Speed => "a speed",
            Kind::Density => "a density",
            Kind::Viscosity => "a viscosity",
            Kind::KinematicViscosity => "a kinematic viscosity",
            Kind::DynamicViscosity => "a dynamic viscosity",
            Kind::SurfaceTension => "a surface tension",
            Kind::ThermalDiffusivity => "a thermal diffusivity",
            Kind::Angle => "an angle",
            Kind::Ratio => "a ratio",
            Kind::Force => "a force",
            Kind::Moment => "a moment",
            Kind::Stiffness => "a stiffness",
            Kind::Damping => "a damping coefficient",
            Kind::TiltDamping => "a damping coefficient of tilt",
            Kind::VolumeFlow => "a volume flow",
            Kind::Level => "a level",
            Kind::Wavenumber => "a wavenumber",
        }
    }

    /// Whether peak, rms or peak-to-peak must be said.
    pub fn oscillates(self) -> bool {
        matches!(self, Kind::VibrationAcceleration | Kind::VibrationVelocity | Kind::VibrationDisplacement)
    }

    pub(crate) fn is_acceleration(self) -> bool {
        matches!(self, Kind::VibrationAcceleration | Kind::SteadyAcceleration)
    }

    /// The kind that a unit of this dimension makes of it, or `None` when the unit is of another kind.
    pub(crate) fn accepts(self, dimension: Dimension) -> Option<Kind> {
        let wanted = match self {
            Kind::Length | Kind::VibrationDisplacement => unit::LENGTH,
            Kind::Area => unit::AREA,
            Kind::Volume => unit::VOLUME,
            Kind::SecondMomentOfArea => unit::FOURTH,
            Kind::Mass => unit::MASS,
            Kind::MomentOfInertia => unit::INERTIA,
            Kind::Time => unit::TIME,
            Kind::Frequency => unit::PER_TIME,
            Kind::FrameRate if dimension == unit::PER_TIME => unit::PER_TIME,
            Kind::FrameRate => unit::FRAMES,
            Kind::Temperature => unit::TEMPERATURE,
            Kind::Pressure | Kind::AbsolutePressure | Kind::Stress => unit::PRESSURE,
            Kind::SteadyAcceleration | Kind::VibrationAcceleration => unit::ACCELERATION,
            Kind::VibrationVelocity | Kind::Speed => unit::SPEED,
            Kind::Density => unit::DENSITY,
            Kind::Viscosity if dimension == unit::DYNAMIC => return Some(Kind::DynamicViscosity),
            Kind::Viscosity if dimension == unit::KINEMATIC => return Some(Kind::KinematicViscosity),
            Kind::Viscosity => return None,
            Kind::KinematicViscosity | Kind::ThermalDiffusivity => unit::KINEMATIC,
            Kind::DynamicViscosity => unit::DYNAMIC,
            Kind::SurfaceTension | Kind::Stiffness => unit::TENSION,
            Kind::Angle => unit::ANGLE,
            Kind::Ratio => unit::NONE,
            Kind::Force => unit::FORCE,
            Kind::Moment => unit::MOMENT,
            Kind::Damping => unit::DAMPING,
            Kind::TiltDamping => unit::TILT_DAMPING,
            Kind::VolumeFlow => unit::FLOW,
            Kind::Level => unit::LEVEL,
            Kind::Wavenumber => unit::WAVENUMBER,
        };
        (dimension == wanted).then_some(self)
    }

    /// What a unit of this dimension measures, for a sentence.
    pub(crate) fn of(dimension: Dimension) -> Option<&'static str> {
        Some(match dimension {
            unit::LENGTH => "a length",
            unit::AREA => "an area",
            unit::VOLUME => "a volume",
            unit::FOURTH => "a second moment of area",
            unit::MASS => "a mass",
            unit::INERTIA => "a moment of inertia",
            unit::TIME => "a time",
            unit::PER_TIME => "a frequency",
            unit::FRAMES => "a frame rate",
            unit::TEMPERATURE => "a temperature",
            unit::PRESSURE => "a pressure",
            unit::ACCELERATION => "an acceleration",
            unit::SPEED => "a velocity",
            unit::DENSITY => "a density",
            unit::DYNAMIC => "a dynamic viscosity",
            unit::KINEMATIC => "a kinematic viscosity or diffusivity",
            unit::TENSION => "a surface tension or stiffness",
            unit::ANGLE => "an angle",
            unit::NONE => "a ratio",
            unit::FORCE => "a force",
            unit::MOMENT => "a moment",
            unit::FLOW => "a volume flow",
            unit::LEVEL => "a level",
            unit::WAVENUMBER => "a wavenumber",
            _ => return None,
        })
    }
}

/// Units of a kind that people write, the natural one first: for completion and for near misses.
pub fn units(kind: Kind) -> &'static [&'static str] {
    match kind {
        Kind::Length | Kind::VibrationDisplacement => &["mm", "µm", "cm", "m"],
        Kind::Area => &["mm²", "cm²", "m²"],
        Kind::Volume => &["mL", "L", "cm³", "mm³", "m³"],
        Kind::SecondMomentOfArea => &["mm⁴", "cm⁴", "m⁴"],
        Kind::Mass => &["g", "kg", "mg"],
        Kind::MomentOfInertia => &["g mm²", "g cm²", "kg m²"],
        Kind::Time => &["s", "ms", "µs", "min", "h"],
        Kind::Frequency => &["Hz", "kHz", "1/s"],
        Kind::FrameRate => &["fps", "Hz", "kHz"],
        Kind::Temperature => &["°C", "K"],
        Kind::Pressure | Kind::AbsolutePressure => &["kPa", "hPa", "mbar", "bar", "Pa", "psi"],
        Kind::Stress => &["MPa", "GPa", "kPa", "Pa"],
        Kind::SteadyAcceleration => &["m/s²", "g0"],
        Kind::VibrationAcceleration => &["g0", "m/s²"],
        Kind::VibrationVelocity | Kind::Speed => &["m/s", "mm/s"],
        Kind::Density => &["kg/m³", "g/cm³", "g/mL"],
        Kind::Viscosity => &["mm²/s", "mPa s", "cSt", "cP", "Pa s", "m²/s"],
        Kind::KinematicViscosity => &["mm²/s", "cSt", "m²/s"],
        Kind::DynamicViscosity => &["mPa s", "µPa s", "cP", "Pa s"],
        Kind::SurfaceTension => &["mN/m", "N/m"],
        Kind::ThermalDiffusivity => &["mm²/s", "m²/s"],
        Kind::Angle => &["deg", "mrad", "rad"],
        Kind::Ratio => &["%", "ppm", ""],
        Kind::Force => &["N", "kN"],
        Kind::Moment => &["N m", "kN m"],
        Kind::Stiffness => &["N/mm", "kN/m", "N/m"],
        Kind::Damping => &["kg/s", "g/s"],
        Kind::TiltDamping => &["kg m²/s", "g mm²/s"],
        Kind::VolumeFlow => &["mL/s", "mL/min", "L/min", "m³/s"],
        Kind::Level => &["dB"],
        Kind::Wavenumber => &["1/m", "1/mm"],
    }
}

/// The SI unit that values of a kind are in.
pub fn si_unit(kind: Kind) -> &'static str {
    match kind {
        Kind::Length | Kind::VibrationDisplacement => "m",
        Kind::Area => "m²",
        Kind::Volume => "m³",
        Kind::SecondMomentOfArea => "m⁴",
        Kind::Mass => "kg",
        Kind::MomentOfInertia => "kg m²",
        Kind::Time => "s",
        Kind::Frequency | Kind::FrameRate => "Hz",
        Kind::Temperature => "K",
        Kind::Pressure | Kind::AbsolutePressure | Kind::Stress => "Pa",
        Kind::SteadyAcceleration | Kind::VibrationAcceleration => "m/s²",
        Kind::VibrationVelocity | Kind::Speed => "m/s",
        Kind::Density => "kg/m³",
        Kind::Viscosity | Kind::DynamicViscosity => "Pa s",
        Kind::KinematicViscosity | Kind::ThermalDiffusivity => "m²/s",
        Kind::SurfaceTension | Kind::Stiffness => "N/m",
        Kind::Angle => "rad",
        Kind::Ratio => "",
        Kind::Force => "N",
        Kind::Moment => "N m",
        Kind::Damping => "kg/s",
        Kind::TiltDamping => "kg m²/s",
        Kind::VolumeFlow => "m³/s",
        Kind::Level => "dB",
        Kind::Wavenumber => "1/m",
    }
}
