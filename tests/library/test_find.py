"""Finding devices by words, nameplate and bands; the search over bands agrees with asking every device."""

import math
from pathlib import Path

import numpy as np
import pytest

from curvelab.errors import InputError
from curvelab.library.bands import BandQuery, Point, holds, trips
from curvelab.library.library import Library, open_library
from curvelab.library.search import Page, Wanted
from curvelab.records.curve import Curve, Part
from curvelab.records.device import Breaking, DeviceRecord, Setting
from tests.library.devices import breaker, curve, reading

RATINGS = (6.0, 10.0, 16.0, 25.0, 32.0, 63.0)


@pytest.fixture
def library(tmp_path: Path) -> Library:
    with open_library(tmp_path / "firm.sqlite") as library:
        yield library


def keys(library: Library, wanted: Wanted, **page: object) -> list[str]:
    return [row["device_key"] for row in library.find(wanted, Page(**page)).rows]


@pytest.fixture
def firm(library: Library) -> Library:
    plates = {"maker": "Größe & Söhne", "series": "R 1", "characteristic": "B", "standard": "IEC 60898-1"}
    library.store([breaker(f"riverside-b{rating:g}", curve(), rated_current_a=rating, **plates) for rating in RATINGS])
    library.store(
        reading(breaker("mill-gg", curve(), kind="fuse", maker="Mill", rated_current_a=80.0), title="Sheet 7/B")
    )
    library.store(breaker("bare", kind="switch"))
    return library


@pytest.mark.parametrize(
    ("words", "count"),
    [
        ("riverside", 7),
        ("RIVER b16", 1),
        ("16A grosse", 0),
        ("16A größe", 1),
        ("groß", 6),
        ("iec 60898", 6),
        ("sheet 7", 1),
        ("mill", 1),
        ("nothing", 0),
        ('"', None),
        ("riverside OR mill", 0),
        ("riverside* NEAR(", 0),
        ("", 8),
        ("  ", 8),
        ("a" * 10_000, 0),
    ],
)
def test_words(firm: Library, words: str, count: int | None) -> None:
    if count is None:
        with pytest.raises(InputError, match="no word to look for"):
            firm.find(Wanted(words=words))
    else:
        found = firm.find(Wanted(words=words))
        assert (found.total, len(found.rows)) == (count, count)


@pytest.mark.parametrize(
    ("wanted", "count"),
    [
        (Wanted(kind="fuse"), 1),
        (Wanted(characteristic="B", rated_from_a=10, rated_to_a=25), 3),
        (Wanted(maker="Mill"), 1),
        (Wanted(maker="mill"), 0),
        (Wanted(series="R 1", words="b6"), 2),
        (Wanted(state="released"), 0),
        (Wanted(standard="IEC 60898-1", kind="mcb"), 6),
    ],
)
def test_the_nameplate(firm: Library, wanted: Wanted, count: int) -> None:
    assert firm.find(wanted).total == count


def test_sorted_and_paged(firm: Library) -> None:
    wanted = Wanted(kind="mcb")
    in_order = keys(firm, wanted, sort="rated_current_a", falling=True)
    assert in_order == [f"riverside-b{rating:g}" for rating in reversed(RATINGS)]
    paged = [
        key
        for first in (0, 4)
        for key in keys(firm, wanted, sort="rated_current_a", falling=True, first=first, count=4)
    ]
    assert paged == in_order
    assert firm.find(wanted, Page(first=4, count=4)).total == len(RATINGS)
    for wrong in ({"sort": "words; DROP TABLE device"}, {"first": -1}, {"count": 0}):
        with pytest.raises(InputError):
            firm.find(wanted, Page(**wrong))


def test_the_search_follows_the_current_revision(firm: Library) -> None:
    firm.store(breaker("riverside-b6", maker="Newer"))
    assert keys(firm, Wanted(maker="Newer")) == ["riverside-b6"]
    firm.review("riverside-b6", 1, state="checked", name="A")
    firm.review("riverside-b6", 1, state="released", name="B")
    assert keys(firm, Wanted(words="newer")) == []
    assert keys(firm, Wanted(state="released")) == ["riverside-b6"]
    for number in (1, 2):
        firm.review("riverside-b6", number, state="withdrawn", name="A", reason="gone")
    assert keys(firm, Wanted(words="b6")) == ["riverside-b63"]
    assert firm.verify().problems == ()


def falling(rng: np.random.Generator, edge: str, **more: object) -> Curve:
    """A random falling curve, with or without uncertainty, sometimes with a gap or a step."""
    count = int(rng.integers(2, 12))
    current = np.sort(rng.uniform(1.05, 30.0, count))
    value = np.sort(10.0 ** rng.uniform(-3, 4.5, count))[::-1]
    if rng.random() < 0.3:
        current[count // 2] = current[count // 2 - 1]
    sd = np.full(count, math.nan if rng.random() < 0.3 else rng.uniform(0, 0.05))
    cut = count // 2 if rng.random() < 0.3 else count
    parts = tuple(
        Part(current=current[part], value=value[part], sd_current=sd[part], sd_value=3 * sd[part], sd_common=sd[part])
        for part in (slice(0, cut), slice(cut, count))
        if current[part].size
    )
    told = {"element": "whole", "meaning": "clearing", "base": "xIn", "leaves_top": bool(rng.random() < 0.5), **more}
    return Curve(edge=edge, parts=parts, **told)


def device(rng: np.random.Generator, number: int) -> DeviceRecord:
    elements = ["whole"] if rng.random() < 0.6 else ["overload", "instantaneous"]
    curves = [
        falling(rng, edge, element=element) for element in elements for edge in ("fast", "slow") if rng.random() < 0.9
    ]
    capacity = (Breaking(quantity="Icn", value_a=6000.0),) if rng.random() < 0.5 else ()
    kind = str(rng.choice(["mcb", "fuse", "rcd"]))
    return breaker(f"d{number:03}", *curves, kind=kind, rated_current_a=float(rng.choice(RATINGS)), breaking=capacity)


@pytest.mark.parametrize("seed", range(3))
def test_the_search_over_bands_agrees_with_asking_every_device(library: Library, seed: int) -> None:
    rng = np.random.default_rng(seed)
    library.store([device(rng, number) for number in range(40)])
    devices = [library.device(row["device_key"]) for row in library.index()]
    found_any = 0
    for _ in range(8):
        one, other = (
            Point(current_a=float(10.0 ** rng.uniform(0.5, 4)), time_s=float(10.0 ** rng.uniform(-3.5, 4.5)))
            for _ in range(2)
        )
        for query in (BandQuery(holds=one, trips=other), BandQuery(holds=one), BandQuery(trips=other)):
            expected = [
                each.key
                for each in devices
                if (query.holds is None or holds(each, query.holds))
                and (query.trips is None or trips(each, query.trips))
            ]
            found = library.find_bands(query, page=Page(count=1000))
            assert [row["device_key"] for row in found.rows] == expected
            assert found.surely <= len(expected) <= found.at_most
            found_any += len(expected)
    assert found_any > 20


def test_what_the_search_over_bands_leaves_out(library: Library) -> None:
    settings = (Setting(name="ir", from_value=0.4, to_value=1.0, base="xIn"),)
    library.store(
        [
            breaker("set", curve("fast"), curve(), kind="mccb", rated_current_a=100.0, settings=settings),
            breaker("ur", curve("fast", base="xIr"), kind="mccb", rated_current_a=100.0),
            breaker("mean", curve("mean"), rated_current_a=100.0),
            breaker("melts", curve("slow", meaning="pre_arcing"), kind="fuse", rated_current_a=100.0),
            breaker("trips", curve(), rated_current_a=100.0),
        ]
    )
    found = library.find_bands(BandQuery(trips=Point(current_a=450.0, time_s=60.0)))
    assert [row["device_key"] for row in found.rows] == ["trips"]
    assert found.adjustable == 2


def test_pages_of_the_search_over_bands(library: Library) -> None:
    library.store([breaker(f"d{number:03}", curve("fast"), curve(), rated_current_a=10.0) for number in range(25)])
    query = BandQuery(trips=Point(current_a=40.0, time_s=100.0))
    paged = [
        row["device_key"]
        for first in (0, 10, 20)
        for row in library.find_bands(query, page=Page(first=first, count=10, falling=True)).rows
    ]
    assert paged == [f"d{number:03}" for number in reversed(range(25))]


@pytest.mark.parametrize("wrong", [(0.0, 1.0), (1.0, -1.0), (math.nan, 1.0), (1.0, math.inf)])
def test_a_point_that_is_none(wrong: tuple[float, float]) -> None:
    with pytest.raises(InputError, match="positive and finite"):
        Point(current_a=wrong[0], time_s=wrong[1])
    with pytest.raises(InputError, match="Nothing is asked"):
        BandQuery()
