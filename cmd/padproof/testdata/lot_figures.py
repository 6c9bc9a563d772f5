"""Statistics of a lot, worked from its table by numpy and scipy.

    python3 lot_figures.py LOT.csv LOW HIGH

Interval of a yield: Clopper and Pearson, by beta quantiles. Of a mean: Student. Of a standard
deviation: chi-square. Capability overall by the standard deviation, within by the mean moving
range over 1.128; chart limits three of the latter from the mean, 3.267 mean ranges for a range.
"""
import csv
import json
import sys

import numpy
from scipy import stats

rows = list(csv.DictReader(open(sys.argv[1], newline="", encoding="utf-8")))
low, high = float(sys.argv[2]), float(sys.argv[3])
n, k = len(rows), sum(r["verdict"] == "PASS" for r in rows)
x = numpy.array([float(r["loss"]) for r in rows if r["loss"]])
m, s = x.mean(), x.std(ddof=1)
t = stats.t.interval(0.95, len(x) - 1, m, s / len(x) ** 0.5)
chi = stats.chi2.ppf([0.975, 0.025], len(x) - 1)
jump = numpy.abs(numpy.diff(x)).mean()
within = jump / 1.128
room = min(high - m, m - low)
json.dump({
    "yield": k / n,
    "yield_low": stats.beta.ppf(0.025, k, n - k + 1) if k else 0,
    "yield_high": stats.beta.ppf(0.975, k + 1, n - k) if k < n else 1,
    "mean": m, "mean_low": t[0], "mean_high": t[1],
    "sd": s, "sd_low": s * ((len(x) - 1) / chi[0]) ** 0.5, "sd_high": s * ((len(x) - 1) / chi[1]) ** 0.5,
    "cp": (high - low) / (6 * s), "cpk": room / (3 * s), "within_sd": within, "within_cpk": room / (3 * within),
    "chart_low": m - 3 * within, "chart_high": m + 3 * within, "range_high": 3.267 * jump,
}, sys.stdout)
