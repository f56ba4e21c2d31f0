"""Worksheets that no sheet belongs to: a breaker typed from a handbook table, and an isolating switch."""

from demo_curves.drawing.toml import Entry, tables
from demo_curves.drawing.worksheet import tables_of_devices

HANDBOOK_B32 = (
    ("fast", [[36.2, 3600], [46, 200], [64, 24], [82, 10], [104, 4.2], [104, 0.01], [1000, 0.006]]),
    ("slow", [[44.5, 3600], [58, 190], [82, 45], [128, 14], [160, 8.5], [160, 0.09], [320, 0.04], [1000, 0.02]]),
)
"""Edge, (A, s) rows of an invented handbook table: a B32 whose slow edge steps at 160 A, exactly 5 In."""


def handbook_b32() -> str:
    """A B32 typed from a table."""
    curves = [
        Entry(
            "[[curves]]",
            {
                "edge": edge,
                "meaning": "clearing",
                "element": "whole",
                "points": points,
                "source": "Riverside handbook of protective devices, table 7",
            },
        )
        for edge, points in HANDBOOK_B32
    ]
    device = {
        "key": "riverside-handbook-b32",
        "kind": "mcb",
        "characteristic": "B",
        "standard": "IEC 60898-1",
        "rated_current_a": 32,
        "rated_voltage_v": 230,
        "maker": "Quolvane",
        "breaking": [{"quantity": "Icn", "value_a": 6000, "voltage_v": 230, "supply": "ac"}],
    }
    document = {"title": "Riverside handbook of protective devices", "issue": "table 7", "date": "2022"}
    return tables([Entry("", {"format": 1}), Entry("[document]", document), *curves, *tables_of_devices([device])])


def isolator() -> str:
    """An isolating switch: a device without a curve."""
    device = {
        "key": "riverside-isolator-100",
        "kind": "switch",
        "standard": "IEC 60947-3",
        "rated_current_a": 100,
        "rated_voltage_v": 400,
        "poles": 3,
        "maker": "Quolvane",
        "series": "QS",
        "breaking": [{"quantity": "Icw", "value_a": 2000, "duration_s": 1}],
    }
    document = {"title": "QS 100 A isolating switch", "issue": "QS-701", "date": "2024-03", "maker": "Quolvane"}
    return tables([Entry("", {"format": 1}), Entry("[document]", document), *tables_of_devices([device])])
