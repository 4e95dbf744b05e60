"""Normal gravity of the WGS 84 ellipsoid, on it and at heights above and below it."""

import warnings

import boule
import numpy as np

from common import versions, write_csv

LATITUDES = sorted([*np.arange(-90, 90.1, 2.5), -89.9, -23.2, -0.001, 0.123, 11.37, 45.4321, 89.999])
HEIGHT_LATITUDES = [-90.0, -67.3, -45.0, -23.2, 0.0, 11.37, 30.0, 45.0, 60.0, 75.5, 90.0]
HEIGHTS = [-11500.0, -11000.0, -8000.0, -4000.0, -1000.0, -100.0, 50.0, 100.0, 1000.0, 4000.0, 8000.0, 11000.0]


def gravity(latitude, height):
    with warnings.catch_warnings():
        # boule warns below the ellipsoid, where the closed form is the analytic continuation of the outer field.
        warnings.simplefilter("ignore")
        return boule.WGS84.normal_gravity((None, latitude, height), si_units=True)


def main():
    places = [(latitude, 0.0) for latitude in LATITUDES]
    places += [(latitude, height) for latitude in HEIGHT_LATITUDES for height in HEIGHTS]
    write_csv(
        "normal_gravity.csv",
        f"{versions('boule')} WGS84.normal_gravity",
        "make_gravity.py",
        ["latitude_deg", "height_m", "normal_gravity_m_s2"],
        [(latitude, height, gravity(latitude, height)) for latitude, height in places],
        [
            "geodetic latitude, height above the ellipsoid; closed formula in ellipsoidal-harmonic coordinates",
            "below the ellipsoid (negative heights): the same formula, the outer field continued downward",
        ],
    )


if __name__ == "__main__":
    main()
