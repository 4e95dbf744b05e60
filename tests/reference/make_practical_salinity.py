"""Practical Salinity from conductivity, PSS-78, and below 2 the extension of Hill et al. (1986)."""

from itertools import product

import gsw
import numpy as np

from common import versions, write_csv

SALINITY = [0.02, 0.1, 0.5, 1.0, 1.5, 1.9, 1.99, 1.9999, 2.0001, 2.01, 2.1, 5.0, 15.0, 25.0, 35.0, 42.0]
TEMPERATURE = [-2.0, 0.0, 5.0, 15.0, 25.0, 35.0]
PRESSURE = [0.0, 1000.0, 5000.0, 10000.0]
RANDOM_POINTS = 200


def points():
    """Salinity is only the way to a conductivity in the right range; the table starts from the conductivity."""
    yield from product(SALINITY, TEMPERATURE, PRESSURE)
    rng = np.random.default_rng(1978)
    for low, high in [(0.02, 1.9), (1.9, 2.1), (2.1, 42.0)]:
        for _ in range(RANDOM_POINTS):
            yield rng.uniform(low, high), round(rng.uniform(-2, 35), 3), round(rng.uniform(0, 10000), 1)


def row(sp, t, p):
    conductivity = round(float(gsw.C_from_SP(sp, t, p)), 6)
    return conductivity, t, p, gsw.SP_from_C(conductivity, t, p)


def main():
    write_csv(
        "practical_salinity.csv",
        f"{versions('gsw')} SP_from_C",
        "make_practical_salinity.py",
        ["conductivity_ms_cm", "temperature_c", "pressure_dbar", "practical_salinity"],
        [row(*point) for point in points()],
        [
            "ITS-90; C(35, 15 degC IPTS-68, 0) = 42.9140 mS/cm",
            "below 2 gsw multiplies the salinity of Hill et al. (1986) by a factor of temperature alone, such that it is",
            "2 where PSS-78 at 0 dbar is 2; the published extension has no such factor",
        ],
    )


if __name__ == "__main__":
    main()
