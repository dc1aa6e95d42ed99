"""The limb-darkened flux and its four derivatives vectorised in numpy, timed inside the process.

usage: transit_flux.py POINTS RADIUS_RATIO REPEATS [VALUES.f64]
Prints {"timesMs": [...], "version": "..."}: the first time is cold. Same formula as src/signals/transit/disc-overlap.ts, with
scipy's complete elliptic integrals of the first and second kind and Carlson's R_J for the third.
"""
import json
import sys
import time

import numpy as np
import scipy
from scipy.special import ellipe, ellipkm1, elliprj

count, k = int(sys.argv[1]), float(sys.argv[2])
u1, u2 = 0.4, 0.3
separations = (1.1 + k) * (np.arange(count) + 0.5) / count


def integrals(complement, p):
    """K, E, and the third kind with characteristic 1 - p."""
    first = ellipkm1(complement)
    second = ellipe(1 - complement)
    third = first + (1 - p) / 3 * elliprj(0, complement, 1, p)
    return first, second, third


def flux(all_z):
    out = np.zeros((len(all_z), 5))
    out[:, 0] = 1
    total = np.pi * (1 - u1 / 3 - u2 / 6)
    flat, slope = 1 - u1 - 2 * u2, u1 + 2 * u2
    inside = all_z <= 1 - k
    crossing = (all_z > abs(1 - k)) & (all_z < 1 + k)
    for which, crosses in ((inside, False), (crossing, True)):
        z = all_z[which]
        nearest = (1 - z + k) * (1 + z - k)
        past = (z + k - 1) * (z + k + 1)
        side = np.sign(k - z)
        if crosses:
            complement = past / (4 * z * k)
            p = 1 / (z - k) ** 2
        else:
            complement = -past / nearest
            p = ((z + k) / (z - k)) ** 2
        first, second, third_kind = integrals(complement, p)
        m = 1 - complement
        d = (first - second) / m
        b = first - d
        d *= complement
        if crosses:
            kite = np.sqrt(past * nearest)
            dark = np.arctan2(kite, k * k + (z - 1) * (z + 1))
            star = np.arctan2(kite, z * z + (1 - k) * (1 + k))
            area, area_z, area_k = star + k * k * dark - kite / 2, -kite / z, 2 * k * dark
            square = (star + dark * k**2 * (k**2 + 2 * z**2)) / 2 - kite * (1 + z**2 + 5 * k**2) / 8
            square_z = 2 * z * k**2 * dark - kite * (1 + z**2 + k**2) / (2 * z)
            square_k = 2 * k * ((z**2 + k**2) * dark - kite)
            third = np.sqrt(p) * (first - p * third_kind) / (1 - p) * side
            size = nearest / np.sqrt(z * k)
            inner = (nearest - (k - z) * (k + z)) * b - 4 * z * k / 3 * (b - d) + (k + z) * third
            root = (np.pi * (1 + side) - size * inner) / 3
            root_z, root_k = -2 / 3 * k * size * (b + 2 * d), 2 * k * size * b
        else:
            area, area_z, area_k = np.pi * k**2, 0.0, 2 * np.pi * k
            square = np.pi * k**2 * (z**2 + k**2 / 2)
            square_z, square_k = 2 * np.pi * k**2 * z, 2 * np.pi * k * (z**2 + k**2)
            third = np.sqrt(p) * ((1 - m / (1 - p)) * third_kind + m / (1 - p) * first) * side
            size = np.sqrt(nearest)
            inner = nearest * (b + d) - 4 * z * k / 3 * (b + 2 * d) - (k - z) * (k + z) * (b + d) + third
            root = (np.pi * (1 + side) - 2 * size * inner) / 3
            root_z, root_k = -4 / 3 * k * size * (b - d), 4 * k * size * (b + d)
        loss = (flat * area + slope * root + u2 * square) / total
        out[which, 0] = 1 - loss
        out[which, 1] = -(flat * area_z + slope * root_z + u2 * square_z) / total
        out[which, 2] = -(flat * area_k + slope * root_k + u2 * square_k) / total
        out[which, 3] = (area - root - np.pi / 3 * loss) / total
        out[which, 4] = (2 * (area - root) - square - np.pi / 6 * loss) / total
    return out


times = []
for _ in range(int(sys.argv[3])):
    start = time.perf_counter()
    values = flux(separations)
    times.append(1000 * (time.perf_counter() - start))
if not np.all(np.isfinite(values)):
    sys.exit("a value is not finite")
if len(sys.argv) > 4:
    values.astype("<f8").tofile(sys.argv[4])
print(json.dumps({"timesMs": times, "version": scipy.__version__}))
