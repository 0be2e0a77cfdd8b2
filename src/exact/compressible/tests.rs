//! Against the incompressible tube, Lame, work and equilibrium.
use super::*;
use crate::exact::solution::ExactSolution;
use crate::exact::{Ends, Parameters, PressurisedTube};
use crate::materials::{CompressibleNeoHookean, Material, MooneyRivlin, NeoHookean};
use crate::mechanics::Point;

fn split(law: impl IncompressibleLaw, form: VolumetricForm, bulk: f64) -> Compressible {
    let volumetric = Volumetric { form, bulk };
    Compressible::Split { law: Arc::new(law), volumetric }
}
fn soft(bulk: f64) -> Compressible { split(NeoHookean { mu: 1.0 }, VolumetricForm::Quadratic, bulk) }
fn tube(radii: (f64, f64), ends: Ends, law: Compressible, p: f64, q: f64) -> CompressibleTubeProblem {
    CompressibleTubeProblem { inner_radius: radii.0, layers: vec![(radii.1, law)], ends, drive: Drive::InnerPressure(p), outer_pressure: q, load: Load::Follower }
}
fn total(tube: &CompressibleTube, name: &str) -> f64 {
    tube.totals().iter().find(|t| t.name == name).unwrap().value.clone().unwrap()
}

#[test]
fn explore() {
    for k in [1.0, 5.0, 10.0, 100.0, 1e3, 1e4, 1e5, 1e7, 1e12, f64::INFINITY] {
        let law = if k.is_finite() { soft(k) } else { incompressible_layer(Arc::new(NeoHookean{mu:1.0})) };
        let t0 = std::time::Instant::now();
        let t = CompressibleTube::solve(&tube((1.0, 2.0), Ends::PlaneStrain, law, 0.428228409096502, 0.0));
        let dt = t0.elapsed();
        match t {
            Ok(t) => {
                let a = total(&t, "inner_radius");
                println!("K {k:e} a {a:.16} bias {:e} {:?} bound {:?} time {dt:?}\n   {}", (a - 1.5) / 0.5, t.limit(), t.bound(), t.method());
            }
            Err(e) => println!("K {k:e} {e} {dt:?}"),
        }
    }
}
