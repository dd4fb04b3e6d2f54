#!/usr/bin/env python3
"""Write testdata/judge/*.csv: rows for `ratehouse judge` and the answers it must give.

Everything is computed here with fractions from the formulas and limits of the domain notes
(sections 1.6 and 6) and shares nothing with the program. Run from the project's top level:

    python3 tools/judge_vectors.py
"""
import random
from fractions import Fraction as F
from itertools import product

LIMITS = {
    "1": dict(M=("-4", "6"), V=(None, "2"), Vmax=(None, "5"), D=("-6", "8"), P=(None, "10"), C=("-0.6", "0.6"), R=("-5", "5")),
    "2": dict(M=("-5", "8"), V=(None, "3.4"), Vmax=(None, "7"), D=("-8", "10"), P=(None, "15"), C=("-0.7", "0.7"), R=("-6", "6")),
}
SYMBOLS = ["M", "V", "Vmax", "D", "P", "C", "R"]
DAYS = dict(M=range(1, 11), V=range(1, 11), Vmax=range(1, 11), D=(1, 2, 9, 10), P=range(1, 11), C=(11, 13), R=(1, 2, 15))
PAIRS = [(1, 2), (3, 4), (5, 6), (7, 8), (9, 10)]


def value(sym, r):
    """One criterion of rates r[1..15] in s/d."""
    mean = lambda days: sum(r[d] for d in days) / F(len(days))
    if sym == "M":
        return mean(range(1, 11))
    if sym == "V":
        return sum(abs(r[b] - r[a]) for a, b in PAIRS) / 5
    if sym == "Vmax":
        return max(abs(r[b] - r[a]) for a, b in PAIRS)
    if sym == "D":
        return mean((1, 2)) - mean((9, 10))
    if sym == "P":
        m = mean(range(1, 11))
        return max(abs(r[d] - m) for d in range(1, 11))
    if sym == "C":
        return (r[13] - r[11]) / 30
    return r[15] - mean((1, 2))


def inside(sym, cat, v):
    lo, hi = LIMITS[cat][sym]
    return (lo is None or v >= F(lo)) and (hi is None or v <= F(hi))


def reachable(sym, cat, r):
    """Whether some values of the blank days in [-60, 60] bring the criterion inside.

    Linear criteria: extremes at the corners, everything between is reached. V and Vmax: their
    least value is enough (no lower limit), each blank chosen as near to its partner as allowed.
    P: convex and symmetric in the blanks, so that the least value has all blanks equal; it is a
    piecewise linear function of that one number, least at a break or at an end.
    """
    blanks = [d for d in DAYS[sym] if r[d] is None]
    if sym in ("M", "D", "C", "R"):
        ends = []
        for corner in (product((-60, 60), repeat=len(blanks)) if len(blanks) <= 4 else [(-60,) * len(blanks), (60,) * len(blanks)]):
            full = dict(r)
            full.update(zip(blanks, map(F, corner)))
            ends.append(value(sym, full))
        lo, hi = LIMITS[cat][sym]
        return min(ends) <= F(hi) and max(ends) >= F(lo)
    if sym in ("V", "Vmax"):
        full = dict(r)
        for a, b in PAIRS:
            for x, y in ((a, b), (b, a)):
                if full[x] is None and r[y] is not None:
                    full[x] = max(F(-60), min(F(60), r[y]))
            if r[a] is None and r[b] is None:
                full[a] = full[b] = F(0)
        return inside(sym, cat, value(sym, full))
    known = [r[d] for d in range(1, 11) if r[d] is not None]
    if not known:
        return True
    b, s = len(blanks), sum(known)
    lines = []  # (slope, constant) in x
    for k in (max(known), min(known)):
        lines += [(F(-b, 10), k - s / 10), (F(b, 10), s / 10 - k)]
    lines += [(1 - F(b, 10), -s / 10), (F(b, 10) - 1, s / 10)]
    xs = [F(-60), F(60)]
    for i, (a1, c1) in enumerate(lines):
        for a2, c2 in lines[i + 1:]:
            if a1 != a2:
                x = (c2 - c1) / (a1 - a2)
                if -60 <= x <= 60:
                    xs.append(x)
    return min(max(a * x + c for a, c in lines) for x in xs) <= F(LIMITS[cat]["P"][1])


def six(v):
    """Six decimals, half to even, never -0."""
    n = round(v * 10**6)  # Fraction rounds half to even
    s = "%07d" % abs(n)
    return ("-" if n < 0 else "") + s[:-6] + "." + s[-6:]


def answer(serial, cat, r):
    cells, failed, unreachable, verdict = [], [], [], "pass"
    for sym in SYMBOLS:
        if any(r[d] is None for d in DAYS[sym]):
            cells.append("")
            if not reachable(sym, cat, r):
                unreachable.append(sym)
            verdict = "open" if verdict == "pass" else verdict
            continue
        v = value(sym, r)
        cells.append(six(v))
        if not inside(sym, cat, v):
            failed.append(sym)
            verdict = "fail"
    return ",".join([serial, cat, verdict] + cells + [" ".join(failed), " ".join(unreachable)])


def draw(rng, spread):
    base, out = rng.randrange(-5000, 7000), [None]
    for d in range(1, 16):
        if d % 2:
            base += rng.randrange(-spread, spread + 1)
        out.append(base + rng.randrange(-spread // 2, spread // 2 + 1))
    return out


def bend(rng, m, sym, bound):
    """Bend thousandths so that a criterion equals its limit exactly."""
    if sym == "M":
        m[rng.randrange(1, 11)] += 10 * bound - sum(m[1:11])
    elif sym == "V":
        left = 5 * bound
        for a, b in PAIRS[:4]:
            d = rng.randrange(0, left // 2 + 1)
            m[b] = m[a] + rng.choice((-1, 1)) * d
            left -= d
        m[10] = m[9] + left
    elif sym == "Vmax":
        for a, b in PAIRS:
            m[b] = m[a]
        a, b = rng.choice(PAIRS)
        m[b] = m[a] + rng.choice((-1, 1)) * bound
    elif sym == "D":
        m[1] += 2 * bound - (m[1] + m[2] - m[9] - m[10])
    elif sym == "P":
        order = rng.sample(range(1, 11), 10)
        for i, d in enumerate(order):
            m[d] = m[order[0]] if i < 1 else m[order[0]] - (2 * bound if i >= 5 else 0)
    elif sym == "C":
        m[13] = m[11] + 30 * bound
    else:
        m[2] += (m[1] + m[2]) % 2
        m[15] = bound + (m[1] + m[2]) // 2
    return m


def text(m):
    """Thousandths as people write them."""
    if m is None:
        return ""
    s = "%d.%03d" % divmod(abs(m), 1000)
    s = s.rstrip("0").rstrip(".")
    return ("-" if m < 0 else "") + s


def write(name, rows, letter, first):
    head = "serial,category," + ",".join("%s%d" % (letter, k) for k in range(first, 16))
    with open("testdata/judge/%s.csv" % name, "w") as f:
        f.write(head + "\n" + "".join(s + "," + c + "," + ",".join(map(text, m)) + "\n" for s, c, m in rows))
    with open("testdata/judge/%s.want.csv" % name, "w") as f:
        f.write("serial,category,verdict," + ",".join(SYMBOLS) + ",failed,unreachable\n")
        for s, c, m in rows:
            if first == 0:
                m = [None if a is None or b is None else b - a for a, b in zip(m, m[1:])]
            r = {d + 1: None if x is None else F(x, 1000) for d, x in enumerate(m)}
            f.write(answer(s, c, r) + "\n")


def main():
    rng = random.Random(3159)
    rows = [("R%04d" % i, rng.choice("12"), draw(rng, rng.choice((100, 1000, 3000, 6000)))[1:]) for i in range(400)]
    write("random", rows, "d", 1)
    rows = []
    while len(rows) < 400:
        cat, sym = rng.choice("12"), rng.choice(SYMBOLS)
        side = rng.choice([x for x in LIMITS[cat][sym] if x])
        m = bend(rng, draw(rng, rng.choice((100, 1000))), sym, int(F(side) * 1000))
        r = {d: F(m[d], 1000) for d in range(1, 16)}
        assert value(sym, r) == F(side) or sym == "P" and value(sym, r) == F(side), (sym, side, value(sym, r))
        rows.append(("L%04d" % len(rows), cat, m[1:]))
        near = list(m)
        near[rng.randrange(1, 16)] += rng.choice((-1, 1))
        rows.append(("L%04d" % len(rows), cat, near[1:]))
    write("limit", rows, "d", 1)
    rows = []
    for i in range(300):
        m = draw(rng, rng.choice((100, 3000, 9000)))[1:]
        gone = rng.choice((rng.randrange(1, 15), None))
        for d in range(15):
            if (gone is not None and d >= gone) or (gone is None and rng.random() < 0.3):
                m[d] = None
            elif rng.random() < 0.05:
                m[d] = rng.randrange(-600000, 600001)
        rows.append(("P%04d" % i, rng.choice("12"), m))
    write("partial", rows, "d", 1)
    rows = []
    for i in range(300):
        m, s = draw(rng, rng.choice((100, 2000)))[1:], [rng.randrange(-30000, 30000)]
        for x in m:
            s.append(s[-1] + x)
        for k in range(16):
            if rng.random() < rng.choice((0, 0, 0.1)):
                s[k] = None
        rows.append(("S%04d" % i, rng.choice("12"), s))
    write("states", rows, "s", 0)


if __name__ == "__main__":
    main()
