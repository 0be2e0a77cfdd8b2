//! Tables of an exact solution as CSV: stations through the wall, values at given points, totals.

use super::plan::CasePlan;
use crate::exact::{ExactSolution, Frame, State};
use crate::input::{Finding, Place};
use crate::mechanics::Point;

/// 17 significant digits: enough to give back the same double.
pub fn digits17(value: f64) -> String {
    // adding zero makes a negative zero a plain one
    format!("{:.16e}", value + 0.0)
}

/// `stations` points along the solution's own line, evenly spaced.
///
/// # Errors
/// When the solution has no value at a station.
pub fn stations(case: &CasePlan, stations: usize) -> Result<String, String> {
    let line = case.exact.line();
    let mut csv = line.columns.join(",") + "\n";
    let (from, to) = (line.from.to_array(), line.to.to_array());
    let along: Vec<Vec<f64>> = (0..3).map(|i| spaced(from[i], to[i], stations)).collect();
    for i in 0..stations {
        let point = Point::new(along[0][i], along[1][i], along[2][i]);
        let state = case.exact.at(point).map_err(|r| r.to_string())?;
        let spherical = case.exact.body().frame() == Frame::Spherical;
        let cells = line
            .columns
            .iter()
            .map(|column| digits17(cell(column, spherical, &point, &state)));
        csv.push_str(&cells.collect::<Vec<_>>().join(","));
        csv.push('\n');
    }
    Ok(csv)
}

/// One column of a station; NaN for a name that no solution may list.
fn cell(column: &str, spherical: bool, point: &Point, state: &State) -> f64 {
    let (x, u) = (point.to_array(), state.displacement);
    let dimensions = if spherical { 3 } else { 2 };
    let square = |v: [f64; 3]| v[..dimensions].iter().map(|c| c * c).sum::<f64>();
    let radius = square(x).sqrt();
    let on_axis = x[1] == 0.0 && u[1] == 0.0 && (!spherical || (x[2] == 0.0 && u[2] == 0.0));
    let deformed = match on_axis {
        true => x[0] + u[0],
        false => square([x[0] + u[0], x[1] + u[1], x[2] + u[2]]).sqrt(),
    };
    // r - R from r^2 - R^2: no cancellation at small displacements
    let outward = || {
        let growth = (0..dimensions)
            .map(|i| (2.0 * x[i] + u[i]) * u[i])
            .sum::<f64>();
        match radius + deformed {
            _ if on_axis => u[0],
            0.0 => 0.0,
            both => growth / both,
        }
    };
    let (s, t) = (state.stress, state.local_stress);
    match column {
        "R" => radius,
        "r" => deformed,
        "u_r" => outward(),
        "X" => x[0],
        "Y" => x[1],
        "Z" => x[2],
        "ux" => u[0],
        "uy" => u[1],
        "uz" => u[2],
        "lambda_r" => state.stretches[0],
        "lambda_t" => state.stretches[1],
        "lambda_z" => state.stretches[2],
        "srr" => t.xx,
        "stt" => t.yy,
        "szz" => s.zz,
        "srt" => t.xy,
        "stz" => t.yz,
        "szr" => t.zx,
        "sxx" => s.xx,
        "syy" => s.yy,
        "sxy" => s.xy,
        "syz" => s.yz,
        "szx" => s.zx,
        "p" => state.pressure,
        "J" => state.volume_ratio,
        "W" => state.energy_density,
        _ => f64::NAN,
    }
}

/// `count` numbers from `from` to `to`, both included exactly; one number is the middle.
pub fn spaced(from: f64, to: f64, count: usize) -> Vec<f64> {
    let at = |i: usize| match (i, count) {
        (_, 1) => 0.5 * (from + to),
        (0, _) => from,
        (i, count) if i + 1 == count => to,
        (i, count) => from + (to - from) * (i as f64 / (count - 1) as f64),
    };
    (0..count).map(at).collect()
}

/// All totals of the full section and unit length.
pub fn totals(case: &CasePlan) -> String {
    let mut csv = String::from("quantity,value\n");
    for total in case.exact.totals() {
        let value = total.value.as_ref().map_or(String::new(), |v| digits17(*v));
        csv.push_str(&format!("{},{value}\n", total.name));
    }
    csv
}

/// A table of points with the exact values behind every row.
#[derive(Debug)]
pub struct PointTable {
    pub csv: String,
    /// Points outside the body, where the formula was continued, and the largest distance.
    pub outside: u64,
    pub outside_distance: f64,
}

/// Evaluates at the `X,Y[,Z]` of a CSV text and appends the exact values to each row.
///
/// # Errors
/// Every fault of the table, up to 20, each with its line.
pub fn at_points(
    exact: &dyn ExactSolution,
    text: &[u8],
    file: &str,
) -> Result<PointTable, Vec<Finding>> {
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .trim(csv::Trim::All)
        .from_reader(text);
    let place = || Place::file(file);
    let unreadable = |e: csv::Error| {
        let line = e.position().map_or(place(), |p| place().line(p.line()));
        vec![
            Finding::refused("csv-syntax", line, e.to_string())
                .hint("every row needs as many cells as the header"),
        ]
    };
    let headers = reader.headers().map_err(unreadable)?.clone();
    let column = |name: &str| headers.iter().position(|h| h == name);
    let (Some(x), Some(y)) = (column("X"), column("Y")) else {
        let found = format!(
            "found the columns {}",
            headers.iter().collect::<Vec<_>>().join(", ")
        );
        let finding = Finding::refused("missing-column", place().line(1), found);
        return Err(vec![finding.expected("columns X and Y, and Z for solids")]);
    };
    let z = column("Z");
    let mut writer = csv::Writer::from_writer(Vec::new());
    let appended = [
        "ux", "uy", "uz", "sxx", "syy", "szz", "sxy", "syz", "szx", "p", "J", "W",
    ];
    let mut table = PointTable {
        csv: String::new(),
        outside: 0,
        outside_distance: 0.0,
    };
    let mut findings = Vec::new();
    let broken = |e: csv::Error| vec![Finding::refused("csv-syntax", place(), e.to_string())];
    writer
        .write_record(headers.iter().chain(appended))
        .map_err(broken)?;
    for record in reader.records() {
        let record = record.map_err(unreadable)?;
        let line = record.position().map_or(0, csv::Position::line);
        let mut coordinate = |column: Option<usize>| -> Option<f64> {
            let Some(column) = column else {
                return Some(0.0);
            };
            let cell = record.get(column).unwrap_or("");
            let number = cell.parse::<f64>().ok().filter(|v| v.is_finite());
            if number.is_none() {
                let at = place().line(line).field(headers.get(column).unwrap_or(""));
                findings.push(Finding::refused(
                    "finite-number",
                    at,
                    format!("\"{cell}\" is not a finite number"),
                ));
            }
            number
        };
        let (Some(px), Some(py), Some(pz)) =
            (coordinate(Some(x)), coordinate(Some(y)), coordinate(z))
        else {
            if findings.len() >= 20 {
                return Err(findings);
            }
            continue;
        };
        let point = Point::new(px, py, pz);
        match exact.at(point) {
            Ok(state) => {
                let outside = exact.body().outside(&point);
                table.outside += u64::from(outside > 0.0);
                table.outside_distance = table.outside_distance.max(outside);
                let values = row(&state);
                writer
                    .write_record(record.iter().chain(values.iter().map(String::as_str)))
                    .map_err(broken)?;
            }
            Err(refusal) => {
                findings.push(
                    Finding::refused("off-the-body", place().line(line), refusal.message)
                        .hint(refusal.hint),
                );
                if findings.len() >= 20 {
                    return Err(findings);
                }
            }
        }
    }
    if !findings.is_empty() {
        return Err(findings);
    }
    let bytes = writer
        .into_inner()
        .map_err(|e| vec![Finding::refused("csv-syntax", place(), e.to_string())])?;
    table.csv = String::from_utf8_lossy(&bytes).into_owned();
    Ok(table)
}

fn row(state: &State) -> Vec<String> {
    let u = state.displacement;
    let mut numbers = vec![u[0], u[1], u[2]];
    numbers.extend(state.stress.to_array());
    numbers.extend([state.pressure, state.volume_ratio, state.energy_density]);
    numbers.into_iter().map(digits17).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn seventeen_digits_give_back_the_double() {
        for value in [0.1, 1.0 / 3.0, -6.02e23, 5e-324] {
            assert_eq!(digits17(value).parse::<f64>(), Ok(value));
        }
        assert_eq!(spaced(1.0, 2.0, 3), [1.0, 1.5, 2.0]);
        assert_eq!(spaced(0.1, 0.7, 4)[3], 0.7);
        assert_eq!(spaced(1.0, 2.0, 1), [1.5]);
    }
}
