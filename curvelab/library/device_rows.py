"""A device's nameplate and curves as rows."""

import json
from collections.abc import Iterator

from curvelab.library.load import CONDITION_COLUMNS, PLATE_COLUMNS
from curvelab.library.rows import Row, WaitingRows
from curvelab.records.curve import Curve
from curvelab.records.device import Nameplate


def add_nameplate_lists(rows: WaitingRows, revision_id: int, plate: Nameplate) -> None:
    """Let the rows of capacities, settings and derating wait."""
    rows.add(
        "breaking",
        (
            (revision_id, seq, item.quantity, item.value_a, item.voltage_v, item.supply, item.duration_s)
            for seq, item in enumerate(plate.breaking, start=1)
        ),
    )
    rows.add(
        "derating",
        (
            (revision_id, seq, item.element, item.ambient_c, item.factor)
            for seq, item in enumerate(plate.derating, start=1)
        ),
    )
    for seq, item in enumerate(plate.settings, start=1):
        described = (item.base, item.from_value, item.to_value, item.at, item.can_be_off)
        rows.add("setting", [(revision_id, item.name, seq, *described)])
        rows.add(
            "setting_step", ((revision_id, item.name, step, value) for step, value in enumerate(item.steps, start=1))
        )


def plate_values(plate: Nameplate) -> tuple[object, ...]:
    """The nameplate's single values, in the order of the columns."""
    return tuple(getattr(plate, name) for name in PLATE_COLUMNS)


def add_curve(rows: WaitingRows, curve_id: int, curve: Curve, sha256: bytes, sheet_id: int | None) -> None:
    """Let a curve's rows wait."""
    row = (
        curve_id,
        sha256,
        curve.element,
        curve.edge,
        curve.meaning,
        curve.quantity,
        curve.base,
        curve.basis,
        curve.leaves_top,
        curve.source,
        sheet_id,
        *(getattr(curve.conditions, name) for name in CONDITION_COLUMNS),
        json.dumps({name: float(value) for name, value in curve.at.items()}, sort_keys=True),
        curve.time_setting,
        curve.time_setting_at,
    )
    rows.add("curve", [row])
    rows.add("point", _point_rows(curve_id, curve))


def _point_rows(curve_id: int, curve: Curve) -> Iterator[Row]:
    """One row a point; SQLite takes NaN as NULL."""
    for number, part in enumerate(curve.parts, start=1):
        columns = (part.current, part.value, part.sd_current, part.sd_value, part.sd_common)
        for seq, values in enumerate(zip(*(column.tolist() for column in columns), strict=True), start=1):
            yield (curve_id, number, seq, *values)
