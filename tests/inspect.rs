//! `seaplumb inspect`: what it tells of the demo data, against what was put into them.

mod support;

use assert_cmd::Command;
use serde_json::Value;
use std::path::Path;
use support::demo;

fn inspect(args: &[&str]) -> std::process::Output {
    Command::cargo_bin("seaplumb").expect("the program").arg("inspect").args(args).output().expect("a run")
}

fn text(bytes: &[u8]) -> String {
    String::from_utf8(bytes.to_vec()).expect("UTF-8")
}

fn path(name: &str) -> String {
    demo(name).display().to_string()
}

fn golden(name: &str) -> String {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/golden").join(name).display().to_string()
}

fn json(args: &[&str]) -> Value {
    let output = inspect(&[args, &["--format", "json", "--quiet"]].concat());
    assert!(output.status.success(), "{}", text(&output.stderr));
    assert_eq!(text(&output.stderr), "");
    let json: Value = serde_json::from_slice(&output.stdout).expect("JSON");
    assert_eq!(json["schema"], "seaplumb.inspect/1");
    json["casts"][0].clone()
}

fn truth(file: &str) -> Value {
    let text = std::fs::read_to_string(demo("truth.json")).expect("truth.json");
    let all: Value = serde_json::from_str(&text).expect("JSON");
    all[file].clone()
}

fn number(value: &Value) -> f64 {
    value.as_f64().unwrap_or_else(|| panic!("{value} is no number"))
}

fn whole(value: &Value) -> u64 {
    value.as_u64().unwrap_or_else(|| panic!("{value} is no whole number"))
}

/// The entry of an array whose `key` is `wanted`.
fn one<'a>(array: &'a Value, key: &str, wanted: &str) -> &'a Value {
    let found = array.as_array().expect("an array").iter().find(|entry| entry[key] == wanted);
    found.unwrap_or_else(|| panic!("no {key} {wanted} in {array:#}"))
}

/// First and last samples of the stretches of one finding.
fn stretches(cast: &Value, quantity: &str, reason: &str) -> Vec<(u64, u64)> {
    let found = cast["suspects"].as_array().expect("an array").iter();
    let finding = found.filter(|f| f["quantity"] == quantity && f["reason"] == reason);
    finding
        .flat_map(|f| f["stretches"].as_array().expect("an array"))
        .map(|s| (whole(&s["first_sample"]), whole(&s["last_sample"])))
        .collect()
}

const LANDER: &[&str] = &["--pressure", "sea", "--air-pressure", "1009.3"];

#[test]
fn the_dive_is_understood_as_it_was_made() {
    let cast = json(&[&[path("lander-dive.csv").as_str()], LANDER].concat());
    let truth = truth("lander-dive.csv");
    assert_eq!(cast["format"], "delimited text, comma");
    assert_eq!(cast["samples"], truth["samples"]);
    assert_eq!(cast["lines"], serde_json::json!([2, 25_652]));
    assert_eq!(
        (&cast["position"], &cast["start"], &cast["failure"]),
        (&Value::Null, &Value::Null, &Value::Null)
    );
    for (role, name, unit) in [
        ("time", "time_s", "s"),
        ("pressure", "pressure_dbar", "dbar"),
        ("conductivity", "conductivity_mS_cm", "mS/cm"),
        ("temperature", "temperature_degC", "degC"),
    ] {
        let column = one(&cast["columns"], "role", role);
        assert_eq!((&column["name"], &column["unit"]), (&name.into(), &unit.into()));
        assert_eq!(column["recognised_by"], "plain name, unit after an underscore", "{role}");
    }
    let sampling = &cast["sampling"];
    assert_eq!(sampling["median_interval_s"].as_f64(), truth["sample_interval_s"].as_f64());
    assert_eq!((number(&sampling["span_s"]), number(&sampling["irregular_share"])), (25_650.0, 0.0));
    assert_eq!(cast["gaps"], serde_json::json!([]));

    let pressure = &cast["pressure"];
    assert_eq!((&pressure["kind"], &pressure["kind_by"]), (&"sea".into(), &"option".into()));
    let noise = number(&pressure["noise_dbar"]) / number(&truth["noise_standard_deviation"]["pressure_dbar"]);
    assert!((noise - 1.0).abs() < 0.1, "{noise}");

    let water = &truth["water_first_and_last_sample"];
    let before = one(&cast["legs"], "leg", "deck before");
    let after = one(&cast["legs"], "leg", "deck after");
    assert_eq!(whole(&before["last_sample"]) + 1, whole(&water[0]));
    assert_eq!(whole(&after["first_sample"]), whole(&water[1]) + 1);
    assert_eq!(whole(&after["last_sample"]) + 1, whole(&truth["samples"]));
    // The bottom is the plateau, give or take a minute of slowing down and of first metres.
    let bottom = one(&cast["legs"], "leg", "bottom");
    for (sample, time) in [("first_sample", 0), ("last_sample", 1)] {
        let off = number(&bottom[sample]) - number(&truth["plateau_time_s"][time]);
        assert!(off.abs() < 60.0, "{sample}: {off} s off");
    }
    // Noise of 0.03 dbar over 3000 samples reaches 4 standard deviations; the spike of 35 dbar is not in it.
    let deepest = number(&bottom["pressure_dbar"][1]);
    assert!((deepest - number(&truth["deepest_true_sea_pressure_dbar"])).abs() < 0.2, "{deepest}");
    assert!((number(&bottom["duration_s"]) - 3000.0).abs() < 120.0);

    // Half of the noise is a generous bound for a median of hundreds of samples.
    let deck = &cast["deck"];
    for offset in ["tare_dbar", "offset_before_dbar", "offset_after_dbar"] {
        assert!(
            (number(&deck[offset]) - number(&truth["zero_offset_dbar"])).abs() < 0.015,
            "{offset}: {deck}"
        );
    }
    assert_eq!(deck["tare_by"], "deck");
    let u = number(&deck["tare_standard_uncertainty_dbar"]);
    // Two medians of some 400 readings with 0.03 dbar of noise, and what they differ by: 1.4e-3 and about 1e-3 dbar.
    assert!(u > 0.0008 && u < 0.003, "{u}");
    assert_eq!(whole(&deck["samples_before"]), whole(&water[0]));

    let raw = number(&one(&cast["values"], "quantity", "pressure")["range"][1]);
    assert_eq!(raw, number(&truth["raw_maximum_reading_dbar"]));
}

#[test]
fn every_fault_of_the_dive_is_named_where_it_is() {
    let cast = json(&[&[path("lander-dive.csv").as_str()], LANDER].concat());
    let faults = &truth("lander-dive.csv")["faults_first_and_last_sample"];
    let overlap = |quantity: &str, reason: &str, fault: &str| -> f64 {
        let (first, last) = (whole(&faults[fault][0]), whole(&faults[fault][1]));
        let found: u64 = stretches(&cast, quantity, reason)
            .iter()
            .map(|(a, b)| (*b.min(&last) + 1).saturating_sub(*a.max(&first)))
            .sum();
        found as f64 / (last - first + 1) as f64
    };
    assert_eq!(overlap("pressure", "spike", "pressure_spike"), 1.0);
    assert_eq!(overlap("temperature", "spike", "temperature_spike"), 1.0);
    // The first of the stuck values is a good one.
    assert!(overlap("temperature", "stuck value", "temperature_stuck") > 0.98);
    assert!(overlap("conductivity", "pump off", "pump_off_conductivity") > 0.95);
    // The pressure of the spike stands with it.
    let spikes = one(&cast["suspects"], "quantity", "pressure");
    let spike = one_stretch(spikes, whole(&faults["pressure_spike"][0]));
    assert_eq!(spike["lines"], serde_json::json!([13_002, 13_002]));
    // Raw maximum less the zero offset; the latter is known to half the noise.
    let expected = number(&truth("lander-dive.csv")["raw_maximum_reading_dbar"]) - 0.38;
    assert!((number(&spike["pressure_dbar"][0]) - expected).abs() < 0.015, "{spike}");
    let counted: u64 =
        cast["suspects"].as_array().expect("an array").iter().map(|f| whole(&f["count"])).sum();
    let listed = json(&[&[path("lander-dive.csv").as_str(), "--samples"], LANDER].concat());
    let listed = listed["suspect_samples"].as_array().expect("an array");
    assert_eq!(listed.len() as u64, counted);
    assert!(listed.iter().any(|s| s["line"] == 13_002 && s["reason"] == "spike" && s["value"] == 11_239.826));
    assert_eq!(cast.get("suspect_samples"), None);
}

fn one_stretch(finding: &Value, sample: u64) -> &Value {
    let mut all = finding["stretches"].as_array().expect("an array").iter();
    all.find(|s| s["first_sample"] == sample).unwrap_or_else(|| panic!("no stretch at {sample}: {finding:#}"))
}

#[test]
fn the_shelf_cast_has_absolute_times_and_pressures() {
    let cast = json(&[&path("shelf-cast.csv"), "--pressure", "absolute", "--air-pressure", "1014.8"]);
    let truth = truth("shelf-cast.csv");
    assert_eq!(cast["format"], "delimited text, semicolon, decimal comma");
    assert_eq!(cast["samples"], truth["samples"]);
    assert_eq!(cast["sampling"]["median_interval_s"].as_f64(), truth["sample_interval_s"].as_f64());
    assert_eq!(cast["start"], "2024-03-24T02:15:00Z");
    // 1820 intervals of 0.25 s.
    assert_eq!(cast["end"], "2024-03-24T02:22:35Z");
    assert_eq!(one(&cast["columns"], "role", "pressure")["unit"], "kPa");
    let offset_dbar = number(&truth["zero_offset_kPa"]) / 10.0;
    assert!((number(&cast["deck"]["tare_dbar"]) - offset_dbar).abs() < 0.001, "{}", cast["deck"]);
    let water = &truth["water_first_and_last_sample"];
    assert_eq!(one(&cast["legs"], "leg", "down")["first_sample"], water[0]);
    assert_eq!(one(&cast["legs"], "leg", "up")["last_sample"], water[1]);
}

#[test]
fn flags_of_the_log_are_counted() {
    let cast = json(&[&path("salinity-cast.csv")]);
    let flagged = &truth("salinity-cast.csv")["pressure_dbar_of_flag"];
    let count = |flag: &str| flagged[flag].as_array().expect("an array").len() as u64;
    let logged = &cast["flags"]["log"]["samples"];
    assert_eq!(whole(&logged["questionable"]), count("3"));
    assert_eq!(whole(&logged["bad"]), count("4"));
    assert_eq!(whole(&logged["missing"]), count("9"));
    assert_eq!(whole(&logged["good"]), whole(&cast["samples"]) - count("3") - count("4") - count("9"));
    // 1432 and 1434 dbar lack salinity, 2204 dbar both.
    assert_eq!(one(&cast["values"], "quantity", "salinity")["missing"], 3);
    assert_eq!(one(&cast["values"], "quantity", "temperature")["missing"], 1);
    assert_eq!((&cast["sampling"], &cast["pressure"]["kind_by"]), (&Value::Null, &"assumed".into()));
    assert_eq!(number(&cast["pressure"]["averaged_step_dbar"]), 2.0);
}

#[test]
fn a_log_that_is_no_cast_is_still_shown() {
    let output = inspect(&[&path("shelf-cast.csv")]);
    assert_eq!(output.status.code(), Some(3));
    let out = text(&output.stdout);
    for part in [
        "cannot be read as a cast",
        "on deck the pressure reads 10.16 dbar",
        "--pressure absolute",
        "conductivity [S/m]",
        "unit in brackets",
        "a sample every 0.25 s",
    ] {
        assert!(out.contains(part), "expected '{part}' in:\n{out}");
    }
    assert!(text(&output.stderr).contains("on deck the pressure reads"));
    let output = inspect(&[&path("shelf-cast.csv"), "--format", "json"]);
    assert_eq!(output.status.code(), Some(3));
    let json: Value = serde_json::from_slice(&output.stdout).expect("JSON");
    let cast = &json["casts"][0];
    assert!(cast["failure"]["problem"].as_str().expect("words").contains("on deck"));
    assert_eq!((&cast["legs"], &cast["deck"]), (&serde_json::json!([]), &Value::Null));
    assert_eq!(cast["samples"], 1821);
}

#[test]
fn a_gap_in_time_is_found() {
    let rows: String = (0..200)
        .map(|i| {
            let (time, pressure) = (if i < 120 { i } else { i + 30 }, (100 - (i - 100_i32).abs()) * 2 + 5);
            format!("{time},{pressure}\n")
        })
        .collect();
    let dir = tempfile::tempdir().expect("a folder");
    let log = dir.path().join("gap.csv");
    std::fs::write(&log, format!("time_s,pressure_dbar\n{rows}")).expect("written");
    let log = log.display().to_string();
    let cast = json(&[&log]);
    let gaps = cast["gaps"].as_array().expect("an array");
    assert_eq!(gaps.len(), 1);
    assert_eq!((&gaps[0]["after_sample"], &gaps[0]["lines"]), (&119.into(), &serde_json::json!([121, 122])));
    assert_eq!((number(&gaps[0]["time_s"]), number(&gaps[0]["duration_s"])), (119.0, 31.0));
    let out = text(&inspect(&[&log]).stdout);
    assert!(out.contains("samples 119 to 120 (lines 121 to 122): 31 s at 1 min 59 s"), "{out}");
}

#[test]
fn an_archive_is_shown_cast_by_cast() {
    let output = inspect(&[&golden("casts.zip")]);
    // The five samples of each are enough for a cast.
    assert_eq!(output.status.code(), Some(0), "{}", text(&output.stderr));
    let out = text(&output.stdout);
    for part in [
        "casts.zip#casts/x_00012_00002_ct1.csv",
        "WHP-Exchange CTD",
        "13/2",
        "CTDTMP",
        "left aside    'CTDOXY', 'CTDOXY_FLAG_W'",
        "sea pressure (absolute less 101 325 Pa), as the log tells",
        "'README.txt'",
    ] {
        assert!(out.contains(part), "expected '{part}' in:\n{out}");
    }
}

#[test]
fn a_log_that_cannot_be_read_is_an_error() {
    let output = inspect(&["nowhere.csv", &path("salinity-cast.csv")]);
    assert_eq!(output.status.code(), Some(3));
    assert!(text(&output.stderr).contains("nowhere.csv"));
    assert!(text(&output.stdout).contains("salinity-cast.csv"));
    let output = inspect(&[&path("salinity-cast.csv"), "--air-pressure", "1"]);
    assert_eq!((output.status.code(), text(&output.stdout).as_str()), (Some(2), ""));
}

#[test]
fn lines_fit_a_terminal() {
    let long = path("lander-dive.csv");
    for args in
        [&[long.as_str(), "--samples"] as &[&str], &[&golden("casts.zip")], &[&path("salinity-cast.csv")]]
    {
        let out = text(&inspect(args).stdout);
        assert!(out.lines().count() > 20);
        for line in out.lines().filter(|line| !line.starts_with('/')) {
            assert!(line.chars().count() <= 90, "{} characters: {line}", line.chars().count());
            assert!(!line.ends_with(' '), "'{line}'");
        }
    }
}
