"""What is remembered of pages, and libraries lent: bounded, shared, never stale."""

import asyncio
import shutil
import threading
from pathlib import Path

import pytest

import curvelab
from curvelab.errors import NotFoundError
from curvelab.records.device import DeviceRecord, Nameplate
from curvelab.workbench.bell import Bell
from curvelab.workbench.lending import Lending
from curvelab.workbench.memory import CAPACITY, PAGES, PageMemory, Pages


class Made:
    """A result that is only the same where it is the same object."""


def test_the_same_input_is_made_once() -> None:
    memory, axes = PageMemory(), Made()
    first = memory("trace", (axes, "guide"), Made)
    assert memory("trace", (axes, "guide"), Made) is first
    assert memory("trace", (axes, "another guide"), Made) is not first
    assert memory("trace", (Made(), "guide"), Made) is not first


def test_what_hangs_on_a_forgotten_result_is_forgotten_with_it() -> None:
    """A page prepared anew must not be kept alive by traces on the one before."""
    memory = PageMemory()
    page = memory("page", ("marks",), Made)
    trace = memory("trace", (page, "guide"), lambda: (Made(), "doubts"))
    fit = memory("fit", (trace[0],), Made)
    memory("page", ("other marks",), Made)
    assert memory("fit", (trace[0],), Made) is not fit
    assert memory("trace", (page, "guide"), lambda: (Made(), "doubts")) is not trace


def test_a_page_is_lightened_without_its_traces() -> None:
    memory, sheet = PageMemory(), Made()
    page, picture = memory("page", (sheet,), Made), memory("picture", (sheet,), Made)
    trace = memory("trace", (sheet, "guide"), Made)
    memory.lighten()
    assert memory("trace", (sheet, "guide"), Made) is trace
    assert memory("page", (sheet,), Made) is not page
    assert memory("picture", (sheet,), Made) is not picture


def test_each_station_keeps_so_many() -> None:
    memory = PageMemory()
    kept = [memory("axes", (number,), Made) for number in range(CAPACITY["axes"] + 1)]
    assert memory("axes", (len(kept) - 1,), Made) is kept[-1]
    assert memory("axes", (0,), Made) is not kept[0]


def test_an_error_is_not_remembered() -> None:
    memory = PageMemory()

    def fail() -> Made:
        raise ValueError

    with pytest.raises(ValueError):  # noqa: PT011 - our own
        memory("sheet", (1,), fail)
    assert isinstance(memory("sheet", (1,), Made), Made)


def test_two_who_want_the_same_wait_for_one() -> None:
    memory, made, begun, may_end = PageMemory(), [], threading.Event(), threading.Event()

    def make() -> Made:
        begun.set()
        may_end.wait(5)
        made.append(Made())
        return made[-1]

    found: list[Made] = []
    threads = [threading.Thread(target=lambda: found.append(memory("sheet", (1,), make))) for _ in range(2)]
    threads[0].start()
    begun.wait(5)
    threads[1].start()
    may_end.set()
    for thread in threads:
        thread.join(5)
    assert len(made) == 1
    assert found[0] is found[1] is made[0]


def test_the_pages_used_last_are_kept() -> None:
    pages = Pages()
    first = pages.memory("a")
    for name in "bcdxyz"[: PAGES - 1]:
        pages.memory(name)
    assert pages.memory("a") is first
    for name in "efghij"[:PAGES]:
        pages.memory(name)
    assert pages.memory("a") is not first


def switch(key: str) -> DeviceRecord:
    return DeviceRecord(nameplate=Nameplate(key=key, kind="switch", rated_current_a=100.0))


def test_a_lent_library_sees_what_is_written_meanwhile(tmp_path: Path) -> None:
    path = tmp_path / "firm.sqlite"
    reading, writing = Lending(path, 2, create=False), Lending(path, 1, create=True)
    with pytest.raises(NotFoundError), reading.lent():
        pass
    for key in ("weir-1", "weir-2"):
        with writing.lent() as library:
            library.store(switch(key))
        with reading.lent() as library:
            assert key in library.keys()  # noqa: SIM118 - a method of the library
    with reading.lent() as one, reading.lent() as other:
        assert one is not other
    reading.close()
    writing.close()


def test_a_file_put_in_its_place_is_another_library(tmp_path: Path) -> None:
    path, backup = tmp_path / "firm.sqlite", tmp_path / "backup.sqlite"
    for place, key in ((path, "weir-1"), (backup, "weir-2")):
        with curvelab.open_library(place) as library:
            library.store(switch(key))
    lending = Lending(path, 2, create=False)
    with lending.lent() as library:
        assert library.keys() == ["weir-1"]
    shutil.move(backup, path)
    with lending.lent() as library:
        assert library.keys() == ["weir-2"]
    lending.close()


def test_a_bell_wakes_those_who_wait() -> None:
    bell, changed = Bell(), threading.Event()

    async def waiting() -> bool:
        threading.Timer(0.05, lambda: (changed.set(), bell.ring())).start()
        await bell.heard(changed.is_set, 10)
        return changed.is_set()

    assert asyncio.run(asyncio.wait_for(waiting(), 5))


def test_a_bell_that_is_not_rung_is_waited_for_so_long() -> None:
    asyncio.run(asyncio.wait_for(Bell().heard(lambda: False, 0.05), 5))
