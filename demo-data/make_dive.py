"""The lander dive of the demo data, and its subset with pressure only. Used by make_demo.py."""

import numpy as np

from make_ocean import Column, pressure_of_depth, trench_water
from make_tables import point, row

LATITUDE, LONGITUDE = -19.4, -131.7
AIR_HPA = 1009.3
ZERO_OFFSET_DBAR = 0.38
NOISE_DBAR, NOISE_DEGC, NOISE_MS_CM = 0.03, 0.0005, 0.0005
AIR_DEGC = 26.0
SEED = 20240311

# Seconds of the log, one sample each.
LOWER, SOAK, RELEASE, TOUCHDOWN, LIFT_OFF, SURFACED, HOIST, ON_DECK, END = (
    480, 510, 660, 11460, 14460, 24960, 25260, 25290, 25650)
DECK_M, SOAK_M, FLOAT_M = -4.0, 6.0, 1.2
HIGH_WATER, HIGH_WATER_DEPTH_M, TIDE_AMPLITUDE_M, TIDE_PERIOD_S = 13860, 10871.36, 0.6, 44714.0
HEAVE_M, HEAVE_PERIOD_S, HEAVE_DECAY_M = 0.6, 8.0, 16.0

PUMP_OFF_FROM_DBAR, PUMP_OFF_S, PUMP_OFF_DROP_MS_CM = 3000.0, 240, 4.2
PRESSURE_SPIKE_AT, PRESSURE_SPIKE_DBAR = 13000, 35.0  # a tenth sample: also in the subset
TEMPERATURE_SPIKE_FROM_DBAR, TEMPERATURE_SPIKE_DEGC = 6000.0, 4.0
STUCK_FROM_DBAR, STUCK_S = 1600.0, 90


def seafloor_depth(t):
    """Depth of the resting pressure port below the sea surface of the moment: the tide goes on."""
    phase = 2.0 * np.pi * (t - HIGH_WATER) / TIDE_PERIOD_S
    return HIGH_WATER_DEPTH_M - TIDE_AMPLITUDE_M * (1.0 - np.cos(phase))


def travelled(t, start, stop, swings):
    """Share of the way done at time t, speed swinging slowly about its mean, from rest."""
    s = np.arange(stop - start + 1.0)
    speed = np.minimum(1.0, s / 6.0)
    for size, period, phase in swings:
        speed = speed + size * np.minimum(1.0, s / 6.0) * np.sin(2.0 * np.pi * s / period + phase)
    way = np.concatenate(([0.0], np.cumsum(0.5 * (speed[1:] + speed[:-1]))))
    return np.interp(t, start + s, way / way[-1])


def true_depth(t):
    """Depth of the pressure port below the sea surface; negative on deck."""
    z = np.interp(t, [LOWER, SOAK, HOIST, ON_DECK], [DECK_M, SOAK_M, FLOAT_M, DECK_M])
    fall = travelled(t, RELEASE, TOUCHDOWN, [(0.05, 3100.0, 0.0), (0.025, 770.0, 0.8)])
    rise = travelled(t, LIFT_OFF, SURFACED, [(0.03, 4100.0, 1.5), (0.02, 900.0, 0.0)])
    z = np.where((t > SOAK) & (t <= RELEASE), SOAK_M, z)
    z = np.where((t > RELEASE) & (t < TOUCHDOWN),
                 SOAK_M + fall * (seafloor_depth(TOUCHDOWN) - SOAK_M), z)
    z = np.where((t >= TOUCHDOWN) & (t <= LIFT_OFF), seafloor_depth(t), z)
    z = np.where((t > LIFT_OFF) & (t < SURFACED),
                 seafloor_depth(LIFT_OFF) + rise * (FLOAT_M - seafloor_depth(LIFT_OFF)), z)
    z = np.where((t >= SURFACED) & (t <= HOIST), FLOAT_M, z)
    groups = 1.0 + 0.3 * np.sin(2.0 * np.pi * t / 57.0)
    heave = HEAVE_M * groups * np.cos(2.0 * np.pi * t / HEAVE_PERIOD_S)
    overboard = (t > LOWER) & (t < ON_DECK)
    return z + np.where(overboard, heave * np.exp(-np.maximum(z, 0.0) / HEAVE_DECAY_M), 0.0)


def column(wave, air_hpa=AIR_HPA, bottom_dbar=11300.0):
    return Column(lambda p: trench_water(p, wave), LATITUDE, LONGITUDE, air_hpa, bottom_dbar)


def lander_dive():
    """Lines of both logs, their truth, and the true depths at chosen samples."""
    rng = np.random.RandomState(SEED)
    t = np.arange(END + 1.0)
    n = len(t)
    early, late = column(-1.0), column(+1.0)
    share = np.clip((t - TOUCHDOWN) / (LIFT_OFF - TOUCHDOWN), 0.0, 1.0)
    z = true_depth(t)
    p = pressure_of_depth(z, early, late, share)
    residual = (1.0 - share) * early.depth(p) + share * late.depth(p) - np.maximum(z, 0.0)
    if np.max(np.abs(residual)) > 1e-6:
        raise RuntimeError(f"pressure and depth disagree by {np.max(np.abs(residual))} m")
    wet = z > 0.0

    gusts = np.zeros(n)
    for i in range(1, n):
        gusts[i] = 0.97 * gusts[i - 1] + 0.015 * rng.standard_normal()
    air = AIR_DEGC + 0.3 * np.sin(2.0 * np.pi * t / 900.0) + gusts
    temperature = (1.0 - share) * early.temperature(p) + share * late.temperature(p)
    conductivity = (1.0 - share) * early.conductivity(p) + share * late.conductivity(p)
    temperature = np.where(wet, temperature, air) + NOISE_DEGC * rng.standard_normal(n)
    clean = np.where(wet, conductivity, 0.0)
    conductivity = clean + NOISE_MS_CM * rng.standard_normal(n)
    reading = p + ZERO_OFFSET_DBAR + NOISE_DBAR * rng.standard_normal(n)

    down, up = t < TOUCHDOWN, t > LIFT_OFF
    off = int(np.argmax(down & (p > PUMP_OFF_FROM_DBAR)))
    s = np.arange(PUMP_OFF_S)
    conductivity[off:off + PUMP_OFF_S] = (
        clean[off] - PUMP_OFF_DROP_MS_CM + 0.12 * (1.0 - np.exp(-s / 90.0))
        + 0.2 * NOISE_MS_CM * rng.standard_normal(PUMP_OFF_S))
    glitch = int(np.argmax(down & (p > TEMPERATURE_SPIKE_FROM_DBAR)))
    temperature[glitch] += TEMPERATURE_SPIKE_DEGC
    stuck = int(np.argmax(up & (p < STUCK_FROM_DBAR)))
    temperature[stuck:stuck + STUCK_S] = temperature[stuck]
    reading[PRESSURE_SPIKE_AT] += PRESSURE_SPIKE_DBAR

    full = ["time_s,pressure_dbar,conductivity_mS_cm,temperature_degC"]
    full += [row((int(t[i]), reading[i], conductivity[i], temperature[i]), (0, 3, 4, 4))
             for i in range(n)]
    thin = ["time_s,pressure_dbar"]
    thin += [row((int(t[i]), reading[i]), (0, 3)) for i in range(0, n, 10)]

    def depth_as_read(i):
        """What the reading of a sample, less the zero offset, stands for: noise is in it."""
        q = reading[i] - ZERO_OFFSET_DBAR
        return float((1.0 - share[i]) * early.depth(q) + share[i] * late.depth(q))

    deepest = int(np.argmax(z))
    rest = np.where((t >= TOUCHDOWN) & (t <= LIFT_OFF) & (t != PRESSURE_SPIKE_AT), reading, 0.0)
    highest = int(np.argmax(rest))
    common = {
        "latitude": LATITUDE, "longitude": LONGITUDE, "air_pressure_hPa": AIR_HPA,
        "pressure_kind": "sea", "zero_offset_dbar": ZERO_OFFSET_DBAR,
        "deck_reading_dbar": round(float(early.surface_dbar) + ZERO_OFFSET_DBAR, 4),
        "deepest_depth_m": round(float(z[deepest]), 4), "deepest_time_s": int(t[deepest]),
        "deepest_true_sea_pressure_dbar": round(float(p[deepest]), 4),
        "plateau_time_s": [TOUCHDOWN, LIFT_OFF],
        "plateau_depth_m": [round(float(z[TOUCHDOWN:LIFT_OFF + 1].min()), 4),
                            round(float(z[deepest]), 4)],
        "raw_maximum_time_s": int(t[np.argmax(reading)]),
        "raw_maximum_reading_dbar": round(float(reading.max()), 3),
        "raw_maximum_depth_m": round(depth_as_read(int(np.argmax(reading))), 3),
    }
    # How far other honest choices of the water lie from the truth, at the deepest true pressure.
    other = {
        "deepest_depth_by_down_leg_m": round(float(early.depth(p[deepest])), 4),
        "deepest_depth_by_up_leg_m": round(float(late.depth(p[deepest])), 4),
        "deepest_depth_with_composition_atlas_m": round(
            (1.0 - share[deepest]) * early.with_composition_atlas(p[deepest])
            + share[deepest] * late.with_composition_atlas(p[deepest]), 4),
    }
    truth = common | other | {
        "raw_maximum_without_spike": {"sample": highest, "reading_dbar": round(rest[highest], 3),
                                      "depth_m": round(depth_as_read(highest), 3)},
        "noise_standard_deviation": {"pressure_dbar": NOISE_DBAR, "temperature_degC": NOISE_DEGC,
                                     "conductivity_mS_cm": NOISE_MS_CM},
        "samples": n, "sample_interval_s": 1,
        "phases_first_sample": {"deck": 0, "lowering": LOWER, "soak": SOAK, "free_fall": RELEASE,
                                "bottom": TOUCHDOWN, "ascent": LIFT_OFF + 1, "afloat": SURFACED,
                                "hoisting": HOIST, "deck_again": ON_DECK},
        "water_first_and_last_sample": [int(np.argmax(wet)), int(n - 1 - np.argmax(wet[::-1]))],
        "faults_first_and_last_sample": {
            "pump_off_conductivity": [off, off + PUMP_OFF_S - 1],
            "pressure_spike": [PRESSURE_SPIKE_AT, PRESSURE_SPIKE_AT],
            "temperature_spike": [glitch, glitch],
            "temperature_stuck": [stuck, stuck + STUCK_S - 1]},
    }
    subset = common | {"every_nth_sample_of_lander_dive": 10, "samples": len(thin) - 1,
                       "noise_standard_deviation": {"pressure_dbar": NOISE_DBAR}}
    # In the thin log the deepest sample is the nearest tenth one; the depth is the same to 1e-6 m.
    kept = np.arange(0, n, 10)
    at = kept[np.argmax(z[kept])]
    subset["deepest_depth_m"] = round(float(z[at]), 4)
    subset["deepest_time_s"] = int(t[at])
    chosen = [520, 600, 700, 900, 1300, 2000, 3000, 4500, 6000, 8000, 10000, 11400, 11500, 12500,
              13860, 14400, 15000, 17000, 19000, 21000, 23000, 24000, 24600, 24900, 25100]
    points = [point("lander-dive.csv", i, t[i], p[i], z[i]) for i in chosen]
    points += [point("pressure-only-dive.csv", i // 10, t[i], p[i], z[i])
               for i in chosen if i % 10 == 0]
    return full, thin, truth, subset, points
