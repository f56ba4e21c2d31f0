"""Random sheets whose words tell what every line is, as data sheets print them: titles, labels, legends, notes."""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace

import numpy as np

from demo_curves.drawing.design import (
    AxisDesign,
    CurveDesign,
    CurveLabel,
    Note,
    SheetDesign,
)
from demo_curves.drawing.fonts import text_width
from demo_curves.drawing.formulas import Line, inverse_piece, relay_line, smooth_through, straight, with_vertices
from tests.drawing.shapes import Subject
from tests.drawing.styles import COLOURS, styled

RATINGS = (2, 4, 6, 10, 16, 20, 25, 32, 40, 50, 63, 80, 100, 125, 160, 200, 250, 315, 400)
"""Preferred rated currents in A (IEC 60059)."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Wording:
    """A subject with its printed words: the sheet's title and subtitle, and how each line carries its own.

    ``words`` maps a line's name to what is printed for it; lines of one ``look`` are drawn alike; ``how`` is
    ``on`` (in a gap of the line), ``beside``, ``leader``, ``legend`` or ``none``.
    """

    subject: Subject
    title: str
    subtitle: str
    words: Mapping[str, str]
    looks: Mapping[str, int]
    how: str
    notes: tuple[str, ...] = ()


def _curve(name: str, line: Line, **words: object) -> CurveDesign:
    keys = {"edge": "mean", "meaning": "clearing", "element": "whole"} | words
    return CurveDesign(name=name, current=line[0], value=line[1], **keys)  # type: ignore[arg-type]


def _axis(quantity: str, unit: str, low: float, high: float, label: str, rng: np.random.Generator) -> AxisDesign:
    labelled = ((1,), (1, 2, 5), (1, 3))[rng.integers(3)]
    return AxisDesign(quantity=quantity, unit=unit, low=low, high=high, label=label, labelled=labelled)


def _pick(rng: np.random.Generator, options: Sequence[str]) -> str:
    return str(options[int(rng.integers(len(options)))])


STEPS = {"B": (3.0, 5.0), "C": (5.0, 10.0), "D": (10.0, 20.0)}
"""Instantaneous tripping between these multiples of In (IEC 60898-1, Table 2)."""


def _edges(letter: str, rng: np.random.Generator, top: float) -> tuple[Line, Line]:
    low, high = STEPS[letter]
    fast_step, slow_step = low * rng.uniform(1.05, 1.15), high * rng.uniform(0.86, 0.96)
    fast = inverse_piece(rng.uniform(1.14, 1.18), rng.uniform(8, 16), rng.uniform(1.8, 2.2), 2 * top, fast_step)
    slow = inverse_piece(rng.uniform(1.34, 1.40), rng.uniform(60, 100), rng.uniform(1.8, 2.1), 2 * top, slow_step)
    floor = rng.uniform(0.02, 0.05)
    fast = with_vertices(fast, [(fast_step, 0.0005)])
    return fast, with_vertices(slow, [(slow_step, floor), (200.0, floor * rng.uniform(0.3, 0.7))])


def _breaker(key: str, letter: str, rating: float | None) -> dict[str, object]:
    plate: dict[str, object] = {"key": key, "kind": "mcb", "characteristic": letter}
    return plate | ({"rated_current_a": rating} if rating else {})


def one_breaker(rng: np.random.Generator) -> Wording:
    """A band of one type, in multiples or in amperes of one rating."""
    letter, rating = _pick(rng, "BCD"), float(RATINGS[int(rng.integers(2, 11))])
    amperes = bool(rng.integers(2))
    scale, top = (rating if amperes else 1.0), 10.0 ** int(rng.integers(3, 5))
    fast, slow = ((line[0] * scale, line[1]) for line in _edges(letter, rng, top))
    lowest = 10.0 ** np.floor(np.log10(scale * 1.1))
    curves = (_curve("fast", fast, edge="fast"), _curve("slow", slow, edge="slow"))
    titles = (
        f"MCB type {letter}", f"Tripping characteristic {letter}", f"Miniature circuit-breaker, {letter} curve",
        f"{letter} characteristic", f"Time-current characteristic MCB type {letter}",
    )  # fmt: skip
    title = _pick(rng, titles)
    if amperes:
        title += _pick(rng, (f", {rating:g} A", f", In = {rating:g} A"))
    else:
        title += _pick(rng, (", 6 A to 63 A", "", ", 10 A to 32 A"))
    unit = "A" if amperes else "xIn"
    label = "Current in A" if amperes else _pick(rng, ("Multiple of rated current In", "I / In"))
    how = _pick(rng, ("none", "none", "legend", "beside"))
    words = {"fast": _pick(rng, ("min.", "minimum", "shortest time")), "slow": _pick(rng, ("max.", "maximum"))}
    if how == "legend":
        words = {"fast": "Shortest tripping time", "slow": "Longest tripping time"}
    return Wording(
        subject=Subject(
            title=title,
            current=_axis("current", unit, lowest, lowest * 1000.0, label, rng),
            time=_axis("time", "s", 0.01, top, _pick(rng, ("Tripping time / s", "Tripping time in s")), rng),
            curves=curves,
            devices=(_breaker("one", letter, rating if amperes else None),),
        ),
        title=title,
        subtitle=_pick(rng, ("", "Cold state, 30 °C", "230 / 400 V a.c.")),
        words=words,
        looks={"fast": 0, "slow": 1 if how == "legend" else 0},
        how=how,
    )


def two_types(rng: np.random.Generator) -> Wording:
    """Bands of two types on one plot, told apart by look and by words."""
    first, second = ("B", "C") if rng.integers(2) else ("C", "D")
    curves, words, looks = [], {}, {}
    how = _pick(rng, ("legend", "beside", "on"))
    for number, letter in enumerate((first, second)):
        stretch = 1.0 + 0.06 * number
        for edge, line in zip(("fast", "slow"), _edges(letter, rng, 1e4), strict=True):
            name = f"{letter} {edge}"
            shape = (line[0] * stretch, line[1])
            curves.append(_curve(name, shape, edge=edge, devices=(f"type-{letter}",)))
            looks[name] = number
            text = f"Type {letter}" if how == "legend" else letter
            if how == "legend" or edge == "slow":
                words[name] = text
    title = _pick(rng, (f"MCB types {first} and {second}", f"Tripping characteristics {first}, {second}",
                        f"Miniature circuit-breakers, types {first} and {second}"))  # fmt: skip
    return Wording(
        subject=Subject(
            title=title,
            current=_axis("current", "xIn", 1.0, 100.0, "Multiple of rated current In", rng),
            time=_axis("time", "s", 0.01, 1e4, "Tripping time / s", rng),
            curves=tuple(curves),
            devices=tuple(_breaker(f"type-{letter}", letter, None) for letter in (first, second)),
        ),
        title=title,
        subtitle="",
        words=words,
        looks=looks,
        how=how,
    )


def _fuse_line(rating: float, rng: np.random.Generator) -> Line:
    bend = rng.uniform(0.97, 1.03)
    vertices = [
        (1.42, 10000.0), (1.62, 1000), (2.1, 100), (3.1, 10), (5.1, 1), (8.6, 0.1), (16.5, 0.01), (46.0, 0.001),
    ]  # fmt: skip
    return smooth_through([(rating * current * (bend if t < 500 else 1.0), t) for current, t in vertices])


def fuse_family(rng: np.random.Generator) -> Wording:
    """Lines of eight to sixteen ratings, each with its rating on it, beside it or at the end of a leader."""
    count = int(rng.integers(8, 14))
    start = int(rng.integers(0, len(RATINGS) - count))
    ratings = RATINGS[start : start + count]
    word = _pick(rng, ("gG", "aM", "gR"))
    bend = np.random.default_rng(int(rng.integers(2**31)))
    level = bend.bit_generator.state
    curves = []
    for rating in ratings:
        bend.bit_generator.state = level
        curves.append(_curve(f"{rating}", _fuse_line(rating, bend), meaning="pre_arcing", devices=(f"fuse-{rating}",)))
    style = _pick(rng, ("{} A", "{}", "{} A", f"{word} {{}} A"))
    titles = (
        f"Fuse-links {word}, {ratings[0]} A to {ratings[-1]} A", f"{word} fuses, pre-arcing times",
        f"Time-current characteristics, fuse-links {word}",
    )  # fmt: skip
    low = 10.0 ** np.floor(np.log10(ratings[0] * 1.4))
    return Wording(
        subject=Subject(
            title="fuses",
            current=_axis("current", "A", low, low * 1000.0, _pick(rng, ("Current in A", "I / A")), rng),
            time=_axis("time", "s", float(rng.choice([0.001, 0.01])), 1e4, "Pre-arcing time / s", rng),
            curves=tuple(curves),
            devices=tuple(
                {"key": f"fuse-{rating}", "kind": "fuse", "characteristic": word, "rated_current_a": float(rating)}
                for rating in ratings
            ),
        ),
        title=_pick(rng, titles),
        subtitle=_pick(rng, ("Mean values", "500 V a.c.", "")),
        words={f"{rating}": style.format(rating) for rating in ratings},
        looks={f"{rating}": 0 for rating in ratings},
        how="on",
        notes=("Numbers on the lines: rated current in A",) if style == "{}" else (),
    )


def fuse_band(rng: np.random.Generator) -> Wording:
    """The pre-arcing and the operating line of one fuse-link."""
    rating = float(RATINGS[int(rng.integers(4, 13))])
    line = _fuse_line(rating, rng)
    word = _pick(rng, ("gG", "aM"))
    how = _pick(rng, ("legend", "leader", "beside"))
    words = _pick(rng, ("pre-arcing|operating", "Pre-arcing time|Operating time", "pre-arcing, min.|operating, max."))
    one, other = words.split("|")
    low = 10.0 ** np.floor(np.log10(rating * 1.3))
    return Wording(
        subject=Subject(
            title="fuse",
            current=_axis("current", "A", low, low * 100.0, "Prospective current / A", rng),
            time=_axis("time", "s", 0.01, 1e4, _pick(rng, ("Time / s", "t / s")), rng),
            curves=(
                _curve("pre-arcing", line, edge="fast", meaning="pre_arcing"),
                _curve("operating", (line[0] * 1.22, line[1] * 1.1), edge="slow", meaning="operating"),
            ),
            devices=({"key": "fuse", "kind": "fuse", "characteristic": word, "rated_current_a": rating},),
        ),
        title=_pick(rng, (f"Fuse-link {word} {rating:g} A", f"{word} {rating:g} A fuse", f"{rating:g} A {word} fuse")),
        subtitle=_pick(rng, ("400 V a.c.", "")),
        words={"pre-arcing": one, "operating": other},
        looks={"pre-arcing": 0, "operating": 1 if how == "legend" else int(rng.integers(2))},
        how=how,
    )


def residual_device(rng: np.random.Generator) -> Wording:
    """A residual-current device: upright and sloping pieces."""
    low, high = rng.uniform(0.55, 0.7), rng.uniform(0.8, 0.95)
    fast = straight([(30 * low, 10), (30 * low, 0.09), (60, 0.045), (150, 0.018), (9e3, 0.014)])
    slow = straight([(30 * high, 10), (30 * high, 0.25), (60, 0.11), (150, 0.037), (9e3, 0.03)])
    title = _pick(rng, ("RCD 30 mA, general type", "Residual current device, 30 mA", "RCCB 30 mA"))
    how = _pick(rng, ("none", "legend", "beside"))
    return Wording(
        subject=Subject(
            title=title,
            current=_axis("current", "mA", 10.0, 1000.0, "Residual current in mA", rng),
            time=_axis("time", "ms", 10.0, 1000.0, "Break time in ms", rng),
            curves=(
                _curve("fast", (fast[0] / 1000, fast[1]), edge="fast", element="residual"),
                _curve("slow", (slow[0] / 1000, slow[1]), edge="slow", element="residual"),
            ),
            devices=({"key": "rcd", "kind": "rcd", "rated_residual_current_a": 0.03},),
        ),
        title=title,
        subtitle="",
        words={"fast": "minimum", "slow": "maximum"},
        looks={"fast": 0, "slow": 1 if how == "legend" else 0},
        how=how,
    )


def relay(rng: np.random.Generator) -> Wording:
    """An inverse-time relay at several time multipliers."""
    kind = _pick(rng, ("", "very ", "extremely "))
    steps = ((0.1, 0.3, 1.0), (0.1, 0.2, 0.4, 0.8), (0.05, 0.1, 0.2, 0.5, 1.0))[int(rng.integers(3))]
    name = f"IEC {kind}inverse"
    style = _pick(rng, ("TMS {}", "tms = {}", "TMS = {}"))
    curves = tuple(
        _curve(f"tms {tms}", relay_line(name, tms, (1.05, 25.0)), meaning="relay_output", at={"tms": tms})
        for tms in steps
    )
    return Wording(
        subject=Subject(
            title="relay",
            current=_axis("current", "xIr", 1.0, 30.0, "Multiple of setting current Ir", rng),
            time=_axis("time", "s", 0.01, 100.0, "Operating time / s", rng),
            curves=curves,
            devices=({"key": "relay", "kind": "relay", "characteristic": name},),
        ),
        title=_pick(rng, (f"Overcurrent relay, {name}", f"Relay characteristic {name}")),
        subtitle="",
        words={f"tms {tms}": style.format(tms) for tms in steps},
        looks={f"tms {tms}": 0 for tms in steps},
        how=_pick(rng, ("on", "beside")) if len(steps) == 3 else "on",
    )


WORDINGS: Mapping[str, Callable[[np.random.Generator], Wording]] = {
    "one-breaker": one_breaker,
    "two-types": two_types,
    "fuse-family": fuse_family,
    "fuse-band": fuse_band,
    "residual": residual_device,
    "relay": relay,
}


def worded(wording: Wording, rng: np.random.Generator, *, line_art: bool) -> SheetDesign:
    """The page of a wording, in a random look."""
    design = styled(wording.subject, rng, line_art=line_art)
    per_px = 72.0 / design.page.dpi
    looks = _looks(wording, rng, per_px, line_art=line_art)
    size = float(rng.uniform(6.5, 9.0))
    curves = tuple(
        replace(
            curve, labels=_labels(wording, curve, number, rng, size, design.font), **looks[wording.looks[curve.name]]
        )
        for number, curve in enumerate(design.plots[0].curves)
    )
    plot = replace(design.plots[0], curves=curves)
    left, top, right, _ = plot.frame_pt
    if wording.how == "legend":
        unique = {text: curve for curve, text in reversed(wording.words.items())}
        plot = replace(
            plot,
            legend_at_pt=(left + 0.55 * (right - left), top + rng.uniform(8, 40)),
            legend=tuple((curve, text) for text, curve in reversed(unique.items())),
        )
    bold = bool(rng.integers(2))
    widest = (design.page.width_pt - left - 6.0) / text_width(wording.title, design.font, bold, 1.0)
    title = Note(text=wording.title, at_pt=(left, 24), size_pt=min(float(rng.uniform(11, 15)), widest), bold=bold)
    notes = [title]
    if wording.subtitle:
        notes.append(Note(text=wording.subtitle, at_pt=(left, 42), size_pt=8.5))
    for number, text in enumerate(wording.notes):
        notes.append(Note(text=text, at_pt=(left, plot.frame_pt[3] + 42 + 12 * number), size_pt=7.5))
    return replace(design, plots=(plot,), notes=tuple(notes), title_block=None)


def _looks(
    wording: Wording, rng: np.random.Generator, per_px: float, *, line_art: bool
) -> Mapping[int, dict[str, object]]:
    """Colour, width and dash of every look, plainly different from one another."""
    colours = list(COLOURS[:5])
    rng.shuffle(colours)
    dashed = bool(rng.integers(2)) or line_art
    looks: dict[int, dict[str, object]] = {}
    for number in sorted(set(wording.looks.values())):
        dash = tuple(np.array([rng.uniform(12, 24), rng.uniform(5, 9)]) * per_px) if number and dashed else ()
        looks[number] = {
            "colour": "#000000" if line_art else colours[number],
            "width_pt": float(rng.uniform(2.4 if line_art else 1.5, 3.6)) * per_px,
            "dash_pt": dash,
        }
    return looks


def _labels(
    wording: Wording, curve: CurveDesign, number: int, rng: np.random.Generator, size: float, font: str
) -> tuple[CurveLabel, ...]:
    text = wording.words.get(curve.name)
    if text is None or wording.how in ("legend", "none"):
        return ()
    along = float(rng.uniform(0.3, 0.6)) if len(wording.words) < 3 else 0.08 + 0.055 * (number % 5)
    if curve.at:
        along = 0.45 + 0.07 * number  # a relay's lines lie apart where they run flat
    if wording.how == "on":
        return (CurveLabel(text=text, along=along, offset_pt=(0, 0), boxed=True, size_pt=size),)
    if len(wording.words) > 2:
        along = float(rng.uniform(0.75, 0.85))  # where the lines lie far apart
    side = -1.0 if curve.edge == "fast" else 1.0
    half = text_width(text, font, False, size) / 2
    leader = wording.how == "leader"
    offset = (side * (half + (26.0 if leader else 4.0)), -side * (26.0 if leader else 2.0))
    return (CurveLabel(text=text, along=along, offset_pt=offset, leader=leader, size_pt=size),)
