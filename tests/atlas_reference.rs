//! Absolute Salinity by position and pressure against the reference TEOS-10 library.
#![allow(clippy::print_stdout)] // measured figures, seen with --nocapture

mod support;

use seaplumb::seawater::{Composition, Coverage};
use std::path::Path;
use support::{Residuals, Table};

/// Half a step of the stored ratio (5e-10) times the largest Reference Salinity of the table (38.2 g/kg).
const STORED_G_KG: f64 = 2e-8;

/// What it costs to hold the deepest value on the Red Sea shelf where the library goes to 0: `R_delta` is 7.0e-5 at
/// most there (at 101 dbar), times a Reference Salinity of 38.2 g/kg.
const RED_SEA_G_KG: f64 = 2.7e-3;

struct Point {
    region: String,
    longitude_deg: f64,
    latitude_deg: f64,
    pressure_dbar: f64,
    coverage: Coverage,
    residual_g_kg: f64,
}

impl Point {
    /// The shelf of the southern Red Sea, one of the few cells that have fewer values than levels: the library goes
    /// from the deepest value to 0 within one level, here the value is held.
    fn is_held_here_alone(&self) -> bool {
        (40.0..44.0).contains(&self.longitude_deg)
            && (18.0..22.0).contains(&self.latitude_deg)
            && self.pressure_dbar > 101.0
    }
}

fn compared(table: &Table) -> Vec<Point> {
    let (longitude, latitude) = (table.numbers("longitude_deg"), table.numbers("latitude_deg"));
    let (pressure, practical) = (table.numbers("pressure_dbar"), table.numbers("practical_salinity"));
    let (region, expected) = (table.text("region"), table.numbers("absolute_salinity_g_kg"));
    let point = |i: usize| {
        let composition = Composition::at(latitude[i], longitude[i]);
        Point {
            region: region[i].to_string(),
            longitude_deg: longitude[i],
            latitude_deg: latitude[i],
            pressure_dbar: pressure[i],
            coverage: composition.coverage(),
            residual_g_kg: composition.absolute_salinity_g_kg(practical[i], pressure[i]) - expected[i],
        }
    };
    (0..table.len()).map(point).collect()
}

#[test]
fn every_region_agrees_to_the_stored_digits() {
    let points = compared(&Table::reference("atlas_points.csv"));
    let mut regions: Vec<&str> = points.iter().map(|p| p.region.as_str()).collect();
    regions.sort_unstable();
    regions.dedup();
    assert_eq!(regions.len(), 12, "{regions:?}");
    for region in regions {
        let here = points.iter().filter(|p| p.region == region && !p.is_held_here_alone());
        Residuals::new(&format!("S_A by position, {region}"), here.map(|p| p.residual_g_kg))
            .within(STORED_G_KG, "g/kg");
    }
    let held = points.iter().filter(|p| p.is_held_here_alone());
    Residuals::new("S_A by position, held in the Red Sea", held.map(|p| p.residual_g_kg))
        .within(RED_SEA_G_KG, "g/kg");
}

#[test]
fn coverage_is_told_by_region() {
    let table = Table::reference("atlas_points.csv");
    let (practical, expected) =
        (table.numbers("practical_salinity"), table.numbers("absolute_salinity_g_kg"));
    let points = compared(&table);
    let of = |region: &'static str| points.iter().filter(move |p| p.region == region);
    assert!(of("ocean").chain(of("node")).all(|p| p.coverage != Coverage::None));
    assert!(of("north_pole").chain(of("isthmus")).filter(|p| p.coverage == Coverage::Atlas).count() > 300);
    assert!(of("baltic").filter(|p| p.coverage == Coverage::Baltic).count() > 50);
    let none: Vec<usize> = (0..points.len()).filter(|&i| points[i].coverage == Coverage::None).collect();
    assert!(none.len() > 50, "{}", none.len());
    for i in none {
        // The library falls back on the reference composition there.
        assert_eq!(expected[i], Composition::Reference.absolute_salinity_g_kg(practical[i], 0.0));
    }
}

/// The full comparison: `tests/reference/make_atlas_points.py COUNT FILE` makes the points, the environment variable
/// names the file.
#[test]
fn many_points_in_the_ocean_agree() {
    let Some(path) = std::env::var_os("SEAPLUMB_ATLAS_POINTS") else {
        eprintln!(
            "SKIPPED: the full comparison of the atlas; set SEAPLUMB_ATLAS_POINTS to a table of points"
        );
        return;
    };
    let points = compared(&Table::read(Path::new(&path)));
    let mut sorted: Vec<f64> = points.iter().map(|p| p.residual_g_kg.abs()).collect();
    sorted.sort_by(f64::total_cmp);
    let quantile = |share: f64| sorted[(share * (sorted.len() - 1) as f64).round() as usize];
    for share in [0.5, 0.9, 0.99, 0.999, 0.9999, 1.0] {
        println!("quantile {share}: {:.2e} g/kg of {} points", quantile(share), sorted.len());
    }
    for p in points.iter().filter(|p| p.residual_g_kg.abs() > STORED_G_KG) {
        println!(
            "{} E {} N {} dbar: {:.2e} g/kg",
            p.longitude_deg, p.latitude_deg, p.pressure_dbar, p.residual_g_kg
        );
    }
    // Beyond are only points where the library goes to 0 and the deepest value is held here.
    assert!(quantile(0.9995) <= STORED_G_KG, "{:e}", quantile(0.9995));
}
