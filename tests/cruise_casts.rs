//! The twelve real casts of the shared data, reduced in one call, against an integration that a script wrote with gsw and
//! numpy (`tests/reference/make_cruise_casts.py`).

mod support;

use support::{Residuals, Table, shared_data};

#[test]
fn twelve_real_casts_in_one_call() {
    let Some(folder) = shared_data("data/cruise-casts") else { return };
    let table = Table::reference("cruise_casts.csv");
    let files = table.text("file");
    let paths: Vec<String> = files.iter().map(|f| folder.join(f).display().to_string()).collect();
    let output = assert_cmd::Command::cargo_bin("seaplumb")
        .expect("the program")
        // The script has salt of the reference composition.
        .args(["deepest", "--format", "json", "--quiet", "--composition", "reference"])
        .args(&paths)
        .output()
        .expect("a run");
    assert!(output.status.success(), "{}", String::from_utf8_lossy(&output.stderr));
    let json: serde_json::Value = serde_json::from_slice(&output.stdout).expect("JSON");
    let casts = json["casts"].as_array().expect("casts");
    assert_eq!(casts.len(), 12);
    let theirs = table.numbers("deepest_depth_m");
    let latitude = table.numbers("latitude_deg");
    for (i, cast) in casts.iter().enumerate() {
        assert!((cast["latitude"].as_f64().expect("latitude") - latitude[i]).abs() < 1e-4);
        assert!(cast["station"].is_string());
    }
    Residuals::new(
        "deepest depths of twelve real casts against gsw and numpy",
        casts.iter().zip(&theirs).map(|(cast, z)| cast["deepest"]["depth_m"].as_f64().expect("depth") - z),
    )
    .within(0.02, "m");
}
