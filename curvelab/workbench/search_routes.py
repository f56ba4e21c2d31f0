"""Addresses that find devices: by words and nameplate, and by what their bands surely do."""

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Any

from curvelab import __version__
from curvelab.errors import InputError
from curvelab.library.search import MOST_COUNTED, Page, Wanted
from curvelab.workbench.bench import Bench
from curvelab.workbench.route import Nothing, Route
from curvelab.workbench.shapes import Schema

if TYPE_CHECKING:
    from curvelab.library.bands import Point


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
        return {"total": 0, "more": False, "page": asked.page, "devices": []}
    with bench.reading() as library:
        found = library.find(wanted, page)
        more = found.total == MOST_COUNTED
        return {"total": found.total, "more": more, "page": asked.page, "devices": listed(library, found.rows)}


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


def _point(current_a: float | None, time_s: float | None, current: str, time: str) -> "Point | None":
    from curvelab.library.bands import Point  # noqa: PLC0415

    if current_a is None and time_s is None:
        return None
    if current_a is None or time_s is None:
        raise InputError(f"'{current}' and '{time}' belong together", "Both, or neither")
    return Point(current_a=current_a, time_s=time_s)


_FOUND: Schema = {"type": "object", "required": ["total", "page", "devices"]}

SEARCH_ROUTES = (
    Route(
        method="GET",
        path="/api/version",
        summary="Which program and library answer",
        does=version,
        answer={"type": "object"},
    ),
    Route(
        method="GET",
        path="/api/devices",
        summary="Devices by words and nameplate",
        does=search,
        asked=Search,
        answer=_FOUND,
    ),
    Route(
        method="GET",
        path="/api/find-bands",
        summary="Devices by what they surely do",
        does=search_bands,
        asked=SearchBands,
        answer=_FOUND,
    ),
)
