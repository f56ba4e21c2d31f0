"""Evidence comes back exactly as it was: enough to draw the overlay and to read the sheet again."""

import dataclasses
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from curvelab.errors import NotFoundError
from curvelab.fit.curve import fit_curve
from curvelab.library.library import Library, open_library
from tests.fit.drawn_points import drawn, thermal_drop_floor
from tests.library.devices import breaker, curve
from tests.reading.example import reading as full_reading
from tests.reading.example import typed_reading


@pytest.fixture
def library(tmp_path: Path) -> Library:
    with open_library(tmp_path / "firm.sqlite") as library:
        yield library


def plain(value: Any) -> Any:
    """A record as nested tuples that can be compared, arrays bit for bit."""
    if dataclasses.is_dataclass(value):
        return tuple(plain(getattr(value, field.name)) for field in dataclasses.fields(value))
    if isinstance(value, np.ndarray):
        return value.shape, (value + 0.0).tobytes()
    if isinstance(value, tuple | list):
        return tuple(plain(item) for item in value)
    return dict(value) if hasattr(value, "items") else value


TYPED = dataclasses.replace(typed_reading(), devices=(breaker("typed", curve()),))


@pytest.mark.parametrize("given", [full_reading(), full_reading("let_through"), TYPED])
def test_a_reading_comes_back_bit_for_bit(library: Library, given: Any) -> None:
    library.store(given, author="A. Author", reason="first issue")
    key = given.devices[0].nameplate.key
    evidence = library.evidence(key)
    assert (evidence.key, evidence.revision, evidence.author, evidence.reason) == (key, 1, "A. Author", "first issue")
    assert evidence.program_version
    (stored,) = evidence.readings
    found = stored.reading
    for name in ("axes", "curves", "findings", "program_version"):
        assert plain(getattr(found, name)) == plain(getattr(given, name)), name
    assert found.worksheet.text == given.worksheet.text
    assert found.worksheet.document == given.worksheet.document
    if given.sheet:
        assert plain(found.sheet) == plain(dataclasses.replace(given.sheet, pixels=None, strokes=(), words=()))
    assert [(one.code, one.text, one.at) for one in found.warnings] == [
        (one.code, one.text, one.at) for one in given.warnings
    ]


def test_a_fitted_model_comes_back_bit_for_bit(library: Library) -> None:
    given = full_reading()
    fit = fit_curve(drawn(thermal_drop_floor(), np.random.default_rng(1)))
    first = given.curves[0]
    read = dataclasses.replace(first, fit=fit, curve=dataclasses.replace(first.curve, parts=fit.parts))
    device = dataclasses.replace(given.devices[0], curves=(read.curve,))
    library.store(dataclasses.replace(given, curves=(read,), devices=(device,)))
    (stored,) = library.evidence(device.nameplate.key).readings
    assert plain(stored.reading.curves[0].fit) == plain(fit)
    assert [form.name for form in fit.forms] == ["thermal replica, cold", "definite time"]
    rows = library.open().execute("SELECT name, parameter, value FROM curve_forms ORDER BY form, parameter").fetchall()
    assert rows == [(form.name, each.name, each.value) for form in fit.forms for each in form.parameters]


def test_curves_carried_forward_bring_their_reading(library: Library) -> None:
    given = full_reading()
    key, kind = given.devices[0].nameplate.key, given.devices[0].nameplate.kind
    library.store(given)
    library.store(breaker(key, curve(element="residual", base="xIdn"), kind=kind, rated_residual_current_a=0.03))
    assert len(library.evidence(key).readings) == 1
    assert len(library.evidence(key, 1).readings) == 1


def test_a_device_without_a_reading_has_no_evidence(library: Library) -> None:
    library.store(breaker("b32", curve()))
    assert library.evidence("b32").readings == ()
    with pytest.raises(NotFoundError, match="no device"):
        library.evidence("b33")
    with pytest.raises(NotFoundError, match="has no revision 2"):
        library.evidence("b32", 2)
