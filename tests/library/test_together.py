"""Several programs at one library, and what asking it loads."""

import subprocess
import sys
from pathlib import Path

from curvelab.library.library import open_library
from tests.library.devices import breaker, curve

CHECKOUT = Path(__file__).parents[2]
WRITERS = 4
EACH = 5


def run(*arguments: str) -> "subprocess.Popen[str]":
    return subprocess.Popen(
        [sys.executable, *arguments], cwd=CHECKOUT, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True
    )


def test_writers_that_start_together_lose_nothing(tmp_path: Path) -> None:
    path = tmp_path / "firm.sqlite"
    script = (
        "import sys; from pathlib import Path\n"
        "from curvelab.library.library import open_library\n"
        "from tests.library.devices import breaker, curve\n"
        "path, writer = Path(sys.argv[1]), int(sys.argv[2])\n"
        f"for number in range({EACH}):\n"
        "    with open_library(path) as library:\n"
        "        library.store([breaker(f'own-{writer}-{number}', curve()),\n"
        "                       breaker('shared', curve(at={'writer': writer, 'number': number}))])\n"
    )
    writers = [run("-c", script, str(path), str(writer)) for writer in range(WRITERS)]
    for writer in writers:
        _, problems = writer.communicate(timeout=120)
        assert problems == ""
    with open_library(path) as library:
        assert len(library.keys()) == WRITERS * EACH + 1
        shared = library.record("shared")
        assert (shared.revision, len(shared.curves)) == (WRITERS * EACH, WRITERS * EACH)
        assert library.open().execute("PRAGMA integrity_check").fetchone() == ("ok",)


def test_a_reader_sees_a_new_revision_at_once(tmp_path: Path) -> None:
    path = tmp_path / "firm.sqlite"
    with open_library(path) as writer, open_library(path) as reader:
        writer.store(breaker("b32", curve()))
        assert reader.record("b32").revision == 1
        writer.store(breaker("b32", curve(time_s=61.0)))
        assert reader.record("b32").revision == 2


def test_asking_a_device_loads_numpy_and_the_standard_library_alone(tmp_path: Path) -> None:
    path = tmp_path / "firm.sqlite"
    with open_library(path) as library:
        library.store(breaker("b32", curve(), rated_current_a=32.0))
    script = (
        "import sys, numpy; before = set(sys.modules)\n"
        "import curvelab\n"
        f"curvelab.open_library({str(path)!r}).device('b32').trip_time(96.0)\n"
        "tops = {name.partition('.')[0] for name in set(sys.modules) - before}\n"
        "print(sorted(tops - set(sys.stdlib_module_names) - {'curvelab', 'numpy'}))\n"
    )
    asked = run("-c", script)
    printed, problems = asked.communicate(timeout=60)
    assert (printed.strip(), problems) == ("[]", "")
