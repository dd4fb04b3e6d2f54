#!/usr/bin/env python3
"""Write testdata/lot/vectors.json: statistics that trial/lot must find, by numpy, scipy and mpmath.

Shares nothing with the program: bounds of Grubbs' test by mpmath (scipy's Student quantile is off by
up to 3e-9), proportions by scipy.stats.binomtest, quantiles by numpy.quantile,
capability by its formulas with scipy's quantiles, repeatability and one-way analysis by scipy,
comparisons by least squares on dummy variables, the covariance of pairs by numpy.cov. Run from the
project's top level:

    /usr/bin/python3 tools/lot_vectors.py
"""
import json
import sys

import mpmath
import numpy as np
import scipy
from scipy import stats

rng = np.random.default_rng(3159)
mpmath.mp.dps = 30


def proportions():
    cases = [(0, 1), (1, 1), (0, 5000), (4999, 5000), (5000, 5000), (173, 200)] + [
        (int(rng.integers(0, n + 1)), int(n)) for n in rng.integers(1, 3000, 60)]
    out = []
    for i, (x, n) in enumerate(cases):
        level = [0.9, 0.95, 0.99, 0.999][i % 4]
        t = stats.binomtest(x, n)
        w, c = t.proportion_ci(level, "wilson"), t.proportion_ci(level, "exact")
        out.append(dict(x=x, n=n, confidence=level, wilson=[float(w.low), float(w.high)], clopper_pearson=[float(c.low), float(c.high)]))
    return out


def grubbs():
    out = []
    for n in (3, 5, 15, 30, 100, 500):
        for sides in (1, 2):
            for alpha in (0.05, 0.01):
                tail, free = mpmath.mpf(str(alpha)) / n / sides, mpmath.mpf(n - 2)
                # x = free/(t²+free) of the incomplete beta function, found in its logarithm
                f = lambda y: mpmath.log(mpmath.betainc(free / 2, 0.5, 0, mpmath.e**y, regularized=True) / 2) - mpmath.log(tail)
                lo = 0
                while f(lo) > 0 if lo else True:
                    lo -= 1
                x = mpmath.e ** mpmath.findroot(f, (lo, min(lo + 1, -1e-9)), solver="anderson")
                t2 = free / x - free
                out.append(dict(n=n, sides=sides, alpha=alpha, critical=float((n - 1) / mpmath.sqrt(n) * mpmath.sqrt(t2 / (free + t2)))))
    return out


def quantiles():
    out = []
    for n in (1, 2, 3, 10, 57):
        x = np.sort(rng.normal(0, 3, n))
        p = [0, 0.05, 0.25, 0.5, 0.75, 0.95, 0.99865, 1]
        out.append(dict(x=x.tolist(), p=p, quantiles=np.quantile(x, p).tolist()))
    return out


def capability():
    out = []
    for mean, s, n, lo, hi, level in [(1.2, 1.9, 200, -4, 6, 0.95), (-3.1, 0.8, 12, -6, 8, 0.9), (0.02, 0.21, 4321, -0.6, 0.6, 0.99)]:
        cp, cpk = (hi - lo) / 6 / s, min(hi - mean, mean - lo) / 3 / s
        chi = [float(np.sqrt(stats.chi2.ppf(q, n - 1) / (n - 1)) * cp) for q in ((1 - level) / 2, (1 + level) / 2)]
        half = stats.norm.ppf((1 + level) / 2) * np.sqrt(1 / 9 / n + cpk**2 / 2 / (n - 1))
        out.append(dict(mean=mean, s=s, n=n, lo=lo, hi=hi, confidence=level, cp=cp, cpk=cpk, cp_range=chi, cpk_range=[cpk - half, cpk + half]))
    return out


def one_way():
    out = []
    for k in (2, 3, 7):
        groups = [rng.normal(rng.normal(0, 1), 1.5, int(rng.integers(2, 20))).tolist() for _ in range(k)]
        f, p = stats.f_oneway(*groups)
        out.append(dict(groups=groups, f=float(f), p=float(p)))
    return out


def repeatability():
    groups = [rng.normal(rng.normal(0, 50), 0.11, int(rng.integers(1, 4))).tolist() for _ in range(40)]
    many = [np.array(g) for g in groups if len(g) > 1]
    free = sum(len(g) - 1 for g in many)
    s2 = sum(((g - g.mean()) ** 2).sum() for g in many) / free
    ends = [float(np.sqrt(s2 * free / stats.chi2.ppf(q, free))) for q in (0.975, 0.025)]
    return dict(groups=groups, free=int(free), sd=float(np.sqrt(s2)), confidence=0.95, range=ends)


def comparison():
    """Two sets of levels that never meet, and one level that meets nobody."""
    blocks = [("K1", "A", ["h1", "h2"]), ("K1", "A", ["h2", "h3"]), ("K2", "B", ["h4", "h5", "h6"]), ("K2", "C", ["h7"])]
    effect = dict(h1=0.4, h2=-0.1, h3=0.0, h4=1.0, h5=0.2, h6=0.3, h7=5.0)
    rows = []
    for i, (calibre, depositor, levels) in enumerate(blocks):
        base = rng.normal(0, 3)
        for level in levels:
            for _ in range(int(rng.integers(4, 9))):
                rows.append(dict(value=float(np.round(base + effect[level] + rng.normal(0, 0.5), 3)), level=level, round=i,
                                 calibre=calibre, depositor=depositor))
    y = np.array([r["value"] for r in rows])
    b = np.array([[float(r["round"] == i) for i in range(len(blocks))] for r in rows])
    names = sorted(effect)
    x = np.hstack([b, np.array([[float(r["level"] == n) for n in names] for r in rows])])
    rss = lambda m: float(((y - m @ np.linalg.lstsq(m, y, rcond=None)[0]) ** 2).sum())
    full, small = rss(x), rss(b)
    rank, rank_b = np.linalg.matrix_rank(x), np.linalg.matrix_rank(b)
    df1, df2 = int(rank - rank_b), int(len(y) - rank)
    f = (small - full) / df1 / (full / df2)
    coef = np.linalg.lstsq(x, y, rcond=None)[0][len(blocks):]
    cov = np.linalg.pinv(x.T @ x) * full / df2
    effects, us = {}, {}
    for s in (["h1", "h2", "h3"], ["h4", "h5", "h6"]):
        n = np.array([sum(r["level"] == name for r in rows) for name in s])
        for name in s:
            c = np.zeros(x.shape[1])  # estimable contrast: the level less the weighted mean of its set
            for m, w in zip(s, n / n.sum()):
                c[len(blocks) + names.index(m)] -= w
            c[len(blocks) + names.index(name)] += 1
            effects[name] = float(c[len(blocks):] @ coef)
            us[name] = float(np.sqrt(c @ cov @ c))
    return dict(rows=rows, free_levels=df1, free=df2, f=float(f), p=float(stats.f.sf(f, df1, df2)), residual=float(np.sqrt(full / df2)),
                effects=effects, u=us)


def noise():
    """Two lots with drift, day noise and a common error of each round; u_s by numpy.cov."""
    lots, near, far, total = [], 0.0, 0.0, 0
    for n in (40, 25):
        states = np.cumsum(rng.normal(0, 2, (n, 1)) + rng.normal(0, 0.3, (n, 1)) * np.arange(11) + rng.normal(0, 0.2, (n, 11)), axis=1)
        states = np.round(states + rng.normal(0, 0.3, (n, 11)) + rng.normal(0, 0.5, 11), 3)
        lots.append([[f"{s:.3f}" for s in row] for row in states])
        rates = np.diff(states, axis=1)
        c = np.cov((rates[:, 1::2] - rates[:, 0::2]).T)
        gap = np.abs(np.subtract.outer(np.arange(5), np.arange(5)))
        near, far, total = near + n * c[gap == 1].mean(), far + n * c[gap > 1].mean(), total + n
    return dict(states=lots, variance=float((near - far) / total), movements=total)


head = {"_source": "tools/lot_vectors.py", "python": sys.version.split()[0], "numpy": np.__version__, "scipy": scipy.__version__, "seed": 3159,
        "mpmath": mpmath.__version__, "grubbs": grubbs(), "proportions": proportions(), "quantiles": quantiles(), "capability": capability(), "one_way": one_way(),
        "repeatability": repeatability(), "comparison": comparison(), "noise": noise()}
with open("testdata/lot/vectors.json", "w") as f:
    json.dump(head, f, indent=1)
    f.write("\n")
