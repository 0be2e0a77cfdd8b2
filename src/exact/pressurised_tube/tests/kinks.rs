//! Fibres that begin to act somewhere inside the wall.

use super::laws::{Fibres, fibres, layer, problem};
use super::*;
use crate::materials::Formula;
use crate::numerics::GaussRule;

/// X where the fibres have their own length, by bisection of their stretch; `None` when that is outside.
fn switch(law: &Fibres, span: f64, g: f64, e: f64) -> Option<f64> {
    let (s, c) = law.angle.sin_cos();
    let strained = |x: f64| {
        let d = ((g.exp() - 1.0) * (-2.0 * x).exp()).ln_1p();
        c * c * (d - e).exp() + s * s * (2.0 * e).exp() - 1.0
    };
    let (mut low, mut high) = (0.0, span);
    if (strained(low) > 0.0) == (strained(high) > 0.0) {
        return None;
    }
    for _ in 0..80 {
        let middle = 0.5 * (low + high);
        if (strained(middle) > 0.0) == (strained(low) > 0.0) {
            low = middle;
        } else {
            high = middle;
        }
    }
    Some(low)
}

/// Pi - Po over `from..span` by many panels on both sides of the kink.
fn many(law: &Fibres, (from, span): (f64, f64), g: f64, e: f64) -> f64 {
    let kink = switch(law, span, g, e).unwrap_or(span).max(from);
    let rule = GaussRule::of(20);
    let f = |x: f64| {
        let q = 1.0 + (g.exp() - 1.0) * (-2.0 * x).exp();
        Formula::differences(law, q.ln(), e).hoop / q
    };
    let mut sum = crate::numerics::CompensatedSum::new();
    for (low, high) in [(from, kink), (kink, span)] {
        let end = |i: usize| low + (high - low) * i as f64 / 100.0;
        for i in 0..100 {
            if high > low {
                sum.add(rule.integrate(end(i), end(i + 1), f));
            }
        }
    }
    sum.value()
}

// Red when the split is left out (1e-7 of the pressure then), or its place is wrong.
#[test]
fn a_kink_inside_the_wall_keeps_its_digits() {
    let (mut inside, mut worst, mut worst_point) = (0, 0.0_f64, 0.0_f64);
    for angle in [0.3, 0.7, 1.1] {
        let law = Fibres {
            mu: 1.0,
            k1: 0.8,
            k2: 0.9,
            angle,
        };
        for ratio in [1.2, 2.0, 6.0] {
            let wall = plain_wall(ratio, Arc::new(law));
            for e in [-0.2, -0.1, -0.05, 0.02, 0.04, 0.15] {
                for g in [-0.6, -0.3, -0.2, -0.1, 0.1, 0.2, 0.3, 0.8, 1.5] {
                    if switch(&law, wall.span, g, e).is_none() {
                        continue;
                    }
                    inside += 1;
                    let all = wall.integrate(g, e, 16);
                    let reference = many(&law, (0.0, wall.span), g, e);
                    worst = worst.max((all.pressure.value - reference).abs() / all.pressure.size);
                    let fields = wall_fields::Fields::new(wall.clone(), g, e, 0.0).unwrap();
                    for i in 0..20 {
                        let radius = 1.0 + (ratio - 1.0) * i as f64 / 20.0;
                        let srr = fields.at_radius(radius).unwrap().stress.xx;
                        let reference = -many(&law, (radius.ln(), wall.span), g, e);
                        worst_point = worst_point.max((srr - reference).abs() / all.pressure.size);
                    }
                }
            }
        }
    }
    println!("{inside} kinks inside: pressure {worst:e}, srr {worst_point:e}");
    assert!(inside > 60, "{inside}");
    assert!(
        worst < 1e-14 && worst_point < 1e-14,
        "{worst:e} {worst_point:e}"
    );
}

// A fibred tube stretched or free, at Tt - Tr != 0 for d = 0. Red when the start is taken at g = 0 for every wall: the
// bore of a stretched fibred tube is not A/sqrt(lz).
#[test]
fn fibred_tubes_start_where_their_pressure_is_zero() {
    for (ends, kinked) in [
        (Ends::FixedStretch { axial_stretch: 1.3 }, true),
        (Ends::FixedStretch { axial_stretch: 0.8 }, true),
        (Ends::GeneralizedPlaneStrain { axial_force: 3.0 }, true),
        (Ends::Closed, false),
        (Ends::PlaneStrain, false),
    ] {
        let tube =
            PressurisedTube::solve(&problem(vec![layer(2.0, fibres(0.6))], ends, 0.0)).unwrap();
        let stretch = total(&tube, "inner_radius") * total(&tube, "axial_stretch").sqrt();
        assert_eq!((stretch - 1.0).abs() > 1e-3, kinked, "{ends:?} {stretch}");
        let at = |radius| tube.fields.at_radius(radius).unwrap().stress;
        assert!(at(1.0).xx.abs() < 1e-14 && at(2.0).xx == 0.0, "{ends:?}");
        if kinked {
            assert!(at(1.0).yy.abs() > 1e-2);
        } else {
            near(stretch, 1.0, 1e-15);
        }
    }
}

// Both states on one curve: what a prescribed bore needs as pressure brings the bore back.
#[test]
fn pressures_of_fibred_bores_bring_the_bores_back() {
    for ends in [
        Ends::Closed,
        Ends::PlaneStrain,
        ends_of(2, 0.9, 0.0),
        ends_of(3, 1.0, -1.0),
        ends_of(3, 1.0, 0.0),
    ] {
        for bore in [0.7, 0.95, 1.0 + 1e-5, 1.02, 1.3, 2.0] {
            let mut given = problem(
                vec![layer(1.3, fibres(0.5)), layer(1.8, fibres(1.0))],
                ends,
                0.0,
            );
            given.drive = Drive::InnerWallStretch(bore);
            let held = PressurisedTube::solve(&given).unwrap();
            given.drive = Drive::InnerPressure(total(&held, "inner_pressure"));
            let loaded = PressurisedTube::solve(&given).unwrap();
            near(total(&loaded, "inner_radius"), bore, 1e-13);
            near(
                total(&loaded, "axial_stretch"),
                total(&held, "axial_stretch"),
                1e-13,
            );
            assert!(
                matches!(held.limit(), Limit::None { .. }),
                "{:?}",
                held.limit()
            );
        }
    }
}
