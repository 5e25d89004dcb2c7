"""Recomputes averages, means and periods of layered profiles with numpy and scipy.

Standard input: a JSON list of {"layers": [[top, bottom, v0, v1, density], …],
"from": m, "to": m, "period": bool}. Standard output: a JSON list of
{"time", "mean", "deviation", "period"}, the period 0 where it was not asked for.
"""

import json
import sys

import numpy as np
from scipy.integrate import quad, solve_ivp
from scipy.optimize import brentq


def clip(layers, start, end):
    """The parts of the layers between two depths, as rows of h, v0, v1, density."""
    rows = []
    for top, bottom, v0, v1, density in layers:
        a, b = max(top, start), min(bottom, end)
        if b - a > 1e-9:
            v = np.interp([a, b], [top, bottom], [v0, v1])
            rows.append((b - a, v[0], v[1], density))
    return rows


def travel_time(h, v0, v1):
    if v0 == v1:
        return h / v0
    return quad(lambda z: 1 / (v0 + (v1 - v0) * z / h), 0, h, epsabs=0, epsrel=1e-12)[0]


def moments(rows):
    """Mean and population deviation by three-point Gauss quadrature, exact for squares."""
    x, w = np.polynomial.legendre.leggauss(3)
    velocities, weights = [], []
    for h, v0, v1, _ in rows:
        velocities.append(v0 + (v1 - v0) * (x + 1) / 2)
        weights.append(h * w / 2)
    velocities, weights = np.concatenate(velocities), np.concatenate(weights)
    mean = np.average(velocities, weights=weights)
    return mean, np.sqrt(np.average((velocities - mean) ** 2, weights=weights))


def displacement(w, rows, pieces):
    """Displacement at the rock for an array of frequencies, gradients cut into pieces."""
    u, tau = np.ones_like(w), np.zeros_like(w)
    for h, v0, v1, density in rows:
        n = pieces if v0 != v1 else 1
        for k in range(n):
            v = v0 + (v1 - v0) * (k + 0.5) / n
            mu_q, a = density * v * w, w * (h / n) / v
            u, tau = u * np.cos(a) + tau * np.sin(a) / mu_q, -u * mu_q * np.sin(a) + tau * np.cos(a)
    return u


def shot(w, rows):
    """Displacement at the rock by integrating u' = tau/mu, tau' = -density w² u."""
    y = [1.0, 0.0]
    for h, v0, v1, density in rows:
        mu = lambda z: density * (v0 + (v1 - v0) * z / h) ** 2
        f = lambda z, y: [y[1] / mu(z), -density * w * w * y[0]]
        y = solve_ivp(f, (0, h), y, method="DOP853", rtol=1e-11, atol=1e-11).y[:, -1]
    return y[0]


def period(rows, time):
    """Longest period: the first change of sign on a fine grid, then a bracketed root."""
    w = np.linspace(1e-3, 4, 8000) * np.pi / (2 * time)
    u = displacement(w, rows, 20)
    first = int(np.argmax(u <= 0))
    if all(v0 == v1 for _, v0, v1, _ in rows):
        root = brentq(lambda x: displacement(np.array([x]), rows, 1)[0], w[first - 1], w[first], xtol=1e-13)
    else:
        root = brentq(lambda x: shot(x, rows), 0.98 * w[first - 1], 1.02 * w[first], rtol=1e-12)
    return 2 * np.pi / root


def answer(case):
    rows = clip(case["layers"], case["from"], case["to"])
    time = float(np.sum([travel_time(h, v0, v1) for h, v0, v1, _ in rows]))
    mean, deviation = moments(rows)
    return {
        "time": time,
        "mean": float(mean),
        "deviation": float(deviation),
        "period": float(period(rows, time)) if case["period"] else 0,
    }


json.dump([answer(case) for case in json.load(sys.stdin)], sys.stdout)
