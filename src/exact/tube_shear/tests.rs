//! Closed forms, equilibrium, work and refusals of the sheared tubes.

use super::*;
use crate::exact::given::Value;
use crate::exact::laws_tests;
use crate::materials::{Demiray, Material, MooneyRivlin, NeoHookean};
use std::f64::consts::PI;

fn tube(
    way: Way,
    radii: (f64, f64),
    material: Material,
    motion: f64,
) -> Result<TubeShear, Refusal> {
    let given = Given::default()
        .number("inner-radius", radii.0)
        .number("outer-radius", radii.1)
        .with("material", Value::Material(material))
        .number(way.motion(), motion);
    TubeShear::new(&given, way)
}

fn law(i: usize) -> Material {
    match i {
        0 => Material::incompressible(NeoHookean { mu: 1.0 }),
        1 => Material::incompressible(MooneyRivlin { c10: 0.3, c01: 0.2 }),
        2 => laws_tests::yeoh(),
        4 => laws_tests::locking(),
        _ => Material::incompressible(Demiray { c: 1.0, b: 0.5 }),
    }
}

fn total(tube: &TubeShear, i: usize) -> f64 {
    tube.totals()[i].value.clone().unwrap()
}

#[track_caller]
fn near(got: f64, expected: f64, relative: f64) {
    let error = (got / expected - 1.0).abs();
    assert!(error < relative, "{got} is not {expected}: {error:e}");
}

// Constant modulus mu = 1: C = 2 phi A^2 B^2/((B-A)(B+A)), srr(A) = -C^2 (A^-4 - B^-4)/4; axial C = w/ln(B/A), for Mooney-Rivlin
// srr(A) = -(2 c01) C^2 (A^-2 - B^-2)/2. Red when a power or a factor is wrong.
#[test]
fn constant_moduli_are_the_closed_forms() {
    for (a, b) in [(1.0, 2.0), (1.0, 1.0001), (0.5, 50.0)] {
        for motion in [1e-9, 0.7, -2.0] {
            let squares = (b - a) * (b + a);
            let motion = motion * f64::min(b - a, 1.0);
            let turned = tube(Way::Azimuthal, (a, b), law(1), motion).unwrap();
            let c = 2.0 * motion * a * a * b * b / squares;
            near(total(&turned, 0), 2.0 * PI * c, 4e-15);
            near(total(&turned, 1), PI * c * motion, 4e-15);
            let inner = turned.at(Point::new(0.0, a, 0.0)).unwrap();
            near(
                inner.local_stress.xx,
                -c * c * squares * (a * a + b * b) / (4.0 * (a * b).powi(4)),
                1e-14,
            );
            let outer = turned.at(Point::new(0.0, b, 0.0)).unwrap();
            near(outer.displacement.x, -b * motion.sin(), 4e-15);
            assert_eq!(outer.local_stress.xx, 0.0);
            let moved = tube(Way::Axial, (a, b), law(1), motion).unwrap();
            let c = motion / ((b - a) / a).ln_1p();
            near(total(&moved, 0), 2.0 * PI * c, 4e-15);
            let inner = moved.at(Point::new(0.0, a, 0.0)).unwrap();
            near(
                inner.local_stress.xx,
                -0.2 * c * c * squares / (a * b).powi(2),
                1e-13,
            );
            near(
                moved.at(Point::new(b, 0.0, 1.0)).unwrap().displacement.z,
                motion,
                4e-15,
            );
            assert!(moved.bound().stress < 1e-13 && turned.bound().totals < 1e-13);
        }
        let rest = tube(Way::Axial, (a, b), law(3), 0.0).unwrap();
        assert_eq!(
            rest.at(Point::new(a, 0.0, 0.0)).unwrap().local_stress.xx,
            0.0
        );
    }
}

proptest::proptest! {
    // Equilibrium along and across the motion, gradient of the displacement, dE/dmotion = load, and the mirror image.
    // Red when one is wrong anywhere (tried: `third` and `along` exchanged for the axial tube).
    #[test]
    fn random_tubes_are_in_equilibrium(
        log_thickness in -3.0..1.0_f64, which in 0..5_usize, turned in proptest::bool::ANY, amount in 0.01..1.5_f64, place in 0.1..0.9_f64,
        sign in proptest::bool::ANY,
    ) {
        let b = 1.0 + 10f64.powf(log_thickness);
        let way = if turned { Way::Azimuthal } else { Way::Axial };
        let motion = amount * if turned { 0.5 * (1.0 - 1.0 / (b * b)) } else { b.ln() } * if sign { 1.0 } else { -1.0 };
        let found = tube(way, (1.0, b), law(which), motion).unwrap();
        let r = 1.0 + place * (b - 1.0);
        let h = 1e-4 * (b - 1.0).min(1.0) * place.min(1.0 - place);
        let at = |r: f64| found.at(Point::new(0.8 * r, -0.6 * r, 0.3)).unwrap();
        let (state, up, down) = (at(r), at(r + h), at(r - h));
        let s = state.local_stress;
        let largest = found.wall.at(1.0).unwrap().0;
        let largest = largest.shear.abs() + largest.along.abs() + largest.third.abs();
        let change = (up.local_stress.xx - down.local_stress.xx) / (2.0 * h);
        proptest::prop_assert!((change - (s.yy - s.xx) / r).abs() < 1e-6 * largest);
        let shear = |s: &State| if turned { s.local_stress.xy } else { s.local_stress.zx };
        let power = way.power();
        proptest::prop_assert!((shear(&state) * r.powi(power) / (total(&found, 0) / (2.0 * PI)) - 1.0).abs() < 1e-14);
        let x = Vector3::new(0.8 * r, -0.6 * r, 0.3);
        for i in 0..3 {
            let mut step = Vector3::zeros();
            step[i] = h;
            let u = |x: Vector3<f64>| found.at(Point::new(x.x, x.y, x.z)).unwrap().displacement;
            let difference = (u(x + step) - u(x - step)) / (2.0 * h);
            proptest::prop_assert!((difference - state.displacement_gradient.column(i)).norm() < 1e-6 * (1.0 + amount));
        }
        let mirrored = tube(way, (1.0, b), law(which), -motion).unwrap();
        let other = mirrored.at(Point::new(0.8 * r, 0.6 * r, 0.3)).unwrap();
        proptest::prop_assert!((shear(&other) + shear(&state)).abs() < 1e-14 * largest);
        proptest::prop_assert!((other.local_stress.zz - s.zz).abs() < 1e-14 * largest);
        let energy = |motion: f64| total(&tube(way, (1.0, b), law(which), motion).unwrap(), 1);
        let step = 1e-4 * motion.abs();
        let slope = (energy(motion + step) - energy(motion - step)) / (2.0 * step);
        proptest::prop_assert!((slope / total(&found, 0) - 1.0).abs() < 1e-6);
    }
}

#[test]
fn what_the_law_does_not_carry_is_refused() {
    let soft = laws_tests::softening;
    for way in [Way::Azimuthal, Way::Axial] {
        let refusal = tube(way, (1.0, 2.0), soft(), 50.0).unwrap_err();
        assert_eq!(refusal.parameter, way.motion());
        assert!(
            refusal.message.contains("maximum") && refusal.hint.contains("nearest"),
            "{refusal:?}"
        );
        assert!(tube(way, (1.0, 2.0), law(0), f64::NAN).is_err());
        assert!(tube(way, (2.0, 1.0), law(0), 0.1).is_err());
        let found = tube(way, (1.0, 2.0), law(0), 0.1).unwrap();
        assert!(found.at(Point::new(0.0, 0.0, 0.0)).is_err());
        // off the wall the formulas go on
        let (inside, edge) = (
            found.at(Point::new(2.0 + 1e-6, 0.0, 0.0)).unwrap(),
            found.at(Point::new(2.0, 0.0, 0.0)).unwrap(),
        );
        assert!((inside.local_stress.xx - edge.local_stress.xx).abs() < 1e-6);
    }
}
