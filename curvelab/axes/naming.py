"""Which axis counts what, and in which unit: titles beside the plot, and units printed with the numbers."""

from collections.abc import Iterable
from dataclasses import dataclass, replace

from curvelab.axes.labels import Label, Side
from curvelab.axes.plots import Plot
from curvelab.lettering.titles import AxisTitle, title_of
from curvelab.records.sheet import Word

LEGIBLE = 0.4
"""Chance of the texts with one meaning from which on they count as read; a text that means anything is no accident."""

LEAST_LEGIBLE = 0.35
UNIT_WITH_NUMBER, MOST_WITH_NUMBERS = 0.6, 0.8
"""Confidence that a unit printed with one number is that of the whole axis, and with many; a title says more."""

Box = tuple[float, float, float, float]

REACH = 12.0
"""Heights of its letters by which a title stands apart from the frame at most."""

NEAREST = 0.5
"""What a title at the reach counts for beside one at the frame."""

FITNESS: dict[Side, tuple[float, float]] = {
    "below": (1.0, 0.03),
    "above": (0.6, 0.3),
    "left": (0.03, 1.0),
    "right": (0.3, 0.5),
}
"""How well level words at a side fit the axis along x and the axis along y: names also stand at an axis's end."""

TURNED = (0.01, 1.0)
"""The same for words turned upright beside the plot."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Naming:
    """A title read, where it stands, and how well it fits as the title of the axis along x and along y."""

    title: AxisTitle
    text: str
    side: Side
    fitness: tuple[float, float]
    confidence: float
    box: Box


def namings(words: Iterable[Word], plot: Plot) -> list[Naming]:
    """Titles that stand beside a plot."""
    found = []
    for word in words:
        placed = _side(word, plot)
        meant = _meant(word) if placed else None
        if placed is None or meant is None:
            continue
        title, confidence = meant
        side, apart = placed
        upright = 45 < word.turned_deg % 180 < 135
        if upright and side in ("above", "below"):
            continue
        share = 1.0 - NEAREST * min(apart / (REACH * word.height), 1.0)
        fitness = TURNED if upright else FITNESS[side]
        found.append(
            Naming(
                title=title,
                text=word.text,
                side=side,
                fitness=(fitness[0] * share, fitness[1] * share),
                confidence=confidence,
                box=word.box,
            )
        )
    return found


def _meant(word: Word) -> tuple[AxisTitle, float] | None:
    """The title that most of what a word may say means, and the confidence that it does.

    Letters misread leave the meaning the same as long as the words are still known; what counts against it are texts
    that mean another title, as ``ms`` where the word may also say ``s``.
    """
    chances: dict[tuple[str, str, float], float] = {}
    titles: dict[tuple[str, str, float], AxisTitle] = {}
    for text, chance in ((word.text, word.confidence), *word.alternatives):
        title = title_of(text)
        if title is not None:
            key = (title.quantity, title.unit, title.factor)
            chances[key] = chances.get(key, 0.0) + chance
            titles.setdefault(key, title)
    if not chances:
        return None
    best = max(chances, key=lambda key: chances[key])
    share = chances[best] / sum(chances.values())
    legible = LEAST_LEGIBLE + (1.0 - LEAST_LEGIBLE) * min(chances[best] / LEGIBLE, 1.0)
    return titles[best], titles[best].confidence * share * legible


def with_units(labels: tuple[list[Label], list[Label]]) -> list[Naming]:
    """Units that numbers carry, as titles of their own axis: ``1 kA``, ``10 s``; several with one unit are surer."""
    found: dict[tuple[int, str], Naming] = {}
    for across, beside in enumerate(labels):
        for label in beside:
            surest = max(label.readings, key=lambda reading: reading.chance)
            title = title_of(f"({surest.unit.removeprefix('x')})") if surest.unit else None
            if title is None or surest.unit is None:
                continue
            before = found.get((across, surest.unit))
            other = 1.0 - (before.confidence / MOST_WITH_NUMBERS if before else 0.0)
            other *= 1.0 - UNIT_WITH_NUMBER / MOST_WITH_NUMBERS * surest.chance
            found[across, surest.unit] = Naming(
                title=replace(title, unit=surest.unit),
                text=label.text,
                side=label.side,
                fitness=(1.0, 0.0) if across == 0 else (0.0, 1.0),
                confidence=MOST_WITH_NUMBERS * (1.0 - other),
                box=label.box,
            )
    return list(found.values())


def best_pair(
    found: list[Naming], current_along: int | None, quantity: str | None
) -> tuple[int, Naming | None, Naming | None]:
    """The direction of the current axis (0 for x, 1 for y), its title and that of the second axis.

    Parameters
    ----------
    found : list of Naming
    current_along : 0, 1 or None
        What is known already.
    quantity : str or None
        The second axis's quantity where it is known.
    """
    best: tuple[float, int, Naming | None, Naming | None] = (-1.0, 0, None, None)
    for along in (0, 1) if current_along is None else (current_along,):
        first = _fittest([one for one in found if one.title.quantity == "current"], along)
        wanted = [one for one in found if one.title.quantity == quantity or (quantity is None and _is_second(one))]
        second = _fittest(wanted, 1 - along)
        # Where nothing tells, current runs along x, as it does on nearly every sheet.
        worth = _worth(first, along) + _worth(second, 1 - along) + (0.05 if along == 0 else 0.0)
        if worth > best[0]:
            best = (worth, along, first, second)
    return best[1:]


def _is_second(one: Naming) -> bool:
    return one.title.quantity != "current"


def _worth(one: Naming | None, along: int) -> float:
    return one.fitness[along] * one.confidence if one else 0.0


def _fittest(found: list[Naming], along: int) -> Naming | None:
    fitting = [one for one in found if one.fitness[along] >= 0.1]
    return max(fitting, key=lambda one: _worth(one, along), default=None)


def _side(word: Word, plot: Plot) -> tuple[Side, float] | None:
    """The side of the plot that a word stands at, and how far off."""
    x0, y0, x1, y1 = plot.box
    x, y = 0.5 * (word.box[0] + word.box[2]), 0.5 * (word.box[1] + word.box[3])
    apart: dict[Side, float] = {"above": y0 - y, "below": y - y1, "left": x0 - x, "right": x - x1}
    side = max(apart, key=lambda name: apart[name])
    distance = apart[side]
    # Level words beside the plot are as far away as they are long.
    long = word.box[2] - word.box[0] if side in ("left", "right") else 0.0
    return (side, distance) if 0 < distance <= REACH * word.height + long else None
