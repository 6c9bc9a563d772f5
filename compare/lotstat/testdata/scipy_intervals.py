# The same intervals by scipy: reads lines "KIND numbers" and prints the two ends of each.
import sys

try:
    import numpy as np
    from scipy import stats
except ImportError:
    sys.exit(4)

for line in sys.stdin:
    kind, *rest = line.split()
    x = [float(v) for v in rest]
    if kind == "yield":
        passed, units, c = int(x[0]), int(x[1]), x[2]
        ci = stats.binomtest(passed, units).proportion_ci(c, "exact")
        print(repr(float(ci.low)), repr(float(ci.high)))
    elif kind == "mean":
        c, v = x[0], np.array(x[1:])
        print(*[repr(float(e)) for e in stats.t.interval(c, len(v) - 1, v.mean(), stats.sem(v))])
    elif kind == "sd":
        c, v = x[0], np.array(x[1:])
        ss, tail = ((v - v.mean()) ** 2).sum(), (1 - c) / 2
        n = len(v) - 1
        print(repr(float((ss / stats.chi2.ppf(1 - tail, n)) ** 0.5)), repr(float((ss / stats.chi2.ppf(tail, n)) ** 0.5)))
    elif kind == "cp":
        cp, dof, c = x
        tail = (1 - c) / 2
        print(repr(float(cp * (stats.chi2.ppf(tail, dof) / dof) ** 0.5)), repr(float(cp * (stats.chi2.ppf(1 - tail, dof) / dof) ** 0.5)))
    elif kind == "slope":
        v = np.array(x)
        r = stats.linregress(np.arange(len(v)), v)
        half = stats.t.ppf(0.975, len(v) - 2) * r.stderr
        print(repr(float(r.slope - half)), repr(float(r.slope + half)), repr(float(r.pvalue)))
    elif kind == "ttest":
        r = stats.ttest_1samp(np.array(x), 0)
        print(repr(float(r.pvalue)))
    elif kind == "width":
        sound, v = x[0], np.array(x[1:])
        print(repr(float(stats.chi2.sf(((v - v.mean()) ** 2).sum() / sound**2, len(v) - 1))))
    elif kind == "next":
        # Degrees of freedom from the moments of two correlated normal differences, in full digits.
        v, n = np.array(x), len(x)
        s = np.abs(np.diff(v)).mean() / 1.128
        var = (2 - 4 / np.pi) * (n - 1) + 2 * (n - 2) * (4 / np.pi * (np.sqrt(3) / 2 + np.pi / 12) - 4 / np.pi)
        dof = (n - 1) ** 2 * (4 / np.pi) / (2 * var)
        half = stats.t.ppf(0.99865, dof) * s * np.sqrt(1 + 1 / n)
        print(repr(float(v.mean() - half)), repr(float(v.mean() + half)))
