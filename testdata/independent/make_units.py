#!/usr/bin/env python3
"""Write folders of simulated units, and what is true of them.

    make_units.py OUT --plan PLAN [--seed N] [--count N]
    make_units.py OUT --plan long [--seconds 60,600] [--rate HZ] [--channels N]

PLAN is accuracy, service, faults600, coverage, lies, odd, flavours or long; README.md says what each
holds. OUT gets a folder for each unit (pad.toml, rig.toml, before.wav, after.wav) and truth.jsonl, a
line for each. Losses come from ngspice. The same arguments give the same bytes.
"""
import argparse
import multiprocessing
import os
import zlib

for _name in ("OPENBLAS_NUM_THREADS", "OMP_NUM_THREADS"):
    os.environ.setdefault(_name, "1")

import numpy as np

import plan_accuracy
import plan_odd
import plan_service
from unit import write_unit

PLANS = {"accuracy": plan_accuracy.build, "service": plan_service.service, "faults600": plan_service.faults600,
         "coverage": plan_service.coverage, "lies": plan_odd.lies, "odd": plan_odd.odd,
         "flavours": plan_odd.flavours, "long": plan_odd.long}


def main():
    p = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    p.add_argument("out")
    p.add_argument("--plan", choices=PLANS, required=True)
    p.add_argument("--seed", type=int, default=1)
    p.add_argument("--count", type=int, default=0, help="units; each plan has a default")
    p.add_argument("--seconds", default="60,600", help="lengths of the takes of plan long")
    p.add_argument("--rate", type=int, default=16000, help="rate of the takes of plan long")
    p.add_argument("--channels", type=int, default=1, help="channels of the takes of plan long")
    args = p.parse_args()

    rng = np.random.Generator(np.random.PCG64([args.seed, zlib.crc32(args.plan.encode())]))
    how = {}
    if args.plan == "long":
        how = {"seconds": [float(s) for s in args.seconds.split(",")], "rate_hz": args.rate, "channels": args.channels}
    units = PLANS[args.plan](args.count, rng, **how)
    seeds = rng.integers(1 << 31, size=len(units))
    jobs = [(os.path.join(args.out, u.serial), u, int(s)) for u, s in zip(units, seeds, strict=True)]
    os.makedirs(args.out, exist_ok=True)
    with multiprocessing.Pool() as pool:
        for _ in pool.imap_unordered(write_unit, jobs, chunksize=1):
            pass
    with open(os.path.join(args.out, "truth.jsonl"), "w") as f:
        f.writelines(u.describe() + "\n" for u in units)


if __name__ == "__main__":
    main()
