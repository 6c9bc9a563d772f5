"""Plans lies, odd, flavours and long: one sound pad, recorded wrongly, unusually, in every format, at length."""
import math
from dataclasses import replace

from circuit import Ends
from drawing import Rig, standard_pad
from plan_service import simulate
from unit import FLOAT32, INTEGER16, Unit, note_levels, simple_takes
from wavbytes import UNKNOWN, Flavour

NARROW, WIDE = 0.5, 30.0     # half-widths in dB; the wide one lets only the recordings decide
LEAD, TONE, TAIL = 0.3, 2.5, 0.2


def sound(serial, half_db, rig=None):
    pad = standard_pad("U", [560.0, 560.0, 330.0], 0.01)
    rig = rig or Rig(Ends(100.0, "balanced", 10000.0, "balanced", 300e-12), 0.01, 0.01, 0.01, 0.02)
    return Unit(serial, pad, rig, 997.0, limits={"loss_plus_minus_db": half_db})


def plain(rng, unit, flavour=Flavour(24), rate_hz=48000, tone_sec=TONE, snr_db=66.0):
    simple_takes(rng, unit, -8.0, snr_db, rate_hz, tone_sec, LEAD, TAIL, flavour)


# What is done, the word that names it, and what must come of it.
LIES = (
    ("control", "", "pass"),
    ("swapped", "swapped", "not-pass"),
    ("same", "same-recording", "not-pass"),
    ("resaved", "same-recording", "not-pass"),  # the same samples in another format
    ("clipped", "clipped", "not-pass"),
    ("clipped a little", "clipped", "not-pass"),
    ("clipped after", "clipped", "not-pass"),
    ("noise alone", "no-tone", "not-pass"),
    ("digital silence", "channel-silent", "not-pass"),
    ("short", "too-short", "not-pass"),
    ("cut to half a second", "cut-short", "not-pass"),
    ("cut to two seconds", "cut-short", "not-pass"),
    ("frequency", "frequency-differs", "not-pass"),
    ("not a number", "bad-samples", "not-pass"),
    ("infinite", "bad-samples", "not-pass"),
)


def lies(count, rng):
    """Recordings that must not become a PASS, each under a narrow and a wide limit; and the control that must."""
    units = []
    for what, problem, expect in LIES:
        for half_db in (NARROW, WIDE):
            unit = sound(f"{len(units) + 1:04d}", half_db)
            unit.label, unit.problem, unit.expect = what, problem, expect
            unit.recorded_well = what == "control"
            units.append(unit)
    simulate(units)
    for unit in units:
        plain(rng, unit, tone_sec=0.7 if unit.label == "short" else TONE)
        tell(unit)
    return units


def tell(unit):
    """Makes the lie."""
    before, after = unit.before, unit.after
    loud = {"clipped": (before, 3.0), "clipped a little": (before, 0.3), "clipped after": (after, 0.5)}
    if unit.label in loud:
        take, over_db = loud[unit.label]
        raise_db = over_db - take.tones[0].level_dbfs
        for t in (before, after):
            t.tones[0].level_dbfs += raise_db if t is take else 0.0
        if take is before:
            after.tones[0].level_dbfs += raise_db
        else:
            # The gain was raised for after, and the sheet says so.
            unit.rig.after_gain_db = raise_db
    elif unit.label == "swapped":
        unit.mangle = [("swap",)]
    elif unit.label == "same":
        unit.mangle = [("copy",)]
    elif unit.label == "resaved":
        unit.after, unit.mangle = replace(before, flavour=FLOAT32), []
        unit.after.noise_dbfs = before.noise_dbfs
    elif unit.label == "noise alone":
        after.tones[0].level_dbfs = -math.inf
    elif unit.label == "digital silence":
        unit.after = replace(after, tones=[], noise_dbfs=-math.inf, dither=False)
    elif unit.label.startswith("cut to"):
        unit.mangle = [("cut", "after", LEAD + (0.5 if "half" in unit.label else 2.0))]
    elif unit.label == "frequency":
        after.tones[0].freq_hz *= 1.03
    elif unit.label == "not a number":
        after.flavour, after.bad = FLOAT32, [(LEAD + 1.1, math.nan)]
    elif unit.label == "infinite":
        before.flavour, before.bad = FLOAT32, [(LEAD + 1.1, math.inf)]


def odd(count, rng):
    """Sound units in unusual takes: a generous limit must be a PASS."""
    names = ("another rate before", "channel 2 of 4", "minutes of silence", "clicks outside", "three tones",
             "talk around", "constant offset", "hum under the tone", "long after tone")
    units = [sound(f"{i + 1:04d}", 1.0) for i in range(len(names))]
    simulate(units)
    for unit, name in zip(units, names, strict=True):
        unit.label, unit.expect = name, "pass"
        plain(rng, unit)
        both = (unit.before, unit.after)
        if name == "another rate before":
            unit.before.rate_hz = 96000
        elif name == "channel 2 of 4":
            for t in both:
                t.channels, t.channel, t.crosstalk_db = 4, 2, -70.0
        elif name == "minutes of silence":
            for t, sec in zip(both, (130.0, 155.0), strict=True):
                t.flavour = INTEGER16
                move(t, sec)
        elif name == "clicks outside":
            for t in both:
                move(t, 2.0)
                t.clicks = [(0.4, 0.7), (1.1, -0.5), (1.7, 0.6), (t.tones[0].to_sec + 0.1, 0.7)]
        elif name == "three tones":
            for t in both:
                step(t)
        elif name == "talk around":
            for t in both:
                move(t, 3.0)
                t.talk = [(0.1, 2.6, 0.5), (t.tones[0].to_sec + 0.2, t.tones[0].to_sec + 1.7, 0.5)]
                t.seconds += 2.0
        elif name == "constant offset":
            for t in both:
                t.dc = 0.02
        elif name == "hum under the tone":
            for t in both:
                t.hum = [(50.01, -45.0), (150.03, -50.0), (250.05, -58.0)]
        elif name == "long after tone":
            unit.after.tones[0].to_sec += 12.0
            unit.after.seconds += 12.0
        note_levels(unit)
    return units


def move(take, sec):
    """Puts sec more of noise ahead of the tone."""
    take.seconds += sec
    take.tones = [replace(t, from_sec=t.from_sec + sec, to_sec=t.to_sec + sec) for t in take.tones]


def step(take):
    """Three tones one after another, 2 s each, the one nearest 1 kHz listed first."""
    tone = take.tones[0]
    at = tone.from_sec
    low, mid, high = (replace(tone, freq_hz=f, from_sec=at + 2 * i, to_sec=at + 2 * i + 2)
                      for i, f in enumerate((100.0, 1000.0, 10000.0)))
    take.tones, take.seconds = [mid, low, high], at + 6 + TAIL


def flavours(count, rng):
    """The same takes in every flavour; each folder is named for its own."""
    info = (b"LIST", b"INFOICMT" + (6).to_bytes(4, "little") + b"bench\0")
    bext = (b"bext", b"Line test".ljust(602, b"\0"))
    junk = (b"junk", bytes(range(33)))              # an odd length, with its pad byte
    cue = (b"cue ", b"\0\0\0\0")
    flavour = {
        "pcm24": Flavour(24), "pcm8": Flavour(8), "pcm16": Flavour(16), "pcm32": Flavour(32),
        "float32": FLOAT32, "float64": Flavour(64, is_float=True),
        "fmt18-pcm16": Flavour(16, fmt_bytes=18), "fmt18-float32": Flavour(32, is_float=True, fmt_bytes=18),
        "ext-pcm8": Flavour(8, extensible=True), "ext-pcm16": Flavour(16, extensible=True),
        "ext-pcm24": Flavour(24, extensible=True), "ext-pcm32": Flavour(32, extensible=True),
        "ext-20-in-24": Flavour(24, valid=20, extensible=True), "ext-24-in-32": Flavour(32, valid=24, extensible=True),
        "ext-20-in-32": Flavour(32, valid=20, extensible=True),
        "ext-float32": Flavour(32, is_float=True, extensible=True),
        "ext-float64": Flavour(64, is_float=True, extensible=True),
        "rf64-pcm24": Flavour(24, form=b"RF64"), "rf64-float32": Flavour(32, is_float=True, form=b"RF64"),
        "bw64-pcm16": Flavour(16, form=b"BW64"), "rf64-ext-pcm24": Flavour(24, form=b"RF64", extensible=True),
        "chunks-before": Flavour(24, before=(junk, bext, info)),
        "chunks-between": Flavour(16, between=(info, junk, cue)),
        "chunks-after": Flavour(24, trailing=(info, cue, junk)),
        "rf64-chunks": Flavour(24, form=b"RF64", between=(junk, info)),
        "size-0": Flavour(24, sizes=0), "size-unknown": Flavour(16, sizes=UNKNOWN),
        "size-0-float": Flavour(32, is_float=True, sizes=0),
    }
    rates = {"rate-8000": 8000, "rate-11025": 11025, "rate-22050": 22050, "rate-32000": 32000, "rate-384000": 384000}
    channels = {"channels-2": (2, 1), "channels-6": (6, 5), "channels-64": (64, 37)}
    exact = Rig(Ends(100.0, "balanced", 10000.0, "balanced", 300e-12))
    units = [sound(name, 1.0, exact) for name in (*flavour, *rates, *channels)]
    simulate(units)
    for unit in units:
        name = unit.serial
        plain(rng, unit, flavour.get(name, INTEGER16), rates.get(name, 48000), snr_db=64.0)
        for take in (unit.before, unit.after):
            take.seconds += 1 / take.rate_hz * (1 - take.frames % 2)     # an odd number of frames
            take.tones[0].phase = 1.0
            take.channels, take.channel = channels.get(name, (1, 1))
        unit.seed = 1
        unit.truth["tol_db"] = 0.15 if "pcm8" in name else 0.01
        note_levels(unit)
    return units


def long(count, rng, seconds=(60.0, 600.0), rate_hz=16000, channels=1):
    """A steady tone for so many seconds, 16-bit mono (24-bit if more channels): memory must not grow with it."""
    units = [sound(f"{sec:g}s", 1.0) for sec in seconds]
    simulate(units)
    for unit, sec in zip(units, seconds, strict=True):
        plain(rng, unit, INTEGER16 if channels == 1 else Flavour(24), rate_hz, sec - LEAD - TAIL)
        unit.expect = "pass"
        for take in (unit.before, unit.after):
            take.channels = channels
    return units


