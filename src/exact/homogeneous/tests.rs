//! Textbook numbers, work, limits and refusals of the uniform states.

use super::*;
use crate::exact::given::Value;
use crate::exact::laws_tests;
use crate::materials::{
    Compressible, CompressibleNeoHookean, LinearElastic, MooneyRivlin, NeoHookean, Volumetric,
    VolumetricForm,
};
use std::sync::Arc;

fn built(word: &str, numbers: &[f64], material: Material) -> Result<Homogeneous, Refusal> {
    let block = match word {
        "triaxial" => Given::default().with("stretches", Value::Numbers(numbers.to_vec())),
        "simple-shear" => Given::default().number("shear", numbers[0]),
        _ => Given::default().number("stretch", numbers[0]),
    };
    let given = Given::default()
        .with(word, Value::Block(block))
        .with("material", Value::Material(material));
    Homogeneous::new(&given)
}

fn rubber() -> Material {
    Material::incompressible(MooneyRivlin { c10: 0.3, c01: 0.2 })
}

fn split(bulk: f64, form: VolumetricForm) -> Material {
    Material::Compressible(Compressible::Split {
        law: Arc::new(MooneyRivlin { c10: 0.3, c01: 0.2 }),
        volumetric: Volumetric { form, bulk },
    })
}

fn steel(nu: f64) -> Material {
    Material::LinearElastic(LinearElastic { e: 3.0, nu })
}

#[track_caller]
fn near(got: f64, expected: f64, relative: f64) {
    assert!(
        (got - expected).abs() <= relative * expected.abs().max(1e-300),
        "{got} is not {expected}"
    );
}

// Mooney-Rivlin c10 = 0.3, c01 = 0.2 at stretch 2: uniaxial 2 (4 - 1/2)(0.3 + 0.1), equibiaxial 2 (4 - 1/16)(0.3 + 0.2 4),
// planar 2 (4 - 1/4) 0.5 and szz = 2 (1 - 1/4)(0.3 + 0.2 4); shear 2: tau = 2, sxx - syy = 4, szz - syy = 2 c01 4. Red when an axis
// of the law is taken for another.
#[test]
fn textbook_numbers() {
    let stress = |word: &str, numbers: &[f64]| built(word, numbers, rubber()).unwrap().state.stress;
    near(stress("uniaxial", &[2.0]).xx, 2.8, 4e-15);
    let biaxial = stress("equibiaxial", &[2.0]);
    near(biaxial.xx, 8.6625, 4e-15);
    assert_eq!((biaxial.xx, 0.0), (biaxial.yy, biaxial.zz));
    let planar = stress("planar", &[2.0]);
    near(planar.xx, 3.75, 4e-15);
    near(planar.zz, 1.65, 4e-15);
    let shear = stress("simple-shear", &[2.0]);
    for (got, exact) in [
        (shear.xy, 2.0),
        (shear.xx - shear.yy, 4.0),
        (shear.zz - shear.yy, 1.6),
        (shear.zz, 0.0),
    ] {
        assert!((got - exact).abs() < 4e-15, "{got} {exact}");
    }
    let triaxial = stress("triaxial", &[2.0, 0.5, 1.0]);
    near(triaxial.xx - triaxial.yy, 3.75, 4e-15);
    near(triaxial.xx, 3.75 - 1.65, 8e-15);
    // a strain of 1e-9 keeps its digits: 3 mu strain (1 + strain) to first order and more
    near(
        stress("uniaxial", &[1.0 + 2f64.powi(-30)]).xx,
        3.0 * 2f64.powi(-30),
        2e-9,
    );
}

fn materials() -> Vec<Material> {
    let mut list = vec![
        rubber(),
        Material::incompressible(NeoHookean { mu: 1.0 }),
        laws_tests::yeoh(),
        laws_tests::locking(),
        Material::Compressible(Compressible::Coupled(CompressibleNeoHookean {
            mu: 1.0,
            lambda: 2.0,
        })),
        steel(0.3),
        steel(0.5),
        steel(-0.4),
    ];
    list.extend(VolumetricForm::ALL.map(|form| split(5.0, form)));
    list.push(split(1e6, VolumetricForm::Quadratic));
    list
}

// dW/dstretch = J sxx/lx, and the work of the other prescribed directions; free directions without stress. Red when a stress, an
// energy or a free stretch is wrong (tried: slope of the free direction without by_e, sxx of planar and szz exchanged).
#[test]
fn work_of_the_prescribed_directions_is_the_energy() {
    for material in materials() {
        for word in ["uniaxial", "equibiaxial", "planar", "simple-shear"] {
            for number in [0.7, 0.999, 1.001, 1.3, 2.5] {
                let small = matches!(material, Material::LinearElastic(_));
                let at = |x: f64| built(word, &[x], material.clone()).unwrap().state;
                let state = at(number);
                let h = 1e-5;
                let slope = (at(number + h).energy - at(number - h).energy) / (2.0 * h);
                let s = state.stress;
                let j = if small { 1.0 } else { state.volume_ratio };
                let l = if small { [1.0; 3] } else { state.stretches };
                let exact = match word {
                    "simple-shear" => j * s.xy,
                    "equibiaxial" => j * (s.xx / l[0] + s.yy / l[1]),
                    _ => j * s.xx / l[0],
                };
                assert!(
                    (slope - exact).abs() < 1e-6 * exact.abs() + 1e-9,
                    "{material:?} {word} {number}: {slope} {exact}"
                );
                if !small {
                    let determinant =
                        (nalgebra::Matrix3::identity() + state.gradient).determinant();
                    near(determinant, state.volume_ratio, 1e-14);
                }
                let free = match word {
                    "uniaxial" => [s.yy, s.zz],
                    "planar" => [s.yy, 0.0],
                    "equibiaxial" => [s.zz, 0.0],
                    _ => [0.0, 0.0],
                };
                assert_eq!(free, [0.0, 0.0]);
            }
        }
    }
}

// The same deformation typed as three stretches gives the same state. Red when the free stretch does not free its direction.
#[test]
fn three_stretches_give_the_state_back() {
    for material in materials() {
        for word in ["uniaxial", "equibiaxial", "planar"] {
            let one = built(word, &[1.4], material.clone()).unwrap().state;
            let mut stretches = one.stretches;
            if material.bulk_modulus().is_infinite()
                && !matches!(material, Material::LinearElastic(_))
            {
                stretches[2] = 1.0 / (stretches[0] * stretches[1]);
            }
            if material.bulk_modulus() > 1e5 {
                continue;
            }
            let Ok(three) = built("triaxial", &stretches, material.clone()) else {
                panic!("{material:?} {word} {stretches:?}")
            };
            // the pressure of what preserves volume is fixed by another direction
            let shift = if three.preserves_volume {
                one.stress.zz - three.state.stress.zz
            } else {
                0.0
            };
            for (x, y) in one.stress.to_array()[..3]
                .iter()
                .zip(&three.state.stress.to_array()[..3])
            {
                assert!(
                    (x - y - shift).abs() < 1e-13 * one.stress.xx.abs(),
                    "{material:?} {word}"
                );
            }
            assert!((three.state.energy / one.energy - 1.0).abs() < 1e-13);
        }
    }
}

// K -> infinity is the incompressible law; a small stretch is Hooke's law with the law's own constants.
#[test]
fn limits_of_the_laws() {
    for word in ["uniaxial", "equibiaxial", "planar", "simple-shear"] {
        let stress = |material: Material, x: f64| {
            built(word, &[x], material).unwrap().state.stress.to_array()
        };
        let (stiff, rigid) = (
            stress(split(1e9, VolumetricForm::Quadratic), 1.6),
            stress(rubber(), 1.6),
        );
        for i in 0..4 {
            let shift = if word == "simple-shear" && i < 3 {
                stiff[2]
            } else {
                0.0
            };
            assert!((stiff[i] - shift - rigid[i]).abs() < 1e-7, "{word} {i}");
        }
        let small = if word == "simple-shear" {
            1e-7
        } else {
            1.0 + 1e-7
        };
        for material in [split(5.0, VolumetricForm::LogSquared), rubber()] {
            let hooke = Material::LinearElastic(LinearElastic {
                e: material.young_modulus(),
                nu: material.poisson_ratio(),
            });
            for (x, y) in stress(material, small).iter().zip(stress(hooke, small)) {
                assert!((x - y).abs() < 1e-12, "{word}");
            }
        }
    }
}

#[test]
fn what_is_no_deformation_is_refused() {
    let check = |found: Result<Homogeneous, Refusal>, parameter: &str, says: &str| {
        let refusal = found.unwrap_err();
        assert_eq!(refusal.parameter, parameter, "{refusal}");
        assert!(refusal.message.contains(says), "{refusal}");
    };
    check(built("uniaxial", &[0.0], rubber()), "stretch", "positive");
    check(
        built("uniaxial", &[f64::NAN], rubber()),
        "stretch",
        "finite",
    );
    check(
        built("triaxial", &[1.1, 1.1, 1.1], rubber()),
        "stretches",
        "preserves",
    );
    check(
        built("triaxial", &[1.1, 1.1, 1.1], steel(0.5)),
        "stretches",
        "preserves",
    );
    check(
        built("triaxial", &[1.1, 1.1], rubber()),
        "stretches",
        "2 numbers",
    );
    check(
        built("triaxial", &[1.1, 1.1, -1.0], steel(0.3)),
        "stretches",
        "not positive",
    );
    let stiff = Material::incompressible(crate::materials::Demiray { c: 1.0, b: 1e4 });
    check(built("uniaxial", &[3.0], stiff), "uniaxial", "no stress");
    let none = Given::default().with("material", Value::Material(rubber()));
    check(Homogeneous::new(&none), "", "no deformation");
    let block = || Value::Block(Given::default().number("stretch", 1.1));
    check(
        Homogeneous::new(
            &none
                .clone()
                .with("uniaxial", block())
                .with("planar", block()),
        ),
        "",
        "uniaxial, planar",
    );
    let found = built("simple-shear", &[0.5], rubber()).unwrap();
    let state = found.at(Point::new(1.0, 2.0, 3.0)).unwrap();
    assert_eq!(state.displacement, Vector3::new(1.0, 0.0, 0.0));
    assert!(found.at(Point::new(f64::NAN, 0.0, 0.0)).is_err());
}
