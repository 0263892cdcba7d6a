"""Client of a Lodeterm instance: levels, lines and their magnetic (Zeeman) splitting, in one file.

Needs Python 3.9 and its standard library. NumPy is optional: with it predictions come as arrays, and field tables can be
evaluated without the network. pyarrow is optional too and only for ``arrow=True`` (that branch is NOT tested: Debian has no
pyarrow; NDJSON, the default, is the tested fast path).

    from lodeterm import Client

    table = Client("http://127.0.0.1:3000", edition=1)          # edition=1: the same numbers for ever
    line = table.components("Na-I.1~Na-I.2", "1.5T")             # a dict, as in the API
    blocks = table.predict(lines=["Na-I.1~Na-I.2"], field=[0.1, 0.2, 0.3])
    blocks[0].values                                             # wavenumbers in cm^-1, [field][component]

Units stand in the names, as in the API: ``energy_invcm`` is in cm^-1, ``field_tesla`` in T. A bare number for a field is in
tesla; text carries its unit ("15kG", "150mT"). ``None`` means not known, never 0.

A refusal is raised as ProblemError, which lists everything that is wrong. A busy server (429, 503) and a broken connection are
waited for, as long as asking again can do no harm.
"""
from __future__ import annotations

import email.utils
import hashlib
import http.client
import json
import random
import ssl
import threading
import time
import urllib.parse
from typing import Any, Dict, Iterable, Iterator, List, NamedTuple, Optional, Sequence, Tuple, Union

try:
    import numpy
except ImportError:  # everything but predictions as arrays and field tables works without
    numpy = None  # type: ignore[assignment]

__version__ = "1.0.0"
__all__ = ["Client", "ProblemError", "BrokenAnswerError", "Block", "FieldTable"]

Json = Dict[str, Any]
Field = Union[str, float, Sequence[float], Json]

# first parts of the paths whose operations read an edition
_READS_AN_EDITION = {"species", "levels", "transitions", "terms", "sublevels", "wavelengths", "sources", "find",
                     "predictions", "profiles", "field-fits", "field-tables"}
JSON, NDJSON, ARROW = "application/json", "application/x-ndjson", "application/vnd.apache.arrow.stream"


class ProblemError(Exception):
    """An answer that refuses (RFC 9457). ``errors`` lists every fault with its ``parameter`` or JSON ``pointer``; so does the message."""

    def __init__(self, status: int, problem: Json, request_id: Optional[str] = None) -> None:
        self.status = status
        self.code: str = problem.get("code", "")
        self.title: str = problem.get("title", "no problem document")
        self.detail: str = problem.get("detail", "")
        self.errors: List[Json] = problem.get("errors", [])
        self.request_id: Optional[str] = problem.get("instance", request_id)
        self.problem = problem
        listed = ["  {}: {} ({})".format(e.get("parameter", e.get("pointer", "")), e["detail"], e["code"]) for e in self.errors]
        super().__init__("\n".join(["{} {}: {}".format(status, self.title, self.detail), *listed]))


class BrokenAnswerError(Exception):
    """What came is not what the API promises: a stream that was cut, a page of another edition, a checksum that differs."""


class Reply(NamedTuple):
    """An answer as it came; ``headers`` have lower-case names."""

    status: int
    headers: Dict[str, str]
    body: bytes

    def json(self) -> Any:
        return json.loads(self.body)


def _retry_after(field: Optional[str]) -> Optional[float]:
    """Seconds that a Retry-After field asks for: a number or a date (RFC 9110, 10.2.3)."""
    if field is None:
        return None
    if field.strip().isdigit():
        return float(field)
    try:
        return max(0.0, email.utils.parsedate_to_datetime(field).timestamp() - time.time())
    except (TypeError, ValueError):
        return None


def _problem(reply: Reply) -> ProblemError:
    request_id = reply.headers.get("x-request-id")
    if reply.headers.get("content-type", "").startswith("application/problem+json"):
        try:
            return ProblemError(reply.status, reply.json(), request_id)
        except ValueError:
            pass  # cut by a proxy: its text is told instead
    return ProblemError(reply.status, {"detail": reply.body[:300].decode("utf-8", "replace")}, request_id)


def _segment(name: str) -> str:
    return urllib.parse.quote(name, safe="~")


def _text(value: Any) -> str:
    """A parameter as text: numbers with all their digits, truth as the API writes it."""
    if isinstance(value, bool):
        return "true" if value else "false"
    return repr(float(value)) if isinstance(value, float) else str(value)


def _plain(value: Any) -> Any:
    """Arrays and NumPy numbers as what JSON knows."""
    if hasattr(value, "tolist"):
        return value.tolist()
    raise TypeError("{!r} has no place in JSON".format(value))


def _field(field: Field) -> Any:
    return field if isinstance(field, (dict, str)) else {"values": [float(one) for one in numpy.atleast_1d(field)], "unit": "T"}


def _ndjson(stream: Iterable[bytes]) -> Iterator[Json]:
    """Rows of a stream, whose last line says that it is whole."""
    for line in stream:
        row = json.loads(line)
        if row.get("complete") is True:
            return
        yield row
    raise BrokenAnswerError("The stream ended before the line that says it is complete.")


def _need_numpy() -> Any:
    if numpy is None:
        raise ImportError("This needs NumPy (Debian: python3-numpy).")
    return numpy


class Client:
    """A table at an address.

    base_url -- where the instance answers, with or without /api/v1
    key      -- API key ("ldt_..."); without one you are a stranger, who may read where the instance lets them
    edition  -- number of the edition that every request reads; None follows what is published. See also ``pinned``.
    timeout  -- seconds to wait for the network, per read
    attempts -- requests in all where the server is busy or the connection breaks
    longest_wait -- seconds; a server that asks to wait longer ends the attempt

    May be used from several threads: each keeps a connection of its own.
    """

    def __init__(self, base_url: str, key: Optional[str] = None, edition: Optional[int] = None, *,
                 timeout: float = 60.0, attempts: int = 6, longest_wait: float = 70.0) -> None:
        parts = urllib.parse.urlsplit(base_url if "//" in base_url else "http://" + base_url)
        if parts.scheme not in ("http", "https") or not parts.hostname:
            raise ValueError("base_url must be an address such as https://lodeterm.example, not {!r}".format(base_url))
        path = parts.path.rstrip("/")
        self._scheme, self._host, self._port = parts.scheme, parts.hostname, parts.port
        self._prefix = path if path.endswith("/api/v1") else path + "/api/v1"
        self.base_url = base_url
        self.key, self.edition = key, edition
        self.timeout, self.attempts, self.longest_wait = timeout, attempts, longest_wait
        self._kept = threading.local()

    def pinned(self, edition: Optional[int] = None) -> "Client":
        """The same table held at an edition: the one given, or the newest published by now."""
        if edition is None:
            newest = self.get("/editions", limit=1)["data"]
            self.close()
            if not newest:
                raise BrokenAnswerError("Nothing is published yet: there is no edition to hold to.")
            edition = newest[0]["number"]
        return Client(self.base_url, self.key, edition, timeout=self.timeout, attempts=self.attempts, longest_wait=self.longest_wait)

    def __enter__(self) -> "Client":
        return self

    def __exit__(self, *_: Any) -> None:
        self.close()

    # ---- asking

    def _connect(self) -> http.client.HTTPConnection:
        if self._scheme == "https":
            return http.client.HTTPSConnection(self._host, self._port, timeout=self.timeout, context=ssl.create_default_context())
        return http.client.HTTPConnection(self._host, self._port, timeout=self.timeout)

    def close(self) -> None:
        """Closes the connection that this thread keeps."""
        kept = getattr(self._kept, "connection", None)
        if kept is not None:
            kept.close()
            self._kept.connection = None

    def _send(self, method: str, target: str, body: Optional[bytes], headers: Dict[str, str], keep: bool) -> Tuple[http.client.HTTPConnection, http.client.HTTPResponse]:
        connection = getattr(self._kept, "connection", None) if keep else None
        if connection is None:
            connection = self._connect()
            if keep:
                self._kept.connection = connection
        try:
            connection.request(method, target, body, headers)
            return connection, connection.getresponse()
        except BaseException:
            connection.close()
            if keep:
                self._kept.connection = None
            raise

    def _open(self, method: str, path: str, params: Json, body: Any, headers: Dict[str, str], safe: bool, keep: bool) -> Tuple[http.client.HTTPConnection, http.client.HTTPResponse]:
        """Sends until an answer comes that is not "later". 429 did nothing, so it is always sent again; the rest only where that is safe."""
        query = urllib.parse.urlencode([(name, _text(one)) for name, value in params.items() if value is not None
                                        for one in (value if isinstance(value, (list, tuple)) else [value])])
        target = self._prefix + path + ("?" + query if query else "")
        sent = {"Accept": JSON, "User-Agent": "lodeterm-python/" + __version__, **headers}
        if self.key is not None:
            sent["Authorization"] = "Bearer " + self.key
        payload = None
        if body is not None:
            payload = json.dumps(body, allow_nan=False, default=_plain).encode()
            sent["Content-Type"] = JSON
        # a connection that lay idle may be closed at the other end, which cannot be told from a request that was lost
        keep = keep and safe
        for attempt in range(1, self.attempts + 1):
            usual = 0.25 * 2 ** (attempt - 1) * random.uniform(0.75, 1.25)
            last = attempt == self.attempts
            try:
                connection, response = self._send(method, target, payload, sent, keep)
            except (OSError, http.client.HTTPException):
                if last or not safe:
                    raise
                time.sleep(min(usual, self.longest_wait) if attempt > 1 or not keep else 0)
                continue
            later = response.status == 429 or (safe and response.status in (502, 503, 504))
            wait = _retry_after(response.getheader("Retry-After"))
            wait = usual if wait is None else wait
            if not later or last or wait > self.longest_wait:
                return connection, response
            response.read()
            if not keep:
                connection.close()
            time.sleep(wait)
        raise AssertionError("unreachable")

    def request(self, method: str, path: str, params: Optional[Json] = None, body: Any = None, *,
                headers: Optional[Dict[str, str]] = None, safe: Optional[bool] = None) -> Reply:
        """Any operation; ``path`` begins below /api/v1. ``safe``: asking twice does no harm (default: for GET, or with an Idempotency-Key).

        Raises ProblemError for a refusal; a 304 is returned. A request whose answer breaks off is asked again where that is safe.
        """
        given = dict(headers or {})
        again = safe if safe is not None else method in ("GET", "HEAD") or "Idempotency-Key" in given
        for last in (False, True):
            connection, response = self._open(method, path, params or {}, body, given, again, True)
            try:
                content = response.read()
            except (OSError, http.client.HTTPException):
                self.close()
                if last or not again:
                    raise
                continue
            if not again:
                connection.close()
            reply = Reply(response.status, {name.lower(): value for name, value in response.getheaders()}, content)
            if reply.status < 400:
                return reply
            raise _problem(reply)
        raise AssertionError("unreachable")

    def _pin(self, path: str, params: Json, body: Any = None) -> Json:
        """The parameters with the edition this client is held to, where the operation reads one and none is named."""
        reads = path.split("/")[1] in _READS_AN_EDITION and not path.endswith("/history")
        named = params.get("edition") is not None or (isinstance(body, dict) and body.get("edition") is not None)
        return {**params, "edition": self.edition} if reads and not named and self.edition is not None else params

    def get(self, path: str, **params: Any) -> Json:
        """A read as JSON: ``get("/levels/Na-I.3")``."""
        return self.request("GET", path, self._pin(path, params)).json()

    def compute(self, path: str, body: Any, **params: Any) -> Json:
        """A POST that computes and changes nothing."""
        return self.request("POST", path, self._pin(path, params, body), body, safe=True).json()

    def post(self, path: str, body: Any, *, idempotency_key: Optional[str] = None, **params: Any) -> Any:
        """A POST that writes; asked again after a broken connection only with an ``idempotency_key``. Returns the JSON, or None."""
        reply = self.request("POST", path, params, body, headers={} if idempotency_key is None else {"Idempotency-Key": idempotency_key})
        return reply.json() if reply.body else None

    def pages(self, path: str, **params: Any) -> Iterator[Json]:
        """Page after page of a list. All are of one edition, also where another is published meanwhile."""
        edition, cursor = None, None
        while True:
            page = self.get(path, **{**params, "cursor": cursor})
            if edition is not None and page["meta"]["edition"] != edition and self._pin(path, {"edition": edition}):
                raise BrokenAnswerError("A page of edition {} came after pages of edition {}.".format(page["meta"]["edition"], edition))
            edition = page["meta"]["edition"]
            yield page
            cursor = page["page"]["next_cursor"]
            if cursor is None:
                return

    def each(self, path: str, **params: Any) -> Iterator[Json]:
        """Row after row of a list."""
        for page in self.pages(path, **params):
            yield from page["data"]

    # ---- the table

    def editions(self) -> Iterator[Json]:
        """Published editions, the newest first: ``number``, ``label``, ``checksum`` and counts."""
        return self.each("/editions")

    def species(self) -> Iterator[Json]:
        """Species: ``id``, ``ionisation_energy_invcm`` (cm^-1), isotopes, sources."""
        return self.each("/species")

    def level(self, level: str) -> Json:
        """A level such as "Na-I.3": term, ``energy_invcm`` (cm^-1), ``g_j``, each with its source."""
        return self.get("/levels/" + _segment(level))["data"]

    def levels(self, **filters: Any) -> Iterator[Json]:
        """Levels by filter: ``species="Na-I"``, ``term="2P*"``, ``energy_max_invcm=3e4``, ``q="sodium 3p"``, ``sort="-energy"``."""
        return self.each("/levels", **filters)

    def g_factor(self, level: str, **options: Any) -> Json:
        """g_J of a level: adopted, coupled, measured, and how it follows (dimensionless). ``g_s`` sets that of the electron spin."""
        return self.get("/levels/" + _segment(level) + "/g-factor", **options)["data"]

    def line(self, transition: str, **options: Any) -> Json:
        """A line such as "Na-I.1~Na-I.3" (either order): every rule, wavelengths in nm, wavenumber in cm^-1, frequency in THz, g_eff."""
        return self.get("/transitions/" + _segment(transition), **options)["data"]

    def lines(self, **filters: Any) -> Iterator[Json]:
        """Lines by filter: ``species``, ``wavelength_min_nm``, ``wavelength_max_nm``, ``medium="air"``, ``rules="rigorous"``."""
        return self.each("/transitions", **filters)

    def components(self, transition: str, field: Union[str, float], **options: Any) -> Json:
        """Components of a line at a field (T, or text with its unit): ``components`` with shifts in cm^-1, GHz, pm, and ``validity``."""
        return self.get("/transitions/" + _segment(transition) + "/components", field=field, **options)["data"]

    def sublevels(self, level: str, field: Union[str, float], **options: Any) -> List[Json]:
        """Sublevels of a level at a field (T, or text with its unit): one row per m, ``shift_invcm`` (cm^-1), ``shift_ghz`` (GHz)."""
        return list(self.each("/levels/" + _segment(level) + "/sublevels", field=field, **options))

    # ---- predictions

    def predict(self, lines: Iterable[Any] = (), multiplets: Iterable[Any] = (), field: Field = (), *, arrow: bool = False, **options: Any) -> List["Block"]:
        """Positions over a grid of fields, a block for each line and then each multiplet. Needs NumPy.

        lines      -- "Na-I.1~Na-I.3", or {"lower": level, "upper": level} with levels given inline
        multiplets -- any one line of each, or {"lower": [levels], "upper": [levels]}
        field      -- T: numbers, or {"values": [...], "unit": "kG"}, or {"start", "stop", "count", "unit"}
        options    -- members of the body of POST /predictions: model, g_values, g_s, theta_deg, derivatives, quantity
        arrow      -- carry them as Arrow through pyarrow. NOT tested; NDJSON is, and is fast.
        """
        return list(self.stream(lines, multiplets, field, arrow=arrow, **options))

    def stream(self, lines: Iterable[Any] = (), multiplets: Iterable[Any] = (), field: Field = (), *, arrow: bool = False, **options: Any) -> Iterator["Block"]:
        """As ``predict``, block by block as they come, so that memory stays flat."""
        _need_numpy()
        body: Json = {"field": _field(field), **options}
        for name, given in (("lines", lines), ("multiplets", multiplets)):
            listed = [{"transition": one} if isinstance(one, str) else one for one in given]
            if listed:
                body[name] = listed
        accept = ARROW if arrow else NDJSON
        # a connection of its own: the kept one must stay free while blocks are read
        connection, response = self._open("POST", "/predictions", self._pin("/predictions", {}, body), body, {"Accept": accept}, True, False)
        try:
            if response.status >= 400:
                raise _problem(Reply(response.status, {k.lower(): v for k, v in response.getheaders()}, response.read()))
            if arrow:
                yield from _arrow_blocks(response)
            else:
                for row in _ndjson(response):
                    yield Block.of(row)
        finally:
            connection.close()

    def profiles(self, **body: Any) -> Json:
        """Stokes I, Q, V of lines over a grid: the body of POST /profiles. Returns ``data``."""
        return self.compute("/profiles", body)["data"]

    def fit_field(self, **body: Any) -> Json:
        """The field from measured positions: the body of POST /field-fits. Returns ``data``; an undetermined fit says why in it."""
        return self.compute("/field-fits", body)["data"]

    def field_table(self, multiplet: Any, start: float, stop: float, unit: str = "T", **options: Any) -> "FieldTable":
        """A multiplet over an interval of fields, to evaluate without the network. Needs NumPy.

        multiplet -- any one line of it, such as "Li-I.1~Li-I.2", or {"lower": [levels], "upper": [levels]}
        start, stop -- the interval, in ``unit`` (T, mT, G, kG)
        options   -- members of the body of POST /field-tables: max_error_invcm (cm^-1), max_strength_error, g_values, g_s, model
        """
        named = {"transition": multiplet} if isinstance(multiplet, str) else multiplet
        body = {"multiplet": named, "field": {"start": start, "stop": stop, "unit": unit}, **options}
        return FieldTable(self.compute("/field-tables", body))


class Block:
    """A line's or a multiplet's components over a grid of fields, as arrays.

    values      -- [field][component], in the quantity asked (default: wavenumber in cm^-1); NaN where there is none
    derivatives -- the same per tesla, or None where not asked
    strengths   -- [component] in the linear model, [field][component] in the intermediate one, or None; intensities likewise
    q, m_lower, m_upper, j_lower, j_upper -- by component; J by continuity from zero field, NaN where it has no name
    transition, model, strength_normalisation, validity -- as in the API
    """

    def __init__(self, transition: Optional[str], model: str, names: Json, values: Any, derivatives: Any, strengths: Any, intensities: Any,
                 strength_normalisation: str, validity: Json) -> None:
        self.transition, self.model = transition, model
        self.q, self.m_lower, self.m_upper = names["q"], names["m_lower"], names["m_upper"]
        self.j_lower, self.j_upper = names["j_lower"], names["j_upper"]
        self.values, self.derivatives, self.strengths, self.intensities = values, derivatives, strengths, intensities
        self.strength_normalisation, self.validity = strength_normalisation, validity

    @staticmethod
    def of(row: Json) -> "Block":
        """From a block of the API as JSON."""
        numbers = {name: None if row[name] is None else numpy.array(row[name], dtype=float) for name in ("values", "derivatives", "strengths", "intensities")}
        names = {name: numpy.array(row[name], dtype=int if name == "q" else float) for name in _NAMES}
        return Block(row["transition"], row["model"], names, **numbers, strength_normalisation=row["strength_normalisation"], validity=row["validity"])


_NAMES = ("q", "m_lower", "m_upper", "j_lower", "j_upper")


def _arrow_blocks(stream: Any) -> Iterator[Block]:
    """Blocks of an Arrow stream, one record batch each. Through pyarrow, and NOT tested."""
    import pyarrow.ipc  # type: ignore[import-not-found]

    with pyarrow.ipc.open_stream(stream) as reader:
        while True:
            try:
                batch, told = reader.read_next_batch_with_custom_metadata()
            except StopIteration:
                return
            told = {key.decode(): value.decode() for key, value in dict(told).items()}
            columns = {name: batch.column(name) for name in batch.schema.names}
            names = {name: columns[name].to_numpy(zero_copy_only=False) for name in _NAMES}
            # lists are [component][field]
            lists = {}
            for wanted, name in (("values", "value"), ("derivatives", "derivative"), ("strengths", "strength"), ("intensities", "intensity")):
                column = columns.get(name)
                lists[wanted] = None if column is None or column.null_count == len(column) > 0 else column.flatten().to_numpy(zero_copy_only=False).reshape(len(column), -1).T
            yield Block(told.get("transition"), told["model"], names, **lists, strength_normalisation=told["strength_normalisation"], validity=json.loads(told["validity"]))


class FieldTable:
    """Positions and strengths of a multiplet over an interval of fields: cubic Hermite interpolation in NumPy, without the network.

    max_error_invcm    -- no interpolated position is farther from the model than this, in cm^-1 (proved where ``proved``)
    max_strength_error -- the same for strengths, all of which sum to 1; None without an LS amplitude
    start_tesla, stop_tesla -- the interval, in T; a field outside is a ValueError
    q, m_lower, m_upper, j_lower, j_upper -- by component, in the order of ``Block``
    edition, meta      -- what the table was made from

    Made by ``Client.field_table``; ``save`` and ``load`` keep it as a file. The checksum is verified whenever one is made.
    """

    def __init__(self, answer: Json) -> None:
        _need_numpy()
        data = answer["data"]
        self._answer = answer
        self.meta: Json = answer["meta"]
        self.edition: int = self.meta["edition"]
        self.transition: Optional[str] = data["transition"]
        self.model: str = data["model"]
        self.q = numpy.array(data["q"], dtype=int)
        self.m_lower, self.m_upper, self.j_lower, self.j_upper = (numpy.array(data[name], dtype=float) for name in _NAMES[1:])
        self.nodes_tesla = numpy.array(data["nodes_tesla"], dtype=float)
        self.max_error_invcm: float = data["max_error_invcm"]
        self.max_strength_error: Optional[float] = data["max_strength_error"]
        self.proved: bool = data["proved"]
        self.checksum_sha256: str = data["checksum_sha256"]
        self.start_tesla, self.stop_tesla = float(self.nodes_tesla[0]), float(self.nodes_tesla[-1])
        read = {name: None if data[name] is None else numpy.array(data[name], dtype=float) for name in _MATRICES}
        self._positions, self._position_slopes, self._strengths, self._strength_slopes = (read[name] for name in _MATRICES)
        self.verify()

    def verify(self) -> None:
        """Raises BrokenAnswerError where the numbers are not those of the checksum: SHA-256 over them as little-endian float64."""
        digest = hashlib.sha256()
        for numbers in (self.q, self.m_lower, self.m_upper, self.nodes_tesla, self._positions, self._position_slopes, self._strengths, self._strength_slopes):
            if numbers is not None:
                digest.update(numpy.ascontiguousarray(numbers, dtype="<f8").tobytes())
        if digest.hexdigest() != self.checksum_sha256:
            raise BrokenAnswerError("The field table has the checksum {} and says {}: it is damaged.".format(digest.hexdigest(), self.checksum_sha256))

    def save(self, path: Any) -> None:
        """Keeps the table as a JSON file."""
        with open(path, "w", encoding="utf-8") as file:
            json.dump(self._answer, file)

    @staticmethod
    def load(path: Any) -> "FieldTable":
        """A table that was saved; a damaged one raises BrokenAnswerError."""
        with open(path, encoding="utf-8") as file:
            return FieldTable(json.load(file))

    def _place(self, field_tesla: Any) -> Tuple[Any, Any, Any]:
        """Interval, its length and the place in it, for each field."""
        field = numpy.asarray(field_tesla, dtype=float)
        if not numpy.all((field >= self.start_tesla) & (field <= self.stop_tesla)):
            raise ValueError("a field is outside the table, which runs from {} to {} T".format(self.start_tesla, self.stop_tesla))
        i = numpy.clip(numpy.searchsorted(self.nodes_tesla, field, side="right") - 1, 0, len(self.nodes_tesla) - 2)
        h = self.nodes_tesla[i + 1] - self.nodes_tesla[i]
        return i, h[..., None], ((field - self.nodes_tesla[i]) / h)[..., None]

    def positions(self, field_tesla: Any, components: Any = slice(None)) -> Any:
        """Wavenumbers in cm^-1 at a field or an array of fields in T: [...field][component]. ``components`` picks some, by index or mask."""
        return _hermite(self._place(field_tesla), self._positions[:, components], self._position_slopes[:, components])

    def slopes(self, field_tesla: Any, components: Any = slice(None)) -> Any:
        """Derivatives of the interpolated positions, in cm^-1 per tesla."""
        i, h, t = self._place(field_tesla)
        v, s = self._positions[:, components], self._position_slopes[:, components]
        return 6 * t * (1 - t) * (v[i + 1] - v[i]) / h + (1 - t) * (1 - 3 * t) * s[i] + t * (3 * t - 2) * s[i + 1]

    def strengths(self, field_tesla: Any, components: Any = slice(None)) -> Any:
        """Strengths, all of which sum to 1 at each field (dimensionless); None without an LS amplitude."""
        if self._strengths is None or self._strength_slopes is None:
            return None
        return _hermite(self._place(field_tesla), self._strengths[:, components], self._strength_slopes[:, components])


_MATRICES = ("positions_invcm", "position_slopes_invcm_per_tesla", "strengths", "strength_slopes_per_tesla")


def _hermite(place: Tuple[Any, Any, Any], v: Any, s: Any) -> Any:
    """v_a + (v_b - v_a) t^2 (3 - 2t) + h t (1 - t) ((1 - t) s_a - t s_b), with t = (B - a)/h: the interpolation that the bound is proved for."""
    i, h, t = place
    return v[i] + (v[i + 1] - v[i]) * (t * t * (3 - 2 * t)) + h * t * (1 - t) * ((1 - t) * s[i] - t * s[i + 1])
