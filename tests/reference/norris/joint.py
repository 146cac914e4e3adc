"""Readings of one invented tube type at three currents, and their fit by other tools.

U = pair + e * L * (25 / I)^n by scipy.optimize.curve_fit (Levenberg-Marquardt), intervals from its
covariance and scipy's t; leverages and externally studentised residuals from the QR decomposition of
the Jacobian by central differences. One reading is off on purpose. Prints joint.json.
"""

import json

import numpy as np
from scipy import optimize, stats

rng = np.random.default_rng(600)
TRUTH = (212.0, 655.0, 0.27)


def volts(x, pair, e, n):
    metres, ma = x
    return pair + e * metres * (25.0 / ma) ** n


metres, ma = [], []
for current in (18.0, 25.0, 32.0):
    for length in (0.4, 0.8, 1.2, 1.6):
        metres.append(length + round(rng.uniform(-0.02, 0.02), 3))
        ma.append(round(current + rng.uniform(-0.15, 0.15), 1))
metres.append(0.75)
ma.append(21.0)  # one length only at this current
x = np.array([metres, ma])
u = np.round(volts(x, *TRUTH) + rng.normal(0.0, 6.0, x.shape[1]))
u[6] += 60.0
best, cov = optimize.curve_fit(volts, x, u, p0=(200, 700, 0.25), ftol=1e-15, xtol=1e-15, gtol=1e-15)
count, freedom = len(u), len(u) - 3
residuals = u - volts(x, *best)
scatter = float(residuals @ residuals)


def jacobian(points):
    columns = []
    for k in range(3):
        step = np.zeros(3)
        step[k] = best[k] * 1e-6
        columns.append((volts(points, *(best + step)) - volts(points, *(best - step))) / (2 * step[k]))
    return np.array(columns).T


q, r = np.linalg.qr(jacobian(x))
leverage = (q * q).sum(axis=1)
others = (scatter - residuals**2 / (1 - leverage)) / (freedom - 1)
studentised = residuals / np.sqrt(others * (1 - leverage))
limit = stats.t.ppf(1 - 0.05 / (2 * count), freedom - 1)
t = stats.t.ppf(0.975, freedom)
half = t * np.sqrt(np.diag(cov))
s2 = scatter / freedom
ahead = []
for length, current in [(1.5, 25.0), (1.5, 18.0), (0.3, 32.0), (3.0, 40.0)]:
    row = jacobian(np.array([[length], [current]]))[0]
    share = float(np.sum(np.linalg.solve(r.T, row) ** 2))
    ahead.append({
        "metres": length,
        "ma": current,
        "volts": float(volts((length, current), *best)),
        "half": float(t * np.sqrt(s2 * (1 + share))),
    })
print(json.dumps({
    "metres": metres,
    "ma": [float(i) for i in ma],
    "volts": [float(v) for v in u],
    "pair": [float(best[0]), float(half[0])],
    "per_metre_at_25_ma": [float(best[1]), float(half[1])],
    "exponent": [float(best[2]), float(half[2])],
    "residual_sd": float(np.sqrt(s2)),
    "residuals": [float(v) for v in residuals],
    "studentised": [float(v) for v in studentised],
    "outlier_limit": float(limit),
    "next": ahead,
}, indent=1))
