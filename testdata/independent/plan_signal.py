"""Plans response and bench checks: the test signal through pads, and every other tone take.

Each plan is a function of a generator and a number, and gives one unit; the same number gives the same.
"""
import math

import numpy as np

from checkunit import CheckUnit, balanced_pad, mains, plug, signal_pair, take_of, usual_bench
from circuit import Part
from curves import Case
from drawing import COLD_OUT, HOT_IN, HOT_OUT, custom_pad, e24, matched, standard_pad
from record import Line, Recording
from testsignal import TONE_HZ, Noise, TestSignal, Tones, plain
from unit import draw_parts

RESPONSES = ("220p", "L part", "cable", "4n7", "70 dB", "plain RC", "coupled", "--signal", "stepped", "70 dB quiet")
STEPS_HZ = (31.5, 100.0, 315.0, 1000.0, 3150.0, 10000.0, 16000.0)


def response_pad(rng, kind):
    if kind == "L part":
        return custom_pad("filtered", rng.uniform(8, 25), 600.0)
    if kind.startswith("70 dB"):
        return standard_pad("U", [e24(v) for v in matched("U", 70.0, 600.0)], 0.01,
                            [Part("C1", "C", (HOT_OUT, COLD_OUT), 220e-12)])
    farads = {"220p": 220e-12, "4n7": 4.7e-9, "plain RC": 10e-9}.get(kind)
    extra = [Part("C1", "C", (HOT_OUT, COLD_OUT), farads)] if farads else []
    if kind == "coupled":
        r, shunt = 2200.0, 1500.0
        parts = [Part("C1", "C", (HOT_IN, "a"), 2.2e-6), Part("R1", "R", ("a", HOT_OUT), r),
                 Part("R2", "R", (HOT_OUT, "screen"), shunt)]
        pad = standard_pad("L", [r, shunt])
        pad.network, pad.parts, pad.extra = "custom", parts, 3
        pad.tolerances = [0.05, 0.01, 0.01]
        # In a custom network the colds are tied to the screen by links.
        pad.parts += [Part("R3", "R", ("in.cold", "screen"), 0.0), Part("R4", "R", (COLD_OUT, "screen"), 0.0)]
        pad.tolerances += [0.01, 0.01]
        pad.extra, pad.unbalanced = 5, False
        return pad
    network = str(rng.choice(["U", "H", "O", "T", "pi"]))
    r0 = float(rng.choice([200.0, 600.0, 2000.0]))
    return standard_pad(network, [e24(v) for v in matched(network, rng.uniform(6, 30), r0)], 0.01, extra)


def response(rng, i):
    """Recorder's clock off by up to 150 ppm, hum in half of them, another rate than played in some."""
    kind = RESPONSES[i % len(RESPONSES)]
    pad = response_pad(rng, kind)
    wired = "unbalanced" if pad.unbalanced or kind == "coupled" else "balanced"
    cable = float(rng.choice([1e-9, 2e-9])) if kind == "cable" else 300e-12
    bench = usual_bench(rng, exact=i % 3 > 0, cable=cable, drive=wired, sense=wired)
    unit = CheckUnit(f"{i + 1:04d}", pad, bench, draw_parts(rng, pad), label=kind)
    if rng.random() < 0.15 and kind in ("4n7", "plain RC"):
        k = next(k for k, p in enumerate(unit.built) if p.kind == "C")
        unit.built[k] = unit.built[k].at(unit.built[k].value * 1.6)
        unit.label, unit.expect = kind + ", wrong C", "not-pass"
    unit.simulate()
    rate, player = [(48000, 48000), (44100, 44100), (44100, 48000), (48000, 96000), (96000, 48000), (48000, 44100)][
        rng.choice(6, p=[0.35, 0.25, 0.15, 0.1, 0.05, 0.1])]
    ppm = rng.uniform(-150, 150)
    noise = float(rng.uniform(-110, -105) if kind == "70 dB" else -118 if kind.startswith("70 dB") else rng.uniform(-108, -92))
    level = -6.5 if kind.startswith("70 dB") else rng.uniform(-14, -6.5)
    hum, hum_dbfs = mains(rng, -80.0, int(rng.choice([50, 60]))) if i // len(RESPONSES) % 2 else ([], -math.inf)
    if hum:
        bench.mains_hz = round(hum[0][0] / 10) * 10
    source, points = None, None
    if kind == "--signal":
        source = Noise(12.0, player, -20.0, i)
        unit.played = (source, player)
    elif kind == "stepped":
        source = Tones([(1.3 * k, 1.3 * k + 1.25, hz, -6.0) for k, hz in enumerate(STEPS_HZ)])
        points = STEPS_HZ
    unit.note_curves(1000.0 if kind == "stepped" else TONE_HZ, points=points)
    signal_pair(rng, unit, level, noise, rate_hz=rate, player_hz=player, ppm=ppm, hum=hum, source=source)
    if kind == "--signal":
        # Nothing in it is a tone: what the loss is cannot be told by one.
        del unit.truth["recorded_loss_db"]
    unit.limits = {"response_plus_minus_db": 0.5}
    if kind == "stepped":
        unit.limits |= {"response_from_hz": STEPS_HZ[0], "response_to_hz": STEPS_HZ[-1]}
    off = abs(unit.truth["response_db"])
    unit.expect = "pass" if off < 0.3 and not kind.startswith("70 dB") else "not-pass" if off > 0.5 else ""
    unit.truth.update(ratio_ppm=ppm, noise_dbfs=noise, hum=bool(hum), rate_hz=rate, player_hz=player,
                      hum_dbfs=hum_dbfs, exact=i % 3 > 0)
    return unit


CHECKS = ("hum pad-noise", "hum silence", "hum tone", "distortion", "polarity", "legs", "legs wrong", "bypass", "flex sound",
          "flex events", "loaded", "calibration", "both", "again")


def checks(rng, i):
    """One kind of take after another; each unit is about one check."""
    kind = CHECKS[i % len(CHECKS)]
    pad = balanced_pad(rng)
    unit = CheckUnit(f"{i + 1:04d}", pad, usual_bench(rng), draw_parts(rng, pad), label=kind)
    about = kind.split()[0]
    {"hum": hum_unit, "distortion": distortion, "polarity": polarity, "legs": legs, "bypass": bypass, "flex": flex,
     "loaded": loaded, "calibration": calibration, "both": both, "again": again}[about](rng, unit)
    return unit


def basis(rng, unit, signal=False, sec=3.0, **more):
    """Sweeps the curves and makes a sound before and after."""
    cases = more.pop("cases", {})
    unit.simulate(**cases)
    unit.note_curves()
    hz = TONE_HZ if signal else 1000.0
    source = None if signal else plain(hz, -6.0, sec)
    more.setdefault("noise_dbfs", -105.0)
    signal_pair(rng, unit, -9.0, source=source, **more)


def tone_take(rng, unit, curve, gain, sec=3.0, noise_dbfs=-105.0, **line):
    return take_of(rng, unit, curve, gain, plain(1000.0, -6.0, sec), noise_dbfs, **line)


def hum_unit(rng, unit):
    """Hum of a known level, in the take that the check is to use. The calibration is right within its U."""
    true_error = rng.normal() * 0.1
    unit.bench.full_scale_dbu = 18.0 + true_error
    unit.bench.noise_full_scale_dbu = -32.0 + true_error
    hz = int(rng.choice([50, 60]))
    unit.bench.mains_hz = hz if rng.random() < 0.5 else None
    where = unit.label.split()[1]
    lines, total = mains(rng, rng.uniform(-90, -70), hz)
    rig_lines = [(f, db - 20.0) for f, db in lines]
    basis(rng, unit, signal=where == "silence", sec=5.0, hum=rig_lines)
    unit.takes["after"].lines[0].hum = lines
    if where == "pad-noise":
        for role, hum in (("rig-noise", rig_lines), ("pad-noise", lines)):
            unit.takes[role] = Recording(12.0, [Line(noise_dbfs=-95.0, hum=hum)])
        full_scale = unit.bench.noise_full_scale_dbu
    else:
        full_scale = unit.bench.full_scale_dbu
    unit.truth.update(hum_dbu=total + full_scale, hum_rig_dbu=total - 20.0 + full_scale)
    # Where only before's own hum could be the rig's, it stands 20 dB under.
    unit.limits["hum_max_dbu"] = total + full_scale + float(rng.choice([-3.0, 3.0]))
    unit.expect = "pass" if unit.limits["hum_max_dbu"] > total + full_scale else "not-pass"


def distortion(rng, unit):
    """Harmonics of the rig in both takes, of the pad in after besides; phases as they fall."""
    basis(rng, unit, signal=rng.random() < 0.5, sec=4.0, noise_dbfs=-108.0)
    rig = [(2, -96.0), (3, -92.0), (5, -99.0)]
    pad_db = rng.uniform(-75, -50)
    pad_only = [(2, pad_db), (3, pad_db - 4), (4, pad_db - 9)]
    unit.takes["before"].lines[0].harmonics = rig
    unit.takes["after"].lines[0].harmonics = pad_only + [(7, -95.0)]
    power = lambda lines: 10 * math.log10(sum(10 ** (db / 10) for _, db in lines))
    # What after holds is what was put there: the phases of the rig's share are left out of it.
    total = power(unit.takes["after"].lines[0].harmonics)
    unit.truth.update(distortion_db=total, distortion_rig_db=power(rig))
    unit.limits["distortion_max_db"] = total + float(rng.choice([-3.0, 3.0]))
    unit.expect = "pass" if unit.limits["distortion_max_db"] > total else "not-pass"


def polarity(rng, unit):
    """The test signal, upright or inverted, down to a weak one."""
    sign = float(rng.choice([-1.0, 1.0]))
    basis(rng, unit, signal=True, sign=sign, ppm=rng.uniform(-150, 150), noise_dbfs=rng.uniform(-110, -80))
    unit.truth["polarity"] = int(sign)
    unit.limits["same_polarity"] = True
    unit.expect = "pass" if sign > 0 else "not-pass"


def legs(rng, unit):
    """Hot and cold each into the legs load; the two channels unequal within their match, or measured before."""
    wrong = unit.label.endswith("wrong")
    if wrong:
        series = [k for k, p in enumerate(unit.built) if p.ref in ("R1", "R2") and unit.pad.network in ("U", "H")
                  or unit.pad.network == "O" and p.ref in ("R2", "R3")]
        k = series[rng.integers(2)]
        unit.built[k] = unit.built[k].at(unit.built[k].value * rng.uniform(1.8, 3.0))
    ends = unit.bench.true.but(load_ohms=2 * unit.bench.legs_load_ohms, sense="balanced")
    parts, un = unit.pad.parts, False
    built = unit.built
    basis(rng, unit, cases={"legs": Case(built, un, ends, "legs"), "stated legs": Case(parts, un, ends.but(
        source_ohms=unit.bench.ends.source_ohms), "legs"), "legs before": Case([], un, ends, "legs", straight=True)})
    match = rng.uniform(-0.1, 0.1)
    before = rng.random() < 0.5
    gain = unit.gain(-9.0)

    def pair(two):
        source, start = plain(1000.0, -6.0, 3.0), rng.uniform(0.2, 0.6)
        lines = [Line(source, two[0], gain * 10 ** (match / 20), -105.0), Line(source, two[1], gain, -105.0)]
        return Recording(start + 3.3, lines, start_sec=start)
    c = unit.curve
    unit.takes["legs"] = pair(c["legs"])
    if before:
        unit.takes["legs-before"] = pair(c["legs before"])
    ratio = lambda two: float(two[0].db(1000.0) - two[1].db(1000.0))
    off = ratio(c["legs"]) - ratio(c["stated legs"])
    unit.truth.update(legs_db=off, legs_recorded_db=off + (0.0 if before else match), legs_before=before)
    unit.limits["leg_match_db"] = 0.6
    unit.expect = "pass" if abs(off) < 0.3 else "not-pass" if abs(off) > 0.6 else ""


def bypass(rng, unit):
    """The pad switched out: a few tenths of an ohm, or a contact gone bad."""
    bad = rng.random() < 0.5
    ohms = (rng.uniform(100, 900), 0.1) if bad else (rng.uniform(0.01, 0.3), rng.uniform(0.01, 0.3))
    unit.bench.cal["gain_drift_db"] = 0.005
    drift = rng.uniform(-0.005, 0.005)
    basis(rng, unit, cases={"bypass": Case(plug(*ohms), False, unit.bench.true)})
    unit.takes["bypass"] = tone_take(rng, unit, unit.curve["bypass"], unit.gain(-9.0) * 10 ** (-drift / 20))
    unit.truth["bypass_db"] = float((unit.curve["before"] / unit.curve["bypass"]).db(1000.0))
    unit.truth["bypass_recorded_db"] = unit.truth["bypass_db"] + drift
    unit.limits["bypass_within_db"] = 0.05
    unit.expect = "pass" if unit.truth["bypass_db"] < 0.02 else "not-pass" if unit.truth["bypass_db"] > 0.05 else ""


def flex(rng, unit):
    """A tone while the pad is flexed: steady, or with a step, a dropout and a crackle at known times."""
    basis(rng, unit)
    take = tone_take(rng, unit, unit.curve["after"], unit.gain(-9.0), sec=12.0)
    line, events = take.lines[0], []
    if unit.label.endswith("events"):
        at = take.start_sec + 2.2 + np.array([0.0, 3.0, 6.0]) + rng.uniform(-0.4, 0.4, 3)
        depth = -float(rng.uniform(0.3, 2.0))
        kinds = [("step", float(at[0]), depth), ("dropout", float(at[1]), -40.0), ("crackle", float(at[2]), None)]
        line.events = [(at[0], rng.uniform(0.3, 0.7), depth), (at[1], rng.uniform(0.12, 0.3), -40.0)]
        level = 10 ** (-9.0 / 20) * 10 ** (-unit.truth["bench_loss_db"] / 20)
        line.crackles = [(at[2], 0.15, 0.5 * level)]
        events = [{"what": k, "at_s": s, "db": db} for k, s, db in kinds]
    unit.takes["flex"] = take
    unit.truth["events"] = events
    unit.limits["steady_within_db"] = 0.05
    unit.expect = "not-pass" if events else "pass"


def loaded(rng, unit):
    """A known resistor across the input tells the source impedance."""
    bench = unit.bench
    bench.source_frac = 0.2
    bench.draw(rng)
    ohms = float(rng.choice([330.0, 600.0, 1000.0]))
    bench.cal["loaded_ohms"] = ohms
    drift = rng.uniform(-1, 1) * bench.cal["gain_drift_db"]
    across = plug(0.0, 0.0) + [Part("RL", "R", (HOT_OUT, COLD_OUT), ohms)]
    basis(rng, unit, cases={"loaded": Case(across, False, bench.true)})
    unit.takes["before-loaded"] = tone_take(rng, unit, unit.curve["loaded"], unit.gain(-9.0) * 10 ** (drift / 20))
    unit.truth["source_ohms"] = bench.true.source_ohms
    unit.limits["loss_plus_minus_db"] = 3.0


def calibration(rng, unit):
    """A tone whose volts a meter read; the meter is right within the stated uncertainty (k = 2)."""
    bench = unit.bench
    del bench.cal["full_scale_dbu"], bench.cal["noise_full_scale_dbu"]
    basis(rng, unit)
    hz, level = float(rng.uniform(100, 400)), rng.uniform(-20, -6)
    source = plain(hz, -6.0, 4.0)
    unit.takes["calibration"] = take_of(rng, unit, None, 10 ** ((level + 6.0) / 20), source, -105.0)
    true = rng.uniform(4.0, 24.0)
    volts = math.sqrt(0.6) * 10 ** ((level + true + rng.normal() * bench.cal["uncertainty_db"] / 2) / 20)
    bench.cal["calibration_volts"] = float(f"{volts:.5g}")
    unit.truth["full_scale_dbu"] = true
    unit.limits["loss_plus_minus_db"] = 3.0


def both(rng, unit):
    """Two outputs and two inputs at once, each pair unequal within the match of channels."""
    basis(rng, unit)
    g, offset = unit.gain(-9.0), rng.uniform(-0.1, 0.1) + rng.uniform(-0.1, 0.1)
    source = TestSignal() if rng.random() < 0.5 else plain(1000.0, -6.0, 4.0)
    lines = [Line(source, unit.curve["before"], g, -105.0),
             Line(source, unit.curve["after"], g * 10 ** (-offset / 20), -105.0)]
    unit.takes = {"both": Recording(source.sec + 1.0, lines, start_sec=0.4)}
    unit.truth["recorded_loss_db"] = unit.truth["bench_loss_db"] + offset
    unit.limits["loss_plus_minus_db"] = 1.5
    unit.expect = "pass"


def again(rng, unit):
    """before-again and after-again, the gain and the connectors a little moved."""
    basis(rng, unit)
    g = unit.gain(-9.0)
    moved = rng.uniform(-0.04, 0.04, 2)
    unit.takes["before-again"] = tone_take(rng, unit, unit.curve["before"], g * 10 ** (moved[0] / 20))
    unit.takes["after-again"] = tone_take(rng, unit, unit.curve["after"], g * 10 ** (moved[1] / 20))
    unit.limits["loss_plus_minus_db"] = 1.0
    unit.expect = "pass"
