"""Plans service, faults600 and coverage: from a bench that is known only so well to the place of service."""
import math

from circuit import OPEN, Ends, Simulator
from drawing import BALANCED, UNBALANCED, Rig, e24, matched, standard_pad
from unit import INTEGER16, Unit, draw_bench, draw_parts, simple_takes

SERVICES = ((600, 600, 0.0), (150, 1500, 500e-12), (40, 10000, 1e-9), (200, 3000, 800e-12),
            (120, 2700, 800e-12), (50, 600, 0.0), (1000, 20000, 200e-12))


def service(count, rng):
    """Sound units, recorded well; parts, bench and gain drawn from their stated rectangles."""
    units = [sound_unit(rng, i) for i in range(count or 240)]
    simulate(units)
    for unit, half in zip(units, generous_limits(units), strict=True):
        unit.limits = {"loss_plus_minus_db": half}
        simple_takes(rng, unit, rng.uniform(-14, -6), rng.uniform(50, 75), int(rng.choice([44100, 48000])),
                     rng.uniform(1.8, 2.8))
    return units


def sound_unit(rng, i):
    network = str(rng.choice(UNBALANCED + BALANCED))
    tolerance = float(rng.choice([0.01, 0.05]))
    loss_db, r0 = rng.uniform(6, 40), float(rng.choice([200.0, 600.0, 1000.0]))
    pad = standard_pad(network, [e24(v) for v in matched(network, loss_db, r0)], tolerance)
    if network in BALANCED:
        drive = str(rng.choice(["balanced", "floating", "impedance-balanced"]))
        sense = str(rng.choice(["balanced", "floating"]))
    else:
        drive = sense = "unbalanced"
    ends = Ends(float(rng.choice([50, 100, 150, 200])), drive, float(rng.choice([5000, 10000, 20000])), sense,
                float(rng.choice([0, 150e-12, 300e-12])))
    rig = Rig(ends, float(rng.choice([0.01, 0.05, 0.1])), float(rng.choice([0.01, 0.05])),
              float(rng.choice([0.005, 0.01, 0.02])), float(rng.choice([0.02, 0.05])))
    if rng.random() < 0.25:
        rig.after_gain_db, rig.after_gain_half_db = min(20.0, math.floor(loss_db)), 0.02
    bench, offset = draw_bench(rng, rig)
    unit = Unit(f"{i + 1:04d}", pad, rig, float(rng.choice([440.0, 997.0, 1000.0])), draw_parts(rng, pad), bench,
                offset_db=offset)
    unit.service, unit.label = ends, "same ends"
    if i % 3:
        source, load, cable = SERVICES[rng.integers(len(SERVICES))]
        tied = "balanced" if network in BALANCED else "unbalanced"
        unit.service, unit.label = Ends(float(source), tied, float(load), tied, cable), "other ends"
    return unit


def simulate(units):
    sim = Simulator()
    for unit in units:
        unit.ask(sim)
    losses = sim.run()
    for unit in units:
        unit.take_losses(losses)


def generous_limits(units):
    """For each unit half a decibel, or more where its parts and its bench could move the answer by that.

    The worst case of the parts in service and twice what the bench leaves unknown must fit in with
    something to spare, so that a sound unit recorded well has no reason but an unseen part to miss it.
    Slopes are taken by moving one part or end at a time in the simulator by its own tolerance.
    """
    sim, asked = Simulator(), []
    for unit in units:
        pad, bench = unit.pad, unit.rig.ends
        moved = [[p.at(p.value * (1 + t)) if p is q else q for q in pad.parts]
                 for p, t in zip(pad.parts, pad.tolerances, strict=True)]
        asked.append((
            [sim.ask(m, pad.unbalanced, bench, unit.freq_hz) for m in moved],
            [sim.ask(m, pad.unbalanced, unit.service, unit.freq_hz) for m in moved],
            [sim.ask(pad.parts, pad.unbalanced, ends, unit.freq_hz) for ends in (
                bench.but(source_ohms=bench.source_ohms * (1 + unit.rig.source_frac)),
                bench.but(load_ohms=bench.load_ohms * (1 + unit.rig.load_frac)),
                bench.but(cable_farads=bench.cable_farads * (1 + unit.rig.load_frac)))]))
    losses = sim.run()
    halves = []
    for unit, (on_bench, in_service, by_rig) in zip(units, asked, strict=True):
        b = [losses[i] - unit.truth["bench_stated_db"] for i in on_bench]
        s = [losses[i] - unit.truth["service_stated_db"] for i in in_service]
        r = [losses[i] - unit.truth["bench_stated_db"] for i in by_rig]
        r += [unit.rig.linearity_db, unit.rig.gain_drift_db, unit.rig.after_gain_half_db]
        beta = sum(x * y for x, y in zip(b, s)) / sum(x * x for x in b)
        left = sum((y - beta * x) ** 2 for x, y in zip(b, s)) + beta ** 2 * sum(x * x for x in r)
        need = sum(map(abs, s)) + 2 * 2 / math.sqrt(3) * math.sqrt(left) + 0.1
        halves.append(max(0.5, math.ceil(need * 4) / 4))
    return halves


FAULTS600 = ("", "R2 short", "R1 open", "R3 +20 %", "R2 +20 %")


def faults600(count, rng):
    """The 600 ohm 10 dB T and pi for 600/600, measured between about 100 ohm and 10 kohm; sound and faulty."""
    draws = max(1, (count or 120) // (2 * len(FAULTS600)))
    units = []
    for network in ("T", "pi"):
        for fault in FAULTS600:
            for _ in range(draws):
                pad = standard_pad(network, matched(network, 10.0, 600.0), 0.01)
                rig = Rig(Ends(100.0, "unbalanced", 10000.0, "unbalanced"), float(rng.choice([0.0, 0.01, 0.05])),
                          float(rng.choice([0.0, 0.01, 0.05])), 0.01, float(rng.choice([0.0, 0.02, 0.05])))
                bench, offset = draw_bench(rng, rig)
                units.append(Unit(f"{len(units) + 1:04d}", pad, rig, 997.0, with_fault(draw_parts(rng, pad), fault),
                                  bench, Ends(600.0, "unbalanced", 600.0, "unbalanced"),
                                  {"loss_plus_minus_db": 0.5}, network, fault, "not-pass" if fault else "",
                                  offset_db=offset))
    simulate(units)
    for unit in units:
        simple_takes(rng, unit, rng.uniform(-14, -6), rng.uniform(40, 75), 48000, 1.8)
    return units


def with_fault(parts, fault):
    if not fault:
        return parts
    ref, what = fault.split(" ", 1)
    change = {"short": lambda v: 0.0, "open": lambda v: OPEN, "+20 %": lambda v: v * 1.2}[what]
    return [p.at(change(p.value)) if p.ref == ref else p for p in parts]


COVERAGE = ("repeatability", "source", "gain drift", "linearity")


def coverage(count, rng):
    """Where one source of doubt makes all of U: noise, or one rectangle drawn evenly.

    Service is the bench as stated, so that nothing is left to carry over.
    """
    ends = Ends(150.0, "balanced", 10000.0, "balanced")
    units = []
    for i in range(count or 600):
        # Two of three are about repeatability, whose coverage is bounded from both sides.
        label = COVERAGE[1 + i // 3 % 3] if i % 3 == 0 else COVERAGE[0]
        pad = standard_pad("U", [220.0, 220.0, 110.0], 0.01)
        rig = Rig(ends)
        rig.source_frac = 0.1 if label == "source" else 0.0
        rig.gain_drift_db = 0.05 if label == "gain drift" else 0.0
        rig.linearity_db = 0.03 if label == "linearity" else 0.0
        bench, offset = draw_bench(rng, rig)
        units.append(Unit(f"{i + 1:04d}", pad, rig, 997.3, draw_parts(rng, pad), bench, ends, label=label,
                          offset_db=offset))
    simulate(units)
    for unit in units:
        snr_db = rng.uniform(15, 35) if unit.label == COVERAGE[0] else 65.0
        simple_takes(rng, unit, -10.0, snr_db, 8000, 2.5, 0.2, 0.15, INTEGER16)
    return units
