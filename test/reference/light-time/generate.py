"""The light time across the Earth's orbit in the clock of Io: python3 generate.py writes passages.json beside it.

Io is a clock: a circular orbit about Jupiter with the published sidereal period of 1.769137786 d (e.g. JPL, Planetary
Satellite Mean Elements; common knowledge). A passage is the moment at which it crosses a fixed direction of space, as a
transit of a distant system is; it is seen on the Earth later by the light time from Jupiter. (Eclipses in Jupiter's shadow,
which were timed in the seventeenth century, follow the direction of the Sun instead: their clock runs with the synodic
period, and unevenly, since Jupiter's orbit is eccentric.)

Jupiter: ERFA plan94; Earth: ERFA epv00, both heliocentric, of pyerfa in Debian. Times are TDB days. Every fifth passage of
one revolution of Jupiter (4332.6 d, from perihelion to perihelion, so that the light time of its own eccentric orbit has no
net slope) is kept, also those behind the Sun: the distance is not quite a sinusoid (its first harmonic for circular orbits is
0.5 % less than the radius of the Earth's orbit), and a gap at conjunction would let the second harmonic into the first.
Errors of 10 s are added from a seeded normal stream (numpy default_rng).
"""

import json
from pathlib import Path

import erfa
import numpy as np

PERIOD_DAYS = 1.769137786
FIRST_TDB = 2451319.0  # Jupiter at perihelion
REVOLUTION_DAYS = 4332.6
LIGHT_DAYS_PER_AU = 149597870700.0 / 299792458.0 / 86400.0
ERROR_DAYS = 10.0 / 86400.0
SEED = 1676


def jupiter(time):
    return np.array(erfa.plan94(time, 0.0, 5)["p"])


def earth(time):
    heliocentric, _ = erfa.epv00(time, 0.0)
    return np.array(heliocentric["p"])


def seen(emitted):
    """Arrival of light that leaves Jupiter at `emitted`, days."""
    source = jupiter(emitted)
    arrival = emitted
    for _ in range(20):
        arrival = emitted + np.linalg.norm(source - earth(arrival)) * LIGHT_DAYS_PER_AU
    return arrival


def main():
    random = np.random.default_rng(SEED)
    cycles, times = [], []
    for cycle in range(0, int(REVOLUTION_DAYS / PERIOD_DAYS), 5):
        arrival = seen(FIRST_TDB + cycle * PERIOD_DAYS)
        noise = ERROR_DAYS * random.standard_normal()
        cycles.append(cycle)
        times.append(round(float(arrival + noise), 7))
    content = {
        "source": f"pyerfa {erfa.__version__} (plan94, epv00), numpy {np.__version__}",
        "generator": "generate.py",
        "made": "2026-12-01",
        "periodDays": PERIOD_DAYS,
        "errorDays": ERROR_DAYS,
        "cycles": cycles,
        "timesTdb": times,
    }
    Path(__file__).with_name("passages.json").write_text(json.dumps(content, indent=1) + "\n")


main()
