"""A comparison as JSON: plain lists, null for what is not known."""

from collections.abc import Sequence
from dataclasses import asdict
from typing import Any

import numpy as np

from curvelab.calculators.compare import Comparison
from curvelab.calculators.reach import Reach
from curvelab.records.answer import EdgeAnswer
from curvelab.records.stretch import Sides


def comparison_json(comparison: Comparison, sides: Sequence[Sides]) -> dict[str, Any]:
    """The whole comparison; null where nothing is known, and stretches of the pairs that ``sides`` has."""
    stretches = {(each.a, each.b): [asdict(stretch) for stretch in each.stretches] for each in sides}
    return {
        "format": 1,
        "devices": list(comparison.devices),
        "current": comparison.current_a.tolist(),
        "times": [
            {edge: _edge_json(getattr(times, edge)) for edge in ("fast", "slow", "mean")} for times in comparison.times
        ],
        "pairs": [
            {
                "a": pair.a,
                "b": pair.b,
                "sooner": pair.sooner.tolist(),
                "b_over_a": _numbers(pair.b_over_a.value),
                "a_over_b": _numbers(pair.a_over_b.value),
                "b_clears_first": _reach_json(pair.b_clears_first),
                "a_clears_first": _reach_json(pair.a_clears_first),
                "contacts": list(pair.contacts_a),
                "stretches": stretches.get((pair.a, pair.b)),
            }
            for pair in comparison.pairs
        ],
    }


def _reach_json(reach: Reach) -> dict[str, Any]:
    known = reach.lower_a is not None and reach.upper_a is not None
    return {
        "status": reach.status,
        "from": reach.from_a,
        "up_to": reach.up_to_a,
        "interval": [reach.lower_a, reach.upper_a] if known else None,
    }


def _edge_json(edge: EdgeAnswer | None) -> dict[str, Any] | None:
    if edge is None:
        return None
    return {
        "status": np.ravel(edge.status).tolist(),
        "value": _numbers(edge.value),
        "lower": _numbers(edge.lower),
        "upper": _numbers(edge.upper),
        "basis": edge.basis,
    }


def _numbers(values: Any) -> list[float | None]:
    return [float(value) if np.isfinite(value) else None for value in np.ravel(values)]
