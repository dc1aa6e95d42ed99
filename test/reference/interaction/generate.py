#!/usr/bin/env python3
"""
Reference values for interacting companions, from general-purpose libraries only.

- laplace: Laplace coefficients and their derivatives by mpmath quadrature, 40 digits.
- motions: mid-transit and mid-occultation times of stars with two or three companions in space, inertial frame, all bodies
  (star included) integrated by scipy's DOP853 with rtol 1e-13; events are minima of the distance in the sky, found on the
  dense output and refined by Brent's method.

Run with Debian's python3 (python3-scipy, python3-mpmath); prints JSON to interaction.json beside this file.
"""
import json
import math
import os

import mpmath
import numpy as np
import scipy
from scipy.integrate import solve_ivp
from scipy.optimize import brentq

mpmath.mp.dps = 40


def laplace(s, j, alpha):
    alpha = mpmath.mpf(alpha)

    def value(a):
        return 2 / mpmath.pi * mpmath.quad(
            lambda psi: mpmath.cos(j * psi) / (1 - 2 * a * mpmath.cos(psi) + a * a) ** mpmath.mpf(s),
            [0, mpmath.pi / 16, mpmath.pi / 4, mpmath.pi],
        )

    def slope(a):
        return 2 / mpmath.pi * mpmath.quad(
            lambda psi: -2 * mpmath.mpf(s) * (a - mpmath.cos(psi)) * mpmath.cos(j * psi)
            / (1 - 2 * a * mpmath.cos(psi) + a * a) ** (mpmath.mpf(s) + 1),
            [0, mpmath.pi / 16, mpmath.pi / 4, mpmath.pi],
        )

    return float(value(alpha)), float(slope(alpha))


# Nominal solar mass parameter (IAU 2015 B3) in au3/d2 (IAU 2012 B2).
GM_SUN = 1.3271244e20 * 86400.0**2 / 149597870700.0**3


def relative_state(companion, star_mass):
    """Kepler ellipse relative to the star at time 0, from its osculating elements; z towards the observer."""
    m, p, tc = companion["massRatio"], companion["periodDays"], companion["conjunctionDays"]
    k, h = companion["eCosOmega"], companion["eSinOmega"]
    inc, node = companion["inclinationRad"], companion["nodeRad"]
    e, w = math.hypot(k, h), math.atan2(h, k)
    gm = GM_SUN * star_mass * (1 + m)
    a = (gm * (p / (2 * math.pi)) ** 2) ** (1 / 3)
    nu = math.pi / 2 - w  # inferior conjunction, w that of the star's orbit
    ecc = math.atan2(math.sqrt(1 - e * e) * math.sin(nu), e + math.cos(nu))
    mean = ecc - e * math.sin(ecc) - 2 * math.pi * tc / p
    E = float(mpmath.findroot(lambda x: x - e * mpmath.sin(x) - mean, mean + e * math.sin(mean)))
    n = 2 * math.pi / p
    x, y = a * (math.cos(E) - e), a * math.sqrt(1 - e * e) * math.sin(E)
    f = n * a / (1 - e * math.cos(E))
    u, v = -f * math.sin(E), f * math.sqrt(1 - e * e) * math.cos(E)
    e1 = np.array([math.cos(node), math.sin(node), 0.0])
    e2 = np.array([-math.sin(node) * math.cos(inc), math.cos(node) * math.cos(inc), math.sin(inc)])
    turn = lambda p_, q_: (math.cos(w) * p_ - math.sin(w) * q_) * e1 + (math.sin(w) * p_ + math.cos(w) * q_) * e2
    return turn(x, y), turn(u, v)


def motion(case):
    star_mass = case["starMassSolar"]
    gms = np.array([1.0] + [c["massRatio"] for c in case["companions"]]) * GM_SUN * star_mass
    count = len(gms)
    pos, vel = np.zeros((count, 3)), np.zeros((count, 3))
    for i, c in enumerate(case["companions"]):
        pos[i + 1], vel[i + 1] = relative_state(c, star_mass)
    pos -= (gms[:, None] * pos).sum(0) / gms.sum()
    vel -= (gms[:, None] * vel).sum(0) / gms.sum()

    def rhs(_, state):
        x = state[: 3 * count].reshape(count, 3)
        acc = np.zeros_like(x)
        for i in range(count):
            for j in range(count):
                if i != j:
                    d = x[j] - x[i]
                    acc[i] += gms[j] * d / (d @ d) ** 1.5
        return np.concatenate([state[3 * count :], acc.ravel()])

    start = np.concatenate([pos.ravel(), vel.ravel()])
    solution = solve_ivp(
        rhs, [0, case["spanDays"]], start, method="DOP853", rtol=1e-13, atol=1e-15, dense_output=True, max_step=0.5
    )

    def sky(t, i):
        s = solution.sol(t)
        x = s[: 3 * count].reshape(count, 3)
        v = s[3 * count :].reshape(count, 3)
        r, u = x[i] - x[0], v[i] - v[0]
        return r[0] * u[0] + r[1] * u[1], r[2]

    result = []
    for i in range(1, count):
        grid = np.arange(0, case["spanDays"], 0.02 * case["companions"][i - 1]["periodDays"])
        values = [sky(t, i)[0] for t in grid]
        transits, occultations = [], []
        for a, b, fa, fb in zip(grid, grid[1:], values, values[1:]):
            if fa < 0 <= fb:
                t = brentq(lambda s: sky(s, i)[0], a, b, xtol=1e-13, rtol=8.9e-16)
                (transits if sky(t, i)[1] > 0 else occultations).append(t)
        result.append({"transits": transits, "occultations": occultations})
    return result


def companion(m, p, tc, k, h, inc=90.0, node=0.0):
    return {
        "massRatio": m,
        "periodDays": p,
        "conjunctionDays": tc,
        "eCosOmega": k,
        "eSinOmega": h,
        "inclinationRad": math.radians(inc),
        "nodeRad": math.radians(node),
    }


CASES = [
    {"name": "two, eccentric, near 2:1", "starMassSolar": 1.0, "spanDays": 400.0,
     "companions": [companion(3e-5, 7.1, 2.0, 0.05, -0.03), companion(8e-5, 14.5, 5.0, -0.04, 0.06)]},
    {"name": "two, massive, inclined to each other", "starMassSolar": 0.7, "spanDays": 300.0,
     "companions": [companion(1e-3, 9.3, 1.0, 0.1, 0.2, 88.5, 0.0), companion(2e-3, 31.0, 11.0, 0.15, -0.1, 80.0, 25.0)]},
    {"name": "three, near a chain of resonances", "starMassSolar": 0.4, "spanDays": 250.0,
     "companions": [companion(1e-5, 3.0, 0.5, 0.01, 0.0, 89.0), companion(2e-5, 4.55, 2.5, 0.0, 0.02, 89.4, 1.0),
                    companion(1.5e-5, 9.2, 7.0, -0.02, 0.01, 89.7, -1.0)]},
]

laplace_values = []
for s in (0.5, 1.5):
    for j, alpha in [(0, 0.3), (1, 0.63), (2, 0.63), (3, 0.7631428283688879), (5, 0.8617738760127535), (10, 0.9321697517861575), (12, 0.95)]:
        value, slope = laplace(s, j, alpha)
        laplace_values.append({"s": s, "j": j, "alpha": alpha, "value": value, "slope": slope})

output = {
    "source": f"mpmath {mpmath.__version__} (40 digits), scipy {scipy.__version__} DOP853 rtol 1e-13",
    "generator": "generate.py",
    "laplace": laplace_values,
    "motions": [{**case, "expected": motion(case)} for case in CASES],
}
with open(os.path.join(os.path.dirname(os.path.abspath(__file__)), "interaction.json"), "w") as f:
    json.dump(output, f, indent=1)
    f.write("\n")
