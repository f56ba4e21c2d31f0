"""Published forms as hypotheses about each stretch of a fitted curve: kept only where they fit as well as its spline.

A form is laid on the points by generalised least squares, with the calibration's errors shared by all points, and its
misfit compared with that of the stretch's own model, on points whose variance is inflated for correlation. If the form
is true, the difference is distributed as chi square with as many degrees of freedom as the model has parameters more.
"""

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray
from scipy.special import chdtri

from curvelab.fit.forms import Form, published_forms
from curvelab.fit.noise import Noise
from curvelab.fit.register import Registered, Target, registered
from curvelab.fit.rotate import ROOT_2, unrotated
from curvelab.fit.segments import Segments
from curvelab.fit.strand import Strand
from curvelab.fit.stretch import Stretch
from curvelab.records.arrays import Floats
from curvelab.records.form import PublishedForm

ONCE_IN = 1e-5
"""How often a true form may be refused by chance, were the noise known."""

DRAWN = 4e-5
"""Decades by which a sheet may draw a form wrongly throughout: 0.016 px at 400 px a decade."""

MOST_GROUPS = 120
"""Groups of neighbouring points that a form is laid on."""

SHORTEST = 0.05
"""Decades along u of a straight stretch that is tested."""

SHORTEST_TAIL = 0.4
TAILS = (0.8, 0.6, 0.45, 0.3)
"""Shares of a curved stretch, at its end of high current, that may be a straight asymptote."""

SURE_SLOPE = 0.01
"""Standard deviation of dv/du at which a straight stretch is told from others."""

SHARP, SHARPER = 0.05, 4.0
"""Radians by which exact strokes turn at a corner of their own at least, and how much more than at those beside it."""

FEWEST_STROKES = 12
"""Exact strokes that a curved form is laid on at least."""

LONG_STROKE = 0.2
"""Decades along u from which on one exact stroke is a stretch by itself."""

CLEARLY = 12.0
"""Difference of the information criterion from which on one form rules out another: odds of 400 to 1."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Tested:
    """Points of a stretch to test, what its own model misses them by, and how many parameters that has."""

    target: Target
    misfit: float
    parameters: float
    is_straight: bool


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Fitting:
    form: Form
    laid: Registered
    excess: float
    criterion: float


def forms_of(stretches: Sequence[Tested]) -> tuple[PublishedForm, ...]:
    """The published forms that stretches of a falling curve follow, in order; neighbours that follow one as one."""
    found: list[tuple[Tested, PublishedForm]] = []
    for tested in stretches:
        form = _straight(tested)
        if form is None and not tested.is_straight:
            form = _curved(tested) or _asymptote(tested)
        if form is None:
            continue
        united = _united(*found[-1], tested, form) if found else None
        found[-1:] = [*found[-1:], (tested, form)] if united is None else [united]
    return tuple(form for _, form in found)


def _united(
    before: Tested, form: PublishedForm, after: Tested, next_form: PublishedForm
) -> tuple[Tested, PublishedForm] | None:
    """Two neighbours as one stretch of one form, where they are."""
    if form.name != next_form.name or before.is_straight or after.is_straight:
        return None
    both = Tested(
        target=before.target.joined(after.target),
        misfit=before.misfit + after.misfit,
        parameters=before.parameters + after.parameters,
        is_straight=False,
    )
    united = _curved(both)
    return None if united is None else (both, united)


def stretches_of(segments: Segments) -> list[Tested]:
    """The stretches of a model to test, in groups of neighbouring points."""
    return [_tested(segments.strand, stretch, segments.noise) for stretch in segments.stretches]


def strokes_of(strand: Strand, corners: NDArray[np.intp]) -> list[Tested]:
    """Exact strokes to test: runs of corners that turn alike, as of a curve, and long strokes."""
    u, v = strand.u[corners], strand.v[corners]
    turn = np.abs(np.diff(np.arctan(np.diff(v) / np.diff(u))))
    around = np.array([np.median(turn[max(k - 3, 0) : k + 4]) for k in range(len(turn))])
    sharp = np.flatnonzero((turn > SHARP) & (turn > SHARPER * around)) + 1
    found = []
    for first, last in pairwise([0, *sharp.tolist(), len(corners) - 1]):
        if last - first >= FEWEST_STROKES:
            found.append(_strokes(strand, corners[first : last + 1], is_straight=False))
            continue
        long = [k for k in range(first, last) if u[k + 1] - u[k] >= LONG_STROKE]
        found.extend(_strokes(strand, corners[k : k + 2], is_straight=True) for k in long)
    return found


def _strokes(strand: Strand, rows: NDArray[np.intp], *, is_straight: bool) -> Tested:
    shared_u, shared_v = _turned(strand.shared[rows])
    sd = np.maximum(strand.sd[rows], DRAWN)
    return Tested(
        target=Target(u=strand.u[rows], v=strand.v[rows], sd=sd, shared_u=shared_u, shared_v=shared_v),
        misfit=0.0,
        parameters=float(len(rows)),
        is_straight=is_straight,
    )


def _tested(strand: Strand, stretch: Stretch, noise: Noise) -> Tested:
    """Groups of neighbours, each as far from the stretch's own model as its points are on average."""
    rows = np.flatnonzero(stretch.followed) + stretch.first
    groups = np.array_split(rows, max(min(MOST_GROUPS, len(rows) // 2), 1))
    u = np.array([strand.u[rows].mean() for rows in groups])
    slope = stretch.slope(strand.u[rows])
    variance = noise.inflation * (noise.scale * strand.sd[rows]) ** 2
    off = (strand.v[rows] - stretch.value(strand.u[rows])) / np.sqrt(1.0 + slope**2)
    starts = np.cumsum([0, *(len(group) for group in groups[:-1])])
    weight = np.add.reduceat(1.0 / variance, starts)
    normal = np.add.reduceat(off / variance, starts) / weight
    lift = np.sqrt(1.0 + stretch.slope(u) ** 2)
    sd = 1.0 / np.sqrt(weight)
    shared_u, shared_v = _turned(np.array([strand.shared[rows].mean(axis=0) for rows in groups]))
    return Tested(
        target=Target(u=u, v=stretch.value(u) + normal * lift, sd=sd, shared_u=shared_u, shared_v=shared_v),
        misfit=float(np.sum((normal / sd) ** 2)),
        parameters=stretch.edf,
        is_straight=stretch.form == "line",
    )


def _turned(shared: Floats) -> tuple[Floats, Floats]:
    """Shifts along u and v of shifts in log10 current and value, shape (n, 2, r)."""
    return (shared[:, 0] - shared[:, 1]) / ROOT_2, (shared[:, 0] + shared[:, 1]) / ROOT_2


def _straight(tested: Tested) -> PublishedForm | None:
    u = tested.target.u
    if u[-1] - u[0] < SHORTEST or _slope_sd(tested.target) > SURE_SLOPE:
        return None
    return _best(tested, [form for form in published_forms() if form.is_straight])


def _curved(tested: Tested) -> PublishedForm | None:
    return _best(tested, [form for form in published_forms() if not form.is_straight])


def _asymptote(tested: Tested) -> PublishedForm | None:
    """Heating without loss of heat, at the end of high current."""
    straight = [form for form in published_forms() if form.shape == "adiabatic"]
    for share in TAILS:
        tail = _tail(tested, share)
        target = tail.target
        if target.u[-1] - target.u[0] < SHORTEST_TAIL or _slope_sd(target) > SURE_SLOPE:
            return None
        form = _best(tail, straight)
        if form is not None:
            return form
    return None


def _tail(tested: Tested, share: float) -> Tested:
    """The last share of a stretch; its model's misfit and parameters are spread evenly over it."""
    target = tested.target
    cut = target.cut(int(np.searchsorted(target.u, target.u[-1] - share * (target.u[-1] - target.u[0]))))
    part = len(cut.u) / len(target.u)
    return replace(tested, target=cut, misfit=part * tested.misfit, parameters=max(part * tested.parameters, 2.0))


def _slope_sd(target: Target) -> float:
    """Standard deviation of dv/du of a line through the points."""
    weight = target.sd**-2
    middle = np.sum(weight * target.u) / weight.sum()
    return float(np.sqrt(2.0 / np.sum(weight * (target.u - middle) ** 2)))


def _best(tested: Tested, forms: list[Form]) -> PublishedForm | None:
    """The likeliest of the forms that fit as well as the stretch's own model, with those it does not rule out."""
    distinct = [form for k, form in enumerate(forms) if not any(form.is_line_of(other) for other in forms[:k])]
    fitting = [each for each in (_fitting(tested, form) for form in distinct) if each.excess < 1.0]
    if not fitting:
        return None
    fitting.sort(key=lambda each: each.criterion)
    near = [each for each in fitting if each.criterion < fitting[0].criterion + CLEARLY]
    best = next((each for each in near if near[0].form.includes(each.form)), near[0])
    also = tuple(form.name for form in published_forms() if form != best.form and form.is_line_of(best.form))
    log_current, _ = unrotated(tested.target.u[[0, -1]], tested.target.v[[0, -1]], rising=False)
    return PublishedForm(
        name=best.form.name,
        standard=best.form.standard,
        parameters=best.form.parameters(best.laid.shift, best.laid.covariance),
        from_current=float(10.0 ** log_current[0]),
        to_current=float(10.0 ** log_current[1]),
        rms=float(np.sqrt(np.mean(best.laid.normal**2))),
        excess=best.excess,
        also=also,
        rivals=tuple(each.form.name for each in near if each != best and not each.form.includes(best.form)),
    )


def _fitting(tested: Tested, form: Form) -> _Fitting:
    laid = registered(tested.target, form)
    parameters = 3 if form.shape == "thermal_hot" else 1 if form.is_straight else 2
    more = max(tested.parameters - parameters, 1.0)
    allowed = float(chdtri(more, ONCE_IN)) + DRAWN**2 * float(np.sum(tested.target.sd**-2))
    return _Fitting(
        form=form,
        laid=laid,
        excess=(laid.misfit - tested.misfit) / allowed,
        criterion=laid.misfit + parameters * math.log(max(len(laid.normal), 2)),
    )
