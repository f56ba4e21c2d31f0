"""Warnings a person has looked at: matched by code and, where given, by place."""

from dataclasses import replace
from math import hypot

from curvelab.records.warning import Acceptance, ReadingWarning

SAME_PLACE = 5.0
"""Two places this close, in the sheet's unit, are the same place."""


def _settles(acceptance: Acceptance, warning: ReadingWarning) -> bool:
    if acceptance.code != warning.code:
        return False
    if acceptance.place is None or warning.at is None:
        return True
    return hypot(acceptance.place[0] - warning.at[0], acceptance.place[1] - warning.at[1]) <= SAME_PLACE


def accept(warnings: tuple[ReadingWarning, ...], accepted: tuple[Acceptance, ...]) -> tuple[ReadingWarning, ...]:
    """The same warnings, each with the acceptance that settles it."""
    return tuple(
        replace(warning, accepted=next((each for each in accepted if _settles(each, warning)), None))
        for warning in warnings
    )
