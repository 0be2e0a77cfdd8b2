//! Rotating bodies: field equations, work of the body force, pin holes and thin hoops.

use super::super::field_tests::{Check, number, slopes_of_thickness, steel};
use super::*;
use crate::exact::{Value, build};
use proptest::prelude::*;

const LAW: LinearElastic = LinearElastic { e: 200.0, nu: 0.3 };

fn turning(a: f64, b: f64, law: LinearElastic, ends: Ends) -> Box<dyn ExactSolution> {
    let given = Given::default()
        .number("inner-radius", a)
        .number("outer-radius", b)
        .with("material", steel(law))
        .number("density-speed-squared", 0.02);
    match ends {
        Ends::PlaneStress => build("rotating-disk", given).unwrap(),
        _ => build("rotating-cylinder", given.with("ends", Value::Ends(ends))).unwrap(),
    }
}

fn ends_of(i: usize) -> Ends {
    match i {
        0 => Ends::PlaneStress,
        1 => Ends::PlaneStrain,
        _ => Ends::GeneralizedPlaneStrain { axial_force: 0.4 },
    }
}

proptest! {
    // Red when a coefficient, the sign of the body force or the energy is wrong (tried: lean (1-2nu)/4 in the cylinder).
    #[test]
    fn random_bodies_obey_every_equation(
        bore in -3.0..0.0_f64, nu in -0.9..0.5_f64, ends in 0..3_usize, solid in any::<bool>(), place in 0.0..1.0_f64,
    ) {
        let b = 3.0;
        let a = if solid { 0.0 } else { b * (1.0 - 10f64.powf(bore)).max(0.01) };
        let law = LinearElastic { e: 200.0, nu };
        let body = turning(a, b, law, ends_of(ends));
        let r = a + place * (b - a);
        Check::of(body.as_ref(), law).at(Point::new(-0.6 * r, 0.8 * r, 0.0), 0.01 * (b - a).min(r + 0.01));
        let at = |r: f64| body.at(Point::new(0.0, r, 0.0)).unwrap();
        prop_assert!(at(b).local_stress.xx == 0.0 && (solid || at(a).local_stress.xx == 0.0));
        // twice the energy is the work of the body force and of the axial force
        let rule = GaussRule::of(64);
        let section = |f: &dyn Fn(f64) -> f64| {
            let half = |from: f64, to: f64| rule.integrate(from, to, |r| 2.0 * PI * r * f(r));
            let middle = (a.max(1e-3 * b) * b).sqrt();
            half(a, middle) + half(middle, b)
        };
        let force = if ends == 0 { 0.0 } else { number(body.as_ref(), "axial_force") };
        let work = 0.5 * section(&|r| 0.02 * r * at(r).displacement.y) + 0.5 * force * at(b).displacement_gradient[(2, 2)];
        let energy = number(body.as_ref(), "strain_energy");
        prop_assert!((energy / work - 1.0).abs() < 1e-11, "{energy} {work}");
        let axial = section(&|r| at(r).local_stress.zz);
        prop_assert!((force - axial).abs() < 1e-12 * b * b);
    }
}

// A pin hole doubles the hoop stress of the centre; the solid centre has srr = stt. Red when the hole's term is lost.
#[test]
fn a_pin_hole_doubles_the_stress() {
    for ends in (0..2).map(ends_of) {
        let (solid, holed) = (turning(0.0, 1.0, LAW, ends), turning(1e-5, 1.0, LAW, ends));
        let centre = solid.at(Point::new(0.0, 0.0, 0.0)).unwrap();
        assert_eq!(centre.local_stress.xx, centre.local_stress.yy);
        assert_eq!(centre.displacement.norm(), 0.0);
        let bore = holed
            .at(Point::new(1e-5, 0.0, 0.0))
            .unwrap()
            .local_stress
            .yy;
        assert!((bore / centre.local_stress.yy - 2.0).abs() < 1e-9);
    }
    // textbook: (3 + nu)/8 w B^2 in the solid disk; w B^2 in a thin hoop
    let centre = turning(0.0, 1.0, LAW, Ends::PlaneStress).at(Point::new(0.0, 0.0, 0.0));
    assert!((centre.unwrap().stress.xx - 3.3 / 8.0 * 0.02).abs() < 1e-17);
    let hoop = turning(1.0 - 1e-9, 1.0, LAW, Ends::PlaneStress).at(Point::new(1.0, 0.0, 0.0));
    assert!((hoop.unwrap().local_stress.yy / 0.02 - 1.0).abs() < 2e-9);
}

#[test]
fn the_thickness_strain_has_its_slopes() {
    let disk = turning(1.0, 4.0, LAW, Ends::PlaneStress);
    slopes_of_thickness(disk.as_ref(), Point::new(2.1, -1.4, 2.5));
}

#[test]
fn wrong_bodies_are_refused() {
    let given = Given::default()
        .number("inner-radius", -1.0)
        .number("outer-radius", 2.0)
        .with("material", steel(LAW))
        .number("density-speed-squared", 0.02);
    assert_eq!(
        build("rotating-disk", given.clone()).unwrap_err().parameter,
        "inner-radius"
    );
    let closed = given.with("ends", Value::Ends(Ends::Closed));
    assert_eq!(
        build("rotating-cylinder", closed).unwrap_err().parameter,
        "ends"
    );
    assert!(
        turning(1.0, 2.0, LAW, Ends::PlaneStrain)
            .at(Point::new(0.0, 0.0, 0.0))
            .is_err()
    );
}
