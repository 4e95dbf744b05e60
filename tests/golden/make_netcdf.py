"""Writes the small NetCDF files that the tests read. All values are invented.

    python make_netcdf.py          (needs netCDF4 and numpy)

The tests hold the numbers below a second time, as they must come out.
"""
import os

import netCDF4
import numpy as np

HERE = os.path.dirname(os.path.abspath(__file__))


def create(name, kind):
    return netCDF4.Dataset(os.path.join(HERE, name), "w", format=kind)


def variable(data, name, dtype, dims, values, fill=None, chunks=None, **attributes):
    v = data.createVariable(name, dtype, dims, fill_value=fill, chunksizes=chunks)
    v.set_auto_maskandscale(False)
    for key, value in attributes.items():
        v.setncattr(key, value)
    if values is not None:
        v[...] = values
    return v


def packed_series():
    """CF time series, classic: packed integers, declared and undeclared fill values, CF names."""
    with create("cf_packed.nc", "NETCDF3_CLASSIC") as d:
        d.Conventions = "CF-1.8"
        d.createDimension("obs", 6)
        variable(d, "t", "f8", ("obs",), np.array([60, 60.5, 61, 61.5, 62, 62.5]),
                 standard_name="time", units="minutes since 2026-03-01 10:00:00", calendar="gregorian")
        # Steps of 0.1 dbar around 1000 dbar; the last holds the fill value of the format, undeclared.
        variable(d, "p", "i2", ("obs",), np.array([-10000, -9000, 0, 250, 32767, -32767]),
                     standard_name="sea_water_pressure_due_to_sea_water", units="decibar",
                     scale_factor=np.float64(0.1), add_offset=np.float64(1000.0), ancillary_variables="other p_status")
        variable(d, "other", "f4", ("obs",), np.arange(6, dtype="f4"), long_name="something else", units="1")
        variable(d, "p_status", "i1", ("obs",), np.array([1, 2, 3, 4, 9, 9], dtype="i1"),
                 standard_name="status_flag", flag_values=np.array([1, 2, 3, 4, 9], dtype="i1"),
                 flag_meanings="pass not_evaluated suspect fail missing")
        variable(d, "tw", "f4", ("obs",), np.array([10, 11, -1.5, 1e35, 12.25, 9.96921e36], dtype="f4"),
                 standard_name="sea_water_temperature", units="degree_Celsius")
        variable(d, "cw", "f8", ("obs",), np.array([4.2, 4.25, -99, 4.0, -98, 4.5]), fill=-99.0,
                 missing_value=np.float64(-98), standard_name="sea_water_electrical_conductivity", units="S m-1")
        variable(d, "lat", "f8", (), np.float64(-31.5), standard_name="latitude", units="degrees_north")
        variable(d, "lon", "f8", (), np.float64(-176.25), standard_name="longitude", units="degrees_east")


def profiles():
    """NetCDF-4, two profiles padded to four levels, character flags as drifting floats carry them."""
    with create("cf_profiles.nc", "NETCDF4") as d:
        d.Conventions = "CF-1.8 Argo-3.1"
        d.createDimension("N_PROF", 2)
        d.createDimension("N_LEVELS", 4)
        d.createDimension("STRING8", 8)
        names = np.array([list("float-1 "), list("float-2 ")], dtype="S1")
        variable(d, "PLATFORM_NUMBER", "S1", ("N_PROF", "STRING8"), names)
        variable(d, "CYCLE_NUMBER", "i4", ("N_PROF",), np.array([7, 8]))
        variable(d, "JULD", "f8", ("N_PROF",), np.array([27819.5, 27829.25]), standard_name="time",
                 units="days since 1950-01-01 00:00:00 UTC")
        variable(d, "LATITUDE", "f8", ("N_PROF",), np.array([10.5, 11.5]), standard_name="latitude", units="degree_north")
        variable(d, "LONGITUDE", "f8", ("N_PROF",), np.array([-40.0, -41.0]), standard_name="longitude", units="degree_east")
        f = 99999.0
        both = ("N_PROF", "N_LEVELS")
        for name, table, standard, unit, words in [
            ("PRES", [[5, 10, 20, f], [6, 12, 24, 48]], "sea_water_pressure", "decibar", "Sea water pressure, equals 0 at sea-level"),
            ("TEMP", [[20.5, 19.5, 18.25, f], [21, f, 18.5, 17]], "sea_water_temperature", "degree_Celsius", "Sea temperature in-situ ITS-90 scale"),
            ("PSAL", [[35.5, 35.25, 35, f], [36, 35.75, 35.5, 35.25]], "sea_water_salinity", "psu", "Practical salinity"),
        ]:
            packed = name == "PRES"
            v = d.createVariable(name, "f4", both, fill_value=np.float32(f), zlib=packed, shuffle=packed)
            v.set_auto_maskandscale(False)
            v.setncatts({"standard_name": standard, "units": unit, "long_name": words})
            v[...] = np.array(table, dtype="f4")
        variable(d, "PRES_QC", "S1", both, np.array([list("112 "), list("1349")], dtype="S1"), fill=b" ",
                 conventions="Argo reference table 2")
        variable(d, "TEMP_QC", "S1", both, np.array([list("158 "), list("0111")], dtype="S1"), fill=b" ",
                 conventions="Argo reference table 2")


def woce_layout():
    """COARDS/WOCE layout of the hydrographic archives, with its degree sign in a legacy encoding."""
    path = os.path.join(HERE, "woce_cast.nc")
    with create("woce_cast.nc", "NETCDF3_CLASSIC") as d:
        d.EXPOCODE = "00XX20260301"
        d.Conventions = "COARDS/WOCE"
        d.WOCE_VERSION = "3.0"
        d.STATION_NUMBER = "12"
        d.CAST_NUMBER = "3"
        d.createDimension("pressure", 5)
        for name in ("time", "latitude", "longitude"):
            d.createDimension(name, 1)
        d.createDimension("string_dimension", 10)
        for name, whp, unit, values, flags in [
            ("pressure", "CTDPRS", "decibar", [4, 6, 8, 10, 12], [2, 2, 2, 2, 2]),
            ("temperature", "CTDTMP", "@C (ITS-90)", [18.5, 18.25, 18, 17.75, -999], [2, 7, 3, 4, 9]),
            ("salinity", "CTDSAL", "PSS-78", [35.25, 35.5, 35.75, 36, 36.25], [1, 6, 8, 5, 2]),
        ]:
            variable(d, name, "f8", ("pressure",), np.array(values, dtype="f8"), long_name=name, units=unit,
                     WHPO_Variable_Name=whp, OBS_QC_VARIABLE=name + "_QC")
            variable(d, name + "_QC", "i2", ("pressure",), np.array(flags), long_name=name + "_QC_flag", units="woce_flags")
        variable(d, "oxygen", "f8", ("pressure",), np.arange(5.0), long_name="oxygen", units="@mol/kg")
        # 2026-03-01T07:27Z: 24 280 287 minutes after the beginning of 1980.
        variable(d, "time", "i4", ("time",), np.array([24280287]), long_name="time", units="minutes since 1980-01-01 00:00:00")
        variable(d, "latitude", "f4", ("latitude",), np.array([42.5], dtype="f4"), units="degrees_N")
        variable(d, "longitude", "f4", ("longitude",), np.array([145.25], dtype="f4"), units="degrees_E")
        variable(d, "woce_date", "i4", ("time",), np.array([20260301]), units="yyyymmdd UTC")
        variable(d, "woce_time", "i2", ("time",), np.array([727]), units="hhmm UTC")
        variable(d, "station", "S1", ("string_dimension",), np.array(list("12        "), dtype="S1"), long_name="STATION")
        variable(d, "cast", "S1", ("string_dimension",), np.array(list("3         "), dtype="S1"), long_name="CAST")
    raw = open(path, "rb").read()
    assert raw.count(b"@C (ITS-90)") == 1 and raw.count(b"@mol/kg") == 1
    raw = raw.replace(b"@C (ITS-90)", b"\xb0C (ITS-90)").replace(b"@mol/kg", b"\xb5mol/kg")
    open(path, "wb").write(raw)


def ragged():
    """64-bit offset; two profiles one behind the other (contiguous ragged array of CF)."""
    with create("cf_ragged.nc", "NETCDF3_64BIT_OFFSET") as d:
        d.Conventions = "CF-1.8"
        d.featureType = "profile"
        d.createDimension("profile", 2)
        d.createDimension("obs", 5)
        variable(d, "profile", "i4", ("profile",), np.array([101, 102]), cf_role="profile_id")
        variable(d, "row_size", "i4", ("profile",), np.array([2, 3]), sample_dimension="obs")
        variable(d, "time", "f8", ("profile",), np.array([0.0, 3600.0]), standard_name="time", units="seconds since 2026-03-01T00:00:00Z")
        variable(d, "lat", "f4", ("profile",), np.array([1.5, 2.5], dtype="f4"), standard_name="latitude", units="degrees_north")
        variable(d, "pressure", "f4", ("obs",), np.array([1, 2, 3, 4, 5], dtype="f4"), standard_name="sea_water_pressure", units="MPa")


def mooring():
    """NetCDF-4 in the manner of a moored instrument: TIME by a DEPTH of one, a flag per value."""
    with create("moored.nc", "NETCDF4_CLASSIC") as d:
        d.Conventions = "CF-1.6 OceanSITES-1.3"
        d.createDimension("TIME", None)
        d.createDimension("DEPTH", 1)
        variable(d, "TIME", "f8", ("TIME",), np.array([27819.5, 27819.5 + 1 / 24, 27819.5 + 2 / 24]), chunks=(3,),
                 standard_name="time", units="days since 1950-01-01T00:00:00Z")
        variable(d, "PRES", "f8", ("TIME", "DEPTH"), np.array([[100.5], [101.5], [99.5]]), chunks=(3, 1), standard_name="sea_water_pressure", units="dbar")
        variable(d, "PRES_QC", "i1", ("TIME", "DEPTH"), np.array([[1], [2], [8]], dtype="i1"), chunks=(3, 1), long_name="quality flag")
        variable(d, "CNDC", "f8", ("TIME", "DEPTH"), np.array([[40.5], [41.5], [42.5]]), chunks=(3, 1),
                 standard_name="sea_water_electrical_conductivity", units="mS/cm")


if __name__ == "__main__":
    packed_series()
    profiles()
    woce_layout()
    ragged()
    mooring()
