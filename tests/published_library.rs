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
use std::sync::Arc;
use truebore::exact::ExactSolution;

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

fn sphere(outer: f64, pressure: f64, branch: usize) -> String {
    format!(
        "pressurised-sphere: {{ inner-radius: 1, outer-radius: {outer}, material: m, inner-pressure: {pressure}, branch: {branch} }}"
    )
}

// Red when a branch is numbered wrongly, or a factor of the wall lost.
#[test]
fn pressures_of_spheres() {
    for (law, bore, printed, branch) in [
        (NEO, 1.2, 0.480159779290789, 1),
        (NEO, 1.5, 0.755433118712339, 1),
        (NEO, 2.0, 0.806926603106628, 2),
        (NEO, 3.0, 0.634506675235978, 2),
        (TRELOAR, 1.5, 3.3319310404669, 1),
        (GENT, 1.5, 0.76048783338287, 1),
    ] {
        let exact = solved(law, &sphere(2.0, printed, branch));
        near(total(&exact, "inner_radius"), bore, 2e-13);
    }
    let top = total(&solved(NEO, &sphere(2.0, 0.1, 1)), "limit_pressure");
    prints("maximum", top, ".816423647955");
    // just below it the two bores lie on both sides of the published one
    let bores = [1, 2].map(|branch| {
        total(
            &solved(NEO, &sphere(2.0, top * (1.0 - 1e-9), branch)),
            "inner_radius",
        )
    });
    assert!(bores[0] < 1.82814730478 && bores[1] > 1.82814730478);
    near(0.5 * (bores[0] + bores[1]), 1.82814730478, 1e-8);
}

/// The first maximum of the pressure, or why there is none.
fn limit_of(exact: &Arc<dyn ExactSolution>) -> Result<f64, String> {
    let found = exact.totals().iter().find(|t| t.name == "limit_pressure");
    found.unwrap().value.clone()
}

/// p R/(2 H) of the first maximum as the wall goes to nothing: the two walls' values extrapolated.
fn thin_limit(law: &str) -> f64 {
    let of = |wall: f64| {
        // the radius in the middle of the wall, where the first order is smallest
        let top = total(
            &solved(law, &sphere(1.0 + wall, 0.01 * wall, 1)),
            "limit_pressure",
        );
        top / (2.0 * wall)
    };
    2.0 * of(5e-6) - of(1e-5)
}

// Membrane theory is the limit of the thick sphere. Red when a maximum is missed or is another one's.
#[test]
fn thin_spheres_have_their_published_extrema() {
    near(thin_limit(NEO), 0.6197314512, 1e-9);
    near(thin_limit(TRELOAR), 2.747061541, 1e-9);
    near(thin_limit(GENT), 0.6270407335, 1e-9);
    // minima: the third branch begins there
    let wall = 1e-6;
    for (law, lowest, bore) in [
        (TRELOAR, 1.177764356, 4.320282712),
        (GENT, 0.3560094531, 4.085022979),
    ] {
        let at = |share: f64| cases(law, &sphere(1.0 + wall, share * lowest * 2.0 * wall, 3));
        assert!(at(1.0 - 2e-5).is_err(), "{law}");
        let above = &at(1.0 + 2e-5).unwrap_or_else(|f| panic!("{}", f[0]))[0];
        let reached = total(&above.exact, "inner_radius");
        assert!(reached > bore && reached < 1.05 * bore, "{reached} {bore}");
    }
    // the Gent sphere has a maximum above Jm = 17.63808 only
    let limit = |jm: f64| {
        let law = format!("m: {{ Gent: {{ mu: 1, Jm: {jm} }} }}");
        limit_of(&solved(&law, &sphere(1.0 + wall, 0.1 * wall, 1)))
    };
    assert!(limit(17.639).is_ok(), "{:?}", limit(17.639));
    assert!(limit(17.637).is_err(), "{:?}", limit(17.637));
}

// One Ogden term (mu/alpha) sum(l^alpha), thin sphere: an extremum for -3/2 < alpha < 3 only (Ogden 1972). The source's minimum for
// alpha < 0 is of mu > 0, which has no stiffness: of mu < 0 it is a maximum.
#[test]
fn one_ogden_term_has_its_extrema() {
    let wall = 1e-4;
    for (mu, alpha, has_maximum) in [
        (1.0, 0.5, true),
        (1.0, 2.9, true),
        (1.0, 3.1, false),
        (1.0, 6.0, false),
        (-1.0, -1.4, true),
        (-1.0, -1.6, false),
        (-1.0, -4.0, false),
    ] {
        let law = format!("m: {{ Ogden: {{ mu: [{mu}], alpha: [{alpha}] }} }}");
        let exact = solved(&law, &sphere(1.0 + wall, 1e-3 * wall, 1));
        let limit = limit_of(&exact);
        println!("alpha {alpha}: {limit:?}");
        assert_eq!(limit.is_ok(), has_maximum, "alpha {alpha}: {limit:?}");
    }
}

// A void in a neo-Hookean body: 1.951 mu at B/A = 10, 2.400 at 100, towards 5/2 mu (Gent and Lindley) as (A/B)^(3/4).
#[test]
fn cavities_open_below_five_halves_of_the_modulus() {
    let top = |ratio: f64| total(&solved(NEO, &sphere(ratio, 0.1, 1)), "limit_pressure");
    prints("B/A 10", top(10.0), "1.951");
    prints("B/A 100", top(100.0), "2.400");
    let short = |ratio: f64| 2.5 - top(ratio);
    let rate = (short(100.0) / short(3000.0)).ln() / 30.0_f64.ln();
    println!("5/2 - p/mu at 3000: {:.2e}, rate {rate:.4}", short(3000.0));
    assert!(short(3000.0) > 0.0 && (rate - 0.75).abs() < 0.01, "{rate}");
}

// Rivlin's solid cylinder: M = pi D R^4 (C1 + C2), N = -pi/2 D^2 R^4 (C1 + 2 C2). Red when the Poynting force changes sign.
#[test]
fn rivlins_torsion() {
    let problem =
        "torsion-extension: { outer-radius: 1, axial-stretch: 1, twist: 0.8, material: m }";
    let exact = solved("m: { Mooney-Rivlin: { c10: 0.4, c01: 0.1 } }", problem);
    prints("M", total(&exact, "torque"), "1.25663706144");
    prints("N", total(&exact, "axial_force"), "-.603185789489");
}

fn nominal(law: &str, mode: &str, stretch: f64) -> f64 {
    let exact = solved(
        law,
        &format!("homogeneous: {{ {mode}: {{ stretch: {stretch} }}, material: m }}"),
    );
    at(&exact, 0.5).stress.xx / stretch
}

// Treloar's rubber in Ogden's constants, kgf/cm2.
#[test]
fn nominal_stresses_of_treloars_rubber() {
    for (stretch, printed) in [
        (1.5, "4.016169789"),
        (2.0, "6.027216156"),
        (3.0, "8.799260976"),
        (5.0, "17.36666445"),
        (7.0, "39.95221639"),
    ] {
        prints("uniaxial", nominal(TRELOAR, "uniaxial", stretch), printed);
    }
    prints("Treloar 1944", nominal(TRELOAR, "uniaxial", 3.0), "8.80");
    for (stretch, printed) in [(2.0, "8.216147705"), (3.0, "12.3070489")] {
        prints(
            "equibiaxial",
            nominal(TRELOAR, "equibiaxial", stretch),
            printed,
        );
    }
}

// F/S = 2 w (2+w) (1 + (1+w)^2)/(1+w)^3 (dW/dI1 + dW/dI2) of a block in plane strain.
#[test]
fn a_block_in_plane_strain() {
    for w in [-0.4, 1e-6, 0.3, 2.0_f64] {
        let l = 1.0 + w;
        let w = l - 1.0;
        let expected = 2.0 * 0.5 * w * (2.0 + w) * (1.0 + l * l) / l.powi(3);
        near(
            nominal("m: { Mooney-Rivlin: { c10: 0.4, c01: 0.1 } }", "planar", l),
            expected,
            2e-14,
        );
    }
}

// Red when a state locks at another state's stretch.
#[test]
fn gent_lock_stretches() {
    for (law, lock) in [
        (
            GENT,
            [
                ("uniaxial", 10.0),
                ("equibiaxial", 7.078121276),
                ("planar", 9.959413554),
            ],
        ),
        (
            "m: { Gent: { mu: 1, Jm: 2.3 } }",
            [
                ("uniaxial", 2.083258),
                ("equibiaxial", 1.604546),
                ("planar", 2.013278),
            ],
        ),
    ] {
        for (mode, stretch) in lock {
            let problem = |share: f64| {
                format!(
                    "homogeneous: {{ {mode}: {{ stretch: {} }}, material: m }}",
                    share * stretch
                )
            };
            assert!(cases(law, &problem(1.0 - 1e-6)).is_ok(), "{mode}");
            assert!(cases(law, &problem(1.0 + 1e-6)).is_err(), "{mode}");
        }
    }
}
