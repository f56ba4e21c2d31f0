"""Answers of trip times and currents as a JSON object; apart from the others, as asking a device must start fast."""

from typing import Any

from curvelab.calculators.cautions import cautions_json
from curvelab.calculators.trip import Edges, TripAnswers
from curvelab.devices.device import Device

FORMAT = 1


def trip_json(device: Device, answers: TripAnswers) -> dict[str, Any]:
    """Times in s at currents, or currents for times, in the order asked; ``base`` is that of the currents."""
    asked = "current" if answers.of_times else "time"
    return {
        "format": FORMAT,
        "device": device.key,
        "revision": device.revision,
        "state": device.state,
        "settings": dict(device.settings),
        "base": answers.base,
        "answers": [
            {
                asked: answer.asked,
                **_edges(answer.edges),
                "let_through": None if answer.let_through is None else _edges(answer.let_through),
                "peak": None if answer.peak is None else _edges(answer.peak),
                "reasons": list(answer.reasons),
            }
            for answer in answers.answers
        ],
        "notes": list(answers.notes),
        "cautions": cautions_json(answers.cautions),
    }


def _edges(edges: Edges) -> dict[str, Any]:
    return {
        name: None
        if found is None
        else {
            "status": found.status,
            "value": found.value,
            "interval": list(found.interval) if found.interval else None,
            "basis": found.basis,
        }
        for name, found in edges.items()
    }
