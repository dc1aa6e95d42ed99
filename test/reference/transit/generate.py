#!/usr/bin/python3
"""Reference values for transits, computed with mpmath from the definitions; nothing of the program is used.

Writes moments.json, path.json and exposure.json beside this file. Run with Debian's interpreter (package python3-mpmath):
/usr/bin/python3 generate.py [moments] [path] [exposure]

moments: int 1, int sqrt(1 - r^2), int r^2 over the part of the unit disc that a disc of radius k at distance z covers, by
rings: int 2 r alpha(r) f(r) dr with alpha the half angle of the ring that is covered, tanh-sinh, 50 digits. Derivatives
are central difference quotients of these integrals with a step of 1e-20; not given at the contacts themselves.
path: sky-projected separation from elements by Kepler's equation, light time by iteration, derivatives by difference quotients.
exposure: means over exposures by Gauss-Legendre between the contacts, 25 digits (some minutes).
flux-grid.json and durations.json come from separate computations, each named in its `source`.
"""
import json
import os
import sys

import mpmath
from mpmath import mp, mpf

HERE = os.path.dirname(os.path.abspath(__file__))
mp.dps = 50


def write(name, content):
    with open(os.path.join(HERE, name), "w") as file:
        json.dump({"library": f"mpmath {mpmath.__version__}", **content}, file, separators=(",", ":"))
        file.write("\n")


def half_angle(r, z, k):
    """Half angle of the ring of radius r that lies within the disc, from half-angle functions: no cancellation."""
    across = (k - z + r) * (k + z - r)
    along = (r + z - k) * (r + z + k)
    if across <= 0:
        return mpf(0)
    if along <= 0:
        return mp.pi
    return 2 * mp.atan2(mp.sqrt(across), mp.sqrt(along))


def moments(z, k):
    functions = (lambda r: mpf(1), lambda r: mp.sqrt((1 - r) * (1 + r)), lambda r: r * r)
    cores = (lambda r: mp.pi * r * r, lambda r: 2 * mp.pi / 3 * (1 - ((1 - r) * (1 + r)) ** mpf("1.5")),
             lambda r: mp.pi * r**4 / 2)
    covered = min(mpf(1), k - z) if k > z else mpf(0)
    low, high = abs(z - k), min(mpf(1), z + k)
    values = []
    for function, core in zip(functions, cores):
        value = core(covered) if covered > 0 else mpf(0)
        if low < 1 and low < high:
            value += mp.quad(lambda r: 2 * r * half_angle(r, z, k) * function(r), [low, (low + high) / 2, high])
        values.append(value)
    return values


def moments_and_derivatives(z, k):
    h = mpf(10) ** -20
    at = moments(z, k)
    by_z = [(a - b) / (2 * h) for a, b in zip(moments(z + h, k), moments(z - h, k))]
    by_k = [(a - b) / (2 * h) for a, b in zip(moments(z, k + h), moments(z, k - h))]
    return [float(v) for v in at + by_z + by_k]


def places(k):
    near = (1e-3, 1e-6, 1e-9, 1e-12)
    wanted = [1e-9, 1e-4, k / 3, k, 0.5, 0.95]
    for centre in (k, 1 - k, 1 + k, k - 1, 1.0):
        wanted += [centre + side * d for d in near for side in (-1, 1)]
    wanted += [abs(1 - k) + f * (1 + k - abs(1 - k)) for f in (0.1, 0.35, 0.65, 0.9)]
    return sorted({z for z in wanted if 1e-9 <= z < 1 + k and z > k - 1})


def make_moments():
    rows = []
    for k in (0.01, 0.1, 0.3, 0.5, 0.9, 1.0, 1.001, 1.5, 4.0):
        for z in places(k):
            if z in (abs(1 - k), 1 + k):
                continue
            rows.append([k, z, *moments_and_derivatives(mpf(z), mpf(k))])
    write("moments.json", {
        "columns": ["k", "z", "area", "root", "square", "areaByZ", "rootByZ", "squareByZ", "areaByK", "rootByK", "squareByK"],
        "rows": rows,
    })


def separation(t, ln_period, longitude0, k, h, b, ln_axis, light_radius):
    """z, and the depth coordinate that is positive in front, from the elements; t in days."""
    e = mp.sqrt(k * k + h * h)
    omega = mp.atan2(h, k) if e > 0 else mpf(0)
    axis = mp.exp(ln_axis)
    rate = 2 * mp.pi * mp.exp(-ln_period)
    cos_i = b * (1 + e * mp.sin(omega)) / (axis * (1 - e * e))
    sin_i = mp.sqrt(1 - cos_i * cos_i)

    def place(when):
        mean = longitude0 + rate * when - omega
        anomaly = mean + e * mp.sin(mean) / (1 - mp.sin(mean + e) + mp.sin(mean))
        for _ in range(200):
            step = (anomaly - e * mp.sin(anomaly) - mean) / (1 - e * mp.cos(anomaly))
            anomaly -= max(-1, min(1, step))
            if abs(step) < mpf(10) ** -46:
                break
        else:
            raise ArithmeticError("Kepler's equation")
        true = 2 * mp.atan2(mp.sqrt(1 + e) * mp.sin(anomaly / 2), mp.sqrt(1 - e) * mp.cos(anomaly / 2))
        distance = axis * (1 - e * mp.cos(anomaly))
        angle = true + omega
        return distance * mp.cos(angle), distance * mp.sin(angle)

    front = axis * (1 - e * e) / (1 + e * mp.sin(omega))
    seen = t
    for _ in range(60 if light_radius > 0 else 0):
        later = t - light_radius * sin_i * (front - place(seen)[1])
        done = abs(later - seen) < mpf(10) ** -42
        seen = later
        if done:
            break
    x, y = place(seen)
    return mp.sqrt(x * x + (y * cos_i) ** 2), y


def make_path():
    cases = []
    for name, e, omega, b, light in [
        ("circular", 0.0, 0.0, 0.3, 0.0), ("nearly circular", 1e-9, 2.0, 0.3, 0.0), ("moderate", 0.3, 1.1, 0.62, 0.0),
        ("apastron in front", 0.45, -1.4, -0.2, 0.0), ("eccentric", 0.83, 0.4, 0.9, 0.0),
        ("circular with light time", 0.0, 0.0, 0.5, 3e-5), ("moderate with light time", 0.3, 1.1, 0.62, 1e-4),
        ("eccentric with light time", 0.8, 3.6, 0.1, 3e-5),
    ]:
        ks, hs = float(mpf(e) * mp.cos(mpf(omega))), float(mpf(e) * mp.sin(mpf(omega)))
        coordinates = [1.2, 0.7, ks, hs, b, 2.5]
        rows = []
        for t in (-7.3, -1.9, -0.8, -0.1, 0.43, 0.9, 1.37, 2.2, 611.25):
            exact = [mpf(c) for c in coordinates]
            z, depth = separation(mpf(t), *exact, mpf(light))
            step = mpf(10) ** -16
            row = [t, float(z), bool(depth > 0)]
            for i in range(6):
                ends = []
                for side in (1, -1):
                    moved = list(exact)
                    moved[i] += side * step
                    ends.append(separation(mpf(t), *moved, mpf(light))[0])
                row.append(float((ends[0] - ends[1]) / (2 * step)))
            rows.append(row)
        cases.append({"name": name, "coordinates": coordinates, "starRadiusLightDays": light, "rows": rows})
    write("path.json", {
        "coordinates": ["lnP", "lambda0", "k", "h", "b", "lnAxis"],
        "columns": ["t", "z", "inFront", "zByLnP", "zByLambda0", "zByK", "zByH", "zByB", "zByLnAxis"],
        "cases": cases,
    })


def loss(z, k, u1, u2):
    if z >= 1 + k:
        return mpf(0)
    area, root, square = moments(z, k)
    return ((1 - u1 - 2 * u2) * area + (u1 + 2 * u2) * root + u2 * square) / (mp.pi * (1 - u1 / 3 - u2 / 6))


def make_exposure():
    """Circular orbits; every exposure is split at the contacts and at mid-transit, where z(t) has a known closed form."""
    mp.dps = 25
    cases = []
    for name, period, axis, b, k, u1, u2, exposure in [
        ("thirty minutes", 2.2, 7.0, 0.45, 0.12, 0.3, 0.25, 0.02), ("two minutes", 2.2, 7.0, 0.45, 0.12, 0.3, 0.25, 0.0014),
        ("grazing", 4.0, 11.0, 0.97, 0.08, 0.5, 0.1, 0.02), ("nearly grazing", 4.0, 11.0, 0.919, 0.08, 0.5, 0.1, 0.02),
        ("longer than the transit", 0.9, 3.0, 0.1, 0.05, 0.4, 0.2, 0.15),
    ]:
        p, a, bb, kk, v1, v2, width = (mpf(v) for v in (period, axis, b, k, u1, u2, exposure))
        cos_i = bb / a

        def z_at(t):
            angle = 2 * mp.pi * t / p
            return a * mp.sqrt(mp.sin(angle) ** 2 + (cos_i * mp.cos(angle)) ** 2)

        def contact(reach):
            return p / (2 * mp.pi) * mp.asin(mp.sqrt((reach * reach - bb * bb) / (a * a - bb * bb)))

        edges = [contact(1 + kk)]
        if abs(bb) < 1 - kk:
            edges.append(contact(1 - kk))
        outer = edges[0]
        rows = []
        for t in [float(outer) * f for f in (-1.0, -0.8, -0.3, 0.0, 0.9)] + [float(outer) + exposure * 0.49] + \
                 [float(edges[-1]), float(edges[-1]) + 0.2 * exposure]:
            low, high = mpf(t) - width / 2, mpf(t) + width / 2
            cuts = [low] + sorted(c for e in edges for c in (-e, e) if low < c < high) + [high]
            if low < 0 < high:
                cuts = sorted(cuts + [mpf(0)])
            total = mpf(0)
            for start, end in zip(cuts, cuts[1:]):
                if z_at((start + end) / 2) < 1 + kk:
                    # t = start + (end - start) s^2 (3 - 2 s) smooths the ends
                    total += mp.quad(lambda s: loss(z_at(start + (end - start) * s * s * (3 - 2 * s)), kk, v1, v2)
                                     * (end - start) * 6 * s * (1 - s), [0, 1], method="gauss-legendre", maxdegree=4)
            rows.append([t, float(total / width)])
        cases.append({"name": name, "period": period, "axis": axis, "b": b, "k": k, "u1": u1, "u2": u2,
                      "exposure": exposure, "rows": rows})
    write("exposure.json", {"columns": ["t", "meanLoss"], "cases": cases})


MAKERS = {"moments": make_moments, "path": make_path, "exposure": make_exposure}
for wanted in sys.argv[1:] or list(MAKERS):
    MAKERS[wanted]()
