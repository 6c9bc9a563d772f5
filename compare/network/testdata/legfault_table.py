#!/usr/bin/env python3
"""Make the table of pads with faulty legs and plugs that the Go tests compare with.

Needs python3 (standard library only) and the circuit simulator ngspice. Usage:

    python3 legfault_table.py > legfault_table.csv

Nothing here is shared with the Go code. A pad is written as a subcircuit with five pins; the
fault lies in how the pins are joined to it, as a person would do it with a soldering iron.
"""

import math
import os
import subprocess
import tempfile

# Each pad: the lines of its subcircuit between the pins ih ic oh oc and the screen, which is 0.
PADS = {
    "U": ("R1=560 R2=470 R3=330", ["R1 ih oh 560", "R2 ic oc 470", "R3 oh oc 330"]),
    "H": ("R1=150 R2=220 R3=180 R4=120 R5=430",
          ["R1 ih mh 150", "R2 ic mc 220", "R3 mh oh 180", "R4 mc oc 120", "R5 mh mc 430"]),
    "O": ("R1=1100 R2=430 R3=360 R4=1300", ["R1 ih ic 1100", "R2 ih oh 430", "R3 ic oc 360", "R4 oh oc 1300"]),
    "L": ("R1=680 R2=150", ["R1 ih oh 680", "R2 oh 0 150"]),
    "T": ("R1=330 R2=300 R3=390", ["R1 ih m 330", "R2 m oh 300", "R3 m 0 390"]),
}
UNBALANCED = {"L", "T"}

# How the rig's nodes (a b at the input, c d at the output) meet the pad's pins ih ic oh oc, and
# what else is soldered there. "x" is a pin in the air.
FAULTS = {
    "hot leg open at in": ("x b c d", ""),
    "cold leg open at in": ("a x c d", ""),
    "hot leg open at out": ("a b x d", ""),
    "cold leg open at out": ("a b c x", ""),
    "hot leg to screen at in": ("a b c d", "a"),
    "cold leg to screen at in": ("a b c d", "b"),
    "hot leg to screen at out": ("a b c d", "c"),
    "cold leg to screen at out": ("a b c d", "d"),
    "legs crossed": ("a b d c", ""),
    "in and out swapped": ("c d a b", ""),
}
FOR_UNBALANCED = {"hot leg open at in", "hot leg open at out", "hot leg to screen at in",
                  "hot leg to screen at out", "in and out swapped"}

# drive, sense, source, load, cable
ENDS = {
    False: [("balanced", "balanced", 100, 10000, 3e-10), ("floating", "floating", 150, 2700, 8e-10),
            ("impedance-balanced", "balanced", 40, 600, 0), ("unbalanced", "balanced", 600, 4700, 3e-10),
            ("balanced", "unbalanced", 100, 1500, 3e-10)],
    True: [("unbalanced", "unbalanced", 100, 10000, 3e-10), ("balanced", "balanced", 600, 1200, 0)],
}
FREQS = [997, 20000]


class Netlist:
    def __init__(self):
        self.lines, self.count = [], 0

    def bench(self, cold_in, cold_out, ends, join):
        """One rig with whatever join puts between its nodes; returns its two output nodes."""
        drive, sense, source, load, cable = ends
        self.count += 1
        n = self.count
        a, b, c, d = ("%s%d" % (x, n) for x in "abcd")
        if cold_in:
            b = "0"
        if cold_out:
            d = "0"
        nodes = {"a": a, "b": b, "c": c, "d": d}

        def emf(name, plus, minus, ohms, volts):
            self.lines.append("V%s%d e%s%d %s dc 0 ac %r" % (name, n, name, n, minus, volts))
            self.lines.append("R%s%d e%s%d %s %r" % (name, n, name, n, plus, ohms))

        if drive == "balanced":
            emf("h", a, "0", source / 2, 0.5)
            if b != "0":
                emf("c", b, "0", source / 2, -0.5)
        elif drive == "floating":
            emf("h", a, b, source, 1.0)
        elif drive == "impedance-balanced":
            emf("h", a, "0", source / 2, 1.0)
            if b != "0":
                self.lines.append("Rc%d %s 0 %r" % (n, b, source / 2))
        else:
            emf("h", a, "0", source, 1.0)
        if sense == "balanced":
            self.lines.append("Rlh%d %s 0 %r" % (n, c, load / 2))
            if d != "0":
                self.lines.append("Rlc%d %s 0 %r" % (n, d, load / 2))
        else:
            self.lines.append("Rl%d %s %s %r" % (n, c, d if sense == "floating" else "0", load))
        if cable:
            self.lines.append("Cc%d %s %s %r" % (n, c, d, cable))
        join(nodes, n)
        for node in sorted({a, b, c, d} - {"0"}):  # what nothing ties down is not told apart by 1 Tohm
            self.lines.append("Rt%s %s 0 1e12" % (node, node))
        return c, d

    def straight(self, nodes, n):
        self.lines.append("Vab%d %s %s 0" % (n, nodes["a"], nodes["c"]))
        if nodes["b"] != nodes["d"]:
            self.lines.append("Vbd%d %s %s 0" % (n, nodes["b"], nodes["d"]))

    def padded(self, pad, fault):
        pins, to_screen = FAULTS[fault]

        def join(nodes, n):
            at = {}
            for pin, node in zip(("ih", "ic", "oh", "oc"), pins.split()):
                at[pin] = nodes.get(node, "x%d" % n)
            for line in PADS[pad][1]:
                ref, p, q, ohms = line.split()
                p, q = (x if x == "0" else at.get(x, x + str(n)) for x in (p, q))
                if p != q:
                    self.lines.append("%sp%d %s %s %s" % (ref, n, p, q, ohms))
            if to_screen and nodes[to_screen] != "0":
                self.lines.append("Vs%d %s 0 0" % (n, nodes[to_screen]))
            self.lines.append("Rtx%d x%d 0 1e12" % (n, n))

        return join


def solve(lines):
    """{freq: {node: volts}} by ngspice."""
    with tempfile.TemporaryDirectory() as folder:
        commands = ["set filetype=ascii"]
        for f in FREQS:
            commands += ["ac lin 1 %d %d" % (f, f), "write f%d.raw" % f]
        text = ["faulty legs", ".options noopac gmin=1e-30"] + lines + [".control"] + commands + ["quit", ".endc", ".end"]
        path = os.path.join(folder, "legs.cir")
        with open(path, "w") as out:
            out.write("\n".join(text) + "\n")
        subprocess.run(["ngspice", "-b", path], cwd=folder, env=dict(os.environ, OMP_NUM_THREADS="1"), capture_output=True)
        return {f: read_raw(os.path.join(folder, "f%d.raw" % f)) for f in FREQS}


def read_raw(path):
    with open(path) as f:
        lines = f.read().splitlines()
    start, end = lines.index("Variables:"), lines.index("Values:")
    names = [line.split()[1] for line in lines[start + 1:end]]
    numbers = [line.split()[-1] for line in lines[end + 1:] if line.strip()]
    volts = {"0": 0j}
    for name, number in zip(names, numbers):
        if name.startswith("v("):
            re, _, im = number.partition(",")
            volts[name[2:-1]] = complex(float(re), float(im or 0))
    return volts


def main():
    net, rows = Netlist(), []
    for pad, (parts, _) in PADS.items():
        unbalanced = pad in UNBALANCED
        for ends in ENDS[unbalanced]:
            cold_in = unbalanced or ends[0] == "unbalanced"
            cold_out = unbalanced or ends[1] == "unbalanced"
            straight = net.bench(cold_in or cold_out, cold_in or cold_out, ends, net.straight)
            for fault in FAULTS:
                if unbalanced and fault not in FOR_UNBALANCED:
                    continue
                rows.append((pad, parts, fault, ends, straight, net.bench(cold_in, cold_out, ends, net.padded(pad, fault))))
    volts = solve(net.lines)
    print("# Pads with faulty legs and plugs, simulated with ngspice by legfault_table.py.")
    print("# network,parts,fault,drive,sense,source ohms,load ohms,cable farads,hz,loss dB")
    for pad, parts, fault, ends, (sc, sd), (c, d) in rows:
        for f in FREQS:
            v = volts[f]
            ratio = abs(v[c] - v[d]) / abs(v[sc] - v[sd])
            # The ties of 1 Tohm let next to nothing through: less than -120 dB is nothing.
            loss = "inf" if ratio < 1e-6 else "%.9g" % (-20 * math.log10(ratio))
            print(",".join([pad, parts, fault, ends[0], ends[1], "%g" % ends[2], "%g" % ends[3], "%g" % ends[4], "%d" % f, loss]))


main()
