"""Text that a file carries, written the one way the rest of the program expects."""

import re
from collections.abc import Sequence
from dataclasses import replace

from curvelab.records.sheet import Word

DASHES = str.maketrans("−–—‐‑‒", "------")
SPACES = str.maketrans(
    dict.fromkeys("\u00a0\u2000\u2001\u2002\u2003\u2004\u2005\u2006\u2007\u2008\u2009\u200a\u202f", " ")
)
OTHERS = str.maketrans(
    {"∆": "Δ", "µ": "μ", "⋅": "·", "˙": "·", "⁺": "", "\u200b": "", "\ufeff": "", "⁄": "/", "∕": "/"}
)

RAISED = str.maketrans("0123456789-+", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺")
SMALLER = 0.9
"""Size of an exponent against the number's, at most."""

NEAR = 0.8
"""Font sizes by which an exponent may stand behind where its number is said to end; widths may be estimates."""

_TEN = re.compile(r"(?:.*[x×·*] ?)?10")
_EXPONENT = re.compile(r"[-+]?\d{1,2}")


def plain_text(text: str) -> str:
    """Text with plain dashes and single spaces; superscripts, decimal commas and signs stay as printed."""
    plain = text.translate(DASHES).translate(SPACES).translate(OTHERS)
    plain = re.sub(r"(?<=[⁰¹²³⁴⁵⁶⁷⁸⁹])°|(?<=10)[°º](?=$|[\s)])", "⁰", plain)
    return " ".join(plain.split())


def plain_word(word: Word) -> Word:
    """The word with its text written plainly."""
    return replace(word, text=plain_text(word.text))


def with_exponents(words: Sequence[Word]) -> list[Word]:
    """Words of which each ten and the smaller number raised behind it, drawn apart, are one: ``10²``."""
    tens = [word for word in words if _TEN.fullmatch(word.text)]
    raised = [word for word in words if _EXPONENT.fullmatch(word.text)]
    taken: dict[int, Word] = {}
    for ten in tens:
        behind = [one for one in raised if id(one) not in taken and _stands_raised(one, ten)]
        if behind:
            nearest = min(behind, key=lambda one: abs(one.box[0] - ten.box[2]))
            box = (ten.box[0], min(ten.box[1], nearest.box[1]), max(ten.box[2], nearest.box[2]), ten.box[3])
            taken[id(nearest)] = taken[id(ten)] = replace(ten, text=ten.text + nearest.text.translate(RAISED), box=box)
    whole = [taken[id(ten)] for ten in tens if id(ten) in taken]
    return [word for word in words if id(word) not in taken] + whole


def _stands_raised(exponent: Word, ten: Word) -> bool:
    """Whether a number stands as the exponent of a ten, both written level."""
    if exponent.height > SMALLER * ten.height or abs(exponent.turned_deg) > 1 or abs(ten.turned_deg) > 1:
        return False
    higher = 0.5 * (exponent.box[1] + exponent.box[3]) < 0.5 * (ten.box[1] + ten.box[3]) - 0.1 * ten.height
    level = exponent.box[3] > ten.box[1]
    start = ten.box[0] + 0.5 * (ten.box[2] - ten.box[0])
    return higher and level and start < exponent.box[0] <= ten.box[2] + NEAR * ten.height
