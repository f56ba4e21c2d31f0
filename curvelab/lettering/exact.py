"""Text that a file carries, written the one way the rest of the program expects."""

import re
from dataclasses import replace

from curvelab.records.sheet import Word

DASHES = str.maketrans("−–—‐‑‒", "------")
SPACES = str.maketrans(
    dict.fromkeys("\u00a0\u2000\u2001\u2002\u2003\u2004\u2005\u2006\u2007\u2008\u2009\u200a\u202f", " ")
)
OTHERS = str.maketrans(
    {"∆": "Δ", "µ": "μ", "⋅": "·", "˙": "·", "⁺": "", "\u200b": "", "\ufeff": "", "⁄": "/", "∕": "/"}
)


def plain_text(text: str) -> str:
    """Text with plain dashes and single spaces; superscripts, decimal commas and signs stay as printed."""
    plain = text.translate(DASHES).translate(SPACES).translate(OTHERS)
    plain = re.sub(r"(?<=[⁰¹²³⁴⁵⁶⁷⁸⁹])°|(?<=10)[°º](?=$|[\s)])", "⁰", plain)
    return " ".join(plain.split())


def plain_word(word: Word) -> Word:
    """The word with its text written plainly."""
    return replace(word, text=plain_text(word.text))
