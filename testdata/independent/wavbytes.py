"""WAV files byte by byte: every flavour a recorder writes, and a few that dying ones leave behind."""
import struct
from dataclasses import dataclass

import numpy as np

SUBFORMAT_TAIL = bytes.fromhex("000000001000800000aa00389b71")
UNKNOWN = 0xFFFFFFFF


@dataclass(frozen=True)
class Flavour:
    """How samples are laid down. bits is the container's width, valid the bits used of it."""
    bits: int = 24
    is_float: bool = False
    valid: int = 0               # 0: all of them
    extensible: bool = False
    form: bytes = b"RIFF"        # RIFF, RF64 or BW64
    fmt_bytes: int = 16          # 18 adds an empty extension
    before: tuple = ()           # chunks (id, bytes) ahead of fmt
    between: tuple = ()          # between fmt and data
    trailing: tuple = ()         # after data
    sizes: object = None         # what the RIFF and data sizes say instead of the truth
    scale: float = 1.0           # for float takes: what full scale is written as

    @property
    def used_bits(self):
        return self.valid or self.bits


def quantise(x, flavour, rng=None):
    """Bytes of samples in [-1, 1]: rounded after triangular dither where rng is given."""
    if flavour.is_float:
        return x.astype("<f4" if flavour.bits == 32 else "<f8").tobytes()
    full = 2.0 ** (flavour.used_bits - 1)
    y = x * full
    if rng is not None:
        y += rng.random(x.shape, dtype=np.float32)
        y -= rng.random(x.shape, dtype=np.float32)
    np.rint(y, out=y)
    np.clip(y, -full, full - 1, out=y)
    if flavour.bits == 8:
        return (y + 128).astype(np.uint8).tobytes()
    if flavour.bits == 16:
        return y.astype("<i2").tobytes()
    words = y.astype(np.int64) << (flavour.bits - flavour.used_bits)
    if flavour.bits == 32:
        return words.astype("<i4").tobytes()
    return np.ascontiguousarray(words.astype("<i4").reshape(-1, 1).view(np.uint8)[:, :3]).tobytes()


def dither_dbfs(flavour):
    """Level of rounding and its dither over the whole bandwidth; -inf for float."""
    if flavour.is_float:
        return -np.inf
    step = 2.0 ** (1 - flavour.used_bits)
    return 10 * np.log10(3 * step * step / 12 / 0.5)   # the dither adds twice the rounding's power


def chunk(name, body):
    return name + struct.pack("<I", len(body)) + body + b"\0" * (len(body) & 1)


def _fmt(flavour, rate_hz, channels):
    block = channels * flavour.bits // 8
    tag = 3 if flavour.is_float else 1
    body = struct.pack("<HHIIHH", 0xFFFE if flavour.extensible else tag, channels, rate_hz,
                       rate_hz * block, block, flavour.bits)
    if flavour.extensible:
        body += struct.pack("<HHIH", 22, flavour.used_bits, 0, tag) + SUBFORMAT_TAIL
    elif flavour.fmt_bytes == 18:
        body += struct.pack("<H", 0)
    return chunk(b"fmt ", body)


def header(flavour, rate_hz, channels, frames):
    """Everything ahead of the first sample."""
    data = frames * channels * flavour.bits // 8
    long = flavour.form != b"RIFF"
    middle = b"".join(chunk(*c) for c in flavour.before) + _fmt(flavour, rate_hz, channels)
    if flavour.is_float:
        middle += chunk(b"fact", struct.pack("<I", frames))
    middle += b"".join(chunk(*c) for c in flavour.between)
    tail = sum(len(chunk(*c)) for c in flavour.trailing)
    riff = 4 + (36 if long else 0) + len(middle) + 8 + data + (data & 1) + tail
    if long:
        middle = chunk(b"ds64", struct.pack("<QQQI", riff, data, frames, 0)) + middle
        riff = data = UNKNOWN
    elif flavour.sizes is not None:
        riff = data = flavour.sizes
    return flavour.form + struct.pack("<I", riff) + b"WAVE" + middle + b"data" + struct.pack("<I", data)


class WavFile:
    """A WAV written piece by piece; its length is said beforehand."""

    def __init__(self, path, flavour, rate_hz, channels, frames):
        self.flavour, self.odd = flavour, frames * channels * flavour.bits // 8 & 1
        self.file = open(path, "wb")
        self.file.write(header(flavour, rate_hz, channels, frames))

    def write(self, frames, rng=None):
        self.file.write(quantise(frames, self.flavour, rng))

    def close(self):
        self.file.write(b"\0" * self.odd + b"".join(chunk(*c) for c in self.flavour.trailing))
        self.file.close()


def read_samples(path):
    """Plain samples back, for the self-test: rate, array (frames, channels). Whole header trusted."""
    with open(path, "rb") as f:
        raw = f.read()
    at, form = 12, None
    while at + 8 <= len(raw):
        name, size = raw[at:at + 4], struct.unpack_from("<I", raw, at + 4)[0]
        if name == b"fmt ":
            form = struct.unpack_from("<HHIIHH", raw, at + 8)
        if name == b"data":
            break
        at += 8 + size + (size & 1)
    tag, channels, rate_hz, _, block, bits = form
    body = raw[at + 8:at + 8 + size // block * block]
    if tag == 3:
        x = np.frombuffer(body, "<f4" if bits == 32 else "<f8").astype(float)
    elif bits == 24:
        b = np.frombuffer(body, np.uint8).reshape(-1, 3).astype(np.int32)
        x = ((b[:, 0] << 8 | b[:, 1] << 16 | b[:, 2] << 24) >> 8) / 2.0 ** 23
    elif bits == 8:
        x = (np.frombuffer(body, np.uint8).astype(float) - 128) / 128
    else:
        x = np.frombuffer(body, f"<i{bits // 8}") / 2.0 ** (bits - 1)
    return rate_hz, x.reshape(-1, channels)
