#!/usr/bin/env python3
"""Write folders of simulated units with any of the takes, and what is true of them.

    make_checks.py OUT --plan PLAN [--seed N] [--first I] [--count N]

PLAN is response, checks, noise, lies, ordinary or everything; README.md says what each holds. Unit I of
a plan is the same whatever else is made with it, so that a long plan can be made, checked and taken away
piece by piece. OUT gets a folder for each unit and truth.jsonl, a line for each.
"""
import argparse
import multiprocessing
import os
import zlib

for _name in ("OPENBLAS_NUM_THREADS", "OMP_NUM_THREADS"):
    os.environ.setdefault(_name, "1")

import numpy as np

import plan_noise
import plan_signal
import plan_sound
import plan_voids
from checkunit import write_check_unit

PLANS = {"response": plan_signal.response, "checks": plan_signal.checks, "noise": plan_noise.noise,
         "lies": plan_voids.lies, "ordinary": plan_sound.ordinary, "everything": plan_sound.everything}


def make(job):
    """One unit: drawn, simulated and written. Returns its line of truth."""
    out, plan, seed, i = job
    rng = np.random.Generator(np.random.PCG64([seed, zlib.crc32(plan.encode()), i]))
    unit = PLANS[plan](rng, i)
    write_check_unit(os.path.join(out, unit.serial), unit, int(rng.integers(1 << 31)))
    return unit.describe() + "\n"


def main():
    p = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    p.add_argument("out")
    p.add_argument("--plan", choices=PLANS, required=True)
    p.add_argument("--seed", type=int, default=1)
    p.add_argument("--first", type=int, default=0)
    p.add_argument("--count", type=int, default=1)
    args = p.parse_args()

    os.makedirs(args.out, exist_ok=True)
    jobs = [(args.out, args.plan, args.seed, args.first + k) for k in range(args.count)]
    with multiprocessing.Pool() as pool, open(os.path.join(args.out, "truth.jsonl"), "w") as f:
        f.writelines(pool.imap(make, jobs, chunksize=1))


if __name__ == "__main__":
    main()
