#!/usr/bin/python3
"""Write pipe-sizes.csv beside this file: outside diameters and walls of the ASME pipe schedules, DN15 to DN600.

Needs Debian's python3-fluids. Its module fluids.piping cites ASME B36.10M-2004 and B36.19M-2004. The nominal
size in millimetres is the one that the library's own B36.19M table sets beside each size in inches; sizes that
table does not have, or that lie outside DN15 to DN600, are left out.
"""
import csv
import pathlib

import fluids
from fluids import piping

SCHEDULES = [
    ("ASME B36.10M", "Sch 10", piping.NPS10, piping.S10o, piping.S10t),
    ("ASME B36.10M", "Sch 20", piping.NPS20, piping.S20o, piping.S20t),
    ("ASME B36.10M", "Sch 30", piping.NPS30, piping.S30o, piping.S30t),
    ("ASME B36.10M", "STD", piping.NPSSTD, piping.STDo, piping.STDt),
    ("ASME B36.10M", "Sch 40", piping.NPS40, piping.S40o, piping.S40t),
    ("ASME B36.10M", "Sch 60", piping.NPS60, piping.S60o, piping.S60t),
    ("ASME B36.10M", "XS", piping.NPSXS, piping.XSo, piping.XSt),
    ("ASME B36.10M", "Sch 80", piping.NPS80, piping.S80o, piping.S80t),
    ("ASME B36.19M", "10S", piping.NPSS10, piping.SS10o, piping.SS10t),
    ("ASME B36.19M", "40S", piping.NPSS40, piping.SS40o, piping.SS40t),
]

millimetres = dict(zip(piping.NPSS10, piping.SS10DN))

with open(pathlib.Path(__file__).with_name("pipe-sizes.csv"), "w", newline="") as out:
    out.write(f"# Written by pipe_sizes.py from fluids {fluids.__version__}, module fluids.piping. Millimetres.\n")
    table = csv.writer(out, lineterminator="\n")
    table.writerow(["standard", "series", "nominal", "outside_diameter_mm", "wall_mm"])
    for standard, series, inches, outside, wall in SCHEDULES:
        for size, diameter, thickness in zip(inches, outside, wall, strict=True):
            nominal = millimetres.get(size, 0)
            if 15 <= nominal <= 600:
                table.writerow([standard, series, f"DN{nominal}", diameter, thickness])
