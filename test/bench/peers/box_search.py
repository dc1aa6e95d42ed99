"""The compiled box search of astropy on the grid and the data of test/bench/box-search.bench.ts, timed inside the process.

usage: box_search.py INPUT.json REPEATS
Prints {"timesMs": [...], "version": "...", "periodDays": ..., "signalToNoise": ...}: the best period by likelihood.
"""
import json
import sys
import time

import astropy
import numpy as np
from astropy.timeseries import BoxLeastSquares

with open(sys.argv[1]) as file:
    given = json.load(file)
t, y, dy = (np.array(given[key]) for key in ("timesDays", "flux", "sigmas"))
period = 1 / np.array(given["frequenciesPerDay"])
duration = np.array(given["durationsDays"])

times = []
for _ in range(int(sys.argv[2])):
    start = time.perf_counter()
    search = BoxLeastSquares(t, y, dy)
    result = search.power(period, duration, objective="likelihood", method="fast", oversample=given["binsPerDuration"])
    times.append(1000 * (time.perf_counter() - start))
if not np.all(np.isfinite(result.power)):
    sys.exit("a power is not finite")
best = int(np.argmax(result.power))
print(
    json.dumps(
        {
            "timesMs": times,
            "version": astropy.__version__,
            "periodDays": result.period[best],
            "signalToNoise": result.depth_snr[best],
        }
    )
)
