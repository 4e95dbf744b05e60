"""The invented ocean behind the demo data: water columns, gravity, true depth of a pressure.

Used by make_demo.py; not run by itself. Pressures are sea pressure in dbar (absolute pressure
less 101 325 Pa) unless a name says otherwise; depths are metres below the sea surface, positive
down. Nothing here is shared with the Rust program, so that the truth stays independent of it.
"""

from dataclasses import dataclass

import boule
import gsw
import numpy as np

STANDARD_ATMOSPHERE_DBAR = 10.1325
HPA_PER_DBAR = 100.0
PASCAL_PER_DBAR = 1e4
GRAVITATIONAL_CONSTANT = 6.67430e-11  # m3 kg-1 s-2, CODATA 2018
REFERENCE_SALINITY_RATIO = 35.16504 / 35.0  # g/kg, Millero et al. (2008)
GRID_STEP_DBAR = 0.25

INTERNAL_WAVE_BOTTOM_DBAR = 800.0
INTERNAL_WAVE_AMPLITUDE_DBAR = 4.0
MIXED_LAYER_DBAR, MIXING_DBAR = 45.0, 10.0


def trench_water(p, wave):
    """Practical Salinity and potential temperature (degC) of the trench, tropical South Pacific-like.

    `wave` moves the upper 800 dbar down (+1) or up (-1) by at most 4 dbar, water properties
    unchanged: what an internal wave does between two legs of one dive.
    """
    p = np.maximum(p, 0.0)
    inside = p < INTERNAL_WAVE_BOTTOM_DBAR
    lift = np.sin(np.pi * p / INTERNAL_WAVE_BOTTOM_DBAR) ** 2
    q = p - wave * INTERNAL_WAVE_AMPLITUDE_DBAR * np.where(inside, lift, 0.0)
    q = MIXING_DBAR * np.logaddexp(0.0, (q - MIXED_LAYER_DBAR) / MIXING_DBAR)  # flat on top
    salinity = (
        34.69
        + 1.32 / (1.0 + np.exp((q - 200.0) / 70.0))
        + 0.20 * np.exp(-(((q - 110.0) / 75.0) ** 2))
        - 0.31 * np.exp(-(((q - 695.0) / 350.0) ** 2))
    )
    potential = (
        0.96
        + 1.1 * np.exp(-q / 1500.0)
        + 9.4 * np.exp(-q / 520.0)
        + 16.5 / (1.0 + np.exp((q - 175.0) / 75.0))
    )
    return salinity, potential


def shelf_water(p):
    """Practical Salinity and potential temperature (degC) of a shelf sea in late summer."""
    p = np.maximum(p, 0.0)
    step = 0.5 * (1.0 - np.tanh((p - 23.0) / 4.5))
    return 35.12 - 0.46 * step, 12.6 + 6.9 * step - 0.006 * p


def normal_gravity(latitude, depth_m):
    """Normal gravity in m/s2 at a depth, geoid height 0, without the attraction of the water.

    The closed formula holds on and above the ellipsoid only; below it, the second-order
    expansion in height (NIMA TR8350.2, 2000) continues the value on the ellipsoid.
    """
    e = boule.WGS84
    a, f = e.semimajor_axis, e.flattening
    m = e.angular_velocity**2 * a**2 * e.semiminor_axis / e.geocentric_grav_const
    surface = e.normal_gravity((0.0, latitude, 0.0), si_units=True)
    h = -np.asarray(depth_m)
    s2 = np.sin(np.radians(latitude)) ** 2
    return surface * (1.0 - 2.0 / a * (1.0 + f + m - 2.0 * f * s2) * h + 3.0 * h**2 / a**2)


@dataclass
class Column:
    """A water column at one place under the air pressure of one day."""

    water: object  # p -> (Practical Salinity, potential temperature)
    latitude: float
    longitude: float
    air_hpa: float
    bottom_dbar: float
    step_dbar: float = GRID_STEP_DBAR

    def __post_init__(self):
        self.surface_dbar = self.air_hpa / HPA_PER_DBAR - STANDARD_ATMOSPHERE_DBAR
        n = int(np.ceil((self.bottom_dbar - self.surface_dbar) / self.step_dbar))
        self.p = self.surface_dbar + self.step_dbar * np.arange(n + 1)
        self.z = self.integrate(self.reference_salinity(self.p))

    def reference_salinity(self, p):
        return self.water(p)[0] * REFERENCE_SALINITY_RATIO

    def temperature(self, p):
        """In-situ temperature, degC (ITS-90)."""
        salinity, potential = self.water(p)
        sa = salinity * REFERENCE_SALINITY_RATIO
        return gsw.t_from_CT(sa, gsw.CT_from_pt(sa, potential), p)

    def conductivity(self, p):
        """Electrical conductivity, mS/cm."""
        return gsw.C_from_SP(self.water(p)[0], self.temperature(p), p)

    def integrate(self, absolute_salinity):
        """Depth of each grid pressure: v dp = g(z) dz, from the surface down.

        Gravity depends on the depth that is sought and on the mass of water passed, so the
        trapezoidal sum is repeated until the depth stands still.
        """
        v = gsw.specvol_t_exact(absolute_salinity, self.temperature(self.p), self.p)
        step_pa = self.step_dbar * PASCAL_PER_DBAR
        z = (self.p - self.surface_dbar) * 0.97
        mass = z * 1030.0
        for _ in range(30):
            before = z[-1]
            g = normal_gravity(self.latitude, z)
            g = g - 4.0 * np.pi * GRAVITATIONAL_CONSTANT * mass
            z = cumulative(v / g) * step_pa
            mass = cumulative(1.0 / g) * step_pa  # rho dz = dp / g
            if abs(z[-1] - before) < 1e-9:
                return z
        raise RuntimeError(f"depth did not settle in 30 rounds, last change {z[-1] - before} m")

    def depth(self, p):
        # On a 0.25 dbar grid a straight line between nodes is right to 1e-6 m.
        return np.interp(p, self.p, self.z)

    def with_composition_atlas(self, p):
        """Depth of `p` when the Absolute Salinity Anomaly of the global atlas is added.

        The truth has reference composition; this says how far a reduction that uses the atlas
        will lie from it.
        """
        sa = gsw.SA_from_SP(self.water(self.p)[0], self.p, self.longitude, self.latitude)
        return float(np.interp(p, self.p, self.integrate(sa)))


def cumulative(f):
    """Running trapezoidal sum with unit step, starting at zero."""
    return np.concatenate(([0.0], np.cumsum(0.5 * (f[1:] + f[:-1]))))


def pressure_of_depth(depth_m, early, late, share):
    """Sea pressure at a depth in water that is `early` (share 0) turning into `late` (share 1).

    The specific volume of the moment is the mixture of the two columns by `share`, and so, to
    1e-6 m, is the depth of a pressure. Above the sea surface the answer is the air pressure.
    """
    wet = np.maximum(depth_m, 0.0)
    p = np.interp(wet, early.z, early.p)
    for _ in range(6):
        error = (1.0 - share) * early.depth(p) + share * late.depth(p) - wet
        p = np.maximum(p - error * 1.02, early.surface_dbar)
    return p
