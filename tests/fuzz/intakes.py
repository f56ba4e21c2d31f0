"""The ways in: what a person hands to the program, and the command that takes it."""

import random
import shutil
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from pathlib import Path

from tests.fuzz.damage import TOKENS, damaged

CORPUS = Path(__file__).parent / "corpus"
PAGE = CORPUS / "sheet" / "valid-page.pdf"
HARMFUL = "found-"


@dataclass(frozen=True, kw_only=True, slots=True)
class Place:
    """A folder of a case's own, and the library the case may meet."""

    folder: Path
    library: Path


Case = tuple[bytes, str]
"""What is handed in, and the ending of its file's name."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Intake:
    """One way in.

    ``corpus`` are valid files; ``damage`` makes a case of one of them; ``command`` lays the case into its place and
    gives the words to type.
    """

    name: str
    weight: int
    corpus: tuple[Path, ...]
    damage: Callable[[bytes, random.Random], bytes]
    command: Callable[[bytes, str, Place], Sequence[str]]

    def case(self, rng: random.Random) -> Case:
        """A damaged file of the corpus."""
        path = rng.choice(self.corpus)
        return self.damage(path.read_bytes(), rng), path.suffix

    def once_harmful(self) -> list[Case]:
        """Cases kept because they did harm before."""
        return [(path.read_bytes(), path.suffix) for path in _kept(self.name, HARMFUL)]


def _kept(name: str, beginning: str = "valid-") -> tuple[Path, ...]:
    return tuple(sorted((CORPUS / name).glob(f"{beginning}*")))


def _put(data: bytes, name: str, place: Place) -> str:
    path = place.folder / name
    path.parent.mkdir(parents=True, exist_ok=True)
    path.write_bytes(data)
    return str(path)


def _sheet(data: bytes, suffix: str, place: Place) -> Sequence[str]:
    return ["digitise", _put(data, f"page{suffix}", place), "--library", str(place.library)]


def _worksheet(data: bytes, suffix: str, place: Place) -> Sequence[str]:
    shutil.copy(PAGE, place.folder / "page.pdf")
    return ["store", _put(data, f"worksheet{suffix}", place), "--library", str(place.library)]


def _exchange(data: bytes, suffix: str, place: Place) -> Sequence[str]:
    return ["library", "import", _put(data, f"devices{suffix}", place), "--library", str(place.library)]


def _points(data: bytes, suffix: str, place: Place) -> Sequence[str]:
    path = _put(data, f"table{suffix}", place)
    return ["library", "import", path, "--source", "a table", "--library", str(place.library)]


def _rules(data: bytes, suffix: str, place: Place) -> Sequence[str]:
    _put(data, f"standards/house{suffix}", place)
    library = place.folder / place.library.name
    shutil.copy(place.library, library)
    return ["check", "riverside-b32", "--library", str(library)]


def _library(data: bytes, suffix: str, place: Place) -> Sequence[str]:
    return ["query", "riverside-b32", "--current", "160", "--library", _put(data, f"other{suffix}", place)]


def _words(data: bytes, suffix: str, place: Place) -> Sequence[str]:  # noqa: ARG001 - words need no file
    words = data.decode("utf-8", errors="replace").replace("\x00", "").split("\n")
    return [*words, "--library", str(place.library)]


def _damaged_words(data: bytes, rng: random.Random) -> bytes:
    """One of the file's command lines, a word a line, one of its words damaged."""
    words = rng.choice(data.strip().split(b"\n")).split(b" ")
    at = rng.randrange(1, len(words))
    words[at] = rng.choice(TOKENS) if rng.random() < 0.7 else damaged(words[at], rng)
    return b"\n".join(word for word in words if b"\n" not in word)


LIBRARIES = tuple(sorted((CORPUS.parents[1] / "library" / "kept").glob("*.sqlite")))

INTAKES = (
    Intake(name="sheet", weight=4, corpus=_kept("sheet"), damage=damaged, command=_sheet),
    Intake(name="worksheet", weight=4, corpus=_kept("worksheet"), damage=damaged, command=_worksheet),
    Intake(name="exchange", weight=3, corpus=_kept("exchange"), damage=damaged, command=_exchange),
    Intake(name="points", weight=2, corpus=_kept("points"), damage=damaged, command=_points),
    Intake(name="rules", weight=2, corpus=_kept("rules"), damage=damaged, command=_rules),
    Intake(name="library", weight=2, corpus=LIBRARIES, damage=damaged, command=_library),
    Intake(name="words", weight=3, corpus=_kept("words"), damage=_damaged_words, command=_words),
)
