//! Pure bending in plane strain: a block bent to a sector, and a sector straightened to a block. Both hold for every isotropic
//! incompressible law, because each layer is a plane-strain stretch l, 1/l, 1 (Rivlin 1949; Ericksen's families 1 and 2; from
//! memory). The law enters through T(d) = Tt - Tr and W at `d = ln(lt/lr)`, lz = 1, with dW/dd = T/2.

mod bent_block;
mod straightened_sector;

pub use bent_block::BentBlock;
pub use straightened_sector::StraightenedSector;

pub(super) use bent_block::ENTRY as BENT_BLOCK;
pub(super) use straightened_sector::ENTRY as STRAIGHTENED_SECTOR;

use super::demands::last_where;
use super::solution::ErrorBound;
use crate::materials::IncompressibleLaw;
use crate::numerics::running_mean::panels;
use crate::numerics::{CompensatedSum, GaussRule};

/// Gauss points a panel, and for the estimate of their error.
const POINTS: usize = 16;
const CHECK_POINTS: usize = 24;

const SOURCES: &[&str] = &[
    "Rivlin, Proc. R. Soc. A 195 (1949) 463",
    "Ogden, Non-Linear Elastic Deformations (1984), section 5.2",
];

const WHY_ISOTROPIC: &str = "its preferred directions would not lie along the layers";

/// Integral with as many panels as the function needs.
fn integral((from, to): (f64, f64), points: usize, mut f: impl FnMut(f64) -> f64) -> f64 {
    let ends = panels((from, to), &mut f);
    let rule = GaussRule::of(points);
    let mut sum = CompensatedSum::new();
    for panel in ends.windows(2) {
        for (x, weight) in rule.on(panel[0], panel[1]) {
            sum.add(weight * f(x));
        }
    }
    sum.value()
}

/// The largest d up to `wanted` at which the law has a stress.
fn reach(law: &dyn IncompressibleLaw, wanted: f64) -> f64 {
    let holds = |d: f64| {
        let s = law.at(d, 0.0);
        s.hoop.is_finite() && s.energy.is_finite() && s.axial.is_finite()
    };
    match holds(wanted) {
        true => wanted,
        false => last_where(0.0, wanted, holds),
    }
}

/// Round-off of closed forms at the farthest layer, and the quadrature's own estimate for the totals.
fn bound_of(law: &dyn IncompressibleLaw, d: f64, quadrature: f64) -> ErrorBound {
    let round_off = 16.0 * f64::EPSILON;
    let loss = 1.0 + law.hardening(d, 0.0).loss.max(law.hardening(-d, 0.0).loss);
    ErrorBound {
        displacement: round_off,
        stress: round_off * loss,
        totals: round_off * loss + quadrature,
    }
}
