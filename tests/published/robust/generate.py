"""Writes values.json: Huber fits by statsmodels RLM, Theil-Sen lines by scipy. See SOURCE.md."""
import json
import os

import numpy as np
import scipy.stats
import statsmodels.api as sm

K = 1.345
HERE = os.path.dirname(os.path.abspath(__file__))
rng = np.random.default_rng(20261201)


def columns(family, x):
    if family == "log":
        return np.column_stack([np.ones_like(x), np.log(x)])
    return np.vander(x, int(family) + 1, increasing=True)


def huber(family, x, y, v):
    root = 1 / np.sqrt(v)
    # Powers of x in 0..1: raw powers of a million would cost the reference its digits.
    unit = 1.0 if family == "log" else np.abs(x).max()
    design = columns(family, x / unit) * root[:, None]
    model = sm.RLM(y * root, design, M=sm.robust.norms.HuberT(t=K))
    scale = sm.robust.scale.HuberScale(d=K, tol=1e-15, maxiter=100000)
    fit = model.fit(scale_est=scale, conv="coefs", tol=1e-14, maxiter=20000)
    return {
        "coefficients": (fit.params / (unit if family != "log" else 1.0) ** np.arange(fit.params.size)).tolist(),
        "fitted": (fit.fittedvalues / root).tolist(),
        "scale": float(fit.scale),
        "weights": fit.weights.tolist(),
    }


def case(name, family, x, y, weights="equal"):
    x, y = np.asarray(x, float), np.asarray(y, float)
    v = x if weights == "1/x" else np.ones_like(x)
    out = {"name": name, "family": family, "weights": weights, "x": x.tolist(), "y": y.tolist()}
    out["huber"] = huber(family, x, y, v)
    if family == "1" and weights == "equal":
        found = scipy.stats.theilslopes(y, x, method="joint")
        out["theil_sen"] = {"slope": float(found.slope), "intercept": float(found.intercept)}
    return out


def strd(name):
    with open(os.path.join(HERE, "..", "strd", name + ".json")) as file:
        data = json.load(file)
    return data["x"], data["y"]


def invented():
    for number in range(24):
        levels, repeats = int(rng.integers(6, 12)), int(rng.integers(1, 4))
        family = ["1", "2", "3", "log"][number % 4]
        x = np.repeat(np.round(np.linspace(1, 50, levels), 2), repeats)
        curve = {"1": 2 + 0.7 * x, "2": 1 + x - 0.004 * x**2,
                 "3": x - 0.02 * x**2 + 2e-4 * x**3, "log": 3 + 2 * np.log(x)}[family]
        y = curve + rng.normal(0, 0.05, x.size)
        for place in rng.choice(x.size, 1 + number % 2, replace=False):
            y[place] += rng.choice([-1, 1]) * rng.uniform(0.4, 3)
        weights = "1/x" if number % 5 == 3 else "equal"
        yield case(f"invented {number}", family, x, np.round(y, 3), weights)


cases = [case("Norris", "1", *strd("Norris")), case("Pontius line", "1", *strd("Pontius")),
         case("Pontius", "2", *strd("Pontius")), *invented()]
with open(os.path.join(HERE, "values.json"), "w") as file:
    json.dump(cases, file, indent=0)
