//! Seawater against the reference TEOS-10 library and the published check tables.

mod support;

use seaplumb::seawater::*;
use support::{Residuals, Table};

/// gsw 3.6.23, exact Gibbs functions, `S_A` 0 to 42 g/kg, -2 to 40 degC, 0 to 11 500 dbar.
#[test]
fn density_table() {
    let table = Table::reference("density.csv");
    let (s, t, p) = (
        table.numbers("absolute_salinity_g_kg"),
        table.numbers("temperature_c"),
        table.numbers("pressure_dbar"),
    );
    let residuals = |name: &str, column: &str, ours: &dyn Fn(f64, f64, f64) -> f64| {
        let theirs = table.numbers(column);
        Residuals::new(name, (0..table.len()).map(|i| ours(s[i], t[i], p[i]) - theirs[i]))
    };
    // 1e-6 kg/m3 is 1e-9 of a density: a hundredth of a millimetre in 11 km of depth.
    residuals("density against gsw", "density_kg_m3", &density_kg_m3).within(1e-6, "kg/m3");
    residuals("specific volume against gsw", "specific_volume_m3_kg", &specific_volume_m3_kg)
        .within(1e-17, "m3/kg");
    residuals("sound speed against gsw", "sound_speed_m_s", &sound_speed_m_s).within(1e-8, "m/s");
    residuals("potential temperature against gsw", "potential_temperature_c", &potential_temperature_degc)
        .within(1e-10, "degC");
}

/// gsw 3.6.23, `SP_from_C`, `S_P` 0.02 to 42 with many points below and around 2.
#[test]
fn practical_salinity_table() {
    let table = Table::reference("practical_salinity.csv");
    let (c, t, p) =
        (table.numbers("conductivity_ms_cm"), table.numbers("temperature_c"), table.numbers("pressure_dbar"));
    let theirs = table.numbers("practical_salinity");
    let residual = |i: usize| practical_salinity(c[i], t[i], p[i]) - theirs[i];
    let part = |name: &str, keep: &dyn Fn(f64) -> bool| {
        Residuals::new(name, (0..table.len()).filter(|&i| keep(theirs[i])).map(residual))
    };
    part("Practical Salinity, 2 and above, against gsw", &|s| s >= 2.0).within(1e-12, "");
    part("Practical Salinity below 2 against gsw", &|s| s < 2.0).within(1e-12, "");
}

/// UNESCO 44 (1983), p. 9, printed digits; elsewhere the `seawater` library, which is that report's code.
#[test]
fn pss78_tables() {
    let table = Table::reference("pss78_tables.csv");
    let (r, t68, p) = (
        table.numbers("conductivity_ratio"),
        table.numbers("temperature_ipts68_c"),
        table.numbers("pressure_dbar"),
    );
    let (printed, computed) = (table.numbers("salinity_printed"), table.numbers("salinity_seawater"));
    let ours = |i: usize| practical_salinity(r[i] * 42.914_0, t68[i] / 1.000_24, p[i]);
    // Printed to six decimals.
    Residuals::new(
        "PSS-78 printed check values, UNESCO 44",
        (0..table.len()).filter(|&i| printed[i].is_finite()).map(|i| ours(i) - printed[i]),
    )
    .within(5.1e-7, "");
    Residuals::new(
        "PSS-78 against the UNESCO 44 library",
        (0..table.len()).filter(|&i| computed[i] > 2.0).map(|i| ours(i) - computed[i]),
    )
    .within(1e-12, "");
}

/// IAPWS R13-08 table 8 and SR7-09: first derivatives of the Gibbs function. The water part there is IAPWS-95, which IAPWS-09
/// approximates (SR7-09 section 5: to within its uncertainty), so the whole is compared for what the two releases share.
#[test]
fn iapws_check_tables() {
    let table = Table::reference("iapws_check_tables.csv");
    let (name, part, quantity) = (table.text("table"), table.text("part"), table.text("quantity"));
    let (t, p, s) =
        (table.numbers("temperature_k"), table.numbers("pressure_pa"), table.numbers("salinity_kg_kg"));
    let (value, printed) = (table.numbers("value_si"), table.numbers("printed_recalled"));
    let sea = |i: usize| (1e3 * s[i], t[i] - 273.15, (p[i] - 101_325.0) / 1e4);
    let ours = |i: usize| -> Option<f64> {
        let (sa, degc, dbar) = sea(i);
        let salt_of = |f: fn(f64, f64, f64) -> f64| f(sa, degc, dbar) - f(0.0, degc, dbar);
        match (part[i], quantity[i]) {
            ("water_iapws09", "dg_dp") => Some(specific_volume_m3_kg(0.0, degc, dbar)),
            ("water_iapws09", "dg_dt") => Some(-entropy_j_kg_k(0.0, degc, dbar)),
            ("saline", "dg_dp") => Some(salt_of(specific_volume_m3_kg)),
            ("saline", "dg_dt") => Some(-salt_of(entropy_j_kg_k)),
            _ => None,
        }
    };
    let mut compared = Vec::new();
    for i in 0..table.len() {
        let Some(x) = ours(i) else { continue };
        compared.push((x - value[i]) / value[i].abs().max(1e-12));
        if printed[i].is_finite() {
            // Printed to nine significant digits; a difference of two volumes loses two of them.
            assert!(
                (x - printed[i]).abs() <= 1e-8 * printed[i].abs().max(1e-4),
                "{} {} {}: {x} against {} printed",
                name[i],
                part[i],
                quantity[i],
                printed[i]
            );
        }
    }
    assert!(compared.len() >= 12, "only {} check values were compared", compared.len());
    Residuals::new("IAPWS-09 and IAPWS-08 check tables, relative", compared.into_iter()).within(2e-12, "");
}
