"""One simulated unit: its drawing, what was really built, where it was measured, its takes, the truth."""
import json
import math
import os
import shutil
from dataclasses import dataclass, field

from circuit import Ends
from drawing import Pad, Rig, pad_toml, rig_toml
from takes import Take, Tone, floor_dbfs, noise_for_snr, snr_in_band, write_take
from wavbytes import Flavour

INTEGER16, INTEGER24, FLOAT32 = Flavour(16), Flavour(24), Flavour(32, is_float=True)


@dataclass
class Unit:
    serial: str
    pad: Pad
    rig: Rig
    freq_hz: float
    built: list = None              # Parts as they really are; the stated ones if None
    bench: Ends = None              # the bench as it really is; the stated one if None
    service: Ends = None            # None: the stated bench
    limits: dict = None
    label: str = ""                 # what the test groups by
    fault: str = ""
    expect: str = ""                # "pass", "not-pass" or nothing
    problem: str = ""               # the word that names what is wrong with a take
    recorded_well: bool = True
    offset_db: float = 0.0          # gain moved, linearity, after gain beyond the stated one
    before: Take = None
    after: Take = None
    shift_hz: float = 0.0           # after's tone against before's
    mangle: list = field(default_factory=list)      # ("swap",), ("copy",), ("cut", role, sec)
    seed: int = None                # noise of its own unless given
    truth: dict = field(default_factory=dict)

    def ask(self, sim):
        """Queues the four losses that matter."""
        service = self.service or self.rig.ends
        built, bench = self.built or self.pad.parts, self.bench or self.rig.ends
        cases = {"bench_loss_db": (built, bench), "bench_stated_db": (self.pad.parts, self.rig.ends),
                 "service_loss_db": (built, service), "service_stated_db": (self.pad.parts, service)}
        self.places = {key: sim.ask(parts, self.pad.unbalanced, ends, self.freq_hz)
                       for key, (parts, ends) in cases.items()}

    def take_losses(self, losses):
        """Notes the simulated losses and what the takes will hold of them."""
        self.truth.update({key: losses[place] for key, place in self.places.items()})
        self.truth["recorded_loss_db"] = self.truth["bench_loss_db"] + self.offset_db

    def after_dbfs(self, before_dbfs):
        return before_dbfs - self.truth["recorded_loss_db"] + self.rig.after_gain_db

    def describe(self):
        """The line of truth.jsonl."""
        line = {"unit": self.serial, "label": self.label, "fault": self.fault, "expect": self.expect,
                "problem": self.problem, "recorded_well": self.recorded_well,
                "network": self.pad.network, "drive": self.rig.ends.drive, "sense": self.rig.ends.sense,
                **self.truth}
        return json.dumps({k: finite(v) for k, v in line.items()})


def finite(value):
    return None if isinstance(value, float) and not math.isfinite(value) else value


def draw_parts(rng, pad):
    """The parts as built: each anywhere within its tolerance."""
    return [p.at(p.value * (1 + rng.uniform(-t, t))) for p, t in zip(pad.parts, pad.tolerances, strict=True)]


def draw_bench(rng, rig):
    """The bench as it really is, and the level error between its takes."""
    e = rig.ends
    ends = e.but(source_ohms=e.source_ohms * (1 + rng.uniform(-1, 1) * rig.source_frac),
                 load_ohms=e.load_ohms * (1 + rng.uniform(-1, 1) * rig.load_frac),
                 cable_farads=e.cable_farads * (1 + rng.uniform(-1, 1) * rig.load_frac))
    offset = sum(rng.uniform(-1, 1) * half for half in (rig.linearity_db, rig.gain_drift_db, rig.after_gain_half_db))
    return ends, offset


def fitting(rng, noise_dbfs):
    """A sample format whose own noise is under the wanted one."""
    fits = [FLOAT32] + [f for f, least in ((INTEGER24, -141.0), (INTEGER16, -93.0)) if noise_dbfs > least]
    return fits[rng.integers(len(fits))]


def simple_takes(rng, unit, before_dbfs, snr_db, rate_hz, tone_sec, lead_sec=0.3, tail_sec=0.2, flavour=None):
    """A bare pair of takes: noise, the tone, noise. snr_db is that of after, in the band."""
    after_dbfs = unit.after_dbfs(before_dbfs)
    heard = after_dbfs if math.isfinite(after_dbfs) else before_dbfs - unit.truth["bench_stated_db"]
    noise = noise_for_snr(heard, snr_db, rate_hz)
    flavour = flavour or fitting(rng, noise)
    takes = []
    for level, freq in ((before_dbfs, unit.freq_hz), (after_dbfs, unit.freq_hz + unit.shift_hz)):
        take = Take(lead_sec + tone_sec + tail_sec, rate_hz, flavour=flavour,
                    tones=[Tone(lead_sec, lead_sec + tone_sec, freq, level, rng.uniform(0, 2 * math.pi))])
        take.noise_dbfs = max(noise, floor_dbfs(take))
        takes.append(take)
    unit.before, unit.after = takes
    note_levels(unit)


def note_levels(unit):
    """Levels, signal-to-noise ratios and the variance bound of the loss (IEEE Std 1057) as the takes have them."""
    bound = 0.0
    for role, take in (("before", unit.before), ("after", unit.after)):
        tone = take.tones[0]
        unit.truth[f"{role}_dbfs"] = tone.level_dbfs
        unit.truth[f"{role}_tone_hz"] = tone.freq_hz
        unit.truth[f"{role}_rate_hz"] = take.rate_hz
        frames = (tone.to_sec - tone.from_sec) * take.rate_hz
        bound += 10 ** ((take.noise_dbfs - tone.level_dbfs) / 10) / frames
        unit.truth[f"{role}_tone_sec"] = tone.to_sec - tone.from_sec
    tone, take = unit.after.tones[0], unit.after
    unit.truth["noise_snr_db"] = snr_in_band(tone.level_dbfs, take.noise_dbfs, take.rate_hz)
    powers = [-unit.truth["noise_snr_db"]] + [level - tone.level_dbfs for _, level in take.hum]
    unit.truth["snr_db"] = -10 * math.log10(sum(10 ** (p / 10) for p in powers))
    unit.truth["bound_db"] = 20 / math.log(10) * math.sqrt(bound)


def write_unit(job):
    """Writes one unit's folder. job is (folder, unit, seed); the same seed gives the same bytes."""
    folder, unit, seed = job
    os.makedirs(folder, exist_ok=True)
    with open(os.path.join(folder, "pad.toml"), "w") as f:
        f.write(pad_toml(f"Saltmarsh {unit.pad.network} pad", unit.pad, unit.service, unit.limits))
    with open(os.path.join(folder, "rig.toml"), "w") as f:
        f.write(rig_toml("Saltmarsh bench", unit.rig))
    for i, (role, take) in enumerate((("before", unit.before), ("after", unit.after))):
        if take is not None:
            write_take(os.path.join(folder, role + ".wav"), take, [seed if unit.seed is None else unit.seed, i])
    for step in unit.mangle:
        mangle(folder, unit, *step)


def mangle(folder, unit, what, role="", sec=0.0):
    """What goes wrong with files after the recording."""
    before, after = (os.path.join(folder, name + ".wav") for name in ("before", "after"))
    if what == "swap":
        os.rename(before, before + ".tmp")
        os.rename(after, before)
        os.rename(before + ".tmp", after)
    elif what == "copy":
        shutil.copyfile(before, after)
    elif what == "cut":
        take = getattr(unit, role)
        path = {"before": before, "after": after}[role]
        block = take.channels * take.flavour.bits // 8
        os.truncate(path, 44 + round(sec * take.rate_hz) * block)
