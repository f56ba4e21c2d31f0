"""The library in a real browser: finding while typing, side by side, review by a second person, evidence, asking."""

from collections.abc import Iterator

import pytest

from tests.workbench.browser import Screen, Workbench, needs_browser, stock

pytestmark = needs_browser

READER, REVIEWER = "Ada Reader", "Ben Reviewer"


@pytest.fixture(scope="module")
def library(served: Workbench) -> Workbench:
    """Seven devices of one sheet and one that was typed, all stored by the same person."""
    stock(served, READER, "mcb-b", "handbook-b32")
    return served


@pytest.fixture
def screen(library: Workbench) -> Iterator[Screen]:
    yield library.screen("#/library")
    library.close()


def keys(screen: Screen) -> list[str]:
    return screen.page.locator("tbody th a").all_inner_texts()


def test_typing_filters_and_the_address_keeps_it(screen: Screen) -> None:
    screen.page.locator("tbody tr").first.wait_for()
    assert len(keys(screen)) == 8
    screen.page.get_by_label("Find").fill("handbook")
    screen.page.wait_for_function("() => document.querySelectorAll('tbody tr').length === 1")
    screen.page.reload()
    screen.page.locator("tbody tr").first.wait_for()
    assert keys(screen) == ["riverside-handbook-b32"]
    screen.page.get_by_label("Find").fill("no such thing")
    screen.page.get_by_text("No device is like that").wait_for()


def test_columns_sort_both_ways(screen: Screen) -> None:
    screen.page.locator("tbody tr").first.wait_for()
    rated = "tbody td.number:nth-of-type(4)"
    for _ in range(2):
        screen.page.get_by_role("button", name="Rated").click()
        screen.page.wait_for_timeout(300)
    assert screen.page.get_by_role("columnheader", name="Rated").get_attribute("aria-sort") == "descending"
    assert screen.page.locator(rated).first.inner_text() == "40\u00a0A"


def test_two_devices_stand_side_by_side_with_what_differs(screen: Screen) -> None:
    for key in ("riverside-b6", "riverside-b40"):
        screen.page.get_by_label(f"Side by side: {key}", exact=True).check()
    words = screen.page.locator(".comparison-words")
    words.locator("tbody tr").first.wait_for()
    assert "riverside-b6 clears before riverside-b40 may act" in words.inner_text()
    screen.page.reload()
    words.locator("tbody tr").first.wait_for()
    assert screen.page.get_by_label("Side by side: riverside-b40", exact=True).is_checked()
    assert screen.errors == []


def test_who_stored_may_not_release_and_a_second_person_may(library: Workbench, screen: Screen) -> None:
    screen.goto("#/device/riverside-b16")
    screen.page.get_by_label("Reviewed by").fill(READER)
    screen.page.get_by_role("button", name="Mark as checked").click()
    screen.page.locator(".device-head .state.checked").wait_for()
    screen.page.get_by_label("Reviewed by").fill(READER)
    screen.page.get_by_role("button", name="Release").click()
    screen.page.locator("#refused.shown").wait_for()
    assert screen.page.locator(".device-head .state").inner_text() == "checked"
    second = library.screen("#/device/riverside-b16")
    second.page.get_by_label("Reviewed by").fill(REVIEWER)
    second.page.get_by_label("Reason or note").fill("Compared with the sheet")
    second.page.get_by_role("button", name="Release").click()
    second.page.locator(".device-head .state.released").wait_for()
    assert f"{REVIEWER} released revision 1" in second.page.locator(".happened").inner_text()
    screen.page.reload()
    screen.page.locator(".device-head .state.released").wait_for()


def test_the_evidence_is_shown_and_opens_on_the_desk(screen: Screen) -> None:
    screen.goto("#/device/riverside-b32@1")
    picture = screen.page.locator("img.overlay")
    picture.wait_for()
    screen.page.wait_for_function("() => document.querySelector('img.overlay').naturalWidth > 500")
    screen.page.get_by_role("button", name="Open on the desk").click()
    screen.page.wait_for_url("**/#/sheet/**")
    screen.read()
    assert screen.state()["data"]["axes"]["current"]["marks"]


def test_a_device_is_asked_and_answers_with_its_interval(screen: Screen) -> None:
    screen.goto("#/device/riverside-b32")
    screen.page.get_by_label("Current for, s").fill("0.4")
    screen.page.get_by_label("Current for, s").press("Enter")
    answer = screen.page.locator(".answer").first
    answer.locator("dd").first.wait_for()
    assert "151.0" in answer.inner_text()


def test_exports_are_files(screen: Screen) -> None:
    screen.goto("#/device/riverside-b32")
    with screen.page.expect_download() as kept:
        screen.page.get_by_role("link", name="Points as a table (CSV)").click()
    assert kept.value.suggested_filename.endswith(".csv")


def test_questions_of_a_calculator_are_answered_beside_the_device(screen: Screen) -> None:
    """0.95 x 230 V / 151 A, as the practice has it."""
    screen.goto("#/device/riverside-b32")
    screen.page.get_by_text("Disconnects a fault in time?").click()
    screen.page.get_by_label("Loop, Ω").fill("1.30")
    screen.page.get_by_label("Loop, Ω").press("Enter")
    answer = screen.page.locator("details[open] .answer")
    answer.locator(".finding").first.wait_for()
    assert "1.45\u00a0Ω" in answer.inner_text()
    assert "meets" in answer.inner_text()
