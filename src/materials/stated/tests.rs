//! Typed energies against the laws they are, by hand or from the catalogue; what is refused.

use super::super::{Demiray, MooneyRivlin, NeoHookean, Yeoh};
use super::read::law;
use super::*;
use crate::materials::{IncompressibleLaw, Problem, Slope};
use proptest::prelude::*;

fn stated(energy: &str, constants: &[(&str, f64)]) -> Result<Stated, Problem> {
    let constants: Vec<_> = constants.iter().map(|(n, v)| (n.to_string(), *v)).collect();
    law(energy, &constants)
}

/// Stress differences and energy written by hand at (d, e).
type Hand = Box<dyn Fn(f64, f64) -> Differences<f64>>;
/// An energy, its constants, and the law by hand.
type Typed<'t> = (&'t str, &'t [(&'t str, f64)], Hand);

fn of(law: impl IncompressibleLaw) -> Hand {
    Box::new(move |d, e| law.at(d, e))
}

/// From dW/dI1, dW/dI2 and W.
fn slopes(i: &Invariants<f64>, w1: f64, w2: f64, energy: f64) -> Differences<f64> {
    Differences {
        hoop: i.hoop(w1, w2),
        axial: i.axial(w1, w2),
        reduced: i.reduced(w1, w2),
        energy,
    }
}

fn gent(mu: f64, jm: f64) -> Hand {
    Box::new(move |d, e| {
        let i = Invariants::at(d, e);
        let (w1, energy) = (
            0.5 * mu / (1.0 - i.i1 / jm),
            -0.5 * mu * jm * (-i.i1 / jm).ln_1p(),
        );
        slopes(&i, if i.i1 < jm { w1 } else { f64::NAN }, 0.0, energy)
    })
}

/// numerics.md's difference form of sum mu/alpha (l1^alpha + l2^alpha + l3^alpha - 3).
fn ogden(terms: &'static [(f64, f64)]) -> Hand {
    Box::new(move |d, e| {
        let mut sum = Differences {
            hoop: 0.0,
            axial: 0.0,
            reduced: 0.0,
            energy: 0.0,
        };
        for &(m, a) in terms {
            let er = -0.5 * (d + e);
            let y = (0.5 * a * e).exp();
            let sinh = (0.25 * a * d).sinh().powi(2);
            sum.hoop += m * (a * er).exp() * (a * d).exp_m1();
            sum.axial += m * (a * er).exp() * (0.5 * a * (3.0 * e + d)).exp_m1();
            sum.reduced += 2.0 * m / y * ((1.5 * a * e).exp_m1() - 2.0 * sinh);
            let stretch = (0.5 * a * e).exp_m1().powi(2) * (y + 2.0) / y;
            sum.energy += m / a * (stretch + 4.0 * sinh / y);
        }
        sum
    })
}

/// mu/2 (I1 - 3) + k1/k2 (exp(k2 E^2) - 1), E = pos(I4 - 1).
fn two_fibre(mu: f64, k1: f64, k2: f64, beta: f64) -> Hand {
    Box::new(move |d, e| {
        let i = Invariants::at(d, e);
        let (c, s) = (beta.cos().powi(2), beta.sin().powi(2));
        let fibre = ((d - e).exp_m1() * c + (2.0 * e).exp_m1() * s).max(0.0);
        let w4 = k1 * fibre * (k2 * fibre * fibre).exp();
        let (hoop, axial) = (4.0 * (d - e).exp() * c * w4, 4.0 * (2.0 * e).exp() * s * w4);
        let base = slopes(&i, 0.5 * mu, 0.0, 0.5 * mu * i.i1);
        Differences {
            hoop: base.hoop + hoop,
            axial: base.axial + axial,
            reduced: base.reduced + 2.0 * axial - hoop,
            energy: base.energy + k1 / k2 * (k2 * fibre * fibre).exp_m1(),
        }
    })
}

/// Typed energy and constants, and the same law by another route.
fn pairs() -> Vec<(Stated, Hand)> {
    let mooney = MooneyRivlin { c10: 0.3, c01: 0.2 };
    let yeoh = Yeoh::three_terms(0.5, -0.01, 1e-3);
    let demiray = Demiray { c: 0.4, b: 1.35 };
    let neo = NeoHookean { mu: 0.4 };
    let mu = [("mu", 0.4)];
    let soft = [("c", 0.4), ("b", 1.35)];
    let fibres = [("mu", 3.0), ("k1", 2.3632), ("k2", 0.8393), ("beta", 0.506)];
    let list: Vec<Typed> = vec![
        ("mu/2*(I1 - 3)", &mu, of(neo)),
        ("0.5*mu*I1 - 1.5*mu", &mu, of(neo)),
        ("mu/2*(l1^2 + l2^2 + l3^2 - 3)", &mu, of(neo)),
        ("0.3*(I1 - 3) + 0.2*(I2 - 3)", &[], of(mooney)),
        (
            "0.3*(l1^2 + l2^2 + l3^2 - 3) + 0.2*(1/l1^2 + 1/l2^2 + 1/l3^2 - 3)",
            &[],
            of(mooney),
        ),
        (
            "0.5*(I1 - 3) - 0.01*(I1 - 3)^2 + 1e-3*(I1 - 3)^3",
            &[],
            of(yeoh),
        ),
        ("c/(2*b)*(exp(b*(I1 - 3)) - 1)", &soft, of(demiray)),
        ("c/(2*b)*expm1(b*(I1 - 3))", &soft, of(demiray)),
        ("-0.4*5/2*ln(1 - (I1 - 3)/5)", &[], gent(0.4, 5.0)),
        (
            "0.3/1.7*(l1^1.7 + l2^1.7 + l3^1.7 - 3)",
            &[],
            ogden(&[(0.3, 1.7)]),
        ),
        (
            "0.63/1.3*(l1^1.3+l2^1.3+l3^1.3-3) + 0.0012/5*(l1^5+l2^5+l3^5-3) + 0.01/2*(l1^-2+l2^-2+l3^-2-3)",
            &[],
            ogden(&[(0.63, 1.3), (0.0012, 5.0), (-0.01, -2.0)]),
        ),
        (
            "mu/2*(I1 - 3) + k1/k2*(exp(k2*pos(I4 - 1)^2) - 1)",
            &fibres,
            two_fibre(3.0, 2.3632, 0.8393, 0.506),
        ),
    ];
    let read = |(energy, constants, hand): Typed| {
        (
            stated(energy, constants).unwrap_or_else(|p| panic!("{energy}: {p}")),
            hand,
        )
    };
    list.into_iter().map(read).collect()
}

/// Largest error of the stresses in parts of the largest difference, and of the energy in parts of itself.
fn apart(found: &Differences<f64>, hand: &Differences<f64>) -> (f64, f64) {
    let size = hand
        .hoop
        .abs()
        .max(hand.axial.abs())
        .max(hand.reduced.abs());
    let stress = (found.hoop - hand.hoop)
        .abs()
        .max((found.axial - hand.axial).abs())
        .max((found.reduced - hand.reduced).abs());
    (stress / size, (found.energy / hand.energy - 1.0).abs())
}

proptest! {
    // Red when a slope, a weight of the fibres or an integral is wrong; 1e-13 covers the exponents' magnified round-off.
    #[test]
    fn typed_laws_are_the_laws(d in -2.0..2.0_f64, e in -1.0..1.0_f64, log_scale in -6.0..0.0_f64) {
        let (d, e) = (d * 10f64.powf(log_scale), e * 10f64.powf(log_scale));
        for (law, hand) in pairs() {
            let (found, hand) = (law.at(d, e), hand(d, e));
            let strain = [hand.hoop, hand.axial, hand.energy];
            if strain.iter().any(|x| !x.is_finite()) {
                prop_assert!(found.hoop.is_nan() && found.energy.is_nan(), "{law:?} beyond the lock");
                continue;
            }
            let lost = 1.0 + IncompressibleLaw::hardening(&law, d, e).loss;
            let (stress, energy) = apart(&found, &hand);
            prop_assert!(stress < 1e-14 * lost, "{} {d} {e}: stress {stress}", law.energy.text());
            prop_assert!(energy < 3e-14 * lost, "{} {d} {e}: energy {energy}", law.energy.text());
        }
    }
}

// Red when the rate of stiffening is not that of the catalogue's law.
#[test]
fn a_typed_exponential_stiffens_as_its_law() {
    let typed = stated("0.4/2.7*(exp(1.35*(I1 - 3)) - 1)", &[]).unwrap();
    let listed = Demiray { c: 0.4, b: 1.35 };
    for (d, e) in [(0.8, 0.1), (-1.2, 0.4), (1e-3, 0.0)] {
        let (a, b): (Hardening, Hardening) = (
            IncompressibleLaw::hardening(&typed, d, e),
            IncompressibleLaw::hardening(&listed, d, e),
        );
        assert!((a.by_d / b.by_d - 1.0).abs() < 1e-13, "{a:?} {b:?}");
        assert!((a.loss / b.loss - 1.0).abs() < 1e-13, "{a:?} {b:?}");
    }
    let constant = stated("0.2*(I1 - 3)", &[]).unwrap();
    assert_eq!(
        IncompressibleLaw::hardening(&constant, 0.8, 0.1),
        Hardening::default()
    );
    let stretches = stated("0.2*(l1^2 + l2^2 + l3^2 - 3)", &[]).unwrap();
    assert_eq!(IncompressibleLaw::hardening(&stretches, 0.8, 0.1).by_d, 0.0);
}

// The switch of the fibres where expm1(d - e) c^2 + expm1(2e) s^2 = 0. Red when the search misses d = 0 or moves.
#[test]
fn fibres_begin_to_act_where_they_are_as_long_as_at_rest() {
    let beta: f64 = 0.6;
    let law = stated(
        "(I1 - 3) + pos(I4 - 1)^2 + pos(I1 - 3.5)^2",
        &[("beta", beta)],
    )
    .unwrap();
    assert!(!IncompressibleLaw::isotropic(&law));
    let ratio = beta.tan().powi(2);
    for e in [0.0_f64, 0.1, -0.2, 1e-9] {
        let expected = e + (-(2.0 * e).exp_m1() * ratio).ln_1p();
        let kinks = IncompressibleLaw::kinks(&law, e);
        assert_eq!(kinks.len(), 3, "{e}: {kinks:?}");
        assert!(
            (kinks[1] - expected).abs() < 1e-16 + 4e-16 * e.abs(),
            "{e}: {kinks:?} {expected}"
        );
        let i1 = Invariants::at(kinks[2], e).i1;
        assert!(
            (i1 - 0.5).abs() < 1e-14 && (kinks[0] + kinks[2]).abs() < 1e-14,
            "{kinks:?}"
        );
    }
    assert!(IncompressibleLaw::kinks(&stated("I1 - 3", &[]).unwrap(), 0.1).is_empty());
}

// A lock written as a logarithm ends; a pole is ended where W is negative beyond it.
#[test]
fn beyond_a_lock_there_is_nothing() {
    for energy in [
        "-ln(1 - (I1 - 3)/5)",
        "(I1 - 3)/(5 - (I1 - 3))",
        "-ln(6.4952 - l1*l2 - l2*l3 - l3*l1) + ln(3.4952)",
    ] {
        let law = stated(energy, &[]).unwrap();
        assert!(law.at(1.0, 0.0).hoop.is_finite(), "{energy}");
        let (beyond, slopes) = (law.at(3.5, 0.3), law.with_slopes(3.5, 0.3));
        let nothing = |x: Slope| x.value.is_nan() && x.by_d.is_nan();
        assert!(
            beyond.axial.is_nan() && beyond.reduced.is_nan() && beyond.energy.is_nan(),
            "{energy}"
        );
        assert!(nothing(slopes.hoop) && nothing(slopes.energy), "{energy}");
    }
}

// Red when a check is dropped.
#[test]
fn what_is_no_energy_is_refused_where_it_is_wrong() {
    let mu: &[(&str, f64)] = &[("mu", 0.4)];
    for (energy, constants, parameter, says) in [
        (
            "mu/2*(I1 - 2)",
            mu,
            "energy",
            "the energy of the unstrained material is 0.2, it must be zero",
        ),
        (
            "mu/2*(3 - I1)",
            mu,
            "energy",
            "the shear modulus of the unstrained material is -0.4, it must be positive",
        ),
        (
            "mu*(I1 - 3)^2",
            mu,
            "energy",
            "the shear modulus of the unstrained material is 0",
        ),
        (
            "mu*pos(I1 - 3)",
            mu,
            "energy",
            "the shear modulus of the unstrained material is 0",
        ),
        ("mu + 2", mu, "energy", "does not depend on the deformation"),
        (
            "mu*(I1 - 3)*ln(I2 - 3)",
            mu,
            "energy",
            "the energy of the unstrained material is NaN",
        ),
        (
            "mu*(I1 - 3) + (I1 - 3)^1.5",
            mu,
            "energy",
            "stiffness of the unstrained material is not finite",
        ),
        (
            "mu/2*(I1 - 3) + c",
            mu,
            "energy",
            "unknown name \"c\" at character 17, after \"mu/2*(I1 - 3) + \"",
        ),
        (
            "mu/2*(I1 - 3))",
            mu,
            "energy",
            "found \")\" at character 14",
        ),
        (
            "0.2*(I1 - 3)",
            mu,
            "constants.mu",
            "the constant mu does not occur",
        ),
        (
            "mu*(I1 - 3) + mu*(I4 - 1)^2",
            mu,
            "energy",
            "beta is not among the constants",
        ),
        (
            "I1 - 3 + (I4 - 1)^2",
            &[("beta", 40.0)],
            "constants.beta",
            "outside 0 <= beta <= pi/2",
        ),
        (
            "I1 - 3 + (I4 - 1)",
            &[("beta", 0.4)],
            "energy",
            "dW/dI4 of the unstrained material is 1",
        ),
        (
            "(I4 - 1)^2",
            &[("beta", 0.4)],
            "energy",
            "shear modulus of the unstrained material is 0",
        ),
        (
            "I1 - 3",
            &[("beta", 0.4)],
            "constants.beta",
            "does not occur",
        ),
        (
            "l1^2 + l2^2 + 1.001*l3^2 - 3.001",
            &[],
            "energy",
            "does not depend on the order of l1, l2, l3",
        ),
        ("(l1 - 1)^2", &[], "energy", "does not depend on the order"),
        (
            "l1^2 + l2^2 + l3^2 - 3 + (I4-1)^2",
            &[],
            "energy",
            "both stretches and I4",
        ),
        (
            "pos(l1 - 1)^2 + pos(l2 - 1)^2 + pos(l3 - 1)^2",
            &[],
            "energy",
            "pos() of stretches",
        ),
        (
            "I1 - 3",
            &[("I1", 0.4)],
            "constants.I1",
            "a variable has this name",
        ),
        (
            "I1 - 3",
            &[("exp", 0.4)],
            "constants.exp",
            "a function has this name",
        ),
    ] {
        let problem = stated(energy, constants).expect_err(energy);
        assert!(problem.message.contains(says), "{energy}: {problem}");
        assert_eq!(problem.parameter, parameter, "{energy}");
        assert!(!problem.hint.is_empty(), "{energy}");
    }
}

#[test]
fn the_modulus_is_that_of_small_strain() {
    for (energy, modulus) in [
        ("0.3*(I1 - 3) + 0.2*(I2 - 3)", 1.0),
        (
            "0.5*(l1^1.7 + l2^1.7 + l3^1.7 - 3) + I1 - 3",
            0.5 * 1.7 * 1.7 / 2.0 + 2.0,
        ),
    ] {
        let law = stated(energy, &[]).unwrap();
        assert!(
            (IncompressibleLaw::shear_modulus(&law) - modulus).abs() < 1e-15,
            "{energy}: {}",
            law.modulus
        );
    }
    let law = stated("mu/2*(I1 - 3) + (I4 - 1)^2", &[("mu", 0.4), ("beta", 0.5)]).unwrap();
    assert!(
        IncompressibleLaw::energy_text(&law)
            .starts_with("W = mu/2*(I1 - 3) + (I4 - 1)^2, with mu = 0.4, beta = 0.5; I4 =")
    );
}
