"""The smaller logs of the demo data: shelf cast, cast with salinity, profile. Used by make_demo.py."""

from datetime import datetime, timedelta, timezone

import numpy as np

from make_dive import LATITUDE, LONGITUDE, column
from make_ocean import STANDARD_ATMOSPHERE_DBAR, Column, pressure_of_depth, shelf_water, trench_water
from make_tables import number, point, row


def shelf_cast():
    """A cast on a wire to 64 m: absolute pressure in kPa, decimal comma, 4 samples a second."""
    rng = np.random.RandomState(20240324)
    latitude, longitude, air_hpa = -38.25, -151.4, 1014.8
    offset_kpa, noise_kpa, noise_degc, noise_s_m = 0.12, 0.02, 0.001, 0.00005
    knots_s = [0, 60, 75, 135, 257, 277, 405, 410, 455]
    knots_m = [-2.5, -2.5, 3.0, 3.0, 64.0, 64.0, 0.0, -2.5, -2.5]
    t = np.arange(0.0, knots_s[-1] + 0.25, 0.25)
    n = len(t)
    z = np.interp(t, knots_s, knots_m)
    # On a wire the heave of the vessel reaches the instrument whole, at any depth.
    overboard = (t > 60) & (t < 410)
    z = z + np.where(overboard, 0.05 * np.sin(2.0 * np.pi * t / 5.0), 0.0)
    water = Column(shelf_water, latitude, longitude, air_hpa, 80.0)
    p = pressure_of_depth(z, water, water, 0.0)
    wet = z > 0.0
    air = 21.6 + 0.2 * np.sin(2.0 * np.pi * t / 200.0)
    temperature = np.where(wet, water.temperature(p), air) + noise_degc * rng.standard_normal(n)
    conductivity = np.where(wet, water.conductivity(p) / 10.0, 0.0)
    conductivity = conductivity + noise_s_m * rng.standard_normal(n)
    reading = (p + STANDARD_ATMOSPHERE_DBAR) * 10.0 + offset_kpa + noise_kpa * rng.standard_normal(n)

    start = datetime(2024, 3, 24, 2, 15, tzinfo=timezone.utc)
    lines = [
        "# Shelf cast 7 of an invented expedition, vessel Lirrowen; no such cast was ever taken",
        "# Position: latitude -38.2500, longitude -151.4000 (degrees, north and east positive)",
        "# Pressure is absolute, from vacuum. Air pressure at the sea surface 1014.8 hPa",
        "# Late summer, light wind; soak at 3 m for one minute, then down at half a metre a second",
        "time [UTC];pressure [kPa];conductivity [S/m];temperature [degC]",
    ]
    for i in range(n):
        stamp = (start + timedelta(seconds=t[i])).isoformat(timespec="milliseconds")
        values = row((reading[i], conductivity[i], temperature[i]), (3, 5, 4), ";")
        lines.append(stamp.replace("+00:00", "Z") + ";" + values.replace(".", ","))

    deepest, highest = int(np.argmax(z)), int(np.argmax(reading))
    raw = (reading[highest] - offset_kpa) / 10.0 - STANDARD_ATMOSPHERE_DBAR
    stop = (t >= 257) & (t <= 277)
    truth = {
        "latitude": latitude, "longitude": longitude, "air_pressure_hPa": air_hpa,
        "pressure_kind": "absolute", "zero_offset_kPa": offset_kpa,
        "deck_reading_kPa": round(air_hpa / 10.0 + offset_kpa, 3),
        "deepest_depth_m": round(float(z[deepest]), 4), "deepest_time_s": float(t[deepest]),
        "deepest_true_sea_pressure_dbar": round(float(p[deepest]), 4),
        "plateau_time_s": [257, 277], "plateau_mean_depth_m": round(float(z[stop].mean()), 4),
        "raw_maximum_time_s": float(t[highest]),
        "raw_maximum_reading_kPa": round(float(reading[highest]), 3),
        "raw_maximum_depth_m": round(float(water.depth(raw)), 3),
        "deepest_depth_with_composition_atlas_m": round(water.with_composition_atlas(p[deepest]), 4),
        "noise_standard_deviation": {"pressure_kPa": noise_kpa, "temperature_degC": noise_degc,
                                     "conductivity_S_m": noise_s_m},
        "samples": n, "sample_interval_s": 0.25,
        "water_first_and_last_sample": [int(np.argmax(wet)), int(n - 1 - np.argmax(wet[::-1]))],
    }
    chosen = [305, 406, 563, 641, 762, 885, 1003, 1045, 1094, 1206, 1307, 1402, 1505, 1593]
    return lines, truth, [point("shelf-cast.csv", i, t[i], p[i], z[i]) for i in chosen]


def salinity_cast():
    """A down leg averaged in steps of 2 dbar, with Practical Salinity and flags, without time."""
    rng = np.random.RandomState(20240314)
    air_hpa, wave = 1011.6, 0.4
    noise_degc, noise_salinity = 0.0003, 0.0004
    water = column(wave, air_hpa, 2510.0)
    p = np.arange(6.0, 2501.0, 2.0)
    n = len(p)
    temperature = water.temperature(p) + noise_degc * rng.standard_normal(n)
    salinity = trench_water(p, wave)[0] + noise_salinity * rng.standard_normal(n)
    flag = np.ones(n, dtype=int)
    at = {q: int((q - 6) / 2) for q in (212, 214, 216, 618, 988, 1432, 1434, 1890, 2204)}
    for q, error in ((212, -0.081), (214, -0.117), (216, -0.064)):  # bubbles in the cell
        salinity[at[q]] += error
        flag[at[q]] = 3
    temperature[at[988]] += 0.35
    flag[at[988]] = 3
    salinity[at[618]] -= 6.4
    flag[at[618]] = 4
    temperature[at[1890]] += 3.1
    flag[at[1890]] = 4
    for q in (1432, 1434):
        salinity[at[q]] = -999.0
        flag[at[q]] = 9
    temperature[at[2204]] = salinity[at[2204]] = -999.0
    flag[at[2204]] = 9

    def cell(value):
        return "-999" if value == -999.0 else number(value, 4)

    lines = ["pressure_dbar,temperature_degC,practical_salinity,flag"]
    lines += [f"{p[i]:.0f},{cell(temperature[i])},{cell(salinity[i])},{flag[i]}" for i in range(n)]
    truth = {
        "latitude": LATITUDE, "longitude": LONGITUDE, "air_pressure_hPa": air_hpa,
        "pressure_kind": "sea", "zero_offset_dbar": 0.0,
        "last_pressure_dbar": float(p[-1]),
        "deepest_depth_m": round(float(water.depth(p[-1])), 4),
        "deepest_depth_with_composition_atlas_m": round(water.with_composition_atlas(p[-1]), 4),
        "depth_of_first_sample_m": round(float(water.depth(p[0])), 4),
        "noise_standard_deviation": {"temperature_degC": noise_degc,
                                     "practical_salinity": noise_salinity},
        "samples": n,
        "pressure_dbar_of_flag": {str(k): p[flag == k].astype(int).tolist() for k in (3, 4, 9)},
    }
    chosen = [6, 50, 100, 200, 400, 800, 1200, 1600, 2000, 2500]
    points = [point("salinity-cast.csv", (q - 6) // 2, None, q, water.depth(q)) for q in chosen]
    return lines, truth, points


def nearby_profile(deepest_dbar):
    """Pressure, Practical Salinity and temperature of the trench, two days before the dive.

    `deepest_dbar` is the deepest true pressure of the lander dive: the truth tells what depth
    this water gives it.
    """
    rng = np.random.RandomState(20240309)
    air_hpa, wave = 1010.1, -0.2
    noise_degc, noise_salinity = 0.0003, 0.0004
    water = column(wave, air_hpa)
    p = np.concatenate((np.arange(5.0, 200.0, 5.0), np.arange(200.0, 1000.0, 10.0),
                        np.arange(1000.0, 3000.0, 25.0), np.arange(3000.0, 11251.0, 75.0)))
    temperature = water.temperature(p) + noise_degc * rng.standard_normal(len(p))
    salinity = trench_water(p, wave)[0] + noise_salinity * rng.standard_normal(len(p))
    lines = ["pressure_dbar,practical_salinity,temperature_degC"]
    lines += [row(r, (0, 4, 4)) for r in zip(p, salinity, temperature)]
    of_the_day = column(wave)
    truth = {
        "latitude": LATITUDE, "longitude": LONGITUDE, "air_pressure_hPa": air_hpa,
        "pressure_kind": "sea", "zero_offset_dbar": 0.0,
        "last_pressure_dbar": float(p[-1]),
        "deepest_depth_m": round(float(water.depth(p[-1])), 4),
        "deepest_depth_with_composition_atlas_m": round(water.with_composition_atlas(p[-1]), 4),
        "lander_deepest_depth_by_this_profile_m": round(float(of_the_day.depth(deepest_dbar)), 4),
        "noise_standard_deviation": {"temperature_degC": noise_degc,
                                     "practical_salinity": noise_salinity},
        "samples": len(p),
    }
    chosen = [0, 20, 60, 120, 180, 240, len(p) - 1]
    points = [point("nearby-profile.csv", i, None, p[i], water.depth(p[i])) for i in chosen]
    return lines, truth, points
