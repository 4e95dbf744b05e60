use super::*;
use proptest::prelude::*;

/// Ratios of the four nodes of a cell at a level, as stored.
fn nodes(atlas: &Atlas, south: usize, west: usize, level: usize) -> [Option<f64>; 4] {
    let grid = &atlas.grid;
    [(0, 0), (0, 1), (1, 0), (1, 1)].map(|(n, e)| {
        let steps = grid.steps[(level * grid.parallels + south + n) * grid.meridians + west + e];
        (steps != MISSING).then(|| f64::from(steps) * grid.step)
    })
}

#[test]
#[allow(clippy::print_stdout)] // a measured figure, seen with --nocapture
fn unpacking_costs_milliseconds() {
    let start = std::time::Instant::now();
    let atlas = Atlas::from_packed(PACKED).unwrap();
    let elapsed_ms = start.elapsed().as_secs_f64() * 1e3;
    println!("VALIDATION | unpacking the atlas | 1 | {elapsed_ms:.1} ms");
    // Far above what it takes (3 ms), so that a busy machine does not fail it; a slip to seconds would.
    assert!(elapsed_ms < 200.0, "{elapsed_ms} ms");
    assert_eq!(atlas, *Atlas::global());
}

#[test]
fn levels_increase_from_the_surface() {
    let p = Atlas::global().pressure_dbar;
    assert_eq!((p[0], p[LEVELS - 1]), (0.0, 6131.0));
    assert!(p.windows(2).all(|w| w[0] < w[1]));
}

#[test]
fn longitude_conventions_agree() {
    let atlas = Atlas::global();
    assert_eq!(atlas.column(-31.5, -176.25), atlas.column(-31.5, 183.75));
    assert_eq!(atlas.column(-31.5, -180.0), atlas.column(-31.5, 180.0));
    assert_eq!(atlas.column(-31.5, 0.0), atlas.column(-31.5, 360.0));
    assert_eq!(atlas.column(-31.5, 0.0), atlas.column(-31.5, -360.0));
    assert_eq!(atlas.column(-31.5, 0.0), atlas.column(-31.5, -1e-18));
    assert!(atlas.column(-31.5, 0.0).is_some());
}

#[test]
fn no_coverage_is_told() {
    let atlas = Atlas::global();
    for (latitude, longitude) in [(50.0, 90.0), (25.0, 25.0), (-88.0, 10.0), (-86.1, 200.0)] {
        assert_eq!(atlas.column(latitude, longitude), None, "{latitude} {longitude}");
    }
    let (nan, inf) = (f64::NAN, f64::INFINITY);
    for (latitude, longitude) in [(90.1, 0.0), (nan, 0.0), (0.0, nan), (0.0, inf), (-inf, 0.0)] {
        assert_eq!(atlas.column(latitude, longitude), None, "{latitude} {longitude}");
    }
    assert!(atlas.column(90.0, 12.0).is_some(), "the pole is in the Arctic Ocean");
}

#[test]
fn the_vertical_is_linear_between_levels_and_held_beyond() {
    let column = Atlas::global().column(-30.2, 202.7).unwrap();
    let (p, r) = (column.levels_dbar(), column.ratios());
    for k in 0..LEVELS {
        assert!((column.anomaly_ratio(p[k]) - r[k]).abs() < 1e-18);
    }
    let middle = column.anomaly_ratio(0.5 * (p[20] + p[21]));
    assert!((middle - 0.5 * (r[20] + r[21])).abs() < 1e-18);
    assert_eq!(column.anomaly_ratio(-3.0), r[0]);
    assert_eq!(column.anomaly_ratio(11_000.0), r[LEVELS - 1]);
    assert!(column.anomaly_ratio(f64::NAN).is_nan());
}

#[test]
fn the_isthmus_is_not_crossed() {
    // The deep Pacific is anomalous, the deep Caribbean hardly: no position on either side takes from the other. At
    // 1010 dbar the nodes 4 deg off the isthmus on either side are apart by more than a factor of two.
    let atlas = Atlas::global();
    let at = |latitude, longitude| atlas.column(latitude, longitude).unwrap().anomaly_ratio(1010.0);
    let (pacific, caribbean) = (at(6.0, 276.0), at(14.0, 280.0));
    assert!(pacific > 2.0 * caribbean);
    // both sides of the line at 280 deg, where it stands at 8.9 deg
    let (south, north) = (at(8.8, 280.0), at(9.0, 280.0));
    assert!(south > 2.0 * north, "{south:e} {north:e}");
}

proptest! {
    #[test]
    fn between_nodes_stays_between_their_values(latitude in -78.0..90.0f64, longitude in 0.0..360.0f64, level in 0..LEVELS) {
        let atlas = Atlas::global();
        let (south, west) = (((latitude - SOUTH_DEG) / 4.0) as usize, (longitude / 4.0) as usize);
        let around = nodes(atlas, south.min(43), west.min(89), level);
        let levels = atlas.grid.cell_levels[south.min(43) * 90 + west.min(89)];
        prop_assume!(around.iter().any(Option::is_some) && level < levels.into());
        prop_assume!(!regions::near_isthmus(latitude, longitude));
        let values = || around.iter().flatten().copied();
        let (low, high) = (values().fold(f64::INFINITY, f64::min), values().fold(0.0, f64::max));
        let here = atlas.column(latitude, longitude).unwrap().ratios()[level];
        prop_assert!(low - 1e-15 <= here && here <= high + 1e-15, "{low:e} {here:e} {high:e}");
    }

    #[test]
    fn continuous_across_the_date_line(latitude in -78.0..66.0f64, pressure in 0.0..6000.0f64) {
        // Where the two nodes on the meridian have values and neither cell ends above: a missing node is replaced by
        // another mean in each of its cells, and there the published interpolation has a step.
        let atlas = Atlas::global();
        let south = ((latitude - SOUTH_DEG) / 4.0) as usize;
        let below = atlas.pressure_dbar.partition_point(|&p| p <= pressure);
        let deep = |west: usize| usize::from(atlas.grid.cell_levels[south * 90 + west]) > below;
        prop_assume!(deep(44) && deep(45));
        for level in [below - 1, below] {
            let [sw, _, nw, _] = nodes(atlas, south, 45, level);
            prop_assume!(sw.is_some() && nw.is_some());
        }
        let at = |longitude| atlas.column(latitude, longitude).unwrap().anomaly_ratio(pressure);
        let (west, east) = (at(180.0 - 1e-7), at(-180.0 + 1e-7));
        prop_assert!((west - east).abs() < 1e-10, "{west:e} {east:e}");
    }

    #[test]
    fn continuous_across_meridians_of_nodes_at_the_surface(latitude in -78.0..90.0f64, meridian in 0..90usize) {
        // At the surface a node is missing in all of its cells or in none, but a missing one differs from cell to
        // cell: the ratio is continuous where the two nodes on the meridian are there.
        let atlas = Atlas::global();
        let south = (((latitude - SOUTH_DEG) / 4.0) as usize).min(43);
        let longitude = 4.0 * meridian as f64;
        let [sw, _, nw, _] = nodes(atlas, south, meridian, 0);
        prop_assume!(sw.is_some() && nw.is_some() && !regions::near_isthmus(latitude, longitude));
        let at = |longitude| atlas.column(latitude, longitude).map(|c| c.anomaly_ratio(0.0));
        if let (Some(west), Some(east)) = (at(longitude - 1e-7), at(longitude + 1e-7)) {
            prop_assert!((west - east).abs() < 1e-9, "{west:e} {east:e}");
        }
    }
}
