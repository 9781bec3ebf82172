//! The ranges that more than one key shares. They are generous: what lies outside is a slip of the unit or of the
//! finger, not a design. They are also finite, so that no hostile value ever reaches the physics.

use super::key::Bounds;

/// The reason that most ranges share.
pub const SLIP: &str = "outside it the unit or the number is a slip, and every result would rest on it";

/// Thickness of a layer, m.
pub const LAYER_THICKNESS: Bounds = Bounds::from(1e-6, 10.0, "1 µm to 10 m", SLIP);
/// Inner sizes of a cell, m.
pub const CELL_SIZE: Bounds = Bounds::from(1e-4, 10.0, "0.1 mm to 10 m", SLIP);
/// Any other length that cannot be zero, m.
pub const LENGTH: Bounds = Bounds::above(0.0, 100.0, "more than 0 and at most 100 m", SLIP);
/// A length that may be zero or point the other way, m.
pub const SIGNED_LENGTH: Bounds = Bounds::from(-100.0, 100.0, "−100 m to 100 m", SLIP);
/// m²
pub const AREA: Bounds = Bounds::above(0.0, 1e4, "more than 0 and at most 10 000 m²", SLIP);
/// m⁴
pub const SECOND_MOMENT: Bounds = Bounds::above(0.0, 1e8, "more than 0 and at most 1e8 m⁴", SLIP);
/// m³
pub const VOLUME: Bounds = Bounds::from(1e-12, 1e3, "1e-6 mL to 1000 m³", SLIP);
/// m³, may be zero
pub const DEAD_VOLUME: Bounds = Bounds::from(0.0, 1.0, "0 to 1000 L", SLIP);
/// kg
pub const MASS: Bounds = Bounds::above(0.0, 1e6, "more than 0 and at most 1000 t", SLIP);
/// kg m²
pub const INERTIA: Bounds = Bounds::above(0.0, 1e6, "more than 0 and at most 1e6 kg m²", SLIP);
/// s
pub const TIME: Bounds = Bounds::from(0.0, 3.2e7, "0 to one year", SLIP);
/// Drive frequency, Hz.
pub const FREQUENCY: Bounds = Bounds::from(0.1, 1e5, "0.1 Hz to 100 kHz", SLIP);
/// Frames per second.
pub const FRAME_RATE: Bounds = Bounds::from(1e-3, 1e7, "0.001 fps to 10 000 000 fps", SLIP);
/// Temperature of a liquid or gas at work, K.
pub const TEMPERATURE: Bounds = Bounds::from(
    200.0,
    600.0,
    "−73.15 °C to 326.85 °C",
    "no liquid of this trade is worked with outside it; material figures would be invented",
);
/// Absolute pressure, Pa.
pub const PRESSURE: Bounds =
    Bounds::from(100.0, 1e8, "1 mbar to 1000 bar absolute", "a cushion needs a gas that behaves as one");
/// Ambient pressure, Pa.
pub const AMBIENT_PRESSURE: Bounds =
    Bounds::from(100.0, 1e7, "1 mbar to 100 bar absolute", "the cushions spring against it");
/// Pressure of a supply or a setting, Pa absolute.
pub const SUPPLY_PRESSURE: Bounds = Bounds::from(0.0, 1e9, "0 to 10 000 bar absolute", SLIP);
/// Vapour pressure, Pa.
pub const VAPOUR_PRESSURE: Bounds = Bounds::from(0.0, 1e8, "0 to 1000 bar", SLIP);
/// Stress or elastic modulus, Pa.
pub const STRESS: Bounds = Bounds::above(0.0, 1e13, "more than 0 and at most 10 000 GPa", SLIP);
/// Gravity, m/s².
pub const GRAVITY: Bounds =
    Bounds::from(1e-3, 1e3, "0.001 m/s² to 1000 m/s²", "without weight nothing is to be held");
/// Drive acceleration, m/s² peak.
pub const DRIVE_ACCELERATION: Bounds = Bounds::from(0.0, 1e6, "0 to 1e6 m/s² peak", SLIP);
/// Drive velocity, m/s peak.
pub const DRIVE_VELOCITY: Bounds = Bounds::from(0.0, 1e3, "0 to 1000 m/s peak", SLIP);
/// Drive displacement, m peak.
pub const DRIVE_DISPLACEMENT: Bounds = Bounds::from(0.0, 10.0, "0 to 10 m peak", SLIP);
/// Density of a liquid or gas, kg/m³.
pub const DENSITY: Bounds = Bounds::from(1e-3, 3e4, "0.001 kg/m³ to 30 000 kg/m³", SLIP);
/// Dynamic viscosity, Pa s; a kinematic one is compared as if the liquid had 1000 kg/m³.
pub const VISCOSITY: Bounds = Bounds::from(1e-7, 1e6, "1e-7 Pa s to 1e6 Pa s", SLIP);
/// Kinematic viscosity, m²/s.
pub const KINEMATIC: Bounds = Bounds::from(1e-8, 1e3, "0.01 mm²/s to 1e9 mm²/s", SLIP);
/// Kinematic viscosity grade of a silicone oil, m²/s.
pub const GRADE: Bounds =
    Bounds::from(6.5e-7, 1.0, "0.65 mm²/s to 1 000 000 mm²/s", "makers sell no silicone oil outside it");
/// Surface or interfacial tension, N/m.
pub const TENSION: Bounds = Bounds::from(0.0, 5.0, "0 to 5 N/m", SLIP);
/// m²/s
pub const DIFFUSIVITY: Bounds = Bounds::above(0.0, 1.0, "more than 0 and at most 1 m²/s", SLIP);
/// A share of a whole.
pub const SHARE: Bounds = Bounds::from(0.0, 1.0, "0 to 100 %", "it is a share of a whole");
/// A margin that may be asked for.
pub const MARGIN: Bounds = Bounds::from(0.0, 10.0, "0 to 1000 %", "a negative margin asks for a failure");
/// A ratio that may exceed one.
pub const RATIO: Bounds = Bounds::from(0.0, 100.0, "0 to 100", SLIP);
/// 5/3 of a monatomic gas as data sheets round it, 1.667 or 1.67.
const MONATOMIC: f64 = 1.67;
/// Ratio of specific heats.
pub const ADIABATIC_INDEX: Bounds =
    Bounds::above(1.0, MONATOMIC, "more than 1 and at most 5/3 (1.67)", "no ideal gas has another");
/// Polytropic exponent.
pub const POLYTROPIC: Bounds =
    Bounds::from(1.0, MONATOMIC, "1 (isothermal) to 5/3 (adiabatic, monatomic)", "no gas spring is outside");
/// Poisson's ratio of a solid.
pub const POISSON: Bounds =
    Bounds::from(0.0, 0.5, "0 to 0.5", "no isotropic plastic, glass or metal is outside");
/// rad
pub const ANGLE: Bounds = Bounds::from(-6.3, 6.3, "−360 deg to 360 deg", SLIP);
/// Level error, rad.
pub const TILT: Bounds =
    Bounds::from(-0.79, 0.79, "−45 deg to 45 deg", "a cell that leans further holds no level layer");
/// Sideways over vertical acceleration, 1.
pub const CROSS_AXIS: Bounds =
    Bounds::from(0.0, 1.0, "0 to 100 %", "a table that moves more sideways than up is no vertical drive");
/// N
pub const FORCE: Bounds = Bounds::from(0.0, 1e9, "0 to 1e9 N", SLIP);
/// N m
pub const MOMENT: Bounds = Bounds::from(0.0, 1e9, "0 to 1e9 N m", SLIP);
/// N/m
pub const STIFFNESS: Bounds = Bounds::from(0.0, 1e12, "0 to 1e12 N/m", SLIP);
/// kg/s
pub const DAMPING: Bounds = Bounds::from(0.0, 1e9, "0 to 1e9 kg/s", SLIP);
/// kg m²/s
pub const TILT_DAMPING: Bounds = Bounds::from(0.0, 1e9, "0 to 1e9 kg m²/s", SLIP);
/// m³/s
pub const FLOW: Bounds = Bounds::from(0.0, 10.0, "0 to 10 m³/s", SLIP);
/// dB
pub const LEVEL: Bounds = Bounds::from(0.0, 200.0, "0 to 200 dB", SLIP);
/// m/s
pub const SPEED: Bounds = Bounds::above(0.0, 1e5, "more than 0 and at most 100 km/s", SLIP);
/// Altitude, m.
pub const ALTITUDE: Bounds = Bounds::from(
    -1000.0,
    11000.0,
    "−1000 m to 11 000 m",
    "the standard atmosphere has this temperature gradient in its lowest layer only",
);
/// Ratings of a vibration table are compared as peak, m/s².
pub const ANY_ACCELERATION: Bounds = Bounds::from(0.0, 1e7, "0 to 1e7 m/s² peak", SLIP);
