"""Opens the NetCDF results of seaplumb as a user would, and holds them against its CSV results.

    python check_netcdf.py SEAPLUMB

SEAPLUMB is the program. Needs numpy, xarray, netCDF4 and scipy. Every file is opened by both engines of xarray with all
warnings as errors, and by netCDF4 alone. Exit status 1 names what is wrong.
"""
import csv
import pathlib
import subprocess
import sys
import tempfile
import warnings

import netCDF4
import numpy as np
import xarray as xr

HERE = pathlib.Path(__file__).resolve().parent
DEMO, GOLDEN = HERE.parent / "demo-data", HERE / "golden"
# Log, options, whether it is a profile by CF, and its station.
CASES = [
    (DEMO / "lander-dive.csv", ["--lat", "-19.4", "--lon", "-131.7"], False, None),
    (DEMO / "shelf-cast.csv", ["--lat", "-38.25", "--lon", "-151.4", "--pressure", "absolute",
                               "--air-pressure", "1014.8"], True, None),
    (DEMO / "salinity-cast.csv", ["--lat", "-19.4"], False, None),
    (DEMO / "pressure-only-dive.csv", ["--lat", "-19.4", "--profile", str(DEMO / "nearby-profile.csv"),
                                       "--water-level", "0.4", "--datum", "mean sea level"], False, None),
    (GOLDEN / "woce_cast.nc", [], True, "12/3"),
]
# Columns of the CSV, variables of the NetCDF, half the last printed digit.
NUMBERS = [("time_s", "time", 5e-5), ("pressure_dbar", "pressure", 5e-4), ("depth_m", "depth", 5e-4),
           ("u_depth_m", "u_depth", 5e-4), ("density_kg_m3", "density", 5e-5)]
# A decimal in binary may stand this much beyond half a digit.
REPRESENTATION = 1e-9


def main(program):
    failures = []
    with tempfile.TemporaryDirectory() as folder:
        for log, options, is_profile, station in CASES:
            call = [program, "reduce", str(log), *options, "--quiet", "--into", folder]
            for form in ("csv", "netcdf"):
                subprocess.run([*call, "--replace", "--format", form], check=True)
            table = read_csv(pathlib.Path(folder) / (log.stem + ".csv"))
            result = pathlib.Path(folder) / (log.stem + ".nc")
            for engine in ("netcdf4", "scipy"):
                wrong = check_xarray(result, engine, table, is_profile, station)
                failures += [f"{log.name}, {engine}: {text}" for text in wrong]
            failures += [f"{log.name}, netCDF4: {text}" for text in check_plain(result, table)]
            print(f"{log.name}: {len(table['flag'])} samples, largest differences {largest(result, table)}")
    for text in failures:
        print("WRONG", text)
    if failures:
        sys.exit(1)
    print(f"{len(CASES)} results open without a warning in xarray (netcdf4, scipy) and agree with the CSV")


def read_csv(path):
    with open(path, newline="") as file:
        rows = list(csv.DictReader(file))
    return {name: [row[name] for row in rows] for name in rows[0]}


def numbers(cells):
    return np.array([float(cell) if cell else np.nan for cell in cells])


def differences(printed, full):
    """Largest difference where both are there, and whether the same samples are missing."""
    gap = np.isnan(printed)
    same_gap = np.array_equal(gap, np.isnan(full))
    return (np.max(np.abs(printed - full)[~gap]) if same_gap and not gap.all() else 0.0), same_gap


def check_xarray(path, engine, table, is_profile, station):
    wrong = []

    def require(truth, text):
        if not truth:
            wrong.append(text)

    with warnings.catch_warnings():
        warnings.simplefilter("error")
        with xr.open_dataset(path, engine=engine) as lazy:
            data = lazy.load()
    require(data.sizes["obs"] == len(table["flag"]), "number of samples")
    for column, variable, half_digit in NUMBERS:
        printed = numbers(table[column])
        if variable not in data.variables:
            require(np.isnan(printed).all(), f"{variable} is not there")
            continue
        values = data[variable].values
        if np.issubdtype(values.dtype, np.datetime64):
            # Whole milliseconds, as the CSV has them.
            stamps = np.array([np.datetime64(t.rstrip("Z")) if t else np.datetime64("NaT") for t in table["time"]])
            far = np.abs((values - stamps) / np.timedelta64(1, "ms")) > 1
            require(not far.any() and np.array_equal(np.isnat(values), np.isnat(stamps)), "absolute times")
            values = (values - data["start_time"].values) / np.timedelta64(1, "s")
        difference, same_gap = differences(printed, values)
        require(same_gap, f"{variable}: other samples are missing than in the CSV")
        require(difference <= half_digit + REPRESENTATION, f"{variable} differs by {difference}")
        if variable != "time":
            require(data[variable].encoding.get("_FillValue") is not None, f"{variable} declares no _FillValue")
    legs = data["leg"].attrs["flag_meanings"].split()
    require([legs[n] for n in data["leg"].values] == table["leg"], "legs")
    require([str(n) for n in data["flag"].values] == table["flag"], "flags")
    require(data["flag"].attrs["flag_values"].dtype == np.int8, "type of flag_values")
    require(data.attrs["Conventions"] == "CF-1.11", "Conventions")
    require(data.attrs.get("featureType") == ("profile" if is_profile else None), "featureType")
    require(data["depth"].attrs["ancillary_variables"].split()[0] == "u_depth", "ancillary_variables")
    require(data["depth"].attrs["datum"] == data.attrs["datum"], "datum")
    for name in ("title", "source", "history", "references", "comment", "water", "assumptions"):
        require(data.attrs.get(name), f"no attribute {name}")
    require(data.attrs["deepest_depth_m"] <= np.nanmax(data["depth"].values) + 1e-9, "deepest depth")
    require(-90 <= data["latitude"].item() <= 90, "latitude")
    require((data["station"].item() if "station" in data.variables else None) == station, "station")
    return wrong


def check_plain(path, table):
    wrong = []
    with netCDF4.Dataset(path) as data:
        if data.data_model != "NETCDF3_64BIT_OFFSET":
            wrong.append(f"format {data.data_model}")
        depth = np.ma.filled(data["depth"][:], np.nan)
        difference, same_gap = differences(numbers(table["depth_m"]), depth)
        if not same_gap or difference > 5e-4 + REPRESENTATION:
            wrong.append(f"depth differs by {difference}")
        # Whatever is named in an attribute must be there.
        for name, variable in data.variables.items():
            for attribute in ("coordinates", "ancillary_variables"):
                for other in getattr(variable, attribute, "").split():
                    if other not in data.variables:
                        wrong.append(f"{name}: {attribute} names {other}, which is not there")
    return wrong


def largest(path, table):
    with xr.open_dataset(path, decode_times=False) as data:
        found = [(name, differences(numbers(table[column]), data[name].values)[0])
                 for column, name, _ in NUMBERS if name in data.variables]
    return ", ".join(f"{name} {difference:.1e}" for name, difference in found)


if __name__ == "__main__":
    if len(sys.argv) != 2:
        sys.exit(__doc__)
    main(sys.argv[1])
