//! Every measure: its name in suites and files, what it needs, and which order it should show.

use crate::mechanics::Dimension;

/// The kind of quantity a measure is, for the order theory expects of it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Class {
    /// Displacement, in a norm or at a place.
    Displacement,
    /// First derivatives of displacement and what follows from them pointwise (J, W).
    Gradient,
    Stress,
    Pressure,
    /// Energies, reactions, global unknowns.
    Functional,
}

/// A measure.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Measure {
    pub name: &'static str,
    /// In words, for tables.
    pub title: &'static str,
    /// At most 15 characters, for plots.
    pub label: &'static str,
    pub class: Class,
    /// What its value is measured in (for norms: the field's, before the root of the volume).
    pub dimension: Dimension,
    pub meaning: &'static str,
    pub needs: &'static str,
}

macro_rules! measures {
    ($($name:literal $title:literal $label:literal $class:ident $dimension:ident $meaning:literal $needs:literal;)*) => {
        &[$(Measure {
            name: $name,
            title: $title,
            label: $label,
            class: Class::$class,
            dimension: Dimension::$dimension,
            meaning: $meaning,
            needs: $needs,
        }),*]
    };
}

/// All measures, in the order reports print them.
pub const MEASURES: &[Measure] = measures! {
    "displacement-L2" "Displacement, L2" "displacement" Displacement Length
        "root of the integral of |u - u_exact|^2 over the mesh; relative to that of |u_exact|^2"
        "nodes: ux uy [uz]; elements";
    "displacement-H1" "Displacement gradient, L2" "gradient" Gradient None
        "the same of all components of du/dX (H1 seminorm)"
        "nodes: ux uy [uz]; elements";
    "stress-L2" "Stress, L2" "stress" Stress Stress
        "the same of the Cauchy stress over the integration points with their weights; each shear counts twice"
        "points: weight, X Y [Z], sxx syy sxy [szz; in 3D all six]";
    "pressure-L2" "Pressure, L2" "pressure" Pressure Stress
        "the same of p = -tr(sigma)/3"
        "points: weight, X Y [Z], p or sxx syy szz";
    "volume-ratio-L2" "Volume ratio, L2" "volume ratio" Gradient None
        "the same of J; relative to that of the exact J - 1, or of one where the exact volume does not change"
        "points: weight, X Y [Z], J";
    "energy-density-L2" "Energy density, L2" "energy density" Stress EnergyDensity
        "the same of the strain energy per reference volume"
        "points: weight, X Y [Z], W";
    "displacement-rms" "Displacement, root mean square" "displacement" Displacement Length
        "root of the mean over the mesh of the squared error: what a limit with a unit on displacement-L2 is held against"
        "nodes: ux uy [uz]; elements";
    "stress-rms" "Stress, root mean square" "stress" Stress Stress
        "root of the mean over the mesh of the squared error: what a limit with a unit on stress-L2 is held against"
        "points: weight, X Y [Z], sxx syy sxy [szz; in 3D all six]";
    "pressure-rms" "Pressure, root mean square" "pressure" Pressure Stress
        "root of the mean over the mesh of the squared error: what a limit with a unit on pressure-L2 is held against"
        "points: weight, X Y [Z], p or sxx syy szz";
    "energy-density-rms" "Energy density, root mean square" "energy density" Stress EnergyDensity
        "root of the mean over the mesh of the squared error: what a limit with a unit on energy-density-L2 is held against"
        "points: weight, X Y [Z], W";
    "displacement-largest" "Displacement, largest nodal" "largest u" Displacement Length
        "largest |u - u_exact| of any node, and where; relative to the largest nodal |u_exact|"
        "nodes: ux uy [uz]";
    "inner-wall-displacement" "Displacement of the inner wall" "inner wall u" Displacement Length
        "radial displacement of the inner-wall node that is furthest off"
        "nodes: ux uy [uz]";
    "mid-wall-displacement" "Displacement at mid-wall" "mid-wall u" Displacement Length
        "radial displacement of the node nearest to the middle radius that is furthest off, at its own radius"
        "nodes: ux uy [uz]";
    "outer-wall-displacement" "Displacement of the outer wall" "outer wall u" Displacement Length
        "radial displacement of the outer-wall node that is furthest off"
        "nodes: ux uy [uz]";
    "inner-wall-srr" "Radial stress at the inner wall" "inner wall srr" Stress Stress
        "at the integration points nearest to the inner wall, against the exact value at the same points"
        "points: weight, X Y [Z], sxx syy sxy";
    "inner-wall-stt" "Hoop stress at the inner wall" "inner wall stt" Stress Stress
        "at the integration points nearest to the inner wall, against the exact value at the same points"
        "points: weight, X Y [Z], sxx syy sxy";
    "inner-wall-szz" "Axial stress at the inner wall" "inner wall szz" Stress Stress
        "at the integration points nearest to the inner wall, against the exact value at the same points"
        "points: weight, X Y [Z], szz";
    "mid-wall-srr" "Radial stress at mid-wall" "mid-wall srr" Stress Stress
        "at the integration points nearest to the middle radius, against the exact value at the same points"
        "points: weight, X Y [Z], sxx syy sxy";
    "mid-wall-stt" "Hoop stress at mid-wall" "mid-wall stt" Stress Stress
        "at the integration points nearest to the middle radius, against the exact value at the same points"
        "points: weight, X Y [Z], sxx syy sxy";
    "mid-wall-szz" "Axial stress at mid-wall" "mid-wall szz" Stress Stress
        "at the integration points nearest to the middle radius, against the exact value at the same points"
        "points: weight, X Y [Z], szz";
    "outer-wall-srr" "Radial stress at the outer wall" "outer wall srr" Stress Stress
        "at the integration points nearest to the outer wall, against the exact value at the same points"
        "points: weight, X Y [Z], sxx syy sxy";
    "outer-wall-stt" "Hoop stress at the outer wall" "outer wall stt" Stress Stress
        "at the integration points nearest to the outer wall, against the exact value at the same points"
        "points: weight, X Y [Z], sxx syy sxy";
    "outer-wall-szz" "Axial stress at the outer wall" "outer wall szz" Stress Stress
        "at the integration points nearest to the outer wall, against the exact value at the same points"
        "points: weight, X Y [Z], szz";
    "inner-wall-srr-extrapolated" "Radial stress extrapolated to the inner wall" "srr at wall" Stress Stress
        "straight line in R through the integration points of each wall element, at the wall"
        "points: weight, X Y [Z], sxx syy sxy; nodes; elements";
    "inner-wall-stt-extrapolated" "Hoop stress extrapolated to the inner wall" "stt at wall" Stress Stress
        "straight line in R through the integration points of each wall element, at the wall"
        "points: weight, X Y [Z], sxx syy sxy; nodes; elements";
    "inner-wall-szz-extrapolated" "Axial stress extrapolated to the inner wall" "szz at wall" Stress Stress
        "straight line in R through the integration points of each wall element, at the wall"
        "points: weight, X Y [Z], szz; nodes; elements";
    "outer-wall-srr-extrapolated" "Radial stress extrapolated to the outer wall" "srr at outside" Stress Stress
        "straight line in R through the integration points of each wall element, at the wall"
        "points: weight, X Y [Z], sxx syy sxy; nodes; elements";
    "outer-wall-stt-extrapolated" "Hoop stress extrapolated to the outer wall" "stt at outside" Stress Stress
        "straight line in R through the integration points of each wall element, at the wall"
        "points: weight, X Y [Z], sxx syy sxy; nodes; elements";
    "outer-wall-szz-extrapolated" "Axial stress extrapolated to the outer wall" "szz at outside" Stress Stress
        "straight line in R through the integration points of each wall element, at the wall"
        "points: weight, X Y [Z], szz; nodes; elements";
    "inner-wall-srr-nodal" "Radial stress recovered at inner-wall nodes" "nodal srr" Stress Stress
        "recovered nodal stress of the inner-wall node that is furthest off"
        "nodes: sxx syy sxy";
    "inner-wall-stt-nodal" "Hoop stress recovered at inner-wall nodes" "nodal stt" Stress Stress
        "recovered nodal stress of the inner-wall node that is furthest off"
        "nodes: sxx syy sxy";
    "inner-wall-szz-nodal" "Axial stress recovered at inner-wall nodes" "nodal szz" Stress Stress
        "recovered nodal stress of the inner-wall node that is furthest off"
        "nodes: szz";
    "outer-wall-srr-nodal" "Radial stress recovered at outer-wall nodes" "outer nodal srr" Stress Stress
        "recovered nodal stress of the outer-wall node that is furthest off"
        "nodes: sxx syy sxy";
    "outer-wall-stt-nodal" "Hoop stress recovered at outer-wall nodes" "outer nodal stt" Stress Stress
        "recovered nodal stress of the outer-wall node that is furthest off"
        "nodes: sxx syy sxy";
    "outer-wall-szz-nodal" "Axial stress recovered at outer-wall nodes" "outer nodal szz" Stress Stress
        "recovered nodal stress of the outer-wall node that is furthest off"
        "nodes: szz";
    "strain-energy" "Strain energy" "stored energy" Functional Energy
        "of what the mesh models (per unit length in a slice), against the exact body's share"
        "totals: strain_energy";
    "axial-stretch" "Axial stretch" "axial stretch" Functional None
        "of the model"
        "totals: axial_stretch";
    "axial-force" "Axial force" "axial force" Functional Force
        "net axial force on the modelled share of the wall; where the exact one is zero, give the limit as a force"
        "totals: axial_force";
    "torque" "Torque" "torque" Functional Energy
        "torque about the axis on the modelled share of the section (of a slice: per unit length)"
        "totals: torque";
    "bending-moment" "Bending moment" "moment" Functional Force
        "moment per unit width on the modelled share of the section"
        "totals: bending_moment";
    "enclosed-volume" "Enclosed volume" "volume" Functional Area
        "deformed volume of the bore of the modelled share (of a slice: per unit reference length)"
        "totals: enclosed_volume";
    "known-value" "Published or tabulated value" "known value" Functional None
        "the number the case names, by a total or at a node; of several the one farthest off"
        "totals or nodes, as the value says";
};

/// The measure of that name.
pub fn find(name: &str) -> Option<&'static Measure> {
    MEASURES.iter().find(|measure| measure.name == name)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_are_unique_and_labels_short() {
        for (i, m) in MEASURES.iter().enumerate() {
            assert!(
                MEASURES[i + 1..].iter().all(|n| n.name != m.name),
                "{}",
                m.name
            );
            assert!(m.label.len() <= 15, "{}", m.label);
            assert!(find(m.name).is_some());
        }
    }
}
