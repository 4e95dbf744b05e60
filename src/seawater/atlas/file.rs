//! Reading the packed atlas, `data/composition-atlas.gz`.
//!
//! One gzip member, so that its CRC-32 tells damage and any unpacking tool opens it. Inside, little-endian, in this order:
//!
//! 1. 8 bytes: `R_delta` and a byte 1, the version of this layout.
//! 2. 4 `u32`: levels `L`, parallels `M`, meridians `N`, steps in one (the unit of the stored ratios is its inverse).
//! 3. L `u16`: pressures of the levels in dbar, from the surface down.
//! 4. (M - 1)(N - 1) bytes: for each cell the number of levels before its bottom, 0 where it has no ocean; west to east,
//!    then south to north.
//! 5. ceil(L M N / 8) bytes: one bit for each node and level, set where there is a value, lowest bit of a byte first;
//!    west to east, then south to north, then from the surface down.
//! 6. 3 V bytes: the V values in that order, first all low bytes of their folded differences, then all middle, then all
//!    high bytes.
//!
//! A difference is taken, in steps, to the same node one level above, at the surface to the neighbour in the west; a
//! node without value counts as 0. It is folded to be positive: `2 d` for `d >= 0`, else `-2 d - 1`.
//! `data/make_atlas.py` writes the file.

use flate2::read::GzDecoder;
use std::io::Read;

const MAGIC: &[u8; 8] = b"R_delta\x01";
/// More than the file can hold when it is what it should be; a guard against unpacking without end.
const LARGEST: u64 = 1 << 21;

/// The stored grid of ratios.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Grid {
    pub parallels: usize,
    pub meridians: usize,
    pub step: f64,
    pub pressure_dbar: Vec<f64>,
    /// For each cell the number of levels before its bottom.
    pub cell_levels: Vec<u8>,
    /// Ratio in steps; [`MISSING`] where there is no value.
    pub steps: Vec<i32>,
}

/// Stands for no value in [`Grid::steps`].
pub(super) const MISSING: i32 = i32::MIN;

/// Takes `count` bytes off the front.
fn take<'a>(rest: &mut &'a [u8], count: usize) -> Result<&'a [u8], &'static str> {
    let (front, back) = rest.split_at_checked(count).ok_or("it is cut short")?;
    *rest = back;
    Ok(front)
}

fn unfold(folded: u32) -> i32 {
    (folded >> 1) as i32 ^ -((folded & 1) as i32)
}

/// The grid from the bytes of the file.
pub(super) fn decode(packed: &[u8]) -> Result<Grid, &'static str> {
    let mut plain = Vec::new();
    GzDecoder::new(packed).take(LARGEST).read_to_end(&mut plain).map_err(|_| "it does not unpack")?;
    let mut rest = plain.as_slice();
    if take(&mut rest, MAGIC.len())? != MAGIC {
        return Err("it has another layout");
    }
    let mut numbers = [0; 4];
    for number in &mut numbers {
        let bytes = take(&mut rest, 4)?;
        *number = u32::from_le_bytes([bytes[0], bytes[1], bytes[2], bytes[3]]);
    }
    let [levels, parallels, meridians] = [0, 1, 2].map(|n| numbers[n] as usize);
    if numbers[3] == 0 || [levels, parallels, meridians].iter().any(|n| !(2..=255).contains(n)) {
        return Err("its grid is none");
    }
    let pressure_dbar = take(&mut rest, 2 * levels)?
        .chunks_exact(2)
        .map(|b| u16::from_le_bytes([b[0], b[1]]).into())
        .collect();
    let cell_levels = take(&mut rest, (parallels - 1) * (meridians - 1))?.to_vec();
    if cell_levels.iter().any(|&n| usize::from(n) > levels) {
        return Err("a cell has too many levels");
    }
    let plane = parallels * meridians;
    let nodes = levels * plane;
    let bits = take(&mut rest, nodes.div_ceil(8))?;
    let present = |n: usize| bits[n / 8] >> (n % 8) & 1 == 1;
    let count = (0..nodes).filter(|&n| present(n)).count();
    let (low, middle, high) = (take(&mut rest, count)?, take(&mut rest, count)?, take(&mut rest, count)?);
    if !rest.is_empty() {
        return Err("it is too long");
    }
    let mut steps = vec![MISSING; nodes];
    for (next, n) in (0..nodes).filter(|&n| present(n)).enumerate() {
        let beside =
            if n >= plane { n.checked_sub(plane) } else { n.checked_sub(1).filter(|_| n % meridians > 0) };
        let guess = beside.map(|b| steps[b]).filter(|&s| s != MISSING).unwrap_or(0);
        let folded = u32::from_le_bytes([low[next], middle[next], high[next], 0]);
        steps[n] = guess.wrapping_add(unfold(folded));
    }
    Ok(Grid { parallels, meridians, step: f64::from(numbers[3]).recip(), pressure_dbar, cell_levels, steps })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::seawater::atlas::PACKED;

    #[test]
    fn folding_is_undone() {
        let folded = |d: i32| if d < 0 { -2 * d - 1 } else { 2 * d };
        for d in [0, 1, -1, 7, -8, 8_388_607, -8_388_608] {
            assert_eq!(unfold(folded(d) as u32), d);
        }
    }

    #[test]
    fn the_embedded_file_is_the_one_that_was_made() {
        let mut crc = flate2::Crc::new();
        crc.update(PACKED);
        // CRC-32 of the file as `data/make_atlas.py` prints it.
        assert_eq!(crc.sum(), EXPECTED_CRC);
    }

    #[test]
    fn damage_is_told() {
        for at in (20..PACKED.len()).step_by(PACKED.len() / 40) {
            let mut damaged = PACKED.to_vec();
            damaged[at] ^= 0x10;
            assert!(decode(&damaged).is_err(), "byte {at}");
        }
        for length in [0, 9, 1_000, PACKED.len() - 9, PACKED.len() - 1] {
            assert!(decode(&PACKED[..length]).is_err(), "{length} bytes");
        }
    }

    const EXPECTED_CRC: u32 = 0x6cfd_6d12;
}
