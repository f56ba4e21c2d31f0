"""What a reading says of its curves beyond their points: published forms by the sheet's words, and the budget."""

import dataclasses
from types import SimpleNamespace

import numpy as np
import pytest

from curvelab.reading.digitise import digitise
from curvelab.reading.fit_json import fit_json
from curvelab.reading.form_doubts import form_doubts
from curvelab.reading.points import edge_sd, fit_points
from curvelab.reading.said_forms import with_said_forms
from curvelab.reading.warp import warp_sd
from curvelab.records.axes import GridLine
from curvelab.records.device import Nameplate
from curvelab.records.form import FormParameter, PublishedForm
from curvelab.records.worksheet import DeviceEntry
from tests.drawn import random_sheet
from tests.reading.example import SLOW, axes, read_curve

VERY_INVERSE = PublishedForm(
    name="IEC very inverse",
    standard="IEC 60255-151",
    parameters=(
        FormParameter(name="pick_up", value=1.0, sd=1e-4),
        FormParameter(name="tms", value=120.0 / 13.5 * 0.2, sd=2e-4),
    ),
    from_current=1.1,
    to_current=20.0,
    rms=1e-5,
    excess=0.3,
    also=("IEC long-time inverse",),
)


def said(characteristic):
    read = read_curve("slow", SLOW)
    read = dataclasses.replace(read, fit=dataclasses.replace(read.fit, forms=(VERY_INVERSE,)))
    plate = Nameplate(key="riverside-b16", kind="relay", characteristic=characteristic)
    (told,) = with_said_forms([read], [DeviceEntry(nameplate=plate)])
    return told.fit.forms[0]


def test_the_sheets_words_tell_two_names_of_one_line_apart():
    form = said("IEC long-time inverse")
    assert (form.name, form.also) == ("IEC long-time inverse", ("IEC very inverse",))
    assert form.parameters[1].value == pytest.approx(0.2)
    assert form.parameters[0] == VERY_INVERSE.parameters[0]
    for characteristic in ("IEC very inverse", None, "IEC extremely inverse"):
        assert said(characteristic) == VERY_INVERSE


def doubts(characteristic, tms, edge="mean"):
    read = read_curve(edge, SLOW)
    at = {"tms": tms}
    read = dataclasses.replace(
        read,
        fit=dataclasses.replace(read.fit, forms=(VERY_INVERSE,)),
        curve=dataclasses.replace(read.curve, at=at),
    )
    plate = Nameplate(key="riverside-b16", kind="relay", characteristic=characteristic)
    return [doubt.code for doubt in form_doubts([read], [DeviceEntry(nameplate=plate)])]


def test_a_curve_of_another_form_or_setting_than_the_worksheet_says_is_doubted():
    found = VERY_INVERSE.parameters[1].value
    assert doubts("IEC very inverse", found * 1.01) == []
    assert doubts("IEC long-time inverse", found) == []
    assert doubts("as printed", found) == []
    assert doubts("IEC very inverse", found * 2.0) == ["form-setting"]
    assert doubts("IEC very inverse", found * 1.05, edge="slow") == []
    assert doubts("IEC inverse", found) == ["form-characteristic"]


def test_a_sheet_read_end_to_end_names_its_relay_curves_and_their_settings(tmp_path):
    sheet = random_sheet(64_003, "vector", kind="relay")
    reading = digitise(sheet.written(tmp_path))
    (name,) = {device.nameplate.characteristic for device in reading.devices}
    for read, tms in zip(reading.curves, (0.1, 0.3, 1.0), strict=True):
        (form,) = read.fit.forms
        assert (form.name, form.is_claimed) == (name, True)
        values = {each.name: each.value for each in form.parameters}
        assert values == pytest.approx({"pick_up": 1.0, "tms": tms}, rel=1e-3)
        told = fit_json(read.fit)
        assert told["forms"][0]["name"] == name
        assert told["budget"]["total"] == pytest.approx(
            np.sqrt(sum(each["sd"] ** 2 for each in told["budget"]["contributions"]))
        )
        assert sum(each["share"] for each in told["budget"]["contributions"]) == pytest.approx(1.0)


def bent(amplitude, own=0.0, seed=0):
    """Grid lines at each current of a decade, off by a smooth bend and each by an error of its own."""
    plain = axes()
    rng = np.random.default_rng(seed)
    lines = []
    for value in np.geomspace(1.0, 100.0, 31):
        along = np.geomspace(0.02, 500.0, 10)
        places = plain.places(np.full(10, value), along)
        bend = amplitude * np.sin(3.0 * places[:, 0] / places[:, 0].max() + 4.0 * places[:, 1] / places[:, 1].max())
        places[:, 0] += bend + own * rng.standard_normal()
        lines.append(GridLine(axis="current", value=value, points=places, sd=0.02, width=1.0, darkness=1.0))
    return dataclasses.replace(plain, grid=tuple(lines))


def px_per_decade(plain):
    return float(plain.places([10.0], [1.0])[0, 0] - plain.places([1.0], [1.0])[0, 0])


def test_a_bend_that_neighbouring_lines_share_is_found():
    along_current, along_value = warp_sd(bent(0.5))
    assert along_current * px_per_decade(axes()) == pytest.approx(0.5 / 2**0.5, rel=0.35)
    assert along_value == 0.0


@pytest.mark.parametrize("seed", range(4))
def test_errors_of_single_lines_are_no_bend(seed):
    assert warp_sd(bent(0.0, own=0.3, seed=seed)) == (0.0, 0.0)


def test_lines_on_whole_pixels_are_no_bend():
    assert warp_sd(dataclasses.replace(bent(0.5), snapped=True)) == (0.0, 0.0)


def test_a_stroke_along_the_pixels_is_moved_as_a_whole_and_one_across_them_is_not():
    directions = np.array([[0.0, 1.0], [1.0, 0.0], [0.05, 1.0], [0.7, 0.7]])
    trace = SimpleNamespace(origin="guided", boundary=False, width=0.0)
    upright, level, leaning, diagonal = edge_sd(trace, directions, 2.0)
    assert upright == level == pytest.approx(0.06)
    assert leaning < 0.2 * upright
    assert diagonal < 0.01 * upright
    assert edge_sd(SimpleNamespace(origin="vector", boundary=False, width=3.0), directions, 2.0).tolist() == [0.0] * 4


def test_the_middle_of_a_stroke_and_the_edge_of_an_area_are_known_to_a_share_of_their_width():
    diagonal = np.array([[0.7, 0.7]])
    line, area = (SimpleNamespace(origin="guided", boundary=boundary, width=3.0) for boundary in (False, True))
    assert edge_sd(line, diagonal, 1.0)[0] == pytest.approx(0.006, rel=0.02)
    assert edge_sd(area, diagonal, 1.0)[0] == pytest.approx(0.173, rel=0.01)


def test_the_calibrations_errors_at_places_make_its_covariance():
    trace = read_curve("slow", SLOW).trace
    points = fit_points(trace, axes(), 1.0)
    np.testing.assert_allclose(points.shared @ points.shared.transpose(0, 2, 1), points.common, rtol=1e-6, atol=1e-18)
