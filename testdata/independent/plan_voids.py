"""Plan lies: every problem that a recording can have, drawn many times; none may become a PASS.

The limits are wide, so that nothing but the recordings decides. Where two words are right for what is
done, either counts.
"""
import math

import numpy as np

from checkunit import CheckUnit, balanced_pad, signal_pair, take_of, usual_bench
from curves import Case, sweep
from plan_noise import noise_take
from record import Line, Recording
from testsignal import TONE_HZ, TestSignal, plain
from unit import FLOAT32, INTEGER16, INTEGER24, draw_parts
from wavbytes import UNKNOWN, Flavour

KINDS = ("clipped", "clipped flat", "gain-riding", "gain-moved", "channel-silent", "dropout gone", "dropout zero",
         "dropout again", "swapped", "same-recording", "same-recording resaved", "same-recording trimmed", "frequency-differs", "no-tone",
         "no-tone hum", "too-short", "too-weak", "not-closed", "cut-short", "one-channel", "one-channel doubled",
         "tone-in-noise", "tone-in-noise rig", "bad-samples", "below-thermal", "control")
WIDE = {"loss_plus_minus_db": 30.0}


def lies(rng, i):
    kind = KINDS[i % len(KINDS)]
    pad = balanced_pad(rng, 6, 30)
    unit = CheckUnit(f"{i + 1:04d}", pad, usual_bench(rng), draw_parts(rng, pad), label=kind, limits=dict(WIDE),
                     problem=kind.split()[0], expect="not-pass")
    ends = unit.bench.true.but(load_ohms=2 * unit.bench.legs_load_ohms, sense="balanced")
    more = {"legs": Case(unit.built, False, ends, "legs")} if kind.startswith("one-channel") else {}
    unit.simulate(**more)
    unit.note_curves()
    signal = kind == "gain-riding" or rng.random() < 0.3 and not kind.startswith(("too-", "frequency"))
    rate = int(rng.choice([44100, 48000]))
    source = TestSignal(rate) if signal else plain(float(rng.choice([440.0, 997.0, 1000.0])), -6.0, rng.uniform(2.5, 4.0))
    signal_pair(rng, unit, rng.uniform(-14, -7), rng.uniform(-108, -95), rate_hz=rate, source=source,
                flavour=[INTEGER24, FLOAT32, INTEGER16][rng.integers(2 if kind.startswith("same-recording ") else 3)])
    TELLERS[kind](rng, unit, unit.takes["before"], unit.takes["after"], source)
    unit.truth["signal"] = bool(signal)
    return unit


def middle(rng, take, source):
    """A second of the take well inside its loud steady tone."""
    begin, end, _, _ = source.tones()[0]
    return take.start_sec + rng.uniform(begin + 0.6, end - 0.6)


def either(rng, unit):
    role = str(rng.choice(["before", "after"]))
    unit.on = role
    return unit.takes[role]


def clipped(rng, unit, before, after, source):
    """The recorder's converter: everything past full scale is cut."""
    take = either(rng, unit)
    line = take.lines[0]
    line.gain *= 10 ** (rng.uniform(0.4, 4.0) / 20) / peak_of(unit, take, line)
    if take is before:
        after.lines[0].gain = line.gain
        unit.on = "before"
    else:
        unit.bench.cal["after_gain_db"] = 20 * math.log10(line.gain / before.lines[0].gain)
    # A float file would hold what a converter cuts.
    line.clip_at = 1.0


def clipped_flat(rng, unit, before, after, source):
    """Something ahead of the recorder clips: flat tops below full scale."""
    take = either(rng, unit)
    line = take.lines[0]
    line.clip_at = peak_of(unit, take, line) * 10 ** (-rng.uniform(0.4, 4.0) / 20)
    line.clips_first = True


def peak_of(unit, take, line):
    role = next(r for r, t in unit.takes.items() if t is take)
    return abs(line.gain) * 10 ** (-6.0 / 20) * abs(complex(unit.curve[role].at(TONE_HZ)))


def gain_riding(rng, unit, before, after, source):
    """Automatic gain in one take or in both: the 10 dB step comes out smaller."""
    compression, time = rng.uniform(0.2, 4.0), rng.uniform(0.05, 0.4)
    for take in ([either(rng, unit)] if rng.random() < 0.6 else [before, after]):
        take.lines[0].ride = (compression, time)
    unit.truth["compression_db"] = compression


def gain_moved(rng, unit, before, after, source):
    moved = rng.choice([-1, 1]) * rng.uniform(0.2, 3.0)
    unit.takes["before-again"] = take_of(rng, unit, unit.curve["before"], before.lines[0].gain * 10 ** (moved / 20), source,
                                         before.lines[0].noise_dbfs, before.rate_hz)
    unit.on = "before-again"


def channel_silent(rng, unit, before, after, source):
    take = either(rng, unit)
    take.lines = [Line(noise_dbfs=-math.inf)]
    take.dither = False


def dropout(how):
    def lose(rng, unit, before, after, source):
        take = either(rng, unit)
        frames = int(rng.choice([64, 128, 256, 512, 1024]))
        hz = source.tones()[0][2]
        # A jump of near a whole number of periods cannot be seen: take another length.
        while how != "zero" and abs((frames * hz / take.rate_hz + 0.5) % 1 - 0.5) < 0.06:
            frames += 17
        take.lost = [(middle(rng, take, source), frames, how)]
        unit.truth["frames"] = frames
    return lose


def swapped(rng, unit, before, after, source):
    unit.mangle = [("swap",)]


def same(rng, unit, before, after, source):
    unit.mangle = [("copy",)]


def resaved(trimmed):
    """The same samples in another format, or with some of the start cut off besides."""
    def tell(rng, unit, before, after, source):
        other = FLOAT32 if before.flavour == INTEGER24 else INTEGER24
        unit.mangle = [("resave", other, int(rng.integers(300, 4000)) if trimmed else 0)]
    return tell


def frequency(rng, unit, before, after, source):
    factor = 1 + rng.choice([-1, 1]) * rng.uniform(0.012, 0.06)
    line = after.lines[0]
    line.source = plain(source.tones()[0][2] * factor, -6.0, source.sec)
    unit.on = "after"


def no_tone(rng, unit, before, after, source):
    after.lines[0].source = None
    unit.on = "after"


def no_tone_hum(rng, unit, before, after, source):
    no_tone(rng, unit, before, after, source)
    after.lines[0].hum = [(50.01 * k, -50.0 - 3 * k) for k in (1, 2, 3, 4, 5)]


def too_short(rng, unit, before, after, source):
    role = str(rng.choice(["before", "after"]))
    unit.on = role
    take = unit.takes[role]
    short = plain(source.tones()[0][2], -6.0, rng.uniform(0.3, 0.85))
    unit.takes[role] = take_of(rng, unit, unit.curve[role], take.lines[0].gain, short, take.lines[0].noise_dbfs, take.rate_hz,
                               flavour=take.flavour)


def too_weak(rng, unit, before, after, source):
    """A tone in so much noise that no take of this length can place it within half a decibel."""
    line = after.lines[0]
    sec, rate = source.sec, after.rate_hz
    u_db = rng.uniform(0.9, 2.0)                # twice the least standard deviation of its level
    snr = 2 / (2 * rate * sec) * (40 / math.log(10) / u_db) ** 2 / 2
    level = 20 * math.log10(line.gain * 10 ** (-6 / 20) * abs(complex(unit.curve["after"].at(1000.0))))
    line.noise_dbfs = level - 10 * math.log10(snr)
    line.clip_at = 0.0
    if line.noise_dbfs > -14:                   # keep the noise under full scale
        down = 10 ** ((-14 - line.noise_dbfs) / 20)
        line.gain *= down
        before.lines[0].gain *= down
        line.noise_dbfs = -14.0
    after.flavour = INTEGER24
    unit.problem, unit.on = "too-weak|no-tone", "after"


def not_closed(rng, unit, before, after, source):
    take = either(rng, unit)
    take.flavour = Flavour(int(rng.choice([16, 24])), sizes=[0, UNKNOWN][rng.integers(2)])


def cut_short(rng, unit, before, after, source):
    take = either(rng, unit)
    take.flavour = INTEGER24
    unit.mangle = [("cut", unit.on, take.start_sec + rng.uniform(0.2, 0.95) * source.sec)]


def one_channel(doubled):
    def tell(rng, unit, before, after, source):
        c, gain = unit.curve["legs"], unit.gain(-9.0)
        tone = plain(1000.0, -6.0, 3.0)
        lines = [Line(tone, c[0], gain, -105.0)]
        unit.takes["legs"] = Recording(4.0, lines, start_sec=0.4)
        if doubled:
            unit.mangle = [("double", "legs")]
        unit.limits["leg_match_db"] = 30.0
        unit.on = "legs"
    return tell


def noise_pair(rng, unit, pad_db=-95.0, rig_db=-97.0, seconds=10.0):
    for role, level in (("rig-noise", rig_db), ("pad-noise", pad_db)):
        unit.takes[role] = Recording(seconds, [Line(noise_dbfs=level)], 44100)
    unit.limits["noise_over_thermal_db"] = 60.0


def tone_in_noise(role):
    def tell(rng, unit, before, after, source):
        noise_pair(rng, unit)
        line = unit.takes[role].lines[0]
        line.source, line.gain = plain(1000.0, -6.0, 9.0), 10 ** (rng.uniform(-70, -20) / 20)
        unit.takes[role].start_sec = 0.5
        unit.on = role
        if role == "rig-noise":
            unit.on = "rig-noise|pad-noise"
    return tell


def bad_samples(rng, unit, before, after, source):
    take = either(rng, unit)
    take.flavour = FLOAT32
    take.bad = [(middle(rng, take, source), [math.nan, math.inf, -math.inf][rng.integers(3)])]


def below_thermal(rng, unit, before, after, source):
    """The calibration is wrong by so much that the pad would be quieter than physics allows."""
    un, ends = unit.pad.unbalanced, unit.bench.ends
    plug = 100.0
    unit.bench.cal.update(pad_plug_ohms=plug)
    [port] = sweep([Case(unit.built, un, ends, "port", plug_ohms=plug)])
    thermal = port.passive * 294.15
    amp = thermal.mean() * 10 ** (rng.uniform(-6, 0) / 10)
    unit.bench.noise_full_scale_dbu = -32.0
    unit.takes["rig-noise"] = noise_take(unit.bench, port.z.hz, np.full(port.z.hz.shape, amp), 20.0)
    unit.takes["pad-noise"] = noise_take(unit.bench, port.z.hz, thermal + amp, 20.0)
    unit.bench.cal["noise_full_scale_dbu"] = -32.0 - rng.uniform(6, 20)
    unit.limits["noise_over_thermal_db"] = 10.0
    unit.on = "pad-noise"


def control(rng, unit, before, after, source):
    unit.problem, unit.expect = "", "pass"


TELLERS = {
    "clipped": clipped, "clipped flat": clipped_flat, "gain-riding": gain_riding, "gain-moved": gain_moved,
    "channel-silent": channel_silent, "dropout gone": dropout("gone"), "dropout zero": dropout("zero"),
    "dropout again": dropout("again"), "swapped": swapped, "same-recording": same, "same-recording resaved": resaved(False),
    "same-recording trimmed": resaved(True),
    "frequency-differs": frequency, "no-tone": no_tone, "no-tone hum": no_tone_hum, "too-short": too_short,
    "too-weak": too_weak, "not-closed": not_closed, "cut-short": cut_short, "one-channel": one_channel(False),
    "one-channel doubled": one_channel(True), "tone-in-noise": tone_in_noise("pad-noise"),
    "tone-in-noise rig": tone_in_noise("rig-noise"), "bad-samples": bad_samples, "below-thermal": below_thermal,
    "control": control}
