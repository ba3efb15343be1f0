"""Values and first derivatives of typed formulas at random points: symbolic derivatives (sympy),
evaluated with 50 digits (mpmath), rounded once. Prints values.json."""

import json
import random

import mpmath
import sympy

mpmath.mp.dps = 50
RANDOM = random.Random(20261201)

FORMULAS = """a + b*x
a*x^2 + b*x + c
a*x^b
a*x^(-b)
a^x
(a + x)^b
x^x + a
a*exp(b*x)
a*exp(-(x - b)^2/c^2)
a*(1 - exp(-b*x))
a + b*ln(x)
a*ln(b + x)^2
log10(a*x + b)
a*log10(x)^3
sqrt(a + b*x)
a*sqrt(x)/(b + x)
sin(a*x + b)
a*cos(b*x)^2
a*sin(b*x)*cos(c*x)
a*atan(x/b)
atan(a*x^2)/b
abs(a - b*x)
a*abs(x)^b
a/(1 + exp(b - c*x))
a/(1 + exp(b - c*x))^(1/d)
a*x/(b + x)
(a + b*x + c*x^2)/(1 + d*x)
a*(x^2 + b*x)/(x^2 + c*x + d)
a*exp(b/(x + c))
a + b*exp(-c*x) + d*exp(-x)
a - b*x - atan(c/(x + d))/pi
2^(a*x)
-x^2*a
a^b^x
exp(-a*x^2)*sin(b*x)
ln(exp(a) + exp(b*x))
sqrt(a^2 + x^2) - x
((a + x)^2 + b)^3
1/(a + 1/(b + 1/(c + x)))
exp(sin(a*ln(x + b)))""".splitlines()


def symbolic(text):
    names = {"ln": sympy.log, "log10": lambda v: sympy.log(v) / sympy.log(10), "abs": sympy.Abs}
    names |= {n: sympy.Symbol(n, real=True) for n in "abcdx"}
    return sympy.parse_expr(
        text.replace("^", "**"), local_dict=names, transformations=sympy.parsing.sympy_parser.standard_transformations
    )


def points(text):
    f = symbolic(text)
    # Order of first appearance, outside of function names.
    bare = text
    for word in ["exp", "log10", "ln", "sqrt", "sin", "cos", "atan", "abs", "pi"]:
        bare = bare.replace(word, " ")
    order = list(dict.fromkeys(c for c in bare if c in "abcd"))
    variables = [sympy.Symbol(n, real=True) for n in ["x", *order]]
    wanted = [f] + [sympy.diff(f, v) for v in variables]
    call = sympy.lambdify(variables, wanted, "mpmath")
    out = []
    while len(out) < 25:
        at = [round(RANDOM.uniform(0.2, 3.0), 12) for _ in variables]
        values = call(*[mpmath.mpf(v) for v in at])
        # Near a zero of a sum plain doubles lose digits whatever the method.
        if min(abs(v) for v in values) < 1e-3 or max(abs(v) for v in values) > 1e6:
            continue
        out.append({"x": at[0], "b": at[1:], "values": [float(v) for v in values]})
    return out


lines = []
for text in FORMULAS:
    rows = ",\n  ".join(json.dumps(p) for p in points(text))
    lines.append(f'{{"formula": {json.dumps(text)}, "points": [\n  {rows}\n]}}')
print("[\n" + ",\n".join(lines) + "\n]")
