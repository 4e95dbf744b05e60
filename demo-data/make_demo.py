#!/usr/bin/env python3
"""Write the demo data of an invented expedition, and the truth behind them.

    python3 -m pip install numpy gsw boule
    python3 demo-data/make_demo.py            writes the files beside this script
    python3 demo-data/make_demo.py --into DIR writes them elsewhere
    python3 demo-data/make_demo.py --check    makes them anew and compares with those beside it

The seeds are fixed. The noise comes from numpy's RandomState, whose stream is frozen for good, so
other versions of numpy make the same files; a mathematical library that rounds another way can
move a last printed digit, which --check tells from a real difference.

The parts: make_ocean.py (water, gravity, true depth), make_dive.py (the lander dive),
make_casts.py (the other logs), make_tables.py (printing); make_second_route.py reduces the printed
logs by a route of its own.
"""

import argparse
import hashlib
import json
import re
import sys
import tempfile
from decimal import Decimal
from pathlib import Path

from make_casts import nearby_profile, salinity_cast, shelf_cast
from make_dive import lander_dive

HERE = Path(__file__).resolve().parent
NUMBER = re.compile(r"-?\d+(?:\.\d+)?")
# A value half way between two printed ones may fall either way: one step, never more.
STEPS_ALLOWED = 1


def make_all():
    """File name -> text of every generated file, the sums last."""
    full, thin, dive, subset, points = lander_dive()
    shelf, shelf_truth, shelf_points = shelf_cast()
    salt, salt_truth, salt_points = salinity_cast()
    near, near_truth, near_points = nearby_profile(dive["deepest_true_sea_pressure_dbar"])
    truth = {
        "about": "Truth behind invented data: depth in m below the sea surface, sea pressure in "
                 "dbar without noise and offset, samples counted from 0, reference-composition "
                 "salinity, normal gravity, geoid height 0.",
        "lander-dive.csv": dive,
        "pressure-only-dive.csv": subset,
        "shelf-cast.csv": shelf_truth,
        "salinity-cast.csv": salt_truth,
        "nearby-profile.csv": near_truth,
    }
    table = ["file,sample,time_s,true_sea_pressure_dbar,depth_m"]
    table += points + shelf_points + salt_points + near_points
    files = {
        "lander-dive.csv": full,
        "pressure-only-dive.csv": thin,
        "shelf-cast.csv": shelf,
        "salinity-cast.csv": salt,
        "nearby-profile.csv": near,
        "truth.csv": table,
    }
    texts = {name: "\n".join(lines) + "\n" for name, lines in files.items()}
    texts["truth.json"] = json.dumps(truth, indent=2) + "\n"
    sums = (f"{hashlib.sha256(t.encode()).hexdigest()}  {n}\n" for n, t in sorted(texts.items()))
    texts["SHA256SUMS"] = "".join(sums)
    return texts


def write_all(folder):
    texts = make_all()
    folder.mkdir(parents=True, exist_ok=True)
    for name, text in texts.items():
        (folder / name).write_bytes(text.encode())
    return texts


def last_digit_steps(a, b):
    """Greatest difference between the numbers of two lines, in steps of the last printed digit.

    None when the lines differ in more than numbers.
    """
    if ";" in a:  # decimal comma
        a, b = a.replace(",", "."), b.replace(",", ".")
    if NUMBER.sub("#", a) != NUMBER.sub("#", b):
        return None
    greatest = 0
    for x, y in zip(NUMBER.findall(a), NUMBER.findall(b), strict=True):
        p, q = Decimal(x), Decimal(y)
        exponent = min(p.as_tuple().exponent, q.as_tuple().exponent)
        greatest = max(greatest, int(abs(p - q).scaleb(-exponent)))
    return greatest


def compare(name, kept, fresh):
    """Verdict in words, and whether it passes."""
    if kept == fresh:
        return "same bytes", True
    old, new = kept.decode().splitlines(), fresh.decode().splitlines()
    if len(old) != len(new):
        return f"{len(old)} lines here, {len(new)} made anew", False
    changed = [(i, last_digit_steps(a, b)) for i, (a, b) in enumerate(zip(old, new)) if a != b]
    for i, steps in changed:
        if steps is None or steps > STEPS_ALLOWED:
            return f"line {i + 1} differs: {old[i]!r} here, {new[i]!r} made anew", False
    return f"{len(changed)} of {len(old)} lines differ by one step of the last digit", True


def check():
    listed = dict(reversed(line.split("  ")) for line in
                  (HERE / "SHA256SUMS").read_text().splitlines())
    passed = True
    with tempfile.TemporaryDirectory() as folder:
        for name in write_all(Path(folder)):
            if name == "SHA256SUMS":
                continue
            if not (HERE / name).is_file():
                words, good = "missing here", False
            else:
                kept = (HERE / name).read_bytes()
                words, good = compare(name, kept, (Path(folder) / name).read_bytes())
                if listed.get(name) != hashlib.sha256(kept).hexdigest():
                    words, good = words + "; its sum is not the one in SHA256SUMS", False
            passed = passed and good
            print(f"{'ok  ' if good else 'FAIL'} {name}: {words}")
    return 0 if passed else 1


def main():
    parser = argparse.ArgumentParser(description="Demo data of an invented expedition.")
    parser.add_argument("--into", type=Path, default=HERE, help="folder to write to")
    parser.add_argument("--check", action="store_true", help="compare instead of writing")
    arguments = parser.parse_args()
    if arguments.check:
        return check()
    for name, text in write_all(arguments.into).items():
        print(f"{len(text.encode()):9d} bytes  {name}")
    return 0


if __name__ == "__main__":
    sys.exit(main())
