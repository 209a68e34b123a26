#!/usr/bin/python3
"""Write freshwater.csv, seawater.csv and saline.csv beside this file: properties of water by the reference formulations.

Needs Debian's python3-iapws, python3-gsw and python3-scipy.

    python3 water.py
"""

import os
import warnings

import gsw
import iapws
from iapws import IAPWS95, iapws08, iapws97
from iapws._iapws import _ThCond, _Viscosity
from scipy.optimize import brentq

warnings.simplefilter("ignore")  # iapws warns outside the ocean's own range of R13-08

HERE = os.path.dirname(os.path.abspath(__file__))
IAPWS, GSW = (f"{library.__name__} {library.__version__}" for library in (iapws, gsw))
ZERO_CELSIUS = 273.15
ATMOSPHERE = 101325
SALINITIES = ("0", "5", "10", "20", "30", "35.16504", "40", "45")
SeaWater = iapws08.SeaWater


def write(name, notes, header, rows):
    with open(os.path.join(HERE, name), "w", encoding="ascii") as file:
        for note in notes:
            file.write(f"# {note}\n")
        file.write(",".join(header) + "\n")
        for row in rows:
            file.write(",".join(row) + "\n")
    print(f"{name}: {len(rows)} rows")


def freshwater():
    rows = []
    for celsius in range(0, 151, 5):
        kelvin = celsius + ZERO_CELSIUS
        boiling = IAPWS95(T=max(kelvin, 273.16), x=0).P * 1e6 if celsius else None  # the line ends at 273.16 K
        for pascal in (ATMOSPHERE, 2600000):
            if pascal < iapws97._PSat_T(kelvin) * 1e6:
                continue
            water = IAPWS95(T=kelvin, P=pascal / 1e6)
            rows.append([
                f"{celsius}",
                f"{pascal}",
                f"{water.rho:.6f}",
                f"{water.cp * 1e3:.4f}",
                f"{boiling:.5f}" if boiling else "",
                f"{water.mu:.9e}",
                f"{water.k:.9f}",
            ])
    write("freshwater.csv", [
        f"Liquid water. Made by water.py with {IAPWS}.",
        "density, heat_capacity, vapour_pressure: IAPWS-95 (R6-95), the last by the equality of phases from 5 degC.",
        "viscosity: IAPWS R12-08, conductivity: IAPWS R15-11, both with their critical enhancement, at that density.",
    ], ["temperature_degC", "pressure_Pa", "density_kg_m3", "heat_capacity_J_kg_K", "vapour_pressure_Pa",
        "viscosity_Pa_s", "conductivity_W_m_K"], rows)


def water_part(kelvin, pascal):
    """Gibbs function of pure water and its derivatives: IAPWS-95, below 0 degC SR7-09, which was made for there."""
    if kelvin < ZERO_CELSIUS:
        return SeaWater._waterSupp(kelvin, pascal / 1e6)
    return SeaWater._water(kelvin, pascal / 1e6)


def vapour_pressure(kelvin, salinity):
    """Pressure [Pa] at which water has one chemical potential in sea water and in steam (IAPWS Advisory Note 5).

    Liquid: IF97 region 1, below 0 degC SR7-09; steam: IF97 region 2, whose ideal gas part bears 2 K of extrapolation.
    """
    def imbalance(megapascal):
        if kelvin < ZERO_CELSIUS:
            liquid = SeaWater._waterSupp(kelvin, megapascal)["g"]
        else:
            water = iapws97._Region1(kelvin, megapascal)
            liquid = water["h"] - kelvin * water["s"]
        steam = iapws97._Region2(kelvin, megapascal)
        salt = SeaWater._saline(kelvin, megapascal, salinity / 1000)
        return liquid + salt["g"] - salinity / 1000 * salt["gs"] - (steam["h"] - kelvin * steam["s"])
    pure = iapws97._PSat_T(max(kelvin, ZERO_CELSIUS))
    return 1e6 * brentq(imbalance, 0.7 * pure, 1.02 * pure, xtol=1e-16, rtol=1e-13)


def conductivity(kelvin, pascal, salinity):
    water = 1 / iapws97._Region1(kelvin, pascal / 1e6)["v"]
    excess = iapws08._ThCond_SeaWater(kelvin, pascal / 1e6, salinity / 1000) if salinity else 0
    return _ThCond(water, kelvin) + excess


def seawater():
    rows = []
    for celsius in (-2, -1, *range(0, 81, 5)):
        kelvin = celsius + ZERO_CELSIUS
        for pascal in (ATMOSPHERE, 1000000):
            sea_pressure = (pascal - ATMOSPHERE) / 1e4  # dbar
            water = water_part(kelvin, pascal)
            for text in SALINITIES:
                salinity = float(text)
                salt = SeaWater._saline(kelvin, pascal / 1e6, salinity / 1000)
                within = celsius <= 40  # the range of the water part of TEOS-10's code
                rows.append([
                    f"{celsius}",
                    text,
                    f"{pascal}",
                    f"{1 / (water['gp'] + salt['gp']):.6f}",
                    f"{-kelvin * (water['gtt'] + salt['gtt']) * 1e3:.4f}",
                    f"{vapour_pressure(kelvin, salinity):.5f}",
                    f"{conductivity(kelvin, pascal, salinity):.9f}" if celsius >= 0 else "",
                    f"{gsw.rho_t_exact(salinity, celsius, sea_pressure):.6f}" if within else "",
                    f"{gsw.cp_t_exact(salinity, celsius, sea_pressure):.4f}" if within else "",
                ])
    write("seawater.csv", [
        f"Sea water. Made by water.py with {IAPWS} and {GSW}.",
        "density, heat_capacity: IAPWS R13-08 saline part on IAPWS-95 water, below 0 degC on SR7-09 water.",
        "vapour_pressure: equal chemical potential of water in sea water (R13-08 on IF97 region 1, below 0 degC on SR7-09)",
        "and in steam (IF97 region 2): the boiling equation of IAPWS Advisory Note 5.",
        "conductivity: IAPWS guideline on the thermal conductivity of seawater on R15-11 at the density of IF97 water.",
        "density_teos, heat_capacity_teos: rho_t_exact and cp_t_exact of gsw to 40 degC, the range of its water part.",
        "Salinity is of reference composition, g of salt in a kg of sea water.",
    ], ["temperature_degC", "salinity_g_kg", "pressure_Pa", "density_kg_m3", "heat_capacity_J_kg_K", "vapour_pressure_Pa",
        "conductivity_W_m_K", "density_teos_kg_m3", "heat_capacity_teos_J_kg_K"], rows)


def saline():
    rows = []
    for kelvin in (263.15, 283.15, 313.15, 353):
        for pascal in (100000, 30000000, 100000000):
            for text in ("5", "35.16504", "120"):
                salinity = float(text) / 1000
                salt = SeaWater._saline(kelvin, pascal / 1e6, salinity)
                rows.append([
                    f"{kelvin}",
                    f"{pascal}",
                    text,
                    f"{salt['gp']:.12e}",
                    f"{-kelvin * salt['gtt'] * 1e3:.12e}",
                    f"{(salt['g'] - salinity * salt['gs']) * 1e3:.12e}",
                    f"{iapws08._ThCond_SeaWater(kelvin, pascal / 1e6, salinity):.12e}" if kelvin >= ZERO_CELSIUS else "",
                ])
    write("saline.csv", [
        f"Saline part of the Gibbs function of sea water, IAPWS R13-08 eq. 4. Made by water.py with {IAPWS}.",
        "Away from 273.15 K and from atmospheric pressure at once, where the release's own table 8 is blind to many terms;",
        "some rows are outside what the release calls its range, which does not matter to the arithmetic.",
        "conductivity: what salt adds by the IAPWS guideline on the thermal conductivity of seawater (2015), from 0 degC.",
    ], ["temperature_K", "pressure_Pa", "salinity_g_kg", "volume_m3_kg", "heat_capacity_J_kg_K", "water_potential_J_kg",
        "conductivity_W_m_K"], rows)


if __name__ == "__main__":
    freshwater()
    seawater()
    saline()
