//! Suites broken in every way we could think of, given to the real program.
//!
//! Each must end with status 2, print nothing on stdout, name its place (line, column, path) and say what is wrong
//! or how to mend it, and leave an earlier report as it was. Red when a message loses its place or its words.

use assert_cmd::Command;
use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};
use tempfile::TempDir;

/// File in tests/data/broken-suites, where stderr must place the fault, and words it must say.
const BROKEN: &[(&str, &str, &str)] = &[
    ("unknown-key-suite", ":2:1: autor", "unknown key `autor`"),
    (
        "unknown-key-units",
        ":2:35: units.time",
        "unknown key `time`",
    ),
    (
        "unknown-key-case",
        ":16:5: cases[0].secton",
        "hint: did you mean `section`?",
    ),
    (
        "unknown-key-problem",
        ":14:9: cases[0].problem.pressurised-tube.inner_pressure",
        "hint: did you mean `inner-pressure`?",
    ),
    (
        "unknown-key-element",
        ":15:37: cases[0].element.presure",
        "hint: did you mean `pressure`?",
    ),
    (
        "unknown-key-criterion",
        ":20:51: cases[0].accept[0].levels",
        "hint: did you mean `level`?",
    ),
    (
        "unknown-key-conventions",
        ":2:16: conventions.stres",
        "hint: did you mean `stress`?",
    ),
    (
        "unknown-key-material",
        ":4:40: materials.soft.neo-Hookean.nu",
        "neo-Hookean has no parameter `nu`",
    ),
    ("wrong-type-cases", ":6:8: cases", "found a single value"),
    (
        "wrong-type-number",
        ":10:23: cases[0].problem.pressurised-tube.inner-radius",
        "\"eight\" is not a number with an optional unit",
    ),
    ("wrong-type-block", ":2:8: units", "found \"mm\""),
    (
        "wrong-type-text",
        ":17:14: cases[0].results",
        "found a list",
    ),
    ("wrong-type-flag", ":2:11: invented", "found \"yes\""),
    ("wrong-type-suite-is-a-list", ":1:1", "found a list"),
    ("wrong-type-suite-is-a-word", ":1:1", "found \"suite\""),
    (
        "duplicate-key",
        ":17:5",
        "the key `section` stands twice in this block",
    ),
    ("missing-units", ":1:1: units", "`units:` is missing"),
    (
        "missing-stress-unit",
        ":2:8: units.stress",
        "`stress:` is missing",
    ),
    (
        "missing-material",
        ":10:9: cases[0].problem.pressurised-tube.material",
        "`material:` is missing",
    ),
    (
        "missing-ends",
        ":10:9: cases[0].problem.pressurised-tube.ends",
        "`ends:` is missing",
    ),
    (
        "missing-problem",
        ":7:5: cases[0].problem",
        "`problem:` is missing",
    ),
    (
        "missing-problem-parameters",
        ":8:14: cases[0].problem.pressurised-tube",
        "`pressurised-tube` has no parameters",
    ),
    (
        "missing-constant",
        ":4:9: materials.soft.neo-Hookean",
        "neo-Hookean needs mu (shear modulus)",
    ),
    (
        "energy-unknown-name",
        ":4:29: materials.soft.stated.energy",
        "energy: unknown name \"k9\" at character 17, after \"mu/2*(I1 - 3) + \"; expected one of I1, I2, I4, l1, l2, l3, mu, k1, pi",
    ),
    (
        "energy-open-parenthesis",
        ":4:29: materials.soft.stated.energy",
        "energy: the text ends at character 12, after \"0.2*(I1 - 3\"; expected an operator, or \")\" for the \"(\" at character 5",
    ),
    (
        "energy-implied-product",
        ":4:29: materials.soft.stated.energy",
        "hint: multiplication is written `*`",
    ),
    (
        "energy-not-zero-at-rest",
        ":4:29: materials.soft.stated.energy",
        "the energy of the unstrained material is 0.2, it must be zero",
    ),
    (
        "energy-without-stiffness",
        ":4:29: materials.soft.stated.energy",
        "the shear modulus of the unstrained material is 0, it must be positive",
    ),
    (
        "energy-not-symmetric",
        ":4:29: materials.soft.stated.energy",
        "an isotropic energy does not depend on the order of l1, l2, l3",
    ),
    (
        "energy-fibres-without-angle",
        ":4:29: materials.soft.stated.energy",
        "I4 needs the angle of the fibres: beta is not among the constants",
    ),
    (
        "energy-angle-in-degrees",
        ":4:74: materials.soft.stated.constants.beta",
        "beta = 40 is outside 0 <= beta <= pi/2 (90 deg)",
    ),
    (
        "energy-unused-constant",
        ":4:62: materials.soft.stated.constants.mu",
        "the constant mu does not occur in the energy",
    ),
    (
        "energy-is-a-list",
        ":4:29: materials.soft.stated.energy",
        "found a list",
    ),
    (
        "energy-missing",
        ":4:9: materials.soft.stated",
        "stated needs energy",
    ),
    (
        "unknown-law",
        ":4:9: materials.soft.Neo-Hooke",
        "hint: did you mean `neo-Hookean`?",
    ),
    (
        "unknown-material",
        ":13:19: cases[0].problem.pressurised-tube.material",
        "hint: did you mean `soft`?",
    ),
    (
        "unknown-solution",
        ":9:7: cases[0].problem.pressurized-tube",
        "hint: did you mean `pressurised-tube`?",
    ),
    (
        "unknown-measure",
        ":20:18: cases[0].accept[0].error",
        "hint: did you mean `displacement-L2`?",
    ),
    (
        "unknown-unit",
        ":2:30: units.stress",
        "hint: did you mean `MPa`?",
    ),
    (
        "unknown-unit-of-a-number",
        ":14:25: cases[0].problem.pressurised-tube.inner-pressure",
        "unknown unit \"kpa\", did you mean kPa?",
    ),
    (
        "unknown-shape",
        ":15:30: cases[0].element.displacement",
        "hint: did you mean `quad9`?",
    ),
    (
        "unknown-pressure-space",
        ":15:47: cases[0].element.pressure",
        "unknown pressure space \"quadd4\"",
    ),
    (
        "unknown-ends",
        ":12:15: cases[0].problem.pressurised-tube.ends",
        "hint: did you mean `plane-strain`?",
    ),
    (
        "unknown-convention",
        ":2:24: conventions.stress",
        "hint: did you mean `kirchhoff`?",
    ),
    (
        "outer-not-larger",
        ":11:24: cases[0].problem.pressurised-tube.outer-radius",
        "outer-radius = 8 must be larger than inner-radius = 8, in wall-8",
    ),
    (
        "outer-smaller",
        ":11:28: cases[0].problem.pressurised-tube.outer-radius",
        "outer-radius = 4 must be larger than inner-radius = 8, in wall-4",
    ),
    (
        "negative-radius",
        ":10:23: cases[0].problem.pressurised-tube.inner-radius",
        "inner-radius = -8 must be positive",
    ),
    (
        "zero-radius",
        ":10:23: cases[0].problem.pressurised-tube.inner-radius",
        "inner-radius = 0 must be positive",
    ),
    (
        "nan-radius",
        ":10:23: cases[0].problem.pressurised-tube.inner-radius",
        "\".nan\" is not a number with an optional unit",
    ),
    (
        "infinite-pressure",
        ":14:25: cases[0].problem.pressurised-tube.inner-pressure",
        "\".inf\" is not a number with an optional unit",
    ),
    (
        "number-too-large",
        ":14:25: cases[0].problem.pressurised-tube.inner-pressure",
        "\"1e400\" is not a finite number",
    ),
    (
        "decimal-comma",
        ":10:23: cases[0].problem.pressurised-tube.inner-radius",
        "\"8,5\" has a comma in the number, the decimal mark is a point",
    ),
    (
        "stress-for-a-length",
        ":10:23: cases[0].problem.pressurised-tube.inner-radius",
        "\"8 MPa\" has the wrong kind of unit; possible here: m, cm, mm, um, in, ft",
    ),
    (
        "length-for-a-stress",
        ":14:25: cases[0].problem.pressurised-tube.inner-pressure",
        "\"0.03 mm\" has the wrong kind of unit; possible here: Pa, hPa, kPa, MPa, GPa, bar, mbar, N/mm2,",
    ),
    (
        "load-beyond-the-limit-closed",
        ":14:25: cases[0].problem.pressurised-tube.inner-pressure",
        "inner-pressure = 0.5 is beyond the maximum 0.066916984856 that the tube can carry, reached at a",
    ),
    (
        "load-beyond-the-asymptote",
        ":14:25: cases[0].problem.pressurised-tube.inner-pressure",
        "inner-pressure = 0.1622 is beyond (or within round-off of) 0.162186043243, which the pressure",
    ),
    (
        "fixed-stretch-without-stretch",
        ":12:15: cases[0].problem.pressurised-tube.ends.fixed-stretch",
        "`axial-stretch:` is missing",
    ),
    (
        "fixed-stretch-of-zero",
        ":12:49: cases[0].problem.pressurised-tube.ends.fixed-stretch.axial-stretch",
        "axial-stretch = 0 must be positive",
    ),
    (
        "ends-with-a-stray-block",
        ":12:33: cases[0].problem.pressurised-tube.ends.plane-strain.axial-force",
        "unknown key `axial-force`",
    ),
    (
        "two-ends-in-one",
        ":12:15: cases[0].problem.pressurised-tube.ends",
        "found 2 keys (plane-strain, closed)",
    ),
    (
        "plane-stress-at-finite-strain",
        ":12:15: cases[0].problem.pressurised-tube.ends",
        "plane-stress does not exist for a thick tube at finite strain",
    ),
    (
        "linear-law-at-finite-strain",
        ":13:19: cases[0].problem.pressurised-tube.material",
        "a pressurised-tube cannot be made of linear-elastic",
    ),
    (
        "finite-law-at-small-strain",
        ":13:19: cases[0].problem.lame-tube.material",
        "a lame-tube cannot be made of neo-Hookean",
    ),
    (
        "negative-modulus",
        ":5:33: materials.stiff.linear-elastic.E",
        "E = -1.2 is outside E > 0",
    ),
    (
        "zero-modulus",
        ":4:30: materials.soft.neo-Hookean.mu",
        "mu = 0 is outside mu > 0",
    ),
    (
        "poisson-ratio-too-large",
        ":5:42: materials.stiff.linear-elastic.nu",
        "nu = 0.51 is outside -1 < nu <= 0.5: outside it the stored energy of some strain is negative",
    ),
    (
        "section-zero",
        ":16:14: cases[0].section",
        "\"0\" is no share of a section",
    ),
    (
        "section-three",
        ":16:14: cases[0].section",
        "\"3\" is no share of a section",
    ),
    (
        "section-with-a-unit",
        ":16:14: cases[0].section",
        "\"90 deg\" has the wrong kind of unit; possible here: 1, %",
    ),
    (
        "empty-list",
        ":11:23: cases[0].problem.pressurised-tube",
        "the list is empty, so that it makes no case",
    ),
    ("no-cases", ":6:8: cases", "the list of cases is empty"),
    (
        "level-listed-twice",
        ":18:20: cases[0].levels[2]",
        "\"1\" is listed twice",
    ),
    (
        "mesh-sizes-do-not-fall",
        ":19:9: cases[0].h[0]",
        "the mesh sizes do not fall from level to level",
    ),
    (
        "mesh-sizes-too-few",
        ":19:9: cases[0].h[0]",
        "1 mesh sizes for 2 levels",
    ),
    (
        "mesh-size-negative",
        ":19:12: cases[0].h[1]",
        "\"-0.5\" is not positive",
    ),
    (
        "levels-without-results",
        ":17:14: cases[0].levels[0]",
        "levels without result sets",
    ),
    (
        "results-absolute",
        ":17:14: cases[0].results",
        "\"/results/10/level-1\" is not relative to the suite's folder",
    ),
    (
        "results-leave-the-suite",
        ":17:14: cases[0].results",
        "\"../10/level-1\" leaves the suite's folder",
    ),
    (
        "results-unknown-name",
        ":17:14: cases[0].results",
        "\"{outer_radius}\" is unknown here, did you mean {outer-radius}? (known: {id}, {inner-radius},",
    ),
    (
        "results-open-brace",
        ":17:14: cases[0].results",
        "\"results/{outer-radius/level-{level}\" has a '{' without its '}'",
    ),
    (
        "results-stray-brace",
        ":17:14: cases[0].results",
        "\"results/outer-radius}/level-{level}\" has a '}' without its '{'",
    ),
    (
        "results-without-level",
        ":17:14: cases[0].results",
        "levels 1 and 2 have the same folder \"results/10/level\"",
    ),
    (
        "results-shared-by-cases",
        ":17:14: cases[0].results",
        "cases wall-10 and wall-12 have the same folder \"results/all/level-1\"",
    ),
    (
        "duplicate-ids",
        ":22:9: cases[1].id",
        "case id \"wall\" is already used at line 7",
    ),
    (
        "duplicate-ids-after-expansion",
        ":7:9: cases[0].id",
        "two cases would be called \"wall-10\"",
    ),
    (
        "criterion-without-limit",
        ":20:9: cases[0].accept[0]",
        "of `at-most:`, `at-least:`, `within:` none is given",
    ),
    (
        "criterion-with-two-limits",
        ":20:9: cases[0].accept[0]",
        "of `at-most:`, `at-least:`, `within:` more than one is given",
    ),
    (
        "criterion-without-subject",
        ":20:9: cases[0].accept[0]",
        "of `error:`, `value:`, `order:` none is given",
    ),
    (
        "criterion-error-at-least",
        ":20:45: cases[0].accept[0].at-least",
        "an error can only be limited from above",
    ),
    (
        "criterion-negative-limit",
        ":20:44: cases[0].accept[0].at-most",
        "the limit -1e-4 is not positive",
    ),
    (
        "criterion-order-with-a-unit",
        ":21:43: cases[0].accept[1].within",
        "an order has no unit, found 0.2 mm",
    ),
    (
        "criterion-order-at-most",
        ":21:44: cases[0].accept[1].at-most",
        "a high order is no fault",
    ),
    (
        "criterion-order-of-minus-one",
        ":21:45: cases[0].accept[1].at-least",
        "an order of -1 is met by an error that grows",
    ),
    (
        "criterion-order-any",
        ":21:43: cases[0].accept[1].within",
        "within 3 of the order 3 is any order at all",
    ),
    (
        "criterion-within-without-element",
        ":20:43: cases[0].accept[1].within",
        "no order is known to expect of displacement-L2",
    ),
    (
        "node-tolerance-too-coarse",
        ":17:21: cases[0].node-tolerance",
        "is more than a hundredth of a wall",
    ),
    (
        "criterion-unknown-level",
        ":20:58: cases[0].accept[0].level",
        "there is no level \"3\" in this case",
    ),
    (
        "criterion-twice",
        ":22:18: cases[0].accept[2].order",
        "the criterion \"order displacement-L2 within 0.2 of theory\" stands twice",
    ),
    (
        "criterion-value-of-a-norm",
        ":20:44: cases[0].accept[0].at-most",
        "displacement-L2 is an error and has no value of its own",
    ),
    (
        "criterion-energy-of-a-slice",
        ":20:42: cases[0].accept[0].at-most",
        "\"1 mJ\": the energy of a slice is one per unit length",
    ),
    (
        "criterion-wrong-unit",
        ":20:52: cases[0].accept[0].at-most",
        "\"1 kPa\" has the wrong kind of unit; possible here: m, cm, mm, um, in, ft",
    ),
    (
        "criterion-fit-of-an-error",
        ":20:44: cases[0].accept[0].at-most",
        "`by: fit` is for orders",
    ),
    (
        "criterion-fit-at-a-level",
        ":21:43: cases[0].accept[1].within",
        "`by: fit` takes all levels, so that `level:` says nothing",
    ),
    (
        "expected-order-negative",
        ":19:41: cases[0].expected-orders.displacement-L2",
        "\"-3\" is no order of convergence",
    ),
    (
        "identifier-with-a-slash",
        ":1:8: suite",
        "\"../broken\" cannot name a folder",
    ),
    ("unclosed-quote", ":1:8", "unclosed quote"),
    (
        "unclosed-bracket",
        ":19:11",
        "illegal placement of ':' indicator",
    ),
    (
        "tabs",
        ":16:2",
        "tabs disallowed within this context (block indentation)",
    ),
    ("two-documents", ":7:1", "a second document begins here"),
    (
        "unknown-anchor",
        ":13:19",
        "there is no anchor of this name before this line",
    ),
    (
        "too-many-cases",
        ":10:9: cases[0].problem.pressurised-tube",
        "the lists make 22500 cases",
    ),
    (
        "several-problems",
        ":4:9: materials.soft.neo-Hooke",
        "hint: did you mean `neo-Hookean`?",
    ),
    (
        "alias-bomb",
        ":6:36",
        "the file is too large, nested too deeply, or repeats itself through aliases too often",
    ),
    (
        "variant-unknown",
        ":8:31: cases[0].problem.homogeneous.biaxial",
        "unknown key `biaxial`",
    ),
    (
        "variant-none",
        ":8:29: cases[0].problem.homogeneous",
        "no deformation is given",
    ),
    (
        "variant-two",
        ":8:29: cases[0].problem.homogeneous",
        "more than one deformation is given: uniaxial, planar",
    ),
    (
        "variant-without-block",
        ":8:39: cases[0].problem.homogeneous.uniaxial",
        "found nothing",
    ),
    (
        "variant-parameter",
        ":8:57: cases[0].problem.homogeneous.uniaxial.strain",
        "unknown key `strain`",
    ),
    (
        "layers-materials-too-few",
        ":8:39: cases[0].problem.layered-tube.radii",
        "3 radii and 1 materials: each layer has one material and lies between two radii",
    ),
    (
        "layers-radii-fall",
        ":8:39: cases[0].problem.layered-tube.radii",
        "outer-radius = 7 must be larger than radius = 10",
    ),
    (
        "layers-one-radius",
        ":8:39: cases[0].problem.layered-tube.radii",
        "1 radii and 1 materials: each layer has one material and lies between two radii",
    ),
    (
        "layers-small-strain-law",
        ":8:30: cases[0].problem.layered-tube",
        "a layered-tube cannot be made of linear-elastic",
    ),
    (
        "two-drives",
        ":8:143: cases[0].problem.pressurised-tube.inner-wall-stretch",
        "inner-pressure and inner-wall-stretch are given, and one fixes the others",
    ),
    (
        "torsion-two-axial-drives",
        ":8:69: cases[0].problem.torsion-extension.axial-stretch",
        "axial-stretch or axial-force: both are given",
    ),
    (
        "torsion-no-axial-drive",
        ":8:35: cases[0].problem.torsion-extension",
        "axial-stretch or axial-force: neither is given",
    ),
    (
        "load-word",
        ":8:129: cases[0].problem.pressurised-tube.load",
        "unknown word \"live\"",
    ),
    (
        "grading-unknown",
        ":8:91: cases[0].problem.graded-tube.grading",
        "unknown word \"linear\"",
    ),
    (
        "grading-table-lengths",
        ":8:125: cases[0].problem.graded-tube.grading.table.factor",
        "3 radii and 2 factors",
    ),
    (
        "grading-table-falls",
        ":8:91: cases[0].problem.graded-tube.grading",
        "radius 7 of the table follows 10",
    ),
    (
        "grading-table-too-short",
        ":8:91: cases[0].problem.graded-tube.grading",
        "the table reaches from 5 to 7, the layer from 5 to 10",
    ),
    (
        "grading-table-negative",
        ":8:91: cases[0].problem.graded-tube.grading",
        "the factor -2 at radius 10 must be positive",
    ),
    (
        "state-word",
        ":8:90: cases[0].problem.plate-with-hole.state",
        "unknown word \"plain-stress\"",
    ),
    (
        "root-word",
        ":8:117: cases[0].problem.cantilever-strip.root",
        "unknown word \"clamped\"",
    ),
    (
        "semi-axes-three",
        ":8:42: cases[0].problem.bar-torsion.semi-axes",
        "semi-axes has 3 numbers",
    ),
    (
        "sphere-branch-zero",
        ":8:119: cases[0].problem.pressurised-sphere.branch",
        "branch = 0 is not one of 1, 2, 3, ...",
    ),
    (
        "sphere-branch-half",
        ":8:119: cases[0].problem.pressurised-sphere.branch",
        "branch = 1.5 is not one of 1, 2, 3, ...",
    ),
    (
        "shrink-fit-apart",
        ":8:77: cases[0].problem.shrink-fit-tube.radial-interference",
        "the rings come apart: the contact pressure would be -6.923077e0",
    ),
    (
        "stage-word",
        ":8:120: cases[0].problem.elastic-plastic-tube.stage",
        "unknown word \"after\"",
    ),
    (
        "field-unknown-name",
        ":8:51: cases[0].problem.stated-field.displacement.x",
        "unknown name \"a\" at the start; expected one of X, Y, Z, R, Theta, pi",
    ),
    (
        "field-open-parenthesis",
        ":8:51: cases[0].problem.stated-field.displacement.x",
        "the text ends at character 6, after \"sin(X\"; expected an operator, or \")\" for the \"(\" at character 4",
    ),
    (
        "field-unknown-direction",
        ":8:64: cases[0].problem.stated-field.displacement.r",
        "unknown key `r`",
    ),
    (
        "field-needs-a-pressure",
        ":8:30: cases[0].problem.stated-field",
        "the law preserves volume, so that the field does not give the pressure",
    ),
    (
        "reference-word",
        ":9:16: cases[0].reference",
        "unknown reference \"printed\"",
    ),
    (
        "reference-no-value",
        ":9:16: cases[0].reference",
        "no published value belongs to this very problem",
    ),
    (
        "reference-other-numbers",
        ":9:16: cases[0].reference",
        "no published value belongs to this very problem",
    ),
    (
        "published-unknown",
        ":8:36: cases[0].problem.published.value",
        "there is no published value \"cook-circular\"",
    ),
    (
        "published-with-a-solution",
        ":8:36: cases[0].problem.published.value",
        "oden-srr belongs to a problem that has an exact solution",
    ),
    (
        "table-outside",
        ":8:36: cases[0].problem.tabulated.table",
        "\"../curve.csv\" is not below the suite's folder",
    ),
    (
        "table-absolute",
        ":8:36: cases[0].problem.tabulated.table",
        "\"/curve.csv\" is not below the suite's folder",
    ),
    (
        "table-missing",
        ":8:36: cases[0].problem.tabulated.table",
        "\"none.csv\" cannot be read",
    ),
    (
        "table-is-a-folder",
        ":8:36: cases[0].problem.tabulated.table",
        "\".\" cannot be read",
    ),
    (
        "no-materials",
        ":5:75: cases[0].problem.lame-sphere.material",
        "there is no material \"steel\"",
    ),
];

fn suites() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/data/broken-suites")
}

struct Ended {
    status: i32,
    stdout: String,
    stderr: String,
}

fn truebore(folder: &Path, arguments: &[&str]) -> Ended {
    let output = Command::cargo_bin("truebore")
        .unwrap()
        .current_dir(folder)
        .args(arguments)
        .output()
        .unwrap();
    Ended {
        status: output.status.code().expect("not ended by a signal"),
        stdout: String::from_utf8(output.stdout).unwrap(),
        stderr: String::from_utf8(output.stderr).unwrap(),
    }
}

/// A folder with the report of an earlier run.
struct Earlier {
    dir: TempDir,
}

const EARLIER: &str = "{ \"an\": \"earlier report\" }\n";

impl Earlier {
    fn new() -> Self {
        let dir = TempDir::new().unwrap();
        fs::write(dir.path().join("outcome.json"), EARLIER).unwrap();
        Self { dir }
    }

    fn path(&self) -> &str {
        self.dir.path().to_str().unwrap()
    }

    fn assert_untouched(&self, who: &str) {
        let kept = fs::read_to_string(self.dir.path().join("outcome.json")).unwrap();
        assert_eq!(kept, EARLIER, "{who}");
        let files = fs::read_dir(self.dir.path()).unwrap().count();
        assert_eq!(files, 1, "{who}: nothing else is left behind");
    }
}

/// Judges a suite that must be refused, and gives stderr.
fn refused(folder: &Path, suite: &str) -> String {
    let out = Earlier::new();
    let ended = truebore(folder, &["check", suite, "--out", out.path()]);
    assert_eq!(ended.status, 2, "{suite}: {}", ended.stderr);
    assert_eq!(ended.stdout, "", "{suite}");
    out.assert_untouched(suite);
    ended.stderr
}

/// Judges a suite of these bytes that must be refused.
fn refused_text(bytes: impl AsRef<[u8]>) -> String {
    let dir = TempDir::new().unwrap();
    fs::write(dir.path().join("suite.yaml"), bytes).unwrap();
    refused(dir.path(), "suite.yaml")
}

#[test]
fn every_broken_suite_says_where_and_what() {
    let folder = suites();
    for (name, place, words) in BROKEN {
        let said = refused(&folder, &format!("{name}.yaml"));
        let place = format!("error: {name}.yaml{place}: ");
        assert!(said.contains(&place), "{name}: no \"{place}\" in\n{said}");
        assert!(said.contains(words), "{name}: no \"{words}\" in\n{said}");
        let mends = ["expected: ", "hint: ", " must be ", "possible here: "];
        assert!(
            mends.iter().any(|mend| said.contains(mend)),
            "{name}: nothing says how to mend it\n{said}"
        );
        let errors = said.matches(&format!("error: {name}.yaml")).count();
        let several = ["several", "beyond-the-limit-closed", "wrong-type-cases"];
        let more = several.iter().any(|s| name.contains(s));
        assert!(errors == 1 || more, "{name}: said more than once\n{said}");
    }
}

#[test]
fn every_file_is_in_the_table() {
    let files: BTreeSet<String> = fs::read_dir(suites())
        .unwrap()
        .map(|entry| entry.unwrap().path())
        .map(|path| path.file_stem().unwrap().to_str().unwrap().to_string())
        .collect();
    let table: BTreeSet<String> = BROKEN.iter().map(|row| row.0.to_string()).collect();
    assert_eq!(files, table);
    assert!(table.len() > 90);
}

/// Faults of form and of meaning together, each at its place, in file order.
#[test]
fn several_problems_come_in_one_go() {
    let said = refused(&suites(), "several-problems.yaml");
    let found: Vec<usize> = [
        ":4:9: materials.soft.neo-Hooke: unknown law",
        ":16:5: cases[0].secton: unknown key",
        ":18:20: cases[0].levels[2]: \"2\" is listed twice",
        ":20:18: cases[0].accept[0].error: unknown measure \"displacment-L2\"",
        ":21:9: cases[0].accept[1]: of `at-most:`, `at-least:`, `within:` none is given",
        ":21:35: cases[0].accept[1].inside: unknown key",
    ]
    .iter()
    .map(|part| said.find(part).unwrap_or_else(|| panic!("{part}\n{said}")))
    .collect();
    assert!(found.is_sorted(), "in file order\n{said}");
    assert!(said.contains("6 problems"), "{said}");
}

#[test]
fn files_that_are_no_suite() {
    for (bytes, words) in [
        (&b""[..], "suite.yaml:1: the file is empty"),
        (b"\n \n", "the file is empty"),
        (b"\xef\xbb\xbf", "the file is empty"),
        (b"# only a remark\n", "found nothing"),
        (b"~\n", "found nothing"),
        (
            b"suite: a\nunits: \xff\xfe\n",
            "suite.yaml:2: the file is not UTF-8",
        ),
        (b"s\0u\0i\0t\0e\0", "error: suite.yaml"),
        (b"\0\0\0\0", "error: suite.yaml"),
        (b"? [a, b]\n: c\n", "error: suite.yaml"),
        (b"1: 2\n", "unknown key `1`"),
        (b"suite: !!binary abc\n", "error: suite.yaml"),
        (b"<<: { suite: a }\n", "error: suite.yaml"),
        (b"a: &a [*a]\n", "error: suite.yaml:1:"),
    ] {
        let said = refused_text(bytes);
        assert!(said.contains(words), "no \"{words}\" in\n{said}");
    }
}

#[test]
fn files_made_to_exhaust() {
    let deep = format!("suite: {}\n", "[".repeat(200_000));
    assert!(refused_text(deep).contains("error: suite.yaml"));
    let deep = format!("suite: {}{}\n", "[".repeat(60), "]".repeat(60));
    assert!(refused_text(deep).contains("nested too deeply"));
    let blocks: String = (0..60).map(|i| format!("{}a:\n", " ".repeat(i))).collect();
    assert!(refused_text(blocks).contains("nested too deeply"));
    let list = |n: usize, digits: usize| {
        let items: Vec<String> = (1..=n).map(|i| format!("0.{i:0digits$}")).collect();
        items.join(", ")
    };
    let thousand_cubed = format!(
        "suite: s\nunits: {{ length: mm, stress: MPa }}\nmaterials: {{ m: {{ neo-Hookean: {{ mu: 1 }} }} }}\ncases:\n  \
         - id: c\n    problem:\n      pressurised-tube:\n        inner-radius: [{0}]\n        outer-radius: [{0}]\n        \
         inner-pressure: [{0}]\n        ends: plane-strain\n        material: m\n",
        list(1000, 4)
    );
    let said = refused_text(thousand_cubed);
    assert!(said.contains("the lists make 1000000000 cases"), "{said}");
}

#[test]
fn many_messages_are_cut() {
    let cases: String = (0..200).map(|i| format!("  - idd: c{i}\n")).collect();
    let said = refused_text(format!(
        "suite: s\nunits: {{ length: mm, stress: MPa }}\nmaterials: {{}}\ncases:\n{cases}"
    ));
    assert!(said.contains("and 550 more"), "{said}");
    assert!(said.contains("600 problems"), "{said}");
}

const GOOD: &str = "suite: good\nunits: { length: mm, stress: MPa }\nmaterials: { m: { neo-Hookean: { mu: 0.4 } } }\n\
cases:\n  - id: c\n    problem:\n      pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: plane-strain, \
material: m, inner-pressure: 0.03 }\n    results: results/{level}\n    levels: [1]\n    \
accept: [{ error: displacement-L2, at-most: 1 % }]\n";

/// A folder with a good suite and no result set.
fn good() -> TempDir {
    let dir = TempDir::new().unwrap();
    fs::write(dir.path().join("suite.yaml"), GOOD).unwrap();
    dir
}

#[test]
fn arguments_of_check_that_cannot_be_meant() {
    let dir = good();
    let out = Earlier::new();
    fs::write(dir.path().join("a-file"), "kept").unwrap();
    for (arguments, words) in [
        (&["check"][..], "required"),
        (&["check", "missing.yaml"], "missing.yaml: cannot be read"),
        (&["check", "."], "cannot be read"),
        (
            &["check", "suite.yaml", "suite.yaml"],
            "name each suite once",
        ),
        (
            &["check", "suite.yaml", "suite.yaml", "--out", out.path()],
            "--out names the folder of one suite",
        ),
        (
            &["check", "suite.yaml", "--out", "a-file"],
            "a-file: the folder cannot be made",
        ),
        (
            &["check", "suite.yaml", "--out", "a-file/b"],
            "a-file/b: the folder cannot be made",
        ),
        (
            &["check", "suite.yaml", "--out", "/proc/none"],
            "/proc/none: the folder cannot be made",
        ),
        (&["check", "suite.yaml", "--threads", "0"], "from 1 to 1024"),
        (&["chekc"], "unrecognized subcommand"),
    ] {
        let ended = truebore(dir.path(), arguments);
        assert_eq!(ended.status, 2, "{arguments:?}: {}", ended.stderr);
        assert!(
            ended.stderr.contains(words),
            "{arguments:?}: no \"{words}\" in\n{}",
            ended.stderr
        );
        assert!(!ended.stderr.contains("panicked"), "{}", ended.stderr);
        out.assert_untouched(&format!("{arguments:?}"));
    }
    assert_eq!(fs::read(dir.path().join("a-file")).unwrap(), b"kept");
}

/// What would run out of memory, or lose what it prints, says so.
#[cfg(target_os = "linux")]
#[test]
fn devices_that_never_end_or_are_full() {
    let dir = good();
    let ended = truebore(dir.path(), &["check", "/dev/zero"]);
    assert_eq!(ended.status, 2);
    assert!(
        ended.stderr.contains("larger than 64 MiB"),
        "{}",
        ended.stderr
    );
    let program = assert_cmd::cargo::cargo_bin("truebore");
    for arguments in [
        "exact suite.yaml --case c --totals",
        "brief suite.yaml",
        "catalogue",
    ] {
        let output = std::process::Command::new("sh")
            .args([
                "-c",
                &format!("{} {arguments} > /dev/full", program.display()),
            ])
            .current_dir(dir.path())
            .output()
            .unwrap();
        let said = String::from_utf8_lossy(&output.stderr);
        assert_eq!(output.status.code(), Some(2), "{arguments}: {said}");
        assert!(said.contains("the output cannot be written"), "{said}");
    }
}

/// An empty table never replaces one that may hold results.
#[test]
fn headers_replace_no_results() {
    let dir = good();
    let headers = ["brief", "suite.yaml", "--headers", "h"];
    assert_eq!(truebore(dir.path(), &headers).status, 0);
    let nodes = dir.path().join("h/c/nodes.csv");
    assert!(fs::read_to_string(&nodes).unwrap().starts_with("node,X,Y"));
    fs::write(&nodes, "node,X,Y\n1,2,3\n").unwrap();
    fs::remove_file(dir.path().join("h/c/points.csv")).unwrap();
    let again = truebore(dir.path(), &headers);
    assert_eq!(again.status, 2);
    assert!(
        again.stderr.contains("nodes.csv: there is such a file"),
        "{}",
        again.stderr
    );
    assert_eq!(fs::read_to_string(&nodes).unwrap(), "node,X,Y\n1,2,3\n");
    assert!(!dir.path().join("h/c/points.csv").exists());
}

/// A report file that cannot be replaced: nothing of the folder changes, nothing is left beside it.
#[test]
fn a_report_is_written_whole_or_not_at_all() {
    for name in ["report.html", "junit.xml", "measures.csv"] {
        let dir = good();
        let out = dir.path().join("out");
        fs::create_dir_all(out.join(name).join("in-the-way")).unwrap();
        fs::write(out.join("outcome.json"), EARLIER).unwrap();
        let ended = truebore(dir.path(), &["check", "suite.yaml", "--out", "out"]);
        assert_eq!((ended.status, ended.stdout.as_str()), (2, ""), "{name}");
        assert!(ended.stderr.contains(name), "{}", ended.stderr);
        let kept = fs::read_to_string(out.join("outcome.json")).unwrap();
        assert_eq!(kept, EARLIER, "{name}");
        assert_eq!(fs::read_dir(&out).unwrap().count(), 2, "{name}");
    }
}

#[test]
fn only_what_is_judged_and_passes_is_green() {
    let dir = good();
    let ended = truebore(dir.path(), &["check", "suite.yaml", "--out", "out"]);
    assert_eq!(ended.status, 1, "no result set: {}", ended.stderr);
    assert!(ended.stdout.contains("not run"), "{}", ended.stdout);
    let text = GOOD.replace("suite: good", "suite: other");
    fs::write(dir.path().join("broken.yaml"), text.replace("mu:", "nu:")).unwrap();
    let ended = truebore(dir.path(), &["check", "suite.yaml", "broken.yaml"]);
    assert_eq!(ended.status, 2, "one of two could not be judged");
    assert!(ended.stdout.contains("not run"), "and the other was");
}

#[test]
fn arguments_of_the_other_commands() {
    let dir = good();
    fs::write(dir.path().join("no-y.csv"), "X,Z\n1,2\n").unwrap();
    fs::write(dir.path().join("nan.csv"), "X,Y\nnan,2\n9,inf\n,\n").unwrap();
    fs::write(dir.path().join("far.csv"), "X,Y\n0,0\n1e9,0\n").unwrap();
    fs::write(dir.path().join("ragged.csv"), "X,Y\n9,0\n9\n").unwrap();
    fs::write(dir.path().join("binary.csv"), [0u8, 255, 10, 13, 34, 44]).unwrap();
    fs::write(dir.path().join("empty.csv"), "").unwrap();
    let exact = |rest: &[&'static str]| [&["exact", "suite.yaml", "--case"], rest].concat();
    for (arguments, words) in [
        (exact(&["wall", "--totals"]), "there is no case \"wall\""),
        (exact(&["C", "--totals"]), "did you mean \"c\"?"),
        (exact(&["c"]), "--stations"),
        (exact(&["c", "--stations", "0"]), "from 1 to 1000000"),
        (
            exact(&["c", "--stations", "1000000000"]),
            "from 1 to 1000000",
        ),
        (exact(&["c", "--stations", "-1"]), "error"),
        (
            exact(&["c", "--stations", "3", "--totals"]),
            "cannot be used",
        ),
        (
            exact(&["c", "--points", "none.csv"]),
            "none.csv: cannot be read",
        ),
        (
            exact(&["c", "--points", "no-y.csv"]),
            "no-y.csv:1: found the columns X, Z",
        ),
        (
            exact(&["c", "--points", "nan.csv"]),
            "nan.csv:2: X: \"nan\" is not a finite number",
        ),
        (
            exact(&["c", "--points", "nan.csv"]),
            "nan.csv:3: Y: \"inf\" is not a finite number",
        ),
        (
            exact(&["c", "--points", "nan.csv"]),
            "nan.csv:4: Y: \"\" is not a finite number",
        ),
        (exact(&["c", "--points", "far.csv"]), "far.csv:2:"),
        (exact(&["c", "--points", "ragged.csv"]), "ragged.csv:3:"),
        (exact(&["c", "--points", "binary.csv"]), "binary.csv"),
        (exact(&["c", "--points", "empty.csv"]), "empty.csv:1:"),
        (vec!["brief", "none.yaml"], "none.yaml: cannot be read"),
        (
            vec!["brief", "suite.yaml", "--case", "d"],
            "there is no case \"d\"",
        ),
        (
            vec!["inspect", "suite.yaml", "--case", "d"],
            "there is no case \"d\"",
        ),
        (vec!["catalogue", "neo-Hookaen"], "neo-Hookean"),
    ] {
        let ended = truebore(dir.path(), &arguments);
        assert_eq!(ended.status, 2, "{arguments:?}: {}", ended.stderr);
        assert_eq!(ended.stdout, "", "{arguments:?}");
        assert!(
            ended.stderr.contains(words),
            "{arguments:?}: no \"{words}\" in\n{}",
            ended.stderr
        );
    }
    let one = truebore(dir.path(), &exact(&["c", "--stations", "1"]));
    assert_eq!((one.status, one.stdout.lines().count()), (0, 2));
}

/// `truebore ... | head -1`: a reader that has gone is no fault of ours.
#[cfg(unix)]
#[test]
fn a_closed_pipe_is_no_panic() {
    let dir = good();
    let program = assert_cmd::cargo::cargo_bin("truebore");
    for arguments in [
        "exact suite.yaml --case c --stations 100000",
        "brief suite.yaml",
        "catalogue",
        "check suite.yaml --out out --json",
        "--help",
        "check none.yaml 2>&1",
    ] {
        let line = format!("{} {arguments} | true", program.display());
        let output = std::process::Command::new("sh")
            .args(["-c", &line])
            .current_dir(dir.path())
            .output()
            .unwrap();
        let said = String::from_utf8_lossy(&output.stderr);
        assert!(!said.contains("panicked"), "{arguments}: {said}");
        assert!(!said.contains("roken pipe"), "{arguments}: {said}");
    }
}
