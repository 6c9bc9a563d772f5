"""Losses of pads by ngspice: netlists of the bench with and without the pad.

Nothing here solves a circuit: the two voltages of every case come out of the simulator. A case is a
list of parts between named nodes, the ends of the bench or of the place of service, and a
frequency. Cases of one frequency share a netlist, so that hundreds take a second.
"""
import math
import os
import shutil
import subprocess
import tempfile
from dataclasses import dataclass, replace

DRIVES = ("balanced", "floating", "impedance-balanced", "unbalanced")
SENSES = ("balanced", "floating", "unbalanced")

# A leak from every node to the screen, so that floating circuits have a solution. Against the
# largest load used (100 kohm) it takes 1e-7 dB.
LEAK_OHMS = 1e13
OPEN = math.inf      # a part of this value is left out
NOTHING = 1e-9       # voltage ratio under which only a leak came through


@dataclass(frozen=True)
class Ends:
    """What a pad stands between. Ohms are leg to leg (hot to screen where unbalanced)."""
    source_ohms: float
    drive: str
    load_ohms: float
    sense: str
    cable_farads: float = 0.0

    def but(self, **changes):
        return replace(self, **changes)


@dataclass(frozen=True)
class Part:
    """A part of a drawing: ref, kind R, C or L, its two nodes, its value in ohm, farad or henry."""
    ref: str
    kind: str
    between: tuple
    value: float

    def at(self, value):
        return replace(self, value=value)


class Netlist:
    """Lines of one circuit, its nodes folded together where the bench makes them one."""

    def __init__(self, tag, fold):
        self.tag, self.fold, self.lines, self.seen = tag, fold, [], set()

    def node(self, name):
        name = self.fold.get(name, name)
        if name == "screen":
            return "0"
        name = f"{self.tag}_{name.replace('.', '_').replace('-', '_')}".lower()
        if name not in self.seen:
            self.seen.add(name)
            self.lines.append(f"r{name}_leak {name} 0 {LEAK_OHMS:g}")
        return name

    def add(self, kind, label, a, b, value):
        a, b = self.node(a), self.node(b)
        if a != b:
            self.lines.append(f"{kind}{self.tag}_{label} {a} {b} {value}".lower())

    def resistor(self, label, a, b, ohms):
        if ohms == 0:
            self.add("V", label, a, b, "dc 0 ac 0")
        elif ohms != OPEN:
            self.add("R", label, a, b, f"{ohms:.15g}")

    def part(self, p):
        if p.kind == "R":
            self.resistor("part_" + p.ref, *p.between, p.value)
        else:
            self.add(p.kind, "part_" + p.ref, *p.between, f"{p.value:.15g}")

    def drive(self, ends):
        whole, half = ends.source_ohms, ends.source_ohms / 2
        if ends.drive == "balanced":
            self.add("V", "hot", "gen.hot", "screen", "dc 0 ac 0.5 0")
            self.resistor("hot", "gen.hot", "in.hot", half)
            self.add("V", "cold", "gen.cold", "screen", "dc 0 ac 0.5 180")
            self.resistor("cold", "gen.cold", "in.cold", half)
        elif ends.drive == "floating":
            self.add("V", "gen", "gen.hot", "in.cold", "dc 0 ac 1 0")
            self.resistor("gen", "gen.hot", "in.hot", whole)
        elif ends.drive == "impedance-balanced":
            self.add("V", "hot", "gen.hot", "screen", "dc 0 ac 1 0")
            self.resistor("hot", "gen.hot", "in.hot", half)
            self.resistor("cold", "in.cold", "screen", half)
        else:
            self.add("V", "gen", "gen.hot", "screen", "dc 0 ac 1 0")
            self.resistor("gen", "gen.hot", "in.hot", whole)

    def sense(self, ends):
        if ends.sense == "balanced":
            self.resistor("load_hot", "out.hot", "screen", ends.load_ohms / 2)
            self.resistor("load_cold", "out.cold", "screen", ends.load_ohms / 2)
        elif ends.sense == "floating":
            self.resistor("load", "out.hot", "out.cold", ends.load_ohms)
        else:
            self.resistor("load", "out.hot", "screen", ends.load_ohms)
        if ends.cable_farads:
            self.add("C", "cable", "out.hot", "out.cold", f"{ends.cable_farads:.15g}")

    def output(self):
        return self.node("out.hot"), self.node("out.cold")


def folded(unbalanced, ends, straight):
    """Which nodes are one: by the network, by the bench, by the cable that replaces the pad."""
    fold = {}
    cold_in = "screen" if unbalanced or ends.drive == "unbalanced" else "in.cold"
    cold_out = "screen" if unbalanced or ends.sense == "unbalanced" else "out.cold"
    if straight:
        fold["out.hot"] = "in.hot"
        both = "screen" if "screen" in (cold_in, cold_out) else "in.cold"
        cold_in = cold_out = both
    fold["in.cold"], fold["out.cold"] = cold_in, cold_out
    return fold


class Simulator:
    """Collects cases and has them all simulated at once."""

    def __init__(self):
        self._cases = []

    def ask(self, parts, unbalanced, ends, freq_hz):
        """Queues the insertion loss of parts between ends at freq_hz; returns its place in run()."""
        self._cases.append((tuple(parts), unbalanced, ends, float(freq_hz)))
        return len(self._cases) - 1

    def run(self):
        """Insertion losses in dB, in the order asked; positive is loss, inf when nothing comes through."""
        losses = [math.nan] * len(self._cases)
        by_freq = {}
        for i, case in enumerate(self._cases):
            by_freq.setdefault(case[3], []).append(i)
        for freq_hz, places in by_freq.items():
            volts, lines = {}, ["* pads on their benches"]
            for i in places:
                parts, unbalanced, ends, _ = self._cases[i]
                for straight in (True, False):
                    n = Netlist(f"c{i}{'b' if straight else 'a'}", folded(unbalanced, ends, straight))
                    n.drive(ends)
                    n.sense(ends)
                    if not straight:
                        for p in parts:
                            n.part(p)
                    volts[i, straight] = n.output()
                    lines += n.lines
            at = _ngspice(lines, freq_hz)
            for i in places:
                before, after = (abs(at[a] - at[b]) for a, b in (volts[i, True], volts[i, False]))
                losses[i] = 20 * math.log10(before / after) if after > before * NOTHING else math.inf
        return losses


def _ngspice(lines, freq_hz):
    """Runs one netlist at one frequency: complex volts by node."""
    program = shutil.which("ngspice")
    if program is None:
        raise SystemExit("ngspice is not installed (Debian package ngspice)")
    text = "\n".join(lines + [f".ac lin 1 {freq_hz:.15g} {freq_hz:.15g}", ".end", ""])
    with tempfile.TemporaryDirectory() as where:
        net, raw = os.path.join(where, "pads.cir"), os.path.join(where, "pads.raw")
        with open(net, "w") as f:
            f.write(text)
        done = subprocess.run([program, "-b", "-r", raw, net], cwd=where, text=True,
                              env={**os.environ, "SPICE_ASCIIRAWFILE": "1"},
                              stdout=subprocess.PIPE, stderr=subprocess.STDOUT)
        if done.returncode or not os.path.exists(raw):
            raise SystemExit("ngspice failed:\n" + done.stdout[-2000:])
        return _read_raw(raw)


def _read_raw(path):
    """The node voltages of an ASCII raw file with one point."""
    with open(path) as f:
        head, _, values = f.read().partition("Values:\n")
    names = [line.split()[1] for line in head.partition("Variables:\n")[2].splitlines() if line.strip()]
    numbers = values.split()[1:]       # the first word is the number of the point
    at = {"0": 0j}
    for name, word in zip(names, numbers):
        re, im = word.split(",")
        at[name[2:-1] if name.startswith("v(") else name] = complex(float(re), float(im))
    return at
