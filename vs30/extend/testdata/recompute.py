"""Recomputes the relations for shallow profiles with numpy and scipy.

Standard input: a JSON list of {"layers": [[top, bottom, v0, v1], …]} of profiles that
end above 30 m. Standard output: a JSON list of {"a", "n", "scatter", "power", "wang",
"california", "kiknet", "sigma"}: the power law with the average over 30 m that it
leads to; the averages over 30 m by two depths and by the two tables; the sigma of ln
of the first table. A table that does not reach the depth gives 0.
"""

import csv
import json
import pathlib
import sys

import numpy as np
from scipy.integrate import quad
from scipy.interpolate import interp1d

HERE = pathlib.Path(__file__).parent


def table(name):
    with open(HERE / name) as f:
        rows = np.array([[float(x) for x in row] for row in list(csv.reader(f))[1:]])
    return interp1d(rows[:, 0], rows[:, 1:], axis=0, bounds_error=False)


CALIFORNIA, KIKNET = table("boore-2004.csv"), table("boore-2011.csv")


def velocity(layers):
    def at(z):
        for top, bottom, v0, v1 in layers:
            if z <= bottom:
                return v0 + (v1 - v0) * (z - top) / (bottom - top)

    return at


def integral(f, layers, end):
    """The integral of f from 0 to end, layer by layer."""
    total = 0.0
    for top, bottom, _, _ in layers:
        if top < end:
            total += quad(f, top, min(bottom, end), epsabs=0, epsrel=1e-10, limit=200)[0]
    return total


def power_law(layers, depth):
    """Weighted least squares on ln V over many points of every layer."""
    v = velocity(layers)
    x, w = np.polynomial.legendre.leggauss(40)
    z, weight = [], []
    for top, bottom, _, _ in layers:
        # z = top + h·s⁴ draws the points to the top, where ln z bends.
        s = (x + 1) / 2
        z.append(top + (bottom - top) * s**4)
        weight.append((bottom - top) * 4 * s**3 * w / 2)
    z, weight = np.concatenate(z), np.concatenate(weight)
    y = np.log([v(d) for d in z])
    root = np.sqrt(weight)
    design = np.column_stack([np.ones_like(z), np.log(z)])
    (lna, n), _, _, _ = np.linalg.lstsq(design * root[:, None], y * root, rcond=None)
    misfit = y - lna - n * np.log(z)
    return np.exp(lna), n, np.sqrt(np.average(misfit**2, weights=weight))


def answer(case):
    layers = case["layers"]
    depth = layers[-1][1]
    v = velocity(layers)
    slowness = lambda z: 1 / v(z)
    time = integral(slowness, layers, depth)
    a, n, scatter = power_law(layers, depth)
    below = quad(lambda z: 1 / (a * z**n), depth, 30)[0]
    v1, v2 = depth / 2 / integral(slowness, layers, depth / 2), depth / time
    line = np.poly1d(np.polyfit(np.log10([depth / 2, depth]), np.log10([v1, v2]), 1))
    c, k, x = CALIFORNIA(depth), KIKNET(depth), np.log10(v2)
    return {
        "a": a,
        "n": n,
        "scatter": scatter,
        "power": 30 / (time + below),
        "wang": 10 ** line(np.log10(30)),
        "california": float(np.nan_to_num(10 ** (c[0] + c[1] * x))),
        "kiknet": float(np.nan_to_num(10 ** np.polyval(k[2::-1], x))),
        "sigma": float(np.nan_to_num(c[2] / np.log10(np.e))),
    }


json.dump([answer(case) for case in json.load(sys.stdin)], sys.stdout)
