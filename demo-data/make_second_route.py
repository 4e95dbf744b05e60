"""Reduce the printed logs by a route of their own and hold the depths against the truth.

    python3 demo-data/make_second_route.py

Shares no code with the making of the data: reads the files as printed, takes the offset from the
deck samples, the profile from the noisy samples in 2 dbar means, the specific volume from the
75-term polynomial in Conservative Temperature (the making uses the exact Gibbs function), normal
gravity from the formula of Somigliana with printed constants, and integrates by Runge-Kutta. Also
prints what each planted fault is worth when it is left in. Exit status 1 when a depth is off.
"""

import json
import sys
from pathlib import Path

import gsw
import numpy as np

HERE = Path(__file__).resolve().parent
# The polynomial is good to 1 mm over the full ocean depth; the noise of the profile adds little.
TOLERANCE_M = 0.002


def depth(profile_dbar, volume, air_hpa, target_dbar, latitude, steps=3000):
    """Depth of a sea pressure in m; the first value of the profile reaches up to the surface."""
    s2 = np.sin(np.radians(latitude)) ** 2
    on_ellipsoid = 9.7803253359 * (1 + 0.00193185265241 * s2) / np.sqrt(1 - 0.00669437999013 * s2)
    a, f, m = 6378137.0, 1 / 298.257223563, 0.00344978650684

    def slope(p, z, mass):
        g = on_ellipsoid * (1 + 2 / a * (1 + f + m - 2 * f * s2) * z + 3 * z * z / a / a)
        g -= 4 * np.pi * 6.67430e-11 * mass
        return np.array([np.interp(p, profile_dbar, volume) / g, 1 / g])

    p = air_hpa / 100 - 10.1325
    half = (target_dbar - p) / steps / 2
    y = np.zeros(2)
    for _ in range(steps):
        k1 = slope(p, *y)
        k2 = slope(p + half, *(y + k1 * half * 1e4))
        k3 = slope(p + half, *(y + k2 * half * 1e4))
        k4 = slope(p + 2 * half, *(y + k3 * half * 2e4))
        y = y + (k1 + 2 * k2 + 2 * k3 + k4) * half * 1e4 / 3
        p += 2 * half
    return float(y[0])


def specific_volume(practical_salinity, temperature, p):
    sa = practical_salinity * 35.16504 / 35
    return gsw.specvol(sa, gsw.CT_from_t(sa, temperature, p), p)


def means(p, v):
    cell = np.round(p / 2).astype(int)
    count = np.bincount(cell)
    used = count > 0
    return (np.bincount(cell, p)[used] / count[used], np.bincount(cell, v)[used] / count[used])


def table(name, skip, separator=","):
    lines = (HERE / name).read_text().splitlines()[skip:]
    if separator == ";":
        lines = [line.replace(",", ".").split(";", 1)[1] for line in lines]
    return np.array([[float(cell) for cell in line.split(separator)] for line in lines]).T


class Verdicts:
    def __init__(self):
        self.failed = False

    def against_truth(self, what, found, truth):
        good = abs(found - truth) <= TOLERANCE_M
        self.failed = self.failed or not good
        print(f"{'ok  ' if good else 'FAIL'} {what}: {found:.4f} m, truth {truth:.4f} m, "
              f"{1000 * (found - truth):+.2f} mm")


def dive(truth, say):
    t, p, c, temperature = table("lander-dive.csv", 1)
    air, latitude = truth["air_pressure_hPa"], truth["latitude"]
    target = truth["deepest_true_sea_pressure_dbar"]
    p = p - (p[:480].mean() - (air / 100 - 10.1325))
    v = specific_volume(gsw.SP_from_C(c, temperature, p), temperature, p)
    faults = truth["faults_first_and_last_sample"]
    legs = {"down": (t >= 520) & (t < 11460), "up": (t > 14461) & (t < 25250)}

    def by(leg, kept=()):
        sel = legs[leg].copy()
        for fault, (first, last) in faults.items():
            if fault not in kept:
                sel[first:last + 1] = False
        return depth(*means(p[sel], v[sel]), air, target, latitude)

    clean = {leg: by(leg) for leg in legs}
    for leg in legs:
        say.against_truth(f"dive, {leg} leg", clean[leg], truth[f"deepest_depth_by_{leg}_leg_m"])
    for leg, fault in (("down", "pump_off_conductivity"), ("down", "temperature_spike"),
                       ("up", "temperature_stuck")):
        print(f"     {fault} left in the {leg} leg: {by(leg, (fault,)) - clean[leg]:+.4f} m")
    high = np.median(p[13560:14161])
    print(f"     median of ten minutes about high water {high:.4f} dbar, true maximum {target} dbar")


def others(truth, say):
    p, salinity, temperature = table("nearby-profile.csv", 1)
    v = specific_volume(salinity, temperature, p)
    near, lander = truth["nearby-profile.csv"], truth["lander-dive.csv"]
    say.against_truth("nearby profile",
                      depth(p, v, near["air_pressure_hPa"], p[-1], near["latitude"]),
                      near["deepest_depth_m"])
    say.against_truth("dive by the nearby profile",
                      depth(p, v, lander["air_pressure_hPa"],
                            lander["deepest_true_sea_pressure_dbar"], lander["latitude"]),
                      near["lander_deepest_depth_by_this_profile_m"])

    p, temperature, salinity, flag = table("salinity-cast.csv", 1)
    good = flag == 1
    v = specific_volume(salinity[good], temperature[good], p[good])
    cast = truth["salinity-cast.csv"]
    say.against_truth("salinity cast",
                      depth(p[good], v, cast["air_pressure_hPa"], p[-1], cast["latitude"]),
                      cast["deepest_depth_m"])

    kpa, s_m, temperature = table("shelf-cast.csv", 5, ";")
    cast = truth["shelf-cast.csv"]
    air = cast["air_pressure_hPa"]
    p = (kpa - (kpa[:240].mean() - air / 10)) / 10 - 10.1325
    down = slice(300, 1029)
    v = specific_volume(gsw.SP_from_C(10 * s_m[down], temperature[down], p[down]),
                        temperature[down], p[down])
    say.against_truth("shelf cast, mean of the stop",
                      depth(*means(p[down], v), air, p[1028:1109].mean(), cast["latitude"]),
                      cast["plateau_mean_depth_m"])


def main():
    truth = json.loads((HERE / "truth.json").read_text())
    say = Verdicts()
    dive(truth["lander-dive.csv"], say)
    others(truth, say)
    return 1 if say.failed else 0


if __name__ == "__main__":
    sys.exit(main())
