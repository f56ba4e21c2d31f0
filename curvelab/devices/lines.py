"""The lines of a device that answer for one edge: at its settings, for the path, meaning and conditions asked."""

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from curvelab.devices.ambient import ambient_factor
from curvelab.devices.bases import PICK_UP_SETTING, SETTING_OF_ELEMENT
from curvelab.devices.conditions import Fit, fit_of
from curvelab.devices.meaning import answering, meaning_of
from curvelab.devices.question import Path, Question, sees
from curvelab.devices.settings import OFF, Given, missing_settings
from curvelab.records.curve import Curve, Edge
from curvelab.records.device import Nameplate

_SAME = 1e-9


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Line:
    """A curve that answers for an element; ``bound`` where it only bounds it at the conditions asked.

    Its times count ``time_factor`` times, its currents ``current_factor`` times.
    """

    curve: Curve
    time_factor: float
    bound: bool
    current_factor: float = 1.0

    def unit(self, units: Mapping[str, float]) -> float:
        """What one unit of the curve's base is, where ``units`` says it of each base."""
        return units[self.curve.base] * self.current_factor


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Lines:
    """The lines of one element; none where no curve covers what is asked of it."""

    element: str
    meaning: str | None
    lines: tuple[Line, ...]


def lines_of_edge(
    curves: Sequence[Curve], edge: Edge, plate: Nameplate, settings: Given, question: Question, path: Path
) -> tuple[Lines, ...] | None:
    """The lines of each element of one edge that sees the current; None where the device has no such edge at all.

    An element that is there but has no line for what is asked is kept without lines: it may act, nobody knows when.
    """
    if not any(curve.edge == edge for curve in curves):
        return None
    elements = dict.fromkeys(curve.element for curve in curves)
    acting = [element for element in elements if sees(element, path) and not is_off(element, settings)]
    return tuple(
        _lines_of_element([curve for curve in curves if curve.element == element], edge, plate, settings, question)
        for element in acting
    )


def needed_settings(curves: Sequence[Curve]) -> tuple[str, ...]:
    """The settings any answer of these curves depends on."""
    needed: dict[str, None] = {}
    for curve in curves:
        for name in (PICK_UP_SETTING.get(curve.base), curve.time_setting, *curve.at):
            if name is not None:
                needed[name] = None
    return tuple(needed)


def is_off(element: str, settings: Given) -> bool:
    """Whether an element is switched off."""
    return settings.get(SETTING_OF_ELEMENT.get(element, "")) == OFF


def _lines_of_element(
    curves: Sequence[Curve], edge: Edge, plate: Nameplate, settings: Given, question: Question
) -> Lines:
    at_settings = [curve for curve in curves if curve.edge == edge and _drawn_for(curve, plate, settings)]
    meanings = {meaning_of(curve, plate.kind) for curve in at_settings}
    meaning = answering(meanings, edge, question.meaning)
    fitting = [
        (curve, *_fit(curve, edge, plate, question))
        for curve in _nearest_time_setting(at_settings, settings)
        if meaning_of(curve, plate.kind) == meaning
    ]
    exact = [(curve, factor) for curve, fit, factor in fitting if fit == "holds"]
    chosen = exact or [(curve, factor) for curve, fit, factor in fitting if fit == "bounds"]
    lines = tuple(
        Line(
            curve=curve,
            time_factor=_time_factor(curve, plate, settings),
            bound=not exact,
            current_factor=factor,
        )
        for curve, factor in chosen
    )
    return Lines(element=curves[0].element, meaning=meaning, lines=lines)


def _fit(curve: Curve, edge: Edge, plate: Nameplate, question: Question) -> tuple[Fit, float]:
    """How a curve answers, and the factor on its currents at the ambient temperature asked."""
    fit = fit_of(curve, question.conditions, plate)
    factor = ambient_factor(curve, plate, question.conditions.ambient_c)
    if factor is None or (edge == "mean" and not factor.is_exact):
        return "no", 1.0
    if not factor.is_exact and fit == "holds":
        fit = "bounds"
    # Times grow with the factor: the slow edge is bounded by the greatest, the fast edge by the least.
    return fit, factor.greatest if edge == "slow" else factor.least


def _drawn_for(curve: Curve, plate: Nameplate, settings: Given) -> bool:
    """Whether the curve is drawn for these settings; what its base or time multiplier turns need not agree."""
    turned = {curve.time_setting, PICK_UP_SETTING.get(curve.base)}
    return all(_agree(_setting(name, plate, settings), value) for name, value in curve.at.items() if name not in turned)


def _setting(name: str, plate: Nameplate, settings: Given) -> float | str | None:
    """A setting's value; None where the device has no such setting, so that what is drawn is what there is."""
    if name in settings:
        return settings[name]
    if any(setting.name == name for setting in plate.settings):
        raise missing_settings(plate)
    return None


def _agree(value: float | str | None, drawn: float) -> bool:
    return value is None or (not isinstance(value, str) and math.isclose(value, drawn, rel_tol=_SAME))


def _time_factor(curve: Curve, plate: Nameplate, settings: Given) -> float:
    """Times scale as setting / the setting they are drawn at."""
    if curve.time_setting is None or not curve.time_setting_at:
        return 1.0
    value = _setting(curve.time_setting, plate, settings)
    return 1.0 if value is None or isinstance(value, str) else value / curve.time_setting_at


def _nearest_time_setting(curves: Sequence[Curve], settings: Given) -> list[Curve]:
    """Of curves that differ only in the time setting they are drawn at, the one drawn nearest to the setting given."""
    nearest: dict[tuple[object, ...], Curve] = {}
    for curve in curves:
        others = tuple(sorted((name, value) for name, value in curve.at.items() if name != curve.time_setting))
        key = (curve.meaning, curve.conditions, curve.base, curve.time_setting, others)
        held = nearest.get(key)
        if held is None or _distance(curve, settings) < _distance(held, settings):
            nearest[key] = curve
    return list(nearest.values())


def _distance(curve: Curve, settings: Mapping[str, float | str]) -> float:
    value = settings.get(curve.time_setting or "")
    if curve.time_setting_at is None or value is None or isinstance(value, str):
        return 0.0
    return abs(math.log(value / curve.time_setting_at))
