"""The rules a device is checked against: those shipped with the program, and a firm's own beside its library."""

from functools import lru_cache
from pathlib import Path

from curvelab.paths import shipped
from curvelab.standards.rule import Rule
from curvelab.standards.table import read_table

FOLDER = "standards"


@lru_cache(maxsize=1)
def load_rules() -> tuple[Rule, ...]:
    """All rules shipped with the program."""
    return rules_in(shipped("database") / FOLDER)


def rules_in(folder: Path) -> tuple[Rule, ...]:
    """All rules of the tables in a folder, in the order of the files' names; none where there is no folder.

    Raises
    ------
    StandardError
        A table is not valid; the message says which rule and field.
    """
    return tuple(rule for table in sorted(folder.glob("*.toml")) for rule in read_table(table))


def rules_beside(library: Path) -> tuple[Rule, ...]:
    """The shipped rules, and a firm's own from the folder ``standards`` beside its library file.

    A firm's table has the same form; it adds requirements and takes none away.

    Raises
    ------
    StandardError
        A table is not valid.
    """
    return (*load_rules(), *rules_in(library.parent / FOLDER))
