#!/usr/bin/env python3
"""Exact Wigner 3j symbols from SymPy (Debian package python3-sympy), an implementation independent of the one under test.

Writes ../data/exact-3j.json: every symbol with j1 up to 4 and j2 = 1 or 2 (the ones that component strengths use), and a random
sample of general ones. Each row is [2j1, 2j2, 2j3, 2m1, 2m2, 2m3, s] with s the signed square, sign(w) w^2, as a fraction "p/q".

Run: /usr/bin/python3 tests/reference/generate/exact_3j.py
"""
import json
import pathlib
import random

import sympy
from sympy import Rational
from sympy.physics.wigner import wigner_3j

SEED = 20240611
GENERAL = 400
LARGEST_TWO_J = 24


def signed_square(two_j1, two_j2, two_j3, two_m1, two_m2, two_m3):
    w = wigner_3j(*(Rational(x, 2) for x in (two_j1, two_j2, two_j3, two_m1, two_m2, two_m3)))
    square = sympy.expand(w**2)
    assert square.is_Rational, (two_j1, two_j2, two_j3, two_m1, two_m2, two_m3, square)
    if square == 0:
        return "0"
    return str(square if w > 0 else -square)


def row(*twos):
    return [*twos, signed_square(*twos)]


def strengths():
    for two_j1 in range(0, 9):
        for two_j2 in (2, 4):
            for two_j3 in range(abs(two_j1 - two_j2), two_j1 + two_j2 + 1, 2):
                for two_m1 in range(-two_j1, two_j1 + 1, 2):
                    for two_m2 in range(-two_j2, two_j2 + 1, 2):
                        two_m3 = -two_m1 - two_m2
                        if abs(two_m3) <= two_j3:
                            yield row(two_j1, two_j2, two_j3, two_m1, two_m2, two_m3)


def general(rng):
    made = 0
    while made < GENERAL:
        two_j1, two_j2 = rng.randint(0, LARGEST_TWO_J), rng.randint(0, LARGEST_TWO_J)
        two_j3 = rng.randrange(abs(two_j1 - two_j2), two_j1 + two_j2 + 1, 2)
        two_m1, two_m2 = rng.randrange(-two_j1, two_j1 + 1, 2), rng.randrange(-two_j2, two_j2 + 1, 2)
        two_m3 = -two_m1 - two_m2
        if abs(two_m3) > two_j3:
            continue
        yield row(two_j1, two_j2, two_j3, two_m1, two_m2, two_m3)
        made += 1


def main():
    out = pathlib.Path(__file__).resolve().parent.parent / "data" / "exact-3j.json"
    header = {
        "what": "exact squares of Wigner 3j symbols with the symbol's sign",
        "columns": ["twoJ1", "twoJ2", "twoJ3", "twoM1", "twoM2", "twoM3", "sign times square"],
        "method": f"sympy.physics.wigner.wigner_3j, SymPy {sympy.__version__}",
        "generator": "tests/reference/generate/exact_3j.py",
        "seed": SEED,
    }
    strength_rows = list(strengths())
    general_rows = list(general(random.Random(SEED)))
    lines = lambda rows: "[\n" + ",\n".join("  " + json.dumps(r) for r in rows) + "\n ]"
    out.write_text(
        '{\n "header": ' + json.dumps(header) + ',\n "strengths": ' + lines(strength_rows) + ',\n "general": ' + lines(general_rows) + "\n}\n"
    )
    print(len(strength_rows), "and", len(general_rows), "symbols")


if __name__ == "__main__":
    main()
