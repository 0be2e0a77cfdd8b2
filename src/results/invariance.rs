//! Reading does not depend on how a table is written down, and no bytes make it panic.

use super::tests::folder;
use super::*;
use proptest::prelude::*;
use std::io::Write;

/// Everything a result set says, as text, points sorted.
fn everything(dir: &std::path::Path) -> String {
    let set = ResultSet::open(dir, "r", &Reading::default()).unwrap();
    let nodes = set.nodes().unwrap();
    let elements = set.elements().unwrap();
    let mut text = format!(
        "{:?} {:?} {:?}\n",
        nodes.ids, nodes.positions, nodes.displacement
    );
    for e in 0..elements.len() {
        let list = elements.nodes(e);
        text += &format!(
            "{} {:?} {list:?} {}\n",
            elements.ids[e],
            elements.shapes[e],
            elements.region(e)
        );
    }
    let mut rows = Vec::new();
    let keep = &mut |b: &PointBlock| {
        for i in 0..b.len() {
            let (weight, stress) = (b.weight.as_ref().unwrap()[i], b.stress.as_ref().unwrap()[i]);
            rows.push(format!(
                "{} {} {:?} {weight} {stress:?}",
                b.element[i], b.point[i], b.position[i]
            ));
        }
        Ok(())
    };
    let pass = set.points().unwrap().for_each_block(3, keep).unwrap();
    rows.sort();
    let coverage = sanity::check_points(&set).unwrap().unwrap();
    format!(
        "{text}{}\n{} {:?}",
        rows.join("\n"),
        pass.points,
        coverage.ratio.map(|r| (r * 1e12).round())
    )
}

fn sound(name: &str) -> String {
    let path = format!(
        "{}/tests/data/broken-csv/sound/{name}",
        env!("CARGO_MANIFEST_DIR")
    );
    std::fs::read_to_string(path).unwrap()
}

/// How a table is written down.
#[derive(Debug, Clone)]
struct Dress {
    order: Vec<usize>,
    parts: usize,
    gz: bool,
    crlf: bool,
    bom: bool,
    comment: bool,
    final_newline: bool,
}

fn dress() -> impl Strategy<Value = Dress> {
    let order = Just((0..8).collect::<Vec<usize>>()).prop_shuffle();
    (order, 1usize..4, any::<[bool; 5]>()).prop_map(
        |(order, parts, [gz, crlf, bom, comment, final_newline])| Dress {
            order,
            parts,
            gz,
            crlf,
            bom,
            comment,
            final_newline,
        },
    )
}

fn write_dressed(dir: &std::path::Path, table: &str, text: &str, dress: &Dress) {
    let mut lines = text.lines();
    let header = lines.next().unwrap();
    let rows: Vec<&str> = lines.collect();
    let order: Vec<usize> = dress
        .order
        .iter()
        .copied()
        .filter(|&i| i < rows.len())
        .collect();
    let size = order.len().div_ceil(dress.parts);
    for (n, piece) in order.chunks(size).enumerate() {
        let mut out = String::new();
        if dress.bom {
            out.push('\u{feff}');
        }
        if dress.comment {
            out += "# made by a solver, \"quoted\n";
        }
        out += header;
        for &i in piece {
            out += "\n";
            out += rows[i];
        }
        if dress.final_newline {
            out += "\n";
        }
        if dress.crlf {
            out = out.replace('\n', "\r\n");
        }
        let part = if order.len() > size {
            format!(".part-{:04}", n + 1)
        } else {
            String::new()
        };
        let ending = if dress.gz { ".csv.gz" } else { ".csv" };
        let mut file = std::fs::File::create(dir.join(format!("{table}{part}{ending}"))).unwrap();
        if dress.gz {
            let mut gz = flate2::write::GzEncoder::new(file, flate2::Compression::fast());
            gz.write_all(out.as_bytes()).unwrap();
            gz.finish().unwrap();
        } else {
            file.write_all(out.as_bytes()).unwrap();
        }
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(64))]

    #[test]
    fn reading_does_not_depend_on_order_parts_compression_or_line_ends(
        nodes in dress(), elements in dress(), points in dress(),
    ) {
        let plain = tempfile::tempdir().unwrap();
        let dressed = tempfile::tempdir().unwrap();
        for (table, dress) in [("nodes", &nodes), ("elements", &elements), ("points", &points)] {
            let text = sound(&format!("{table}.csv"));
            std::fs::write(plain.path().join(format!("{table}.csv")), &text).unwrap();
            write_dressed(dressed.path(), table, &text, dress);
        }
        prop_assert_eq!(everything(plain.path()), everything(dressed.path()));
    }

    #[test]
    fn any_bytes_are_read_or_refused_but_never_a_panic(
        data in proptest::collection::vec(prop_oneof![
            Just(b','), Just(b'\n'), Just(b'"'), Just(b'1'), Just(b'-'), Just(b'#'), Just(b'\r'), any::<u8>(),
        ], 0..200),
        table in 0usize..4,
        headed in any::<bool>(),
    ) {
        let name = TableName::ALL[table].name();
        let text = sound(&format!("{name}.csv"));
        let mut bytes = if headed { text.lines().next().unwrap().as_bytes().to_vec() } else { Vec::new() };
        bytes.push(b'\n');
        bytes.extend(data);
        let dir = folder(&[(&format!("{name}.csv"), &bytes)]);
        if let Ok(set) = ResultSet::open(dir.path(), "r", &Reading::default()) {
            let _ = sanity::check_mesh(&set);
            if let Some(points) = set.points() {
                let _ = points.for_each_block(2, &mut |_| Ok(()));
            }
        }
    }
}
