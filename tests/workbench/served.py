"""A workbench to ask in tests: the application without a network, and how to wait for a reading."""

from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Any

from starlette.testclient import TestClient

from curvelab.workbench.app import application
from curvelab.workbench.bench import Bench
from curvelab.workbench.guard import loopback_door

PORT = 8765
ADDRESS = f"http://127.0.0.1:{PORT}"
CHANGES = {"X-Curvelab": "1"}
LONGEST_S = 60


@contextmanager
def workbench(library: Path) -> Iterator[TestClient]:
    """A client of a workbench with this library."""
    app = application(Bench(library), loopback_door(PORT))
    with TestClient(app, base_url=ADDRESS, headers=CHANGES, raise_server_exceptions=False) as client:
        yield client


def read_through(client: TestClient, state: dict[str, Any]) -> dict[str, Any]:
    """The state once its reading is done."""
    for _ in range(LONGEST_S):
        if state["work"]["state"] != "reading":
            return state
        state = client.get(f"/api/drafts/{state['id']}", params={"since": state["tick"], "wait": 1.0}).json()
    raise AssertionError("the reading does not end")


def opened(client: TestClient, demo: str) -> dict[str, Any]:
    """The draft of a demo sheet, read."""
    answer = client.post("/api/drafts", params={"demo": demo})
    assert answer.status_code == 201, answer.text
    return read_through(client, answer.json())


def changed(client: TestClient, state: dict[str, Any], **change: Any) -> dict[str, Any]:
    """The state after one change, read."""
    body = {"base_version": state["version"], "change": change}
    answer = client.post(f"/api/drafts/{state['id']}/changes", json=body)
    assert answer.status_code == 200, answer.text
    return read_through(client, answer.json())
