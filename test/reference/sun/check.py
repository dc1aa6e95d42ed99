#!/usr/bin/python3
"""What is in sun-as-star.csv, found with scipy's least squares (not with tugline). Its output is summed up in README.md.

Fits sums of Keplerians, zero point and a polynomial drift, started from the planets' known periods with random phases;
the best of twelve starts is kept. Takes two to three minutes.
Run: /usr/bin/python3 check.py (packages python3-numpy, python3-scipy, python3-erfa)
"""
import os

import numpy as np
from scipy.optimize import brentq, least_squares

from generate import ERROR_MPS, sun_velocity_mps

GM_SUN, GM_JUPITER = 1.3271244e20, 1.2668653e17  # m3/s2, IAU 2015 Resolution B3
# Starting values only: period (d), semi-amplitude (m/s).
PLANETS = {"Jupiter": (4332.6, 12.4), "Saturn": (10759.2, 2.8), "Uranus": (30685.0, 0.30), "Neptune": (60189.0, 0.28)}
HALF_SPAN_YEARS = 27.5
STARTS = 12


def keplerian(t, period, k, h, l, phase):
    """K [cos(nu + omega) + e cos omega]; h, l = e sin omega, e cos omega; phase = mean longitude at t = 0, rad."""
    e, omega = np.hypot(h, l), np.arctan2(h, l)
    mean = 2 * np.pi * t / period + phase - omega
    anomaly = mean + e * np.sin(mean)
    for _ in range(30):
        anomaly -= (anomaly - e * np.sin(anomaly) - mean) / (1 - e * np.cos(anomaly))
    nu = 2 * np.arctan2(np.sqrt(1 + e) * np.sin(anomaly / 2), np.sqrt(1 - e) * np.cos(anomaly / 2))
    return k * (np.cos(nu + omega) + l)


def minimum_mass_jupiter(period_days, k, e):
    """Exact root of the mass function for a star of one nominal solar mass, i = 90 deg."""
    f = period_days * 86400 * k**3 * (1 - e * e) ** 1.5 / (2 * np.pi)
    gm = brentq(lambda m: m**3 / (GM_SUN + m) ** 2 - f, 1e8, 1e19)
    return gm / GM_JUPITER


def drift_columns(t, degree):
    return np.vander(t / 365.25 / HALF_SPAN_YEARS, degree + 1)


def model(p, t, count, degree):
    """p: (log of period/1000 d, K, h, l, phase) per companion, then the drift, highest power first."""
    sum_mps = drift_columns(t, degree) @ p[5 * count :]
    for i in range(count):
        sum_mps = sum_mps + keplerian(t, np.exp(p[5 * i]) * 1000, *p[5 * i + 1 : 5 * i + 5])
    return sum_mps


def fit(t, v, count, degree):
    n = degree + 1
    lower = [np.log(0.5), 0.0, -0.6, -0.6, -20.0] * count + [-np.inf] * n
    upper = [np.log(90.0), 30.0, 0.6, 0.6, 20.0] * count + [np.inf] * n
    best = None
    for trial in range(STARTS):
        random = np.random.default_rng(trial)
        start = []
        for period, k in list(PLANETS.values())[:count]:
            start += [np.log(period / 1000), k, *random.normal(0, 0.02, 2), random.uniform(0, 2 * np.pi)]
        found = least_squares(
            lambda p: (v - model(p, t, count, degree)) / ERROR_MPS,
            start + [0.0] * n,
            bounds=(lower, upper),
            x_scale="jac",
            max_nfev=400,
        )
        if best is None or found.cost < best.cost:
            best = found
    return best


def report(t, v, count, degree):
    best = fit(t, v, count, degree)
    sigma = np.sqrt(np.diag(np.linalg.pinv(best.jac.T @ best.jac)))
    free = best.x.size
    bic = 2 * best.cost + free * np.log(t.size)
    print(f"\n{count} Keplerians, drift of degree {degree}: chi2 {2 * best.cost:.1f}, {free} parameters, BIC {bic:.1f}")
    for i in range(count):
        p, s = best.x[5 * i : 5 * i + 5], sigma[5 * i : 5 * i + 5]
        period, e = np.exp(p[0]) * 1000, np.hypot(p[2], p[3])
        sigma_e = np.hypot(p[2] * s[2], p[3] * s[3]) / max(e, 1e-9)
        mass = minimum_mass_jupiter(period, p[1], e)
        print(
            f"  P {period:9.1f} +- {period * s[0]:7.1f} d   K {p[1]:7.4f} +- {s[1]:.4f} m/s"
            f"   e {e:.4f} +- {sigma_e:.4f}   m sin i {mass:.4f} M_jup"
        )
    names = ["curvature/2 (m/s/yr2)", "slope (m/s/yr)", "zero point (m/s)"][-(degree + 1) :]
    for j, name in enumerate(names):
        scale = HALF_SPAN_YEARS ** (degree - j)
        print(f"  {name} {best.x[5 * count + j] / scale:.5f} +- {sigma[5 * count + j] / scale:.5f}")
    return best.x


def look_for_inner_planets(times, t, v, giants):
    """Sinusoids in what the two giants and a quadratic drift leave, all linear terms of the giants refitted."""
    columns = [*drift_columns(t, 2).T]
    for i in range(2):
        p = giants[5 * i : 5 * i + 5]
        for j in range(5):
            step = np.zeros(giants.size)
            step[5 * i + j] = 1e-5 * max(1.0, abs(p[j]))
            columns.append((model(giants + step, t, 2, 2) - model(giants - step, t, 2, 2)) / step.max())
    basis, _ = np.linalg.qr(np.array(columns).T)
    residual = v - model(giants, t, 2, 2)
    residual = residual - basis @ (basis.T @ residual)

    def gain(period):
        a = np.array([np.cos(2 * np.pi * t / period), np.sin(2 * np.pi * t / period)]).T
        a = a - basis @ (basis.T @ a)
        c = np.linalg.lstsq(a, residual, rcond=None)[0]
        return (np.sum(residual**2) - np.sum((residual - a @ c) ** 2)) / ERROR_MPS**2, np.hypot(*c)

    print("\nin the table, after two Keplerians and a quadratic drift:")
    for name, period in (("Venus", 224.701), ("Earth", 365.256)):
        chi_gain, amplitude = gain(period)
        print(f"  {name}: chi2 falls by {chi_gain:.1f}, amplitude {amplitude:.3f} m/s")
    frequencies = np.arange(1 / 1500, 0.5, 1 / (8 * np.ptp(t)))
    gains = np.array([gain(1 / f)[0] for f in frequencies])
    for index in np.argsort(gains)[::-1][:4]:
        print(f"  highest peaks between 2 and 1500 d: {1 / frequencies[index]:.3f} d, chi2 falls by {gains[index]:.1f}")

    print("in the noiseless motion:")
    dense = np.arange(times[0], times[-1], 7.3)
    u = dense - dense.mean()
    taper = np.hanning(u.size)
    slow = [(u / 1e4) ** power for power in range(4)]
    for period in (4332.6, 2166.3, 1444.2, 10759.2, 5379.6, 30685.0):
        slow += [np.cos(2 * np.pi * u / period), np.sin(2 * np.pi * u / period)]
    for name, period in (("Venus", 224.701), ("Earth", 365.256), ("Mars", 686.98), ("Mercury", 87.969)):
        a = np.array([*slow, np.cos(2 * np.pi * u / period), np.sin(2 * np.pi * u / period)]).T * taper[:, None]
        c = np.linalg.lstsq(a, sun_velocity_mps(dense) * taper, rcond=None)[0]
        print(f"  {name}: {np.hypot(c[-1], c[-2]):.4f} m/s")


def main():
    path = os.path.join(os.path.dirname(os.path.abspath(__file__)), "sun-as-star.csv")
    times, velocities, _ = np.loadtxt(path, delimiter=",", skiprows=5).T
    t = times - 0.5 * (times[0] + times[-1])
    noise = velocities - sun_velocity_mps(times)
    print(f"{t.size} rows over {np.ptp(t) / 365.25:.2f} yr; noise: mean {noise.mean():.4f}, scatter {noise.std():.4f} m/s")
    found = {case: report(t, velocities, *case) for case in ((1, 2), (2, 0), (2, 1), (2, 2), (3, 0), (3, 1), (3, 2), (4, 0), (4, 1))}
    look_for_inner_planets(times, t, velocities, found[(2, 2)])


if __name__ == "__main__":
    main()
