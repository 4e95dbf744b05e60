//! Zip archives of logs.

use std::path::Path;

use seaplumb::log::{Log, LogError, ReadOptions, read, read_bytes, read_each};

fn golden(name: &str) -> String {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/golden").join(name).display().to_string()
}

fn logs(name: &str) -> Vec<Log> {
    read(&golden(name), &ReadOptions::default()).unwrap_or_else(|e| panic!("{e}"))
}

fn refused(name: &str, bytes: &[u8]) -> LogError {
    read_bytes(name, bytes.to_vec(), &ReadOptions::default()).expect_err(name)
}

/// An archive of stored entries, as the format describes it (APPNOTE 6.3, sections 4.3.7, 4.3.12, 4.3.16).
fn stored(entries: &[(&str, &[u8])], flags: u16, method: u16) -> Vec<u8> {
    let (mut archive, mut directory) = (Vec::new(), Vec::new());
    for (name, data) in entries {
        let mut crc = flate2::Crc::new();
        crc.update(data);
        let size = (data.len() as u32).to_le_bytes();
        let common = [
            &[20, 0][..],
            &flags.to_le_bytes(),
            &method.to_le_bytes(),
            &[0; 4],
            &crc.sum().to_le_bytes(),
            &size,
            &size,
            &(name.len() as u16).to_le_bytes(),
            &[0, 0],
        ]
        .concat();
        let offset = (archive.len() as u32).to_le_bytes();
        archive.extend([b"PK\x03\x04", &common[..], name.as_bytes(), data].concat());
        directory.extend([b"PK\x01\x02", &[20, 0][..], &common, &[0; 10], &offset, name.as_bytes()].concat());
    }
    let count = (entries.len() as u16).to_le_bytes();
    let (size, at) = ((directory.len() as u32).to_le_bytes(), (archive.len() as u32).to_le_bytes());
    [archive, directory, [b"PK\x05\x06", &[0; 4][..], &count, &count, &size, &at, &[0, 0]].concat()].concat()
}

const TEXT: &[u8] = b"time_s,pressure_dbar\n0,1.5\n1,2.5\n";

#[test]
fn every_log_of_an_archive_is_read_and_named() {
    let logs = logs("casts.zip");
    let archive = golden("casts.zip");
    let named: Vec<(&str, &str, usize)> = logs
        .iter()
        .map(|log| {
            let entry = log.source.strip_prefix(&archive).and_then(|rest| rest.strip_prefix('#'));
            (entry.expect("file.zip#entry"), log.format.as_str(), log.len())
        })
        .collect();
    assert_eq!(
        named,
        [
            ("casts/x_00012_00002_ct1.csv", "WHP-Exchange CTD", 5),
            ("casts/x_00013_00002_ct1.csv", "WHP-Exchange CTD", 5),
            ("text.csv.gz", "delimited text, comma", 3),
            ("woce_cast.nc", "NetCDF classic", 5),
        ]
    );
    assert_eq!(logs[1].station.as_deref(), Some("13/2"));
    assert_eq!(logs[2].pressure.values, [1.5, 2.5, 4.5]);
    // The readme is named once; folders and notes of the file system are not worth a word.
    let warnings: Vec<String> = logs.iter().flat_map(|log| &log.warnings).map(ToString::to_string).collect();
    assert_eq!(warnings.len(), 1, "{warnings:?}");
    assert!(warnings[0].contains("'README.txt' (no row of numbers"), "{warnings:?}");
    assert!(!warnings[0].contains("MACOSX"), "{warnings:?}");
}

#[test]
fn an_archive_written_through_a_pipe_with_wide_sizes() {
    let logs = logs("casts_streamed.zip");
    assert_eq!(logs.iter().map(Log::len).collect::<Vec<_>>(), [3, 3]);
    assert_eq!(logs[0].station.as_deref(), Some("7/1"));
}

#[test]
fn a_log_that_fails_does_not_hide_the_others() {
    let inner = stored(&[("a.csv", TEXT)], 0, 0);
    let broken = b"time_s,pressure_dbar\n0,1.5\n1,2.x\n2,3.5\n";
    let archive = stored(&[("broken.csv", broken), ("inner.zip", &inner), ("good.csv", TEXT)], 0, 0);
    let dir = tempfile::tempdir().expect("a folder");
    let path = dir.path().join("cruise.zip");
    std::fs::write(&path, archive).expect("written");
    let results = read_each(&path.display().to_string(), &ReadOptions::default()).expect("results");
    assert_eq!(results.len(), 3);
    let broken = results[0].as_ref().expect_err("broken");
    assert!(broken.file.ends_with("cruise.zip#broken.csv"), "{broken}");
    assert_eq!(broken.place.as_ref().map(|p| p.line), Some(3), "{broken}");
    assert!(results[1].as_ref().expect_err("inner").problem.contains("inside a zip"));
    assert_eq!(results[2].as_ref().map(Log::len), Ok(2));
}

#[test]
fn archives_without_logs_say_what_they_hold() {
    let error = refused("a.zip", &stored(&[("readme", b"words"), ("picture.pdf", b"%PDF-1.4")], 0, 0));
    assert!(error.problem.contains("holds no log"), "{error}");
    assert!(error.problem.contains("'readme'") && error.problem.contains("PDF"), "{error}");
    assert!(refused("a.zip", &stored(&[], 0, 0)).problem.contains("empty"));
    let workbook = stored(&[("[Content_Types].xml", b"<x/>"), ("xl/a.csv", TEXT)], 0, 0);
    assert!(refused("a.xlsx", &workbook).problem.contains("spreadsheet"));
}

#[test]
fn entries_that_cannot_be_unpacked_say_why() {
    let one = |flags, method| refused("a.zip", &stored(&[("a.csv", TEXT)], flags, method));
    assert!(one(1, 0).problem.contains("encrypted"));
    assert!(one(0, 12).problem.contains("other than deflate"));
    let mut wrong = stored(&[("a.csv", TEXT)], 0, 0);
    let at = wrong.windows(3).position(|w| w == b"2.5").expect("the value");
    wrong[at] = b'3';
    assert!(refused("a.zip", &wrong).problem.contains("damaged"));
}

#[test]
fn names_are_words_and_never_paths() {
    let archive = stored(&[("../../etc/\u{1b}[31mx.csv", TEXT)], 0, 0);
    let logs = read_bytes("a.zip", archive, &ReadOptions::default()).expect("a log");
    assert_eq!(logs[0].source, "a.zip#../../etc/\u{fffd}[31mx.csv");
}

#[test]
fn a_reduction_does_the_others_and_names_the_one_that_failed() {
    let cast = std::fs::read(Path::new(env!("CARGO_MANIFEST_DIR")).join("demo-data/salinity-cast.csv"));
    let cast = cast.expect("the demo");
    let archive =
        stored(&[("broken.csv", b"time_s,pressure_dbar\n0,1.x\n1,2\n"), ("casts/K7.csv", &cast)], 0, 0);
    let dir = tempfile::tempdir().expect("a folder");
    let path = dir.path().join("cruise.zip").display().to_string();
    let into = dir.path().join("out");
    std::fs::write(&path, archive).expect("written");
    let output = assert_cmd::Command::cargo_bin("seaplumb")
        .expect("the program")
        .args(["reduce", &path, "--lat", "-19.4", "--into", &into.display().to_string()])
        .output()
        .expect("a run");
    let notes = String::from_utf8_lossy(&output.stderr);
    assert_eq!(output.status.code(), Some(3), "{notes}");
    assert!(notes.contains("cruise.zip#broken.csv:2:3"), "{notes}");
    // The name of an entry does not lead out of the folder, nor into others.
    let rows = std::fs::read_to_string(into.join("K7.csv")).expect("the result").lines().count();
    assert_eq!(rows, 1249);
}
