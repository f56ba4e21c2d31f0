"""A device that comes under a rule, with one line near the rule's limit."""

from dataclasses import replace

from curvelab.devices.device import Device
from curvelab.records.curve import Conditions
from curvelab.records.device import Setting
from curvelab.standards.rule import Rule, Span
from tests.devices.made import device, line

DEFAULT_A = 16.0
SETTINGS = {
    "xIr": Setting(name="ir", from_value=10.0, to_value=20.0, base="A"),
    "xIi": Setting(name="ii", from_value=2.0, to_value=10.0, base="xIn"),
    "xIsd": Setting(name="isd", from_value=2.0, to_value=10.0, base="xIn"),
}
TIME_SETTING = 0.5
UNSAID = {"fuse": "pre_arcing", "relay": "relay_output"}


def in_span(span: Span, usual: float) -> float:
    """A value in a span, the usual one where it may be."""
    return min(span.up_to, max(usual, 2 * span.above))


def passing(rule: Rule, factor: float, sd: float | None = None, **fields: object) -> Device:
    """A device whose edge passes the rule's current at ``factor`` times its limit, falling as 1/current^2.

    A rule whose current is implied within a rounding gets the edge at the end of it that is harder to meet.
    """
    of, asked = rule.devices, rule.asked
    time_setting = rule.times_settings[0] if rule.times_settings else None
    limit_s = rule.limit_s * (TIME_SETTING if time_setting else 1.0)
    current = rule.current_from if factor < 1 else rule.current
    points = [(current * k, factor * limit_s / k**2) for k in (0.5, 1.0, 2.0)]
    words = {
        "base": rule.base,
        "element": {"residual": "residual"}.get(asked.path or "", "whole"),
        "meaning": asked.meaning
        or {"fuse": "pre_arcing", "relay": "relay_output"}.get(of.applies_to[0].kind, "clearing"),
        "conditions": Conditions(start=asked.start, supply=asked.supply),
    } | fields
    edge = words.pop("edge", rule.edge)
    made = line(edge, points, sd=sd, **words)
    settings = [SETTINGS[rule.base]] if rule.base in SETTINGS else []
    if time_setting:
        made = replace(made, at={time_setting: TIME_SETTING}, time_setting=time_setting, time_setting_at=TIME_SETTING)
        settings.append(Setting(name=time_setting, from_value=0.05, to_value=1.0))
    return device(
        made,
        kind=of.applies_to[0].kind,
        standard=rule.standard if of.applies_to[0].named else None,
        characteristic=of.characteristics[0] if of.characteristics else None,
        rated_current_a=in_span(of.rated_a, DEFAULT_A),
        rated_residual_current_a=in_span(of.residual_a, 0.03),
        residual_delay=of.residual_delay,
        residual_waveform=of.residual_waveforms[0] if of.residual_waveforms else None,
        settings=tuple(settings),
    )
