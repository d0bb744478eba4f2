"""The lines of note-200.ts with python3-uncertainties: values, standard uncertainties and all contributions, in ms."""

import json
import sys
import time

from uncertainties import ufloat
from uncertainties.umath import sqrt


def run():
    r = [ufloat((i + 1) * 1e4, (i + 1) * 1e4 * 0.01 / 3**0.5) for i in range(30)]
    lines = []
    v = 5.0
    for i in range(170):
        a, b, c = r[i % 30], r[(7 * i + 3) % 30], r[(11 * i + 5) % 30]
        low = b * c / (b + c)
        mismatch = 0.1 * sqrt(a * b) / (a + b) - 0.02 * c / (a + b)
        v = v * low / (a + low) * (1 + 0.003 * a / c) + mismatch
        lines.append(v)
    budgets = [(line.std_dev, line.error_components()) for line in lines]
    return lines[-1].nominal_value, budgets[-1][0]


run()
times = []
for _ in range(int(sys.argv[1])):
    start = time.perf_counter()
    value, u = run()
    times.append(1e3 * (time.perf_counter() - start))
times.sort()
print(json.dumps({"ms": times[len(times) // 2], "value": value, "standardUncertainty": u}))
