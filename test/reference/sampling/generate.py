"""Expected values of test/numerics/sampling: leapfrog.json and evidence.json.

usage: python3 generate.py        (numpy and scipy; writes beside itself)
The other files here are data and values of outside programs; each says in "source" where it comes from.
"""
import json
import os
from fractions import Fraction

import numpy as np
from scipy.stats import multivariate_normal

MADE = "2026-12-01"
here = os.path.dirname(os.path.abspath(__file__))


def write(name, content):
    with open(os.path.join(here, name), "w") as file:
        json.dump(content, file, indent=1)
        file.write("\n")


# The harmonic oscillator H = (q^2 + p^2) / 2, in exact fractions.
step, q, p, trajectory = Fraction(1, 10), Fraction(1), Fraction(0), []
for _ in range(10):
    p -= step / 2 * q
    q += step * p
    p -= step / 2 * q
    trajectory.append([float(q), float(p)])
shadow = p * p / 2 + q * q / 2 * (1 - step * step / 4)
write("leapfrog.json", {
    "source": "leapfrog of H = (q^2 + p^2)/2 from (1, 0), step 1/10, in exact fractions; scheme and conserved shadow energy "
              "p^2/2 + q^2/2 (1 - step^2/4): Neal 2011, Handbook of Markov Chain Monte Carlo, ch. 5",
    "generator": "generate.py", "made": MADE, "step": 0.1, "trajectory": trajectory, "shadowEnergy": float(shadow)})


def midpoint(log_density, low, high, cells):
    """ln of the mean of exp(log_density) over a square, i.e. the evidence under a uniform prior."""
    x = low + (high - low) * (np.arange(cells) + 0.5) / cells
    values = log_density(x[:, None], x[None, :])
    top = values.max()
    return float(top + np.log(np.mean(np.exp(values - top))))


def egg_box(x, y):
    return (2 + np.cos(x / 2) * np.cos(y / 2)) ** 5


def shells(x, y, radius=2.0, width=0.1):
    def shell(cx):
        return np.exp(-((np.hypot(x - cx, y) - radius) ** 2) / (2 * width**2)) / np.sqrt(2 * np.pi * width**2)
    return np.log(shell(-3.5) + shell(3.5) + 1e-300)


t = np.arange(6.0)
y = np.array([1.1, 1.9, 3.2, 3.9, 5.1, 5.8])
design = np.column_stack([np.ones(6), t])
covariance = design @ design.T * 100 + np.eye(6) * 0.04
linear = float(multivariate_normal.logpdf(y, np.zeros(6), covariance))

write("evidence.json", {
    "source": "egg box and shells: midpoint sums over 4000 x 4000 cells with numpy (problems of Feroz, Hobson & Bridges 2009, "
              "MNRAS 398, 1601, section 6; the 235.88 quoted there for the egg box is 0.024 above its integral); "
              "line: closed form, scipy.stats.multivariate_normal",
    "generator": "generate.py", "made": MADE,
    "eggBox": midpoint(egg_box, 0, 10 * np.pi, 4000),
    "shells": midpoint(shells, -6, 6, 4000),
    "line": {"t": t.tolist(), "y": y.tolist(), "sigma": 0.2, "priorSigma": 10, "logEvidence": linear}})
