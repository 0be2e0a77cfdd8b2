//! Stated fields against differences of their own stress, closed forms typed as fields, and what is refused.

use super::*;
use crate::exact::build;
use crate::materials;
use proptest::prelude::*;

fn material(name: &str, values: &[(&str, f64)]) -> Material {
    let values: Vec<_> = values.iter().map(|(n, v)| (n.to_string(), *v)).collect();
    materials::build(name, &values).unwrap()
}

fn field(
    [x, y, z]: [&str; 3],
    material: Material,
    pressure: Option<&str>,
) -> Result<StatedField, Refusal> {
    let text = |t: &str| Value::Text(t.to_string());
    let block = Given::default()
        .with("x", text(x))
        .with("y", text(y))
        .with("z", text(z));
    let constants = Given::default().number("k", 0.3);
    let mut given = Given::default()
        .with("displacement", Value::Block(block))
        .with("constants", Value::Block(constants))
        .with("material", Value::Material(material));
    if let Some(pressure) = pressure {
        given = given.with("pressure", text(pressure));
    }
    StatedField::new(&given)
}

fn soft() -> Material {
    material("compressible-neo-Hookean", &[("mu", 0.5), ("lambda", 2.25)])
}

const CURVED: [&str; 3] = ["0.1*X*Y + k*Y^2", "0.05*X^2 - 0.1*Z*Y", "0.1*sin(X)*Z"];

/// P N by columns.
fn piola(exact: &StatedField, point: Point) -> Matrix3<f64> {
    let state = exact.at(point).unwrap();
    let f = state.deformation();
    state.stress.to_matrix() * f.try_inverse().unwrap().transpose() * state.volume_ratio
}

proptest! {
    // b = -Div P by differences of P itself. Red when a second derivative, a sign or the pressure's part is wrong.
    #[test]
    fn the_body_force_holds_the_field_in_equilibrium(x in -1.0..1.0_f64, y in -1.0..1.0_f64, z in -1.0..1.0_f64) {
        let rubber = || material("neo-Hookean", &[("mu", 0.4)]);
        // isochoric: shear along X depending on Y and Z
        let fields = [
            field(CURVED, soft(), None).unwrap(),
            field(["k*Y^2 + 0.1*sin(Z)", "0.2*Z^2", "0"], rubber(), Some("0.1 + 0.3*X*Y")).unwrap(),
        ];
        for exact in fields {
            let step = 1e-3;
            let mut expected = Vector3::zeros();
            for j in 0..3 {
                let at = |t: f64| {
                    let mut place = [x, y, z];
                    place[j] += t;
                    piola(&exact, Point::new(place[0], place[1], place[2])).column(j).into_owned()
                };
                expected -= (8.0 * (at(step) - at(-step)) - (at(2.0 * step) - at(-2.0 * step))) / (12.0 * step);
            }
            let found = exact.body_force(Point::new(x, y, z)).unwrap();
            prop_assert!((found - expected).abs().max() < 1e-9, "{found} {expected}");
        }
    }

    #[test]
    fn in_small_strain_the_divergence_is_that_of_the_stress(x in -1.0..1.0_f64, y in -1.0..1.0_f64, z in -1.0..1.0_f64) {
        let fields = [
            field(CURVED, material("linear-elastic", &[("E", 10.0), ("nu", 0.3)]), None).unwrap(),
            field(["k*Y^2", "0.2*Z^2", "0"], material("linear-elastic", &[("E", 10.0), ("nu", 0.5)]), Some("X*Z")).unwrap(),
        ];
        for exact in fields {
            let step = 1e-3;
            let mut expected = Vector3::zeros();
            for j in 0..3 {
                let at = |t: f64| {
                    let mut place = [x, y, z];
                    place[j] += t;
                    let state = exact.at(Point::new(place[0], place[1], place[2])).unwrap();
                    state.stress.to_matrix().column(j).into_owned()
                };
                expected -= (at(step) - at(-step)) / (2.0 * step);
            }
            let found = exact.body_force(Point::new(x, y, z)).unwrap();
            prop_assert!((found - expected).abs().max() < 1e-4, "{found} {expected}");
        }
    }
}

// The Lame tube and a homogeneous extension typed as fields. Red when the stress of a stated field is another law's.
#[test]
fn a_closed_form_typed_as_a_field_is_the_closed_form() {
    let steel = || material("linear-elastic", &[("E", 10.0), ("nu", 0.3)]);
    let given = crate::exact::Parameters {
        inner_radius: 1.0,
        outer_radius: 2.0,
        ends: crate::exact::Ends::PlaneStrain,
        material: steel(),
        inner_pressure: 0.3,
        outer_pressure: 0.0,
    };
    let tube = build("lame-tube", &given).unwrap();
    // C = 0.1, D = 0.4: u = (1 + nu)/E ((1 - 2 nu) C R + D/R)
    let typed = field(
        [
            "1.3/10*(0.4*0.1*R + 0.4/R)*cos(Theta)",
            "1.3/10*(0.4*0.1*R + 0.4/R)*sin(Theta)",
            "0",
        ],
        steel(),
        None,
    );
    // an unused constant is nobody's fault
    let typed = typed.unwrap();
    for point in [
        Point::new(1.0, 0.0, 0.0),
        Point::new(0.9, -1.2, 0.0),
        Point::new(-2.0, 0.0, 0.0),
    ] {
        let (a, b) = (typed.at(point).unwrap(), tube.at(point).unwrap());
        assert!((a.stress.to_matrix() - b.stress.to_matrix()).abs().max() < 1e-15);
        assert!((a.energy_density - b.energy_density).abs() < 1e-17);
        assert!(typed.body_force(point).unwrap().abs().max() < 1e-14);
    }
}

#[test]
fn what_is_no_field_is_refused_with_its_place() {
    let rubber = || material("neo-Hookean", &[("mu", 0.4)]);
    let refusal = field(["0.1*", "0", "0"], soft(), None).unwrap_err();
    assert_eq!(refusal.parameter, "x");
    let refusal = field(["0.1*X*q", "0", "0"], soft(), None).unwrap_err();
    assert!(refusal.message.contains('q'), "{}", refusal.message);
    let refusal = field(["0", "0", "0"], rubber(), None).unwrap_err();
    assert_eq!(refusal.parameter, "pressure");
    let refusal = field(["0", "0", "0"], soft(), Some("1")).unwrap_err();
    assert_eq!(refusal.parameter, "pressure");
    // a change of volume, an inside-out point and a pole are refused where they are
    let grown = field(["0.1*X", "0", "0"], rubber(), Some("0")).unwrap();
    assert!(
        grown
            .at(Point::new(1.0, 0.0, 0.0))
            .unwrap_err()
            .message
            .contains("volume")
    );
    let folded = field(["-2*X", "0", "0"], soft(), None).unwrap();
    assert!(folded.at(Point::new(1.0, 0.0, 0.0)).is_err());
    let pole = field(["1/X", "0", "0"], soft(), None).unwrap();
    assert!(pole.at(Point::new(0.0, 0.0, 0.0)).is_err());
    assert!(pole.body_force(Point::new(0.0, 0.0, 0.0)).is_err());
}
