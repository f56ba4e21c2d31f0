"""What is usually printed along axes: how well a string of characters fits that, whatever its shapes say."""

import re

WORDS = frozenset(
    """
    current prospective time times tripping operating operate clearing pre-arcing prearcing arcing melting virtual total
    break breaking trip release disconnection opening multiple multiples of the rated rating setting settings residual
    nominal fault short circuit short-circuit let-through let through energy joule integral peak cut-off cutoff rms
    r.m.s. symmetrical value values in at and seconds second minutes minute hours hour amperes ampere amps amp
    milliseconds kiloamperes milliamperes strom zeit auslösezeit schmelzzeit ausschaltzeit vielfaches des
    bemessungsstrom bemessungsstroms nennstrom nennstroms prospektiver kurzschlussstrom stoßstrom durchlassstrom
    sekunden minuten stunden ampère courant temps présumé presume multiple nominal assigné assigne du de fusion
    fonctionnement déclenchement declenchement différentiel differentiel coupure secondes corrente tempo corriente
    tiempo sheet trial scale log cold hot fuse breaker curve characteristic relay
    """.split()  # noqa: SIM905
)

UNITS = frozenset(
    "A kA mA s ms min h sec A²s kA²s A2s kA2s I t In Ir Isd Ii Ig IΔn Idn x xIn xIr xIsd xIi xIg xIΔn I²t".split()  # noqa: SIM905
)

_NUMBER = re.compile(r"\(?[+-]?(\d+([.,]\d+)*|[.,]\d+)\)?(k|M|[⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺]+)?")
_QUANTITY = re.compile(r"[+-]?(\d+([.,]\d+)?|[.,]\d+)(A|kA|mA|ms|s|min|h|x|xIn|%)")
_PLAIN_WORD = re.compile(r"[A-ZÄÖÜ]?[a-zäöüéèß]+[.,:]?|[A-Z]+")
_GROUPS = re.compile(r"(?<=\d) (?=\d{3}(?!\d))")

NUMBER_GAIN = 1.0
WORD_GAIN = 1.2
PLAIN_GAIN = 0.3
ODD_LOSS = -1.0
LONE_LOSS = -2.0
"""Natural logarithms of how much likelier a string is printed than one without sense, per character."""


def fitness(text: str) -> float:
    """Log of how much likelier a text is printed than one of as many characters at random."""
    if len(text) == 1:
        return NUMBER_GAIN if text.isdigit() else 0.0 if text in "Ash" else LONE_LOSS
    joined = _GROUPS.sub("", text)
    return sum(_token_fitness(token) for token in joined.split())


def _token_fitness(token: str) -> float:
    bare = token.rstrip(".,:;")
    bare = bare[bare[:1] in "([" : len(bare) - (bare[-1:] in ")]")]
    if not bare or any(bracket in bare for bracket in "()[]"):
        return ODD_LOSS * len(token)
    if _NUMBER.fullmatch(token):
        return NUMBER_GAIN * len(token) - _leading_zeros(bare)
    parts = [part for part in bare.split("/") if part]
    if bare in UNITS or all(part in UNITS or _is_word(part) for part in parts):
        return WORD_GAIN * len(token)
    if _QUANTITY.fullmatch(bare):
        return NUMBER_GAIN * len(token)
    if _PLAIN_WORD.fullmatch(bare) and len(bare) > 1:
        return PLAIN_GAIN * len(token)
    return ODD_LOSS * len(token)


def _is_word(text: str) -> bool:
    return (text.lower() in WORDS) and (text[1:].islower() or text.isupper() or len(text) == 1)


def _leading_zeros(number: str) -> float:
    """Nobody prints 010 or 00: a loss for each zero before a whole number."""
    return 2.0 * (len(number) - len(number.lstrip("0"))) if number.isdigit() and len(number) > 1 else 0.0
