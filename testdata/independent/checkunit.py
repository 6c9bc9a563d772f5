"""A unit with any of the takes: its sheets, what its bench and pad really are, and what is true of it."""
import json
import math
import os
import shutil
from dataclasses import dataclass, field

import numpy as np

import curves
from circuit import Ends
from curves import Case
from drawing import HOT_IN, HOT_OUT, COLD_IN, COLD_OUT, Pad, e24, matched, pad_toml, percent, standard_pad
from circuit import Part
from record import Line, Recording, write_played, write_recording
from testsignal import LOUD_DBFS, TONE_HZ, TestSignal
from unit import INTEGER24, finite
from wavbytes import WavFile, read_samples

TEMP_K = 273.15 + 21.0


@dataclass
class Bench:
    """What rig.toml states, and beside it what is so. cal holds the keys of [calibration] as written."""
    ends: Ends
    true: Ends = None
    source_frac: float = 0.0
    load_frac: float = 0.0
    mains_hz: object = 50
    legs_load_ohms: float = 5000.0
    cal: dict = field(default_factory=dict)
    full_scale_dbu: float = 18.0            # true
    noise_full_scale_dbu: float = -32.0     # true

    def toml(self):
        e = self.ends
        lines = ['name = "Saltmarsh bench"', "temperature_c = 21"]
        if self.mains_hz:
            lines.append(f"mains_hz = {self.mains_hz}")
        lines += ["", "[output]", f"source_ohms = {e.source_ohms:.9g}", f'tolerance = "{percent(self.source_frac)}"',
                  f'drive = "{e.drive}"', "", "[input]", f"load_ohms = {e.load_ohms:.9g}",
                  f'tolerance = "{percent(self.load_frac)}"', f'sense = "{e.sense}"',
                  f"cable_pF = {e.cable_farads * 1e12:.9g}", f"legs_load_ohms = {self.legs_load_ohms:.9g}",
                  "", "[calibration]"]
        return "\n".join(lines + [f"{k} = {v:.9g}" for k, v in self.cal.items()]) + "\n"

    def draw(self, rng):
        """Source, load and cable anywhere in their rectangles."""
        e = self.ends
        self.true = e.but(source_ohms=e.source_ohms * (1 + rng.uniform(-1, 1) * self.source_frac),
                          load_ohms=e.load_ohms * (1 + rng.uniform(-1, 1) * self.load_frac),
                          cable_farads=e.cable_farads * (1 + rng.uniform(-1, 1) * self.load_frac))


EXACT_LEVELS = {"full_scale_dbu": 18.0, "noise_full_scale_dbu": -32.0, "uncertainty_db": 0.2, "linearity_db": 0.0,
                "gain_drift_db": 0.0, "noise_gain_drift_db": 0.0, "channel_match_db": 0.0, "noise_current_pA": 0.0}


@dataclass
class CheckUnit:
    serial: str
    pad: Pad
    bench: Bench
    built: list = None
    service: Ends = None
    limits: dict = field(default_factory=dict)
    takes: dict = field(default_factory=dict)       # role -> Recording
    label: str = ""
    expect: str = ""                                # pass, fail, not-pass, unproven or nothing
    problem: str = ""                               # what must be named; several joined by |
    on: str = ""                                    # the role that the problem may stand on; several joined by |
    played: object = None                           # (source, rate): given as --signal
    mangle: list = field(default_factory=list)
    truth: dict = field(default_factory=dict)
    curve: dict = field(default_factory=dict)

    def simulate(self, **more):
        """Sweeps the usual cases (before, after, as built and as stated) and any others; keeps the curves."""
        true, stated = self.bench.true or self.bench.ends, self.bench.ends
        built, service, un = self.built or self.pad.parts, self.service or stated, self.pad.unbalanced
        cases = {
            "before": Case([], un, true, straight=True), "after": Case(built, un, true),
            "stated before": Case([], un, stated, straight=True), "stated after": Case(self.pad.parts, un, stated),
            "service before": Case([], un, service, straight=True), "service after": Case(built, un, service),
            "designed after": Case(self.pad.parts, un, service), **more}
        self.curve = dict(zip(cases, curves.sweep(list(cases.values())), strict=True))
        c = self.curve
        self.loss = c["before"] / c["after"]
        self.stated_loss = c["stated before"] / c["stated after"]
        self.service_loss = c["service before"] / c["service after"]

    def curve_stated_service(self, hz=TONE_HZ):
        """The loss of the drawing in service."""
        return float((self.curve["service before"] / self.curve["designed after"]).db(hz))

    def note_curves(self, hz=TONE_HZ, from_hz=20.0, to_hz=20000.0, points=None):
        """Losses at the tone, and where the built unit departs most from the drawing over frequency."""
        at = curves.points_hz(from_hz, to_hz) if points is None else np.asarray(points)
        off = self.loss.db(at) - self.loss.db(hz) - self.stated_loss.db(at) + self.stated_loss.db(hz)
        flat = self.service_loss.db(at) - self.service_loss.db(hz)
        k, m = int(np.argmax(np.abs(off))), int(np.argmax(np.abs(flat)))
        self.truth.update({
            "bench_loss_db": float(self.loss.db(hz)), "bench_stated_db": float(self.stated_loss.db(hz)),
            "service_loss_db": float(self.service_loss.db(hz)), "response_db": float(off[k]), "response_hz": float(at[k]),
            "flatness_db": float(flat[m]), "points_hz": [float(f) for f in at], "points_db": [round(float(x), 6) for x in off]})

    def gain(self, level_dbfs, hz=TONE_HZ, source_dbfs=LOUD_DBFS):
        """The gain with which a tone played at source_dbfs is recorded straight through at level_dbfs."""
        return 10 ** ((level_dbfs - source_dbfs) / 20) / abs(complex(self.curve["before"].at(hz)))

    def describe(self):
        line = {"unit": self.serial, "label": self.label, "expect": self.expect, "problem": self.problem, "on": self.on,
                "network": self.pad.network, "drive": self.bench.ends.drive, "sense": self.bench.ends.sense,
                "played": bool(self.played), **self.truth}
        return json.dumps({k: finite(v) for k, v in line.items()})


def toml_limits(limits):
    return {k: Word(str(v).lower()) if isinstance(v, bool) else v for k, v in limits.items()}


class Word(str):
    """Text that stands in a sheet as it is."""
    __repr__ = str.__str__


def take_of(rng, unit, curve, gain, source, noise_dbfs, rate_hz=48000, ppm=0.0, hum=(), flavour=None, **line):
    """A recording of one channel that holds all of source, with a little before and after it."""
    start, tail = rng.uniform(0.2, 1.5), rng.uniform(0.1, 0.6)
    more = {"flavour": flavour} if flavour else {}
    ratio = 1 + ppm * 1e-6
    return Recording(start + source.sec * ratio + tail, [Line(source, curve, gain, noise_dbfs, hum=list(hum), **line)],
                     rate_hz, start, ratio, **more)


def signal_pair(rng, unit, level_dbfs=-9.0, noise_dbfs=-105.0, gain_db=0.0, offset_db=0.0, rate_hz=48000, player_hz=48000,
                ppm=0.0, hum=(), source=None, sign=1.0, flavour=None):
    """before and after of one source. gain_db is the gain raised for after."""
    source = source or TestSignal(player_hz)
    g = unit.gain(level_dbfs)
    after = g * sign * 10 ** ((gain_db - offset_db) / 20)
    unit.takes["before"] = take_of(rng, unit, unit.curve["before"], g, source, noise_dbfs, rate_hz, ppm, hum, flavour)
    unit.takes["after"] = take_of(rng, unit, unit.curve["after"], after, source, noise_dbfs, rate_hz, ppm, hum, flavour)
    unit.truth["recorded_loss_db"] = unit.truth["bench_loss_db"] + offset_db


def mains(rng, top_dbfs, hz=50):
    """Hum: the line and some harmonics, at a frequency near hz. Returns lines and the power sum in dBFS."""
    line = hz * rng.uniform(0.9997, 1.0003)
    lines = [(line * k, top_dbfs - drop) for k, drop in ((1, 0.0), (2, 9.0), (3, 4.0), (5, 8.0), (7, 14.0))]
    return lines, 10 * math.log10(sum(10 ** (db / 10) for _, db in lines))


def balanced_pad(rng, low_db=6.0, high_db=30.0, tolerance=0.01, network=None, r0=None):
    network = network or str(rng.choice(["U", "H", "O"]))
    loss, r0 = rng.uniform(low_db, high_db), r0 or float(rng.choice([200.0, 600.0]))
    return standard_pad(network, [e24(v) for v in matched(network, loss, r0)], tolerance)


def usual_bench(rng, exact=False, cable=300e-12, drive="balanced", sense="balanced"):
    """100 ohm or so into 10 kohm or so. An exact one is known to the last ohm."""
    ends = Ends(float(rng.choice([50.0, 100.0, 150.0])), drive, float(rng.choice([5000.0, 10000.0, 20000.0])), sense, cable)
    bench = Bench(ends, cal=dict(EXACT_LEVELS))
    bench.legs_load_ohms = ends.load_ohms / 2
    if not exact:
        bench.source_frac, bench.load_frac = 0.05, 0.02
        bench.cal.update(linearity_db=0.01, gain_drift_db=0.02, noise_gain_drift_db=0.02, channel_match_db=0.1)
    bench.draw(rng)
    return bench


def plug(parts_ohms_hot, parts_ohms_cold):
    """Two series parts alone: a pad switched out."""
    return [Part("S1", "R", (HOT_IN, HOT_OUT), parts_ohms_hot), Part("S2", "R", (COLD_IN, COLD_OUT), parts_ohms_cold)]


def write_check_unit(folder, unit, seed):
    """Writes the folder; what was played lies beside it as SERIAL.played.wav, for --signal."""
    os.makedirs(folder, exist_ok=True)
    with open(os.path.join(folder, "pad.toml"), "w") as f:
        f.write(pad_toml(f"Saltmarsh {unit.pad.network} pad", unit.pad, unit.service, toml_limits(unit.limits)))
    with open(os.path.join(folder, "rig.toml"), "w") as f:
        f.write(unit.bench.toml())
    for i, (role, take) in enumerate(unit.takes.items()):
        write_recording(os.path.join(folder, role + ".wav"), take, [seed, i])
    for what, *how in unit.mangle:
        MANGLE[what](folder, unit, *how)
    if unit.played:
        write_played(folder + ".played.wav", *unit.played)


def _path(folder, role):
    return os.path.join(folder, role + ".wav")


def swap(folder, unit):
    a, b = _path(folder, "before"), _path(folder, "after")
    os.rename(a, a + ".tmp")
    os.rename(b, a)
    os.rename(a + ".tmp", b)


def copy(folder, unit):
    shutil.copyfile(_path(folder, "before"), _path(folder, "after"))


def cut(folder, unit, role, sec):
    take = unit.takes[role]
    os.truncate(_path(folder, role), 44 + round(sec * take.rate_hz) * len(take.lines) * take.flavour.bits // 8)


def resave(folder, unit, flavour, skip):
    """after is before's samples in another format, skip frames cut off its start."""
    rate_hz, x = read_samples(_path(folder, "before"))
    out = WavFile(_path(folder, "after"), flavour, rate_hz, x.shape[1], len(x) - skip)
    out.write(x[skip:])
    out.close()


def double(folder, unit, role):
    """One channel saved as two."""
    rate_hz, x = read_samples(_path(folder, role))
    out = WavFile(_path(folder, role), INTEGER24, rate_hz, 2, len(x))
    out.write(np.repeat(x, 2, axis=1))
    out.close()


MANGLE = {"swap": swap, "copy": copy, "cut": cut, "resave": resave, "double": double}
