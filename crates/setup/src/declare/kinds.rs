//! What a kind of quantity is called in a sentence.

use quantity::Kind;

/// The kind with its article: 'a length'.
pub fn called(kind: Kind) -> &'static str {
    match kind {
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
        Kind::Pressure => "a pressure with `abs` or `gauge`",
        Kind::AbsolutePressure => "an absolute pressure",
        Kind::Stress => "a stress",
        Kind::SteadyAcceleration => "an acceleration",
        Kind::VibrationAcceleration => "an acceleration with `peak`, `rms` or `peak-to-peak`",
        Kind::VibrationVelocity => "a velocity with `peak`, `rms` or `peak-to-peak`",
        Kind::VibrationDisplacement => "a displacement with `peak`, `rms` or `peak-to-peak`",
        Kind::Speed => "a speed",
        Kind::Density => "a density",
        Kind::Viscosity => "a viscosity, dynamic or kinematic by its unit",
        Kind::KinematicViscosity => "a kinematic viscosity",
        Kind::DynamicViscosity => "a dynamic viscosity",
        Kind::SurfaceTension => "a tension",
        Kind::ThermalDiffusivity => "a thermal diffusivity",
        Kind::Angle => "an angle",
        Kind::Ratio => "a ratio",
        Kind::Force => "a force",
        Kind::Moment => "a moment",
        Kind::Stiffness => "a stiffness",
        Kind::Damping => "a damping",
        Kind::TiltDamping => "a damping in tilt",
        Kind::VolumeFlow => "a volume flow",
        Kind::Level => "a level",
        Kind::Wavenumber => "a wavenumber",
    }
}
