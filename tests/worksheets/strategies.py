"""Any worksheet the format can say."""

from dataclasses import replace

from hypothesis import strategies as st

from curvelab.records.axes import Mark
from curvelab.records.curve import EDGES, ELEMENTS, MEANINGS, Conditions
from curvelab.records.device import KINDS, Breaking, Derating, Nameplate, Setting, Tolerance
from curvelab.records.warning import Acceptance
from curvelab.records.worksheet import AxisEntry, CurveEntry, DeviceEntry, Document, SheetEntry, Worksheet
from curvelab.units import BASES
from curvelab.worksheets.axes import units_of

numbers = st.floats(allow_nan=False, allow_infinity=False)
positives = st.floats(min_value=1e-300, max_value=1e300, allow_subnormal=False)
places = st.tuples(numbers, numbers)
texts = st.text(max_size=20)
said = texts.filter(str.strip)
counts = st.integers(min_value=1, max_value=999)


def maybe(strategy):
    return st.none() | strategy


def limits(lowest):
    return st.tuples(st.floats(lowest, 10), st.floats(lowest, 10)).map(lambda pair: tuple(sorted(pair)))


tolerances = st.builds(
    Tolerance, current=maybe(limits(-0.99)), time=maybe(limits(-0.99)), time_s=maybe(limits(-50))
).map(lambda tolerance: None if tolerance == Tolerance() else tolerance)

conditions = st.builds(
    Conditions,
    start=maybe(st.sampled_from(["cold", "hot"])),
    time_kind=maybe(st.sampled_from(["real", "virtual"])),
    supply=maybe(st.sampled_from(["ac", "dc"])),
    voltage_v=maybe(positives),
    frequency_hz=maybe(positives),
    ambient_c=maybe(numbers),
    poles_loaded=maybe(counts),
)


def axes(quantity):
    units = st.sampled_from(units_of(quantity))
    marks = st.builds(Mark, at=places, value=positives, unit=maybe(units))
    return st.builds(
        AxisEntry,
        quantity=st.just(quantity),
        scale=maybe(st.sampled_from(["log", "linear"])),
        unit=maybe(units),
        factor=maybe(positives),
        direction=st.none() | st.just("x" if quantity == "current" else "y"),
        marks=st.lists(marks, max_size=3).map(tuple),
    )


boxes = (
    st.tuples(places, places)
    .filter(lambda b: b[0][0] != b[1][0] and b[0][1] != b[1][1])
    .map(lambda b: (min(b[0][0], b[1][0]), min(b[0][1], b[1][1]), max(b[0][0], b[1][0]), max(b[0][1], b[1][1])))
)


def curves(keys):
    owners = st.lists(st.sampled_from(keys), unique=True, max_size=3).map(tuple) if keys else st.just(())
    common = {
        "edge": maybe(st.sampled_from(EDGES)),
        "meaning": maybe(st.sampled_from(MEANINGS)),
        "element": maybe(st.sampled_from(ELEMENTS)),
        "devices": owners,
        "at": st.dictionaries(st.text(min_size=1, max_size=5), numbers, max_size=3),
        "conditions": conditions,
        "tolerance": tolerances,
    }
    traced = st.builds(
        CurveEntry,
        **common,
        through=st.lists(places, min_size=1, max_size=12).map(tuple),
        colour=maybe(st.from_regex("#[0-9a-fA-F]{6}", fullmatch=True)),
        avoid=st.lists(boxes, max_size=2).map(tuple),
    )
    typed = st.builds(
        CurveEntry,
        **common,
        points=st.lists(st.tuples(positives, positives), min_size=1, max_size=12).map(tuple),
        base=st.sampled_from(BASES),
        source=texts,
    )
    return traced | typed


def settings(name):
    span = st.tuples(positives, positives).map(sorted)
    ranged = span.map(lambda ends: Setting(name=name, from_value=ends[0], to_value=ends[1]))
    stepped = st.lists(positives, min_size=1, max_size=4, unique=True).map(
        lambda steps: Setting(name=name, steps=tuple(steps))
    )
    more = st.tuples(maybe(st.sampled_from(BASES)), maybe(texts), st.booleans())
    return st.tuples(ranged | stepped, more).map(
        lambda each: replace(each[0], base=each[1][0], at=each[1][1], can_be_off=each[1][2])
    )


all_settings = st.lists(st.text(min_size=1, max_size=4), unique=True, max_size=3).flatmap(
    lambda names: st.tuples(*map(settings, names))
)

breakings = st.builds(
    Breaking,
    quantity=said,
    value_a=positives,
    voltage_v=maybe(positives),
    supply=maybe(st.sampled_from(["ac", "dc"])),
    duration_s=maybe(positives),
)
deratings = st.builds(Derating, ambient_c=numbers, factor=positives, element=st.sampled_from(ELEMENTS))

TEXTS = ("characteristic", "standard", "standard_edition", "utilisation_category", "maker", "series", "catalogue")
AMOUNTS = ("rated_current_a", "rated_residual_current_a", "rated_voltage_v", "frequency_hz")

nameplates = st.builds(
    Nameplate,
    key=st.from_regex("[A-Za-z0-9_-]{1,20}", fullmatch=True),
    kind=st.sampled_from(KINDS),
    **dict.fromkeys(("characteristic", "standard", "standard_edition", "maker", "series", "catalogue"), maybe(texts)),
    **dict.fromkeys(
        ("rated_current_a", "rated_residual_current_a", "rated_voltage_v", "frequency_hz"), maybe(positives)
    ),
    utilisation_category=maybe(texts),
    residual_waveform=maybe(st.sampled_from(["AC", "A", "F", "B"])),
    residual_delay=maybe(st.sampled_from(["general", "S"])),
    poles=maybe(counts),
    ambient_reference_c=maybe(numbers),
    breaking=st.lists(breakings, max_size=2).map(tuple),
    settings=all_settings,
    derating=st.lists(deratings, max_size=2).map(tuple),
)
singles = st.builds(DeviceEntry, nameplate=nameplates, tolerance=tolerances)


def as_series(entry, ratings):
    plate = replace(entry.nameplate, key=f"{entry.nameplate.key}-{{rating}}", rated_current_a=None)
    return replace(entry, nameplate=plate, ratings=tuple(ratings))


ratings = st.lists(st.integers(1, 6300), min_size=1, max_size=5, unique=True)
devices = st.lists(singles | st.builds(as_series, singles, ratings), max_size=3, unique_by=lambda e: e.nameplate.key)


@st.composite
def worksheets(draw):
    entries = tuple(draw(devices))
    keys = [entry.nameplate.key for entry in entries]
    sheet = st.builds(
        SheetEntry,
        file=st.sampled_from(["breaker.png", "sheets/Blatt ä.pdf"]),
        page=counts,
        plot=counts,
        sha256=maybe(st.from_regex("[0-9a-f]{64}", fullmatch=True)),
    )
    return Worksheet(
        document=draw(st.builds(Document, **dict.fromkeys(("title", "issue", "date", "maker", "note"), texts))),
        sheet=draw(sheet),
        current=draw(maybe(axes("current"))),
        value=draw(maybe(st.sampled_from(["time", "let_through", "peak"]).flatmap(axes))),
        curves=tuple(draw(st.lists(curves(keys), max_size=3))),
        devices=entries,
        accepted=tuple(
            draw(st.lists(st.builds(Acceptance, code=said, place=maybe(places), reason=texts, name=texts), max_size=2))
        ),
    )
