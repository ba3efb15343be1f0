"""Writes values.json: least sums of squares in both axes by scipy and odrpack. See SOURCE.md."""
import json
import os
import warnings

import numpy as np
import odrpack
from scipy.optimize import curve_fit, least_squares

warnings.filterwarnings("ignore")
np.seterr(all="ignore")
HERE = os.path.dirname(os.path.abspath(__file__))
SETS = 24


def logistic(b, x):
    a, d, lnc, s = b
    return d + (a - d) / (1 + np.exp(s * (np.log(x) - lnc)))


# name: (function, invented coefficients, range of x, noise in y as part of the range of y)
FAMILIES = {
    "line": (lambda b, x: b[0] + b[1] * x, [1.5, 2.0], (0, 10), 0.01),
    "quadratic": (lambda b, x: b[0] + b[1] * x + b[2] * x**2, [0.5, 1.0, 0.08], (-2, 12), 0.01),
    "cubic": (lambda b, x: b[0] + b[1] * x + b[2] * x**2 + b[3] * x**3, [1, 3, -0.4, 0.02], (0, 14), 0.01),
    "log": (lambda b, x: b[0] + b[1] * np.log(x), [0.5, 1.2], (0.4, 60), 0.01),
    "power": (lambda b, x: b[0] * x ** b[1], [2.0, 0.6], (0.3, 40), 0.01),
    "exponential": (lambda b, x: b[0] + b[1] * np.exp(b[2] * x), [3, -2.5, -0.35], (0, 8), 0.01),
    "hyperbola": (lambda b, x: b[0] + b[1] / (x + b[2]), [1, 12, 1.5], (0, 15), 0.01),
    "rational": (lambda b, x: (b[0] + b[1] * x) / (1 + b[2] * x), [0.2, 2.0, 0.15], (0, 20), 0.01),
    "logistic": (logistic, [0.05, 2.0, 3.4, 1.3], (1, 600), 0.01),
    "formula": (lambda b, x: b[0] + b[1] * np.arctan(b[2] * x), [0.3, 4, 0.35], (0, 12), 0.01),
}


def standards(kind, x, slope, s, rng):
    """U_x and its factor for one of six ways in which standards are uncertain."""
    m = x.size
    size = s / np.maximum(np.abs(slope), 0.2 * np.median(np.abs(slope)))
    own, shared = size * rng.uniform(0.5, 1.5, m), np.zeros(m)
    if kind == 1:
        own = 4 * own
    elif kind == 2:
        shared = 2 * size
    elif kind == 3:
        own, shared = np.zeros(m), 0.02 * x + 0.01
    elif kind == 4:
        own[:: 2], own[1::2] = 0, 3 * own[1::2]
    elif kind == 5:
        own, shared = 0.5 * own, 0.01 * x
    covariance = np.outer(shared, shared) + np.diag(own**2)
    factor = np.column_stack([shared, np.diag(own)])
    return covariance, factor[:, np.any(factor != 0, axis=0)]


def one_set(name, number):
    f, truth, (low, high), noise = FAMILIES[name]
    rng = np.random.default_rng([2026, list(FAMILIES).index(name), number])
    kind, p = number % 6, len(truth)
    truth = np.array(truth) * (1 + 0.1 * rng.normal(size=p))
    m = int(rng.integers(p + 1, p + 9)) if number % 4 else p + 1
    geometric = low > 0
    x = np.geomspace(low, high, m) if geometric else np.linspace(low, high, m)
    repeats = int(rng.integers(2, 4)) if kind == 5 else 1
    of = np.repeat(np.arange(m), repeats)
    span = np.ptp(f(truth, x))
    s = noise * span * [1, 0.2, 1, 2, 1, 1][kind]
    step = 1e-6 * np.maximum(np.abs(x), 1e-3)
    slope = (f(truth, x + step) - f(truth, x)) / step
    covariance, factor = standards(kind, x, slope, s, rng)
    at = x - factor @ rng.normal(size=factor.shape[1])
    if geometric:
        at = np.maximum(at, 0.2 * low)
    u = s * (rng.uniform(0.5, 2, of.size) if number % 2 else np.ones(of.size))
    y = f(truth, at)[of] + u * rng.normal(size=of.size)
    start, _ = curve_fit(lambda x, *b: f(b, x), x[of], y, p0=truth, sigma=u, maxfev=20000)
    odr_sum = odr(f, x, y, covariance, u, start) if kind in (0, 1) else None
    general = best(f, x, y, of, u, factor, [start, truth], rng, p)
    return {
        "family": name, "x": x.tolist(), "x_covariance": covariance.tolist(), "y": y.tolist(),
        "y_uncertainty": u.tolist(), "standard_of": of.tolist(), "start": start.tolist(),
        "odrpack": odr_sum, "least_squares": general[0], "coefficients": general[1],
    }


def odr(f, x, y, covariance, u, start):
    found = odrpack.odr_fit(lambda x, b: f(b, x), x, y, start, weight_x=1 / np.diag(covariance),
                            weight_y=1 / u**2, diff_scheme="central", partol=1e-16, sstol=1e-16, maxit=2000)
    return float(found.sum_square)


def best(f, x, y, of, u, factor, starts, rng, p):
    """The least sum over (coefficients, z) with x - factor z the latent standards, from 12 starts."""
    def residuals(q):
        r = np.concatenate([q[p:], (y - f(q[:p], x - factor @ q[p:])[of]) / u])
        return np.where(np.isfinite(r), r, 1e6)

    found = (np.inf, None)
    zero = np.zeros(factor.shape[1])
    tries = [np.concatenate([b, zero]) for b in starts]
    for _ in range(10):
        shaken = starts[0] * (1 + 0.1 * rng.normal(size=p))
        tries.append(np.concatenate([shaken, 0.5 * rng.normal(size=zero.size)]))
    for q in tries:
        try:
            fit = least_squares(residuals, q, method="trf", jac="3-point", x_scale="jac",
                                xtol=1e-15, ftol=1e-15, gtol=1e-15, max_nfev=400)
        except (ValueError, np.linalg.LinAlgError):
            continue
        if 2 * fit.cost < found[0]:
            found = (float(2 * fit.cost), fit.x[:p].tolist())
    return found


sets = [one_set(name, number) for name in FAMILIES for number in range(SETS)]
with open(os.path.join(HERE, "values.json"), "w") as file:
    json.dump(sets, file, indent=0)
