#!/usr/bin/env python3
"""Check the simulation of the later takes against closed forms: test signal, clock, curves, noise, mishaps.

    selftest_checks.py                    closed forms
    selftest_checks.py --signal FILE      FILE is the test signal, sample for sample, by its published schedule

Prints a line for each group and ends with status 1 if any figure is off.
"""
import argparse
import math
import os
import subprocess
import tempfile

import numpy as np

import curves
import plan_signal
from checkunit import Bench, write_check_unit
from circuit import Ends, Part
from curves import BOLTZMANN, Case, band_volts2, dbu
from drawing import matched, standard_pad
from plan_noise import noise_take
from record import Line, Recording, fast_length, played, samples, write_recording
from selftest import db, failures, near
from testsignal import SIGNAL_SEC, Noise, TestSignal, chirp_sum, plain
from unit import FLOAT32
from wavbytes import read_samples


def fit(x, hz, rate_hz):
    """Amplitude and phase of a sine of known frequency, least squares."""
    turn = 2 * math.pi * hz * np.arange(len(x)) / rate_hz
    c, *_ = np.linalg.lstsq(np.stack([np.sin(turn), np.cos(turn), np.ones(len(x))], 1), x, rcond=None)
    return complex(c[0], c[1])


def test_signal():
    """Levels, frequencies and edges where the schedule puts them."""
    count = 0
    near("length", SIGNAL_SEC, 23.5, 0)
    for rate in (44100, 48000, 96000):
        x = TestSignal(rate).volume(0.0, 1 / rate, round(23.5 * rate))
        piece = lambda a, b: x[round(a * rate):round(b * rate)]
        near("peak", np.abs(x).max(), 10 ** (-6 / 20), 1e-4)
        near("loud tone", db(fit(piece(2, 5.7), 997, rate)), -6.0, 1e-6)
        near("low tone", db(fit(piece(5.8, 7.7), 997, rate)), -16.0, 1e-6)
        for a, b in ((0, 1), (1.25, 1.75), (7.75, 8.25), (14.25, 22.75), (23.0, 23.5)):
            near(f"silence {a} to {b} s", np.abs(piece(a, b)).max(), 0.0, 0)
        top = min(40000.0, 0.48 * rate)
        # An exponential sweep stands at 10·(top/10)^(t/6) Hz at t: count its turns between two moments.
        for a, b in ((0.5, 2.0), (2.0, 4.0), (4.0, 5.9)):
            turns = 6 * 10 / math.log(top / 10) * ((top / 10) ** (b / 6) - (top / 10) ** (a / 6))
            got = np.sum(np.diff(np.signbit(piece(8.25 + a, 8.25 + b)).astype(int)) != 0) / 2
            near(f"turns of the sweep, {a} to {b} s, {rate} Hz", got, turns, 0.8)
        # A linear chirp passes its middle frequency halfway; its phase runs through (f0+f1)/2·T turns.
        for begin in (1.0, 22.75):
            crossings = np.sum(np.diff(np.signbit(piece(begin, begin + 0.25)[1:-1]).astype(int)) != 0)
            near("turns of a marker", crossings / 2, 3000 * 0.25, 1.0)
        # The phase goes on through the step.
        near("phase through the step", np.angle(fit(piece(2, 2.5), 997, rate) / fit(piece(5.8, 6.3), 997, rate))
             + 2 * math.pi * ((997 * 3.8 + 0.5) % 1 - 0.5), 0.0, 1e-6)
        count += 20
    return count


def clocks():
    """A recorder that runs fast or at another rate hears the same tone elsewhere."""
    count = 0
    for rate, player, ppm in ((48000, 48000, 150.0), (44100, 96000, -150.0), (96000, 44100, 80.0)):
        ratio = 1 + ppm * 1e-6
        take = Recording(26.0, [Line(TestSignal(player))], rate, 0.731, ratio, FLOAT32)
        y = played(take.lines[0], take)
        a, b = round((0.731 + 2.0 * ratio) * rate), round((0.731 + 5.0 * ratio) * rate)
        near(f"tone by a clock {ppm:g} ppm off", db(fit(y[a:b], 997 / ratio, rate)), -6.0, 2e-4)
        sweep = y[round((0.731 + 8.25 * ratio) * rate):round((0.731 + 14.25 * ratio) * rate)]
        edge = np.argmax(np.abs(sweep[::-1]) > 0.01)
        top = min(40000.0, 0.48 * player)
        heard = 6.0 * math.log(min(top, 0.5 * rate) / 10) / math.log(top / 10)
        near("end of the sweep", 6.0 * ratio - edge / rate, heard * ratio, 0.03)
        count += 2
    c = np.random.default_rng(1).standard_normal(50) + 0.5j
    direct = np.array([np.sum(c * np.exp(2j * np.pi * np.arange(50) * n * 0.00731)) for n in range(173)])
    near("chirp transform", np.abs(chirp_sum(c, 0.00731, 173) - direct).max(), 0.0, 1e-9)
    noise = Noise(3.0, 8000, -20.0, 1)
    at = noise.volume(0.0, 1 / 8000, 24000)
    near("noise level", 10 * math.log10(2 * np.mean(at ** 2)), -20.0, 0.02)
    off = noise.volume(0.1234, 1 / 7999, 4000)
    exact = [sum(2 * (noise.coefficients() * np.exp(2j * np.pi * np.arange(12001) * (0.1234 + n / 7999) / 3.0)).real) for n in (0, 1777)]
    near("noise between its samples", max(abs(off[0] - exact[0]), abs(off[1777] - exact[1])), 0.0, 1e-9)
    return count + 3


def shapes():
    """A low-pass of one resistor and one capacitor, as curve and as heard."""
    ohms, farads = 1000.0, 10e-9
    parts = [Part("R1", "R", ("in.hot", "out.hot"), ohms), Part("C1", "C", ("out.hot", "screen"), farads)]
    [curve] = curves.sweep([Case(parts, True, Ends(1e-3, "unbalanced", 1e9, "unbalanced"))])
    h = lambda f: 1 / (1 + 2j * np.pi * f * ohms * farads)
    worst = max(abs(20 * math.log10(abs(curve.at(f) / h(f)))) for f in np.geomspace(10, 40000, 997))
    near("curve between its points", worst, 0.0, 1e-3)
    for hz in (100.0, 3333.0, 15000.0):
        take = Recording(2.0, [Line(plain(hz, -10.0, 1.8), curve)], 48000, 0.1)
        got = fit(played(take.lines[0], take)[24000:72000], hz, 48000)
        flat = fit(plain(hz, -10.0, 1.8).volume(0.4, 1 / 48000, 48000), hz, 48000)
        near(f"{hz} Hz through it", abs(got / flat / h(hz) - 1), 0.0, 3e-4)
    near("length for the transform", max(fast_length(n) / n for n in (1000003, 2646001, 1128001)), 1.0, 0.06)
    return 5


def spice_noise(parts, ends, plug_ohms):
    """ngspice's own noise analysis of a balanced or unbalanced pad: volts over 20 Hz to 20 kHz at 27 °C."""
    lines, hot, cold = curves.netlist(Case(parts, ends.sense == "unbalanced", ends, "port", plug_ohms=plug_ohms), "c")
    quiet = [line for line in lines if not line.startswith("ic")]
    text = "\n".join(["* noise", *quiet, f"vx nx 0 dc 0 ac 1", "rx nx 0 1", ".control",
                      f"noise v({hot},{cold}) vx lin 1999 20 20000" if cold != "0" else f"noise v({hot}) vx lin 1999 20 20000",
                      "setplot noise2", "print onoise_total", ".endc", ".end", ""])
    with tempfile.TemporaryDirectory() as where:
        path = os.path.join(where, "noise.cir")
        with open(path, "w") as f:
            f.write(text)
        said = subprocess.run(["ngspice", "-b", path], cwd=where, text=True, capture_output=True).stdout
    return float(next(line for line in said.splitlines() if line.startswith("onoise_total")).split("=")[1])


def thermal():
    """Resistors against 4kTR (Nyquist 1928), pads against the simulator's own noise analysis."""
    count = 0
    for ohms, kelvin, want_dbu in ((150.0, 293.15, -130.9180), (200.0, 293.15, -129.6686), (10000.0, 293.15, -112.6789)):
        ends = Ends(100.0, "floating", 1e12, "floating")
        [port] = curves.sweep([Case([], False, ends, "port", straight=True, plug_ohms=ohms)])
        volts2 = band_volts2(port.z.hz, port.passive * kelvin, 1.0, 20001.0)
        near(f"noise of {ohms:g} ohm in 20 kHz", dbu(volts2), want_dbu, 1e-3)
        near(f"4kTR of {ohms:g} ohm", volts2, 4 * BOLTZMANN * kelvin * ohms * 20000, 1e-3 * volts2)
        count += 2
    for network, wired, r0 in (("U", "balanced", 600.0), ("H", "floating", 200.0), ("T", "unbalanced", 3000.0)):
        pad = standard_pad(network, matched(network, 12.0, r0))
        pad.parts.append(Part("C9", "C", ("out.hot", "out.cold"), 4.7e-9))
        ends = Ends(100.0, wired, 10000.0, wired, 300e-12)
        [port] = curves.sweep([Case(pad.parts, pad.unbalanced, ends, "port", plug_ohms=150.0)])
        whole = math.sqrt(band_volts2(port.z.hz, (port.passive + port.load) * 300.15))
        near(f"noise of {network}, {wired}, against ngspice", whole / spice_noise(pad.parts, ends, 150.0), 1.0, 2e-3)
        # A resistive load hears by its divider: 4kT·Rl·|Z/(Z+Rl)|², at low frequency.
        z = 1 / (1 / port.z.at(10.0) - 1 / ends.load_ohms)
        near("noise of the load", port.load[80] / (4 * BOLTZMANN * ends.load_ohms * abs(z / (z + ends.load_ohms)) ** 2), 1.0, 1e-4)
        count += 2
    bench = Bench(Ends(100.0, "balanced", 10000.0, "balanced"))
    density = 1e-17
    take = noise_take(bench, np.array([1.0, 1e5]), density, 20.0)
    y = samples(take.lines[0], take, np.random.default_rng(3))
    want = dbu(density * 22050) + 32.0
    near("level of a noise take", 10 * math.log10(2 * np.mean(y ** 2)), want, 0.03)
    return count + 1


def mishaps():
    """Harmonics, hum, events, automatic gain and lost buffers come out as asked for."""
    rng = np.random.default_rng(4)
    source = plain(1000.0, -10.0, 4.0)
    line = Line(source, None, 0.5, -math.inf, hum=[(50.0, -60.0)], harmonics=[(2, -40.0), (5, -55.0)],
                events=[(3.0, 0.5, -1.5)])
    take = Recording(5.0, [line], 48000, 0.5)
    y = samples(line, take, rng)
    level = db(fit(y[48000:96000], 1000.0, 48000))
    near("tone", level, -10.0 - 6.0206, 1e-3)
    near("2nd harmonic", db(fit(y[48000:96000], 2000.0, 48000)) - level, -40.0, 0.01)
    near("5th harmonic", db(fit(y[48000:96000], 5000.0, 48000)) - level, -55.0, 0.02)
    near("hum", db(fit(y[48000:96000], 50.0, 48000)), -60.0, 0.01)
    near("depth of an event", db(fit(y[145000:166000], 1000.0, 48000)) - level, -1.5, 1e-2)
    line = Line(TestSignal(), None, 1.0, -math.inf, ride=(1.0, 0.1))
    take = Recording(23.5, [line], 48000)
    y = samples(line, take, rng)
    step = db(fit(y[round(5.25 * 48000):round(5.75 * 48000)], 997, 48000)) - db(fit(y[round(7.2 * 48000):round(7.7 * 48000)], 997, 48000))
    near("step under automatic gain", step, 9.0, 0.03)
    for how, same in (("gone", False), ("zero", True), ("again", False)):
        take = Recording(3.0, [Line(plain(997.0, -10.0, 3.0), None, 1.0, -150.0)], 48000, flavour=FLOAT32, lost=[(1.5, 300, how)])
        with tempfile.TemporaryDirectory() as where:
            path = os.path.join(where, "x.wav")
            write_recording(path, take, 1)
            _, x = read_samples(path)
        ahead, later = (fit(x[a:a + 24000, 0], 997.0, 48000) * np.exp(-2j * np.pi * 997 * a / 48000) for a in (24000, 96000))
        turned = abs(np.angle(later / ahead))
        want = abs((300 * 997 / 48000 + 0.5) % 1 - 0.5) * 2 * math.pi if how == "gone" else 0.0
        near(f"phase after a buffer {how}", turned, want, 0.01)
        near(f"silence of a buffer {how}", float(np.abs(x[72010:72290]).max() < 1e-5), float(how == "zero"), 0)
    return 12


def written():
    """One unit of each kind of plan checks: what its truth says, found again in its files by plain fits."""
    count = 0

    def make(i, where):
        unit = plan_signal.checks(np.random.Generator(np.random.PCG64([9, i])), i)
        write_check_unit(where, unit, 5)
        return unit

    def heard(unit, where, role, hz=1000.0, channel=0):
        """The tone of a written take, complex, over a middle second and a half."""
        rate, x = read_samples(os.path.join(where, role + ".wav"))
        at = round((unit.takes[role].start_sec + 0.7) * rate)
        return fit(x[at:at + round(1.5 * rate), channel], hz, rate)

    for i, kind in enumerate(plan_signal.CHECKS):
        with tempfile.TemporaryDirectory() as where:
            unit = make(i, where)
            t = unit.truth
            if kind in ("hum pad-noise", "hum tone"):
                role = "pad-noise" if "noise" in kind else "after"
                rate, x = read_samples(os.path.join(where, role + ".wav"))
                hz = unit.takes[role].lines[0].hum[0][0]
                x = x[:rate * 4, 0]
                power = sum(abs(fit(x, hz * k, rate)) ** 2 for k in range(1, 11))
                scale = unit.bench.noise_full_scale_dbu if "noise" in kind else unit.bench.full_scale_dbu
                near(kind, 10 * math.log10(power) + scale, t["hum_dbu"], 0.35)
            elif kind == "distortion" and unit.takes["after"].seconds < 15:
                for role, key in (("after", "distortion_db"), ("before", "distortion_rig_db")):
                    tone = abs(heard(unit, where, role))
                    power = sum(abs(heard(unit, where, role, 1000.0 * k)) ** 2 for k in range(2, 11))
                    near(f"{kind} of {role}", 10 * math.log10(power) - db(tone), t[key], 0.6)
            elif kind == "legs":
                hot, cold = (db(heard(unit, where, "legs", channel=c)) for c in (0, 1))
                c = unit.curve["stated legs"]
                drawn = float(c[0].db(1000.0) - c[1].db(1000.0))
                if not t["legs_before"]:
                    near(kind, hot - cold - drawn, t["legs_recorded_db"], 2e-3)
            elif kind == "bypass":
                near(kind, db(heard(unit, where, "before") / heard(unit, where, "bypass")), t["bypass_recorded_db"], 1e-3)
            elif kind == "loaded":
                # The drop by a resistor R: 1 + Rs·(1/R) / (1 + Rs/Rl), the cable left out at 1 kHz.
                r, true = unit.bench.cal["loaded_ohms"], unit.bench.true
                parallel = 1 / (1 / true.load_ohms + 1 / r)
                want = db((true.load_ohms / (true.source_ohms + true.load_ohms)) / (parallel / (true.source_ohms + parallel)))
                near(kind, db(heard(unit, where, "before") / heard(unit, where, "before-loaded")), want, 0.03)
            elif kind == "again":
                near(kind, db(heard(unit, where, "before") / heard(unit, where, "after")), t["recorded_loss_db"], 3e-3)
            else:
                continue
            count += 1
    return count


def responses():
    """The test signal through pads, written: the ratio of powers by twelfth octaves of the sweep is the truth's."""
    count = 0
    for i in (3, 5, 23):       # of those without hum
        with tempfile.TemporaryDirectory() as where:
            unit = plan_signal.response(np.random.Generator(np.random.PCG64([9, i])), i)
            write_check_unit(where, unit, 5)
            spectra = []
            for role in ("before", "after"):
                rate, x = read_samples(os.path.join(where, role + ".wav"))
                take = unit.takes[role]
                a, b = (round((take.start_sec + s * take.ratio) * rate) for s in (8.2, 14.7))
                spectra.append(np.abs(np.fft.rfft(x[a:b, 0])) ** 2)
            hz = np.arange(len(spectra[0])) * rate / (b - a) * take.ratio
            loss = []
            for f in curves.points_hz(100, 19000):
                band = (hz >= f * 10 ** (-1 / 80)) & (hz < f * 10 ** (1 / 80))
                loss.append(10 * math.log10(spectra[0][:len(hz)][band].sum() / spectra[1][:len(hz)][band].sum()))
            want = unit.loss.db(curves.points_hz(100, 19000))
            near(f"response of {unit.label}, {rate} Hz, played at {unit.truth['player_hz']} Hz",
                 np.abs(np.array(loss) - want).max(), 0.0, 0.03)
            count += len(loss)
    return count


def against(path):
    """The published schedule against a file."""
    rate, x = read_samples(path)
    want = TestSignal(rate).volume(0.0, 1 / rate, len(x))
    near("length of the file", len(x) / rate, SIGNAL_SEC, 0.5 / rate)
    off = np.abs(x[:, 0] - want)
    near(f"samples, worst at {np.argmax(off) / rate:.4f} s", off.max(), 0.0, 2e-6)
    return len(x)


def main():
    p = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    p.add_argument("--signal")
    args = p.parse_args()
    if args.signal:
        print(f"signal: {against(args.signal)} samples")
    else:
        for check in (test_signal, clocks, shapes, thermal, mishaps, written, responses):
            print(f"{check.__name__}: {check()} figures")
    for line in failures:
        print("off:", line)
    return 1 if failures else 0


if __name__ == "__main__":
    raise SystemExit(main())
