//! The water column against independent integrations with the reference TEOS-10 library.

mod support;

use seaplumb::column::{Column, Profile, Salt, Water, WaterNode, WaterShift};
use seaplumb::depth::{Model, Place, Shift, ladder, unesco_44_depth_m};
use seaplumb::gravity::{
    ConstantGravity, Gravity, LinearGravity, LocalGravity, NormalGravity, SurfaceGravity,
};
use seaplumb::seawater::{Composition, specific_volume_m3_kg};
use std::collections::BTreeMap;
use support::water::{column_of, hadal_salinity, hadal_theta};
use support::{Residuals, Table};

/// Gravity of the reference library (Saunders 1981; TEOS-10 manual, appendix D.3), which is not ours:
/// `g = 9.780 327 (1 + 5.2792e-3 s + 2.32e-5 s^2) (1 + 2.26e-7 z)`.
fn library_gravity(latitude_deg: f64) -> LinearGravity {
    let s = latitude_deg.to_radians().sin().powi(2);
    let surface_m_s2 = 9.780_327 * (1.0 + (5.279_2e-3 + 2.32e-5 * s) * s);
    LinearGravity { surface_m_s2, gradient_s2: 2.26e-7 * surface_m_s2 }
}

/// The three real check casts of gsw 3.6.23, to 6 131 dbar.
#[test]
fn check_casts_of_the_reference_library() {
    let table = Table::reference("check_casts.csv");
    let cast = table.numbers("cast");
    let columns: Vec<Vec<f64>> = [
        "pressure_dbar",
        "practical_salinity",
        "temperature_c",
        "latitude_deg",
        "depth_v_linear_m",
        "depth_exact_1dbar_m",
        "depth_gsw_linear_m",
        "depth_gsw_mrst_m",
    ]
    .iter()
    .map(|name| table.numbers(name))
    .collect();
    let (mut same_gravity, mut filled, mut dynamic_height, mut own_gravity) =
        (vec![], vec![], vec![], vec![]);
    for number in [1.0, 2.0, 3.0] {
        let rows: Vec<usize> = (0..table.len()).filter(|&i| cast[i] == number).collect();
        let pick = |c: usize| rows.iter().map(|&i| columns[c][i]).collect::<Vec<f64>>();
        let (p, s, t, latitude) = (pick(0), pick(1), pick(2), columns[3][rows[0]]);
        let volume = |i: usize| {
            specific_volume_m3_kg(Composition::Reference.absolute_salinity_g_kg(s[i], p[i]), t[i], p[i])
        };
        let profile = Profile::new(p.clone(), (0..p.len()).map(volume).collect()).expect("a profile");
        let theirs = library_gravity(latitude);
        let column = Column::integrate(&profile, 0.0, &theirs);
        same_gravity.extend(p.iter().zip(pick(4)).map(|(&p, z)| column.depth_m(p) - z));

        // Bottles up to 259 dbar apart: salinity and temperature between them, not specific volume, are what is interpolated.
        let level = |i: usize| WaterNode { pressure_dbar: p[i], temperature_degc: t[i], salt: s[i] };
        let water =
            Water::new((0..p.len()).map(level).collect(), Salt::Practical, Composition::Reference, 0.0)
                .expect("water");
        let bridged = water.profile(0.0, &WaterShift::default()).expect("a profile");
        let column = Column::integrate(&bridged, 0.0, &theirs);
        filled.extend(p.iter().zip(pick(5)).map(|(&p, z)| column.depth_m(p) - z));
        dynamic_height.extend(p.iter().zip(pick(6)).map(|(&p, z)| column.depth_m(p) - z));
        let ours = Column::integrate(&bridged, 0.0, &LocalGravity::normal(latitude));
        own_gravity.extend(p.iter().zip(pick(7)).map(|(&p, z)| ours.depth_m(p) - z));
    }
    Residuals::new("check casts, gravity of gsw, same profile, against gsw", same_gravity.into_iter())
        .within(1e-3, "m");
    Residuals::new(
        "check casts, gravity of gsw, between bottles, against gsw in 1 dbar steps",
        filled.into_iter(),
    )
    .within(1e-3, "m");
    Residuals::new("check casts, gravity of gsw, against gsw dynamic height", dynamic_height.into_iter())
        .within(1e-3, "m");
    Residuals::new("check casts, our gravity, against gsw dynamic height", own_gravity.into_iter())
        .within(0.1, "m");
}

/// Every row of the table that a depth formula of the report, or the exact density of the standard ocean over its gravity, can
/// give. The report's own check value is printed; the rest is the `seawater` 3.3.5 library, which is that report's code.
#[test]
fn unesco_44() {
    let table = Table::reference("unesco44_depth.csv");
    let (p, latitude) = (table.numbers("pressure_dbar"), table.numbers("latitude_deg"));
    let (printed, library) = (table.numbers("depth_printed_m"), table.numbers("depth_seawater_m"));
    let formula = |i: usize| unesco_44_depth_m(p[i], latitude[i]);
    Residuals::new(
        "UNESCO 44 depth, printed check value 9 712.653 m",
        (0..table.len()).filter(|&i| printed[i].is_finite()).map(|i| formula(i) - printed[i]),
    )
    .within(5e-4, "m");
    Residuals::new(
        "UNESCO 44 depth formula against seawater",
        (0..table.len()).map(|i| formula(i) - library[i]),
    )
    .within(1e-8, "m");

    // The same gravity with TEOS-10 density, 0 degC in situ: 34 mm at 10 000 dbar are EOS-80's.
    let exact = table.numbers("depth_teos10_m");
    let nodes: Vec<f64> = (0..=11_500).map(f64::from).collect();
    let v = nodes.iter().map(|&p| specific_volume_m3_kg(35.165_04, 0.0, p)).collect();
    let profile = Profile::new(nodes, v).expect("a profile");
    let residual = |i: usize| {
        let x = latitude[i].to_radians().sin().powi(2);
        let surface = 9.780_318 * (1.0 + (5.278_8e-3 + 2.36e-5 * x) * x);
        // The report divides Phi by g(phi) + gamma p / 2, gamma = 2.184e-6 m/s2 per dbar: its mean gravity, linear in pressure.
        let phi = Column::integrate(&profile, 0.0, &ConstantGravity { gravity_m_s2: 1.0 }).depth_m(p[i]);
        phi / (surface + 0.5 * 2.184e-6 * p[i]) - exact[i]
    };
    Residuals::new("TEOS-10 standard ocean over the gravity of UNESCO 44", (0..table.len()).map(residual))
        .within(1e-3, "m");
}

/// The hadal column of `docs/method.md`: 23.2 degS, 11 000 dbar.
struct Hadal {
    model: Model,
}

const HADAL_DBAR: f64 = 11_000.0;

impl Hadal {
    fn new(step_dbar: f64) -> Self {
        let water = column_of(HADAL_DBAR, step_dbar, hadal_salinity, hadal_theta);
        let place = Place {
            latitude_deg: -23.2,
            surface_dbar: 0.0,
            surface_gravity: SurfaceGravity::Disturbance(0.0),
            gradient_eotvos: 0.0,
            geoid_height_m: 0.0,
            water_level_m: 0.0,
            reference_below_sensor_m: 0.0,
        };
        Self { model: Model { water, place, same_sensor: true } }
    }

    fn depth(&self, shift: &Shift) -> f64 {
        self.model.depths_m(&[HADAL_DBAR], shift).expect("a column")[0]
    }

    fn under(&self, gravity: &dyn Gravity) -> f64 {
        Column::integrate(&self.model.profile().expect("a profile"), 0.0, gravity).depth_m(HADAL_DBAR)
    }
}

fn orders_of_magnitude() -> BTreeMap<(String, String), f64> {
    let table = Table::reference("orders_of_magnitude.csv");
    let (name, composition, value) =
        (table.text("name"), table.text("composition"), table.numbers("value_m"));
    (0..table.len()).map(|i| ((name[i].to_string(), composition[i].to_string()), value[i])).collect()
}

/// Depths of the hadal column, step by step, against gsw 3.6.23 with numpy, 0.5 dbar steps; the same figures that
/// `docs/method.md` quotes, to the 0.1 m to which the trade quotes them, and far closer.
#[test]
fn hadal_depths() {
    let reference = orders_of_magnitude();
    let hadal = Hadal::new(1.0);
    let standard = Water::standard_ocean(HADAL_DBAR).profile(0.0, &WaterShift::default()).expect("a profile");
    let normal = LocalGravity::normal(-23.2);
    let of_latitude = ConstantGravity { gravity_m_s2: NormalGravity::new(-23.2).on_ellipsoid_m_s2() };
    let nominal = HADAL_DBAR * 1e4 / (1028.0 * 9.81);
    let standard_depth = Column::integrate(&standard, 0.0, &normal).depth_m(HADAL_DBAR);
    let depths = [
        ("nominal_density", "none", nominal, 10_907.6),
        ("standard_ocean_potential_zero", "none", standard_depth, 10_668.9),
        ("insitu_density", "reference", hadal.under(&ConstantGravity { gravity_m_s2: 9.81 }), 10_664.3),
        ("latitude_gravity", "reference", hadal.under(&of_latitude), 10_687.9),
        ("full", "reference", hadal.depth(&Shift::default()), 10_675.0),
        ("equator", "reference", hadal.under(&LocalGravity::normal(0.0)), f64::NAN),
        ("pole", "reference", hadal.under(&LocalGravity::normal(90.0)), f64::NAN),
    ];
    let mut residuals = Vec::new();
    for (name, composition, ours, quoted) in depths {
        let theirs = reference[&(name.to_string(), composition.to_string())];
        residuals.push(ours - theirs);
        // The quoted figures were computed with the composition of the place, 0.068 m less.
        assert!(quoted.is_nan() || (ours - quoted).abs() < 0.1, "{name}: {ours} against {quoted} quoted");
    }
    Residuals::new("hadal column, step by step, against gsw", residuals.into_iter()).within(1e-3, "m");
}

/// Every sensitivity of the hadal column against the same independent calculation.
#[test]
fn hadal_sensitivities() {
    let reference = orders_of_magnitude();
    let hadal = Hadal::new(1.0);
    let full = hadal.depth(&Shift::default());
    let water = |water| Shift { water, ..Shift::default() };
    let w = WaterShift::default();
    let shifts = [
        ("disturbance_minus_300_mgal", Shift { surface_gravity_mgal: -300.0, ..Shift::default() }),
        ("gradient_minus_300_eotvos", Shift { gradient_eotvos: -300.0, ..Shift::default() }),
        ("geoid_plus_50_m", Shift { geoid_height_m: 50.0, ..Shift::default() }),
        ("latitude_plus_0_01_deg", Shift { latitude_deg: 0.01, ..Shift::default() }),
        ("air_pressure_plus_10_hpa", Shift { surface_dbar: 0.1, ..Shift::default() }),
        ("salinity_plus_0_01", water(WaterShift { salt: 0.01, ..w })),
        ("temperature_plus_0_01_c", water(WaterShift { temperature_degc: 0.01, ..w })),
        ("absolute_salinity_plus_0_005", water(WaterShift { absolute_salinity_g_kg: 0.005, ..w })),
        ("specific_volume_plus_10_ppm", water(WaterShift { volume_ppm: 10.0, volume_ppm_beyond: 10.0, ..w })),
    ];
    let residuals = shifts.iter().map(|(name, shift)| {
        let theirs = reference[&(name.to_string(), "reference".to_string())];
        hadal.depth(shift) - full - theirs
    });
    Residuals::new("sensitivities of the hadal column against gsw", residuals).within(1e-4, "m");
    let one_dbar = hadal.model.column().expect("a column").depth_m(HADAL_DBAR + 1.0) - full;
    let theirs = reference[&("pressure_plus_1_dbar".to_string(), "reference".to_string())];
    assert!((one_dbar - theirs).abs() < 1e-4, "1 dbar: {one_dbar} against {theirs}");
}

/// Steps that real profiles have do not matter.
#[test]
fn steps_of_the_profile() {
    let fine = Hadal::new(0.5).depth(&Shift::default());
    let residuals = [1.0, 2.0, 10.0].map(|step| Hadal::new(step).depth(&Shift::default()) - fine);
    Residuals::new("hadal column in steps of 1, 2 and 10 dbar against 0.5 dbar", residuals.into_iter())
        .within(1e-3, "m");
}

/// Invariances: the ladder ends in the full answer, north is south, no pressure is no depth.
#[test]
fn invariances() {
    let mut hadal = Hadal::new(10.0);
    let steps = ladder(&hadal.model, HADAL_DBAR).expect("a ladder");
    let full = hadal.depth(&Shift::default());
    assert_eq!(steps.len(), 8);
    assert_eq!(steps[7].depth_m, full);
    // p / (rho g) by hand: 11 000e4 / (1025 x 9.806 65).
    assert!((steps[0].depth_m - 10_943.30).abs() < 0.01, "{}", steps[0].depth_m);
    let south = full;
    hadal.model.place.latitude_deg = 23.2;
    assert_eq!(hadal.depth(&Shift::default()), south);
    assert_eq!(hadal.model.column().expect("a column").depth_m(0.0), 0.0);
    // Water level and lever arm act one to one.
    hadal.model.place.water_level_m = 0.5;
    hadal.model.place.reference_below_sensor_m = 0.85;
    assert!((hadal.depth(&Shift::default()) - south - 0.35).abs() < 1e-9);
}
