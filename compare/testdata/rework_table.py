#!/usr/bin/env python3
"""Make the table of trimmed pads that the Go tests compare with.

Needs python3 (standard library only) and the circuit simulator ngspice. Usage:

    python3 rework_table.py > rework_table.csv

Nothing here is shared with the Go code. For each faulty pad and each place of a trim, a copy of
the pad with every E24 resistor of four decades stands in one netlist; ngspice solves them all,
and the one whose loss in service lies nearest the sound pad's is the row.
"""

import math
import os
import subprocess
import tempfile

E24 = [10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91]
VALUES = [v * 10 ** d / 10 for d in range(1, 6) for v in E24]

SEATS = {
    "U": {"R1": "ih oh", "R2": "ic oc", "R3": "oh oc"},
    "H": {"R1": "ih mh", "R2": "ic mc", "R3": "mh oh", "R4": "mc oc", "R5": "mh mc"},
    "O": {"R1": "ih ic", "R2": "ih oh", "R3": "ic oc", "R4": "oh oc"},
    "L": {"R1": "ih oh", "R2": "oh 0"},
    "T": {"R1": "ih m", "R2": "m oh", "R3": "m 0"},
    "pi": {"R1": "ih 0", "R2": "ih oh", "R3": "oh 0"},
}
UNBALANCED = {"L", "T", "pi"}
PINS = {"out": {True: "oh 0", False: "oh oc"}, "in": {True: "ih 0", False: "ih ic"}}

# network, sound values, what is off, place of the trim, bench (source, load), service (source, load)
CASES = [
    ("U", "R1=560 R2=560 R3=330", "R3=360", "parallel R3", (100, 10000), (120, 2700)),
    ("U", "R1=560 R2=560 R3=330", "R1=640", "parallel R1", (100, 10000), (120, 2700)),
    ("U", "R1=560 R2=560 R3=330", "R1=470 R2=470", "series R1 R2", (100, 10000), (120, 2700)),
    ("U", "R1=560 R2=560 R3=330", "R3=300", "series R3", (150, 5000), (40, 1500)),
    ("H", "R1=150 R2=150 R3=150 R4=150 R5=430", "R5=500", "parallel R5", (100, 10000), (600, 600)),
    ("H", "R1=150 R2=150 R3=150 R4=150 R5=430", "R5=500", "out", (100, 10000), (300, 1200)),
    ("H", "R1=150 R2=150 R3=150 R4=150 R5=430", "R1=120 R2=120", "series R1 R2", (100, 5000), (300, 1200)),
    ("O", "R1=1100 R2=390 R3=390 R4=1100", "R2=470 R3=470", "parallel R2 R3", (100, 10000), (600, 600)),
    ("L", "R1=680 R2=150", "R2=180", "parallel R2", (50, 20000), (600, 2000)),
    ("L", "R1=680 R2=150", "R1=560", "series R1", (50, 20000), (600, 2000)),
    ("T", "R1=330 R2=330 R3=390", "R3=470", "parallel R3", (100, 10000), (600, 600)),
    ("pi", "R1=1100 R2=820 R3=1100", "R2=1000", "parallel R2", (100, 10000), (600, 600)),
]


def parts_of(text):
    return {p.split("=")[0]: float(p.split("=")[1]) for p in text.split()}


class Netlist:
    def __init__(self):
        self.lines, self.count = [], 0

    def add(self, network, values, ends, trim=None):
        """A driven, loaded pad (straight through if values is None); returns its output nodes."""
        self.count += 1
        n, (source, load), low = self.count, ends, network in UNBALANCED
        at = lambda x: "0" if x == "0" or (low and x in ("ic", "oc")) else "%s%d" % (x, n)
        rs = []

        def resistor(a, b, ohms):
            rs.append(ohms)
            self.lines.append("R%d_%d %s %s %r" % (n, len(rs), a, b, ohms))

        if low:
            self.lines.append("V%d e%d 0 ac 1" % (n, n))
            resistor("e%d" % n, at("ih"), source)
            resistor(at("oh"), "0", load)
        else:
            for leg, sign in (("h", 1), ("c", -1)):
                self.lines.append("V%s%d e%s%d 0 ac %r" % (leg, n, leg, n, sign * 0.5))
                resistor("e%s%d" % (leg, n), at("i" + leg), source / 2)
                resistor(at("o" + leg), "0", load / 2)
        if values is None:
            for leg in ("h",) if low else ("h", "c"):
                self.lines.append("Vs%s%d %s %s 0" % (leg, n, at("i" + leg), at("o" + leg)))
            return at("oh"), at("oc")
        how, refs, ohms = trim or ("", [], 0)
        for ref, value in values.items():
            a, b = SEATS[network][ref].split()
            if ref in refs and how == "series":
                resistor(at(a), "x%s%d" % (ref, n), value)
                resistor("x%s%d" % (ref, n), at(b), ohms)
                continue
            resistor(at(a), at(b), value)
            if ref in refs:
                resistor(at(a), at(b), ohms)
        if how in PINS:
            a, b = PINS[how][low].split()
            resistor(at(a), at(b), ohms)
        return at("oh"), at("oc")

    def solve(self):
        with tempfile.TemporaryDirectory() as folder:
            text = ["trimmed pads", ".options noopac gmin=1e-30"] + self.lines
            text += [".control", "set filetype=ascii", "ac lin 1 997 997", "write out.raw", "quit", ".endc", ".end"]
            path = os.path.join(folder, "t.cir")
            with open(path, "w") as out:
                out.write("\n".join(text) + "\n")
            subprocess.run(["ngspice", "-b", path], cwd=folder, env=dict(os.environ, OMP_NUM_THREADS="1"), capture_output=True)
            with open(os.path.join(folder, "out.raw")) as f:
                lines = f.read().splitlines()
        names = [l.split()[1] for l in lines[lines.index("Variables:") + 1:lines.index("Values:")]]
        numbers = [l.split()[-1] for l in lines[lines.index("Values:") + 1:] if l.strip()]
        volts = {"0": 0j}
        for name, number in zip(names, numbers):
            if name.startswith("v("):
                re, _, im = number.partition(",")
                volts[name[2:-1]] = complex(float(re), float(im or 0))
        return volts


def main():
    print("# Faulty pads with a trim, simulated with ngspice by rework_table.py: between balanced ends, or")
    print("# unbalanced ones for L, T and pi.")
    print("# network,sound,faulty,place of the trim,bench source,bench load,service source,service load,")
    print("# sound loss in service,bench loss as it is,best E24 ohms,then bench loss,then service loss")
    for network, sound, fault, place, bench, service in CASES:
        how, *refs = place.split()
        good = parts_of(sound)
        bad = dict(good, **parts_of(fault))
        net = Netlist()
        base = [(net.add(network, None, e), net.add(network, good, e), net.add(network, bad, e)) for e in (bench, service)]
        tried = [(v, [net.add(network, bad, e, (how, refs, v)) for e in (bench, service)]) for v in VALUES]
        volts = net.solve()
        across = lambda pins: volts[pins[0]] - volts[pins[1]]
        loss = lambda i, pins: -20 * math.log10(abs(across(pins) / across(base[i][0])))
        target = loss(1, base[1][1])
        v, pads = min(tried, key=lambda t: abs(loss(1, t[1][1]) - target))
        row = [network, sound, fault, place, *bench, *service]
        print(",".join([str(x) for x in row] + ["%.9g" % x for x in (target, loss(0, base[0][2]), v, loss(0, pads[0]), loss(1, pads[1]))]))


main()
