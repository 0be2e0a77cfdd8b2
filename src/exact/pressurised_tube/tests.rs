//! Published numbers, equilibrium, work and refusals of the pressurised tube.

use super::*;
use crate::materials::{MooneyRivlin, NeoHookean};

/// A tube with inner pressure `p`.
pub(super) fn tube(
    radii: (f64, f64),
    ends: Ends,
    material: Material,
    (inner, outer): (f64, f64),
) -> Parameters {
    Parameters {
        inner_radius: radii.0,
        outer_radius: radii.1,
        ends,
        material,
        inner_pressure: inner,
        outer_pressure: outer,
    }
}

fn soft() -> Material {
    Material::incompressible(NeoHookean { mu: 1.0 })
}

fn total(tube: &PressurisedTube, name: &str) -> f64 {
    let found = tube.totals().iter().find(|t| t.name == name).unwrap();
    found.value.clone().unwrap()
}

#[track_caller]
fn near(got: f64, expected: f64, relative: f64) {
    let error = (got / expected - 1.0).abs();
    assert!(error < relative, "{got} is not {expected}: {error:e}");
}

// published.md 2.2, closed neo-Hookean form. Red when a factor of any integral is wrong.
#[test]
fn plane_strain_neo_hookean_is_the_closed_form() {
    for (p, bore, force) in [
        (0.428228409096502, 1.5, 1.968651099788),
        (0.57405357230652, 2.0, 3.318138943506),
    ] {
        let tube =
            PressurisedTube::new(&tube((1.0, 2.0), Ends::PlaneStrain, soft(), (p, 0.0))).unwrap();
        near(total(&tube, "inner_radius"), bore, 1e-13);
        near(total(&tube, "axial_force"), force, 1e-12);
        near(total(&tube, "limit_pressure"), 2.0_f64.ln(), 1e-15);
        let state = tube.at(Point::new(0.0, 1.0, 3.0)).unwrap();
        near(state.displacement.y, bore - 1.0, 1e-13);
        near(-state.local_stress.xx, p, 1e-14);
        if bore == 1.5 {
            near(state.stress.xx, 1.377327146459, 1e-12);
            near(total(&tube, "outer_radius"), 2.29128784748, 1e-11);
        }
    }
}

#[test]
fn axially_stretched_and_oden_tubes_are_as_published() {
    let ends = Ends::FixedStretch { axial_stretch: 1.2 };
    let tube1 =
        PressurisedTube::new(&tube((1.0, 2.0), ends, soft(), (0.404359989535088, 0.0))).unwrap();
    near(total(&tube1, "inner_radius"), 1.5, 1e-13);
    near(total(&tube1, "axial_force"), 6.437883439616, 1e-12);
    // Oden (1972) p. 325, C1 = 80, C2 = 20 psi
    let law = Material::incompressible(MooneyRivlin {
        c10: 80.0,
        c01: 20.0,
    });
    let oden =
        PressurisedTube::new(&tube((7.0, 18.625), Ends::PlaneStrain, law, (150.0, 0.0))).unwrap();
    near(total(&oden, "inner_radius"), 7.0 + 7.181871426, 1e-10);
    near(total(&oden, "outer_radius"), 18.625 + 3.713668316, 1e-10);
    let state = oden.at(Point::new(8.16, 0.0, 0.0)).unwrap();
    near(state.stress.xx, -121.634, 5e-6);
}
