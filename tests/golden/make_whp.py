"""Writes the small WHP-Exchange files and zip archives that the tests read. All values are invented.

    python3 make_whp.py          (standard library only)

The tests hold the numbers below a second time, as they must come out.
"""
import gzip
import io
import os
import zipfile

HERE = os.path.dirname(os.path.abspath(__file__))

CAST = """CTD,20260302XXXINV
# invented values; no such cast was ever taken
#two decimals more than any instrument needs
NUMBER_HEADERS = 10
EXPOCODE = 00XX20260301
SECT_ID = X01
STNNBR = {station}
CASTNO = 2
DATE = 20260301
TIME = 0727
LATITUDE = -31.5200
LONGITUDE = -176.2500
DEPTH = 4321
CTDPRS,CTDPRS_FLAG_W,CTDTMP,CTDTMP_FLAG_W,CTDSAL,CTDSAL_FLAG_W,CTDOXY,CTDOXY_FLAG_W
DBAR,,ITS-90,,PSS-78,,UMOL/KG,
     3.0,2,  18.5012,2,  35.2501,2,   230.1,2
     5.0,2,  18.4000,7,  35.2600,6,   229.9,2
     7.0,3,  18.3000,3,  35.2700,4,  -999.0,9
     9.0,2,-999.0000,9,-999.0000,5,   229.0,2
    11.0,2,  18.1000,1,  35.2900,8,   228.5,2
END_DATA
"""

OLD = """CTD,19850302XXXINV
NUMBER_HEADERS = 9
EXPOCODE = 00XX19850301
STNNBR = 7
CASTNO = 1
DATE = 19850301
TIME = 2359
LATITUDE = 10.5
LONGITUDE = 150.25
DEPTH = -999
CTDPRS,CTDPRS_FLAG_W,CTDTMP,CTDTMP_FLAG_W,CTDCOND,CTDCOND_FLAG_W
DBAR,,IPTS-68,,MS/CM,
10.0,2,10.0024,2,40.5,2
20.0,2,5.0012,2,35.25,2
-999.00,9,-999.0000,9,-999.0,9
END_DATA
"""

TEXT = "time_s,pressure_dbar,temperature_degC\n0,1.5,12.5\n1,2.5,12.25\n2,4.5,12\n"

README = "Casts of an invented cruise.\nNothing in here was ever measured.\n"


def put(archive, name, data, method=zipfile.ZIP_DEFLATED):
    info = zipfile.ZipInfo(name, (2026, 3, 1, 7, 27, 0))
    info.compress_type = method
    archive.writestr(info, data)


class Pipe(io.RawIOBase):
    """A stream that cannot seek: sizes go behind the data, as a piped zip writes them."""

    def __init__(self, file):
        self.file = file

    def writable(self):
        return True

    def write(self, data):
        return self.file.write(data)


def write(name, data):
    with open(os.path.join(HERE, name), "wb") as f:
        f.write(data)


def main():
    write("whp_cast.csv", CAST.format(station=12).encode())
    write("whp_old.csv", OLD.replace("\n", "\r\n").encode())
    netcdf = open(os.path.join(HERE, "woce_cast.nc"), "rb").read()
    with zipfile.ZipFile(os.path.join(HERE, "casts.zip"), "w") as z:
        put(z, "casts/", b"", zipfile.ZIP_STORED)
        put(z, "README.txt", README)
        put(z, "casts/x_00012_00002_ct1.csv", CAST.format(station=12))
        put(z, "casts/x_00013_00002_ct1.csv", CAST.format(station=13), zipfile.ZIP_STORED)
        put(z, "__MACOSX/casts/._x_00012_00002_ct1.csv", b"\x00\x05\x16\x07")
        put(z, "text.csv.gz", gzip.compress(TEXT.encode(), mtime=0))
        put(z, "woce_cast.nc", netcdf)
        z.comment = b"an archive may have a comment"
    with open(os.path.join(HERE, "casts_streamed.zip"), "wb") as f, zipfile.ZipFile(Pipe(f), "w") as z:
        for name, data in [("old.csv", OLD), ("text.csv", TEXT)]:
            info = zipfile.ZipInfo(name, (2026, 3, 1, 7, 27, 0))
            info.compress_type = zipfile.ZIP_DEFLATED
            with z.open(info, "w", force_zip64=True) as entry:
                entry.write(data.encode())


if __name__ == "__main__":
    main()
