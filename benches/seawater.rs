//! What a density costs: `cargo bench --bench seawater`. The figures are in `docs/performance.md`.

use divan::{Bencher, black_box, counter::ItemsCount};
use seaplumb::column::{Salt, Water, WaterNode, WaterShift};
use seaplumb::seawater::*;

const SAMPLES: u32 = 11_000;

fn main() {
    divan::main();
}

/// `(S_A, t, p)` down a warm ocean, one level per decibar.
fn levels() -> Vec<(f64, f64, f64)> {
    let level = |i: u32| {
        let p = f64::from(i);
        (34.5 + 0.3 * (-p / 500.0).exp(), 1.5 + 26.0 * (-p / 400.0).exp(), p)
    };
    (0..SAMPLES).map(level).collect()
}

/// Time per item is that of one call.
fn each(bencher: Bencher, levels: &[(f64, f64, f64)], f: impl Fn(f64, f64, f64) -> f64 + Sync) {
    bencher
        .counter(ItemsCount::new(levels.len()))
        .bench(|| black_box(levels).iter().map(|&(a, t, p)| f(a, t, p)).sum::<f64>());
}

#[divan::bench]
fn specific_volume_gibbs(bencher: Bencher) {
    each(bencher, &levels(), specific_volume_m3_kg);
}

#[divan::bench]
fn specific_volume_polynomial(bencher: Bencher) {
    each(bencher, &levels(), |s, t, p| EquationOfState::Polynomial.specific_volume_m3_kg(s, t, p));
}

/// The polynomial alone, Conservative Temperature being known.
#[divan::bench]
fn specific_volume_polynomial_of_conservative_temperature(bencher: Bencher) {
    each(bencher, &levels(), polynomial_specific_volume_m3_kg);
}

#[divan::bench]
fn density_eos80(bencher: Bencher) {
    each(bencher, &levels(), eos80_density_kg_m3);
}

#[divan::bench]
fn conservative_temperature(bencher: Bencher) {
    each(bencher, &levels(), conservative_temperature_degc);
}

#[divan::bench]
fn potential_temperature(bencher: Bencher) {
    each(bencher, &levels(), potential_temperature_degc);
}

#[divan::bench]
fn entropy(bencher: Bencher) {
    each(bencher, &levels(), entropy_j_kg_k);
}

#[divan::bench]
fn sound_speed(bencher: Bencher) {
    each(bencher, &levels(), sound_speed_m_s);
}

#[divan::bench]
fn practical_salinity_from_conductivity(bencher: Bencher) {
    let levels: Vec<_> = levels().into_iter().map(|(s, t, p)| (conductivity_ms_cm(s, t, p), t, p)).collect();
    each(bencher, &levels, practical_salinity);
}

#[divan::bench]
fn conductivity_from_practical_salinity(bencher: Bencher) {
    each(bencher, &levels(), conductivity_ms_cm);
}

/// A whole profile from conductivity: salinity, composition, specific volume; time per level.
#[divan::bench(args = [EquationOfState::Gibbs, EquationOfState::Polynomial])]
fn profile(bencher: Bencher, equation_of_state: EquationOfState) {
    let node = |(s, t, p): (f64, f64, f64)| WaterNode {
        pressure_dbar: p,
        temperature_degc: t,
        salt: conductivity_ms_cm(s, t, p),
    };
    let nodes = levels().into_iter().map(node).collect();
    let Ok(water) = Water::new(nodes, Salt::Conductivity, Composition::Reference, 0.0) else { return };
    let water = water.with_equation_of_state(equation_of_state);
    bencher
        .counter(ItemsCount::new(SAMPLES as usize))
        .bench(|| black_box(&water).profile(0.0, &WaterShift::default()));
}
