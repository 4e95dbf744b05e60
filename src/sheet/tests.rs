use super::keys::{DIRECT, Kind, sections};
use super::*;
use crate::log::{PressureKind, ReadOptions};
use crate::settings::Settings;

fn read(text: &str) -> Sheet {
    Sheet::from_text("s.toml", text, Path::new("")).unwrap_or_else(|e| panic!("{e}\n{text}"))
}

#[test]
fn every_key_takes_its_example_in_the_sheet_and_in_a_cast() {
    let dir = tempfile::tempdir().unwrap();
    std::fs::write(dir.path().join("nearby.csv"), "").unwrap();
    let log = dir.path().join("K.csv");
    let layer = |text: &str| {
        let sheet = Sheet::from_text("s.toml", text, dir.path()).unwrap_or_else(|e| panic!("{e}\n{text}"));
        sheet.layer_for(&log.display().to_string())
    };
    for section in sections() {
        for key in section.keys.iter() {
            let line = format!("{} = {}\n", key.name, key.example);
            let by_sheet = layer(&format!("[{}]\n{line}", section.name));
            let by_cast = match DIRECT.contains(&section.name) {
                true => layer(&format!("[[cast]]\nlog = \"K.csv\"\n{line}")),
                false => layer(&format!("[[cast]]\nlog = \"K.csv\"\n[cast.{}]\n{line}", section.name)),
            };
            assert_ne!(by_sheet, Layer::default(), "{line}");
            assert_eq!(by_sheet, by_cast, "{line}");
        }
    }
}

#[test]
fn a_blank_sheet_says_nothing_and_explains_every_key() {
    let blank = template(&[], &ReadOptions::default());
    let sheet = read(&blank);
    assert_eq!(sheet.layer_for("K.csv"), Layer::default());
    assert!(!sheet.has_casts());
    for section in sections() {
        let (_, rest) = blank.split_once(&format!("\n[{}]\n", section.name)).expect(section.name);
        let lines: Vec<&str> = rest.lines().collect();
        for key in section.keys.iter() {
            let at = lines.iter().position(|line| *line == format!("#{} =", key.name)).expect(key.name);
            assert!(lines[at - 1].starts_with("# "), "{} is not explained", key.name);
        }
    }
    for line in blank.lines() {
        assert!(line.chars().count() <= 100, "{line}");
    }
}

#[test]
fn what_the_logs_tell_comes_back_from_the_printed_sheet() {
    let facts = CastFacts {
        source: "casts/Tiefe \"K\\07\" ü.csv".to_string(),
        casts: 1,
        station: Some("12/3 \u{1} \"x\"".to_string()),
        latitude_deg: Some(-31.0),
        longitude_deg: Some(0.1 + 0.2),
        pressure_kind: Some(PressureKind::Gauge),
        start: Some("2026-03-01T10:20:30.25Z".parse().unwrap()),
        ..CastFacts::default()
    };
    let silent = CastFacts { source: "b.csv".to_string(), casts: 1, ..CastFacts::default() };
    let reading = ReadOptions {
        columns: vec!["pressure=p \"raw\":MPa".parse().unwrap(), "time=1".parse().unwrap()],
        missing: vec!["-99".to_string(), "\\N".to_string()],
    };
    let sheet = read(&template(&[facts.clone(), silent.clone()], &reading));
    let layer = sheet.layer_for(&facts.source);
    assert_eq!(
        layer.settings,
        Settings {
            station: facts.station,
            latitude_deg: facts.latitude_deg,
            longitude_deg: facts.longitude_deg,
            pressure_kind: facts.pressure_kind,
            start: facts.start,
            ..Settings::default()
        }
    );
    assert_eq!(sheet.layer_for(&silent.source).settings, Settings::default());
    let sorted = |mut reading: ReadOptions| {
        reading.columns.sort_by_key(|choice| choice.role.name());
        reading
    };
    assert_eq!(sorted(layer.reading), sorted(reading));
    assert_eq!(sheet.logs().unwrap(), [facts.source.as_str(), "b.csv"]);
}

#[test]
fn a_file_of_several_casts_is_left_to_itself() {
    let facts = CastFacts { source: "all.nc".to_string(), casts: 12, ..CastFacts::default() };
    let printed = template(&[facts], &ReadOptions::default());
    assert!(printed.contains("\n# It holds 12 casts; what is said here holds for all of them"), "{printed}");
    assert_eq!(read(&printed).layer_for("all.nc"), Layer::default());
}

#[test]
fn a_byte_order_mark_is_passed_over() {
    let sheet = read("\u{feff}[station]\nlatitude = 1\n");
    assert_eq!(sheet.layer_for("-").settings.latitude_deg, Some(1.0));
}

/// A cast is about its logs however they are named; standard input is nobody's.
#[test]
fn logs_are_known_again() {
    let dir = tempfile::tempdir().unwrap();
    std::fs::create_dir(dir.path().join("casts")).unwrap();
    std::fs::write(dir.path().join("casts/K.csv"), "").unwrap();
    let text = "[[cast]]\nlog = \"casts/*\"\nlatitude = 1\n";
    let sheet = Sheet::from_text("s.toml", text, dir.path()).unwrap();
    let path = |name: &str| dir.path().join(name).display().to_string();
    assert!(sheet.names(&path("casts/K.csv")) && sheet.names(&path("casts/../casts/./K.csv")));
    assert!(!sheet.names(&path("casts/L.csv")) && !sheet.names("-"));
}

/// Whatever is done to a sheet, it is read or refused with a line that it has.
#[test]
fn damaged_sheets_are_refused_with_a_line() {
    let mut whole = String::new();
    for section in sections() {
        whole.push_str(&format!("[{}]\n", section.name));
        for key in section.keys.iter() {
            whole.push_str(&format!("{} = {}\n", key.name, key.example));
        }
    }
    whole.push_str("[[cast]]\nlog = \"ü.csv\"\n[cast.water]\nleg = \"up\"\n");
    let mut tried = 0;
    let mut try_it = |text: &str| {
        tried += 1;
        // Some keys of the whole exclude each other, and the profile is no file here: refused it must be.
        let error = Sheet::from_text("s.toml", text, Path::new("")).err();
        for fault in error.iter().flat_map(|error| &error.faults) {
            let line = fault.place.as_ref().map_or(0, |place| place.line);
            assert!((1..=text.lines().count() as u64 + 1).contains(&line), "{fault}\n{text}");
        }
        assert!(error.is_none_or(|error| !error.faults.is_empty()), "{text}");
    };
    try_it(&whole);
    for (at, c) in whole.char_indices() {
        try_it(&whole[..at]);
        for put in ["", "\"", "=", "[", "\n", "\r", "-", "é", "\u{0}", "'''"] {
            try_it(&format!("{}{put}{}", &whole[..at], &whole[at + c.len_utf8()..]));
        }
    }
    assert!(tried > 10_000, "{tried}");
}

/// The page of documentation names every section and key, with what it may hold, its default and its term.
#[test]
fn the_documentation_is_complete() {
    let page = include_str!("../../docs/sheet.md");
    for section in sections() {
        let (_, rest) = page.split_once(&format!("## `[{}]`", section.name)).expect(section.name);
        let part = rest.split("\n## ").next().unwrap_or(rest);
        for key in section.keys.iter() {
            let row = part
                .lines()
                .find(|line| line.starts_with(&format!("| `{}` |", key.name)))
                .unwrap_or_else(|| panic!("docs/sheet.md has no row for {} of [{}]", key.name, section.name));
            assert!(row.contains(key.otherwise), "{row}: its default is '{}'", key.otherwise);
            let (range, term) = match key.kind {
                Kind::Number(range, _) => (range.to_string(), None),
                Kind::Uncertainty(term) => (String::new(), Some(term)),
                _ => (String::new(), None),
            };
            assert!(row.contains(range.trim_end_matches(" or more")), "{row}: it takes {range}");
            if let Some(term) = term {
                assert!(row.contains(&format!("`{}`", term.key())), "{row}: it feeds {}", term.key());
                assert!(row.contains(&format!("| {} |", term.unit())), "{row}: its unit is {}", term.unit());
            }
        }
    }
}
