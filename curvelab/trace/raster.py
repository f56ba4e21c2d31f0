"""One line of a prepared raster plot, from its guide places."""

from dataclasses import replace

import numpy as np

from curvelab.errors import TraceError
from curvelab.records.arrays import Floats
from curvelab.records.trace import Place, Trace
from curvelab.records.warning import ReadingWarning
from curvelab.trace.centre import Centres, measure_centres
from curvelab.trace.chains import ChainGraph, build_graph
from curvelab.trace.course import course_of
from curvelab.trace.dashes import changes_of_print
from curvelab.trace.edges import edge_raster
from curvelab.trace.guide import Guide
from curvelab.trace.outcome import Measured, gap_records, keep_seen
from curvelab.trace.prepared import Prepared, Raster
from curvelab.trace.select import chains_near, ink_of_colour, nearest_line, written
from curvelab.trace.strokes import curve_ink
from curvelab.trace.walk import Walk, path_between, walk_on
from curvelab.trace.window import PlotWindow, plot_window

AT_FRAME = 4.0
"""px: a line that ends this near the frame leaves the plot."""


def trace_raster(prepared: Prepared, raster: Raster, guide: Guide) -> tuple[Trace, tuple[ReadingWarning, ...]]:
    """Trace one line on pixels; see ``trace_guided``."""
    places = np.array(guide.through, dtype=np.float64)
    pixels = raster.pixels.columns_rows(places) - np.array(raster.ink.origin)
    wanted = ink_of_colour(guide.colour, raster.ink.density.shape[2])
    edges = None if _lies_on(raster.graph, pixels) else edge_raster(raster)
    boundary = edges is not None and _lies_on(edges.graph, pixels)
    if edges is not None and boundary:
        raster, wanted = edges, None
    graph = _graph(raster, guide)
    walk = _walk(raster, graph, pixels, guide, wanted)
    centres = _centres(raster, graph, walk)
    window = plot_window(prepared.axes)
    origin = np.array(raster.ink.origin)
    everywhere = raster.pixels.places(centres.course.places(centres.across) + origin)
    inside = window.holds(everywhere, 0.5 * raster.pixels.size_in_places)
    measured = keep_seen(centres, inside, walk.line)
    if measured is None:
        raise TraceError(
            f"No line can be measured at {written(guide.through[0])}",
            "A line a few pixels wide with visible ink is expected",
            "Set the guide place on the line",
        )
    trace = _trace(raster, window, centres, measured, pixels)
    warnings = (*_warnings(raster, walk), *map(_changed_print, changes_of_print(trace, raster.pixels.size_in_places)))
    if not boundary:
        return trace, warnings
    return replace(trace, boundary=True, colour=None), (_area_edge(guide), *warnings)


def _area_edge(guide: Guide) -> ReadingWarning:
    return ReadingWarning(
        code="area-edge",
        text="No line is there, so the edge of a filled area was read: look at it over the sheet before it is stored",
        at=guide.through[0],
    )


def _changed_print(place: Place) -> ReadingWarning:
    return ReadingWarning(
        code="trace-doubt",
        text="The line changes between dashed and unbroken here, and may be two lines; add guide places beyond",
        at=place,
    )


def _lies_on(graph: ChainGraph, pixels: Floats) -> bool:
    """Whether every guide place has a line near it."""
    return all(chains_near(graph, pixel, None) for pixel in pixels)


def _graph(raster: Raster, guide: Guide) -> ChainGraph:
    """The page's chains, or chains without what the guide says to avoid."""
    if not guide.avoid:
        return raster.graph
    skeleton = raster.skeleton.copy()
    for x0, y0, x1, y1 in guide.avoid:
        corners = raster.pixels.columns_rows(np.array([[x0, y0], [x1, y1], [x0, y1], [x1, y0]])) - raster.ink.origin
        low = np.clip(np.floor(corners.min(axis=0)).astype(int), 0, None)
        high = np.clip(np.ceil(corners.max(axis=0)).astype(int) + 1, 0, None)
        skeleton[low[1] : high[1], low[0] : high[0]] = False
    ink = curve_ink(raster.ink, raster.grid)
    return build_graph(skeleton, ink, raster.widths, raster.inside, raster.sense.progress)


def _walk(raster: Raster, graph: ChainGraph, pixels: Floats, guide: Guide, wanted: Floats | None) -> Walk:
    """The line through every guide place."""
    near = [chains_near(graph, pixel, wanted) for pixel in pixels]
    for place, pixel, found in zip(guide.through, pixels, near, strict=True):
        if not found:
            raise _nothing_there(raster, graph, place, pixel, wanted, guide.colour)
    progress = raster.sense.progress(pixels)
    order = np.argsort(progress.sum(axis=1), kind="stable").tolist()
    path = path_between(graph, [near[k] for k in order], progress[order])
    if isinstance(path, int):
        first, second = guide.through[order[path - 1]], guide.through[order[path]]
        raise TraceError(
            f"Guide places {written(first)} and {written(second)} lie on different lines",
            "One line through both is expected, which turns back along neither axis",
            "Move one of them, or add a place between them",
        )
    return walk_on(graph, *path)


def _nothing_there(
    raster: Raster,
    graph: ChainGraph,
    place: tuple[float, float],
    pixel: Floats,
    wanted: Floats | None,
    colour: str | None,
) -> TraceError:
    if wanted is not None and chains_near(graph, pixel, None):
        return TraceError(
            f"No line of colour {colour} at {written(place)}",
            "The line there has another colour",
            "Correct the colour, or leave it out",
        )
    distance = nearest_line(graph, pixel)
    size = raster.pixels.size_in_places
    return TraceError(
        f"No line at guide place {written(place)}",
        "No line on this plot" if distance is None else f"The nearest line is {distance * size:.1f} away",
        "Set the guide place on the line",
    )


def _centres(raster: Raster, graph: ChainGraph, walk: Walk) -> Centres:
    chains = [graph.chains[number] for number in sorted(walk.chains)]
    lengths = np.array([chain.length for chain in chains])
    width = max(_weighted_median(np.array([chain.width for chain in chains]), lengths), 1.0)
    inks = np.array([chain.ink for chain in chains])
    ink = np.array([_weighted_median(inks[:, k], lengths) for k in range(inks.shape[1])])
    return measure_centres(raster, course_of(walk.line, width, 0.5 * width + 6.0), ink, width)


def _weighted_median(values: Floats, weights: Floats) -> float:
    order = np.argsort(values)
    total = np.cumsum(weights[order])
    return float(values[order[int(np.searchsorted(total, 0.5 * total[-1]))]])


def _trace(raster: Raster, window: PlotWindow, centres: Centres, measured: Measured, guides: Floats) -> Trace:
    pixels = raster.pixels
    origin = np.array(raster.ink.origin)
    places = pixels.places(measured.places + origin)
    gaps = gap_records(measured.gaps, places)
    sd, size = measured.sd, pixels.size_in_places
    if _runs_backwards(measured.places, guides):
        places, sd = places[::-1], sd[::-1]
        gaps = tuple(type(gap)(start=gap.end, end=gap.start) for gap in reversed(gaps))
    depth = window.depth(places[[0, -1]]) / size
    reach = AT_FRAME + 0.5 * centres.width
    levels = np.clip(np.round(255.0 * (1.0 - np.broadcast_to(centres.ink, (3,)))), 0, 255)
    return Trace(
        places=places,
        sd=sd * size,
        correlation_length=measured.correlation_length * size,
        gaps=gaps,
        ends_at_frame=(bool(depth[0] < reach), bool(depth[1] < reach)),
        colour=(int(levels[0]), int(levels[1]), int(levels[2])),
        width=centres.width * size,
        boundary=False,
        origin="guided",
        confidence=float(np.mean(centres.amplitude > 0.5)),
    )


def _runs_backwards(places: Floats, guides: Floats) -> bool:
    """Whether the guides, or with one guide left to right, run against the places' order."""
    if len(guides) == 1:
        return bool(places[-1, 0] < places[0, 0])
    order = [int(np.hypot(*(places - guide).T).argmin()) for guide in guides]
    return order[-1] < order[0]


def _warnings(raster: Raster, walk: Walk) -> tuple[ReadingWarning, ...]:
    return tuple(
        ReadingWarning(
            code="trace-doubt",
            text="The line could go on two ways here; add a guide place beyond it",
            at=(float(place[0]), float(place[1])),
        )
        for place in (raster.pixels.places(np.array([doubt]) + np.array(raster.ink.origin))[0] for doubt in walk.doubts)
    )
