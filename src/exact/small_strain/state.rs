//! A full state from displacement, displacement gradient and stress; squares without loss near a wall.

use crate::exact::given::refuse;
use crate::exact::solution::{Refusal, State};
use crate::materials::LinearElastic;
use crate::mechanics::{Point, SymTensor};
use crate::numerics::CompensatedSum;
use nalgebra::{Matrix3, Vector3};

/// What a state is completed from.
#[derive(Debug, Clone, Copy)]
pub(super) struct Field {
    pub(super) displacement: Vector3<f64>,
    /// du_i/dX_j.
    pub(super) gradient: Matrix3<f64>,
    /// Normal strains along the solution's own axes.
    pub(super) strains: [f64; 3],
    pub(super) stress: SymTensor,
    pub(super) local_stress: SymTensor,
    /// Strain of a free expansion in every direction.
    pub(super) heat: f64,
}

impl Field {
    /// The state; refused where a number left the range of doubles.
    pub(super) fn complete(self, law: &LinearElastic) -> Result<State, Refusal> {
        let trace = self.local_stress.trace();
        let state = State {
            displacement: self.displacement,
            displacement_gradient: self.gradient,
            stretches: self.strains.map(|strain| 1.0 + strain),
            stress: self.stress,
            local_stress: self.local_stress,
            pressure: -trace / 3.0,
            volume_ratio: 1.0 + 3.0 * self.heat + law.compressibility() * trace / law.e,
            energy_density: energy_density(law, &self.local_stress),
        };
        let numbers = state.displacement.iter().chain(self.gradient.iter());
        if numbers.into_iter().all(|v| v.is_finite())
            && state.stress.is_finite()
            && state.energy_density.is_finite()
        {
            return Ok(state);
        }
        let message = "the solution has no finite value at this point";
        Err(refuse("", message.to_string(), ""))
    }
}

/// `W = (1+nu)/(2E) dev:dev + (1-2nu)/(6E) tr^2`: a sum of squares, so that nothing cancels.
pub(super) fn energy_density(law: &LinearElastic, s: &SymTensor) -> f64 {
    let apart = (s.xx - s.yy).powi(2) + (s.yy - s.zz).powi(2) + (s.zz - s.xx).powi(2);
    let shears = s.xy * s.xy + s.yz * s.yz + s.zx * s.zx;
    (0.5 * (1.0 + law.nu) * (apart / 3.0 + 2.0 * shears)
        + law.compressibility() * s.trace().powi(2) / 6.0)
        / law.e
}

/// Normal strains and stresses along radius, hoop and axis of a field that depends on the radius alone.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Radial {
    pub(super) strains: [f64; 3],
    pub(super) stress: [f64; 3],
    /// d(axial strain)/dR, not zero in plane stress only.
    pub(super) axial_slope: f64,
    pub(super) heat: f64,
}

impl Radial {
    pub(super) fn state(self, point: Point, law: &LinearElastic) -> Result<State, Refusal> {
        let [radial, hoop, axial] = self.strains;
        let (c, s) = point.direction();
        let mut gradient = SymTensor::diagonal(radial, hoop, axial)
            .cylindrical_to_cartesian((c, s))
            .to_matrix();
        gradient[(2, 0)] = point.z * self.axial_slope * c;
        gradient[(2, 1)] = point.z * self.axial_slope * s;
        let [srr, stt, szz] = self.stress;
        let local_stress = SymTensor::diagonal(srr, stt, szz);
        Field {
            displacement: Vector3::new(point.x * hoop, point.y * hoop, point.z * axial),
            gradient,
            strains: self.strains,
            stress: local_stress.cylindrical_to_cartesian((c, s)),
            local_stress,
            heat: self.heat,
        }
        .complete(law)
    }
}

/// `R^2 - radius^2` of a point to its last digit: in a thin wall the radius alone would give the place in the wall only
/// `16 - log10(R/thickness)` digits. `spherical` adds Z^2.
pub(super) fn beyond(point: Point, radius: f64, spherical: bool) -> f64 {
    let z = if spherical { point.z } else { 0.0 };
    let mut sum = CompensatedSum::new();
    let mut add = |v: f64, sign: f64| {
        let square = v * v;
        sum.add(sign * square);
        sum.add(sign * v.mul_add(v, -square));
    };
    add(radius, -1.0);
    for v in [point.x, point.y, z] {
        add(v, 1.0);
    }
    sum.value()
}
