//! NetCDF logs: the files of `tests/golden`, and real casts where they are at hand.

mod support;

use std::path::{Path, PathBuf};

use seaplumb::log::{Flag, Log, PressureKind, ReadOptions, RowLines, read, read_bytes};

fn golden(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/golden").join(name)
}

fn logs(name: &str) -> Vec<Log> {
    read(&golden(name).to_string_lossy(), &ReadOptions::default()).unwrap_or_else(|e| panic!("{e}"))
}

fn with(name: &str, columns: &[&str]) -> Result<Vec<Log>, seaplumb::log::LogError> {
    let columns = columns.iter().map(|c| c.parse().expect("a choice")).collect();
    read(&golden(name).to_string_lossy(), &ReadOptions { columns, missing: vec![] })
}

/// Equal values, where NaN equals NaN.
fn assert_values(got: &[f64], expected: &[f64], tolerance: f64) {
    assert_eq!(got.len(), expected.len(), "{got:?}");
    for (got_one, expected_one) in got.iter().zip(expected) {
        let same = got_one.is_nan() && expected_one.is_nan() || (got_one - expected_one).abs() <= tolerance;
        assert!(same, "{got:?} is not {expected:?}");
    }
}

const NAN: f64 = f64::NAN;

fn time(text: &str) -> Option<jiff::Timestamp> {
    Some(text.parse().expect("a time"))
}

#[test]
fn a_packed_series_with_names_of_cf() {
    let log = &logs("cf_packed.nc")[0];
    assert_eq!(log.format, "NetCDF classic");
    // Unpacking multiplies by 0.1, which no double holds exactly.
    assert_values(&log.pressure.values, &[0.0, 100.0, 1000.0, 1025.0, 4276.7, NAN], 1e-9);
    assert_eq!(log.pressure_kind, Some(PressureKind::Sea));
    use Flag::*;
    assert_eq!(log.pressure.flags, Some(vec![Good, NotEvaluated, Questionable, Bad, Missing, Missing]));
    let temperature = log.temperature.as_ref().expect("temperature");
    assert_values(&temperature.values, &[10.0, 11.0, -1.5, NAN, 12.25, NAN], 0.0);
    assert_eq!(temperature.flags, None);
    assert_values(
        &log.conductivity.as_ref().expect("conductivity").values,
        &[42.0, 42.5, NAN, 40.0, NAN, 45.0],
        0.0,
    );
    let axis = log.time.as_ref().expect("times");
    assert_values(&axis.elapsed_s, &[0.0, 30.0, 60.0, 90.0, 120.0, 150.0], 0.0);
    assert_eq!((axis.start, log.start), (time("2026-03-01T11:00:00Z"), time("2026-03-01T11:00:00Z")));
    let position = log.position.expect("a position");
    assert_eq!((position.latitude_deg, position.longitude_deg), (-31.5, Some(-176.25)));
    assert_eq!(log.unused, ["other"]);
    assert_eq!(log.lines, RowLines::None);
    assert!(log.warnings.is_empty(), "{:?}", log.warnings);
}

#[test]
fn a_table_of_profiles_gives_one_log_each() {
    let logs = logs("cf_profiles.nc");
    assert_eq!(logs.len(), 2);
    use Flag::*;
    let (one, two) = (&logs[0], &logs[1]);
    assert_eq!(one.format, "NetCDF-4");
    assert!(one.source.ends_with("cf_profiles.nc#1") && two.source.ends_with("cf_profiles.nc#2"));
    // The padding of the shorter profile is no sample.
    assert_values(&one.pressure.values, &[5.0, 10.0, 20.0], 0.0);
    assert_values(&two.pressure.values, &[6.0, 12.0, 24.0, 48.0], 0.0);
    assert_values(&one.temperature.as_ref().expect("temperature").values, &[20.5, 19.5, 18.25], 0.0);
    assert_values(&two.temperature.as_ref().expect("temperature").values, &[21.0, NAN, 18.5, 17.0], 0.0);
    assert_values(&two.salinity.as_ref().expect("salinity").values, &[36.0, 35.75, 35.5, 35.25], 0.0);
    assert_eq!(one.pressure.flags, Some(vec![Good, Good, Good]));
    assert_eq!(two.pressure.flags, Some(vec![Good, Questionable, Bad, Missing]));
    assert_eq!(one.temperature.as_ref().expect("t").flags, Some(vec![Good, NotEvaluated, NotEvaluated]));
    assert_eq!(two.temperature.as_ref().expect("t").flags, Some(vec![NotEvaluated, Good, Good, Good]));
    assert_eq!(two.salinity.as_ref().expect("s").flags, None);
    assert_eq!((one.start, two.start), (time("2026-03-02T12:00:00Z"), time("2026-03-12T06:00:00Z")));
    assert!(one.time.is_none() && two.time.is_none());
    assert_eq!(one.station.as_deref(), Some("float-1/7"));
    assert_eq!(two.position.map(|p| (p.latitude_deg, p.longitude_deg)), Some((11.5, Some(-41.0))));
    // "equals 0 at sea-level"
    assert_eq!(one.pressure_kind, Some(PressureKind::Sea));
}

#[test]
fn the_layout_of_the_hydrographic_archives() {
    let log = &logs("woce_cast.nc")[0];
    use Flag::*;
    assert_values(&log.pressure.values, &[4.0, 6.0, 8.0, 10.0, 12.0], 0.0);
    let temperature = log.temperature.as_ref().expect("temperature");
    assert_values(&temperature.values, &[18.5, 18.25, 18.0, 17.75, NAN], 0.0);
    assert_eq!(temperature.unit, "degC");
    assert_eq!(temperature.flags, Some(vec![Good, Good, Questionable, Bad, Missing]));
    let salinity = log.salinity.as_ref().expect("salinity");
    assert_values(&salinity.values, &[35.25, 35.5, 35.75, 36.0, 36.25], 0.0);
    assert_eq!(salinity.flags, Some(vec![NotEvaluated, NotEvaluated, NotEvaluated, Missing, Good]));
    assert_eq!(log.pressure_kind, Some(PressureKind::Sea));
    assert_eq!(log.station.as_deref(), Some("12/3"));
    assert_eq!(log.start, time("2026-03-01T07:27:00Z"));
    assert!(log.time.is_none());
    assert_eq!(log.position.map(|p| (p.latitude_deg, p.longitude_deg)), Some((42.5, Some(145.25))));
    assert!(log.unused.iter().any(|name| name == "oxygen"));
}

#[test]
fn profiles_one_behind_the_other() {
    let logs = logs("cf_ragged.nc");
    assert_eq!(logs.len(), 2);
    assert_eq!(logs[0].format, "NetCDF 64-bit offset");
    assert_values(&logs[0].pressure.values, &[100.0, 200.0], 0.0);
    assert_values(&logs[1].pressure.values, &[300.0, 400.0, 500.0], 0.0);
    assert_eq!(logs[1].station.as_deref(), Some("102"));
    assert_eq!(logs[1].start, time("2026-03-01T01:00:00Z"));
    assert_eq!(logs[1].position.map(|p| (p.latitude_deg, p.longitude_deg)), Some((2.5, None)));
    // The CF name alone does not say whether the air is in it.
    assert_eq!(logs[0].pressure_kind, None);
}

#[test]
fn a_series_by_a_single_depth_is_one_log() {
    let logs = logs("moored.nc");
    assert_eq!(logs.len(), 1);
    let log = &logs[0];
    assert_values(&log.pressure.values, &[100.5, 101.5, 99.5], 0.0);
    assert_values(&log.conductivity.as_ref().expect("conductivity").values, &[40.5, 41.5, 42.5], 0.0);
    // OceanSITES: 2 is "probably good".
    assert_eq!(log.pressure.flags, Some(vec![Flag::Good, Flag::Good, Flag::NotEvaluated]));
    let axis = log.time.as_ref().expect("times");
    // Days since 1950 as doubles are good to 3 ten-millionths of a second.
    assert_values(&axis.elapsed_s, &[0.0, 3600.0, 7200.0], 1e-6);
    assert_eq!(axis.start, time("2026-03-02T12:00:00Z"));
}

#[test]
fn the_user_may_name_variables_and_units() {
    let log = &with("woce_cast.nc", &["pressure=oxygen:MPa", "flag=salinity_QC"]).expect("a log")[0];
    assert_values(&log.pressure.values, &[0.0, 100.0, 200.0, 300.0, 400.0], 0.0);
    assert_eq!(log.pressure.recognised_by, "option --column");
    use Flag::*;
    assert_eq!(log.flags, Some(vec![NotEvaluated, NotEvaluated, NotEvaluated, Missing, Good]));
    let error = with("woce_cast.nc", &["pressure=prs:dbar"]).expect_err("no such variable");
    assert!(
        error.problem.contains("no such variable") && error.remedy.expect("a remedy").contains("'pressure'")
    );
    let error = with("woce_cast.nc", &["temperature=latitude:degC"]).expect_err("not along the samples");
    assert!(error.to_string().contains("does not run along the samples"), "{error}");
    assert!(error.to_string().contains("--column temperature=VARIABLE:degC"), "{error}");
}

#[test]
fn units_that_cannot_be_told_are_errors() {
    let mut bytes = std::fs::read(golden("woce_cast.nc")).expect("the file");
    let at = bytes.windows(7).position(|w| w == b"decibar").expect("the unit");
    bytes[at..at + 7].copy_from_slice(b"fathoms");
    let error = read_bytes("cast.nc", bytes, &ReadOptions::default()).expect_err("unknown unit").to_string();
    assert!(
        error.starts_with("cast.nc: 'fathoms' is not a known unit of pressure (variable 'pressure')"),
        "{error}"
    );
    assert!(error.contains("--column pressure=pressure:dbar"), "{error}");
}

#[test]
fn damaged_files_are_errors_that_say_so() {
    for name in ["cf_packed.nc", "cf_profiles.nc", "woce_cast.nc", "moored.nc"] {
        let bytes = std::fs::read(golden(name)).expect("the file");
        for part in [3, 2] {
            let cut = bytes[..bytes.len() / part].to_vec();
            let error = read_bytes(name, cut, &ReadOptions::default()).expect_err("cut short").to_string();
            assert!(error.contains("damaged or cut short"), "{error}");
        }
        let mut head = bytes[..8].to_vec();
        head.resize(200, 0xff);
        assert!(read_bytes(name, head, &ReadOptions::default()).is_err());
    }
}

#[test]
fn real_casts_are_read_with_position_start_station_and_flags() {
    let Some(folder) = support::shared_data("data/cruise-casts") else { return };
    let entries = std::fs::read_dir(&folder).expect("the folder");
    let mut paths: Vec<PathBuf> = entries.filter_map(|entry| Some(entry.ok()?.path())).collect();
    paths.retain(|path| path.extension().is_some_and(|e| e == "nc"));
    paths.sort();
    assert!(!paths.is_empty(), "no cast in {}", folder.display());
    let mut deepest = 0.0_f64;
    for path in &paths {
        let logs = read(&path.to_string_lossy(), &ReadOptions::default()).unwrap_or_else(|e| panic!("{e}"));
        assert_eq!(logs.len(), 1);
        let log = &logs[0];
        let what = path.display();
        // The file name holds the station: EXPOCODE_station_cast_ctd.nc.
        let name = path.file_stem().and_then(|s| s.to_str()).expect("a name");
        let parts: Vec<&str> = name.split('_').collect();
        let station = format!("{}/{}", parts[1].trim_start_matches('0'), parts[2].trim_start_matches('0'));
        assert_eq!(log.station.as_deref(), Some(station.as_str()), "{what}");
        let start = log.start.expect("a start").to_string();
        assert!(start.starts_with("2014-"), "{what}: {start}");
        assert!(log.position.is_some_and(|p| p.longitude_deg.is_some()), "{what}");
        assert_eq!(log.pressure_kind, Some(PressureKind::Sea), "{what}");
        for channel in [Some(&log.pressure), log.temperature.as_ref(), log.salinity.as_ref()] {
            let channel = channel.unwrap_or_else(|| panic!("{what}: a quantity is missing"));
            assert_eq!(channel.values.len(), log.len(), "{what}");
            assert_eq!(channel.flags.as_ref().map(Vec::len), Some(log.len()), "{what}");
        }
        assert!(log.pressure.values.windows(2).all(|pair| pair[1] > pair[0]), "{what}");
        assert!(log.warnings.is_empty(), "{what}: {:?}", log.warnings);
        deepest = log.pressure.values.iter().copied().fold(deepest, f64::max);
    }
    // The note beside the casts says that they go to 6 502 dbar.
    assert_eq!(deepest, 6502.0);
}
