"""A page of 60 megapixels in a real browser, seen whole and to the single pixel, and the memory of the process."""

import io
from pathlib import Path

import numpy as np
import pytest
from PIL import Image

from tests.workbench.browser import SHEETS, Workbench, needs_browser

pytestmark = needs_browser

SIDE = 7_746
"""60 megapixels."""
MOST_MEMORY = 600 * 1024**2
LONGEST_FRAME_MS = 500
"""Without a graphics card, on a busy machine; a stall of a zoom is never longer."""

FRAMES = """async () => {
  let last = performance.now();
  let longest = 0;
  window.stopWatching = false;
  window.watched = new Promise((done) => {
    const frame = (now) => {
      longest = Math.max(longest, now - last);
      last = now;
      window.stopWatching ? done(longest) : requestAnimationFrame(frame);
    };
    requestAnimationFrame(frame);
  });
}"""

INK = """([x, y]) => {
  const canvas = document.querySelector(".sheet-pane canvas");
  const ratio = canvas.width / canvas.getBoundingClientRect().width;
  return [...canvas.getContext("2d").getImageData(x * ratio, y * ratio, 1, 1).data].slice(0, 3);
}"""


def large_page() -> bytes:
    """Paper with one black pixel in the middle and a coarse grid."""
    page = np.full((SIDE, SIDE), 255, dtype=np.uint8)
    page[::500, :] = 170
    page[:, ::500] = 170
    page[SIDE // 2 + 100, SIDE // 2 + 100] = 0
    held = io.BytesIO()
    Image.fromarray(page).save(held, "PNG", compress_level=1)
    return held.getvalue()


def memory_of(process: int) -> int:
    """Resident bytes."""
    for line in Path(f"/proc/{process}/status").read_text(encoding="ascii").splitlines():
        if line.startswith("VmRSS"):
            return int(line.split()[1]) * 1024
    raise AssertionError("the process does not say its memory")


def test_sixty_megapixels_are_seen_to_the_single_pixel(bench: Workbench) -> None:
    screen = bench.screen()
    screen.drop("large.png", large_page())
    screen.page.wait_for_function("() => location.hash.includes('z=')")
    screen.page.wait_for_timeout(500)
    place = SIDE // 2 + 100
    screen.page.evaluate(FRAMES)
    for _ in range(4):
        screen.page.mouse.move(*screen.pixel(place, place))
        screen.page.mouse.wheel(0, -1200)
        screen.page.wait_for_timeout(600)
    longest = screen.page.evaluate("() => { window.stopWatching = true; return window.watched; }")
    screen.page.wait_for_timeout(1500)
    x, y = screen.pixel(place, place)
    box = screen.page.locator('[data-focus="sheet"]').bounding_box()
    assert box is not None
    inside = (x - box["x"], y - box["y"])
    assert max(screen.page.evaluate(INK, inside)) < 60
    assert min(screen.page.evaluate(INK, (inside[0] + 60, inside[1]))) > 180
    assert longest < LONGEST_FRAME_MS


@pytest.mark.skipif(not Path("/proc/self/status").exists(), reason="memory is read from /proc")
def test_memory_with_three_pages_open(bench: Workbench) -> None:
    for demo in ("mcb-b", "rcd-general", "fuse-gg80-both"):
        screen = bench.screen()
        screen.demo(demo)
        screen.read()
        assert (SHEETS / f"{demo}.png").exists()
    assert memory_of(bench.process) <= MOST_MEMORY
