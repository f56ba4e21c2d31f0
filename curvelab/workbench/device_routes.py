"""Addresses of the library: every question is a GET, read-only, for any program; a review is the one change."""

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass
from typing import Any, Literal

from starlette.responses import Response, StreamingResponse

from curvelab.calculators.trip import trip_currents, trip_times
from curvelab.calculators.trip_json import trip_json
from curvelab.devices.device import Device
from curvelab.errors import InputError
from curvelab.library.key import split_key
from curvelab.workbench.bench import Bench
from curvelab.workbench.route import Content, Method, Route
from curvelab.workbench.settings import settings_by_key, settings_of
from curvelab.workbench.shapes import Schema

MOST_COMPARED = 8
MOST_ASKED = 200
"""Currents or times in one question; each is answered with its reasons."""


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
    chosen = device_at(bench, asked.key, asked.set)
    return trip_json(chosen, trip_times(chosen, _few(asked.current)))


def trip_current(bench: Bench, asked: ForTimes) -> dict[str, Any]:
    """Currents for times, with 95 % intervals and status."""
    chosen = device_at(bench, asked.key, asked.set)
    return trip_json(chosen, trip_currents(chosen, _few(asked.time)))


def findings(bench: Bench, asked: AtSettings) -> dict[str, Any]:
    """The device against its standard, the firm's rules and what is plausible."""
    from curvelab.workbench.devices import found_of  # noqa: PLC0415

    return found_of(device_at(bench, asked.key, asked.set), bench.library_path)


def points_csv(bench: Bench, asked: OfDevice) -> Content:
    """Its points as a table."""
    from curvelab.workbench.exports import table_of  # noqa: PLC0415

    key, revision = split_key(asked.key)
    with bench.reading() as library:
        return table_of(library.record(key, revision))


def export(bench: Bench, asked: OfDevice) -> Response:
    """All that is stored of it, in the library's open form, line by line: sheets are in it and may be large."""
    key, _ = split_key(asked.key)
    with bench.reading() as library:
        library.history(key)
    headers = {"content-disposition": f'attachment; filename="{key}.jsonl"'}
    return StreamingResponse(_exported(bench, key), media_type="application/jsonl", headers=headers)


def _exported(bench: Bench, key: str) -> Iterator[bytes]:
    with bench.reading() as library:
        for line in library.exported([key]):
            yield line.encode()


def overlay(bench: Bench, asked: OfReading) -> Content:
    """A reading of a revision, drawn over its sheet."""
    from curvelab.workbench.pictures import overlay_of  # noqa: PLC0415

    with bench.reading() as library:
        evidence = library.evidence(*split_key(asked.key))
    return overlay_of(evidence, asked.reading)


def report_pdf(bench: Bench, asked: AtSettings) -> Content:
    """The review document as PDF."""
    return _report(bench, asked, "pdf")


def report_html(bench: Bench, asked: AtSettings) -> Content:
    """The review document as HTML."""
    return _report(bench, asked, "html")


def _report(bench: Bench, asked: AtSettings, ending: str) -> Content:
    from curvelab.workbench.documents import report_of  # noqa: PLC0415

    with bench.reading() as library:
        return report_of(library, asked.key, settings_of(asked.set), ending)


def compare(bench: Bench, asked: Compared) -> dict[str, Any]:
    """Devices side by side: times, who is surely first, up to which current."""
    from curvelab.workbench.devices import compared  # noqa: PLC0415

    if not 2 <= len(asked.key) <= MOST_COMPARED:
        raise InputError(f"{len(asked.key)} devices cannot be compared", f"Two to {MOST_COMPARED}")
    given = settings_by_key(asked.key, asked.set)
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


def device_at(bench: Bench, key: str, settings: Iterable[str]) -> Device:
    """A stored device at settings."""
    with bench.reading() as library:
        return library.device(*split_key(key)).at(**settings_of(settings))


def _few(values: tuple[float, ...]) -> tuple[float, ...]:
    if len(values) > MOST_ASKED:
        raise InputError(f"{len(values)} values are asked at once", f"At most {MOST_ASKED}", "Ask several times")
    return values


_OBJECT: Schema = {"type": "object"}
DEVICE = "/api/devices/{key}"


def _route(method: Method, path: str, summary: str, does: Callable[..., Any], **more: Any) -> Route:
    return Route(method=method, path=path, summary=summary, does=does, **{"answer": _OBJECT, **more})


DEVICE_ROUTES = (
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
    _route("GET", f"{DEVICE}/report.pdf", "To review and sign", report_pdf, asked=AtSettings, media="application/pdf"),
    _route("GET", f"{DEVICE}/report.html", "To review and sign", report_html, asked=AtSettings, media="text/html"),
    _route("POST", f"{DEVICE}/review", "Decide about a revision", review, asked=OfDevice, body=Review),
)
