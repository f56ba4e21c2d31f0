"""Above the axes: what the page shows, a line for each device, and how its lines are to be read."""

from collections.abc import Iterator, Sequence

from matplotlib.artist import Artist
from matplotlib.figure import Figure
from matplotlib.lines import Line2D
from matplotlib.patches import Patch

from curvelab.plots.ink import FILL, GRAPHITE, HALO, LINE_STYLE, LINE_WIDTH, QUIET
from curvelab.plots.subject import Subject, description, states_uncertainty
from curvelab.records.curve import Edge

TITLE, ROW, GAP = 0.058, 0.0155, 0.036
"""Heights as fractions of the page: title with its margin, a line of the list, the key of the lines."""
KEY_GAP = 0.007

EDGE_WORDS: dict[Edge, str] = {"fast": "fast edge", "slow": "slow edge", "mean": "mean line"}


def header_height(subjects: Sequence[Subject]) -> float:
    """What the header takes of the page."""
    return TITLE + ROW * len(subjects) + GAP


def draw_header(figure: Figure, subjects: Sequence[Subject], left: float, above: float) -> None:
    """Title, devices and key, in the margin above the axes so that nothing is covered; ``above`` is left free."""
    top = 1 - above - TITLE
    figure.text(left, top + 0.012, _title(subjects), fontsize=13, fontweight="bold", va="bottom")
    if len(subjects) == 1:
        figure.text(left, top, _about(subjects[0]), fontsize=8.5, color=QUIET, va="top")
    else:
        rows, labels = [_swatch(subject) for subject in subjects], [_entry(subject) for subject in subjects]
        _list(figure, rows, labels, (left, top), 1)
    key = list(_key(subjects))
    _list(
        figure,
        [each for each, _ in key],
        [words for _, words in key],
        (left, top - ROW * len(subjects) - KEY_GAP),
        len(key),
    )


def _list(
    figure: Figure, rows: Sequence[Artist], labels: Sequence[str], place: tuple[float, float], columns: int
) -> None:
    legend = figure.legend(
        rows,
        labels,
        loc="upper left",
        bbox_to_anchor=place,
        ncols=columns,
        frameon=False,
        fontsize=8,
        borderaxespad=0.0,
        borderpad=0.0,
        labelspacing=0.42,
        handlelength=2.6,
        handleheight=0.9,
        columnspacing=2.2,
    )
    figure.add_artist(legend)


def _title(subjects: Sequence[Subject]) -> str:
    names = [subject.name for subject in subjects]
    return " · ".join(names) if len(names) <= 3 and sum(map(len, names)) <= 54 else f"{len(names)} devices compared"


def _about(subject: Subject) -> str:
    curve = subject.curves[0]
    words = [description(subject.plate)]
    if curve.conditions.start:
        words.append(f"{curve.conditions.start} start")
    shared = set(curve.at.items()).intersection(*(each.at.items() for each in subject.curves))
    words += [f"{name} = {value:g}" for name, value in sorted(shared)]
    return ", ".join(words)


def _entry(subject: Subject) -> str:
    return f"{subject.letter}   {subject.name}:  {_about(subject)}"


def _swatch(subject: Subject) -> Artist:
    colour = subject.ink.colour
    if not any({"fast", "slow"} <= band.edges.keys() for band in subject.bands):
        edge: Edge = next((edge for band in subject.bands for edge in band.edges), "mean")
        return Line2D([], [], color=colour, linewidth=LINE_WIDTH[edge], linestyle=LINE_STYLE[edge])
    return Patch(facecolor=(colour, 2 * FILL), edgecolor=colour, hatch=subject.ink.hatch, linewidth=0.8)


def _key(subjects: Sequence[Subject]) -> Iterator[tuple[Artist, str]]:
    present = {edge for subject in subjects for band in subject.bands for edge in band.edges}
    for edge, words in EDGE_WORDS.items():
        if edge in present:
            yield Line2D([], [], color=GRAPHITE, linewidth=LINE_WIDTH[edge], linestyle=LINE_STYLE[edge]), words
    if any(states_uncertainty(curve) for subject in subjects for curve in subject.curves):
        yield Patch(facecolor=(GRAPHITE, HALO), edgecolor="none"), "95 % interval"
