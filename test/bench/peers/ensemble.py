"""A general ensemble sampler (emcee) on the posterior of one Keplerian, with zero point and jitter per instrument.

usage: ensemble.py PROBLEM.json STEPS SEED walkers|all

PROBLEM.json: {"timesDays": [...], "velocitiesMps": [...], "sigmasMps": [...], "instrumentIndices": [0, ...],
  "referenceTimeDays": ..., "start": [...], "startSigmas": [...],
  "ranges": {"logPeriod": [a, b], "logSemiAmplitude": [a, b], "zeroPointMps": [a, b], "jitterCoordinate": [a, b]},
  "amplitudeScaleMps": ..., "jitterScaleMps": ...}
Coordinates, in the order of "start": ln period (d), sqrt(e) cos w, sqrt(e) sin w, mean longitude at the reference time (rad),
ln K (m/s), then zero points (m/s) of all instruments, then jitters as u with s = jitterScale |sinh u|. Priors: uniform in each but
ln K, whose density is K/(K + amplitudeScale); sqrt(e) cos w and sqrt(e) sin w in the unit disc, the longitude on the circle. Velocity: zero point + K (cos(w + true anomaly) + e cos w).

Prints {"seconds", "effectivePerSecond", "effective", "autocorrelationSteps", "acceptance", "names", "means", "sigmas", "version"}.
The first half of the steps is thrown away and not timed; effective numbers are walkers x steps / integrated autocorrelation
time, the smallest of all coordinates and of e counts. With `walkers` the model is called once per walker, as such samplers are mostly used;
with `all` it is called once for all walkers.
"""
import json
import sys
import time

import emcee
import numpy as np

with open(sys.argv[1]) as file:
    given = json.load(file)
steps = int(sys.argv[2])
generator = np.random.RandomState(int(sys.argv[3]))

t, v, sigma = (np.array(given[key], dtype=float) for key in ("timesDays", "velocitiesMps", "sigmasMps"))
instrument = np.array(given["instrumentIndices"])
instruments = int(instrument.max()) + 1
since = t - given["referenceTimeDays"]
ranges = given["ranges"]
size = 5 + 2 * instruments
low = np.full(size, -np.inf)
high = np.full(size, np.inf)
for place, name in [(slice(0, 1), "logPeriod"), (slice(4, 5), "logSemiAmplitude"),
                    (slice(5, 5 + instruments), "zeroPointMps"), (slice(5 + instruments, size), "jitterCoordinate")]:
    low[place], high[place] = ranges[name]


def eccentric_anomaly(mean_anomaly, e):
    """Newton's method on the whole array at once, from a start that is safe for e < 1."""
    m = np.remainder(mean_anomaly + np.pi, 2 * np.pi) - np.pi
    anomaly = m + 0.85 * e * np.sign(np.sin(m))
    for _ in range(30):
        s = e * np.sin(anomaly)
        c = e * np.cos(anomaly)
        f = anomaly - s - m
        change = f / (1 - c)
        change -= 0.5 * s * change**2 / (1 - c)
        anomaly -= change
        if np.max(np.abs(change)) < 1e-11:
            break
    return anomaly


def log_posterior(q):
    """One value per row of q."""
    e = q[:, 1] ** 2 + q[:, 2] ** 2
    inside = np.all((q >= low) & (q <= high), axis=1) & (e < 1)
    result = np.full(len(q), -np.inf)
    q, e = q[inside], e[inside, None]
    if len(q) == 0:
        return result
    w = np.arctan2(q[:, 2], q[:, 1])[:, None]
    anomaly = eccentric_anomaly(q[:, 3:4] - w + 2 * np.pi * since / np.exp(q[:, 0:1]), e)
    true_anomaly = 2 * np.arctan2(np.sqrt(1 + e) * np.sin(anomaly / 2), np.sqrt(1 - e) * np.cos(anomaly / 2))
    model = q[:, 5 + instrument] + np.exp(q[:, 4:5]) * (np.cos(w + true_anomaly) + e * np.cos(w))
    variance = sigma**2 + (given["jitterScaleMps"] * np.sinh(q[:, 5 + instruments + instrument])) ** 2
    amplitude = np.exp(q[:, 4])
    result[inside] = (q[:, 4] - np.log(amplitude + given["amplitudeScaleMps"])
                      - 0.5 * np.sum((v - model) ** 2 / variance + np.log(2 * np.pi * variance), axis=1))
    return result


walkers = max(32, 4 * size)
start = np.array(given["start"]) + np.array(given["startSigmas"]) * generator.normal(size=(walkers, size))
if not np.all(np.isfinite(log_posterior(start))):
    sys.exit("a walker starts outside the priors; give smaller startSigmas")
together = sys.argv[4] == "all"
sampler = emcee.EnsembleSampler(
    walkers, size, log_posterior if together else lambda q: log_posterior(q[None, :])[0], vectorize=together)
sampler.random_state = generator.get_state()
state = sampler.run_mcmc(start, steps // 2)
sampler.reset()
began = time.perf_counter()
sampler.run_mcmc(state, steps - steps // 2)
seconds = time.perf_counter() - began

chain = sampler.get_chain()
chain[..., 5 + instruments:] = np.abs(chain[..., 5 + instruments:])
e = chain[..., 1] ** 2 + chain[..., 2] ** 2
names = (["logPeriod", "sqrtECosW", "sqrtESinW", "meanLongitudeRad", "logSemiAmplitude"]
         + [f"zeroPointMps{k}" for k in range(instruments)] + [f"jitterCoordinate{k}" for k in range(instruments)] + ["eccentricity"])
columns = np.concatenate([chain, e[..., None]], axis=2)
correlation = np.array(emcee.autocorr.integrated_time(columns, tol=0))
effective = columns.shape[0] * walkers / correlation
flat = columns.reshape(-1, columns.shape[2])
if not np.all(np.isfinite(flat)):
    sys.exit("a draw is not finite")
print(json.dumps({
    "seconds": seconds, "effectivePerSecond": effective.min() / seconds, "effective": effective.tolist(),
    "autocorrelationSteps": correlation.tolist(), "acceptance": float(np.mean(sampler.acceptance_fraction)),
    "names": names, "means": flat.mean(axis=0).tolist(), "sigmas": flat.std(axis=0, ddof=1).tolist(),
    "version": emcee.__version__}))
