"""All that is found of devices read or stored together: against their standards, and beyond them."""

from collections.abc import Iterable, Sequence

from curvelab.devices.device import Device
from curvelab.records.finding import Finding
from curvelab.standards.check import check
from curvelab.standards.family import doubts_about_family
from curvelab.standards.plausible import doubts_about
from curvelab.standards.rule import Rule


def review(devices: Sequence[Device], rules: Iterable[Rule] | None = None) -> tuple[Finding, ...]:
    """Findings of each device against the rules and what is plausible, then of the family they make.

    Parameters
    ----------
    devices : sequence of Device
    rules : iterable of Rule, optional
        In place of those shipped with the program.

    Raises
    ------
    StandardError
        A rule table is not valid.
    """
    chosen = None if rules is None else tuple(rules)
    each = (finding for device in devices for finding in review_alone(device, chosen))
    return (*each, *doubts_about_family(devices))


def review_alone(device: Device, rules: Iterable[Rule] | None = None) -> tuple[Finding, ...]:
    """Findings of one device by itself; arguments as for `review`."""
    return (*check(device, rules), *doubts_about(device))
