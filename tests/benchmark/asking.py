"""``python -m tests.benchmark.asking``: stored edges at a million currents beside numpy.interp on the same points."""

import time
from collections.abc import Callable
from dataclasses import replace

import numpy as np

from curvelab.fit.curve import fit_curve
from curvelab.records.curve import Curve, typed_part
from curvelab.records.evaluation import values_at
from tests.fit.drawn_points import FORMS, drawn

COUNT = 1_000_000
RUNS = 7


def edge(name: str, seed: int) -> Curve:
    """A fitted line with intervals."""
    points = drawn(FORMS["thermal, drop, floor"](), np.random.default_rng(seed))
    points = replace(points, common=np.tile(np.diag([1e-8, 1e-8]), (len(points.sd), 1, 1)))
    return Curve(element="whole", edge=name, meaning="clearing", base="A", parts=fit_curve(points).parts)


def seconds(task: Callable[[], object]) -> float:
    """Least processor time of several runs, after one that fills what is kept."""
    task()
    times = []
    for _ in range(RUNS):
        start = time.process_time()
        task()
        times.append(time.process_time() - start)
    return min(times)


def main() -> None:
    """Print one row for currents at random, one for currents in order."""
    fast, slow = edge("fast", 1), edge("slow", 2)
    part = fast.parts[0]
    plain = replace(fast, parts=(typed_part(part.current, part.value),))
    chosen = np.exp(np.random.default_rng(0).uniform(*np.log(part.current[[1, -2]]), COUNT))
    print(f"{COUNT} currents, {part.current.size} points an edge; ratios to numpy.interp")
    print(f"{'currents':<12}{'numpy.interp':>14}{'one edge':>12}{'both edges with intervals':>28}")
    for name, current in (("random", chosen), ("in order", np.sort(chosen))):
        reference = seconds(lambda at=current: np.interp(at, part.current, part.value))
        one = seconds(lambda at=current: values_at(plain, at))
        both = seconds(lambda at=current: (values_at(fast, at), values_at(slow, at)))
        print(f"{name:<12}{reference * 1e3:11.1f} ms{one / reference:11.2f}x{both / reference:27.2f}x")


if __name__ == "__main__":
    main()
