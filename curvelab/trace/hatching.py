"""Hatching: straight parallel lines at one distance from the next, from line to line."""

import numpy as np

from curvelab.records.arrays import Floats

ALIKE_DEG = 3.0
FEWEST = 5
"""Lines from which a group is a hatching."""
EVEN = 0.12
"""Largest deviation of a spacing from the usual one, relative to it, or from a multiple of it."""
EVEN_SHARE = 0.7


def hatch_lines(lines: list[Floats]) -> list[bool]:
    """Which straight lines, each given as its places, are part of a hatching.

    Lines of one direction whose distances from the first are multiples of one spacing: some of a hatching's may be
    missing, and a band may be hatched in several pieces.
    """
    found = [False] * len(lines)
    angles = np.array([_angle(line) for line in lines])
    for number in range(len(lines)):
        if found[number]:
            continue
        turn = np.abs((angles - angles[number] + 90.0) % 180.0 - 90.0)
        members = np.flatnonzero(turn < ALIKE_DEG)
        if members.size >= FEWEST and _evenly_spaced([lines[k] for k in members], float(angles[number])):
            for k in members:
                found[int(k)] = True
    return found


def _angle(line: Floats) -> float:
    run, fall = line[-1] - line[0]
    return float(np.degrees(np.arctan2(fall, run)) % 180.0)


def _evenly_spaced(lines: list[Floats], angle_deg: float) -> bool:
    turn = np.radians(angle_deg)
    normal = np.array([-np.sin(turn), np.cos(turn)])
    offsets = np.sort([float(line.mean(axis=0) @ normal) for line in lines])
    steps = np.diff(offsets)
    steps = steps[steps > 0.2 * np.median(steps)]
    if steps.size == 0:
        return False
    usual = float(np.median(steps))
    multiples = np.round(steps / usual)
    even = np.abs(steps - multiples * usual) < EVEN * usual
    return bool(np.mean(even & (multiples >= 1)) >= EVEN_SHARE)
