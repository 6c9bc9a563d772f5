#!/usr/bin/env python3
"""Make the table of simulated noise that the Go tests compare with.

Needs python3 (standard library only) and the circuit simulator ngspice. Usage:

    python3 ngspice_noise_table.py > ngspice_noise_table.csv

Each pad is written out as a SPICE netlist, its input closed by a plug from leg to leg, and ngspice
does a .noise analysis of the voltage between the output legs: once with the load's resistors set to
make no noise, once with all. Nothing here is shared with the Go code.
"""

import itertools
import os
import subprocess
import sys
import tempfile

CELSIUS = 21
FREQS = [20, 997, 20000]

# id, network, cold pins at the screen?, resistors, capacitors, inductors: REF=value@node~node for the
# netlist; the text between bars is what the Go test reads, without the nodes of the named networks.
PADS = [
    ("U", "U", False, "R1=560@ih~oh R2=470@ic~oc R3=330@oh~oc", "R1=560 R2=470 R3=330"),
    ("H", "H", False, "R1=150@ih~mh R2=220@ic~mc R3=180@mh~oh R4=120@mc~oc R5=430@mh~mc",
     "R1=150 R2=220 R3=180 R4=120 R5=430"),
    ("O", "O", False, "R1=11000@ih~ic R2=4300@ih~oh R3=3600@ic~oc R4=13000@oh~oc",
     "R1=11000 R2=4300 R3=3600 R4=13000"),
    ("T", "T", True, "R1=330@ih~m R2=300@m~oh R3=390@m~0", "R1=330 R2=300 R3=390"),
    ("pi", "pi", True, "R1=1100@ih~0 R2=820@ih~oh R3=1200@oh~0", "R1=1100 R2=820 R3=1200"),
    ("L", "L", True, "R1=10000@ih~oh R2=10000@oh~0", "R1=10000 R2=10000"),
    ("bT", "bridged-T", True, "R1=600@ih~m R2=560@m~oh R3=1300@ih~oh R4=270@m~0",
     "R1=600 R2=560 R3=1300 R4=270"),
    ("U+", "U", False, "R1=1200@ih~oh R2=1000@ic~oc R3=2200@oh~oc C1=4.7e-9@oh~oc R4=3300@oh~0",
     "R1=1200 R2=1000 R3=2200 C1=4.7e-9@out.hot~out.cold R4=3300@out.hot~screen"),
    ("T+", "T", True, "R1=1000@ih~m R2=820@m~oh R3=120@m~0 C1=4.7e-8@ih~m L1=0.01@oh~0",
     "R1=1000 R2=820 R3=120 C1=4.7e-8@in.hot~mid L1=0.01@out.hot~screen"),
]
SENSES = ["balanced", "floating", "unbalanced"]
PLUGS = [100, 600, 1]
LOADS = [10000, 1500, 100000]
CABLES = [3e-10, 1e-12, 2.2e-9]


def netlist(pad, sense, plug, load, cable, noisy):
    _, _, unbalanced, parts, _ = pad
    lines = ["pad", ".options temp=%d" % CELSIUS]
    tie_in = "0" if unbalanced else "ic"
    tie_out = "0" if unbalanced or sense == "unbalanced" else "oc"

    def node(n):
        return {"ic": tie_in, "oc": tie_out}.get(n, n)

    for word in parts.split():
        ref, rest = word.split("=")
        value, nodes = rest.split("@")
        a, b = nodes.split("~")
        lines.append("%s %s %s %s" % (ref, node(a), node(b), value))
    lines += ["Vin in 0 dc 0 ac 1", "Rin in 0 1"]
    lines.append("Rplug ih %s %r" % (tie_in, plug))
    mute = "" if noisy else " noisy=0"
    if sense == "balanced":
        lines += ["Rlh oh 0 %r%s" % (load / 2, mute)]
        if tie_out != "0":
            lines += ["Rlc %s 0 %r%s" % (tie_out, load / 2, mute)]
    else:
        lines += ["Rl oh %s %r%s" % (tie_out, load, mute)]
    lines.append("Cc oh %s %r" % (tie_out, cable))
    touched = " ".join(" ".join(line.split()[1:3]) for line in lines[2:]).split()
    screened = sum(n == "0" for n in touched) > 2  # besides the idle source
    if not screened:
        lines.append("Rtie oh 0 1 noisy=0")
    out = "v(oh)" if tie_out == "0" else "v(oh,%s)" % tie_out
    return lines, out


def noise(lines, out, freqs):
    """Volts squared per hertz at each frequency."""
    with tempfile.TemporaryDirectory() as folder:
        path = os.path.join(folder, "noise.cir")
        control = [".control", "set numdgt=10"]
        for f in freqs:
            control += ["noise %s Vin lin 1 %d %d" % (out, f, f), "setplot noise%d" % 1, "print onoise_spectrum"]
            control += ["destroy all"]
        with open(path, "w") as f:
            f.write("\n".join(lines + control + ["quit", ".endc", ".end"]) + "\n")
        env = dict(os.environ, OMP_NUM_THREADS="1")
        done = subprocess.run(["ngspice", "-b", path], cwd=folder, env=env, capture_output=True, text=True)
        found = [float(line.split("=")[1]) for line in done.stdout.splitlines() if line.startswith("onoise_spectrum =")]
        if len(found) != len(freqs):
            sys.exit("ngspice gave no noise:\n%s\n%s\n%s" % ("\n".join(lines), done.stdout[-1500:], done.stderr[-1500:]))
        return [v * v for v in found]


def main():
    print("# Thermal noise at the load simulated with ngspice by ngspice_noise_table.py, %d degrees Celsius." % CELSIUS)
    print("# id,network,parts,sense,plug,load,cable,hz,unit V2 per Hz,unit and load V2 per Hz")
    for turn, (pad, sense) in enumerate(itertools.product(PADS, SENSES)):
        plug, load, cable = PLUGS[turn % 3], LOADS[turn // 3 % 3], CABLES[turn // 2 % 3]
        quiet, out = netlist(pad, sense, plug, load, cable, False)
        loud, _ = netlist(pad, sense, plug, load, cable, True)
        for f, a, b in zip(FREQS, noise(quiet, out, FREQS), noise(loud, out, FREQS)):
            print("%s,%s,%s,%s,%g,%g,%g,%g,%.9g,%.9g" % (pad[0], pad[1], pad[4], sense, plug, load, cable, f, a, b))


main()
