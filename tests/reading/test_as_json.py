import json
from dataclasses import replace

import numpy as np
import pytest

from curvelab.reading.as_json import json_text, reading_json
from tests.reading.example import FAST, SLOW, reading, typed_reading

NUMBER, TEXT, FLAG = (int, float), str, bool
AXIS = {
    **dict.fromkeys(("scale", "unit", "base", "direction"), TEXT),
    "marks": list,
    "mark_residual_rms": NUMBER,
}
SHAPE = {
    # The keys other programs rely on, each with the types it may have; more keys may be there.
    "": {"format": int, "sheet": dict, "axes": dict, "curves": list, "bands": list, "findings": list, "warnings": list},
    "sheet": {"file": TEXT, "sha256": TEXT, "page": int, "plot": int, "width": NUMBER, "height": NUMBER, "unit": TEXT},
    "axes": {"current": dict, "time": dict, "automatic": FLAG, "map": dict, "covariance": dict},
    "axes.current": AXIS,
    "axes.time": AXIS,
    "axes.current.marks.0": {"at": list, "value": NUMBER, "from": TEXT},
    "curves.0": {
        "edge": TEXT, "meaning": TEXT, "element": TEXT, "device": TEXT, "label": TEXT, "colour": TEXT, "from": TEXT,
        "confidence": NUMBER, "points": dict, "gaps": list,
    },
    "curves.0.points": dict.fromkeys(("x", "y", "current", "time", "sd_current", "sd_time"), list),
    "curves.0.gaps.0": {"from": list, "to": list},
    "bands.0": {
        "device": TEXT, "element": TEXT, "base": TEXT, "start": TEXT, "at": dict, "fast": dict, "slow": dict,
        "mean": type(None),
    },
    "bands.0.fast.parts.0": dict.fromkeys(("current", "time", "sd_current", "sd_time"), list),
    "findings.0": {
        "device": TEXT, "standard": TEXT, "clause": TEXT, "requirement": TEXT, "limit": NUMBER, "value": type(None),
        "interval": type(None), "outcome": TEXT, "advisory": FLAG, "source": TEXT,
    },
    "warnings.0": {"code": TEXT, "text": TEXT, "at": list, "accepted": dict},
    "warnings.1": {"at": type(None), "accepted": type(None)},
}  # fmt: skip


def at(found, path):
    for step in filter(None, path.split(".")):
        found = found[int(step) if step.isdigit() else step]
    return found


@pytest.mark.parametrize("path", SHAPE)
def test_every_promised_key_is_there_with_its_type(path):
    found = at(json.loads(json_text(reading_json(reading()))), path)
    for key, types in SHAPE[path].items():
        assert isinstance(found[key], types), (path, key)
        assert types is FLAG or not isinstance(found[key], bool)


def test_points_are_parallel_lists_with_null_where_steep():
    points = reading_json(reading())["curves"][1]["points"]
    assert points["current"] == SLOW[0]
    assert points["time"] == SLOW[1]
    assert points["sd_time"] == [0.01, 0.01, 0.01, None, None, 0.01]
    assert {len(values) for values in points.values()} == {6}


def test_bands_join_the_edges_of_a_device():
    (band,) = reading_json(reading())["bands"]
    assert (band["device"], band["base"], band["start"]) == ("riverside-b16", "xIn", "cold")
    assert list(band["at"]) == ["ir", "tr"]
    assert band["fast"]["parts"][0]["current"] == FAST[0]
    assert band["slow"]["parts"][0]["time"] == SLOW[1]
    assert band["mean"] is None


def test_two_lines_of_one_edge_are_two_bands_and_none_is_lost():
    whole = reading()
    device = whole.devices[0]
    second = replace(device.curves[1], meaning="operating")
    bands = reading_json(replace(whole, devices=(replace(device, curves=(*device.curves, second)),)))["bands"]
    assert [band["slow"]["meaning"] for band in bands] == ["clearing", "operating"]


@pytest.mark.parametrize("quantity", ["let_through", "peak"])
def test_the_second_quantity_names_its_keys(quantity):
    found = reading_json(reading(quantity))
    assert "time" not in found["axes"]
    assert found["axes"][quantity]["direction"] == "y"
    assert found["curves"][0]["points"][quantity] == FAST[1]
    assert f"sd_{quantity}" in found["curves"][0]["points"]
    assert set(found["bands"][0]["fast"]["parts"][0]) == {"current", quantity, "sd_current", f"sd_{quantity}"}


def test_marks_say_where_they_come_from_and_how_far_off_they_are():
    axis = reading_json(reading())["axes"]["current"]
    assert [mark["from"] for mark in axis["marks"]] == ["given", "label"]
    assert axis["mark_residual_rms"] == 0.25


def test_the_covariance_names_its_parameters():
    covariance = reading_json(reading())["axes"]["covariance"]
    assert len(covariance["parameters"]) == len(covariance["matrix"]) == len(covariance["matrix"][0]) == 8


def test_typed_points_have_neither_sheet_nor_places():
    found = reading_json(typed_reading())
    assert (found["sheet"], found["axes"]) == (None, None)
    curve = found["curves"][0]
    assert (curve["from"], curve["device"], curve["colour"]) == ("typed", None, None)
    assert curve["points"]["x"] == [None, None]
    assert curve["points"]["sd_time"] == [None, None]
    assert found["bands"][0]["device"] is None


def test_the_text_is_strict_json_exact_and_the_same_each_time():
    found = reading_json(reading())
    text = json_text(found)
    assert json.loads(text) == found
    assert text == json_text(reading_json(reading()))
    assert "NaN" not in text
    assert next(iter(json.loads(text))) == "format"


def test_text_keeps_every_digit_and_refuses_what_json_has_not():
    values = np.random.default_rng(3).normal(size=200).tolist()
    assert json.loads(json_text({"a": values}))["a"] == values
    with pytest.raises(ValueError, match="JSON"):
        json_text({"a": float("nan")})


@pytest.mark.parametrize(
    "value", [{}, [], {"a": {}}, {"a": []}, [[]], [{}], 1, "ä", None, [[1, 2], [3, 4]], {"a": [[1] * 9]}]
)
def test_any_shape_is_written(value):
    assert json.loads(json_text(value)) == value
