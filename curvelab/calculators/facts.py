"""Facts of installation rules from the tables in ``database/installation``, each with clause, source and confidence."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache
from math import inf
from typing import Any, Literal

from curvelab.errors import StandardError
from curvelab.paths import shipped

FOLDER = "installation"
CONFIDENCES = ("published", "memory", "practice")


@dataclass(frozen=True, kw_only=True, slots=True)
class Origin:
    """Where a number is from: the clause, the document it was seen in, and how sure it is."""

    clause: str
    source: str
    confidence: Literal["published", "memory", "practice"]

    @property
    def doubt(self) -> str:
        """A sentence where the number was not seen published."""
        return {
            "memory": "The number is from memory, not seen in print.",
            "practice": "The number is common practice.",
        }.get(self.confidence, "")


Row = Mapping[str, Any]


@lru_cache(maxsize=32)
def rows_of(subject: str, table: str) -> tuple[Row, ...]:
    """All rows of one table of one file; each with its ``origin``.

    Raises
    ------
    StandardError
        A row does not say where it is from.
    """
    # Most questions to a device need no table; asking starts without the parser.
    import tomllib  # noqa: PLC0415

    file = shipped("database") / FOLDER / f"{subject}.toml"
    content = tomllib.loads(file.read_text(encoding="utf-8"))
    return tuple(
        {**row, "origin": _origin(row, content["sources"], f"{file.name}, {table} {number}")}
        for number, row in enumerate(content[table], start=1)
    )


def _origin(row: Row, sources: Mapping[str, str], place: str) -> Origin:
    missing = next((key for key in ("clause", "source", "confidence") if not row.get(key)), None)
    if missing is not None or row["source"] not in sources or row["confidence"] not in CONFIDENCES:
        raise StandardError(f"{place}: no valid {missing or 'source or confidence'}", "Say where the number is from")
    return Origin(clause=row["clause"], source=sources[row["source"]], confidence=row["confidence"])


def lies_in(value: float, row: Row, unit: str) -> bool:
    """Whether a value lies between ``above_``/``from_`` and ``below_``/``up_to_`` of a row."""
    above, up_to = float(row.get(f"above_{unit}", 0)), float(row.get(f"up_to_{unit}", inf))
    start, below = float(row.get(f"from_{unit}", 0)), float(row.get(f"below_{unit}", inf))
    return above < value <= up_to and start <= value < below
