"""A real browser at a real workbench. Skipped with a word where there is none, and never run in CI."""

import base64
import importlib.util
import os
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest

if TYPE_CHECKING:
    from playwright.sync_api import Browser, BrowserContext, Page

CHROMIUM = Path(os.environ.get("CURVELAB_CHROMIUM", "/usr/bin/chromium"))
ARGUMENTS = (
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
)
SHEETS = Path(__file__).parents[2] / "demo_curves" / "sheets"
LONGEST_MS = 60_000
THREADS = dict.fromkeys(("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"), "1")

DROP = """([name, data]) => {
  const bytes = Uint8Array.from(atob(data), (letter) => letter.charCodeAt(0));
  const carried = new DataTransfer();
  carried.items.add(new File([bytes], name));
  for (const type of ["dragenter", "dragover", "drop"]) {
    document.body.dispatchEvent(new DragEvent(type, { bubbles: true, cancelable: true, dataTransfer: carried }));
  }
}"""

PIXEL = """([x, y]) => {
  const view = new URLSearchParams(location.hash.split("?")[1]);
  const box = document.querySelector(".sheet-pane canvas").getBoundingClientRect();
  const scale = Number(view.get("z"));
  const [across, down] = [x - view.get("x"), y - view.get("y")];
  return [box.left + box.width / 2 + across * scale, box.top + box.height / 2 + down * scale];
}"""


def missing() -> str | None:
    """Why there is no browser to test with, or None."""
    if os.environ.get("CI"):
        return "not in CI: a browser is needed"
    if importlib.util.find_spec("playwright") is None:
        return "Playwright is not installed (extra 'browser')"
    return None if CHROMIUM.exists() else f"no Chromium at {CHROMIUM}"


needs_browser = pytest.mark.skipif(missing() is not None, reason=missing() or "")


class Screen:
    """One page at the workbench, with what a person does there."""

    def __init__(self, page: "Page", address: str) -> None:
        self.page = page
        self.address = address
        self.actions = 0
        self.errors: list[str] = []
        page.set_default_timeout(LONGEST_MS)
        page.on("pageerror", lambda error: self.errors.append(str(error)))
        page.on("console", lambda said: self.errors.append(said.text) if said.type == "error" else None)

    def goto(self, place: str = "#/") -> None:
        self.page.goto(f"{self.address}{place}")

    def act(self) -> None:
        """Count what a person has to do."""
        self.actions += 1

    def drop(self, name: str, data: bytes) -> None:
        self.act()
        self.page.evaluate(DROP, [name, base64.b64encode(data).decode()])
        self.page.wait_for_url("**/#/sheet/**")

    def demo(self, name: str) -> None:
        self.act()
        self.page.locator(".demo", has_text=name).first.click()
        self.page.wait_for_url("**/#/sheet/**")

    def read(self) -> None:
        """Wait until the newest worksheet was read."""
        self.page.wait_for_function("() => document.querySelector('.desk')?.dataset.work === 'ready'")

    def settled(self) -> None:
        """Wait until a reading has ended, well or not."""
        self.page.wait_for_function("() => ['ready', 'failed'].includes(document.querySelector('.desk')?.dataset.work)")

    def pixel(self, x: float, y: float) -> tuple[float, float]:
        """Where a place of the sheet is on the screen."""
        self.page.wait_for_function("() => location.hash.includes('z=')")
        across, down = self.page.evaluate(PIXEL, [x, y])
        return across, down

    def click(self, x: float, y: float, **more: Any) -> None:
        self.act()
        self.page.mouse.click(*self.pixel(x, y), **more)

    def told(self, text: str) -> None:
        """Wait until the page says so in passing."""
        self.page.wait_for_function("(text) => document.querySelector('#said').textContent.includes(text)", arg=text)

    def may_store(self) -> None:
        """Wait until nothing keeps the sheet from being stored."""
        self.page.locator(".store-button[aria-disabled=false]").wait_for()

    def place_on(self, curve: int) -> tuple[float, float]:
        """A place well within a traced line."""
        points = self.state()["reading"]["curves"][curve]["points"]
        middle = len(points["x"]) // 3
        return points["x"][middle], points["y"][middle]

    @property
    def open_texts(self) -> list[str]:
        return self.page.locator(".entry-text").all_inner_texts()

    def api(self, path: str) -> Any:
        return self.page.evaluate("(path) => fetch(path).then((answer) => answer.json())", f"/api{path}")

    @property
    def draft(self) -> str:
        return self.page.url.split("#/sheet/")[1].split("?")[0]

    def state(self) -> Any:
        return self.api(f"/drafts/{self.draft}")


class Workbench:
    """A running workbench process with its own library, and a browser beside it."""

    def __init__(self, address: str, process: int, browser: "Browser") -> None:
        self.address = address
        self.process = process
        self.browser = browser
        self.contexts: list[BrowserContext] = []

    def screen(self, place: str = "#/", **look: Any) -> Screen:
        """A page in a browser of its own, as another person has it."""
        context = self.browser.new_context(**{"viewport": {"width": 1280, "height": 800}, **look})
        self.contexts.append(context)
        return self.tab(context, place)

    def tab(self, context: "BrowserContext", place: str = "#/") -> Screen:
        screen = Screen(context.new_page(), self.address)
        screen.goto(place)
        return screen

    def close(self) -> None:
        for context in self.contexts:
            context.close()
        self.contexts.clear()


@pytest.fixture(scope="module")
def chromium() -> Iterator["Browser"]:
    """One browser for a module: its event loop must not outlive it."""
    if (reason := missing()) is not None:
        pytest.skip(reason)
    from playwright.sync_api import sync_playwright  # noqa: PLC0415 - an optional extra

    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=str(CHROMIUM), args=list(ARGUMENTS))
        yield browser
        browser.close()


@pytest.fixture(scope="module")
def served(chromium: "Browser", tmp_path_factory: pytest.TempPathFactory) -> Iterator[Workbench]:
    """A workbench process for one module."""
    library = tmp_path_factory.mktemp("browser") / "firm.sqlite"
    command = [sys.executable, "-m", "curvelab", "workbench", "--library", str(library), "--no-open"]
    with subprocess.Popen(
        command, stdout=subprocess.PIPE, stderr=subprocess.DEVNULL, text=True, env={**os.environ, **THREADS}
    ) as process:
        assert process.stdout is not None
        address = process.stdout.readline().split()[-1]
        yield Workbench(address, process.pid, chromium)
        process.terminate()
        process.stdout.close()


@pytest.fixture
def bench(served: Workbench) -> Iterator[Workbench]:
    """The module's workbench; its pages are closed after each test."""
    yield served
    served.close()


STORE = """async ([demo, author]) => {
  const said = { "X-Curvelab": "1", "Content-Type": "application/json" };
  const ask = async (path, body) => {
    const answer = await fetch(`/api/drafts${path}`, body === undefined ? {} : { method: "POST", headers: said, body });
    if (!answer.ok) throw new Error(`${path}: ${await answer.text()}`);
    return answer.json();
  };
  let state = await ask(`?demo=${demo}`, "");
  while (state.work.state === "reading") state = await ask(`/${state.id}?since=${state.tick}&wait=5`);
  await ask(`/${state.id}/store`, JSON.stringify({ author, note: "" }));
}"""


def stock(bench: Workbench, author: str, *demos: str) -> None:
    """Store demo sheets as another program would, over HTTP."""
    screen = bench.screen()
    for demo in demos:
        screen.page.evaluate(STORE, [demo, author])
    bench.close()
