"""The comparison document of two devices: their bands on one page, who clears first where, times side by side."""

import math
from collections.abc import Iterator
from dataclasses import dataclass
from functools import partial

import numpy as np
from matplotlib.figure import Figure

from curvelab import __version__
from curvelab.calculators.cautions import cautions_of
from curvelab.calculators.compare import Comparison, Pair
from curvelab.calculators.reach import Reach
from curvelab.plots.at_settings import drawn_record
from curvelab.plots.bands import bands_figure
from curvelab.plots.subject import description
from curvelab.records.answer import EdgeAnswer
from curvelab.records.stretch import NOT_COVERED, UNDECIDED, Sides, Stretch, written_stretch
from curvelab.reports.case import Case
from curvelab.reports.device_parts import sources_section
from curvelab.reports.document import (
    Block,
    Document,
    Facts,
    Free,
    Look,
    Paragraph,
    Plate,
    Row,
    Section,
    Signatures,
    Table,
    columns_of,
)
from curvelab.units import written, written_between, written_current, written_time

R10 = (1.0, 1.25, 1.6, 2.0, 2.5, 3.15, 4.0, 5.0, 6.3, 8.0)
"""Preferred numbers of ISO 3, series R10."""
MOST_ROWS = 30


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class PairCase:
    """Two revisions, upstream first: compared at the currents the table shows, and along the whole current axis."""

    upstream: Case
    downstream: Case
    comparison: Comparison
    sides: Sides

    @property
    def cases(self) -> tuple[Case, Case]:
        """Both."""
        return self.upstream, self.downstream

    @property
    def pair(self) -> Pair:
        """How they compare."""
        return self.comparison.pairs[0]


def comparison_document(case: PairCase) -> Document:
    """The whole document."""
    sections = (
        _summary(case),
        _stretches(case.sides),
        _times(case),
        *(_sources(each) for each in case.cases),
        _cautions(case),
        _bands(case),
    )
    return Document(
        title="Comparison document",
        name=" and ".join(each.name for each in case.cases),
        subtitle="Upstream first. Which surely clears before the other may act, as far as their sheets show it.",
        sections=sections,
        program=f"curvelab {__version__}",
    )


def _summary(case: PairCase) -> Section:
    pairs = [
        pair
        for each, place in zip(case.cases, ("Upstream", "Downstream"), strict=True)
        for pair in (
            (place, each.name),
            ("", description(each.record.nameplate)),
            ("Review state", each.evidence.state),
            (
                "Settings",
                ", ".join(f"{name} = {value}" for name, value in each.device.settings.items()) or "none given",
            ),
        )
    ]
    pair = case.pair
    told = [_reach(pair.a, pair.b, pair.b_clears_first), _reach(pair.b, pair.a, pair.a_clears_first)]
    blocks: list[Block] = [Facts(pairs=tuple(pairs))]
    blocks += [Paragraph(words=words) for words in told if words]
    if not any(told):
        blocks.append(Paragraph(words="Nowhere does one surely clear before the other may act.", look="open"))
    crossings = ", ".join(written_current(current, "A") for current in pair.contacts_a)
    blocks.append(
        Paragraph(words=f"Edges cross at {crossings}." if crossings else "No edge of the one crosses the other.")
    )
    return Section(heading="Summary", blocks=tuple(blocks))


def _reach(waits: str, clears: str, reach: Reach) -> str:
    if reach.from_a is None or reach.up_to_a is None:
        return ""
    end = "at least up to" if reach.status == "at_least" else "up to"
    known = reach.lower_a is not None and reach.upper_a is not None
    interval = (reach.lower_a or 0.0, reach.upper_a or 0.0) if known else None
    start, stop = written_current(reach.from_a, "A"), written_between(reach.up_to_a, interval, "A")
    return f"{clears} clears before {waits} may act from {start} {end} {stop}."


def _stretches(sides: Sides) -> Section:
    words = (
        "A device is named where its slow edge lies below the other's fast edge by the whole 95 % interval. Undecided: "
        "bands or intervals overlap. Not covered: a sheet does not reach."
    )
    columns = columns_of({"From - to": 3, "Surely clears first": 5})
    rows = tuple(
        Row(cells=(written_stretch(each), each.sooner.replace("_", " ")), look=_look(each)) for each in sides.stretches
    )
    return Section(
        heading="Who clears first", blocks=(Paragraph(words=words, look="quiet"), Table(columns=columns, rows=rows))
    )


def _look(stretch: Stretch) -> Look:
    return {UNDECIDED: "open", NOT_COVERED: "quiet"}.get(stretch.sooner, "plain")  # type: ignore[return-value]


def preferred_currents(lowest_a: float, highest_a: float) -> tuple[float, ...]:
    """Preferred numbers in the range, in A: series R10 of ISO 3, every other where they would be too many."""
    decades = range(math.floor(math.log10(lowest_a)), math.ceil(math.log10(highest_a)) + 1)
    for series in (R10, R10[::2]):
        found = tuple(step * 10.0**power for power in decades for step in series)
        inside = tuple(current for current in found if lowest_a <= current <= highest_a)
        if len(inside) <= MOST_ROWS:
            break
    return inside or (math.sqrt(lowest_a * highest_a),)


def _times(case: PairCase) -> Section:
    pair, comparison = case.pair, case.comparison
    shares = {f"{name} {edge}": 3.0 for name in comparison.devices for edge in ("fast", "slow")}
    heads = {"Current": 1.5, **shares, "Ratio": 2.8, "Surely clears first": 2.6}
    columns = columns_of(heads)
    rows = tuple(Row(cells=tuple(_cells(case, k))) for k in range(comparison.current_a.size))
    words = f"With the half-width of the 95 % interval. The ratio is of {pair.b}'s slow time over {pair.a}'s fast time."
    return Section(
        heading="Times at chosen currents",
        blocks=(Paragraph(words=words, look="quiet"), Table(columns=columns, rows=rows)),
    )


def _cells(case: PairCase, k: int) -> Iterator[str]:
    yield written_current(float(case.comparison.current_a[k]), "A")
    for times in case.comparison.times:
        yield from (_time(edge, k) for edge in (times.fast, times.slow))
    ratio = case.pair.b_over_a
    value = float(ratio.value[k])
    yield written(value, "ratio") + _half_width(value, ratio.lower[k], ratio.upper[k]) if np.isfinite(value) else "-"
    yield str(case.pair.sooner[k]).replace("_", " ")


def _time(edge: EdgeAnswer | None, k: int) -> str:
    if edge is None:
        return "no such line"
    status, value, lower, upper = (np.ravel(each)[k] for each in (edge.status, edge.value, edge.lower, edge.upper))
    if np.isnan(value):
        return str(status).replace("_", " ")
    sign = {"at_least": "≥ ", "at_most": "≤ "}.get(str(status), "")
    return sign + written_time(float(value)) + (_half_width(value, lower, upper) if status == "value" else "")


def _half_width(value: float, lower: float, upper: float) -> str:
    """`` ±0.04 %``: the wider side; nothing where the uncertainty is not known or open."""
    half = max(upper - value, value - lower) / value
    return f" ±{100 * half:.2g} %" if np.isfinite(half) and lower > 0 else ""


def _sources(case: Case) -> Section:
    return Section(heading=f"Source documents of {case.name}", blocks=sources_section(case).blocks)


def _cautions(case: PairCase) -> Section:
    cautions = cautions_of(*(each.device for each in case.cases))
    words = tuple(Paragraph(words=caution.text) for caution in cautions)
    return Section(
        heading="Cautions and review", blocks=(*words, Signatures(roles=("Compared", "Checked", "Released")))
    )


def _bands(case: PairCase) -> Section:
    caption = (
        "Grey: undecided for this pair. The strip says who surely clears first. Nothing is drawn beyond what the "
        "sheets show."
    )
    return Section(heading="Both bands", blocks=(Plate(make=partial(_figure, case), caption=caption, hatched=True),))


def _figure(case: PairCase, free: Free) -> Figure:
    return bands_figure([drawn_record(each.device) for each in case.cases], sides=(case.sides,), free=free)
