#!/usr/bin/env python3
"""Writes equilibria.json: compositions of invented systems at equilibrium, by
mpmath in 60 digits. Needs mpmath; run it in this folder.

The unknowns are the logarithms of all concentrations; the equations are mass
action for each reaction and the given conservation laws. From a composition
that fulfils the laws, the reaction energies are moved to the wanted ones in
small parts, with Newton's method (findroot) after each.
"""
import json

import mpmath
from mpmath import mp, mpf

mp.dps = 60
R = mpf("8.31446261815324")

# from, to: species of one reaction each, repeated for more molecules.
# laws: whole-number weights of the species in each conserved sum.
# inside: extents of the reactions, from start, at which all species are there.
SYSTEMS = [
    {
        "name": "monomer, dimer and trimer", "T": 298.15,
        "species": ["M", "M2", "M3"],
        "G": [0, -32000, -51000],
        "reactions": [[[0, 0], [1]], [[0, 1], [2]]],
        "laws": [[1, 2, 3]],
        "start": [0.5, 0, 0], "inside": [0.1, 0.05],
    },
    {
        "name": "metal with one to three ligands beside its dimer", "T": 333.15,
        "species": ["M2", "M", "L", "ML", "ML2", "ML3"],
        "G": [-60000, 0, 0, -35000, -64000, -70000],
        "reactions": [[[0], [1, 1]], [[1, 2], [3]], [[3, 2], [4]], [[4, 2], [5]]],
        "laws": [[2, 1, 0, 1, 1, 1], [0, 0, 1, 1, 2, 3]],
        "start": [0.004, 0, 0.03, 0, 0, 0], "inside": [0.001, 0.0015, 0.001, 0.0005],
    },
    {
        "name": "an isomer at 1e-15 that feeds an adduct", "T": 298.15,
        "species": ["A", "A*", "B", "A*B"],
        "G": [0, 86000, -4000, 60000],
        "reactions": [[[0], [1]], [[1, 2], [3]]],
        "laws": [[1, 1, 0, 1], [0, 0, 1, 1]],
        "start": [1.0, 0, 0.7, 0], "inside": [0.4, 0.2],
    },
    {
        "name": "exchange of groups", "T": 353.15,
        "species": ["RX", "Y", "RY", "X", "Z", "RZ"],
        "G": [-10000, 3000, -18500, 0, -2000, -16000],
        "reactions": [[[0, 1], [2, 3]], [[2, 4], [5, 1]]],
        "laws": [[1, 0, 1, 0, 0, 1], [0, 1, 1, 0, 0, 0], [1, 0, 0, 1, 0, 0], [0, 0, 0, 0, 1, 1]],
        "start": [0.8, 1.0, 0, 0, 0.3, 0], "inside": [0.3, 0.1],
    },
    {
        "name": "proton transfer between three bases", "T": 298.15,
        "species": ["HA", "A", "B", "HB", "C", "HC"],
        "G": [0, 0, 0, -34200, 0, -57100],
        "reactions": [[[0, 2], [1, 3]], [[3, 4], [2, 5]]],
        "laws": [[1, 1, 0, 0, 0, 0], [0, 0, 1, 1, 0, 0], [0, 0, 0, 0, 1, 1], [1, 0, 0, 1, 0, 1]],
        "start": [0.2, 0, 0.1, 0, 0.05, 0], "inside": [0.06, 0.03],
    },
    {
        "name": "two joined by a third, at 195 K", "T": 195.15,
        "species": ["A", "B", "H", "AH", "BH", "AHB"],
        "G": [0, 0, 0, -21000, -12000, -49000],
        "reactions": [[[0, 2], [3]], [[1, 2], [4]], [[3, 1], [5]]],
        "laws": [[1, 0, 0, 1, 0, 1], [0, 1, 0, 0, 1, 1], [0, 0, 1, 1, 1, 1]],
        "start": [0.05, 0.08, 0.04, 0, 0, 0], "inside": [0.02, 0.01, 0.01],
    },
]


def solve(p):
    n = len(p["G"])
    net = [[t.count(i) - f.count(i) for i in range(n)] for f, t in p["reactions"]]
    for law in p["laws"]:
        for r in net:
            assert sum(w * v for w, v in zip(law, r)) == 0, p["name"]
    assert len(net) + len(p["laws"]) == n, p["name"]
    start = [mpf(repr(x)) for x in p["start"]]
    total = [sum(w * c for w, c in zip(law, start)) for law in p["laws"]]
    c = [s + sum(mpf(repr(x)) * r[i] for x, r in zip(p["inside"], net)) for i, s in enumerate(start)]
    assert all(x > 0 for x in c), p["name"]
    ln = [mpmath.log(x) for x in c]
    first = [sum(v * x for v, x in zip(r, ln)) for r in net]
    last = [-sum(v * g for v, g in zip(r, p["G"])) / (R * mpf(repr(p["T"]))) for r in net]
    parts = 60
    for part in range(1, parts + 1):
        s = mpf(part) / parts
        k = [a + s * (b - a) for a, b in zip(first, last)]

        def off(*ln):
            out = [sum(v * x for v, x in zip(r, ln)) - q for r, q in zip(net, k)]
            return out + [sum(w * mpmath.exp(x) for w, x in zip(law, ln)) / t - 1 for law, t in zip(p["laws"], total)]

        ln = list(mpmath.findroot(off, ln, tol=1e-100, maxsteps=60))
    return [mpmath.nstr(mpmath.exp(x), 20) for x in ln]


for p in SYSTEMS:
    p["want"] = [float(x) for x in solve(p)]
with open("equilibria.json", "w") as f:
    json.dump({"by": "mpmath %s, findroot in %d digits" % (mpmath.__version__, mp.dps), "systems": SYSTEMS}, f, indent=1)
    f.write("\n")
