"""Transfer from one channel to another by scipy.signal, as 20 lg and phase in bands.

usage: transfer_scipy.py X Y RATE SEGMENT_SEC BANDS
X and Y hold float64 samples, BANDS a line "low high" in Hz each. Writes a line
"db phase_rad coherence" for each band: cross-spectral density over density of X,
each summed over the band's bins.
"""
import sys

import numpy as np
from scipy import signal

x, y = np.fromfile(sys.argv[1]), np.fromfile(sys.argv[2])
rate, segment = float(sys.argv[3]), float(sys.argv[4])
n = round(rate * segment)
how = dict(fs=rate, window="hann", nperseg=n, noverlap=n // 2, detrend=False)
f, xy = signal.csd(x, y, **how)
_, xx = signal.welch(x, **how)
_, yy = signal.welch(y, **how)
for line in open(sys.argv[5]):
    low, high = map(float, line.split())
    k = (f >= low) & (f <= high)
    h = xy[k].sum() / xx[k].sum()
    print(20 * np.log10(abs(h)), np.angle(h), abs(xy[k].sum()) ** 2 / (xx[k].sum() * yy[k].sum()))
