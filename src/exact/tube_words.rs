//! A pressurised tube in words, the same for every solution that is one.

use super::Ends;
use super::description::{Description, Sketch};
use super::solution::Kinematics;
use crate::mechanics::{Dimension, UnitSystem};

/// What is prescribed at the bore.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Bore {
    Pressure,
    /// a/A.
    Stretch(f64),
    /// pi a^2 lz.
    Volume(f64),
}

/// What the words are made of.
#[derive(Debug, Clone, Copy)]
pub(super) struct TubeWords {
    pub inner: f64,
    pub outer: f64,
    pub ends: Ends,
    pub bore: Bore,
    /// The pressure in the bore, given or found.
    pub inner_pressure: f64,
    pub outer_pressure: f64,
    pub kinematics: Kinematics,
    /// Nominal pressures per reference area that keep their size.
    pub dead: bool,
}

/// `tube`, or a tube of layers by the radii where they meet; `outer` are the outer radii of the layers.
pub(super) fn layers_in_words(outer: &[f64], unit: &str) -> String {
    let Some((_, inner)) = outer.split_last().filter(|(_, inner)| !inner.is_empty()) else {
        return "tube".to_string();
    };
    let inner: Vec<_> = inner.iter().map(f64::to_string).collect();
    format!(
        "tube of {} bonded layers that meet at R = {} {unit}",
        outer.len(),
        inner.join(", ")
    )
}

/// Pressures on the walls in words: `0.03 MPa on the bore`.
pub(super) fn pressures(walls: [(&str, f64); 2], units: &UnitSystem) -> String {
    let unit = units.stress.name;
    let loaded: Vec<_> = walls
        .iter()
        .filter(|(_, pressure)| *pressure != 0.0)
        .map(|(wall, pressure)| format!("{pressure} {unit} on the {wall}"))
        .collect();
    loaded.join(" and ")
}

impl TubeWords {
    /// The whole description; `body` is what comes before the radii.
    pub fn description(&self, body: &str, units: &UnitSystem) -> Description {
        let length = units.length.name;
        let mut totals = vec!["strain_energy", "axial_force", "load_factor"];
        let held = matches!(self.ends, Ends::PlaneStrain | Ends::FixedStretch { .. });
        // in plane stress the thickness changes by another amount at every radius
        if !held && self.ends != Ends::PlaneStress {
            totals.insert(1, "axial_stretch");
        }
        Description {
            body: format!(
                "{body}, inner radius {} {length}, outer radius {} {length}",
                self.inner, self.outer
            ),
            load: self.load(units),
            ends: Some(self.ends_in_words(units)),
            modelling: vec![self.load_note().to_string(), self.ends_note().to_string()],
            totals,
            sketch: Some(Sketch {
                inner_radius: self.inner,
                outer_radius: self.outer,
                inner_pressure: self.inner_pressure,
                outer_pressure: self.outer_pressure,
                ends: self.ends_in_two_words(),
            }),
        }
    }

    fn load(&self, units: &UnitSystem) -> String {
        let bore = match self.bore {
            Bore::Pressure => None,
            Bore::Stretch(stretch) => Some(format!("bore moved to {stretch} times its radius")),
            Bore::Volume(volume) => {
                let unit = units.name_of(Dimension::Area);
                Some(format!(
                    "bore filled to {volume} {unit} per reference length"
                ))
            }
        };
        let pressures = self.pressures(units, bore.is_none());
        match bore {
            None => pressures,
            Some(bore) if self.outer_pressure == 0.0 => bore,
            Some(bore) => format!("{bore}; {pressures}"),
        }
    }

    fn pressures(&self, units: &UnitSystem, both: bool) -> String {
        let inner = if both { self.inner_pressure } else { 0.0 };
        let walls = [("bore", inner), ("outer wall", self.outer_pressure)];
        let follows = match (self.kinematics, self.dead) {
            (Kinematics::Finite, false) => "follows the deformed wall",
            (Kinematics::Finite, true) => "per reference area, a dead load",
            (Kinematics::SmallStrain, _) => "on the undeformed wall",
        };
        match pressures(walls, units) {
            none if none.is_empty() => "no pressure".to_string(),
            loaded => format!("{loaded}, {follows}"),
        }
    }

    fn load_note(&self) -> &'static str {
        match (self.kinematics, self.dead) {
            (Kinematics::Finite, false) => {
                "the load is normal to the deformed surface, per deformed area (a follower load)"
            }
            (Kinematics::Finite, true) => {
                "the load is radial, per reference area, and keeps its size (a dead load)"
            }
            (Kinematics::SmallStrain, _) => "small-strain kinematics",
        }
    }

    fn ends_in_words(&self, units: &UnitSystem) -> String {
        match self.ends {
            Ends::PlaneStrain => "held at their length (plane strain)".to_string(),
            Ends::GeneralizedPlaneStrain { axial_force: 0.0 } => {
                "free to move axially, staying plane; no net axial force (generalized plane strain)"
                    .to_string()
            }
            Ends::GeneralizedPlaneStrain { axial_force } => format!(
                "free to move axially, staying plane; net axial force {axial_force} {} on the wall \
                 (generalized plane strain)",
                units.name_of(Dimension::Force)
            ),
            Ends::Closed => "closed by rigid caps that the pressures push apart".to_string(),
            Ends::FixedStretch { axial_stretch } => {
                format!("held at the axial stretch {axial_stretch}")
            }
            Ends::PlaneStress => "free of axial stress at every point (plane stress)".to_string(),
        }
    }

    fn ends_in_two_words(&self) -> &'static str {
        match self.ends {
            Ends::PlaneStrain => "ends held",
            Ends::GeneralizedPlaneStrain { axial_force: 0.0 } => "ends free",
            Ends::GeneralizedPlaneStrain { .. } => "axial force given",
            Ends::Closed => "ends closed",
            Ends::FixedStretch { .. } => "axial stretch given",
            Ends::PlaneStress => "plane stress",
        }
    }

    fn ends_note(&self) -> &'static str {
        match self.ends {
            Ends::PlaneStrain => {
                "slice: plane strain; solid: no axial displacement at both end faces"
            }
            Ends::GeneralizedPlaneStrain { .. } => {
                "slice: one axial stretch for the whole wall as an unknown; solid: end faces stay plane and parallel, \
                 no axial displacement at Z = 0"
            }
            Ends::Closed if self.kinematics == Kinematics::SmallStrain => {
                "the net axial force on the wall is inner pressure x pi A^2 - outer pressure x pi B^2 with the given \
                 radii A, B; end faces stay plane and parallel; solid: no axial displacement at Z = 0"
            }
            Ends::Closed if self.dead => {
                "the net axial force on the wall is inner load x pi A^2 - outer load x pi B^2 with the reference \
                 radii A, B; end faces stay plane and parallel; solid: no axial displacement at Z = 0"
            }
            Ends::Closed => {
                "the net axial force on the wall is inner pressure x pi a^2 - outer pressure x pi b^2 with the deformed \
                 radii a, b; end faces stay plane and parallel; solid: no axial displacement at Z = 0"
            }
            Ends::FixedStretch { .. } => {
                "slice: this axial stretch everywhere; solid: end faces moved apart by it, no axial displacement at Z = 0"
            }
            Ends::PlaneStress => "slice: plane stress; solid: end faces free",
        }
    }
}
