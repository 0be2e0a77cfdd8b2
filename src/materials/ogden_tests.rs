//! Tests of the Ogden law.

use super::*;
use crate::materials::{Constant, MooneyRivlin, NeoHookean, build};

fn law(name: &str, mu: &[f64], alpha: &[f64]) -> Result<Material, Problem> {
    let values = [("mu", mu), ("alpha", alpha)];
    let values = values.map(|(n, v)| (n.to_string(), Constant::List(v.to_vec())));
    build(name, &values)
}

/// Ogden's fit of Treloar's rubber, kgf/cm2 (from memory).
const TRELOAR: ([f64; 3], [f64; 3]) = ([6.3, 0.012, -0.1], [1.3, 5.0, -2.0]);

// Nominal stresses of these constants, recomputed from the closed form at 30 digits. Red when mu is read as a modulus.
#[test]
fn treloars_rubber_has_its_published_stresses() {
    let Ok(Material::Incompressible(law)) = law("Ogden", &TRELOAR.0, &TRELOAR.1) else {
        panic!("refused");
    };
    assert!((law.shear_modulus() - 4.225).abs() < 1e-14);
    for (stretch, nominal, half_unit) in [
        (1.5_f64, 4.016169789, 5e-10),
        (2.0, 6.027216156, 5e-10),
        (3.0, 8.799260976, 5e-10),
        (5.0, 17.36666445, 5e-9),
        (7.0, 39.95221639, 5e-9),
    ] {
        let got = law.at(0.0, stretch.ln()).axial / stretch;
        assert!((got - nominal).abs() < half_unit, "{stretch}: {got}");
    }
    for (stretch, nominal, half_unit) in [(2.0_f64, 8.216147705, 5e-10), (3.0, 12.3070489, 5e-8)] {
        // lt = lz = l, lr = l^-2
        let got = law.at(3.0 * stretch.ln(), stretch.ln());
        assert!((got.axial / stretch - nominal).abs() < half_unit, "{got:?}");
        assert!((got.hoop / stretch - nominal).abs() < half_unit, "{got:?}");
    }
}

// alpha = 2 is neo-Hookean, 2 and -2 Mooney-Rivlin; both pages' factors. Red when a factor alpha is lost.
#[test]
fn special_exponents_are_the_older_laws() {
    let (d, e) = (0.9, -0.3);
    let near = |a: Differences<f64>, b: Differences<f64>| {
        for (a, b) in [
            (a.hoop, b.hoop),
            (a.axial, b.axial),
            (a.reduced, b.reduced),
            (a.energy, b.energy),
        ] {
            assert!((a - b).abs() < 4e-15 * a.abs(), "{a} {b}");
        }
    };
    let plain = NeoHookean { mu: 0.4 }.differences(d, e);
    for name in ["Ogden", "Ogden-moduli"] {
        let Ok(Material::Incompressible(one)) = law(name, &[0.4], &[2.0]) else {
            panic!("refused");
        };
        near(one.at(d, e), plain);
    }
    let plain = MooneyRivlin { c10: 0.3, c01: 0.2 }.differences(d, e);
    for (name, mu) in [("Ogden", [0.6, -0.4]), ("Ogden-moduli", [0.6, 0.4])] {
        let Ok(Material::Incompressible(two)) = law(name, &mu, &[2.0, -2.0]) else {
            panic!("refused");
        };
        near(two.at(d, e), plain);
        assert!((two.shear_modulus() - 1.0).abs() < 1e-15);
    }
}

// Red when a rule is dropped, or a sound set of constants refused.
#[test]
fn unsound_constants_are_refused_with_the_nearest_sound_ones() {
    for (mu, alpha, parameter, says) in [
        (vec![], vec![], "mu", "0 values of mu"),
        (
            vec![1.0, 2.0],
            vec![1.0],
            "alpha",
            "2 values of mu and 1 of alpha",
        ),
        (vec![1.0], vec![0.0], "alpha", "exponent 0"),
        (vec![1.0], vec![-51.0], "alpha", "|alpha| <= 50"),
        (vec![1.0], vec![-2.0], "mu", "no stiffness"),
        (vec![0.0], vec![2.0], "mu", "no stiffness"),
        (
            vec![1.0, -0.1],
            vec![2.0, 4.0],
            "mu",
            "without bound in tension",
        ),
        (
            vec![1.0, 0.1],
            vec![2.0, -1.0],
            "mu",
            "without bound in compression",
        ),
        (
            vec![1.0, -0.4, 0.02],
            vec![1.0, 2.0, 4.0],
            "mu",
            "term 2 = -0.4 takes stiffness away",
        ),
    ] {
        let problem = law("Ogden", &mu, &alpha).expect_err(says);
        assert_eq!(problem.parameter, parameter, "{problem}");
        assert!(problem.message.contains(says), "{problem}");
        assert!(problem.hint.contains("nearest admissible"), "{problem}");
    }
}

// 0.9 (0.5 l + 0.2 l^4) touches q l^2 where l^3 = 1.25: there q = 0.9 * 0.75/l.
#[test]
fn the_nearest_admissible_value_is_admissible_and_near() {
    let made = |middle: f64| law("Ogden-moduli", &[0.5, -middle, 0.2], &[1.0, 2.0, 4.0]);
    let problem = made(0.69).expect_err("unsound");
    let hint = problem.hint.rsplit(' ').next().unwrap();
    let nearest: f64 = -hint.parse::<f64>().unwrap();
    let exact = 0.9 * 0.5 * (1.0 + 0.5) * 1.25_f64.cbrt().recip();
    assert!(nearest < exact && nearest > 0.999 * exact, "{problem}");
    assert!(made(nearest).is_ok() && made(1.001 * exact).is_err());
    // held in by both sides: stiffer than it is soft at every stretch
    assert!(law("Ogden", &[2.0, -0.2, 0.1], &[1.0, 2.0, 4.0]).is_ok());
}
