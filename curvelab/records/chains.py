"""The points of a curve as monotone chains: its best line, and the two lines its 95 % interval lies between."""

from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.curve import COVERAGE_FACTOR, Curve, Part


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Chain:
    """Points in order of current; ``starts`` are the indices at which a part begins."""

    current: Floats
    value: Floats
    starts: tuple[int, ...]


def falls(curve: Curve) -> bool:
    """Whether the curve's value falls with current: times do, let-through energy and peak current rise."""
    return curve.quantity == "time"


def best_chain(curve: Curve) -> Chain:
    """All parts of the curve as one chain.

    Where noise lets neighbouring parts overlap, the slow edge keeps the larger time and the fast edge the smaller.
    """
    current = np.concatenate([part.current for part in curve.parts])
    value = np.concatenate([part.value for part in curve.parts])
    sizes = [part.current.size for part in curve.parts]
    starts = tuple(int(start) for start in np.cumsum([0, *sizes[:-1]]))
    outward = curve.edge != "fast"
    current = _never_falling(current, outward=outward == falls(curve))
    if falls(curve):
        value = _never_falling(value[::-1], outward=outward)[::-1]
    return Chain(current=current, value=value, starts=starts)


def bound_chains(curve: Curve, *, own: bool) -> tuple[Chain, Chain] | None:
    """Lower and upper chain of the 95 % interval, or None where the uncertainty of any point is not known.

    Each point moves along the curve's normal in log-log, so that steep and flat stretches are treated alike. The chains
    only ever move apart to stay monotone, so that the best line lies between them.

    Parameters
    ----------
    own : bool
        Leave out the part that all curves of the sheet share.
    """
    moves = [_displacement(part, own=own) for part in curve.parts]
    along, across = (np.concatenate([move[axis] for move in moves]) for axis in (0, 1))
    if np.isnan(along).any():
        return None
    best = best_chain(curve)
    # Upwards in value is towards larger currents where the curve falls, towards smaller where it rises.
    sideways = along if falls(curve) else -along
    ends = _end_displacements(curve, own=own)
    lower = _moved(best, -sideways, -across, ends, curve, upper=False)
    upper = _moved(best, sideways, across, ends, curve, upper=True)
    return lower, upper


def _never_falling(numbers: Floats, *, outward: bool) -> Floats:
    """The numbers made monotone by raising (outward) or lowering those out of order."""
    if outward:
        return np.maximum.accumulate(numbers)
    return np.minimum.accumulate(numbers[::-1])[::-1]


def _weights(part: Part, *, own: bool) -> tuple[Floats, Floats, Floats]:
    """Standard uncertainty along the normal, and the normal's components along current and value."""
    precision_current = 1 / np.where(np.isnan(part.sd_current), np.inf, part.sd_current)
    precision_value = 1 / np.where(np.isnan(part.sd_value), np.inf, part.sd_value)
    with np.errstate(divide="ignore", invalid="ignore"):
        normal = 1 / np.hypot(precision_current, precision_value)
        components = normal * precision_current, normal * precision_value
    unknown = np.isnan(part.sd_current) & np.isnan(part.sd_value)
    normal = np.where(unknown, np.nan, normal)
    if own:
        common = np.where(np.isnan(part.sd_common), 0.0, part.sd_common)
        normal = np.sqrt(np.maximum(normal**2 - common**2, 0.0))
    return normal, *components


def _displacement(part: Part, *, own: bool) -> tuple[Floats, Floats]:
    """95 % displacement of each point in ln current and ln value, both positive; NaN where unknown."""
    normal, along, across = _weights(part, own=own)
    reach = COVERAGE_FACTOR * normal
    return reach * along, reach * across


def _end_displacements(curve: Curve, *, own: bool) -> tuple[tuple[float, float], tuple[float, float]]:
    """At both ends the 95 % reach in ln current at that value, and in ln value at that current; NaN where infinite."""
    reaches = []
    for part, index in ((curve.parts[0], 0), (curve.parts[-1], -1)):
        normal, along, across = _weights(part, own=own)
        with np.errstate(divide="ignore", invalid="ignore"):
            reach = COVERAGE_FACTOR * normal[index] / np.array([along[index], across[index]])
        reaches.append((float(reach[0]), float(reach[1])))
    return reaches[0], reaches[1]


def _moved(
    best: Chain,
    sideways: Floats,
    upwards: Floats,
    ends: tuple[tuple[float, float], tuple[float, float]],
    curve: Curve,
    *,
    upper: bool,
) -> Chain:
    """The chain displaced, carried on along its tangent to where the best line ends, and monotone."""
    log_current, log_value = np.log(best.current), np.log(best.value)
    sign = 1.0 if upper else -1.0
    outward = upper == falls(curve)
    tail = []
    for index, (reach_current, reach_value) in zip((0, -1), ends, strict=True):
        # On the side the chain moved away from, it goes on to the end's own current; on the other, to its own value.
        at_current = (index == 0) == outward
        reach = reach_value if at_current else reach_current
        move = (0.0, sign * reach) if at_current else (sign * reach * (1.0 if falls(curve) else -1.0), 0.0)
        if np.isfinite(reach):
            tail.append((index, log_current[index] + move[0], log_value[index] + move[1]))
    x, y = log_current + sideways, log_value + upwards
    for index, end_x, end_y in tail:
        x = np.insert(x, 0, end_x) if index == 0 else np.append(x, end_x)
        y = np.insert(y, 0, end_y) if index == 0 else np.append(y, end_y)
    x = _never_falling(x, outward=outward)
    if falls(curve):
        y = _never_falling(y[::-1], outward=upper)[::-1]
    return Chain(current=np.exp(x), value=np.exp(y), starts=(0,))
