"""Published forms as hypotheses about each stretch of a fitted curve: kept only where they fit as well as its spline.

A form is laid on the points by generalised least squares, with the calibration's errors shared by all points, and its
misfit compared with that of the stretch's own model, on points whose variance is inflated for correlation. If the form
is true, the difference is distributed as chi square with as many degrees of freedom as the model has parameters more.
"""

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from scipy.special import chdtri

from curvelab.fit.forms import Form, published_forms
from curvelab.fit.register import Registered, Target, registered
from curvelab.fit.rotate import unrotated
from curvelab.fit.tested import DRAWN, Tested
from curvelab.records.form import PublishedForm

ONCE_IN = 1e-5
"""How often a true form may be refused by chance, were the noise known."""

SHORTEST = 0.05
"""Decades along u of a straight stretch that is tested."""

SHORTEST_TAIL = 0.4
TAILS = (0.8, 0.6, 0.45, 0.3)
"""Shares of a curved stretch, at its end of high current, that may be a straight asymptote."""

SURE_SLOPE = 0.01
"""Standard deviation of dv/du at which a straight stretch is told from others."""

CLEARLY = 12.0
"""Difference of the information criterion from which on one form rules out another: odds of 400 to 1."""


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
