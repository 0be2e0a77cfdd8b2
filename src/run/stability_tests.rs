//! Where a law loses the order of its stresses, and that sound laws never do.

use super::*;
use crate::exact::{Given, build};
use crate::exact::{Value, ends::Ends};
use crate::materials::samples::incompressible_laws;
use crate::materials::{Volumetric, VolumetricForm};
use crate::run::plan::read;
use proptest::prelude::*;

/// Softens: dW/dI1 is negative above I1 - 3 = 5, in plane strain above a stretch of 2.618.
const SOFTENING: &str = "{ stated: { energy: \"0.2*(I1-3) - 0.02*(I1-3)^2\" } }";

fn cautions(materials: &str, problem: &str) -> Vec<Option<Finding>> {
    let text = format!(
        "suite: s\nunits: {{ length: mm, stress: MPa }}\nmaterials: {materials}\ncases: [ {{ id: c, problem: {problem} }} ]\n"
    );
    let plan = read(&text, "suite.yaml").unwrap_or_else(|f| panic!("{}", f[0]));
    plan.cases.iter().map(caution).collect()
}

// Red when the order is not looked at, at the wrong place, or with the wrong sign.
#[test]
fn a_softened_bore_is_told_with_its_place() {
    let tube = "{ pressurised-tube: { inner-radius: 1, outer-radius: 2, ends: plane-strain, material: m, \
                inner-wall-stretch: [1.2, 2.61, 2.63, 3.0] } }";
    let found = cautions(&format!("{{ m: {SOFTENING} }}"), tube);
    let told: Vec<_> = found.iter().map(Option::is_some).collect();
    assert_eq!(told, [false, false, true, true]);
    let finding = found[3].clone().unwrap();
    assert_eq!(
        (finding.weight, finding.rule.as_str()),
        (Weight::Caution, "ordered-stresses")
    );
    assert!(
        finding
            .found
            .contains("at X 1, Y 0, Z 0 the stretch 3 carries"),
        "{finding}"
    );
    assert!(
        finding.place.line.is_some() && finding.place.file == "suite.yaml",
        "{finding}"
    );
}

// The outer layer alone is unstable, and its fault lies inside the line.
#[test]
fn each_layer_is_looked_at() {
    let tube = "{ layered-tube: { radii: [1, 1.1, 1.4], materials: [ok, m], ends: plane-strain, inner-wall-stretch: [2.0, 3.0] } }";
    let found = cautions(
        &format!("{{ ok: {{ neo-Hookean: {{ mu: 0.4 }} }}, m: {SOFTENING} }}"),
        tube,
    );
    assert!(found[0].is_none());
    let text = found[1].clone().unwrap().found;
    let place = text
        .split(['X', ','])
        .nth(1)
        .unwrap()
        .trim()
        .parse::<f64>()
        .unwrap();
    assert!(place > 1.1 && place < 1.12, "{text}");
}

// With a bulk modulus, and where the mesh decides the body. Red when the strain is taken from the wrong tensor.
#[test]
fn compressible_laws_and_stated_fields_are_looked_at() {
    let field = "{ stated-field: { displacement: { x: \"s*X + 0.1*Y\", y: \"0\", z: \"-0.1*X\" }, constants: { s: [0.5, 4] }, material: m } }";
    let soft = SOFTENING.replace("\" }", "\", volumetric: { quadratic: { K: 10 } } }");
    let found = cautions(&format!("{{ m: {soft} }}"), field);
    assert!(found[0].is_none() && found[1].is_some());
    let small = "{ lame-tube: { inner-radius: 1, outer-radius: 2, ends: closed, material: m, inner-pressure: 0.3 } }";
    assert_eq!(
        cautions("{ m: { linear-elastic: { E: 1, nu: 0.3 } } }", small),
        [None]
    );
}

#[test]
fn fibres_make_it_no_condition() {
    let tube = "{ pressurised-tube: { inner-radius: 1, outer-radius: 2, ends: plane-strain, material: m, inner-wall-stretch: 1.3 } }";
    let fibred = "{ m: { stated: { energy: \"0.2*(I1-3) - 0.2*(I1-3)^2 + 0.5*pos(I4-1)^2\", constants: { beta: 80 deg } } } }";
    assert_eq!(cautions(fibred, tube), [None]);
}

fn tube(
    material: Material,
    ratio: f64,
    stretch: f64,
    ends: Ends,
) -> Option<Box<dyn ExactSolution>> {
    let given = Given::default()
        .number("inner-radius", 1.0)
        .number("outer-radius", ratio)
        .with("ends", Value::Ends(ends))
        .with("material", Value::Material(material))
        .number("inner-wall-stretch", stretch);
    build("pressurised-tube", given).ok()
}

fn stretched(material: Material, stretches: [f64; 3]) -> Option<Box<dyn ExactSolution>> {
    let block = Given::default().with("stretches", Value::Numbers(stretches.to_vec()));
    let given = Given::default()
        .with("triaxial", Value::Block(block))
        .with("material", Value::Material(material));
    build("homogeneous", given).ok()
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(6))]

    // No caution for a sound law, at any size of strain. Red when round-off is taken for an order.
    #[test]
    fn sound_laws_are_never_told(
        log_strain in -9.0..0.3_f64,
        shrink in proptest::bool::ANY,
        ratio in 1.001..5.0_f64,
        log_bulk in 0.0..6.0_f64,
        form in 0..4_usize,
    ) {
        let strain = 10f64.powf(log_strain);
        let stretch = if shrink { 1.0 / (1.0 + strain) } else { 1.0 + strain };
        let form = VolumetricForm::ALL[form];
        let mut asked = 0;
        for law in incompressible_laws() {
            let volumetric = Volumetric { form, bulk: law.shear_modulus() * 10f64.powf(log_bulk) };
            if !law.isotropic() {
                continue;
            }
            let plain = Material::Incompressible(law);
            let split = plain.clone().with_volumetric(volumetric).unwrap();
            for (material, ends) in [
                (plain.clone(), Ends::PlaneStrain),
                (plain, Ends::FixedStretch { axial_stretch: 1.0 + strain }),
                (split, Ends::PlaneStrain),
            ] {
                let Some(exact) = tube(material.clone(), ratio, stretch, ends) else { continue };
                asked += 1;
                let found = first(exact.as_ref(), &sample(exact.as_ref()));
                prop_assert!(found.is_none(), "{material:?} {found:?}");
            }
        }
        prop_assert!(asked > 10, "{asked}");
    }
}

proptest! {
    // The same for any three stretches, down to strains of round-off.
    #[test]
    fn sound_laws_are_never_told_of_any_stretches(
        log_strain in -12.0..0.3_f64,
        way in proptest::array::uniform2(-1.0..1.0_f64),
        log_bulk in 0.0..6.0_f64,
    ) {
        let size = 10f64.powf(log_strain);
        let [x, y] = way.map(|w| (size * w).exp());
        for law in incompressible_laws().into_iter().filter(|law| law.isotropic()) {
            let bulk = law.shear_modulus() * 10f64.powf(log_bulk);
            let plain = Material::Incompressible(law);
            let volumetric = Volumetric { form: VolumetricForm::Quadratic, bulk };
            let split = plain.clone().with_volumetric(volumetric).unwrap();
            for (material, z) in [(plain, 1.0 / (x * y)), (split, (0.3 * size).exp())] {
                let Some(exact) = stretched(material.clone(), [x, y, z]) else { continue };
                let found = first(exact.as_ref(), &[Point::new(0.3, 0.2, 0.1)]);
                prop_assert!(found.is_none(), "{material:?} {found:?}");
            }
        }
    }
}
