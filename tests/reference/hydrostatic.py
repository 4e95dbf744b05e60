"""The hydrostatic balance dPhi = v dp = g dz, for v linear between the given pressures.

Pressures in dbar (sea pressure), specific volume in m3/kg, depth in m and positive down, gravity in m/s2.
"""

import numpy as np

PA_PER_DBAR = 1e4
G = 6.67430e-11  # CODATA 2018
# WGS 84, NIMA TR8350.2 (2000)
GAMMA_E, K, E2 = 9.7803253359, 0.00193185265241, 0.00669437999013
A, F, M = 6378137.0, 1 / 298.257223563, 0.00344978650684


def ellipsoid_gravity(latitude):
    """Somigliana's closed formula on the ellipsoid."""
    s2 = np.sin(np.radians(latitude)) ** 2
    return GAMMA_E * (1 + K * s2) / np.sqrt(1 - E2 * s2)


def normal_gravity(latitude, height):
    """To second order in the height above the ellipsoid."""
    s2 = np.sin(np.radians(latitude)) ** 2
    return ellipsoid_gravity(latitude) * (1 - 2 / A * (1 + F + M - 2 * F * s2) * height + 3 * height**2 / A**2)


def ocean_gravity(latitude, geoid=0.0, disturbance_mgal=0.0, gradient_eotvos=0.0):
    """Gravity at a depth below which lies the ellipsoid's field and above which lie `mass` kg/m2 of water."""

    def gravity(depth, mass):
        normal = normal_gravity(latitude, geoid - depth)
        return normal - 4 * np.pi * G * mass + 1e-5 * disturbance_mgal + 1e-9 * gradient_eotvos * depth

    return gravity


def constant_gravity(value):
    return lambda depth, mass: value + 0 * depth


def potential(p, v):
    """Exact integral of v dp from p[0], v linear between."""
    steps = PA_PER_DBAR * np.diff(p) * (v[1:] + v[:-1]) / 2
    return np.concatenate([[0.0], np.cumsum(steps)])


def depths(p, v, gravity):
    """Depth at each p, zero at p[0].

    Over one step the mean of g is that of its ends: its curvature, 3e-12 m/s2 per m2, makes less than 1e-6 m in 300 m.
    """
    steps, pressure_steps = np.diff(potential(p, v)), PA_PER_DBAR * np.diff(p)
    z, mass = np.zeros(len(p)), np.zeros(len(p))
    for _ in range(50):
        g = gravity(z, mass)
        mean = (g[1:] + g[:-1]) / 2
        before = z
        z = np.concatenate([[0.0], np.cumsum(steps / mean)])
        mass = np.concatenate([[0.0], np.cumsum(pressure_steps / mean)])
        if np.max(np.abs(z - before)) < 1e-9:
            return z
    raise ValueError("the depth did not settle in 50 rounds")
