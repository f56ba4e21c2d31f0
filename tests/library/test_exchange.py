"""The open form: exact there and back, two libraries united, hostile lines refused whole."""

import hashlib
import json
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from curvelab.errors import InputError, LibraryError, NotFoundError
from curvelab.library.library import Library, open_library
from tests.library.devices import breaker, curve, reading, records, said, warning
from tests.reading.example import reading as full_reading

VIEWS = ("device_index", "trip_points", "let_through_points", "curve_conditions", "device_settings", "device_breaking")


@pytest.fixture
def here(tmp_path: Path) -> Library:
    with open_library(tmp_path / "here.sqlite") as library:
        yield library


@pytest.fixture
def there(tmp_path: Path) -> Library:
    with open_library(tmp_path / "there.sqlite") as library:
        yield library


def release(library: Library, key: str) -> None:
    library.review(key, state="checked", name="B. Checker")
    library.review(key, state="released", name="C. Releaser", reason="for use")


def filled(library: Library, folder: Path) -> Library:
    file = folder / "sheet.png"
    file.write_bytes(b"\x89PNG the sheet")
    sha256 = hashlib.sha256(file.read_bytes()).hexdigest()
    first = reading(
        breaker("b32", curve("fast", time_s=20.0), curve(), rated_current_a=32.0),
        warnings=(warning("X"),),
        sha256=sha256,
    )
    library.store(first, author="A. Author", reason="first issue", sheet_files=[file])
    release(library, "b32")
    library.store(
        [full_reading(), breaker("b32", curve(time_s=61.0)), breaker("bare", kind="switch")], author="A. Author"
    )
    return library


def everything(library: Library) -> list[object]:
    """All that the views say, without the ids that are each library's own."""
    rows: list[object] = []
    for view in VIEWS:
        cursor = library.open().execute(f"SELECT * FROM {view}")
        names = [column[0] for column in cursor.description]
        own = [index for index, name in enumerate(names) if name not in ("curve_id", "sheet_id")]
        rows.append(sorted(str([row[index] for index in own]) for row in cursor))
    return rows


def united(library: Library, other: Library, **more: str) -> object:
    return library.unite(other.exported(), file="other.jsonl", name="D. Importer", **more)


def test_a_library_goes_there_and_back_exactly(here: Library, there: Library, tmp_path: Path) -> None:
    filled(here, tmp_path)
    done = united(there, here)
    assert (done.new, done.known, done.conflicts) == (4, 0, ())
    assert everything(there) == everything(here)
    lines = [line for line in there.exported() if not line.startswith('{"log"')]
    assert lines == [line for line in here.exported() if not line.startswith('{"log"')]
    assert [json.loads(entry.origin)["name"] for entry in there.log("b32")] == [entry.name for entry in here.log("b32")]
    assert there.evidence("b32", 1).readings[0].source == b"\x89PNG the sheet"
    assert there.verify().problems == ()


def test_taking_the_same_again_changes_nothing(here: Library, there: Library, tmp_path: Path) -> None:
    filled(here, tmp_path)
    united(there, here)
    log = there.log()
    done = united(there, here)
    assert (done.new, done.known, done.conflicts) == (0, 4, ())
    assert there.log() == log


@settings(max_examples=12, deadline=None, suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large])
@given(record=records)
def test_any_device_goes_there_and_back_bit_for_bit(tmp_path_factory: pytest.TempPathFactory, record: object) -> None:
    folder = tmp_path_factory.mktemp("exchange")
    with open_library(folder / "here.sqlite") as here, open_library(folder / "there.sqlite") as there:
        here.store(record)
        united(there, here)
        assert said(there.record(record.nameplate.key)) == said(here.record(record.nameplate.key))


def test_newer_revisions_follow_where_one_history_continues_the_other(here: Library, there: Library) -> None:
    here.store(breaker("b32", curve()), author="A. Author")
    united(there, here)
    here.store(breaker("b32", curve(time_s=61.0)), author="A. Author")
    release(here, "b32")
    done = united(there, here)
    assert (done.new, done.known, done.conflicts) == (1, 1, ())
    assert (there.record("b32").revision, there.record("b32").state) == (2, "released")


def test_two_histories_are_both_kept_and_the_contradiction_is_told(here: Library, there: Library) -> None:
    here.store(breaker("b32", curve()), author="A. Author")
    united(there, here)
    here.store(breaker("b32", curve(time_s=61.0)), author="A. Author")
    there.store(breaker("b32", curve(time_s=62.0)), author="Z. Author")
    release(here, "b32")
    release(there, "b32")
    done = united(there, here)
    assert (done.new, done.known) == (1, 1)
    assert done.conflicts == (
        "b32@2, released there, is b32@3, draft here: both libraries have revisions the other has not",
    )
    assert (there.record("b32").revision, there.record("b32").state) == (2, "released")
    assert said(there.record("b32", 3))[1] == said(here.record("b32", 2))[1]
    assert [(entry.revision, entry.action, entry.state) for entry in there.log("b32")][-1] == (3, "imported", "draft")
    assert there.verify().problems == ()


def test_a_state_that_differs_stays_and_its_review_is_kept_in_the_log(here: Library, there: Library) -> None:
    here.store(breaker("b32", curve()), author="A. Author")
    united(there, here)
    release(here, "b32")
    done = united(there, here)
    assert done.conflicts == ("b32@1 is draft here and released there: it stays draft",)
    assert there.record("b32").state == "draft"
    assert [json.loads(entry.origin)["state"] for entry in there.log("b32")] == ["draft", "checked", "released"]
    assert there.verify().problems == ()


def test_a_key_of_another_kind_is_told_and_left_out(here: Library, there: Library) -> None:
    here.store([breaker("b32", curve()), breaker("b33", curve())])
    there.store(breaker("b32", curve(), kind="fuse"))
    done = united(there, here)
    assert done.conflicts == ("b32 is a fuse here and a mcb there: nothing of it was taken",)
    assert there.record("b32").nameplate.kind == "fuse"
    assert there.record("b33").revision == 1


def test_some_devices_alone(here: Library, there: Library, tmp_path: Path) -> None:
    filled(here, tmp_path)
    there.unite(here.exported(["bare"]), file="bare.jsonl")
    assert there.keys() == ["bare"]
    with pytest.raises(NotFoundError, match="no device 'b3'"):
        list(here.exported(["b3"]))


@pytest.mark.parametrize(
    ("lines", "words"),
    [
        ([], "is empty"),
        (["not json\n"], "Line 1 of x.jsonl is no JSON"),
        (["[]\n"], "is no JSON object"),
        (['{"format":"else"}\n'], "is no exported library"),
        (['{"format":"curvelab-library","version":9}\n'], "Use a newer curvelab"),
        (["HEAD", '{"what":1}\n'], "Line 2 of x.jsonl cannot be taken"),
        (["HEAD", '{"curve":{"id":1}}\n'], "Line 2"),
        (["HEAD", '{"device":{"key":"a","kind":"mcb","revisions":[{}]}}\n'], "Line 2"),
        (["HEAD", '{"source":{"sha256":"00","bytes":"AAAA"}}\n'], "have another hash"),
        (["HEAD", "[" * 100_000 + "\n"], "Line 2 of x.jsonl is no JSON"),
        (["HEAD", '{"log":{"seq":NaN}}\n'], "NaN is no number"),
    ],
)
def test_what_is_no_library(here: Library, lines: list[str], words: str) -> None:
    here.store(breaker("b1", curve()))
    head = '{"format":"curvelab-library","version":1}\n'
    with pytest.raises(InputError) as caught:
        here.unite([head if line == "HEAD" else line for line in lines], file="x.jsonl")
    assert words in str(caught.value)
    assert len(str(caught.value).splitlines()) == 1
    assert here.keys() == ["b1"]


def test_a_changed_number_is_found_by_its_hash(here: Library, there: Library, tmp_path: Path) -> None:
    filled(here, tmp_path)
    for old, new in (("1000.0", "1001.0"), ('"title":"Riverside sheet"', '"title":"Other"'), ('"x":1', '"x":2')):
        lines = [line.replace(old, new) for line in here.exported()]
        assert lines != list(here.exported()), old
        with pytest.raises(InputError, match=r"(is|are) not what its hash says"):
            there.unite(lines, file="x.jsonl")
    assert not there.path.exists() or there.keys() == []


values = st.none() | st.booleans() | st.integers(-(2**70), 2**70) | st.floats() | st.text(max_size=8)
hostile = st.recursive(
    values, lambda inner: st.lists(inner, max_size=3) | st.dictionaries(st.text(max_size=6), inner, max_size=3)
)


@settings(max_examples=80, deadline=None, suppress_health_check=list(HealthCheck))
@given(data=st.data())
def test_hostile_lines_are_refused_or_harmless(tmp_path_factory: pytest.TempPathFactory, data: st.DataObject) -> None:
    """One value anywhere in a good file is replaced by something else."""
    path = tmp_path_factory.getbasetemp() / "hostile.sqlite"
    with open_library(path) as target:
        target.store(breaker("b1", curve()))
        lines = [json.loads(line) for line in good_lines(tmp_path_factory)]
        holder: object = lines
        while True:
            places = list(range(len(holder))) if isinstance(holder, list) else list(holder)
            place = data.draw(st.sampled_from(places))
            inner = holder[place]
            if isinstance(inner, list | dict) and inner and data.draw(st.integers(0, 9)):
                holder = inner
                continue
            holder[place] = data.draw(hostile)
            break
        before = said(target.record("b1"))
        told = refusal(target, [json.dumps(line) + "\n" for line in lines])
        assert len(told.splitlines()) <= 1
        assert said(target.record("b1")) == before


def refusal(target: Library, lines: list[str]) -> str:
    try:
        target.unite(lines, file="x.jsonl")
    except (InputError, LibraryError) as error:
        return str(error)
    return ""


GOOD: list[str] = []


def good_lines(folders: pytest.TempPathFactory) -> list[str]:
    if not GOOD:
        folder = folders.mktemp("good")
        with open_library(folder / "good.sqlite") as library:
            GOOD.extend(filled(library, folder).exported())
    return GOOD
