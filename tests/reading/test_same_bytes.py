"""The same worksheet gives the same JSON byte for byte, whatever the number of threads linear algebra may use."""

import os
import subprocess
import sys
from pathlib import Path

WORKSHEET = Path(__file__).parents[2] / "demo_curves" / "sheets" / "mcb-b.toml"


def read_with(threads: int) -> bytes:
    names = ("OPENBLAS_NUM_THREADS", "OMP_NUM_THREADS", "MKL_NUM_THREADS")
    command = [sys.executable, "-m", "curvelab", "digitise", str(WORKSHEET), "--json", "-"]
    environment = {**os.environ, **dict.fromkeys(names, str(threads))}
    return subprocess.run(command, env=environment, capture_output=True, check=True).stdout


def test_one_thread_or_two() -> None:
    once = read_with(1)
    assert once
    assert once == read_with(1)
    assert once == read_with(2)
