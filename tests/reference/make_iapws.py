"""Check points of the IAPWS releases on seawater (R13-08) and on liquid water for oceanography (SR7-09)."""

import warnings

from iapws.iapws08 import SeaWater, Sn

from common import versions, write_csv

# The package computes in kJ, K, MPa; the releases print J, K, Pa.
TO_SI = {"g": 1e3, "dg_ds": 1e3, "dg_dt": 1e3, "dg_dp": 1.0, "d2g_ds_dp": 1.0, "d2g_dt2": 1e3, "d2g_dt_dp": 1.0, "d2g_dp2": 1e-6}
KEYS = ["g", "gs", "gt", "gp", "gsp", "gtt", "gtp", "gpp"]

# Printed digits, recalled before the computation and kept where it confirms them: water, saline, seawater.
PRINTED = {
    ("R13-08 8a", "g"): ("0.101342742e3", "-0.101342742e3", ""),
    ("R13-08 8a", "dg_ds"): ("", "0.639974067e5", "0.639974067e5"),
    ("R13-08 8a", "dg_dt"): ("0.147643376", "-0.147643376", ""),
    ("R13-08 8a", "dg_dp"): ("0.100015694e-2", "-0.274957224e-4", "0.972661217e-3"),
    ("R13-08 8a", "d2g_ds_dp"): ("", "-0.759615412e-3", "-0.759615412e-3"),
    ("R13-08 8a", "d2g_dt2"): ("", "0.852861151", ""),
    ("R13-08 8a", "d2g_dt_dp"): ("", "0.119286787e-6", ""),
    ("R13-08 8a", "d2g_dp2"): ("", "0.581535172e-13", ""),
    ("R13-08 8b", "g"): ("-0.446114969e5", "0.150871740e5", "-0.295243229e5"),
    ("R13-08 8b", "dg_ds"): ("", "0.251957276e6", "0.251957276e6"),
    ("R13-08 8b", "dg_dt"): ("-0.107375993e4", "0.156230907e3", "-0.917529024e3"),
    ("R13-08 8b", "dg_dp"): ("0.102892956e-2", "-0.579227286e-4", "0.971006828e-3"),
    ("R13-08 8c", "g"): ("0.977303862e5", "-0.260093051e4", "0.951294557e5"),
    ("R13-08 8c", "dg_ds"): ("", "-0.545861581e4", "-0.545861581e4"),
    ("R13-08 8c", "dg_dt"): ("0.851466502e1", "0.754045685e1", "0.160551219e2"),
    ("R13-08 8c", "dg_dp"): ("0.956683329e-3", "-0.229123842e-4", "0.933770945e-3"),
    ("SR7-09", "g"): ("0.101342743e3",),
    ("SR7-09", "dg_dt"): ("0.147644587",),
    ("SR7-09", "dg_dp"): ("0.100015695e-2",),
    ("SR7-09", "d2g_dt2"): ("-0.154472324e2",),
    ("SR7-09", "d2g_dt_dp"): ("-0.677459513e-7",),
    ("SR7-09", "d2g_dp2"): ("-0.508915308e-12",),
}
SEAWATER_POINTS = [
    ("R13-08 8a", 273.15, 0.101325, Sn),
    ("R13-08 8b", 353.0, 0.101325, 0.1),
    ("R13-08 8c", 273.15, 100.0, Sn),
]
WATER_POINTS = [(273.15, 0.101325), (273.15, 100.0), (313.15, 0.101325)]


def confirmed(printed, value):
    """Nine digits are printed: half of the last one, and a little for the iteration of the density."""
    if printed and abs(float(printed) / value - 1) > 1e-8:
        raise ValueError(f"printed {printed}, computed {value}")
    return printed


def rows():
    for table, kelvin, megapascal, salinity in SEAWATER_POINTS:
        water = SeaWater._water(kelvin, megapascal)
        saline = SeaWater.saline(kelvin, megapascal, salinity)
        for key, (quantity, si) in zip(KEYS, TO_SI.items()):
            values = (water[key] * si, saline[key] * si, (water[key] + saline[key]) * si)
            printed = PRINTED.get((table, quantity), ("", "", ""))
            for part, value, digits in zip(("water_iapws95", "saline", "seawater"), values, printed):
                yield table, kelvin, megapascal * 1e6, salinity, part, quantity, value, confirmed(digits, value)
    for number, (kelvin, megapascal) in enumerate(WATER_POINTS):
        water = SeaWater._waterSupp(kelvin, megapascal)
        for key, (quantity, si) in zip(KEYS, TO_SI.items()):
            if "ds" not in quantity:
                value = water[key] * si
                printed = PRINTED[("SR7-09", quantity)][0] if number == 0 else ""
                yield "SR7-09", kelvin, megapascal * 1e6, 0.0, "water_iapws09", quantity, value, confirmed(printed, value)


def main():
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")  # the package warns at the ends of its range: 353 K and 100 MPa are on them
        content = list(rows())
    write_csv(
        "iapws_check_tables.csv",
        f"computed by {versions('iapws')} at the check points of IAPWS R13-08 table 8 and SR7-09",
        "make_iapws.py",
        ["table", "temperature_k", "pressure_pa", "salinity_kg_kg", "part", "quantity", "value_si", "printed_recalled"],
        content,
        [
            "g in J/kg, derivatives in J, kg, K, Pa; absolute pressure; salinity is Absolute Salinity in kg/kg",
            "printed_recalled: digits of the release as recalled, confirmed by the computed value; empty: none recalled",
            "water_iapws95 comes from an iteration of the density: good to nine digits of the largest term, not to all",
        ],
    )


if __name__ == "__main__":
    main()
