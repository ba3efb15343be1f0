"""Values and derivatives of the function families at 140 digits, rounded once; writes families.json.

Derivatives are numerical ones of the plain formulas, relative steps of 1e-40: no rule of differentiation
is shared with the program. Needs mpmath 1.4.1.
"""
import json
import random

from mpmath import mp, mpf, exp, log, findroot

mp.dps = 140
rng = random.Random(20)
STEP = mpf(10) ** -40
T0 = mpf(29815) / 100


def steinhart(b, r):
    n = log(r)
    return 1 / (b[0] + b[1] * n + b[2] * n**3)


def steinhart_inverse(b, kelvin):
    n = findroot(lambda n: b[0] + b[1] * n + b[2] * n**3 - 1 / kelvin, mpf(9), tol=mpf(10) ** -260)
    return exp(n)


def platinum(b, t):
    c = b[3] if len(b) == 4 else mpf(-4.183e-12)
    return b[0] * (1 + b[1] * t + b[2] * t**2 + (c * (t - 100) * t**3 if t < 0 else 0))


FORMULAS = {
    "line_zero": lambda b, x: b[0] * x,
    "power": lambda b, x: b[0] * x ** b[1],
    "exponential": lambda b, x: b[0] + b[1] * exp(b[2] * x),
    "hyperbola": lambda b, x: b[0] + b[1] / (x + b[2]),
    "rational": lambda b, x: (b[0] + b[1] * x) / (1 + b[2] * x),
    "logistic4": lambda b, x: b[3] + (b[0] - b[3]) / (1 + (x / b[2]) ** b[1]),
    "logistic5": lambda b, x: b[3] + (b[0] - b[3]) / (1 + (x / b[2]) ** b[1]) ** b[4],
    "steinhart_hart": steinhart,
    "steinhart_hart_resistance": steinhart_inverse,
    "beta": lambda b, r: 1 / (1 / T0 + log(r / b[1]) / b[0]),
    "beta_resistance": lambda b, t: b[1] * exp(b[0] * (1 / t - 1 / T0)),
    "callendar_van_dusen": platinum,
    "callendar_van_dusen_fixed": platinum,
}


def size(lo, hi):
    return 10 ** rng.uniform(lo, hi)


def either(value):
    return rng.choice([-1, 1]) * value


def thermistor():
    return [size(-3.2, -2.8), rng.uniform(2e-4, 3e-4), size(-7.5, -6.7)]


def bead():
    return [rng.uniform(2500, 4500), size(2, 6)]


def wire():
    return [size(1, 3.2), rng.uniform(3.8e-3, 4e-3), rng.uniform(-6e-7, -5.5e-7), rng.uniform(-5e-12, -4e-12)]


def point(name):
    """Random coefficients and place."""
    s, y = size(-9, 9), size(-9, 9)  # odd scales of x and y
    if name == "line_zero":
        return [either(y)], either(s)
    if name == "power":
        return [either(y), either(rng.uniform(0.1, 3))], s
    if name == "exponential":
        return [either(y), either(y * size(-1, 1)), either(rng.uniform(0.01, 8)) / s], either(s * rng.random())
    if name == "hyperbola":
        return [either(y), either(y * s * size(-1, 1)), s * size(-2, 1)], s * rng.random()
    if name == "rational":
        return [-y * size(-1, 1), y / s, size(-2, 1) / s], s * rng.random()
    if name in ("logistic4", "logistic5"):
        b = [either(y), rng.uniform(0.3, 4), s * size(-3, 3), either(y * size(-1, 1))]
        return (b, s) if name == "logistic4" else (b + [size(-1, 1)], s)
    if name == "steinhart_hart":
        return thermistor(), size(1, 6)
    if name == "steinhart_hart_resistance":
        return thermistor(), rng.uniform(220, 400)
    if name == "beta":
        return bead(), size(2, 6)
    if name == "beta_resistance":
        return bead(), rng.uniform(220, 400)
    return wire()[: 3 if name.endswith("fixed") else 4], rng.uniform(-200, 850) if rng.random() < 0.5 else rng.uniform(-200, 0)


def derivative(f, at):
    """Central difference of f about at, error of the order of 1e-80."""
    h = STEP * abs(at)
    return (f(at + h) - f(at - h)) / (2 * h)


def row(name):
    b, x = point(name)
    f, exact, place = FORMULAS[name], [mpf(v) for v in b], mpf(x)

    def by(i):
        return derivative(lambda v: f(exact[:i] + [v] + exact[i + 1 :], place), exact[i])

    slopes = [derivative(lambda v: f(exact, v), place)] + [by(i) for i in range(len(b))]
    return [b, x, float(f(exact, place)), [float(v) for v in slopes]]


if __name__ == "__main__":
    names = list(FORMULAS)
    parts = []
    for name in names:
        rows = ",\n  ".join(json.dumps(row(name)) for _ in range(60))
        parts.append(f' "{name}": [\n  {rows}\n ]')
    with open("families.json", "w") as out:
        out.write("{\n" + ",\n".join(parts) + "\n}\n")
