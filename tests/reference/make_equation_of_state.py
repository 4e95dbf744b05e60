"""The second equation of state and the one before TEOS-10, the shortcuts to depth, sound along a column."""

from itertools import product

import gsw
import numpy as np
import seawater
from scipy.integrate import quad
from scipy.interpolate import CubicSpline

from common import versions, write_csv
from hydrostatic import depths, ocean_gravity
from make_orders_of_magnitude import practical_salinity, potential_temperature

T68 = 1.00024
# UNESCO 44 (1983), p. 19, as recalled: S, t68, p in bar, density.
PRINTED_DENSITY = [
    (0.0, 5.0, 0.0, "999.96675"),
    (0.0, 5.0, 1000.0, "1044.12802"),
    (0.0, 25.0, 0.0, "997.04796"),
    (0.0, 25.0, 1000.0, "1037.90204"),
    (35.0, 5.0, 0.0, "1027.67547"),
    (35.0, 5.0, 1000.0, "1069.48914"),
    (35.0, 25.0, 0.0, "1023.34306"),
    (35.0, 25.0, 1000.0, "1062.53817"),
]


def polynomial_table():
    rng = np.random.default_rng(75)
    grid = product([0.0, 0.5, 5.0, 20.0, 35.16504, 42.0], [-2.0, 0.0, 4.0, 15.0, 28.0, 40.0], [0.0, 1000.0, 8000.0, 11500.0])
    points = list(grid) + [
        (round(rng.uniform(0, 42), 3), round(rng.uniform(-2, 40), 3), round(rng.uniform(0, 11500), 1)) for _ in range(900)
    ]
    rows = []
    for sa, t, p in points:
        pt = gsw.pt_from_t(sa, t, p, 0)
        ct = gsw.CT_from_pt(sa, pt)
        rows.append((sa, t, p, ct, gsw.specvol(sa, ct, p)))
    write_csv(
        "polynomial.csv",
        f"{versions('gsw')} pt_from_t, CT_from_pt, specvol",
        "make_equation_of_state.py",
        ["absolute_salinity_g_kg", "temperature_c", "pressure_dbar", "conservative_temperature_c", "specific_volume_m3_kg"],
        rows,
        ["ITS-90, sea pressure; specific volume by the 75-term polynomial"],
    )


def eos80_row(s, t68, p, printed=""):
    rho = float(seawater.dens(s, t68 / T68, p))
    if printed and abs(rho - float(printed)) > 0.6e-5:
        raise ValueError(f"S = {s}, t68 = {t68}, p = {p}: printed {printed}, seawater {rho}")
    return s, t68, p, printed, rho


def eos80_table():
    rng = np.random.default_rng(1980)
    rows = [eos80_row(s, t68, 10 * bar, printed) for s, t68, bar, printed in PRINTED_DENSITY]
    rows += [
        eos80_row(round(rng.uniform(0, 42), 3), round(rng.uniform(-2, 40), 3), round(rng.uniform(0, 10000), 1))
        for _ in range(400)
    ]
    write_csv(
        "eos80.csv",
        f"UNESCO 44 (1983) p. 19 as recalled, confirmed to the printed digits; {versions('seawater')} dens",
        "make_equation_of_state.py",
        ["practical_salinity", "temperature_ipts68_c", "pressure_dbar", "density_printed_kg_m3", "density_seawater_kg_m3"],
        rows,
        ["an empty printed density: no printed value at hand, the computed one only"],
    )


def shortcut_table():
    rows = []
    for depth, latitude in product([10.0, 100.0, 1000.0, 3000.0, 5000.0, 7321.45, 10000.0], [0.0, 30.0, 45.0, -60.0, 90.0]):
        rows.append((depth, latitude, float(seawater.pres(depth, latitude))))
    write_csv(
        "saunders.csv",
        f"{versions('seawater')} pres, the inverse of the formula of Saunders (1981)",
        "make_equation_of_state.py",
        ["depth_m", "latitude_deg", "pressure_dbar"],
        rows,
    )


def sound_table():
    """Harmonic mean by quadrature in depth; depth of the same column by steps of 0.5 dbar."""
    latitude = -23.2
    p = np.arange(0.0, 11000.25, 0.5)
    sa = practical_salinity(p) * (35.16504 / 35)
    t = gsw.pt_from_t(sa, potential_temperature(p), 0, p)
    z = depths(p, gsw.specvol_t_exact(sa, t, p), ocean_gravity(latitude))

    def slowness(q):
        s = practical_salinity(q) * (35.16504 / 35)
        return 1 / gsw.sound_speed_t_exact(s, gsw.pt_from_t(s, potential_temperature(q), 0, q), q)

    # dz/dp is smooth: on these nodes a cubic spline gives it far closer than sound speed is known.
    depth = CubicSpline(p, z)
    gradient = depth.derivative()
    rows, time, above = [], 0.0, 0.0
    for below in [1, 5, 20, 50, 100, 150, 200, 300, 450, 600, 800, 1000, 1500, 2000, 3000, 4500, 6000, 8000, 10000, 11000]:
        part, error = quad(lambda q: slowness(q) * gradient(q), above, below, epsabs=1e-13, epsrel=1e-12, limit=500)
        if error > 1e-9:
            raise ValueError(f"the quadrature to {below} dbar is good to {error} s only")
        time, above = time + part, float(below)
        rows.append((float(below), depth(below), 1 / slowness(float(below)), time, depth(below) / time))
    write_csv(
        "sound.csv",
        f"{versions('gsw', 'scipy')} sound_speed_t_exact, quad",
        "make_equation_of_state.py",
        ["pressure_dbar", "depth_m", "sound_speed_m_s", "travel_time_s", "mean_sound_speed_m_s"],
        rows,
        ["the column of reference_column.csv at reference composition; time of sound from the surface, one way"],
    )


def main():
    polynomial_table()
    eos80_table()
    shortcut_table()
    sound_table()


if __name__ == "__main__":
    main()
