//! The cast sheet as a user meets it: what it changes, what beats what, and what is said when it is wrong.

#[path = "support/cruise.rs"]
mod cruise;

use cruise::{Cruise, text};
use serde_json::Value;
use std::fmt::Write;

fn term<'a>(cast: &'a Value, key: &str) -> &'a Value {
    let budget = cast["budget"].as_array().expect("a budget");
    budget.iter().find(|t| t["term"] == key).unwrap_or_else(|| panic!("no term {key}"))
}

/// From just below the surface to 6 000 dbar, a minute there, and back. `head` names the columns, `tail` ends each row.
fn log(head: &str, tail: &str) -> String {
    let mut log = format!("{head}\n");
    let down = (0..300).map(|i| 2.0 + 20.0 * f64::from(i)).filter(|p| *p < 6000.0);
    let pressures = down.clone().chain(std::iter::repeat_n(6000.0, 60)).chain(down.rev());
    for (i, p) in pressures.enumerate() {
        writeln!(log, "{i},{p}{tail}").expect("a line");
    }
    log
}

fn plain_log() -> String {
    log("time (s),pressure (dbar)", "")
}

fn placed_log() -> String {
    log("time (s),pressure (dbar),latitude,longitude", ",12.5,-40.25")
}

/// The same row with the pressure 10.125 dbar higher.
fn counted_from_vacuum(row: &str) -> String {
    let mut cells: Vec<String> = row.split(',').map(str::to_string).collect();
    if let Ok(pressure) = cells[1].parse::<f64>() {
        cells[1] = format!("{:.3}", pressure + 10.125);
    }
    cells.join(",")
}

fn two_casts(sheet: &str) -> Cruise {
    Cruise::new(&[
        ("trip/casts/K07.csv", &plain_log()),
        ("trip/casts/K08.csv", &plain_log()),
        ("trip/cruise.toml", sheet),
    ])
}

#[test]
fn a_cast_overrides_the_station() {
    let cruise = two_casts(
        r#"
[station]
latitude = -31.52
longitude = -176.18
name = "north wall"
[surface]
air_pressure_hpa = 1009.3
u_air_pressure_hpa = 0.5
[[cast]]
log = "casts/*.csv"
[[cast]]
log = "casts/K07.csv"
latitude = -31.60
name = "K07"
[cast.surface]
air_pressure_hpa = 1000
"#,
    );
    let casts = cruise.casts(&["--sheet", "trip/cruise.toml"]);
    assert_eq!(casts.len(), 2, "each log once");
    let [seven, eight] = &casts[..] else { panic!("two casts") };
    assert!(seven["log"].as_str().expect("a log").ends_with("K07.csv"));
    assert_eq!((&seven["latitude"], &eight["latitude"]), (&Value::from(-31.6), &Value::from(-31.52)));
    assert_eq!((&seven["longitude"], &eight["longitude"]), (&Value::from(-176.18), &Value::from(-176.18)));
    assert_eq!((&seven["station"], &eight["station"]), (&Value::from("K07"), &Value::from("north wall")));
    let air = |cast| term(cast, "air_pressure")["value"].as_f64().expect("hPa");
    assert!((air(seven) - 1000.0).abs() < 1e-6 && (air(eight) - 1009.3).abs() < 1e-6);
    for cast in [seven, eight] {
        assert_eq!(term(cast, "air_pressure")["standard_uncertainty"], 0.5);
        assert_eq!(term(cast, "air_pressure")["basis"], "sheet");
        assert_eq!(term(cast, "water_level")["basis"], "assumed");
    }
}

#[test]
fn a_later_cast_beats_an_earlier_one() {
    let cruise = two_casts(
        r#"
[[cast]]
log = "casts/K07.csv"
latitude = 1.0
longitude = 2.0
[[cast]]
log = "casts/K0?.csv"
latitude = 3.0
"#,
    );
    let casts = cruise.casts(&["--sheet", "trip/cruise.toml"]);
    let places: Vec<_> = casts.iter().map(|c| (c["latitude"].as_f64(), c["longitude"].as_f64())).collect();
    assert_eq!(places, [(Some(3.0), Some(2.0)), (Some(3.0), None)]);
}

#[test]
fn an_option_beats_the_sheet_and_the_sheet_beats_the_log() {
    let cruise = Cruise::new(&[
        ("K07.csv", &placed_log()),
        (
            "one.toml",
            "[station]\nlatitude = -31.52\n[uncertainty]\nsurface_gravity = 8.0\ngeoid_height = 2.0\n",
        ),
    ]);
    let place = |cast: &Value| (cast["latitude"].as_f64(), cast["longitude"].as_f64());
    let of_log = cruise.casts(&["K07.csv"]).remove(0);
    assert_eq!(place(&of_log), (Some(12.5), Some(-40.25)));
    let of_sheet = cruise.casts(&["K07.csv", "--sheet", "one.toml"]).remove(0);
    // Longitude stays the log's: the sheet is silent on it.
    assert_eq!(place(&of_sheet), (Some(-31.52), Some(-40.25)));
    assert_eq!(term(&of_sheet, "surface_gravity")["standard_uncertainty"], 8.0);
    let args = ["K07.csv", "--sheet", "one.toml", "--lat", "70", "--uncertainty", "surface_gravity=3"];
    let of_call = cruise.casts(&args).remove(0);
    assert_eq!(place(&of_call), (Some(70.0), Some(-40.25)));
    let supplied = |key: &str| {
        let term = term(&of_call, key);
        (term["standard_uncertainty"].as_f64(), term["basis"].as_str().map(str::to_string))
    };
    assert_eq!(supplied("surface_gravity"), (Some(3.0), Some("option".to_string())));
    assert_eq!(supplied("geoid_height"), (Some(2.0), Some("sheet".to_string())));
}

/// Whatever has an option must come out the same by either way; bases apart.
#[test]
fn sheet_and_options_say_the_same() {
    let sheet = r#"
[station]
latitude = -31.52
longitude = -176.18
[log]
pressure = "gauge"
columns = { pressure = "p:MPa", time = "1:s" }
missing = ["x"]
[pressure_sensor]
tare = 0.25
u_tare_dbar = 0.03
[surface]
air_pressure_hpa = 1009.3
u_air_pressure_hpa = 0.5
water_level_m = 0.42
u_water_level_m = 0.1
datum = "chart datum"
geoid_height_m = 41
u_geoid_height_m = 1.5
[gravity]
anomaly_mgal = -182.0
u_anomaly_mgal = 8.0
gradient_eotvos = -40.0
u_gradient_eotvos = 20.0
[vehicle]
reference_below_sensor_m = 0.85
u_reference_below_sensor_m = 0.01
[water]
leg = "up"
profile = "near.csv"
[uncertainty]
temperature_calibration = 0.001
"#;
    let near: String = std::iter::once("pressure (dbar),temperature (degC),salinity\n".to_string())
        .chain((1..=620).map(|i| format!("{},{},34.{}\n", 10 * i, 20.0 / f64::from(i), 500 + i)))
        .collect();
    // In MPa under a name that means nothing, with a mark for a missing value.
    let odd = log("seconds (s),p", "").replace("60,1202", "60,x");
    let odd: String = odd
        .lines()
        .map(|line| match line.split_once(',') {
            Some((t, p)) => match p.parse::<f64>() {
                Ok(p) => format!("{t},{}\n", p / 100.0),
                Err(_) => format!("{line}\n"),
            },
            None => format!("{line}\n"),
        })
        .collect();
    assert!(odd.contains("60,x\n"), "the mark is there");
    let cruise = Cruise::new(&[("odd.csv", &odd), ("near.csv", &near), ("all.toml", sheet)]);
    let by_sheet = cruise.casts(&["odd.csv", "--sheet", "all.toml"]).remove(0);
    #[rustfmt::skip]
    let by_options = cruise.casts(&[
        "odd.csv", "--lat=-31.52", "--lon=-176.18", "--pressure", "gauge", "--column", "pressure=p:MPa", "--column", "time=1:s",
        "--missing", "x", "--tare", "0.25", "--air-pressure", "1009.3", "--water-level", "0.42", "--datum", "chart datum",
        "--geoid-height", "41", "--gravity-anomaly=-182", "--gravity-gradient=-40", "--reference-below", "0.85", "--leg", "up",
        "--profile", "near.csv", "--uncertainty", "tare=0.03", "--uncertainty", "air_pressure=0.5", "--uncertainty", "water_level=0.1",
        "--uncertainty", "geoid_height=1.5", "--uncertainty", "surface_gravity=8", "--uncertainty", "gravity_gradient=20",
        "--uncertainty", "reference_offset=0.01", "--uncertainty", "temperature_calibration=0.001",
    ])
    .remove(0);
    let plain = |mut cast: Value| {
        for term in cast["budget"].as_array_mut().expect("a budget") {
            let basis = term["basis"].as_str().expect("a basis").replace("option", "sheet");
            term["basis"] = Value::from(basis);
        }
        cast
    };
    assert_eq!(plain(by_sheet.clone()), plain(by_options));
    assert_eq!(by_sheet["deepest"]["datum"], "chart datum");
}

#[test]
fn a_disturbance_is_not_an_anomaly() {
    let sheet = |key: &str| {
        format!(
            "[station]\nlatitude = -31.5\n[surface]\ngeoid_height_m = 80\n[gravity]\n{key}_mgal = -182\nu_{key}_mgal = 8"
        )
    };
    let cruise = Cruise::new(&[
        ("K.csv", &plain_log()),
        ("a.toml", &sheet("anomaly")),
        ("d.toml", &sheet("disturbance")),
    ]);
    let depth = |args: &[&str]| cruise.casts(args).remove(0)["deepest"]["depth_m"].as_f64().expect("m");
    let anomaly = depth(&["K.csv", "--sheet", "a.toml"]);
    let disturbance = depth(&["K.csv", "--sheet", "d.toml"]);
    let by_option = depth(&["K.csv", "--lat=-31.5", "--geoid-height", "80", "--gravity-disturbance=-182"]);
    assert_eq!(disturbance, by_option);
    // A free-air anomaly is referred to the geoid: it takes gravity 80 m lower than a disturbance does.
    assert!((anomaly - disturbance).abs() > 0.05, "{anomaly} {disturbance}");
}

/// sqrt(0.4^2 + (5e-5 x 6000)^2) = 0.5 dbar; the offset alone 0.4 dbar, the slope alone 0.3 dbar.
#[test]
fn the_certificate_of_the_pressure_sensor() {
    let sheet =
        |keys: &str| format!("[station]\nlatitude = -31.5\n[pressure_sensor]\ntare = \"none\"\n{keys}\n");
    let cruise = Cruise::new(&[
        ("K.csv", &plain_log()),
        ("both.toml", &sheet("u_constant_dbar = 0.4\nu_relative = 5e-5")),
        ("offset.toml", &sheet("u_constant_dbar = 0.4")),
        ("slope.toml", &sheet("u_relative = 5e-5")),
        (
            "cast.toml",
            &(sheet("u_constant_dbar = 9.9\nu_relative = 5e-5")
                + "[[cast]]\nlog = \"K.csv\"\n[cast.pressure_sensor]\nu_constant_dbar = 0.4\n"),
        ),
    ]);
    let calibration = |sheet: &str| {
        let cast = cruise.casts(&["K.csv", "--sheet", sheet]).remove(0);
        assert_eq!(cast["deepest"]["pressure_dbar"], 6000.0);
        let term = term(&cast, "pressure_calibration").clone();
        assert_eq!(term["basis"], "sheet");
        let number = |key: &str| term[key].as_f64().expect("a number");
        (number("standard_uncertainty"), number("contribution_m"), number("sensitivity"))
    };
    let (both, both_m, slope) = calibration("both.toml");
    let (offset, offset_m, _) = calibration("offset.toml");
    let (relative, relative_m, _) = calibration("slope.toml");
    for (got, expected) in [(both, 0.5), (offset, 0.4), (relative, 0.3)] {
        assert!((got - expected).abs() < 1e-6, "{got} for {expected}");
    }
    assert!((both_m - offset_m.hypot(relative_m)).abs() < 1e-4, "{both_m} {offset_m} {relative_m}");
    // 1e4 Pa / (rho g) with 1055 kg/m3 (35 g/kg, 0 degC, 6 000 dbar: EOS-80 gives 1055.2) and 9.812 m/s2 (9.794 at 31.5 degrees,
    // and 2.2e-6 m/s2 more per metre): 0.966 m/dbar.
    assert!((slope - 0.966).abs() < 2e-3, "{slope}");
    assert_eq!(calibration("cast.toml"), (both, both_m, slope));
}

#[test]
fn an_option_silences_the_certificate() {
    let cruise = Cruise::new(&[
        ("K.csv", &plain_log()),
        ("s.toml", "[station]\nlatitude = 0\n[pressure_sensor]\nu_constant_dbar = 0.4\nu_relative = 5e-5\n"),
    ]);
    let cast =
        cruise.casts(&["K.csv", "--sheet", "s.toml", "--uncertainty", "pressure_calibration=0.7"]).remove(0);
    assert_eq!(term(&cast, "pressure_calibration")["standard_uncertainty"], 0.7);
    assert_eq!(term(&cast, "pressure_calibration")["basis"], "option");
}

#[test]
fn a_start_gives_samples_their_time() {
    let cruise = Cruise::new(&[
        ("K.csv", &plain_log()),
        ("s.toml", "[station]\nlatitude = 0\n[log]\nstart_time = 2026-03-01T12:20:30+02:00\n"),
        ("t.toml", "[station]\nlatitude = 0\n[log]\nstart_time = \"2026-03-01T10:20:30Z\"\n"),
    ]);
    let out = |sheet| text(&cruise.run(&["reduce", "K.csv", "--sheet", sheet, "-q"]).stdout);
    let native = out("s.toml");
    let mut lines = native.lines();
    assert!(lines.next().expect("a header").starts_with("time_s,time,"));
    assert!(lines.next().expect("a row").starts_with("0,2026-03-01T10:20:30"), "{native}");
    assert_eq!(native, out("t.toml"));
}

#[test]
fn a_log_that_no_cast_is_about_is_noted() {
    let cruise = two_casts("[station]\nlatitude = 0\n[[cast]]\nlog = \"casts/K07.csv\"\n");
    let run = |log: &str| {
        let output = cruise.run(&["deepest", log, "--sheet", "trip/cruise.toml", "--format", "csv"]);
        assert!(output.status.success());
        text(&output.stderr)
    };
    let note = "no [[cast]] of the sheet is about it; what the sheet says of all casts holds";
    assert!(run("trip/casts/K08.csv").starts_with(&format!("trip/casts/K08.csv: {note}\n")));
    assert!(!run("trip/casts/../casts/K07.csv").contains(note));
}

#[test]
fn one_lost_log_of_the_sheet_does_not_hold_up_the_others() {
    let cruise = two_casts(
        "[station]\nlatitude = 0\n[[cast]]\nlog = \"casts/K09.csv\"\n[[cast]]\nlog = \"casts/K08.csv\"\n",
    );
    let output = cruise.run(&["deepest", "--sheet", "trip/cruise.toml", "--format", "csv"]);
    assert_eq!(output.status.code(), Some(3));
    assert_eq!(text(&output.stdout).lines().count(), 2);
    assert!(text(&output.stderr).contains("trip/casts/K09.csv"));
}

#[test]
fn a_printed_sheet_changes_nothing() {
    let deck = |reading: &str| -> String {
        let rest = placed_log();
        let (head, rows) = rest.split_once('\n').expect("a header");
        let air: String = (0..60).map(|i| format!("{},{reading},12.5,-40.25\n", i - 60)).collect();
        format!("{head}\n{air}{rows}")
    };
    let above_vacuum: String = deck("0").lines().map(|line| counted_from_vacuum(line) + "\n").collect();
    let cruise = Cruise::new(&[
        ("casts/placed.csv", &placed_log()),
        ("casts/plain.csv", &plain_log()),
        ("casts/deck.csv", &deck("0.02").replace("pressure (dbar)", "sea pressure (dbar)")),
        ("air.csv", &above_vacuum),
    ]);
    let names = ["casts/placed.csv", "casts/plain.csv", "casts/deck.csv"];
    let output = cruise.run(&[&["sheet"], &names[..]].concat());
    assert!(output.status.success(), "{}", text(&output.stderr));
    assert_eq!(text(&output.stderr), "");
    let printed = text(&output.stdout);
    std::fs::write(cruise.path("cruise.toml"), &printed).expect("a file");
    let direct = cruise.casts(&[&names[..], &["--lat", "3"]].concat());
    let by_sheet = cruise.casts(&["--sheet", "cruise.toml", "--lat", "3"]);
    assert_eq!(direct, by_sheet);
    // Without the option, each cast has the place of its log.
    let placed = cruise.casts(&["--sheet", "cruise.toml", "casts/placed.csv"]).remove(0);
    assert_eq!((&placed["latitude"], &placed["longitude"]), (&Value::from(12.5), &Value::from(-40.25)));
    assert!(
        printed
            .contains("log = \"casts/deck.csv\"\n# On deck the pressure reads 0.020 dbar before the cast.\n")
    );
    assert!(printed.contains("latitude = 12.5\nlongitude = -40.25\npressure = \"sea\"\n"), "{printed}");
    let air = text(&cruise.run(&["sheet", "air.csv"]).stdout);
    let unwrapped = air.replace("\n# ", " ");
    let words = "On deck the pressure reads 10.125 dbar before the cast: that is the air, so it seems to count from vacuum (\"absolute\").\n";
    assert!(unwrapped.contains(words), "{air}");
    assert!(air.contains("\n#pressure =\n"), "a guess is not filled in");
}

#[test]
fn the_way_a_log_was_read_stands_in_the_printed_sheet() {
    let cruise = Cruise::new(&[("odd.csv", &log("a,b", ""))]);
    let args =
        ["sheet", "odd.csv", "--column", "pressure=b:dbar", "--column", "time=1:s", "--missing", "\\x"];
    let output = cruise.run(&args);
    assert!(output.status.success(), "{}", text(&output.stderr));
    std::fs::write(cruise.path("s.toml"), &output.stdout).expect("a file");
    let by_sheet = cruise.casts(&["--sheet", "s.toml", "--lat", "3"]);
    let direct = cruise.casts(&[
        "odd.csv",
        "--lat",
        "3",
        "--column",
        "pressure=b:dbar",
        "--column",
        "time=1:s",
        "--missing",
        "\\x",
    ]);
    assert_eq!(by_sheet, direct);
}

#[test]
fn a_log_that_cannot_be_read_still_stands_in_the_printed_sheet() {
    let cruise = Cruise::new(&[("odd.csv", &log("a,b", ""))]);
    let output = cruise.run(&["sheet", "odd.csv"]);
    assert_eq!(output.status.code(), Some(3));
    assert!(text(&output.stderr).starts_with("seaplumb: odd.csv"));
    let printed = text(&output.stdout);
    assert!(printed.contains("log = \"odd.csv\"\n# It could not be read yet: odd.csv"), "{printed}");
    assert_eq!(
        cruise.refused(&["sheet", "-"]),
        "seaplumb: standard input ('-') has no name that a sheet could hold\n"
    );
}
