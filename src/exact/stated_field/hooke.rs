//! Hooke's law for a stated displacement: stress, energy, divergence of the stress.

use crate::exact::solution::State;
use crate::materials::{LinearElastic, SecondGradient};
use crate::mechanics::SymTensor;
use nalgebra::{Matrix3, Vector3};

/// The stress with this pressure in place of its own.
pub(super) fn with_pressure(stress: SymTensor, pressure: f64) -> SymTensor {
    let shift = -pressure - stress.trace() / 3.0;
    SymTensor {
        xx: stress.xx + shift,
        yy: stress.yy + shift,
        zz: stress.zz + shift,
        ..stress
    }
}

/// Hooke's law; at nu = 0.5 with a stated pressure.
pub(super) fn small_state(
    law: &LinearElastic,
    displacement: Vector3<f64>,
    h: Matrix3<f64>,
    pressure: Option<f64>,
) -> State {
    let strain = SymTensor::symmetric_part(&h);
    let trace = strain.trace();
    let twice = 2.0 * law.shear_modulus();
    let own = SymTensor::from_array(strain.to_array().map(|e| twice * e));
    let pressure = pressure.unwrap_or_else(|| -law.e * trace / (3.0 * law.compressibility()));
    let stress = with_pressure(own, pressure);
    let squares: f64 = [strain.xx, strain.yy, strain.zz]
        .map(|e| e - trace / 3.0)
        .iter()
        .map(|e| e * e)
        .sum();
    let shears = strain.xy * strain.xy + strain.yz * strain.yz + strain.zx * strain.zx;
    State {
        displacement,
        displacement_gradient: h,
        stretches: [1.0 + strain.xx, 1.0 + strain.yy, 1.0 + strain.zz],
        stress,
        local_stress: stress,
        pressure,
        volume_ratio: 1.0 + trace,
        energy_density: 0.5 * twice * (squares + 2.0 * shears) - 0.5 * pressure * trace,
    }
}

/// Div sigma: `mu (lap u + grad div u/3) - grad p`, with `-p = K div u` where it is not stated.
pub(super) fn small_divergence(
    law: &LinearElastic,
    second: &SecondGradient,
    pressure_slope: Option<Vector3<f64>>,
) -> Vector3<f64> {
    let mu = law.shear_modulus();
    let laplacian = Vector3::from(second.each_ref().map(Matrix3::trace));
    let spread = Vector3::from_fn(|i, _| (0..3).map(|k| second[k][(k, i)]).sum::<f64>());
    let push = pressure_slope
        .map(|slope| -slope)
        .unwrap_or_else(|| spread * (law.e / (3.0 * law.compressibility())));
    (laplacian + spread / 3.0) * mu + push
}
