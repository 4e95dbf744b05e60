"""Coverage factors: two-sided quantiles of Student's t."""

import math

from scipy import stats

from common import versions, write_csv

COVERAGES = [0.6827, 0.90, 0.95, 0.9545, 0.99, 0.9973]
DEGREES_OF_FREEDOM = [
    1, 1.5, 2, 2.7, 3, 4, 5, 7.3, 10, 16, 17, 20, 30, 50, 100, 300,
    999, 1000, 1001, 3000, 1e4, 1e5, 1e6, 1e8, 1e12, math.inf,
]  # fmt: skip


def factor(coverage, nu):
    if math.isinf(nu):
        return stats.norm.isf((1 - coverage) / 2)
    return stats.t.isf((1 - coverage) / 2, nu)


def main():
    write_csv(
        "student_t.csv",
        f"{versions('scipy')} stats.t.isf((1 - c)/2, nu), stats.norm.isf at infinity",
        "make_student_t.py",
        ["coverage", "degrees_of_freedom", "coverage_factor"],
        [(c, nu, factor(c, nu)) for c in COVERAGES for nu in DEGREES_OF_FREEDOM],
    )


if __name__ == "__main__":
    main()
