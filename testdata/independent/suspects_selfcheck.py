"""The nodal analysis of suspects_circuit.py against ngspice: every network, drive and sense, every form of
fault; volts at the load and at the legs, what the noise is worked from, ohms between pins; and by hand the
value of a few units. Prints a line for each group; ends with status 1 if a figure is off."""
import math

import numpy as np

import curves
from circuit import DRIVES, SENSES, Ends, Netlist, Part
from suspects import READINGS, SOUND, classes_of
from suspects_circuit import OPEN_OHMS, Batch, Bench, ask_legs, ask_load, ask_noise, ask_pins
from suspects_designs import DESIGNS, Fault, build, discrete_faults, neighbours

TOL = 2e-6              # of a figure; ngspice is told to be no better
LINK_OHMS = 1e-5        # of a link, to the ohmmeter
HZ = (100.0, 1000.0, 10000.0)
failures = []


def near(what, got, want, tol):
    if not abs(got - want) <= tol:
        failures.append(f"{what} = {got:.9g}, want {want:.9g} ± {tol:g}")


def parts_of(unit):
    """The unit as parts of a netlist, its wires as links."""
    parts = []
    for i, p in enumerate(unit.parts):
        if p.is_link():
            parts.append(Part(p.ref, "R", (p.a, p.b), 0.0))
        elif not p.is_open():
            parts.append(Part(p.ref, p.kind, (p.a, p.b), p.value))
    return parts + [Part(f"wire{i}", "R", tuple(w), 0.0) for i, w in enumerate(unit.wires)]


def units():
    """Of each drawing a handful of faults, so that each form comes with each network."""
    for k, d in enumerate(DESIGNS):
        stated = {p.ref: p.value for p in d.parts}
        faults = [SOUND] + discrete_faults(d)
        for n, f in enumerate([SOUND] + faults[1 + k % 4::4] + [Fault("drift", "", d.parts[0].ref, value=0.4)]):
            yield n + 7 * k, d, f, build(d, f, stated)


def on_benches():
    batch, cases, wants = Batch(), [], []
    for n, d, f, unit in units():
        drive, sense = DRIVES[n % 4], SENSES[n // 4 % 3]
        source, load, cable = (100.0, 150.0, 600.0)[n % 3], (10000.0, 600.0)[n % 2], (3e-10, 0.0)[n // 2 % 2]
        bench = Bench(source, drive, load, sense, cable, (load / 2, load / 2))
        ends, legs_ends = Ends(source, drive, load, sense, cable), Ends(source, drive, load, "balanced", cable)
        parts = parts_of(unit)
        for straight in (True, False):
            cases.append(curves.Case(parts, d.unbalanced, ends, straight=straight))
            cases.append(curves.Case(parts, d.unbalanced, legs_ends, "legs", straight))
        cases.append(curves.Case(parts, d.unbalanced, ends, "port", plug_ohms=150.0))
        wants.append((f"{d.name}, {f.text or 'sound'}, {drive} to {sense}", ask_load(batch, unit, bench, HZ),
                      [ask_legs(batch, unit, bench, hz) for hz in HZ], ask_noise(batch, unit, bench, 150.0, HZ)))
    volts, count = batch.run(), 0
    results = []
    for first in range(0, len(cases), 100):
        results += curves.sweep(cases[first:first + 100])
    for i, (what, load, legs, noise) in enumerate(wants):
        straight, legs_straight, pad, legs_pad, port = results[5 * i:5 * i + 5]
        for j, hz in enumerate(HZ):
            pairs = [(volts[load[0][j]], straight), (volts[load[1][j]], pad), (volts[noise[0][j]], port.z)]
            pairs += [(volts[p], c) for p, c in zip(legs[j], (*legs_straight, *legs_pad))]
            for got, curve in pairs:
                want = curve.values[np.argmin(np.abs(curve.hz - hz))]
                near(f"{what}, {hz:g} Hz", abs(got - want), 0.0, TOL * max(abs(want), 1e-3))
                count += 1
            k = np.argmin(np.abs(port.z.hz - hz))
            near(f"{what}, noise of the load", 4 * curves.BOLTZMANN * (abs(volts[noise[1][j]]) ** 2 / noise[2]).sum(),
                 port.load[k], TOL * (port.load[k] + 1e-24))
    return count


def ohms():
    batch, netlists, wants = Batch(), [], []
    for n, d, f, unit in units():
        if any(p.kind != "R" for p in unit.parts):
            continue
        for words in READINGS[d.unbalanced]:
            pins, _, joined = words.partition("|")
            a, b = pins.split(",")
            cold = ("in.cold", "out.cold") if d.unbalanced else ()
            fold = {**{n: "the-screen" for n in cold}, "screen": "the-screen", b: "screen"} if b != "screen" else \
                {n: "screen" for n in cold}
            if joined:      # one node, no link: between floating nodes a link beside the leaks is singular
                one, other = sorted((fold.get(n, n) for n in joined.split(",")), key=lambda n: n == "screen")
                fold = {**{n: other if to == one else to for n, to in fold.items()}, one: other}
            net = Netlist(f"m{len(wants)}", fold)
            for p in parts_of(unit):
                net.part(p.at(p.value or LINK_OHMS))    # a link beside a link would be a loop of sources
            na, nb = net.node(a), net.node(b)
            net.lines.append(f"im{len(wants)} {nb} {na} dc 0 ac 1")
            netlists.append(net.lines)
            place = ask_pins(batch, unit, a, b, joined.split(",") if joined else None, [0.0])[0]
            wants.append((f"{d.name}, {f.text or 'sound'}, {words}", place, na, nb))
    volts = batch.run()
    found = {"0": np.zeros(1)}
    for first in range(0, len(netlists), 50):
        found.update(curves.run(sum(netlists[first:first + 50], ["* pads on an ohmmeter"]))[1])
    for what, place, na, nb in wants:
        want = abs(found[na][0] - found[nb][0])
        got = abs(volts[place])
        if want > OPEN_OHMS:
            near(what + " open", float(got > OPEN_OHMS), 1.0, 0)
        else:
            near(what, got, want, TOL * want + 5 * LINK_OHMS)
    return len(wants)


def by_hand():
    """A U between floating ends is a loop; E24 neighbours; faults that are one at the pins."""
    batch = Batch()
    d = next(d for d in DESIGNS if d.name == "Saltmarsh 14 line pad")
    unit = build(d, SOUND, {p.ref: p.value for p in d.parts})
    bench = Bench(100.0, "floating", 10000.0, "floating", 0.0)
    straight, pad = ask_load(batch, unit, bench, [997.0])
    volts = batch.run()
    shunt = 330 * 10000 / 10330
    near("U", 20 * math.log10(abs(volts[straight[0]] / volts[pad[0]])),
         20 * math.log10((10000 / 10100) / (shunt / (100 + 1120 + shunt))), 1e-6)
    near("below 330", neighbours(330)[0], 300, 0)
    near("above 330", neighbours(330)[1], 360, 0)
    near("above 9100", neighbours(9100)[1], 10000, 0)
    near("below 100", neighbours(100)[0], 91, 0)
    number, _ = classes_of(d)
    near("hot leg open at in is R1 open", number["hot leg open at in"], number["R1 open"], 0)
    number, _ = classes_of(DESIGNS[0])
    near("hot leg to screen at out is R2 short", number["hot leg to screen at out"], number["R2 short"], 0)
    near("hot leg open at out is not R1 open", float(number["hot leg open at out"] != number["R1 open"]), 1.0, 0)
    number, _ = classes_of(next(d for d in DESIGNS if d.name == "Saltmarsh 600 H 10"))
    near("R1 and R3 swapped is sound", number["R1 and R3 swapped"], 0, 0)
    near("in and out swapped is sound", number["in and out swapped"], 0, 0)
    near("legs crossed is not", float(number["legs crossed"] != 0), 1.0, 0)
    _, direct = classes_of(next(d for d in DESIGNS if d.name == "Saltmarsh coupled U"))
    near("R1 open is R2 open to an ohmmeter", direct["R1 open"], direct["R2 open"], 0)
    return 12


def selfcheck():
    for check in (on_benches, ohms, by_hand):
        print(f"{check.__name__}: {check()} figures")
    for line in failures[:40]:
        print("off:", line)
    print(f"{len(failures)} off")
    return 1 if failures else 0
