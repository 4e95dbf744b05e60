//! The second equation of state, EOS-80, the shortcuts to depth and sound along a column, against reference libraries.

mod support;

use seaplumb::column::{Column, Salt, SoundColumn, Water, WaterNode, WaterShift};
use seaplumb::depth::saunders_1981_depth_m;
use seaplumb::gravity::LocalGravity;
use seaplumb::seawater::*;
use support::water::{column_of, hadal_salinity, hadal_theta};
use support::{Residuals, Table};

/// gsw 3.6.23: Conservative Temperature, and the 75-term polynomial from it and from in-situ temperature.
#[test]
fn polynomial_table() {
    let table = Table::reference("polynomial.csv");
    let (s, t, p) = (
        table.numbers("absolute_salinity_g_kg"),
        table.numbers("temperature_c"),
        table.numbers("pressure_dbar"),
    );
    let (ct, v) = (table.numbers("conservative_temperature_c"), table.numbers("specific_volume_m3_kg"));
    let rows = 0..table.len();
    Residuals::new(
        "Conservative Temperature against gsw",
        rows.clone().map(|i| conservative_temperature_degc(s[i], t[i], p[i]) - ct[i]),
    )
    .within(1e-12, "degC");
    Residuals::new(
        "75-term polynomial of Conservative Temperature against gsw, relative",
        rows.clone().map(|i| polynomial_specific_volume_m3_kg(s[i], ct[i], p[i]) / v[i] - 1.0),
    )
    .within(1e-15, "");
    Residuals::new(
        "75-term polynomial from in-situ temperature against gsw, relative",
        rows.map(|i| EquationOfState::Polynomial.specific_volume_m3_kg(s[i], t[i], p[i]) / v[i] - 1.0),
    )
    .within(2e-15, "");
}

/// UNESCO 44 (1983), p. 19, printed digits as recalled; elsewhere the `seawater` library, which is that report's code.
#[test]
fn eos80_table() {
    let table = Table::reference("eos80.csv");
    let (s, t68, p) = (
        table.numbers("practical_salinity"),
        table.numbers("temperature_ipts68_c"),
        table.numbers("pressure_dbar"),
    );
    let (printed, library) =
        (table.numbers("density_printed_kg_m3"), table.numbers("density_seawater_kg_m3"));
    let ours = |i: usize| eos80_density_t68_kg_m3(s[i], t68[i], p[i]);
    Residuals::new(
        "EOS-80 printed check values, UNESCO 44",
        (0..table.len()).filter(|&i| printed[i].is_finite()).map(|i| ours(i) - printed[i]),
    )
    .within(5.1e-6, "kg/m3");
    Residuals::new("EOS-80 density against seawater", (0..table.len()).map(|i| ours(i) - library[i]))
        .within(1e-11, "kg/m3");
    Residuals::new(
        "EOS-80 specific volume, ITS-90, against seawater, relative",
        (0..table.len())
            .map(|i| eos80_specific_volume_m3_kg(s[i], t68[i] / 1.000_24, p[i]) * library[i] - 1.0),
    )
    .within(1e-14, "");
}

/// The inverse of the formula of Saunders (1981) as the `seawater` library has it.
#[test]
fn saunders_returns() {
    let table = Table::reference("saunders.csv");
    let (z, latitude, p) =
        (table.numbers("depth_m"), table.numbers("latitude_deg"), table.numbers("pressure_dbar"));
    Residuals::new(
        "Saunders 1981 against its inverse in seawater",
        (0..table.len()).map(|i| saunders_1981_depth_m(p[i], latitude[i]) - z[i]),
    )
    .within(1e-9, "m");
}

/// The check casts of gsw: two of the open ocean to 6 131 dbar and one of a brackish sea to 101 dbar.
fn check_cast(number: f64, continued_to_dbar: f64) -> Water {
    let table = Table::reference("check_casts.csv");
    let cast = table.numbers("cast");
    let (p, s, t) =
        (table.numbers("pressure_dbar"), table.numbers("practical_salinity"), table.numbers("temperature_c"));
    let level = |i: usize| WaterNode { pressure_dbar: p[i], temperature_degc: t[i], salt: s[i] };
    let levels = (0..table.len()).filter(|&i| cast[i] == number).map(level).collect();
    Water::new(levels, Salt::Practical, Composition::Reference, continued_to_dbar).expect("water")
}

/// Depth by the Gibbs function less depth by the polynomial, at every level.
fn difference_of_routes(name: &str, water: &Water) -> Residuals {
    let gravity = LocalGravity::normal(-23.2);
    let depth = |equation_of_state: EquationOfState| {
        let water = water.clone().with_equation_of_state(equation_of_state);
        assert_eq!(water.equation_of_state(), equation_of_state);
        let profile = water.profile(0.0, &WaterShift::default()).expect("a profile");
        Column::integrate(&profile, 0.0, &gravity)
    };
    let (gibbs, polynomial) = (depth(EquationOfState::Gibbs), depth(EquationOfState::Polynomial));
    assert!(gibbs.depths_m() != polynomial.depths_m(), "{name}: the choice changes nothing");
    let differences = gibbs.depths_m().iter().zip(polynomial.depths_m()).map(|(a, b)| a - b);
    Residuals::new(&format!("depth by Gibbs function and polynomial, {name}"), differences)
}

/// Fresh melt over water near freezing.
fn polar(to_dbar: f64) -> Water {
    column_of(to_dbar, 10.0, |p| 34.9 - 4.0 * (-p / 60.0).exp(), |p| -0.9 - 0.8 * (-p / 100.0).exp())
}

/// Depth by both routes: the same within a millimetre, wherever the Gibbs function is valid and the water is that of a sea.
#[test]
fn both_routes_give_the_same_depth() {
    const VALID_DBAR: f64 = 10_000.0;
    let columns = [
        ("hadal", column_of(VALID_DBAR, 10.0, hadal_salinity, hadal_theta)),
        ("check cast 1", check_cast(1.0, 0.0)),
        ("check cast 2", check_cast(2.0, 0.0)),
        ("check cast 3", check_cast(3.0, 0.0)),
        ("check cast 1, continued to 10 000 dbar", check_cast(1.0, VALID_DBAR)),
        ("check cast 2, continued to 10 000 dbar", check_cast(2.0, VALID_DBAR)),
        ("polar, to the deepest there is of it", polar(5_600.0)),
        (
            "warm and salty: a marginal sea of 38.4 and 13 degC",
            column_of(
                VALID_DBAR,
                10.0,
                |p| 38.4 + 1.0 * (-p / 200.0).exp(),
                |p| 13.0 + 14.0 * (-p / 150.0).exp(),
            ),
        ),
        ("standard ocean", Water::standard_ocean(VALID_DBAR)),
    ];
    for (name, water) in columns {
        difference_of_routes(name, &water).within(1e-3, "m");
    }
}

/// Beyond that the polynomial is not fitted, and how far it then strays is on record: past the range of the Gibbs function in
/// a trench, and in polar and brackish water at pressures where no sea has any.
#[test]
fn where_the_routes_part() {
    let trench = column_of(11_500.0, 10.0, hadal_salinity, hadal_theta);
    difference_of_routes("hadal, to 11 500 dbar", &trench).within(2e-3, "m");
    // 0.1 ppm all the way down: 1.05 mm.
    difference_of_routes("polar, carried on to 10 000 dbar", &polar(10_000.0)).within(2e-3, "m");
    let brackish = check_cast(3.0, 10_000.0);
    difference_of_routes("brackish check cast 3, continued to 10 000 dbar", &brackish).within(0.1, "m");
}

/// Sound along the hadal column: travel time by adaptive quadrature of gsw's sound speed.
#[test]
fn sound_along_a_column() {
    let table = Table::reference("sound.csv");
    let (p, z, c) =
        (table.numbers("pressure_dbar"), table.numbers("depth_m"), table.numbers("sound_speed_m_s"));
    let (time, mean) = (table.numbers("travel_time_s"), table.numbers("mean_sound_speed_m_s"));
    for step_dbar in [1.0, 10.0] {
        let water = column_of(11_000.0, step_dbar, hadal_salinity, hadal_theta);
        let profile = water.profile(0.0, &WaterShift::default()).expect("a profile");
        let column = Column::integrate(&profile, 0.0, &LocalGravity::normal(-23.2));
        let sound = SoundColumn::new(&water, 0.0, &column);
        let rows = || 0..table.len();
        // 1e-3 m/s of sound speed is 1e-3 m of an echo from 1 500 m; sounders are set to 0.1 m/s.
        let (of_time, of_speed) = if step_dbar == 1.0 { (1e-7, 1e-3) } else { (1e-5, 1e-1) };
        let name = |what: &str| format!("{what}, nodes {step_dbar} dbar apart, against gsw and quadrature");
        Residuals::new(
            &name("sound speed in the column"),
            rows().map(|i| sound.sound_speed_m_s(column.depth_m(p[i])) - c[i]),
        )
        .within(of_speed, "m/s");
        Residuals::new(&name("travel time of sound"), rows().map(|i| sound.travel_time_s(z[i]) - time[i]))
            .within(of_time, "s");
        Residuals::new(&name("mean sound speed"), rows().map(|i| sound.mean_sound_speed_m_s(z[i]) - mean[i]))
            .within(of_speed, "m/s");
    }
}

/// A gap above the first sample and a surface below the standard pressure do not disturb the start.
#[test]
fn sound_starts_at_the_surface() {
    let water = column_of(2_000.0, 10.0, hadal_salinity, hadal_theta);
    for surface_dbar in [-0.2, 0.3, 12.0] {
        let profile = water.profile(surface_dbar, &WaterShift::default()).expect("a profile");
        let column = Column::integrate(&profile, surface_dbar, &LocalGravity::normal(-23.2));
        let sound = SoundColumn::new(&water, surface_dbar, &column);
        assert_eq!(sound.travel_time_s(0.0), 0.0);
        assert_eq!(sound.travel_time_s(-1.0), 0.0);
        let z = column.depth_m(1_000.0);
        let c = sound.mean_sound_speed_m_s(z);
        assert!((1_480.0..1_545.0).contains(&c), "{surface_dbar}: {c}");
    }
}
