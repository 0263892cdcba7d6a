"""Fits a magnetic field to the measured positions of three lines, by the API inside SciPy's least squares.

    python3 fit_field.py http://127.0.0.1:3000

The measurements are INVENTED: they are computed from a known field, and a noise of known size is added (seeded, so that they
are the same each time). That shows whether the fit finds the field again, within its uncertainty.

The lines are the lithium resonance doublet at 670.8 nm and the sodium D lines. At 1.3 T lithium is far beyond the linear law, so
the intermediate model is used. Each line has a zero of its own, since a spectrometer's scale is seldom known as well as a splitting.
The fit is done twice: asking the API at every step, and from field tables, which are asked for once and then need no network.
"""
from __future__ import annotations

import os
import sys
import time

import numpy
from scipy.optimize import least_squares

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from lodeterm import Client  # noqa: E402

LINES = ["Li-I.1~Li-I.2", "Na-I.1~Na-I.2", "Na-I.1~Na-I.3"]
TRUE_TESLA = 1.3
NOISE_INVCM = 0.004  # one standard deviation of a measured position, cm^-1
SEED = 20
STRONG = 0.05  # components weaker than this were not measured
RANGE_TESLA = (0.01, 5.0)


def predict(table: Client, field_tesla: float):
    """Positions (cm^-1) and slopes (cm^-1 per T) of the components of each line, asked from the API."""
    blocks = table.predict(lines=LINES, field=[field_tesla], model="intermediate", derivatives=True)
    return [block.values[0] for block in blocks], [block.derivatives[0] for block in blocks]


def invent(table: Client):
    """Which components of each line were measured, and where (cm^-1): INVENTED from the known field, noise added."""
    noise = numpy.random.default_rng(SEED)
    blocks = table.predict(lines=LINES, field=[TRUE_TESLA], model="intermediate")
    seen = [block.strengths[0] > STRONG for block in blocks]
    offsets = [0.3, -0.2, 0.1]  # the zero of each line is wrong by this, cm^-1
    return seen, [block.values[0][mask] + offset + noise.normal(0, NOISE_INVCM, mask.sum()) for block, mask, offset in zip(blocks, seen, offsets)]


def fit(model, measured, start_tesla: float = 1.0):
    """Field and its standard deviation, in T, and the result of SciPy. ``model(field)`` gives positions and slopes of the measured components."""
    starts = [m - p for m, p in zip(measured, model(start_tesla)[0])]
    first = numpy.array([start_tesla, *(start.mean() for start in starts)])

    def residuals(x):
        positions, _ = model(x[0])
        return numpy.concatenate([(p + zero - m) / NOISE_INVCM for p, zero, m in zip(positions, x[1:], measured)])

    def jacobian(x):
        _, slopes = model(x[0])
        by_zero = numpy.zeros((sum(map(len, measured)), len(measured)))
        row = 0
        for line, m in enumerate(measured):
            by_zero[row:row + len(m), line] = 1
            row += len(m)
        return numpy.column_stack([numpy.concatenate(slopes), by_zero]) / NOISE_INVCM

    result = least_squares(residuals, first, jac=jacobian, bounds=([RANGE_TESLA[0], *[-numpy.inf] * len(measured)], [RANGE_TESLA[1], *[numpy.inf] * len(measured)]))
    covariance = numpy.linalg.inv(result.jac.T @ result.jac)
    return result.x[0], float(numpy.sqrt(covariance[0, 0])), result


def by_api(table: Client, seen):
    """The model that asks the API at each field; the last answer is kept, since SciPy asks for values and slopes in turn."""
    last = {}

    def model(field_tesla):
        if field_tesla not in last:
            last.clear()
            positions, slopes = predict(table, field_tesla)
            last[field_tesla] = [p[mask] for p, mask in zip(positions, seen)], [s[mask] for s, mask in zip(slopes, seen)]
        return last[field_tesla]

    return model


def component_indices(tables, table: Client, seen):
    """Where the measured components stand in the field tables, which are of whole multiplets: by q, m and J."""
    blocks = table.predict(lines=LINES, field=[TRUE_TESLA], model="intermediate", strengths=False)
    names = lambda one: list(zip(one.q, one.m_lower, one.j_lower, one.j_upper))  # noqa: E731
    return [[names(whole).index(name) for name, there in zip(names(block), mask) if there] for whole, block, mask in zip(tables, blocks, seen)]


def by_tables(tables, indices):
    """The same model from field tables: no network."""
    return lambda field: ([t.positions(field, i) for t, i in zip(tables, indices)], [t.slopes(field, i) for t, i in zip(tables, indices)])


def main(base_url: str) -> int:
    with Client(base_url).pinned() as table:
        return show(table)


def show(table: Client) -> int:
    seen, measured = invent(table)
    print("{} positions of {} lines (invented: {} T, noise {} cm^-1), edition {}".format(sum(map(len, measured)), len(LINES), TRUE_TESLA, NOISE_INVCM, table.edition))
    found = []

    began = time.perf_counter()
    field, unc, result = fit(by_api(table, seen), measured)
    found.append((field, unc))
    print("by the API:      B = {:.5f} T, +- {:.5f} T (k = 2), chi^2 {:.1f}, {} steps, {:.2f} s".format(field, 2 * unc, 2 * result.cost, result.nfev, time.perf_counter() - began))

    tables = [table.field_table(line, *RANGE_TESLA, max_error_invcm=1e-6) for line in LINES]
    model = by_tables(tables, component_indices(tables, table, seen))
    began = time.perf_counter()
    field, unc, result = fit(model, measured)
    found.append((field, unc))
    print("by field tables: B = {:.5f} T, +- {:.5f} T (k = 2), chi^2 {:.1f}, {} steps, {:.3f} s without the network".format(field, 2 * unc, 2 * result.cost, result.nfev, time.perf_counter() - began))

    fields = numpy.linspace(*RANGE_TESLA, 100_000)
    began = time.perf_counter()
    for one in tables:
        one.positions(fields)
    print("100000 fields of all components of the three multiplets: {:.2f} s".format(time.perf_counter() - began))
    return 0 if all(abs(field - TRUE_TESLA) <= 2 * unc for field, unc in found) else 1


if __name__ == "__main__":
    sys.exit(main(sys.argv[1] if len(sys.argv) > 1 else "http://127.0.0.1:3000"))
