//! Kinds of quantity: what a key expects, independent of the unit it is written in.

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
