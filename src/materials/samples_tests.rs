//! Sound examples of every incompressible law, for the tests that hold for all of them.

use super::{Constant, IncompressibleLaw, Material, MaterialKind, build, entries, find};
use std::sync::Arc;

type Constants = &'static [(&'static str, f64)];

/// (law, sets of plain numbers).
const NUMBERS: &[(&str, &[Constants])] = &[
    ("neo-Hookean", &[&[("mu", 0.4)], &[("mu", 7e3)]]),
    (
        "Mooney-Rivlin",
        &[
            &[("c10", 0.3), ("c01", 0.2)],
            &[("c10", 0.0), ("c01", 0.2)],
            &[("c10", 0.7), ("c01", 0.7)],
        ],
    ),
    (
        "Yeoh",
        &[
            &[("c10", 0.5), ("c20", -0.01), ("c30", 1e-3)],
            &[("c10", 0.7), ("c20", 0.7), ("c30", 0.7)],
            &[("c10", 0.3), ("c20", -0.2), ("c30", 0.1)],
            &[("c10", 0.5), ("c20", -0.02), ("c30", 0.0), ("c50", 1e-4)],
        ],
    ),
    (
        "polynomial",
        &[
            &[("c10", 0.3), ("c01", 0.2), ("c11", 0.05), ("c02", 0.01)],
            &[("c01", 0.4), ("c20", 0.03), ("c12", 1e-3)],
            &[("c10", 0.5), ("c20", -0.02), ("c30", 1e-3), ("c01", 0.1)],
        ],
    ),
    (
        "Demiray",
        &[&[("c", 0.4), ("b", 8.35)], &[("c", 0.7), ("b", 0.7)]],
    ),
    (
        "Gent",
        &[&[("mu", 0.4), ("Jm", 97.2)], &[("mu", 0.7), ("Jm", 2.3)]],
    ),
    (
        "Arruda-Boyce",
        &[
            &[("mu", 0.4), ("N", 26.5)],
            &[("mu", 0.7), ("N", 1.3)],
            &[("mu", 0.7), ("N", 5.0)],
        ],
    ),
    (
        "Arruda-Boyce-series",
        &[&[("mu", 0.4), ("N", 26.5)], &[("mu", 0.7), ("N", 1.3)]],
    ),
    (
        "two-fibre",
        &[
            &[("mu", 0.4), ("k1", 0.5), ("k2", 0.8), ("beta", 0.5)],
            &[("mu", 0.3), ("k1", 2.3), ("k2", 0.7), ("beta", -1.08)],
            &[("mu", 0.7), ("k1", 0.0), ("k2", 0.7), ("beta", 0.7)],
            &[("mu", 0.4), ("k1", 0.3), ("k2", 0.2), ("beta", 0.0)],
        ],
    ),
];

/// Energies of the law `stated`.
const STATED: &[&str] = &[
    "0.2*(I1 - 3) + 0.01*(I2 - 3)^2",
    "0.1*I1 - 0.3 + 0.05*(I2 - 3)",
    "0.4/0.9*(exp(0.45*(I1 - 3)) - 1)",
    "0.3/1.7*(l1^1.7 + l2^1.7 + l3^1.7 - 3) + 0.1*(l1^-2 + l2^-2 + l3^-2 - 3)",
];

type Lists = (&'static [f64], &'static [f64]);

/// (law, sets of mu and alpha).
const LISTS: &[(&str, &[Lists])] = &[
    (
        "Ogden",
        &[
            (&[6.3, 0.012, -0.1], &[1.3, 5.0, -2.0]),
            (&[0.4], &[2.0]),
            (&[0.1, -0.05], &[10.0, -10.0]),
            (&[2.0, -0.2, 0.1], &[1.0, 2.0, 4.0]),
            (&[-0.4], &[-0.3]),
        ],
    ),
    (
        "Ogden-moduli",
        &[
            (&[4.1, 0.03, 0.1], &[1.3, 5.0, -2.0]),
            (&[0.5, -0.6, 0.2], &[1.0, 2.0, 4.0]),
        ],
    ),
];

/// All of them.
pub(crate) fn incompressible_laws() -> Vec<Arc<dyn IncompressibleLaw>> {
    let numbers = NUMBERS.iter().flat_map(|&(name, sets)| {
        sets.iter().map(move |set| {
            let values = set
                .iter()
                .map(|&(n, v)| (n.to_string(), Constant::Number(v)));
            (name, values.collect::<Vec<_>>())
        })
    });
    let lists = LISTS.iter().flat_map(|&(name, sets)| {
        sets.iter().map(move |&(mu, alpha)| {
            let pairs = [("mu", mu), ("alpha", alpha)];
            let values = pairs.map(|(n, v)| (n.to_string(), Constant::List(v.to_vec())));
            (name, values.to_vec())
        })
    });
    let stated = STATED.iter().map(|&energy| {
        let values = vec![("energy".to_string(), Constant::from(energy))];
        ("stated", values)
    });
    let built =
        numbers
            .chain(lists)
            .chain(stated)
            .map(|(name, values)| match build(name, &values) {
                Ok(Material::Incompressible(law)) => law,
                other => panic!("{name} {values:?}: {other:?}"),
            });
    built.collect()
}

/// A sound material of any law of the catalogue.
pub(crate) fn example(name: &str) -> Material {
    let found = incompressible_laws()
        .into_iter()
        .find(|law| law.name() == name);
    if let Some(law) = found {
        return Material::Incompressible(law);
    }
    let entry = find(name).unwrap();
    let values = entry.parameters.iter().map(|p| (p.name.to_string(), 0.4));
    build(name, &values.collect::<Vec<_>>()).unwrap()
}

#[test]
fn every_law_has_samples() {
    let laws = incompressible_laws();
    for entry in entries() {
        assert_eq!(example(entry.name).kind(), entry.kind);
        let count = laws.iter().filter(|law| law.name() == entry.name).count();
        let wanted = entry.kind == MaterialKind::Incompressible;
        assert!(!wanted || count >= 2, "{} has {count} samples", entry.name);
    }
}
