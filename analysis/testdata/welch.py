"""Welch's estimate by scipy.signal of samples read as float64 from a file, under the window whose
coefficients are given: mean squares a bin, written as float64.

    welch.py SAMPLES RESULT SEGMENT a0 a1 a2 ...
"""

import sys

import numpy
import scipy.signal

x = numpy.fromfile(sys.argv[1])
n = int(sys.argv[3])
window = scipy.signal.windows.general_cosine(n, [float(a) for a in sys.argv[4:]], sym=False)
_, density = scipy.signal.welch(x, 1.0, window, n, n // 2, detrend=False, scaling="density")
(density / n).tofile(sys.argv[2])
