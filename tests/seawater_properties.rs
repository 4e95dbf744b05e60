//! What must hold of seawater at every point, not only at those of a table.

use proptest::prelude::*;
use seaplumb::seawater::*;

/// Pascal in a decibar, kelvin at 0 degC.
const PA_PER_DBAR: f64 = 1e4;

/// Temperature in degC after adiabatic compression from one pressure to another.
fn moved(sa: f64, t: f64, from_dbar: f64, to_dbar: f64) -> f64 {
    in_situ_temperature_degc(sa, potential_temperature_degc(sa, t, from_dbar), to_dbar)
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(2_000))]

    #[test]
    fn density_rises_with_salt(sa in 0.0..41.0_f64, more in 1e-3..1.0_f64, t in -2.0..40.0_f64, p in 0.0..10_000.0_f64) {
        for eos in [EquationOfState::Gibbs, EquationOfState::Polynomial] {
            prop_assert!(eos.specific_volume_m3_kg(sa + more, t, p) < eos.specific_volume_m3_kg(sa, t, p));
        }
        prop_assert!(eos80_density_kg_m3(sa + more, t, p) > eos80_density_kg_m3(sa, t, p));
    }

    #[test]
    fn density_rises_with_pressure(sa in 0.0..42.0_f64, t in -2.0..40.0_f64, p in 0.0..9_990.0_f64, more in 1e-2..10.0_f64) {
        for eos in [EquationOfState::Gibbs, EquationOfState::Polynomial] {
            prop_assert!(eos.specific_volume_m3_kg(sa, t, p + more) < eos.specific_volume_m3_kg(sa, t, p));
        }
        prop_assert!(eos80_density_kg_m3(sa, t, p + more) > eos80_density_kg_m3(sa, t, p));
    }

    /// `c^2 = (dp / drho)` at constant entropy, by a central difference over 40 dbar.
    #[test]
    fn sound_is_adiabatic_compression(sa in 0.0..42.0_f64, t in -2.0..40.0_f64, p in 20.0..9_980.0_f64) {
        let h = 20.0;
        let rho = |q: f64| density_kg_m3(sa, moved(sa, t, p, q), q);
        let slope = (rho(p + h) - rho(p - h)) / (2.0 * h * PA_PER_DBAR);
        let c = sound_speed_m_s(sa, t, p);
        // The third derivative of density over 20 dbar is 1e-7 of the first; rounding is 1e-11.
        prop_assert!((c * c * slope - 1.0).abs() < 1e-6, "{} against {}", c, slope.recip().sqrt());
    }

    #[test]
    fn entropy_is_kept_on_the_way(sa in 0.0..42.0_f64, t in -2.0..40.0_f64, p in 0.0..11_500.0_f64) {
        let there = entropy_j_kg_k(sa, t, p);
        let at_surface = entropy_j_kg_k(sa, potential_temperature_degc(sa, t, p), 0.0);
        prop_assert!((there - at_surface).abs() < 1e-10, "{} against {}", there, at_surface);
        prop_assert!((moved(sa, t, p, p) - t).abs() < 1e-11);
    }

    /// Both routes to Conservative Temperature: over the potential temperature, and in one go.
    #[test]
    fn conservative_temperature_is_potential_enthalpy(sa in 0.0..42.0_f64, t in -2.0..40.0_f64, p in 0.0..11_500.0_f64) {
        let theta = potential_temperature_degc(sa, t, p);
        let ct = potential_enthalpy_j_kg(sa, theta) / 3_991.867_957_119_63;
        prop_assert!((conservative_temperature_degc(sa, t, p) - ct).abs() < 1e-11);
    }

    #[test]
    fn salinity_returns(sp in 2e-3..42.0_f64, t in -2.0..35.0_f64, p in 0.0..10_000.0_f64) {
        let back = practical_salinity(conductivity_ms_cm(sp, t, p), t, p);
        prop_assert!((back - sp).abs() < 1e-13 * sp.max(1.0), "{} came back as {}", sp, back);
    }

    /// The same below and around 2, where the scale gives way to its extension.
    #[test]
    fn low_salinity_returns(sp in 1e-4..2.1_f64, t in -2.0..35.0_f64, p in 0.0..10_000.0_f64) {
        let back = practical_salinity(conductivity_ms_cm(sp, t, p), t, p);
        prop_assert!((back - sp).abs() < 1e-13, "{} came back as {}", sp, back);
    }

    #[test]
    fn conductivity_rises_with_salinity(sp in 1e-3..41.0_f64, more in 1e-4..1.0_f64, t in -2.0..35.0_f64, p in 0.0..10_000.0_f64) {
        prop_assert!(conductivity_ms_cm(sp + more, t, p) > conductivity_ms_cm(sp, t, p));
    }

    /// Nothing that a sensor may send hangs or panics.
    #[test]
    fn any_number_has_an_answer(a in any::<f64>(), t in any::<f64>(), p in any::<f64>()) {
        let all = [
            conductivity_ms_cm(a, t, p),
            practical_salinity(a, t, p),
            conservative_temperature_degc(a, t, p),
            potential_temperature_degc(a, t, p),
            sound_speed_m_s(a, t, p),
            eos80_density_kg_m3(a, t, p),
        ];
        prop_assert!(!all[0].is_finite() || all[0] >= 0.0);
        prop_assert!(!all[1].is_finite() || all[1] >= 0.0);
    }
}

#[test]
fn no_salt_conducts_nothing() {
    assert_eq!(conductivity_ms_cm(0.0, 10.0, 5.0), 0.0);
    assert_eq!(conductivity_ms_cm(-1.0, 10.0, 5.0), 0.0);
    assert!(conductivity_ms_cm(f64::NAN, 10.0, 5.0).is_nan());
    assert!(conductivity_ms_cm(35.0, f64::INFINITY, 5.0).is_nan());
}
