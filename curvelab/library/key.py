"""How a person names a stored device: ``KEY``, or ``KEY@3`` for its third revision."""

from curvelab.errors import InputError


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
    if not (number.isascii() and number.isdigit() and int(number) >= 1):
        raise InputError(
            f"'{text}' names no revision",
            "A revision is a whole number from 1, as in KEY@3",
            "Give KEY alone or KEY@NUMBER",
        )
    return key, int(number)
