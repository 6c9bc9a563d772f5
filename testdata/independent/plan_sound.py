"""Plans ordinary and everything: sound units that must be a PASS."""
import math

from checkunit import (TEMP_K, CheckUnit, balanced_pad, mains, plug, signal_pair, take_of, usual_bench)
from circuit import Ends, Part
from curves import Case, band_volts2
from drawing import COLD_OUT, HOT_OUT
from plan_noise import LONG_SEC, noise_take
from record import Line, Recording
from testsignal import TONE_HZ, TestSignal, plain
from unit import INTEGER16, draw_parts


def ordinary(rng, i):
    """What people record with what they have: hum, a desk oscillator that drifts, a phone's noise, 16 bit, 44.1 kHz."""
    pad = balanced_pad(rng, 6, 26)
    unit = CheckUnit(f"{i + 1:04d}", pad, usual_bench(rng), draw_parts(rng, pad), label=ORDINARY[i % len(ORDINARY)],
                     limits={"loss_plus_minus_db": 0.5}, expect="pass")
    unit.simulate()
    unit.note_curves()
    what = unit.label
    sec, hz = rng.uniform(4, 9), float(rng.choice([440.0, 997.0, 1000.0, 1000.7]))
    drift = {"drift_db": 0.1 * rng.choice([-1, 1]), "drift_ppm": rng.uniform(-30, 30)} if "desk" in what else {}
    source = TestSignal(44100) if "signal" in what else plain(hz, -6.0, sec, phase=rng.uniform(0, 6), **drift)
    level = rng.uniform(-16, -7)
    after_dbfs = level - unit.truth["bench_loss_db"]
    # A phone's noise: 45 dB under the tone of the weaker take, in the band.
    noise = after_dbfs - 45.0 + 10 * math.log10(22050 / 19980) if "phone" in what else rng.uniform(-92, -85)
    hum = mains(rng, rng.uniform(-75, -60), int(rng.choice([50, 60])))[0] if "hum" in what else []
    unit.bench.mains_hz = None
    signal_pair(rng, unit, level, noise, rate_hz=44100, player_hz=44100, ppm=rng.uniform(-50, 50), hum=hum, source=source,
                flavour=INTEGER16)
    if "desk" in what:
        # Each take catches the oscillator at another time.
        for role in ("before", "after"):
            line = unit.takes[role].lines[0]
            line.source = plain(hz * (1 + rng.uniform(-20, 20) * 1e-6), -6.0, sec, phase=rng.uniform(0, 6),
                                drift_db=0.1 * rng.choice([-1, 1]), drift_ppm=rng.uniform(-30, 30))
    if "clicks" in what:
        for role in ("before", "after"):
            take = unit.takes[role]
            take.lines[0].clicks = [(0.05, 0.5), (take.start_sec + sec + 0.05, -0.4)]
    if "stereo" in what:
        for role in ("before", "after"):
            take = unit.takes[role]
            take.lines = [Line(noise_dbfs=noise, hum=list(hum)), take.lines[0]]
    return unit


ORDINARY = ("hum", "desk", "phone", "signal", "hum and desk", "phone and hum", "clicks", "stereo", "signal and hum", "desk and phone")


def everything(rng, i):
    """Recorded well, with every limit of the manual set and every take that proves one."""
    while True:
        pad = balanced_pad(rng, 10, 20, 0.01, network=str(rng.choice(["U", "H"])), r0=float(rng.choice([200.0, 300.0])))
        ends = Ends(float(rng.choice([50.0, 100.0])), "balanced", float(rng.choice([10000.0, 20000.0])), "balanced", 300e-12)
        bench = usual_bench(rng)
        bench.ends, bench.source_frac, bench.load_frac, bench.legs_load_ohms = ends, 0.1, 0.05, ends.load_ohms / 2
        bench.draw(rng)
        unit = CheckUnit(f"{i + 1:04d}", pad, bench, draw_parts(rng, pad), ends.but(), label="everything", expect="pass")
        true, plug_ohms = bench.true, ends.source_ohms
        legs_ends = true.but(load_ohms=2 * bench.legs_load_ohms, sense="balanced")
        ohms = 600.0
        unit.simulate(
            legs=Case(unit.built, False, legs_ends, "legs"), straight=Case([], False, legs_ends, "legs", straight=True),
            bypass=Case(plug(0.05, 0.05), False, true),
            loaded=Case(plug(0, 0) + [Part("RL", "R", (HOT_OUT, COLD_OUT), ohms)], False, true),
            port=Case(unit.built, False, true, "port", plug_ohms=plug_ohms))
        unit.note_curves()
        # A drawing whose parts' spread alone fills half the limit is no matter of good recording.
        if abs(unit.truth["service_loss_db"] - unit.curve_stated_service()) < 0.15 and abs(unit.truth["response_db"]) < 0.05:
            break
    bench.cal = {"full_scale_dbu": 18.0, "noise_full_scale_dbu": -32.0, "uncertainty_db": 0.2, "linearity_db": 0.01,
                 "gain_drift_db": 0.05, "noise_gain_drift_db": 0.02, "channel_match_db": 0.1, "noise_current_pA": 0.0,
                 "noise_plug_ohms": 0.0, "pad_plug_ohms": plug_ohms, "loaded_ohms": ohms}
    error = rng.normal() * 0.1
    bench.full_scale_dbu, bench.noise_full_scale_dbu = 18.0 + error, -32.0 + error
    unit.limits = {
        "loss_plus_minus_db": 0.4, "response_plus_minus_db": 0.2, "flatness_plus_minus_db": 0.5,
        "noise_over_thermal_db": 3.0, "noise_max_dbu": -110.0, "distortion_max_db": -80.0, "hum_max_dbu": -90.0,
        "leg_match_db": 1.0, "steady_within_db": 0.05, "bypass_within_db": 0.05, "same_polarity": True,
        "require_test_signal": True}
    offset = rng.uniform(-1, 1) * 0.01
    hum = mains(rng, -112.0)[0]
    ppm = rng.uniform(-100, 100)
    signal_pair(rng, unit, -8.0, -108.0, offset_db=offset, ppm=ppm, hum=hum)
    for role in ("before", "after"):
        unit.takes[role].lines[0].harmonics = [(2, -104.0), (3, -100.0)]
    g, c = unit.gain(-8.0), unit.curve
    moved = lambda: 10 ** (rng.uniform(-0.004, 0.004) / 20)
    tone = lambda curve, sec=3.0: take_of(rng, unit, curve, g * moved(), plain(TONE_HZ, -6.0, sec), -108.0, hum=hum)
    unit.takes["before-again"], unit.takes["after-again"] = tone(c["before"]), tone(c["after"])
    unit.takes["before-loaded"], unit.takes["bypass"] = tone(c["loaded"]), tone(c["bypass"])
    unit.takes["flex"] = tone(c["after"], 8.0)
    for role, two in (("legs", c["legs"]), ("legs-before", c["straight"])):
        source = plain(TONE_HZ, -6.0, 3.0)
        unit.takes[role] = Recording(3.8, [Line(source, two[0], g, -108.0), Line(source, two[1], g * 1.005, -108.0)], start_sec=0.4)
    port = c["port"]
    own = port.passive * TEMP_K
    amp = band_volts2(port.z.hz, own) / 19980.0 * 10 ** (rng.uniform(-3, 8) / 10)
    load = port.load * TEMP_K * (rng.random() < 0.5)
    noise_hum = [(f, db + 10.0) for f, db in hum]
    unit.takes["rig-noise"] = noise_take(bench, port.z.hz, amp, LONG_SEC, noise_hum)
    unit.takes["pad-noise"] = noise_take(bench, port.z.hz, amp + own + load, LONG_SEC, noise_hum, rng.uniform(-1, 1) * 0.02)
    return unit
