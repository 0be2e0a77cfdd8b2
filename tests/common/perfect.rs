//! Result sets without any error: the exact solution written as a solver would export it, in any dialect.

use super::mesh::{Mesh, Sector};
use flate2::Compression;
use flate2::write::GzEncoder;
use nalgebra::Matrix3;
use std::collections::BTreeMap;
use std::f64::consts::PI;
use std::io::Write;
use std::path::Path;
use truebore::elements::{Rule, map};
use truebore::exact::{self, Ends, ExactSolution, Extent, Parameters, State};
use truebore::materials;
use truebore::mechanics::{Point, StressMeasure};

/// A tube, as the suite says it and as the exact library knows it.
#[derive(Debug, Clone)]
pub struct Tube {
    pub problem: &'static str,
    pub ends: Ends,
    pub inner: f64,
    pub outer: f64,
    pub inner_pressure: f64,
    pub outer_pressure: f64,
    pub law: &'static str,
    pub constants: &'static [(&'static str, f64)],
}

impl Tube {
    /// A soft rubber tube in mm and MPa, blown up by about a quarter.
    pub fn rubber(ends: Ends) -> Self {
        Self {
            problem: "pressurised-tube",
            ends,
            inner: 8.0,
            outer: 12.0,
            inner_pressure: 0.05,
            outer_pressure: 0.01,
            law: "Mooney-Rivlin",
            constants: &[("c10", 0.15), ("c01", 0.05)],
        }
    }

    /// A linear-elastic tube whose volume changes.
    pub fn linear() -> Self {
        Self {
            problem: "lame-tube",
            ends: Ends::Closed,
            law: "linear-elastic",
            constants: &[("E", 1.2), ("nu", 0.3)],
            ..Self::rubber(Ends::Closed)
        }
    }

    pub fn exact(&self) -> Box<dyn ExactSolution> {
        let constants: Vec<_> = self
            .constants
            .iter()
            .map(|(name, value)| (name.to_string(), *value))
            .collect();
        let given = Parameters {
            inner_radius: self.inner,
            outer_radius: self.outer,
            ends: self.ends,
            material: materials::build(self.law, &constants).unwrap(),
            inner_pressure: self.inner_pressure,
            outer_pressure: self.outer_pressure,
        };
        exact::build(self.problem, &given).unwrap()
    }

    /// The head of a suite of one case, up to and without `accept`.
    pub fn suite(&self, more: &str) -> String {
        let ends = match self.ends {
            Ends::GeneralizedPlaneStrain { axial_force } => {
                format!("{{ generalized-plane-strain: {{ axial-force: {axial_force} }} }}")
            }
            Ends::FixedStretch { axial_stretch } => {
                format!("{{ fixed-stretch: {{ axial-stretch: {axial_stretch} }} }}")
            }
            other => other.name().to_string(),
        };
        let constants: Vec<_> = self
            .constants
            .iter()
            .map(|(name, value)| format!("{name}: {value}"))
            .collect();
        format!(
            "suite: perfect\nunits: {{ length: mm, stress: MPa }}\nmaterials: {{ wall: {{ {}: {{ {} }} }} }}\ncases:\n  \
             - id: tube\n    problem: {{ {}: {{ inner-radius: {}, outer-radius: {}, ends: {ends}, material: wall, \
             inner-pressure: {}, outer-pressure: {} }} }}\n    results: level-{{level}}\n{more}",
            self.law,
            constants.join(", "),
            self.problem,
            self.inner,
            self.outer,
            self.inner_pressure,
            self.outer_pressure,
        )
    }
}

/// How places are written.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Coordinates {
    Cartesian,
    Radians,
    Degrees,
}

/// How a solver writes; the default is the exchange format in mm and MPa.
#[derive(Debug, Clone, Copy)]
pub struct Dialect {
    pub stress: StressMeasure,
    /// Stress and displacement components along the radial, hoop and axial directions.
    pub cylindrical: bool,
    pub coordinates: Coordinates,
    /// `x y z` instead of `ux uy uz`.
    pub current: bool,
    pub engineering_shear: bool,
    pub tension_positive: bool,
    pub multiplier: bool,
    pub gradient: bool,
    pub volume_ratio: bool,
    /// Recovered nodal stress beside the displacements.
    pub nodal_stress: bool,
    /// How many of the file's units one mm, and one MPa, is.
    pub per_mm: f64,
    pub per_mpa: f64,
}

impl Default for Dialect {
    fn default() -> Self {
        Self {
            stress: StressMeasure::Cauchy,
            cylindrical: false,
            coordinates: Coordinates::Cartesian,
            current: false,
            engineering_shear: false,
            tension_positive: false,
            multiplier: false,
            gradient: false,
            volume_ratio: true,
            nodal_stress: false,
            per_mm: 1.0,
            per_mpa: 1.0,
        }
    }
}

/// A CSV table before it is written.
#[derive(Debug, Clone, Default)]
pub struct Table {
    pub header: Vec<String>,
    pub rows: Vec<Vec<String>>,
}

impl Table {
    /// Adds a row of (column, text); the first row makes the header.
    pub fn push(&mut self, row: Vec<(String, String)>) {
        if self.rows.is_empty() {
            self.header = row.iter().map(|(name, _)| name.clone()).collect();
        }
        self.rows
            .push(row.into_iter().map(|(_, text)| text).collect());
    }

    /// The same rows with a column before all others.
    fn with_first(&self, name: &str, text: &str) -> Self {
        let mut table = self.clone();
        table.header.insert(0, name.to_string());
        for row in &mut table.rows {
            row.insert(0, text.to_string());
        }
        table
    }

    fn column(&self, name: &str) -> usize {
        self.header
            .iter()
            .position(|h| h == name)
            .unwrap_or_else(|| panic!("no column {name} in {:?}", self.header))
    }

    /// Only these columns, in this order.
    pub fn only(&self, names: &[&str]) -> Self {
        let columns: Vec<_> = names.iter().map(|name| self.column(name)).collect();
        let pick = |row: &Vec<String>| columns.iter().map(|&c| row[c].clone()).collect();
        Self {
            header: pick(&self.header),
            rows: self.rows.iter().map(pick).collect(),
        }
    }

    pub fn without(&self, name: &str) -> Self {
        let names: Vec<_> = self
            .header
            .iter()
            .map(String::as_str)
            .filter(|n| *n != name)
            .collect();
        self.only(&names)
    }

    /// Replaces the text of some columns by that of another table, row by row.
    pub fn take_columns(&mut self, names: &[&str], from: &Table) {
        for name in names {
            let (here, there) = (self.column(name), from.column(name));
            for (row, other) in self.rows.iter_mut().zip(&from.rows) {
                row[here].clone_from(&other[there]);
            }
        }
    }

    /// Adds a number to a whole column.
    pub fn shift(&mut self, name: &str, by: f64) {
        let column = self.column(name);
        for row in &mut self.rows {
            row[column] = number(row[column].parse::<f64>().unwrap() + by);
        }
    }

    /// Numbers of some columns, row by row.
    pub fn numbers<const N: usize>(&self, names: &[&str; N]) -> Vec<[f64; N]> {
        let columns = names.map(|name| self.column(name));
        let pick = |row: &Vec<String>| columns.map(|c| row[c].parse().unwrap());
        self.rows.iter().map(pick).collect()
    }

    /// Numbers into some columns of a row.
    pub fn put(&mut self, row: usize, names: &[&str], values: &[f64]) {
        for (name, value) in names.iter().zip(values) {
            self.put_text(row, name, &number(*value));
        }
    }

    /// A text into a cell.
    pub fn put_text(&mut self, row: usize, name: &str, text: &str) {
        let column = self.column(name);
        self.rows[row][column] = text.to_string();
    }

    pub fn rename(&mut self, from: &str, to: &str) {
        let column = self.column(from);
        self.header[column] = to.to_string();
    }

    fn text(&self, rows: &[Vec<String>], end: &str) -> String {
        let mut text = self.header.join(",") + end;
        for row in rows {
            text += &(row.join(",") + end);
        }
        text
    }
}

/// How files are laid out; the content is the same.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Layout {
    Plain,
    /// A byte-order mark, CRLF, and comments before the header.
    Windows,
    Gz,
    /// Two parts a table, the second compressed.
    Parts,
}

/// The four tables of a result set, by name.
#[derive(Debug, Clone)]
pub struct Export {
    pub tables: BTreeMap<&'static str, Table>,
}

fn number(value: f64) -> String {
    format!("{value:?}")
}

fn pairs<N: AsRef<str>>(names: &[N], values: &[f64]) -> Vec<(String, String)> {
    let pair = |(name, value): (&N, &f64)| (name.as_ref().to_string(), number(*value));
    names.iter().zip(values).map(pair).collect()
}

struct Writer<'a> {
    mesh: &'a Mesh,
    exact: &'a dyn ExactSolution,
    dialect: Dialect,
}

impl Export {
    /// The exact solution on a mesh.
    pub fn of(tube: &Tube, mesh: &Mesh, dialect: Dialect) -> Self {
        let export = Self::of_exact(tube.exact().as_ref(), mesh, dialect);
        let totals = &export.tables["totals"].rows;
        assert!(totals.iter().any(|row| row[0] == "axial_stretch"));
        export
    }

    /// Any exact solution on a mesh.
    pub fn of_exact(exact: &dyn ExactSolution, mesh: &Mesh, dialect: Dialect) -> Self {
        let writer = Writer {
            mesh,
            exact,
            dialect,
        };
        let mut tables = BTreeMap::from([
            ("nodes", writer.nodes()),
            ("elements", writer.elements()),
            ("points", writer.points()),
            ("totals", writer.totals()),
        ]);
        // a solution without totals
        tables.retain(|_, table| !table.rows.is_empty());
        Self { tables }
    }

    pub fn table(&mut self, name: &str) -> &mut Table {
        self.tables.get_mut(name).unwrap()
    }

    /// Every table backwards.
    pub fn reversed(mut self) -> Self {
        self.tables.values_mut().for_each(|t| t.rows.reverse());
        self
    }

    /// A history: the given states in the steps 1, 2, ...; the mesh has no steps.
    pub fn history(steps: &[Export]) -> Self {
        let mut tables = BTreeMap::new();
        for (i, step) in steps.iter().enumerate() {
            for (name, table) in &step.tables {
                if *name == "elements" {
                    tables.insert(*name, table.clone());
                    continue;
                }
                let table = table.with_first("step", &(i + 1).to_string());
                let whole: &mut Table = tables.entry(*name).or_default();
                whole.header = table.header;
                whole.rows.extend(table.rows);
            }
        }
        Self { tables }
    }

    pub fn write(&self, folder: &Path, layout: Layout) {
        std::fs::create_dir_all(folder).unwrap();
        for (name, table) in &self.tables {
            let put =
                |file: String, bytes: &[u8]| std::fs::write(folder.join(file), bytes).unwrap();
            let packed = |text: String| {
                let mut encoder = GzEncoder::new(Vec::new(), Compression::fast());
                encoder.write_all(text.as_bytes()).unwrap();
                encoder.finish().unwrap()
            };
            let whole = || table.text(&table.rows, "\n");
            match layout {
                Layout::Plain => put(format!("{name}.csv"), whole().as_bytes()),
                Layout::Gz => put(format!("{name}.csv.gz"), &packed(whole())),
                Layout::Windows => {
                    let text = table.text(&table.rows, "\r\n");
                    let text = format!("\u{feff}# made by a test\r\n# of truebore\r\n{text}");
                    put(format!("{name}.csv"), text.as_bytes());
                }
                Layout::Parts => {
                    let (first, second) = table.rows.split_at(table.rows.len() / 2);
                    let first = table.text(first, "\n");
                    put(format!("{name}.part-0001.csv"), first.as_bytes());
                    let second = packed(table.text(second, "\n"));
                    put(format!("{name}.part-0002.csv.gz"), &second);
                }
            }
        }
    }
}

impl Writer<'_> {
    fn solid(&self) -> bool {
        self.mesh.shape.dimension() == 3
    }

    fn state(&self, at: [f64; 3]) -> State {
        self.exact.at(Point::new(at[0], at[1], at[2])).unwrap()
    }

    /// Columns of a place.
    fn place(&self, at: [f64; 3]) -> Vec<(String, String)> {
        let [x, y, z] = at.map(|v| v * self.dialect.per_mm);
        let (radius, angle) = (x.hypot(y), y.atan2(x));
        if self.mesh.axisymmetric {
            return pairs(&["R", "Z"], &[x, z]);
        }
        let count = if self.solid() { 3 } else { 2 };
        match self.dialect.coordinates {
            Coordinates::Cartesian => pairs(&["X", "Y", "Z"][..count], &[x, y, z]),
            Coordinates::Radians => pairs(&["R", "Theta", "Z"][..count], &[radius, angle, z]),
            Coordinates::Degrees => pairs(
                &["R", "Theta", "Z"][..count],
                &[radius, angle.to_degrees(), z],
            ),
        }
    }

    fn nodes(&self) -> Table {
        let mut table = Table::default();
        let count = if self.solid() { 3 } else { 2 };
        let inside = self.inside();
        for (i, &at) in self.mesh.nodes.iter().enumerate() {
            let u = self.state(inside[i]).displacement * self.dialect.per_mm;
            let (c, s) = direction(at);
            let mut row = vec![("node".to_string(), (i + 1).to_string())];
            row.extend(self.place(at));
            row.extend(if self.mesh.axisymmetric {
                pairs(&["ur", "uz"], &[u[0], u[2]])
            } else if self.dialect.current {
                let now: [f64; 3] = std::array::from_fn(|k| at[k] * self.dialect.per_mm + u[k]);
                pairs(&["x", "y", "z"][..count], &now)
            } else if self.dialect.cylindrical {
                let local = [u[0] * c + u[1] * s, u[1] * c - u[0] * s, u[2]];
                pairs(&["ur", "ut", "uz"][..count], &local)
            } else {
                pairs(&["ux", "uy", "uz"][..count], u.as_slice())
            });
            if self.dialect.nodal_stress {
                row.extend(self.stress(at, &self.state(at)));
            }
            table.push(row);
        }
        table
    }

    /// The places of the nodes; where parts meet, a little inside the part that the node belongs to.
    fn inside(&self) -> Vec<[f64; 3]> {
        let mut places = self.mesh.nodes.clone();
        for at in self.exact.interfaces() {
            for nodes in &self.mesh.elements {
                let radius = |n: usize| self.mesh.nodes[n][0].hypot(self.mesh.nodes[n][1]);
                let mean = nodes.iter().map(|&n| radius(n)).sum::<f64>() / nodes.len() as f64;
                for &n in nodes.iter().filter(|&&n| (radius(n) - at).abs() < 1e-9) {
                    let factor = 1.0 + 1e-12 * (mean - at).signum();
                    places[n] = self.mesh.nodes[n].map(|x| x * factor);
                }
            }
        }
        places
    }

    fn elements(&self) -> Table {
        let mut table = Table::default();
        for (i, nodes) in self.mesh.elements.iter().enumerate() {
            let mut row = vec![
                ("element".to_string(), (i + 1).to_string()),
                ("shape".to_string(), self.mesh.shape.name().to_string()),
            ];
            let named =
                |(n, node): (usize, &usize)| (format!("n{}", n + 1), (node + 1).to_string());
            row.extend(nodes.iter().enumerate().map(named));
            table.push(row);
        }
        table
    }

    fn points(&self) -> Table {
        let shape = self.mesh.shape;
        let rule = Rule::of_degree(shape, 2 * shape.degree() + 1);
        let mut table = Table::default();
        for (e, nodes) in self.mesh.elements.iter().enumerate() {
            // the map of a mesh is in its own plane
            let coords: Vec<[f64; 3]> = nodes
                .iter()
                .map(|&n| match self.mesh.nodes[n] {
                    [r, _, z] if self.mesh.axisymmetric => [r, z, 0.0],
                    at => at,
                })
                .collect();
            let mut values = vec![0.0; nodes.len()];
            let mut gradients = vec![[0.0; 3]; nodes.len()];
            for (q, (&xi, &weight)) in rule.points.iter().zip(&rule.weights).enumerate() {
                shape.values(xi, &mut values);
                shape.gradients(xi, &mut gradients);
                let jacobian = map::jacobian(shape.dimension(), &gradients, &coords);
                let mut weight = weight * map::determinant(&jacobian);
                let mut at = map::position(&values, &coords);
                if self.mesh.axisymmetric {
                    at = [at[0], 0.0, at[1]];
                    weight *= 2.0 * PI * at[0];
                }
                let power = if self.solid() || self.mesh.axisymmetric {
                    3
                } else {
                    2
                };
                let weight = weight * self.dialect.per_mm.powi(power);
                let mut row = vec![
                    ("element".to_string(), (e + 1).to_string()),
                    ("point".to_string(), (q + 1).to_string()),
                ];
                row.extend(self.place(at));
                row.push(("weight".to_string(), number(weight)));
                row.extend(self.fields(at));
                table.push(row);
            }
        }
        table
    }

    /// Stress, pressure, volume ratio, energy and deformation gradient at a point.
    fn fields(&self, at: [f64; 3]) -> Vec<(String, String)> {
        let (state, d) = (self.state(at), &self.dialect);
        let mut row = self.stress(at, &state);
        let p = state.pressure * d.per_mpa;
        let p = if d.multiplier {
            0.7 * p - 0.1 * d.per_mpa
        } else {
            p
        };
        let p = if d.tension_positive { -p } else { p };
        row.push(("p".to_string(), number(p)));
        if d.volume_ratio {
            row.push(("J".to_string(), number(state.volume_ratio)));
        }
        row.push(("W".to_string(), number(state.energy_density * d.per_mpa)));
        if d.gradient {
            let f = state.deformation();
            for i in 0..3 {
                for j in 0..3 {
                    row.push((format!("F{}{}", i + 1, j + 1), number(f[(i, j)])));
                }
            }
        }
        row
    }

    fn stress(&self, at: [f64; 3], state: &State) -> Vec<(String, String)> {
        let f = state.deformation();
        let inverse = f.try_inverse().unwrap();
        let sigma = state.stress.to_matrix();
        let first = f.determinant() * sigma * inverse.transpose();
        let written = self.dialect.per_mpa
            * match self.dialect.stress {
                StressMeasure::Cauchy => sigma,
                StressMeasure::FirstPiolaKirchhoff => first,
                StressMeasure::SecondPiolaKirchhoff => inverse * first,
                // the volume ratio that the file carries, which in small strain is not det F
                StressMeasure::Kirchhoff => state.volume_ratio * sigma,
            };
        if self.dialect.stress == StressMeasure::FirstPiolaKirchhoff {
            let name = |k: usize| format!("P{}{}", k / 3 + 1, k % 3 + 1);
            return (0..9)
                .map(|k| (name(k), number(written[(k / 3, k % 3)])))
                .collect();
        }
        let axisymmetric = self.mesh.axisymmetric;
        let (local, names) = if self.dialect.cylindrical || axisymmetric {
            let (c, s) = direction(at);
            let turn = Matrix3::new(c, -s, 0.0, s, c, 0.0, 0.0, 0.0, 1.0);
            (
                turn.transpose() * written * turn,
                ["srr", "stt", "szz", "srt", "stz", "szr"],
            )
        } else {
            (written, ["sxx", "syy", "szz", "sxy", "syz", "szx"])
        };
        let shear = if self.dialect.engineering_shear {
            2.0
        } else {
            1.0
        };
        let all = [
            local[(0, 0)],
            local[(1, 1)],
            local[(2, 2)],
            shear * local[(0, 1)],
            shear * local[(1, 2)],
            shear * local[(2, 0)],
        ];
        let kept: &[usize] = match (axisymmetric, self.solid()) {
            (true, _) => &[0, 1, 2, 5],
            (_, true) => &[0, 1, 2, 3, 4, 5],
            _ => &[0, 1, 2, 3],
        };
        kept.iter()
            .map(|&i| (names[i].to_string(), number(all[i])))
            .collect()
    }

    fn totals(&self) -> Table {
        let planar = !self.solid() && !self.mesh.axisymmetric;
        let prism = self.exact.body().is_prism();
        let share = if self.mesh.axisymmetric && prism {
            1.0
        } else {
            self.mesh.share
        };
        let length = if planar { 1.0 } else { self.mesh.length };
        let per_area = self.dialect.per_mpa * self.dialect.per_mm.powi(2);
        let per_volume = if planar {
            per_area
        } else {
            per_area * self.dialect.per_mm
        };
        let mut table = Table::default();
        for total in self.exact.totals() {
            let (Ok(value), unit) = (
                &total.value,
                match total.name {
                    "axial_stretch" => 1.0,
                    "axial_force" => per_area,
                    "strain_energy" if prism => per_volume,
                    // in the suite's own units only
                    _ if self.dialect.per_mm == 1.0 && self.dialect.per_mpa == 1.0 => 1.0,
                    _ => continue,
                },
            ) else {
                continue;
            };
            let part = match total.extent {
                Extent::Whole => 1.0,
                Extent::Section => share,
                Extent::SectionAndLength => share * length,
            };
            table.push(vec![
                ("quantity".to_string(), total.name.to_string()),
                ("value".to_string(), number(value * part * unit)),
            ]);
        }
        table
    }
}

fn direction(at: [f64; 3]) -> (f64, f64) {
    let angle = at[1].atan2(at[0]);
    (angle.cos(), angle.sin())
}

/// A coarse sector of a tube in a shape.
pub fn sector(tube: &Tube, shape: truebore::elements::Shape) -> Sector {
    Sector {
        cells: [2, 3, 1],
        ..Sector::quarter(shape, tube.inner, tube.outer, 2)
    }
}
