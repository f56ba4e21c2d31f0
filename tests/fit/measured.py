"""How far a fit lies from the truth, and how far it says it may."""

import numpy as np

LN10 = np.log(10.0)


def errors_along(truth, fit, *, px, samples=400, corner_px=4.0):
    """Normal errors and stated normal sd, in decades, evenly along the parts, corners left out."""
    x, y, sd = (np.concatenate(column) for column in zip(*(_along(part, samples) for part in fit.parts), strict=True))
    error = truth.normal_error(x, y)
    away = np.ones(len(x), bool)
    for kink in truth.kinks:
        away &= np.hypot(x - kink[0], y - kink[1]) * px > corner_px
    return error[away], sd[away]


def _along(part, samples):
    x, y = np.log10(part.current), np.log10(part.value)
    length = np.concatenate([[0.0], np.cumsum(np.hypot(np.diff(x), np.diff(y)))])
    places = np.linspace(0.0, length[-1], samples)
    normal = 1.0 / np.sqrt(np.nan_to_num(1.0 / part.sd_current**2) + np.nan_to_num(1.0 / part.sd_value**2)) / LN10
    return tuple(np.interp(places, length, column) for column in (x, y, normal))


def corner_errors(truth, fit):
    """Distance in decades from every true corner to the nearest one found."""
    found = np.array([(kink.log_current, kink.log_value) for kink in fit.kinks]).reshape(-1, 2)
    return [float(np.hypot(*(found - kink).T).min(initial=np.inf)) for kink in truth.kinks]
