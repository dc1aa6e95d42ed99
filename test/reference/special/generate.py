"""Writes special.json beside this file: values of special functions from mpmath at 60 digits.

Run: /usr/bin/python3 generate.py        (needs mpmath and scipy; scipy only cross-checks at 1e-7, which is what it gives near the zeros of log gamma)
Inputs are exact doubles: what is written is what the functions are evaluated at.
"""

import json
import pathlib

import mpmath as mp
import scipy
import scipy.special as sc
import scipy.stats as st

mp.mp.dps = 60


def gamma_q(a, x):
    return mp.gammainc(mp.mpf(a), mp.mpf(x), mp.inf, regularized=True)


def beta_i(x, a, b):
    # Integrated from the side that is small, so that mpmath keeps its digits.
    return mp.betainc(mp.mpf(a), mp.mpf(b), 0, mp.mpf(x), regularized=True)


def f_survival(f, d1, d2):
    f, d1, d2 = mp.mpf(f), mp.mpf(d1), mp.mpf(d2)
    return mp.betainc(d2 / 2, d1 / 2, 0, d2 / (d2 + d1 * f), regularized=True)


def normal_quantile(p):
    p = mp.mpf(p)
    if p == mp.mpf("0.5"):
        return mp.mpf(0)
    start = mp.mpf(float(sc.ndtri(float(p))))
    return mp.findroot(lambda z: mp.erfc(-z / mp.sqrt(2)) / 2 / p - 1, start)


CASES = {
    "logGamma": (
        mp.loggamma,
        sc.gammaln,
        [(x,) for x in [1e-300, 1e-10, 0.001, 0.1, 0.25, 0.4999, 0.5, 0.75, 0.9999999, 1.0000001, 1.2, 1.4616321449683623,
                        1.5, 1.75, 1.999999, 2.000001, 2.25, 2.5, 2.75, 3.5, 4.125, 5.5, 7.25, 9.99, 10.0, 10.5, 17.3, 50.5, 350.0,
                        1234.5, 1e5, 1e10, 1e100]],
    ),
    "erf": (mp.erf, sc.erf, [(x,) for x in [-6.0, -2.5, -1.0, -0.3, 1e-300, 1e-20, 1e-8, 0.01, 0.1, 0.4999, 0.5, 0.75, 1.0, 1.4999, 1.5001, 2.0, 3.0, 5.5]]),
    "erfc": (mp.erfc, sc.erfc, [(x,) for x in [-5.0, -1.0, -0.1, 0.0, 1e-10, 0.1, 0.4999, 0.5, 0.7, 1.0, 1.3, 1.7, 2.0, 2.7, 4.0, 6.5, 10.0, 15.1, 20.3, 26.0]]),
    "regularisedGammaQ": (
        gamma_q,
        sc.gammaincc,
        [(a, x) for a, xs in {
            0.5: [1e-10, 0.01, 0.5, 1.0, 1.6, 3.0, 20.0, 150.0, 600.0], 1.0: [0.1, 2.0, 30.0], 1.5: [0.2, 1.7, 12.0],
            2.5: [0.3, 2.0, 3.6, 150.0], 9.75: [3.0, 9.0, 12.0, 60.0], 10.25: [3.0, 9.5, 11.5, 60.0], 50.0: [20.0, 49.0, 52.0, 120.0],
            350.0: [250.0, 349.0, 352.0, 500.0], 5000.0: [4700.0, 5003.0, 5400.0]}.items() for x in xs],
    ),
    "regularisedBeta": (
        beta_i,
        lambda x, a, b: sc.betainc(a, b, x),
        [(x, a, b) for a, b, xs in [
            (0.5, 0.5, [1e-10, 0.1, 0.5, 0.9]), (1.0, 3.0, [1e-5, 0.3, 0.8]), (2.5, 1.0, [0.01, 0.4, 0.95]), (1.5, 40.0, [1e-4, 0.03, 0.2]),
            (12.0, 7.5, [0.05, 0.4, 0.61, 0.7]), (48.0, 1.5, [0.3, 0.7, 0.95, 0.99]), (100.0, 120.0, [0.3, 0.45, 0.46, 0.55]),
            (350.0, 2.5, [0.8, 0.95, 0.99, 0.999]), (2000.0, 3000.0, [0.36, 0.4, 0.43])] for x in xs],
    ),
    "fSurvival": (
        f_survival,
        lambda f, d1, d2: st.f.sf(f, d1, d2),
        [(f, d1, d2) for d1, d2, fs in [
            (1, 1, [0.01, 1.0, 160.0]), (2, 5, [0.1, 1.0, 5.8, 99.0]), (3, 17, [0.5, 3.2, 40.0, 500.0]), (2, 43, [1e-6, 1.1, 30.0, 200.0]),
            (4, 96, [0.7, 2.5, 60.0]), (5, 690, [0.9, 4.0, 40.0, 300.0]), (30, 30, [0.5, 1.0, 4.0])] for f in fs],
    ),
    "normalQuantile": (
        normal_quantile,
        sc.ndtri,
        [(p,) for p in [1e-300, 1e-100, 1e-20, 1e-8, 0.0013498980316300946, 0.025, 0.15865525393145705, 0.2499, 0.2501, 0.4, 0.49999,
                        0.5000000001, 0.6, 0.74, 0.76, 0.841, 0.975, 0.99865, 0.9999999]],
    ),
}

table = {
    "source": f"mpmath {mp.__version__}, mp.dps=60, cross-checked with scipy {scipy.__version__}",
    "generator": "generate.py",
    "made": "2026-12-01",
    "functions": {},
}
for name, (exact, check, arguments) in CASES.items():
    rows = []
    for args in arguments:
        value = float(exact(*[mp.mpf(a) for a in args]))
        other = float(check(*args))
        assert abs(value - other) <= 1e-7 * abs(value) or name in ("regularisedGammaQ", "fSurvival") and value < 1e-200, (name, args, value, other)
        rows.append([*args, value])
    table["functions"][name] = rows

pathlib.Path(__file__).with_name("special.json").write_text(json.dumps(table, indent=1) + "\n")
