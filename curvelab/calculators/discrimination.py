"""Discrimination of two devices in series: up to which current only the downstream one acts, fault by fault."""

from collections.abc import Iterator
from dataclasses import dataclass
from math import isfinite

import numpy as np

from curvelab.calculators.cautions import Caution, cautions_of
from curvelab.calculators.discrimination_findings import discrimination_finding, residual_ratio_finding
from curvelab.calculators.holding import Holding, holding_of
from curvelab.calculators.in_series import Fault, Series, State
from curvelab.calculators.refusals import no_total_time, not_protective
from curvelab.calculators.spans import Codes, Span, places_of, spans_of
from curvelab.calculators.transformer import Transformer
from curvelab.devices.device import Device, Quantity
from curvelab.devices.lines import is_off
from curvelab.devices.question import RESIDUAL_ONLY
from curvelab.errors import InputError
from curvelab.records.arrays import Floats
from curvelab.records.finding import Finding

QUANTITIES: tuple[Quantity, ...] = ("time", "let_through")


@dataclass(frozen=True, kw_only=True, slots=True)
class Case:
    """One kind of fault.

    ``spans`` say for each current in A of the downstream device whether only it acts, with a `State` as their code;
    ``holding`` is the first stretch in which it does.
    """

    fault: Fault
    spans: tuple[Span, ...]
    holding: Holding


@dataclass(frozen=True, kw_only=True, slots=True)
class Discrimination:
    """Up to which current only the downstream one of two devices acts; currents are those of the downstream device."""

    upstream: str
    downstream: str
    revisions: tuple[int | None, int | None]
    up_to_a: float | None
    transformer: Transformer | None
    cases: tuple[Case, ...]
    findings: tuple[Finding, ...]
    notes: tuple[str, ...]
    cautions: tuple[Caution, ...]


def discrimination(
    upstream: Device, downstream: Device, up_to_a: float | None = None, transformer: Transformer | None = None
) -> Discrimination:
    """Up to which current only the downstream device acts.

    Above 0.1 s the bands tell; below, the pre-arcing (or unlatching) energy of the upstream device against the energy
    the downstream one lets through, and nothing else; residual currents are told by times alone.

    Parameters
    ----------
    upstream, downstream : Device
        At their settings.
    up_to_a : float, optional
        Prospective current in A of the downstream device up to which it is wanted.
    transformer : Transformer, optional
        Between them, the upstream device on its primary side.

    Raises
    ------
    InputError
        A current is not positive.
    DeviceError
        An adjustable device without its settings.
    """
    if up_to_a is not None and not (isfinite(up_to_a) and up_to_a > 0):
        raise InputError(f"A prospective current of {up_to_a:g} A cannot be", "A positive number")
    faults = _faults(upstream, downstream, transformer)
    cases = tuple(case for fault in faults for case in _case(Series(upstream, downstream, fault), up_to_a))
    findings = [discrimination_finding(upstream, downstream, case.fault.name, case.holding, up_to_a) for case in cases]
    return Discrimination(
        upstream=upstream.key,
        downstream=downstream.key,
        revisions=(upstream.revision, downstream.revision),
        up_to_a=up_to_a,
        transformer=transformer,
        cases=cases,
        findings=(*(each for each in findings if each), *residual_ratio_finding(upstream, downstream)),
        notes=tuple(dict.fromkeys(_notes(upstream, downstream, cases))),
        cautions=cautions_of(upstream, downstream),
    )


def _faults(upstream: Device, downstream: Device, transformer: Transformer | None) -> Iterator[Fault]:
    """The faults both devices may see; residual current does not pass a transformer."""
    if transformer is not None:
        yield from (Fault(name=each.fault, share=each.factor / transformer.ratio) for each in transformer.faults)
        return
    if upstream.nameplate.kind != "rcd" and downstream.nameplate.kind != "rcd":
        yield Fault(name="short circuit")
    if _sees_residual(upstream):
        yield Fault(name="earth fault", path="residual")


def _sees_residual(device: Device) -> bool:
    elements = {curve.element for curve in device.record.curves if curve.quantity == "time"}
    acting = {element for element in elements if not is_off(element, device.settings)}
    return device.nameplate.kind == "rcd" or bool(acting & set(RESIDUAL_ONLY))


def _case(series: Series, up_to_a: float | None) -> Iterator[Case]:
    """The case, where both devices have lines for it."""
    bends_a = _bends(series)
    if bends_a.size == 0:
        return
    last_a = max(float(bends_a.max()), up_to_a or 0.0)
    places = places_of(bends_a, float(bends_a.min()), last_a)

    def states(current_a: Floats) -> Codes:
        return series.at(current_a).states

    spans = spans_of(states, places)
    holding = holding_of(series, spans, places)
    if len(spans) > 1 and spans[-1].code == State.NOT_COVERED and spans[-1].from_a >= (up_to_a or 0.0):
        spans = spans[:-1]
    yield Case(fault=series.fault, spans=spans, holding=holding)


def _bends(series: Series) -> Floats:
    """Every current in A of the downstream device at which a line of either bends."""
    bends = [
        device.bends_a(series.fault.path, quantity) / share
        for device, share in ((series.upstream, series.fault.share), (series.downstream, 1.0))
        for quantity in QUANTITIES
    ]
    return np.unique(np.concatenate(bends))


def _notes(upstream: Device, downstream: Device, cases: tuple[Case, ...]) -> Iterator[str]:
    for device in (upstream, downstream):
        refusal = not_protective(device)
        if refusal:
            yield f"{refusal}."
    if upstream.nameplate.kind == "rcd" != downstream.nameplate.kind:
        yield f"'{upstream.key}' acts on residual current only: it sees no fault between lines or to neutral."
    if downstream.nameplate.kind == "rcd" and upstream.nameplate.kind != "rcd":
        yield f"'{downstream.key}' acts on residual current only: it clears no fault between lines or to neutral."
    silent = no_total_time(downstream)
    if silent and any(case.holding.from_a is None for case in cases):
        yield f"{silent}."
    if any(span.code == State.UNDETERMINED for case in cases for span in case.spans):
        yield (
            f"Where it is undetermined only energy data tell: pre-arcing or unlatching I2t of '{upstream.key}' against "
            f"the let-through I2t of '{downstream.key}', or a selectivity table of the maker."
        )
