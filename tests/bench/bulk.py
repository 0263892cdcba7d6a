"""The sums of the bulk bench in NumPy: python3 bulk.py < questions.json > answers.json

Questions: {"linear": {"centres": [...], "slopes": [...], "start", "stop", "count"},
            "terms": [{"name", "blocks": [{"diagonal", "slopes", "couplings"}], "start", "stop", "count"}], "rounds"}
where the fields of "terms" are x = mu_B B in cm^-1. Answers: medians of wall and processor seconds, linear and for each pair of terms.
One thread, as one request is computed by one thread.
"""
import os

for name in ("OPENBLAS_NUM_THREADS", "OMP_NUM_THREADS", "MKL_NUM_THREADS"):
    os.environ[name] = "1"

import json
import sys
import time

import numpy as np


def timed(rounds, work):
    walls, cpus = [], []
    work()
    for _ in range(rounds):
        wall, cpu = time.perf_counter(), time.process_time()
        work()
        walls.append(time.perf_counter() - wall)
        cpus.append(time.process_time() - cpu)
    return {"wall": float(np.median(walls)), "cpu": float(np.median(cpus))}


def linear(question):
    """All wavenumbers [field][component] of the linear law."""
    field = np.linspace(question["start"], question["stop"], question["count"])
    centres, slopes = np.array(question["centres"]), np.array(question["slopes"])
    return lambda: centres + np.multiply.outer(field, slopes)


def eigenpairs(question):
    """Batched eigh with vectors of every m block over all fields, the matrices made in the same breath."""
    x = np.linspace(question["start"], question["stop"], question["count"])
    blocks = [tuple(np.array(block[name], dtype=float) for name in ("diagonal", "slopes", "couplings")) for block in question["blocks"]]

    def work():
        for diagonal, slopes, couplings in blocks:
            fixed = np.diag(diagonal)
            moved = np.diag(slopes) + np.diag(couplings, 1) + np.diag(couplings, -1)
            np.linalg.eigh(fixed + x[:, None, None] * moved)

    return work


def main():
    question = json.load(sys.stdin)
    rounds = question["rounds"]
    answer = {"linear": timed(rounds, linear(question["linear"])), "terms": {one["name"]: timed(rounds, eigenpairs(one)) for one in question["terms"]}}
    json.dump({**answer, "numpy": np.__version__}, sys.stdout)


if __name__ == "__main__":
    main()
