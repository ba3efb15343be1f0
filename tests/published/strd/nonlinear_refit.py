"""Refits the non-linear reference sets with 80 digits, for the data as doubles.

Newton's method on the normal equations from the certified values, with exact second derivatives
(sympy) and mpmath numbers; prints nonlinear-refit.json. Nelson is fitted to the logarithm of the
readings, taken with 80 digits.
"""

import json
import pathlib
import sys

import mpmath
import sympy

mpmath.mp.dps = 80
HERE = pathlib.Path(__file__).parent
NAMES = sys.argv[1:] or sorted(
    p.stem for p in HERE.glob("*.json") if isinstance(d := json.loads(p.read_text()), dict) and d.get("kind") == "nonlinear"
)


def refit(name):
    data = json.loads((HERE / f"{name}.json").read_text())
    p = data["p"]
    b = sympy.symbols([f"b{i + 1}" for i in range(p)])
    several = isinstance(data["x"][0], list)
    x = sympy.symbols(["x1", "x2"] if several else ["x"])
    f = sympy.sympify(data["expr"].replace("-0.5", "-1/2"), rational=True)
    columns = data["x"] if several else [data["x"]]
    rows = [[mpmath.mpf(v) for v in row] for row in zip(*columns)]
    y = [mpmath.mpf(v) for v in data["y"]]
    if data["response"] == "log(y)":
        y = [mpmath.log(v) for v in y]
    first = [sympy.diff(f, v) for v in b]
    second = [sympy.diff(g, b[k]) for j, g in enumerate(first) for k in range(j + 1)]
    call = sympy.lambdify([*b, *x], [f, *first, *second], "mpmath", cse=True)
    at = [mpmath.mpf(repr(c["estimate"])) for c in data["certified"]]
    for _ in range(60):
        gradient, normal, hessian = mpmath.zeros(p, 1), mpmath.zeros(p), mpmath.zeros(p)
        rss = mpmath.mpf(0)
        for row, y_i in zip(rows, y):
            value, *rest = call(*at, *row)
            slopes, curves = rest[:p], rest[p:]
            r = y_i - value
            rss += r * r
            place = 0
            for j in range(p):
                gradient[j] += slopes[j] * r
                for k in range(j + 1):
                    normal[j, k] += slopes[j] * slopes[k]
                    hessian[j, k] += slopes[j] * slopes[k] - r * curves[place]
                    place += 1
        for j in range(p):
            for k in range(j):
                normal[k, j], hessian[k, j] = normal[j, k], hessian[j, k]
        step = mpmath.lu_solve(hessian, gradient)
        at = [a + s for a, s in zip(at, step)]
        if max(abs(s / a) for s, a in zip(step, at)) < mpmath.mpf(10) ** -45:
            break
    else:
        raise SystemExit(f"{name}: no convergence")
    mpmath.cholesky(hessian)  # a minimum
    inverse = normal**-1
    variance = rss / (len(y) - p)
    text = lambda v: mpmath.nstr(v, 25)
    return {
        "name": name,
        "coefficients": [text(a) for a in at],
        "sds": [text(mpmath.sqrt(variance * inverse[j, j])) for j in range(p)],
        "residual_sd": text(mpmath.sqrt(variance)),
        "rss": text(rss),
    }


print("[\n " + ",\n ".join(json.dumps(refit(name)) for name in NAMES) + "\n]")
