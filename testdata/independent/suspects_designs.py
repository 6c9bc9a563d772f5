"""Drawings and benches for units with faults, and every single fault that a drawing can have.

A fault is worded as the manual words it and made by the hands that would make it: a part of another
value, two parts in one another's places, a pin that meets nothing, a pin that touches the screen.
"""
import math
from dataclasses import dataclass, replace

from drawing import E24, code
from suspects_circuit import Built, Element

WHERE = {
    "L": "R1 in.hot out.hot; R2 out.hot screen",
    "U": "R1 in.hot out.hot; R2 in.cold out.cold; R3 out.hot out.cold",
    "T": "R1 in.hot mid; R2 mid out.hot; R3 mid screen",
    "H": "R1 in.hot mid.hot; R2 in.cold mid.cold; R3 mid.hot out.hot; R4 mid.cold out.cold; R5 mid.hot mid.cold",
    "pi": "R1 in.hot screen; R2 in.hot out.hot; R3 out.hot screen",
    "O": "R1 in.hot in.cold; R2 in.hot out.hot; R3 in.cold out.cold; R4 out.hot out.cold",
    "bridged-T": "R1 in.hot mid; R2 mid out.hot; R3 in.hot out.hot; R4 mid screen",
    "custom": "",
}
UNBALANCED = ("L", "T", "pi", "bridged-T")


@dataclass
class Design:
    name: str
    network: str
    parts: list          # Element at the stated value
    tolerances: list
    unbalanced: bool
    own: int             # the last so many parts say where they sit


def design(name, network, values, more="", tol=0.01):
    """values in the order of the network; more: "C1 220p out.hot out.cold; R4 1k ..." besides."""
    parts = [Element(*seat.split()[:1], "R", *seat.split()[1:], v)
             for seat, v in zip(filter(None, WHERE[network].split(";")), values, strict=True)]
    own = [w.split() for w in more.split(";") if w.strip()]
    parts += [Element(ref, ref[0], a, b, number(value)) for ref, value, a, b in own]
    return Design(name, network, parts, [tol if p.kind == "R" else 0.05 for p in parts], network in UNBALANCED, len(own))


def number(text):
    unit = {"p": 1e-12, "n": 1e-9, "u": 1e-6, "k": 1e3, "m": 1e-3}.get(text[-1])
    return float(text) if unit is None else float(text[:-1]) * unit


TWELVE = ("R1 220 in.hot a.hot; R2 220 in.cold a.cold; R3 1k a.hot a.cold; R4 330 a.hot b.hot; R5 330 a.cold b.cold; "
          "R6 680 b.hot b.cold; R7 150 b.hot out.hot; R8 150 b.cold out.cold; R9 4700 a.hot screen; "
          "R10 4700 a.cold screen; C1 470p out.hot out.cold; C2 10n b.hot b.cold")
COUPLED = "C1 22u in.hot a; C2 22u in.cold b; R1 680 a out.hot; R2 680 b out.cold; R3 270 out.hot out.cold; R4 10k a b"

DESIGNS = [
    design("Saltmarsh 12 line L", "L", [680, 150]),
    design("Saltmarsh line to consumer L", "L", [10000, 4700]),
    design("Saltmarsh 20 mic L", "L", [1500, 180]),
    design("Saltmarsh 14 line pad", "U", [560, 560, 330]),
    design("Saltmarsh 20 mic U", "U", [680, 680, 160]),
    design("Saltmarsh line to consumer U", "U", [4700, 4700, 3900]),
    design("Saltmarsh 600 T 10", "T", [300, 300, 430]),
    design("Saltmarsh 600 T 20", "T", [510, 510, 120]),
    design("Saltmarsh 600 to 150 T 15", "T", [470, 68, 150]),
    design("Saltmarsh 600 H 10", "H", [150, 150, 150, 150, 430]),
    design("Saltmarsh 600 H 20", "H", [240, 240, 240, 240, 120]),
    design("Saltmarsh 600 to 200 H 14", "H", [270, 270, 47, 47, 180]),
    design("Saltmarsh 600 pi 10", "pi", [1200, 820, 1200]),
    design("Saltmarsh 600 pi 20", "pi", [750, 3000, 750]),
    design("Saltmarsh 600 to 200 pi 14", "pi", [2700, 910, 240]),
    design("Saltmarsh 600 O 10", "O", [1200, 430, 430, 1200]),
    design("Saltmarsh 600 O 20", "O", [750, 1500, 1500, 750]),
    design("Saltmarsh 150 mic O 20", "O", [1100, 750, 750, 180]),
    design("Saltmarsh 600 bridged T 10", "bridged-T", [620, 620, 1300, 270]),
    design("Saltmarsh 600 bridged T 20", "bridged-T", [620, 620, 5600, 68]),
    design("Saltmarsh U with C", "custom", [], "R1 1k in.hot out.hot; R2 1k in.cold out.cold; "
           "R3 470 out.hot out.cold; C1 10n out.hot out.cold"),
    design("Saltmarsh coupled U", "custom", [], COUPLED),
    design("Saltmarsh twelve", "custom", [], TWELVE),
]

# source, its tolerance, load, its tolerance, cable, its tolerance: a recorder with line inputs, the same with
# its source measured, a microphone input, and 600 ohm at both ends.
BENCHES = [(100.0, 0.10, 10000.0, 0.05, 300e-12, 0.05), (98.0, 0.01, 10000.0, 0.02, 300e-12, 0.2),
           (150.0, 0.10, 2000.0, 0.05, 500e-12, 0.05), (600.0, 0.05, 600.0, 0.02, 300e-12, 0.2)]
DRIVES = ("balanced", "balanced", "floating", "impedance-balanced", "unbalanced")
SENSES = ("balanced", "balanced", "floating", "unbalanced")


@dataclass(frozen=True)
class Fault:
    """form: open short x10 /10 is drift swap leg crossed turned source load sound two."""
    form: str
    text: str
    ref: str = ""
    other: str = ""
    value: float = math.nan     # is: the stated value; drift: relative change; source, load: true over stated
    pin: str = ""
    also: tuple = ()            # two: the two faults


def neighbours(value):
    """The preferred values of E24 next below and next above; a value near one counts as that one."""
    decade = 10.0 ** math.floor(math.log10(value) + 1e-9)
    ladder = [m * d * decade for d in (0.1, 1, 10) for m in E24]
    below = max(v for v in ladder if v < value * 0.995)
    above = min(v for v in ladder if v > value * 1.005)
    return float(f"{below:.3g}"), float(f"{above:.3g}")


def discrete_faults(d):
    """Every single fault that has no amount, those that change nothing among them."""
    all_, far = [], []
    for p in d.parts:
        all_ += [Fault("open", f"{p.ref} open", p.ref), Fault("short", f"{p.ref} short", p.ref),
                 Fault("x10", f"{p.ref} x10", p.ref), Fault("/10", f"{p.ref} /10", p.ref)]
        all_ += [Fault("is", f"{p.ref} is {code(p.kind, v)}", p.ref, value=v) for v in neighbours(p.value)]
    for i, p in enumerate(d.parts):
        for j in range(i + 1, len(d.parts)):
            q = d.parts[j]
            shared = {p.a, p.b} & {q.a, q.b}
            if p.kind == q.kind and (len(d.parts) <= 6 or shared):
                (all_ if shared else far).append(Fault("swap", f"{p.ref} and {q.ref} swapped", p.ref, q.ref))
    for end in ("in", "out"):
        for leg in ("hot",) if d.unbalanced else ("hot", "cold"):
            all_ += [Fault("leg", f"{leg} leg open at {end}", pin=f"{end}.{leg}"),
                     Fault("leg", f"{leg} leg to screen at {end}", pin=f"{end}.{leg}")]
    if not d.unbalanced:
        all_.append(Fault("crossed", "legs crossed"))
    return all_ + [Fault("turned", "in and out swapped")] + far


def build(d, fault, values):
    """The unit: values are the true ones of its sound parts, by ref; a part of another value keeps its
    own share of error."""
    parts = [replace(p, value=values[p.ref]) for p in d.parts]
    unit = Built(parts, d.unbalanced)
    for f in fault.also or (fault,):
        apply(d, f, unit)
    return unit


def apply(d, f, unit):
    index = {p.ref: i for i, p in enumerate(d.parts)}

    def move(names):
        unit.parts[:] = [replace(p, a=names.get(p.a, p.a), b=names.get(p.b, p.b)) for p in unit.parts]
    if f.form in ("open", "short", "x10", "/10", "is", "drift"):
        i = index[f.ref]
        p = unit.parts[i]
        none, full = (0.0, math.inf) if p.kind != "C" else (math.inf, 0.0)
        value = {"open": full, "short": none, "x10": p.value * 10, "/10": p.value / 10,
                 "is": f.value * p.value / d.parts[i].value, "drift": p.value * (1 + f.value)}[f.form]
        unit.parts[i] = replace(p, value=value)
    elif f.form == "swap":
        i, j = index[f.ref], index[f.other]
        p, q = unit.parts[i], unit.parts[j]
        unit.parts[i], unit.parts[j] = replace(p, value=q.value), replace(q, value=p.value)
    elif f.form == "leg" and " open " in f.text:
        move({f.pin: "behind-" + f.pin})
    elif f.form == "leg":
        unit.wires.append((f.pin, "screen"))
    elif f.form == "crossed":
        move({"out.hot": "out.cold", "out.cold": "out.hot"})
    elif f.form == "turned":
        move({"in.hot": "out.hot", "out.hot": "in.hot", "in.cold": "out.cold", "out.cold": "in.cold"})
