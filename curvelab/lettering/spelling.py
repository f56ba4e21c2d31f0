"""Words that differ from a known one by a misread letter are put right."""

import re
from functools import lru_cache

from curvelab.lettering.vocabulary import UNITS, WORDS

LEAST_LETTERS = 4
"""Shorter words are too alike: ``in`` and ``Ir`` must not be taken for one another."""

_LONG = tuple(sorted(word for word in WORDS if len(word) >= LEAST_LETTERS))
_SLIM = re.compile(r"(?<=[a-z])[\]\[|!1](?=[a-z])|(?<=[a-z])0(?=[a-z])")
"""What stands for an l within a word, or for an o."""

_TOKEN = re.compile(r"[^\W\d_][\w'|]*(?:[-.][^\W\d_][\w'|]*)*|[0-9|][A-Za-z|]{3,}")


def respelt(text: str) -> tuple[str, int]:
    """The text with known words put right, and how many letters that took."""
    changed = 0

    def mend(match: re.Match[str]) -> str:
        nonlocal changed
        apart = spaced(match[0])
        if apart is not None:
            return apart
        word, letters = _nearest(match[0])
        changed += letters
        return word

    return _TOKEN.sub(mend, _SLIM.sub(lambda match: "o" if match[0] == "0" else "l", text)), changed


@lru_cache(maxsize=512)
def spaced(token: str) -> str | None:
    """A token of several known words whose spaces were lost, with the fewest spaces; None where it is none such.

    ``Timeins`` is ``Time in s``; a unit may only stand last, after ``in``.
    """
    if len(token) < LEAST_LETTERS or token.lower() in WORDS:
        return None
    best: list[list[str] | None] = [[], *[None] * len(token)]
    for end in range(2, len(token) + 1):
        for start in range(end - 1):
            before = best[start]
            if before is None or token[start:end].lower() not in WORDS:
                continue
            reached = best[end]
            if reached is None or len(before) + 1 < len(reached):
                best[end] = [*before, token[start:end]]
    whole = best[-1]
    for unit in sorted(UNITS, key=len, reverse=True):
        words = best[len(token) - len(unit)] if token.endswith(unit) and len(unit) < len(token) else None
        if whole is None and words and words[-1].lower() == "in":
            whole = [*words, unit]
    return " ".join(whole) if whole else None


def _nearest(token: str) -> tuple[str, int]:
    lower = token.lower()
    if len(lower) < LEAST_LETTERS or lower in WORDS:
        return token, 0
    allowed = 1 if len(lower) < 8 else 2
    distances = [
        (distance(lower, word), word) for word in _LONG if abs(len(word) - len(lower)) <= allowed and word != lower
    ]
    close = sorted(one for one in distances if one[0] <= allowed)
    if not close or (len(close) > 1 and close[1][0] == close[0][0]):
        return token, 0
    return close[0][1], close[0][0]


def distance(one: str, other: str) -> int:
    """Fewest letters changed, added or left out between two words (Levenshtein)."""
    row = list(range(len(other) + 1))
    for number, letter in enumerate(one, start=1):
        before, row[0] = row[0], number
        for place, also in enumerate(other, start=1):
            before, row[place] = row[place], min(row[place] + 1, row[place - 1] + 1, before + (letter != also))
    return row[-1]
