"""A stored reading read once more, to see what another version finds."""

from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from curvelab.reading.digitise import read
from curvelab.reading.restore import laid_out
from curvelab.reading.watch import Watch, unwatched
from curvelab.records.axes import Axes
from curvelab.records.curve import Curve
from curvelab.records.evaluation import values_at
from curvelab.records.evidence import StoredReading
from curvelab.records.finding import Finding
from curvelab.records.reading import ReadCurve, Reading

SAME = 1e-6
"""Relative; two machines may differ by as much with the same version."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Difference:
    """One thing a re-run found otherwise: of what, and what was stored and found as text."""

    of: str
    stored: str
    found: str

    def __str__(self) -> str:
        """One line."""
        return f"{self.of}: {self.stored} stored, {self.found} now"


def rerun(stored: StoredReading, folder: Path, watch: Watch = unwatched) -> Reading:
    """Read again what was stored: the same bytes and worksheet with this version; arguments as for `restored`."""
    return read(laid_out(stored, folder), folder, watch)


def differences(stored: Reading, found: Reading) -> tuple[Difference, ...]:
    """What a re-run found otherwise than what was stored; empty where all numbers agree."""
    return (*_versions(stored, found), *_axes(stored, found), *_curves(stored, found), *_outcomes(stored, found))


def _versions(stored: Reading, found: Reading) -> Iterator[Difference]:
    if stored.program_version != found.program_version:
        yield Difference(of="program version", stored=stored.program_version, found=found.program_version)


def _axes(stored: Reading, found: Reading) -> Iterator[Difference]:
    """Where the plot's corners have moved to in values."""
    if stored.axes is None or found.axes is None:
        if (stored.axes is None) != (found.axes is None):
            yield Difference(of="axes", stored=_or_none(stored.axes), found=_or_none(found.axes))
        return
    x0, y0, x1, y1 = stored.axes.frame
    corners = [(x0, y0), (x1, y0), (x0, y1), (x1, y1)]
    before, after = stored.axes.values(corners), found.axes.values(corners)
    for name, one, other in zip(("current", stored.axes.value.quantity), before, after, strict=True):
        away = np.abs(other / one - 1.0)
        worst = int(np.argmax(away))
        if away[worst] > SAME:
            x, y = corners[worst]
            yield Difference(
                of=f"{name} at the corner ({x:g}, {y:g})", stored=f"{one[worst]:.7g}", found=f"{other[worst]:.7g}"
            )


def _or_none(axes: Axes | None) -> str:
    return "none" if axes is None else "calibrated"


def _curves(stored: Reading, found: Reading) -> Iterator[Difference]:
    if len(stored.curves) != len(found.curves):
        yield Difference(of="number of curves", stored=str(len(stored.curves)), found=str(len(found.curves)))
    for number, (one, other) in enumerate(zip(stored.curves, found.curves, strict=False), start=1):
        yield from _curve(f"curve {number} ({one.curve.element} {one.curve.edge})", one, other)


def _curve(name: str, stored: ReadCurve, found: ReadCurve) -> Iterator[Difference]:
    before, after = stored.curve, found.curve
    for what in ("element", "edge", "meaning", "quantity", "base", "leaves_top"):
        if getattr(before, what) != getattr(after, what):
            yield Difference(of=f"{name}, {what}", stored=str(getattr(before, what)), found=str(getattr(after, what)))
    for what, index in (("first current", 0), ("last current", -1)):
        one, other = (float(curve.parts[index].current[index]) for curve in (before, after))
        if abs(other / one - 1.0) > SAME:
            yield Difference(of=f"{name}, {what}", stored=f"{one:.7g}", found=f"{other:.7g}")
    yield from _values(name, before, after)


def _values(name: str, before: Curve, after: Curve) -> Iterator[Difference]:
    """The largest disagreement in value at the stored points, and where one has a gap the other has not."""
    current = np.unique(np.concatenate([part.current for part in before.parts]))
    one, other = values_at(before, current).value, values_at(after, current).value
    only_one = np.isnan(one) != np.isnan(other)
    if only_one[1:-1].any():
        at = current[1:-1][only_one[1:-1]][0]
        told = [
            "not covered" if np.isnan(values_at(curve, np.array([at])).value[0]) else "covered"
            for curve in (before, after)
        ]
        yield Difference(of=f"{name} at {at:.5g}", stored=told[0], found=told[1])
    away = np.nan_to_num(np.abs(other / one - 1.0))
    worst = int(np.argmax(away))
    if away[worst] > SAME:
        yield Difference(
            of=f"{name} at {current[worst]:.5g} {before.base}", stored=f"{one[worst]:.7g}", found=f"{other[worst]:.7g}"
        )


def _outcomes(stored: Reading, found: Reading) -> Iterator[Difference]:
    """Findings with another outcome, and warnings that came or went."""
    before, after = ({_requirement(each): each.outcome for each in one.findings} for one in (stored, found))
    for requirement in dict.fromkeys([*before, *after]):
        one, other = before.get(requirement, "none"), after.get(requirement, "none")
        if one != other:
            yield Difference(of=f"{requirement[0]}, {requirement[1]}: {requirement[2]}", stored=one, found=other)
    told, tells = ({each.code for each in one.warnings} for one in (stored, found))
    for code in sorted(told ^ tells):
        yield Difference(of=f"warning {code}", stored=_there(code in told), found=_there(code in tells))


def _requirement(finding: Finding) -> tuple[str, str, str]:
    return finding.device, finding.clause, finding.requirement


def _there(is_there: bool) -> str:
    return "there" if is_there else "none"
