#!/usr/bin/python3
"""Write colebrook.csv beside this file: Darcy friction factors of the Colebrook-White equation to 17 digits.

Needs Debian's python3-mpmath. The equation, with the constants of C. F. Colebrook (1939), is solved by
mpmath's secant iteration in 40 digits and its residual checked.

    python3 colebrook.py
"""

import os

import mpmath
from mpmath import mp, mpf

mp.dps = 40

REYNOLDS = ["4e3", "5e3", "7e3", "1e4", "2e4", "5e4", "1e5", "2e5", "5e5", "1e6", "2e6", "5e6", "1e7", "2e7", "5e7", "1e8"]
ROUGHNESS = ["0", "1e-6", "5e-6", "1e-5", "5e-5", "1e-4", "2e-4", "5e-4", "1e-3", "2e-3", "4e-3", "6e-3", "1e-2",
             "1.5e-2", "2e-2", "3e-2", "4e-2", "5e-2"]


def friction_factor(reynolds, roughness):
    def equation(x):
        return x + 2 * mpmath.log10(roughness / mpf("3.7") + mpf("2.51") * x / reynolds)
    x = mpmath.findroot(equation, mpf(7))
    assert abs(equation(x)) < mpf("1e-35"), (reynolds, roughness)
    return 1 / x**2


def main():
    path = os.path.join(os.path.dirname(os.path.abspath(__file__)), "colebrook.csv")
    with open(path, "w", encoding="ascii", newline="\n") as f:
        f.write("# Darcy friction factor of the Colebrook-White equation, constants 3.7 and 2.51.\n")
        f.write(f"# Made by colebrook.py with mpmath {mpmath.__version__} in {mp.dps} digits. The numbers of the first\n")
        f.write("# two columns are taken as the nearest double-precision numbers.\n")
        f.write("reynolds,relative_roughness,friction_factor\n")
        for re in REYNOLDS:
            for e in ROUGHNESS:
                # A double read from text is what the program computes with; take the same one here.
                value = friction_factor(mpf(float(re)), mpf(float(e)))
                f.write(f"{re},{e},{mpmath.nstr(value, 18)}\n")


if __name__ == "__main__":
    main()
