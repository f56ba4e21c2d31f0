"""``python -m tests.pictures``: draws the pictures of docs/ anew, from the demo sheets, with the program itself."""

import io
import os
import shutil
import subprocess
import sys
import tempfile
from pathlib import Path

from PIL import Image

from curvelab.cli.main import run
from tests.workbench.browser import ARGUMENTS, CHROMIUM, Screen, missing

ROOT = Path(__file__).parents[1]
PICTURES = ROOT / "docs" / "pictures"
WIDEST = 1000


def main() -> int:
    """Overlay and check by the commands of the guide; the workbench where there is a browser."""
    PICTURES.mkdir(exist_ok=True)
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        for kind in ("png", "toml"):
            shutil.copy(ROOT / "demo_curves" / "sheets" / f"mcb-b.{kind}", folder)
        os.environ["CURVELAB_LIBRARY"] = str(folder / "firm.sqlite")
        run(["digitise", str(folder / "mcb-b.toml"), "--picture", str(folder / "overlay.png")])
        run(["store", str(folder / "mcb-b.toml")])
        run(["check", "riverside-b32", "--picture", str(folder / "check.png")])
        for picture in ("overlay.png", "check.png"):
            _keep((folder / picture).read_bytes(), picture)
        if (reason := missing()) is None:
            _keep(_workbench(folder / "firm.sqlite"), "workbench.png")
        else:
            print(f"The picture of the workbench stays as it is: {reason}")
    return 0


def _workbench(library: Path) -> bytes:
    """A demo sheet on the page, the pointer on its slow edge."""
    from playwright.sync_api import sync_playwright  # noqa: PLC0415 - an optional extra

    command = [sys.executable, "-m", "curvelab", "workbench", "--library", str(library), "--no-open"]
    with subprocess.Popen(command, stdout=subprocess.PIPE, text=True) as process, sync_playwright() as playwright:
        assert process.stdout is not None
        address = process.stdout.readline().split()[-1]
        browser = playwright.chromium.launch(executable_path=str(CHROMIUM), args=list(ARGUMENTS))
        screen = Screen(browser.new_page(viewport={"width": 1440, "height": 900}), address)
        screen.goto()
        screen.demo("mcb-b")
        screen.read()
        screen.page.mouse.move(*screen.pixel(520, 620))
        screen.page.wait_for_timeout(1000)
        picture = screen.page.screenshot()
        browser.close()
        process.terminate()
    return picture


def _keep(picture: bytes, name: str) -> None:
    """A picture small enough for a page of text."""
    with Image.open(io.BytesIO(picture)) as image:
        image.thumbnail((WIDEST, 2 * WIDEST))
        image.convert("RGB").quantize(64).save(PICTURES / name, optimize=True)


if __name__ == "__main__":
    sys.exit(main())
