"""Finds devices by their bands: which hold at a current for a time, and trip within a time at another current.

The coarse extents say of most devices whether they surely do or cannot; only those in between are asked.
"""

import math
import sqlite3
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

import numpy as np

from curvelab.devices.device import Device
from curvelab.errors import DeviceError, InputError
from curvelab.library.extent import STEP_TIMES_S, extents_of
from curvelab.library.load import read_revision
from curvelab.library.search import COLUMNS, EVERY, FIRST_PAGE, Page, Wanted, conditions
from curvelab.records.answer import EdgeAnswer
from curvelab.records.device import DeviceRecord


@dataclass(frozen=True, kw_only=True, slots=True)
class Point:
    """A current in A and a time in s."""

    current_a: float
    time_s: float

    def __post_init__(self) -> None:
        for name, value in (("current", self.current_a), ("time", self.time_s)):
            if not (math.isfinite(value) and value > 0):
                raise InputError(f"A {name} of {value:g} cannot be searched for", "It must be positive and finite")


@dataclass(frozen=True, kw_only=True, slots=True)
class BandQuery:
    """What the band must do: hold at a current for a time, trip at a current within a time, or both."""

    holds: Point | None = None
    trips: Point | None = None

    def __post_init__(self) -> None:
        if self.holds is None and self.trips is None:
            raise InputError("Nothing is asked of the bands", "A point to hold, a point to trip within, or both")


@dataclass(frozen=True, kw_only=True, slots=True)
class BandsFound:
    """One page of devices whose band surely does what is asked, with its 95 % interval.

    Parameters
    ----------
    rows : tuple of dict
        By the names of `curvelab.library.search.COLUMNS`.
    surely, at_most : int
        How many in all do, and how many more might at most: these were not asked one by one for this page.
    adjustable : int
        Devices that were left out because their answer depends on settings: ask each at its settings.
    """

    rows: tuple[dict[str, Any], ...]
    surely: int
    at_most: int
    adjustable: int


def find_bands(
    connection: sqlite3.Connection, query: BandQuery, wanted: Wanted = EVERY, page: Page = FIRST_PAGE
) -> BandsFound:
    """Devices whose band does what is asked: surely, with the whole of the 95 % interval.

    A curve without uncertainty, as of points typed from a table, is taken as it is.
    """
    candidates = _Candidates(query, wanted)
    surely, perhaps = candidates.count(connection)
    rows: list[dict[str, Any]] = []
    skipped = 0
    for row, sure in candidates.rows(connection, page):
        if not sure and not _does(connection, row, query):
            continue
        if skipped < page.first:
            skipped += 1
            continue
        rows.append({name: row[name] for name in COLUMNS})
        if len(rows) == page.count:
            break
    else:
        # Every candidate was asked: the number is exact.
        surely, perhaps = skipped + len(rows), 0
    condition, values = conditions(wanted)
    (adjustable,) = connection.execute(
        f"SELECT count(*) FROM current_device WHERE {condition} AND is_adjustable = 1", values
    ).fetchone()
    return BandsFound(rows=tuple(rows), surely=surely, at_most=surely + perhaps, adjustable=adjustable)


class _Candidates:
    """The devices that may do what is asked, in SQL; each is known to do so surely or not."""

    def __init__(self, query: BandQuery, wanted: Wanted) -> None:
        self._wanted, self._values = conditions(wanted)
        self._tables, self._perhaps, self._surely = ["current_device"], ["is_adjustable = 0"], ["1"]
        if query.holds:
            self._add_holds(query.holds)
        if query.trips:
            self._add_trips(query.trips)

    def count(self, connection: sqlite3.Connection) -> tuple[int, int]:
        """How many surely do, and how many must be asked."""
        counts = dict(connection.execute(f"{self._select('count(*)')} GROUP BY sure", self._values).fetchall())
        return counts.get(1, 0), counts.get(0, 0)

    def rows(self, connection: sqlite3.Connection, page: Page) -> Iterator[tuple[dict[str, Any], bool]]:
        """Each candidate in the page's order, and whether it surely does."""
        names = ("revision_id", *COLUMNS)
        selected = ", ".join(f"current_device.{name}" for name in names)
        for sure, *row in connection.execute(f"{self._select(selected)} {page.order}", self._values):
            yield dict(zip(names, row, strict=True)), bool(sure)

    def _select(self, selected: str) -> str:
        perhaps = " AND ".join((*self._perhaps, self._wanted))
        return f"SELECT {' AND '.join(self._surely)} AS sure, {selected} FROM {' '.join(self._tables)} WHERE {perhaps}"

    def _add_holds(self, point: Point) -> None:
        """A longer time is held up to a smaller current: beyond the next step surely, before the last one perhaps."""
        before, after = _steps(point.time_s)
        self._values["holds_a"] = point.current_a
        self._surely.append("holds_from_a <= :holds_a")
        self._take("perhaps", "holds_before", before, "holds_before.holds_perhaps_a >= :holds_a")
        self._take("surely", "holds_after", after, "holds_after.holds_surely_a >= :holds_a")

    def _add_trips(self, point: Point) -> None:
        """A longer time is kept from a smaller current on: before the last step surely, beyond the next one perhaps."""
        before, after = _steps(point.time_s)
        self._values["trips_a"] = point.current_a
        self._surely.append("trips_to_a >= :trips_a")
        self._take("surely", "trips_before", before, "trips_before.trips_surely_a <= :trips_a")
        self._take("perhaps", "trips_after", after, "trips_after.trips_perhaps_a <= :trips_a")

    def _take(self, how: str, name: str, step: int | None, condition: str) -> None:
        """Let a step decide; where the time lies beyond the steps nothing is sure and all that has a band may be."""
        chosen = self._perhaps if how == "perhaps" else self._surely
        known = step is not None
        self._values[name] = step if known else 0
        self._tables.append(
            f"JOIN band_extent AS {name} ON {name}.step = :{name} AND {name}.device_id = current_device.device_id"
        )
        chosen.append(condition if known else ("1" if how == "perhaps" else "0"))


def _steps(time_s: float) -> tuple[int | None, int | None]:
    """The last step that is not longer than a time, and the first that is not shorter; None beyond the steps."""
    before = int(np.searchsorted(STEP_TIMES_S, time_s, side="right")) - 1
    after = int(np.searchsorted(STEP_TIMES_S, time_s, side="left"))
    return (before if before >= 0 else None), (after if after < STEP_TIMES_S.size else None)


def _does(connection: sqlite3.Connection, row: dict[str, Any], query: BandQuery) -> bool:
    """Look at its extent at the very times and, where that does not tell, ask the device itself."""
    record = read_revision(connection, row["revision_id"], row["revision"], row["state"])
    told = _told(record, query)
    if told is not None:
        return told
    device = Device(record)
    try:
        return (query.holds is None or holds(device, query.holds)) and (
            query.trips is None or trips(device, query.trips)
        )
    except DeviceError:
        return False


def _told(record: DeviceRecord, query: BandQuery) -> bool | None:
    """Whether a device surely does what is asked, or surely not so; None where its extent does not tell."""
    points = [point for point in (query.holds, query.trips) if point]
    (extent,) = extents_of([record], np.array([point.time_s for point in points]))
    if extent is None:
        return False
    surely = perhaps = True
    if query.holds:
        current_a = query.holds.current_a
        surely &= bool(extent.holds_from_a <= current_a <= extent.holds_surely[0])
        perhaps &= bool(current_a <= extent.holds_perhaps[0])
    if query.trips:
        current_a = query.trips.current_a
        surely &= bool(extent.trips_surely[-1] <= current_a <= extent.trips_to_a)
        perhaps &= bool(current_a >= extent.trips_perhaps[-1])
    return surely if surely or not perhaps else None


def holds(device: Device, point: Point) -> bool:
    """Whether a device surely does not trip at a current before a time."""
    fast = device.trip_time(point.current_a).fast
    if fast is None:
        return False
    return fast.status == "never" or (fast.status in ("value", "at_least") and _bound(fast, fast.lower) >= point.time_s)


def trips(device: Device, point: Point) -> bool:
    """Whether a device surely has cleared a current within a time; pre-arcing and unlatching do not count."""
    slow = device.trip_time(point.current_a, meaning="clearing").slow
    return slow is not None and slow.status in ("value", "at_most") and _bound(slow, slow.upper) <= point.time_s


def _bound(answer: EdgeAnswer, bound: Any) -> float:
    """A bound of an interval, the value itself where the uncertainty is not known."""
    return float(answer.value if math.isnan(bound) else bound)
