"""A recording of something played through a bench: the recorder's clock, curve, noise, hum, and its mishaps.

A Line is one channel of a take. What is played is taken at the recorder's own moments, put through the
complex curve of bench and pad by a transform of the whole take, then meets what the recorder adds.
"""
import math
from dataclasses import dataclass, field

import numpy as np

from wavbytes import Flavour, WavFile, dither_dbfs

STOP_FROM, STOP_TO = 0.465, 0.5     # of the rate: where the recorder's own filter closes


@dataclass
class Line:
    """One channel. Levels are dBFS in the take; noise_dbfs is white, over the whole bandwidth."""
    source: object = None
    curve: object = None                            # Curve; None: flat
    gain: float = 1.0                               # may be negative
    noise_dbfs: float = -110.0
    density: object = None                          # hz -> noise power per Hz, besides the white
    hum: list = field(default_factory=list)         # (hz, dBFS)
    harmonics: list = field(default_factory=list)   # (k, dB relative to the tone as recorded)
    dc: float = 0.0
    events: list = field(default_factory=list)      # (sec, length_sec, dB): the signal's level changes
    crackles: list = field(default_factory=list)    # (sec, length_sec, peak)
    clicks: list = field(default_factory=list)      # (sec, height)
    ride: tuple = None                              # (compression dB, time constant sec): automatic gain
    clip_at: float = 0.0
    clips_first: bool = False                       # ahead of the recorder's noise, not in its converter


@dataclass
class Recording:
    """A take. Signal second 0 lies at start_sec; ratio is recorder seconds per signal second."""
    seconds: float
    lines: list
    rate_hz: int = 48000
    start_sec: float = 0.0
    ratio: float = 1.0
    flavour: Flavour = Flavour(24)
    dither: bool = True
    lost: list = field(default_factory=list)        # (sec, frames, "gone" | "zero" | "again")
    bad: list = field(default_factory=list)         # (sec, value) of one sample of the first line

    @property
    def frames(self):
        return round(self.seconds * self.rate_hz)

    def but(self, **changes):
        return type(self)(**{**self.__dict__, **changes})


def power_of(dbfs):
    return 10 ** (dbfs / 10) / 2 if dbfs > -math.inf else 0.0


def fast_length(n):
    """The next length made of 2, 3 and 5 alone."""
    best = 1 << math.ceil(math.log2(n))
    five = 1
    while five < best:
        three = five
        while three < best:
            size = three << max(0, math.ceil(math.log2(n / three)))
            if n <= size < best:
                best = size
            three *= 3
        five *= 5
    return best


def played(line, take):
    """What of the source reaches the recorder's samples."""
    fine = 1
    if line.source is not None and getattr(line.source, "rate_hz", 0) > 1.02 * take.rate_hz:
        fine = math.ceil(line.source.rate_hz / take.rate_hz)
    step = 1 / (take.rate_hz * fine) / take.ratio
    y = line.source.volume(-take.start_sec / take.ratio, step, take.frames * fine)
    y *= line.gain
    if line.curve is None and fine == 1:
        return y
    size = fast_length(take.frames)
    spectrum = np.fft.rfft(y, size * fine)[:size // 2 + 1] / fine
    hz = np.arange(size // 2 + 1) * take.rate_hz / size
    if line.curve is not None:
        spectrum *= line.curve.at(hz * take.ratio)
    if fine > 1:
        share = np.clip((hz / take.rate_hz - STOP_FROM) / (STOP_TO - STOP_FROM), 0, 1)
        spectrum *= 0.5 + 0.5 * np.cos(np.pi * share)
    return np.fft.irfft(spectrum, size)[:take.frames]


def shaped_noise(density, take, rng):
    """Gaussian noise whose one-sided power density over hz is given."""
    size = fast_length(take.frames)
    hz = np.arange(size // 2 + 1) * take.rate_hz / size
    hz[0] = hz[1]
    sd = np.sqrt(density(hz) * take.rate_hz * size / 4)
    c = (rng.standard_normal(len(hz), dtype=np.float32) + 1j * rng.standard_normal(len(hz), dtype=np.float32)) * sd
    c[0] = c[0].real * math.sqrt(2)
    return np.fft.irfft(c, size)[:take.frames]


def span(take, from_sec, to_sec):
    """Frames of signal seconds."""
    return slice(*(min(max(round(take.start_sec * take.rate_hz + s * take.ratio * take.rate_hz), 0), take.frames)
                   for s in (from_sec, to_sec)))


def add_harmonics(y, line, take):
    for begin, end, hz, dbfs in line.source.tones():
        at = span(take, begin, end)
        t = (np.arange(at.start, at.stop) / take.rate_hz - take.start_sec) / take.ratio - begin
        edge = np.clip(np.minimum(t, end - begin - t) / 0.02, 0, 1)
        shape = abs(line.gain) * (abs(line.curve.at(hz)) if line.curve is not None else 1.0) * (0.5 - 0.5 * np.cos(np.pi * edge))
        for k, db in line.harmonics:
            y[at] += 10 ** ((dbfs + db) / 20) * shape * np.sin(2 * np.pi * k * hz * t + 0.9 * k)


def ride(y, take, compression_db, time_sec):
    """Automatic gain: what lies under the loudest level is brought up towards it, by compression_db where
    it lies 10 dB under, smoothed over time_sec."""
    hop = max(1, round(take.rate_hz * 0.01))
    rms = np.sqrt(np.mean(y[:len(y) // hop * hop].reshape(-1, hop) ** 2, axis=1))
    top = rms.max()
    under = np.clip(-20 * np.log10(np.maximum(rms, top * 1e-3) / top), 0, 20)
    want = under / 10 * compression_db
    keep = math.exp(-0.01 / time_sec)
    gain_db, g = np.empty(len(want)), want[0]
    for i, w in enumerate(want):
        g = keep * g + (1 - keep) * w
        gain_db[i] = g
    t = np.arange(len(y)) / hop - 0.5
    y *= 10 ** (np.interp(t, np.arange(len(gain_db)), gain_db) / 20)


def samples(line, take, rng):
    """One channel before the format's rounding."""
    y = played(line, take) if line.source is not None else np.zeros(take.frames)
    if line.harmonics:
        add_harmonics(y, line, take)
    for sec, length, db in line.events:
        at = slice(round(sec * take.rate_hz), round((sec + length) * take.rate_hz))
        y[at] *= 10 ** (db / 20)
    if line.ride:
        ride(y, take, *line.ride)
    if line.clip_at and line.clips_first:
        np.clip(y, -line.clip_at, line.clip_at, out=y)
    t = np.arange(take.frames) / take.rate_hz if line.hum else None
    for hz, dbfs in line.hum:
        y += 10 ** (dbfs / 20) * np.sin(2 * np.pi * hz * t + 0.7 * hz)
    for sec, length, peak in line.crackles:
        at = slice(round(sec * take.rate_hz), round((sec + length) * take.rate_hz))
        n = len(y[at])
        y[at] += peak * np.sign(rng.standard_normal(n)) * (rng.random(n) < 0.05)
    for sec, height in line.clicks:
        at = slice(round(sec * take.rate_hz), round((sec + 0.03) * take.rate_hz))
        ring = np.arange(len(y[at])) / take.rate_hz
        y[at] += height * np.exp(-ring / 0.002) * np.cos(2 * np.pi * 800 * ring)
    if line.density is not None:
        y += shaped_noise(line.density, take, rng)
    rest = power_of(line.noise_dbfs) - (power_of(dither_dbfs(take.flavour)) if take.dither else 0.0)
    if rest > 0:
        y += rng.standard_normal(len(y), dtype=np.float32) * np.float32(math.sqrt(rest))
    y += line.dc
    if line.clip_at and not line.clips_first:
        np.clip(y, -line.clip_at, line.clip_at, out=y)
    return y


def lose(y, take):
    """Buffers that never reached the file, came as zeros, or came twice."""
    for sec, frames, how in take.lost:
        k = round(sec * take.rate_hz)
        if how == "gone":
            y = np.concatenate([y[:k], y[k + frames:], np.zeros((frames, y.shape[1]))])
        elif how == "zero":
            y[k:k + frames] = 0
        else:
            y[k:k + frames] = y[k - frames:k]
    return y


def write_recording(path, take, seed):
    """Writes a take; the same seed gives the same bytes."""
    rng = np.random.Generator(np.random.PCG64(seed))
    y = np.stack([samples(line, take, rng) for line in take.lines], axis=1)
    y = lose(y, take)
    for sec, value in take.bad:
        y[round(sec * take.rate_hz), 0] = value
    out = WavFile(path, take.flavour, take.rate_hz, len(take.lines), len(y))
    out.write(y, rng if take.dither else None)
    out.close()


def write_played(path, source, rate_hz):
    """What was played, as the file that was played."""
    y = source.volume(0.0, 1 / rate_hz, round(source.sec * rate_hz)).reshape(-1, 1)
    out = WavFile(path, Flavour(32, is_float=True), rate_hz, 1, len(y))
    out.write(y)
    out.close()
