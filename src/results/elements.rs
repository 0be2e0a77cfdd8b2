//! The mesh: elements.csv, checked against nodes.csv.

use super::files::InputFile;
use super::frame::ModelKind;
use super::ids::{IdIndex, Origin};
use super::log::Log;
use super::nodes::Nodes;
use super::table::{Next, Row, Table};
use crate::elements::{MAX_NODES, Shape};
use crate::input::{Finding, Place};

/// The elements, in the order of their identifiers.
#[derive(Debug, Clone)]
pub struct Elements {
    pub ids: Vec<i64>,
    pub shapes: Vec<Shape>,
    /// The kind of model the mesh is of.
    pub kind: ModelKind,
    /// Where the nodes of each element start in `connectivity`; one more entry at the end.
    offsets: Vec<u32>,
    connectivity: Vec<u32>,
    regions: Vec<String>,
    region: Vec<u32>,
    origins: Vec<Origin>,
    files: Vec<String>,
    index: IdIndex,
}

impl Elements {
    pub fn len(&self) -> usize {
        self.ids.len()
    }

    pub fn is_empty(&self) -> bool {
        self.ids.is_empty()
    }

    /// Indices into the nodes, in the order of the shape.
    pub fn nodes(&self, element: usize) -> &[u32] {
        &self.connectivity[self.offsets[element] as usize..self.offsets[element + 1] as usize]
    }

    /// The region's name; empty when none was given.
    pub fn region(&self, element: usize) -> &str {
        self.regions
            .get(self.region[element] as usize)
            .map_or("", String::as_str)
    }

    /// The index of an element.
    pub fn find(&self, id: i64) -> Option<usize> {
        self.index.find(id).map(|i| i as usize)
    }

    /// Where the element was read.
    pub fn place(&self, element: usize) -> Place {
        self.origins[element].place(&self.files)
    }

    /// The first file, as reports name it.
    pub fn file(&self) -> &str {
        self.files.first().map_or("", String::as_str)
    }

    /// 2 or 3; all elements have the same.
    pub fn dimension(&self) -> usize {
        self.shapes.first().map_or(2, |s| s.dimension())
    }

    /// The shapes that occur, in order.
    pub fn shapes_used(&self) -> Vec<Shape> {
        Shape::ALL
            .into_iter()
            .filter(|s| self.shapes.contains(s))
            .collect()
    }

    /// Reference coordinates of an element's nodes as `elements::map` wants them: `[X, Y, Z]`, or `[R, Z, 0]`
    /// in an axisymmetric model. Returns the number of nodes.
    pub fn coordinates(
        &self,
        element: usize,
        nodes: &Nodes,
        out: &mut [[f64; 3]; MAX_NODES],
    ) -> usize {
        let list = self.nodes(element);
        for (target, &node) in out.iter_mut().zip(list) {
            *target = self.kind.in_plane(nodes.positions[node as usize]);
        }
        list.len()
    }
}

/// The rows of elements.csv before their nodes are known.
pub(crate) struct RawElements {
    rows: Vec<RawElement>,
    connectivity: Vec<i64>,
    regions: Vec<String>,
    files: Vec<String>,
    node_columns: Vec<Option<usize>>,
}

struct RawElement {
    id: i64,
    shape: Shape,
    first: u32,
    region: u32,
    origin: Origin,
}

/// Reads the table. Remarks and findings go to the log.
pub(crate) fn read(table: &mut Table, log: &mut Log) -> (Option<RawElements>, Vec<InputFile>) {
    let (id, shape) = (
        table.header.require("element", log),
        table.header.require("shape", log),
    );
    let region = table.header.find("region", log);
    let first = table.header.require("n1", log);
    let mut node_columns = vec![first];
    for n in 2..=MAX_NODES {
        node_columns.push(table.header.find(&format!("n{n}"), log));
    }
    table.header.note_unread(log);
    let (Some(id), Some(shape), Some(_)) = (id, shape, first) else {
        return (None, Vec::new());
    };
    let mut raw = RawElements {
        rows: Vec::new(),
        connectivity: Vec::new(),
        regions: Vec::new(),
        files: table.files(),
        node_columns,
    };
    let inputs = table.scan(log, &mut |row, log| {
        raw.push(row, id, shape, region, log);
        Next::More
    });
    (Some(raw), inputs)
}

impl RawElements {
    fn push(&mut self, row: &Row, id: usize, shape: usize, region: Option<usize>, log: &mut Log) {
        let id = row.integer(id, log);
        let name = String::from_utf8_lossy(row.text(shape)).into_owned();
        let Some(kind) = Shape::from_name(&name) else {
            log.add(unknown_shape(row.place(shape), &name));
            return;
        };
        let first = self.connectivity.len();
        for (n, column) in self.node_columns.iter().enumerate() {
            let cell = column.map_or(&b""[..], |c| row.text(c));
            let place = || match column {
                Some(column) => row.place(*column),
                None => row.line_place().field(format!("n{}", n + 1)),
            };
            if n >= kind.node_count() {
                if !cell.is_empty() {
                    let what = format!(
                        "a {name} has {} nodes, and here is one more",
                        kind.node_count()
                    );
                    let hint = "leave unused cells empty, or correct the shape";
                    log.add(Finding::refused("shape-node-count", place(), what).hint(hint));
                    break;
                }
            } else if cell.is_empty() {
                let what = format!(
                    "a {name} has {} nodes, and node {} is not given",
                    kind.node_count(),
                    n + 1
                );
                log.add(Finding::refused("shape-node-count", place(), what));
                break;
            } else if let Some(node) = column.and_then(|c| row.integer(c, log)) {
                if let Some(before) = self.connectivity[first..].iter().position(|&m| m == node) {
                    let what = format!("node {node} is also n{}", before + 1);
                    log.add(
                        Finding::refused("repeated-node", place(), what).hint(
                            "collapsed elements are not judged; use the shape with fewer nodes",
                        ),
                    );
                }
                self.connectivity.push(node);
            }
        }
        let Some(id) = id else { return };
        if self.connectivity.len() - first != kind.node_count() {
            self.connectivity.truncate(first);
            return;
        }
        let region = region.map_or(u32::MAX, |column| self.region(row, column, log));
        self.rows.push(RawElement {
            id,
            shape: kind,
            first: first as u32,
            region,
            origin: Origin::new(row.part, row.line),
        });
    }

    fn region(&mut self, row: &Row, column: usize, log: &mut Log) -> u32 {
        let Ok(name) = std::str::from_utf8(row.text(column)) else {
            log.add(Finding::refused(
                "utf-8",
                row.place(column),
                "the region is not UTF-8 text",
            ));
            return u32::MAX;
        };
        if name.is_empty() {
            return u32::MAX;
        }
        let known = self.regions.iter().rposition(|r| r == name);
        known.unwrap_or_else(|| {
            self.regions.push(name.to_string());
            self.regions.len() - 1
        }) as u32
    }

    /// The dimension of the elements; a mixture is a finding.
    pub fn dimension(&self, log: &mut Log) -> Option<usize> {
        let first = self.rows.first()?;
        if let Some(other) = self
            .rows
            .iter()
            .find(|r| r.shape.dimension() != first.shape.dimension())
        {
            let what = format!(
                "a {} in a mesh that has a {}",
                other.shape.name(),
                first.shape.name()
            );
            let hint = "export the elements of the body only, without surface or line elements";
            log.add(
                Finding::refused("mixed-dimensions", other.origin.place(&self.files), what)
                    .hint(hint),
            );
        }
        Some(first.shape.dimension())
    }

    /// Puts the elements in the order of their identifiers and finds their nodes.
    pub fn resolve(mut self, nodes: &Nodes, kind: ModelKind, log: &mut Log) -> Elements {
        self.rows.sort_by_key(|r| (r.id, r.origin));
        for pair in self.rows.windows(2) {
            if pair[0].id == pair[1].id {
                let first = pair[0].origin.place(&self.files);
                let what = format!("element {} is listed again; first at {first}", pair[1].id);
                let place = pair[1].origin.place(&self.files).field("element");
                log.add(Finding::refused("unique-element-ids", place, what));
            }
        }
        let count = self.rows.len();
        let mut elements = Elements {
            ids: self.rows.iter().map(|r| r.id).collect(),
            shapes: self.rows.iter().map(|r| r.shape).collect(),
            kind,
            offsets: Vec::with_capacity(count + 1),
            connectivity: Vec::with_capacity(self.connectivity.len()),
            region: self.rows.iter().map(|r| r.region).collect(),
            origins: self.rows.iter().map(|r| r.origin).collect(),
            regions: self.regions,
            files: self.files,
            index: IdIndex::Sorted(Vec::new()),
        };
        for row in &self.rows {
            elements.offsets.push(elements.connectivity.len() as u32);
            let first = row.first as usize;
            let ids = &self.connectivity[first..first + row.shape.node_count()];
            for (n, &id) in ids.iter().enumerate() {
                match nodes.find(id) {
                    Some(node) => elements.connectivity.push(node as u32),
                    None => {
                        elements.connectivity.push(u32::MAX);
                        let place = row
                            .origin
                            .place(&elements.files)
                            .field(format!("n{}", n + 1));
                        let what = format!("there is no node {id} in {}", nodes.file());
                        log.add(Finding::refused("unknown-node", place, what));
                    }
                }
            }
        }
        elements.offsets.push(elements.connectivity.len() as u32);
        if !log.is_refused() {
            elements.index = IdIndex::new(&elements.ids);
        }
        elements
    }
}

fn unknown_shape(place: Place, name: &str) -> Finding {
    let known: Vec<&str> = Shape::ALL.iter().map(|s| s.name()).collect();
    let later = ["tri7", "wedge18", "pyramid5", "pyramid13"].contains(&name);
    let hint = if later {
        "this shape belongs to the exchange format, but is not judged yet".to_string()
    } else {
        let lower = name.to_ascii_lowercase();
        known
            .iter()
            .find(|k| **k == lower)
            .map_or(String::new(), |k| format!("write {k}"))
    };
    Finding::refused(
        "shape-name",
        place,
        format!("\"{}\" is no known shape", name.escape_default()),
    )
    .expected(known.join(" "))
    .hint(hint)
}
