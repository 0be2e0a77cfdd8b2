//! Nodal fields: frames, signs and conventions.

use super::tests::open;
use super::*;

#[test]
fn cylindrical_displacements_are_turned_to_cartesian_ones() {
    let mut reading = Reading::default();
    reading.conventions.angle = AngleUnit::Degrees;
    let text = "node,R,Theta,ur,ut\n1,2,90,0.5,0.25\n2,2,-180,0.5,0.25\n3,2,30,1,0\n";
    let set = open(&[("nodes.csv", text)], &reading).unwrap();
    let nodes = set.nodes().unwrap();
    let moved = nodes.displacement.as_ref().unwrap();
    // at 90 degrees the hoop direction is -X, at 180 degrees it is -Y
    assert_eq!(moved[..2], [[-0.25, 0.5, 0.0], [-0.5, -0.25, 0.0]]);
    assert!((moved[2][0] - 0.75_f64.sqrt()).abs() < 1e-15 && (moved[2][1] - 0.5).abs() < 1e-15);
    assert_eq!(nodes.positions[0], [0.0, 2.0, 0.0]);
    // the same components at Cartesian positions
    let text = "node,X,Y,ur,ut\n1,0,2,0.5,0.25\n";
    let set = open(&[("nodes.csv", text)], &Reading::default()).unwrap();
    assert_eq!(
        set.nodes().unwrap().displacement.as_ref().unwrap()[0],
        [-0.25, 0.5, 0.0]
    );
}

#[test]
fn a_negative_radius_is_refused_in_every_frame() {
    for text in ["node,R,Theta\n1,-1,0\n", "node,R,Z\n1,-1,0\n"] {
        let found = open(&[("nodes.csv", text)], &Reading::default()).unwrap_err();
        assert_eq!(
            (found[0].rule.as_str(), found[0].place.field.as_str()),
            ("positive-radius", "R")
        );
    }
}

#[test]
fn nodal_pressure_is_compression_positive_given_or_from_the_trace() {
    let text = "node,X,Y,p\n1,0,0,0.5\n";
    let mut reading = Reading::default();
    let p = |text: &str, reading: &Reading| {
        let set = open(&[("nodes.csv", text)], reading).unwrap();
        set.nodes().unwrap().p.clone().map(|p| p[0])
    };
    assert_eq!(p(text, &reading), Some(0.5));
    reading.conventions.pressure_sign = PressureSign::TensionPositive;
    assert_eq!(p(text, &reading), Some(-0.5));
    reading.conventions.pressure = PressureKind::Multiplier;
    assert_eq!(p(text, &reading), None);
    let traced = "node,X,Y,p,sxx,syy,szz\n1,0,0,99,3,-1.5,0\n";
    assert_eq!(p(traced, &reading), Some(-0.5));
    let set = open(&[("nodes.csv", traced)], &reading).unwrap();
    assert!(
        set.remarks()
            .iter()
            .any(|r| r.rule == "pressure-from-trace")
    );
    assert_eq!(p("node,X,Y\n1,0,0\n", &Reading::default()), None);
}

#[test]
fn nodal_stress_is_turned_and_says_what_it_holds() {
    let text = "node,R,Theta,srr,stt,srt\n1,2,1.5707963267948966,5,7,0.5\n";
    let set = open(&[("nodes.csv", text)], &Reading::default()).unwrap();
    let nodes = set.nodes().unwrap();
    assert_eq!(nodes.stress_components.names(), ["xx", "yy", "xy"]);
    let stress = nodes.stress.as_ref().unwrap()[0];
    assert!((stress[0] - 7.0).abs() < 1e-14 && (stress[1] - 5.0).abs() < 1e-14);
    assert!((stress[3] + 0.5).abs() < 1e-14 && stress[2].is_nan());
    assert_eq!(nodes.p, None);
}

#[test]
fn a_solid_needs_three_components_and_a_part_of_a_set_is_refused() {
    let rule = |text: &str| {
        open(&[("nodes.csv", text)], &Reading::default()).unwrap_err()[0]
            .place
            .field
            .clone()
    };
    assert_eq!(rule("node,X,Y,Z,ux,uy\n1,0,0,0,0,0\n"), "uz");
    assert_eq!(rule("node,X,Y,uy\n1,0,0,0\n"), "ux");
    assert_eq!(rule("node,R,Z,ur\n1,1,0,0\n"), "uz");
    assert_eq!(rule("node,X,Z\n1,1,0\n"), "Y");
}
