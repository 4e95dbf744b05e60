//! The demo logs against the truth that their script knows (`demo-data/truth.json`, made with gsw, boule and numpy before noise
//! and faults were added).

mod support;

use seaplumb::cast::{Leg, Quantity, Reason};
use seaplumb::log::{PressureKind, ReadOptions};
use seaplumb::reduction::Reduction;
use seaplumb::seawater::Composition;
use seaplumb::settings::Settings;
use seaplumb::uncertainty::WaterOrigin;
use std::ops::RangeInclusive;
use support::{Table, demo};

fn truth(file: &str) -> serde_json::Value {
    let text = std::fs::read_to_string(demo("truth.json")).expect("truth.json");
    let all: serde_json::Value = serde_json::from_str(&text).expect("JSON");
    all[file].clone()
}

fn number(truth: &serde_json::Value, key: &str) -> f64 {
    truth[key].as_f64().unwrap_or_else(|| panic!("no number {key}"))
}

/// What an operator would type for the file. The truth has salt of the reference composition.
fn settings(truth: &serde_json::Value) -> Settings {
    Settings {
        latitude_deg: Some(number(truth, "latitude")),
        longitude_deg: Some(number(truth, "longitude")),
        air_pressure_hpa: Some(number(truth, "air_pressure_hPa")),
        pressure_kind: Some(match truth["pressure_kind"].as_str() {
            Some("absolute") => PressureKind::Absolute,
            _ => PressureKind::Sea,
        }),
        composition: Some(Composition::Reference),
        ..Settings::default()
    }
}

fn reduced(file: &str, settings: &Settings) -> Reduction {
    let path = demo(file);
    let mut logs =
        seaplumb::log::read(path.to_str().expect("a path"), &ReadOptions::default()).expect("a log");
    assert_eq!(logs.len(), 1);
    Reduction::new(logs.remove(0), settings).expect("a reduction")
}

fn planted(truth: &serde_json::Value, fault: &str) -> RangeInclusive<usize> {
    let ends = &truth["faults_first_and_last_sample"][fault];
    let end = |i: usize| ends[i].as_u64().expect("a sample") as usize;
    end(0)..=end(1)
}

fn accused(r: &Reduction, quantity: Quantity, reason: Reason) -> Vec<usize> {
    r.cast
        .suspects
        .iter()
        .filter(|s| (s.quantity, s.reason) == (quantity, reason))
        .map(|s| s.sample)
        .collect()
}

#[test]
fn lander_dive_deepest() {
    let truth = truth("lander-dive.csv");
    let r = reduced("lander-dive.csv", &settings(&truth));
    // What the down leg gives at the deepest true pressure: the water of the way down is 11 mm off that of the moment.
    let by_down_leg = number(&truth, "deepest_depth_by_down_leg_m");
    assert!((r.deepest_m - by_down_leg).abs() < 0.02, "{} against {by_down_leg}", r.deepest_m);
    let raw = r.depth_m(r.deepest.raw_pressure_dbar);
    assert!((raw - truth["raw_maximum_without_spike"]["depth_m"].as_f64().expect("m")).abs() < 0.02);
    assert!(raw - r.deepest_m > 0.05, "noise deepens the raw maximum: {raw}");
    let offset = r.cast.tare.value_dbar - number(&truth, "zero_offset_dbar");
    assert!(
        offset.abs() < 3.0 * r.cast.tare.standard_uncertainty_dbar + 0.002,
        "zero offset is off by {offset}"
    );
    let noise = r.cast.noise.deviation_dbar.expect("noise");
    let put_in = truth["noise_standard_deviation"]["pressure_dbar"].as_f64().expect("dbar");
    assert!((noise / put_in - 1.0).abs() < 0.1, "noise {noise} against {put_in}");
}

/// Salt of the place, by the atlas: the script knows what that is worth.
#[test]
fn composition_of_the_place() {
    for (file, tolerance) in
        [("lander-dive.csv", 0.02), ("salinity-cast.csv", 0.01), ("shelf-cast.csv", 0.02)]
    {
        let truth = truth(file);
        let place = reduced(file, &Settings { composition: None, ..settings(&truth) });
        let reference = reduced(file, &settings(&truth));
        let put_in =
            number(&truth, "deepest_depth_with_composition_atlas_m") - number(&truth, "deepest_depth_m");
        assert!((place.deepest_m - reference.deepest_m - put_in).abs() < 0.001, "{file}");
        let depth = number(&truth, "deepest_depth_with_composition_atlas_m");
        assert!((place.deepest_m - depth).abs() < tolerance, "{file}: {}", place.deepest_m);
    }
}

#[test]
fn lander_dive_faults_are_found_and_nothing_is_lost() {
    let truth = truth("lander-dive.csv");
    let r = reduced("lander-dive.csv", &settings(&truth));
    assert_eq!(r.len() as u64, truth["samples"].as_u64().expect("samples"));
    let expect = |quantity, reason, fault: &str| {
        let (found, put_in) = (accused(&r, quantity, reason), planted(&truth, fault).collect::<Vec<_>>());
        assert_eq!(found, put_in, "{fault}");
    };
    expect(Quantity::Salt, Reason::PumpOff, "pump_off_conductivity");
    expect(Quantity::Pressure, Reason::Spike, "pressure_spike");
    expect(Quantity::Temperature, Reason::Spike, "temperature_spike");
    expect(Quantity::Temperature, Reason::Stuck, "temperature_stuck");
    for i in planted(&truth, "pump_off_conductivity") {
        assert_eq!(r.sample(i).flag.code(), 3);
    }
    for i in planted(&truth, "temperature_stuck") {
        assert_eq!(r.sample(i).flag.code(), 4);
        assert!(r.sample(i).depth_m.is_finite(), "a bad temperature costs no depth");
    }
}

#[test]
fn lander_dive_legs() {
    let truth = truth("lander-dive.csv");
    let r = reduced("lander-dive.csv", &settings(&truth));
    let water = &truth["water_first_and_last_sample"];
    let found = r.cast.legs.water();
    assert_eq!(found.start as u64, water[0].as_u64().expect("first"));
    assert_eq!(found.end as u64 - 1, water[1].as_u64().expect("last"));
    let bottom = r.cast.legs.range(Leg::Bottom);
    let phase = |name: &str| truth["phases_first_sample"][name].as_u64().expect("a sample") as f64;
    // Legs are told by blocks of seven samples.
    let slack = 14.0;
    assert!((bottom.start as f64 - phase("bottom")).abs() < slack, "{bottom:?}");
    assert!((bottom.end as f64 - phase("ascent")).abs() < slack, "{bottom:?}");
}

/// Each sample's depth against its truth: the residual is the noise, and the stated uncertainty covers it.
fn series(file: &str, settings: &Settings, noise_m: f64) {
    let r = reduced(file, settings);
    let table = Table::read(&demo("truth.csv"));
    let (files, sample, depth) = (table.text("file"), table.numbers("sample"), table.numbers("depth_m"));
    let mut compared = 0;
    for i in (0..table.len()).filter(|&i| files[i] == file) {
        let ours = r.sample(sample[i] as usize);
        let residual = ours.depth_m - depth[i];
        compared += 1;
        // Five deviations of noise, and a centimetre for tare and water.
        assert!(residual.abs() < 5.0 * noise_m + 0.012, "sample {}: {residual} m", sample[i]);
    }
    assert!(compared >= 4, "{file}: only {compared} samples compared");
}

#[test]
fn lander_dive_series() {
    series("lander-dive.csv", &settings(&truth("lander-dive.csv")), 0.03);
}

#[test]
fn lander_dive_closes_at_zero_on_deck() {
    let r = reduced("lander-dive.csv", &settings(&truth("lander-dive.csv")));
    let deck: Vec<f64> =
        (0..r.len()).map(|i| r.sample(i)).filter(|s| s.leg == Leg::Deck).map(|s| s.depth_m).collect();
    let before = deck[..400].iter().sum::<f64>() / 400.0;
    let after = deck[deck.len() - 300..].iter().sum::<f64>() / 300.0;
    assert!(before.abs() < 0.01 && after.abs() < 0.01, "{before} {after}");
}

#[test]
fn shelf_cast() {
    let truth = truth("shelf-cast.csv");
    let r = reduced("shelf-cast.csv", &settings(&truth));
    assert!((r.deepest_m - number(&truth, "deepest_depth_m")).abs() < 0.02, "{}", r.deepest_m);
    // The deck reads 0.12 kPa too much.
    assert!((r.cast.tare.value_dbar - 0.012).abs() < 0.001);
    assert!(r.log.time.as_ref().expect("time").start.is_some());
    series("shelf-cast.csv", &settings(&truth), 0.002);
}

#[test]
fn salinity_cast() {
    let truth = truth("salinity-cast.csv");
    let r = reduced("salinity-cast.csv", &settings(&truth));
    assert!((r.deepest_m - number(&truth, "deepest_depth_m")).abs() < 0.01, "{}", r.deepest_m);
    let flagged: Vec<(f64, u8)> = (0..r.len())
        .map(|i| r.sample(i))
        .filter(|s| s.flag.code() > 2)
        .map(|s| (s.pressure_dbar, s.flag.code()))
        .collect();
    let mut put_in: Vec<(f64, u8)> = ["3", "4", "9"]
        .iter()
        .flat_map(|flag| {
            let at = truth["pressure_dbar_of_flag"][flag].as_array().expect("pressures").clone();
            at.into_iter().map(move |p| (p.as_f64().expect("dbar"), flag.parse::<u8>().expect("a flag")))
        })
        .collect();
    put_in.sort_by(|a, b| a.0.total_cmp(&b.0));
    assert_eq!(flagged, put_in);
    series("salinity-cast.csv", &settings(&truth), 0.0);
}

#[test]
fn pressure_only_dive() {
    let truth = truth("pressure-only-dive.csv");
    let settings = settings(&truth);
    let r = reduced("pressure-only-dive.csv", &settings);
    assert_eq!(r.origin, WaterOrigin::StandardOcean);
    assert!(r.warnings.iter().any(|w| w.key == "standard_ocean"));
    let off = (r.deepest_m - number(&truth, "deepest_depth_m")).abs();
    assert!(off > 1.0 && off < r.budget.expanded_uncertainty_m(), "{off} m off, and the budget covers it");
}
