//! Words that the setup file and the physics share, so that neither has to know the other.

/// A fluid the tool has correlations for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum BuiltInFluid {
    /// `water`
    Water,
    /// `glycerol-water`, composition: `mass-fraction` of glycerol
    GlycerolWater,
    /// `ethanol-water`, composition: `mass-fraction` of ethanol
    EthanolWater,
    /// `silicone oil`, composition: `grade` (kinematic viscosity at 25 °C)
    SiliconeOil,
    /// `air` (dry)
    Air,
    /// `nitrogen`
    Nitrogen,
}

/// State of matter of a layer.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Phase {
    /// compressible, a spring
    Gas,
    /// incompressible, a mass
    Liquid,
}

/// An effect that `[model]` can switch off to see what it does.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Effect {
    /// `wall-drag`: oscillating duct flow of each slab along the side walls
    WallDrag,
    /// `gas-heat-loss`: the complex polytropic exponent of a cushion
    GasHeatLoss,
    /// `side-wall-friction`: of the waves in narrow cells
    SideWallFriction,
    /// `gas-layers`: inertia and viscosity of the gas beside a slab
    GasLayers,
    /// `cushion-harmonics`: of the nonlinear gas spring
    CushionHarmonics,
    /// `body-damping`: of floating bodies
    BodyDamping,
}

impl BuiltInFluid {
    /// Every built-in fluid, in the order of the guide.
    pub const ALL: [BuiltInFluid; 6] = [
        BuiltInFluid::Water,
        BuiltInFluid::GlycerolWater,
        BuiltInFluid::EthanolWater,
        BuiltInFluid::SiliconeOil,
        BuiltInFluid::Air,
        BuiltInFluid::Nitrogen,
    ];

    /// The name in the setup file.
    pub fn name(self) -> &'static str {
        match self {
            BuiltInFluid::Water => "water",
            BuiltInFluid::GlycerolWater => "glycerol-water",
            BuiltInFluid::EthanolWater => "ethanol-water",
            BuiltInFluid::SiliconeOil => "silicone oil",
            BuiltInFluid::Air => "air",
            BuiltInFluid::Nitrogen => "nitrogen",
        }
    }

    /// Gas or liquid.
    pub fn phase(self) -> Phase {
        match self {
            BuiltInFluid::Air | BuiltInFluid::Nitrogen => Phase::Gas,
            _ => Phase::Liquid,
        }
    }
}

impl Effect {
    /// Every effect, in the order of the guide.
    pub const ALL: [Effect; 6] = [
        Effect::WallDrag,
        Effect::GasHeatLoss,
        Effect::SideWallFriction,
        Effect::GasLayers,
        Effect::CushionHarmonics,
        Effect::BodyDamping,
    ];

    /// The name in the setup file.
    pub fn name(self) -> &'static str {
        match self {
            Effect::WallDrag => "wall-drag",
            Effect::GasHeatLoss => "gas-heat-loss",
            Effect::SideWallFriction => "side-wall-friction",
            Effect::GasLayers => "gas-layers",
            Effect::CushionHarmonics => "cushion-harmonics",
            Effect::BodyDamping => "body-damping",
        }
    }
}
