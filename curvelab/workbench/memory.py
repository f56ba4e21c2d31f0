"""Keeps what the stations of a reading made, a few pages at a time, so that one change costs one change."""

import threading
from collections import OrderedDict, defaultdict
from collections.abc import Callable, Hashable
from typing import Any, TypeVar

Result = TypeVar("Result")

CAPACITY = {"axes": 4, "trace": 60, "fit": 60, "check": 60}
"""Results of a station kept of one page; of all others one, as a page prepared for tracing is large."""

PAGES = 4
"""Pages kept, those used last."""

MOST_PIXELS = 60_000_000
"""Of all pages kept together; the page in use is kept whatever its size."""

HEAVY = ("page", "picture", "lines")
"""Stations whose results take many bytes a pixel; traces and fits are small, and last longer."""

MOST_HEAVY_PIXELS = 20_000_000
"""Of all pages that are kept with them: two of A4 at 300 dots an inch."""


class PageMemory:
    """What was made of one page; it is the ``remember`` of a reading.

    What hangs on a forgotten result is forgotten with it, so that nothing large is kept alive by something small.
    """

    def __init__(self) -> None:
        self._kept: defaultdict[str, OrderedDict[tuple[Hashable, ...], Any]] = defaultdict(OrderedDict)
        self._making: defaultdict[str, threading.RLock] = defaultdict(threading.RLock)
        self._changing = threading.RLock()

    def __call__(self, station: str, given: tuple[Hashable, ...], make: Callable[[], Result]) -> Result:
        """The result of ``make``, or the one made before; two who want the same wait for one."""
        with self._changing:
            making, kept = self._making[station], self._kept[station]
        with making:
            with self._changing:
                if given in kept:
                    kept.move_to_end(given)
                    found: Result = kept[given]
                    return found
            result = make()
            with self._changing:
                kept[given] = result
                while len(kept) > CAPACITY.get(station, 1):
                    self._forget(kept.popitem(last=False)[1])
            return result

    @property
    def pixels(self) -> int:
        """Pixels of the sheet that is kept."""
        with self._changing:
            sheets = [sheet for sheet in self._kept["sheet"].values() if sheet.pixels]
        return sum(int(sheet.pixels.grey.size) for sheet in sheets)

    def lighten(self) -> None:
        """Forget what takes much memory and can be made again; what was traced with it stays."""
        with self._changing:
            for station in HEAVY:
                for result in [*self._kept.pop(station, {}).values()]:
                    self._forget(result)

    def _forget(self, result: Any) -> None:
        """Forget everything that was made from a result, or from a part of it."""
        gone = {id(result), *map(id, result if isinstance(result, tuple) else ())}
        for kept in [*self._kept.values()]:
            for given in [given for given in kept if any(id(part) in gone for part in given)]:
                self._forget(kept.pop(given, None))


class Pages:
    """The memories of the pages used last."""

    def __init__(self) -> None:
        self._kept: OrderedDict[Hashable, PageMemory] = OrderedDict()
        self._lock = threading.Lock()

    def memory(self, page: Hashable) -> PageMemory:
        """The memory of a page, which from now on is the one used last."""
        with self._lock:
            memory = self._kept.pop(page, None) or PageMemory()
            self._kept[page] = memory
            while len(self._kept) > PAGES or (len(self._kept) > 1 and self._pixels() > MOST_PIXELS):
                self._kept.popitem(last=False)
            pixels = memory.pixels
            for other in [*reversed(self._kept.values())][1:]:
                pixels += other.pixels
                if pixels > MOST_HEAVY_PIXELS:
                    other.lighten()
            return memory

    def _pixels(self) -> int:
        return sum(each.pixels for each in self._kept.values())
