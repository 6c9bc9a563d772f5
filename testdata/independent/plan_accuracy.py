"""Plan accuracy: every network, drive and sense, the bench known exactly, takes as people make them."""
import itertools
import math

from circuit import DRIVES, SENSES, Ends, Part, Simulator
from drawing import BALANCED, COLD_OUT, HOT_OUT, UNBALANCED, Rig, custom_pad, e24, matched, standard_pad
from takes import Take, Tone, floor_dbfs, noise_for_snr
from unit import Unit, draw_parts, fitting, note_levels

SHAPES = ("filtered", "tied", "uneven")
KINDS = BALANCED + UNBALANCED + SHAPES
RATES = (44100, 48000, 44100, 48000, 44100, 48000, 88200, 96000, 192000)
TONES_HZ = (60.0, 100.3, 315.0, 440.0, 997.0, 1000.0, 1000.37, 1234.567, 2500.5, 3150.0, 4999.9,
            6300.0, 7777.7, 9999.3, 10000.0)
SOURCES, LOADS = (20.0, 50.0, 100.0, 150.0, 600.0), (600.0, 2000.0, 5000.0, 10000.0, 20000.0, 100000.0)
R0 = (150.0, 200.0, 600.0, 1000.0, 2000.0)
LOW_DB, HIGH_DB = 3.0, 60.0
CANDIDATES = 6


def combinations():
    """All of them, once for a quiet after take and once for a noisy one."""
    every = list(itertools.product(KINDS, DRIVES, SENSES)) + [("linked", "unbalanced", "unbalanced")]
    return [(quiet, *c) for c in every for quiet in (True, False)]


def build(count, rng):
    wanted = combinations()
    wanted = [wanted[i % len(wanted)] for i in range(count or len(wanted))]
    targets = rng.permutation([LOW_DB + (HIGH_DB - LOW_DB) * (i + 0.5) / len(wanted) for i in range(len(wanted))])
    units = [None] * len(wanted)
    while missing := [i for i, u in enumerate(units) if u is None]:
        sim, tried = Simulator(), {}
        for i in missing:
            tried[i] = [candidate(rng, *wanted[i][1:], targets[i]) for _ in range(CANDIDATES)]
            for unit in tried[i]:
                unit.ask(sim)
        losses = sim.run()
        for i, tries in tried.items():
            for unit in tries:
                unit.take_losses(losses)
            fit = [u for u in tries if LOW_DB <= u.truth["bench_loss_db"] <= HIGH_DB]
            if fit:
                units[i] = min(fit, key=lambda u: abs(u.truth["bench_loss_db"] - targets[i]))
    for i, unit in enumerate(units):
        unit.serial = f"{i + 1:04d}"
        record(rng, unit, wanted[i][0])
    return units


def candidate(rng, kind, drive, sense, target_db):
    """A pad of about the wanted loss between ends drawn from the usual ones."""
    loss_db = max(1.5, target_db + rng.uniform(-8, 8))
    r0 = float(rng.choice(R0))
    if kind in SHAPES or kind == "linked":
        pad = custom_pad(kind, loss_db, r0)
    else:
        pad = standard_pad(kind, [e24(v) for v in matched(kind, loss_db, r0)], extra=extra_parts(rng))
        if kind == "T" and rng.random() < 0.2:
            pad.parts[1] = pad.parts[1].at(0.0)     # a link
    ends = Ends(float(rng.choice(SOURCES)), drive, float(rng.choice(LOADS)), sense,
                float(rng.choice([0, 150e-12, 300e-12, 1000e-12])))
    return Unit("", pad, Rig(ends), float(rng.choice(TONES_HZ)), built=draw_parts(rng, pad), label=kind)


def extra_parts(rng):
    """Now and then a capacitor or a terminator across the output."""
    draw = rng.random()
    if draw < 0.15:
        return [Part("C1", "C", (HOT_OUT, COLD_OUT), float(rng.choice([220e-12, 1e-9, 4.7e-9])))]
    if draw < 0.3:
        return [Part("R9", "R", (HOT_OUT, COLD_OUT), float(rng.choice([620.0, 1500.0, 10000.0])))]
    return []


def record(rng, unit, quiet):
    """Takes of 3 to 6 s with what real ones have around, under and beside the tone."""
    before_dbfs = rng.uniform(-20, -6)
    after_dbfs = unit.after_dbfs(before_dbfs)
    snr_db = rng.uniform(61, 72) if quiet else rng.uniform(15, 60)
    rate_hz = int(rng.choice(RATES))
    noise_dbfs = noise_for_snr(after_dbfs, snr_db, rate_hz)
    flavour = fitting(rng, noise_dbfs)
    unit.shift_hz = unit.freq_hz * rng.uniform(-2e-5, 2e-5)
    unit.before, unit.after = (
        one_take(rng, level, freq, rate_hz, flavour) for level, freq in
        ((before_dbfs, unit.freq_hz), (after_dbfs, unit.freq_hz + unit.shift_hz)))
    hum = draw_hum(rng, unit, after_dbfs, quiet)
    for take in (unit.before, unit.after):
        take.noise_dbfs = max(noise_dbfs, floor_dbfs(take))
        take.hum = hum
    unit.truth["hum"] = bool(hum)
    note_levels(unit)


def one_take(rng, level_dbfs, freq_hz, rate_hz, flavour):
    lead, tone_sec, tail = rng.uniform(0.3, 1.5), rng.uniform(2.2, 3.7), rng.uniform(0.2, 0.8)
    take = Take(lead + tone_sec + tail, rate_hz, flavour=flavour)
    take.tones = [Tone(lead, lead + tone_sec, freq_hz, level_dbfs, rng.uniform(0, 2 * math.pi),
                       float(rng.choice([0, 0, 0.01])))]
    peak = 10 ** (level_dbfs / 20)
    if rng.random() < 0.4:
        take.clicks = [(rng.uniform(0.02, lead - 0.15), rng.uniform(-0.6, 0.6))]
    if rng.random() < 0.3:
        take.clicks.append((lead + tone_sec + rng.uniform(0.1, tail - 0.05), rng.uniform(-0.6, 0.6)))
    if lead > 0.8 and rng.random() < 0.6:
        take.talk = [(0.05, lead - 0.15, min(0.8, peak * rng.uniform(0.3, 1.5)))]
    if rng.random() < 0.3:
        take.dc = rng.uniform(-0.01, 0.01)
    return take


def draw_hum(rng, unit, after_dbfs, quiet):
    """Hum in some: 70 dB below the tone where after is quiet, up to louder than it where not.

    A tone below 200 Hz stays 15 dB above it.
    """
    if rng.random() < 0.6:
        return []
    for mains_hz in rng.permutation([50, 60]):
        lines = [mains_hz * rng.uniform(0.9995, 1.0005) * k for k in (1, 2, 3, 5)]
        if min(abs(unit.freq_hz - f) for f in lines) > 8:
            unit.rig.mains_hz = int(mains_hz)
            top = after_dbfs + (-70 if quiet else rng.uniform(-50, 6 if unit.freq_hz > 200 else -16))
            return [(f, top - drop) for f, drop in zip(lines, (0, 12, 6, 15))]
    return []
