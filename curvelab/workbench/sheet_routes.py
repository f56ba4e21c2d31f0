"""Addresses of a draft's sheet: its picture in tiles, cut about a place, and what places on it mean."""

from dataclasses import dataclass
from typing import Any

from curvelab.errors import InputError
from curvelab.workbench.bench import Bench
from curvelab.workbench.draft_routes import DRAFT
from curvelab.workbench.route import Content, Route


@dataclass(frozen=True, kw_only=True, slots=True)
class Tile:
    """One tile of a page."""

    id: str
    level: int
    column: int
    row: int
    page: int | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class Cut:
    """The surroundings of a place, ``radius`` in the sheet's unit, ``zoom`` pixels a pixel."""

    id: str
    x: float
    y: float
    radius: float = 40.0
    zoom: float = 2.0
    page: int | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class AtPlace:
    """A place on the sheet."""

    id: str
    x: float
    y: float


@dataclass(frozen=True, kw_only=True, slots=True)
class AtValues:
    """A current in the axis's base and a value in its base unit."""

    id: str
    current: float
    time: float


def tile(bench: Bench, asked: Tile) -> Content:
    """One tile of the sheet's picture."""
    pyramid = bench.drafts.draft(asked.id).pyramid(asked.page)
    data = pyramid.tile(asked.level, asked.column, asked.row)
    return Content(data=data, media="image/png", lasting=asked.page is not None)


def cut(bench: Bench, asked: Cut) -> Content:
    """The surroundings of a place, cut from the sheet."""
    if not (0 < asked.radius <= 10_000 and 0 < asked.zoom <= 64):
        raise InputError(f"A cut of radius {asked.radius:g} and zoom {asked.zoom:g} cannot be made", "Both positive")
    pyramid = bench.drafts.draft(asked.id).pyramid(asked.page)
    picture = pyramid.around((asked.x, asked.y), asked.radius, asked.zoom)
    return Content(data=picture, media="image/png", lasting=asked.page is not None)


def locate(bench: Bench, asked: AtPlace) -> dict[str, Any]:
    """What a place on the sheet means, and the curve nearest to it there."""
    from curvelab.workbench.places import located  # noqa: PLC0415

    return located(bench.drafts.draft(asked.id), (asked.x, asked.y))


def place(bench: Bench, asked: AtValues) -> dict[str, Any]:
    """Where on the sheet a current and a value are."""
    from curvelab.workbench.places import placed  # noqa: PLC0415

    return placed(bench.drafts.draft(asked.id), asked.current, asked.time)


SHEET_ROUTES = (
    Route(
        method="GET",
        path=f"{DRAFT}/tiles/{{level}}/{{column}}/{{row}}.png",
        summary="A tile of the sheet",
        does=tile,
        asked=Tile,
        media="image/png",
        tag="drafts",
    ),
    Route(
        method="GET",
        path=f"{DRAFT}/cut.png",
        summary="The surroundings of a place",
        does=cut,
        asked=Cut,
        media="image/png",
        tag="drafts",
    ),
    Route(
        method="GET",
        path=f"{DRAFT}/locate",
        summary="What a place means",
        does=locate,
        asked=AtPlace,
        answer={"type": "object"},
        tag="drafts",
    ),
    Route(
        method="GET",
        path=f"{DRAFT}/place",
        summary="Where values are",
        does=place,
        asked=AtValues,
        answer={"type": "object"},
        tag="drafts",
    ),
)
