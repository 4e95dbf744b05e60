//! The global atlas of the Absolute Salinity Anomaly Ratio `R_delta`.
//!
//! McDougall, Jackett, Millero, Pawlowicz and Barker (2012), *A global algorithm for estimating Absolute Salinity*,
//! Ocean Science 8, 1123-1134 (TEOS-10 manual, appendix A.5): nodes every 4 deg of longitude from 0 to 360 and of
//! latitude from 86 S to 90 N, 45 levels of sea pressure from 0 to 6131 dbar. In between, `R_delta` is bilinear in
//! longitude and latitude on each level, then linear in pressure, with these rules:
//!
//! - a node that is missing (land, or deeper than the sea floor there) is replaced by the mean of the nodes of the
//!   cell that are not;
//! - near the Central American isthmus a node in the other ocean counts as missing;
//! - below the deepest level of a cell, and where no node of it has a value, the level above is held.
//!
//! The nodes were sampled from the reference TEOS-10 library by `data/make_atlas.py`; the layout of
//! `data/composition-atlas.gz` is described in `file.rs`, its licence is in `data/LICENSE-atlas.txt`. Unpacked once,
//! when first asked for.
//!
//! What in the published atlas may surprise:
//!
//! - The Black Sea north of 42 N, most of the Red Sea and the Persian Gulf are not covered.
//! - Where a node is missing, `R_delta` steps from cell to cell, because its cells replace it by different means.
//! - The meridians of 0 and 360 deg are kept apart, and between 58 S and 26 S from 1416 to 2279 dbar the former lacks
//!   values that the latter has: a step at Greenwich of up to 4.2e-5 (0.0015 g/kg), kept as it is.
//! - In a few cells, on land, beside the isthmus and in the southern Red Sea, the reference library goes from the
//!   deepest value to 0 within one level; here that value is held, as everywhere else.

mod file;
mod regions;

use file::{Grid, MISSING, decode};
use std::sync::OnceLock;

/// The atlas as it is stored.
static PACKED: &[u8] = include_bytes!("../../../data/composition-atlas.gz");

/// Levels of the atlas.
const LEVELS: usize = 45;
/// Distance of neighbouring nodes in degrees.
const SPACING_DEG: f64 = 4.0;
/// Latitude of the southernmost nodes in degrees.
const SOUTH_DEG: f64 = -86.0;
/// Latitude of the northernmost nodes in degrees.
const NORTH_DEG: f64 = 90.0;

/// How far the composition of the salt is known at a position.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Coverage {
    /// From the global atlas.
    Atlas,
    /// By the formula for the Baltic Sea.
    Baltic,
    /// Not at all: no node of the atlas around the position is in the sea, or the position is none.
    None,
}

/// The global atlas of `R_delta`.
#[derive(Debug, Clone, PartialEq)]
pub struct Atlas {
    grid: Grid,
    pressure_dbar: [f64; LEVELS],
}

/// `R_delta` along the vertical of one position, at the levels of the atlas.
#[derive(Debug, Clone, PartialEq)]
pub struct AtlasColumn {
    pressure_dbar: [f64; LEVELS],
    ratio: [f64; LEVELS],
    deepest: usize,
}

impl Atlas {
    /// The atlas that comes with the program; unpacked at the first call, which takes about
    /// 3 ms (test `unpacking_costs_milliseconds`).
    pub fn global() -> &'static Atlas {
        static ATLAS: OnceLock<Atlas> = OnceLock::new();
        // The file is part of the program and a test holds it against its checksum: this cannot fail where the tests
        // passed.
        ATLAS.get_or_init(|| Atlas::from_packed(PACKED).expect("the embedded atlas is whole"))
    }

    fn from_packed(packed: &[u8]) -> Result<Self, &'static str> {
        let grid = decode(packed)?;
        let pressure_dbar =
            grid.pressure_dbar.as_slice().try_into().map_err(|_| "it has another number of levels")?;
        let spans = |nodes: usize, from: f64, to: f64| (nodes - 1) as f64 * SPACING_DEG == to - from;
        if !spans(grid.meridians, 0.0, 360.0) || !spans(grid.parallels, SOUTH_DEG, NORTH_DEG) {
            return Err("it covers another area");
        }
        Ok(Self { grid, pressure_dbar })
    }

    /// `R_delta` below a position, `latitude_deg` north positive, `longitude_deg` east positive in either convention
    /// (-180 to 180 or 0 to 360).
    ///
    /// `None` where the atlas has nothing to say: no node of the cell is in the sea (inland, the northern Black Sea),
    /// south of 86 S, or the position is not finite or no latitude. The Baltic Sea has some nodes, but a formula of
    /// its own ([`Composition::at`](super::Composition::at) chooses).
    pub fn column(&self, latitude_deg: f64, longitude_deg: f64) -> Option<AtlasColumn> {
        let longitude_deg = eastward_deg(longitude_deg)?;
        if !(SOUTH_DEG..=NORTH_DEG).contains(&latitude_deg) {
            return None;
        }
        let cell = self.cell(latitude_deg, longitude_deg);
        let levels = usize::from(self.grid.cell_levels[cell.south * (self.grid.meridians - 1) + cell.west]);
        let mut ratio = [f64::NAN; LEVELS];
        let mut held = None;
        let mut deepest = 0;
        for (level, slot) in ratio.iter_mut().enumerate() {
            if let Some(here) = (level < levels).then(|| self.bilinear(&cell, level)).flatten() {
                held = Some(here);
                deepest = level;
            }
            *slot = held?;
        }
        Some(AtlasColumn { pressure_dbar: self.pressure_dbar, ratio, deepest })
    }

    /// The cell around a position inside the atlas; a position on a meridian or parallel of nodes belongs to the cell
    /// in the east and north.
    fn cell(&self, latitude_deg: f64, longitude_deg: f64) -> Cell {
        let place = |distance_deg: f64, nodes: usize| {
            let along = distance_deg / SPACING_DEG;
            let index = (along as usize).min(nodes - 2);
            (index, along - index as f64)
        };
        let (west, eastward) = place(longitude_deg, self.grid.meridians);
        let (south, northward) = place(latitude_deg - SOUTH_DEG, self.grid.parallels);
        let corners = [(south, west), (south, west + 1), (south + 1, west), (south + 1, west + 1)];
        let parted = regions::near_isthmus(latitude_deg, longitude_deg);
        let here = regions::on_caribbean_side(latitude_deg, longitude_deg);
        let same_ocean = corners.map(|(j, i)| {
            let (node_latitude, node_longitude) =
                (SOUTH_DEG + j as f64 * SPACING_DEG, i as f64 * SPACING_DEG);
            !parted || regions::on_caribbean_side(node_latitude, node_longitude) == here
        });
        let weight = [
            (1.0 - eastward) * (1.0 - northward),
            eastward * (1.0 - northward),
            (1.0 - eastward) * northward,
            eastward * northward,
        ];
        let node = corners.map(|(j, i)| j * self.grid.meridians + i);
        Cell { south, west, node, weight, same_ocean }
    }

    /// `R_delta` on one level; `None` when no node of the cell has a value there.
    fn bilinear(&self, cell: &Cell, level: usize) -> Option<f64> {
        let plane = self.grid.parallels * self.grid.meridians;
        let value = |corner: usize| {
            let steps = self.grid.steps[level * plane + cell.node[corner]];
            (cell.same_ocean[corner] && steps != MISSING).then(|| f64::from(steps) * self.grid.step)
        };
        let values = [0, 1, 2, 3].map(value);
        let known = values.iter().flatten().count();
        if known == 0 {
            return None;
        }
        let mean = values.iter().flatten().sum::<f64>() / known as f64;
        Some(values.iter().zip(cell.weight).map(|(v, weight)| v.unwrap_or(mean) * weight).sum())
    }
}

/// Four nodes around a position, their weights, and whether they lie in its ocean.
struct Cell {
    south: usize,
    west: usize,
    node: [usize; 4],
    weight: [f64; 4],
    same_ocean: [bool; 4],
}

impl AtlasColumn {
    /// `R_delta` at sea pressure `pressure_dbar`, linear between the levels; above the first and below the last it is
    /// held.
    pub fn anomaly_ratio(&self, pressure_dbar: f64) -> f64 {
        let p = pressure_dbar.clamp(self.pressure_dbar[0], self.pressure_dbar[LEVELS - 1]);
        let below = self.pressure_dbar.partition_point(|&level| level <= p).clamp(1, LEVELS - 1);
        let (p0, p1) = (self.pressure_dbar[below - 1], self.pressure_dbar[below]);
        let (r0, r1) = (self.ratio[below - 1], self.ratio[below]);
        r0 + (r1 - r0) * ((p - p0) / (p1 - p0))
    }

    /// `R_delta` at each level of the atlas.
    pub fn ratios(&self) -> &[f64; LEVELS] {
        &self.ratio
    }

    /// Sea pressures of the levels in dbar.
    pub fn levels_dbar(&self) -> &[f64; LEVELS] {
        &self.pressure_dbar
    }

    /// Sea pressure in dbar of the deepest level that has a value at this position; below, `R_delta` is held.
    pub fn deepest_level_dbar(&self) -> f64 {
        self.pressure_dbar[self.deepest]
    }
}

/// Whether a position lies in the outline of the Baltic Sea of the TEOS-10 manual; longitude in either convention.
pub(super) fn in_baltic(latitude_deg: f64, longitude_deg: f64) -> bool {
    eastward_deg(longitude_deg).is_some_and(|longitude_deg| regions::in_baltic(latitude_deg, longitude_deg))
}

/// A longitude in degrees from 0 to below 360; `None` when it is not finite.
fn eastward_deg(longitude_deg: f64) -> Option<f64> {
    let east = longitude_deg.rem_euclid(360.0);
    // the remainder of a tiny negative number rounds to 360 itself
    east.is_finite().then_some(if east < 360.0 { east } else { 0.0 })
}

#[cfg(test)]
mod tests;
