#!/usr/bin/python3
"""Least-squares optimum of two-companions-data.json, likelihoods and a Fisher matrix, for the tests of the solver.

Writes fits.json beside this file. Run with Debian's interpreter (python3-numpy, python3-scipy). The model is written here anew,
Kepler's equation by bisection and Newton steps; the optimum is the best of twelve starts of scipy's least_squares.
"""
import json
import os

import numpy as np
import scipy
from scipy import stats
from scipy.optimize import least_squares, minimize_scalar

HERE = os.path.dirname(os.path.abspath(__file__))
with open(os.path.join(HERE, "two-companions-data.json")) as handle:
    source = json.load(handle)
t, v, sigma, instrument = np.array(source["rows"]).T
epoch = 2457351.0  # the middle of the data, (first + last)/2, rounded to half a day
x = t - epoch


def eccentric_anomaly(mean, e):
    mean = np.mod(mean + np.pi, 2 * np.pi) - np.pi
    low, high = np.full_like(mean, -np.pi), np.full_like(mean, np.pi)
    for _ in range(60):
        middle = 0.5 * (low + high)
        above = middle - e * np.sin(middle) > mean
        high, low = np.where(above, middle, high), np.where(above, low, middle)
    anomaly = 0.5 * (low + high)
    return anomaly - (anomaly - e * np.sin(anomaly) - mean) / (1 - e * np.cos(anomaly))


NAMES = ["P", "K", "eCosOmega", "eSinOmega", "timePeriastronDays", "P2", "K2", "longitude2", "zeroPoint0", "zeroPoint1", "slope"]


def model(p):
    period, k, c, s, passage, period2, k2, longitude2, zero0, zero1, slope = p
    e, omega = np.hypot(c, s), np.arctan2(s, c)
    anomaly = eccentric_anomaly(2 * np.pi * (x - passage) / period, e)
    nu = 2 * np.arctan2(np.sqrt(1 + e) * np.sin(anomaly / 2), np.sqrt(1 - e) * np.cos(anomaly / 2))
    first = k * (np.cos(nu + omega) + c)
    second = k2 * np.cos(2 * np.pi * x / period2 + longitude2)
    return first + second + np.where(instrument == 0, zero0, zero1) + slope * x


def residuals(p):
    return (v - model(p)) / sigma


start = np.array([53.43, 42.0, 0.37 * np.cos(2.13), 0.37 * np.sin(2.13), 0.8, 8.1235, 9.0, 1.3, 5.0, -11.0, 0.012])
scale = np.array([0.03, 2, 0.05, 0.05, 0.8, 0.005, 1, 0.3, 2, 2, 0.01])
random = np.random.default_rng(5)
best = None
for turn in range(12):
    longitudes = [0.0] if turn == 0 else [random.uniform(0, 2 * np.pi)]
    first = start + (0 if turn == 0 else 1) * scale * random.normal(size=len(start))
    first[7] = longitudes[0]
    found = least_squares(residuals, first, x_scale=scale, xtol=1e-15, ftol=1e-15, gtol=1e-15, max_nfev=2000)
    if best is None or found.cost < best.cost:
        best = found
p = best.x.copy()
if p[6] < 0:
    p[6], p[7] = -p[6], p[7] + np.pi
p[7] = np.mod(p[7], 2 * np.pi)
chi_square = float(np.sum(residuals(p) ** 2))
jacobian = np.empty((len(t), len(p)))
for j in range(len(p)):
    h = 1e-4 * scale[j]
    up, down = p.copy(), p.copy()
    up[j] += h
    down[j] -= h
    jacobian[:, j] = (residuals(up) - residuals(down)) / (2 * h)
errors = np.sqrt(np.diag(np.linalg.inv(jacobian.T @ jacobian)))
likelihood = -0.5 * (chi_square + np.sum(np.log(2 * np.pi * sigma**2)))

r, s = np.array([1.2, -0.7, 3.1, -2.2, 0.4, 1.9]), np.array([0.8, 0.9, 1.1, 0.7, 1.0, 1.3])
gauss = lambda jitter: float(np.sum(stats.norm.logpdf(r, scale=np.hypot(s, jitter))))
top = minimize_scalar(lambda jitter: -gauss(jitter), bounds=(0.5, 3), method="bounded", options={"xatol": 1e-13})

# v = K sin(2 pi t/P + phi) + gamma on t = (i + 1/2) T/N
n, span, period, amplitude, phase, error = 40, 200.0, 12.34, 8.0, 0.6, 1.5
grid = (np.arange(n) + 0.5) * span / n
angle = 2 * np.pi * grid / period + phase
columns = np.array([np.sin(angle), -amplitude * np.cos(angle) * 2 * np.pi * grid / period**2, amplitude * np.cos(angle), np.ones(n)]).T / error
fisher = np.sqrt(np.diag(np.linalg.inv(columns.T @ columns)))

result = {
    "source": f"numpy {np.__version__}, scipy {scipy.__version__}",
    "generator": "generate.py",
    "optimum": {
        "epochBjd": epoch,
        "chiSquare": chi_square,
        "logLikelihood": float(likelihood),
        "parameters": dict(zip(NAMES, map(float, p))),
        "sigmas": dict(zip(NAMES, map(float, errors))),
    },
    "jitter": {
        "residualsMps": r.tolist(),
        "sigmasMps": s.tolist(),
        "logLikelihoods": [[jitter, gauss(jitter)] for jitter in (0.0, 1.0, 2.0)],
        "bestJitterMps": float(top.x),
        "bestLogLikelihood": -float(top.fun),
    },
    "fisher": {
        "count": n, "spanDays": span, "periodDays": period, "semiAmplitudeMps": amplitude, "phaseRad": phase, "sigmaMps": error,
        "sigmaSemiAmplitude": float(fisher[0]), "sigmaPeriod": float(fisher[1]), "sigmaPhase": float(fisher[2]),
        "sigmaZeroPoint": float(fisher[3]),
    },
    "lucySweeney": {"chiSquareRatio": 45 / 58, "dataCount": 40, "parameterCount": 6,
                    "probability": float(stats.f.sf(((58 - 45) / 2) / (45 / 34), 2, 34))},
}
with open(os.path.join(HERE, "fits.json"), "w") as handle:
    json.dump(result, handle, indent=1)
    handle.write("\n")
