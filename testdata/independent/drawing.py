"""Drawings and benches, and the sheets that state them.

A Pad holds its parts at their stated values. The networks and the order of their references are
those of the manual; the values come from the handbook formulas for matched pads, rounded to E24 or
left exact. What a pad loses is never taken from these formulas: see circuit.py.
"""
import math
from dataclasses import dataclass

from circuit import Ends, Part

E24 = (1.0, 1.1, 1.2, 1.3, 1.5, 1.6, 1.8, 2.0, 2.2, 2.4, 2.7, 3.0,
       3.3, 3.6, 3.9, 4.3, 4.7, 5.1, 5.6, 6.2, 6.8, 7.5, 8.2, 9.1)
UNBALANCED = ("L", "T", "pi", "bridged-T")
BALANCED = ("U", "H", "O")
HOT_IN, COLD_IN, HOT_OUT, COLD_OUT = "in.hot", "in.cold", "out.hot", "out.cold"

WHERE = {
    "L": [(HOT_IN, HOT_OUT), (HOT_OUT, "screen")],
    "U": [(HOT_IN, HOT_OUT), (COLD_IN, COLD_OUT), (HOT_OUT, COLD_OUT)],
    "T": [(HOT_IN, "mid"), ("mid", HOT_OUT), ("mid", "screen")],
    "H": [(HOT_IN, "midhot"), (COLD_IN, "midcold"), ("midhot", HOT_OUT), ("midcold", COLD_OUT),
          ("midhot", "midcold")],
    "pi": [(HOT_IN, "screen"), (HOT_IN, HOT_OUT), (HOT_OUT, "screen")],
    "O": [(HOT_IN, COLD_IN), (HOT_IN, HOT_OUT), (COLD_IN, COLD_OUT), (HOT_OUT, COLD_OUT)],
    "bridged-T": [(HOT_IN, "mid"), ("mid", HOT_OUT), (HOT_IN, HOT_OUT), ("mid", "screen")],
}


@dataclass
class Pad:
    network: str
    parts: list                 # Part at the stated value, in the drawing's order
    tolerances: list            # fractions, one a part
    unbalanced: bool
    extra: int = 0              # the last so many parts say where they sit


def e24(value):
    """The nearest E24 value, by ratio."""
    decade = 10.0 ** math.floor(math.log10(value))
    best = min((*E24, 10.0), key=lambda m: abs(math.log(m * decade / value)))
    return float(f"{best * decade:.3g}")


def matched(network, loss_db, r0):
    """Arms of the matched pad of image impedance r0, in the order of the references."""
    k = 10 ** (loss_db / 20)
    series, shunt = r0 * (k - 1) / (k + 1), 2 * r0 * k / (k * k - 1)
    bridge, leg = r0 * (k * k - 1) / (2 * k), r0 * (k + 1) / (k - 1)
    return {
        "L": [r0 * (k - 1) / k, r0 / (k - 1)],
        "U": [r0 * (k - 1) / (2 * k), r0 * (k - 1) / (2 * k), r0 / k],
        "T": [series, series, shunt],
        "H": [series / 2] * 4 + [shunt],
        "pi": [leg, bridge, leg],
        "O": [leg, bridge / 2, bridge / 2, leg],
        "bridged-T": [r0, r0, r0 * (k - 1), r0 / (k - 1)],
    }[network]


def standard_pad(network, values, tolerance=0.01, extra=()):
    """A pad of one of the named networks; extra parts carry their own nodes."""
    parts = [Part(f"R{i + 1}", "R", where, v)
             for i, (where, v) in enumerate(zip(WHERE[network], values, strict=True))]
    parts += extra
    tolerances = [tolerance] * len(values) + [tolerance if p.kind == "R" else 0.05 for p in extra]
    return Pad(network, parts, tolerances, network in UNBALANCED, len(extra))


def custom_pad(shape, loss_db, r0, tolerance=0.01):
    """Four drawings of their own: a filtered one, a shunt tied to screen, uneven legs, linked colds."""
    k = 10 ** (loss_db / 20)
    arm, shunt = e24(r0 * (k - 1) / (k + 1) / 2), e24(2 * r0 * k / (k * k - 1))
    if shape == "filtered":
        parts = [Part("R1", "R", (HOT_IN, "a"), arm), Part("R2", "R", (COLD_IN, "b"), arm),
                 Part("R3", "R", ("a", "b"), shunt), Part("L1", "L", ("a", HOT_OUT), 2.2e-3),
                 Part("L2", "L", ("b", COLD_OUT), 2.2e-3), Part("C1", "C", (HOT_OUT, COLD_OUT), 1e-9)]
    elif shape == "tied":
        half = e24(shunt / 2)
        parts = [Part("R1", "R", (HOT_IN, HOT_OUT), arm), Part("R2", "R", (COLD_IN, COLD_OUT), arm),
                 Part("R3", "R", (HOT_OUT, "screen"), half), Part("R4", "R", (COLD_OUT, "screen"), half)]
    elif shape == "uneven":
        parts = [Part("R1", "R", (HOT_IN, "tap"), arm), Part("R2", "R", ("tap", HOT_OUT), e24(arm * 2)),
                 Part("R3", "R", (COLD_IN, COLD_OUT), e24(arm * 3)), Part("R4", "R", ("tap", "screen"), shunt),
                 Part("R5", "R", ("tap", COLD_OUT), e24(shunt * 1.5)),
                 Part("C1", "C", (HOT_IN, COLD_IN), 470e-12)]
    else:
        parts = [Part("R1", "R", (HOT_IN, "m"), e24(2 * arm)), Part("R2", "R", ("m", HOT_OUT), e24(2 * arm)),
                 Part("R3", "R", ("m", COLD_OUT), shunt), Part("C1", "C", ("m", "screen"), 2.2e-9),
                 Part("R4", "R", (COLD_IN, "screen"), 0.0), Part("R5", "R", (COLD_OUT, "screen"), 0.0)]
    return Pad("custom", parts, [tolerance if p.kind == "R" else 0.05 for p in parts], False, len(parts))


@dataclass
class Rig:
    """What rig.toml states. Tolerances and half-widths are rectangles; nil unless given."""
    ends: Ends
    source_frac: float = 0.0
    load_frac: float = 0.0          # of load and cable
    linearity_db: float = 0.0
    gain_drift_db: float = 0.0
    after_gain_db: float = 0.0
    after_gain_half_db: float = 0.0
    mains_hz: int = 50


CODES = {"R": ((1e6, "M"), (1e3, "k"), (1.0, "R")), "C": ((1e-6, "u"), (1e-9, "n"), (1e-12, "p")),
         "L": ((1.0, "H"), (1e-3, "m"), (1e-6, "u"))}


def code(kind, value):
    """A value as marked on a part (IEC 60062) where three digits hold it, else in plain figures."""
    if value == 0:
        return "0"
    for unit, letter in CODES[kind]:
        if value >= unit * 0.999999:
            break
    digits = f"{value / unit:.6g}"
    if "e" in digits or len(digits.replace(".", "")) > 3:
        return f"{value:.9g}" if kind == "R" else f"{digits}{letter}"
    if "." in digits:
        return digits.replace(".", letter).removeprefix("0")
    return digits if letter == "R" else digits + letter


def percent(frac):
    return f"{frac * 100:g}%"


def pad_toml(name, pad, service=None, limits=None):
    lines = [f'name    = "{name}"', f'network = "{pad.network}"', "parts = ["]
    for i, (p, tolerance) in enumerate(zip(pad.parts, pad.tolerances, strict=True)):
        text = f'  {{ ref = "{p.ref}", value = "{code(p.kind, p.value)}", tolerance = "{percent(tolerance)}"'
        if i >= len(pad.parts) - pad.extra:
            text += f', between = ["{p.between[0]}", "{p.between[1]}"]'
        lines.append(text + " },")
    lines.append("]")
    if service:
        lines += ["", "[service]", f"source_ohms = {service.source_ohms:.9g}",
                  f"load_ohms = {service.load_ohms:.9g}", f"cable_pF = {service.cable_farads * 1e12:.9g}",
                  f'drive = "{service.drive}"', f'sense = "{service.sense}"']
    if limits:
        lines += ["", "[limits]"] + [f"{k} = {v!r}" for k, v in limits.items()]
    return "\n".join(lines) + "\n"


def rig_toml(name, rig):
    e = rig.ends
    return f"""name = "{name}"
temperature_c = 21
mains_hz = {rig.mains_hz}

[output]
source_ohms = {e.source_ohms:.9g}
tolerance = "{percent(rig.source_frac)}"
drive = "{e.drive}"

[input]
load_ohms = {e.load_ohms:.9g}
tolerance = "{percent(rig.load_frac)}"
sense = "{e.sense}"
cable_pF = {e.cable_farads * 1e12:.9g}

[calibration]
full_scale_dbu = 18.0
uncertainty_db = 0.2
linearity_db = {rig.linearity_db:.9g}
gain_drift_db = {rig.gain_drift_db:.9g}
after_gain_db = {rig.after_gain_db:.9g}
after_gain_uncertainty_db = {rig.after_gain_half_db:.9g}
"""
