//! Shrink fits: the interface closes, the balance of work, and what comes apart.

use super::super::field_tests::{Check, number};
use super::*;
use crate::exact::{Value, build};
use crate::materials::Material;
use proptest::prelude::*;

const SOFT: LinearElastic = LinearElastic { e: 90.0, nu: 0.34 };
const HARD: LinearElastic = LinearElastic { e: 210.0, nu: 0.28 };

fn given(radii: [f64; 3], interference: f64, laws: [LinearElastic; 2], ends: Ends) -> Given {
    let materials = laws.map(Material::LinearElastic).to_vec();
    Given::default()
        .with("radii", Value::Numbers(radii.to_vec()))
        .number("radial-interference", interference)
        .with("materials", Value::Materials(materials))
        .with("ends", Value::Ends(ends))
}

fn ends_of(i: usize) -> Ends {
    match i {
        0 => Ends::PlaneStrain,
        1 => Ends::Closed,
        2 => Ends::PlaneStress,
        _ => Ends::GeneralizedPlaneStrain { axial_force: 0.7 },
    }
}

proptest! {
    // Red when the interface does not close or a coefficient of the system is wrong (tried: al1 -> be1 in k1; sign of apart).
    #[test]
    fn random_fits_close_and_balance(
        liner in -3.0..0.5_f64, jacket in -3.0..0.5_f64, ends in 0..4_usize, pi in 0.0..0.5_f64, po in 0.0..0.5_f64,
    ) {
        let a = 2.0;
        let c = a * (1.0 + 10f64.powf(liner));
        let b = c * (1.0 + 10f64.powf(jacket));
        let interference = 0.02 * c;
        let given = given([a, c, b], interference, [SOFT, HARD], ends_of(ends))
            .number("inner-pressure", pi).number("outer-pressure", po);
        let fit = build("shrink-fit-tube", given).unwrap();
        let at = |r: f64| fit.at(Point::new(0.0, r, 0.0)).unwrap();
        let (inside, outside) = (at(c), at(c * (1.0 + 4e-16)));
        let size = inside.local_stress.yy.abs().max(outside.local_stress.yy.abs());
        let jump = outside.displacement.y - inside.displacement.y;
        prop_assert!((jump - interference).abs() < 3e-14 * c * (1e-2 + size / SOFT.e), "{jump}");
        prop_assert!((inside.local_stress.xx - outside.local_stress.xx).abs() < 1e-13 * size);
        prop_assert!((number(fit.as_ref(), "contact_pressure") + inside.local_stress.xx).abs() < 1e-14 * size);
        prop_assert!((at(a).local_stress.xx + pi).abs() < 1e-14 && (at(b).local_stress.xx + po).abs() < 1e-14);
        for (lower, upper, law) in [(a, c, SOFT), (c, b, HARD)] {
            let r = 0.5 * (lower + upper);
            Check::of(fit.as_ref(), law).at(Point::new(0.6 * r, -0.8 * r, 0.0), 0.02 * (upper - lower));
        }
        // what the loads do and what closing the interference stores
        let ez = inside.displacement_gradient[(2, 2)];
        let (force, contact) = (number(fit.as_ref(), "axial_force"), number(fit.as_ref(), "contact_pressure"));
        let work = PI * (pi * a * at(a).displacement.y - po * b * at(b).displacement.y + contact * c * interference)
            + if ends == 2 { 0.0 } else { 0.5 * force * ez };
        let energy = number(fit.as_ref(), "strain_energy");
        prop_assert!((energy - work).abs() < 1e-12 * (size * size / SOFT.e * b * b), "{energy} {work}");
    }
}

#[test]
fn one_metal_without_interference_is_the_lame_tube() {
    for ends in (0..4).map(ends_of) {
        let fit = given([2.0, 3.0, 5.0], 0.0, [HARD, HARD], ends).number("inner-pressure", 0.3);
        let fit = build("shrink-fit-tube", fit).unwrap();
        let tube = Given::default()
            .number("inner-radius", 2.0)
            .number("outer-radius", 5.0)
            .with("ends", Value::Ends(ends))
            .with("material", super::super::field_tests::steel(HARD))
            .number("inner-pressure", 0.3);
        let tube = build("lame-tube", tube).unwrap();
        for r in [2.0, 2.5, 3.0, 4.0, 5.0] {
            let point = Point::new(0.6 * r, 0.8 * r, 1.0);
            let (x, y) = (fit.at(point).unwrap(), tube.at(point).unwrap());
            assert!((x.displacement - y.displacement).norm() < 1e-16);
            let off = x.stress.to_matrix() - y.stress.to_matrix();
            assert!(off.abs().max() < 1e-15, "{ends:?} {r} {off}");
        }
    }
}

#[test]
fn rings_that_come_apart_are_refused_with_the_interference_that_holds() {
    let loose = |d: f64| {
        let given = given([2.0, 3.0, 5.0], d, [HARD, SOFT], Ends::PlaneStrain);
        build("shrink-fit-tube", given.number("inner-pressure", -0.5))
    };
    let refusal = loose(1e-4).unwrap_err();
    assert!(refusal.message.contains("come apart"));
    let needed: f64 = refusal
        .hint
        .split_whitespace()
        .rev()
        .nth(1)
        .unwrap()
        .parse()
        .unwrap();
    assert!(loose(needed * 1.00001).is_ok() && loose(needed * 0.9999).is_err());
    let gap = given([2.0, 3.0, 5.0], -0.1, [HARD, SOFT], Ends::PlaneStrain);
    assert!(
        build("shrink-fit-tube", gap)
            .unwrap_err()
            .message
            .contains("gap")
    );
    let fixed = Ends::FixedStretch { axial_stretch: 1.1 };
    let refusal = build(
        "shrink-fit-tube",
        given([2.0, 3.0, 5.0], 0.1, [HARD, SOFT], fixed),
    );
    assert_eq!(refusal.unwrap_err().parameter, "ends");
}
