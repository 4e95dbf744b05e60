"""Writes `salinity-cast.nc`: the demo cast of that name, as CF NetCDF-4 and as NetCDF classic with packed integers.

    v/bin/python tests/golden/make_same_cast.py          (needs numpy and netCDF4)

The cast is invented (demo-data/README.md). The same dive in another format must give the same depth: tests/formats.rs.
"""
import csv
import pathlib

import netCDF4
import numpy as np

here = pathlib.Path(__file__).parent
rows = list(csv.DictReader(open(here.parent.parent / "demo-data" / "salinity-cast.csv")))


def column(name):
    values = np.array([float(row[name]) for row in rows])
    return np.ma.masked_where(values == -999, values)


def write(name, form, packed):
    out = netCDF4.Dataset(here / name, "w", format=form)
    out.Conventions = "CF-1.11"
    out.createDimension("level", len(rows))

    def variable(name, values, standard_name, units, scale):
        kind = "i4" if packed else "f8"
        options = {} if form.startswith("NETCDF3") else {"zlib": True}
        v = out.createVariable(name, kind, ("level",), fill_value=-2147483647 if packed else 9.969209968386869e36, **options)
        v.standard_name, v.units = standard_name, units
        if packed:
            v.scale_factor = scale
        v[:] = values
        return v

    variable("PRES", column("pressure_dbar"), "sea_water_pressure_due_to_sea_water", "dbar", 1.0)
    variable("TEMP", column("temperature_degC"), "sea_water_temperature", "degree_Celsius", 1e-4)
    variable("PSAL", column("practical_salinity"), "sea_water_practical_salinity", "1", 1e-4)
    for name in ("TEMP", "PSAL", "PRES"):
        flag = out.createVariable(name + "_QC", "i1", ("level",))
        flag.long_name = "quality flag"
        flag.conventions = "IOC Manuals and Guides 54, volume 3"
        flag.flag_values = np.array([1, 2, 3, 4, 9], "i1")
        flag.flag_meanings = "good not_evaluated questionable bad missing"
        flag[:] = [int(row["flag"]) for row in rows]
        out[name].ancillary_variables = name + "_QC"
    for name, value, units in (("LATITUDE", -19.4, "degrees_north"), ("LONGITUDE", -131.7, "degrees_east")):
        v = out.createVariable(name, "f8")
        v.standard_name, v.units = name.lower(), units
        v[...] = value
    out.close()


write("salinity-cast.nc", "NETCDF4_CLASSIC", False)
write("salinity-cast-packed.nc", "NETCDF3_CLASSIC", True)
