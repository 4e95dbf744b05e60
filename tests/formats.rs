//! One dive in every format and dialect gives one deepest depth: the demo cast with salinity, whose truth its script knows.

mod support;

use flate2::{Compression, write::GzEncoder};
use seaplumb::log::{ReadOptions, read, read_bytes};
use seaplumb::reduction::Reduction;
use seaplumb::settings::Settings;
use std::io::Write;
use std::path::Path;
use support::{Table, demo};

/// Pressure in dbar, temperature in degC, Practical Salinity, flag: as the demo file prints them.
type Row = [String; 4];

fn rows() -> Vec<Row> {
    let table = Table::read(&demo("salinity-cast.csv"));
    let columns =
        ["pressure_dbar", "temperature_degC", "practical_salinity", "flag"].map(|name| table.text(name));
    (0..table.len()).map(|i| columns.each_ref().map(|c| c[i].to_string())).collect()
}

fn table(header: &str, between: &str, row: impl Fn(&Row) -> Row) -> String {
    rows().iter().fold(header.to_string(), |text, r| text + &row(r).join(between) + "\n")
}

fn scaled(text: &str, factor: f64) -> String {
    format!("{:.6}", text.parse::<f64>().expect("a number") * factor)
}

fn writings() -> Vec<(&'static str, Vec<u8>)> {
    let same = |r: &Row| r.clone();
    let comma = |r: &Row| r.clone().map(|cell| cell.replace('.', ","));
    let plain = table("pressure_dbar,temperature_degC,practical_salinity,flag\n", ",", same);
    let mut gz = GzEncoder::new(Vec::new(), Compression::default());
    gz.write_all(plain.as_bytes()).expect("memory");
    let whp = {
        let woce = |flag: &str| if flag == "1" { "2".to_string() } else { flag.to_string() };
        let head = "CTD,20260101AAA\n# invented\nNUMBER_HEADERS = 5\nSTNNBR = 7\nCASTNO = 1\nLATITUDE = -19.4\nLONGITUDE = -131.7\n\
                    CTDPRS,CTDPRS_FLAG_W,CTDTMP,CTDTMP_FLAG_W,CTDSAL,CTDSAL_FLAG_W\nDBAR,,ITS-90,,PSS-78,\n";
        let body = rows().into_iter().fold(head.to_string(), |text, [p, t, s, f]| {
            let f = woce(&f);
            // A pressure is good whatever the water.
            text + &format!("{p},2,{t},{f},{s},{f}\n")
        });
        body + "END_DATA\n"
    };
    vec![
        ("comma", plain.clone().into_bytes()),
        ("gzip", gz.finish().expect("memory")),
        ("byte order mark, CRLF", format!("\u{feff}{}", plain.replace('\n', "\r\n")).into_bytes()),
        (
            "semicolon, decimal comma",
            table("pressure [dbar];temperature [degC];salinity;flag\n", ";", comma).into(),
        ),
        (
            "tab, preamble",
            table("# a cast\n# by nobody\nPRES (dbar)\tTEMP (degC)\tPSAL\tflag\n", "\t", same).into(),
        ),
        (
            "blanks, units on a line",
            table("pressure temperature salinity flag\ndbar degC - -\n", "   ", same).into(),
        ),
        (
            "quoted header",
            table("\"pressure, dbar\",\"temperature, degC\",practical_salinity,flag\n", ",", same).into(),
        ),
        (
            "another order, more columns",
            table("flag,practical_salinity,note,temperature_degC\n", ",", |[_, t, s, f]| {
                [f.clone(), s.clone(), "x".to_string(), t.clone()]
            })
            .lines()
            .zip(std::iter::once("pressure_dbar".to_string()).chain(rows().into_iter().map(|r| r[0].clone())))
            .map(|(line, p)| format!("{line},{p}\n"))
            .collect::<String>()
            .into(),
        ),
        (
            "MPa and kelvin",
            table("pressure_MPa,temperature_K,practical_salinity,flag\n", ",", |[p, t, s, f]| {
                let kelvin = if t == "-999" {
                    t.clone()
                } else {
                    format!("{:.4}", t.parse::<f64>().expect("t") + 273.15)
                };
                [scaled(p, 0.01), kelvin, s.clone(), f.clone()]
            })
            .into(),
        ),
        (
            "Latin-1 degree sign",
            table("pressure [dbar];temperature [\u{b0}C];salinity;flag\n", ";", same)
                .chars()
                .map(|c| c as u8)
                .collect(),
        ),
        ("WHP-Exchange", whp.into_bytes()),
    ]
}

fn deepest_m(logs: Vec<seaplumb::log::Log>) -> f64 {
    assert_eq!(logs.len(), 1);
    let settings = Settings {
        latitude_deg: Some(-19.4),
        longitude_deg: Some(-131.7),
        air_pressure_hpa: Some(1011.6),
        ..Settings::default()
    };
    Reduction::new(logs.into_iter().next().expect("a log"), &settings).expect("a reduction").deepest_m
}

#[test]
fn every_format_gives_the_same_depth() {
    let truth: serde_json::Value =
        serde_json::from_str(&std::fs::read_to_string(demo("truth.json")).expect("truth.json"))
            .expect("JSON");
    let truth = truth["salinity-cast.csv"]["deepest_depth_with_composition_atlas_m"].as_f64().expect("m");
    let mut depths: Vec<(String, f64)> = writings()
        .into_iter()
        .map(|(name, bytes)| {
            let logs = read_bytes(name, bytes, &ReadOptions::default()).unwrap_or_else(|e| panic!("{e}"));
            (name.to_string(), deepest_m(logs))
        })
        .collect();
    // Made by tests/golden/make_same_cast.py with the C library.
    for name in ["salinity-cast.nc", "salinity-cast-packed.nc"] {
        let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/golden").join(name);
        let logs =
            read(path.to_str().expect("a path"), &ReadOptions::default()).unwrap_or_else(|e| panic!("{e}"));
        depths.push((name.to_string(), deepest_m(logs)));
    }
    assert!(depths.len() >= 13);
    for (name, depth) in &depths {
        assert!((depth - depths[0].1).abs() < 1e-3, "{name}: {depth} against {}", depths[0].1);
        assert!((depth - truth).abs() < 0.01, "{name}: {depth} against the truth {truth}");
    }
}
