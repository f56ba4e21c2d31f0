"""One library served to a firm: ``python -m tests.benchmark.served``, readers and writers over HTTP for a minute.

Each reader asks and thinks in turn, each writer notes something about a device; both wait for their answers. At the end
every change that was acknowledged must be in the log, and the library must be as it was stored.
"""

import argparse
import asyncio
import json
import random
import re
import resource
import subprocess
import sys
import tempfile
import time
from collections import Counter
from collections.abc import Callable
from dataclasses import dataclass, field
from pathlib import Path

import numpy as np

from curvelab.library.library import open_library
from tests.benchmark.library import BATCH, devices

ADDRESS = re.compile(r"Workbench at http://([\d.]+):(\d+)/")


@dataclass
class Seen:
    """What all clients saw: seconds an answer took by what was asked, statuses that were not 200, changes made."""

    seconds: dict[str, list[float]] = field(default_factory=dict)
    failed: Counter[str] = field(default_factory=Counter)
    written: Counter[str] = field(default_factory=Counter)


class Connection:
    """One client's connection, kept open as browsers and programs do."""

    def __init__(self, host: str, port: int, seen: Seen) -> None:
        self._place, self._seen = (host, port), seen

    async def __aenter__(self) -> "Connection":
        self._from, self._to = await asyncio.open_connection(*self._place)
        return self

    async def __aexit__(self, *_: object) -> None:
        self._to.close()

    async def ask(self, what: str, path: str, body: object = None) -> bool:
        """Whether the answer was 200; how long it took is noted."""
        content = b"" if body is None else json.dumps(body).encode()
        host, port = self._place
        head = f"{'GET' if body is None else 'POST'} {path} HTTP/1.1\r\nHost: {host}:{port}\r\nX-Curvelab: 1\r\n"
        started = time.perf_counter()
        self._to.write(f"{head}Content-Length: {len(content)}\r\n\r\n".encode() + content)
        status, answer = await self._answer()
        self._seen.seconds.setdefault(what, []).append(time.perf_counter() - started)
        if status != 200:
            self._seen.failed[f"{status} {answer[:120].decode()}"] += 1
        return status == 200

    async def _answer(self) -> tuple[int, bytes]:
        head = (await self._from.readuntil(b"\r\n\r\n")).decode().lower()
        length = re.search(r"content-length: (\d+)", head)
        return int(head.split(" ", 2)[1]), await self._from.readexactly(int(length[1]) if length else 0)


Choice = Callable[[random.Random], tuple[str, str]]


def questions(keys: list[str]) -> Choice:
    """What readers ask: mostly one device, at times a search."""

    def choose(chance: random.Random) -> tuple[str, str]:
        key = chance.choice(keys)
        return chance.choices(
            [
                ("trip time", f"/api/devices/{key}/trip-time?current={chance.uniform(20, 2000):.3f}"),
                ("device", f"/api/devices/{key}"),
                ("bands", f"/api/devices/{key}/bands"),
                ("search", f"/api/devices?text={key.split('-')[0]}%20{key.split('-')[1][:4]}"),
                ("list", f"/api/devices?sort=-rated_current_a&page={chance.randint(1, 20)}"),
            ],
            weights=[50, 15, 15, 15, 5],
        )[0]

    return choose


async def reader(connection: Connection, choose: Choice, chance: random.Random, pause_s: float, until: float) -> None:
    async with connection:
        while time.monotonic() < until:
            await asyncio.sleep(chance.expovariate(1 / pause_s) if pause_s else 0)
            await connection.ask(*choose(chance))


async def writer(connection: Connection, keys: list[str], number: int, pause_s: float, until: float) -> None:
    chance, count = random.Random(number), 0
    async with connection:
        while time.monotonic() < until:
            await asyncio.sleep(chance.expovariate(1 / pause_s) if pause_s else 0)
            count += 1
            note = {"name": f"Writer {number}", "reason": f"note {count} of writer {number}"}
            if await connection.ask("write", f"/api/devices/{chance.choice(keys)}/review", note):
                connection._seen.written[note["reason"]] += 1


async def load(address: tuple[str, int], keys: list[str], asked: argparse.Namespace, seen: Seen) -> None:
    until = time.monotonic() + asked.seconds
    choose = questions(keys)
    readers = (
        reader(Connection(*address, seen), choose, random.Random(f"reader {k}"), asked.pause, until)
        for k in range(asked.readers)
    )
    writers = (writer(Connection(*address, seen), keys, k, asked.writer_pause, until) for k in range(asked.writers))
    await asyncio.gather(*readers, *writers)


def filled(path: Path, count: int) -> list[str]:
    """A library of invented devices, and their keys."""
    records = list(devices(count))
    with open_library(path) as library:
        for first in range(0, count, BATCH):
            library.store(records[first : first + BATCH], author="Ida Brook")
    return [record.nameplate.key for record in records]


def served(path: Path) -> tuple[subprocess.Popen[str], tuple[str, int]]:
    """The server in a process of its own, and its address."""
    command = [sys.executable, "-m", "curvelab", "workbench", "--library", str(path), "--no-open"]
    process = subprocess.Popen(command, stdout=subprocess.PIPE, text=True)
    assert process.stdout is not None
    found = ADDRESS.match(process.stdout.readline())
    assert found, "the server says its address first"
    return process, (found[1], int(found[2]))


def lost(path: Path, seen: Seen) -> int:
    """Acknowledged changes that are not in the log exactly as often as they were made."""
    with open_library(path) as library:
        kept = Counter(entry.reason for entry in library.log() if entry.action == "noted")
        verdict = library.verify()
    print(f"verify: {'sound' if verdict.is_sound else verdict.problems}")
    return sum((seen.written - kept).values())


def main() -> None:
    """Print requests a second, times an answer takes, errors, and what was lost."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--devices", type=int, default=10_000)
    parser.add_argument("--readers", type=int, default=200)
    parser.add_argument("--writers", type=int, default=20)
    parser.add_argument("--seconds", type=float, default=60.0)
    parser.add_argument("--pause", type=float, default=1.0, help="Mean time a reader thinks between questions, in s.")
    parser.add_argument("--writer-pause", type=float, default=2.0, help="The same of a writer.")
    asked = parser.parse_args()
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "firm.sqlite"
        keys = filled(path, asked.devices)
        process, address = served(path)
        seen = Seen()
        try:
            started = time.perf_counter()
            asyncio.run(load(address, keys, asked, seen))
            took = time.perf_counter() - started
        finally:
            process.terminate()
            process.wait(30)
        spent = resource.getrusage(resource.RUSAGE_CHILDREN)
        total = sum(map(len, seen.seconds.values()))
        print(f"{asked.devices} devices, {asked.readers} readers, {asked.writers} writers, {took:.0f} s")
        print(f"requests/s: {total / took:.0f}; failed: {sum(seen.failed.values())} {dict(seen.failed) or ''}")
        print(
            f"server: {1000 * (spent.ru_utime + spent.ru_stime) / total:.2f} ms of processor a request, start included"
        )
        for what, seconds in sorted(seen.seconds.items()):
            p50, p95, p99 = 1000 * np.percentile(seconds, [50, 95, 99])
            print(f"{what:10} {len(seconds):7}  p50 {p50:6.1f} ms  p95 {p95:6.1f} ms  p99 {p99:6.1f} ms")
        print(f"changes made: {sum(seen.written.values())}, lost: {lost(path, seen)}")


if __name__ == "__main__":
    main()
