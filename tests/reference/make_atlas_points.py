"""Absolute Salinity by position and pressure: random places in the ocean, and the places where special rules act.

    python make_atlas_points.py [COUNT FILE]    COUNT more random points to FILE, for the full comparison
"""

import sys
from pathlib import Path

import gsw
import numpy as np

from common import versions, write_csv

# fmt: off
LEVELS_DBAR = np.array([
    0, 10, 20, 30, 40, 50, 76, 101, 126, 151, 176, 202, 252, 303, 353, 404, 505, 606, 707, 808, 909, 1010, 1111, 1213, 1314, 1416,
    1517, 1771, 2025, 2279, 2534, 2789, 3045, 3300, 3556, 3812, 4069, 4325, 4583, 4840, 5098, 5355, 5614, 5872, 6131])
# fmt: on
COLUMNS = [
    "region",
    "longitude_deg",
    "latitude_deg",
    "pressure_dbar",
    "practical_salinity",
    "absolute_salinity_g_kg",
]
# west, east, south, north; count of points
BOXES = {
    "isthmus": (258, 294, 2, 22, 300),
    "baltic": (6, 32, 52, 67, 150),
    "black_sea": (26, 43, 39, 48, 60),
    "mediterranean": (-6, 37, 30, 46, 100),
    "red_sea": (32, 45, 11, 30, 40),
    "north_pole": (-180, 180, 86, 90, 60),
    "antarctic_edge": (-180, 180, -86, -66, 80),
    "date_line": (179.5, 180.5, -75, 68, 60),
    "greenwich": (-4, 4, -78, 66, 80),
}


def bottom_dbar(longitude, latitude):
    """Deepest level at which the ratio of the library still changes; 0 on land, where it is 0."""
    ratio = gsw.SAAR(LEVELS_DBAR, longitude, latitude)
    if not np.isfinite(ratio).all() or ratio[0] == 0:
        return None
    changes = np.flatnonzero(np.diff(ratio) != 0)
    return float(LEVELS_DBAR[changes[-1] + 1]) if changes.size else 0.0


def row(region, longitude, latitude, pressure, salinity):
    return (region, longitude, latitude, pressure, salinity, gsw.SA_from_SP(salinity, pressure, longitude, latitude))


def over_the_sphere(rng):
    return round(rng.uniform(-180, 360), 3), round(float(np.degrees(np.arcsin(rng.uniform(-1, 1)))), 3)


def in_the_ocean(rng, count, region="ocean"):
    """Points between the surface and the bottom, uniform over the area and in depth."""
    while count:
        longitude, latitude = over_the_sphere(rng)
        bottom = bottom_dbar(longitude, latitude)
        if bottom is not None:
            yield row(region, longitude, latitude, round(rng.uniform(0, bottom), 1), round(rng.uniform(30, 38), 2))
            count -= 1


def below_the_bottom(rng, count):
    while count:
        longitude, latitude = over_the_sphere(rng)
        bottom = bottom_dbar(longitude, latitude)
        if bottom is not None:
            yield row("below_bottom", longitude, latitude, round(rng.uniform(bottom, 11500), 1), 34.7)
            count -= 1


def at_nodes(rng, count):
    while count:
        longitude, latitude = 4.0 * rng.integers(0, 91), 4.0 * rng.integers(0, 45) - 86
        bottom = bottom_dbar(longitude, latitude)
        if bottom is not None:
            levels = LEVELS_DBAR[LEVELS_DBAR <= bottom]
            yield row("node", longitude, latitude, float(rng.choice(levels)), 35.0)
            count -= 1


def in_box(rng, region):
    west, east, south, north, count = BOXES[region]
    while count:
        longitude, latitude = round(rng.uniform(west, east), 3), round(rng.uniform(south, north), 3)
        bottom = bottom_dbar(longitude, latitude)
        # the Baltic counts although the ratio is 0 in most of it, and so does land: that there is no ratio is told
        pressure = 0.0 if bottom is None else round(rng.uniform(0, bottom), 1)
        yield row(region, longitude, latitude, pressure, round(rng.uniform(2, 38), 2))
        count -= 1


def table():
    rng = np.random.default_rng(2012)
    yield from in_the_ocean(rng, 1500)
    yield from at_nodes(rng, 300)
    yield from below_the_bottom(rng, 270)
    for region in BOXES:
        yield from in_box(rng, region)


NOTES = [
    "longitudes from -180 to 360 and latitudes in degrees, sea pressure; on land the library takes the reference composition",
    "pressures reach from the surface to the deepest level where the library's ratio still changes, below_bottom from there on",
]


def main():
    source = f"{versions('gsw')} SA_from_SP (SAAR table of 15 May 2011)"
    write_csv("atlas_points.csv", source, "make_atlas_points.py", COLUMNS, list(table()), NOTES)


def more(count, path):
    rows = list(in_the_ocean(np.random.default_rng(100_000), count))
    source = f"{versions('gsw')} SA_from_SP"
    write_csv(Path(path).resolve(), source, "make_atlas_points.py", COLUMNS, rows, NOTES)


if __name__ == "__main__":
    if len(sys.argv) == 3:
        more(int(sys.argv[1]), sys.argv[2])
    else:
        main()
