"""The divider channel of trials.ts in NumPy, with the same results: mean, deviation, both intervals, bins."""

import json
import sys
import time

import numpy as np


def run(m, seed):
    g = np.random.default_rng(seed)
    flat = lambda a: g.uniform(-a, a, m)
    supply = 24 + 1e-3 * g.standard_normal(m)
    t1, t2, c1, c2, dt = flat(0.01), flat(0.01), flat(1e-4), flat(1e-4), flat(30)
    rin, leak, gain = 10e6 + flat(2e6), flat(5e-8), flat(1e-3)
    offset = 5e-4 * g.standard_normal(m)
    inl, q = flat(6e-4), flat(3e-4)
    r1 = 470e3 * (1 + t1) * (1 + c1 * dt)
    r2 = 47e3 * (1 + t2) * (1 + c2 * dt)
    low = r2 * rin / (r2 + rin)
    source = r1 * low / (r1 + low)
    v = supply * low / (low + r1)
    y = ((v - leak * source) * (1 + gain) + offset + inl + q) / (47 / 517)
    mean, u = y.mean(), y.std(ddof=1)
    y.sort()
    inside = int(0.95 * m + 0.5)
    r = (m - inside) // 2
    symmetric = y[r - 1], y[r + inside - 1]
    k = np.argmin(y[inside:] - y[:-inside])
    shortest = y[k], y[k + inside]
    bins = np.histogram(y, 100)
    return mean, u, symmetric, shortest, bins


trials = int(sys.argv[1])
run(trials, 1)
times = []
for seed in range(3):
    start = time.perf_counter()
    mean, u, *_ = run(trials, seed)
    times.append(time.perf_counter() - start)
print(json.dumps({"ms": 1e3 * min(times), "mean": mean, "standardUncertainty": u}))
