"""Sections on the device itself: nameplate, capacities, settings, curves, and the documents they come from."""

from collections.abc import Iterator
from dataclasses import fields

from curvelab.plots.subject import description
from curvelab.records.curve import Conditions, Curve
from curvelab.records.device import Breaking, Nameplate, Setting
from curvelab.records.reading import Reading
from curvelab.reports.case import Case
from curvelab.reports.document import Block, Column, Facts, Paragraph, Row, Section, Table, columns_of
from curvelab.units import written, written_current, written_time

PLATE_WORDS = {
    "standard": "Standard",
    "standard_edition": "Edition",
    "maker": "Maker",
    "series": "Series",
    "catalogue": "Catalogue number",
    "characteristic": "Characteristic",
    "rated_current_a": "Rated current",
    "rated_residual_current_a": "Rated residual current",
    "residual_waveform": "Residual waveform",
    "residual_delay": "Residual delay",
    "rated_voltage_v": "Rated voltage",
    "poles": "Poles",
    "frequency_hz": "Frequency",
    "ambient_reference_c": "Reference ambient",
    "utilisation_category": "Utilisation category",
}
UNITS = {"rated_voltage_v": " V", "frequency_hz": " Hz", "ambient_reference_c": " °C"}
CONDITION_WORDS = {
    "start": "{} start",
    "time_kind": "{} time",
    "supply": "{}",
    "voltage_v": "{:g} V",
    "frequency_hz": "{:g} Hz",
    "ambient_c": "{:g} °C",
    "poles_loaded": "{:g} poles loaded",
}
VALUE_UNITS = {"time": "s", "let_through": "A2s", "peak": "A"}


def device_section(case: Case) -> Section:
    """Nameplate, breaking capacities, settings, derating and curves."""
    plate = case.record.nameplate
    blocks: list[Block] = [Facts(pairs=(("Device", description(plate).split(",")[0]), *_plate_pairs(plate)))]
    if plate.breaking:
        columns = (
            Column("Capacity", 2),
            Column("Value", 2, "right"),
            Column("Voltage", 2, "right"),
            Column("Supply", 2),
            Column("Duration", 2, "right"),
        )
        blocks.append(Table(columns=columns, rows=tuple(map(_breaking_row, plate.breaking))))
    elif plate.kind not in ("relay", "switch"):
        blocks.append(Paragraph(words="No breaking capacity is given.", look="open"))
    if plate.settings:
        columns = (
            Column("Setting", 2),
            Column("Range or steps", 5),
            Column("Counted in", 2),
            Column("Holds at", 2),
            Column("This document", 2),
        )
        given = case.device.settings
        blocks.append(
            Table(columns=columns, rows=tuple(_setting_row(each, given.get(each.name)) for each in plate.settings))
        )
    if plate.derating:
        rows = tuple(Row(cells=(f"{each.ambient_c:g} °C", f"{each.factor:g}", each.element)) for each in plate.derating)
        heads = ("Ambient", "Factor on the rated or set current", "Element")
        blocks.append(Table(columns=columns_of(dict.fromkeys(heads, 1.0)), rows=rows))
    return Section(heading="Device", blocks=tuple(blocks))


def curves_section(case: Case) -> Section:
    """Every curve stored: what it means, where it goes, what it holds for, and where it comes from."""
    if not case.record.curves:
        words = "This device has no curve: nothing is known of when it trips, if it trips at all."
        return Section(heading="Curves", blocks=(Paragraph(words=words, look="open"),))
    shares = {"Element": 2.4, "Edge": 1.4, "Meaning": 2.1, "From": 3.3, "To": 3.3, "Holds for": 2.6, "Basis": 1.6}
    columns = (*columns_of(shares), Column("Points", 1.6, "right"))
    return Section(heading="Curves", blocks=(Table(columns=columns, rows=tuple(map(_curve_row, case.record.curves))),))


def sources_section(case: Case) -> Section:
    """The documents: title, issue, file, page and the SHA-256 by which its bytes are known."""
    blocks = [block for number, reading in enumerate(case.readings, start=1) for block in _source(number, reading)]
    typed = dict.fromkeys(curve.source for curve in case.record.curves if curve.sheet is None and curve.source)
    blocks += [Paragraph(words=f"Typed points: {source}.") for source in typed]
    return Section(heading="Source documents", blocks=tuple(blocks) or (Paragraph(words="None is kept."),))


def _plate_pairs(plate: Nameplate) -> Iterator[tuple[str, str]]:
    for name, words in PLATE_WORDS.items():
        value = getattr(plate, name)
        if value is not None:
            if name in ("rated_current_a", "rated_residual_current_a"):
                yield words, written_current(value, "A")
            else:
                yield words, f"{value:g}{UNITS.get(name, '')}" if isinstance(value, int | float) else str(value)


def _breaking_row(entry: Breaking) -> Row:
    voltage = "-" if entry.voltage_v is None else f"{entry.voltage_v:g} V"
    duration = "-" if entry.duration_s is None else written_time(entry.duration_s)
    return Row(cells=(entry.quantity, written_current(entry.value_a, "A"), voltage, entry.supply or "-", duration))


def _setting_row(setting: Setting, given: float | str | None) -> Row:
    reach = ", ".join(f"{step:g}" for step in setting.steps) or f"{setting.from_value:g} to {setting.to_value:g}"
    off = " or off" if setting.can_be_off else ""
    shown = "as drawn" if given is None else str(given) if isinstance(given, str) else f"{given:g}"
    return Row(cells=(setting.name, reach + off, setting.base or "-", setting.at or "-", shown))


def curve_words(curve: Curve) -> str:
    """``overload slow``, with the settings it is drawn for."""
    return " ".join([curve.element, curve.edge, *(f"{name}={value:g}" for name, value in sorted(curve.at.items()))])


def _curve_row(curve: Curve) -> Row:
    first, last = curve.parts[0], curve.parts[-1]
    ends = [
        f"{written_current(float(part.current[index]), curve.base)}, "
        f"{written(float(part.value[index]), VALUE_UNITS[curve.quantity])}"
        for part, index in ((first, 0), (last, -1))
    ]
    holds = [f"{name} = {value:g}" for name, value in sorted(curve.at.items())]
    holds += list(_condition_words(curve.conditions))
    quantity = "" if curve.quantity == "time" else f" ({curve.quantity.replace('_', '-')})"
    points = str(sum(part.current.size for part in curve.parts))
    meaning = (curve.meaning or "-").replace("_", "-") + quantity
    return Row(cells=(curve.element, curve.edge, meaning, *ends, ", ".join(holds) or "not stated", curve.basis, points))


def _condition_words(conditions: Conditions) -> Iterator[str]:
    for each in fields(conditions):
        value = getattr(conditions, each.name)
        if value is not None:
            yield CONDITION_WORDS[each.name].format(value)


def _source(number: int, reading: Reading) -> Iterator[Block]:
    document, entry = reading.worksheet.document, reading.worksheet.sheet
    told = [("Title", document.title), ("Maker", document.maker), ("Issue", document.issue), ("Date", document.date)]
    told += [("Note", document.note)]
    if entry is not None:
        told += [("File", entry.file), ("Page and plot", f"{entry.page}, {entry.plot or 1}")]
    told.append(("Read by", f"curvelab {reading.program_version}"))
    yield Paragraph(words=f"Document {number}" + ("" if entry else ": typed points"), look="quiet")
    yield Facts(pairs=tuple((name, value) for name, value in told if value))
    sha256 = reading.sheet.sha256 if reading.sheet is not None else entry and entry.sha256
    if sha256:
        yield Paragraph(words=f"SHA-256 of the file: {sha256}")
