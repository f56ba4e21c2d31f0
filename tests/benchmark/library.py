"""Speed and size of the library: ``python -m tests.benchmark.library``, one row of figures for each number of devices.

Every device has two edges of its own with 25 points each, no curve is shared: the hardest case for size and search.
"""

import argparse
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable, Iterator
from pathlib import Path

import numpy as np

from curvelab.library.bands import BandQuery, Point
from curvelab.library.library import Library, open_library
from curvelab.library.search import Page, Wanted
from curvelab.records.curve import Conditions, Curve, Edge, Part
from curvelab.records.device import Breaking, DeviceRecord, Nameplate

RATINGS = (6.0, 10.0, 16.0, 20.0, 25.0, 32.0, 40.0, 50.0, 63.0)
MAKERS = ("Riverside", "Millrace", "Weir", "Sluice", "Headrace")
BATCH = 5000
COLD = Conditions(start="cold")


def edge(rng: np.random.Generator, name: Edge, shift: float) -> Curve:
    """A thermal branch, an instantaneous step and a floor: 25 points."""
    thermal = np.geomspace(1.13, 5.0, 20) * shift
    times = 3600.0 * ((thermal / thermal[0]) ** rng.uniform(-2.6, -2.0)) / (1 + 2 * np.log(thermal / thermal[0]))
    current = np.concatenate([thermal, [thermal[-1]], np.geomspace(thermal[-1] * 1.05, 40 * shift, 4)])
    value = np.concatenate([times, [0.01, 0.0099, 0.0098, 0.0097, 0.0096]])
    sd = np.full(current.size, 0.004)
    part = Part(current=current, value=value, sd_current=sd, sd_value=2.3 * sd, sd_common=0.5 * sd)
    return Curve(element="whole", edge=name, meaning="clearing", base="xIn", parts=(part,), conditions=COLD)


def devices(count: int) -> Iterator[DeviceRecord]:
    """Invented breakers, the same for the same count."""
    rng = np.random.default_rng(count)
    for number in range(count):
        maker = MAKERS[number % len(MAKERS)]
        scale, rated_a = rng.uniform(0.7, 1.4), float(RATINGS[number // 7 % len(RATINGS)])
        yield DeviceRecord(
            nameplate=Nameplate(
                key=f"{maker.lower()}-{number:06}",
                kind="mcb",
                characteristic="BCD"[number % 3],
                standard="IEC 60898-1",
                rated_current_a=rated_a,
                maker=maker,
                series=f"Series {number % 211}",
                breaking=(Breaking(quantity="Icn", value_a=6000.0, voltage_v=230.0, supply="ac"),),
            ),
            curves=(edge(rng, "fast", scale), edge(rng, "slow", scale * rng.uniform(1.2, 1.5))),
        )


CLOCKS = {"wall": time.perf_counter, "cpu": time.process_time}
clock = CLOCKS["wall"]


def seconds(work: Callable[[], object]) -> float:
    started = clock()
    work()
    return clock() - started


def quantile(works: Iterator[Callable[[], object]], share: float) -> float:
    """Quantile of the times of many works in ms."""
    return float(np.quantile([seconds(work) for work in works], share)) * 1e3


def imported(path: Path, count: int) -> float:
    """Fill a library; devices a second, the making of the devices left out."""
    spent = 0.0
    with open_library(path) as library:
        batch: list[DeviceRecord] = []
        for number, device in enumerate(devices(count), start=1):
            batch.append(device)
            if len(batch) == BATCH or number == count:
                spent += seconds(lambda given=tuple(batch): library.store(given, author="benchmark"))
                batch.clear()
    return count / spent


OPENED = """
import sys, time, numpy, curvelab.library.library as room
started = time.perf_counter()
room.open_library(sys.argv[1], create=False).open()
print(time.perf_counter() - started)
"""


def opened_ms(path: Path) -> float:
    """Opening in a new process, imports left out."""
    done = subprocess.run([sys.executable, "-c", OPENED, str(path)], capture_output=True, text=True, check=True)
    return float(done.stdout) * 1e3


def searches(library: Library, rng: np.random.Generator, times: int) -> Iterator[Callable[[], object]]:
    """Words rare and common, nameplates, sorted and paged."""
    choices = (
        lambda n: (Wanted(words=f"series {n % 211}"), Page()),
        lambda n: (Wanted(words=f"{n:06}"), Page()),
        lambda n: (Wanted(words="riverside b"), Page(sort="rated_current_a", first=50 * (n % 5))),
        lambda n: (Wanted(maker=MAKERS[n % 5], characteristic="B"), Page()),
        lambda _: (Wanted(kind="mcb", rated_from_a=16, rated_to_a=25), Page(sort="rated_current_a", falling=True)),
        lambda n: (Wanted(words="mill", series=f"Series {n % 211}"), Page(sort="series")),
    )
    for _ in range(times):
        wanted, page = choices[int(rng.integers(len(choices)))](int(rng.integers(10_000)))
        yield lambda wanted=wanted, page=page: library.find(wanted, page)


def band_searches(library: Library, rng: np.random.Generator, times: int) -> Iterator[Callable[[], object]]:
    """Holds an inrush, trips at a fault current within a disconnection time."""
    for _ in range(times):
        query = BandQuery(
            holds=Point(current_a=float(rng.uniform(20, 200)), time_s=float(10 ** rng.uniform(-1, 2))),
            trips=Point(current_a=float(rng.uniform(200, 2000)), time_s=float(rng.choice([0.2, 0.4, 5.0]))),
        )
        yield lambda query=query: library.find_bands(query)


def figures(path: Path, count: int) -> dict[str, str]:
    """All figures of one library."""
    rng = np.random.default_rng(1)
    rate = imported(path, count)
    told = {"bulk import, devices/s": f"{rate:,.0f}", "bytes a device": f"{path.stat().st_size / count:,.0f}"}
    told["open, ms (new process)"] = f"{min(opened_ms(path) for _ in range(3)):.1f}"
    keys = [device.nameplate.key for _, device in zip(range(2000), devices(count), strict=False)]
    with open_library(path) as library:
        library.record(keys[0])
        chosen = [keys[int(rng.integers(len(keys)))] for _ in range(2000)]
        told["device by key, p99 ms"] = f"{quantile((lambda k=k: library.record(k) for k in chosen), 0.99):.2f}"
        device = library.device(keys[0])
        device.trip_time(100.0)
        currents = rng.uniform(30, 300, 2000)
        told["trip query warm, p50 ms"] = f"{quantile((lambda a=a: device.trip_time(a) for a in currents), 0.5):.3f}"
        told["trip query warm, p99 ms"] = f"{quantile((lambda a=a: device.trip_time(a) for a in currents), 0.99):.3f}"
        told["search, p95 ms"] = f"{quantile(searches(library, rng, 200), 0.95):.1f}"
        told["search over bands, p50 ms"] = f"{quantile(band_searches(library, rng, 30), 0.5):.0f}"
        told["search over bands, longest ms"] = f"{quantile(band_searches(library, rng, 30), 1.0):.0f}"
    return told


def main() -> int:
    parser = argparse.ArgumentParser(prog="python -m tests.benchmark.library", description=__doc__)
    parser.add_argument("--counts", default="100,10000,100000", help="numbers of devices")
    parser.add_argument("--verify", action="store_true", help="verify each library too")
    parser.add_argument(
        "--clock", choices=CLOCKS, default="wall", help="cpu: of this process alone, for a busy machine"
    )
    options = parser.parse_args()
    globals()["clock"] = CLOCKS[options.clock]
    counts = [int(count) for count in options.counts.split(",")]
    columns: list[dict[str, str]] = []
    with tempfile.TemporaryDirectory() as folder:
        for count in counts:
            path = Path(folder) / f"{count}.sqlite"
            column = figures(path, count)
            if options.verify:
                with open_library(path) as library:
                    column["verify, devices/s"] = f"{count / seconds(library.verify):,.0f}"
            columns.append(column)
    layout = "{:<34}" + "{:>14}" * len(counts)
    print(layout.format("devices", *(f"{count:,}" for count in counts)))
    for name in columns[0]:
        print(layout.format(name, *(column[name] for column in columns)))
    return 0


if __name__ == "__main__":
    sys.exit(main())
