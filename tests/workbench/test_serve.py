"""The command: it says where it serves, refuses what cannot be, and stops at once while a page waits."""

import json
import re
import signal
import socket
import subprocess
import sys
import threading
import urllib.error
import urllib.request
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

import pytest

from curvelab.cli.main import run
from curvelab.paths import shipped


@contextmanager
def started(library: Path, *options: str) -> Iterator[tuple["subprocess.Popen[str]", list[str]]]:
    """The server's process and the lines it said."""
    command = [sys.executable, "-m", "curvelab", "workbench", "--library", str(library), "--no-open", *options]
    with subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True) as process:
        assert process.stdout is not None
        lines = []
        for line in process.stdout:
            lines.append(line.strip())
            if line.startswith("Stop"):
                break
        try:
            yield process, lines
        finally:
            process.kill()


def asked(address: str, method: str = "GET", token: str = "") -> str:
    headers = {"X-Curvelab": "1", **({"Authorization": f"Bearer {token}"} if token else {})}
    request = urllib.request.Request(address, method=method, headers=headers)
    with urllib.request.urlopen(request, timeout=30) as answer:
        content: str = answer.read().decode()
        return content


def test_it_serves_where_it_says_and_stops_while_a_page_waits(tmp_path: Path) -> None:
    with started(tmp_path / "firm.sqlite") as (process, lines):
        address = lines[0].removeprefix("Workbench at ")
        assert re.fullmatch(r"http://127\.0\.0\.1:\d+/", address)
        assert "library" in json.loads(asked(f"{address}api/version"))
        text = (shipped("demo_curves") / "sheets" / "isolator.toml").read_bytes()
        request = urllib.request.Request(
            f"{address}api/drafts?name=a.toml", data=text, method="POST", headers={"X-Curvelab": "1"}
        )
        with urllib.request.urlopen(request, timeout=60) as answer:
            state = json.load(answer)
        while state["work"]["state"] == "reading":
            state = json.loads(asked(f"{address}api/drafts/{state['id']}?since={state['tick']}&wait=5"))
        waits = f"{address}api/drafts/{state['id']}?since={state['tick']}&wait=25"
        waiting = threading.Thread(target=lambda: asked(waits))
        waiting.start()
        waiting.join(0.5)
        process.send_signal(signal.SIGINT)
        waiting.join(10)
        assert not waiting.is_alive()
        _, said = process.communicate(timeout=20)
        assert "Traceback" not in said


def test_beyond_this_computer_it_asks_for_a_token_and_says_so(tmp_path: Path) -> None:
    with started(tmp_path / "firm.sqlite", "--host", "0.0.0.0") as (_, lines):
        assert any("token" in line for line in lines[1:])
        found = re.search(r":(\d+)/\?token=([\w-]{20,})", lines[0])
        assert found
        address = f"http://127.0.0.1:{found[1]}/api/version"
        assert "version" in asked(address, token=found[2])
        with pytest.raises(urllib.error.HTTPError, match="403"):
            asked(address)


def test_a_port_that_is_taken_is_one_line(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    with socket.socket() as taken:
        taken.bind(("127.0.0.1", 0))
        taken.listen()
        port = str(taken.getsockname()[1])
        assert run(["workbench", "--library", str(tmp_path / "x.sqlite"), "--no-open", "--port", port]) == 2
    said = capsys.readouterr().err
    assert said.count("\n") == 1
    assert "port" in said.lower()
