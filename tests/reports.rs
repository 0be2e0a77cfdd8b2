//! Every report format on one outcome that holds all a report may meet.

mod fixture;

use truebore::report::{self, Format, Look};

#[test]
fn dump() {
    for (name, outcome) in [
        ("all", fixture::outcome()),
        ("many", fixture::many(200)),
        ("pass", fixture::all_pass()),
    ] {
        std::fs::write(
            format!("/tmp/rep-{name}.html"),
            report::write(Format::Html, &outcome),
        )
        .unwrap();
        std::fs::write(
            format!("/tmp/rep-{name}.txt"),
            report::terminal::terminal(
                &outcome,
                Look {
                    colour: true,
                    width: 80,
                },
            ),
        )
        .unwrap();
        std::fs::write(
            format!("/tmp/rep-{name}.xml"),
            report::write(Format::Junit, &outcome),
        )
        .unwrap();
        std::fs::write(
            format!("/tmp/rep-{name}.csv"),
            report::write(Format::MeasuresCsv, &outcome),
        )
        .unwrap();
    }
}
