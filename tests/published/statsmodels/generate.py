"""Fits of invented data by a general statistics library, for comparison.

Run once:  python generate.py > reference.json      (about one minute)
Needs numpy, scipy, statsmodels and mpmath; their versions are written into the output.

Every data set is made up here from a seeded generator and rounded to the digits shown, so that the text of
the numbers is the data. For each fit the library's summaries stand beside a refit with 60 digits (mpmath),
and "library_error" says how far the two are apart: the library works with raw powers of x in double
precision and loses digits where these are nearly alike or the offset is large.
"""

import json
import sys
import warnings

import mpmath as mp
import numpy as np
import scipy
import statsmodels
import statsmodels.api as sm
from scipy import stats
from statsmodels.stats.diagnostic import het_breuschpagan
from statsmodels.stats.stattools import durbin_watson
from statsmodels.tools import eval_measures

mp.mp.dps = 60
RNG = np.random.default_rng(20260117)


def rounded(values, digits):
    return [float(f"%.{digits}g" % v) for v in values]


def noise(n, sd=1.0):
    return sd * RNG.standard_normal(n)


def data_sets():
    """name -> (x, y, fits as (family, weights))."""
    line, quad, cubic, log = "line", "quadratic", "cubic", "log"
    sets = {}

    def add(name, x, y, fits, digits=6):
        sets[name] = ([float(v) for v in x], rounded(y, digits), fits)

    x = np.array([1.0, 2.0, 4.0])
    add("three points", x, 0.3 + 2 * x + noise(3, 0.1), [(line, "equal"), (line, "1/x")])
    x = np.array([1.0, 2.0, 3.0, 5.0])
    add("four points", x, 1 - x + noise(4, 0.2), [(line, "equal"), (quad, "equal"), (log, "equal")])
    x = np.arange(1.0, 7.0)
    add("six single levels", x, 5 * x + noise(6, 0.3),
        [(line, "equal"), (quad, "equal"), (cubic, "equal"), (log, "1/x2")])
    x = np.repeat([1.0, 2.0, 3.0, 4.0, 5.0], 3)
    add("five levels in triplicate", x, 0.1 + 1.9 * x + noise(15, 0.05),
        [(line, "equal"), (quad, "equal"), (cubic, "equal"), (line, "1/x"), (line, "1/x2"), (line, "1/y2")])
    x = np.array([1, 1, 2, 3, 3, 3, 3, 6, 8, 8], float)
    add("unequal repeats", x, 2 + 0.5 * x + noise(10, 0.1), [(line, "equal"), (quad, "1/x"), (log, "equal")])
    x = np.round(5e5 + np.linspace(0, 900, 10), 0)
    add("huge offset", x, 1e6 + 0.02 * (x - 5e5) + noise(10, 0.01), [(line, "equal"), (quad, "equal")], 12)
    x = np.array([1.0, 2.5, 4.0, 7.5, 9.0, 12.0, 15.5]) * 1e-9
    add("tiny scale", x, 3e-12 + 4e-4 * x + noise(7, 5e-14), [(line, "equal"), (quad, "equal"), (line, "1/x2")])
    x = np.linspace(1, 9, 9) * 1e9
    add("huge scale", x, 7e12 + 2e4 * x + noise(9, 3e11), [(line, "equal"), (quad, "equal"), (log, "equal")])
    x = np.arange(1.0, 12.0)
    y = 2 * x + noise(11, 0.05)
    y[6] += 1.5
    add("an outlier", x, y, [(line, "equal"), (quad, "equal"), (line, "1/x")])
    x = np.repeat([0.5, 1, 2, 5, 10, 20, 50], 3)
    add("a funnel over decades", x, 0.02 + 3 * x + noise(21) * 0.03 * x,
        [(line, "equal"), (line, "1/x"), (line, "1/x2"), (quad, "1/x2"), (line, "1/y"), (line, "1/y2")])
    x = 100 + np.arange(10) / 10
    add("nearly collinear powers", x, 3 + 0.2 * x - 0.001 * x * x + noise(10, 0.002),
        [(line, "equal"), (quad, "equal")], 8)
    x = np.array([7.0, 2.0, 9.5, 1.0, 5.0, 3.5, 8.0, 6.0])
    add("unsorted", x, -1 + 0.8 * x + noise(8, 0.1), [(line, "equal"), (quad, "1/x"), (cubic, "equal")])
    x = np.arange(-5.0, 6.0)
    add("negative values", x, -3 + 2 * x - 0.1 * x * x + noise(11, 0.2),
        [(line, "equal"), (quad, "equal"), (cubic, "equal"), (quad, "1/y2")])
    x = np.array([0, 0, 0, 1, 2, 5, 10, 20], float)
    add("zeros among the standards", x, 0.05 + 1.2 * x + noise(8, 0.04),
        [(line, "equal"), (line, "1/x"), (line, "1/x2"), (quad, "1/x")])
    x = np.repeat([1.0, 2.0, 5.0, 10.0, 20.0, 50.0, 100.0, 200.0], 2)
    add("a logarithm", x, 58.0 * np.log10(x) - 12 + noise(16, 0.5),
        [(log, "equal"), (line, "equal"), (quad, "equal"), (log, "1/x"), (cubic, "1/x")])
    x = np.repeat([10.0, 20.0, 30.0, 40.0, 50.0], 4)
    add("coarse display", x, np.round(0.1 * x + noise(20, 0.08), 1), [(line, "equal"), (quad, "equal"), (line, "1/y")])
    x = np.linspace(0.1, 2.5, 13)
    add("falling", x, 9 - 3 * x + noise(13, 0.1), [(line, "equal"), (quad, "equal"), (line, "1/x2")])
    x = np.array([1, 1, 1, 1, 1, 1, 9, 9, 9, 9, 9, 5], float)
    add("two ends and one middle", x, 4 + x + noise(12, 0.2), [(line, "equal"), (quad, "equal")])
    x = np.tile(np.arange(1.0, 7.0), 4)
    add("drift in cycles", x, 2 * x + 0.02 * np.arange(24) + noise(24, 0.1), [(line, "equal"), (quad, "1/x")])
    x = np.array([1.0, 1.1, 1.2, 1.3, 1.4, 1.5, 20.0])
    add("one standard decides", x, 3 * x + noise(7, 0.1), [(line, "equal"), (quad, "equal"), (line, "1/x2")])
    x = np.linspace(-1, 1, 15)
    add("an S", x, x + 0.4 * x ** 3 - 0.25 * x + noise(15, 0.01), [(line, "equal"), (quad, "equal"), (cubic, "equal")])
    x = np.round(np.linspace(0.5, 30, 60), 3)
    add("sixty points", x, 1 + 0.7 * x + noise(60, 0.4), [(line, "equal"), (cubic, "equal"), (log, "1/x")])
    x = np.arange(1.0, 17.0)
    add("heavy tails", x, x + 0.1 * RNG.standard_t(1.5, 16), [(line, "equal"), (quad, "1/x")])
    x = np.arange(1.0, 11.0)
    add("no slope", x, 4 + noise(10, 1.0), [(line, "equal"), (quad, "equal")])
    x = np.linspace(2, 20, 10)
    add("nearly exact", x, 0.5 + 1.25 * x + noise(10, 2e-7), [(line, "equal"), (quad, "1/x")], 12)
    x = np.arange(1.0, 9.0)
    add("negative indications", x, -2 * x - 0.5 + noise(8, 0.1), [(line, "1/y2"), (quad, "equal")])
    return sets


def run_order(n):
    """A place in the run for each observation: file order for short sets, else a fixed shuffle."""
    if n < 8:
        return list(range(n))
    return [int(i) for i in np.random.default_rng(n).permutation(n)]


def columns(family, x, number):
    log = mp.log if number is mp.mpf else (lambda v: float(np.log(v)))
    degree = {"line": 1, "quadratic": 2, "cubic": 3}.get(family)
    if degree is None:
        return [[number(1), log(number(v))] for v in x]
    return [[number(v) ** k for k in range(degree + 1)] for v in x]


def variances(x, y, weights):
    """v of each observation; a standard of zero takes the smallest positive one."""
    power = 2 if weights.endswith("2") else 1
    if weights == "equal":
        return [1.0] * len(x)
    if "y" in weights:
        return [abs(v) ** power for v in y]
    floor = min(v for v in x if v > 0)
    return [max(v, floor) ** power for v in x]


def exact(family, x, y, v):
    """The refit with 60 digits: whitened design, coefficients and what follows from them."""
    root = [1 / mp.sqrt(mp.mpf(vi)) for vi in v]
    design = mp.matrix([[c * r for c in row] for row, r in zip(columns(family, x, mp.mpf), root)])
    target = mp.matrix([mp.mpf(yi) * r for yi, r in zip(y, root)])
    inverse = (design.T * design) ** -1
    beta = inverse * (design.T * target)
    white = target - design * beta
    n, p = design.rows, design.cols
    ssr = sum(w * w for w in white)
    variance = ssr / (n - p)
    hat = design * inverse * design.T
    return {
        "n": n, "p": p, "root": root, "beta": list(beta), "white": list(white), "ssr": ssr, "hat": hat,
        "bse": [mp.sqrt(variance * inverse[i, i]) for i in range(p)],
        "leverage": [hat[i, i] for i in range(n)],
        "residual": [w / r for w, r in zip(white, root)],
    }


def order_p(fit, order):
    """P(D <= d) for this design in run order: Imhof's integral over ln u, 40 digits, own eigenvalues."""
    with mp.workdps(40):
        n, p = fit["n"], fit["p"]
        places = sorted(range(n), key=lambda i: order[i])
        residual_maker = mp.matrix(n, n)
        differences = mp.matrix(n, n)
        for i in range(n):
            for j in range(n):
                residual_maker[i, j] = (1 if i == j else 0) - fit["hat"][places[i], places[j]]
            if i:
                differences[i, i] += 1
                differences[i - 1, i - 1] += 1
                differences[i, i - 1] -= 1
                differences[i - 1, i] -= 1
        seen = residual_maker * differences * residual_maker
        eigenvalues = sorted(mp.eigsy((seen + seen.T) / 2, eigvals_only=True))[p:]
        white = [fit["white"][i] for i in places]
        d = sum((b - a) ** 2 for a, b in zip(white, white[1:])) / fit["ssr"]
        a = [value - d for value in eigenvalues]

        def trapezium(h):
            total = mp.mpf(0)
            for k in range(int(-60 / h), int((10 + 120 / mp.mpf(len(a))) / h) + 1):
                u = mp.exp(k * h)
                turn = sum(mp.atan(ai * u) for ai in a) / 2
                total += mp.sin(turn) * mp.exp(-sum(mp.log1p((ai * u) ** 2) for ai in a) / 4)
            return total * h

        coarse, fine = trapezium(mp.mpf(1) / 6), trapezium(mp.mpf(1) / 12)
        # The error of the finer sum is about the square of this.
        assert abs(coarse - fine) < mp.mpf(10) ** -8, mp.nstr(coarse - fine)
        return float(d), float(mp.mpf(1) / 2 - fine / mp.pi)


def apart(found, true, scale):
    """The largest difference in units of `scale`."""
    return max(float(abs(mp.mpf(float(f)) - t) / s) for f, t, s in zip(found, true, scale))


def one_fit(name, family, weights, x, y):
    v = variances(x, y, weights)
    true = exact(family, x, y, v)
    n, p = true["n"], true["p"]
    design = np.array(columns(family, x, float))
    weight = 1 / np.array(v)
    result = sm.WLS(np.array(y), design, weights=weight).fit()
    root = np.sqrt(weight)
    # The influence measures of the library are those of ordinary fits: of the rows times the root of w.
    influence = sm.OLS(root * np.array(y), root[:, None] * design).fit().get_influence()
    press = influence.resid_press / root
    out = {
        "data": name, "family": family, "weights": weights,
        "params": result.params, "bse": result.bse, "cov": result.cov_params(), "conf_int": result.conf_int(0.05),
        "rsquared": result.rsquared, "ssr": result.ssr, "mse_resid": result.mse_resid, "df_resid": result.df_resid,
        "resid": result.resid, "aic_as_printed": result.aic, "bic_as_printed": result.bic,
        "aicc": eval_measures.aicc(result.llf, n, p + 1), "bic": eval_measures.bic(result.llf, n, p + 1),
        "hat_diag": influence.hat_matrix_diag, "cooks_distance": influence.cooks_distance[0],
        "internal": influence.resid_studentized_internal,
        "external": influence.resid_studentized_external if n - p > 1 else None,
        "press_rmse": np.sqrt(np.mean(press ** 2)),
    }
    top = max(abs(e) for e in true["residual"])
    root_digits = [mp.sqrt(mp.mpf(float(result.ssr))), mp.sqrt(true["ssr"])]
    out["library_error"] = max(
        apart(result.params, true["beta"], [max(abs(b), u) for b, u in zip(true["beta"], true["bse"])]),
        apart(result.bse, true["bse"], true["bse"]),
        apart(result.resid, true["residual"], [top] * n),
        apart(influence.hat_matrix_diag, true["leverage"], [1] * n),
        float(abs(root_digits[0] / root_digits[1] - 1)),
    )
    out["exact"] = {k: [float(t) for t in true[k]] for k in ("beta", "bse", "residual", "leverage")}
    out["exact"]["ssr"] = float(true["ssr"])
    out["tests"] = tests(true, y, run_order(n))
    return out


def tests(true, y, order):
    """Tests of the exact residuals, rounded once, so that they do not inherit the errors of the fit."""
    n, p = true["n"], true["p"]
    white = np.array([float(w) for w in true["white"]])
    scale = np.max(np.abs(white))
    fitted = np.array([float(mp.mpf(a) - e) for a, e in zip(y, true["residual"])])
    found = {"durbin_watson": float(durbin_watson(white[np.argsort(order)]))}
    if n - p >= 2:
        d, below = order_p(true, order)
        assert abs(d - found["durbin_watson"]) < 1e-12
        found["durbin_watson_p"] = below
    w, p_value = stats.shapiro(white / scale)
    found["shapiro"] = [float(w), float(p_value)]
    if n >= 4:
        middle = (fitted - fitted.mean()) / np.ptp(fitted)
        regressors = np.column_stack([np.ones(n), middle])
        found["breusch_pagan"] = [float(s) for s in het_breuschpagan(white / scale, regressors)]
    return found


def plain(value):
    """Plain lists and numbers; null for what is not a number (an observation that fits only itself)."""
    if isinstance(value, dict):
        return {key: plain(v) for key, v in value.items()}
    if isinstance(value, (list, tuple, np.ndarray)):
        return [plain(v) for v in value]
    if isinstance(value, (float, np.floating)):
        return float(value) if np.isfinite(value) else None
    return value.item() if isinstance(value, np.generic) else value


def main():
    # Leaving out a level's only observation is expected to fail here and there.
    warnings.simplefilter("ignore")
    sets = data_sets()
    output = {
        "versions": {"python": sys.version.split()[0], "numpy": np.__version__, "scipy": scipy.__version__,
                     "statsmodels": statsmodels.__version__, "mpmath": mp.__version__},
        "data": {name: {"x": x, "y": y, "order": run_order(len(x))} for name, (x, y, _) in sets.items()},
        "fits": [one_fit(name, family, weights, x, y)
                 for name, (x, y, fits) in sets.items() for family, weights in fits],
    }
    text = json.dumps(plain(output), allow_nan=False)
    # One line a data set and a fit.
    print(text.replace('}, {"data"', '},\n{"data"').replace('}, "', '},\n"').replace('"fits": [', '"fits": [\n'))


if __name__ == "__main__":
    main()
