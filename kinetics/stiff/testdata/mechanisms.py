#!/usr/bin/env python3
"""Writes mechanisms.json: time courses of small invented mechanisms, by two
methods of SciPy that share nothing: Radau (implicit, order 5) and DOP853
(explicit, order 8). The values of DOP853 are stored with the largest relative
difference of the two. Needs numpy and scipy; run it in this folder.

A step has an enthalpy H (J/mol) and an entropy S (J/mol/K) of activation:
k = kB T/h exp(S/R - H/(R T)), in L/mol and s; T straight between nodes.
"""
import json
import math

import numpy as np
import scipy
from scipy.integrate import solve_ivp

KB, PLANCK, R = 1.380649e-23, 6.62607015e-34, 8.31446261815324


def step(lhs, rhs, h, s):
    return {"lhs": lhs, "rhs": rhs, "H": h, "S": s}


MECHANISMS = [
    {
        "name": "two join and part",
        "species": ["A", "B", "AB"],
        "steps": [step([0, 1], [2], 52e3, -80.0), step([2], [0, 1], 81e3, 5.0)],
        "start": [0.30, 0.20, 0.0],
        "nodes": [[0, 298.15]],
        "times": [10, 100, 1000, 5000],
    },
    {
        "name": "cycle with a dimer off it",
        "species": ["cat2", "cat", "S", "cat.S", "R", "P"],
        "steps": [
            step([0], [1, 1], 88e3, 40.0), step([1, 1], [0], 45e3, -60.0),
            step([1, 2], [3], 50e3, -60.0), step([3], [1, 2], 72e3, 0.0),
            step([3, 4], [1, 5], 58e3, -70.0),
        ],
        "start": [0.005, 0.0, 0.5, 0.0, 0.6, 0.0],
        "nodes": [[0, 313.15]],
        "times": [1, 30, 300, 2000, 6000],
    },
    {
        "name": "hold, ramp, hold",
        "species": ["A", "kinetic", "thermodynamic"],
        "steps": [
            step([0], [1], 70e3, -20.0), step([1], [0], 86e3, -10.0),
            step([0], [2], 78e3, -5.0), step([2], [0], 103e3, 0.0),
        ],
        "start": [1.0, 0.0, 0.0],
        "nodes": [[0, 250], [600, 250], [3000, 330], [4000, 330]],
        "times": [300, 600, 1500, 2500, 4000],
    },
    {
        "name": "autocatalysis with a dimer",
        "species": ["A", "X", "X2"],
        "steps": [
            step([0], [1], 105e3, 0.0), step([0, 1], [1, 1], 70e3, -50.0),
            step([1, 1], [2], 55e3, -60.0), step([2], [1, 1], 80e3, 10.0),
        ],
        "start": [0.8, 0.0, 0.0],
        "nodes": [[0, 303.15]],
        "times": [200, 600, 1000, 1500, 2500],
    },
    {
        "name": "doses, a feed and a removal",
        "species": ["A", "B", "P", "Q"],
        "steps": [step([0, 1], [2], 62e3, -70.0), step([2, 1], [3], 66e3, -75.0), step([3], [2, 1], 90e3, 10.0)],
        "start": [0.4, 0.05, 0.0, 0.0],
        "nodes": [[0, 298.15], [1200, 298.15], [1800, 318.15]],
        "doses": [{"t": t, "species": 1, "amount": 0.12} for t in (300, 600, 900, 1500)],
        "feed": {"from": 1000, "to": 2000, "species": 0, "rate": 5e-5},
        "removal": {"from": 1800, "to": 2600, "species": 2, "k": 4e-4},
        "times": [200, 300, 700, 1200, 1700, 2200, 3000],
    },
]


def solve(p, method, rtol, atol):
    n = len(p["start"])
    enthalpy = np.array([s["H"] for s in p["steps"]])
    entropy = np.array([s["S"] for s in p["steps"]])
    net = np.zeros((n, len(enthalpy)))
    for j, s in enumerate(p["steps"]):
        for a in s["lhs"]:
            net[a, j] -= 1
        for a in s["rhs"]:
            net[a, j] += 1
    nodes, end = p["nodes"], p["times"][-1]
    doses, feed, removal = p.get("doses", []), p.get("feed"), p.get("removal")
    cuts = {0, end, *(x[0] for x in nodes), *(d["t"] for d in doses)}
    for x in (feed, removal):
        if x:
            cuts |= {x["from"], x["to"]}
    cuts = sorted(t for t in cuts if t <= end)
    y, out = np.array(p["start"], float), {}
    for t0, t1 in zip(cuts, cuts[1:]):
        mid = (t0 + t1) / 2
        for d in doses:
            if d["t"] == t0:
                y = y.copy()
                y[d["species"]] += d["amount"]
                out[t0] = y
        before = [x for x in nodes if x[0] <= mid][-1]
        after = [x for x in nodes if x[0] > mid][:1]
        slope = (after[0][1] - before[1]) / (after[0][0] - before[0]) if after else 0.0

        def rhs(t, y):
            temp = before[1] + slope * (t - before[0])
            v = KB * temp / PLANCK * np.exp(entropy / R - enthalpy / (R * temp))
            for j, s in enumerate(p["steps"]):
                for a in s["lhs"]:
                    v[j] *= y[a]
            d = net @ v
            if feed and feed["from"] <= mid < feed["to"]:
                d[feed["species"]] += feed["rate"]
            if removal and removal["from"] <= mid < removal["to"]:
                d[removal["species"]] -= removal["k"] * y[removal["species"]]
            return d

        want = sorted({t for t in p["times"] if t0 < t <= t1} | {t1})
        s = solve_ivp(rhs, (t0, t1), y, method=method, t_eval=want, rtol=rtol, atol=atol)
        assert s.success, s.message
        for t, col in zip(s.t, s.y.T):
            out[t] = col
        y = s.y[:, -1]
    return np.array([out[t] for t in p["times"]])


for p in MECHANISMS:
    a, b = solve(p, "DOP853", 3e-14, 1e-20), solve(p, "Radau", 1e-12, 1e-18)
    p["want"] = a.tolist()
    p["agreement"] = float(np.max(np.abs(a - b) / np.maximum(np.abs(a), 1e-12)))
    assert p["agreement"] < 2e-9 and math.isfinite(p["agreement"]), (p["name"], p["agreement"])
with open("mechanisms.json", "w") as f:
    json.dump({"by": "scipy %s with numpy %s, solve_ivp: DOP853 at rtol 3e-14, beside Radau at rtol 1e-12"
               % (scipy.__version__, np.__version__), "mechanisms": MECHANISMS}, f, indent=1)
    f.write("\n")
