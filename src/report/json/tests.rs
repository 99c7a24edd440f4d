use serde_json::{Value, json};

use super::*;
use crate::findings::Kind;
use crate::report::{envelope_schema, report_schema, sample};

/// The schema with every object closed to names it does not know, so that no field goes undescribed.
fn closed(schema: &str) -> Value {
    fn close(value: &mut Value) {
        if let Value::Object(map) = value {
            if map.contains_key("properties") {
                map.insert("additionalProperties".into(), json!(false));
            }
            map.values_mut().for_each(close);
        } else if let Value::Array(list) = value {
            list.iter_mut().for_each(close);
        }
    }
    let mut value = serde_json::from_str(schema).expect("a schema is JSON");
    close(&mut value);
    value
}

fn valid(schema: &Value, instance: &Value) -> bool {
    let validator = jsonschema::draft202012::new(schema).expect("a schema");
    validator.iter_errors(instance).for_each(|e| eprintln!("{e} at {}", e.instance_path()));
    validator.is_valid(instance)
}

fn value(report: &Report) -> Value {
    serde_json::from_str(&render(report).expect("finite")).expect("JSON")
}

fn swept_value() -> Value {
    let sample = sample::swept();
    let edge = SweptEdge { region: &sample.region, family: &sample.family, program: &sample.program };
    serde_json::from_str(&render_swept(&edge).expect("finite")).expect("JSON")
}

#[test]
fn both_schemas_are_schemas_of_draft_2020_12() {
    for schema in [report_schema(), envelope_schema()] {
        let schema: Value = serde_json::from_str(schema).expect("JSON");
        assert!(jsonschema::draft202012::meta::is_valid(&schema));
    }
}

#[test]
fn every_report_fits_the_schema_and_no_field_goes_undescribed() {
    let schema = closed(report_schema());
    for report in [sample::failing(), sample::passing(), sample::undecided(), sample::crowded(30)] {
        assert!(valid(&schema, &value(&report)));
    }
}

#[test]
fn the_swept_edge_fits_its_schema() {
    assert!(valid(&closed(envelope_schema()), &swept_value()));
}

/// Breaks `good` at `pointer` and says whether the schema still takes it.
fn survives(schema: &str, good: &Value, pointer: &str, bad: Value) -> bool {
    let schema = serde_json::from_str(schema).expect("JSON");
    let mut broken = good.clone();
    *broken.pointer_mut(pointer).expect("the place to break") = bad;
    jsonschema::draft202012::new(&schema).expect("a schema").is_valid(&broken)
}

#[test]
fn broken_reports_are_refused() {
    let good = value(&sample::failing());
    for (pointer, bad) in [
        ("/format", json!("other")),
        ("/version", json!(2)),
        ("/units", json!("cm")),
        ("/verdict", json!("maybe")),
        ("/worst/gouge", json!(0.3)),
        ("/limits/excess", json!(-1.0)),
        ("/findings/0/kind", json!("dent")),
        ("/findings/0/at", json!([1.0])),
        ("/findings/0/at", json!([1.0, 2.0, 3.0])),
        ("/findings/0/blocks/0/line", json!(0)),
        ("/findings/0/cause", json!("bad luck")),
        ("/findings/0/remedy", json!("")),
        ("/findings/0/outline/0/0", json!({"curve": {}})),
        ("/inputs/part/keep", json!("auto")),
        ("/warnings/0/place", json!(null)),
    ] {
        assert!(!survives(report_schema(), &good, pointer, bad.clone()), "{pointer} {bad}");
    }
}

#[test]
fn broken_envelopes_are_refused() {
    let good = swept_value();
    for (pointer, bad) in [
        ("/loops/0/closed", json!("yes")),
        ("/loops/0/segments", json!([])),
        ("/loops/0/segments/1/arc/radius", json!(0)),
        ("/loops/0/segments/1/arc/ccw", json!(1)),
        ("/loops/0/segments/0/move", json!(-1)),
        ("/loops/0/segments/0/block/line", json!("7")),
    ] {
        assert!(!survives(envelope_schema(), &good, pointer, bad.clone()), "{pointer} {bad}");
    }
}

#[test]
fn the_fixed_fields_say_what_the_report_holds() {
    let value = value(&sample::failing());
    assert_eq!(value["format"], "sweptedge-report");
    assert_eq!(value["worst"]["gouge"], json!({"size": 0.31, "bound": 1e-9}));
    let first = &value["findings"][0];
    assert_eq!(first["at"], json!([42.0, 0.0]));
    assert_eq!(first["contour"], json!({"loop": 0, "from": 30.2, "to": 34.9}));
    assert_eq!(first["blocks"][0]["text"], "N190 G1 X42. Y-4.69");
    assert_eq!(first["outline"][0][0], json!({"line": {"from": [38.0, 0.0], "to": [46.0, 0.0]}}));
    assert_eq!(super::super::sample::passing().worst.cusp, None);
    assert_eq!(self::value(&sample::passing())["worst"]["cusp"], Value::Null);
}

#[test]
fn each_piece_of_the_edge_knows_its_move_and_block() {
    let value = swept_value();
    let piece = &value["loops"][0]["segments"][1];
    assert_eq!(piece["move"], 0);
    assert_eq!(piece["block"], json!({"file": "slot.nc", "line": 7}));
    assert_eq!(piece["arc"]["center"], json!([30.0, 0.0]));
    assert_eq!(piece["arc"]["ccw"], true);
    assert_eq!(value["loops"][1]["segments"][0]["arc"]["ccw"], false);
}

#[test]
fn a_number_that_is_not_finite_is_an_error_and_never_null() {
    for bad in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
        let mut report = sample::passing();
        report.findings = vec![sample::finding(Kind::Gouge, bad, crate::geometry::Point::ORIGIN)];
        assert!(render(&report).is_err());
    }
}

#[test]
fn coordinates_keep_every_digit_and_zero_has_no_sign() {
    let mut report = sample::passing();
    let at = crate::geometry::Point::new(0.1 + 0.2, -0.0);
    report.findings = vec![sample::finding(Kind::Gouge, 1.0 / 3.0, at)];
    let value = value(&report);
    assert_eq!(value["findings"][0]["size"].as_f64(), Some(1.0 / 3.0));
    assert_eq!(value["findings"][0]["at"].to_string(), "[0.30000000000000004,0.0]");
}

#[test]
fn the_same_report_gives_the_same_bytes() {
    assert_eq!(render(&sample::failing()).expect("finite"), render(&sample::failing()).expect("finite"));
}
