"""Reads a stored calibration back."""

import json
import math
from collections.abc import Mapping
from typing import Any

import numpy as np

from curvelab.records.axes import Axes, Axis, GridLine, Mark, PlaneMap


def axes_from_json(text: str, grid: tuple[GridLine, ...]) -> Axes:
    """The axes of their stored form, with the grid lines they were measured on."""
    said = json.loads(text)
    plane = said["map"]
    rms = said["mark_residual_rms"]
    return Axes(
        current=_axis(said["current"]),
        value=_axis(said["value"]),
        map=PlaneMap(
            centre=np.array(plane["centre"]),
            reach=plane["reach"],
            projective=np.array(plane["projective"]),
            powers=tuple((i, j) for i, j in plane["powers"]),
            warp=np.array(plane["warp"], dtype=np.float64),
            covariance=np.array(plane["covariance"], dtype=np.float64),
        ),
        frame=tuple(said["frame"]),
        mark_residual_rms=math.nan if rms is None else rms,
        grid_residual_rms=said["grid_residual_rms"],
        grid=grid,
        automatic=said["automatic"],
        plot=said.get("plot", 1),
        snapped=said.get("snapped", False),
    )


def _axis(said: Mapping[str, Any]) -> Axis:
    marks = tuple(Mark(**{**mark, "at": tuple(mark["at"])}) for mark in said["marks"])
    return Axis(**{**said, "marks": marks})
