"""Answers of calculators as JSON objects, format 1: plain lists, null for what is not known."""

from collections.abc import Sequence
from typing import Any, TypeAlias

from curvelab.calculators.breaking import BreakingAnswer
from curvelab.calculators.cautions import Caution, cautions_json
from curvelab.calculators.disconnection import Disconnection
from curvelab.calculators.discrimination import Case, Discrimination
from curvelab.calculators.estimate import Estimate
from curvelab.calculators.facts import Origin
from curvelab.calculators.in_series import State
from curvelab.calculators.overload import Overload
from curvelab.calculators.verdict import worst
from curvelab.calculators.withstand import Withstand
from curvelab.records.finding import Finding, finding_json

Json: TypeAlias = dict[str, Any]

FORMAT = 1


def estimate_json(found: Estimate | None) -> Json | None:
    """A number with its status, interval, unit and basis."""
    if found is None:
        return None
    return {
        "status": found.status,
        "value": found.value,
        "interval": list(found.interval) if found.interval else None,
        "unit": found.unit,
        "basis": found.basis,
        "reason": found.reason,
    }


def disconnection_json(answer: Disconnection) -> Json:
    """Whether a device disconnects in time; currents in A, times in s, impedances in ohm."""
    asked = answer.asked
    return {
        "format": FORMAT,
        "device": answer.device,
        "revision": answer.revision,
        "state": answer.state,
        "system": asked.system,
        "circuit": asked.circuit,
        "voltage_v": asked.voltage_v,
        "required_time": {"time_s": answer.required.time_s, **_origin(answer.required.origin)},
        "practice": {
            "name": answer.practice.name,
            "current": answer.practice.current,
            "voltage_factor": answer.reckoning.voltage_factor,
            "measured_factor": answer.reckoning.measured_factor,
            **_origin(answer.practice.origin),
        },
        "residual_current_a": answer.reckoning.residual_a,
        "trips": estimate_json(answer.trips),
        "greatest_loop": estimate_json(answer.greatest_loop),
        "greatest_measured_loop": estimate_json(answer.greatest_measured_loop),
        "loop_impedance_ohm": asked.loop_ohm,
        "measured": asked.measured,
        "fault_current_a": answer.fault.current_a if answer.fault else None,
        "time": estimate_json(answer.time),
        "notes": list(answer.notes),
        **_judged(answer.findings, answer.cautions),
    }


def withstand_json(answer: Withstand) -> Json:
    """Whether a conductor withstands a device; energies in A2s, currents in A, cross-sections in mm2."""
    conductor = answer.conductor
    return {
        "format": FORMAT,
        "device": answer.device,
        "revision": answer.revision,
        "state": answer.state,
        "conductor": {
            "material": conductor.material,
            "insulation": conductor.insulation,
            "use": conductor.use,
            "factors": [
                {"k": each.k, "above_mm2": each.above_mm2, **_origin(each.origin)} for each in conductor.factors
            ],
        },
        "area_mm2": answer.area_mm2,
        "k2s2_a2s": answer.withstands_a2s,
        "current": [answer.from_a, answer.to_a],
        "let_through": estimate_json(answer.energy),
        "least_area": estimate_json(answer.least_area),
        "next_size_mm2": answer.next_size_mm2,
        "spans": [
            {
                "from_a": each.from_a,
                "to_a": each.to_a,
                "way": each.way.name.lower(),
                "let_through": estimate_json(each.energy),
                "worst_current_a": each.worst_a,
            }
            for each in answer.stresses
        ],
        **_judged(answer.findings, answer.cautions),
    }


def overload_json(answer: Overload) -> Json:
    """Whether a device protects a conductor against overload; currents in A."""
    return {
        "format": FORMAT,
        "device": answer.device,
        "revision": answer.revision,
        "state": answer.state,
        "capacity_a": answer.load.capacity_a,
        "design_current_a": answer.load.design_a,
        "set_current_a": answer.set_a,
        "conventional_time": {"time_s": answer.conventional_time_s, **_origin(answer.conventional_origin)},
        "trips": estimate_json(answer.trips),
        "least_capacity": estimate_json(answer.least_capacity),
        "refusal": answer.refusal,
        **_judged(answer.findings, answer.cautions),
    }


def breaking_json(answer: BreakingAnswer) -> Json:
    """Whether a device breaks a short circuit; currents in A."""
    return {
        "format": FORMAT,
        "device": answer.device,
        "revision": answer.revision,
        "state": answer.state,
        "back_up": answer.back_up,
        "prospective_a": answer.asked.prospective_a,
        "voltage_v": answer.asked.voltage_v,
        "supply": answer.asked.supply,
        "capacity": estimate_json(answer.capacity),
        "back_up_capacity": estimate_json(answer.back_up_capacity),
        **_judged(answer.findings, answer.cautions),
    }


def discrimination_json(answer: Discrimination) -> Json:
    """Up to which current only the downstream device acts; currents in A of the downstream device."""
    transformer = answer.transformer
    return {
        "format": FORMAT,
        "upstream": answer.upstream,
        "downstream": answer.downstream,
        "revisions": list(answer.revisions),
        "up_to_a": answer.up_to_a,
        "transformer": {"ratio": transformer.ratio, "connection": transformer.connection} if transformer else None,
        "cases": [_case(case) for case in answer.cases],
        "notes": list(answer.notes),
        **_judged(answer.findings, answer.cautions),
    }


def _case(case: Case) -> Json:
    holding = case.holding
    return {
        "fault": case.fault.name,
        "upstream_share": case.fault.share,
        "holds_from_a": holding.from_a,
        "holds_up_to": estimate_json(holding.up_to),
        "beyond": None if holding.beyond is None else holding.beyond.name.lower(),
        "fails_from_a": holding.fails_from_a,
        "spans": [
            {"from_a": span.from_a, "to_a": span.to_a, "state": State(span.code).name.lower()} for span in case.spans
        ],
    }


def _judged(findings: Sequence[Finding], cautions: Sequence[Caution]) -> Json:
    return {
        "outcome": worst(findings),
        "findings": [finding_json(finding) for finding in findings],
        "cautions": cautions_json(cautions),
    }


def _origin(origin: Origin | None) -> Json:
    if origin is None:
        return {"clause": None, "source": None, "confidence": None}
    return {"clause": origin.clause, "source": origin.source, "confidence": origin.confidence}
