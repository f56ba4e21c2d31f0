"""Bands drawn back over a sheet: where its own map says their values lie, and nowhere else."""

from dataclasses import replace

import numpy as np
import pytest

from curvelab.errors import DeviceError, InputError
from curvelab.plots.on_sheet import draw_on_sheet, on_sheet_figure
from curvelab.records.curve import Curve, typed_part
from curvelab.records.device import DeviceRecord, Nameplate
from tests.reading.example import reading


def device(currents, times, *, rating=20.0, base="xIn"):
    curve = Curve(element="whole", edge="slow", meaning="clearing", base=base, parts=(typed_part(currents, times),))
    plate = Nameplate(key="riverside-c20", kind="mcb", rated_current_a=rating)
    return DeviceRecord(nameplate=plate, curves=(curve,))


def places(figure):
    return [np.column_stack(line.get_data()) for line in figure.axes[0].lines]


def inside():
    """Two points well within the plot of the drawn reading, as values and as places."""
    axes = reading().axes
    x0, y0, x1, y1 = axes.frame
    at = np.array([[x0 + 0.3 * (x1 - x0), y0 + 0.3 * (y1 - y0)], [x0 + 0.7 * (x1 - x0), y0 + 0.7 * (y1 - y0)]])
    return axes.values(at), at


def test_a_line_passes_the_places_of_its_values():
    (currents, times), at = inside()
    (line,) = places(on_sheet_figure(reading(), [device(currents, times)]))
    np.testing.assert_allclose(line[[0, -1]], at, atol=1e-6)


def test_what_lies_outside_the_plot_is_left_out():
    (currents, times), _ = inside()
    longer = device([currents[0], currents[1] * 1e4], [times[0], times[1]])
    x0, _, x1, _ = reading().axes.frame
    (line,) = places(on_sheet_figure(reading(), [longer]))
    assert x0 <= line[:, 0].min() <= line[:, 0].max() <= x1


def test_amperes_are_turned_into_the_multiples_of_the_sheet():
    (currents, times), at = inside()
    assert reading().axes.current.base == "xIn"
    (line,) = places(on_sheet_figure(reading(), [device(currents * 20.0, times, base="A")]))
    np.testing.assert_allclose(line[[0, -1]], at, atol=1e-6)
    with pytest.raises(DeviceError):
        on_sheet_figure(reading(), [device(currents, times, rating=None, base="A")])


def test_without_axes_nothing_can_be_drawn_back(tmp_path):
    with pytest.raises(InputError, match="no calibrated sheet"):
        draw_on_sheet(replace(reading(), axes=None), [], tmp_path / "back.png")
