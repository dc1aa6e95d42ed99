"""Writes gaussian-process.json beside this file: Gaussian likelihoods with correlated noise, from dense matrices at 50 digits.

Run: /usr/bin/python3 generate.py        (needs mpmath; ten seconds)
Kernels are written down in closed form per regime; every ln L comes from a dense Cholesky factor, every derivative from a central
difference with a step of 1e-15 at 50 digits (truncation below 1e-28). Inputs are exact doubles. The data are invented.
Parameters of the marginal likelihood: covariance = process + diag(sigma^2) + D diag(priorSigma^2) D^T, dense as well.
"""

import json
import pathlib

import mpmath as mp

mp.mp.dps = 50
STEP = mp.mpf(10) ** -15

T = [2458003.09, 2458028.9939, 2458032.2551, 2458032.6292, 2458034.6637, 2458036.5223, 2458039.1816, 2458065.3712, 2458066.0994, 2458067.3095,
     2458072.0398, 2458072.5337, 2458073.4102, 2458076.4021, 2458080.7552, 2458112.3977, 2458116.8637, 2458118.5646, 2458120.753, 2458123.5961,
     2458124.3023, 2458127.8228, 2458131.4577, 2458162.9941, 2458163.9978, 2458190.5876, 2458194.1495, 2458198.0079, 2458223.502, 2458223.8036]
Y = [15.36, 5.17, 6.791, 11.736, 18.112, 20.477, 8.373, 6.565, 10.934, 14.058, 15.1, 7.683, 9.781, 1.926, 15.482, 12.307, 17.424, 7.135, 6.26,
     14.879, 16.032, 19.677, 7.704, 12.456, 13.388, 6.257, 19.156, 14.213, 6.762, 2.776]
DY = [1.14, 1.17, 1.39, 2.8, 2.1, 1.98, 1.75, 1.2, 1.91, 1.62, 1.75, 1.25, 2.89, 2.58, 1.87, 2.13, 1.04, 2.92, 1.32, 1.7, 2.5, 2.44, 2.66,
      1.37, 2.4, 1.1, 2.98, 1.06, 1.32, 2.99]
T = [t - 2458100.0 for t in T]  # as doubles: this is what the program gets
TM = [mp.mpf(t) for t in T]
R = [mp.mpf(y) - mp.mpf("12.5") for y in Y]
VAR = [mp.mpf(s) ** 2 for s in DY]


def oscillation(tau, a, b, c, d):
    return mp.exp(-c * tau) * (a * mp.cos(d * tau) + b * mp.sin(d * tau))


def driven(tau, sigma, w0, q):
    eta2 = 1 - 1 / (4 * q * q)
    x = w0 * tau
    if eta2 == 0:
        return sigma**2 * mp.exp(-x / (2 * q)) * (1 + x)
    eta = mp.sqrt(abs(eta2))
    cos, sin = (mp.cos, mp.sin) if eta2 > 0 else (mp.cosh, mp.sinh)
    return sigma**2 * mp.exp(-x / (2 * q)) * (cos(eta * x) + sin(eta * x) / (2 * eta * q))


def matern32(tau, sigma, scale):
    x = mp.sqrt(3) * tau / scale
    return sigma**2 * (1 + x) * mp.exp(-x)


def exponential(tau, sigma, scale):
    return sigma**2 * mp.exp(-tau / scale)


def smooth(tau, sigma, scale):
    return driven(tau, sigma, mp.sqrt(2) / scale, 1 / mp.sqrt(2))


def recurrent(tau, sigma, period, life, share):
    total = mp.mpf(0)
    for k, h in ((1, 1 - share), (2, share)):
        d = 2 * mp.pi * k / period
        total += h * mp.exp(-tau / life) * (mp.cos(d * tau) + mp.sin(d * tau) / (d * life))
    return sigma**2 * total


KERNELS = {"oscillation": oscillation, "drivenOscillator": driven, "matern32": matern32, "exponentialNoise": exponential,
           "smoothNoise": smooth, "recurrentNoise": recurrent}


def log_normal(residual, covariance):
    factor = mp.cholesky(covariance)
    n = len(residual)
    z = []
    for i in range(n):
        z.append((residual[i] - sum(factor[i, j] * z[j] for j in range(i))) / factor[i, i])
    return -(sum(v * v for v in z) + 2 * sum(mp.log(factor[i, i]) for i in range(n)) + n * mp.log(2 * mp.pi)) / 2


def covariance(kernel, parameters, variances):
    n = len(TM)
    k = mp.matrix(n, n)
    for i in range(n):
        for j in range(i + 1):
            k[i, j] = k[j, i] = kernel(abs(TM[i] - TM[j]), *parameters)
        k[i, i] += variances[i]
    return k


def slopes(function, parameters):
    out = []
    for i in range(len(parameters)):
        up, down = list(parameters), list(parameters)
        up[i] += STEP
        down[i] -= STEP
        out.append(float((function(up) - function(down)) / (2 * STEP)))
    return out


CASES = [
    ("oscillation", [20.0, 2.0, 0.05, 0.5526108449586268]),
    ("oscillation", [20.0, 0.0, 0.02, 3.0]),
    ("exponentialNoise", [4.0, 3.0]),
    ("drivenOscillator", [0.7035623639735145, 0.55, 0.3]),
    ("drivenOscillator", [0.9082951062292475, 0.55, 0.5]),
    ("drivenOscillator", [1.5, 0.55, 0.50000001]),
    ("drivenOscillator", [1.5, 0.55, 0.4999]),
    ("drivenOscillator", [1.0801510, 0.55, 0.7071067811865475]),
    ("drivenOscillator", [2.8722813, 0.55, 5.0]),
    ("drivenOscillator", [3.0, 0.55, 0.01]),
    ("drivenOscillator", [3.0, 9.0, 400.0]),
    ("matern32", [4.0, 8.0]),
    ("smoothNoise", [4.0, 3.0]),
    ("recurrentNoise", [5.0, 11.37, 30.0, 0.25]),
]

likelihoods = []
for name, values in CASES:
    kernel = KERNELS[name]
    parameters = [mp.mpf(v) for v in values]
    value = lambda p: log_normal(R, covariance(kernel, p, VAR))
    likelihoods.append({"kernel": name, "parameters": values, "lnL": float(value(parameters)), "slopes": slopes(value, parameters)})

# Linear nuisance parameters: constant, slope and curvature in x = t/100, multiplied by a model with two dips.
MODEL = [0.99 if i in (4, 5, 12, 20) else (0.97 if i == 21 else 1.0) for i in range(len(T))]
DESIGN = [[1.0, t / 100, (t / 100) ** 2] for t in T]
PRIOR_MEAN = [12.5, 0.5, -0.25]
PRIOR_SIGMA = [50.0, 20.0, 10.0]


def marginal(kernel, parameters, model):
    n = len(TM)
    c = covariance(kernel, parameters, VAR) if kernel else mp.diag(VAR)
    rows = [[mp.mpf(a) * model[i] for a in DESIGN[i]] for i in range(n)]
    residual = [mp.mpf(Y[i]) - sum(a * mp.mpf(m) for a, m in zip(rows[i], PRIOR_MEAN)) for i in range(n)]
    for i in range(n):
        for j in range(n):
            c[i, j] += sum(a * b * mp.mpf(s) ** 2 for a, b, s in zip(rows[i], rows[j], PRIOR_SIGMA))
    return log_normal(residual, c)


model = [mp.mpf(m) for m in MODEL]
marginals = []
for name, values in ((None, []), ("smoothNoise", [2.0, 3.0]), ("recurrentNoise", [5.0, 11.37, 30.0, 0.25])):
    kernel = KERNELS[name] if name else None
    parameters = [mp.mpf(v) for v in values]
    marginals.append({
        "kernel": name, "parameters": values, "lnL": float(marginal(kernel, parameters, model)),
        "slopes": slopes(lambda p: marginal(kernel, p, model), parameters),
        "byModel": slopes(lambda m: marginal(kernel, parameters, m), model),
    })

pathlib.Path(__file__).with_name("gaussian-process.json").write_text(json.dumps({
    "source": f"mpmath {mp.__version__}, mp.dps=50, dense Cholesky", "generator": "generate.py", "made": "2026-12-01",
    "times": T, "values": Y, "sigmas": DY, "mean": 12.5, "likelihoods": likelihoods,
    "marginal": {"model": MODEL, "design": DESIGN, "priorMean": PRIOR_MEAN, "priorSigma": PRIOR_SIGMA, "cases": marginals},
}, indent=1) + "\n")
