"""Words in lines, and numbers as they are printed."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from curvelab.reports.case import Case
from curvelab.reports.comparison import preferred_currents
from curvelab.reports.document import typeset
from curvelab.reports.text import width_mm, wrapped
from tests.reports.examples import case


@given(st.text(alphabet="abc WM.-0", max_size=120), st.floats(8.0, 80.0))
def test_lines_fit_their_room_and_lose_no_letter(words, room_mm):
    lines = wrapped(words, room_mm, 7.3)
    assert "".join(lines).replace(" ", "") == words.replace(" ", "")
    assert all(width_mm(line, 7.3) <= room_mm for line in lines if len(line) > 1)


def test_a_number_stays_with_its_unit():
    assert typeset("within 0.1 s at 32 A") == "within 0.1\u00a0s at 32\u00a0A"
    assert typeset("27 x 10^3 A2s") == "27\u00a0×\u00a010³\u00a0A²s"
    assert typeset("3 apples") == "3 apples"


def test_chosen_currents_are_preferred_numbers():
    # ISO 3:1973, series R10: 1 1.25 1.6 2 2.5 3.15 4 5 6.3 8; every other is R5.
    assert preferred_currents(10, 100) == pytest.approx([10, 12.5, 16, 20, 25, 31.5, 40, 50, 63, 80, 100])
    assert preferred_currents(1, 1e5)[:5] == pytest.approx([1, 1.6, 2.5, 4, 6.3])
    assert preferred_currents(11, 12) == pytest.approx([np.sqrt(132)])


def test_a_reading_of_a_family_shows_the_devices_own_lines_alone():
    whole = case()
    fast_only = Case(
        device=type(whole.device)(
            type(whole.record)(nameplate=whole.record.nameplate, curves=whole.record.curves[:1], revision=1)
        ),
        evidence=whole.evidence,
        history=(),
        log=(),
        findings=(),
    )
    (reading,) = fast_only.readings
    assert [read.curve.edge for read in reading.curves] == ["fast"]
    assert reading.curves[0].devices == ("riverside-b16",)
