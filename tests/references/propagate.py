"""Propagates uncertainty through formulas with Debian's python3-uncertainties.

Reads JSON: {"inputs": {name: [value, u]}, "correlations": [[x, y, r]], "formulas": [text]}; prints [value, u] for each.
"""

import json
import sys

from uncertainties import correlated_values_norm, ufloat, umath

case = json.load(sys.stdin)
inputs = case["inputs"]
correlations = case.get("correlations", [])
if correlations:
    place = {name: i for i, name in enumerate(inputs)}
    matrix = [[float(i == j) for j in range(len(inputs))] for i in range(len(inputs))]
    for x, y, r in correlations:
        matrix[place[x]][place[y]] = matrix[place[y]][place[x]] = r
    names = dict(zip(inputs, correlated_values_norm([tuple(pair) for pair in inputs.values()], matrix)))
else:
    names = {name: ufloat(value, u) for name, (value, u) in inputs.items()}
words = {name: getattr(umath, name) for name in umath.__all__}


def propagated(formula):
    result = eval(formula, {"__builtins__": {}}, {**words, **names})  # the tests' own formulas
    return [getattr(result, "nominal_value", result), getattr(result, "std_dev", 0.0)]


json.dump([propagated(formula) for formula in case["formulas"]], sys.stdout)
