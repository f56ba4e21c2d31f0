"""The stretch of an outline that is one edge: it ends where the outline turns back."""

import numpy as np

from curvelab.records.arrays import Floats


def edge_of_outline(outline: Floats, start: int, slack: float) -> Floats:
    """The part of a closed outline through one of its points along which neither x nor y turns back.

    A time-current edge never turns back in current or in time; the outline of a band does, where the band ends.

    Parameters
    ----------
    outline : array, shape (n, 2)
        Closed: the last point joins the first.
    start : int
    slack : float
        Length in x or y that counts as no turn.
    """
    count = len(outline)
    ring = outline[np.arange(start, start + count) % count]
    forward = _until_turn(ring, slack)
    backward = _until_turn(ring[np.r_[0, count - 1 : 0 : -1]], slack)
    straight = _until_turn_against(ring[np.r_[0, count - 1 : 0 : -1]], ring[: forward + 1], slack)
    backward = min(backward, straight)
    back = ring[np.r_[0, count - 1 : 0 : -1]][1 : backward + 1][::-1]
    return np.concatenate([back, ring[: forward + 1]])


def _until_turn(ring: Floats, slack: float) -> int:
    """Index of the last point before x or y turns back by more than the slack."""
    travel = ring - ring[0]
    limit = len(ring) - 1
    for k in (0, 1):
        way = travel[:, k]
        for sign in (1.0, -1.0):
            signed = sign * way
            reached = np.maximum.accumulate(signed)
            turned = np.flatnonzero((reached > slack) & (reached - signed > slack))
            if turned.size:
                limit = min(limit, int(np.argmax(signed[: turned[0] + 1])))
    return limit


def _until_turn_against(ring: Floats, forward: Floats, slack: float) -> int:
    """Index of the last point going backwards that does not lie on the side the way forward went to."""
    limit = len(ring) - 1
    for k in (0, 1):
        ahead = forward[-1, k] - forward[0, k]
        if abs(ahead) <= slack:
            continue
        signed = np.sign(ahead) * (ring[:, k] - ring[0, k])
        lowest = np.minimum.accumulate(signed)
        turned = np.flatnonzero(signed - lowest > slack)
        if turned.size:
            limit = min(limit, int(np.argmin(signed[: turned[0] + 1])))
    return limit
