//! Tables of an exact solution as CSV: stations through the wall, totals.

use super::plan::CasePlan;
use crate::exact::{Frame, Kinematics, State};
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
    let [xs, ys, zs] = [0, 1, 2].map(|i| spaced(from[i], to[i], stations));
    for ((x, y), z) in xs.into_iter().zip(ys).zip(zs) {
        let point = Point::new(x, y, z);
        let state = case.exact.at(point).map_err(|r| r.to_string())?;
        let spherical = case.exact.body().frame() == Frame::Spherical;
        let small = case.exact.kinematics() == Kinematics::SmallStrain;
        let cells = line
            .columns
            .iter()
            .map(|column| digits17(cell(column, (spherical, small), &point, &state)));
        csv.push_str(&cells.collect::<Vec<_>>().join(","));
        csv.push('\n');
    }
    Ok(csv)
}

/// One column of a station; NaN for a name that no solution may list.
fn cell(column: &str, (spherical, small): (bool, bool), point: &Point, state: &State) -> f64 {
    let (x, u) = (point.to_array(), state.displacement);
    let dimensions = if spherical { 3 } else { 2 };
    let square = |v: [f64; 3]| v[..dimensions].iter().map(|c| c * c).sum::<f64>();
    let radius = square(x).sqrt();
    let on_axis = x[1] == 0.0 && u[1] == 0.0 && (!spherical || (x[2] == 0.0 && u[2] == 0.0));
    let deformed = square([x[0] + u[0], x[1] + u[1], x[2] + u[2]]).sqrt();
    let outward = || match small {
        _ if on_axis => u[0],
        _ if radius == 0.0 => 0.0,
        true => (0..dimensions).map(|i| x[i] * u[i]).sum::<f64>() / radius,
        // r - R from r^2 - R^2: no cancellation at small displacements
        false => {
            let growth = (0..dimensions).map(|i| (2.0 * x[i] + u[i]) * u[i]);
            growth.sum::<f64>() / (radius + deformed)
        }
    };
    let (s, t) = (state.stress, state.local_stress);
    match column {
        "R" => radius,
        "r" if small || on_axis => radius + outward(),
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
