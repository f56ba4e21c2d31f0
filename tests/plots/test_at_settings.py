"""An adjustable device is drawn at its settings: the same times that it answers."""

import numpy as np

from curvelab.devices.device import Device
from curvelab.plots.at_settings import drawn_record
from curvelab.plots.bands import bands_figure
from tests.devices.made import moulded_case
from tests.plots.examples import fuse


def adjusted():
    return moulded_case().at(ir=0.8, tr=4, ii=8)


def test_its_points_are_what_it_answers():
    device = adjusted()
    record = drawn_record(device)
    assert {curve.base for curve in record.curves} == {"A"}
    for curve in record.curves:
        for part in curve.parts:
            middle = np.sqrt(part.current[:-1] * part.current[1:])[::7]
            asked = getattr(device.trip_time(middle), curve.edge).value
            drawn = np.exp(np.interp(np.log(middle), np.log(part.current), np.log(part.value)))
            known = np.isfinite(asked)
            np.testing.assert_allclose(drawn[known], asked[known], rtol=2e-3)


def test_a_device_without_settings_is_drawn_as_it_is_stored():
    stored = Device(fuse(63))
    assert drawn_record(stored) is stored.record


def test_it_stands_beside_others_in_amperes():
    axes = bands_figure([drawn_record(adjusted()), fuse(63)]).axes[0]
    assert axes.get_xlabel() == "Current"
