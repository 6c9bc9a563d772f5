#!/usr/bin/env python3
"""Make units with one fault, with none and with two, and all that takes and an ohmmeter show of each.

    python3 suspects.py --mix prior --count 5000 --seed 1     a line of JSON for each design, then for each unit
    python3 suspects.py --selfcheck                           the nodal analysis against ngspice

Mixes: prior (each fault of a drawing as likely as another), solder (drifts, opens and bridges), swaps
(wrong values and parts or plugs in the wrong place), sound, two (two parts wrong). Parts, bench, gain
and meter are drawn from the rectangles stated, readings get their noise. Keys of a line:

    design    parts, whether unbalanced, classes: the faults by words, the same number where no impedance
              between any two pins differs at 0, 997 and 20000 Hz (a sound unit is 0); direct: the same at 0 Hz
    unit      fault, form, ref, other, ratio (true value of the faulty part, or end, over the stated one), shows_db
              (of two faults, see hides), rig as stated, loss, response, legs, polarity, noise, and ohms by
              "pin,pin" or "pin,pin|pin,pin" with the second pair joined: as the meter showed it, and true; null
              is over range
"""
import argparse
import json
import math
import sys
from dataclasses import replace

import numpy as np

from suspects_circuit import (Batch, Bench, OPEN_OHMS, PINS, ask_legs, ask_load, ask_noise, ask_pins)
from suspects_designs import BENCHES, DESIGNS, DRIVES, SENSES, Fault, build, discrete_faults

TONE_HZ = 997.0
RESPONSE_HZ = (20, 31.5, 63, 125, 250, 500, 1000, 2000, 4000, 6300, 8000, 10000, 12500, 16000, 20000)
NOISE_HZ = (2000, 6000, 10000, 14000, 18000)
BAND_HZ = 20000.0 - 20.0
BOLTZMANN = 1.380649e-23
SOUND = Fault("sound", "")
HALVES = {"gain_db": 0.05, "linearity_db": 0.01, "channels_db": 0.1, "meter_frac": 0.005, "meter_ohms": 0.2}

READINGS = {
    True: ["in.hot,screen", "out.hot,screen", "in.hot,out.hot", "in.hot,screen|out.hot,screen",
           "out.hot,screen|in.hot,screen"],
    False: ["in.hot,in.cold", "out.hot,out.cold", "in.hot,out.hot", "in.cold,out.cold",
            "in.hot,in.cold|out.hot,out.cold", "out.hot,out.cold|in.hot,in.cold",
            "in.hot,screen", "in.cold,screen", "out.hot,screen", "out.cold,screen",
            "in.hot,screen|out.hot,screen", "in.cold,screen|out.cold,screen",
            "out.hot,screen|in.hot,screen", "out.cold,screen|in.cold,screen"],
}

# How often each form comes, one fault of it against one of another.
WEIGHTS = {
    "prior": {},
    "solder": {"drift": 8.0, "open": 3.0, "short": 2.0, "leg": 2.0, "is": 0.3, "swap": 0.3, "x10": 0.3, "/10": 0.3,
               "turned": 0.3, "crossed": 0.3},
    "swaps": {"swap": 8.0, "turned": 6.0, "crossed": 6.0, "is": 2.0, "x10": 3.0, "/10": 3.0, "source": 3.0, "load": 3.0,
              "drift": 0.5, "open": 0.5, "short": 0.5, "leg": 0.5},
}


def rectangle(rng, half):
    return rng.uniform(-half, half)


def amount(rng, least, most):
    """A ratio whose logarithm is log-uniform in size, either way."""
    size = math.exp(rng.uniform(math.log(math.log(least)), math.log(math.log(most))))
    return math.exp(size * rng.choice((-1, 1)))


def drift(rng, ref, least=1.03, most=3.0):
    change = amount(rng, least, most) - 1
    return Fault("drift", f"{ref} drifted {100 * change:+.3g} %", ref, value=change)


def classes_of(d):
    """Faults by words, numbered so that those alike at every pin have one number, sound 0; and so that those
    have which direct current, an ohmmeter's, finds alike."""
    faults = [SOUND] + discrete_faults(d)
    stated = {p.ref: p.value for p in d.parts}
    pins = ("in.hot", "out.hot", "screen") if d.unbalanced else PINS
    pairs = [(a, b) for i, a in enumerate(pins) for b in pins[i + 1:]]
    batch = Batch()
    for f in faults:
        unit = build(d, f, stated)
        for a, b in pairs:
            ask_pins(batch, unit, a, b, None, [0.0])
            ask_pins(batch, unit, a, b, None, [TONE_HZ, 20000.0])
    z = batch.run().reshape(len(faults), -1)
    z[np.abs(z) > OPEN_OHMS] = OPEN_OHMS
    return {f.text: k for f, k in zip(faults, numbered(z))}, {f.text: k for f, k in zip(faults, numbered(z[:, ::3]))}


def numbered(rows):
    """Numbers for rows, the same for rows that are alike."""
    kinds, numbers = [], []
    for row in rows:
        for k, other in enumerate(kinds):
            if np.all(np.abs(row - other) <= 1e-6 * (np.abs(other) + 1e-3)):
                break
        else:
            k = len(kinds)
            kinds.append(row)
        numbers.append(k)
    return numbers


class Plan:
    """Draws faults for a mix."""

    def __init__(self, mix, rng):
        self.mix, self.rng = mix, rng
        self.known, self.numbers = [], []
        for d in DESIGNS:
            self.numbers.append(classes_of(d))
            self.known.append([f for f in discrete_faults(d) if self.numbers[-1][0][f.text] != 0])

    def fault(self, k):
        d, rng = DESIGNS[k], self.rng
        if self.mix == "sound":
            return SOUND
        if self.mix == "two":
            return self.two(d)
        weight = WEIGHTS[self.mix]
        open_ended = [("drift", p.ref) for p in d.parts] + [("source", ""), ("load", "")]
        w = np.array([weight.get(f.form, 1.0) for f in self.known[k]] + [weight.get(f, 1.0) for f, _ in open_ended])
        i = rng.choice(len(w), p=w / w.sum())
        if i < len(self.known[k]):
            return self.known[k][i]
        form, ref = open_ended[i - len(self.known[k])]
        if form == "drift":
            return drift(rng, ref)
        ratio = math.exp(rng.uniform(math.log(1.25), math.log(10)) * rng.choice((-1, 1)))
        return Fault(form, f"{form} not as stated", value=ratio)

    def two(self, d):
        rng = self.rng
        faults = []
        for i in rng.choice(len(d.parts), 2, replace=False):
            ref = d.parts[i].ref
            form = rng.choice(("open", "short", "x10", "/10", "drift", "drift"))
            faults.append(drift(rng, ref, 1.15) if form == "drift" else Fault(str(form), f"{ref} {form}", ref))
        return Fault("two", " and ".join(f.text for f in faults), also=tuple(faults))


def stated_rig(rng, d):
    source, source_tol, load, load_tol, cable, cable_tol = BENCHES[rng.integers(len(BENCHES))]
    return {"source": source, "source_tol": source_tol, "load": load, "load_tol": load_tol, "cable": cable,
            "cable_tol": cable_tol, "drive": "unbalanced" if d.unbalanced else str(rng.choice(DRIVES)),
            "sense": "unbalanced" if d.unbalanced else str(rng.choice(SENSES)), "legs_load": load / 2}


def true_bench(rng, rig, fault):
    def off(value, tol):
        return value * (1 + rectangle(rng, tol))
    source, load = off(rig["source"], rig["source_tol"]), off(rig["load"], rig["load_tol"])
    if fault.form == "source":
        source = rig["source"] * fault.value
    if fault.form == "load":
        load = rig["load"] * fault.value
    legs = (off(rig["legs_load"], rig["load_tol"]), off(rig["legs_load"], rig["load_tol"]))
    return Bench(source, rig["drive"], load, rig["sense"], off(rig["cable"], rig["cable_tol"]), legs)


def stated_bench(rig):
    return Bench(rig["source"], rig["drive"], rig["load"], rig["sense"], rig["cable"], (rig["legs_load"],) * 2)


class Asked:
    """The places of one unit's answers in a batch."""

    def __init__(self, batch, d, rng, fault):
        self.d, self.fault, self.rng = d, fault, rng
        self.rig = stated_rig(rng, d)
        bench = true_bench(rng, self.rig, fault)
        values = {p.ref: p.value * (1 + rectangle(rng, t)) for p, t in zip(d.parts, d.tolerances)}
        self.unit = unit = build(d, fault, values)
        self.straight, self.pad = ask_load(batch, unit, bench, [TONE_HZ, *RESPONSE_HZ])
        self.legs = None
        if not d.unbalanced:
            self.legs = ask_legs(batch, unit, bench, TONE_HZ)
            self.stated_legs = ask_legs(batch, unit, stated_bench(self.rig), TONE_HZ)
        self.plug = 150.0
        self.alone = [self.only(batch, f) for f in (fault, *fault.also)] if fault.also else []
        self.noise = ask_noise(batch, unit, bench, self.plug, NOISE_HZ)
        self.load_makes_noise = rng.random() < 0.5
        self.ohms = {}
        for words in READINGS[d.unbalanced]:
            pins, _, joined = words.partition("|")
            self.ohms[words] = ask_pins(batch, unit, *pins.split(","), joined.split(",") if joined else None, [0.0])[0]

    def only(self, batch, fault):
        """The stated drawing with a fault alone, on the stated bench: loads, legs and what noise comes from."""
        unit, bench = build(self.d, fault, {p.ref: p.value for p in self.d.parts}), stated_bench(self.rig)
        return (ask_load(batch, unit, bench, [TONE_HZ]), ask_legs(batch, unit, bench, TONE_HZ)[2:],
                ask_noise(batch, unit, bench, self.plug, [TONE_HZ])[0])

    def hides(self, volts):
        """Of two faults: by how many dB what was taken changes when the one that matters less is mended: the
        loss; loss or legs; loss, legs or noise."""
        def db(a, b, least):
            return 20 * math.log10(max(abs(a), least) / max(abs(b), least))
        figures = [(db(volts[pad[0]], volts[straight[0]], 1e-4),
                    0.0 if self.d.unbalanced else db(volts[hot], volts[cold], 1e-5),
                    10 * math.log10(max(volts[z[0]].real, 1.0))) for (straight, pad), (hot, cold), z in self.alone]
        moved = np.abs(np.array(figures[1:]) - figures[0])
        return [float(moved[:, :n].max(axis=1).min()) for n in (1, 2, 3)]

    def line(self, volts):
        rng, d, f = self.rng, self.d, self.fault
        line = {"design": d.name, "fault": f.text, "form": f.form, "ref": f.ref, "other": f.other, "rig": self.rig,
                "refs": [g.ref for g in f.also]}
        if f.also:
            line["shows_db"] = self.hides(volts)
        stated = {p.ref: p for p in d.parts}
        if f.form in ("source", "load"):
            line["ratio"] = f.value
        elif f.ref in stated:
            true = next(p.value for p in self.unit.parts if p.ref == f.ref)
            line["ratio"] = true / stated[f.ref].value if math.isfinite(true) else None
        self.losses(line, volts)
        if self.legs:
            line["legs"] = self.leg_line(volts)
        line["noise"] = self.noise_line(volts)
        line["ohms"], line["true_ohms"] = {}, {}
        for words, place in self.ohms.items():
            true = float(abs(volts[place]))
            shown = true * (1 + rectangle(rng, HALVES["meter_frac"])) + rectangle(rng, HALVES["meter_ohms"])
            line["ohms"][words] = None if true > OPEN_OHMS else round(max(shown, 0.0), 4)
            line["true_ohms"][words] = None if true > OPEN_OHMS else round(true, 6)
        return line

    def losses(self, line, volts):
        rng = self.rng
        floor = rng.uniform(75, 95)
        own = math.exp(rng.uniform(math.log(0.005), math.log(0.03)))

        ratios = volts[self.pad] / volts[self.straight]
        losses = [-20 * math.log10(r) if r > 1e-7 else math.inf for r in np.abs(ratios)]
        at_tone = losses[0]
        gain = rectangle(rng, HALVES["gain_db"]) + rectangle(rng, HALVES["linearity_db"])
        line["gain_std_db"] = math.hypot(HALVES["gain_db"], HALVES["linearity_db"]) / math.sqrt(3)
        line["true_loss_db"] = None if math.isinf(at_tone) else at_tone
        if at_tone > floor:
            line["loss"] = {"db": floor, "std": own, "at_least": True}
            line["response"], line["polarity"] = [], 0
            return
        std = math.hypot(own, 0.5 * 10 ** ((at_tone - floor) / 20))
        line["loss"] = {"db": at_tone + gain + rng.normal(0, std), "std": std, "at_least": False}
        line["response"] = []
        for hz, db in zip(RESPONSE_HZ, losses[1:]):
            if db < floor:
                s = math.hypot(own, 0.5 * 10 ** ((max(db, at_tone) - floor) / 20))
                line["response"].append([hz, db - at_tone + rng.normal(0, s), s])
        turn = abs(np.angle(ratios[0]))
        sure = std < 0.2 and abs(turn - math.pi / 2) > math.pi / 6
        line["polarity"] = 0 if not sure else 1 if turn < math.pi / 2 else -1

    def leg_line(self, volts):
        """As the takes show it; with legs-before (where both legs are fed) the channels' difference is off."""
        rng, floor = self.rng, 1e-5
        own = math.exp(rng.uniform(math.log(0.005), math.log(0.03)))
        shot, scold, hot, cold = (volts[p] for p in self.legs)
        stated = [volts[p] for p in self.stated_legs[:2]]
        channels = rectangle(rng, HALVES["channels_db"])
        before = rng.random() < 0.5 and min(map(abs, stated)) > 0.1 * max(map(abs, stated))
        leg = {"dead_hot": bool(abs(hot) < floor), "dead_cold": bool(abs(cold) < floor), "phase": None, "phase_std": None,
               "before": bool(before)}
        over = 20 * math.log10(max(abs(hot), floor) / max(abs(cold), floor))
        least = max(min(abs(hot), abs(cold)), floor)
        std = math.hypot(own, 0.5 * floor / least) if not (leg["dead_hot"] or leg["dead_cold"]) else own
        if before:
            over += 20 * math.log10(abs(stated[0] / stated[1]) / abs(shot / scold))
        else:
            over += channels
            std = math.hypot(std, HALVES["channels_db"] / math.sqrt(3))
        leg["db"], leg["std"] = over + rng.normal(0, math.hypot(own, std if before else own)), std
        if not (leg["dead_hot"] or leg["dead_cold"]):
            turn = np.angle(hot / cold)
            if before:
                turn += np.angle(stated[0] / stated[1]) - np.angle(shot / scold)
            s = math.degrees(math.hypot(own * math.log(10) / 20, floor / least / 2)) + 0.05
            leg["phase"] = math.remainder(math.degrees(turn) + rng.normal(0, s), 360.0)
            leg["phase_std"] = s
        return leg

    def noise_line(self, volts):
        rng = self.rng
        kelvin = 273.15 + 21 + rectangle(rng, 2)
        output, across, loads = self.noise
        ohms = float(np.mean(volts[output].real))
        if not self.load_makes_noise:
            ohms -= float(np.mean((np.abs(volts[across]) ** 2 / loads).sum(axis=1)))
        unit = 4 * BOLTZMANN * kelvin * max(ohms, 0.0) * BAND_HZ
        rig = 0.6 * 10 ** (rng.uniform(-129, -120) / 10)
        part = 1 / math.sqrt(BAND_HZ * 10)
        calibration = 10 ** (rng.normal(0, 0.1) / 10)
        gain = 10 ** (rectangle(rng, 0.02) / 10)
        return {"plug": self.plug, "pad_vv": (rig + unit) * calibration * gain * (1 + rng.normal(0, part)),
                "rig_vv": rig * calibration * (1 + rng.normal(0, part)), "part": part, "true_vv": unit}


def finite(value):
    if isinstance(value, dict):
        return {k: finite(v) for k, v in value.items()}
    if isinstance(value, list):
        return [finite(v) for v in value]
    if isinstance(value, (float, np.floating)):
        return float(f"{value:.9g}") if math.isfinite(value) else None
    return value


def write(mix, count, seed, out, chunk=500):
    rng = np.random.default_rng(seed)
    plan = Plan(mix, rng)
    for d, (numbers, direct) in zip(DESIGNS, plan.numbers):
        parts = [{"ref": p.ref, "kind": p.kind, "value": p.value, "tol": t, "a": p.a if i >= len(d.parts) - d.own else "",
                  "b": p.b if i >= len(d.parts) - d.own else ""} for i, (p, t) in enumerate(zip(d.parts, d.tolerances))]
        print(json.dumps({"design": d.name, "network": d.network, "parts": parts, "unbalanced": d.unbalanced,
                          "classes": numbers, "direct": direct}), file=out)
    for first in range(0, count, chunk):
        batch = Batch()
        asked = [Asked(batch, DESIGNS[i % len(DESIGNS)], rng, plan.fault(i % len(DESIGNS)))
                 for i in range(first, min(first + chunk, count))]
        volts = batch.run()
        for i, a in enumerate(asked):
            print(json.dumps({"unit": f"{first + i + 1:04d}", **finite(a.line(volts))}), file=out)


def main():
    p = argparse.ArgumentParser()
    p.add_argument("--mix", choices=(*WEIGHTS, "sound", "two"), default="prior")
    p.add_argument("--count", type=int, default=1000)
    p.add_argument("--seed", type=int, default=1)
    p.add_argument("--selfcheck", action="store_true")
    args = p.parse_args()
    if args.selfcheck:
        from suspects_selfcheck import selfcheck
        return selfcheck()
    write(args.mix, args.count, args.seed, sys.stdout)
    return 0


if __name__ == "__main__":
    raise SystemExit(main())
