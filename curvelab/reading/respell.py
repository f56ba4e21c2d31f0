"""Words of data sheets that a reader of pixels misread by a letter or two are put right."""

import re
from functools import lru_cache

from curvelab.lettering.spelling import distance

WORDS = frozenset(
    """
    minimum maximum shortest longest fastest slowest lower upper mean average typical pre-arcing prearcing melting
    operating total clearing breaking opening tripping trip disconnection unlatching release instantaneous magnetic
    short-time short-delay overload thermal long-time long-delay earth-fault ground-fault neutral residual
    residual-current earth-leakage miniature moulded-case molded-case circuit-breaker circuit-breakers circuit
    breaker breakers relay fuse fuses fuse-link fuse-links links link characteristic characteristics curve curves
    type types series band bands limits limit inverse very extremely moderately normal cold state general selective
    time-delayed current currents time times rated rating ratings element setting settings multiplier dial tolerance
    device devices schmelzzeit ausschaltzeit auslösezeit kennlinie kennlinien sicherung sicherungen
    leitungsschutzschalter leistungsschalter charakteristik courbe courbes disjoncteur disjoncteurs fusible fusibles
    temps moyen
    """.split()  # noqa: SIM905
)
LEAST_LETTERS = 5
_ALIKE = str.maketrans({"l": "i", "1": "i", "|": "i", "j": "i", "0": "o", "ö": "o", "ä": "a", "ü": "u", "é": "e"})
"""Characters that readers of pixels take for one another, as one of them."""
_LONG = tuple(sorted(word for word in WORDS if len(word) >= LEAST_LETTERS))
_SHAPES = {word: word.translate(_ALIKE) for word in _LONG}
_TOKEN = re.compile(r"[A-Za-zÄÖÜäöüéèß|0-9][A-Za-zÄÖÜäöüéèß|0-9-]{3,}")


def respelt(text: str) -> str:
    """The text with its long words put right where exactly one known word is near."""
    return _TOKEN.sub(lambda match: _nearest(match[0]), text)


@lru_cache(maxsize=1024)
def _nearest(token: str) -> str:
    lower = token.lower()
    if lower in WORDS:
        return token
    if sum(c.isalpha() for c in token) < max(LEAST_LETTERS, 0.5 * len(token)):
        return token
    allowed = 1 if len(token) < 8 else 2
    shapes = {lower.translate(_ALIKE), lower.replace("rn", "m").translate(_ALIKE)}
    near = [
        (min(distance(shape, known) for shape in shapes), word)
        for word, known in _SHAPES.items()
        if abs(len(known) - len(token)) <= allowed
    ]
    close = sorted(one for one in near if one[0] <= allowed)
    if not close or (len(close) > 1 and close[1][0] == close[0][0]):
        return token
    return close[0][1]
