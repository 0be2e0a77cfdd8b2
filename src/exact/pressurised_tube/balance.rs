//! What the integrals of the wall must equal: pressures that follow the surface or are dead, and the end condition.
//!
//! ```text
//! live   Pi, Po given                        closed ends F = 0
//! dead   Pi = p0 A/(a lz), Po = q0 B/(b lz)  closed ends N = pi (p0 A^2 - q0 B^2), that is
//!        F = pi [Pi a (A lz - a) - Po b (B lz - b)],  a (A lz - a) = A^2 e^(g-e) expm1((3e-g)/2), alike at b with d(B)
//! ```

use super::equations::Integrals;
use super::problem::{Drive, TubeProblem};
use super::term::Term;
use super::wall::Wall;
use crate::exact::Ends;
use std::f64::consts::PI;

/// Beyond this g the axial equation takes the form whose terms do not grow with the bore.
const WIDE: f64 = 1.5;

/// What fixes the axial stretch.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Axial {
    /// e = ln lz is given.
    Fixed(f64),
    /// Caps carried by the pressures.
    Closed,
    /// N is given.
    Force(f64),
}

/// All that is given but the drive.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Loads {
    pub axial: Axial,
    /// Po, or q0 when dead.
    pub outer: f64,
    pub dead: bool,
}

/// The quantity that is followed along a path and given at its end.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Control {
    /// Pi - Po, or p0 when dead.
    Load,
    /// ln(a/A).
    Stretch,
    /// ln(lz (a/A)^2).
    Volume,
}

impl Control {
    /// The control of a drive and the value it shall reach.
    pub fn of(problem: &TubeProblem) -> (Self, f64) {
        let square = PI * problem.inner_radius * problem.inner_radius;
        match problem.drive {
            Drive::InnerPressure(p) if problem.dead => (Self::Load, p),
            Drive::InnerPressure(p) => (Self::Load, p - problem.outer_pressure),
            Drive::InnerWallStretch(l) => (Self::Stretch, (l - 1.0).ln_1p()),
            Drive::EnclosedVolume(v) => (Self::Volume, ((v - square) / square).ln_1p()),
        }
    }
}

impl Loads {
    pub fn of(problem: &TubeProblem) -> Self {
        let axial = match problem.ends {
            Ends::FixedStretch { axial_stretch } => Axial::Fixed((axial_stretch - 1.0).ln_1p()),
            Ends::Closed => Axial::Closed,
            Ends::GeneralizedPlaneStrain { axial_force } => Axial::Force(axial_force),
            // plane stress is refused before
            Ends::PlaneStrain | Ends::PlaneStress => Axial::Fixed(0.0),
        };
        Self {
            axial,
            outer: problem.outer_pressure,
            dead: problem.dead,
        }
    }

    /// The given share of all loads.
    pub fn times(&self, share: f64) -> Self {
        Self {
            axial: match self.axial {
                Axial::Fixed(e) => Axial::Fixed(share * e),
                Axial::Closed => Axial::Closed,
                Axial::Force(n) => Axial::Force(share * n),
            },
            outer: share * self.outer,
            dead: self.dead,
        }
    }

    /// The true outer pressure.
    pub fn outer_pressure(&self, wall: &Wall, g: f64, e: f64) -> Term {
        if !self.dead {
            return Term::constant(self.outer);
        }
        let half = outer_difference(wall, g) + Term::exact(e, 0.0, 1.0);
        Term::constant(self.outer) * half.times(-0.5).exp()
    }

    /// Pi - Po when the load on the bore (Pi - Po, or p0) is `load`.
    pub fn difference(&self, wall: &Wall, g: f64, e: f64, load: f64) -> Term {
        if !self.dead {
            return Term::constant(load);
        }
        let half = Term::exact(0.5 * (g + e), 0.5, 0.5);
        Term::constant(load) * half.times(-1.0).exp() - self.outer_pressure(wall, g, e)
    }

    /// The load on the bore (Pi - Po, or p0) when Pi - Po is `difference`.
    pub fn load(&self, wall: &Wall, g: f64, e: f64, difference: Term) -> Term {
        if !self.dead {
            return difference;
        }
        let inner = difference + self.outer_pressure(wall, g, e);
        inner * Term::exact(0.5 * (g + e), 0.5, 0.5).exp()
    }

    /// The inner pressure as it is given, from the load on the bore.
    pub fn stated(&self, load: f64) -> f64 {
        if self.dead { load } else { load + self.outer }
    }

    /// The value of a control, where the wall's own pressure is `difference`.
    pub fn control(&self, what: Control, wall: &Wall, g: f64, e: f64, difference: Term) -> Term {
        let kinematic = |by_g: f64, by_e: f64| Term {
            size: (by_g * g).abs() + (by_e * e).abs(),
            ..Term::exact(by_g * g + by_e * e, by_g, by_e)
        };
        match what {
            Control::Load => self.load(wall, g, e, difference),
            Control::Stretch => kinematic(0.5, -0.5),
            Control::Volume => kinematic(1.0, 0.0),
        }
    }

    /// Left side minus right side of the end condition, with `difference` = Pi - Po.
    pub fn axial_residual(
        &self,
        wall: &Wall,
        (g, e): (f64, f64),
        difference: Term,
        all: &Integrals,
    ) -> Term {
        if let Axial::Fixed(fixed) = self.axial {
            return Term::exact(e - fixed, 0.0, 1.0);
        }
        if self.axial == Axial::Closed && !self.dead {
            return all.reduced_force;
        }
        let outer = self.outer_pressure(wall, g, e);
        let inner = difference + outer;
        let bore = PI * wall.inner * wall.inner;
        let rim = PI * wall.outer * wall.outer;
        // on the ring of the wall's end face, and on the bore
        let ring = outer
            * Term::exact(-e, 0.0, -1.0)
                .exp()
                .times(PI * wall.area_factor());
        let open = Term::exact(g - e, 1.0, -1.0).exp().times(bore);
        match self.axial {
            Axial::Force(given) => {
                let net = if g > WIDE {
                    all.wall_force
                } else {
                    all.reduced_force + difference * open
                };
                net - ring - Term::constant(given)
            }
            _ if g > WIDE => {
                let half = |d: Term| (d + Term::exact(e, 0.0, 1.0)).times(0.5).exp();
                let caps = inner * half(Term::exact(g, 1.0, 0.0)).times(bore)
                    - outer * half(outer_difference(wall, g)).times(rim);
                all.wall_force - ring - caps
            }
            _ => {
                // the cap's share beyond that of a pressure that follows
                let excess = |d: Term| {
                    let area = (d - Term::exact(e, 0.0, 1.0)).exp();
                    area * (Term::exact(3.0 * e, 0.0, 3.0) - d).times(0.5).exp_m1()
                };
                let caps = inner * excess(Term::exact(g, 1.0, 0.0)).times(bore)
                    - outer * excess(outer_difference(wall, g)).times(rim);
                all.reduced_force - caps
            }
        }
    }
}

/// d(B) with its slope.
fn outer_difference(wall: &Wall, g: f64) -> Term {
    Term::exact(
        wall.outer_difference(g),
        wall.outer_difference_slope(g),
        0.0,
    )
}
