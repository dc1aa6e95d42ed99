#!/usr/bin/python3
"""Periodogram powers, false-alarm bounds, window values and alias periods for the tests of the search.

Writes search.json beside this file from invented-velocities.json. Run with Debian's interpreter (python3-numpy,
python3-scipy, python3-mpmath). Powers come from a dense least-squares solve at each frequency (numpy.linalg.lstsq), not
from a periodogram formula; bounds come from mpmath with 4000 digits (the smallest are near 1e-300).
"""
import json
import os

import mpmath
import numpy as np
import scipy
from scipy.optimize import minimize_scalar

HERE = os.path.dirname(os.path.abspath(__file__))
mpmath.mp.dps = 4000

with open(os.path.join(HERE, "invented-velocities.json")) as handle:
    table = np.array(json.load(handle)["rows"])
t, y, sigma = table.T
w = sigma**-2
t0 = t.mean()


def chi_square(columns):
    matrix = np.array(columns).T / sigma[:, None]
    solution = np.linalg.lstsq(matrix, y / sigma, rcond=None)[0]
    return np.sum((y / sigma - matrix @ solution) ** 2), solution


def fit(frequency):
    angle = 2 * np.pi * frequency * (t - t0)
    value, solution = chi_square([np.ones_like(t), np.cos(angle), np.sin(angle)])
    return 1 - value / CONSTANT, float(np.hypot(solution[1], solution[2]))


CONSTANT = chi_square([np.ones_like(t)])[0]
grid = np.linspace(0.002, 0.6, 59801)
powers = [fit(f)[0] for f in grid]
top = grid[int(np.argmax(powers))]
refined = minimize_scalar(lambda f: -fit(f)[0], bounds=(top - 1e-4, top + 1e-4), method="bounded", options={"xatol": 1e-12})


def bound(power, bandwidth, variance, nh):
    """[Baluev2008], residual-variance normalisation."""
    power, bandwidth, variance = mpmath.mpf(power), mpmath.mpf(bandwidth), mpmath.mpf(variance)
    nk = nh - 2
    gamma = mpmath.sqrt(mpmath.mpf(2) / nh) * mpmath.gamma(mpmath.mpf(nh) / 2) / mpmath.gamma(mpmath.mpf(nh - 1) / 2)
    width = bandwidth * mpmath.sqrt(4 * mpmath.pi * variance)
    tau = gamma * width * (1 - power) ** (mpmath.mpf(nk - 1) / 2) * mpmath.sqrt(nh * power / 2)
    single = (1 - power) ** (mpmath.mpf(nk) / 2)
    return 1 - (1 - single) * mpmath.exp(-tau)


variance = float(np.sum(w * (t - np.sum(w * t) / w.sum()) ** 2) / w.sum())
bounds = []
for data_count, background in [(30, 1), (30, 4), (500, 6)]:
    for bandwidth in [0.1, 0.6, 2.0]:
        for power in [0.01, 0.2, 0.4, 0.6, 0.8119648766896189, 0.95, 0.999]:
            value = bound(power, bandwidth, variance, data_count - background)
            bounds.append([data_count, background, bandwidth, power, float(value)])


def window(frequency):
    return float(abs(np.sum(w * np.exp(2j * np.pi * frequency * (t - t0))) / w.sum()) ** 2)


SIDEREAL, YEAR, MONTH = mpmath.mpf("1.00273790935"), 1 / mpmath.mpf("365.2422"), 1 / mpmath.mpf("29.530588")
aliases = []
for period in [0.7365474, 2.81705, 11.37, 29.53, 365.25]:
    f = 1 / mpmath.mpf(period)
    aliases.append(
        {
            "periodDays": period,
            "frequencies": {
                "sidereal-day alias": [float(abs(f - SIDEREAL)), float(f + SIDEREAL)],
                "solar-day alias": [float(abs(f - 1)), float(f + 1)],
                "year alias": [float(abs(f - YEAR)), float(f + YEAR)],
                "synodic-month alias": [float(abs(f - MONTH)), float(f + MONTH)],
                "two-sidereal-day alias": [float(abs(f - 2 * SIDEREAL)), float(f + 2 * SIDEREAL)],
                "half period": [float(2 * f)],
                "double period": [float(f / 2)],
            },
        }
    )

result = {
    "source": f"numpy {np.__version__}, scipy {scipy.__version__}, mpmath {mpmath.__version__} (4000 digits)",
    "generator": "generate.py",
    "timeVarianceDays2": variance,
    "chiSquareOfConstant": float(CONSTANT),
    "powerColumns": ["frequencyPerDay", "power", "amplitudeMps"],
    "powers": [[f, *map(float, fit(f))] for f in [0.005, 0.02, 0.05, 0.0839, 1 / 11.37, 0.1758, 0.29, 0.5, 0.9148, 1.0005, 1.5, 1.9]],
    "peak": {"frequencyPerDay": float(refined.x), "power": float(-refined.fun)},
    "boundColumns": ["dataCount", "backgroundCount", "bandwidthPerDay", "power", "probability"],
    "bounds": bounds,
    "window": [[f, window(f)] for f in [0.01, 0.0339, 0.1, 0.5, 1.0, 1.0027379, 2.0, 2.0054758]],
    "aliases": aliases,
}
with open(os.path.join(HERE, "search.json"), "w") as handle:
    json.dump(result, handle, indent=1)
    handle.write("\n")
