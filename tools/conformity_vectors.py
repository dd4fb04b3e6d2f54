#!/usr/bin/env python3
"""Write testdata/conformity/vectors.json: probabilities of conformity that Ratehouse must find.

Needs numpy and scipy; their versions stand in the file. Everything is computed here from the
formulas and limits of the domain notes (sections 1.6 and 5.2) and shares nothing with the program:

- each and all by plain trials: true rates = measured rates + noise with the covariance of shared
  states, or of a full budget as its formula reads; standard error beside each case;
- M, D, C and R by the normal distribution function, and all four together by scipy's multivariate
  normal distribution function over a box.

    python3 tools/conformity_vectors.py
"""
import json
import sys

import numpy as np
import scipy
from scipy.stats import multivariate_normal, norm

N, CHUNK, SEED = 4_000_000, 500_000, 3159
INF = np.inf
LIMITS = {
    "1": dict(M=(-4, 6), V=(-INF, 2), Vmax=(-INF, 5), D=(-6, 8), P=(-INF, 10), C=(-0.6, 0.6), R=(-5, 5)),
    "2": dict(M=(-5, 8), V=(-INF, 3.4), Vmax=(-INF, 7), D=(-8, 10), P=(-INF, 15), C=(-0.7, 0.7), R=(-6, 6)),
}
SYMBOLS = ["M", "V", "Vmax", "D", "P", "C", "R"]
LINEAR = ["M", "D", "C", "R"]
POSITIONS = ["6H"] * 2 + ["3H"] * 2 + ["9H"] * 2 + ["FH"] * 2 + ["CH"] * 5 + ["6H"] * 2
CELSIUS = [23] * 10 + [8, 23, 38, 23, 23]


def values(r):
    """Criteria of rates, one movement a row, R1 in column 0."""
    m = r[:, :10].mean(axis=1)
    pair = np.abs(r[:, 1:10:2] - r[:, 0:10:2])
    first = (r[:, 0] + r[:, 1]) / 2
    return dict(M=m, V=pair.mean(axis=1), Vmax=pair.max(axis=1), D=first - (r[:, 8] + r[:, 9]) / 2,
                P=np.abs(r[:, :10] - m[:, None]).max(axis=1), C=(r[:, 12] - r[:, 10]) / 30, R=r[:, 14] - first)


def weights():
    w = dict(M=np.zeros(15), D=np.zeros(15), C=np.zeros(15), R=np.zeros(15))
    w["M"][:10] = 0.1
    w["D"][[0, 1]], w["D"][[8, 9]] = 0.5, -0.5
    w["C"][12], w["C"][10] = 1 / 30, -1 / 30
    w["R"][14], w["R"][[0, 1]] = 1, -0.5
    return w


def shared(u):
    b = np.diff(np.eye(16), axis=0)
    return u * u * b @ b.T


def budget(read, common, chamber, weather, slope, frequency, handling):
    one = np.ones((15, 15))
    rooms = np.array([[float(a == b) for b in CELSIUS] for a in CELSIUS])
    return (shared(1) * (read**2 + common**2) + slope**2 * chamber**2 * rooms + slope**2 * weather**2 * np.eye(15)
            + frequency**2 * one + handling**2 * np.eye(15))


def trials(rates, cov, cat, rng):
    root = np.linalg.cholesky(cov + 1e-15 * np.eye(15))
    each, all_ = {s: 0 for s in SYMBOLS}, 0
    for _ in range(N // CHUNK):
        v = values(rates + rng.standard_normal((CHUNK, 15)) @ root.T)
        ok = {s: (v[s] >= LIMITS[cat][s][0]) & (v[s] <= LIMITS[cat][s][1]) for s in SYMBOLS}
        for s in SYMBOLS:
            each[s] += int(ok[s].sum())
        all_ += int(np.logical_and.reduce(list(ok.values())).sum())
    return {s: each[s] / N for s in SYMBOLS}, all_ / N


def exact(rates, cov, cat):
    w = weights()
    y = np.array([w[s] @ rates for s in LINEAR])
    c = np.array([[w[a] @ cov @ w[b] for b in LINEAR] for a in LINEAR])
    lo = np.array([LIMITS[cat][s][0] for s in LINEAR])
    hi = np.array([LIMITS[cat][s][1] for s in LINEAR])
    u = np.sqrt(np.diag(c))
    each = norm.cdf((hi - y) / u) - norm.cdf((lo - y) / u)
    box = multivariate_normal.cdf(hi, y, c, allow_singular=True, maxpts=4_000_000, abseps=1e-8, releps=1e-8, lower_limit=lo)
    return dict(zip(LINEAR, map(float, each))), float(box)


def movement(kind, rng):
    """Rates of a movement that comes near some limits of category 1."""
    r = np.repeat(rng.uniform(-1, 3, 5), 2)
    r = np.concatenate([r + rng.normal(0, 0.4, 10), rng.uniform(-1, 3, 5)])
    if "M" in kind:
        r += 6 - r[:10].mean() + rng.normal(0, 0.05)
    if "V" in kind:
        signs = rng.choice([-1, 1], 5)
        size = rng.uniform(0.05, 4, 5)
        r[1:10:2] = r[0:10:2] + signs * size * (2 + rng.normal(0, 0.15)) / size.mean()
    if "X" in kind:
        r[5] = r[4] + 5 + rng.normal(0, 0.2)
        r[7] = r[6] - 5 + rng.normal(0, 0.2)
    if "D" in kind:
        r[8:10] += (r[0] + r[1]) / 2 - r[8:10].mean() - 8 + rng.normal(0, 0.1)
    if "P" in kind:
        r[2] = r[:10].mean() + 11.1 + rng.normal(0, 0.3)
        r[3] = r[2] + rng.normal(0, 0.3)
    if "C" in kind:
        r[12] = r[10] + 18 + rng.normal(0, 0.2)
    if "R" in kind:
        r[14] = (r[0] + r[1]) / 2 - 5 + rng.normal(0, 0.2)
    return np.round(r, 1)


def main():
    rng = np.random.default_rng(SEED)
    cases = []
    kinds = ["", "M", "V", "X", "D", "P", "C", "R", "CR", "MR", "VX", "VXP", "MDCR", "VXPCR", "MVXDPCR"]
    for u in (0.05, 0.1, 0.3, 1.0):
        for kind in kinds:
            if (kind == "" or kind in "MDC") and u < 0.3:
                continue
            cat = "2" if len(cases) % 5 == 4 else "1"
            cases.append(dict(name=f"{kind or 'none'} u={u}", category=cat, u=u, cov=shared(u), rates=movement(kind, rng)))
    full = dict(read=0.1, common=0.05, chamber=0.3, weather=0.1, slope=0.2, frequency=0.02, handling=0.05)
    for kind in ("MR", "VXP", "MDCR", "MVXDPCR"):
        cases.append(dict(name=f"{kind} budget", category="1", budget=full, cov=budget(**full), rates=movement(kind, rng)))
    out = []
    for c in cases:
        each, joint = trials(c["rates"], c["cov"], c["category"], rng)
        linear, box = exact(c["rates"], c["cov"], c["category"])
        out.append({"name": c["name"], "category": c["category"], "u": c.get("u"), "budget": c.get("budget"),
                    "rates": [f"{x:.1f}" for x in c["rates"]], "each": each, "all": joint, "linear": linear, "box_MDCR": box})
        print(c["name"], round(joint, 4), file=sys.stderr)
    head = {"source": "tools/conformity_vectors.py", "python": sys.version.split()[0], "numpy": np.__version__,
            "scipy": scipy.__version__, "trials": N, "greatest_standard_error": 0.5 / N**0.5, "seed": SEED, "cases": out}
    with open("testdata/conformity/vectors.json", "w") as f:
        json.dump(head, f, indent=1)
        f.write("\n")


main()
