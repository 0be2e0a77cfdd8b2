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

/// `truebore catalogue expressions`.
pub const EXPRESSIONS: &str = "\
expressions, e.g. of the law `stated`
  materials:
    soft: { stated: { energy: \"mu/2*(I1-3) + c*(I1-3)^2\", constants: { mu: 0.4, c: 0.01 } } }

numbers     2   0.5   .5   1e-3   1.5E+2        the decimal mark is a point, no unit
signs       + - * /   ^ power   ( )             strongest first: ^, then - in front, then * /, then + -
            -x^2 is -(x^2), 2^3^2 is 2^(3^2), 2^-3 is allowed, 2 x and 2x are not: write 2*x
functions   exp expm1 ln log10 log1p sqrt       expm1(x) = exp(x) - 1, log1p(x) = ln(1 + x)
            sin cos tan asin acos atan          of radians
            sinh cosh tanh
            pos(x)                              x where x > 0, else 0; its derivative at 0 is 0
            There are no abs, min, max: they have no derivative where they turn.
powers      x^n of a whole number n for every x; x^c of any other constant c for x >= 0; x^y for x > 0
names       pi, and what is listed below; every other name must be among the constants (E, e, N are ordinary names);
            capital and small letters differ
limits      10000 characters, 100 levels of ( ), - and ^
derivatives are exact and never typed. Where a function has no value (ln of a negative number) the law has none.

energy of the law `stated`, per reference volume, with l1 l2 l3 = 1, of
  I1, I2      I1 = l1^2 + l2^2 + l3^2,  I2 = l1^-2 + l2^-2 + l3^-2
  l1, l2, l3  the stretches, radial, hoop, axial; the energy must be the same for every order of them (checked at 5
              states); I1 and I2 may stand beside them, pos() may not
  I4          of two families of fibres at +-beta from the hoop direction, with a constant beta:
              I4 = lt^2 cos(beta)^2 + lz^2 sin(beta)^2 of either family. W as typed counts both families: an energy k1/(2 k2)
              (exp(k2 (I4-1)^2) - 1) of each of two families is typed with k1/k2. pos(I4-1) for fibres that act in tension only.
  e.g. { stated: { energy: \"mu/2*(I1-3) + k1/k2*expm1(k2*pos(I4-1)^2)\", constants: { mu: 3, k1: 2, k2: 0.8, beta: 30 deg } } }
  It must be zero without strain, its shear modulus there positive, and every constant must occur in it.

digits of the law `stated`
  of invariants  I1 - 3, I2 - 3 and I4 - 1 are taken as differences of the strain, not subtracted: stresses keep all digits at
                 any strain. W keeps them if it is written with these three, and below I - 3 = 0.5 however it is written.
  of stretches   stress differences have eps/strain of themselves (eps = 2.2e-16) where the strain ln(li/lj) is above 0.5; below
                 they are integrated from second derivatives and keep all digits.
  pos()          kinks are searched for in -6 < ln(lt/lr) < 6 in steps of 0.02: two within one step are not seen.
  A pole of the energy (a locking stretch written as 1/(1-x)) must not be passed: beyond it the law is taken at its word, unless W is
  negative or no number there. Written with ln(1-x) it has no value there.
";

#[cfg(test)]
mod tests {
    use super::*;
    use crate::mechanics::StressMeasure;
    use crate::numerics::expression::{DEEPEST, Function, LONGEST};

    #[test]
    fn every_function_and_limit_is_on_the_page() {
        let words: Vec<_> = EXPRESSIONS.split(|c: char| !c.is_alphanumeric()).collect();
        for name in Function::names() {
            assert!(words.contains(&name), "{name}");
        }
        assert!(EXPRESSIONS.contains(&format!("{LONGEST} characters, {DEEPEST} levels")));
    }

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
