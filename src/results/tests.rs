//! Whole folders through the reader.

use super::*;
use crate::input::{Finding, Weight};
use crate::mechanics::UnitSystem;
use crate::mechanics::stress_measure::StressMeasure;

/// Writes a folder of files.
pub(super) fn folder(files: &[(&str, &[u8])]) -> tempfile::TempDir {
    let dir = tempfile::tempdir().unwrap();
    for (name, data) in files {
        std::fs::write(dir.path().join(name), data).unwrap();
    }
    dir
}

pub(super) fn open(files: &[(&str, &str)], reading: &Reading) -> Result<ResultSet, Vec<Finding>> {
    let raw: Vec<(&str, &[u8])> = files.iter().map(|(n, t)| (*n, t.as_bytes())).collect();
    ResultSet::open(folder(&raw).path(), "r", reading)
}

/// The only point of a points.csv, in full.
fn one_point(points: &str, reading: &Reading) -> PointBlock {
    let raw: [(&str, &[u8]); 1] = [("points.csv", points.as_bytes())];
    let dir = folder(&raw);
    let set = ResultSet::open(dir.path(), "r", reading).unwrap();
    let mut found = None;
    let keep = &mut |block: &PointBlock| {
        found = Some(block.clone());
        Ok(())
    };
    set.points().unwrap().for_each_block(10, keep).unwrap();
    found.unwrap()
}

fn close(a: f64, b: f64) -> bool {
    (a - b).abs() <= 1e-13 * b.abs().max(1.0)
}

#[test]
fn every_measure_of_one_state_reads_as_the_same_cauchy_stress() {
    use nalgebra::Matrix3;
    let f = Matrix3::new(1.2, 0.3, 0.0, -0.1, 0.9, 0.2, 0.05, 0.0, 1.1);
    let sigma = crate::mechanics::SymTensor::from_array([1.0, -2.0, 0.5, 0.7, -0.3, 0.9]);
    let j = f.determinant();
    let piola = sigma.to_matrix() * f.try_inverse().unwrap().transpose() * j;
    let second = f.try_inverse().unwrap() * piola;
    let nine = |m: &Matrix3<f64>| {
        let row_major: Vec<String> = m.transpose().iter().map(|v| format!("{v:?}")).collect();
        row_major.join(",")
    };
    let six = |m: &Matrix3<f64>| {
        [(0, 0), (1, 1), (2, 2), (0, 1), (1, 2), (2, 0)]
            .map(|i| format!("{:?}", m[i]))
            .join(",")
    };
    let gradient = "F11,F12,F13,F21,F22,F23,F31,F32,F33";
    let symmetric = "sxx,syy,szz,sxy,syz,szx";
    for (measure, names, numbers) in [
        (StressMeasure::Cauchy, symmetric, six(&sigma.to_matrix())),
        (
            StressMeasure::Kirchhoff,
            symmetric,
            six(&(sigma.to_matrix() * j)),
        ),
        (StressMeasure::SecondPiolaKirchhoff, symmetric, six(&second)),
        (
            StressMeasure::FirstPiolaKirchhoff,
            "P11,P12,P13,P21,P22,P23,P31,P32,P33",
            nine(&piola),
        ),
    ] {
        let mut reading = Reading::default();
        reading.conventions.stress = measure;
        let text = format!(
            "element,point,X,Y,Z,{names},{gradient}\n1,1,0.3,0.4,0.5,{numbers},{}\n",
            nine(&f)
        );
        let block = one_point(&text, &reading);
        assert!(block.components.is_full());
        for (got, expected) in block.stress.unwrap()[0].iter().zip(sigma.to_array()) {
            assert!(close(*got, expected), "{}", measure.name());
        }
        assert!(close(block.j.unwrap()[0], j));
        assert!(close(block.p.unwrap()[0], 0.5 / 3.0));
    }
}

#[test]
fn cylindrical_stress_is_turned_and_engineering_shear_halved() {
    let mut reading = Reading::default();
    reading.conventions.shear = Shear::Engineering;
    reading.conventions.angle = AngleUnit::Degrees;
    let block = one_point(
        "element,point,R,Theta,srr,stt,szz,srt\n1,1,2,90,5,7,1,0.5\n",
        &reading,
    );
    assert_eq!(block.position, [[0.0, 2.0, 0.0]]);
    let stress = block.stress.unwrap()[0];
    // at 90 degrees: xx is the hoop stress, yy the radial one, and the shear turns its sign
    assert_eq!(stress[..4], [7.0, 5.0, 1.0, -0.25]);
    assert!(stress[4].is_nan() && stress[5].is_nan());
    assert_eq!(block.components.names(), ["xx", "yy", "zz", "xy"]);
}

#[test]
fn pressure_is_compression_positive_and_a_multiplier_is_never_taken_for_the_mean() {
    let text = "element,point,X,Y,sxx,syy,szz,p\n1,1,0,0,3,-1.5,0,0.5\n";
    let mut reading = Reading::default();
    assert_eq!(one_point(text, &reading).p.unwrap(), [0.5]);
    reading.conventions.pressure_sign = PressureSign::TensionPositive;
    assert_eq!(one_point(text, &reading).p.unwrap(), [-0.5]);
    reading.conventions.pressure = PressureKind::Multiplier;
    assert_eq!(one_point(text, &reading).p.unwrap(), [-0.5], "-tr/3");
    let without = "element,point,X,Y,sxx,syy,p\n1,1,0,0,3,-1.5,0.5\n";
    assert!(one_point(without, &reading).p.is_none());
    let set = open(&[("points.csv", without)], &reading).unwrap();
    assert!(
        set.points()
            .unwrap()
            .channels()
            .p
            .reason()
            .contains("multiplier")
    );
}

#[test]
fn units_are_converted_by_dimension() {
    let reading = Reading {
        units_from: UnitSystem::of("m", "Pa").unwrap(),
        units_to: UnitSystem::of("mm", "MPa").unwrap(),
        ..Reading::default()
    };
    let files = [
        (
            "points.csv",
            "element,point,X,Y,weight,sxx,p,J,W\n1,1,0.002,0.001,1e-6,2e6,1e6,1.5,3e6\n",
        ),
        ("nodes.csv", "node,X,Y,x,y\n7,0.002,0,0.003,0.001\n"),
        (
            "totals.csv",
            "quantity,value\nstrain_energy,2\naxial_force,5\nvolume_current,1e-6\nmy_own,4\naxial_stretch,1.5\n",
        ),
    ];
    let raw: Vec<(&str, &[u8])> = files.iter().map(|(n, t)| (*n, t.as_bytes())).collect();
    let dir = folder(&raw);
    let set = ResultSet::open(dir.path(), "r", &reading).unwrap();
    let nodes = set.nodes().unwrap();
    assert_eq!(nodes.positions, [[2.0, 0.0, 0.0]]);
    let moved = nodes.displacement.as_ref().unwrap()[0];
    assert!(close(moved[0], 1.0) && close(moved[1], 1.0) && moved[2] == 0.0);
    let totals = set.totals().unwrap();
    let value = |name: &str| totals.get(name).unwrap().value;
    // planar: energy per length is a force
    assert!(close(value("strain_energy"), 2.0) && close(value("axial_force"), 5.0));
    assert!(close(value("volume_current"), 1.0) && close(value("axial_stretch"), 1.5));
    assert_eq!(
        (value("my_own"), totals.get("my_own").unwrap().dimension),
        (4.0, None)
    );
    let check = &mut |block: &PointBlock| {
        assert!(close(block.weight.as_ref().unwrap()[0], 1.0));
        assert!(close(block.stress.as_ref().unwrap()[0][0], 2.0));
        assert!(
            close(block.p.as_ref().unwrap()[0], 1.0) && close(block.w.as_ref().unwrap()[0], 3.0)
        );
        assert_eq!(block.j.as_ref().unwrap()[0], 1.5);
        Ok(())
    };
    assert_eq!(
        set.points()
            .unwrap()
            .for_each_block(1, check)
            .unwrap()
            .points,
        1
    );
}

const RING: &str = "node,R,Z,ur,uz\n1,1,0,0.1,0\n2,2,0,0.05,0\n3,2,1,0.05,0\n4,1,1,0.1,0\n";

#[test]
fn an_axisymmetric_model_is_a_whole_turn() {
    let files = [
        ("nodes.csv", RING),
        (
            "elements.csv",
            "element,shape,n1,n2,n3,n4\n1,quad4,1,2,3,4\n",
        ),
    ];
    let set = open(&files, &Reading::default()).unwrap();
    assert_eq!(set.kind(), ModelKind::Axisymmetric);
    let (elements, nodes) = (set.elements().unwrap(), set.nodes().unwrap());
    assert_eq!(nodes.positions[2], [2.0, 0.0, 1.0]);
    assert_eq!(nodes.displacement.as_ref().unwrap()[0], [0.1, 0.0, 0.0]);
    let volume = sanity::mesh_volume(elements, nodes);
    assert!(close(volume, 3.0 * std::f64::consts::PI));
    assert_eq!(sanity::boundary_sides(elements).len(), 4);
    // cylindrical names only: the letters x y z would be guesses
    let text = "element,point,R,Z,sxx,syy,szz\n1,1,1.5,0.5,1,2,3\n";
    let found = open(&[("points.csv", text)], &Reading::default()).unwrap_err();
    assert_eq!(found[0].rule, "stress-conversion");
    let text = "element,point,R,Z,srr,stt,szz,szr\n1,1,1.5,0.5,1,2,3,4\n";
    let stress = one_point(text, &Reading::default()).stress.unwrap()[0];
    assert_eq!(
        (stress[..3].to_vec(), stress[5]),
        (vec![1.0, 2.0, 3.0], 4.0)
    );
}

#[test]
fn coordinates_and_weights_come_from_a_named_rule() {
    let points = "element,point,p\n1,4,1\n1,1,1\n1,2,1\n1,3,1\n";
    let mesh = "element,shape,n1,n2,n3,n4\n1,quad4,1,2,3,4\n";
    let raw: [(&str, &[u8]); 3] = [
        ("nodes.csv", RING.as_bytes()),
        ("elements.csv", mesh.as_bytes()),
        ("points.csv", points.as_bytes()),
    ];
    let dir = folder(&raw);
    let reading = Reading {
        point_rule: Some("gauss-2".into()),
        ..Reading::default()
    };
    let set = ResultSet::open(dir.path(), "r", &reading).unwrap();
    let channels = set.points().unwrap().channels();
    assert!(matches!(&channels.weight, Channel::Computed(how) if how.contains("gauss-2")));
    let coverage = sanity::check_points(&set).unwrap().unwrap();
    assert!(close(coverage.ratio.unwrap(), 1.0), "{coverage:?}");
    let g = 0.5 / 3.0_f64.sqrt();
    let check = &mut |block: &PointBlock| {
        assert!(close(block.position[0][0], 1.5 + g) && close(block.position[0][2], 0.5 + g));
        assert_eq!((block.point[0], block.line(0)), (4, 2));
        Ok(())
    };
    set.points().unwrap().for_each_block(100, check).unwrap();
}

#[test]
fn the_last_step_is_judged_unless_another_is_named() {
    let nodes = "node,X,Y,ux,uy,step\n1,0,0,0.1,0,1\n1,0,0,0.2,0,12\n1,0,0,nan,0,3\n";
    let totals = "quantity,value,step\nstrain_energy,1,1\nstrain_energy,9,12\nstrain_energy,3,3\n";
    let files = [("nodes.csv", nodes), ("totals.csv", totals)];
    let set = open(&files, &Reading::default()).unwrap();
    assert_eq!((set.step(), set.steps()), (Some(12), &[1, 3, 12][..]));
    assert_eq!(
        set.nodes().unwrap().displacement.as_ref().unwrap()[0][0],
        0.2
    );
    assert_eq!(
        set.totals().unwrap().get("strain_energy").unwrap().value,
        9.0
    );
    let at = |step| {
        open(
            &files,
            &Reading {
                step: Some(step),
                ..Reading::default()
            },
        )
    };
    assert_eq!(
        at(1)
            .unwrap()
            .totals()
            .unwrap()
            .get("strain_energy")
            .unwrap()
            .value,
        1.0
    );
    assert_eq!(at(3).unwrap_err()[0].rule, "finite-number");
    assert_eq!(at(2).unwrap_err()[0].rule, "step-found");
}

#[test]
fn tables_that_end_at_different_steps_are_refused_until_a_step_is_named() {
    let files = [
        ("nodes.csv", "node,X,Y,step\n1,0,0,1\n1,0,0,2\n"),
        ("totals.csv", "quantity,value,step\na,1,1\na,1,2\na,1,3\n"),
    ];
    assert_eq!(
        open(&files, &Reading::default()).unwrap_err()[0].rule,
        "step-found"
    );
    let reading = Reading {
        step: Some(2),
        ..Reading::default()
    };
    assert!(open(&files, &reading).is_ok());
}

#[test]
fn missing_quantities_say_why_and_suggest_a_header() {
    let set = open(
        &[("nodes.csv", "node,X,Y,U_X,UY\n1,0,0,0,0\n")],
        &Reading::default(),
    )
    .unwrap();
    let nodes = set.nodes().unwrap();
    assert!(nodes.displacement.is_none());
    assert_eq!(
        nodes.displacement_channel.reason(),
        "r/nodes.csv has no column \"ux\" (did you mean \"U_X\"?)"
    );
    let note = &set.remarks()[0];
    assert_eq!(
        (note.rule.as_str(), note.weight),
        ("unread-column", Weight::Note)
    );
    assert!(note.found.contains("U_X, UY"));
    let mut reading = Reading::default();
    reading.columns.all.insert("ux".into(), "U_X".into());
    reading.columns.nodes.insert("uy".into(), "UY".into());
    let set = open(&[("nodes.csv", "node,X,Y,U_X,UY\n1,0,0,1,2\n")], &reading).unwrap();
    assert_eq!(
        set.nodes().unwrap().displacement.as_ref().unwrap()[0],
        [1.0, 2.0, 0.0]
    );
}

#[test]
fn long_lists_of_findings_are_cut_with_a_count() {
    let mut text = "node,X,Y\n".to_string();
    for i in 0..4337 {
        text += &format!("{i},nan,0\n");
    }
    let findings = open(&[("nodes.csv", &text)], &Reading::default()).unwrap_err();
    assert_eq!(findings.len(), LISTED + 1);
    assert_eq!(findings[LISTED].found, "and 4317 more");
    assert_eq!(findings[LISTED].rule, "too-many-findings");
}

#[test]
fn line_numbers_count_comments_blank_lines_and_quoted_cells() {
    let text = "\u{feff}# a\r\n\r\n# b\r\nnode,X,Y\r\n1,0,0\r\n\r\n\"2\",\"0\",0\r\n3,x,0\r\n";
    let findings = open(&[("nodes.csv", text)], &Reading::default()).unwrap_err();
    assert_eq!(
        (findings[0].place.line, findings[0].place.field.as_str()),
        (Some(8), "X")
    );
    let findings = open(&[("nodes.csv", "# a\nnode,X,X\n")], &Reading::default()).unwrap_err();
    assert_eq!(findings[0].place.line, Some(2));
}

#[test]
fn a_visitor_may_stop_and_nothing_is_visited_after_a_broken_row() {
    let text = "element,point,X,Y\n1,1,0,0\n1,2,0,0\n1,3,bad,0\n1,4,0,0\n1,5,0,0\n";
    let dir = folder(&[("points.csv", text.as_bytes())]);
    let set = ResultSet::open(dir.path(), "r", &Reading::default()).unwrap();
    let points = set.points().unwrap();
    let mut visited = 0;
    let found = points.for_each_block(1, &mut |b| {
        visited += b.len();
        Ok(())
    });
    assert_eq!(
        (visited, found.unwrap_err().last().unwrap().rule.as_str()),
        (2, "number")
    );
    assert_eq!(set.inputs().len(), 0, "an incomplete pass hashes nothing");
    let stop = Finding::refused("number", crate::input::Place::file("x"), "enough");
    let found = points
        .for_each_block(1, &mut |_| Err(Box::new(stop.clone())))
        .unwrap_err();
    assert_eq!(found.last(), Some(&stop));
}

#[test]
fn inputs_are_hashed_as_they_lie_on_the_disk_and_changes_are_noticed() {
    let text = "element,point,X,Y\n1,1,0,0\n";
    let dir = folder(&[
        ("points.csv", text.as_bytes()),
        ("nodes.csv", b"node,X,Y\n1,0,0"),
    ]);
    let set = ResultSet::open(dir.path(), "case/level-1", &Reading::default()).unwrap();
    assert_eq!(set.inputs().len(), 1);
    assert!(set.remarks().iter().any(|r| r.rule == "no-final-newline"));
    let points = set.points().unwrap();
    points.for_each_block(8, &mut |_| Ok(())).unwrap();
    let inputs = set.inputs();
    assert_eq!(inputs[1].name, "case/level-1/points.csv");
    assert_eq!((inputs[1].bytes, inputs[1].rows), (text.len() as u64, 1));
    // sha256sum of "node,X,Y\n1,0,0"
    assert_eq!(inputs[0].sha256, SHA_OF_NODES);
    std::fs::write(
        dir.path().join("points.csv"),
        "element,point,X,Y\n1,1,0,9\n",
    )
    .unwrap();
    let found = points.for_each_block(8, &mut |_| Ok(())).unwrap_err();
    assert_eq!(found.last().unwrap().rule, "file-changed");
}

const SHA_OF_NODES: &str = "5ced5468dd3a8ba291c6e268e888397df4e1c4b3c09222205321327ebc7898b1";

#[test]
fn a_conversion_that_needs_components_which_are_not_there_is_refused() {
    let mut reading = Reading::default();
    reading.conventions.stress = StressMeasure::SecondPiolaKirchhoff;
    let text = |f13: &str| {
        format!(
            "element,point,X,Y,sxx,syy,szz,sxy,F11,F12,F13,F21,F22,F33\n1,1,0,0,1,2,3,0,2,0,{f13},0,1,1\n"
        )
    };
    let stress = one_point(&text("0"), &reading).stress.unwrap()[0];
    assert_eq!(stress[..4], [2.0, 1.0, 1.5, 0.0]);
    let dir = folder(&[("points.csv", text("0.1").as_bytes())]);
    let set = ResultSet::open(dir.path(), "r", &reading).unwrap();
    let found = set
        .points()
        .unwrap()
        .for_each_block(1, &mut |_| Ok(()))
        .unwrap_err();
    assert_eq!(found.last().unwrap().rule, "stress-conversion");
    assert!(found.last().unwrap().found.contains("F13 is 0.1"));
}

#[test]
fn a_step_column_without_numbers_is_refused() {
    let found = open(
        &[("nodes.csv", "node,X,Y,step\n1,0,0,last\n")],
        &Reading::default(),
    );
    assert_eq!(found.unwrap_err()[0].rule, "integer");
}

#[test]
fn a_load_history_of_totals_beside_final_fields_is_a_caution() {
    let files = [
        ("nodes.csv", "node,X,Y\n1,0,0\n"),
        (
            "totals.csv",
            "quantity,value,step\nload_factor,0.5,1\nload_factor,1,2\n",
        ),
    ];
    let set = open(&files, &Reading::default()).unwrap();
    assert_eq!(
        (set.remarks()[0].rule.as_str(), set.remarks()[0].weight),
        ("ambiguous-step", Weight::Caution)
    );
    assert_eq!(set.totals().unwrap().get("load_factor").unwrap().value, 1.0);
    let earlier = Reading {
        step: Some(1),
        ..Reading::default()
    };
    assert_eq!(
        open(&files, &earlier).unwrap_err()[0].rule,
        "ambiguous-step"
    );
}
