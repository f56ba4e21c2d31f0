"""A form laid on points: generalised least squares of its shift, with the errors that all points share."""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from curvelab.fit.forms import Form, Template, bent_template, template_of
from curvelab.records.arrays import Floats

STARTS = 60
"""Shifts along the curve that are tried roughly at first, on so many points:"""

ROUGH_POINTS = 40

STEPS = 20
LEAST_GAIN, LEAST_SHARE = 1e-3, 3e-3
"""By how much a step must lower the misfit to be followed by another: in chi square, and as a share of it."""

LONGEST_STEP = 0.3
"""Decades, and share of the square of a load, by which one step moves at most."""

TINY = 1e-10
"""Of the information, added so that what the points do not tell stays where it is."""

FIRST_LOAD = 0.2
LOADS = (1e-4, 0.98)
"""Squares of the load before over the pick-up that a hot replica may have."""

LOAD_STEP = 1e-4


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Target:
    """Points to lay a form on, in turned coordinates.

    ``sd`` is along the normal, inflated for correlation; ``shared_u``, ``shared_v``, shape (n, r), move all points
    together for each of r independent errors of unit variance.
    """

    u: Floats
    v: Floats
    sd: Floats
    shared_u: Floats
    shared_v: Floats

    def cut(self, first: int) -> "Target":
        """The points from one on."""
        return Target(**{name: getattr(self, name)[first:] for name in self.__slots__})

    def joined(self, other: "Target") -> "Target":
        """These points and others."""
        return Target(**{name: np.concatenate([getattr(self, name), getattr(other, name)]) for name in self.__slots__})


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Registered:
    """Shift along u and v (and square of the load), its covariance, what the points miss it by, and the misfit."""

    shift: Floats
    covariance: Floats
    normal: Floats
    misfit: float


def registered(target: Target, form: Form) -> Registered:
    """The likeliest shift of a form; its misfit is the chi square of points and shared errors together."""
    fixed = template_of(form)
    if form.is_straight:
        return _Search(target, lambda _: fixed, free=(1,)).settled(np.zeros(2))
    start = _rough(target, fixed)
    if form.shape != "thermal_hot":
        return _Search(target, lambda _: fixed, free=(0, 1)).settled(start)
    return _Search(target, lambda load: bent_template(form, load), free=(0, 1, 2)).settled(np.append(start, FIRST_LOAD))


def _rough(target: Target, template: Template) -> Floats:
    """The best of many shifts along u, each at its best along v."""
    every = max(len(target.u) // ROUGH_POINTS, 1)
    u, v, sd = target.u[::every], target.v[::every], target.sd[::every]
    shifts = np.linspace(u[-1] - template.u[-1], u[0] - template.u[0], STARTS)
    level, slope = template.at(u[None, :] - shifts[:, None])
    off = v - level
    weight = 1.0 / (sd**2 * (1.0 + slope**2))
    best = (weight * off).sum(axis=1) / weight.sum(axis=1)
    misfit = (weight * (off - best[:, None]) ** 2).sum(axis=1)
    k = int(np.argmin(misfit))
    return np.array([shifts[k], best[k]])


@dataclass(frozen=True, slots=True, eq=False)
class _Search:
    """Gauss-Newton steps; ``free`` are the entries of the shift that move."""

    target: Target
    bent: Callable[[float], Template]
    free: tuple[int, ...]

    def settled(self, start: Floats) -> Registered:
        """Steps from a start until the misfit no longer falls noticeably."""
        at = np.append(start, np.zeros(self.target.shared_u.shape[1]))
        moving = np.array([*self.free, *range(len(start), len(at))])
        prior = (np.arange(len(at)) >= len(start)).astype(np.float64)[moving]
        misfit = np.inf
        for _ in range(STEPS):
            normal, design = self._linear(at, len(start))
            before, misfit = misfit, float(normal @ normal + prior @ at[moving] ** 2)
            if before - misfit < LEAST_GAIN + LEAST_SHARE * misfit:
                break
            information = design.T @ design + np.diag(prior)
            step = np.linalg.solve(
                information + np.diag(TINY * np.diag(information)), design.T @ normal - prior * at[moving]
            )
            longest = float(np.abs(step[: len(self.free)]).max())
            at[moving] += step * min(1.0, LONGEST_STEP / max(longest, LONGEST_STEP))
            at[2 : len(start)] = np.clip(at[2 : len(start)], *LOADS)
        information = design.T @ design + np.diag(prior)
        inverse = np.linalg.inv(information + np.diag(TINY * np.diag(information)))
        covariance = np.zeros((len(start), len(start)))
        covariance[np.ix_(self.free, self.free)] = inverse[: len(self.free), : len(self.free)]
        return Registered(shift=at[: len(start)], covariance=covariance, normal=normal * self.target.sd, misfit=misfit)

    def _linear(self, at: Floats, shifts: int) -> tuple[Floats, Floats]:
        """What the points miss the form by, along the normal over their sd, and how that falls with what moves."""
        target = self.target
        load = float(at[2]) if shifts > 2 else 0.0
        template = self.bent(load)
        moved = target.u - at[0]
        level, slope = template.at(moved)
        columns = [-slope, np.ones_like(slope)]
        if shifts > 2:
            columns.append((self.bent(load + LOAD_STEP).at(moved)[0] - level) / LOAD_STEP)
        # A shared error has moved the points: less that error they lie on the form.
        by_shared = target.shared_v - slope[:, None] * target.shared_u
        off = target.v - at[1] - level - by_shared @ at[shifts:]
        design = np.column_stack([*(columns[k] for k in self.free), by_shared])
        over = 1.0 / (target.sd * np.sqrt(1.0 + slope**2))
        return off * over, design * over[:, None]
