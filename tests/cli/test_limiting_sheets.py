"""Let-through and cut-off sheets digitised, stored and asked like any other."""

import json
from math import log10
from pathlib import Path

import numpy as np
import pytest

from curvelab.cli.main import run

ROOT = Path(__file__).parents[2]
DEMO = ROOT / "demo_curves" / "sheets" / "mcb-c-let-through.toml"
TRUTH = json.loads((ROOT / "demo_curves" / "truth" / "mcb-c-let-through.json").read_text(encoding="utf-8"))

WORKSHEET = """
format = 1
[sheet]
file = "cut-off.svg"
[axes.current]
unit = "kA"
marks = [ { at = [100, 500], value = 0.1 }, { at = [700, 500], value = 100 } ]
[axes.peak]
unit = "kA"
marks = [ { at = [100, 500], value = 0.1 }, { at = [100, 50], value = 100 } ]
[[curves]]
edge = "slow"
meaning = "operating"
through = [[400, %(y)s]]
[[devices]]
key = "hall-gg63"
kind = "fuse"
characteristic = "gG"
rated_current_a = 63
"""


def place(current_a: float, peak_a: float) -> tuple[float, float]:
    return 100 + 200 * log10(current_a / 100), 500 - 150 * log10(peak_a / 100)


def peak_a(current_a: float) -> float:
    """Cut-off of an invented fuse: it grows with the cube root of the prospective current."""
    return 900.0 * (current_a / 1000.0) ** (1 / 3)


def cut_off_sheet() -> str:
    grid = [
        f'<path d="M{x:.3f} 50V500" stroke="#999" stroke-width="0.5" fill="none"/>'
        for x in (place(base * digit, 100)[0] for base in (100, 1000, 10_000) for digit in range(1, 10))
    ]
    grid += [
        f'<path d="M100 {y:.3f}H700" stroke="#999" stroke-width="0.5" fill="none"/>'
        for y in (place(100, base * digit)[1] for base in (100, 1000, 10_000) for digit in range(1, 10))
    ]
    places = [place(current, peak_a(current)) for current in np.geomspace(600, 60_000, 40)]
    line = "L".join(f"{x:.4f} {y:.4f}" for x, y in places)
    return (
        '<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 800 560" width="800" height="560">'
        f'{"".join(grid)}<path d="M100 50H700V500H100Z" stroke="#000" fill="none"/>'
        f'<path d="M{line}" stroke="#a02020" stroke-width="1.5" fill="none"/></svg>'
    )


def asked(capsys: pytest.CaptureFixture[str], words: str) -> dict:
    capsys.readouterr()
    run([*words.split(), "--json", "-"])
    return json.loads(capsys.readouterr().out)


def test_a_let_through_sheet_scanned_is_asked_at_any_current(tmp_path, monkeypatch, capsys):
    monkeypatch.setenv("CURVELAB_LIBRARY", str(tmp_path / "firm.sqlite"))
    assert run(["store", str(DEMO)]) == 0
    for curve in TRUTH["plots"][0]["curves"]:
        currents = np.array([320.0, 500.0, 900.0, 1500.0, 3000.0, 5500.0])
        truth = np.exp(np.interp(np.log(currents), np.log(curve["current"]), np.log(curve["value"])))
        answer = asked(capsys, f"query {curve['devices'][0]} --current {' '.join(map(str, currents))}")
        for told, true in zip(answer["answers"], truth, strict=True):
            found = told["let_through"]["slow"]
            assert found["status"] == "value"
            # A third of a pixel at 594 px a decade of energy; printed values lie inside the interval, widened by half.
            assert found["value"] == pytest.approx(true, rel=1.3e-3)
    beyond = asked(capsys, f"query {TRUTH['plots'][0]['curves'][0]['devices'][0]} --current 250")
    assert beyond["answers"][0]["let_through"]["slow"]["status"] == "not_covered"


def test_a_cut_off_sheet_is_asked_at_any_current(tmp_path, monkeypatch, capsys):
    monkeypatch.setenv("CURVELAB_LIBRARY", str(tmp_path / "firm.sqlite"))
    middle = place(10 ** (0.5 + 3), peak_a(10**3.5))
    assert middle[0] == pytest.approx(400)
    (tmp_path / "cut-off.svg").write_text(cut_off_sheet(), encoding="utf-8")
    (tmp_path / "cut-off.toml").write_text(WORKSHEET % {"y": f"{middle[1]:.2f}"}, encoding="utf-8")
    assert run(["store", str(tmp_path / "cut-off.toml")]) == 0
    answer = asked(capsys, "query hall-gg63 --current 1000 20000 90000")
    peaks = [each["peak"]["slow"] for each in answer["answers"]]
    assert [each["status"] for each in peaks] == ["value", "value", "not_covered"]
    assert [each["value"] for each in peaks[:2]] == pytest.approx([900.0, peak_a(20_000.0)], rel=2e-3)
    assert answer["answers"][0]["let_through"] is None
