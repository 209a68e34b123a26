#!/usr/bin/python3
"""Write the tables of losses of fittings beside this file, from published methods as a library holds them.

Needs Debian's python3-fluids (made with 1.0.22) and python3-scipy. Not made here: butterfly.csv and valves.csv,
which were read from the sources their notes name.

    python3 fittings.py

bends.csv         90 degree bends, four methods
tees.csv          90 degree tees, Crane TP-410
fittings.csv      inlets, steps and screens
crane_valves.csv  valves wide open, Crane TP-410
check_valves.csv  velocity that lifts a check valve, Crane TP-410
orifices.csv      discharge and loss of orifice plates, ISO 5167-2
coolers.csv       power of flow the loss of plate channels goes with
"""

import math
import os

import fluids
from fluids import filters, fittings, flow_meter, friction

HERE = os.path.dirname(os.path.abspath(__file__))
LIBRARY = f"fluids {fluids.__version__}"


def write(name, notes, header, rows):
    with open(os.path.join(HERE, name), "w", encoding="ascii", newline="\n") as f:
        for note in notes:
            f.write(f"# {note}\n")
        f.write(",".join(header) + "\n")
        for row in rows:
            f.write(",".join(row) + "\n")
    print(f"{name}: {len(rows)} rows")


def bends():
    rows = []
    bore = 0.2
    for reynolds in (1e5, 3e5, 1e6):
        for roughness in (0, 4.5e-5, 2.5e-4):
            f = friction.Colebrook(reynolds, roughness / bore, tol=0)
            for ratio in (1, 1.5, 2, 3, 4, 5, 8, 10):
                k = [fittings.bend_rounded(Di=bore, angle=90, fd=f, bend_diameters=ratio, Re=reynolds,
                                           roughness=roughness, method=m)
                     for m in ("Rennels", "Miller", "Crane", "Ito")]
                rows.append([f"{reynolds:.0f}", f"{roughness * 1e3:g}", f"{ratio:g}"] + [f"{v:.5f}" for v in k])
    write("bends.csv", [
        "Loss coefficient of a 90 degree pipe bend, bore 200 mm, on v2/2g, friction of its own length included.",
        f"Made by fittings.py with {LIBRARY}.",
        "rennels: Rennels & Hudson, Pipe Flow (2012). miller: Miller, Internal Flow Systems (1990), curve fit.",
        "crane: Crane TP-410 (2009), whose f is its own fully rough f and not of Re. ito: Ito (1960), smooth pipe.",
        "The methods differ by tens of per cent: they bound a test, they do not settle it.",
    ], ["reynolds", "roughness_mm", "radius_over_bore", "k_rennels", "k_miller", "k_crane", "k_ito"], rows)


def tees():
    rows = []
    for branch in (0.05, 0.075, 0.1):
        for share in (0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9):
            flows = dict(D_run=0.1, D_branch=branch, Q_run=1 - share, Q_branch=share, angle=90)
            k = [f(**flows) for f in (fittings.K_branch_converging_Crane, fittings.K_run_converging_Crane,
                                      fittings.K_branch_diverging_Crane, fittings.K_run_diverging_Crane)]
            rows.append([f"{(branch / 0.1):g}", f"{share:g}"] + [f"{v:.5f}" for v in k])
    write("tees.csv", [
        f"Loss coefficient of a 90 degree tee by Crane TP-410 (2009), chapter 2. Made by fittings.py with {LIBRARY}.",
        "Each k is on the velocity head of the leg that carries the combined flow, the losses in total head.",
        "branch_share is branch flow over combined flow; branch_over_run is the ratio of bores.",
    ], ["branch_over_run", "branch_share", "k_branch_converging", "k_run_converging", "k_branch_diverging",
        "k_run_diverging"], rows)


def steps():
    rows = []
    for beta in (0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9):
        rows.append(["sudden expansion", f"{beta:g}",
                     f"{fittings.diffuser_sharp(Di1=beta, Di2=1, method='Rennels'):.5f}", "Borda-Carnot"])
        rows.append(["sudden contraction", f"{beta:g}",
                     f"{fittings.contraction_sharp(Di1=1, Di2=beta, method='Rennels'):.5f}", "Rennels & Hudson 2012"])
        rows.append(["sudden contraction", f"{beta:g}",
                     f"{fittings.contraction_sharp(Di1=1, Di2=beta, method='Crane'):.5f}", "Crane TP-410"])
    for ratio in (0.02, 0.04, 0.06, 0.1, 0.15, 0.2):
        for method, source in (("Rennels", "Rennels & Hudson 2012"), ("Crane", "Crane TP-410"),
                               ("Idelchik", "Idelchik 1966"), ("Miller", "Miller 1990")):
            rows.append(["rounded inlet", f"{ratio:g}",
                         f"{fittings.entrance_rounded(Di=1, rc=ratio, method=method):.5f}", source])
    for alpha in (0.2, 0.25, 0.3, 0.35, 0.4, 0.45, 0.5, 0.55, 0.6, 0.65, 0.7, 0.75, 0.8):
        rows.append(["perforated plate", f"{alpha:g}", f"{filters.square_edge_screen(alpha):.5f}",
                     "Blevins 1984 square edge"])
    for alpha in (0.3, 0.4, 0.5, 0.6, 0.7):
        rows.append(["round wire screen", f"{alpha:g}", f"{filters.round_edge_screen(alpha, 400):.5f}",
                     "Blevins 1984 Re 400 and above"])
    for beta in (0.4, 0.6, 0.8):
        for angle in (10, 20, 30, 40, 60, 90, 180):
            rows.append([f"conical contraction {angle}", f"{beta:g}",
                         f"{fittings.contraction_conical_Crane(Di1=1, Di2=beta, angle=angle):.5f}", "Crane TP-410"])
            rows.append([f"conical expansion {angle}", f"{beta:g}",
                         f"{fittings.diffuser_conical_Crane(Di1=beta, Di2=1, angle=angle):.5f}", "Crane TP-410"])
    for angle in (0, 15, 30, 45, 60, 90, 120, 150):
        rows.append(["mitre", f"{angle}", f"{fittings.bend_miter(angle=angle, method='Rennels'):.5f}",
                     "Rennels & Hudson 2012"])
    for name, angle, cuts in (("2 weld (45° angle)", 90, 2), ("3 weld (30° angle)", 90, 3),
                              ("4 weld (22.5° angle)", 90, 4), ("5 weld (18° angle)", 90, 5)):
        k = fittings.Hooper2K(Di=0.2 / 0.0254, Re=1e5, name=f"Elbow, 90°, Mitered (R/D = 1.5), {name}")
        rows.append([f"mitre bend {angle}", f"{cuts}", f"{k:.5f}", "Hooper 1981 bore 200 mm Re 1e5"])
    k = fittings.Hooper2K(Di=0.2 / 0.0254, Re=1e5, name="Elbow, 45°, Mitered (R/D=1.5), 2 weld (22.5° angle)")
    rows.append(["mitre bend 45", "2", f"{k:.5f}", "Hooper 1981 bore 200 mm Re 1e5"])
    write("fittings.csv", [
        f"Loss coefficients of inlets, steps, screens and mitres. Made by fittings.py with {LIBRARY}.",
        "ratio: bore ratio small/large (k on the smaller bore), rounding radius/bore (k on the bore),",
        "open area/whole area (k on the velocity before the screen), angle of a mitre in degrees, or cuts of a mitre bend.",
        "The number after a cone is the angle between its walls, after a mitre bend what it turns through, in degrees.",
    ], ["fitting", "ratio", "k", "source"], rows)


def crane_valves():
    rows = []
    for bore in (0.0525, 0.1023, 0.2027, 0.3032, 0.3873, 0.5747):
        f = friction.ft_Crane(bore)
        for name, k in (
            ("gate valve", fittings.K_gate_valve_Crane(bore, bore, 0)),
            ("globe valve", fittings.K_globe_valve_Crane(bore, bore)),
            ("angle valve", fittings.K_angle_valve_Crane(bore, bore, style=1)),
            ("ball valve", fittings.K_ball_valve_Crane(bore, bore, 0)),
            ("plug valve", fittings.K_plug_valve_Crane(bore, bore, 0, style=0)),
            ("butterfly valve", fittings.K_butterfly_valve_Crane(bore, style=0)),
            ("diaphragm valve", fittings.K_diaphragm_valve_Crane(bore, style=0)),
            ("straight-through diaphragm valve", fittings.K_diaphragm_valve_Crane(bore, style=1)),
            ("swing check valve", fittings.K_swing_check_valve_Crane(bore, angled=True)),
            ("straight swing check valve", fittings.K_swing_check_valve_Crane(bore, angled=False)),
            ("lift check valve", fittings.K_lift_check_valve_Crane(bore, bore, angled=False)),
            ("angle lift check valve", fittings.K_lift_check_valve_Crane(bore, bore, angled=True)),
            ("screw-down non-return valve", fittings.K_globe_stop_check_valve_Crane(bore, bore, style=0)),
            ("angle screw-down non-return valve", fittings.K_angle_stop_check_valve_Crane(bore, bore, style=0)),
            ("foot valve", fittings.K_foot_valve_Crane(bore, style=0)),
            ("hinged foot valve", fittings.K_foot_valve_Crane(bore, style=1)),
        ):
            rows.append([name, f"{bore * 1e3:g}", f"{f:.6f}", f"{k:.5f}"])
    write("crane_valves.csv", [
        "Loss coefficient of valves wide open, full bore, on the bore: K = n f_T, Crane TP-410 (2009).",
        f"Made by fittings.py with {LIBRARY}, whose f_T is a fit of its own to Crane's table and is listed beside.",
    ], ["valve", "bore_mm", "f_t", "k"], rows)


def check_valves():
    rows = []
    for name, style in (
        ("swing check valve", "swing check angled"),
        ("straight swing check valve", "swing check straight"),
        ("lift check valve", "lift check straight"),
        ("angle lift check valve", "lift check angled"),
        ("screw-down non-return valve", "stop check globe 1"),
        ("angle screw-down non-return valve", "stop check angle 1"),
        ("foot valve", "foot valve poppet disc"),
        ("hinged foot valve", "foot valve hinged disc"),
    ):
        rows.append([name, f"{fittings.v_lift_valve_Crane(1025.0, 1.0, 1.0, style):.6f}"])
    write("check_valves.csv", [
        "Velocity (m/s) in the pipe that holds a check valve of full bore fully open in water of 1025 kg/m3, Crane TP-410 (2009).",
        f"Made by fittings.py with {LIBRARY}: v_lift_valve_Crane.",
    ], ["valve", "velocity"], rows)


def orifices():
    rows = []
    density, viscosity = 1000.0, 1e-3
    for bore in (0.06, 0.1, 0.3, 1.0):
        for beta in (0.22, 0.3, 0.4, 0.5, 0.6, 0.7, 0.75):
            for reynolds in (1e5, 1e6, 1e8):
                for taps in ("corner", "flange", "D"):
                    if taps == "flange" and reynolds < 170e3 * beta**2 * bore:
                        continue
                    mass = reynolds * viscosity * math.pi * bore / 4
                    c = flow_meter.C_Reader_Harris_Gallagher(bore, beta * bore, density, viscosity, mass, taps)
                    k = flow_meter.discharge_coefficient_to_K(bore, beta * bore, c)
                    rows.append([f"{bore * 1e3:g}", f"{beta:g}", f"{reynolds:.0f}", taps, f"{c:.10f}", f"{k:.8g}"])
    write("orifices.csv", [
        "Orifice plates of ISO 5167-2:2003: discharge coefficient, and coefficient of the lasting loss on the velocity in the pipe.",
        f"Made by fittings.py with {LIBRARY}: C_Reader_Harris_Gallagher and discharge_coefficient_to_K.",
        "taps D stands for those a bore before and half a bore behind the plate.",
    ], ["bore_mm", "ratio", "reynolds", "taps", "discharge", "k"], rows)


def coolers():
    rows = []
    for name, loss in (
        ("Kumar 1984", friction.friction_plate_Kumar),
        ("Muley and Manglik 1999", lambda re, angle: friction.friction_plate_Muley_Manglik(re, angle, 1.17)),
    ):
        for angle in (30, 45, 60):
            low, high = 1000.0, 8000.0
            n = 2 + math.log(loss(high, angle) / loss(low, angle)) / math.log(high / low)
            rows.append([name, f"{angle}", f"{n:.4f}"])
    write("coolers.csv", [
        "Power n of flow that the loss of a plate cooler's channels goes with, from the friction at Re 1000 and 8000.",
        f"Made by fittings.py with {LIBRARY}. Angle of the chevrons in each author's own convention, degrees;",
        "Muley and Manglik at an area enlargement of 1.17. Ports and headers go with n = 2.",
    ], ["author", "chevron_deg", "n"], rows)


if __name__ == "__main__":
    bends()
    tees()
    steps()
    crane_valves()
    check_valves()
    orifices()
    coolers()
