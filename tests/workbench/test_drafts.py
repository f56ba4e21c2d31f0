"""Drafts over HTTP: from a sheet to a stored device, corrected, undone, reloaded, by two at once."""

import io
import json
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from PIL import Image
from starlette.testclient import TestClient

import curvelab
from curvelab.paths import shipped
from curvelab.reading.as_json import reading_json
from tests.workbench.served import changed, opened, read_through, workbench

VECTOR = "vector/mcb-b"
SHEETS = shipped("demo_curves") / "sheets"


def test_a_demo_sheet_is_read_stored_and_found(client: TestClient) -> None:
    state = opened(client, VECTOR)
    assert state["work"]["state"] == "ready"
    assert state["open"] == []
    assert state["can_store"]
    older = {"author": "Ida Brook", "base_version": state["version"] - 1}
    assert client.post(f"/api/drafts/{state['id']}/store", json=older).status_code == 409
    answer = client.post(f"/api/drafts/{state['id']}/store", json={"author": "Ida Brook", "note": "first"})
    assert {"key": "riverside-b32", "revision": 1, "changed": True} in answer.json()["devices"]
    listed = client.get("/api/devices", params={"text": "riverside", "rated_current": 32}).json()
    (row,) = listed["devices"]
    assert (row["key"], row["author"], row["revisions"], row["state"]) == ("riverside-b32", "Ida Brook", 1, "draft")


def test_what_is_stored_is_what_the_command_line_stores(client: TestClient, tmp_path: Path) -> None:
    """The draft's folder holds a worksheet that gives the same reading, byte for byte but for the file's place."""
    state = opened(client, VECTOR)
    (worksheet,) = tmp_path.glob("firm.sqlite.drafts/*/worksheet.toml")
    assert worksheet.read_text() == state["worksheet"]
    told = reading_json(curvelab.digitise(worksheet))
    points = told["bands"][0]["fast"]["parts"][0]["time"]
    shown = state["reading"]["bands"][0]["fast"]["parts"][0]["time"]
    np.testing.assert_allclose(shown, points, rtol=1e-6)


def test_a_bare_upload_is_read_by_itself_and_says_what_is_open(client: TestClient) -> None:
    data = (SHEETS / "vector" / "mcb-b.pdf").read_bytes()
    answer = client.post("/api/drafts", params={"name": "C:\\fakepath\\my sheet.pdf"}, content=data)
    state = read_through(client, answer.json())
    assert state["name"] == "my sheet.pdf"
    assert state["sheet"]["unit"] == "pt"
    codes = [entry["code"] for entry in state["open"]]
    assert "device-read" in codes
    assert not state["can_store"]
    refused = client.post(f"/api/drafts/{state['id']}/store", json={"author": "Ida Brook"})
    assert refused.status_code == 400


def test_undo_and_redo_walk_through_worksheets(client: TestClient) -> None:
    state = opened(client, VECTOR)
    first = state["worksheet"]
    second = changed(client, state, kind="remove-curve", curve=0)
    assert len(second["data"]["curves"]) == 1
    back = changed(client, second, kind="undo")
    assert back["worksheet"] == first
    assert back["can_redo"]
    again = changed(client, back, kind="redo")
    assert again["worksheet"] == second["worksheet"]
    assert [step["text"] for step in again["history"]] == ["As it was opened", "Line 1 struck out"]
    assert again["version"] == state["version"] + 3


def test_a_change_on_an_older_state_is_refused(client: TestClient) -> None:
    """Two tabs: the second one's change does not overwrite the first one's."""
    state = opened(client, VECTOR)
    changed(client, state, kind="set-device", device=0, fields={"maker": "Millrace"})
    body = {
        "base_version": state["version"],
        "change": {"kind": "set-device", "device": 0, "fields": {"maker": "Weir"}},
    }
    answer = client.post(f"/api/drafts/{state['id']}/changes", json=body)
    assert answer.status_code == 409
    assert answer.json()["version"] == state["version"] + 1
    assert "Millrace" in client.get(f"/api/drafts/{state['id']}").json()["worksheet"]


def test_a_change_that_cannot_be_writes_nothing(client: TestClient) -> None:
    state = opened(client, VECTOR)
    for change in (
        {"kind": "remove-curve", "curve": 9},
        {"kind": "set-device", "device": 0, "fields": {"kind": "toaster"}},
        {"kind": "mark", "axis": "current", "at": [1, 2], "value": "a lot"},
        {"kind": "worksheet", "text": "format = 1\n[sheet]\nfile = '/etc/passwd'"},
        {"kind": "worksheet", "text": "format = 1\n[sheet]\nfile = 'other.png'"},
        {"kind": "accept", "code": "gap", "reason": " ", "name": "Ida"},
        {"kind": "redo"},
    ):
        body = {"base_version": state["version"], "change": change}
        answer = client.post(f"/api/drafts/{state['id']}/changes", json=body)
        assert answer.status_code == 400, change
        assert answer.json()["error"]["problem"]
    assert client.get(f"/api/drafts/{state['id']}").json()["version"] == state["version"]


def test_a_failed_reading_is_said_and_undone(client: TestClient) -> None:
    state = opened(client, VECTOR)
    state = changed(client, state, kind="set-curve", curve=0, fields={"through": [[1.0, 1.0]]})
    assert state["work"]["state"] == "failed"
    (entry,) = state["open"]
    assert entry["code"] == "failed"
    assert state["reading"] is not None, "the last good reading stays to be seen"
    assert state["stale"]
    state = changed(client, state, **entry["answers"][0]["change"])
    assert state["can_store"]


def test_drafts_outlive_the_process(tmp_path: Path) -> None:
    library = tmp_path / "firm.sqlite"
    with workbench(library) as client:
        state = opened(client, VECTOR)
        state = changed(client, state, kind="set-device", device=0, fields={"maker": "Millrace"})
    with workbench(library) as client:
        (listed,) = client.get("/api/drafts").json()
        assert listed["name"] == "mcb-b.pdf"
        again = read_through(client, client.get(f"/api/drafts/{listed['id']}").json())
        assert again["worksheet"] == state["worksheet"]
        assert again["can_undo"]
        undone = changed(client, again, kind="undo")
        assert "Millrace" not in undone["worksheet"]


def test_a_draft_put_away_can_be_brought_back(client: TestClient) -> None:
    state = opened(client, VECTOR)
    assert client.delete(f"/api/drafts/{state['id']}").status_code == 200
    assert client.get(f"/api/drafts/{state['id']}").status_code == 404
    assert client.get("/api/drafts").json() == []
    back = client.post(f"/api/drafts/{state['id']}/restore").json()
    assert back["worksheet"] == state["worksheet"]


def test_a_stored_reading_is_opened_again(client: TestClient) -> None:
    state = opened(client, VECTOR)
    client.post(f"/api/drafts/{state['id']}/store", json={"author": "Ida Brook"})
    again = client.post("/api/drafts", params={"device": "riverside-b32@1"})
    assert read_through(client, again.json())["worksheet"] == state["worksheet"]


def test_a_worksheet_without_a_sheet_is_a_draft_too(client: TestClient) -> None:
    state = opened(client, "handbook-b32")
    assert state["sheet"] is None
    assert state["can_store"] or state["open"]
    text = (SHEETS / "isolator.toml").read_bytes()
    answer = client.post("/api/drafts", params={"name": "isolator.toml"}, content=text)
    assert answer.status_code == 201


def test_tiles_are_the_sheet(client: TestClient) -> None:
    """Level 0 is the file's own pixels; each further level their means."""
    sheet = np.random.default_rng(3).integers(0, 256, (1100, 1050, 3)).astype(np.uint8)
    state = _picture_draft(client, sheet)
    pixels = state["sheet"]["pixels"]
    assert (pixels["origin"], pixels["pixel"]) == ([-0.5, -0.5], [1.0, 1.0])
    tiles = f"/api/drafts/{state['id']}/tiles"
    shown = _picture(client, f"{tiles}/0/2/3.png")
    np.testing.assert_array_equal(shown, sheet[768:1024, 512:768])
    halved = sheet[512:1024, 512:1024].reshape(256, 2, 256, 2, 3).mean(axis=(1, 3))
    assert np.abs(_picture(client, f"{tiles}/1/1/1.png") - halved).max() <= 1
    quartered = sheet[:1024, :1024].reshape(256, 4, 256, 4, 3).mean(axis=(1, 3))
    assert np.abs(_picture(client, f"{tiles}/2/0/0.png") - quartered).max() <= 2
    last = _picture(client, f"{tiles}/{pixels['levels'] - 1}/0/0.png")
    assert max(last.shape) <= pixels["tile"]
    assert client.get(f"{tiles}/0/99/0.png").status_code == 400


def test_a_cut_shows_a_place_enlarged(client: TestClient) -> None:
    state = _picture_draft(client, np.zeros((300, 200), dtype=np.uint8))
    shown = _picture(client, f"/api/drafts/{state['id']}/cut.png?x=0&y=0&radius=10&zoom=3")
    assert shown.shape[:2] == (63, 63)
    assert (shown[:30, :30] == 255).all(), "what lies off the page is paper"


def _picture_draft(client: TestClient, image: np.ndarray) -> dict[str, Any]:
    content = io.BytesIO()
    Image.fromarray(image).save(content, "PNG")
    return client.post("/api/drafts", params={"name": "noise.png"}, content=content.getvalue()).json()


def _picture(client: TestClient, address: str) -> np.ndarray:
    answer = client.get(address)
    assert answer.status_code == 200, answer.text
    with Image.open(io.BytesIO(answer.content)) as image:
        return np.asarray(image.convert("RGB")).astype(float)


def test_places_and_values_are_told_both_ways(client: TestClient) -> None:
    state = opened(client, VECTOR)
    curve = state["reading"]["curves"][0]
    middle = len(curve["points"]["x"]) // 2
    x, y = curve["points"]["x"][middle], curve["points"]["y"][middle]
    told = client.get(f"/api/drafts/{state['id']}/locate", params={"x": x, "y": y}).json()
    assert told["curve"]["index"] == 0
    assert told["current"] == pytest.approx(curve["points"]["current"][middle], rel=1e-3)
    back = client.get(
        f"/api/drafts/{state['id']}/place", params={"current": told["current"], "time": told["time"]}
    ).json()
    assert (back["x"], back["y"]) == (pytest.approx(x, abs=1e-6), pytest.approx(y, abs=1e-6))


def test_the_worksheet_may_be_written_as_text(client: TestClient) -> None:
    state = opened(client, VECTOR)
    text = state["worksheet"].replace('maker = "Quolvane"', 'maker = "Millrace"')
    state = changed(client, state, kind="worksheet", text=text)
    assert state["worksheet"] == text
    assert json.dumps(state["data"]).count("Millrace") >= 1


def test_a_bare_sheet_is_confirmed_filled_and_stored(client: TestClient) -> None:
    """Sheet in, device confirmed, its blanks filled, stored: what was read is told apart from what was said."""
    data = (SHEETS / "vector" / "mcb-b.pdf").read_bytes()
    state = read_through(client, client.post("/api/drafts", params={"name": "b.pdf"}, content=data).json())
    assert "devices.0.kind" in state["read_from_sheet"]
    entry = next(each for each in state["open"] if each["code"] == "device-read")
    state = changed(client, state, **entry["answers"][0]["change"])
    assert "devices.0.kind" not in state["read_from_sheet"]
    for code, value in (("blank-rated-current-a-", "16 A"), ("blank-standard-", "IEC 60898-1")):
        entry = next(each for each in state["open"] if each["code"].startswith(code))
        state = changed(client, state, **entry["answers"][0]["change"], value=value)
    assert state["open"] == []
    assert state["data"]["devices"][0]["rated_current_a"] == 16
    answer = client.post(f"/api/drafts/{state['id']}/store", json={"author": "Ida Brook"})
    assert answer.status_code == 200, answer.text


def test_a_new_line_is_named_in_one_answer(client: TestClient) -> None:
    state = opened(client, VECTOR)
    points = state["reading"]["curves"][1]["points"]
    middle = len(points["x"]) // 2
    state = changed(client, state, kind="remove-curve", curve=1)
    state = changed(client, state, kind="passes", at=[points["x"][middle], points["y"][middle]])
    (entry,) = [each for each in state["open"] if each["code"] == "edge-unknown"]
    texts = [answer["text"] for answer in entry["answers"]]
    assert "The slow edge, clearing" in texts
    assert "The fast edge, clearing" not in texts, "the other line is the fast one"
    change = entry["answers"][texts.index("The slow edge, clearing")]["change"]
    state = changed(client, state, **change)
    assert state["can_store"], state["open"]


def test_two_processes_on_one_library_do_not_overwrite_each_other(tmp_path: Path) -> None:
    library = tmp_path / "firm.sqlite"
    with workbench(library) as one, workbench(library) as other:
        state = opened(one, "isolator")
        seen = read_through(other, other.get(f"/api/drafts/{state['id']}").json())
        changed(one, state, kind="set-device", device=0, fields={"maker": "Millrace"})
        body = {
            "base_version": seen["version"],
            "change": {"kind": "set-device", "device": 0, "fields": {"maker": "Weir"}},
        }
        assert other.post(f"/api/drafts/{state['id']}/changes", json=body).status_code == 409
        again = read_through(other, other.get(f"/api/drafts/{state['id']}").json())
        assert "Millrace" in again["worksheet"]
