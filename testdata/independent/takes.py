"""Simulated recordings: a tone with what surrounds it in a real take, written in blocks.

Levels are dBFS as AES17 has them: a sine of peak 1.0 reads 0. noise_dbfs is the level of the white
noise over the whole bandwidth, rounding and dither included.
"""
import math
from dataclasses import dataclass, field

import numpy as np

from wavbytes import Flavour, WavFile, dither_dbfs

BLOCK_FRAMES = 1 << 18
BAND_HZ = (20.0, 20000.0)


@dataclass
class Tone:
    from_sec: float
    to_sec: float
    freq_hz: float
    level_dbfs: float
    phase: float = 0.0
    fade_sec: float = 0.0


@dataclass
class Take:
    """One recording. Events outside the tone: clicks (sec, height), talk (from, to, peak)."""
    seconds: float
    rate_hz: int = 48000
    tones: list = field(default_factory=list)
    noise_dbfs: float = -110.0
    hum: list = field(default_factory=list)        # (freq_hz, level_dbfs)
    dc: float = 0.0
    clicks: list = field(default_factory=list)
    talk: list = field(default_factory=list)
    clip_at: float = 0.0                           # 0: no clipping but that of the format
    bad: list = field(default_factory=list)        # (sec, value) put in place of one sample
    channels: int = 1
    channel: int = 1
    idle_noise_dbfs: float = -105.0                # in the other channels
    crosstalk_db: float = -math.inf                # of the signal into the other channels
    flavour: Flavour = Flavour()
    dither: bool = True

    @property
    def frames(self):
        return round(self.seconds * self.rate_hz)


def band_share(rate_hz):
    """The part of white noise's power that lies in 20 Hz to 20 kHz."""
    top = rate_hz / 2
    return (min(BAND_HZ[1], top) - BAND_HZ[0]) / top


def noise_for_snr(level_dbfs, snr_db, rate_hz):
    """The noise level, whole bandwidth, that puts a tone snr_db over the noise in the band."""
    return level_dbfs - snr_db - 10 * math.log10(band_share(rate_hz))


def snr_in_band(level_dbfs, noise_dbfs, rate_hz):
    return level_dbfs - noise_dbfs - 10 * math.log10(band_share(rate_hz))


def floor_dbfs(take):
    """The lowest noise the format allows."""
    return dither_dbfs(take.flavour) if take.dither else -math.inf


def _power(dbfs):
    return 10 ** (dbfs / 10) / 2 if dbfs > -math.inf else 0.0


def _add_noise(y, dbfs, rng):
    power = _power(dbfs)
    if power > 0:
        y += rng.standard_normal(len(y), dtype=np.float32) * np.float32(math.sqrt(power))


def _add_tone(y, first, rate_hz, tone):
    a = max(first, round(tone.from_sec * rate_hz))
    b = min(first + len(y), round(tone.to_sec * rate_hz))
    if a >= b:
        return
    t = np.arange(a, b, dtype=float) / rate_hz
    x = 10 ** (tone.level_dbfs / 20) * np.sin(2 * math.pi * tone.freq_hz * t + tone.phase)
    if tone.fade_sec:
        edge = np.minimum(t - tone.from_sec, tone.to_sec - t) / tone.fade_sec
        x *= 0.5 - 0.5 * np.cos(math.pi * np.clip(edge, 0, 1))
    y[a - first:b - first] += x


def _add_click(y, first, rate_hz, sec, height):
    """A plug going in: a spike that rings for some milliseconds."""
    a = max(first, round(sec * rate_hz))
    b = min(first + len(y), round((sec + 0.03) * rate_hz))
    if a < b:
        t = np.arange(a, b) / rate_hz - sec
        y[a - first:b - first] += height * np.exp(-t / 0.002) * np.cos(2 * math.pi * 800 * t)


def _talk(rate_hz, from_sec, to_sec, peak, seed):
    """Syllables: harmonics of a gliding voice and hiss under a slow envelope."""
    rng = np.random.default_rng(seed)
    n = round((to_sec - from_sec) * rate_hz)
    t = np.arange(n) / rate_hz
    pitch = 120 + 25 * np.sin(2 * math.pi * 2.1 * t + rng.uniform(0, 6))
    turn = 2 * math.pi * np.cumsum(pitch) / rate_hz
    voice = sum(np.sin(k * turn + rng.uniform(0, 6)) / k for k in range(1, 9))
    voice += 0.3 * rng.standard_normal(n)
    shape = np.abs(np.sin(2 * math.pi * 3.3 * t)) ** 1.5 * np.sin(math.pi * np.arange(n) / max(n, 1))
    voice *= shape
    return peak * voice / max(np.abs(voice).max(), 1e-12)


def signal_block(take, first, count, rng):
    """The recorded channel, frames first to first + count, before the format's own rounding."""
    y = np.zeros(count)
    for tone in take.tones:
        _add_tone(y, first, take.rate_hz, tone)
    t = np.arange(first, first + count) / take.rate_hz if take.hum else None
    for freq_hz, level_dbfs in take.hum:
        y += 10 ** (level_dbfs / 20) * np.sin(2 * math.pi * freq_hz * t + 0.7 * freq_hz)
    for sec, height in take.clicks:
        _add_click(y, first, take.rate_hz, sec, height)
    for i, (from_sec, to_sec, peak) in enumerate(take.talk):
        x = _talk(take.rate_hz, from_sec, to_sec, peak, 77 + i)
        at = round(from_sec * take.rate_hz)
        a, b = max(at, first), min(at + len(x), first + count)
        if a < b:
            y[a - first:b - first] += x[a - at:b - at]
    y += take.dc
    rest = _power(take.noise_dbfs) - _power(floor_dbfs(take))
    _add_noise(y, 10 * math.log10(2 * rest) if rest > 0 else -math.inf, rng)
    if take.clip_at:
        np.clip(y, -take.clip_at, take.clip_at, out=y)
    for sec, value in take.bad:
        k = round(sec * take.rate_hz) - first
        if 0 <= k < count:
            y[k] = value
    return y


def write_take(path, take, seed):
    """Writes one take; the same seed gives the same bytes."""
    rng = np.random.Generator(np.random.PCG64(seed))
    out = WavFile(path, take.flavour, take.rate_hz, take.channels, take.frames)
    for first in range(0, take.frames, BLOCK_FRAMES):
        count = min(BLOCK_FRAMES, take.frames - first)
        y = signal_block(take, first, count, rng) * take.flavour.scale
        if take.channels > 1:
            block = np.zeros((count, take.channels))
            for c in range(take.channels):
                if c == take.channel - 1:
                    block[:, c] = y
                    continue
                _add_noise(block[:, c], take.idle_noise_dbfs, rng)
                if take.crosstalk_db > -math.inf:
                    block[:, c] += y * 10 ** (take.crosstalk_db / 20)
            y = block
        out.write(y, rng if take.dither else None)
    out.close()
