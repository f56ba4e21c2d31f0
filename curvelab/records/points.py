"""Points of one curve in log10 coordinates with their uncertainty: what the fit takes."""

from dataclasses import dataclass

from curvelab.records.arrays import Floats, freeze


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class FitPoints:
    """Points along one curve, ordered along it.

    Parameters
    ----------
    log_current, log_value : array, shape (n,)
        log10 of the current in its base and of the value in its base unit.
    sd : array, shape (n,)
        Standard deviation along the curve's normal in log-log, in decades, of what is each point's own (trace).
    common : array, shape (n, 2, 2)
        Covariance in decades^2 that the calibration puts on each point, shared by all curves of the sheet.
    correlation_length : float
        Length along the curve in decades over which neighbouring trace errors are alike.
    breaks : tuple of int
        Indices k such that a gap lies between points k - 1 and k.
    blur : float
        Size of the stroke in decades: a corner is not resolved closer than this.
    warp : (float, float)
        Standard deviations in log10 current and log10 value of what the calibration cannot follow, in decades.
    edge : array, shape (n,), optional
        Standard deviation along the normal of where the stroke as a whole lies against the curve it stands for, in
        decades: alike for neighbours, so that no fit averages it out; None for none.
    shared : array, shape (n, 2, r), optional
        What each of r independent calibration errors of unit variance does to every point, in decades, so that the
        calibration's covariance between points i and j is shared[i] @ shared[j].T; None where only ``common`` is known.
    """

    log_current: Floats
    log_value: Floats
    sd: Floats
    common: Floats
    correlation_length: float
    breaks: tuple[int, ...] = ()
    blur: float = 0.0
    warp: tuple[float, float] = (0.0, 0.0)
    edge: Floats | None = None
    shared: Floats | None = None

    def __post_init__(self) -> None:
        freeze(
            self,
            log_current=self.log_current,
            log_value=self.log_value,
            sd=self.sd,
            common=self.common,
        )
        if self.edge is not None:
            freeze(self, edge=self.edge)
        if self.shared is not None:
            freeze(self, shared=self.shared)
