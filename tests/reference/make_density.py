"""Seawater properties from the exact Gibbs function, over the whole range of use and to 11 500 dbar."""

from itertools import product

import gsw
import numpy as np

from common import versions, write_csv

SALINITY = [0.0, 0.5, 5.0, 20.0, 35.16504, 42.0]
TEMPERATURE = [-2.0, 0.0, 4.0, 15.0, 28.0, 40.0]
PRESSURE = [0.0, 10.0, 1000.0, 4000.0, 8000.0, 10000.0, 11500.0]
RANDOM_POINTS = 1500


def points():
    yield from product(SALINITY, TEMPERATURE, PRESSURE)
    rng = np.random.default_rng(20100601)
    for _ in range(RANDOM_POINTS):
        yield (
            round(rng.uniform(0, 42), 3),
            round(rng.uniform(-2, 40), 3),
            round(rng.uniform(0, 11500), 1),
        )


def row(sa, t, p):
    # The lapse rate of gsw takes Conservative Temperature and the polynomial; the exact one is -g_TP/g_TT.
    lapse = -gsw.gibbs(0, 1, 1, sa, t, p) / gsw.gibbs(0, 2, 0, sa, t, p)
    return (
        sa,
        t,
        p,
        gsw.rho_t_exact(sa, t, p),
        gsw.specvol_t_exact(sa, t, p),
        gsw.sound_speed_t_exact(sa, t, p),
        gsw.entropy_from_t(sa, t, p),
        gsw.pt_from_t(sa, t, p, 0),
        lapse,
    )


def main():
    write_csv(
        "density.csv",
        f"{versions('gsw')} rho_t_exact, specvol_t_exact, sound_speed_t_exact, entropy_from_t, pt_from_t(p_ref=0), gibbs",
        "make_density.py",
        [
            "absolute_salinity_g_kg",
            "temperature_c",
            "pressure_dbar",
            "density_kg_m3",
            "specific_volume_m3_kg",
            "sound_speed_m_s",
            "entropy_j_kg_k",
            "potential_temperature_c",
            "lapse_rate_k_pa",
        ],
        [row(*point) for point in points()],
        [
            "ITS-90, sea pressure; potential temperature referred to 0 dbar; lapse rate -g_TP/g_TT",
            "IAPWS-08 and IAPWS-09 are stated to 10 000 dbar; beyond, this is the same polynomial extrapolated",
        ],
    )


if __name__ == "__main__":
    main()
