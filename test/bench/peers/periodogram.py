"""The periodogram of astropy on the grid and the data of test/bench/periodogram.bench.ts, timed inside the process.

usage: periodogram.py INPUT.json REPEATS [POWERS.f64]
Prints {"timesMs": [...], "version": "...", "sampled": [...]}: times of the fast method, the first one cold, and, when a
file is named for the powers of the fast method, exact powers (direct sums) at every `stride`-th frequency.
"""
import json
import sys
import time

import astropy
import numpy as np
from astropy.timeseries import LombScargle

with open(sys.argv[1]) as file:
    given = json.load(file)
t, y, dy = (np.array(given[key]) for key in ("timesDays", "velocitiesMps", "sigmasMps"))
frequency = given["startPerDay"] + given["stepPerDay"] * np.arange(given["count"])


def fast():
    periodogram = LombScargle(t, y, dy, fit_mean=True, center_data=True)
    return periodogram.power(frequency, method="fast", assume_regular_frequency=True)


times = []
for _ in range(int(sys.argv[2])):
    start = time.perf_counter()
    power = fast()
    times.append(1000 * (time.perf_counter() - start))
if not np.all(np.isfinite(power)):
    sys.exit("a power is not finite")
sampled = []
if len(sys.argv) > 3:
    power.astype("<f8").tofile(sys.argv[3])
    few = frequency[:: given["stride"]]
    sampled = LombScargle(t, y, dy, fit_mean=True).power(few, method="cython").tolist()
print(json.dumps({"timesMs": times, "version": astropy.__version__, "sampled": sampled}))
