"""Invented devices for the library's tests: drawn by hypothesis, or one plain breaker."""

import math

import numpy as np
from hypothesis import strategies as st

from curvelab.records.axes import Axes, Axis, Mark, PlaneMap
from curvelab.records.curve import EDGES, ELEMENTS, MEANINGS, Conditions, Curve, Part, SheetKey, typed_part
from curvelab.records.device import KINDS, Breaking, Derating, DeviceRecord, Nameplate, Setting
from curvelab.records.finding import Finding
from curvelab.records.reading import Reading
from curvelab.records.sheet import Sheet
from curvelab.records.warning import Acceptance, ReadingWarning
from curvelab.records.worksheet import Document, SheetEntry, Worksheet
from curvelab.units import BASES, QUANTITIES

positive = st.floats(min_value=1e-300, max_value=1e300)
uncertainty = st.just(math.nan) | st.floats(min_value=0, max_value=10)
text = st.text(st.characters(exclude_categories=["Cs"]), max_size=12)
# An empty text of a nameplate says nothing, as None does.
word = st.none() | text.filter(bool)


@st.composite
def parts(draw: st.DrawFn) -> Part:
    count = draw(st.integers(1, 6))
    column = st.lists(positive, min_size=count, max_size=count)
    sd = st.lists(uncertainty, min_size=count, max_size=count)
    return Part(
        current=np.sort(draw(column)),
        value=np.sort(draw(column))[::-1],
        sd_current=np.array(draw(sd)),
        sd_value=np.array(draw(sd)),
        sd_common=np.array(draw(sd)),
    )


def optional(strategy: st.SearchStrategy) -> st.SearchStrategy:
    return st.none() | strategy


conditions = st.builds(
    Conditions,
    start=optional(st.sampled_from(["cold", "hot"])),
    time_kind=optional(st.sampled_from(["real", "virtual"])),
    supply=optional(st.sampled_from(["ac", "dc"])),
    voltage_v=optional(positive),
    frequency_hz=optional(positive),
    ambient_c=optional(st.floats(-60, 90)),
    poles_loaded=optional(st.integers(1, 4)),
)
sheets = st.builds(
    SheetKey,
    sha256=st.sampled_from(["a" * 64, "b" * 64]),
    page=st.integers(1, 3),
    plot=st.integers(1, 2),
    file=st.just("sheet.png"),
)
curves = st.builds(
    Curve,
    element=st.sampled_from(ELEMENTS),
    edge=st.sampled_from(EDGES),
    meaning=optional(st.sampled_from(MEANINGS)),
    quantity=st.sampled_from(QUANTITIES),
    base=st.sampled_from(BASES),
    parts=st.lists(parts(), min_size=1, max_size=3).map(tuple),
    conditions=conditions,
    at=st.dictionaries(text, st.floats(allow_nan=False, allow_infinity=False), max_size=3),
    leaves_top=st.booleans(),
    basis=st.sampled_from(["sheet", "standard", "declared"]),
    source=text,
    sheet=optional(sheets),
    time_setting=word,
    time_setting_at=optional(positive),
)
settings = st.builds(
    Setting,
    name=text,
    from_value=optional(st.floats(-1e9, 1e9)),
    to_value=optional(positive),
    steps=st.lists(positive, max_size=4).map(tuple),
    base=word,
    at=word,
    can_be_off=st.booleans(),
)
nameplates = st.builds(
    Nameplate,
    key=st.from_regex(r"[A-Za-z0-9_-]{1,64}", fullmatch=True),
    kind=st.sampled_from(KINDS),
    **dict.fromkeys(("characteristic", "standard", "standard_edition", "residual_waveform", "residual_delay"), word),
    **dict.fromkeys(
        ("rated_current_a", "rated_residual_current_a", "rated_voltage_v", "frequency_hz"), optional(positive)
    ),
    poles=optional(st.integers(1, 8)),
    ambient_reference_c=optional(st.floats(-60, 90)),
    **dict.fromkeys(("utilisation_category", "maker", "series", "catalogue"), word),
    breaking=st.lists(
        st.builds(
            Breaking,
            quantity=text,
            value_a=positive,
            voltage_v=optional(positive),
            supply=optional(st.sampled_from(["ac", "dc"])),
            duration_s=optional(positive),
        ),
        max_size=3,
    ).map(tuple),
    settings=st.lists(settings, max_size=3, unique_by=lambda item: item.name).map(tuple),
    derating=st.lists(st.builds(Derating, ambient_c=st.floats(-60, 90), factor=positive, element=text), max_size=3).map(
        tuple
    ),
)
records = st.builds(
    DeviceRecord,
    nameplate=nameplates,
    curves=st.lists(curves, max_size=3, unique_by=lambda curve: curve.identity).map(tuple),
)


def said(record: DeviceRecord) -> tuple[object, ...]:
    """All a record says in comparable form, bit for bit."""
    return record.nameplate, tuple(
        (
            curve.identity,
            curve.meaning,
            curve.base,
            curve.leaves_top,
            curve.basis,
            curve.source,
            curve.sheet,
            curve.time_setting,
            curve.time_setting_at,
            tuple(column.tobytes() for part in curve.parts for column in columns(part)),
        )
        for curve in record.curves
    )


def columns(part: Part) -> tuple[np.ndarray, ...]:
    """The five columns, -0 as 0: SQLite keeps no sign of zero."""
    return tuple(array + 0.0 for array in (part.current, part.value, part.sd_current, part.sd_value, part.sd_common))


def curve(edge: str = "slow", element: str = "whole", time_s: float = 60.0, **more: object) -> Curve:
    """Three points falling to ``time_s`` at 3 In and on to 10 ms."""
    more = {"meaning": "clearing", "base": "xIn", **more}
    return Curve(element=element, edge=edge, parts=(typed_part([1.5, 3.0, 5.0], [1000.0, time_s, 0.01]),), **more)


def breaker(key: str = "riverside-b32", *curves: Curve, **plate: object) -> DeviceRecord:
    plate = {"kind": "mcb", **plate}
    return DeviceRecord(nameplate=Nameplate(key=key, **plate), curves=curves)


def reading(
    *devices: DeviceRecord,
    title: str = "Riverside sheet",
    warnings: tuple[ReadingWarning, ...] = (),
    sha256: str = "c" * 64,
) -> Reading:
    """A reading of one sheet with everything that evidence has."""
    worksheet = Worksheet(
        document=Document(title=title, maker="Riverside"),
        sheet=SheetEntry(file="sheet.png", plot=2),
        text='format = 1\n[document]\ntitle = "Riverside"\n',
    )
    sheet = Sheet(file="sheet.png", sha256=sha256, page=1, pages=1, width=100, height=100, unit="px", pixels=None)
    finding = Finding(
        device=devices[0].nameplate.key,
        standard="IEC 60898-1",
        clause="table 7",
        requirement="trips within 1 h",
        limit=3600.0,
        unit="s",
        value=None,
        interval=None,
        outcome="not covered",
        advisory=False,
        source="table",
        rule="conventional",
    )
    return Reading(
        worksheet=worksheet,
        sheet=sheet,
        axes=axes(),
        curves=(),
        devices=devices,
        findings=(finding,),
        warnings=warnings,
        program_version="0.1.0",
    )


def axes() -> Axes:
    mark = Mark(at=(1.5, 2.5), value=10.0, residual=0.1)
    return Axes(
        current=Axis(quantity="current", scale="log", unit="A", factor=1.0, direction="x", marks=(mark,)),
        value=Axis(quantity="time", scale="log", unit="s", factor=1.0, direction="y", marks=(mark,)),
        map=PlaneMap(
            centre=np.array([50.0, 50.0]),
            reach=50.0,
            projective=np.array([0.1, 1.0, 0.0, 0.3, 0.0, 1.0, 0.0, 0.0]),
            powers=(),
            warp=np.zeros((2, 0)),
            covariance=np.diag([1e-9, 1e-9, 0, 1e-9, 0, 1e-9, 0, 0.0]),
        ),
        frame=(0.0, 0.0, 100.0, 100.0),
        mark_residual_rms=0.1,
    )


def warning(name: str | None = None) -> ReadingWarning:
    accepted = Acceptance(code="blurred", reason="looked at", name=name) if name else None
    return ReadingWarning(code="blurred", text="The sheet is blurred", at=(3.0, 4.0), accepted=accepted)
