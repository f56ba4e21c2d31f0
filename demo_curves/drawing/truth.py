"""The truth of a drawn sheet: where every value, line and grid line lies, and what of it can be seen."""

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from demo_curves.drawing.design import AxisDesign, CurveDesign
from demo_curves.drawing.geometry import Points, densified
from demo_curves.drawing.placemap import SAME_PLACE, PlaceMap
from demo_curves.drawing.scales import GridLine, places


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class CurveTruth:
    """A printed line: vertices in values and in sheet places, and whether each segment between them is seen."""

    design: CurveDesign
    current: NDArray[np.float64]  # (n,)
    value: NDArray[np.float64]  # (n,)
    places: Points  # (n, 2)
    visible: NDArray[np.bool_]  # (n - 1,)
    unit_per_pt: float = 1.0  # sheet units in one printed point, for dashes and widths

    def visible_runs(self) -> list[Points]:
        """The stretches that can be seen, as polylines of places."""
        runs = []
        start = None
        for index, seen in enumerate([*self.visible, False]):
            if seen and start is None:
                start = index
            elif not seen and start is not None:
                runs.append(self.places[start : index + 1])
                start = None
        return runs


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class PlotTruth:
    """One plot: flat place = matrix @ (log10 current, log10 value, 1), then `place_map` to the sheet as it is."""

    matrix: NDArray[np.float64]  # (2, 3)
    frame: tuple[float, float, float, float]  # before the place map
    current: AxisDesign
    value: AxisDesign
    current_direction: str
    current_lines: tuple[GridLine, ...]
    value_lines: tuple[GridLine, ...]
    curves: tuple[CurveTruth, ...]
    place_map: PlaceMap = SAME_PLACE

    def places(self, current: NDArray[np.float64], value: NDArray[np.float64]) -> Points:
        """Sheet places (n, 2) of canonical values."""
        return self.place_map.forward(places(self.matrix, current, value))

    def curve(self, name: str) -> CurveTruth:
        """The line of that name."""
        return next(curve for curve in self.curves if curve.design.name == name)


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class SheetTruth:
    """A page and its plots. Unit px: centre of the top left pixel is (0, 0); pt and user units: its corner is."""

    width: float
    height: float
    unit: str  # px | pt
    dpi: float
    plots: tuple[PlotTruth, ...]

    def to_pixels(self, dpi: float | None = None) -> "SheetTruth":
        """The same page as pixels, at its own or another resolution."""
        dpi = dpi or self.dpi
        scale = dpi / 72.0
        shift = -0.5  # a pixel's centre, not its corner, has whole coordinates

        def moved(plot: PlotTruth) -> PlotTruth:
            matrix = plot.matrix * scale
            matrix[:, 2] += shift
            left, top, right, bottom = (edge * scale + shift for edge in plot.frame)
            curves = tuple(
                replace(curve, places=curve.places * scale + shift, unit_per_pt=scale) for curve in plot.curves
            )
            return replace(plot, matrix=matrix, frame=(left, top, right, bottom), curves=curves)

        plots = tuple(moved(plot) for plot in self.plots)
        return replace(
            self, unit="px", dpi=dpi, width=round(self.width * scale), height=round(self.height * scale), plots=plots
        )

    def mapped(self, place_map: PlaceMap, width: int, height: int, dpi: float) -> "SheetTruth":
        """The truth after the sheet was moved by a map (once): lines get vertices every pixel to stay exact."""
        plots = tuple(
            replace(plot, place_map=place_map, curves=tuple(_bent(curve, plot, place_map) for curve in plot.curves))
            for plot in self.plots
        )
        return replace(self, width=width, height=height, dpi=dpi, plots=plots)


def _bent(curve: CurveTruth, plot: PlotTruth, place_map: PlaceMap) -> CurveTruth:
    """A straight segment need not stay straight under a map: vertices are added first, no more than 20 px apart."""
    flat: list[Points] = []
    visible: list[NDArray[np.bool_]] = []
    for index, seen in enumerate(curve.visible):
        piece = densified(curve.places[index : index + 2], 20.0)[:-1]
        flat.append(piece)
        visible.append(np.full(len(piece), seen))
    points = np.vstack([*flat, curve.places[-1:]])
    square = plot.matrix[:, :2]
    logs = np.linalg.solve(square, (points - plot.matrix[:, 2]).T)
    return replace(
        curve,
        current=10.0 ** logs[0],
        value=10.0 ** logs[1],
        places=place_map.forward(points),
        visible=np.concatenate(visible),
    )
