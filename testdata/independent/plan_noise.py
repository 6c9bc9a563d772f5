"""Plan noise: rig-noise and pad-noise of pads whose thermal noise the simulator tells."""
import math

import numpy as np

import curves
from checkunit import TEMP_K, Bench, CheckUnit, EXACT_LEVELS, take_of
from circuit import Ends
from curves import Case, band_volts2, dbu
from drawing import e24, matched, standard_pad
from record import Line, Recording
from testsignal import plain
from unit import draw_parts

RIG_OVER_DB = (10.0, 10.0, 0.0, 3.0, 20.0, 10.0)
LONG_SEC = 60.0


def noise_pad(rng, high):
    """A pad, and its network; high ones have 1 to 5 kilohm at the output."""
    network = str(rng.choice(["U", "H", "O", "L", "T", "pi"]))
    if high:
        r0 = rng.uniform(1000.0, 5000.0)
        return standard_pad(network, [e24(v) for v in matched(network, rng.uniform(15, 35), r0)], 0.01)
    return standard_pad(network, [e24(v) for v in matched(network, rng.uniform(8, 30), float(rng.choice([150.0, 200.0, 600.0])))], 0.01)


def noise(rng, i):
    """Rig at, or 3, 10 or 20 dB over the unit's own noise; load a real resistor or none; excess noise in some."""
    over_db = RIG_OVER_DB[i % len(RIG_OVER_DB)]
    high = i % 5 == 4
    pad = noise_pad(rng, high)
    wired = "unbalanced" if pad.unbalanced else "balanced"
    bench = Bench(Ends(100.0, wired, float(rng.choice([10000.0, 20000.0])), wired, 200e-12), load_frac=0.0,
                  cal=dict(EXACT_LEVELS))
    bench.cal.update(pad_plug_ohms=float(rng.choice([100.0, 150.0])), noise_plug_ohms=float(rng.choice([0.0, 0.0, 150.0])))
    bench.cal["noise_gain_drift_db"] = 0.05 if over_db >= 20 else 0.02
    nil = bool(rng.random() < 0.5)
    bench.cal["uncertainty_db"] = 0.0 if nil else float(rng.choice([0.1, 0.3]))
    real_load = bool(rng.random() < 0.5)
    amperes = current(rng, bench)
    unit = CheckUnit(f"{i + 1:04d}", pad, bench, draw_parts(rng, pad))
    seconds = LONG_SEC if rng.random() < 0.7 else float(rng.uniform(10, 30))

    un, ends = pad.unbalanced, bench.ends
    built_plug = bench.cal["pad_plug_ohms"]
    unit.simulate(
        built=Case(unit.built, un, ends, "port", plug_ohms=built_plug),
        stated=Case(pad.parts, un, ends, "port", plug_ohms=built_plug),
        plug=Case([], un, ends, "port", straight=True, plug_ohms=bench.cal["noise_plug_ohms"] or 1e-6))
    unit.note_curves()
    built, stated, plugged = (unit.curve[k] for k in ("built", "stated", "plug"))
    hz = built.z.hz
    excess_db = float(rng.choice([0.0, 0.0, 0.0, 0.0, 6.0])) if over_db < 20 else 0.0
    own = built.passive * TEMP_K * 10 ** (excess_db / 10)
    expected = band_volts2(hz, stated.passive * TEMP_K)
    true = band_volts2(hz, own)
    amp = band_volts2(hz, built.passive * TEMP_K) / 19980.0 * 10 ** (over_db / 10)      # V²/Hz, white
    rest = lambda port: (port.load * TEMP_K if real_load else 0.0) + amperes ** 2 * port.current
    with_pad = amp + own + rest(built)
    with_plug = amp + plugged.passive * TEMP_K + rest(plugged)

    bench.noise_full_scale_dbu = -32.0 + rng.normal() * bench.cal["uncertainty_db"] / 2
    drift = rng.uniform(-1, 1) * bench.cal["noise_gain_drift_db"]
    hum = [(50.02 * k, level) for k, level in ((1, -88.0), (2, -95.0), (3, -90.0), (5, -97.0))] if rng.random() < 0.5 else []
    unit.takes["rig-noise"] = noise_take(bench, hz, with_plug, seconds, hum)
    unit.takes["pad-noise"] = noise_take(bench, hz, with_pad, seconds, hum, drift)
    # A short sound pair goes with them.
    gain = unit.gain(-9.0)
    for role in ("before", "after"):
        unit.takes[role] = take_of(rng, unit, unit.curve[role], gain, plain(1000.0, -6.0, 1.6), -105.0, 16000)
    unit.label = f"{over_db:g} dB over"
    unit.limits["noise_over_thermal_db"] = 0.5 if over_db >= 20 else 3.0
    error_db = 10 * math.log10(true / expected)
    # What nobody states: whether the load is a real resistor, and the noise current where left out.
    share = band_volts2(hz, built.load) / band_volts2(hz, built.passive)
    if "noise_current_pA" not in bench.cal:
        share += (2e-12) ** 2 * band_volts2(hz, built.current) / band_volts2(hz, built.passive * TEMP_K)
    rig_dbu = dbu(band_volts2(hz, np.broadcast_to(with_plug, hz.shape)))  # the plug's own noise in it
    small = nil and share < 0.05 and seconds == LONG_SEC and rig_dbu - dbu(expected) <= 10.5
    if small:
        unit.expect = "fail" if excess_db > 3 else "pass"
    elif excess_db > 3:
        unit.expect = "not-pass"
    unit.truth.update(noise_db=error_db, expected_dbu=dbu(expected), noise_dbu=dbu(true), rig_over_db=over_db, seconds=seconds,
                      nil_calibration=nil, unknown_share=share, small_u=small, real_load=real_load, current_pa=amperes * 1e12,
                      out_ohms=float(np.abs(stated_out(pad, bench))), excess_db=excess_db, hum=bool(hum),
                      rig_dbu=rig_dbu)
    return unit


def current(rng, bench):
    """The rig's noise current, A per root hertz: none, 1 pA and stated, or left out and anywhere up to 2 pA."""
    kind = rng.integers(3)
    if kind == 0:
        return 0.0
    if kind == 1:
        bench.cal["noise_current_pA"] = 1.0
        return 1e-12
    del bench.cal["noise_current_pA"]
    return rng.uniform(0, 2e-12)


def stated_out(pad, bench):
    """The output impedance of the drawing at 1 kHz, its input plugged, with nothing at its output."""
    ends = bench.ends.but(load_ohms=1e12, cable_farads=0.0)
    [port] = curves.sweep([Case(pad.parts, pad.unbalanced, ends, "port", plug_ohms=bench.cal["pad_plug_ohms"])])
    return complex(port.z.at(1000.0))


def noise_take(bench, hz, density, seconds, hum=(), gain_db=0.0, rate_hz=44100):
    """A take of noise. density is V²/Hz at the rig's input; a sine of full scale has 0.6·10^(dBu/10) V²."""
    full = 0.6 * 10 ** (bench.noise_full_scale_dbu / 10) * 2 * 10 ** (-gain_db / 10)
    x, y = np.log(hz), np.broadcast_to(density, hz.shape) / full
    line = Line(density=lambda f: np.interp(np.log(np.maximum(f, 1e-3)), x, y), noise_dbfs=-math.inf, hum=list(hum))
    return Recording(seconds, [line], rate_hz)
