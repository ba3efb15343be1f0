"""Refits 200 slightly moved copies of every non-linear set with one regressor, with 80 digits, rounded once.

Writes nonlinear-perturbed.json: for each set one row a copy, coefficients, then standard deviations, then the
residual standard deviation. The copies are made by the rule in refit.py; set numbers are the places in the
sorted list of names, from 100 on.

The minimum is approached in doubles (scipy) from the certificate and then found by Newton's method on the normal
equations, with exact second derivatives (sympy) in ball arithmetic (python-flint), until nothing moves.
Needs sympy, numpy, scipy, python-flint. Run it in this folder: python nonlinear_perturbed.py
"""
import json
import multiprocessing
import pathlib
import sys

import flint
import numpy
import scipy
import scipy.optimize
import sympy

COPIES = 200
HERE = pathlib.Path(__file__).parent
BALLS = {name: (lambda f: lambda v: getattr(flint.arb(v), f)())(name) for name in ("exp", "sin", "cos", "atan", "sqrt")}
BALLS |= {"log": lambda v: flint.arb(v).log()}


def sets():
    found = {}
    for path in sorted(HERE.glob("*.json")):
        data = json.loads(path.read_text())
        if isinstance(data, dict) and data.get("kind") == "nonlinear" and not isinstance(data["x"][0], list):
            found[data["name"]] = data
    return found


def moved(data, number, copy):
    state = 1000 * number + copy + 1
    out = []
    for row in zip(data["x"], data["y"]):
        for value in row:
            state = (state * 6364136223846793005 + 1442695040888963407) % 2**64
            out.append(float(value) * (1.0 + ((state >> 57) - 64) * 2.0**-20))
    return out[0::2], out[1::2]


def functions(data):
    p = data["p"]
    b = sympy.symbols([f"b{i + 1}" for i in range(p)])
    x = sympy.Symbol("x")
    f = sympy.sympify(data["expr"].replace("-0.5", "-1/2"), rational=True)
    first = [sympy.diff(f, v) for v in b]
    second = [sympy.diff(g, b[k]) for j, g in enumerate(first) for k in range(j + 1)]
    plain = sympy.lambdify([*b, x], [f, *first], "numpy", cse=True)
    # The printer for mpmath writes 1/6 as mpf(1)/mpf(6), which keeps it exact.
    names = dict(BALLS, pi=flint.arb.pi(), mpf=flint.arb)
    return plain, sympy.lambdify([*b, x], [f, *first, *second], [names, "mpmath"], cse=True)


def refit(data, xs, ys, plain, balls):
    p, n = data["p"], len(xs)
    xa, ya = numpy.array(xs), numpy.array(ys)
    ones = numpy.ones(n)
    residual = lambda b: plain(*b, xa)[0] * ones - ya
    jacobian = lambda b: numpy.array([g * ones for g in plain(*b, xa)[1:]]).T
    start = [c["estimate"] for c in data["certified"]]
    near = scipy.optimize.least_squares(residual, start, jac=jacobian, method="lm", x_scale="jac",
                                        xtol=1e-15, ftol=1e-15, gtol=1e-15, max_nfev=20000)
    at = [flint.arb(float(v)) for v in near.x]
    rows = [(flint.arb(x), flint.arb(y)) for x, y in zip(xs, ys)]
    for _ in range(60):
        gradient = [flint.arb(0)] * p
        normal = [[flint.arb(0)] * p for _ in range(p)]
        hessian = [[flint.arb(0)] * p for _ in range(p)]
        rss = flint.arb(0)
        for x, y in rows:
            value, *rest = balls(*at, x)
            slopes, curves = rest[:p], rest[p:]
            r = y - value
            rss += r * r
            place = 0
            for j in range(p):
                gradient[j] += slopes[j] * r
                for k in range(j + 1):
                    product = slopes[j] * slopes[k]
                    normal[j][k] += product
                    hessian[j][k] += product - r * curves[place]
                    place += 1
        for j in range(p):
            for k in range(j):
                normal[k][j], hessian[k][j] = normal[j][k], hessian[j][k]
        step = flint.arb_mat(hessian).solve(flint.arb_mat(p, 1, gradient))
        # The middle of each ball: its radius would only grow from step to step.
        at = [flint.arb((at[j] + step[j, 0]).mid()) for j in range(p)]
        if max(abs(float((step[j, 0] / at[j]).mid())) for j in range(p)) < 1e-40:
            break
    else:
        raise RuntimeError(data["name"])
    cofactor = flint.arb_mat(normal).inv()
    variance = rss / (n - p)
    sds = [(variance * cofactor[j, j]).sqrt() for j in range(p)]
    return [float(v.mid()) for v in [*at, *sds, variance.sqrt()]]


def all_copies(job):
    number, data = job
    flint.ctx.dps = 80
    plain, balls = functions(data)
    return data["name"], [refit(data, *moved(data, number, copy), plain, balls) for copy in range(COPIES)]


if __name__ == "__main__":
    print("python-flint", flint.__version__, "scipy", scipy.__version__, "sympy", sympy.__version__, file=sys.stderr)
    with multiprocessing.Pool() as pool:
        found = dict(pool.map(all_copies, list(enumerate(sets().values(), 100)), 1))
    lines = ['"%s":[\n%s]' % (name, ",\n".join(json.dumps(row, separators=(",", ":")) for row in rows))
             for name, rows in found.items()]
    (HERE / "nonlinear-perturbed.json").write_text("{" + ",\n".join(lines) + "}\n")
