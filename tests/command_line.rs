//! The program as a user meets it: what it prints, and what it says when something is wrong.

mod support;

use assert_cmd::Command;
use support::demo;

fn seaplumb(args: &[&str]) -> std::process::Output {
    Command::cargo_bin("seaplumb").expect("the program").args(args).output().expect("a run")
}

fn text(bytes: &[u8]) -> String {
    String::from_utf8(bytes.to_vec()).expect("UTF-8")
}

fn path(name: &str) -> String {
    demo(name).display().to_string()
}

/// Runs, expects `status`, returns standard error, and requires that standard output stays empty.
fn refused(args: &[&str], status: i32) -> String {
    let output = seaplumb(args);
    assert_eq!(output.status.code(), Some(status), "{args:?}: {}", text(&output.stderr));
    assert_eq!(text(&output.stdout), "", "{args:?}");
    text(&output.stderr)
}

fn says(message: &str, parts: &[&str]) {
    for part in parts {
        assert!(message.contains(part), "expected '{part}' in:\n{message}");
    }
}

#[test]
fn reduce_prints_the_columns_of_the_interface() {
    let output = seaplumb(&["reduce", &path("lander-dive.csv"), "--lat", "-19.4", "--lon", "-131.7"]);
    assert!(output.status.success());
    let out = text(&output.stdout);
    let mut lines = out.lines();
    assert_eq!(lines.next(), Some("time_s,pressure_dbar,depth_m,u_depth_m,density_kg_m3,leg,flag"));
    assert_eq!(lines.clone().count(), 25_651);
    assert!(lines.all(|l| l.split(',').count() == 7));
    says(&text(&output.stderr), &["25651 samples", "equation of state is extrapolated"]);
}

#[test]
fn absolute_time_has_a_column() {
    let output = seaplumb(&[
        "reduce",
        &path("shelf-cast.csv"),
        "--lat",
        "-38.25",
        "--pressure",
        "absolute",
        "--air-pressure",
        "1014.8",
        "--quiet",
    ]);
    let out = text(&output.stdout);
    assert!(out.starts_with("time_s,time,pressure_dbar,depth_m,u_depth_m,density_kg_m3,leg,flag\n0,2"));
    assert_eq!(text(&output.stderr), "");
}

#[test]
fn deepest_json_has_the_keys_of_the_interface() {
    let output = seaplumb(&[
        "deepest",
        &path("lander-dive.csv"),
        "--lat",
        "-19.4",
        "--lon",
        "-131.7",
        "--format",
        "json",
        "--uncertainty",
        "surface_gravity=8",
        "--gravity-anomaly=-182",
    ]);
    let json: serde_json::Value = serde_json::from_slice(&output.stdout).expect("JSON");
    assert_eq!(json["schema"], "seaplumb.deepest/1");
    let cast = &json["casts"][0];
    for key in [
        "log",
        "station",
        "latitude",
        "longitude",
        "deepest",
        "budget",
        "ladder",
        "survey_orders",
        "monte_carlo",
        "warnings",
    ] {
        assert!(cast.get(key).is_some(), "{key}");
    }
    for key in [
        "depth_m",
        "raw_maximum_m",
        "time_s",
        "pressure_dbar",
        "standard_uncertainty_m",
        "expanded_uncertainty_m",
        "coverage_probability",
        "coverage_factor",
        "effective_degrees_of_freedom",
        "datum",
    ] {
        assert!(cast["deepest"].get(key).is_some(), "{key}");
    }
    let budget = cast["budget"].as_array().expect("a budget");
    let term = |key: &str| budget.iter().find(|t| t["term"] == key).unwrap_or_else(|| panic!("{key}"));
    let terms = [
        "pressure_calibration",
        "pressure_noise",
        "tare",
        "air_pressure",
        "temperature_calibration",
        "conductivity_calibration",
        "salinity_composition",
        "equation_of_state",
        "profile_representativeness",
        "surface_gap",
        "surface_gravity",
        "gravity_gradient",
        "geoid_height",
        "position",
        "water_level",
        "reference_offset",
        "peak_estimate",
        "integration",
    ];
    assert_eq!(budget.len(), terms.len());
    let shares: f64 = terms.iter().map(|key| term(key)["share"].as_f64().expect("a share")).sum();
    assert!((shares - 1.0).abs() < 1e-5, "the shares make up the whole: {shares}");
    assert_eq!(term("surface_gravity")["basis"], "option");
    assert_eq!(term("surface_gravity")["value"], -182.0);
    assert_eq!(term("water_level")["basis"], "assumed");
    // The terms combine to the total.
    let sum: f64 = budget.iter().map(|t| t["contribution_m"].as_f64().expect("m").powi(2)).sum();
    let total = cast["deepest"]["standard_uncertainty_m"].as_f64().expect("m");
    assert!((sum.sqrt() / total - 1.0).abs() < 1e-3);
    let steps: Vec<&str> = cast["ladder"]
        .as_array()
        .expect("a ladder")
        .iter()
        .map(|r| r["step"].as_str().expect("a step"))
        .collect();
    assert_eq!(
        steps,
        [
            "uniform_water",
            "standard_ocean",
            "insitu_density",
            "latitude_gravity",
            "gravity_with_depth",
            "local_gravity",
            "datum",
            "reference_point"
        ]
    );
}

#[test]
fn a_missing_latitude_is_an_error() {
    let message = refused(&["deepest", &path("lander-dive.csv"), "--format", "csv"], 3);
    says(&message, &["lander-dive.csv", "latitude is not known", "--lat"]);
}

#[test]
fn wrong_calls_say_what_would_be_right() {
    let log = path("lander-dive.csv");
    let with = |more: &[&str]| {
        let mut args = vec!["deepest", log.as_str(), "--lat", "-19.4"];
        args.extend_from_slice(more);
        refused(&args, 2)
    };
    says(&with(&["--uncertainty", "surface_gravty=8"]), &["surface_gravity"]);
    says(&with(&["--tare", "deck"]), &["--tare deck", "auto, none or a number"]);
    says(&with(&["--coverage", "95"]), &["--coverage 95", "0.5"]);
    says(&with(&["--air-pressure", "101325"]), &["--air-pressure 101325", "hPa"]);
    says(&with(&["--column", "depth=x"]), &["--column depth=x"]);
    says(&with(&["--profile", "nowhere.csv"]), &["--profile", "nowhere.csv"]);
    says(&refused(&["deepest", &log, "--lat", "-91"], 2), &["--lat -91", "-90 to 90"]);
    says(&refused(&["reduce", &log, &log, "--lat", "0"], 2), &["--into DIR"]);
    says(&refused(&["deepest"], 2), &["LOG"]);
}

#[test]
fn an_absolute_pressure_taken_for_sea_pressure_is_seen() {
    let message = refused(&["deepest", &path("shelf-cast.csv"), "--lat", "-38.25"], 3);
    says(&message, &["on deck the pressure reads 10.16 dbar", "--pressure absolute"]);
}

#[test]
fn one_bad_log_does_not_stop_the_others() {
    let output = seaplumb(&[
        "deepest",
        "--format",
        "csv",
        "--lat",
        "-19.4",
        "nowhere.csv",
        &path("salinity-cast.csv"),
        &path("lander-dive.csv"),
    ]);
    assert_eq!(output.status.code(), Some(3));
    assert_eq!(text(&output.stdout).lines().count(), 3);
    says(&text(&output.stderr), &["nowhere.csv", "1 could not be reduced, of 3"]);
}

#[test]
fn results_into_a_folder() {
    let dir = tempfile::tempdir().expect("a folder");
    let into = dir.path().join("out").display().to_string();
    let (one, two) = (path("salinity-cast.csv"), path("lander-dive.csv"));
    let args = ["reduce", &one, &two, "--lat", "-19.4", "--into", &into];
    let output = seaplumb(&args);
    assert!(output.status.success(), "{}", text(&output.stderr));
    let mut names: Vec<String> = std::fs::read_dir(&into)
        .expect("the folder")
        .map(|e| e.expect("an entry").file_name().into_string().expect("a name"))
        .collect();
    names.sort();
    assert_eq!(names, ["cruise.csv", "lander-dive.csv", "salinity-cast.csv"]);
    let cruise = std::fs::read_to_string(dir.path().join("out/cruise.csv")).expect("cruise.csv");
    assert_eq!(cruise.lines().count(), 3);
    says(&refused(&args, 2), &["--replace"]);
    let mut again = args.to_vec();
    again.push("--replace");
    assert!(seaplumb(&again).status.success());
}

#[test]
fn netcdf_into_a_folder_and_into_a_pipe() {
    let dir = tempfile::tempdir().expect("a folder");
    let into = dir.path().join("out").display().to_string();
    let log = path("lander-dive.csv");
    let args = ["reduce", &log, "--lat", "-19.4", "--lon", "-131.7", "--format", "netcdf", "--quiet"];
    let mut to_folder = args.to_vec();
    to_folder.extend_from_slice(&["--into", &into]);
    let output = seaplumb(&to_folder);
    assert!(output.status.success(), "{}", text(&output.stderr));
    let in_folder = std::fs::read(dir.path().join("out/lander-dive.nc")).expect("lander-dive.nc");
    let piped = seaplumb(&args);
    assert!(piped.status.success(), "{}", text(&piped.stderr));

    for (bytes, call) in [(in_folder, &to_folder[..]), (piped.stdout, &args)] {
        // Whole: 25 651 samples of five doubles and two bytes, the bytes rounded up to fours, behind the header.
        let values = 25_651 * 5 * 8 + 2 * 25_652;
        assert!(bytes.len() > values && bytes.len() < values + 8_192, "{}", bytes.len());
        let file = netcdf_reader::NcFile::from_vec(bytes).expect("NetCDF");
        for (name, samples) in [("time", 25_651), ("depth", 25_651), ("flag", 25_651), ("latitude", 1)] {
            assert_eq!(file.read_variable_as_f64(name).expect(name).len(), samples, "{name}");
        }
        let history = file.global_attribute("history").expect("history").value.as_string().expect("text");
        assert!(history.ends_with(&format!(": seaplumb {}", call.join(" "))), "{history}");
    }
    says(&refused(&to_folder, 2), &["--replace"]);
    says(&refused(&["reduce", &log, &log, "--lat", "0", "--format", "netcdf"], 2), &["--into DIR"]);
    // The help breaks its lines where it likes.
    let help = text(&seaplumb(&["reduce", "--help"]).stdout);
    let help = help.split_whitespace().collect::<Vec<_>>().join(" ");
    says(&help, &["netcdf: CF-1.11", "with --into DIR, or standard output into a file or pipe"]);
}

#[test]
fn netcdf_is_not_for_a_terminal() {
    use clap::Parser;
    use seaplumb::cli::{Cli, run};
    let mut cli = Cli::parse_from(["seaplumb", "reduce", &path("lander-dive.csv"), "--format", "netcdf"]);
    cli.invocation.to_terminal = true;
    let (mut out, mut notes) = (Vec::new(), Vec::new());
    let failure = run(&cli, &mut out, &mut notes).expect_err("a refusal");
    says(&failure.to_string(), &["not for a terminal", "> depth.nc", "--into DIR"]);
    assert!(out.is_empty() && notes.is_empty());
}

/// Conductivity without temperature once ended in a panic.
#[test]
fn conductivity_without_temperature_is_no_water() {
    let rows: String = (0..300).map(|i| format!("{i},{},41.2\n", i.min(300 - i))).collect();
    let output = Command::cargo_bin("seaplumb")
        .expect("the program")
        .args(["deepest", "-", "--lat", "10", "--format", "csv"])
        .write_stdin(format!("time_s,pressure_dbar,conductivity_mS_cm\n{rows}"))
        .output()
        .expect("a run");
    assert!(output.status.success(), "{}", text(&output.stderr));
    says(&text(&output.stdout), &["standard_ocean"]);
}

/// A depth series in NetCDF is itself a log of pressures.
#[test]
fn our_own_netcdf_can_be_read_back() {
    let dir = tempfile::tempdir().expect("a folder");
    let into = dir.path().display().to_string();
    let call = ["--lat", "-38.25", "--pressure", "absolute", "--air-pressure", "1014.8"];
    let shelf = path("shelf-cast.csv");
    let out = seaplumb(&[&["reduce", &shelf, "--format", "netcdf", "--into", &into], &call[..]].concat());
    assert!(out.status.success(), "{}", text(&out.stderr));
    let written = dir.path().join("shelf-cast.nc").display().to_string();
    let again = seaplumb(&["inspect", &written, "--format", "json"]);
    assert!(again.status.success(), "{}", text(&again.stderr));
    let json: serde_json::Value = serde_json::from_slice(&again.stdout).expect("JSON");
    assert_eq!(json["casts"][0]["samples"].as_u64(), Some(1821), "{json}");
}

#[test]
fn standard_input_is_a_log() {
    let bytes = std::fs::read(demo("salinity-cast.csv")).expect("the demo");
    let run = |args: &[&str]| {
        Command::cargo_bin("seaplumb")
            .expect("the program")
            .args(args)
            .write_stdin(bytes.clone())
            .output()
            .expect("a run")
    };
    let piped = run(&["reduce", "-", "--lat", "-19.4", "-q"]);
    let direct = seaplumb(&["reduce", &path("salinity-cast.csv"), "--lat", "-19.4", "-q"]);
    assert!(piped.status.success());
    assert_eq!(piped.stdout, direct.stdout);
}

#[test]
fn further_columns_stand_behind_in_the_order_asked_for() {
    let log = path("lander-dive.csv");
    let with = "sound_speed_m_s,gravity_m_s2,practical_salinity,mean_sound_speed_m_s,gravity_m_s2";
    let args = [
        "reduce",
        &log,
        "--lat",
        "-19.4",
        "--lon",
        "-131.7",
        "--air-pressure",
        "1009.3",
        "-q",
        "--with",
        with,
    ];
    let out = text(&seaplumb(&args).stdout);
    let mut lines = out.lines();
    assert!(
        lines
            .next()
            .expect("a header")
            .ends_with(",leg,flag,sound_speed_m_s,gravity_m_s2,practical_salinity,mean_sound_speed_m_s")
    );
    let rows: Vec<Vec<&str>> = lines.map(|l| l.split(',').collect()).collect();
    // On deck the sample tells nothing of water.
    assert_eq!((rows[0][7], rows[0][9]), ("", ""));
    let number = |row: usize, column: usize| rows[row][column].parse::<f64>().expect("a number");
    let deepest = 13_860;
    // What the demo's script put in at the bottom: 34.69 (demo-data/make_ocean.py); sound speed and gravity by gsw 3.6.23
    // and the numbers of docs/method.md at about that depth.
    assert!((number(deepest, 9) - 34.69).abs() < 0.005);
    assert!((number(deepest, 7) - 1651.8).abs() < 0.5);
    assert!((number(deepest, 8) - 9.810_08).abs() < 2e-5);
    assert!(number(deepest, 10) < number(deepest, 7));
    let json = seaplumb(&[&args[..], &["--format", "json"]].concat()).stdout;
    let json: serde_json::Value = serde_json::from_slice(&json).expect("JSON");
    assert_eq!(json["schema"], "seaplumb.reduce/1");
    let samples = &json["casts"][0]["samples"];
    assert_eq!(samples["practical_salinity"][deepest].as_f64(), Some(number(deepest, 9)));
    assert_eq!(samples["practical_salinity"][0], serde_json::Value::Null);
}

#[test]
fn the_seafloor_lies_an_altitude_below() {
    let rows: String = (0..300).map(|i| format!("{i},{},10,35,{}\n", i, 320 - i)).collect();
    let output = Command::cargo_bin("seaplumb")
        .expect("the program")
        .args(["reduce", "-", "--lat", "10", "-q", "--with", "seafloor_depth_m"])
        .write_stdin(format!("time_s,pressure_dbar,temperature_degC,practical_salinity,altitude_m\n{rows}"))
        .output()
        .expect("a run");
    let out = text(&output.stdout);
    let last: Vec<&str> = out.lines().last().expect("a row").split(',').collect();
    let number = |i: usize| last[i].parse::<f64>().expect("a number");
    assert!((number(7) - number(2) - 21.0).abs() < 1e-9, "{last:?}");
}

#[test]
fn both_equations_of_state_agree() {
    let depth = |eos: &str| {
        let log = path("lander-dive.csv");
        let args =
            ["deepest", &log, "--lat", "-19.4", "--lon", "-131.7", "--format", "json", "-q", "--eos", eos];
        let json: serde_json::Value = serde_json::from_slice(&seaplumb(&args).stdout).expect("JSON");
        json["casts"][0]["deepest"]["depth_m"].as_f64().expect("m")
    };
    let (gibbs, polynomial) = (depth("gibbs"), depth("polynomial"));
    assert!(gibbs != polynomial && (gibbs - polynomial).abs() < 1e-3, "{gibbs} {polynomial}");
}

#[test]
fn a_position_without_atlas_widens_the_term() {
    let term = |lat: &str, lon: &[&str]| {
        let log = path("salinity-cast.csv");
        let args = [&["deepest", &log, "--format", "json", "-q", "--lat", lat], lon].concat();
        let json: serde_json::Value = serde_json::from_slice(&seaplumb(&args).stdout).expect("JSON");
        let cast = json["casts"][0].clone();
        let budget = cast["budget"].as_array().expect("a budget").clone();
        let term = budget.into_iter().find(|t| t["term"] == "salinity_composition").expect("the term");
        (term["standard_uncertainty"].as_f64().expect("u"), cast["warnings"].to_string())
    };
    assert_eq!(term("-19.4", &["--lon", "-131.7"]).0, 0.005);
    assert_eq!(term("-19.4", &["--lon", "228.3"]).0, 0.005);
    assert_eq!(term("-19.4", &[]).0, 0.015);
    // The middle of Asia.
    let (u, warnings) = term("48", &["--lon", "85"]);
    assert_eq!(u, 0.015);
    says(&warnings, &["composition_not_known"]);
}

#[test]
fn help_carries_the_caution_and_examples() {
    let help = text(&seaplumb(&["--help"]).stdout);
    says(&help, &["Not for navigation", "life support", "Exit status", "reduce", "deepest"]);
    says(&text(&seaplumb(&["deepest", "--help"]).stdout), &["Examples:", "--uncertainty <TERM=U>"]);
}

#[test]
fn the_text_report_says_everything_once() {
    let output =
        seaplumb(&["deepest", &path("lander-dive.csv"), &path("salinity-cast.csv"), "--lat", "-19.4"]);
    let out = text(&output.stdout);
    says(
        &out,
        &[
            "Deepest depth   10 871.",
            "pressure_calibration",
            "uniform_water",
            "IHO S-44",
            "Assumed",
            "Warnings",
        ],
    );
    assert_eq!(out.matches("Not for navigation").count(), 1);
    assert!(!out.contains("-0.00"));
}

#[cfg(unix)]
#[test]
fn a_closed_pipe_ends_it_quietly() {
    let program = assert_cmd::cargo::cargo_bin("seaplumb");
    let command =
        format!("'{}' reduce '{}' --lat -19.4 -q | head -1", program.display(), path("lander-dive.csv"));
    let output = std::process::Command::new("bash")
        .args(["-o", "pipefail", "-c", &command])
        .output()
        .expect("a shell");
    assert!(output.status.success(), "{}", text(&output.stderr));
    assert_eq!(text(&output.stderr), "");
}
