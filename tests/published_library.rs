//! Values published for, or recomputed from the published closed forms of, the problems of the library, by the suite a user would
//! write. Tubes and rings with a row of references/published-values.csv or published-references.csv stand in `tests/published.rs`;
//! lock stretches of the Gent law also in `materials/locking.rs`, the stress concentration 3 of a hole in
//! `exact/small_strain/plate_with_hole.rs`.
//!
//! Ogden's constants of Treloar's rubber are in kgf/cm2 (from memory; they reproduce Treloar's 8.80 at a stretch of 3).

#[path = "common/solved.rs"]
mod solved;

use solved::{at, cases, prints, solved, total, u};
use std::f64::consts::PI;

#[track_caller]
fn near(got: f64, expected: f64, relative: f64) {
    let error = (got / expected - 1.0).abs();
    assert!(error <= relative, "{got} is not {expected}: {error:.1e}");
}

const NEO: &str = "m: { neo-Hookean: { mu: 1 } }";
const TRELOAR: &str = "m: { Ogden: { mu: [6.3, 0.012, -0.1], alpha: [1.3, 5, -2] } }";
const GENT: &str = "m: { Gent: { mu: 1, Jm: 97.2 } }";

/// A tube of bore 1 with its inner wall at a stretch.
fn tube(outer: f64, axial: f64, stretch: f64) -> String {
    format!(
        "pressurised-tube: {{ inner-radius: 1, outer-radius: {outer}, ends: {{ fixed-stretch: {{ axial-stretch: {axial} }} }}, \
         material: m, inner-wall-stretch: {stretch} }}"
    )
}

// Red when a law's constants, the axial stretch or the drive is misread.
#[test]
fn pressures_of_stretched_tubes() {
    let artery = "m: { Demiray: { c: 44.2, b: 8.35 } }";
    let tight = "m: { Gent: { mu: 1, Jm: 2.3 } }";
    for (what, law, outer, bore, short, long, long_stretch) in [
        (
            "neo-Hookean",
            NEO,
            2.0,
            1.5,
            ".428228409096502",
            ".404359989535088",
            1.2,
        ),
        (
            "Treloar's rubber",
            TRELOAR,
            2.0,
            1.5,
            "1.7629575103139",
            "1.7607672451492",
            1.2,
        ),
        (
            "Gent 97.2",
            GENT,
            2.0,
            1.5,
            ".42963636413328",
            ".40654008244309",
            1.2,
        ),
        (
            "Gent 2.3",
            tight,
            2.0,
            1.5,
            ".50125770342228",
            ".5319313794376",
            1.2,
        ),
        // W = a/b (exp(b (I1-3)/2) - 1) of the source: c = a, our b half of its
        (
            "Demiray and Delfino",
            artery,
            1.5,
            1.2,
            "14.169848159638",
            "27.188107476916",
            1.1,
        ),
    ] {
        for (axial, printed) in [(1.0, short), (long_stretch, long)] {
            let exact = solved(law, &tube(outer, axial, bore));
            prints(
                &format!("{what} {axial}"),
                total(&exact, "inner_pressure"),
                printed,
            );
        }
    }
}

// Stored energy pi mu (a^2 - A^2) ln(la/lb), whose slope by the volume of the bore is the pressure.
#[test]
fn the_energy_of_a_neo_hookean_tube() {
    let energy = |stretch: f64| total(&solved(NEO, &tube(2.0, 1.0, stretch)), "strain_energy");
    for stretch in [1.0001, 1.2, 2.0, 4.0] {
        let outer = ((4.0 + stretch * stretch - 1.0) / 4.0_f64).sqrt();
        near(
            energy(stretch),
            PI * (stretch * stretch - 1.0) * (stretch / outer).ln(),
            1e-11,
        );
        let step = 1e-5 * stretch;
        let slope = (energy(stretch + step) - energy(stretch - step)) / (2.0 * step);
        let pressure = total(&solved(NEO, &tube(2.0, 1.0, stretch)), "inner_pressure");
        near(slope / (2.0 * PI * stretch), pressure, 3e-6);
    }
}

/// Relative change of the displacement of the bore by a finite bulk modulus.
fn bias(law: &str) -> f64 {
    let problem = "pressurised-tube: { inner-radius: 1, outer-radius: 2, ends: plane-strain, material: m, inner-pressure: 0.428228409096502 }";
    let exact = solved(&format!("m: {{ {law} }}"), problem);
    u(&exact, 1.0) / 0.5 - 1.0
}

fn split(form: &str, bulk: f64) -> String {
    format!("neo-Hookean: {{ mu: 1, volumetric: {{ {form}: {{ K: {bulk} }} }} }}")
}

// Red when a volumetric energy is another one, or the split is lost.
#[test]
fn penalty_bias_of_the_bore() {
    for (bulk, printed) in [
        (10.0, "7.86e-2"),
        (1e2, "7.87e-3"),
        (1e3, "7.88e-4"),
        (1e4, "7.876e-5"),
    ] {
        prints(
            &format!("K {bulk}"),
            bias(&split("quadratic", bulk)),
            printed,
        );
    }
    prints("log-squared", bias(&split("log-squared", 100.0)), "7.91e-3");
    // the small-strain formula says 0.25 mu/K, a third of it
    near(bias(&split("quadratic", 1e5)) * 1e5, 0.7876, 1e-4);
    // every form of U has this first-order constant, the coupled law another
    let first = bias(&split("quadratic", 1e6));
    for form in ["quadratic-log", "log-squared", "linear-log"] {
        let (here, there) = (bias(&split(form, 1e6)), bias(&split(form, 1e2)));
        near(here, first, 1e-5);
        assert!(
            (there / bias(&split("quadratic", 1e2)) - 1.0).abs() > 1e-4,
            "{form}"
        );
    }
    let coupled = |bulk: f64| {
        bias(&format!(
            "compressible-neo-Hookean: {{ mu: 1, lambda: {} }}",
            bulk - 2.0 / 3.0
        ))
    };
    let other = coupled(1e6) / first;
    println!("coupled law: {other:.5} of the split ones'");
    assert!((other - 1.0).abs() > 0.05 && (coupled(1e5) / coupled(1e6) / 10.0 - 1.0).abs() < 1e-4);
}

#[test]
fn poissons_ratio_of_a_penalised_law() {
    let problem = "pressurised-tube: { inner-radius: 1, outer-radius: 2, ends: plane-strain, material: m, inner-pressure: 0.1 }";
    let case = &cases(&format!("m: {{ {} }}", split("quadratic", 1e3)), problem).unwrap()[0];
    let nu = case.given.materials()[0].poisson_ratio();
    prints("K/mu 1000", nu, "0.4995");
    assert_eq!(nu, (3e3 - 2.0) / (6e3 + 2.0));
}

// Hill's tube, B/A = 2 (from memory, recomputed): von Mises yields at 0.4330 and collapses at 0.8004 of the yield stress; the
// library's Tresca tube at sqrt(3)/2 of either. Red when one is taken for the other.
#[test]
fn hills_tube_is_trescas_here() {
    let problem = "elastic-plastic-tube: { inner-radius: 1, outer-radius: 2, material: m, inner-pressure: 0.5, stage: loaded }";
    let exact = solved(
        "m: { elastic-perfectly-plastic: { E: 200, nu: 0.3, yield-stress: 1 } }",
        problem,
    );
    let (yields, collapses) = (
        total(&exact, "yield_pressure"),
        total(&exact, "collapse_pressure"),
    );
    let mises = 2.0 / 3.0_f64.sqrt();
    prints("first yield", mises * yields, "0.4330");
    prints("collapse", mises * collapses, "0.8004");
    near(yields, 0.375, 1e-15);
    near(collapses, 2.0_f64.ln(), 1e-15);
    // loaded above first yield the bore carries Tresca's yield stress
    let bore = at(&exact, 1.0).local_stress;
    near(bore.yy - bore.xx, 1.0, 1e-13);
}
