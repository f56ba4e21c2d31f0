"""The sheet under the hand in a real browser: clicks, boxes, marks, the text beside it, two tabs, a reload."""

import re

import pytest

from tests.workbench.browser import Workbench, needs_browser

pytestmark = needs_browser

SLOW = (773.9, 1226.9)
"""A place that the slow edge of the demo sheet ``mcb-b`` passes."""


def test_a_click_retraces_and_every_step_is_undone_and_done_again(bench: Workbench) -> None:
    screen = bench.screen()
    screen.demo("mcb-b")
    screen.read()
    before = screen.state()["worksheet"]
    screen.click(*screen.place_on(0))
    screen.told("passes")
    screen.read()
    assert screen.state()["worksheet"] != before
    screen.page.keyboard.press("Control+z")
    screen.page.wait_for_function(
        "(text) => document.querySelector('#said').textContent.includes(text)", arg="One step back"
    )
    screen.read()
    assert screen.state()["worksheet"] == before
    screen.page.keyboard.press("Control+Shift+z")
    screen.told("forward")
    assert screen.state()["worksheet"] != before


def test_a_box_dragged_with_shift_is_left_out(bench: Workbench) -> None:
    screen = bench.screen()
    screen.demo("mcb-b")
    screen.read()
    x0, y0 = screen.pixel(900.0, 500.0)
    x1, y1 = screen.pixel(1100.0, 700.0)
    screen.page.keyboard.down("Shift")
    screen.page.mouse.move(x0, y0)
    screen.page.mouse.down()
    screen.page.mouse.move(x1, y1, steps=4)
    screen.page.mouse.up()
    screen.page.keyboard.up("Shift")
    screen.told("Undo")
    boxes = [box for curve in screen.state()["data"]["curves"] for box in curve.get("avoid", [])]
    assert boxes
    assert boxes[0] == pytest.approx([900, 500, 1100, 700], abs=4)


def test_a_mark_is_dragged_under_a_magnifier(bench: Workbench) -> None:
    screen = bench.screen()
    screen.demo("mcb-b")
    screen.read()
    x, _ = screen.state()["data"]["axes"]["current"]["marks"][1]["at"]
    pin = screen.page.get_by_role("button", name=re.compile("^Mark 5 In on the current axis")).bounding_box()
    assert pin is not None
    at = (pin["x"] + 12, pin["y"] + 12)
    screen.page.mouse.move(*at)
    screen.page.mouse.down()
    screen.page.mouse.move(at[0] + 6, at[1], steps=3)
    assert screen.page.locator(".magnifier").is_visible()
    screen.page.mouse.up()
    screen.told("moved")
    assert not screen.page.locator(".magnifier").is_visible()
    scale = float(re.search(r"z=([\d.]+)", screen.page.url)[1])  # type: ignore[index]
    assert screen.state()["data"]["axes"]["current"]["marks"][1]["at"][0] == pytest.approx(x + 6 / scale, abs=1.5)


def test_the_worksheet_as_text_leads_the_views(bench: Workbench) -> None:
    screen = bench.screen()
    screen.demo("mcb-b")
    screen.read()
    screen.page.keyboard.press("w")
    text = screen.page.get_by_role("textbox", name="Worksheet")
    assert text.input_value() == screen.state()["worksheet"]
    text.fill(text.input_value().replace("riverside-b{rating}", "written-b{rating}"))
    screen.page.wait_for_function("() => document.querySelector('[data-focus=strip-key]').value.startsWith('written')")
    text.fill("format = 1\n[sheet\n")
    screen.page.locator("#refused.shown").wait_for()
    assert screen.state()["data"]["devices"][0]["key"] == "written-b{rating}"


def test_reload_in_the_middle_comes_back_to_the_same_place(bench: Workbench) -> None:
    screen = bench.screen()
    screen.demo("mcb-b")
    screen.read()
    screen.click(*screen.place_on(0))
    screen.told("passes")
    screen.read()
    screen.page.mouse.move(*screen.pixel(*SLOW))
    screen.page.mouse.wheel(0, -900)
    screen.page.wait_for_timeout(700)
    place, state = screen.page.url, screen.state()
    screen.page.reload()
    screen.read()
    screen.page.wait_for_timeout(600)
    assert screen.page.url == place
    assert screen.state()["worksheet"] == state["worksheet"]
    assert screen.state()["can_undo"]


def test_two_tabs_see_each_other_and_a_late_step_is_told_politely(bench: Workbench) -> None:
    one = bench.screen()
    one.demo("mcb-b")
    one.read()
    other = bench.tab(one.page.context, f"#/sheet/{one.draft}")
    other.read()
    one.page.locator('[data-focus="strip-series"]').fill("Seen in both")
    one.page.locator('[data-focus="strip-series"]').blur()
    other.page.wait_for_function("() => document.querySelector('[data-focus=strip-series]').value === 'Seen in both'")
    other.page.route(re.compile(r"/api/drafts/\w+\?since"), lambda route: route.abort())
    other.page.reload()
    other.page.locator('[data-focus="strip-series"]').wait_for()
    one.page.locator('[data-focus="strip-series"]').fill("Newer")
    one.page.locator('[data-focus="strip-series"]').blur()
    one.told("Newer")
    other.page.locator('[data-focus="strip-maker"]').fill("Late")
    other.page.locator('[data-focus="strip-maker"]').blur()
    other.told("another tab")
    assert other.page.locator('[data-focus="strip-series"]').input_value() == "Newer"
    assert other.state()["data"]["devices"][0]["maker"] != "Late"


BROWN = """() => {
  const canvas = document.querySelector('[data-focus="twin"]');
  const { data } = canvas.getContext("2d").getImageData(0, 0, canvas.width, canvas.height);
  let brown = 0;
  for (let k = 0; k < data.length; k += 4) brown += data[k + 3] > 200 && data[k] - data[k + 2] > 25;
  return brown;
}"""


def test_a_held_key_lays_the_paper_bare_on_exact_axes(bench: Workbench) -> None:
    """The printed grid is brown; the one that is drawn is not."""
    screen = bench.screen(color_scheme="light")
    screen.demo("mcb-loose-magnetic")
    screen.read()
    screen.page.wait_for_timeout(500)
    covered = screen.page.evaluate(BROWN)
    screen.page.keyboard.down("f")
    screen.page.wait_for_timeout(1500)
    assert screen.page.evaluate(BROWN) > covered + 500
    screen.page.keyboard.up("f")
    screen.page.wait_for_timeout(300)
    assert screen.page.evaluate(BROWN) == pytest.approx(covered, abs=100)
