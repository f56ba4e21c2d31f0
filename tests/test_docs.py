"""What the guide shows works as it says, in its order, and every link of the docs leads somewhere."""

import re
import shlex
import shutil
from pathlib import Path

import pytest

from curvelab.cli.main import run
from curvelab.worksheets import keys

ROOT = Path(__file__).parents[1]
GUIDE = (ROOT / "docs" / "guide.md").read_text(encoding="utf-8")
PAGES = [ROOT / "README.md", ROOT / "DEVELOPERS.md", ROOT / "database" / "README.md", *(ROOT / "docs").glob("*.md")]


def blocks(language: str) -> list[str]:
    found = re.findall(r"^```(\w*)\n(.*?)\n```$", GUIDE, re.MULTILINE | re.DOTALL)
    return [block for name, block in found if name == language]


def test_the_guide_from_sheet_to_shared_library(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    monkeypatch.setenv("CURVELAB_LIBRARY", str(tmp_path / "firm.sqlite"))
    sheets = ROOT / "demo_curves" / "sheets"
    shutil.copy(sheets / "mcb-b.png", tmp_path)
    (tmp_path / "datasheets").mkdir()
    shutil.copy(sheets / "handbook-b32.toml", tmp_path / "datasheets")
    (device,) = blocks("toml")
    commands = [shlex.split(line) for block in blocks("") for line in block.splitlines()]
    assert len(commands) > 12
    for command in commands:
        assert command[0] == "curvelab"
        if command[1] == "check":
            _describe(tmp_path / "mcb-b.toml", device)
        assert run(command[1:]) == 0, command
    assert {path.name for path in tmp_path.iterdir()} >= {
        "mcb-b-overlay.png", "mcb-b-check.png", "two.png", "riverside-b32.pdf", "devices.jsonl", "points.csv",
        "copy.sqlite", "evidence", "results",
    }  # fmt: skip


def _describe(worksheet: Path, device: str) -> None:
    """Put the device of the guide in place of the one proposed."""
    text = worksheet.read_text(encoding="utf-8")
    text = re.sub(r'(?m)^device = ".*"\n', "", text[: text.index("[[devices]]")])
    worksheet.write_text(text + device, encoding="utf-8")


@pytest.mark.parametrize("page", PAGES, ids=lambda page: str(page.relative_to(ROOT)))
def test_every_link_leads_somewhere(page: Path) -> None:
    text = page.read_text(encoding="utf-8")
    links = [link for link in re.findall(r"\]\(([^)#\s]+)[^)]*\)", text) if "://" not in link]
    assert [link for link in links if not (page.parent / link).exists()] == []


def test_every_key_of_the_worksheet_is_described() -> None:
    page = (ROOT / "docs" / "worksheet.md").read_text(encoding="utf-8")
    known = {key for name in dir(keys) if name.isupper() for key in getattr(keys, name)}
    assert known
    assert {key for key in known if not re.search(rf"\b{key}\b", page)} == set()
