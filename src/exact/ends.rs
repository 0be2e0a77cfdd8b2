//! What holds a tube in the axial direction.

/// The axial condition of a tube. In every case the axial stretch is the same in the whole wall.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Ends {
    /// The axial stretch is one.
    PlaneStrain,
    /// The net axial force on the wall, the integral of szz over the deformed wall, is given; tension positive.
    GeneralizedPlaneStrain { axial_force: f64 },
    /// Rigid caps carried by the pressures: the net axial force on the wall is pi (Pi a^2 - Po b^2).
    Closed,
    /// The axial stretch is given.
    FixedStretch { axial_stretch: f64 },
    /// szz = 0 at every point: small strain only.
    PlaneStress,
}

impl Ends {
    /// The words a suite uses, in the order of the variants.
    pub const NAMES: [&'static str; 5] = [
        "plane-strain",
        "generalized-plane-strain",
        "closed",
        "fixed-stretch",
        "plane-stress",
    ];

    /// The word a suite uses.
    pub fn name(&self) -> &'static str {
        match self {
            Self::PlaneStrain => Self::NAMES[0],
            Self::GeneralizedPlaneStrain { .. } => Self::NAMES[1],
            Self::Closed => Self::NAMES[2],
            Self::FixedStretch { .. } => Self::NAMES[3],
            Self::PlaneStress => Self::NAMES[4],
        }
    }
}
