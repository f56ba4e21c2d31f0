"""Cases to report on: numbers without meaning, built by hand."""

from dataclasses import dataclass, replace

from curvelab.calculators.compare import compare
from curvelab.calculators.stretches import sides_of
from curvelab.devices.device import Device
from curvelab.records.device import Breaking, DeviceRecord, Nameplate
from curvelab.records.evidence import Evidence, StoredReading
from curvelab.records.finding import Finding
from curvelab.records.worksheet import Document
from curvelab.reports.case import Case
from curvelab.reports.comparison import PairCase
from tests.plots.examples import fuse, mcb
from tests.reading.example import reading

KEY = "riverside-b16"


@dataclass(frozen=True, kw_only=True)
class Event:
    at: str
    name: str
    action: str
    revision: int
    state: str
    reason: str


EVENTS = (
    Event(
        at="2026-03-01T08:00:00.000+00:00", name="A. Reader", action="stored", revision=1, state="draft", reason="new"
    ),
    Event(
        at="2026-03-02T09:30:00.000+00:00", name="B. Checker", action="state", revision=1, state="checked", reason=""
    ),
)
FINDING = Finding(
    device=KEY,
    standard="IEC 60898-1",
    clause="Table 7, test c",
    requirement="2.55 xIn from cold: trips in less than 60 s",
    limit=60.0,
    unit="s",
    value=30.0,
    interval=(29.0, 31.0),
    outcome="meets",
    advisory=False,
    source="an invented table",
    rule="c-upper",
    current=2.55,
    base="xIn",
    permitted="at_most",
)


def evidence(record, readings, state):
    return Evidence(
        key=record.nameplate.key,
        revision=1,
        state=state,
        at="2026-03-01T08:00:00.000+00:00",
        author="A. Reader",
        reason="first reading",
        program_version="0.1.0",
        readings=readings,
    )


def case(*, note="", state="checked", findings=(FINDING,)):
    whole = reading()
    whole = replace(
        whole, worksheet=replace(whole.worksheet, document=Document(title="Band of type B", issue="Q-1", note=note))
    )
    (found,) = whole.devices
    plate = replace(
        found.nameplate,
        characteristic="B",
        standard="IEC 60898-1",
        breaking=(Breaking(quantity="Icn", value_a=6000.0, voltage_v=230.0, supply="ac"),),
    )
    record = DeviceRecord(nameplate=plate, curves=found.curves, revision=1, state=state)
    stored = StoredReading(reading=replace(whole, devices=()), source=b"kept")
    return Case(
        device=Device(record),
        evidence=evidence(record, (stored,), state),
        history=({"revision": 1, "is_current": 1, "state": state},),
        log=EVENTS,
        findings=findings,
    )


def plain_case(record):
    """A stored device without evidence."""
    record = replace(record, revision=1, state="released")
    return Case(
        device=Device(record), evidence=evidence(record, (), "released"), history=(), log=EVENTS[:1], findings=()
    )


def isolator():
    return plain_case(DeviceRecord(nameplate=Nameplate(key="riverside-q1", kind="switch", rated_current_a=63.0)))


def pair_case(currents=(20.0, 100.0, 1000.0)):
    cases = plain_case(fuse(63)), plain_case(mcb(rating=16.0))
    devices = [each.device for each in cases]
    (sides,) = sides_of(devices)
    return PairCase(upstream=cases[0], downstream=cases[1], comparison=compare(devices, currents), sides=sides)
