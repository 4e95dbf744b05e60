//! Delimited text logs: every dialect gives the same columns.

mod support;

use seaplumb::log::{Flag, Log, PressureKind, ReadOptions, RowLines};
use support::logs::{one, options, read, read_with, values};

/// The dive that every dialect below writes down.
fn assert_tiny_dive(log: &Log, what: &str) {
    assert_eq!(log.pressure.values, [0.5, 10.25, 20.125, 10.5], "{what}");
    assert_eq!(values(&log.conductivity), [42.5, 42.25, 42.125, 42.75], "{what}");
    assert_eq!(values(&log.temperature), [15.5, 14.25, -1.125, 14.5], "{what}");
    let time = log.time.as_ref().unwrap_or_else(|| panic!("{what}: no time"));
    assert_eq!(time.elapsed_s, [0.0, 0.5, 1.0, 1.5], "{what}");
    assert!(log.unused.is_empty(), "{what}: {:?}", log.unused);
}

const COMMA: &str = "time_s,pressure_dbar,conductivity_mS_cm,temperature_degC\n\
                     0.0,0.5,42.5,15.5\n0.5,10.25,42.25,14.25\n1.0,20.125,42.125,-1.125\n1.5,10.5,42.75,14.5\n";

fn rows(separator: &str, comma: bool) -> String {
    let rows = COMMA.split_once('\n').expect("a header").1;
    let rows = rows.replace(',', "\u{1}");
    let rows = if comma { rows.replace('.', ",") } else { rows };
    rows.replace('\u{1}', separator)
}

#[test]
fn every_dialect_gives_the_same_columns() {
    let head = |separator: &str| {
        ["time [s]", "pressure [dbar]", "conductivity [mS/cm]", "temperature [°C]"].join(separator)
    };
    let plain = ["time", "pressure", "conductivity", "temperature"];
    let units = ["s", "dbar", "mS/cm", "degC"];
    let mut dialects: Vec<(String, Vec<u8>)> = Vec::new();
    let mut add = |what: &str, text: String| dialects.push((what.to_string(), text.into_bytes()));
    for (name, separator) in [("comma", ","), ("semicolon", ";"), ("tab", "\t"), ("blanks", "   ")] {
        for comma in [false, true] {
            if separator == "," && comma {
                continue;
            }
            let rows = rows(separator, comma);
            let what = format!("{name}, decimal comma {comma}");
            add(&format!("{what}, units in brackets"), format!("{}\n{rows}", head(separator)));
            add(
                &format!("{what}, units on their own line"),
                format!("{}\n{}\n{rows}", plain.join(separator), units.join(separator)),
            );
            add(
                &format!("{what}, bracketed units on their own line"),
                format!("{}\n[{}]\n{rows}", plain.join(separator), units.join(&format!("]{separator}["))),
            );
            add(
                &format!("{what}, preamble and comments"),
                format!(
                    "Log of a dive\nSensor 12 of 14\n# pressure is absolute\n\n{}\n# begin\n{rows}",
                    head(separator)
                ),
            );
            add(
                &format!("{what}, header in a comment"),
                format!("# made by hand\n# {}\n{rows}", head(separator)),
            );
        }
    }
    add("underscores", COMMA.to_string());
    add(
        "slashes",
        COMMA.replacen(
            "time_s,pressure_dbar,conductivity_mS_cm,temperature_degC",
            "time/s,pressure/dbar,conductivity/mS/cm,temperature/degC",
            1,
        ),
    );
    add(
        "commas in quoted names",
        format!(
            "\"time, s\",\"pressure, dbar\",\"conductivity, mS/cm\",\"temperature, degC\"\n{}",
            rows(",", false)
        ),
    );
    add(
        "quoted cells",
        format!(
            "{}\n{}",
            head(","),
            rows("\",\"", false)
                .replace('\n', "\"\n")
                .split('\n')
                .map(|l| if l.is_empty() { String::new() } else { format!("\"{l}\n") })
                .collect::<String>()
        ),
    );
    add("carriage returns", COMMA.replace('\n', "\r\n"));
    add("lone carriage returns", COMMA.replace('\n', "\r"));
    add("byte order mark", format!("\u{feff}{COMMA}"));
    add("blanks around cells", COMMA.replace(',', " , "));
    add("empty lines", COMMA.replace('\n', "\n\n"));
    add("a comment among the rows", COMMA.replace("\n1.0,", "\n# half way\n1.0,"));
    add("separators at the end of the rows", COMMA.replace("5\n", "5,\n"));
    add("no line end at the end", COMMA.trim_end().to_string());
    add(
        "blanks in fixed columns",
        format!(
            "  time   pressure  conductivity  temperature\n     s       dbar         mS/cm         degC\n{}",
            rows("      ", false)
        ),
    );
    add(
        "names with blanks",
        format!(
            "elapsed time [s]  water pressure [dbar]  conductivity [mS/cm]  temperature [deg C]\n{}",
            rows("  ", false)
        ),
    );
    add("codes", format!("TIME [s],PRES [dbar],CNDC [mS/cm],TEMP [degree_Celsius]\n{}", rows(",", false)));
    dialects.push((
        "Latin-1".into(),
        format!("{}\n{}", head(","), rows(",", false)).chars().map(|c| c as u8).collect(),
    ));
    let utf16 = |text: &str| text.encode_utf16().flat_map(u16::to_le_bytes).collect::<Vec<u8>>();
    dialects.push(("UTF-16".into(), utf16(&format!("\u{feff}{}\n{}", head("\t"), rows("\t", true)))));
    let mut gz = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::default());
    std::io::Write::write_all(&mut gz, COMMA.as_bytes()).expect("in memory");
    dialects.push(("gzip".into(), gz.finish().expect("in memory")));
    assert!(dialects.len() > 45);
    for (what, bytes) in dialects {
        let logs =
            read(&bytes).unwrap_or_else(|e| panic!("{what}: {e}\n{}", String::from_utf8_lossy(&bytes)));
        assert_tiny_dive(&logs[0], &what);
    }
}

#[test]
fn columns_come_in_any_order_and_others_are_listed() {
    let log = one("oxygen,TEMP [K],note,PRES [MPa],CNDC [S/m]\n7,283.15,x y,0.5,4.2\n7,284.15,,1,4.25\n");
    assert_eq!(log.pressure.values, [50.0, 100.0]);
    assert_eq!(values(&log.temperature), [10.0, 11.0]);
    assert_eq!(values(&log.conductivity), [42.0, 42.5]);
    assert_eq!(log.unused, ["oxygen", "note"]);
    assert_eq!((log.pressure.name.as_str(), log.pressure.unit.as_str()), ("PRES [MPa]", "MPa"));
    assert_eq!(log.pressure.recognised_by, "BODC/OceanSITES code, unit in brackets");
    assert!(log.time.is_none() && log.salinity.is_none() && log.start.is_none());
}

#[test]
fn a_log_may_hold_pressure_alone() {
    assert_eq!(one("pressure_dbar\n1\n2.5\n").pressure.values, [1.0, 2.5]);
}

#[test]
fn other_roles_are_read_with_their_units() {
    let log = one(
        "p [psia],S,altitude [m],pitch [rad],roll [deg],lat,lon,qc\n14.5,35,100,0,1,-31.5,179.5,1\n15,36,90,0.1,2,-31.5,179.5,4\n16,36,90,0.1,2,-31.6,179.5,0\n",
    );
    assert_eq!(log.pressure_kind, Some(PressureKind::Absolute));
    assert_eq!(values(&log.altitude), [100.0, 90.0, 90.0]);
    assert!((values(&log.pitch)[1] - 5.729_577_951_308_232).abs() < 1e-12);
    assert_eq!(values(&log.roll), [1.0, 2.0, 2.0]);
    let position = log.position.expect("a position");
    assert_eq!((position.latitude_deg, position.longitude_deg), (-31.5, Some(179.5)));
    assert_eq!(log.flags, Some(vec![Flag::Good, Flag::Bad, Flag::NotEvaluated]));
    assert_eq!(log.unused, ["S"]);
    assert!(log.warnings.iter().any(|w| w.key == "flag_scheme_assumed"), "{:?}", log.warnings);
}

#[test]
fn an_optional_column_without_a_unit_is_left_aside_with_a_warning() {
    let log = one("pressure_dbar,pitch\n1,2\n3,4\n");
    assert!(log.pitch.is_none());
    assert_eq!(log.unused, ["pitch"]);
    assert_eq!(log.warnings[0].key, "column_left_aside");
    assert!(log.warnings[0].action.contains("--column pitch=pitch:degree"), "{}", log.warnings[0]);
}

#[test]
fn flags_of_single_quantities() {
    let log = one("CTDPRS [dbar],CTDPRS_FLAG,salinity,salinity_qc\n1,1,35,3\n2,9,36,1\n");
    assert_eq!(log.pressure.flags, Some(vec![Flag::Good, Flag::Missing]));
    assert_eq!(log.salinity.expect("salinity").flags, Some(vec![Flag::Questionable, Flag::Good]));
    assert_eq!(log.pressure_kind, Some(PressureKind::Sea));
}

#[test]
fn missing_values_are_nan() {
    let log =
        one("pressure_dbar,temperature_degC\n1,\n2,NaN\n3,-999\n4,-9999.0\n5,1e35\n-1.0e35,9.96921E36\n,5\n");
    assert!(values(&log.temperature)[..6].iter().all(|v| v.is_nan()));
    assert_eq!(log.pressure.values[..5], [1.0, 2.0, 3.0, 4.0, 5.0]);
    assert!(log.pressure.values[5].is_nan() && log.pressure.values[6].is_nan());
    assert_eq!(log.len(), 7);
    let options = ReadOptions { columns: vec![], missing: vec!["-88".into(), "bad".into()] };
    let log = &read_with("pressure_dbar\n1\n-88.0\nbad\n", &options).expect("marks are known")[0];
    assert!(log.pressure.values[1].is_nan() && log.pressure.values[2].is_nan());
    let options = ReadOptions { columns: vec![], missing: vec!["-99,5".into()] };
    let log = &read_with("pressure_dbar;qc\n1,5;1\n-99,5;1\n-999;1\n", &options).expect("marks are known")[0];
    assert_eq!(log.pressure.values[0], 1.5);
    assert!(log.pressure.values[1].is_nan() && log.pressure.values[2].is_nan());
}

#[test]
fn lines_of_the_samples_are_kept() {
    let log = one("about\npressure_dbar\n1\n2\n");
    assert_eq!(log.lines, RowLines::Contiguous { first: 3 });
    let log = one("pressure_dbar\n1\n\n2\n# note\n3\n");
    assert_eq!(log.lines, RowLines::Each(vec![2, 4, 6]));
    assert_eq!(log.line_of(2), Some(6));
}

// --- times ---------------------------------------------------------------------------------------

fn timed(header: &str, cells: [&str; 3]) -> Log {
    one(format!("{header},pressure_dbar\n{},1\n{},2\n{},3\n", cells[0], cells[1], cells[2]))
}

#[test]
fn absolute_times() {
    let start = "2026-03-01T10:20:30Z".parse::<jiff::Timestamp>().expect("a time");
    for (header, cells) in [
        ("time", ["2026-03-01T10:20:30Z", "2026-03-01T10:20:30.25Z", "2026-03-01T10:20:32Z"]),
        ("Timestamp (UTC)", ["2026-03-01 10:20:30", "2026-03-01 10:20:30.25", "2026-03-01 10:20:32"]),
        (
            "datetime",
            ["2026-03-01T12:20:30+02:00", "2026-03-01T12:20:30.25+02:00", "2026-03-01T12:20:32+02:00"],
        ),
        ("date", ["2026-03-01T10:20:30Z", "2026-03-01T10:20:30.25Z", "2026-03-01T10:20:32Z"]),
        ("date,time", ["2026-03-01,10:20:30", "2026-03-01,10:20:30.25", "2026-03-01,10:20:32"]),
        ("time,date", ["102030,20260301", "102030.25,20260301", "102032,20260301"]),
        ("time [seconds since 2026-03-01 00:00:00]", ["37230", "37230.25", "37232"]),
        ("elapsed_s,time", ["7,2026-03-01T10:20:30Z", "7.25,2026-03-01T10:20:30Z", "9,2026-03-01T10:20:32Z"]),
    ] {
        let log = timed(header, cells);
        assert_eq!(log.start, Some(start), "{header}");
        let time = log.time.expect("a time");
        assert_eq!(time.elapsed_s, [0.0, 0.25, 2.0], "{header}");
        assert_eq!(time.start, Some(start), "{header}");
        assert!(log.unused.is_empty(), "{header}: {:?}", log.unused);
    }
}

#[test]
fn times_without_an_offset_are_utc_and_a_warning_says_so() {
    let warned = |log: &Log| log.warnings.iter().any(|w| w.key == "time_assumed_utc");
    let log = timed("time", ["2026-03-01T10:20:30", "2026-03-01T10:20:31", "2026-03-01T10:20:32"]);
    assert!(warned(&log));
    let log = timed("time", ["2026-03-01T10:20:30Z", "2026-03-01T10:20:31Z", "2026-03-01T10:20:32Z"]);
    assert!(!warned(&log));
}

#[test]
fn elapsed_times_and_clocks() {
    for (header, cells, expected) in [
        ("time_min", ["1", "2", "4"], [0.0, 60.0, 180.0]),
        ("elapsed [h]", ["0", "0.5", "1"], [0.0, 1800.0, 3600.0]),
        ("seconds", ["5", "6", "8"], [0.0, 1.0, 3.0]),
        ("time", ["23:59:58", "00:00:01", "00:00:02.5"], [0.0, 3.0, 4.5]),
        ("time_s", ["9", "5", "7"], [0.0, -4.0, -2.0]),
    ] {
        let log = timed(header, cells);
        let time = log.time.expect("a time");
        assert_eq!(time.elapsed_s, expected, "{header}");
        assert_eq!(time.start, None, "{header}");
    }
}

#[test]
fn a_stamp_between_blanks_is_one_time() {
    let log = one("pressure_dbar time temp_degC\n1 2026-03-01 10:00:00 5\n2 2026-03-01 10:00:01.5 6\n");
    assert_eq!(log.pressure.values, [1.0, 2.0]);
    assert_eq!(values(&log.temperature), [5.0, 6.0]);
    assert_eq!(log.time.as_ref().expect("a time").elapsed_s, [0.0, 1.5]);
    assert_eq!(log.start, "2026-03-01T10:00:00Z".parse().ok());
    assert!(log.unused.is_empty());
}

// --- the user's word -----------------------------------------------------------------------------

#[test]
fn columns_settled_by_the_user() {
    let text = "a,b,pressure\n1,10,100\n2,11,101\n";
    let log = &read_with(text, &options(&["pressure=b:bar", "temperature=1:degC"])).expect("settled")[0];
    assert_eq!(log.pressure.values, [100.0, 110.0]);
    assert_eq!(values(&log.temperature), [1.0, 2.0]);
    assert_eq!(log.unused, ["pressure"]);
    assert_eq!(log.pressure.recognised_by, "option --column");
}

#[test]
fn a_log_without_a_header_is_read_by_numbers() {
    let text = "0,0.5,15.5\n1,10.25,14.25\n";
    let log = &read_with(text, &options(&["pressure=2:dbar", "time=1:s"])).expect("settled")[0];
    assert_eq!(log.pressure.values, [0.5, 10.25]);
    assert_eq!(log.time.as_ref().expect("a time").elapsed_s, [0.0, 1.0]);
    assert_eq!(log.lines, RowLines::Contiguous { first: 1 });
}

// --- files ---------------------------------------------------------------------------------------

#[test]
fn files_that_cannot_be_read() {
    let read =
        |path: &str| seaplumb::log::read(path, &ReadOptions::default()).expect_err("an error").to_string();
    assert!(read("/no/such/log.csv").contains("/no/such/log.csv: there is no such file"));
    let folder = tempfile::tempdir().expect("a folder");
    assert!(read(&folder.path().to_string_lossy()).contains("folder"));
    let mut gz = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::default());
    std::io::Write::write_all(&mut gz, COMMA.as_bytes()).expect("in memory");
    let mut gz = gz.finish().expect("in memory");
    gz.truncate(gz.len() - 12);
    let path = folder.path().join("cut.gz");
    std::fs::write(&path, gz).expect("written");
    assert!(read(&path.to_string_lossy()).contains("gzip file is cut short"));
    let path = folder.path().join("dive.dat");
    std::fs::write(&path, COMMA).expect("written");
    let logs = seaplumb::log::read(&path.to_string_lossy(), &ReadOptions::default()).expect("a log");
    assert_tiny_dive(&logs[0], "a file");
    assert_eq!(logs[0].source, path.to_string_lossy());
}
