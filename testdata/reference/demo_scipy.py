#!/usr/bin/python3
"""Solve a condition of the sea-water demo with scipy, beside the program's own solution and time.

Needs Debian's python3-scipy and Go. The network is read from the demo's tables; bores, roughness and loss coefficients
from what the program says it supplied; the losses of tees, which follow the flows, are taken from its answer. The pump's
head is interpolated through the sheet's points by scipy's own cubic spline, so that heads and flows agree to what the two
ways of drawing a curve through the points differ. Friction is Colebrook's law by Newton's method.

    python3 demo_scipy.py        (from anywhere in the project)
"""

import csv
import json
import math
import os
import re
import subprocess
import time

import numpy
import scipy
from scipy.interpolate import CubicSpline
from scipy.optimize import root

ROOT = os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "..")
JOB = os.path.join("testdata", "jobs", "seawater")
CONDITION = "ballast, tropics, fouled strainer"
BLOCKED = 0.72  # of STR1 in that condition
G = 9.80665


def table(name):
    with open(os.path.join(ROOT, JOB, name + ".csv"), encoding="utf-8") as f:
        return list(csv.DictReader(line for line in f if not line.startswith("#")))


def program(*args):
    return subprocess.run(["go", *args], cwd=ROOT, capture_output=True, text=True).stdout


def friction(re, rel):
    if re < 2000:
        return 64 / max(re, 1e-9)
    x = 7.0
    for _ in range(20):
        inner = rel / 3.7 + 2.51 * x / re
        step = (x + 2 * math.log10(inner)) / (1 + 2 * 2.51 / (re * inner * math.log(10)))
        x -= step
        if abs(step) < 1e-14 * x:
            break
    return 1 / x**2


def network():
    answer = json.loads(program("run", "./cmd/brinehead", "check", JOB, "--condition", CONDITION, "--format", "json"))
    condition = answer["conditions"][0]
    nu = condition["water"]["dynamic_viscosity_Pa_s"] / condition["water"]["density_kg_m3"]
    draught = condition["draught_m"]
    supplied = {(s["on"], s["what"]): [float(x) for x in re.findall(r"[\d.]+", s["figure"])] for s in answer["supplied"]}
    state = {r["run"]: r for r in condition["runs"]}
    runs = []
    for r in table("runs"):
        name = r["run"]
        if state[name]["shut"]:
            continue
        bore, rough = supplied[name, "bore"][0] / 1e3, supplied[name, "roughness"][0] / 1e3
        k, rated = 0.0, []
        for f in table("fittings"):
            if f["run"] != name:
                continue
            if f["rated flow [m3/h]"]:
                exponent = float(f["exponent"] or 1.8)
                head = float(f["rated drop [bar]"]) * 1e5 / (998.2060935 * G)
                if f["tag"] == "STR1":
                    head /= (1 - BLOCKED) ** 2
                rated.append((head / (float(f["rated flow [m3/h]"]) / 3600) ** exponent, exponent))
            else:
                on = f["tag"] or name + ": " + f["fitting"]
                own, *on_bore = supplied[on, "loss coefficient"]  # on the run's bore unless another is named
                k += int(f["count"]) * own * (bore * 1e3 / on_bore[0]) ** 4 if on_bore else int(f["count"]) * own
        runs.append((name, r["from"], r["to"], float(r["length [m]"]), bore, rough, k, rated, state[name]["tee_loss_m"]))
    points = {}
    for p in table("points"):
        if p["kind"] == "sea":
            points[p["point"]] = draught
        elif p["kind"] == "overboard":
            points[p["point"]] = max(draught, float(p["elevation [m]"]))
        else:
            points[p["point"]] = None
    sheet = table("pump_curves")
    head = CubicSpline([float(c["flow [m3/h]"]) / 3600 for c in sheet], [float(c["head [m]"]) for c in sheet])
    pumps = [(p["pump"], p["from"], p["to"]) for p in table("pumps")]
    return runs, pumps, points, head, nu, condition


def main():
    runs, pumps, points, head, nu, condition = network()
    links = [(r[1], r[2]) for r in runs] + [(p[1], p[2]) for p in pumps]
    used = {p for link in links for p in link}
    free = [p for p, h in points.items() if h is None and p in used]
    column = {p: len(links) + i for i, p in enumerate(free)}

    def equations(x):
        out = numpy.zeros(len(links) + len(free))
        at = lambda p: x[column[p]] if p in column else points[p]
        for i, (name, a, b, length, bore, rough, k, rated, tee) in enumerate(runs):
            q = x[i]
            area = math.pi / 4 * bore**2
            v = q / area
            f = friction(abs(v) * bore / nu + 1e-9, rough / bore) if length else 0
            loss = (f * length / bore + k) * v * abs(v) / (2 * G) + tee
            loss += sum(c * abs(q) ** (n - 1) * q for c, n in rated)
            out[i] = loss - at(a) + at(b)
        for i, (name, a, b) in enumerate(pumps, len(runs)):
            out[i] = at(b) - at(a) - head(x[i])
        for i, (a, b) in enumerate(links):
            if a in column:
                out[column[a]] -= x[i]
            if b in column:
                out[column[b]] += x[i]
        return out

    start = numpy.array([0.1] * len(links) + [15.0] * len(free))
    answer, best = None, math.inf
    for _ in range(20):
        begin = time.perf_counter()
        answer = root(equations, start, method="hybr", tol=1e-10)
        best = min(best, time.perf_counter() - begin)
    assert answer.success, answer.message
    theirs = {r["run"]: r["flow_m3h"] for r in condition["runs"]} | {p["pump"]: p["flow_m3h"] for p in condition["pumps"]}
    worst = max(abs(answer.x[i] * 3600 - theirs[name]) for i, name in enumerate([r[0] for r in runs] + [p[0] for p in pumps]))
    print(f"scipy {scipy.__version__}: {best * 1e3:.2f} ms a solution, greatest difference of a flow {worst:.3f} m3/h")
    bench = program("test", "-run", "^$", "-bench", "DemoCondition", "./cmd/brinehead")
    for name, ns in re.findall(r"DemoCondition/(\w+)\S*\s+\d+\s+([\d.]+) ns/op", bench):
        ratio = f", {best * 1e9 / float(ns):.0f} times as fast" if name != "build" else ""
        print(f"brinehead {name}: {float(ns) / 1e3:.1f} us{ratio}")


if __name__ == "__main__":
    main()
