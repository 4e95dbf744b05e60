"""A hadal dive through a smooth column: depth by successive steps of realism, and its sensitivities."""

import gsw
import numpy as np
from scipy.integrate import solve_ivp

from common import versions, write_csv
from hydrostatic import PA_PER_DBAR, constant_gravity, depths, ellipsoid_gravity, ocean_gravity

LATITUDE, LONGITUDE, DEEPEST, STEP = -23.2, -174.7, 11000.0, 0.5
STANDARD = 35.16504


def practical_salinity(p):
    return (
        34.69
        - 0.35 * np.exp(-p / 400)
        + 0.8 * np.exp(-(((p - 150) / 100) ** 2))
        - 0.25 * np.exp(-(((p - 450) / 250) ** 2))
    )


def potential_temperature(p):
    return 1.03 + 27 * np.exp(-p / 330) + np.exp(-p / 1500)


def reference_composition(sp, p):
    return sp * (STANDARD / 35)


def atlas_composition(sp, p):
    return gsw.SA_from_SP(sp, p, LONGITUDE, LATITUDE)


COMPOSITIONS = {"reference": reference_composition, "atlas": atlas_composition}


def in_situ(sa, pt, p):
    return gsw.t_from_CT(sa, gsw.CT_from_pt(sa, pt), p)


def temperature(p, composition=reference_composition):
    return in_situ(composition(practical_salinity(p), p), potential_temperature(p), p)


def specific_volume(p, composition=reference_composition):
    return gsw.specvol_t_exact(composition(practical_salinity(p), p), temperature(p, composition), p)


def grid(first=0.0, last=DEEPEST, step=STEP):
    p = np.arange(first, last + step / 2, step)
    p[-1] = last
    return p


def deepest(p, v, gravity):
    return depths(p, v, gravity)[-1]


def check_by_another_solver(depth):
    """The same column as a differential equation for depth and mass of water, with no grid."""
    gravity = ocean_gravity(LATITUDE)

    def slope(p, state):
        g = gravity(*state)
        return [PA_PER_DBAR * specific_volume(np.array(p)) / g, PA_PER_DBAR / g]

    end = solve_ivp(slope, (0, DEEPEST), [0.0, 0.0], method="DOP853", rtol=1e-12, atol=1e-9, max_step=50.0)
    difference = end.y[0][-1] - depth
    print(f"orders of magnitude: other solver minus 0.5 dbar grid {difference:.2e} m")
    if abs(difference) > 1e-5:
        raise ValueError(f"two integrations differ by {difference} m")


def steps(p, composition):
    """Name, depth and note of each step of realism."""
    full, surface = ocean_gravity(LATITUDE), ellipsoid_gravity(LATITUDE)
    v, sa = specific_volume(p, composition), composition(practical_salinity(p), p)
    potential = gsw.specvol_t_exact(sa, potential_temperature(p), 0)
    yield "insitu_density", deepest(p, v, constant_gravity(9.81)), "in-situ density; 9.81 m/s2 throughout"
    yield "latitude_gravity", deepest(p, v, constant_gravity(surface)), "normal gravity of the latitude; constant"
    yield "full", deepest(p, v, full), "normal gravity changing with depth and the water above"
    yield "incompressible", deepest(p, potential, full), "potential density in place of in-situ density"
    yield "surface_water", deepest(p, v[0] + 0 * p, full), "specific volume of the surface water throughout"
    yield "equator", deepest(p, v, ocean_gravity(0.0)), "full; latitude 0"
    yield "pole", deepest(p, v, ocean_gravity(90.0)), "full; latitude 90"
    yield "no_water_above", deepest(p, v, lambda z, mass: full(z, 0 * mass)), "full without the term of the water above"


def standard_steps(p):
    """The same for columns in which the sea measured has no part."""
    full = ocean_gravity(LATITUDE)
    potential_zero = in_situ(STANDARD, 0.0, p)
    conservative_zero = gsw.t_from_CT(STANDARD, 0.0, p)
    yield "nominal_density", DEEPEST * PA_PER_DBAR / (1028 * 9.81), "p/(rho g) 1028 kg/m3 and 9.81 m/s2"
    for name, t, note in [
        ("standard_ocean_in_situ_zero", 0.0, "0 degC in situ at every pressure"),
        ("standard_ocean_potential_zero", potential_zero, "potential temperature 0 degC"),
        ("standard_ocean_conservative_zero", conservative_zero, "Conservative Temperature 0 degC"),
    ]:
        yield name, deepest(p, gsw.specvol_t_exact(STANDARD, t, p), full), "S_A = 35.16504 g/kg; full gravity; " + note
    surface_water = gsw.specvol_t_exact(STANDARD, 0.0, 0.0) + 0 * p
    yield "standard_ocean_incompressible", deepest(p, surface_water, full), "S_A = 35.16504 g/kg; 0 degC; 0 dbar throughout"


def changed(p):
    """Name, depth and note with one input changed."""
    full, v = ocean_gravity(LATITUDE), specific_volume(p)
    sp, t = practical_salinity(p), temperature(p)
    sa = reference_composition(sp, p)
    deeper, below_air = grid(last=DEEPEST + 1), grid(first=0.1)

    def by_gravity(**change):
        return deepest(p, v, ocean_gravity(LATITUDE, **change))

    def by_water(salinity, warmer=0.0):
        return deepest(p, gsw.specvol_t_exact(salinity, t + warmer, p), full)

    yield "disturbance_minus_300_mgal", by_gravity(disturbance_mgal=-300), "gravity -300 mGal throughout"
    yield "gradient_minus_300_eotvos", by_gravity(gradient_eotvos=-300), "g changed by -300e-9 /s2 times depth"
    yield "geoid_plus_50_m", by_gravity(geoid=50), "h = N - z with N = 50 m"
    yield "latitude_plus_0_01_deg", deepest(p, v, ocean_gravity(LATITUDE + 0.01)), "latitude -23.19"
    yield "pressure_plus_1_dbar", deepest(deeper, specific_volume(deeper), full), "11 001 dbar; same column"
    yield (
        "air_pressure_plus_10_hpa",
        deepest(below_air, specific_volume(below_air), full),
        "absolute pressure at depth unchanged; the integral starts at sea pressure 0.1 dbar",
    )
    yield "salinity_plus_0_01", by_water(reference_composition(sp + 0.01, p)), "S_P + 0.01 in the whole column; t unchanged"
    yield "temperature_plus_0_01_c", by_water(sa, 0.01), "in-situ t + 0.01 degC in the whole column"
    yield "absolute_salinity_plus_0_005", by_water(sa + 0.005), "S_A + 0.005 g/kg in the whole column; t unchanged"
    yield "composition_atlas", by_water(atlas_composition(sp, p)), "S_A of the atlas; t unchanged"
    yield "specific_volume_plus_10_ppm", deepest(p, v * (1 + 10e-6), full), "v (1 + 10e-6)"


def column_table(p):
    sp, pt = practical_salinity(p), potential_temperature(p)
    columns, names = [p, sp, pt], ["pressure_dbar", "practical_salinity", "potential_temperature_c"]
    for name, composition in COMPOSITIONS.items():
        v = specific_volume(p, composition)
        columns += [composition(sp, p), temperature(p, composition), v, depths(p, v, ocean_gravity(LATITUDE))]
        names += [
            f"absolute_salinity_{name}_g_kg",
            f"temperature_{name}_c",
            f"specific_volume_{name}_m3_kg",
            f"depth_{name}_m",
        ]
    every = round(100 / STEP)
    write_csv(
        "reference_column.csv",
        f"{versions('gsw', 'numpy')} SA_from_SP, CT_from_pt, t_from_CT, specvol_t_exact; own integration",
        "make_orders_of_magnitude.py",
        names,
        list(zip(*(column[::every] for column in columns))),
        [
            "23.2 S, 174.7 W, no geoid, no anomaly, full gravity, integrated in 0.5 dbar steps",
            "reference: S_A = S_P 35.16504/35; atlas: gsw.SA_from_SP; t of each from the potential temperature",
        ],
    )


def main():
    p = grid()
    rows = [(name, "depth", "none", depth, note) for name, depth, note in standard_steps(p)]
    for composition, function in COMPOSITIONS.items():
        rows += [(name, "depth", composition, depth, note) for name, depth, note in steps(p, function)]
    full = deepest(p, specific_volume(p), ocean_gravity(LATITUDE))
    check_by_another_solver(full)
    rows += [(name, "change", "reference", depth - full, note) for name, depth, note in changed(p)]
    write_csv(
        "orders_of_magnitude.csv",
        f"{versions('gsw', 'numpy', 'scipy')} specvol_t_exact; own integration",
        "make_orders_of_magnitude.py",
        ["name", "kind", "composition", "value_m", "note"],
        rows,
        [
            "23.2 S, 174.7 W, sea pressure 11 000 dbar, the column of reference_column.csv in steps of 0.5 dbar",
            "kind depth: the depth itself; kind change: depth with one input changed, minus 'full'",
            "composition: reference, S_A = S_P 35.16504/35; atlas, gsw.SA_from_SP at the place",
        ],
    )
    column_table(p)


if __name__ == "__main__":
    main()
