//! Checks every small-strain field is held to at a point, from finite differences of its own answers.

use crate::exact::{ExactSolution, Value};
use crate::materials::{ElasticPlastic, LinearElastic, Material};
use crate::mechanics::{Point, SymTensor};
use nalgebra::{Matrix3, Vector3};

pub fn steel(law: LinearElastic) -> Value {
    Value::Material(Material::LinearElastic(law))
}

pub fn yielding(e: f64, nu: f64, yield_stress: f64) -> Value {
    Value::Material(Material::ElasticPlastic(ElasticPlastic {
        elastic: LinearElastic { e, nu },
        yield_stress,
    }))
}

/// A total that must be there.
pub fn number(solution: &dyn ExactSolution, name: &str) -> f64 {
    let found = solution.totals().iter().find(|t| t.name == name);
    found
        .unwrap_or_else(|| panic!("no total {name}"))
        .value
        .clone()
        .unwrap()
}

/// Hooke's law, energy, compatibility and equilibrium at a point.
pub struct Check<'a> {
    solution: &'a dyn ExactSolution,
    law: LinearElastic,
    /// Plastic strain or none: Hooke's law is left out where it does not hold.
    elastic: bool,
}

impl<'a> Check<'a> {
    pub fn of(solution: &'a dyn ExactSolution, law: LinearElastic) -> Self {
        Self {
            solution,
            law,
            elastic: true,
        }
    }

    pub fn plastic(self) -> Self {
        Self {
            elastic: false,
            ..self
        }
    }

    /// All of them; `h` is the step of the differences.
    pub fn at(&self, point: Point, h: f64) {
        let state = self.solution.at(point).unwrap();
        let near: Vec<_> = neighbours(point, h)
            .iter()
            .map(|p| self.solution.at(*p).unwrap())
            .collect();
        let size = near
            .iter()
            .chain([&state])
            .flat_map(|s| s.stress.to_array())
            .fold(f64::MIN_POSITIVE, |m, s| m.max(s.abs()));
        let strain_size = near
            .iter()
            .chain([&state])
            .flat_map(|s| s.displacement_gradient.iter().copied().collect::<Vec<_>>())
            .fold(size / self.law.e, |m, s| m.max(s.abs()));
        self.hooke(&state, strain_size);
        // local axes hold the same stress
        let (local, stress) = (state.local_stress, state.stress);
        assert!((local.trace() - stress.trace()).abs() <= 1e-14 * size);
        assert!((local.to_matrix().norm() - stress.to_matrix().norm()).abs() <= 1e-14 * size);
        assert!((state.pressure + stress.trace() / 3.0).abs() <= 1e-14 * size);
        // displacement and its gradient
        let mut gradient = Matrix3::zeros();
        let mut divergence = Vector3::zeros();
        for j in 0..3 {
            let derivative = |f: &dyn Fn(usize) -> Vector3<f64>| {
                (8.0 * (f(4 * j + 1) - f(4 * j + 2)) - (f(4 * j) - f(4 * j + 3))) / (12.0 * h)
            };
            gradient.set_column(j, &derivative(&|i| near[i].displacement));
            divergence += derivative(&|i| near[i].stress.to_matrix().column(j).into_owned());
        }
        let off = (gradient - state.displacement_gradient).abs().max();
        let reach = state.displacement.abs().max() / h;
        assert!(
            off <= 2e-5 * strain_size + 1e-14 * reach,
            "gradient off by {off:e} of {strain_size:e} at {point:?}"
        );
        let force = self.solution.body_force(point).unwrap();
        let off = (divergence + force).abs().max() * h;
        assert!(
            off <= 2e-5 * size,
            "equilibrium off by {off:e} of {size:e} at {point:?}"
        );
    }

    fn hooke(&self, state: &crate::exact::State, size: f64) {
        let strain = SymTensor::symmetric_part(&state.displacement_gradient).to_matrix();
        let trace = state.stress.trace();
        let elastic = (state.stress.to_matrix() * (1.0 + self.law.nu)
            - Matrix3::identity() * self.law.nu * trace)
            / self.law.e;
        let volume = state.volume_ratio - 1.0 - strain.trace();
        assert!(volume.abs() < 1e-14 * (1.0 + size), "J off by {volume:e}");
        if self.elastic {
            // what is left is a free expansion, the same in all directions
            let heat = (strain.trace() - elastic.trace()) / 3.0;
            let off = (strain - elastic - Matrix3::identity() * heat).abs().max();
            assert!(off <= 2e-14 * size, "Hooke off by {off:e} of {size:e}");
        }
        let energy = 0.5 * state.stress.to_matrix().dot(&elastic);
        let most = 0.5 * state.stress.to_matrix().norm_squared() / self.law.e;
        let off = (energy - state.energy_density).abs();
        assert!(off <= 1e-13 * most, "W off by {off:e} of {most:e}");
    }
}

/// Off the middle plane of plane stress uz = ezz Z has slopes of its own: the third row of the gradient.
pub fn slopes_of_thickness(solution: &dyn ExactSolution, point: Point) {
    let h = 1e-4 * point.radius();
    let uz = |x: f64, y: f64| {
        let near = Point::new(point.x + x, point.y + y, point.z);
        solution.at(near).unwrap().displacement.z
    };
    let gradient = solution.at(point).unwrap().displacement_gradient;
    let found = [
        (uz(h, 0.0) - uz(-h, 0.0)) / (2.0 * h),
        (uz(0.0, h) - uz(0.0, -h)) / (2.0 * h),
    ];
    let size = gradient.abs().max();
    for (i, slope) in found.into_iter().enumerate() {
        let off = (slope - gradient[(2, i)]).abs();
        assert!(off < 1e-6 * size, "{slope:e} {gradient}");
        assert!(
            slope.abs() > 1e-3 * size,
            "nothing to see: {slope:e} {gradient}"
        );
    }
}

/// Two points on each side along each axis, far, near, near, far; order +2h, +h, -h, -2h.
fn neighbours(point: Point, h: f64) -> Vec<Point> {
    let mut all = Vec::new();
    for j in 0..3 {
        for step in [2.0, 1.0, -1.0, -2.0] {
            let mut at = point.to_array();
            at[j] += step * h;
            all.push(Point::new(at[0], at[1], at[2]));
        }
    }
    all
}
