"""The coefficients of the 75-term polynomial for specific volume, recovered from its values.

The polynomial is linear in its coefficients, and gsw evaluates it at any number it is given: far outside the sea the
highest powers stand alone, near it the lowest. One least-squares fit over nine orders of magnitude, rows and columns
scaled, gives every coefficient to twelve digits or more; the paper prints eleven.
"""

import gsw
import numpy as np

from common import versions, write_csv

S_U, OFFSET = 35.16504 * 40 / 35, 24.0
# The largest i + j for each power k of pressure.
DEGREES = [6, 5, 4, 2, 1, 0, 0]
TERMS = [(i, j, k) for k, n in enumerate(DEGREES) for j in range(n + 1) for i in range(n + 1 - j)]
POINTS = 4000
DIGITS = 11
# A coefficient that is one of eleven digits comes out this near to it; by chance, one in fifty would.
NEAR = 1e-12


def points():
    """Half of them spread over orders of magnitude, half over the sea; some with one variable at zero."""
    rng = np.random.default_rng(2015)
    n, half = POINTS, POINTS // 2
    sign = rng.choice([-1, 1], (2, n))
    sa = 10 ** rng.uniform(-1, 6, n)
    ct = sign[0] * 10 ** rng.uniform(-0.5, 5.5, n)
    p = sign[1] * 10 ** rng.uniform(2, 7, n)
    sa[:half], ct[:half], p[:half] = rng.uniform(0, 50, half), rng.uniform(-40, 40, half), rng.uniform(-1e4, 1e4, half)
    ct[::10] = 0
    p[1::10] = 0
    v = gsw.specvol(sa, ct, p)
    # gsw marks what is not a number by 9e15.
    good = np.isfinite(v) & (np.abs(v) < 1e14)
    return sa[good], ct[good], p[good], v[good]


def fit():
    sa, ct, p, v = points()
    s, y, z = np.sqrt((sa + OFFSET) / S_U), ct / 40, p / 1e4
    matrix = np.stack([s**i * y**j * z**k for i, j, k in TERMS], axis=1)
    rows = 1 / np.maximum(np.abs(matrix).max(axis=1) * 1e-5, np.abs(v))
    found = np.zeros(len(TERMS))
    # The second round takes off what the arithmetic of the first left behind.
    for _ in range(3):
        scaled = matrix * rows[:, None]
        columns = np.sqrt((scaled**2).sum(axis=0))
        rest = np.array([np.sum(np.longdouble(r) * found.astype(np.longdouble)) for r in matrix])
        step = np.linalg.lstsq(scaled / columns, np.asarray((v - rest) * rows, dtype=float), rcond=None)[0] / columns
        found += step
        rows = 1 / np.maximum((np.abs(matrix) * np.abs(found)).max(axis=1), np.abs(v))
    return found


def main():
    found = fit()
    printed = [f"{c:.{DIGITS - 1}e}" for c in found]
    distance = [abs(c / float(text) - 1) for c, text in zip(found, printed)]
    if max(distance) > NEAR:
        raise ValueError(f"a coefficient is no number of {DIGITS} digits: {max(distance)}")
    write_csv(
        "polynomial_coefficients.csv",
        f"{versions('gsw', 'numpy')} specvol at {POINTS} points, least squares",
        "make_polynomial.py",
        ["i", "j", "k", "v_m3_kg", "fitted_m3_kg"],
        [(*map(str, term), text, c) for term, text, c in zip(TERMS, printed, found)],
        [
            "Roquet et al. (2015): powers of sqrt((S_A + 24) / S_u), CT / 40 degC, p / 1e4 dbar",
            f"v: the fitted value at {DIGITS} digits; the farthest lies {max(distance):.1e} (relative) off its fit",
        ],
    )


if __name__ == "__main__":
    main()
