"""Curves over frequency by ngspice: what a bench plays through a pad, and what a pad's output looks like.

One run sweeps all the cases of a unit. Voltages are for one volt of EMF. Noise is worked from the
simulator's impedances (Nyquist 1928: the noise of a passive network at one temperature is that of the
real part of its impedance); selftest_checks.py holds it against ngspice's own noise analysis.
"""
import math
import os
import shutil
import subprocess
import tempfile
from dataclasses import dataclass

import numpy as np

from circuit import Netlist, folded

POINTS_PER_DECADE, LOW_HZ, HIGH_HZ = 80, 1.0, 100000.0
BOLTZMANN = 1.380649e-23        # J/K, exact since 2019
DBU_VOLTS = math.sqrt(0.6)


class Curve:
    """A complex figure over frequency; between its points magnitude and phase run evenly over log f."""

    def __init__(self, hz, values):
        self.hz, self.values = hz, values
        self._x = np.log(hz)
        self._mag = np.log(np.maximum(np.abs(values), 1e-30))
        self._turn = np.unwrap(np.angle(values))

    def at(self, hz):
        x = np.log(np.maximum(hz, 1e-3))
        return np.exp(np.interp(x, self._x, self._mag) + 1j * np.interp(x, self._x, self._turn))

    def db(self, hz):
        return 20 * np.log10(np.abs(self.at(hz)))

    def __truediv__(self, other):
        return Curve(self.hz, self.values / other.values)

    def __mul__(self, factor):
        return Curve(self.hz, self.values * factor)


@dataclass
class Port:
    """What the rig's input sees: the impedance across it and the noise there, V²/Hz at each frequency.

    passive is that of all but the load; load that of the load if it is a real resistor. Both are at
    one kelvin; current is |Z|², for the rig's noise current.
    """
    z: Curve
    passive: np.ndarray
    load: np.ndarray

    @property
    def current(self):
        return np.abs(self.z.values) ** 2


@dataclass
class Case:
    """parts between ends; straight leaves them out. look is across, legs or port.

    A port has no generator: plug_ohms stands leg to leg at the input (None: nothing does), at the
    output where straight.
    """
    parts: list
    unbalanced: bool
    ends: object
    look: str = "across"
    straight: bool = False
    plug_ohms: float = None


def netlist(case, tag):
    """The lines of one case, and the nodes hot and cold of its output."""
    ends = case.ends.but(drive="floating") if case.look == "port" else case.ends
    n = Netlist(tag, folded(case.unbalanced, ends, case.straight))
    if case.look != "port":
        n.drive(ends)
    elif case.plug_ohms is not None:
        n.resistor("plug", "in.hot", "in.cold", case.plug_ohms)
    n.sense(ends)
    if not case.straight:
        for p in case.parts:
            n.part(p)
    hot, cold = n.output()
    if case.look == "port":
        n.lines.append(f"i{tag} {cold} {hot} dc 0 ac 1")
    return n.lines, hot, cold


def sweep(cases):
    """Runs all cases at once: a Curve, a pair of Curves (legs) or a Port for each."""
    lines, ends, wanted = ["* pads on their benches"], [], []
    for i, case in enumerate(cases):
        more, hot, cold = netlist(case, f"c{i}")
        lines += more
        ends.append((hot, cold))
        wanted += [n for n in (hot, cold) if n != "0"]
    lines.append(".save " + " ".join(f"v({n})" for n in dict.fromkeys(wanted)))
    hz, volts = run(lines)
    volts["0"] = np.zeros(len(hz), complex)
    results = []
    for case, (hot, cold) in zip(cases, ends, strict=True):
        h, c = volts[hot], volts[cold]
        if case.look == "legs":
            results.append((Curve(hz, h), Curve(hz, c)))
        elif case.look == "across":
            results.append(Curve(hz, h - c))
        else:
            results.append(port(case, hz, h, c))
    return results


def port(case, hz, h, c):
    """By reciprocity a resistor's noise current is heard through the voltage that 1 A at the port puts on it."""
    z, ohms = h - c, case.ends.load_ohms
    if case.ends.sense == "balanced":
        load = 4 * BOLTZMANN * (np.abs(h) ** 2 + np.abs(c) ** 2) / (ohms / 2)
    elif case.ends.sense == "floating":
        load = 4 * BOLTZMANN * np.abs(z) ** 2 / ohms
    else:
        load = 4 * BOLTZMANN * np.abs(h) ** 2 / ohms
    return Port(Curve(hz, z), 4 * BOLTZMANN * z.real - load, load)


def run(lines):
    """One netlist swept: the frequencies, and complex volts by node."""
    program = shutil.which("ngspice")
    if program is None:
        raise SystemExit("ngspice is not installed (Debian package ngspice)")
    text = "\n".join(lines + [f".ac dec {POINTS_PER_DECADE} {LOW_HZ:g} {HIGH_HZ:g}", ".end", ""])
    with tempfile.TemporaryDirectory() as where:
        net, raw = os.path.join(where, "pads.cir"), os.path.join(where, "pads.raw")
        with open(net, "w") as f:
            f.write(text)
        done = subprocess.run([program, "-b", "-r", raw, net], cwd=where, text=True,
                              stdout=subprocess.PIPE, stderr=subprocess.STDOUT)
        if done.returncode or not os.path.exists(raw):
            raise SystemExit("ngspice failed:\n" + done.stdout[-2000:])
        with open(raw, "rb") as f:
            head, _, body = f.read().partition(b"Binary:\n")
    names = [row.split()[1] for row in head.decode().partition("Variables:\n")[2].splitlines() if row.strip()]
    table = np.frombuffer(body, complex).reshape(-1, len(names))
    columns = {name[2:-1]: table[:, i] for i, name in enumerate(names) if name.startswith("v(")}
    return table[:, 0].real, columns


def band_volts2(hz, density, from_hz=20.0, to_hz=20000.0):
    """Power of a noise density (V²/Hz) over a band, by a fine even grid."""
    f = np.arange(from_hz, to_hz + 1, 1.0)
    return float(np.trapz(np.interp(np.log(f), np.log(hz), density), f))


def dbu(volts2):
    return 10 * math.log10(volts2 / 0.6)


def points_hz(from_hz=20.0, to_hz=20000.0):
    """The twelfth-octave points of the response: 1000·10^(n/40)."""
    n = np.arange(-80, 81)
    f = 1000 * 10 ** (n / 40)
    return f[(f >= from_hz * 0.99999) & (f <= to_hz * 1.00001)]
