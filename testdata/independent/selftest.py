#!/usr/bin/env python3
"""Check the simulation itself against closed forms: losses, levels, noise, bytes, codes.

Prints a line for each group and ends with status 1 if any figure is off.
"""
import math
import os
import tempfile

import numpy as np

from circuit import DRIVES, SENSES, Ends, Part, Simulator
from drawing import BALANCED, E24, UNBALANCED, code, matched, standard_pad
from takes import Take, Tone, noise_for_snr, write_take
from unit import FLOAT32, INTEGER16, INTEGER24
from wavbytes import Flavour, WavFile, read_samples

failures = []


def near(what, got, want, tol):
    if not abs(got - want) <= tol:
        failures.append(f"{what} = {got:.9g}, want {want:.9g} ± {tol:g}")


def db(ratio):
    return 20 * math.log10(abs(ratio))


def parallel(*z):
    return 1 / sum(1 / v for v in z)


def losses():
    """Against formulas: matched pads, an L pad between unequal ends, a reactive load, each drive and sense."""
    sim, wants = Simulator(), []

    def ask(what, want, pad_parts, unbalanced, ends, freq_hz=997.0):
        wants.append((what, want, sim.ask(pad_parts, unbalanced, ends, freq_hz)))

    for network in UNBALANCED + BALANCED:
        kind = "unbalanced" if network in UNBALANCED else "floating"
        for loss_db in (3.0, 10.0, 20.0, 60.0):
            pad = standard_pad(network, matched(network, loss_db, 600.0))
            if network == "U":      # K = 1 + series/shunt without a load; ends that do not count
                rs, arms, shunt = 1e-3, 2 * pad.parts[0].value, pad.parts[2].value
                ends, want = Ends(rs, kind, 1e12, kind), db((rs + arms + shunt) / shunt)
                name = "unloaded U"
            elif network == "L":    # the source sees 600, so matched voltage loss is that of the divider
                a, b = (p.value for p in pad.parts)
                ends = Ends(600.0, kind, 600.0, kind)
                want = db(0.5 * (600 + a + parallel(b, 600)) / parallel(b, 600))
                name = "L"
            else:
                ends, want, name = Ends(600.0, kind, 600.0, kind), loss_db, "matched " + network
            ask(f"loss of {name}, {loss_db:g} dB", want, pad.parts, pad.unbalanced, ends)

    # A minimum-loss L pad, 600 to 150 ohm: published 11.439 dB matched, 9.5008 dB inserted.
    zh, zl = 600.0, 150.0
    series, shunt = math.sqrt(zh * (zh - zl)), zl * math.sqrt(zh / (zh - zl))
    pad = standard_pad("L", [series, shunt])
    ask("minimum-loss L", 9.500751, pad.parts, True, Ends(zh, "unbalanced", zl, "unbalanced"))

    # A cable and an inductor at 10 kHz.
    rs, rl, c, henry, freq_hz = 600.0, 20000.0, 1e-9, 10e-3, 10000.0
    w = 2 * math.pi * freq_hz
    load = parallel(rl, 1 / (1j * w * c))
    parts = [Part("L1", "L", ("in.hot", "m"), henry), Part("R1", "R", ("m", "out.hot"), 470.0),
             Part("R2", "R", ("out.hot", "screen"), 330.0)]
    with_pad = parallel(load, 330.0)
    want = db((load / (rs + load)) / (with_pad / (rs + 1j * w * henry + 470 + with_pad)))
    ask("L, coil and cable", want, parts, True, Ends(rs, "unbalanced", rl, "unbalanced", c), freq_hz)

    for drive in DRIVES:
        for sense in SENSES:
            ends = Ends(100.0, drive, 10000.0, sense)
            ask(f"U pad, {drive} to {sense}", u_pad_db(560.0, 560.0, 330.0, ends),
                standard_pad("U", [560.0, 560.0, 330.0]).parts, False, ends)
            ask(f"uneven U pad, {drive} to {sense}", u_pad_db(470.0, 820.0, 330.0, ends),
                standard_pad("U", [470.0, 820.0, 330.0]).parts, False, ends)
            ask(f"T pad, {drive} to {sense}", t_pad_db(300.0, 300.0, 450.0, ends),
                standard_pad("T", [300.0, 300.0, 450.0]).parts, True, ends)
    got = sim.run()
    for what, want, place in wants:
        near(what, got[place], want, 2e-6)
    return len(wants)


def u_pad_db(hot, cold, shunt, e):
    """A U pad by mesh and node, one small linear system a case: hot and cold output nodes."""
    def volts(r_hot, r_cold, r_shunt):
        g_hot, g_cold, v_hot, v_cold = {
            "balanced": (1 / (e.source_ohms / 2 + r_hot), 1 / (e.source_ohms / 2 + r_cold), 0.5, -0.5),
            "impedance-balanced": (1 / (e.source_ohms / 2 + r_hot), 1 / (e.source_ohms / 2 + r_cold), 1.0, 0.0),
            "unbalanced": (1 / (e.source_ohms + r_hot), 1 / r_cold if r_cold else 1e12, 1.0, 0.0),
            "floating": (0.0, 0.0, 0.0, 0.0),
        }[e.drive]
        y = np.array([[g_hot, 0.0], [0.0, g_cold]])
        i = np.array([g_hot * v_hot, g_cold * v_cold])

        def across(g):
            y[0, 0] += g
            y[1, 1] += g
            y[0, 1] -= g
            y[1, 0] -= g
        if e.drive == "floating":
            g = 1 / (e.source_ohms + r_hot + r_cold)
            across(g)
            i += [g, -g]
            y[1, 1] += 1e-13
        if r_shunt:
            across(1 / r_shunt)
        if e.sense == "balanced":
            y[0, 0] += 2 / e.load_ohms
            y[1, 1] += 2 / e.load_ohms
        elif e.sense == "floating":
            across(1 / e.load_ohms)
        else:
            y[0, 0] += 1 / e.load_ohms
            y[1, 1] += 1e12
        v = np.linalg.solve(y, i)
        return v[0] - v[1]
    # Straight through, hot to hot and cold to cold: no series arms and no shunt.
    return db(volts(0.0, 0.0, 0.0) / volts(hot, cold, shunt))


def t_pad_db(r_in, r_out, shunt, e):
    """A T pad has one live leg: half the source against half the drive, and half the load, where balanced."""
    rs = e.source_ohms / (2 if e.drive in ("balanced", "impedance-balanced") else 1)
    rl = e.load_ohms / (2 if e.sense == "balanced" else 1)
    middle = parallel(shunt, r_out + rl)
    with_pad = middle / (rs + r_in + middle) * rl / (r_out + rl)
    return db(rl / (rs + rl) / with_pad)


def takes():
    """A written tone read back: level and noise by a plain least-squares fit at its known frequency."""
    count = 0
    with tempfile.TemporaryDirectory() as where:
        path = os.path.join(where, "take.wav")
        for flavour in (INTEGER16, INTEGER24, FLOAT32, Flavour(32), Flavour(64, is_float=True)):
            for rate_hz in (8000, 44100, 96000):
                level, snr = -23.4, 62.0
                take = Take(3.0, rate_hz, [Tone(0.5, 2.5, 1000.37, level, 0.4)], noise_for_snr(level, snr, rate_hz),
                            dc=0.003, flavour=flavour, channels=2, channel=2)
                write_take(path, take, 5)
                got_rate, x = read_samples(path)
                near("rate", got_rate, rate_hz, 0)
                near("frames", len(x), take.frames, 0)
                n = np.arange(round(0.5 * rate_hz), round(2.5 * rate_hz))
                turn = 2 * math.pi * 1000.37 * n / rate_hz
                a = np.stack([np.ones(len(n)), np.sin(turn), np.cos(turn)], 1)
                fit, rest, *_ = np.linalg.lstsq(a, x[n, 1], rcond=None)
                noise_dbfs = 10 * math.log10(rest[0] / len(n) * 2)
                what = f"{flavour.bits} bits, {rate_hz} Hz"
                near("level, " + what, db(math.hypot(fit[1], fit[2])), level, 3e-4)
                near("offset, " + what, fit[0], 0.003, 1e-5)
                near("noise, " + what, noise_dbfs, take.noise_dbfs, 0.25)
                spectrum = np.abs(np.fft.rfft(x[n, 1] - a @ fit)) ** 2
                f = np.arange(len(spectrum)) * rate_hz / len(n)
                band = spectrum[(f >= 20) & (f <= 20000)].sum() * 2 / len(n) ** 2
                near("signal to noise, " + what, level - 10 * math.log10(band * 2), snr, 0.25)
                count += 4
    return count


def wav_bytes():
    """Samples at the ends of every integer range come back as they went in."""
    count = 0
    with tempfile.TemporaryDirectory() as where:
        path = os.path.join(where, "bytes.wav")
        for bits in (8, 16, 24, 32):
            full = 1 << (bits - 1)
            words = np.array([-full, -full + 1, -1, 0, 1, full // 3, full - 1])
            out = WavFile(path, Flavour(bits), 48000, 1, len(words))
            out.write(words.reshape(-1, 1) / full)
            out.close()
            _, x = read_samples(path)
            for got, want in zip(x[:, 0] * full, words, strict=True):
                near(f"{bits}-bit sample", got, want, 0)
                count += 1
            size = os.path.getsize(path)
            near(f"{bits}-bit file size", size, 44 + (len(words) * bits // 8 + 1) // 2 * 2, 0)
    return count


def codes():
    """Marks of parts read back as the values they stand for."""
    count = 0
    for kind, letters in (("R", {"R": 1.0, "k": 1e3, "M": 1e6}), ("C", {"p": 1e-12, "n": 1e-9, "u": 1e-6}),
                          ("L", {"u": 1e-6, "m": 1e-3})):
        for unit in letters.values():
            for m in (*E24, 10.0, 47.0, 220.0):
                text = code(kind, m * unit)
                letter = next((c for c in letters if c in text), "R")
                near(text, float(text.replace(letter, ".") if letter in text else text) * letters.get(letter, 1.0),
                     m * unit, 1e-6 * m * unit)
                count += 1
    return count


def main():
    for check in (losses, takes, wav_bytes, codes):
        print(f"{check.__name__}: {check()} figures")
    for line in failures:
        print("off:", line)
    return 1 if failures else 0


if __name__ == "__main__":
    raise SystemExit(main())
