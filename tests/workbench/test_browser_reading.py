"""Reading a sheet in a real browser: from dropping it to a stored device, putting right, settling, never losing."""

import re
import tomllib

import pytest

from tests.workbench.browser import SHEETS, Screen, Workbench, needs_browser

pytestmark = needs_browser

FAST, SLOW = (616.1, 1115.2), (773.9, 1226.9)
"""Places that the two edges of the demo sheet ``mcb-b`` pass."""
MOST_ACTIONS = 6


def store(screen: Screen, name: str) -> None:
    screen.act()
    screen.page.get_by_label("Stored by").fill(name)
    screen.act()
    screen.page.get_by_role("button", name="Store").click()
    screen.page.locator(".stored a").first.wait_for()


def told(screen: Screen, text: str) -> None:
    """Wait until the page says so in passing."""
    screen.page.wait_for_function("(text) => document.querySelector('#said').textContent.includes(text)", arg=text)


def may_store(screen: Screen) -> None:
    """Wait until nothing keeps the sheet from being stored."""
    button = "document.querySelector('.store-button')"
    screen.page.wait_for_function(f"() => {button}.getAttribute('aria-disabled') === 'false'")


def say_device(screen: Screen, **fields: str) -> None:
    """Type the nameplate into the strip, as far as it is not there already."""
    for name, value in fields.items():
        box = screen.page.locator(f'[data-focus="strip-{name}"]')
        if box.input_value() == value:
            continue
        screen.act()
        if name == "kind":
            box.select_option(value)
        else:
            box.fill(value)
            box.press("Tab")
        screen.page.wait_for_timeout(100)
        if screen.state()["data"].get("devices"):
            screen.read()


def accept_what_is_open(screen: Screen) -> None:
    """Go from entry to entry and accept each with a reason, by keys alone."""
    for left in reversed(range(len(screen.open_texts))):
        screen.page.keyboard.press("n")
        answers = screen.page.locator(".entry.here .answers > button").all_inner_texts()
        screen.page.keyboard.press(str(1 + next(k for k, text in enumerate(answers) if "reason" in text)))
        form = screen.page.locator(".asked")
        form.get_by_label("Reason").fill("Looked at on the sheet")
        form.get_by_label("Your name").fill("Ada Reader")
        form.get_by_label("Your name").press("Enter")
        screen.page.wait_for_function("(left) => document.querySelectorAll('.entry').length === left", arg=left)
        screen.read()


def place_on(screen: Screen, curve: int) -> tuple[float, float]:
    """A place in the middle of a traced line."""
    points = screen.state()["reading"]["curves"][curve]["points"]
    middle = len(points["x"]) // 3
    return points["x"][middle], points["y"][middle]


def test_a_demo_sheet_is_a_stored_device_in_six_actions(bench: Workbench) -> None:
    screen = bench.screen()
    screen.demo("mcb-b")
    screen.read()
    store(screen, "Ada Reader")
    assert screen.actions <= MOST_ACTIONS
    assert screen.api("/devices/riverside-b32")["author"] == "Ada Reader"
    assert screen.errors == []


def test_a_bare_sheet_is_dropped_named_and_stored(bench: Workbench) -> None:
    screen = bench.screen()
    screen.drop("dropped.png", (SHEETS / "mcb-b.png").read_bytes())
    screen.read()
    if not screen.state()["data"].get("curves"):
        screen.click(*FAST)
        screen.read()
        screen.click(*SLOW)
        screen.read()
    for line, curve in enumerate(screen.state()["reading"]["curves"]):
        if curve["meaning"] is None:
            screen.page.locator(f'[data-focus="line-{line}"]').click()
            screen.page.locator(f'[data-focus="line-{line}-meaning"]').select_option("clearing")
            screen.read()
    say_device(screen, key="dropped-b32", kind="mcb", rated_current_a="32", standard="IEC 60898-1")
    screen.page.locator('[data-focus="sheet"]').focus()
    accept_what_is_open(screen)
    may_store(screen)
    store(screen, "Ada Reader")
    bands = screen.api("/devices/dropped-b32/bands")["bands"]
    assert bands[0]["fast"] is not None
    assert bands[0]["slow"] is not None


def test_a_wrong_label_is_put_right_at_its_place(bench: Workbench) -> None:
    screen = bench.screen()
    worksheet = (SHEETS / "mcb-b.toml").read_text(encoding="utf-8")
    right = tomllib.loads(worksheet)["axes"]["current"]["marks"][1]
    screen.demo("mcb-b")
    screen.read()
    mark = screen.page.get_by_role("button", name=re.compile("^Mark 5 In on the current axis"))
    mark.dblclick()
    screen.page.get_by_label("it is").fill("7")
    screen.page.get_by_role("button", name="Say so").click()
    screen.page.wait_for_function("() => document.querySelector('.open-list ol').childElementCount > 0")
    assert screen.page.locator(".store-button").get_attribute("aria-disabled") == "true"
    screen.page.get_by_role("button", name=re.compile("^Mark 7 In on the current axis")).dblclick()
    screen.page.get_by_label("it is").fill("5")
    screen.page.get_by_label("it is").press("Enter")
    may_store(screen)
    marks = screen.state()["data"]["axes"]["current"]["marks"]
    assert right in [{"at": each["at"], "value": each["value"]} for each in marks]


def test_open_entries_are_settled_by_keys_alone(bench: Workbench) -> None:
    screen = bench.screen()
    screen.demo("mcb-loose-magnetic")
    screen.read()
    assert screen.open_texts
    accept_what_is_open(screen)
    assert screen.page.locator(".store-button").get_attribute("aria-disabled") == "false"


def test_a_click_retraces_and_every_step_is_undone_and_done_again(bench: Workbench) -> None:
    screen = bench.screen()
    screen.demo("mcb-b")
    screen.read()
    before = screen.state()["worksheet"]
    screen.click(*place_on(screen, 0))
    told(screen, "passes")
    screen.read()
    assert screen.state()["worksheet"] != before
    screen.page.keyboard.press("Control+z")
    screen.page.wait_for_function(
        "(text) => document.querySelector('#said').textContent.includes(text)", arg="One step back"
    )
    screen.read()
    assert screen.state()["worksheet"] == before
    screen.page.keyboard.press("Control+Shift+z")
    told(screen, "forward")
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
    told(screen, "Undo")
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
    told(screen, "moved")
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
    screen.click(*place_on(screen, 0))
    told(screen, "passes")
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
    told(one, "Newer")
    other.page.locator('[data-focus="strip-maker"]').fill("Late")
    other.page.locator('[data-focus="strip-maker"]').blur()
    told(other, "another tab")
    assert other.page.locator('[data-focus="strip-series"]').input_value() == "Newer"
    assert other.state()["data"]["devices"][0]["maker"] != "Late"


def test_entries_that_are_alike_are_accepted_together(bench: Workbench) -> None:
    """Twelve lines, each broken by its printed rating."""
    screen = bench.screen()
    screen.demo("fuse-gg-family")
    screen.read()
    assert len(screen.open_texts) == 12
    screen.page.keyboard.press("n")
    screen.page.locator(".entry.here .answers > button", has_text="reason").click()
    screen.page.get_by_label("Reason").fill("The printed rating stands in the line")
    screen.page.get_by_label("Your name").fill("Ada Reader")
    screen.page.get_by_label("and 11 others like it").check()
    screen.page.get_by_role("button", name="Accept", exact=True).click()
    may_store(screen)
    assert len(screen.state()["data"]["accepted"]) == 1


def test_reading_is_stopped_and_goes_on(bench: Workbench) -> None:
    screen = bench.screen()
    screen.drop("stopped.png", (SHEETS / "rcd-general.png").read_bytes())
    screen.page.get_by_role("button", name="Stop").click()
    screen.page.get_by_text("Reading was stopped").wait_for()
    assert screen.state()["work"]["state"] == "cancelled"
    screen.page.get_by_role("button", name="Read on").click()
    screen.settled()
    assert screen.state()["work"]["state"] in ("ready", "failed")
