//! Logs that would give a wrong figure without a word: each now says something. Every test names what it regresses.

use seaplumb::log::{ReadOptions, read_bytes};
use seaplumb::reduction::Reduction;
use seaplumb::settings::Settings;

/// Time, pressure, conductivity, temperature of a dive: a minute on deck, down, ten minutes at 300 dbar, up, a minute on deck.
fn dive() -> Vec<[f64; 4]> {
    let deck = std::iter::repeat_n(0.0, 60);
    let down = (1..=600).map(|i| f64::from(i) * 0.5);
    let bottom = (0..600).map(|i| 300.0 + 0.02 * f64::from(i % 3));
    let up = (1..=600).rev().map(|i| f64::from(i) * 0.5);
    deck.clone()
        .chain(down)
        .chain(bottom)
        .chain(up)
        .chain(deck)
        .enumerate()
        .map(|(i, p)| {
            let (c, t) = if p == 0.0 { (0.01, 25.0) } else { (40.0 - 0.02 * p, 15.0 - 0.02 * p) };
            [i as f64, p, c, t]
        })
        .collect()
}

fn text(rows: &[[f64; 4]]) -> String {
    rows.iter().fold(
        "time_s,pressure_dbar,conductivity_mS_cm,temperature_degC\n".to_string(),
        |text, [s, p, c, t]| {
            let p = if p.is_nan() { String::new() } else { format!("{p:.2}") };
            text + &format!("{s},{p},{c:.4},{t:.4}\n")
        },
    )
}

fn reduced(rows: &[[f64; 4]], settings: Settings) -> Result<Reduction, String> {
    let mut logs = read_bytes("dive.csv", text(rows).into_bytes(), &ReadOptions::default()).expect("a log");
    let settings = Settings { latitude_deg: settings.latitude_deg.or(Some(10.0)), ..settings };
    Reduction::new(logs.remove(0), &settings).map_err(|e| e.to_string())
}

fn warned(rows: &[[f64; 4]], key: &str) -> bool {
    reduced(rows, Settings::default()).expect("a reduction").warnings.iter().any(|w| w.key == key)
}

#[test]
fn a_plain_dive_is_told_nothing_of_the_kind() {
    let r = reduced(&dive(), Settings::default()).expect("a reduction");
    let keys: Vec<&str> = r.warnings.iter().map(|w| w.key).collect();
    assert_eq!(keys, Vec::<&str>::new());
    assert_eq!(r.cast.legs.water(), 60..1860);
    // Deck and noise of a log rounded to 0.01 dbar: a last decimal, not a decibar.
    assert!(r.cast.tare.standard_uncertainty_dbar < 0.004, "{:?}", r.cast.tare);
}

#[test]
fn negative_pressures_are_an_error() {
    let rows: Vec<_> = dive().into_iter().map(|[s, p, c, t]| [s, -p, c, t]).collect();
    let error = reduced(&rows, Settings::default()).err().expect("an error");
    assert!(error.contains("outside") && error.contains("sign"), "{error}");
}

#[test]
fn a_gap_where_the_dive_was_deepest() {
    let rows: Vec<_> = dive().into_iter().filter(|[s, ..]| !(560.0..1_300.0).contains(s)).collect();
    assert!(warned(&rows, "gap_at_deepest"));
}

#[test]
fn pressures_missing_at_the_deepest() {
    let rows: Vec<_> = dive()
        .into_iter()
        .map(|[s, p, c, t]| [s, if (600.0..1_300.0).contains(&s) { f64::NAN } else { p }, c, t])
        .collect();
    assert!(warned(&rows, "gap_at_deepest"));
}

#[test]
fn every_third_pressure_missing_changes_little() {
    let whole = reduced(&dive(), Settings::default()).expect("a reduction");
    let rows: Vec<_> =
        dive().into_iter().map(|[s, p, c, t]| [s, if s % 3.0 == 1.0 { f64::NAN } else { p }, c, t]).collect();
    let holed = reduced(&rows, Settings::default()).expect("a reduction");
    assert!((whole.deepest_m - holed.deepest_m).abs() < 0.03, "{} {}", whole.deepest_m, holed.deepest_m);
    assert!(holed.cast.noise.deviation_dbar.is_some());
    assert!((58..=61).contains(&holed.cast.legs.water().start));
}

#[test]
fn two_dives_in_one_log() {
    let end = dive().len() as f64;
    let second = dive().into_iter().map(|[s, p, c, t]| [s + end, p, c, t]);
    let rows: Vec<_> = dive().into_iter().chain(second).collect();
    assert!(warned(&rows, "several_descents"));
}

#[test]
fn a_zero_that_drifts_over_the_dive() {
    let rows: Vec<_> = dive().into_iter().map(|[s, p, c, t]| [s, p + 2.4 * s / 1_900.0, c, t]).collect();
    let r = reduced(&rows, Settings::default()).expect("a reduction");
    assert!(r.warnings.iter().any(|w| w.key == "zero_drift"));
    let (before, after) = (r.cast.tare.before_dbar.expect("before"), r.cast.tare.after_dbar.expect("after"));
    assert!(before < 0.1 && after > 2.2, "{before} {after}");
}

#[test]
fn conductivity_stuck_on_a_round_value() {
    let rows: Vec<_> =
        dive().into_iter().map(|[s, p, c, t]| [s, p, if c > 1.0 { 40.0 } else { c }, t]).collect();
    assert!(warned(&rows, "standard_ocean"));
}

#[test]
fn conductivity_with_the_wrong_unit() {
    let rows: Vec<_> = dive().into_iter().map(|[s, p, c, t]| [s, p, 10.0 * c, t]).collect();
    assert!(warned(&rows, "salt_out_of_range"));
}

#[test]
fn the_equator_is_not_free_of_its_position() {
    use seaplumb::uncertainty::{Basis, Supplied, Term};
    let supplied = Supplied::new(5.0, Basis::Option);
    let settings = Settings {
        latitude_deg: Some(0.0),
        uncertainties: [(Term::Position, supplied)].into(),
        ..Settings::default()
    };
    let r = reduced(&dive(), settings).expect("a reduction");
    let term = r.budget.terms.iter().find(|t| t.term == "position").expect("the term");
    // Somigliana: gravity grows by 0.0053 sin2(5 deg) = 4.0e-5 of itself, depth falls by as much of 298 m: 12 mm.
    assert!((term.contribution_m - 0.012).abs() < 0.001, "{}", term.contribution_m);
}

#[test]
fn a_lake_in_the_mountains_is_in_range_from_its_surface_on() {
    let settings = Settings { air_pressure_hpa: Some(550.0), ..Settings::default() };
    // Absolute pressure less 101 325 Pa: the deck reads -4.63 dbar.
    let rows: Vec<_> = dive().into_iter().map(|[s, p, c, t]| [s, p - 4.6325, c, t]).collect();
    let r = reduced(&rows, settings).expect("a reduction");
    assert!(r.cast.suspects.is_empty(), "{:?}", r.cast.suspects.first());
    assert!(r.depth_m(r.model.place.surface_dbar).abs() < 1e-9);
}
