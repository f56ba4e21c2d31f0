"""What axis titles say.

``t / s``, quantity over unit, is the form of ISO 80000-1 and of the SI Brochure (BIPM, 9th edition, 5.4.1).
"""

import pytest

from curvelab.lettering.titles import title_of


@pytest.mark.parametrize(
    ("text", "quantity", "unit", "base", "factor"),
    [
        ("t / s", "time", "s", None, 1.0),
        ("Time (s)", "time", "s", None, 1.0),
        ("t [s]", "time", "s", None, 1.0),
        ("Pre-arcing time in s", "time", "s", None, 1.0),
        ("Break time / ms", "time", "ms", None, 1.0),
        ("Time in minutes", "time", "min", None, 1.0),
        ("Auslösezeit in s", "time", "s", None, 1.0),
        ("Temps (s)", "time", "s", None, 1.0),
        ("Current in A", "current", "A", "A", 1.0),
        ("I / A", "current", "A", "A", 1.0),
        ("Prospective current kA", "current", "kA", "A", 1.0),
        ("Prospective current (r.m.s.) / A", "current", "A", "A", 1.0),
        ("Residual current in mA", "current", "mA", "A", 1.0),
        ("Courant présumé (A)", "current", "A", "A", 1.0),
        ("Strom in kA", "current", "kA", "A", 1.0),
        ("Current / A × 10", "current", "A", "A", 10.0),
        ("Current in A x 100", "current", "A", "A", 100.0),
        ("Current A x 10³", "current", "A", "A", 1000.0),
        ("Multiple of rated current", "current", "xIn", "xIn", 1.0),
        ("Vielfaches des Nennstroms", "current", "xIn", "xIn", 1.0),
        ("I/In", "current", "xIn", "xIn", 1.0),
        ("× In", "current", "xIn", "xIn", 1.0),
        ("I / Ir", "current", "xIr", "xIr", 1.0),
        ("I / Isd", "current", "xIsd", "xIsd", 1.0),
        ("I / Ii", "current", "xIi", "xIi", 1.0),
        ("I / IΔn", "current", "xIdn", "xIdn", 1.0),
        ("I²t in A²s", "let_through", "A2s", None, 1.0),
        ("Let-through energy (kA²s)", "let_through", "kA2s", None, 1.0),
        ("Peak cut-off current kA", "peak", "kA", None, 1.0),
    ],
)
def test_titles(text: str, quantity: str, unit: str, base: str | None, factor: float) -> None:
    title = title_of(text)
    assert title is not None
    assert (title.quantity, title.unit, title.base, title.factor) == (quantity, unit, base, factor)
    assert title.confidence > 0.8


@pytest.mark.parametrize(
    "text",
    ["", "Time", "Current", "Multiple of the setting", "Time in A", "in", "Rated current 100 A", "Sheet 4", "I / Ix"],
)
def test_an_open_unit_or_base_says_nothing(text: str) -> None:
    assert title_of(text) is None


@pytest.mark.parametrize(("text", "unit"), [("Prospective currenl in A", "A"), ("Pre-arcinq time in s", "s")])
def test_a_misread_letter_is_put_right_for_less_confidence(text: str, unit: str) -> None:
    title = title_of(text)
    assert title is not None
    assert title.unit == unit
    assert title.confidence < 0.9


def test_a_unit_alone_is_a_weak_title() -> None:
    title = title_of("kA")
    assert title is not None
    assert (title.quantity, title.unit) == ("current", "kA")
    assert title.confidence < 0.7


@pytest.mark.parametrize(
    ("text", "unit"),
    [("Timeins", "s"), ("Multipleofratedcurrent", "xIn"), ("Currentin kA", "kA"), ("Breaktimeinms", "ms")],
)
def test_lost_spaces_are_put_back(text: str, unit: str) -> None:
    title = title_of(text)
    assert title is not None
    assert title.unit == unit


@pytest.mark.parametrize(
    ("text", "unit"), [("Mu]tip]e of setting current Ir", "xIr"), ("Pr0spective Current A", "A"), ("Zeit [min]", "min")]
)
def test_strokes_and_zeros_within_words_are_letters(text: str, unit: str) -> None:
    title = title_of(text)
    assert title is not None
    assert title.unit == unit
