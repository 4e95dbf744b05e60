"""Check values of UNESCO Technical Papers in Marine Science 44 (1983): PSS-78 and depth from pressure."""

import gsw
import numpy as np
import seawater
from scipy.integrate import quad

from common import versions, write_csv

# Conductivity ratio, IPTS-68 temperature, pressure, and the salinity as printed (page 9).
PRINTED_SALINITY = [
    (1.0, 15.0, 0.0, "35.000000"),
    (1.2, 20.0, 2000.0, "37.245628"),
    (0.65, 5.0, 1500.0, "27.995347"),
]
# The points of the conductivity table of page 9 which the seawater package recomputes.
RATIO_POINTS = [(25, 0, 0), (25, 10, 0), (25, 0, 1000), (25, 10, 1000), (40, 10, 0), (40, 30, 0)]
# Depth as printed (page 28) at 10 000 dbar, 30 deg.
PRINTED_DEPTH = (10000.0, 30.0, "9712.653")
STANDARD_SALINITY_G_KG = 35.16504


def its90(t68):
    return t68 / 1.00024


def salinity_row(ratio, t68, p, printed, origin):
    by_seawater = seawater.salt(ratio, seawater.library.T90conv(t68), p)
    by_gsw = gsw.SP_from_C(ratio * 42.9140, its90(t68), p)
    if printed and max(abs(s - float(printed)) for s in (by_seawater, by_gsw)) > 0.6e-6:
        raise ValueError(f"R = {ratio}: printed {printed}, seawater {by_seawater}, gsw {by_gsw}")
    return ratio, t68, p, printed, by_seawater, by_gsw, origin


def salinity_table():
    rows = [salinity_row(*point, "UNESCO 44 p. 9") for point in PRINTED_SALINITY]
    for sp, t68, p in RATIO_POINTS:
        ratio = float(seawater.cndr(np.array([sp]), seawater.library.T90conv(np.array([t68])), np.array([p]))[0])
        rows.append(salinity_row(ratio, t68, p, "", f"ratio of S = {sp} by seawater.cndr"))
    write_csv(
        "pss78_tables.csv",
        f"UNESCO 44 (1983) as recalled; confirmed to the printed digits by {versions('seawater', 'gsw')}",
        "make_unesco44.py",
        [
            "conductivity_ratio",
            "temperature_ipts68_c",
            "pressure_dbar",
            "salinity_printed",
            "salinity_seawater",
            "salinity_gsw",
            "origin",
        ],
        rows,
        [
            "temperatures are IPTS-68 = 1.00024 x ITS-90; conductivity ratio to C(35, 15 degC, 0) = 42.9140 mS/cm",
            "an empty printed salinity: no printed value at hand, the computed ones only",
        ],
    )


def unesco_gravity(p, latitude):
    """Mean of the gravity above p, as UNESCO 44 takes it (equation 26 and the 1.092e-6 of its depth formula)."""
    x = np.sin(np.radians(latitude)) ** 2
    return 9.780318 * (1 + (5.2788e-3 + 2.36e-5 * x) * x) + 1.092e-6 * p


def teos10_depth(p, latitude):
    """The same standard ocean (35, 0 degC) and the same gravity, with the TEOS-10 specific volume."""
    potential, _ = quad(
        lambda q: 1e4 * gsw.specvol_t_exact(STANDARD_SALINITY_G_KG, 0.0, q), 0, p, epsabs=1e-9, epsrel=1e-13
    )
    return potential / unesco_gravity(p, latitude)


def depth_table():
    rows = []
    for p in (500.0, 1000.0, 2000.0, 3000.0, 4000.0, 5000.0, 6000.0, 7000.0, 8000.0, 9000.0, 10000.0):
        for latitude in (0.0, 30.0, 45.0, 60.0, 90.0):
            depth = float(seawater.dpth(p, latitude))
            printed = PRINTED_DEPTH[2] if (p, latitude) == PRINTED_DEPTH[:2] else ""
            if printed and abs(depth - float(printed)) > 0.6e-3:
                raise ValueError(f"depth printed {printed}, seawater {depth}")
            rows.append((p, latitude, printed, depth, teos10_depth(p, latitude)))
    write_csv(
        "unesco44_depth.csv",
        f"UNESCO 44 (1983) p. 28 as recalled; {versions('seawater')} dpth; {versions('gsw', 'scipy')} for the last column",
        "make_unesco44.py",
        ["pressure_dbar", "latitude_deg", "depth_printed_m", "depth_seawater_m", "depth_teos10_m"],
        rows,
        [
            "standard ocean: S = 35, 0 degC; seawater: EOS-80 and the gravity of UNESCO 44",
            "depth_teos10_m: the exact TEOS-10 specific volume over the same gravity, so the difference is EOS-80 alone",
        ],
    )


def main():
    salinity_table()
    depth_table()


if __name__ == "__main__":
    main()
