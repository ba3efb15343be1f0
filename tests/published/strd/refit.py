"""Refits of the linear sets *as doubles*, with 120 digits, rounded once to the nearest double.

Writes refit.json (the sets as published) and perturbed.json (200 copies of each, slightly moved).
Needs mpmath. Run it in this folder: python refit.py

The copies: for set number s (from 0, in the order of SETS) and copy c (from 0) a linear congruential
generator starts at 1000 s + c + 1 and steps z <- 6364136223846793005 z + 1442695040888963407 mod 2^64;
every step gives k = (z >> 57) - 64. Point by point, all its x in order and then its y are multiplied by
1 + k 2^-20 in doubles: the factor is exact, the product is rounded once, so every machine makes the same
doubles.
"""
import json
import mpmath as mp

mp.mp.dps = 120
SETS = ["Norris", "Pontius", "NoInt1", "NoInt2", "Filip", "Longley",
        "Wampler1", "Wampler2", "Wampler3", "Wampler4", "Wampler5"]
COPIES = 200


def load(name):
    with open(name + ".json") as file:
        data = json.load(file)
    x = data["x"]
    columns = x if isinstance(x[0], list) else [x]
    return data["basis"], [[float(v) for v in c] for c in columns], [float(v) for v in data["y"]]


def regressors(basis, columns):
    """Rows of the design, exact."""
    constant = [mp.mpf(1)] if basis["intercept"] else []
    if basis["kind"] == "polynomial" and basis["degree"] > 1:
        powers = lambda v: [v ** j for j in range(1, basis["degree"] + 1)]
        return [constant + powers(mp.mpf(v)) for v in columns[0]]
    return [constant + [mp.mpf(v) for v in row] for row in zip(*columns)]


def inverse(a):
    """Of a symmetric positive definite matrix, by Gauss-Jordan."""
    p = len(a)
    m = [row[:] + [mp.mpf(i == j) for j in range(p)] for i, row in enumerate(a)]
    for k in range(p):
        pivot = m[k][k]
        m[k] = [v / pivot for v in m[k]]
        for i in range(p):
            if i != k and m[i][k]:
                factor = m[i][k]
                m[i] = [v - factor * w for v, w in zip(m[i], m[k])]
    return [row[p:] for row in m]


def refit(basis, columns, y):
    rows = regressors(basis, columns)
    y = [mp.mpf(v) for v in y]
    n, p = len(rows), len(rows[0])
    normal = [[mp.fsum(r[i] * r[j] for r in rows) for j in range(p)] for i in range(p)]
    right = [mp.fsum(r[i] * v for r, v in zip(rows, y)) for i in range(p)]
    cofactor = inverse(normal)
    b = [mp.fsum(c * v for c, v in zip(row, right)) for row in cofactor]
    rss = mp.fsum((v - mp.fsum(c * r for c, r in zip(b, row))) ** 2 for row, v in zip(rows, y))
    if rss < mp.mpf(10) ** -90:  # what 120 digits leave of nothing
        rss = mp.mpf(0)
    s = mp.sqrt(rss / (n - p))
    mean = mp.fsum(y) / n if basis["intercept"] else mp.mpf(0)
    total = mp.fsum((v - mean) ** 2 for v in y)
    sds = [s * mp.sqrt(cofactor[i][i]) for i in range(p)]
    return b, sds, rss, s, 1 - rss / total


def double(value):
    """The nearest double (mpmath's own conversion may truncate)."""
    return float(mp.nstr(value, 45))


def perturbed(number, copy, columns, y):
    state = 1000 * number + copy + 1

    def moved(value):
        nonlocal state
        state = (6364136223846793005 * state + 1442695040888963407) % 2 ** 64
        return value * (1.0 + ((state >> 57) - 64) * 2.0 ** -20)

    new_columns, new_y = [[] for _ in columns], []
    for i, value in enumerate(y):
        for source, target in zip(columns, new_columns):
            target.append(moved(source[i]))
        new_y.append(moved(value))
    return new_columns, new_y


def main():
    published, copies = [], []
    for number, name in enumerate(SETS):
        basis, columns, y = load(name)
        b, sds, rss, s, r2 = refit(basis, columns, y)
        published.append(json.dumps({
            "name": name, "coefficients": [double(v) for v in b], "sds": [double(v) for v in sds],
            "rss": double(rss), "residual_sd": double(s), "r_squared": double(r2)}))
        rows = []
        for copy in range(COPIES):
            b, sds, _, s, r2 = refit(basis, *perturbed(number, copy, columns, y))
            rows.append(json.dumps([double(v) for v in [*b, *sds, s, r2]], separators=(",", ":")))
        copies.append(json.dumps(name) + ":[\n" + ",\n".join(rows) + "]")
        print(name, flush=True)
    with open("refit.json", "w") as file:
        file.write("[\n " + ",\n ".join(published) + "\n]\n")
    with open("perturbed.json", "w") as file:
        file.write("{" + ",\n".join(copies) + "}\n")


main()
