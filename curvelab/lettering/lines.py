"""Pieces of ink that stand beside one another like characters become lines of lettering, level or upright."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from curvelab.lettering.ink import Boxes, Ink
from curvelab.records.arrays import Bytes

CHARACTER_PX = 5
"""Pieces that are smaller in both directions are dots: they join a line but never start one."""

WORD_GAP = 1.45
"""Gap between neighbours of one line, as a share of the taller one's height: a printed space is less, even in faces
whose characters are all of one width."""

LINE_GAP = 1.35
"""The same between two parts of one line, as a share of the taller part's height: a space between short letters."""

LEAST_ALIKE = 0.6
"""Parts of one line share at least this of the lower one's height, and their heights differ by no more."""

MOST_PARTS = 1500
"""Beyond this the ink is hatching, whose parts are not joined."""

CLEARLY_NEARER = 0.8
"""Ratio of gaps below which a piece belongs to its level neighbour, whatever the rest of an upright line says."""

BARRED_GAP = 0.3
"""Neighbours closer than this are letters of one word, with a grid line behind it."""

LEAST_RATIO = 0.3
"""Neighbours differ less in height than this share; a dash is measured by its width."""

CONTAINED = 3
"""A line whose middle lies in another of at least so many times its area is a part of that."""

MOST_PIECES = 12000
"""Beyond this a page is hatched or stained all over; the smallest pieces are left out."""

Ints = NDArray[np.int64]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class TextLine:
    """Pieces of one line: boxes as (x0, y0, x1, y1) in pixels, and whether it is read upwards or downwards."""

    boxes: Boxes
    upright: bool

    @property
    def box(self) -> tuple[int, int, int, int]:
        """The box around all pieces."""
        x0, y0 = self.boxes[:, :2].min(axis=0)
        x1, y1 = self.boxes[:, 2:].max(axis=0)
        return int(x0), int(y0), int(x1), int(y1)


def text_lines(ink: Ink) -> list[TextLine]:
    """Lines of lettering among a page's ink, in reading order of their upper left corners."""
    boxes = ink.boxes
    if len(boxes) > MOST_PIECES:
        area = np.prod(boxes[:, 2:] - boxes[:, :2], axis=1)
        boxes = boxes[np.argsort(-area, kind="stable")[:MOST_PIECES]]
    sizes = boxes[:, 2:] - boxes[:, :2]
    large = sizes.max(axis=1, initial=0) >= CHARACTER_PX
    characters, dots = boxes[large], boxes[~large]
    swapped = characters[:, [1, 0, 3, 2]]
    level, gaps_level = _links(characters, ink.upright_lines)
    upright, gaps_upright = _links(swapped, ink.level_lines.T)
    votes = _is_upright(len(characters), level, upright, gaps_level < gaps_upright, gaps_upright < gaps_level)
    # A chain of dashes must not take a number along that has its own neighbours much nearer.
    votes &= ~(gaps_level < CLEARLY_NEARER * gaps_upright)
    lines = []
    for is_upright, links in ((False, level), (True, upright)):
        members = votes == is_upright
        kept = links[members[links].all(axis=1)]
        lines += [
            TextLine(boxes=_with_dots(characters[group], dots, turned), upright=turned)
            for group in _groups(members, kept)
            for turned in [is_upright and len(group) > 1]  # a piece alone is read level
        ]
    lines = _joined(_outermost(lines), ink)
    return sorted(lines, key=lambda line: (line.box[1], line.box[0]))


def _joined(lines: list[TextLine], ink: Ink) -> list[TextLine]:
    """Lines whose parts stood a little further apart than neighbours do, taken together."""
    if len(lines) > MOST_PARTS:
        return lines
    for upright, barriers in ((False, ink.upright_lines), (True, ink.level_lines.T)):
        # A line that grew may be as tall as the next part asks for.
        while len(links := _continuations(lines, upright, barriers)):
            groups = _groups(np.isin(np.arange(len(lines)), links), links)
            grown = [
                TextLine(boxes=np.vstack([lines[part].boxes for part in group]), upright=upright) for group in groups
            ]
            together = set(np.concatenate(groups).tolist())
            lines = [line for number, line in enumerate(lines) if number not in together] + grown
    return lines


def _continuations(lines: list[TextLine], upright: bool, barriers: Bytes) -> Ints:
    """Pairs of lines of one direction, shape (n, 2); a piece alone has no direction of its own and joins either."""
    alone = np.array([len(line.boxes) == 1 for line in lines], dtype=bool)
    mine = np.flatnonzero(alone | np.array([line.upright == upright for line in lines], dtype=bool))
    boxes = np.array([lines[number].box for number in mine], dtype=np.int64).reshape(-1, 4)
    links = mine[_parts(boxes[:, [1, 0, 3, 2]] if upright else boxes, barriers)]
    return links[~alone[links].all(axis=1)]


def _parts(boxes: Boxes, barriers: Bytes) -> Ints:
    """Pairs of level lines, shape (n, 2), of which the second goes on where the first ends."""
    x0, y0, x1, y1 = boxes.T
    height = y1 - y0
    tall = np.maximum(height[:, None], height[None, :])
    low = np.minimum(height[:, None], height[None, :])
    gap = x0[None, :] - x1[:, None]
    shared = np.minimum(y1[:, None], y1[None, :]) - np.maximum(y0[:, None], y0[None, :])
    near = (gap > 0) & (gap <= LINE_GAP * tall) & (shared >= LEAST_ALIKE * low) & (low >= LEAST_ALIKE * tall)
    left, right = np.nonzero(near)
    free = _free(boxes, left, right, gap[left, right] / np.maximum(tall[left, right], 1), barriers)
    return np.column_stack([left[free], right[free]])


def _outermost(lines: list[TextLine]) -> list[TextLine]:
    """Lines without those that lie in a larger one: its dots and accents."""
    if not lines:
        return []
    boxes = np.array([line.box for line in lines])
    area = np.prod(boxes[:, 2:] - boxes[:, :2], axis=1)
    middle = (boxes[:, :2] + boxes[:, 2:]) / 2
    inside = (middle[:, None] > boxes[None, :, :2]).all(axis=2) & (middle[:, None] < boxes[None, :, 2:]).all(axis=2)
    inside &= area[:, None] * CONTAINED < area[None, :]
    return [line for line, is_inside in zip(lines, inside.any(axis=1), strict=True) if not is_inside]


def _links(boxes: Boxes, barriers: Bytes) -> tuple[Ints, NDArray[np.float64]]:
    """Pairs of neighbours on a level line, shape (n, 2), and each piece's smallest gap relative to the lower's height.

    A pair apart as words are is no pair where an upright line of the page stands between.
    """
    order = np.argsort(boxes[:, 0], kind="stable")
    x0, y0, x1, y1 = boxes[order].T
    heights = np.maximum(y1 - y0, (x1 - x0) // 2)
    last = np.searchsorted(x0, x1 + WORD_GAP * 60, side="right")
    counts = last - np.arange(len(order)) - 1
    left = np.repeat(np.arange(len(order)), counts)
    right = left + 1 + np.arange(counts.sum()) - np.repeat(np.cumsum(counts) - counts, counts)
    tall, low = np.maximum(heights[left], heights[right]), np.minimum(heights[left], heights[right])
    gap = x0[right] - x1[left]
    shared = np.minimum(y1[left], y1[right]) - np.maximum(y0[left], y0[right])
    lower = np.minimum(y1[left] - y0[left], y1[right] - y0[right])
    near = (
        (gap <= WORD_GAP * tall) & (x1[right] - x0[left] >= 0) & (shared >= 0.4 * lower) & (low >= LEAST_RATIO * tall)
    )
    within = (x1[right] <= x1[left]) & (y0[right] >= y0[left]) & (y1[right] <= y1[left])
    near &= ~within  # the dot in a zero is part of it
    left, right, relative = left[near], right[near], gap[near] / tall[near]
    free = _free(boxes[order], left, right, relative, barriers)
    left, right = left[free], right[free]
    relative = gap[near][free] / low[near][free]
    smallest = np.full(len(order), np.inf)
    np.minimum.at(smallest, order[left], relative)
    np.minimum.at(smallest, order[right], relative)
    return np.column_stack([order[left], order[right]]), smallest


def _free(boxes: Boxes, left: Ints, right: Ints, relative: NDArray[np.float64], barriers: Bytes) -> NDArray[np.bool_]:
    """Whether no line stands between two neighbours."""
    free = np.ones(len(left), dtype=bool)
    for pair in np.flatnonzero(relative > BARRED_GAP):
        one, other = boxes[left[pair]], boxes[right[pair]]
        row = (max(one[1], other[1]) + min(one[3], other[3])) // 2
        free[pair] = not barriers[row, one[2] : other[0]].any()
    return free


def _is_upright(
    count: int, level: Ints, upright: Ints, for_level: NDArray[np.bool_], for_upright: NDArray[np.bool_]
) -> NDArray[np.bool_]:
    """Whether each piece belongs to an upright line: the line whose members vote more strongly for its direction."""
    strength = []
    for links, votes in ((level, for_level), (upright, for_upright)):
        roots = _roots(count, links)
        strength.append(np.bincount(roots, weights=votes.astype(float), minlength=count)[roots])
    is_upright: NDArray[np.bool_] = strength[1] > strength[0]
    return is_upright


def _roots(count: int, links: Ints) -> Ints:
    """The smallest member of each piece's group, by passing it along links until nothing changes."""
    roots = np.arange(count)
    while True:
        least = np.minimum(roots[links[:, 0]], roots[links[:, 1]])
        new = roots.copy()
        np.minimum.at(new, links[:, 0], least)
        np.minimum.at(new, links[:, 1], least)
        new = new[new]
        if np.array_equal(new, roots):
            return roots
        roots = new


def _groups(members: NDArray[np.bool_], links: Ints) -> list[Ints]:
    chosen = np.flatnonzero(members)
    if not len(chosen):
        return []
    roots = _roots(len(members), links)[chosen]
    order = np.argsort(roots, kind="stable")
    breaks = np.flatnonzero(np.diff(roots[order])) + 1
    return [chosen[part] for part in np.split(order, breaks)]


def _with_dots(line: Boxes, dots: Boxes, upright: bool) -> Boxes:
    """The line with the dots that lie on it, or just before, after or beneath it."""
    x0, y0 = line[:, :2].min(axis=0)
    x1, y1 = line[:, 2:].max(axis=0)
    height = (x1 - x0) if upright else (y1 - y0)
    along, across = 0.5 * height, 0.25 * height
    reach_x, reach_y = (across, along) if upright else (along, across)
    middle = (dots[:, :2] + dots[:, 2:]) / 2
    on = (middle[:, 0] > x0 - reach_x) & (middle[:, 0] < x1 + reach_x)
    on &= (middle[:, 1] > y0 - reach_y) & (middle[:, 1] < y1 + reach_y)
    return np.vstack([line, dots[on]])
