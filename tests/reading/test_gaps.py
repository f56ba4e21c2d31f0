"""A line that something hides is said to be hidden, where it is."""

import shutil
from pathlib import Path

import curvelab
from curvelab.worksheets.read import read_worksheet

SHEETS = Path(__file__).parents[2] / "demo_curves" / "sheets"


def test_a_bend_left_out_is_a_gap_with_its_place(tmp_path: Path) -> None:
    shutil.copy(SHEETS / "mcb-b.png", tmp_path)
    text = (SHEETS / "mcb-b.toml").read_text(encoding="utf-8")
    slow = read_worksheet(SHEETS / "mcb-b.toml").curves[1]
    assert slow.edge == "slow"
    x, y = slow.through[0]
    hidden = f"avoid = [[{x - 60}, {y + 90}, {x + 120}, {y + 260}]]"
    before, _, after = text.rpartition("through = ")
    (tmp_path / "mcb-b.toml").write_text(f"{before}{hidden}\nthrough = {after}", encoding="utf-8")
    whole, part = curvelab.digitise(SHEETS / "mcb-b.toml"), curvelab.digitise(tmp_path / "mcb-b.toml")
    assert "gap" not in [warning.code for warning in whole.warnings]
    (gap,) = [warning for warning in part.warnings if warning.code == "gap"]
    assert gap.at is not None
    assert abs(gap.at[1] - (y + 175)) < 15
    assert "slow" in gap.text
    assert len(part.curves[1].curve.parts) == 2
