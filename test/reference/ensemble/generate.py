"""Posterior means and widths by an affine-invariant ensemble sampler, for test/solving/posterior/ensemble.test.ts.

usage: python3 generate.py        (numpy and the general-purpose sampler emcee of Debian; writes ensemble.json beside itself)

Three invented data sets of the invented star Vellamo. The posterior is written here from its definition alone: Kepler's
equation by Newton's method, velocities K [cos(nu + omega) + e cos omega] + zero point, a Gaussian likelihood with jitter
added in quadrature, and these priors:
  period log-uniform between two bounds; mean longitude at time 0 uniform; (e, omega) uniform for e < 1 - r P^(-2/3);
  K with density 1/(K + k0) up to a bound; jitter with density 1/sqrt(s^2 + s0^2) up to a bound; zero point uniform.
"""
import json
import os

import emcee
import numpy as np

MADE = "2026-12-01"
WALKERS = 64
THIN = 10
here = os.path.dirname(os.path.abspath(__file__))

SCALES = {
    "shortestPeriodDays": 2.0, "longestPeriodDays": 4000.0,
    "amplitudeScaleMps": 0.2, "largestAmplitudeMps": 5000.0,
    "jitterScaleMps": 0.2, "largestJitterMps": 200.0,
    "zeroPointHalfWidthMps": 20000.0, "slopeHalfWidthMpsPerDay": 1.0, "curvatureHalfWidthMpsPerDay2": 0.01,
    "starRadiusAtOneDay": 0.24,
}

# Each companion: P (d), mean longitude at time 0 (rad), e, omega (rad), K (m/s).
PROBLEMS = [
    {"name": "one circular companion with jitter", "seed": 101, "rows": 36, "span": 300.0, "sigma": 2.0, "jitter": 3.0,
     "circular": True, "companions": [[23.7, 1.2, 0.0, 0.0, 14.0]], "steps": 20000},
    {"name": "one companion on an eccentric orbit", "seed": 102, "rows": 44, "span": 420.0, "sigma": 2.0, "jitter": 1.0,
     "circular": False, "companions": [[61.3, 4.0, 0.5, 2.2, 22.0]], "steps": 30000},
    {"name": "two companions", "seed": 103, "rows": 60, "span": 700.0, "sigma": 2.0, "jitter": 1.5,
     "circular": False, "companions": [[17.9, 0.4, 0.2, 5.1, 12.0], [143.0, 2.9, 0.35, 1.0, 20.0]], "steps": 50000},
]


def eccentric_anomaly(mean, e):
    """Newton's method on E - e sin E = M with M reduced to (-pi, pi]; e below 1."""
    mean = (mean + np.pi) % (2 * np.pi) - np.pi
    anomaly = mean + np.sign(mean) * 0.85 * e
    for _ in range(50):
        step = (anomaly - e * np.sin(anomaly) - mean) / (1 - e * np.cos(anomaly))
        anomaly = anomaly - np.clip(step, -1, 1)
        if np.max(np.abs(step)) < 1e-12:
            break
    return anomaly


def velocity(times, period, longitude, e, omega, amplitude):
    """One companion; every element has shape (walkers, 1)."""
    e_anomaly = eccentric_anomaly(longitude - omega + 2 * np.pi * times / period, e)
    true = 2 * np.arctan2(np.sqrt(1 + e) * np.sin(e_anomaly / 2), np.sqrt(1 - e) * np.cos(e_anomaly / 2))
    return amplitude * (np.cos(true + omega) + e * np.cos(omega))


def simulate(problem):
    random = np.random.default_rng(problem["seed"])
    times = np.sort(random.uniform(-problem["span"] / 2, problem["span"] / 2, problem["rows"]))
    sigmas = problem["sigma"] * random.uniform(0.7, 1.4, problem["rows"])
    model = np.full(problem["rows"], 4.0)
    for period, longitude, e, omega, amplitude in problem["companions"]:
        column = [np.array([[v]]) for v in (period, longitude, e, omega, amplitude)]
        model = model + velocity(times[None, :], *column)[0]
    noise = np.sqrt(sigmas ** 2 + problem["jitter"] ** 2) * random.standard_normal(problem["rows"])
    # Rounded, so that both programs read the same doubles.
    return np.round(times, 5), np.round(model + noise, 3), np.round(sigmas, 3)


def split(theta, problem):
    """Walkers' vectors into elements. Per companion ln P, longitude, ln K and, when eccentric, sqrt(e) cos and sin omega."""
    size = 3 if problem["circular"] else 5
    companions = []
    for c in range(len(problem["companions"])):
        part = theta[:, c * size:(c + 1) * size]
        if problem["circular"]:
            zero = np.zeros(len(theta))
            e, omega = zero, zero
        else:
            e = part[:, 3] ** 2 + part[:, 4] ** 2
            omega = np.arctan2(part[:, 4], part[:, 3])
        companions.append((np.exp(part[:, 0]), part[:, 1], e, omega, np.exp(part[:, 2])))
    return companions, theta[:, -2], theta[:, -1]


def log_posterior(theta, problem, times, velocities, sigmas):
    s = SCALES
    companions, zero_point, jitter = split(theta, problem)
    inside = (np.abs(zero_point) < s["zeroPointHalfWidthMps"]) & (jitter > 0) & (jitter < s["largestJitterMps"])
    log_prior = -0.5 * np.log(jitter ** 2 + s["jitterScaleMps"] ** 2)
    model = np.broadcast_to(zero_point[:, None], (len(theta), len(times)))
    for period, longitude, e, omega, amplitude in companions:
        inside &= (period > s["shortestPeriodDays"]) & (period < s["longestPeriodDays"])
        inside &= e < 1 - s["starRadiusAtOneDay"] * period ** (-2 / 3)
        inside &= amplitude < s["largestAmplitudeMps"]
        # Uniform in ln P as it stands; dK/(K + k0) is K/(K + k0) dlnK; the disc of (sqrt e cos, sqrt e sin) is uniform in e, omega.
        log_prior = log_prior + np.log(amplitude) - np.log(amplitude + s["amplitudeScaleMps"])
        safe = np.where(inside, e, 0.0)
        model = model + velocity(times[None, :], period[:, None], longitude[:, None], safe[:, None],
                                 omega[:, None], amplitude[:, None])
    variance = sigmas[None, :] ** 2 + jitter[:, None] ** 2
    log_likelihood = -0.5 * np.sum((velocities - model) ** 2 / variance + np.log(variance), axis=1)
    result = np.where(inside, log_prior + log_likelihood, -np.inf)
    return np.where(np.isnan(result), -np.inf, result)


def moves():
    """No snooker move: that of emcee 3.1.4 accepts with half the exponent of d - 1 and narrows a normal of 12 dimensions by 2 %."""
    return [(emcee.moves.DEMove(), 0.8), (emcee.moves.StretchMove(), 0.2)]


def check_moves():
    """The sampler itself, on a standard normal of 12 dimensions: its width must come out as 1."""
    sampler = emcee.EnsembleSampler(WALKERS, 12, lambda x: -0.5 * np.sum(x ** 2, axis=1), vectorize=True, moves=moves())
    sampler._random.seed(1)
    sampler.run_mcmc(np.random.default_rng(0).standard_normal((WALKERS, 12)), 12000)
    width = float(sampler.get_chain(discard=2000).std())
    print("width of a standard normal:", width, flush=True)
    if abs(width - 1) > 0.01:
        raise SystemExit(f"the ensemble sampler gives a standard normal the width {width}")


def sample(problem, times, velocities, sigmas):
    random = np.random.default_rng(problem["seed"] + 1000)
    start, widths = [], []
    for period, longitude, e, omega, amplitude in problem["companions"]:
        start += [np.log(period), longitude, np.log(amplitude)]
        widths += [1e-4, 0.02, 0.03]
        if not problem["circular"]:
            start += [np.sqrt(e) * np.cos(omega), np.sqrt(e) * np.sin(omega)]
            widths += [0.02, 0.02]
    start += [4.0, problem["jitter"]]
    widths += [0.2, 0.2]
    first = np.array(start) + np.array(widths) * random.standard_normal((WALKERS, len(start)))
    first[:, -1] = np.abs(first[:, -1])
    sampler = emcee.EnsembleSampler(
        WALKERS, len(start), log_posterior, args=(problem, times, velocities, sigmas), vectorize=True,
        moves=moves())
    sampler._random.seed(problem["seed"] + 2000)
    burnt = sampler.run_mcmc(first, problem["steps"] // (10 * THIN), thin_by=THIN)
    sampler.reset()
    sampler.run_mcmc(burnt, problem["steps"] // THIN, thin_by=THIN)
    return sampler.get_chain()


def numbers(chain, problem):
    """Quantities of every draw, each (steps, walkers)."""
    steps, walkers, size = chain.shape
    companions, zero_point, jitter = split(chain.reshape(-1, size), problem)
    result = {}
    for c, (period, longitude, e, omega, amplitude) in enumerate(companions):
        letter = "bc"[c]
        result[f"{letter} ln P"] = np.log(period)
        result[f"{letter} mean longitude"] = longitude
        if not problem["circular"]:
            result[f"{letter} e"] = e
            result[f"{letter} sqrt(e) cos omega"] = np.sqrt(e) * np.cos(omega)
            result[f"{letter} sqrt(e) sin omega"] = np.sqrt(e) * np.sin(omega)
        result[f"{letter} K"] = amplitude
    result["zero point"] = zero_point
    result["jitter"] = jitter
    return {name: values.reshape(steps, walkers) for name, values in result.items()}


def summary(values):
    """Mean and sd with Monte-Carlo errors from the autocorrelation time of x and of (x - mean)^2."""
    mean, sd = float(values.mean()), float(values.std())
    square = (values - mean) ** 2
    time = float(emcee.autocorr.integrated_time(values[:, :, None], tol=50)[0])
    time_square = float(emcee.autocorr.integrated_time(square[:, :, None], tol=50)[0])
    effective = values.size / time
    sd_error = float(square.std() * np.sqrt(time_square / values.size) / (2 * sd))
    return {"mean": mean, "meanError": sd / np.sqrt(effective), "sd": sd, "sdError": sd_error,
            "effectiveDraws": round(effective)}


def main():
    check_moves()
    problems = []
    for problem in PROBLEMS:
        times, velocities, sigmas = simulate(problem)
        chain = sample(problem, times, velocities, sigmas)
        expected = {name: summary(values) for name, values in numbers(chain, problem).items()}
        print(problem["name"], {name: (round(v["mean"], 5), round(v["sd"], 5), v["effectiveDraws"])
                                for name, v in expected.items()}, flush=True)
        problems.append({
            "name": problem["name"], "circular": problem["circular"],
            "truth": [dict(zip(["periodDays", "meanLongitudeRad", "eccentricity", "argPeriastronStarRad",
                                "semiAmplitudeMps"], c)) for c in problem["companions"]],
            "timesDays": times.tolist(), "velocitiesMps": velocities.tolist(), "sigmasMps": sigmas.tolist(),
            "expected": expected})
    with open(os.path.join(here, "ensemble.json"), "w") as file:
        json.dump({"source": f"emcee {emcee.__version__} (general-purpose ensemble sampler), {WALKERS} walkers; errors from "
                             "its autocorrelation times", "generator": "generate.py", "made": MADE,
                   "scales": SCALES, "problems": problems}, file, indent=1)
        file.write("\n")


main()
