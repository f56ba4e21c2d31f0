"""Findings of two devices in series: discrimination up to a current wanted, and the ratio of residual currents."""

from collections.abc import Iterator

from curvelab.calculators.estimate import Estimate
from curvelab.calculators.facts import Origin, rows_of
from curvelab.calculators.holding import Holding
from curvelab.calculators.in_series import State
from curvelab.calculators.verdict import Requirement, verdict
from curvelab.devices.device import Device
from curvelab.records.finding import Finding
from curvelab.units import written_current

_WANTED = Origin(
    clause="discrimination, as wanted",
    source="The bands and let-through energies of both devices",
    confidence="published",
)
_BEYOND = {
    State.UNDETERMINED: "Above that only energy data could tell.",
    State.NOT_COVERED: "Above that the sheets do not reach.",
}


def discrimination_finding(
    upstream: Device, downstream: Device, fault: str, holding: Holding, up_to_a: float | None
) -> Finding | None:
    """Whether only the downstream device acts up to the current wanted; None where none is."""
    if up_to_a is None:
        return None
    required = Requirement(
        device=downstream.key,
        rule="discrimination",
        words=f"{fault}: only '{downstream.key}' acts before '{upstream.key}' up to {written_current(up_to_a, 'A', 4)}",
        limit=up_to_a,
        permitted="at_least",
        origin=_WANTED,
    )
    return verdict(required, _reached(holding), _note(holding))


def _reached(holding: Holding) -> Estimate:
    """The current up to which it holds: as far as is known where nothing says what is beyond."""
    start, fails = holding.from_a, holding.fails_from_a
    if fails is not None and (start is None or fails < start):
        return Estimate(status="value", value=fails, interval=None, unit="A")
    if holding.beyond is None or holding.beyond in _BEYOND:
        up_to = holding.up_to
        return Estimate(
            status="not_covered" if up_to.value is None else "at_least",
            value=up_to.value,
            interval=up_to.interval,
            unit="A",
            reason=up_to.reason,
        )
    return holding.up_to


def _note(holding: Holding) -> str:
    start, fails = holding.from_a, holding.fails_from_a
    if fails is not None and (start is None or fails < start):
        return "The upstream device may act first from there on."
    return _BEYOND.get(holding.beyond, "") if holding.beyond is not None else ""


def residual_ratio_finding(upstream: Device, downstream: Device) -> Iterator[Finding]:
    """The ratio of the rated residual currents of two devices that act on them; advice, as times decide."""
    above, below = upstream.nameplate.rated_residual_current_a, downstream.nameplate.rated_residual_current_a
    if above is None or below is None:
        return
    row = rows_of("selectivity", "residual")[0]
    delayed = upstream.nameplate.residual_delay == "S"
    yield verdict(
        Requirement(
            device=upstream.key,
            rule="residual-ratio",
            words=f"IΔn {written_current(above, 'A')} over {written_current(below, 'A')} is at least {row['ratio']:g}",
            limit=row["ratio"],
            permitted="at_least",
            origin=row["origin"],
            advisory=True,
        ),
        Estimate(status="value", value=above / below, interval=None, unit="ratio", basis="declared"),
        "" if delayed else f"'{upstream.key}' is not of the delayed type S.",
    )
