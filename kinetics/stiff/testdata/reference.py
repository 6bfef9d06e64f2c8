#!/usr/bin/env python3
"""Writes reference.json: time courses by SciPy's Radau (order 5, implicit
Runge-Kutta) for invented networks with a temperature programme, a feed, a
removal and a dose. Needs numpy and scipy; run it in this folder.

Rate constants are exp(lnk + E (1/300 - 1/T)), T straight between nodes.
"""
import json
import random

import numpy as np
import scipy
from scipy.integrate import solve_ivp

random.seed(20240607)


def network(n, m, spread):
    steps = []
    for i in range(1, n):
        a = random.randrange(i)
        lnk, e = random.uniform(-spread, spread), random.uniform(3000, 9000)
        steps.append({"lnk": lnk, "E": e, "lhs": [a], "rhs": [i]})
        steps.append({"lnk": lnk + random.uniform(-4, 4), "E": e + random.uniform(-2000, 2000), "lhs": [i], "rhs": [a]})
    for _ in range(m):
        a, b, c, d = (random.randrange(n) for _ in range(4))
        steps.append({"lnk": random.uniform(-spread, spread), "E": random.uniform(3000, 9000), "lhs": [a, b], "rhs": [c, d]})
    start = [round(random.random(), 3) if random.random() < 0.5 else 0.0 for _ in range(n)]
    start[0] = 1.0
    return {
        "steps": steps,
        "start": start,
        "nodes": [[0, 280], [20, 280], [50, 330], [80, 330], [80, 300]],
        "feed": {"from": 10, "to": 40, "species": n - 1, "rate": 0.02},
        "removal": {"from": 30, "to": 90, "species": 1, "k": 0.1},
        "dose": {"t": 60, "species": 0, "amount": 0.5},
        "times": [1, 15, 35, 60, 75, 100],
    }


def solve(p):
    n = len(p["start"])
    lnk = np.array([s["lnk"] for s in p["steps"]])
    en = np.array([s["E"] for s in p["steps"]])
    net = np.zeros((n, len(lnk)))
    for j, s in enumerate(p["steps"]):
        for a in s["lhs"]:
            net[a, j] -= 1
        for a in s["rhs"]:
            net[a, j] += 1
    # pieces between corners, with the temperature of each as a straight line
    cuts = sorted({0, 100, *(x[0] for x in p["nodes"]), 10, 40, 30, 90, 60})
    y, out, t0 = np.array(p["start"]), {}, 0.0
    for t0, t1 in zip(cuts, cuts[1:]):
        mid = (t0 + t1) / 2
        if t0 == p["dose"]["t"]:
            y = y.copy()
            y[p["dose"]["species"]] += p["dose"]["amount"]
            out[t0] = y
        before = [x for x in p["nodes"] if x[0] <= mid][-1]
        after = [x for x in p["nodes"] if x[0] > mid][:1]
        slope = (after[0][1] - before[1]) / (after[0][0] - before[0]) if after else 0.0
        f, r = p["feed"], p["removal"]

        def rates(t):
            temp = before[1] + slope * (t - before[0])
            return np.exp(lnk + en * (1 / 300 - 1 / temp))

        def rhs(t, y):
            v = rates(t)
            for j, s in enumerate(p["steps"]):
                for a in s["lhs"]:
                    v[j] *= y[a]
            d = net @ v
            if f["from"] <= mid < f["to"]:
                d[f["species"]] += f["rate"]
            if r["from"] <= mid < r["to"]:
                d[r["species"]] -= r["k"] * y[r["species"]]
            return d

        def jac(t, y):
            k = rates(t)
            dv = np.zeros((len(k), n))
            for j, s in enumerate(p["steps"]):
                for x in range(len(s["lhs"])):
                    q = k[j]
                    for z, a in enumerate(s["lhs"]):
                        if z != x:
                            q *= y[a]
                    dv[j, s["lhs"][x]] += q
            m = net @ dv
            if r["from"] <= mid < r["to"]:
                m[r["species"], r["species"]] -= r["k"]
            return m

        want = sorted(set([t for t in p["times"] if t0 < t <= t1] + [t1]))
        s = solve_ivp(rhs, (t0, t1), y, method="Radau", jac=jac, t_eval=want, rtol=1e-12, atol=1e-16)
        assert s.success, s.message
        for t, col in zip(s.t, s.y.T):
            out[t] = col
        y = s.y[:, -1]
    return [list(map(float, out[t])) for t in p["times"]]


problems = [network(4, 2, 2), network(6, 4, 6), network(9, 8, 10)]
for p in problems:
    p["want"] = solve(p)
with open("reference.json", "w") as f:
    json.dump({"by": "scipy %s, solve_ivp, Radau, rtol 1e-12, atol 1e-16" % scipy.__version__, "problems": problems}, f, indent=1)
    f.write("\n")
