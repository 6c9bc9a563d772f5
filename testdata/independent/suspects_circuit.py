"""Nodal analysis in numpy for units with faults: many small circuits solved at once.

A Unit is a drawing as built: parts between nodes, each at its true value, and which of its inner
nodes the five pins meet. A Batch collects circuits by the nodes they join and the elements they
stamp; its run() solves all of them in one call of numpy.linalg.solve. Nothing here knows a formula
of a pad.
"""
import math
from dataclasses import dataclass, field

import numpy as np

PINS = ("in.hot", "in.cold", "out.hot", "out.cold", "screen")
LEAK_SIEMENS = 1e-12   # from every node to the screen, so that a circuit which floats has a solution
OPEN_OHMS = 1e9        # an ohmmeter that reads more has only the leak to read


@dataclass
class Element:
    """kind R, C or L; value in ohm, farad or henry; 0 ohm (henry) or infinite farad is a link."""
    ref: str
    kind: str
    a: str
    b: str
    value: float

    def is_link(self, dc=False):
        return self.value == 0 if self.kind == "R" else math.isinf(self.value) if self.kind == "C" else \
            (dc or self.value == 0)

    def is_open(self, dc=False):
        return math.isinf(self.value) if self.kind != "C" else (dc or self.value == 0)


@dataclass
class Built:
    """A unit: its elements, the pins wired together inside, and whether cold is the screen."""
    parts: list
    unbalanced: bool
    wires: list = field(default_factory=list)     # pairs of nodes joined besides


@dataclass
class Bench:
    """True ends of a rig. Ohms are leg to leg (hot to screen where unbalanced)."""
    source: float
    drive: str
    load: float
    sense: str
    cable: float
    legs_load: tuple = (0.0, 0.0)      # hot, cold


class Batch:
    """Circuits to be solved together; ask() returns the places of its answers in run()."""

    def __init__(self):
        self.circuits, self.count = {}, 0    # by number of nodes: what _solve takes

    def ask(self, joins, elements, injections, probes, freqs_hz):
        """Queues the volts of each probe (from one node to another) at each frequency: nodes joined in
        pairs, elements (kind, a, b, value), injections (node, amperes). Places: [frequency][probe]."""
        up = {"screen": "screen"}

        def root(n):
            while (m := up.setdefault(n, n)) != n:
                n = m
            return n
        for a, b in joins:
            ra, rb = root(a), root(b)
            if ra != rb:
                if ra == "screen":
                    ra, rb = rb, ra
                up[ra] = rb
        number = {"screen": -1}

        def node(n):
            return number.setdefault(root(n), len(number) - 1)
        stamped = [(kind, node(a), node(b), value) for kind, a, b, value in elements]
        driven = [(node(n), amps) for n, amps in injections]
        probed = [(node(a), node(b)) for a, b in probes]
        places = self.count + np.arange(len(freqs_hz) * len(probes)).reshape(len(freqs_hz), len(probes))
        self.count += places.size
        self.circuits.setdefault(max(len(number) - 1, 1), []).append((stamped, driven, probed, freqs_hz, places))
        return places

    def run(self):
        """All the volts asked for, complex."""
        out = np.zeros(self.count, complex)
        for size, circuits in self.circuits.items():
            self._solve(size, circuits, out)
        return out

    @staticmethod
    def _solve(size, circuits, out):
        """Per circuit three real matrices (siemens, farads, 1/henries); per circuit and frequency a system."""
        where, what = [], []
        amps = np.zeros((len(circuits), size + 1))
        for i, (stamped, driven, *_) in enumerate(circuits):
            for kind, p, q, value in stamped:
                if p == q:
                    continue
                k, y = {"R": (0, 1 / value), "C": (1, value), "L": (2, 1 / value)}[kind]
                if p >= 0:
                    where.append((i, k, p, p))
                    what.append(y)
                if q >= 0:
                    where.append((i, k, q, q))
                    what.append(y)
                if p >= 0 and q >= 0:
                    where += [(i, k, p, q), (i, k, q, p)]
                    what += [-y, -y]
            for n, a in driven:
                amps[i, n] += a
        m = np.zeros((len(circuits), 3, size, size))
        m[:, 0, np.arange(size), np.arange(size)] = LEAK_SIEMENS
        if where:
            np.add.at(m, tuple(np.array(where).T), np.array(what))
        which = np.concatenate([np.full(len(c[3]), i) for i, c in enumerate(circuits)])
        w = 2 * math.pi * np.concatenate([np.asarray(c[3], float) for c in circuits])[:, None, None]
        y = m[which, 0] + 1j * w * m[which, 1]
        if m[:, 2].any():
            y = y + m[which, 2] / (1j * np.maximum(w, 1e-12))
        volts = np.zeros((len(which), size + 1), complex)    # node -1 is the last column, the screen at 0 V
        volts[:, :size] = np.linalg.solve(y, amps[which, :size, None])[..., 0]
        first = 0
        for _, _, probed, freqs_hz, places in circuits:
            v = volts[first:first + len(freqs_hz)]
            for j, (p, q) in enumerate(probed):
                out[places[:, j]] = v[:, p] - v[:, q]
            first += len(freqs_hz)


def cold_joins(unit_unbalanced, bench, straight, legs=False):
    """Which pins the bench makes one: the cold leg is the screen where either end or the pad says so."""
    joins = []
    cold_in = unit_unbalanced or bench.drive == "unbalanced"
    cold_out = unit_unbalanced or (bench.sense == "unbalanced" and not legs)
    if cold_in:
        joins.append(("in.cold", "screen"))
    if cold_out:
        joins.append(("out.cold", "screen"))
    if straight:
        joins += [("in.hot", "out.hot"), ("in.cold", "out.cold")]
    return joins


def drive_of(bench, emf=1.0):
    """The source as currents beside its resistance: elements and injections."""
    whole, half = bench.source, bench.source / 2
    if bench.drive == "balanced":
        return [("R", "in.hot", "screen", half), ("R", "in.cold", "screen", half)], \
               [("in.hot", emf / whole), ("in.cold", -emf / whole)]
    if bench.drive == "floating":
        return [("R", "in.hot", "in.cold", whole)], [("in.hot", emf / whole), ("in.cold", -emf / whole)]
    if bench.drive == "impedance-balanced":
        return [("R", "in.hot", "screen", half), ("R", "in.cold", "screen", half)], [("in.hot", emf / half)]
    return [("R", "in.hot", "screen", whole)], [("in.hot", emf / whole)]


def load_of(bench):
    load = {"balanced": [("R", "out.hot", "screen", bench.load / 2), ("R", "out.cold", "screen", bench.load / 2)],
            "floating": [("R", "out.hot", "out.cold", bench.load)],
            "unbalanced": [("R", "out.hot", "screen", bench.load)]}[bench.sense]
    return load + cable_of(bench)


def cable_of(bench):
    return [("C", "out.hot", "out.cold", bench.cable)] if bench.cable else []


def pad_of(unit, dc=False):
    """The unit's elements and the nodes it joins."""
    joins = list(unit.wires)
    elements = []
    for p in unit.parts:
        if p.is_link(dc):
            joins.append((p.a, p.b))
        elif not p.is_open(dc):
            elements.append((p.kind, p.a, p.b, p.value))
    return joins, elements


LOAD = ("out.hot", "out.cold")


def ask_load(batch, unit, bench, freqs_hz):
    """The volts across the load, of 1 V of EMF: places of (straight, with pad), each by frequency."""
    e, amps = drive_of(bench)
    joins, elements = pad_of(unit)
    straight = batch.ask(cold_joins(unit.unbalanced, bench, True), e + load_of(bench), amps, [LOAD], freqs_hz)
    pad = batch.ask(cold_joins(unit.unbalanced, bench, False) + joins, e + load_of(bench) + elements, amps, [LOAD], freqs_hz)
    return straight[:, 0], pad[:, 0]


def ask_legs(batch, unit, bench, freq_hz):
    """Volts of the legs to screen: places of (straight hot, straight cold, hot, cold)."""
    e, amps = drive_of(bench)
    hot, cold = bench.legs_load
    e = e + [("R", "out.hot", "screen", hot), ("R", "out.cold", "screen", cold)] + cable_of(bench)
    joins, elements = pad_of(unit)
    probes = [("out.hot", "screen"), ("out.cold", "screen")]
    straight = batch.ask(cold_joins(unit.unbalanced, bench, True, legs=True), e, amps, probes, [freq_hz])
    pad = batch.ask(cold_joins(unit.unbalanced, bench, False, legs=True) + joins, e + elements, amps, probes, [freq_hz])
    return (*straight[0], *pad[0])


def ask_noise(batch, unit, bench, plug, freqs_hz):
    """A current into the output with the pad's input plugged, load and cable in place: places [frequency] of
    the volts at the output, and [frequency][k] of those across each resistor of the load, with their ohms.
    The mean square of all thermal noise there is 4kT times the real part of the former; by reciprocity the
    latter are what the noise of those resistors makes at the output."""
    joins, elements = pad_of(unit)
    if unit.unbalanced:
        joins += [("in.cold", "screen"), ("out.cold", "screen")]
    elif bench.sense == "unbalanced":
        joins.append(("out.cold", "screen"))
    if plug == 0:
        joins.append(("in.hot", "in.cold"))
    else:
        elements = elements + [("R", "in.hot", "in.cold", plug)]
    loads = [(a, b, ohms) for kind, a, b, ohms in load_of(bench) if kind == "R"]
    places = batch.ask(joins, elements + load_of(bench), [("out.hot", 1.0), ("out.cold", -1.0)],
                       [LOAD] + [(a, b) for a, b, _ in loads], freqs_hz)
    return places[:, 0], places[:, 1:], np.array([ohms for *_, ohms in loads])


def ask_pins(batch, unit, a, b, joined, freqs_hz):
    """The impedance from a to b, all else open but the pins joined; b is where volts are counted from, so
    that nothing between them floats. At 0 Hz it is what an ohmmeter reads; ask for 0 by itself."""
    joins, elements = pad_of(unit, dc=freqs_hz[0] == 0)

    def n(x):
        return x if b == "screen" else {"screen": "the screen", b: "screen"}.get(x, x)
    if unit.unbalanced:
        joins += [("in.cold", "screen"), ("out.cold", "screen")]
    if joined:
        joins.append(tuple(joined))
    return batch.ask([(n(p), n(q)) for p, q in joins], [(k, n(p), n(q), v) for k, p, q, v in elements],
                     [(n(a), 1.0)], [(n(a), "screen")], freqs_hz)[:, 0]
