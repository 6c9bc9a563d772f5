#!/usr/bin/env python3
"""Make the table of simulated pads that the Go tests compare with.

Needs python3 (standard library only) and the circuit simulator ngspice. Usage:

    python3 ngspice_table.py > ngspice_table.csv

Nothing here is shared with the Go code. Each topology, drive and sense is written out
again below as a SPICE netlist; ngspice solves it; this script only forms ratios of the
voltages that ngspice wrote. All circuits of one analysis stand side by side in one
netlist, so ngspice runs twice in all.
"""

import cmath
import itertools
import math
import os
import subprocess
import sys
import tempfile

INF = math.inf
PINS = ["in.hot", "in.cold", "out.hot", "out.cold", "screen"]
FREQS = [60, 997, 10000, 20000]

# Where the resistors of each named network sit. "0" in a SPICE netlist is the screen.
SEATS = {
    "L": "R1 in.hot out.hot; R2 out.hot screen",
    "U": "R1 in.hot out.hot; R2 in.cold out.cold; R3 out.hot out.cold",
    "T": "R1 in.hot mid; R2 mid out.hot; R3 mid screen",
    "H": "R1 in.hot mid.hot; R2 in.cold mid.cold; R3 mid.hot out.hot;"
         "R4 mid.cold out.cold; R5 mid.hot mid.cold",
    "pi": "R1 in.hot screen; R2 in.hot out.hot; R3 out.hot screen",
    "O": "R1 in.hot in.cold; R2 in.hot out.hot; R3 in.cold out.cold; R4 out.hot out.cold",
    "bridged-T": "R1 in.hot mid; R2 mid out.hot; R3 in.hot out.hot; R4 mid screen",
    "custom": "",
}
UNBALANCED = {"L", "T", "pi", "bridged-T"}

# id, network, is it unbalanced (for custom), parts: REF=value or REF=value@node~node
CIRCUITS = [
    ("L", "L", "R1=680 R2=150"),
    ("U", "U", "R1=560 R2=470 R3=330"),
    ("T", "T", "R1=330 R2=300 R3=390"),
    ("H", "H", "R1=150 R2=220 R3=180 R4=120 R5=430"),
    ("pi", "pi", "R1=1100 R2=820 R3=1200"),
    ("O", "O", "R1=1100 R2=430 R3=360 R4=1300"),
    ("bT", "bridged-T", "R1=600 R2=560 R3=1300 R4=270"),
    ("U+", "U", "R1=1200 R2=1000 R3=220 C1=2.2e-10@out.hot~out.cold R4=1000@out.hot~out.cold"),
    ("H+", "H", "R1=47 R2=56 R3=33 R4=39 R5=22 R6=2200@mid.hot~screen R7=1800@mid.cold~screen"),
    ("O+", "O", "R1=10000 R2=3300 R3=3900 R4=680 C1=1e-9@in.hot~screen C2=4.7e-10@out.cold~screen"),
    ("T+", "T", "R1=1000 R2=820 R3=120 C1=4.7e-9@in.hot~mid"),
    ("U0", "U", "R1=1500 R2=0 R3=270"),
    ("Hi", "H", "R1=270 R2=300 R3=inf R4=240 R5=510"),
    ("LC", "custom", "L1=0.01@in.hot~a R1=100@a~out.hot R2=120@in.cold~b C1=1e-6@b~out.cold"
                     " R3=470@out.hot~out.cold C2=1e-8@a~b"),
    ("LP", "custom", "R8=0@in.cold~screen R9=0@screen~out.cold R1=1000@in.hot~x C1=1e-8@x~screen"
                     " L1=0.022@x~y R2=220@y~out.hot R3=560@out.hot~screen"),
    ("X", "custom", "R1=220@in.hot~out.cold R2=240@in.cold~out.hot R3=330@out.hot~out.cold"),
    ("lat", "custom", "R1=300@in.hot~out.hot R2=310@in.cold~out.cold R3=900@in.hot~out.cold"
                      " R4=850@in.cold~out.hot R5=12000@in.cold~screen"),
    ("CC", "custom", "C1=2.2e-6@in.hot~out.hot C2=1.8e-6@in.cold~out.cold R1=150@in.hot~in.cold"
                     " R2=22000@out.hot~screen R3=27000@in.cold~screen"),
    ("un", "custom", "R1=470@in.hot~out.hot C1=3.3e-8@out.hot~screen"),
]
# Customs whose cold pins are unused or linked to screen.
UNBALANCED_CUSTOM = {"LP", "un"}

DRIVES = ["balanced", "floating", "impedance-balanced", "unbalanced"]
SENSES = ["balanced", "floating", "unbalanced"]
SOURCES = [100, 40, 150, 600, 22]
LOADS = [10000, 2700, 600, 4700, 100000, 1500, INF]
CABLES = [3e-10, 0, 8e-10, 2.2e-9]
LEGS = [5000, 1350, 10000]


def read_parts(network, text):
    """[(ref, value, node, node)] in the order of the text."""
    seats = {}
    for seat in filter(None, SEATS[network].split(";")):
        ref, a, b = seat.split()
        seats[ref] = (a, b)
    parts = []
    for word in text.split():
        ref, rest = word.split("=")
        value, _, nodes = rest.partition("@")
        a, b = nodes.split("~") if nodes else seats[ref]
        parts.append((ref, float(value), a, b))
    return parts


class Union:
    """Sets of nodes that are joined."""

    def __init__(self):
        self.up = {}

    def root(self, a):
        while self.up.get(a, a) != a:
            a = self.up[a]
        return a

    def join(self, a, b):
        self.up[self.root(a)] = self.root(b)


class Net:
    """One circuit inside the big netlist: its nodes carry a prefix of their own."""

    count = 0

    def __init__(self, lines, same=()):
        Net.count += 1
        self.prefix = "n%d" % Net.count
        self.lines = lines
        self.alias = Union()
        self.alias.join("screen", "screen")
        for a, b in same:
            self.alias.join(a, b)
        self.joined = Union()
        self.used = set()
        self.elements = 0

    def node(self, name):
        root = self.alias.root(name)
        if root == self.alias.root("screen"):
            return "0"
        return self.prefix + "_" + root.replace(".", "")

    def element(self, letter, a, b, value, extra=""):
        p, q = self.node(a), self.node(b)
        if p == q:
            return
        self.elements += 1
        self.lines.append("%s%s_%d %s %s %s%s" % (letter, self.prefix, self.elements, p, q, extra, repr(value)))
        if letter != "I":
            self.joined.join(p, q)
        self.used |= {p, q}

    def part(self, ref, value, a, b):
        letter = ref[0]
        if letter == "R" and value == 0:
            raise ValueError("links are aliases")
        if letter == "R" and value == INF:
            return
        self.element(letter, a, b, value)

    def source(self, a, b, ohms, emf):
        """EMF in series with ohms, from b to a."""
        inner = "emf%d" % self.elements
        self.element("V", inner, b, emf, "dc 0 ac ")
        self.element("R", inner, a, ohms)

    def tie_islands(self):
        """Give each part of the circuit that floats one tie to ground."""
        self.joined.join("0", "0")
        done = {self.joined.root("0")}
        for n in sorted(self.used):
            if self.joined.root(n) not in done:
                done.add(self.joined.root(n))
                self.lines.append("Rtie_%s %s 0 1" % (n, n))

    def connected(self, a, b):
        return self.joined.root(self.node(a)) == self.joined.root(self.node(b))


def links_of(parts):
    return [(a, b) for ref, value, a, b in parts if ref[0] == "R" and value == 0]


def add_parts(net, parts):
    for ref, value, a, b in parts:
        if not (ref[0] == "R" and value == 0):
            net.part(ref, value, a, b)


def add_drive(net, drive, ohms, emf):
    if drive == "balanced":
        net.source("in.hot", "screen", ohms / 2, emf / 2)
        net.source("in.cold", "screen", ohms / 2, -emf / 2)
    elif drive == "floating":
        net.source("in.hot", "in.cold", ohms, emf)
    elif drive == "impedance-balanced":
        net.source("in.hot", "screen", ohms / 2, emf)
        net.source("in.cold", "screen", ohms / 2, 0.0)
    else:
        net.source("in.hot", "screen", ohms, emf)


def add_load(net, sense, ohms):
    if ohms == INF:
        ohms = 1e13  # as good as open, and no node hangs loose
    if sense == "balanced":
        net.element("R", "out.hot", "screen", ohms / 2)
        net.element("R", "out.cold", "screen", ohms / 2)
    elif sense == "floating":
        net.element("R", "out.hot", "out.cold", ohms)
    else:
        net.element("R", "out.hot", "screen", ohms)


def add_cable(net, farads):
    if farads:
        net.element("C", "out.hot", "out.cold", farads)


def run_ngspice(lines, commands):
    """Run one netlist; return what each raw file written by the commands holds."""
    with tempfile.TemporaryDirectory() as folder:
        path = os.path.join(folder, "table.cir")
        text = ["padproof table", ".options noopac gmin=1e-30"] + lines
        text += [".control", "set filetype=ascii"] + commands + ["quit", ".endc", ".end"]
        with open(path, "w") as f:
            f.write("\n".join(text) + "\n")
        env = dict(os.environ, OMP_NUM_THREADS="1")  # its threads only wait for one another
        done = subprocess.run(["ngspice", "-b", path], cwd=folder, env=env, capture_output=True, text=True)
        found = []
        for c in commands:
            if c.startswith("write "):
                raw = os.path.join(folder, c.split()[1])
                if not os.path.exists(raw):
                    sys.exit("ngspice wrote nothing:\n" + done.stdout[-2000:] + done.stderr[-2000:])
                found.append(read_raw(raw))
        return found


def read_raw(path):
    """{node: voltage} from an ascii raw file with one point."""
    with open(path) as f:
        lines = f.read().splitlines()
    start = lines.index("Variables:")
    end = lines.index("Values:")
    names = [line.split()[1] for line in lines[start + 1:end]]
    numbers = []
    for line in lines[end + 1:]:
        if line.strip():
            numbers.append(line.split()[-1])
    volts = {"0": 0j}
    for name, number in zip(names, numbers):
        re, _, im = number.partition(",")
        if name.startswith("v("):
            name = name[2:-1]
        volts[name] = complex(float(re), float(im or 0))
    return volts


class Rig:
    """One circuit between one pair of ends: six netlists."""

    def __init__(self, lines, name, parts, unbalanced, drive, sense, source, load, cable, legs):
        self.parts = parts
        cold = []
        if unbalanced or drive == "unbalanced":
            cold.append(("in.cold", "screen"))
        cold_out = list(cold)
        if unbalanced or sense == "unbalanced":
            cold_out.append(("out.cold", "screen"))
        legs_ties = cold + ([("out.cold", "screen")] if unbalanced else [])
        wires = [("in.hot", "out.hot"), ("in.cold", "out.cold")]
        links = links_of(parts)

        def net(ties, pad):
            n = Net(lines, ties + (links if pad else wires))
            if pad:
                add_parts(n, parts)
            return n

        self.pad, self.straight = net(cold_out, True), net(cold_out, False)
        for n in (self.pad, self.straight):
            add_drive(n, drive, source, 1.0)
            add_load(n, sense, load)
            add_cable(n, cable)
        self.pad_legs, self.straight_legs = net(legs_ties, True), net(legs_ties, False)
        for n in (self.pad_legs, self.straight_legs):
            add_drive(n, drive, source, 1.0)
            add_load(n, "balanced", 2 * legs)
            add_cable(n, cable)
        self.zin = net(cold_out, True)
        add_load(self.zin, sense, load)
        add_cable(self.zin, cable)
        self.zout = net(cold_out, True)
        add_drive(self.zout, drive, source, 0.0)
        self.can_zin = self.zin.connected("in.hot", "in.cold")
        self.can_zout = self.zout.connected("out.hot", "out.cold")
        if self.can_zin:
            self.zin.element("I", "in.cold", "in.hot", 1, "dc 0 ac ")
        if self.can_zout:
            self.zout.element("I", "out.cold", "out.hot", 1, "dc 0 ac ")
        for n in (self.pad, self.straight, self.pad_legs, self.straight_legs, self.zin, self.zout):
            n.tie_islands()

    def row(self, volts):
        def across(n, a, b):
            return volts.get(n.node(a), 0) - volts.get(n.node(b), 0)

        straight = across(self.straight, "out.hot", "out.cold")
        t = across(self.pad, "out.hot", "out.cold") / straight
        zin = across(self.zin, "in.hot", "in.cold") if self.can_zin else INF
        zout = across(self.zout, "out.hot", "out.cold") if self.can_zout else INF
        hot, cold = across(self.pad_legs, "out.hot", "screen"), across(self.pad_legs, "out.cold", "screen")
        shot, scold = (across(self.straight_legs, p, "screen") for p in ("out.hot", "out.cold"))
        cells = [INF, 0.0]
        if abs(t) > 1e-8:  # less is the load of 1e13 ohms
            cells = [-20 * math.log10(abs(t)), math.degrees(cmath.phase(t))]
        for z in (straight, zin, zout, hot, cold, shot, scold):
            cells += [complex(z).real, complex(z).imag]
        return cells

    def watts(self, volts, input_volts):
        n = self.pad
        scale = input_volts / abs(volts[n.node("in.hot")] - volts.get(n.node("in.cold"), 0))
        watts = []
        for ref, value, a, b in self.parts:
            if ref[0] != "R" or value in (0, INF):
                watts.append(0.0)
                continue
            v = scale * abs(volts.get(n.node(a), 0) - volts.get(n.node(b), 0))
            watts.append(v * v / value)
        return watts


def dc_net(lines, parts, same):
    """The part of a circuit that passes direct current."""
    passing = [p for p in parts if p[0][0] != "C" and p[1] != INF]
    shorts = [(a, b) for ref, value, a, b in passing if value == 0 or ref[0] == "L"]
    n = Net(lines, list(same) + shorts)
    return n, [p for p in passing if not (p[1] == 0 or p[0][0] == "L")]


def reach(net, parts, start, through_screen=True):
    """The nodes that direct current can reach from start."""
    found = {net.node(start)}
    grew = True
    while grew:
        grew = False
        for _, _, a, b in parts:
            p, q = net.node(a), net.node(b)
            if not through_screen and "0" in (p, q):
                continue
            if (p in found) != (q in found):
                found |= {p, q}
                grew = True
    return found


class Ohms:
    """One ohmmeter reading: 1 A into pin a, out of pin b, which is ground."""

    def __init__(self, lines, parts, unbalanced, a, b, joined):
        same = [joined] if joined else []
        if unbalanced:
            same += [("in.cold", "screen"), ("out.cold", "screen")]
        # Which node is ground does not matter to the unit alone: b is.
        same.append((b, "ground"))
        self.net, left = dc_net(lines, parts, same)
        self.net.node = self.grounded(self.net)
        self.a = self.net.node(a)
        found = reach(self.net, left, a)
        self.value = None
        if self.a == "0":
            self.value = 0.0
        elif "0" not in found:
            self.value = INF
        else:
            for ref, value, p, q in left:
                if self.net.node(p) in found:
                    self.net.element("R", p, q, value)
            self.net.element("I", b, a, 1, "dc ")

    @staticmethod
    def grounded(net):
        def node(name):
            root = net.alias.root(name)
            if root == net.alias.root("ground"):
                return "0"
            return net.prefix + "_" + root.replace(".", "")
        return node

    def read(self, volts):
        return self.value if self.value is not None else volts[self.a].real


class Phantom:
    """48 V through 6.8 kohm into each leg of the output, a current drawn at the input."""

    def __init__(self, lines, parts, amps):
        self.net, left = dc_net(lines, parts, [])
        n = self.net
        legs = reach(n, left, "out.hot", False) | reach(n, left, "out.cold", False)
        self.blocked = [n.node(p) not in legs or n.node(p) == "0" for p in ("in.hot", "in.cold")]
        live = reach(n, left, "out.hot") | reach(n, left, "out.cold") | {"0"}
        for ref, value, p, q in left:
            if n.node(p) in live:
                n.element("R", p, q, value)
        for pin in ("out.hot", "out.cold"):
            n.element("V", "supply." + pin, "screen", 48, "dc ")
            n.element("R", "supply." + pin, pin, 6800.0)
        free = self.blocked.count(False)
        for pin, blocked in zip(("in.hot", "in.cold"), self.blocked):
            if not blocked:
                n.element("I", pin, "screen", amps / free, "dc ")

    def read(self, volts):
        cells = []
        for leg, blocked in zip(("hot", "cold"), self.blocked):
            out = volts.get(self.net.node("out." + leg), 0).real
            left = 0.0 if blocked else volts.get(self.net.node("in." + leg), 0).real
            cells += [out - left, left, int(blocked)]
        return cells


def show(x):
    if isinstance(x, (int, str)):
        return str(x)
    return "inf" if x == INF else "%.9g" % (x + 0.0)


def main():
    out = []
    rigs, ac_lines = [], []
    ohms, phantoms, dc_lines = [], [], []
    turn = itertools.count()
    for name, network, text in CIRCUITS:
        parts = read_parts(network, text)
        unbalanced = network in UNBALANCED or name in UNBALANCED_CUSTOM
        out.append(["circuit", name, network, text])
        for drive, sense in itertools.product(DRIVES, SENSES):
            i = next(turn)
            source, load = SOURCES[i % len(SOURCES)], LOADS[i % len(LOADS)]
            cable, legs = CABLES[i % len(CABLES)], LEGS[i % len(LEGS)]
            freqs = FREQS
            if unbalanced and (drive, sense) != ("unbalanced", "unbalanced"):
                freqs = FREQS[i % 2::2]
            rig = Rig(ac_lines, name, parts, unbalanced, drive, sense, source, load, cable, legs)
            rigs.append(([name, drive, sense, source, show(float(load)), show(float(cable)), legs], freqs, rig))
        shorts = [None, ("out.hot", "out.cold"), ("in.hot", "in.cold")]
        for a, b in itertools.combinations(PINS, 2):
            for joined in shorts:
                if joined and {a, b} == set(joined):
                    continue
                ohms.append(([name, a, b, "~".join(joined or ())], Ohms(dc_lines, parts, unbalanced, a, b, joined)))
        if not unbalanced:
            for amps in (0.002, 0.007):
                phantoms.append(([name, amps], Phantom(dc_lines, parts, amps)))

    commands = []
    for f in FREQS:
        commands += ["ac lin 1 %d %d" % (f, f), "write f%d.raw" % f]
    volts = dict(zip(FREQS, run_ngspice(ac_lines, commands)))
    for i, (cells, freqs, rig) in enumerate(rigs):
        out.append(["ends", i] + cells)
        for f in freqs:
            out.append(["ac", i, f] + rig.row(volts[f]))
        f = freqs[i % len(freqs)]
        out.append(["watts", i, f, 1.5] + rig.watts(volts[f], 1.5))
    dc = run_ngspice(dc_lines, ["op", "write op.raw"])[0]
    for cells, o in ohms:
        out.append(["ohms"] + cells + [o.read(dc)])
    for cells, p in phantoms:
        out.append(["phantom"] + cells + p.read(dc))

    print("""# Pads simulated with ngspice by ngspice_table.py. Ohms, volts, watts, farads, hertz.
# circuit,id,network,parts
# ends,id,circuit,drive,sense,source,load,cable,legs load
# ac,ends,hz,loss dB,phase deg, then real and imaginary of: load volts straight per volt of EMF,
#   input impedance, output impedance, leg volts hot, cold with the pad, hot, cold straight
# watts,ends,hz,input volts RMS,watts of each part
# ohms,circuit,pin,pin,pins shorted,reading
# phantom,circuit,amps,lost hot,left hot,blocked hot,lost cold,left cold,blocked cold""")
    for cells in out:
        print(",".join(show(c) for c in cells))


main()
