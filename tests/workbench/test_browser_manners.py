"""The page's manners in a real browser: for everybody; nothing leaves the machine."""

import importlib.util
import re
from collections.abc import Iterator

import pytest

from tests.workbench.browser import SHEETS, Screen, Workbench, needs_browser, stock

pytestmark = needs_browser

HOSTILE = '"><img src=x onerror="document.title=1">'
GRAVE = ("serious", "critical")
needs_rules = pytest.mark.skipif(
    importlib.util.find_spec("axe_playwright_python") is None, reason="no rule engine (extra 'browser')"
)
VIEWS = ("start", "desk", "library", "device", "compare", "worksheet", "keys")


@pytest.fixture(scope="module")
def library(served: Workbench) -> Workbench:
    stock(served, "Ada Reader", "mcb-b")
    return served


@pytest.fixture
def screen(library: Workbench) -> Iterator[Screen]:
    yield library.screen()
    library.close()


def show(screen: Screen, view: str) -> None:
    """Go to a view and wait until it is whole."""
    page = screen.page
    if view == "start":
        page.locator(".demo").first.wait_for()
    elif view in ("desk", "worksheet", "keys"):
        screen.demo("mcb-loose-magnetic")
        screen.read()
        page.keyboard.press({"desk": "n", "worksheet": "w", "keys": "?"}[view])
    elif view == "device":
        screen.goto("#/device/riverside-b32")
        page.locator(".finding").first.wait_for()
    else:
        screen.goto("#/library?with=riverside-b6,riverside-b40" if view == "compare" else "#/library")
        page.locator(".comparison-words tbody tr" if view == "compare" else "tbody tr").first.wait_for()


@pytest.mark.parametrize("scheme", ["light", "dark"])
@needs_rules
@pytest.mark.parametrize("view", VIEWS)
def test_a_rule_engine_finds_no_serious_barrier(library: Workbench, view: str, scheme: str) -> None:
    """The rules of axe-core for WCAG 2.2 at levels A and AA, https://github.com/dequelabs/axe-core."""
    from axe_playwright_python.sync_playwright import Axe  # noqa: PLC0415 - an optional extra

    screen = library.screen(color_scheme=scheme)
    show(screen, view)
    tags = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa", "best-practice"]
    found = Axe().run(screen.page, options={"runOnly": tags}).response["violations"]
    told = [(each["id"], each["impact"], [node["html"][:120] for node in each["nodes"][:3]]) for each in found]
    library.close()
    assert [each for each in told if each[1] in GRAVE] == []
    assert told == []


def test_no_request_leaves_and_the_policy_is_kept(library: Workbench) -> None:
    screen = library.screen()
    asked: list[str] = []
    screen.page.on("request", lambda request: asked.append(request.url))
    for view in ("start", "desk", "device", "compare"):
        screen.goto()
        show(screen, view)
    library.close()
    assert asked
    assert [url for url in asked if not url.startswith((library.address, "blob:", "data:"))] == []
    assert screen.errors == []


def test_what_a_file_says_is_text_and_nothing_else(screen: Screen) -> None:
    worksheet = (SHEETS / "handbook-b32.toml").read_text(encoding="utf-8")
    hostile = re.sub(r'title = ".*"', f"title = '{HOSTILE}'", worksheet)
    screen.drop(f"{HOSTILE}.toml", hostile.encode())
    screen.read()
    for name in ("maker", "series"):
        box = screen.page.locator(f'[data-focus="strip-{name}"]')
        box.fill(HOSTILE)
        box.press("Tab")
    screen.page.get_by_label("Stored by").fill(HOSTILE)
    screen.page.get_by_role("button", name="Store").click()
    screen.page.locator(".stored a").first.click()
    screen.page.locator(".happened li").first.wait_for()
    assert HOSTILE in screen.page.locator(".happened").inner_text()
    for place in ("#/library", "#/"):
        screen.goto(place)
        screen.page.locator("main li, main tr").first.wait_for()
    assert screen.page.locator("img[src=x]").count() == 0
    assert screen.page.title() != "1"
    assert screen.errors == []


def test_a_line_is_said_by_keys_alone(screen: Screen) -> None:
    screen.demo("mcb-b")
    screen.read()
    screen.page.locator('[data-focus="sheet"]').focus()
    for key, times in (("ArrowRight", 6), ("ArrowUp", 4)):
        for _ in range(times):
            screen.page.keyboard.press(f"Shift+{key}")
    assert "In" in screen.page.locator("#spoken").inner_text()
    before = screen.state()["version"]
    screen.page.keyboard.press("Enter")
    screen.page.wait_for_function("() => document.querySelector('#said').textContent.includes('Undo')")
    assert screen.state()["version"] == before + 1


def test_focus_is_seen_wherever_the_tab_key_leads(screen: Screen) -> None:
    screen.demo("mcb-loose-magnetic")
    screen.read()
    seen = set()
    for _ in range(30):
        screen.page.keyboard.press("Tab")
        name, outline = screen.page.evaluate(
            """() => { const at = document.activeElement; const look = getComputedStyle(at);
              return [at.dataset.focus ?? at.id ?? at.textContent, look.outlineStyle + look.outlineWidth]; }"""
        )
        seen.add(name)
        assert outline != "none0px", name
    assert {"sheet", "strip-key"} <= seen


def test_single_keys_can_be_turned_off(screen: Screen) -> None:
    """WCAG 2.2, success criterion 2.1.4."""
    screen.demo("mcb-b")
    screen.read()
    screen.page.keyboard.press("?")
    screen.page.get_by_label("Single keys act").uncheck()
    screen.page.keyboard.press("Escape")
    screen.page.keyboard.press("w")
    assert screen.page.locator(".worksheet-text").count() == 0
    screen.page.get_by_role("button", name="Worksheet").click()
    assert screen.page.locator(".worksheet-text").count() == 1


@pytest.mark.parametrize("width", [1280, 1920, 3840])
def test_nothing_is_cut_off_at_any_width(library: Workbench, width: int) -> None:
    screen = library.screen(viewport={"width": width, "height": width * 9 // 16})
    for view in ("start", "desk", "device", "compare"):
        screen.goto()
        show(screen, view)
        assert screen.page.evaluate("() => document.documentElement.scrollWidth <= innerWidth"), view
    library.close()
