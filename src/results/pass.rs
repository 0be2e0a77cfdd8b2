//! One pass over the integration points: rows to blocks, and what only the whole of them can say.

use super::block::{MAX_POINT_NUMBER, NO_ELEMENT, PointBlock, Seen};
use super::frame::{ModelKind, Placed};
use super::ids::Origin;
use super::log::Log;
use super::points::{Plan, PointSource};
use super::steps::StepFilter;
use super::stress::matrix;
use super::table::Row;
use crate::elements::{MAX_NODES, map};
use crate::input::{Finding, Place, Weight};

/// Two ways to know a quantity may differ by this share of its largest size before a caution.
const TWO_WAYS: f64 = 1e-4;

/// One row as it was understood.
struct Parsed {
    element: u32,
    element_id: i64,
    point: i64,
    position: [f64; 3],
    weight: f64,
    stress: [f64; 6],
    p: f64,
    j: f64,
    w: f64,
    f: [f64; 9],
}

/// The state of a pass.
pub(super) struct Running<'a> {
    source: &'a PointSource,
    plan: &'a Plan,
    steps: StepFilter,
    pub block: PointBlock,
    seen: Seen,
    pub points: u64,
    last_step: Option<i64>,
    /// p against -tr(sigma)/3.
    mean: Gap,
    /// J against det F.
    volume: Gap,
    coords: [[f64; 3]; MAX_NODES],
    /// How far a point may be from where the declared rule has it.
    slack: f64,
}

impl<'a> Running<'a> {
    pub fn new(source: &'a PointSource) -> Self {
        let (plan, channels) = (&source.plan, &source.channels);
        let block = PointBlock {
            weight: channels.weight.is_available().then(Vec::new),
            stress: channels.stress.is_available().then(Vec::new),
            components: channels.components,
            p: channels.p.is_available().then(Vec::new),
            j: channels.j.is_available().then(Vec::new),
            w: channels.w.is_available().then(Vec::new),
            f: channels.f.is_available().then(Vec::new),
            files: source.table.files(),
            ..PointBlock::default()
        };
        Self {
            source,
            plan,
            steps: StepFilter::new(plan.step_column, plan.step),
            block,
            seen: Seen::new(source.elements.as_ref().map_or(0, |e| e.len())),
            points: 0,
            last_step: None,
            mean: Gap::default(),
            volume: Gap::default(),
            coords: [[0.0; 3]; MAX_NODES],
            slack: source.nodes.as_ref().map_or(0.0, |n| 1e-6 * n.extent()),
        }
    }

    /// Reads one row into the block; false if it is not of the step or has findings.
    pub fn take(&mut self, row: &Row, log: &mut Log) -> bool {
        if let (Some(column), None) = (self.plan.step_column, self.plan.reading.step) {
            self.last_step = self.last_step.max(row.integer(column, log));
        }
        if !self.steps.wants(row, log) {
            return false;
        }
        self.points += 1;
        let Some(parsed) = self.parse(row, log) else {
            return false;
        };
        self.compare_mean(row, &parsed);
        let block = &mut self.block;
        block.element.push(parsed.element);
        block.element_id.push(parsed.element_id);
        block.point.push(parsed.point);
        block.position.push(parsed.position);
        block.origins.push(Origin::new(row.part, row.line));
        for (column, value) in [
            (&mut block.weight, parsed.weight),
            (&mut block.p, parsed.p),
            (&mut block.j, parsed.j),
            (&mut block.w, parsed.w),
        ] {
            if let Some(column) = column {
                column.push(value);
            }
        }
        if let Some(column) = &mut block.stress {
            column.push(parsed.stress);
        }
        if let Some(column) = &mut block.f {
            column.push(parsed.f);
        }
        true
    }

    fn parse(&mut self, row: &Row, log: &mut Log) -> Option<Parsed> {
        let plan = self.plan;
        let (element_id, point) = (row.integer(plan.element, log), row.integer(plan.point, log));
        let mut optional = |column: Option<usize>, scale: f64| match column {
            None => Some(f64::NAN),
            Some(column) => row.number(column, log).map(|v| v * scale),
        };
        let weight = optional(plan.weight, plan.scales.weight);
        let p = optional(plan.p, plan.scales.pressure);
        let j = optional(plan.j, 1.0);
        let w = optional(plan.w, plan.scales.energy);
        let f = plan
            .f
            .as_ref()
            .map_or(Some(None), |f| f.read(row, log).map(Some));
        let placed = plan.position.map_or(Some(None), |columns| {
            columns
                .read(row, &plan.reading.conventions, plan.scales.length, log)
                .map(Some)
        });
        let (element_id, point, f) = (element_id?, point?, f?);
        let element = self.identify(row, element_id, point, log)?;
        let (placed, computed) = match placed? {
            Some(placed) => (placed, None),
            None => {
                let (placed, weight) = self.by_rule(row, element, point, log)?;
                (placed, Some(weight))
            }
        };
        let weight = match (plan.weight, computed) {
            (None, Some(weight)) => weight,
            (None, None) if !plan.tables.is_empty() => {
                let (expected, weight) = self.by_rule(row, element, point, log)?;
                self.same_place(row, &placed, &expected, log)?;
                weight
            }
            _ => weight?,
        };
        if let Some(column) = plan.weight.filter(|_| weight <= 0.0) {
            let what = format!("the weight is {weight}");
            let hint = "a norm needs positive weights: export at the points of another rule";
            log.add(Finding::refused("positive-weight", row.place(column), what).hint(hint));
        }
        let mut j = j?;
        if let Some(column) = plan.j.filter(|_| j <= 0.0) {
            let what = format!("J is {j}");
            log.add(Finding::refused(
                "positive-volume-ratio",
                row.place(column),
                what,
            ));
            return None;
        }
        if let Some(f) = &f {
            let determinant = matrix(f).determinant();
            match plan.j {
                None => j = determinant,
                Some(column) => self
                    .volume
                    .take(j - determinant, determinant, || row.place(column)),
            }
        }
        let stress = match &plan.stress {
            None => [f64::NAN; 6],
            Some(stress) => {
                let known_j = plan.j.map(|_| j);
                stress.read(
                    row,
                    placed.direction,
                    f.as_ref(),
                    known_j,
                    plan.scales.stress,
                    log,
                )?
            }
        };
        let p = if plan.p_from_trace {
            -(stress[0] + stress[1] + stress[2]) / 3.0
        } else {
            p?
        };
        Some(Parsed {
            element,
            element_id,
            point,
            position: placed.position,
            weight,
            stress,
            p,
            j,
            w: w?,
            f: f.unwrap_or([f64::NAN; 9]),
        })
    }

    /// The element's index; unknown elements and repeated points are findings.
    fn identify(&mut self, row: &Row, id: i64, point: i64, log: &mut Log) -> Option<u32> {
        let Some(elements) = &self.source.elements else {
            return Some(NO_ELEMENT);
        };
        let Some(element) = elements.find(id) else {
            let what = format!("there is no element {id} in {}", elements.file());
            log.add(Finding::refused(
                "unknown-element",
                row.place(self.plan.element),
                what,
            ));
            return None;
        };
        if !(0..=MAX_POINT_NUMBER).contains(&point) {
            let what = format!("the point number is {point}");
            let finding = Finding::refused("point-number-range", row.place(self.plan.point), what);
            log.add(finding.expected(format!(
                "a number from 0 to {MAX_POINT_NUMBER}, counted within each element"
            )));
            return None;
        }
        if !self.seen.mark(element, point as usize) {
            let what = format!("point {point} of element {id} is listed again");
            let hint = "export each point once, and give a step column if these are load steps";
            log.add(Finding::refused("unique-points", row.place(self.plan.point), what).hint(hint));
            return None;
        }
        Some(element as u32)
    }

    /// Position and weight from the declared rule; points are counted from 1.
    fn by_rule(
        &mut self,
        row: &Row,
        element: u32,
        point: i64,
        log: &mut Log,
    ) -> Option<(Placed, f64)> {
        let (elements, nodes) = (self.source.elements.as_ref()?, self.source.nodes.as_ref()?);
        let element = element as usize;
        let shape = elements.shapes[element];
        let table = self.plan.tables.iter().find(|t| t.shape == shape)?;
        let q = usize::try_from(point - 1).ok().filter(|&q| q < table.len());
        let Some(q) = q else {
            let what = format!("the point number is {point}");
            let finding = Finding::refused("point-number-range", row.place(self.plan.point), what);
            log.add(finding.expected(format!(
                "a number from 1 to {}, as the declared rule has",
                table.len()
            )));
            return None;
        };
        let count = elements.coordinates(element, nodes, &mut self.coords);
        let coords = &self.coords[..count];
        let kind = self.plan.kind;
        let position = kind.in_space(map::position(table.values(q), coords));
        let m = map::jacobian(shape.dimension(), table.gradients(q), coords);
        let mut weight = table.rule.weights[q] * map::determinant(&m);
        if kind == ModelKind::Axisymmetric {
            weight *= 2.0 * std::f64::consts::PI * position[0];
        }
        let place = crate::mechanics::Point::new(position[0], position[1], position[2]);
        Some((
            Placed {
                position,
                direction: place.direction(),
            },
            weight,
        ))
    }

    /// Weights taken from the declared rule need its points: a point elsewhere is a finding.
    fn same_place(
        &self,
        row: &Row,
        given: &Placed,
        expected: &Placed,
        log: &mut Log,
    ) -> Option<()> {
        let far = (0..3).any(|i| (given.position[i] - expected.position[i]).abs() > self.slack);
        if far {
            let what = format!("the point is at {:?}", given.position);
            let finding =
                Finding::refused("standard-rule", row.place(self.plan.point), what).expected(
                    format!("{:?}, where the declared rule has it", expected.position),
                );
            log.add(
                finding
                    .hint("export the column weight, or declare the rule whose points these are"),
            );
            return None;
        }
        Some(())
    }

    fn compare_mean(&mut self, row: &Row, parsed: &Parsed) {
        let (Some(column), true) = (self.plan.p, self.source.channels.components.has_trace())
        else {
            return;
        };
        let [a, b, c, ..] = parsed.stress;
        let size = a.abs().max(b.abs()).max(c.abs()).max(parsed.p.abs());
        let gap = parsed.p + (a + b + c) / 3.0;
        self.mean.take(gap, size, || row.place(column));
    }

    /// What can only be said at the end.
    pub fn finish(&mut self, log: &mut Log) {
        if let Some(step) = self.plan.step {
            let place = || Place::file(self.source.file()).field("step");
            if self.points == 0 {
                log.add(Finding::refused(
                    "step-found",
                    place(),
                    format!("there is no step {step}"),
                ));
            } else if let Some(last) = self.last_step.filter(|&last| last > step) {
                let what =
                    format!("the steps go on to {last}, those of the other tables end at {step}");
                log.add(
                    Finding::refused("step-found", place(), what)
                        .hint("say in the suite which step is judged"),
                );
            }
        }
        if let Some((place, gap)) = self.mean.beyond(TWO_WAYS) {
            let what = format!("p differs from -tr(sigma)/3 by up to {gap}");
            let hint = "check the sign of p, and whether it is the multiplier of a mixed method";
            log.add(Finding::new(Weight::Caution, "mean-pressure", place, what).hint(hint));
        }
        if let Some((place, gap)) = self.volume.beyond(TWO_WAYS) {
            let what = format!("J differs from det F by up to {gap}");
            let hint = "a mixed method may carry a J of its own: say which one is exported";
            log.add(Finding::new(Weight::Caution, "volume-ratio", place, what).hint(hint));
        }
    }
}

/// The largest difference between two ways to know a quantity, where, and the size of the quantity.
#[derive(Debug, Default)]
struct Gap {
    largest: f64,
    place: Option<Place>,
    size: f64,
}

impl Gap {
    fn take(&mut self, gap: f64, size: f64, place: impl FnOnce() -> Place) {
        self.size = self.size.max(size.abs());
        if gap.abs() > self.largest {
            self.largest = gap.abs();
            self.place = Some(place());
        }
    }

    /// Place and description when the difference is more than `share` of the size.
    fn beyond(&self, share: f64) -> Option<(Place, String)> {
        let place = self.place.clone()?;
        let text = format!("{:.3e} (largest size {:.3e})", self.largest, self.size);
        (self.largest > share * self.size).then_some((place, text))
    }
}
