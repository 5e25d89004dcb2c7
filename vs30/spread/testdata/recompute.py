"""Recomputes the spread of averages with numpy and scipy.

Standard input: JSON {"models": [{"h": m, "v": m/s, "sigma", "dz": m, "class": [rho0,
delta, rho200, d0, b] or null, "full": bool}], "lognormals": [{"median", "sigma",
"bounds"}], "students": [[freedom, level]], "chi": [[sum, freedom]], "sample": […],
"layering": {"h", "v", "sigma", "class", "c": [c1, c2, c3], "n"}}. Standard output:
JSON of the same shape with the answers.
"""

import json
import sys

import numpy as np
from scipy import stats


def correlation(d, t, c):
    rho0, delta, rho200, d0, b = c
    deep = np.where(d <= 200, rho200 * ((d + d0) / (200 + d0)) ** b, rho200)
    return (1 - deep) * rho0 * np.exp(-t / delta) + deep


def matrix(h, model):
    """Correlations of ln V of all layers."""
    n = len(h)
    if model["full"]:
        return np.ones((n, n))
    if model["class"] is None:
        return np.eye(n)
    edges = np.concatenate([[0], np.cumsum(h)])
    middle = (edges[1:] + edges[:-1]) / 2
    r = np.eye(n)
    for i in range(n):
        for j in range(i + 1, n):
            steps = [correlation((middle[k] + middle[k + 1]) / 2, middle[k + 1] - middle[k], model["class"]) for k in range(i, j)]
            r[i, j] = r[j, i] = np.prod(steps)
    return r


def average(h, v, dz):
    """The average with boundaries moved by dz."""
    moved = h + np.append(dz, 0) - np.insert(dz, 0, 0)
    return h.sum() / np.sum(moved / v)


def slopes(h, v):
    """d ln V/d ln v and d ln V/d z by central differences."""
    n, e = len(h), 1e-5
    by_v, by_z = np.zeros(n), np.zeros(n - 1)
    none = np.zeros(n - 1)
    for i in range(n):
        step = np.zeros(n)
        step[i] = e
        by_v[i] = (np.log(average(h, v * np.exp(step), none)) - np.log(average(h, v * np.exp(-step), none))) / (2 * e)
    for k in range(n - 1):
        step = np.zeros(n - 1)
        step[k] = e
        by_z[k] = (np.log(average(h, v, step)) - np.log(average(h, v, -step))) / (2 * e)
    return by_v, by_z


def model_answer(model):
    h, v, s, dz = (np.array(model[k], float) for k in ("h", "v", "sigma", "dz"))
    dz = dz[:-1]
    r = matrix(h, model)
    by_v, by_z = slopes(h, v)
    x = by_v * s
    variance = x @ r @ x + np.sum((by_z * dz) ** 2)
    # Random times; no boundary is kept from crossing another.
    rng = np.random.default_rng(7)
    n = 50_000
    z = rng.multivariate_normal(np.zeros(len(h)), r, n, method="eigh")
    d = rng.normal(size=(n, len(dz))) * dz
    moved = h + np.hstack([d, np.zeros((n, 1))]) - np.hstack([np.zeros((n, 1)), d])
    drawn = h.sum() / np.sum(moved / (v * np.exp(s * z)), axis=1)
    time = h.sum() / drawn
    return {
        "sigma": float(np.sqrt(variance)),
        "part": [float(p) for p in x * (r @ x) / variance],
        "slope": [float(p) for p in by_z],
        "mean_time": float(time.mean()),
        "sd_time": float(time.std(ddof=1)),
        "quantiles": [float(q) for q in np.quantile(drawn, [0.05, 0.16, 0.5, 0.84, 0.95])],
    }


def chances(q):
    cdf = stats.lognorm(s=q["sigma"], scale=q["median"]).cdf(q["bounds"])
    return [float(p) for p in np.diff(np.concatenate([[0], cdf, [1]]))]


def layering(q):
    """Quantiles of averages of randomly layered profiles."""
    h, v, s = (np.array(q[k], float) for k in ("h", "v", "sigma"))
    c1, c2, c3 = q["c"]
    edges = np.concatenate([[0], np.cumsum(h)])
    times = np.concatenate([[0], np.cumsum(h / v)])
    end = edges[-1]
    rng = np.random.default_rng(11)
    m = c2 + 1
    expected = lambda z: c3 / m * ((z + c1) ** m - c1**m)
    grid = np.linspace(0, end, 20001)
    drawn, counts = np.empty(q["n"]), np.empty(q["n"])
    for k in range(q["n"]):
        # A Poisson number of boundaries, spread by the rate: the same process
        # by its other definition.
        n = rng.poisson(expected(end))
        inner = np.sort(np.interp(rng.random(n) * expected(end), expected(grid), grid))
        z = np.concatenate([[0], inner, [end]])
        middle = (z[1:] + z[:-1]) / 2
        median = np.diff(np.interp(z, edges, times))
        sigma = s[np.minimum(np.searchsorted(edges, middle) - 1, len(s) - 1)]
        e = rng.normal(size=n + 1)
        state, total = 0.0, 0.0
        for i in range(n + 1):
            rho = 0.0
            if i > 0:
                rho = float(correlation((middle[i - 1] + middle[i]) / 2, middle[i] - middle[i - 1], q["class"]))
            state = rho * state + np.sqrt(1 - rho * rho) * e[i]
            total += median[i] * np.exp(-sigma[i] * state)
        drawn[k], counts[k] = end / total, n
    return {
        "quantiles": [float(x) for x in np.quantile(drawn, [0.05, 0.16, 0.5, 0.84, 0.95])],
        "boundaries": float(expected(end)),
    }


asked = json.load(sys.stdin)
json.dump(
    {
        "models": [model_answer(m) for m in asked["models"]],
        "lognormals": [chances(q) for q in asked["lognormals"]],
        "students": [float(stats.t(f).ppf((1 + level) / 2)) for f, level in asked["students"]],
        "chi": [float(stats.chi2(f).sf(x)) for x, f in asked["chi"]],
        "sample": [float(q) for q in np.quantile(asked["sample"], [0.05, 0.16, 0.5, 0.84, 0.95])],
        "layering": layering(asked["layering"]),
    },
    sys.stdout,
)
