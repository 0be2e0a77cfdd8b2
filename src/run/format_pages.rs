//! Pages of the catalogue that say how to write things down: columns of the tables, keys of a suite.

/// `truebore catalogue columns`.
pub const COLUMNS: &str = "\
columns of the tables (a result set is one folder with these files, plain, .csv.gz or in parts)

nodes.csv, one row a node (and a step)
  node                        unique whole number
  X Y [Z]                     reference coordinates; or R Theta [Z]; axisymmetric models: R Z
  ux uy [uz]                  displacement; or ur ut [uz]; or current coordinates x y [z] instead
  sxx syy szz sxy syz szx     recovered Cauchy stress, optional; or srr stt szz srt stz szr
  p                           optional
  step                        whole number, optional

elements.csv
  element, shape, n1 n2 ...   node order of the open VTK file formats (`truebore catalogue quad9` shows it)
  region                      optional

points.csv, one row an integration point (and a step)
  element, point              whole numbers
  X Y [Z]                     as for nodes; may be left out with `point-rule:`
  weight                      quadrature weight times det(dX/dxi); times 2 pi R in axisymmetric models
  sxx syy szz sxy syz szx     Cauchy, Kirchhoff or second Piola-Kirchhoff, as declared
  srr stt szz srt stz szr     the same in cylindrical components (the only names in axisymmetric models)
  P11 P12 ... P33             first Piola-Kirchhoff, first index the direction of the force
  F11 F12 ... F33             deformation gradient, needed to convert either Piola-Kirchhoff stress
  p, J, W                     optional; J also converts Kirchhoff stress

totals.csv
  quantity, value, [step]     strain_energy, axial_stretch, axial_force, load_factor, ...

Other headers are declared with `columns:`, for all tables or one by one:
  columns: { ux: U1, uy: U2, points: { X: XG, Y: YG } }
";

/// `truebore catalogue suite`.
pub const SUITE: &str = "\
keys of a suite
  suite            short name; the reports' folder
  title, subject   what is judged, in words
  invented         true for demo data of an invented scenario
  units            { length: mm, stress: MPa }
  materials        name: { law: { constants } }
  accept           criteria for every case
  columns, conventions, point-rule, step    for every case, unless it says otherwise
  cases            list of cases

keys of a case
  id, title
  problem          an exact solution with its parameters; a list where a value stands makes cases
  reference        exact (without it), or published: also the published values of this very problem, by known-value
  element          quad4, or { displacement: quad9, pressure: quad4 | constant | linear | quadratic }
  section          modelled share of the section, e.g. 1/4
  axial-length     of a solid; checked against the mesh
  results          folder of a level below the suite's, with {level}, {id} and any parameter in braces
  levels           coarsest first
  h                mesh size of each level; without it (volume / elements)^(1/dimension)
  accept           { error: M, at-most: L }, { value: M, at-most | at-least: L },
                   { order: M, within: L } of theory, { order: M, at-least: L }; `level:`, `by: fit`
  expected-orders  { M: order }, where the element's own do not hold
  units            of the files, where they are not the suite's
  columns          headers of the files: see `truebore catalogue columns`
  conventions      stress: cauchy | first-piola-kirchhoff | second-piola-kirchhoff | kirchhoff
                   pressure: mean | multiplier           pressure-positive: compression | tension
                   shear: tensor | engineering           angles: radians | degrees
  point-rule       standard rule of the integration points, where points.csv has no coordinates
  step             load step to judge; without it the last
  load-factor      share of the case's loads that the results are at
  node-tolerance   how far a node may lie off the body, for files of few digits

ends of a tube
  plane-strain; closed; plane-stress (small strain)
  generalized-plane-strain, or { generalized-plane-strain: { axial-force: 20 N } }
  { fixed-stretch: { axial-stretch: 1.2 } }
";

#[cfg(test)]
mod tests {
    use super::*;
    use crate::mechanics::StressMeasure;

    /// The page names every key the reader knows, so that it cannot fall behind.
    #[test]
    fn every_key_of_the_reader_is_on_the_page() {
        let source = concat!(
            include_str!("../suite/read.rs"),
            include_str!("../suite/export.rs"),
            include_str!("../suite/criteria.rs")
        );
        for call in ["optional(\"", "required(\"", "&mut block, \""] {
            for after in source.split(call).skip(1) {
                let key = after.split('"').next().unwrap_or_default();
                assert!(SUITE.contains(key), "{key} is not on the page");
            }
        }
        for measure in StressMeasure::ALL {
            assert!(SUITE.contains(measure.name()));
        }
    }
}
