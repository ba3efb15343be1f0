"""Means, SDs and lag-1 autocorrelations of the univariate sets, and the one-way analyses of variance, of the
sets *as doubles*: exact rational sums, rounded once to the nearest double.

Writes means.json. Run it in this folder: python means.py
"""
import json
from fractions import Fraction
from math import isqrt

UNIVARIATE = ["Lew", "Lottery", "Mavro", "Michelso", "NumAcc1", "NumAcc2", "NumAcc3", "NumAcc4", "PiDigits"]
ANOVA = ["AtmWtAg", "SiRstv", "SmLs01", "SmLs04", "SmLs07"]


def load(name):
    with open(name + ".json") as file:
        data = json.load(file)
    return data["x"], [Fraction(float(v)) for v in data["y"]]


def root(value):
    """The nearest double of a square root: 60 digits first."""
    scale = 10 ** 120
    return float(Fraction(isqrt(value.numerator * scale * scale // value.denominator), scale))


def univariate(name):
    _, y = load(name)
    mean = sum(y) / len(y)
    squares = sum((v - mean) ** 2 for v in y)
    products = sum((a - mean) * (b - mean) for a, b in zip(y, y[1:]))
    return {"name": name, "mean": float(mean), "sd": root(squares / (len(y) - 1)), "lag1": float(products / squares)}


def anova(name):
    x, y = load(name)
    grand = sum(y) / len(y)
    between, within = Fraction(0), Fraction(0)
    groups = sorted(set(x))
    for group in groups:
        own = [v for u, v in zip(x, y) if u == group]
        mean = sum(own) / len(own)
        between += len(own) * (mean - grand) ** 2
        within += sum((v - mean) ** 2 for v in own)
    df1, df2 = len(groups) - 1, len(y) - len(groups)
    return {"name": name, "within_ss": float(within), "residual_sd": root(within / df2),
            "f": float((between / df1) / (within / df2))}


def main():
    rows = [json.dumps(univariate(name)) for name in UNIVARIATE] + [json.dumps(anova(name)) for name in ANOVA]
    with open("means.json", "w") as file:
        file.write("[\n " + ",\n ".join(rows) + "\n]\n")


main()
