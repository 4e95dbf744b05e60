"""Samples the Absolute Salinity Anomaly Ratio at the nodes of its published atlas and packs it into composition-atlas.gz.

    pip install gsw==3.6.23 numpy && python data/make_atlas.py

The reference TEOS-10 library tells the interpolated ratio at a position and pressure. Just inside the four corners of every cell
it gives the values of the nodes, or, where a node is missing, the mean of those that are not. A node is taken as missing when the
cells around it disagree about it, or when it may be the mean in every cell that knows it: both readings then interpolate alike.
The script ends by interpolating what it found and comparing that with every sample it took.
"""

import gzip
import zlib
from pathlib import Path

import gsw
import numpy as np

LONGITUDE = np.arange(0, 361, 4)
LATITUDE = np.arange(-86, 91, 4)
# fmt: off
PRESSURE = np.array([
    0, 10, 20, 30, 40, 50, 76, 101, 126, 151, 176, 202, 252, 303, 353, 404, 505, 606, 707, 808, 909, 1010, 1111, 1213, 1314, 1416,
    1517, 1771, 2025, 2279, 2534, 2789, 3045, 3300, 3556, 3812, 4069, 4325, 4583, 4840, 5098, 5355, 5614, 5872, 6131])
# fmt: on
SHAPE = (len(PRESSURE), len(LATITUDE), len(LONGITUDE))
CELLS = (len(LATITUDE) - 1, len(LONGITUDE) - 1)
CORNERS = [(0, 0), (0, 1), (1, 1), (1, 0)]  # north and east of the south-western node

# The line along the Central American isthmus that parts the oceans (McDougall et al. 2012), as in src/seawater/atlas/regions.rs.
ISTHMUS_LONGITUDE = [260.0, 272.59, 276.5, 278.65, 280.73, 292.0]
ISTHMUS_LATITUDE = [19.55, 13.97, 9.6, 8.1, 9.33, 3.4]

# Samples lie this far inside a cell; where the ratio is steepest (the Turkish straits, 2e-3 in a cell) that costs 5e-15.
INSIDE_DEG = 1e-11
SAME = 1e-13
STEP = 1e-9  # stored resolution of the ratio: 2e-8 g/kg


def sample():
    """Ratio just inside each corner: [corner, level, south, west]."""
    found = np.empty((4, len(PRESSURE), *CELLS))
    for c, (north, east) in enumerate(CORNERS):
        latitude = LATITUDE[:-1] + (4 - INSIDE_DEG if north else INSIDE_DEG)
        longitude = LONGITUDE[:-1] + (4 - INSIDE_DEG if east else INSIDE_DEG)
        found[c] = gsw.SAAR(PRESSURE[:, None, None], longitude[None, None, :], latitude[None, :, None])
    if np.isnan(found).any():
        raise ValueError("the library knows no ratio inside the atlas")
    # It says 0 where no node of this ocean has a value: on land, and below the bottom in a few straits and marginal seas.
    return np.where(found == 0, np.nan, found)


def levels_of_cells(found):
    """Levels down to which a cell changes; below it is held. 0: no ocean in the cell."""
    changes = np.isfinite(found).any(0)
    here, above = found[:, 1:], found[:, :-1]
    changes[1:] &= (np.isfinite(here) & (here != above)).any(0)
    if (~changes[:-1] & changes[1:]).any():
        raise ValueError("a cell changes again below a level where it does not")
    return changes.sum(0)


def north_of_isthmus(longitude, latitude):
    return np.interp(longitude, ISTHMUS_LONGITUDE, ISTHMUS_LATITUDE) <= latitude


def parted(south, west, corner):
    """Which corners of the cell lie in the same ocean as a sample just inside `corner`."""
    north, east = CORNERS[corner]
    longitude = LONGITUDE[west] + (4 - INSIDE_DEG if east else INSIDE_DEG)
    latitude = LATITUDE[south] + (4 - INSIDE_DEG if north else INSIDE_DEG)
    if not (260 <= longitude <= 292 and 3.4 <= latitude <= 19.55):
        return [True] * 4
    here = north_of_isthmus(longitude, latitude)
    return [here == north_of_isthmus(LONGITUDE[west + e], LATITUDE[south + n]) for n, e in CORNERS]


class Atlas:
    def __init__(self, found):
        self.found = found
        self.cell_levels = levels_of_cells(found)
        self.known = np.arange(len(PRESSURE))[:, None, None] < self.cell_levels
        told = np.full((4, *SHAPE), np.nan)
        for c, (n, e) in enumerate(CORNERS):
            part = told[c][:, n : n + CELLS[0], e : e + CELLS[1]]
            part[:] = np.where(self.known, found[c], np.nan)
        low = np.nanmin(np.where(np.isnan(told), np.inf, told), axis=0)
        high = np.nanmax(np.where(np.isnan(told), -np.inf, told), axis=0)
        self.present = np.isfinite(low)
        spread = np.subtract(high, low, where=self.present, out=np.zeros(SHAPE))
        self.present &= spread < SAME
        self.value = np.where(self.present, low, np.nan) + 0.5 * spread
        self.parting = {
            (j, i): [parted(j, i, c) for c in range(4)] for j in range(21, 28) for i in range(64, 74)
        }

    def told(self, k, j, i, corner, without=None):
        """What the nodes say inside a corner of a cell; None when no node of its ocean has a value."""
        ours = self.parting.get((j, i), [[True] * 4] * 4)[corner]
        nodes = [(k, j + n, i + e) for n, e in CORNERS]
        here = [m for m, mine in zip(nodes, ours) if mine and self.present[m] and m != without]
        if nodes[corner] in here:
            return self.value[nodes[corner]]
        return np.mean([self.value[m] for m in here]) if here else None

    def agrees(self, k, j, i, corner, without=None):
        found = self.found[corner, k, j, i]
        told = self.told(k, j, i, corner, without)
        return np.isnan(found) or (told is not None and abs(told - found) < SAME)

    def spare(self, k, j, i):
        """True when everything around reads the same without this node."""
        for n, e in CORNERS:
            south, west = j - n, i - e
            if not (0 <= south < CELLS[0] and 0 <= west < CELLS[1]) or not self.known[k, south, west]:
                continue
            for corner in range(4):
                if not self.agrees(k, south, west, corner, without=(k, j, i)):
                    return False
        return True

    def drop_spare(self):
        for k in range(len(PRESSURE)):
            nodes = np.argwhere(self.present[k])
            # first those which are missing one level above: columns end, they do not begin, below the surface
            nodes = sorted(nodes.tolist(), key=lambda n: bool(k > 0 and self.present[k - 1, n[0], n[1]]))
            for j, i in nodes:
                if self.spare(k, j, i):
                    self.present[k, j, i] = False

    def compare(self):
        """Count of samples compared."""
        for k, j, i in np.argwhere(self.known):
            for corner in range(4):
                if not self.agrees(k, j, i, corner):
                    raise ValueError(f"differs at {LONGITUDE[i]} {LATITUDE[j]} {PRESSURE[k]}, corner {corner}")
        return np.isfinite(self.found[:, self.known]).sum()

    def packed(self):
        """The bytes that src/seawater/atlas/file.rs describes."""
        steps = np.where(self.present, np.rint(np.nan_to_num(self.value) / STEP), 0).astype(np.int64)
        guess = np.zeros_like(steps)
        # the level above, else the node to the west, else nothing
        guess[0, :, 1:] = steps[0, :, :-1]
        guess[1:] = np.where(self.present[:-1], steps[:-1], 0)
        odd = (steps - guess)[self.present]
        folded = np.where(odd < 0, -2 * odd - 1, 2 * odd).astype("<u4")
        if folded.max() >= 1 << 24:
            raise ValueError("a difference needs more than three bytes")
        planes = folded.view("u1").reshape(-1, 4)[:, :3].T
        return b"".join(
            [
                b"R_delta\x01",
                np.array([*SHAPE, round(1 / STEP)], "<u4").tobytes(),
                PRESSURE.astype("<u2").tobytes(),
                self.cell_levels.astype("u1").tobytes(),
                np.packbits(self.present, axis=None, bitorder="little").tobytes(),
                np.ascontiguousarray(planes).tobytes(),
            ]
        )


def main():
    atlas = Atlas(sample())
    atlas.drop_spare()
    count = atlas.compare()
    plain = atlas.packed()
    packed = gzip.compress(plain, compresslevel=9, mtime=0)
    path = Path(__file__).resolve().parent / "composition-atlas.gz"
    path.write_bytes(packed)
    values = atlas.value[atlas.present]
    print(f"{count} samples agree")
    print(f"{values.size} values at {atlas.present.any(0).sum()} nodes, {values.min():.3e} to {values.max():.3e}")
    print(f"{path.name}: {len(packed)} bytes, {len(plain)} unpacked, CRC-32 0x{zlib.crc32(packed):08x}")
    return atlas


if __name__ == "__main__":
    main()
