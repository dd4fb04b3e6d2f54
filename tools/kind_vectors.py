#!/usr/bin/env python3
"""Write testdata/kinds.json: criteria beyond the seven, standard deviations by Python's statistics
module on decimals of 50 digits. Run from the project's top level:

    python3 tools/kind_vectors.py
"""
import decimal
import json
import platform
import random
import statistics

decimal.getcontext().prec = 50
rng = random.Random(3159)


def six(x):
    """Six decimals, half to even; none of these values is a tie."""
    return str(x.quantize(decimal.Decimal("0.000001"), decimal.ROUND_HALF_EVEN))


cases = []
for _ in range(40):
    n = 2 * rng.randint(2, 14)
    rates = [rng.randint(-9000, 9000) for _ in range(n)]
    values = [decimal.Decimal(r) / 1000 for r in rates]
    sums = [a + b for a, b in zip(rates[::2], rates[1::2])]
    cases.append({
        "rates_thousandths": rates,
        "deviation_n": six(statistics.pstdev(values)),
        "deviation_n-1": six(statistics.stdev(values)),
        "range_thousandths": max(rates) - min(rates),
        "pair_sums_range_thousandths": max(sums) - min(sums),
        "pair_sums_step_thousandths": max(abs(b - a) for a, b in zip(sums, sums[1:])),
    })
with open("testdata/kinds.json", "w") as f:
    source = f"tools/kind_vectors.py, the statistics module of Python {platform.python_version()}"
    rows = ",\n  ".join(json.dumps(c) for c in cases)
    f.write(f'{{\n "_source": "{source}",\n "cases": [\n  {rows}\n ]\n}}\n')
