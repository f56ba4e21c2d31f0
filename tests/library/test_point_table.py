"""Points as CSV: exact there and back, formulas defused, wrong tables refused in one line."""

import csv
import io
from pathlib import Path

import pytest
from hypothesis import given, settings

from curvelab.errors import InputError
from curvelab.library.library import open_library
from curvelab.library.point_table import COLUMNS, point_rows, read_point_table
from curvelab.records.device import DeviceRecord
from tests.library.devices import breaker, columns, curve, records

HANDBOOK = """device_key,kind,characteristic,rated_current_a,edge,meaning,base,current,value,source
weir-c10,mcb,C,10,fast,clearing,xIn,1.13,3600,"Handbook, table 3"
weir-c10,mcb,C,10,fast,clearing,xIn,5,0.1,"Handbook, table 3"
weir-c10,mcb,C,10,slow,clearing,xIn,1.45,3600,"Handbook, table 3"
weir-c10,mcb,C,10,slow,clearing,xIn,10,0.1,"Handbook, table 3"
weir-c16,mcb,C,16,slow,clearing,xIn,1.45,3600,"Handbook, table 3"
weir-c16,mcb,C,16,slow,clearing,xIn,10,0.1,"Handbook, table 3"
"""


def table(record: DeviceRecord) -> str:
    text = io.StringIO(newline="")
    writer = csv.writer(text)
    writer.writerow(COLUMNS)
    writer.writerows(point_rows(record))
    return text.getvalue()


def read(text: str, source: str = "") -> list[DeviceRecord]:
    return list(read_point_table(io.StringIO(text, newline=""), "table.csv", source))


def test_a_handbook_table_becomes_devices_with_their_source(tmp_path: Path) -> None:
    with open_library(tmp_path / "firm.sqlite") as library:
        library.store(read(HANDBOOK), author="A. Author")
        assert library.keys() == ["weir-c10", "weir-c16"]
        found = library.record("weir-c10")
        assert {line.source for line in found.curves} == {"Handbook, table 3"}
        assert library.device("weir-c10").trip_time(50.0).fast.value == 0.1


@settings(max_examples=40, deadline=None)
@given(record=records)
def test_points_come_back_bit_for_bit(record: DeviceRecord) -> None:
    """What a table has no place for (capacities, settings, the sheet) is left out; all else is the same."""
    text = table(record)
    found = read(text, source="somewhere")
    if not record.curves:
        assert found == []
        return
    (again,) = found
    assert table_says(again) == table_says(record)


def table_says(record: DeviceRecord) -> list[str]:
    """All that a table has a place for, in any order of the curves."""
    return sorted(
        repr((line.element, line.edge, line.meaning, line.quantity, line.base, line.conditions, line.leaves_top))
        + repr((sorted(line.at.items()), numbers(line)))
        for line in record.curves
    )


def numbers(line: object) -> list[bytes]:
    return [column.tobytes() for part in line.parts for column in columns(part)]


@pytest.mark.parametrize("text", ["=1+1", "+1", "-1", "@SUM(A1)", "\tx", "'quoted", "'=x", "-dash-key"])
def test_no_cell_is_taken_for_a_formula(text: str) -> None:
    given_record = breaker("-key", curve(source="s"), maker=text, series="plain")
    content = table(given_record)
    cells = next(row for row in csv.reader(io.StringIO(content, newline="")) if row[0] != "device_key")
    assert not [cell for cell in cells if cell[:1] in ("=", "+", "-", "@", "\t", "\r")]
    assert read(content)[0].nameplate.maker == text
    assert read(content)[0].nameplate.key == "-key"


@pytest.mark.parametrize(
    ("old", "new", "words"),
    [
        ("device_key,", "key,", "lacks the columns device_key"),
        (",characteristic,", ",colour,", "the column 'colour' is not known"),
        (",characteristic,", ",edge,", "there twice"),
        ("1.13,3600", "1.13,an hour", "row 2: 'an hour' in value"),
        ("1.13,3600", ",3600", "row 2: current is empty"),
        (',"Handbook, table 3"\nweir-c16', ",\nweir-c16", "row 5: nothing says where the points come from"),
        (
            "weir-c10,mcb,C,10,slow,clearing,xIn,10",
            "weir-c10,mcb,C,11,slow,clearing,xIn,10",
            "differ in rated_current_a",
        ),
        ("weir-c16,mcb,C,16,slow,clearing,xIn,10", "weir-c10,mcb,C,16,slow,clearing,xIn,10", "do not stand together"),
        ('1.13,3600,"Handbook, table 3"', "1.13", "more or fewer cells"),
        ('1.13,3600,"Handbook, table 3"', '1.13,3600,"Handbook" 3"', "is no CSV table"),
    ],
)
def test_a_wrong_table_is_refused_in_one_line(old: str, new: str, words: str) -> None:
    assert old in HANDBOOK
    with pytest.raises(InputError) as caught:
        read(HANDBOOK.replace(old, new, 1))
    assert words in str(caught.value)
    assert len(str(caught.value).splitlines()) == 1


def test_a_table_out_of_order_is_refused_before_anything_is_stored(tmp_path: Path) -> None:
    with open_library(tmp_path / "firm.sqlite") as library, pytest.raises(InputError, match="the current falls"):
        library.store(read(HANDBOOK.replace("xIn,1.13,3600", "xIn,7,3600")))
    assert list(tmp_path.iterdir()) == []
