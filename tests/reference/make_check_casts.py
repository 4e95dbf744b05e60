"""The TEOS-10 check casts: specific volume and depth, by gsw itself and by an integration of our own."""

from pathlib import Path

import gsw
import numpy as np

from common import versions, write_csv
from hydrostatic import potential

GAMMA = 2.26e-7  # growth of gravity with depth in gsw, 1/m, relative


def gsw_depth(sa, ct, p, latitude, interpolation):
    height = gsw.geo_strf_dyn_height(sa, ct, p, 0, interp_method=interpolation, max_dp=1.0)
    return -gsw.z_from_p(p, latitude, geo_strf_dyn_height=height)


def own_depth(p, v, latitude):
    """Solve g0 (z + GAMMA z2/2) = Phi, with v linear between the points and the surface gravity of gsw."""
    g0, phi = gsw.grav(latitude, 0.0), potential(p, v)
    return 2 * phi / (g0 + np.sqrt(g0**2 + 2 * g0 * GAMMA * phi))


def fine_depth(sa, ct, p, latitude):
    """S_A and CT linear between the points, the exact specific volume of them linear in 1 dbar steps."""
    fine = np.union1d(np.arange(0.0, p[-1], 1.0), p)
    sa, ct = np.interp(fine, p, sa), np.interp(fine, p, ct)
    v = gsw.specvol_t_exact(sa, gsw.t_from_CT(sa, ct, fine), fine)
    return own_depth(fine, v, latitude)[np.searchsorted(fine, p)]


def cast_rows(number, p, sp, t, latitude):
    if p[0] != 0:
        raise ValueError("every check cast is expected to start at the surface")
    sa = sp * (35.16504 / 35)
    ct = gsw.CT_from_t(sa, t, p)
    v = gsw.specvol_t_exact(sa, t, p)
    spline = gsw_depth(sa, ct, p, latitude, "mrst")
    linear = gsw_depth(sa, ct, p, latitude, "linear")
    own = own_depth(p, v, latitude)
    fine = fine_depth(sa, ct, p, latitude)
    columns = (p, sp, t, sa, ct, v, spline, linear, fine, own)
    return [(str(number), float(latitude), *values) for values in zip(*columns)]


def main():
    data = np.load(Path(gsw.__file__).parent / "tests" / "gsw_cv_v3_0.npz")
    rows = []
    for cast, latitude in enumerate(data["lat_chck_cast"]):
        p, sp, t = (data[f"{name}_chck_cast"][:, cast] for name in ("p", "SP", "t"))
        good = np.isfinite(p) & np.isfinite(sp) & np.isfinite(t)
        rows += cast_rows(cast + 1, p[good], sp[good], t[good], latitude)
    write_csv(
        "check_casts.csv",
        f"{versions('gsw')} check casts (gsw_cv_v3_0), CT_from_t, specvol_t_exact, geo_strf_dyn_height, z_from_p",
        "make_check_casts.py",
        [
            "cast",
            "latitude_deg",
            "pressure_dbar",
            "practical_salinity",
            "temperature_c",
            "absolute_salinity_g_kg",
            "conservative_temperature_c",
            "specific_volume_m3_kg",
            "depth_gsw_mrst_m",
            "depth_gsw_linear_m",
            "depth_exact_1dbar_m",
            "depth_v_linear_m",
        ],
        rows,
        [
            "p, S_P, t, latitude: Copyright (c) 2011, SCOR/IAPSO WG127, see LICENSE-gsw.txt; all else computed",
            "S_A at reference composition; gravity of gsw in all three depths: grav(lat, 0) (1 + 2.26e-7 z)",
            "depth_gsw: 75-term polynomial, S_A and CT between the points by spline (mrst) or linear in 1 dbar steps",
            "depth_exact_1dbar: exact specific volume of S_A and CT linear between the points, in 1 dbar steps",
            "depth_v_linear: exact specific volume, linear between the points",
        ],
    )


if __name__ == "__main__":
    main()
