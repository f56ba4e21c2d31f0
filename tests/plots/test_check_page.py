"""The page of a check: band, limits and what was read, on one sheet of paper."""

from dataclasses import replace

import pypdfium2
import pytest

from curvelab.errors import DeviceError
from curvelab.plots.check_page import draw_check_page
from curvelab.plots.limits import LINE, placed_limits
from curvelab.plots.subject import subjects_of
from curvelab.records.device import DeviceRecord, Nameplate
from tests.plots.examples import FINDINGS, finding, fuse, mcb


def test_the_page_is_one_a4_sheet_that_says_all(tmp_path):
    draw_check_page(mcb(), FINDINGS, tmp_path / "check.pdf")
    document = pypdfium2.PdfDocument(tmp_path / "check.pdf")
    words = document[0].get_textpage().get_text_range()
    size = document[0].get_size()
    assert len(document) == 1
    document.close()
    assert tuple(side / 72 * 25.4 for side in size) == pytest.approx((210, 297), abs=0.2)
    assert all(heading in words for heading in ("Requirement", "Read (95 %)", "Margin", "Outcome", "Clause"))
    assert all(each.outcome in words for each in FINDINGS)


def test_many_findings_stay_on_the_page(tmp_path):
    draw_check_page(mcb(), FINDINGS * 20, tmp_path / "check.pdf")
    document = pypdfium2.PdfDocument(tmp_path / "check.pdf")
    assert len(document) == 1
    document.close()


def test_a_device_without_curves_has_no_page(tmp_path):
    with pytest.raises(DeviceError, match="quay-isolator"):
        draw_check_page(DeviceRecord(nameplate=Nameplate(key="quay-isolator", kind="switch")), (), tmp_path / "a.pdf")
    assert not list(tmp_path.iterdir())


def placed(findings, device):
    subjects, base = subjects_of([device], "time")
    return placed_limits(findings, subjects, base)


def test_words_of_limits_that_stand_close_are_on_lines_of_their_own():
    near = [finding(4.0, 5.0, "at_most"), finding(4.3, 5.0, "at_most"), finding(4.6, 5.0, "at_most")]
    assert sorted(each.lines for each in placed(near, mcb())) == [0, 1, 2]
    apart = [finding(4.0, 5.0, "at_most"), finding(4.3, 5.0, "at_least"), finding(9.0, 5.0, "at_most")]
    assert {each.lines for each in placed(apart, mcb())} == {0}
    assert LINE > 6.5
    twice = placed([finding(4.0, 5.0, "at_most"), finding(4.0, 5.2, "at_most")], mcb())
    assert [bool(each.words) for each in twice] == [True, False]


def test_the_limit_of_an_energy_stands_at_its_current_and_time():
    device = fuse(63.0)
    made = finding(950.0, 9000.0, "at_least", unit="A2s", time_s=0.01)
    (limit,) = placed([replace(made, device=device.nameplate.key, base="A")], device)
    assert (limit.current, limit.time_s, limit.of_current) == (950.0, 0.01, True)
    assert "9000" in limit.words
