"""Addresses of the library: every question is a GET, read-only, for any program; a review is the one change."""

from collections.abc import Callable, Iterable
from dataclasses import dataclass, field
from typing import Any, Literal

from curvelab import __version__
from curvelab.devices.as_json import currents_json, times_json
from curvelab.devices.device import Device
from curvelab.errors import InputError
from curvelab.library.key import split_key
from curvelab.library.search import Page, Wanted
from curvelab.workbench.bench import Bench
from curvelab.workbench.route import Content, Method, Nothing, Route
from curvelab.workbench.shapes import Schema

MOST_COMPARED = 8
MOST_ASKED = 2_000


@dataclass(frozen=True, kw_only=True, slots=True)
class Search:
    """Which devices: words of key, maker, series, standard and document; what the nameplate says; which page."""

    text: str = ""
    kind: str | None = None
    characteristic: str | None = None
    standard: str | None = None
    state: str | None = None
    maker: str | None = None
    series: str | None = None
    rated_current: float | None = None
    rated_from: float | None = None
    rated_to: float | None = None
    sort: str = "device_key"
    page: int = field(default=1, metadata={"minimum": 1})
    count: int = field(default=50, metadata={"minimum": 1, "maximum": 500})


@dataclass(frozen=True, kw_only=True, slots=True)
class SearchBands:
    """Devices that surely hold ``holds_a`` for ``for_s``, and surely trip at ``trips_a`` within ``within_s``."""

    holds_a: float | None = None
    for_s: float | None = None
    trips_a: float | None = None
    within_s: float | None = None
    text: str = ""
    kind: str | None = None
    page: int = field(default=1, metadata={"minimum": 1})
    count: int = field(default=50, metadata={"minimum": 1, "maximum": 500})


@dataclass(frozen=True, kw_only=True, slots=True)
class OfDevice:
    """A device by its key, or ``KEY@3`` for its third revision."""

    key: str


@dataclass(frozen=True, kw_only=True, slots=True)
class AtSettings:
    """A device at settings, each as in ``ir=0.8`` or ``ii=off``."""

    key: str
    set: tuple[str, ...] = ()


@dataclass(frozen=True, kw_only=True, slots=True)
class AtCurrents:
    """Prospective currents in A."""

    key: str
    current: tuple[float, ...]
    set: tuple[str, ...] = ()


@dataclass(frozen=True, kw_only=True, slots=True)
class ForTimes:
    """Times in s."""

    key: str
    time: tuple[float, ...]
    set: tuple[str, ...] = ()


@dataclass(frozen=True, kw_only=True, slots=True)
class OfReading:
    """One of the readings that led to a revision, from 1."""

    key: str
    reading: int = 1


@dataclass(frozen=True, kw_only=True, slots=True)
class Compared:
    """Two to eight devices, the first upstream; settings as in ``KEY.ir=0.8``; currents in A, or those that tell."""

    key: tuple[str, ...]
    current: tuple[float, ...] = ()
    set: tuple[str, ...] = ()


@dataclass(frozen=True, kw_only=True, slots=True)
class Review:
    """What a person decides about a revision; without ``to`` the reason is a note."""

    name: str
    to: Literal["draft", "checked", "released", "withdrawn"] | None = None
    revision: int | None = None
    reason: str = ""


def version(bench: Bench, _: Nothing) -> dict[str, str]:
    """Which program and library answer."""
    return {"version": __version__, "library": bench.library_path.name}


def search(bench: Bench, asked: Search) -> dict[str, Any]:
    """Devices by words and nameplate."""
    wanted = Wanted(
        words=asked.text,
        kind=asked.kind,
        characteristic=asked.characteristic,
        standard=asked.standard,
        state=asked.state,
        maker=asked.maker,
        series=asked.series,
        rated_from_a=asked.rated_from if asked.rated_current is None else asked.rated_current,
        rated_to_a=asked.rated_to if asked.rated_current is None else asked.rated_current,
    )
    falling = asked.sort.startswith("-")
    sort = {"key": "device_key", "rated_current": "rated_current_a"}.get(name := asked.sort.removeprefix("-"), name)
    page = Page(sort=sort, falling=falling, first=(asked.page - 1) * asked.count, count=asked.count)
    from curvelab.workbench.devices import listed  # noqa: PLC0415

    if not bench.library_path.exists():
        return {"total": 0, "page": asked.page, "devices": []}
    with bench.reading() as library:
        found = library.find(wanted, page)
        return {"total": found.total, "page": asked.page, "devices": listed(library, found.rows)}


def search_bands(bench: Bench, asked: SearchBands) -> dict[str, Any]:
    """Devices by what their bands surely do."""
    from curvelab.library.bands import BandQuery  # noqa: PLC0415
    from curvelab.workbench.devices import listed  # noqa: PLC0415

    query = BandQuery(
        holds=_point(asked.holds_a, asked.for_s, "holds_a", "for_s"),
        trips=_point(asked.trips_a, asked.within_s, "trips_a", "within_s"),
    )
    page = Page(first=(asked.page - 1) * asked.count, count=asked.count)
    with bench.reading() as library:
        found = library.find_bands(query, Wanted(words=asked.text, kind=asked.kind), page)
        return {
            "total": found.surely,
            "at_most": found.at_most,
            "adjustable": found.adjustable,
            "page": asked.page,
            "devices": listed(library, found.rows),
        }


def _point(current_a: float | None, time_s: float | None, current: str, time: str) -> Any:
    from curvelab.library.bands import Point  # noqa: PLC0415

    if current_a is None and time_s is None:
        return None
    if current_a is None or time_s is None:
        raise InputError(f"'{current}' and '{time}' belong together", "Both, or neither")
    return Point(current_a=current_a, time_s=time_s)


def device(bench: Bench, asked: OfDevice) -> dict[str, Any]:
    """A device: nameplate, settings, curves, cautions, findings and limits."""
    from curvelab.workbench.devices import told  # noqa: PLC0415

    with bench.reading() as library:
        return told(library, *split_key(asked.key))


def history(bench: Bench, asked: OfDevice) -> list[dict[str, Any]]:
    """Its revisions and what happened to them, oldest first."""
    from curvelab.workbench.devices import happened  # noqa: PLC0415

    with bench.reading() as library:
        return happened(library, split_key(asked.key)[0])


def bands(bench: Bench, asked: AtSettings) -> dict[str, Any]:
    """The curves, gathered into bands; with settings given, as the device answers at them."""
    from curvelab.workbench.devices import drawn  # noqa: PLC0415

    with bench.reading() as library:
        return drawn(library.device(*split_key(asked.key)), settings_of(asked.set))


def trip_time(bench: Bench, asked: AtCurrents) -> dict[str, Any]:
    """Times at currents, with 95 % intervals and status."""
    return times_json(_at(bench, asked.key, asked.set), asked.current)


def trip_current(bench: Bench, asked: ForTimes) -> dict[str, Any]:
    """Currents for times, with 95 % intervals and status."""
    return currents_json(_at(bench, asked.key, asked.set), asked.time)


def findings(bench: Bench, asked: AtSettings) -> dict[str, Any]:
    """The device against its standard, the firm's rules and what is plausible."""
    from curvelab.workbench.devices import found_of  # noqa: PLC0415

    return found_of(_at(bench, asked.key, asked.set), bench.library_path)


def points_csv(bench: Bench, asked: OfDevice) -> Content:
    """Its points as a table."""
    from curvelab.workbench.exports import table_of  # noqa: PLC0415

    key, revision = split_key(asked.key)
    with bench.reading() as library:
        return table_of(library.record(key, revision))


def export(bench: Bench, asked: OfDevice) -> Content:
    """All that is stored of it, in the library's open form."""
    key, _ = split_key(asked.key)
    with bench.reading() as library:
        text = "".join(library.exported([key]))
    return Content(data=text.encode(), media="application/jsonl", name=f"{key}.jsonl")


def overlay(bench: Bench, asked: OfReading) -> Content:
    """A reading of a revision, drawn over its sheet."""
    from curvelab.workbench.pictures import overlay_of  # noqa: PLC0415

    with bench.reading() as library:
        evidence = library.evidence(*split_key(asked.key))
    return overlay_of(evidence, asked.reading)


def compare(bench: Bench, asked: Compared) -> dict[str, Any]:
    """Devices side by side: times, who is surely first, up to which current."""
    from curvelab.workbench.devices import compared  # noqa: PLC0415

    if not 2 <= len(asked.key) <= MOST_COMPARED:
        raise InputError(f"{len(asked.key)} devices cannot be compared", f"Two to {MOST_COMPARED}")
    given = _settings_by_key(asked.key, asked.set)
    with bench.reading() as library:
        chosen = [library.device(*split_key(key)).at(**given[key]) for key in asked.key]
    return compared(chosen, asked.current)


def review(bench: Bench, asked: OfDevice, decided: Review) -> dict[str, Any]:
    """Check, release or withdraw a revision, or note something about it."""
    key, revision = split_key(asked.key)
    with bench.writing() as library:
        done = library.review(
            key, decided.revision or revision, state=decided.to, name=decided.name, reason=decided.reason
        )
    return {"key": done.key, "revision": done.revision, "before": done.before, "state": done.state}


def _at(bench: Bench, key: str, settings: Iterable[str]) -> Device:
    with bench.reading() as library:
        return library.device(*split_key(key)).at(**settings_of(settings))


def settings_of(texts: Iterable[str]) -> dict[str, float | str]:
    """Settings as in ``ir=0.8`` or ``ii=off``.

    Raises
    ------
    InputError
        One is not of that form.
    """
    settings: dict[str, float | str] = {}
    for text in texts:
        name, _, value = text.partition("=")
        try:
            settings[name] = value if value == "off" else float(value)
        except ValueError:
            raise InputError(f"'{text}' is no setting", "NAME=VALUE, such as ir=0.8 or ii=off") from None
    return settings


def _settings_by_key(keys: Iterable[str], texts: Iterable[str]) -> dict[str, dict[str, float | str]]:
    given: dict[str, dict[str, float | str]] = {key: {} for key in keys}
    for text in texts:
        name, _, value = text.partition("=")
        key, dot, setting = name.rpartition(".")
        if not dot or key not in given:
            raise InputError(f"'{text}' names no device of this comparison", "KEY.NAME=VALUE")
        given[key] |= settings_of([f"{setting}={value}"])
    return given


_OBJECT: Schema = {"type": "object"}
_FOUND: Schema = {"type": "object", "required": ["total", "page", "devices"]}
DEVICE = "/api/devices/{key}"


def _route(method: Method, path: str, summary: str, does: Callable[..., Any], **more: Any) -> Route:
    return Route(method=method, path=path, summary=summary, does=does, **{"answer": _OBJECT, **more})


DEVICE_ROUTES = (
    _route("GET", "/api/version", "Which program and library answer", version),
    _route("GET", "/api/devices", "Devices by words and nameplate", search, asked=Search, answer=_FOUND),
    _route("GET", "/api/find-bands", "Devices by what they surely do", search_bands, asked=SearchBands, answer=_FOUND),
    _route("GET", "/api/compare", "Devices side by side", compare, asked=Compared),
    _route("GET", DEVICE, "A device", device, asked=OfDevice),
    _route("GET", f"{DEVICE}/history", "What happened to it", history, asked=OfDevice, answer={"type": "array"}),
    _route("GET", f"{DEVICE}/bands", "Its bands", bands, asked=AtSettings),
    _route("GET", f"{DEVICE}/trip-time", "Times at currents", trip_time, asked=AtCurrents),
    _route("GET", f"{DEVICE}/trip-current", "Currents for times", trip_current, asked=ForTimes),
    _route("GET", f"{DEVICE}/findings", "It against its standard", findings, asked=AtSettings),
    _route("GET", f"{DEVICE}/points.csv", "Its points as a table", points_csv, asked=OfDevice, media="text/csv"),
    _route("GET", f"{DEVICE}/export.jsonl", "All that is stored", export, asked=OfDevice, media="application/jsonl"),
    _route("GET", f"{DEVICE}/overlay.png", "A reading over its sheet", overlay, asked=OfReading, media="image/png"),
    _route("POST", f"{DEVICE}/review", "Decide about a revision", review, asked=OfDevice, body=Review),
)
