"""Deepest depth of the real casts of a folder; their profiles are not copied.

    python make_cruise_casts.py FOLDER

Only samples with WOCE flag 2 in pressure, temperature and salinity. The water above the first of them has its S and t.
"""

import sys
from pathlib import Path

import gsw
import netCDF4
import numpy as np

from common import versions, write_csv
from hydrostatic import depths, ocean_gravity

ACCEPTABLE = 2
GAP_STEP = 1.0  # dbar


def good_samples(data):
    columns = [np.ma.filled(data[name][:].astype(float), np.nan) for name in ("pressure", "temperature", "salinity")]
    flags = [data[f"{name}_QC"][:] for name in ("pressure", "temperature", "salinity")]
    good = np.all([np.ma.filled(flag, 9) == ACCEPTABLE for flag in flags] + [np.isfinite(c) for c in columns], axis=0)
    return len(good), *(column[good] for column in columns)


def row(path):
    with netCDF4.Dataset(path) as data:
        # Stored as 32-bit numbers; the decimal they were written with has four digits after the point.
        latitude, longitude = (round(float(data[name][0]), 4) for name in ("latitude", "longitude"))
        samples, p, t, sp = good_samples(data)
    if np.any(np.diff(p) <= 0):
        raise ValueError(f"{path.name}: pressures do not increase")
    gap = np.arange(0.0, p[0], GAP_STEP)
    p_all = np.concatenate([gap, p])
    t_all = np.concatenate([gap * 0 + t[0], t])
    sa_all = np.concatenate([gap * 0 + sp[0], sp]) * (35.16504 / 35)
    z = depths(p_all, gsw.specvol_t_exact(sa_all, t_all, p_all), ocean_gravity(latitude))
    return path.name, latitude, longitude, str(samples), str(len(p)), p[0], np.max(np.diff(p)), p[-1], z[-1]


def main(folder):
    write_csv(
        "cruise_casts.csv",
        f"{versions('gsw', 'netCDF4', 'numpy')} specvol_t_exact; own integration",
        "make_cruise_casts.py",
        [
            "file",
            "latitude_deg",
            "longitude_deg",
            "samples",
            "samples_good",
            "first_pressure_dbar",
            "largest_step_dbar",
            "deepest_pressure_dbar",
            "deepest_depth_m",
        ],
        [row(path) for path in sorted(Path(folder).glob("*.nc"))],
        [
            "good: flag 2 in pressure, temperature and salinity; S_A at reference composition; v linear between good samples",
            "above the first good sample: its S and t, from sea pressure 0; no geoid, no anomaly, full gravity",
        ],
    )


if __name__ == "__main__":
    if len(sys.argv) != 2:
        sys.exit(__doc__)
    main(sys.argv[1])
