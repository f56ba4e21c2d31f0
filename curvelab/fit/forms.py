"""Published forms of time-current curves as fixed lines in turned log-log coordinates, which parameters only shift."""

import math
import tomllib
from dataclasses import dataclass, replace
from functools import cache
from typing import Literal

import numpy as np

from curvelab.fit.rotate import ROOT_2, rotated
from curvelab.paths import shipped
from curvelab.records.arrays import Floats
from curvelab.records.form import FormParameter, PublishedForm
from curvelab.records.propagation import propagated

Shape = Literal["inverse_time", "thermal_cold", "thermal_hot", "adiabatic", "definite_time"]

PLACES = 3000
"""Places at which a form is tabulated: straight between them, it is off by at most 1e-6 decade."""

NEAREST, FARTHEST = 1e-6, 1e3
"""Multiples of the pick-up, less one, between which a form is tabulated."""

LN10 = math.log(10.0)


@dataclass(frozen=True, kw_only=True, slots=True)
class Form:
    """A published form.

    Parameters
    ----------
    name, standard : str
    shape : str
    setting : str
        Name of the parameter that scales the time.
    k, alpha, c : float
        Of t = setting (k / ((I / pick-up)^alpha - 1) + c); 0 for other shapes.
    """

    name: str
    standard: str
    shape: Shape
    setting: str
    k: float = 0.0
    alpha: float = 0.0
    c: float = 0.0

    @property
    def is_straight(self) -> bool:
        """Whether it is a straight line, with one parameter alone."""
        return self.shape in ("adiabatic", "definite_time")

    def is_line_of(self, other: "Form") -> bool:
        """Whether another form is the same line with another setting."""
        if not self.shape == other.shape == "inverse_time":
            return False
        return self.alpha == other.alpha and self.c * other.k == other.c * self.k

    def includes(self, other: "Form") -> bool:
        """Whether another form is this one at an end of what its parameters can be."""
        return self.shape == "thermal_hot" and other.shape == "thermal_cold"

    def parameters(self, shift: Floats, covariance: Floats) -> tuple[FormParameter, ...]:
        """What the shift along u and v, and for a hot replica the square of the load before, say of the parameters."""
        if self.is_straight:
            rate = 3.0 / ROOT_2 if self.shape == "adiabatic" else 1.0 / ROOT_2
            return (_on_log(self.setting, rate * shift[1], rate * math.sqrt(covariance[1, 1])),)
        turn = np.array([[1.0, 1.0], [-1.0, 1.0]]) / ROOT_2
        at, spread = turn @ shift[:2], np.sqrt(np.diag(propagated(turn, covariance[:2, :2])))
        found = (_on_log("pick_up", at[0], spread[0]), _on_log(self.setting, at[1], spread[1]))
        if self.shape != "thermal_hot":
            return found
        load = math.sqrt(shift[2])
        return (*found, FormParameter(name="preload", value=load, sd=math.sqrt(covariance[2, 2]) / (2.0 * load)))


def under_name(found: PublishedForm, name: str) -> PublishedForm:
    """A form found, under another name of its line (one of its ``also``), the setting counted as that name does."""
    forms = {form.name: form for form in published_forms()}
    factor = forms[found.name].k / forms[name].k
    setting = forms[name].setting
    return replace(
        found,
        name=name,
        standard=forms[name].standard,
        parameters=tuple(
            replace(each, name=setting, value=each.value * factor) if each.name == forms[found.name].setting else each
            for each in found.parameters
        ),
        also=tuple(found.name if other == name else other for other in found.also),
    )


def _on_log(name: str, log_value: float, sd: float) -> FormParameter:
    return FormParameter(name=name, value=float(10.0**log_value), sd=float(LN10 * sd))


class Template:
    """A form with pick-up and setting 1: its line in turned coordinates, the end tangents going on."""

    def __init__(self, u: Floats, v: Floats) -> None:
        self.u = u
        self._v = v
        self._slope = np.diff(v) / np.diff(u)

    def at(self, u: Floats) -> tuple[Floats, Floats]:
        """V and dv/du at u."""
        k = np.minimum(np.maximum(self.u.searchsorted(u) - 1, 0), len(self._slope) - 1)
        slope: Floats = self._slope[k]
        return self._v[k] + slope * (u - self.u[k]), slope


@cache
def published_forms() -> tuple[Form, ...]:
    """The forms of ``database/forms.toml``, in its order."""
    table = tomllib.loads((shipped("database") / "forms.toml").read_text(encoding="utf-8"))
    wanted = Form.__dataclass_fields__
    return tuple(Form(**{name: value for name, value in entry.items() if name in wanted}) for entry in table["forms"])


@cache
def template_of(form: Form) -> Template:
    """The form's line; of a hot replica without load before."""
    return bent_template(form, 0.0)


def bent_template(form: Form, load: float) -> Template:
    """The form's line, ``load`` being the square of the current before over the pick-up."""
    if form.is_straight:
        x = np.array([-20.0, 20.0])
        y = -2.0 * x if form.shape == "adiabatic" else np.zeros(2)
    else:
        above = np.geomspace(NEAREST, FARTHEST, PLACES)
        x = np.log1p(above) / LN10
        y = np.log10(_time(form, above, load))
    u, v = rotated(x, y, rising=False)
    return Template(u, v)


def _time(form: Form, above: Floats, load: float) -> Floats:
    """Time at multiples of the pick-up that are so much above one."""
    if form.shape == "inverse_time":
        time: Floats = form.k / np.expm1(form.alpha * np.log1p(above)) + form.c
        return time
    square = above * (2.0 + above)  # M^2 - 1
    replica: Floats = np.log1p((1.0 - load) / square)
    return replica
