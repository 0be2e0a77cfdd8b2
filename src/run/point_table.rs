//! An exact solution at the points of a CSV file: its fields, or the loads that hold it in equilibrium.

use super::tables::digits17;
use crate::exact::{ExactSolution, Kinematics, State};
use crate::input::{Finding, Place};
use crate::mechanics::Point;
use nalgebra::Vector3;

/// What is appended to each row.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Wanted {
    /// Displacement, Cauchy stress, p, J and W.
    Fields,
    /// Body force per reference volume; with NX,NY,NZ the traction per reference area on that face, too.
    Loads,
}

/// A table of points with the exact values behind every row.
#[derive(Debug)]
pub struct PointTable {
    pub csv: String,
    /// Points outside the body, where the formula was continued, and the largest distance.
    pub outside: u64,
    pub outside_distance: f64,
}

/// Findings after which reading stops.
const MOST: usize = 20;

/// Where the coordinates and the normal stand.
struct Columns {
    coordinates: [Option<usize>; 3],
    normal: Option<[Option<usize>; 3]>,
}

/// Evaluates at the `X,Y[,Z]` of a CSV text and appends the exact values to each row.
///
/// # Errors
/// Every fault of the table, up to 20, each with its line.
pub fn at_points(
    exact: &dyn ExactSolution,
    wanted: Wanted,
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
    let columns = columns(&headers, wanted, &place())?;
    let broken = |e: csv::Error| vec![Finding::refused("csv-syntax", place(), e.to_string())];
    let mut writer = csv::Writer::from_writer(Vec::new());
    writer
        .write_record(
            headers
                .iter()
                .chain(appended(wanted, &columns).iter().copied()),
        )
        .map_err(broken)?;
    let mut table = PointTable {
        csv: String::new(),
        outside: 0,
        outside_distance: 0.0,
    };
    let mut findings = Vec::new();
    for record in reader.records() {
        let record = record.map_err(unreadable)?;
        let line = place().line(record.position().map_or(0, csv::Position::line));
        let read = |at: [Option<usize>; 3], findings: &mut Vec<Finding>| {
            vector(&record, &headers, at, &line, findings)
        };
        let position = read(columns.coordinates, &mut findings);
        let normal = columns.normal.map(|at| read(at, &mut findings));
        if let (Some([x, y, z]), None | Some(Some(_))) = (position, normal) {
            let point = Point::new(x, y, z);
            match values(exact, wanted, point, normal.flatten()) {
                Ok(values) => {
                    let outside = exact.body().outside(&point);
                    table.outside += u64::from(outside > 0.0);
                    table.outside_distance = table.outside_distance.max(outside);
                    let cells: Vec<String> = values.into_iter().map(digits17).collect();
                    writer
                        .write_record(record.iter().chain(cells.iter().map(String::as_str)))
                        .map_err(broken)?;
                }
                Err(refusal) => findings.push(
                    Finding::refused("off-the-body", line, refusal.message).hint(refusal.hint),
                ),
            }
        }
        if findings.len() >= MOST {
            return Err(findings);
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

fn columns(
    headers: &csv::StringRecord,
    wanted: Wanted,
    place: &Place,
) -> Result<Columns, Vec<Finding>> {
    let column = |name: &str| headers.iter().position(|h| h == name);
    let missing = |expected: &str| {
        let names: Vec<_> = headers.iter().collect();
        let found = format!("found the columns {}", names.join(", "));
        let finding = Finding::refused("missing-column", place.clone().line(1), found);
        vec![finding.expected(expected)]
    };
    let coordinates = ["X", "Y", "Z"].map(column);
    if coordinates[..2].contains(&None) {
        return Err(missing("columns X and Y, and Z for solids"));
    }
    let normal = ["NX", "NY", "NZ"].map(column);
    let normal = match (wanted, normal) {
        (Wanted::Fields, _) | (Wanted::Loads, [None, None, None]) => None,
        (Wanted::Loads, [Some(_), Some(_), _]) => Some(normal),
        _ => {
            return Err(missing(
                "columns NX and NY, and NZ for solids, or none of them",
            ));
        }
    };
    Ok(Columns {
        coordinates,
        normal,
    })
}

fn appended(wanted: Wanted, columns: &Columns) -> &'static [&'static str] {
    match (wanted, columns.normal) {
        (Wanted::Fields, _) => &[
            "ux", "uy", "uz", "sxx", "syy", "szz", "sxy", "syz", "szx", "p", "J", "W",
        ],
        (Wanted::Loads, None) => &["bx", "by", "bz"],
        (Wanted::Loads, Some(_)) => &["bx", "by", "bz", "tx", "ty", "tz"],
    }
}

/// Three numbers of a row; a column that is not there is zero.
fn vector(
    record: &csv::StringRecord,
    headers: &csv::StringRecord,
    columns: [Option<usize>; 3],
    line: &Place,
    findings: &mut Vec<Finding>,
) -> Option<[f64; 3]> {
    let mut numbers = [0.0; 3];
    let mut sound = true;
    for (number, column) in numbers.iter_mut().zip(columns) {
        let Some(column) = column else { continue };
        let cell = record.get(column).unwrap_or("");
        match cell.parse::<f64>().ok().filter(|v| v.is_finite()) {
            Some(value) => *number = value,
            None => {
                let at = line.clone().field(headers.get(column).unwrap_or(""));
                let found = format!("\"{cell}\" is not a finite number");
                findings.push(Finding::refused("finite-number", at, found));
                sound = false;
            }
        }
    }
    sound.then_some(numbers)
}

/// The appended numbers of one row.
fn values(
    exact: &dyn ExactSolution,
    wanted: Wanted,
    point: Point,
    normal: Option<[f64; 3]>,
) -> Result<Vec<f64>, crate::exact::Refusal> {
    let state = exact.at(point)?;
    if wanted == Wanted::Fields {
        let mut numbers: Vec<f64> = state.displacement.iter().copied().collect();
        numbers.extend(state.stress.to_array());
        numbers.extend([state.pressure, state.volume_ratio, state.energy_density]);
        return Ok(numbers);
    }
    let mut numbers: Vec<f64> = exact.body_force(point)?.iter().copied().collect();
    if let Some(normal) = normal {
        let traction = nominal_traction(&state, exact.kinematics(), normal.into());
        numbers.extend(traction.ok_or_else(|| {
            crate::exact::Refusal {
                message: format!(
                    "({}, {}, {}) is the normal of no face",
                    normal[0], normal[1], normal[2]
                ),
                parameter: "",
                hint: "give the outward normal of the undeformed face; its length does not matter"
                    .to_string(),
            }
        })?);
    }
    Ok(numbers)
}

/// Force per reference area on the face with this normal, P N/|N| with P = J sigma F^-T; `None` for no direction.
pub fn nominal_traction(
    state: &State,
    kinematics: Kinematics,
    normal: Vector3<f64>,
) -> Option<[f64; 3]> {
    let size = normal.norm();
    if !(size > 0.0 && size.is_finite()) {
        return None;
    }
    let normal = normal / size;
    let stress = state.stress.to_matrix();
    let traction = match kinematics {
        Kinematics::SmallStrain => stress * normal,
        Kinematics::Finite => {
            let inverse = state.deformation().try_inverse()?;
            stress * (inverse.transpose() * normal) * state.volume_ratio
        }
    };
    Some(traction.into())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::{Ends, Parameters, PressurisedTube};
    use crate::materials;

    fn tube() -> PressurisedTube {
        let material = materials::build("neo-Hookean", &[("mu".to_string(), 0.4)]).unwrap();
        PressurisedTube::new(&Parameters {
            inner_radius: 1.0,
            outer_radius: 2.0,
            ends: Ends::PlaneStrain,
            material,
            inner_pressure: 0.1,
            outer_pressure: 0.0,
        })
        .unwrap()
    }

    // The bore takes p a/A per reference area, pointing outwards into the wall. Red when P is formed with F or without J.
    #[test]
    fn tractions_are_those_of_the_pressure() {
        let text = b"X,Y,NX,NY\n0.6,0.8,-3,-4\n0,2,0,1\n";
        let table = at_points(&tube(), Wanted::Loads, text, "faces.csv").unwrap();
        let mut rows = table.csv.lines();
        assert_eq!(rows.next(), Some("X,Y,NX,NY,bx,by,bz,tx,ty,tz"));
        let row = |line: &str| -> Vec<f64> {
            line.split(',').map(|cell| cell.parse().unwrap()).collect()
        };
        let bore = row(rows.next().unwrap());
        let a = 1.0 + tube().at(Point::new(1.0, 0.0, 0.0)).unwrap().displacement[0];
        assert!((bore[7] - 0.1 * a * 0.6).abs() < 1e-15 && (bore[8] - 0.1 * a * 0.8).abs() < 1e-15);
        let outer = row(rows.next().unwrap());
        assert!(outer[4..].iter().all(|v| v.abs() < 1e-15));
    }

    #[test]
    fn half_a_normal_and_no_direction_are_refused() {
        let refused = |text: &[u8]| at_points(&tube(), Wanted::Loads, text, "f.csv").unwrap_err();
        assert_eq!(refused(b"X,Y,NX\n1,0,1\n")[0].rule, "missing-column");
        assert_eq!(refused(b"X,Y,NX,NY\n1,0,0,0\n")[0].rule, "off-the-body");
        assert_eq!(refused(b"X,Y,NX,NY\n1,0,x,0\n")[0].rule, "finite-number");
    }
}
