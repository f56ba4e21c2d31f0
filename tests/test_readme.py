"""What the README shows works as it says."""

import re
import shutil
from pathlib import Path

import curvelab
from curvelab.cli.main import COMMANDS
from curvelab.devices.device import Device

ROOT = Path(__file__).parents[1]
README = (ROOT / "README.md").read_text(encoding="utf-8")


def first_block_after(heading: str) -> str:
    found = re.search(rf"^## {heading}$.*?^```[a-z]*\n(.*?)\n```$", README, re.MULTILINE | re.DOTALL)
    assert found, heading
    return found.group(1)


def test_the_worksheet_shown_reads_its_sheet(tmp_path: Path) -> None:
    shutil.copy(ROOT / "demo_curves" / "sheets" / "mcb-b.png", tmp_path)
    (tmp_path / "mcb-b.toml").write_text(first_block_after("From a sheet to a query"), encoding="utf-8")
    reading = curvelab.digitise(tmp_path / "mcb-b.toml")
    trips = Device(reading.devices[0]).trip_current(0.4).trips
    shown = re.search(r"^0\.4 s  ([\d.]+) A", README, re.MULTILINE)
    # the magnetic step of the sheet is drawn at 4.72 In, see demo_curves/truth/mcb-b.json
    assert abs(trips.value / (4.72 * 32) - 1) < 2e-3
    assert shown
    assert abs(trips.value / float(shown.group(1)) - 1) < 1e-3


def test_run_and_test_are_one_command_line_each() -> None:
    for heading in ("Run it", "Test it"):
        assert len(first_block_after(heading).splitlines()) == 1


def test_every_command_shown_exists() -> None:
    blocks = README.split("```")[1::2]
    shown = {word for block in blocks for word in re.findall(r"^curvelab (\w+)", block, re.MULTILINE)}
    assert shown
    assert shown <= set(COMMANDS)
