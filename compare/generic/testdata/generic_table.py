#!/usr/bin/env python3
"""Make the table of textbook pads with faults that the Go tests compare with.

Needs python3 (standard library only) and the circuit simulator ngspice. Usage:

    python3 generic_table.py > generic_table.csv

Nothing here is shared with the Go code. The pads follow from their impedance Z and the voltage ratio K
by the laws of series and parallel resistors: H and O are found by solving for image impedance Z and
ratio K numerically, not by the handbook formulas; U so that its input shows Z when Z loads it.
"""

import math
import os
import subprocess
import tempfile

# drive, sense, source, load
RIGS = [
    ("balanced", "balanced", 100, 10000),
    ("balanced", "balanced", 40, 2000),
    ("impedance-balanced", "balanced", 100, 10000),
    ("floating", "balanced", 100, 10000),
    ("floating", "floating", 100, 10000),
    ("unbalanced", "unbalanced", 100, 10000),
]
# impedance, marked loss
MARKS = [(600, 10), (600, 20), (150, 14)]
FAULTS = ["", "hot leg open at out", "cold leg open at out", "hot leg open at in", "hot leg to screen at out",
          "series open", "shunt open", "shunt x10", "shunt /10"]


def halved(f, low, high):
    """The x at which a rising f is 0."""
    for _ in range(200):
        mid = math.sqrt(low * high)
        low, high = (mid, high) if f(mid) < 0 else (low, mid)
    return high


def tee(z, k):
    """Arm and shunt of the T: the arm in series with (shunt beside arm and z) makes z."""
    def shunt_for(arm):
        rest = z - arm  # what the shunt beside (arm + z) must be
        return 1 / (1 / rest - 1 / (arm + z))
    def ratio(arm):
        inner = (z - arm) / z
        return z / (arm + z) * inner
    arm = halved(lambda a: 1 / ratio(a) - k, z * 1e-9, z * (1 - 1e-12))
    return arm, shunt_for(arm)


def pi(z, k):
    """End shunt and series arm of the pi: the end beside (series and the other end beside z) makes z."""
    def series_for(end):
        far = 1 / (1 / end + 1 / z)
        near = 1 / (1 / z - 1 / end)
        return near - far
    def ratio(end):
        far = 1 / (1 / end + 1 / z)
        return (series_for(end) + far) / far
    end = halved(lambda e: k - ratio(e), z * (1 + 1e-12), z * 1e9)
    return end, series_for(end)


def pads(z, loss, low):
    k = 10 ** (loss / 20)
    arm, shunt = tee(z, k)
    end, series = pi(z, k)
    beside = z / k  # shunt and load together, of the pad that shows z
    div_shunt, div_series = 1 / (1 / beside - 1 / z), z - beside
    if low:
        return {"T": [("S", "ih", "m", arm), ("S2", "m", "oh", arm), ("P", "m", "0", shunt)],
                "pi": [("P1", "ih", "0", end), ("S", "ih", "oh", series), ("P", "oh", "0", end)],
                "L": [("S", "ih", "oh", div_series), ("P", "oh", "0", div_shunt)]}
    return {"H": [("S", "ih", "mh", arm / 2), ("S2", "ic", "mc", arm / 2), ("S3", "mh", "oh", arm / 2),
                  ("S4", "mc", "oc", arm / 2), ("P", "mh", "mc", shunt)],
            "O": [("P1", "ih", "ic", end), ("S", "ih", "oh", series / 2), ("S2", "ic", "oc", series / 2), ("P", "oh", "oc", end)],
            "U": [("S", "ih", "oh", div_series / 2), ("S2", "ic", "oc", div_series / 2), ("P", "oh", "oc", div_shunt)]}


def faulty(parts, fault):
    """The parts with the fault; the pins that are cut; the pin that touches the screen."""
    word = fault.split()
    if fault.startswith(("series", "shunt")):
        ref = {"series": "S", "shunt": "P"}[word[0]]
        change = {"open": lambda r: 1e12, "x10": lambda r: 10 * r, "/10": lambda r: r / 10}[word[1]]
        return [(n, a, b, change(r) if n == ref else r) for n, a, b, r in parts], None, None
    pin = {"hot at out": "oh", "cold at out": "oc", "hot at in": "ih"}.get(" ".join([word[0], word[-2], word[-1]])) if word else None
    return parts, pin if "open" in word else None, pin if "screen" in word else None


class Netlist:
    def __init__(self):
        self.lines, self.count = [], 0

    def add(self, rig, parts, cut, down):
        """One driven and loaded pad, straight through where parts is None; its output nodes."""
        drive, sense, source, load = rig
        self.count += 1
        n, low = self.count, drive == "unbalanced"
        def at(x):
            return "0" if x == "0" or (low and x in ("ic", "oc")) else x + str(n)
        def put(letter, name, a, b, what):
            if a != b:
                self.lines.append("%s%s_%d %s %s %s" % (letter, name, n, a, b, what))
        def emf(name, plus, minus, ohms, volts):
            put("V", name, "e" + name + str(n), minus, "dc 0 ac %r" % volts)
            put("R", name, "e" + name + str(n), plus, repr(ohms))
        if drive == "balanced":
            emf("h", at("ih"), "0", source / 2, 0.5)
            emf("c", at("ic"), "0", source / 2, -0.5)
        elif drive == "impedance-balanced":
            emf("h", at("ih"), "0", source / 2, 1.0)
            put("R", "c", at("ic"), "0", repr(source / 2))
        else:
            emf("h", at("ih"), at("ic"), source, 1.0)
        if sense == "balanced":
            put("R", "lh", at("oh"), "0", repr(load / 2))
            put("R", "lc", at("oc"), "0", repr(load / 2))
        else:
            put("R", "l", at("oh"), at("oc"), repr(load))
        if parts is None:
            put("V", "sh", at("ih"), at("oh"), "0")
            put("V", "sc", at("ic"), at("oc"), "0")
        for name, a, b, ohms in parts or []:
            pin = lambda x: "cut%d" % n if x == cut else at(x)
            put("R", "p" + name, pin(a), pin(b), repr(ohms))
        if down:
            put("V", "down", at(down), "0", "0")
        for node in sorted({at(x) for x in ("ih", "ic", "oh", "oc")} - {"0"}) + ["cut%d" % n]:
            put("R", "t" + node, node, "0", "1e12")  # what nothing ties down
        return at("oh"), at("oc")

    def solve(self):
        with tempfile.TemporaryDirectory() as folder:
            text = ["textbook pads", ".options noopac gmin=1e-30"] + self.lines
            text += [".control", "set filetype=ascii", "ac lin 1 997 997", "write out.raw", "quit", ".endc", ".end"]
            path = os.path.join(folder, "g.cir")
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
    net, rows = Netlist(), []
    for rig in RIGS:
        low = rig[0] == "unbalanced"
        straight = net.add(rig, None, None, None)
        for z, loss in MARKS:
            for name, parts in pads(z, loss, low).items():
                for fault in FAULTS:
                    if low and "cold" in fault:
                        continue
                    rows.append((name, z, loss, rig, fault, straight, net.add(rig, *faulty(parts, fault))))
    volts = net.solve()
    print("# Textbook pads with faults, simulated with ngspice by generic_table.py.")
    print("# network,impedance,marked dB,drive,sense,source ohms,load ohms,fault,loss dB")
    for name, z, loss, rig, fault, (sh, sc), (h, c) in rows:
        ratio = abs(volts[h] - volts[c]) / abs(volts[sh] - volts[sc])
        db = "inf" if ratio < 1e-6 else "%.7f" % (-20 * math.log10(ratio))
        print(",".join([name, "%g" % z, "%g" % loss, rig[0], rig[1], "%g" % rig[2], "%g" % rig[3], fault, db]))


main()
