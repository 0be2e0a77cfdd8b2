//! Stress differences and energies of the laws against many-digit values from plain energies of principal stretches
//! (tests/oracles/laws/make_law_values.py), at strains from 1e-9 to 3. Prints the digits of every law (`--nocapture`).

use std::collections::BTreeMap;
use std::path::Path;
use truebore::materials::{self, Constant, Material};

type Row = BTreeMap<String, String>;

fn constants(row: &Row) -> Vec<(String, Constant)> {
    let pairs = row["constants"].split("; ").map(|pair| {
        let (name, values) = pair.split_once(' ').unwrap();
        let values: Vec<f64> = values.split(' ').map(|v| v.parse().unwrap()).collect();
        let list = row["law"].starts_with("Ogden");
        let value = if list {
            Constant::List(values)
        } else {
            Constant::Number(values[0])
        };
        (name.to_string(), value)
    });
    pairs.collect()
}

// Every value to its own size, but for what the law itself says it magnifies of a round-off of the strain; the axial
// and the reduced difference may pass through zero, and are held to the larger of the stresses. Red when a form loses
// digits at small strain, near a lock or where an exponent is large.
#[test]
fn laws_have_their_digits_at_every_strain() {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/oracles/laws/values.csv");
    let mut reader = csv::Reader::from_path(path).unwrap();
    let mut worst: BTreeMap<(String, &str), (f64, String)> = BTreeMap::new();
    let mut count: BTreeMap<String, usize> = BTreeMap::new();
    let mut wrong = Vec::new();
    for row in reader.deserialize() {
        let row: Row = row.unwrap();
        let number = |column: &str| row[column].parse::<f64>().unwrap();
        let Ok(Material::Incompressible(law)) = materials::build(&row["law"], &constants(&row))
        else {
            panic!("{row:?}");
        };
        *count.entry(row["law"].clone()).or_default() += 1;
        let (d, e) = (number("d"), number("e"));
        let got = law.at(d, e);
        let stress = number("hoop").abs().max(number("axial").abs());
        let lost = 1.0 + law.hardening(d, e).loss;
        for (what, got, scale) in [
            ("hoop", got.hoop, number("hoop").abs()),
            ("axial", got.axial, stress),
            ("reduced", got.reduced, stress.max(number("reduced").abs())),
            ("energy", got.energy, number("energy")),
        ] {
            let exact = number(what);
            let error = if exact == 0.0 {
                got.abs()
            } else {
                (got - exact).abs() / scale
            };
            let id = format!(
                "{} at {} {}, lost {lost:.1}",
                row["constants"], row["d"], row["e"]
            );
            if error.is_nan() || error > 3e-15 * lost {
                wrong.push(format!("{} {what}: {error:e} {id}", row["law"]));
            }
            let seen = worst
                .entry((row["law"].clone(), what))
                .or_insert((-1.0, String::new()));
            if error > seen.0 {
                *seen = (error, id);
            }
        }
    }
    for ((law, what), (error, id)) in &worst {
        let digits = -error.max(1e-17).log10();
        println!("{law:20} {what:8} {error:9.2e} = {digits:4.1} digits  {id}");
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
    assert!(
        count.len() == 9 && count.values().all(|&n| n > 10),
        "{count:?}"
    );
}
