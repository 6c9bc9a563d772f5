"""What is played: the test signal from its published schedule, plain and stepped tones, noise.

A source is a function of its own time: volume(first_sec, step_sec, count) gives its value at evenly
spaced moments, between the player's samples too, so that a recorder with another clock or rate is
simulated without resampling. Levels are dBFS (a sine of peak 1.0 reads 0).
"""
import math
from dataclasses import dataclass, field

import numpy as np

TONE_HZ, LOUD_DBFS, STEP_DB = 997.0, -6.0, 10.0
MARKER_EDGE_SEC, TONE_EDGE_SEC, SWEEP_RISE_SEC, SWEEP_FALL_SEC = 0.025, 0.005, 0.1, 0.02

# name, seconds
STAGES = (("lead-in", 1.0), ("opening", 0.25), ("gap", 0.5), ("tone", 4.0), ("low", 2.0), ("gap", 0.5),
          ("sweep", 6.0), ("gap", 0.5), ("silence", 8.0), ("closing", 0.25), ("lead-out", 0.5))
SIGNAL_SEC = sum(sec for _, sec in STAGES)


def starts():
    """Where each stage begins, by name; of the gaps the last counts."""
    at, table = 0.0, {}
    for name, sec in STAGES:
        table[name] = at
        at += sec
    return table


AT = starts()


def raised(m, total, rise, fall):
    """Raised-cosine edges over rise and fall samples: 0 at the very ends."""
    gain = np.ones(len(m))
    for at, over in ((m, rise), (total - 1 - m, fall)):
        if over:
            near = at < over
            gain[near] *= 0.5 - 0.5 * np.cos(np.pi * at[near] / over)
    return gain


@dataclass
class TestSignal:
    """The test signal as a player of this rate puts it out."""
    rate_hz: int = 48000

    def volume(self, first_sec, step_sec, count):
        y = np.zeros(count)
        at = 0.0
        for name, sec in STAGES:
            first, following = round(at * self.rate_hz), round((at + sec) * self.rate_hz)
            at += sec
            if name in ("opening", "closing", "tone", "low", "sweep"):
                a = max(0, math.ceil((first / self.rate_hz - first_sec) / step_sec))
                b = min(count, math.ceil((following / self.rate_hz - first_sec) / step_sec))
                if a < b:
                    m = (first_sec + np.arange(a, b) * step_sec) * self.rate_hz - first
                    y[a:b] = self._stage(name, sec, m, following - first)
        return y

    def _stage(self, name, sec, m, total):
        rate, peak = self.rate_hz, 10 ** (LOUD_DBFS / 20)
        t = m / rate
        if name in ("opening", "closing"):
            top = min(5000.0, 0.45 * rate)
            f0, f1 = (1000.0, top) if name == "opening" else (top, 1000.0)
            edge = MARKER_EDGE_SEC * rate
            return peak * raised(m, total, edge, edge) * np.sin(2 * np.pi * (f0 * t + (f1 - f0) * t * t / (2 * sec)))
        if name == "sweep":
            f0, f1 = 10.0, min(40000.0, 0.48 * rate)
            steep = math.log(f1 / f0) / sec
            return (peak * raised(m, total, SWEEP_RISE_SEC * rate, SWEEP_FALL_SEC * rate)
                    * np.sin(2 * np.pi * f0 / steep * np.expm1(steep * t)))
        edge = TONE_EDGE_SEC * rate
        if name == "tone":
            return peak * raised(m, total, edge, 0.0) * np.sin(2 * np.pi * TONE_HZ * t)
        skip = AT["low"] - AT["tone"]
        return (peak * 10 ** (-STEP_DB / 20) * raised(m, total, 0.0, edge)
                * np.sin(2 * np.pi * (TONE_HZ * t + math.fmod(TONE_HZ * skip, 1.0))))

    @property
    def sec(self):
        return SIGNAL_SEC

    def tones(self):
        """(from, to, hz, dBFS) of its steady tones."""
        return [(AT["tone"], AT["low"], TONE_HZ, LOUD_DBFS), (AT["low"], AT["low"] + 2.0, TONE_HZ, LOUD_DBFS - STEP_DB)]


@dataclass
class Tones:
    """Steady tones one after another: (from, to, hz, dBFS). Drift is over the whole, dB and ppm."""
    list: list
    drift_db: float = 0.0
    drift_ppm: float = 0.0
    phase: float = 0.0
    fade_sec: float = 0.005

    @property
    def sec(self):
        return max(to for _, to, _, _ in self.list)

    def tones(self):
        return self.list

    def volume(self, first_sec, step_sec, count):
        y = np.zeros(count)
        for begin, end, hz, dbfs in self.list:
            a = max(0, math.ceil((begin - first_sec) / step_sec))
            b = min(count, math.ceil((end - first_sec) / step_sec))
            if a >= b:
                continue
            t = first_sec + np.arange(a, b) * step_sec - begin
            part = t / (end - begin)
            turn = hz * (t + self.drift_ppm * 1e-6 * (t * part / 2 - t / 2))
            x = 10 ** ((dbfs + self.drift_db * (part - 0.5)) / 20) * np.sin(2 * np.pi * turn + self.phase)
            if self.fade_sec:
                edge = np.clip(np.minimum(t, end - begin - t) / self.fade_sec, 0, 1)
                x *= 0.5 - 0.5 * np.cos(np.pi * edge)
            y[a:b] += x
        return y


def plain(hz, dbfs, sec, **more):
    return Tones([(0.0, sec, hz, dbfs)], **more)


@dataclass
class Noise:
    """Noise of a pink spectrum from 15 Hz to 0.46 of the rate that begins and ends in silence.

    It is a sum of sines that fit sec a whole number of times, so its value anywhere between its
    samples comes from the same sum (chirp transform, Bluestein 1970).
    """
    sec: float
    rate_hz: int
    rms_dbfs: float
    seed: int
    _c: np.ndarray = field(default=None, repr=False)

    def coefficients(self):
        if self._c is None:
            rng = np.random.Generator(np.random.PCG64([self.seed, 468]))
            n = round(self.sec * self.rate_hz)
            hz = np.arange(n // 2 + 1) / self.sec
            keep = (hz >= 15) & (hz <= 0.46 * self.rate_hz)
            c = np.zeros(n // 2 + 1, complex)
            c[keep] = (rng.standard_normal(keep.sum()) + 1j * rng.standard_normal(keep.sum())) / np.sqrt(hz[keep])
            # Silent ends: multiply by a raised-cosine window in time, keep what stays in band.
            x = np.fft.irfft(c, n)
            edge = np.clip(np.minimum(np.arange(n), n - 1 - np.arange(n)) / self.rate_hz / 0.2, 0, 1)
            c = np.fft.rfft(x * (0.5 - 0.5 * np.cos(np.pi * edge))) / n
            c[~keep] = 0
            power = 2 * np.sum(np.abs(c) ** 2)
            self._c = c * math.sqrt(10 ** (self.rms_dbfs / 10) / 2 / power)
        return self._c

    def tones(self):
        return []

    def volume(self, first_sec, step_sec, count):
        y = np.zeros(count)
        a = max(0, math.ceil(-first_sec / step_sec))
        b = min(count, math.ceil((self.sec - first_sec) / step_sec))
        if a < b:
            begin = first_sec + a * step_sec
            c = self.coefficients()
            k = np.arange(len(c))
            x = chirp_sum(2 * c * np.exp(2j * np.pi * k * begin / self.sec), step_sec / self.sec, b - a)
            y[a:b] = x.real
        return y


def chirp_sum(c, turn, count):
    """Σ c[k] exp(2πi k n turn) for n below count."""
    size = 1 << math.ceil(math.log2(len(c) + count))
    longest = max(len(c), count)
    square = np.arange(longest, dtype=float) ** 2
    w = np.exp(1j * np.pi * np.mod(square * turn, 2.0))
    a = np.zeros(size, complex)
    a[:len(c)] = c * w[:len(c)]
    b = np.zeros(size, complex)
    b[:count] = np.conj(w[:count])
    b[size - len(c) + 1:] = np.conj(w[len(c) - 1:0:-1])
    return np.fft.ifft(np.fft.fft(a) * np.fft.fft(b))[:count] * w[:count]
