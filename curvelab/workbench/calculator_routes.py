"""Addresses of the calculators: what they ask is what their own records ask, so that nothing is said twice."""

from collections.abc import Callable
from dataclasses import dataclass, field, fields, make_dataclass
from typing import Any, TypeVar

from curvelab.calculators import as_json
from curvelab.calculators.breaking import ShortCircuit, breaking
from curvelab.calculators.circumstances import Circumstances
from curvelab.calculators.conductors import conductor_of
from curvelab.calculators.disconnection import disconnection
from curvelab.calculators.discrimination import discrimination
from curvelab.calculators.overload import Load, overload
from curvelab.calculators.transformer import transformer_between
from curvelab.calculators.withstand import Faults, withstand
from curvelab.library.key import split_key
from curvelab.workbench.bench import Bench
from curvelab.workbench.device_routes import DEVICE, device_at
from curvelab.workbench.route import Route
from curvelab.workbench.settings import settings_by_key
from curvelab.workbench.shapes import hints_of, is_needed

Record = TypeVar("Record")


@dataclass(frozen=True, kw_only=True, slots=True)
class Cable:
    """A conductor; with ``area_mm2`` it is judged."""

    material: str
    insulation: str
    use: str = "line"
    area_mm2: float | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class InSeries:
    """Two devices in series, between them perhaps a transformer; settings as in ``KEY.ir=0.8``."""

    upstream: str
    downstream: str
    up_to_a: float | None = None
    ratio: float | None = None
    connection: str | None = None
    set: tuple[str, ...] = ()


@dataclass(frozen=True, kw_only=True, slots=True)
class BackUp:
    """The device upstream that backs another up."""

    back_up: str | None = None


def _asked(name: str, *records: type) -> type:
    """What an address asks: a device at settings, and all that some records ask."""
    every = [(each, hints_of(record)[each.name]) for record in records for each in fields(record)]
    needed = [(each.name, kind) for each, kind in every if is_needed(each)]
    optional = [(each.name, kind, field(default=each.default)) for each, kind in every if not is_needed(each)]
    settings = ("set", tuple[str, ...], field(default=()))
    return make_dataclass(name, [("key", str), *needed, *optional, settings], kw_only=True, frozen=True)


def _of(record: type[Record], asked: Any) -> Record:
    """The record a calculator asks for."""
    return record(**{each.name: getattr(asked, each.name) for each in fields(record)})  # type: ignore[arg-type]


def disconnects(bench: Bench, asked: Any) -> dict[str, Any]:
    """Whether a device disconnects a fault to earth in time, and the greatest loop impedance for it."""
    answer = disconnection(device_at(bench, asked.key, asked.set), _of(Circumstances, asked))
    return as_json.disconnection_json(answer)


def withstands(bench: Bench, asked: Any) -> dict[str, Any]:
    """Whether a conductor withstands what a device lets through, at every fault current of a span."""
    conductor = conductor_of(asked.material, asked.insulation, asked.use)
    device = device_at(bench, asked.key, asked.set)
    return as_json.withstand_json(withstand(device, conductor, _of(Faults, asked), asked.area_mm2))


def overloads(bench: Bench, asked: Any) -> dict[str, Any]:
    """Whether a device protects a conductor against overload."""
    return as_json.overload_json(overload(device_at(bench, asked.key, asked.set), _of(Load, asked)))


def breaks(bench: Bench, asked: Any) -> dict[str, Any]:
    """Whether a device breaks a prospective current, alone or with one that backs it up."""
    back_up = device_at(bench, asked.back_up, ()) if asked.back_up else None
    return as_json.breaking_json(breaking(device_at(bench, asked.key, asked.set), _of(ShortCircuit, asked), back_up))


def discriminates(bench: Bench, asked: InSeries) -> dict[str, Any]:
    """Up to which current only the downstream device acts."""
    keys = (asked.upstream, asked.downstream)
    given = settings_by_key(keys, asked.set)
    with bench.reading() as library:
        upstream, downstream = (library.device(*split_key(key)).at(**given[key]) for key in keys)
    transformer = transformer_between(asked.ratio, asked.connection)
    return as_json.discrimination_json(discrimination(upstream, downstream, asked.up_to_a, transformer))


def _route(path: str, summary: str, does: Callable[..., Any], asked: type) -> Route:
    answer = {"type": "object", "required": ["findings", "cautions"]}
    return Route(method="GET", path=path, summary=summary, does=does, asked=asked, answer=answer, tag="calculators")


CALCULATOR_ROUTES = (
    _route(f"{DEVICE}/disconnection", "Disconnection of a fault in time", disconnects, _asked("Loop", Circumstances)),
    _route(f"{DEVICE}/withstand", "What a conductor withstands", withstands, _asked("Stress", Cable, Faults)),
    _route(f"{DEVICE}/overload", "Protection against overload", overloads, _asked("Overloaded", Load)),
    _route(f"{DEVICE}/breaking", "Breaking capacity", breaks, _asked("Broken", ShortCircuit, BackUp)),
    _route("/api/discrimination", "Two devices in series", discriminates, InSeries),
)
