//! Do the integration points lie in their elements and cover the mesh?

use super::block::PointBlock;
use super::channel::Channel;
use super::elements::Elements;
use super::frame::ModelKind;
use super::log::Log;
use super::nodes::Nodes;
use super::points::Pass;
use super::sanity::{element_volumes, mesh_volume};
use super::set::ResultSet;
use crate::elements::{MAX_NODES, map};
use crate::input::{Finding, Place, Weight};

/// How far outside its element an integration point may lie, in reference coordinates.
pub const INSIDE_SLACK: f64 = 1e-6;
/// Relative difference of weights and volume from which on a caution is given.
pub const COVER_CAUTION: f64 = 1e-6;
/// Relative difference of weights and volume from which on nothing is judged.
pub const COVER_REFUSED: f64 = 1e-3;

/// What the points say about the mesh.
#[derive(Debug, Clone, PartialEq)]
pub struct Coverage {
    pub points: u64,
    /// Sum of the weights, where there are any.
    pub weight_sum: Option<f64>,
    pub mesh_volume: f64,
    /// `weight_sum` over `mesh_volume`.
    pub ratio: Option<f64>,
    pub remarks: Vec<Finding>,
}

/// Reads all points once and checks them with a [`CoverCheck`]. `None` without points or without a mesh.
pub fn check_points(set: &ResultSet) -> Result<Option<Coverage>, Vec<Finding>> {
    let (Some(mut check), Some(points)) = (CoverCheck::new(set), set.points()) else {
        return Ok(None);
    };
    let pass = points.for_each_block(4096, &mut |block| {
        check.visit(block);
        Ok(())
    })?;
    check.finish(pass).map(Some)
}

/// Are the points inside their elements, has every element some, do the weights add up to the volume of the mesh
/// and of each element? Fed block by block, so that it can share a pass over a large table with others.
#[derive(Debug)]
pub struct CoverCheck<'a> {
    elements: &'a Elements,
    nodes: &'a Nodes,
    file: &'a str,
    /// Coordinates were read, and not made from a rule.
    given: bool,
    weighted: bool,
    sums: Vec<f64>,
    counts: Vec<u32>,
    log: Log,
}

impl<'a> CoverCheck<'a> {
    /// `None` without points or without a mesh.
    pub fn new(set: &'a ResultSet) -> Option<Self> {
        let (elements, nodes, points) = (set.elements()?, set.nodes()?, set.points()?);
        Some(Self {
            elements,
            nodes,
            file: points.file(),
            given: points.channels().coordinates == Channel::Given,
            weighted: points.channels().weight.is_available(),
            sums: vec![0.0; elements.len()],
            counts: vec![0; elements.len()],
            log: Log::new(),
        })
    }

    /// Takes in the next block.
    pub fn visit(&mut self, block: &PointBlock) {
        let mut coords = [[0.0; 3]; MAX_NODES];
        for i in 0..block.len() {
            let element = block.element[i] as usize;
            self.counts[element] += 1;
            if let Some(weight) = &block.weight {
                self.sums[element] += weight[i];
            }
            if !self.given {
                continue;
            }
            let count = self.elements.coordinates(element, self.nodes, &mut coords);
            let shape = self.elements.shapes[element];
            let target = self.elements.kind.in_plane(block.position[i]);
            let inside = map::inverse_map(shape, &coords[..count], target);
            if !inside.is_some_and(|xi| shape.contains(xi, INSIDE_SLACK)) {
                let id = self.elements.ids[element];
                self.log
                    .add(outside(block.place(i), block.point[i], id, inside));
            }
        }
    }

    /// What the whole table says, after its last block.
    ///
    /// # Errors
    /// Everything that forbids judging.
    pub fn finish(mut self, pass: Pass) -> Result<Coverage, Vec<Finding>> {
        self.log.extend(pass.remarks);
        let empty = self
            .counts
            .iter()
            .enumerate()
            .filter(|(_, count)| **count == 0);
        for (element, _) in empty {
            let what = format!(
                "element {} has no integration point in {}",
                self.elements.ids[element], self.file
            );
            let place = self.elements.place(element);
            self.log
                .add(Finding::refused("element-without-points", place, what));
        }
        let volumes = element_volumes(self.elements, self.nodes);
        let mesh_volume: f64 = volumes.iter().sum();
        let weight_sum = self.weighted.then(|| self.sums.iter().sum::<f64>());
        let ratio = weight_sum.map(|sum| sum / mesh_volume);
        if let Some(ratio) = ratio
            && !self.log.is_refused()
        {
            let sums = (self.sums.as_slice(), volumes.as_slice());
            compare(
                self.elements,
                self.nodes,
                self.file,
                sums,
                ratio,
                &mut self.log,
            );
        }
        let remarks = self.log.finish(self.file)?;
        Ok(Coverage {
            points: pass.points,
            weight_sum,
            mesh_volume,
            ratio,
            remarks,
        })
    }
}

fn outside(place: Place, point: i64, element: i64, at: Option<[f64; 3]>) -> Finding {
    let place = place.field("X");
    let what = match at {
        Some(xi) => {
            format!("point {point} lies outside element {element}: reference coordinates {xi:?}")
        }
        None => format!("point {point} cannot be found in element {element}"),
    };
    Finding::refused("point-inside-element", place, what)
        .expected(format!("inside, up to {INSIDE_SLACK:e} in reference coordinates"))
        .hint("check the units and the element of the point, and that the coordinates are undeformed ones")
}

/// Weights against volumes: of the mesh, and of each element.
fn compare(
    elements: &Elements,
    nodes: &Nodes,
    file: &str,
    (sums, volumes): (&[f64], &[f64]),
    ratio: f64,
    log: &mut Log,
) {
    let off = |ratio: f64| (ratio - 1.0).abs();
    let weigh = |gap: f64| {
        if gap.is_nan() || gap > COVER_REFUSED {
            Some(Weight::Refused)
        } else {
            (gap > COVER_CAUTION).then_some(Weight::Caution)
        }
    };
    let whole = weigh(off(ratio));
    if let Some(weight) = whole {
        let what = format!("the weights add up to {ratio:.9} times the volume of the mesh");
        let hint = hint_for(elements, nodes, sums, ratio);
        let finding = Finding::new(
            weight,
            "points-cover-mesh",
            Place::file(file).field("weight"),
            what,
        );
        log.add(
            finding
                .expected(format!("1, up to {COVER_CAUTION:e}"))
                .hint(hint),
        );
    }
    if whole == Some(Weight::Refused) {
        return;
    }
    let mut worst: Option<(f64, usize)> = None;
    let mut count = 0;
    for element in 0..elements.len() {
        let gap = off(sums[element] / volumes[element]);
        if let Some(weight) = weigh(gap) {
            if weight == Weight::Refused {
                let what = format!(
                    "the weights of element {} add up to {:.9} times its volume",
                    elements.ids[element],
                    sums[element] / volumes[element]
                );
                let hint = "a point is missing, or belongs to another element";
                log.add(
                    Finding::refused("points-cover-element", elements.place(element), what)
                        .hint(hint),
                );
            } else {
                count += 1;
                if worst.is_none_or(|(w, _)| gap > w) {
                    worst = Some((gap, element));
                }
            }
        }
    }
    if let Some((gap, element)) = worst {
        let what = format!(
            "the weights of {count} elements differ from their volumes, most in element {}: by {gap:.3e}",
            elements.ids[element]
        );
        let place = elements.place(element);
        log.add(
            Finding::new(Weight::Caution, "points-cover-element", place, what)
                .hint("the rule of the solver may not be exact on curved elements"),
        );
    }
}

/// A guess at what went wrong with the weights.
fn hint_for(elements: &Elements, nodes: &Nodes, sums: &[f64], ratio: f64) -> String {
    let near = |a: f64, b: f64| (a - b).abs() <= 1e-6 * b.abs();
    let sum: f64 = sums.iter().sum();
    let bare: f64 = elements.shapes.iter().map(|s| s.reference_measure()).sum();
    let turn = 2.0 * std::f64::consts::PI;
    let thickness = 1.0 / ratio;
    if near(sum, bare) {
        "these are bare quadrature weights: multiply by det(dX/dxi)".to_string()
    } else if elements.kind == ModelKind::Axisymmetric && near(ratio * turn, 1.0) {
        "the factor 2 pi is missing".to_string()
    } else if elements.kind == ModelKind::Axisymmetric && near(sum, section_area(elements, nodes)) {
        "the factor 2 pi R is missing".to_string()
    } else if near(thickness.round(), thickness) && thickness > 1.5 {
        format!(
            "1/{thickness:.0} of the mesh: points are missing, or the weights are those of a sector"
        )
    } else if near(ratio.round(), ratio) && ratio > 1.5 {
        format!(
            "{ratio:.0} times the mesh: a thickness, several steps or all sectors are in the weights"
        )
    } else {
        "a weight is quadrature weight times det(dX/dxi), per unit thickness in two dimensions, times 2 pi R in \
         axisymmetric models, of the modelled part only"
            .to_string()
    }
}

/// The area of an axisymmetric section.
fn section_area(elements: &Elements, nodes: &Nodes) -> f64 {
    let mut flat = elements.clone();
    flat.kind = ModelKind::Planar;
    let mut section = nodes.clone();
    section.positions = nodes
        .positions
        .iter()
        .map(|&x| elements.kind.in_plane(x))
        .collect();
    mesh_volume(&flat, &section)
}
