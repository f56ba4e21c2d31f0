"""A published form that a fitted curve follows as well as its spline does: name, parameters, and how sure it is."""

from dataclasses import dataclass


@dataclass(frozen=True, kw_only=True, slots=True)
class FormParameter:
    """One parameter of a published form.

    Parameters
    ----------
    name : str
        ``pick_up`` (in the curve's base), ``tms`` or ``td`` (time multiplier, time dial), ``tau_s`` (thermal time
        constant), ``preload`` (current before, over the pick-up), ``i2t`` (base squared times s), ``time_s``.
    value : float
    sd : float
        Relative standard uncertainty, the calibration included; of ``preload`` it is absolute.
    """

    name: str
    value: float
    sd: float


@dataclass(frozen=True, kw_only=True, slots=True)
class PublishedForm:
    """A form that stands for a stretch of a curve.

    Parameters
    ----------
    name, standard : str
        Such as ``IEC very inverse`` of ``IEC 60255-151``.
    parameters : tuple of FormParameter
    from_current, to_current : float
        Currents in the curve's base between which it holds.
    rms : float
        Root mean square of the points' distance from it along the normal, in decades.
    excess : float
        How much worse it fits than the spline, as a share of what chance may make of a true form: below 1.
    also : tuple of str
        Forms that are the same line with other parameters: only the sheet's words can tell which is meant.
    rivals : tuple of str
        Other forms that the points do not rule out here; where there are any, the name is not claimed.
    """

    name: str
    standard: str
    parameters: tuple[FormParameter, ...]
    from_current: float
    to_current: float
    rms: float
    excess: float
    also: tuple[str, ...] = ()
    rivals: tuple[str, ...] = ()

    @property
    def is_claimed(self) -> bool:
        """Whether the points rule out every other form."""
        return not self.rivals
