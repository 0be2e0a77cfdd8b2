//! Stress columns of any declared measure and frame to Cauchy stress in the Cartesian frame, with the
//! deformation gradient and the pressure that go with them.
//!
//! Names: `sxx syy szz sxy syz szx` or `srr stt szz srt stz szr` for the symmetric measures (Cauchy, Kirchhoff,
//! second Piola-Kirchhoff: the suite declares which); `P11 ... P33` (first index: direction of the force) for
//! first Piola-Kirchhoff, which is not symmetric. A component that is not there holds NaN and is not in the mask.

use super::conventions::{Conventions, Shear};
use super::frame::ModelKind;
use super::header::Header;
use super::log::Log;
use super::table::Row;
use crate::input::Finding;
use crate::mechanics::SymTensor;
use crate::mechanics::stress_measure::StressMeasure;
use nalgebra::Matrix3;

/// A set of stress components, in the order `xx yy zz xy yz zx`.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Components(u8);

impl Components {
    /// Names in order.
    pub const NAMES: [&'static str; 6] = ["xx", "yy", "zz", "xy", "yz", "zx"];

    /// None of them.
    pub const fn none() -> Self {
        Self(0)
    }

    /// True if component `i` is given.
    pub fn has(self, i: usize) -> bool {
        i < 6 && self.0 & (1 << i) != 0
    }

    /// True if xx, yy and zz are given: the trace is known.
    pub fn has_trace(self) -> bool {
        self.0 & 0b111 == 0b111
    }

    /// True if all six are given.
    pub fn is_full(self) -> bool {
        self.0 == 0b11_1111
    }

    /// True if none is given.
    pub fn is_empty(self) -> bool {
        self.0 == 0
    }

    /// Names of those given.
    pub fn names(self) -> Vec<&'static str> {
        (0..6)
            .filter(|&i| self.has(i))
            .map(|i| Self::NAMES[i])
            .collect()
    }

    fn with(self, i: usize) -> Self {
        Self(self.0 | 1 << i)
    }

    fn of(given: impl Fn(usize) -> bool) -> Self {
        (0..6).filter(|&i| given(i)).fold(Self(0), Self::with)
    }
}

/// Entries of F up to this count as zero.
const OFF_BLOCK: f64 = 1e-12;

const CARTESIAN: [&str; 6] = ["sxx", "syy", "szz", "sxy", "syz", "szx"];
const CYLINDRICAL: [&str; 6] = ["srr", "stt", "szz", "srt", "stz", "szr"];
const PIOLA: [&str; 9] = [
    "P11", "P12", "P13", "P21", "P22", "P23", "P31", "P32", "P33",
];
const GRADIENT: [&str; 9] = [
    "F11", "F12", "F13", "F21", "F22", "F23", "F31", "F32", "F33",
];

/// Where the deformation gradient is; entries that the kind of model fixes may be left out.
#[derive(Debug, Clone, Copy)]
pub(crate) struct GradientColumns([Option<usize>; 9]);

/// Row-major entries that a kind of model must give; the others are those of the identity.
fn needed(kind: ModelKind) -> &'static [usize] {
    match kind {
        ModelKind::Planar => &[0, 1, 3, 4, 8],
        ModelKind::Axisymmetric => &[0, 2, 4, 6, 8],
        ModelKind::Solid => &[0, 1, 2, 3, 4, 5, 6, 7, 8],
    }
}

impl GradientColumns {
    /// Finds F, or says what is missing.
    pub fn resolve(header: &mut Header, kind: ModelKind, log: &mut Log) -> Result<Self, String> {
        if let Some(&i) = needed(kind)
            .iter()
            .find(|&&i| header.peek(GRADIENT[i]).is_none())
        {
            return Err(header.missing_reason(GRADIENT[i]));
        }
        Ok(Self(GRADIENT.map(|name| header.find(name, log))))
    }

    /// F row by row; its determinant must be positive.
    pub fn read(&self, row: &Row, log: &mut Log) -> Option<[f64; 9]> {
        let mut f = [1.0, 0.0, 0.0, 0.0, 1.0, 0.0, 0.0, 0.0, 1.0];
        let mut complete = true;
        for (entry, column) in f.iter_mut().zip(self.0) {
            if let Some(column) = column {
                match row.number(column, log) {
                    Some(value) => *entry = value,
                    None => complete = false,
                }
            }
        }
        if !complete {
            return None;
        }
        let determinant = matrix(&f).determinant();
        let place = || match self.0[0] {
            Some(column) => row.place(column),
            None => row.line_place(),
        };
        if determinant > 0.0 && determinant.is_finite() {
            return Some(f);
        }
        let what = format!("det F is {determinant}");
        log.add(Finding::refused("positive-volume-ratio", place(), what));
        None
    }
}

pub(crate) fn matrix(f: &[f64; 9]) -> Matrix3<f64> {
    Matrix3::from_row_slice(f)
}

/// How stress is read.
#[derive(Debug, Clone)]
pub(crate) struct StressPlan {
    columns: Vec<Option<usize>>,
    cylindrical: bool,
    measure: StressMeasure,
    shear: f64,
    /// For measures that need it.
    needs_f: bool,
    needs_j: bool,
    /// Entries of F that must be zero because not all components are given.
    zero: Vec<usize>,
    pub components: Components,
}

/// Why there is no stress: columns are missing, or they are there but cannot be converted.
#[derive(Debug)]
pub(crate) enum NoStress {
    NotGiven(String),
    NotConvertible(String),
}

impl StressPlan {
    /// `f` and `j` say whether the table has the deformation gradient and J.
    pub fn resolve(
        header: &mut Header,
        kind: ModelKind,
        conventions: &Conventions,
        (f, j): (&Result<GradientColumns, String>, bool),
        log: &mut Log,
    ) -> Result<Self, NoStress> {
        let measure = conventions.stress;
        let piola = measure == StressMeasure::FirstPiolaKirchhoff;
        let any = |header: &Header, names: &[&str]| names.iter().any(|n| header.peek(n).is_some());
        let cylindrical =
            !piola && any(header, &["srr", "stt", "srt"]) && !any(header, &CARTESIAN[..2]);
        let names: &[&str] = match (piola, cylindrical) {
            (true, _) => &PIOLA,
            (false, true) => &CYLINDRICAL,
            (false, false) => &CARTESIAN,
        };
        if !any(header, names) {
            return Err(NoStress::NotGiven(header.missing_reason(names[0])));
        }
        if conventions.turning && cylindrical {
            let why = format!(
                "{}: particles of this case turn about the axis, so that srr and stt could be along axes that turn with them or \
                 not; export sxx syy szz sxy syz szx",
                header.file
            );
            return Err(NoStress::NotConvertible(why));
        }
        if kind == ModelKind::Axisymmetric && !piola && !cylindrical {
            let why = format!(
                "{}: stresses of an axisymmetric model must be named srr stt szz srt stz szr; map the columns",
                header.file
            );
            return Err(NoStress::NotConvertible(why));
        }
        let needs_f = matches!(
            measure,
            StressMeasure::FirstPiolaKirchhoff | StressMeasure::SecondPiolaKirchhoff
        );
        let needs_j = measure == StressMeasure::Kirchhoff;
        if let (true, Err(why)) = (needs_f, f) {
            let why = format!(
                "{} stress needs F for its conversion: {why}",
                measure.name()
            );
            return Err(NoStress::NotConvertible(why));
        }
        if needs_j && !j && f.is_err() {
            let why = format!(
                "{} stress needs J or F: {}",
                measure.name(),
                header.missing_reason("J")
            );
            return Err(NoStress::NotConvertible(why));
        }
        let columns: Vec<Option<usize>> = names.iter().map(|name| header.find(name, log)).collect();
        let given = |i: usize| columns.get(i).is_some_and(Option::is_some);
        let components = match measure {
            StressMeasure::FirstPiolaKirchhoff => {
                if let Some(&i) = needed(kind).iter().find(|&&i| !given(i)) {
                    return Err(NoStress::NotConvertible(header.missing_reason(PIOLA[i])));
                }
                let all = columns.iter().all(Option::is_some);
                Components::of(|i| match kind {
                    ModelKind::Solid => true,
                    ModelKind::Planar => all || (i != 4 && i != 5),
                    ModelKind::Axisymmetric => all || (i != 3 && i != 4),
                })
            }
            _ => {
                let frame_turns = cylindrical && kind != ModelKind::Axisymmetric;
                coupled(given, kind, frame_turns, needs_f)
            }
        };
        if components.is_empty() {
            let why = format!(
                "{}: the stress components given cannot be converted one by one",
                header.file
            );
            return Err(NoStress::NotConvertible(why));
        }
        let shear = if conventions.shear == Shear::Engineering && !piola {
            0.5
        } else {
            1.0
        };
        let zero = match needs_f && !components.is_full() {
            true => (0..9).filter(|i| !needed(kind).contains(i)).collect(),
            false => Vec::new(),
        };
        Ok(Self {
            columns,
            zero,
            cylindrical,
            measure,
            shear,
            needs_f,
            needs_j,
            components,
        })
    }

    pub fn needs_f(&self) -> bool {
        self.needs_f || self.needs_j
    }

    /// Cauchy stress, Cartesian; `j` is the volume ratio when it is known.
    pub fn read(
        &self,
        row: &Row,
        direction: (f64, f64),
        f: Option<&[f64; 9]>,
        j: Option<f64>,
        scale: f64,
        log: &mut Log,
    ) -> Option<[f64; 6]> {
        let mut raw = [0.0; 9];
        let mut complete = true;
        for (value, column) in raw.iter_mut().zip(&self.columns) {
            if let Some(column) = column {
                match row.number(*column, log) {
                    Some(number) => *value = number * scale,
                    None => complete = false,
                }
            }
        }
        if !complete {
            return None;
        }
        if let Some(f) = f
            && let Some(&i) = self.zero.iter().find(|&&i| f[i].abs() > OFF_BLOCK)
        {
            let what = format!(
                "{} is {}, and not all stress components are given",
                GRADIENT[i], f[i]
            );
            let hint = "the conversion to Cauchy stress needs them all";
            log.add(Finding::refused("stress-conversion", row.line_place(), what).hint(hint));
            return None;
        }
        let tensor = if self.measure == StressMeasure::FirstPiolaKirchhoff {
            self.measure.to_cauchy(&matrix(&raw), &matrix(f?))
        } else {
            let [a, b, c, d, e, g, ..] = raw;
            let h = self.shear;
            let mut tensor = SymTensor::from_array([a, b, c, d * h, e * h, g * h]);
            if self.cylindrical {
                tensor = tensor.cylindrical_to_cartesian(direction);
            }
            match self.measure {
                StressMeasure::Kirchhoff => {
                    let j = j.or_else(|| f.map(|f| matrix(f).determinant()))?;
                    SymTensor::from_array(tensor.to_array().map(|t| t / j))
                }
                StressMeasure::SecondPiolaKirchhoff => {
                    self.measure.to_cauchy(&tensor.to_matrix(), &matrix(f?))
                }
                StressMeasure::Cauchy | StressMeasure::FirstPiolaKirchhoff => tensor,
            }
        };
        let mut cauchy = tensor.to_array();
        for (i, component) in cauchy.iter_mut().enumerate() {
            if !self.components.has(i) {
                *component = f64::NAN;
            }
        }
        Some(cauchy)
    }
}

/// Which components survive: turning the frame mixes xx, yy and xy, and yz with zx; F mixes all that the kind
/// of model lets it mix. A group that is not complete is left out.
fn coupled(
    given: impl Fn(usize) -> bool,
    kind: ModelKind,
    frame_turns: bool,
    by_f: bool,
) -> Components {
    let all = |group: &[usize]| group.iter().all(|&i| given(i));
    let groups: &[&[usize]] = match (by_f, kind, frame_turns) {
        (false, _, false) => &[&[0], &[1], &[2], &[3], &[4], &[5]],
        (false, _, true) | (true, ModelKind::Planar, _) => &[&[0, 1, 3], &[2], &[4, 5]],
        // F13 and F31 mix rr, zz and zr; rt mixes with tz
        (true, ModelKind::Axisymmetric, _) => &[&[0, 2, 5], &[1], &[3, 4]],
        (true, ModelKind::Solid, _) => &[&[0, 1, 2, 3, 4, 5]],
    };
    let whole = |i: usize| groups.iter().any(|group| group.contains(&i) && all(group));
    Components::of(whole)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn only_whole_groups_survive_a_turn_or_a_conversion() {
        let plane = |i: usize| [0, 1, 2, 3].contains(&i);
        let no_shear = |i: usize| [0, 1, 2].contains(&i);
        let names = |c: Components| c.names().join(" ");
        assert_eq!(
            names(coupled(plane, ModelKind::Planar, false, false)),
            "xx yy zz xy"
        );
        assert_eq!(
            names(coupled(no_shear, ModelKind::Planar, true, false)),
            "zz"
        );
        assert_eq!(
            names(coupled(plane, ModelKind::Planar, true, true)),
            "xx yy zz xy"
        );
        assert_eq!(
            names(coupled(no_shear, ModelKind::Axisymmetric, false, false)),
            "xx yy zz"
        );
        assert_eq!(
            names(coupled(no_shear, ModelKind::Axisymmetric, false, true)),
            "yy"
        );
        assert!(coupled(plane, ModelKind::Solid, false, true).is_empty());
        assert!(coupled(|_| true, ModelKind::Solid, true, true).is_full());
    }

    #[test]
    fn a_mask_knows_its_trace() {
        let mask = Components::of(|i| i < 3);
        assert!(mask.has_trace() && !mask.is_full() && mask.has(2) && !mask.has(3) && !mask.has(9));
        assert!(!Components::of(|i| i < 2).has_trace());
    }
}
