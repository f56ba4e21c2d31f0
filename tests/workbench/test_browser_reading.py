"""Reading a sheet in a real browser: from dropping it to a stored device, putting right, settling, never losing."""

import re
import tomllib
from typing import Any

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
    screen.may_store()
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
    screen.may_store()
    marks = screen.state()["data"]["axes"]["current"]["marks"]
    assert right in [{"at": each["at"], "value": each["value"]} for each in marks]


def test_open_entries_are_settled_by_keys_alone(bench: Workbench) -> None:
    screen = bench.screen()
    screen.demo("mcb-loose-magnetic")
    screen.read()
    assert screen.open_texts
    accept_what_is_open(screen)
    assert screen.page.locator(".store-button").get_attribute("aria-disabled") == "false"


def with_gaps(route: Any) -> None:
    """The state as it is, with three gaps open on one line."""
    answer = route.fetch()
    gaps = [gap_at(x) for x in (500.0, 600.0, 700.0)]
    route.fulfill(response=answer, json={**answer.json(), "open": gaps, "can_store": False})


def gap_at(x: float) -> dict[str, Any]:
    at = [x, 1000.0]
    accept = {
        "text": "Accept it, with a reason",
        "asks": "reason",
        "change": {"kind": "accept", "code": "gap", "at": at},
    }
    told = {"id": str(x), "code": "gap", "text": "The line was not seen here", "kind": "gap", "curve": 0, "box": None}
    return {**told, "at": at, "answers": [accept]}


def test_entries_that_are_alike_are_accepted_together(bench: Workbench) -> None:
    """An acceptance without a place holds for all of its code."""
    screen = bench.screen()
    screen.demo("mcb-b")
    screen.read()
    screen.page.route(re.compile(r"/api/drafts/\w+(\?.*)?$"), with_gaps)
    screen.page.reload()
    screen.page.locator(".entry").nth(2).wait_for()
    screen.page.keyboard.press("n")
    screen.page.locator(".entry.here .answers > button").click()
    screen.page.get_by_label("Reason").fill("The printed rating stands in the line")
    screen.page.get_by_label("Your name").fill("Ada Reader")
    screen.page.get_by_label("and 2 others like it").check()
    screen.page.get_by_role("button", name="Accept", exact=True).click()
    screen.told("Accepted")
    screen.page.unroute_all(behavior="ignoreErrors")
    (accepted,) = screen.state()["data"]["accepted"]
    assert accepted["code"] == "gap"
    assert "place" not in accepted


def test_reading_is_stopped_and_goes_on(bench: Workbench) -> None:
    screen = bench.screen()
    screen.drop("stopped.png", (SHEETS / "rcd-general.png").read_bytes())
    screen.page.get_by_role("button", name="Stop").click()
    screen.page.get_by_text("Reading was stopped").wait_for()
    assert screen.state()["work"]["state"] == "cancelled"
    screen.page.get_by_role("button", name="Read on").click()
    screen.settled()
    assert screen.state()["work"]["state"] in ("ready", "failed")
