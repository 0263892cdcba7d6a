"""Tests of lodeterm.py. LODETERM_URL names a running instance; those of a busy server make one of their own.

    LODETERM_URL=http://127.0.0.1:3000 python3 -m unittest discover clients/python/tests
"""
import contextlib
import http.server
import json
import os
import sys
import tempfile
import threading
import unittest

import numpy

HERE = os.path.dirname(os.path.abspath(__file__))
sys.path.insert(0, os.path.join(HERE, ".."))
sys.path.insert(0, os.path.join(HERE, "..", "examples"))
import lodeterm  # noqa: E402
from lodeterm import BrokenAnswerError, Client, FieldTable, ProblemError  # noqa: E402

URL = os.environ["LODETERM_URL"]
LITHIUM = "Li-I.1~Li-I.2"


class Reading(unittest.TestCase):
    def setUp(self):
        self.table = Client(URL, edition=1)
        self.addCleanup(self.table.close)

    def test_one_thing_of_the_edition(self):
        self.assertEqual(self.table.level("Na-I.3")["term"]["symbol"], "2P*3/2")
        self.assertEqual(self.table.get("/levels/Na-I.3")["meta"]["query"]["edition"], "1")
        self.assertEqual(self.table.line("Na-I.3~Na-I.1")["id"], "Na-I.1~Na-I.3")
        self.assertEqual(self.table.g_factor("Na-I.3")["coupled_exact"], "4/3")

    def test_paging_gives_every_row_once(self):
        paged = [level["id"] for level in self.table.levels(species="Na-I", limit=7)]
        whole = [level["id"] for level in self.table.get("/levels", species="Na-I", limit=1000)["data"]]
        self.assertEqual(paged, whole)
        self.assertGreater(len(paged), 7)
        self.assertEqual(len(set(paged)), len(paged))
        self.assertEqual([one["number"] for one in self.table.editions()][-1], 1)
        self.assertIn("Na-I", [one["id"] for one in self.table.species()])
        self.assertIn("Na-I.1~Na-I.3", [one["id"] for one in self.table.lines(species=["Na-I", "Li-I"], wavelength_min_nm=588, wavelength_max_nm=590)])

    def test_pinned_to_the_newest(self):
        with Client(URL).pinned() as table:
            self.assertEqual(table.edition, 1)
        self.assertEqual(Client(URL).pinned(1).edition, 1)

    def test_components_and_sublevels(self):
        components = self.table.components("Na-I.1~Na-I.2", 1.5, model="linear")
        self.assertEqual(components["field_tesla"], 1.5)
        self.assertEqual(len(components["components"]), 4)
        self.assertEqual(self.table.components("Na-I.1~Na-I.2", "15kG", model="linear"), components)
        self.assertEqual([row["m"] for row in self.table.sublevels("Na-I.3", "1T")], [-1.5, -0.5, 0.5, 1.5])

    def test_a_refusal_tells_everything(self):
        with self.assertRaises(ProblemError) as caught:
            self.table.components("Na-I.1~Na-I.2", "3furlong", theta_deg=900, modle="linear")
        problem = caught.exception
        self.assertEqual(problem.status, 400)
        self.assertEqual(sorted(fault["parameter"] for fault in problem.errors), ["field", "modle", "theta_deg"])
        for name in ("field", "modle", "theta_deg"):
            self.assertIn("\n  {}: ".format(name), str(problem))
        self.assertRegex(problem.request_id, "^[0-9a-f-]{36}$")

    def test_the_paths_that_read_an_edition_are_those_of_the_document(self):
        document = self.table.get("/openapi.json")
        reading = set()
        for path, methods in document["paths"].items():
            for operation in methods.values():
                if isinstance(operation, dict) and any(one.get("name") == "edition" for one in operation.get("parameters", [])):
                    reading.add(path.split("/")[1])
        self.assertEqual(lodeterm._READS_AN_EDITION, reading)


class Predicting(unittest.TestCase):
    def setUp(self):
        self.table = Client(URL, edition=1)
        self.addCleanup(self.table.close)

    def test_arrays_are_the_numbers_of_the_json(self):
        fields = [0.1, 1.5, 5.0]
        blocks = self.table.predict([LITHIUM], [LITHIUM], fields, derivatives=True, model="intermediate", theta_deg=90)
        body = {"lines": [{"transition": LITHIUM}], "multiplets": [{"transition": LITHIUM}], "field": {"values": fields, "unit": "T"}, "derivatives": True, "model": "intermediate", "theta_deg": 90}
        plain = self.table.compute("/predictions", body)["data"]
        self.assertEqual(len(blocks), 2)
        for block, row in zip(blocks, plain):
            for name in ("values", "derivatives", "strengths", "intensities", "q", "m_lower", "j_upper"):
                self.assertEqual(getattr(block, name).tolist(), row[name])
            self.assertEqual((block.transition, block.model, block.strength_normalisation), (LITHIUM, "intermediate", row["strength_normalisation"]))
            self.assertEqual(block.values.shape, (3, len(block.q)))
        # every q of a whole multiplet is a third at any field; a handful of roundings
        for q in (-1, 0, 1):
            numpy.testing.assert_allclose(blocks[1].strengths[:, blocks[1].q == q].sum(axis=1), 1 / 3, atol=1e-13)

    def test_fields_in_other_forms_and_levels_given_inline(self):
        lower = {"energy_invcm": 0, "s": 0, "l": 0, "j": 0, "parity": "even"}
        upper = {"energy_invcm": 18000, "s": 0, "l": 1, "j": 1, "parity": "odd"}
        grid = {"start": 0, "stop": 10, "count": 3, "unit": "kG"}
        [one] = self.table.predict([{"lower": lower, "upper": upper}], field=grid, model="linear")
        [other] = self.table.predict([{"lower": lower, "upper": upper}], field=numpy.array([0, 0.5, 1.0]), model="linear")
        numpy.testing.assert_array_equal(one.values, other.values)
        # a normal triplet: one Lorentz unit a tesla, within the rounding of 18000 cm^-1
        numpy.testing.assert_allclose(one.values[2] - 18000, [-0.46686447719, 0, 0.46686447719], atol=1e-11)

    def test_a_stream_that_is_cut_is_told(self):
        self.assertEqual(list(lodeterm._ndjson([b'{"a": 1}\n', b'{"meta": {}, "complete": true}\n'])), [{"a": 1}])
        with self.assertRaises(BrokenAnswerError):
            list(lodeterm._ndjson([b'{"a": 1}\n']))

    def test_a_refusal_of_a_stream(self):
        with self.assertRaises(ProblemError) as caught:
            self.table.predict(["Na-I.1~Na-I.3"], field=[1], quantiti="shift_invcm")
        self.assertIn("/quantiti", [fault["pointer"] for fault in caught.exception.errors])

    def test_profiles_and_fits(self):
        profile = self.table.profiles(lines=[{"transition": "Na-I.1~Na-I.3"}], field="1T", temperature_k=500)
        self.assertIn("stokes_i", json.dumps(profile))
        measured = [{"position": one["wavenumber_invcm"], "position_unc": 0.001, "m_lower": one["m_lower"], "m_upper": one["m_upper"]}
                    for one in self.table.components("Na-I.1~Na-I.3", 0.75, model="linear")["components"]]
        fit = self.table.fit_field(lines=[{"transition": "Na-I.1~Na-I.3"}], unit="cm-1", measurements=measured, model="linear")
        # positions near 17000 cm^-1 are rounded to 4e-12 cm^-1, and a tesla moves them by 0.9 cm^-1
        self.assertAlmostEqual(fit["field_tesla"], 0.75, delta=1e-10)


class Tables(unittest.TestCase):
    @classmethod
    def setUpClass(cls):
        cls.client = Client(URL, edition=1)
        cls.addClassCleanup(cls.client.close)
        cls.made = cls.client.field_table(LITHIUM, 0, 5, max_error_invcm=1e-7)

    def test_between_nodes_it_is_as_close_as_it_says(self):
        fields = numpy.random.default_rng(1).uniform(0, 5, 200)
        [block] = self.client.predict((), [LITHIUM], fields, model="intermediate", derivatives=True)
        rounding = 16 * numpy.finfo(float).eps * 15000
        self.assertLessEqual(self.made.max_error_invcm, 1e-7)
        self.assertTrue(self.made.proved)
        self.assertLessEqual(numpy.abs(self.made.positions(fields) - block.values).max(), self.made.max_error_invcm + rounding)
        self.assertLessEqual(numpy.abs(self.made.strengths(fields) - block.strengths).max(), self.made.max_strength_error + 1e-12)
        # between nodes a cubic's slope errs by more than its value, by some 10 over the distance of nodes (more than 1e-3 T here)
        self.assertLessEqual(numpy.abs(self.made.slopes(fields) - block.derivatives).max(), 10 * self.made.max_error_invcm / numpy.diff(self.made.nodes_tesla).min())
        numpy.testing.assert_array_equal(self.made.q, block.q)

    def test_shapes_and_choices(self):
        count = len(self.made.q)
        self.assertEqual(self.made.positions(1.0).shape, (count,))
        self.assertEqual(self.made.positions([[1.0, 2.0]]).shape, (1, 2, count))
        numpy.testing.assert_array_equal(self.made.positions([1.0], [2, 5])[0], self.made.positions(1.0)[[2, 5]])
        # a node is itself, the first and the last too
        numpy.testing.assert_array_equal(self.made.positions(self.made.nodes_tesla)[[0, -1]], self.made.positions([0.0, 5.0]))
        for outside in (-0.1, 5.1, float("nan")):
            with self.assertRaises(ValueError):
                self.made.positions(outside)

    def test_a_zero_without_a_sign(self):
        # strengths of this multiplet have slopes of exactly zero, which JSON can carry in one way only
        self.assertEqual(len(self.client.field_table("Ti-I.6~Ti-I.15", 0.5, 2, max_strength_error=1e-5).checksum_sha256), 64)

    def test_kept_as_a_file_and_verified(self):
        with tempfile.TemporaryDirectory() as folder:
            file = os.path.join(folder, "lithium.json")
            self.made.save(file)
            again = FieldTable.load(file)
            self.assertEqual((again.edition, again.checksum_sha256), (1, self.made.checksum_sha256))
            numpy.testing.assert_array_equal(again.positions(1.234), self.made.positions(1.234))
            with open(file, encoding="utf-8") as kept:
                damaged = json.load(kept)
            damaged["data"]["positions_invcm"][3][1] += 1e-9
            with open(file, "w", encoding="utf-8") as kept:
                json.dump(damaged, kept)
            with self.assertRaises(BrokenAnswerError):
                FieldTable.load(file)


class Example(unittest.TestCase):
    def test_finds_the_field_both_ways(self):
        import fit_field

        table = Client(URL).pinned()
        self.addCleanup(table.close)
        seen, measured = fit_field.invent(table)
        field, unc, result = fit_field.fit(fit_field.by_api(table, seen), measured)
        tables = [table.field_table(line, *fit_field.RANGE_TESLA, max_error_invcm=1e-6) for line in fit_field.LINES]
        offline, offline_unc, _ = fit_field.fit(fit_field.by_tables(tables, fit_field.component_indices(tables, table, seen)), measured)
        self.assertTrue(result.success)
        for found, sigma in ((field, unc), (offline, offline_unc)):
            self.assertLess(abs(found - fit_field.TRUE_TESLA), 2 * sigma)
            self.assertLess(sigma, 0.005)
        # the tables err by 1e-6 cm^-1 where a tesla moves components by about 0.5 cm^-1; the solver stops at 1e-8 of the field
        self.assertAlmostEqual(field, offline, delta=1e-5)
        # chi-squared of 10 degrees of freedom: 2 to 26 holds but for one seed in a hundred
        self.assertTrue(2 < 2 * result.cost < 26)
        self.assertEqual(fit_field.main(URL), 0)


class Busy(http.server.BaseHTTPRequestHandler):
    protocol_version = "HTTP/1.1"

    def answer(self):
        length = int(self.headers.get("Content-Length", 0))
        self.rfile.read(length)
        turns, asked = self.server.turns, self.server.asked
        asked.append((self.command, self.path, dict(self.headers)))
        turn = turns[min(len(asked), len(turns)) - 1]
        if turn is None:
            self.close_connection = True
            self.connection.close()
            return
        status, fields, body = turn
        content = json.dumps(body).encode()
        self.send_response(status)
        self.send_header("Content-Type", "application/json" if status < 400 else "application/problem+json")
        self.send_header("Content-Length", str(len(content)))
        for name, value in fields.items():
            self.send_header(name, value)
        self.end_headers()
        self.wfile.write(content)

    do_GET = do_POST = answer

    def log_message(self, *_):
        pass


OK = (200, {}, {"data": "ok"})
LATER = (429, {"Retry-After": "0"}, {"title": "Busy", "status": 429, "detail": "Later.", "code": "rate_limited"})
AWAY = (503, {"Retry-After": "0"}, {"title": "Away", "status": 503, "detail": "Later.", "code": "not_ready"})


@contextlib.contextmanager
def answering(*turns):
    """A server that answers in turn; None breaks the connection. Yields a client and what was asked."""
    server = http.server.ThreadingHTTPServer(("127.0.0.1", 0), Busy)
    server.turns, server.asked, server.daemon_threads, server.block_on_close = turns, [], True, False
    server.handle_error = lambda *_: None
    thread = threading.Thread(target=server.serve_forever, kwargs={"poll_interval": 0.01})
    thread.start()
    client = Client("http://127.0.0.1:{}".format(server.server_port), key="ldt_test", attempts=4)
    try:
        yield client, server.asked
    finally:
        client.close()
        server.shutdown()
        thread.join()
        server.server_close()


class Waiting(unittest.TestCase):
    def test_as_long_as_it_is_asked(self):
        with answering(LATER, AWAY, OK) as (client, asked):
            self.assertEqual(client.get("/species")["data"], "ok")
            self.assertEqual(len(asked), 3)
            self.assertEqual(asked[0][2]["Authorization"], "Bearer ldt_test")

    def test_broken_connections_of_reads_and_computations(self):
        with answering(None, OK) as (client, asked):
            self.assertEqual(client.get("/species")["data"], "ok")
            self.assertEqual(client.compute("/field-fits", {})["data"], "ok")
        with answering(None, None, OK) as (client, asked):
            self.assertEqual(client.compute("/field-fits", {})["data"], "ok")
            self.assertEqual(len(asked), 3)

    def test_a_write_is_asked_once_without_a_key(self):
        with answering(None, OK) as (client, asked):
            with self.assertRaises((OSError, lodeterm.http.client.HTTPException)):
                client.post("/keys", {})
            self.assertEqual(len(asked), 1)
        with answering(None, OK) as (client, asked):
            client.post("/keys", {}, idempotency_key="once")
            self.assertEqual([one[2].get("Idempotency-Key") for one in asked], ["once", "once"])
        with answering(AWAY, OK) as (client, asked):
            with self.assertRaises(ProblemError):
                client.post("/keys", {})

    def test_gives_up(self):
        with answering(LATER) as (client, asked):
            with self.assertRaises(ProblemError) as caught:
                client.get("/species")
            self.assertEqual((caught.exception.code, len(asked)), ("rate_limited", 4))
        with answering((429, {"Retry-After": "3600"}, {"code": "rate_limited"})) as (client, asked):
            with self.assertRaises(ProblemError):
                client.get("/species")
            self.assertEqual(len(asked), 1)

    def test_dates_and_seconds(self):
        self.assertEqual(lodeterm._retry_after("7"), 7)
        self.assertEqual(lodeterm._retry_after("Thu, 01 Jan 2015 00:00:00 GMT"), 0)
        self.assertIsNone(lodeterm._retry_after(None))

    def test_a_page_of_another_edition_is_refused(self):
        page = lambda edition, cursor: (200, {}, {"data": [edition], "meta": {"edition": edition}, "page": {"next_cursor": cursor}})  # noqa: E731
        with answering(page(1, "more"), page(2, None)) as (client, _):
            client.edition = 1
            with self.assertRaises(BrokenAnswerError):
                list(client.each("/levels"))


if __name__ == "__main__":
    unittest.main()
