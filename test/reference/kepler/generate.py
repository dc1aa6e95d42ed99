"""Reference values for Kepler's equation: python3 generate.py writes the four JSON files beside it (mpmath, 80 digits).

Inputs are exact doubles (0.3 means the double nearest to 0.3). Each row is
[eccentricity, mean anomaly, eccentric anomaly, sin E, cos E, true anomaly], radians, correctly rounded to double;
E and the true anomaly are on the same revolution as M.
"""

import json
import math
import random
from pathlib import Path

from mpmath import __version__, atan2, cos, mp, mpf, nint, pi, sin, sqrt

mp.dps = 80
MADE = "2026-12-01"
HERE = Path(__file__).parent


def solve(eccentricity, mean):
    """E by bisection to 2^-40 of the bracket, then Newton; the residual is checked at the end."""
    e = mpf(eccentricity)
    turns = nint(mpf(mean) / (2 * pi))
    m = mpf(mean) - turns * 2 * pi
    size = abs(m)
    low, high = size, min(size + e, size / (1 - e), +pi)
    for _ in range(60):
        middle = (low + high) / 2
        if middle - e * sin(middle) < size:
            low = middle
        else:
            high = middle
    anomaly = (low + high) / 2
    for _ in range(12):
        anomaly -= (anomaly - e * sin(anomaly) - size) / (1 - e * cos(anomaly))
    assert abs(anomaly - e * sin(anomaly) - size) < mpf(10) ** -70
    true = 2 * atan2(sqrt(1 + e) * sin(anomaly / 2), sqrt(1 - e) * cos(anomaly / 2))
    sign = -1 if m < 0 else 1
    shift = turns * 2 * pi
    row = [sign * anomaly + shift, sign * sin(anomaly), cos(anomaly), sign * true + shift]
    return [eccentricity, mean, *(float(value) for value in row)]


def write(name, pairs):
    rows = [solve(e, m) for e, m in pairs]
    head = {
        "source": f"mpmath {__version__}, mp.dps={mp.dps}",
        "generator": "generate.py",
        "made": MADE,
        "columns": ["eccentricity", "meanAnomalyRad", "eccentricAnomalyRad", "sinE", "cosE", "trueAnomalyRad"],
    }
    body = ",\n  ".join(json.dumps(row) for row in rows)
    text = json.dumps(head, indent=1)[:-2] + ',\n "rows": [\n  ' + body + "\n ]\n}\n"
    (HERE / f"{name}.json").write_text(text)


rng = random.Random(20261201)
PLACES = [1e-10, 1e-6, 1e-3, 0.05, 0.5, 1.0, 1.5707963267948966, 2.0, 2.5, 3.0, 3.14159, math.pi, -0.1, -1.0, -3.0, 4.0, 6.0, 6.28]

write("low-e", [(e, m) for e in (1e-8, 0.01, 0.1, 0.3, 0.5, 0.7) for m in PLACES])
write(
    "high-e",
    [(e, m) for e in (0.8, 0.874, 0.876, 0.9, 0.95, 0.99) for m in PLACES]
    + [(rng.uniform(0.8, 0.999), rng.uniform(-math.pi, math.pi)) for _ in range(60)]
    # E about half-way between multiples of 1/32, where an expansion about those has the farthest to go.
    + [(e, x - e * math.sin(x)) for e in (0.9, 0.95, 0.99, 0.9999999) for x in ((j + 0.5) / 32 + 3e-5 for j in range(10, 30))],
)
write(
    "near-parabolic",
    [
        (e, m)
        for e in (0.95, 0.99, 0.999, 0.9999, 0.999999, 1 - 1e-9, 1 - 2.0**-53)
        for m in (1e-300, 1e-18, 1e-12, 1e-9, 1e-7, 1e-5, 1e-4, 1e-3, 5e-3, 0.0125, 0.025, -0.03, 0.1, -1.0, 3.0)
    ]
    + [(1 - 10 ** rng.uniform(-12, -1), 10 ** rng.uniform(-14, -0.5)) for _ in range(60)],
)
nearest_turns = [float(2 * pi * k) for k in (1, 7, 1000, 1_000_000, 4_000_000)]
write(
    "many-revolutions",
    [
        (e, m)
        for e in (0.05, 0.6, 0.97, 0.9999)
        for m in [7.0, -100.0, 12345.678, -1e6, 2.5e7, 2.7e7, -1e9, 1e15, 1e22] + nearest_turns + [-nearest_turns[2], 3 * math.pi]
    ],
)
