//! Limits of the exact solutions at the rate theory says, their frames, and the energy behind their stress.

#[path = "common/solved.rs"]
mod solved;

use nalgebra::{Matrix3, Vector3};
use proptest::prelude::*;
use solved::{at, solved, total, u};
use std::f64::consts::PI;
use std::sync::Arc;
use truebore::exact::{ExactSolution, Frame, State};
use truebore::mechanics::Point;

/// Slopes of ln(error) over ln(size) between neighbours.
fn rates(sizes: &[f64], errors: &[f64]) -> Vec<f64> {
    let pairs = sizes.windows(2).zip(errors.windows(2));
    pairs
        .map(|(h, e)| (e[1] / e[0]).ln() / (h[1] / h[0]).ln())
        .collect()
}

#[track_caller]
fn first_order(what: &str, sizes: &[f64], errors: &[f64]) {
    let found = rates(sizes, errors);
    println!("{what}: errors {errors:?}, rates {found:.3?}");
    assert!(
        found.iter().all(|rate| (rate - 1.0).abs() < 0.03),
        "{what}: {found:?}"
    );
}

const WALLS: [f64; 4] = [1e-2, 1e-3, 1e-4, 1e-5];

/// (law, Cauchy stress of the hoop at hoop stretch l and axial stretch z, no radial stress).
type Membrane = (&'static str, fn(f64, f64) -> f64);

const MEMBRANES: [Membrane; 3] = [
    ("neo-Hookean: { mu: 1 }", |l, z| {
        l * l - 1.0 / (l * z).powi(2)
    }),
    ("Mooney-Rivlin: { c10: 0.4, c01: 0.1 }", |l, z| {
        (0.8 + 0.2 * z * z) * (l * l - 1.0 / (l * z).powi(2))
    }),
    ("Ogden: { mu: [0.4, -0.1], alpha: [3, -4] }", |l, z| {
        let r = 1.0 / (l * z);
        0.4 * (l.powi(3) - r.powi(3)) - 0.1 * (l.powi(-4) - r.powi(-4))
    }),
];

// P = sigma h/r of the deformed wall, h = H/(lt lz). Red when a wall's pressure has another limit, or tends to it at another rate.
#[test]
fn thin_tubes_are_membranes() {
    for (law, stress) in MEMBRANES {
        for (stretch, axial) in [(1.3, 1.0), (2.0, 1.2), (0.8, 1.0)] {
            let errors = WALLS.map(|wall| {
                let outer = 1.0 + wall;
                let wall = outer - 1.0;
                let exact = solved(
                    &format!("m: {{ {law} }}"),
                    &format!("pressurised-tube: {{ inner-radius: 1, outer-radius: {outer}, ends: {{ fixed-stretch: {{ axial-stretch: {axial} }} }}, material: m, inner-wall-stretch: {stretch} }}"),
                );
                let membrane = stress(stretch, axial) * wall / (stretch * axial) / stretch;
                (total(&exact, "inner_pressure") / membrane - 1.0).abs()
            });
            first_order(&format!("{law} {stretch} {axial}"), &WALLS, &errors);
        }
    }
}

// p = 4 (h0/r0) (1/L - 1/L^7) (c1 + c2 L^2): the stretch that the pressure of stretch L reaches is L, on the first branch and on the
// one after the maximum.
#[test]
fn thin_spheres_are_membranes() {
    for (stretch, branch) in [(1.1_f64, 1), (1.3, 1), (2.0, 2)] {
        let errors = WALLS.map(|wall| {
            let outer = 1.0 + wall;
            let wall = outer - 1.0;
            let pressure = 4.0
                * wall
                * (1.0 / stretch - stretch.powi(-7))
                * (0.45 + 0.01 * stretch * stretch);
            let exact = solved(
                "m: { Mooney-Rivlin: { c10: 0.45, c01: 0.01 } }",
                &format!("pressurised-sphere: {{ inner-radius: 1, outer-radius: {outer}, material: m, inner-pressure: {pressure}, branch: {branch} }}"),
            );
            (total(&exact, "inner_radius") / stretch - 1.0).abs()
        });
        first_order(&format!("sphere {stretch}"), &WALLS, &errors);
    }
}

// sigma_tt = P r/h, sigma_zz half of it with caps, of any tube: the wall's mean stresses.
#[test]
fn closed_thin_tubes_carry_half_the_stress_along_the_axis() {
    let errors = WALLS.map(|wall| {
        let outer = 1.0 + wall;
        let exact = solved(
            "m: { neo-Hookean: { mu: 1 } }",
            &format!("pressurised-tube: {{ inner-radius: 1, outer-radius: {outer}, ends: closed, material: m, inner-pressure: {} }}", 0.3 * wall),
        );
        let middle = at(&exact, 1.0 + 0.5 * wall).local_stress;
        (middle.zz / middle.yy - 0.5).abs()
    });
    first_order("szz/stt", &WALLS, &errors);
}

// u = (1 - nu^2) P A^2/(E H) in plane strain, (1 - nu) P A^2/(2 E H) of a sphere. Red when Lame's constants are another ring's.
#[test]
fn thin_linear_shells_are_membranes() {
    let law = "m: { linear-elastic: { E: 10, nu: 0.3 } }";
    for (problem, membrane) in [
        (
            "lame-tube: { inner-radius: 1, outer-radius: B, ends: plane-strain, material: m, inner-pressure: 0.1 }",
            0.91,
        ),
        (
            "lame-sphere: { inner-radius: 1, outer-radius: B, material: m, inner-pressure: 0.1 }",
            0.35,
        ),
    ] {
        let errors = WALLS.map(|wall| {
            let outer = 1.0 + wall;
            let exact = solved(law, &problem.replace('B', &outer.to_string()));
            (u(&exact, 1.0) / (membrane * 0.1 / (10.0 * (outer - 1.0))) - 1.0).abs()
        });
        first_order(problem, &WALLS, &errors);
    }
}

/// One number of a solution.
type Measure = fn(&Arc<dyn ExactSolution>) -> f64;

const BULKS: [f64; 5] = [1e2, 1e3, 1e4, 1e5, 1e6];

/// Errors of a penalised law over mu/K against the same problem with none.
fn penalised(problem: &str, volumetric: &str, of: Measure) -> Vec<f64> {
    let plain = of(&solved(
        "m: { Mooney-Rivlin: { c10: 0.4, c01: 0.1 } }",
        problem,
    ));
    let soft = |bulk: f64| {
        format!(
            "m: {{ Mooney-Rivlin: {{ c10: 0.4, c01: 0.1, volumetric: {{ {volumetric}: {{ K: {bulk} }} }} }} }}"
        )
    };
    BULKS
        .iter()
        .map(|bulk| (of(&solved(&soft(*bulk), problem)) / plain - 1.0).abs())
        .collect()
}

// Displacement, stress and energy tend to the incompressible ones at the rate mu/K. Red when a volumetric energy does not.
#[test]
fn stiff_compressible_walls_tend_to_the_incompressible_ones() {
    let sizes = BULKS.map(|bulk| 1.0 / bulk);
    let measures: [(&str, Measure); 3] = [
        ("u", |e| u(e, 1.0)),
        ("stt", |e| at(e, 1.2).local_stress.yy),
        ("energy", |e| total(e, "strain_energy")),
    ];
    let tube = |ends: &str| {
        format!(
            "pressurised-tube: {{ inner-radius: 1, outer-radius: 1.6, ends: {ends}, material: m, inner-pressure: 0.15 }}"
        )
    };
    let problems = [
        tube("plane-strain"),
        tube("closed"),
        tube("{ generalized-plane-strain: { axial-force: 0.3 } }"),
        SPHERE.to_string(),
    ];
    for problem in &problems {
        for form in ["quadratic", "quadratic-log", "log-squared", "linear-log"] {
            for (what, of) in measures {
                first_order(
                    &format!("{form} {what} {problem}"),
                    &sizes,
                    &penalised(problem, form, of),
                );
            }
        }
    }
}

const SPHERE: &str =
    "pressurised-sphere: { inner-radius: 1, outer-radius: 1.6, material: m, inner-pressure: 0.15 }";

fn rotation([a, b, c]: [f64; 3]) -> Matrix3<f64> {
    *nalgebra::Rotation3::from_euler_angles(a, b, c).matrix()
}

fn turned(q: &Matrix3<f64>, point: Point) -> Point {
    let [x, y, z]: [f64; 3] = (q * Vector3::new(point.x, point.y, point.z)).into();
    Point::new(x, y, z)
}

/// Largest difference of the state `b` from the state `a` turned by `q`, relative to the size of each quantity.
fn apart(q: &Matrix3<f64>, a: &State, b: &State, own_axes: bool) -> f64 {
    let stress = q * a.stress.to_matrix() * q.transpose();
    let gradient = q * a.displacement_gradient * q.transpose();
    let motion = q * a.displacement;
    let mut parts = vec![
        ((a.pressure - b.pressure).abs(), stress.amax()),
        ((a.volume_ratio - b.volume_ratio).abs(), 1.0),
        (
            (a.energy_density - b.energy_density).abs(),
            a.energy_density.abs(),
        ),
        ((stress - b.stress.to_matrix()).amax(), stress.amax()),
        ((gradient - b.displacement_gradient).amax(), gradient.amax()),
        ((motion - b.displacement).amax(), motion.amax()),
    ];
    if own_axes {
        let local = a.local_stress.to_matrix() - b.local_stress.to_matrix();
        parts.push((local.amax(), stress.amax()));
    }
    parts
        .iter()
        .fold(0.0_f64, |m, (off, size)| m.max(off / size.max(1e-300)))
}

/// Bodies of revolution, materials beside them.
const ROUND: &str = "rubber: { Mooney-Rivlin: { c10: 0.15, c01: 0.05 } }, soft: { neo-Hookean: { mu: 0.4, volumetric: { quadratic: { K: 40 } } } }, \
    fibred: { two-fibre: { mu: 0.4, k1: 0.5, k2: 0.8, beta: 36 deg } }, steel: { linear-elastic: { E: 200, nu: 0.3 } }, \
    plastic: { elastic-perfectly-plastic: { E: 200, nu: 0.3, yield-stress: 0.24 } }";

const ABOUT_THE_AXIS: &[&str] = &[
    "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: rubber, inner-pressure: 0.05 }",
    "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: fibred, inner-pressure: 0.08 }",
    "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: soft, inner-pressure: 0.05 }",
    "layered-tube: { radii: [8, 10, 12], materials: [rubber, soft], ends: plane-strain, inner-pressure: 0.05 }",
    "graded-tube: { inner-radius: 8, outer-radius: 12, material: rubber, grading: { power: 1.5 }, ends: closed, inner-pressure: 0.05 }",
    "lame-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: steel, inner-pressure: 0.05 }",
    "shrink-fit-tube: { radii: [8, 10, 12], radial-interference: 0.01, materials: [steel, steel], ends: plane-stress }",
    "heated-tube: { inner-radius: 8, outer-radius: 12, material: steel, expansion: 1e-5, inner-temperature: 80, outer-temperature: 0, ends: plane-strain }",
    "rotating-disk: { outer-radius: 12, material: steel, density-speed-squared: 1e-4 }",
    "rotating-cylinder: { inner-radius: 8, outer-radius: 12, material: steel, density-speed-squared: 1e-4, ends: plane-strain }",
    "elastic-plastic-tube: { inner-radius: 8, outer-radius: 12, material: plastic, inner-pressure: 0.08, stage: loaded }",
    "bar-torsion: { semi-axes: [12, 12], twist: 0.01, material: steel }",
    "torsion-extension: { outer-radius: 12, axial-stretch: 1.1, twist: 0.05, material: rubber }",
    "torsion-extension: { inner-radius: 8, outer-radius: 12, axial-force: 0, twist: 0.05, material: rubber }",
    "azimuthal-shear: { inner-radius: 8, outer-radius: 12, material: rubber, rotation: 0.2 }",
    "axial-shear: { inner-radius: 8, outer-radius: 12, material: rubber, displacement: 1.5 }",
];

const ABOUT_THE_CENTRE: &[&str] = &[
    "lame-sphere: { inner-radius: 8, outer-radius: 12, material: steel, inner-pressure: 0.05 }",
    "pressurised-sphere: { inner-radius: 8, outer-radius: 12, material: rubber, inner-pressure: 0.05 }",
    "pressurised-sphere: { inner-radius: 8, outer-radius: 12, material: soft, inner-pressure: 0.05 }",
];

fn agree(problems: &[&str], q: &Matrix3<f64>, point: Point) -> Result<(), TestCaseError> {
    for problem in problems {
        let exact = solved(ROUND, problem);
        let (a, b) = (
            exact.at(point).unwrap(),
            exact.at(turned(q, point)).unwrap(),
        );
        // a bar has the axes X, Y, Z
        let off = apart(q, &a, &b, exact.body().frame() != Frame::Cartesian);
        // both places are rounded: a thin wall's share of the radius
        prop_assert!(off < 2e-13, "{problem} {point:?}: {off:e}");
        // the stress is symmetric and true to its own axes
        let (whole, local) = (a.stress.to_matrix(), a.local_stress.to_matrix());
        prop_assert!((whole - whole.transpose()).amax() == 0.0);
        prop_assert!(
            (whole.norm() - local.norm()).abs() < 1e-13 * local.norm(),
            "{problem}"
        );
        prop_assert!(
            (whole.trace() + 3.0 * a.pressure).abs()
                < 4e-15 * whole.norm().max(a.pressure.abs()) * 4.0,
            "{problem}"
        );
    }
    Ok(())
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(6))]

    // A turned point has the turned state. Red when Cartesian components are taken at another angle than the point's.
    #[test]
    fn states_turn_with_their_points(radius in 8.1..11.9_f64, theta in -3.1..3.1_f64, z in -2.0..2.0_f64, about in proptest::array::uniform3(-3.0..3.0_f64)) {
        let axis = rotation([0.0, 0.0, about[0]]);
        agree(ABOUT_THE_AXIS, &axis, Point::from_cylindrical(radius, theta, z))?;
        let along = turned(&rotation(about), Point::new(radius, 0.0, 0.0));
        agree(ABOUT_THE_CENTRE, &rotation([about[2], about[0], about[1]]), along)?;
    }
}

/// A homogeneous field of gradient `h`, typed; with the pressure where one is needed.
fn typed(law: &str, h: &Matrix3<f64>, pressure: Option<f64>) -> Arc<dyn ExactSolution> {
    let row = |i: usize| {
        format!(
            "({:e})*X + ({:e})*Y + ({:e})*Z",
            h[(i, 0)],
            h[(i, 1)],
            h[(i, 2)]
        )
    };
    let pressure = pressure.map_or(String::new(), |p| format!(", pressure: \"{p:e}\""));
    let problem = format!(
        "stated-field: {{ displacement: {{ x: \"{}\", y: \"{}\", z: \"{}\" }}, material: m{pressure} }}",
        row(0),
        row(1),
        row(2)
    );
    solved(&format!("m: {{ {law} }}"), &problem)
}

const COMPRESSIBLE: [&str; 4] = [
    "compressible-neo-Hookean: { mu: 0.5, lambda: 2.25 }",
    "Mooney-Rivlin: { c10: 0.3, c01: 0.1, volumetric: { quadratic: { K: 3 } } }",
    "Gent: { mu: 0.4, Jm: 30, volumetric: { linear-log: { K: 3 } } }",
    "Ogden: { mu: [6.3, 0.012, -0.1], alpha: [1.3, 5, -2], volumetric: { log-squared: { K: 30 } } }",
];

fn gradient() -> impl Strategy<Value = Matrix3<f64>> {
    proptest::array::uniform9(-0.25..0.25_f64).prop_map(|h| Matrix3::from_row_slice(&h))
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(16))]

    // Objectivity: a rotation after the deformation turns the stress with it; isotropy: one before it changes nothing. Red when
    // the stress is built on the wrong side of F.
    #[test]
    fn stress_is_objective_and_isotropic(h in gradient(), angles in proptest::array::uniform3(-3.0..3.0_f64)) {
        let point = Point::new(0.4, 0.3, 0.2);
        let (q, one) = (rotation(angles), Matrix3::identity());
        for law in COMPRESSIBLE {
            let plain = typed(law, &h, None).at(point).unwrap();
            let after = typed(law, &(q * (one + h) - one), None).at(point).unwrap();
            let before = typed(law, &((one + h) * q - one), None).at(point).unwrap();
            let stress = plain.stress.to_matrix();
            let size = stress.amax().max(0.1);
            prop_assert!((q * stress * q.transpose() - after.stress.to_matrix()).amax() < 1e-13 * size, "{law}");
            prop_assert!((stress - before.stress.to_matrix()).amax() < 1e-13 * size, "{law}");
            for other in [after, before] {
                prop_assert!((other.energy_density - plain.energy_density).abs() < 1e-13 * size);
                prop_assert!((other.volume_ratio - plain.volume_ratio).abs() < 1e-14);
            }
        }
    }

    // dW = P : dF. Red when the stress is that of another energy.
    #[test]
    fn stress_is_the_slope_of_the_energy(h in gradient(), way in proptest::array::uniform9(-1.0..1.0_f64)) {
        let (point, way) = (Point::new(0.4, 0.3, 0.2), Matrix3::from_row_slice(&way));
        for law in COMPRESSIBLE {
            let step = 1e-3;
            let energy = |t: f64| typed(law, &(h + way * (t * step)), None).at(point).unwrap().energy_density;
            let slope = (8.0 * (energy(1.0) - energy(-1.0)) - (energy(2.0) - energy(-2.0))) / (12.0 * step);
            let state = typed(law, &h, None).at(point).unwrap();
            let f = state.deformation();
            let piola = state.stress.to_matrix() * f.try_inverse().unwrap().transpose() * state.volume_ratio;
            let work = piola.component_mul(&way).sum();
            prop_assert!((slope - work).abs() < 1e-9 * piola.amax().max(1.0), "{law} {slope} {work}");
        }
    }
}

#[track_caller]
fn same_state(a: &State, b: &State, digits: f64) {
    let size = a.stress.to_matrix().amax();
    assert!(
        (a.stress.to_matrix() - b.stress.to_matrix()).amax() < digits * size,
        "{} {}",
        a.stress.to_matrix(),
        b.stress.to_matrix()
    );
    assert!((a.displacement - b.displacement).amax() < digits * a.displacement.amax().max(1e-3));
    assert!((a.displacement_gradient - b.displacement_gradient).amax() < digits);
    assert!((a.pressure - b.pressure).abs() < digits * size);
    assert!((a.energy_density - b.energy_density).abs() < digits * a.energy_density.abs());
}

// Rivlin's twisted cylinder, typed: u by sines, p = mu D^2 ((R0^2 - R^2)/2 - R^2/3). Red when the pressure of a field is the
// multiplier, or its divergence forgets grad p.
#[test]
fn torsion_typed_as_a_field_is_the_closed_form() {
    let law = "m: { neo-Hookean: { mu: 0.4 } }";
    let field = solved(
        law,
        "stated-field: { displacement: { x: \"X*(cos(D*Z)-1) - Y*sin(D*Z)\", y: \"X*sin(D*Z) + Y*(cos(D*Z)-1)\", z: \"0\" }, \
         constants: { D: 0.3, mu: 0.4, R0: 2 }, pressure: \"mu*D^2*((R0^2 - R^2)/2 - R^2/3)\", material: m }",
    );
    let closed = solved(
        law,
        "torsion-extension: { outer-radius: 2, axial-stretch: 1, twist: 0.3, material: m }",
    );
    for point in [
        Point::new(0.5, 0.0, 0.0),
        Point::new(-0.9, 1.3, 0.7),
        Point::new(1.2, -1.6, -2.0),
    ] {
        same_state(&closed.at(point).unwrap(), &field.at(point).unwrap(), 1e-13);
        let force = field.body_force(point).unwrap().amax();
        assert!(force < 1e-15, "{force:e}");
    }
}

// Compressible and incompressible homogeneous states, typed. Red when free directions are not free.
#[test]
fn homogeneous_states_typed_as_fields_are_themselves() {
    let point = Point::new(0.7, -0.4, 0.9);
    for law in COMPRESSIBLE {
        for mode in [
            "uniaxial: { stretch: 1.4 }",
            "equibiaxial: { stretch: 0.8 }",
            "planar: { stretch: 1.3 }",
            "simple-shear: { shear: 0.5 }",
        ] {
            let closed = solved(
                &format!("m: {{ {law} }}"),
                &format!("homogeneous: {{ {mode}, material: m }}"),
            )
            .at(point)
            .unwrap();
            let field = typed(law, &closed.displacement_gradient, None);
            same_state(&closed, &field.at(point).unwrap(), 1e-13);
            assert!(field.body_force(point).unwrap().amax() < 1e-14);
        }
    }
    let rubber = "Mooney-Rivlin: { c10: 0.3, c01: 0.1 }";
    for mode in ["simple-shear: { shear: 0.5 }", "uniaxial: { stretch: 1.4 }"] {
        let closed = solved(
            &format!("m: {{ {rubber} }}"),
            &format!("homogeneous: {{ {mode}, material: m }}"),
        )
        .at(point)
        .unwrap();
        let field = typed(rubber, &closed.displacement_gradient, Some(closed.pressure));
        same_state(&closed, &field.at(point).unwrap(), 1e-13);
    }
}

// What an unloaded tube gives back is the work of its pressure on the way: E_loaded - E_unloaded = P pi A (u_loaded - u_unloaded).
// Red when the residual state is that of another unloading, or its energy counts the plastic work.
#[test]
fn an_elastic_plastic_tube_gives_back_its_elastic_work() {
    for (outer, pressure) in [(12.0, 0.08), (16.0, 0.12), (24.0, 0.2)] {
        let tube = |stage: &str| {
            let problem = format!(
                "elastic-plastic-tube: {{ inner-radius: 8, outer-radius: {outer}, material: plastic, inner-pressure: {pressure}, stage: {stage} }}"
            );
            solved(ROUND, &problem)
        };
        let (loaded, unloaded) = (tube("loaded"), tube("unloaded"));
        let given = total(&loaded, "strain_energy") - total(&unloaded, "strain_energy");
        let work = pressure * PI * 8.0 * (u(&loaded, 8.0) - u(&unloaded, 8.0));
        println!("B {outer}: {given:e} {work:e}");
        assert!((given / work - 1.0).abs() < 1e-12, "{given:e} {work:e}");
        // it was plastic
        assert!(u(&unloaded, 8.0) > 1e-7);
    }
}

// No load does work in a heated tube, whatever holds its ends: twice the energy is -alpha times the integral of T tr(sigma).
#[test]
fn heat_does_the_work_of_a_heated_tube() {
    let rule = truebore::numerics::GaussRule::of(40);
    for ends in [
        "plane-strain",
        "plane-stress",
        "{ generalized-plane-strain: { axial-force: 0 } }",
    ] {
        for (hot, cold) in [(80.0, 0.0), (-30.0, 45.0)] {
            let exact = solved(
                ROUND,
                &format!(
                    "heated-tube: {{ inner-radius: 8, outer-radius: 12, material: steel, expansion: 1e-5, inner-temperature: {hot}, outer-temperature: {cold}, ends: {ends} }}"
                ),
            );
            let heat = |r: f64| hot + (cold - hot) * (r / 8.0).ln() / 1.5_f64.ln();
            let given = rule.integrate(8.0, 12.0, |r| {
                -1e-5 * heat(r) * -3.0 * at(&exact, r).pressure * 2.0 * PI * r
            });
            let energy = total(&exact, "strain_energy");
            assert!(
                (given / (2.0 * energy) - 1.0).abs() < 1e-12,
                "{ends}: {given:e} {energy:e}"
            );
        }
    }
}
