//! WHP-Exchange CTD files: those of `tests/golden`, and the mistakes they may hold.

mod support;

use std::path::{Path, PathBuf};

use seaplumb::log::{Flag, Log, LogError, PressureKind, ReadOptions, RowLines, read, read_bytes};
use support::logs::options;

fn golden(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/golden").join(name)
}

fn log(name: &str) -> Log {
    let mut logs =
        read(&golden(name).to_string_lossy(), &ReadOptions::default()).unwrap_or_else(|e| panic!("{e}"));
    assert_eq!(logs.len(), 1);
    logs.remove(0)
}

/// Equal values, where NaN equals NaN.
fn assert_values(got: &[f64], expected: &[f64], tolerance: f64) {
    assert_eq!(got.len(), expected.len(), "{got:?}");
    for (one, other) in got.iter().zip(expected) {
        let same = one.is_nan() && other.is_nan() || (one - other).abs() <= tolerance;
        assert!(same, "{got:?} is not {expected:?}");
    }
}

const NAN: f64 = f64::NAN;

#[test]
fn a_cast_with_flags_station_and_start() {
    let log = log("whp_cast.csv");
    assert_eq!(log.format, "WHP-Exchange CTD");
    assert_eq!(log.station.as_deref(), Some("12/2"));
    let position = log.position.expect("a position");
    assert_eq!((position.latitude_deg, position.longitude_deg), (-31.52, Some(-176.25)));
    assert_eq!(log.start, Some("2026-03-01T07:27:00Z".parse().expect("a time")));
    assert_eq!(log.time, None);
    assert_eq!(log.pressure_kind, Some(PressureKind::Sea));
    assert_values(&log.pressure.values, &[3.0, 5.0, 7.0, 9.0, 11.0], 0.0);
    use Flag::*;
    // WOCE: 2 acceptable, 7 despiked, 3 questionable, 9 not sampled, 1 not calibrated, 6 interpolated, 4 bad, 5 not
    // reported, 8 of no meaning.
    assert_eq!(log.pressure.flags, Some(vec![Good, Good, Questionable, Good, Good]));
    let temperature = log.temperature.as_ref().expect("temperature");
    assert_values(&temperature.values, &[18.5012, 18.4, 18.3, NAN, 18.1], 0.0);
    assert_eq!(temperature.flags, Some(vec![Good, Good, Questionable, Missing, NotEvaluated]));
    assert_eq!((temperature.name.as_str(), temperature.unit.as_str()), ("CTDTMP", "degC"));
    assert!(temperature.recognised_by.contains("WOCE name"), "{}", temperature.recognised_by);
    let salinity = log.salinity.as_ref().expect("salinity");
    assert_values(&salinity.values, &[35.2501, 35.26, 35.27, NAN, 35.29], 0.0);
    assert_eq!(salinity.flags, Some(vec![Good, NotEvaluated, Bad, Missing, NotEvaluated]));
    assert_eq!(log.unused, ["CTDOXY", "CTDOXY_FLAG_W"]);
    assert_eq!(log.lines, RowLines::Contiguous { first: 16 });
    assert!(log.warnings.is_empty(), "{:?}", log.warnings);
}

#[test]
fn an_older_cast_with_its_temperature_scale_and_conductivity() {
    let log = log("whp_old.csv");
    assert_values(&log.pressure.values, &[10.0, 20.0, NAN], 0.0);
    // IPTS-68 is 1.00024 times ITS-90 (Saunders 1990).
    assert_values(&log.temperature.as_ref().expect("temperature").values, &[10.0, 5.0, NAN], 1e-12);
    assert_values(&log.conductivity.as_ref().expect("conductivity").values, &[40.5, 35.25, NAN], 0.0);
    assert_eq!(log.start, Some("1985-03-01T23:59:00Z".parse().expect("a time")));
    assert_eq!(log.station.as_deref(), Some("7/1"));
}

fn cast() -> String {
    std::fs::read_to_string(golden("whp_cast.csv")).expect("the file")
}

fn read_text(text: &str, columns: &[&str]) -> Result<Log, LogError> {
    read_bytes("cast.csv", text.as_bytes().to_vec(), &options(columns)).map(|mut logs| logs.remove(0))
}

/// Replaces one place of the good file; it must be there.
fn with(from: &str, to: &str) -> String {
    let cast = cast();
    assert!(cast.contains(from), "{from}");
    cast.replacen(from, to, 1)
}

/// What is wrong, line, column, words of the message.
type Case<'a> = (String, Option<u64>, Option<usize>, &'a [&'a str]);

#[test]
fn mistakes_are_shown_where_they_are() {
    let cases: &[Case<'_>] = &[
        (
            with("HEADERS = 10", "HEADERS = 9"),
            Some(4),
            Some(18),
            &["says '9'", "10 lines", "NUMBER_HEADERS = 10"],
        ),
        (with("HEADERS = 10", "HEADERS = ten"), Some(4), Some(18), &["says 'ten'"]),
        (with("NUMBER_HEADERS = 10\n", ""), Some(4), None, &["expected NUMBER_HEADERS = n"]),
        (with("-31.5200", "31 31.2 S"), Some(11), Some(12), &["'31 31.2 S'", "decimal degrees"]),
        (
            with("DBAR,,", "FATHOM,,"),
            Some(15),
            Some(1),
            &["'FATHOM'", "dbar", "--column pressure=CTDPRS:dbar"],
        ),
        (with("ITS-90", "DEG C"), Some(15), Some(7), &["scale", "--column temperature=CTDTMP:IPTS-68"]),
        (with("ITS-90", ""), Some(15), None, &["unit of the temperature", "CTDTMP"]),
        (with("PSS-78", "G/KG"), Some(15), Some(15), &["'G/KG'", "salinity"]),
        (with("UMOL/KG,", "UMOL/KG"), Some(15), None, &["7 cells", "names 8"]),
        (
            with("DBAR,,ITS-90,,PSS-78,,UMOL/KG,\n", ""),
            Some(15),
            Some(6),
            &["found a number", "DBAR,,ITS-90"],
        ),
        (with("228.5,2", "228.5"), Some(20), None, &["7 of the 8 cells"]),
        (with("228.5,2", "228.5,2,7"), Some(20), None, &["more than the 8 cells"]),
        (with("18.3000", "18.3O00"), Some(18), Some(14), &["'18.3O00'", "CTDTMP"]),
        (with("18.3000,3", "18.3000,0"), Some(18), Some(22), &["WOCE flag"]),
        (with("CTDPRS,", "CTDXXX,"), Some(14), None, &["no column looks like pressure"]),
        (cast().split("CTDPRS").next().expect("a head").to_string(), None, None, &["ends before the names"]),
        (with("CTD,2026", "BOTTLE,2026"), None, None, &["bottle file", "CTD file"]),
    ];
    for (text, line, column, words) in cases {
        let error = read_text(text, &[]).expect_err(text);
        let place = error.place.as_ref();
        assert_eq!(place.map(|p| p.line), *line, "{error}");
        if let Some(column) = column {
            assert_eq!(place.and_then(|p| p.column), Some(*column), "{error}");
        }
        for word in *words {
            assert!(error.to_string().contains(word), "expected '{word}' in\n{error}");
        }
    }
}

#[test]
fn a_file_without_rows_says_so() {
    let rows: String = cast().lines().take(15).map(|line| format!("{line}\n")).collect();
    let error = read_text(&(rows + "END_DATA\n"), &[]).expect_err("no rows");
    assert!(error.problem.contains("no row"), "{error}");
}

#[test]
fn what_can_be_lived_with_is_a_warning() {
    let warned = |text: &str| {
        let log = read_text(text, &[]).unwrap_or_else(|e| panic!("{e}"));
        let keys: Vec<&str> = log.warnings.iter().map(|w| w.key).collect();
        (keys.join(" "), log)
    };
    let (keys, log) = warned(&with("END_DATA\n", ""));
    assert_eq!((keys.as_str(), log.len()), ("end_data_missing", 5));
    // Cut within the last row: the row goes too.
    let text = cast();
    let (keys, log) = warned(&text[..text.find("35.2900").expect("the last row")]);
    assert_eq!((keys.as_str(), log.len()), ("end_data_missing last_row_incomplete", 4));
    let (keys, _) = warned(&with("END_DATA\n", "END_DATA\n\nCTD,20260302XXXINV\n"));
    assert_eq!(keys, "lines_after_end");
    let (keys, log) = warned(&with("LATITUDE = -31.5200\n", "").replace("= 10", "= 9"));
    assert_eq!((keys.as_str(), log.position), ("latitude_missing", None));
    let (keys, log) = warned(&with("LATITUDE = -31.5200", "LATITUDE = -91"));
    assert_eq!((keys.as_str(), log.position), ("position_out_of_range", None));
    let (keys, log) = warned(&with("DATE = 20260301", "DATE = 03012026"));
    assert_eq!((keys.as_str(), log.start), ("start_not_read", None));
}

#[test]
fn the_user_settles_the_temperature_scale() {
    let text = with("ITS-90", "DEG C");
    let log = read_text(&text, &["temperature=CTDTMP:IPTS-68"]).expect("a log");
    let first = log.temperature.expect("temperature").values[0];
    assert!((first - 18.5012 / 1.00024).abs() < 1e-12, "{first}");
}

#[test]
fn what_a_spreadsheet_does_to_a_file_is_undone() {
    let commas: String = cast()
        .lines()
        .map(|line| {
            let missing = 7_usize.saturating_sub(line.matches(',').count());
            format!("{line}{}\r\n", ",".repeat(missing))
        })
        .collect();
    let text = format!("\u{feff}{commas}").replace("TIME = 0727", "TIME = 727");
    let log = read_text(&text, &[]).unwrap_or_else(|e| panic!("{e}"));
    assert_eq!((log.len(), log.station.as_deref()), (5, Some("12/2")));
    assert_eq!(log.position.and_then(|p| p.longitude_deg), Some(-176.25));
    assert_eq!(log.start, Some("2026-03-01T07:27:00Z".parse().expect("a time")));
    assert!(log.warnings.is_empty(), "{:?}", log.warnings);
}

#[test]
fn a_table_with_a_column_called_ctd_is_delimited_text() {
    let log = read_text("CTD,pressure [dbar]\n1,5.5\n1,6.5\n", &[]).unwrap_or_else(|e| panic!("{e}"));
    assert_eq!((log.format.as_str(), log.len()), ("delimited text, comma", 2));
}
