"""Who surely clears first, stretch by stretch of current, from the first to the last current two devices tabulate."""

from collections.abc import Sequence
from itertools import combinations, pairwise

import numpy as np

from curvelab.calculators.compare import sooner_of
from curvelab.calculators.reach import knots_of, margin_of
from curvelab.calculators.spans import Codes, spans_of
from curvelab.devices.device import Device
from curvelab.devices.names import names_of
from curvelab.records.arrays import Floats
from curvelab.records.stretch import Sides, Stretch

EVERY_PAIR = 4
"""Up to so many devices each is set beside each; of more, each beside the next."""


def sides_of(devices: Sequence[Device]) -> tuple[Sides, ...]:
    """The stretches of each pair of devices, in the order given; of more than four, of each and the next only.

    Raises
    ------
    DeviceError
        As for `stretches`.
    """
    named = list(zip(names_of([device.record for device in devices]), devices, strict=True))
    pairs = combinations(named, 2) if len(named) <= EVERY_PAIR else pairwise(named)
    return tuple(_sides(a, b) for a, b in pairs)


def stretches(a: Device, b: Device) -> tuple[Stretch, ...]:
    """Every stretch in rising order, each beginning where the one before ends.

    A device is named where its slow edge lies surely, by the interval of 95 %, below the fast edge of the other; by the
    lines alone where their uncertainty is not known.

    Raises
    ------
    DeviceError
        An adjustable device without its settings, or currents that cannot be turned into amperes.
    """
    first, second = names_of([a.record, b.record])
    return _sides((first, a), (second, b)).stretches


def _sides(one: tuple[str, Device], other: tuple[str, Device]) -> Sides:
    (first, a), (second, b) = one, other
    a_margin, b_margin = margin_of(b, a), margin_of(a, b)

    words = np.array([first, second, "undecided", "not_covered"])

    def code_at(current_a: Floats) -> Codes:
        sooner = sooner_of((first, second), a_margin(current_a), b_margin(current_a))
        return np.asarray(np.argmax(sooner[:, np.newaxis] == words, axis=1), dtype=np.int8)

    found = spans_of(code_at, knots_of(a, b))
    stretches = (Stretch(from_a=span.from_a, to_a=span.to_a, sooner=str(words[span.code])) for span in found)
    return Sides(a=first, b=second, stretches=tuple(stretches))
