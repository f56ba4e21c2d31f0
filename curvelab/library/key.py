"""How a person names a stored device: ``KEY``, or ``KEY@3`` for its third revision."""

import re

from curvelab.errors import InputError

_REVISION = re.compile(r"0*[1-9][0-9]{0,8}", re.ASCII)


def split_key(text: str) -> tuple[str, int | None]:
    """The key and the revision number, None for the current one.

    Raises
    ------
    InputError
        What follows ``@`` is not a revision number.
    """
    key, mark, number = text.partition("@")
    if not mark:
        return key, None
    if not _REVISION.fullmatch(number):
        raise InputError(
            f"'{text}' names no revision",
            "A revision is a whole number from 1, as in KEY@3",
            "Give KEY alone or KEY@NUMBER",
        )
    return key, int(number)
