"""The maps that are tried on the lines of a page, from the simplest on."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from curvelab.records.axes import PlaneMap

QUADRATIC = ((2, 0), (1, 1), (0, 2))
CUBIC = (*QUADRATIC, (3, 0), (2, 1), (1, 2), (0, 3))
CURL = ((2, 0), (0, 2), (3, 0), (0, 3))
WAVE = (*CURL, (4, 0), (0, 4))
"""Paper that bulges along one side or both: every line shows the whole of it, so that a few lines are enough."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Model:
    """Terms of a map and the fewest lines an axis needs for them.

    ``bowed`` says that all lines of an axis bend alike along themselves, and stay apart as they were.
    """

    projective: bool
    powers: tuple[tuple[int, int], ...]
    lines: int
    bowed: bool = False

    def free(self, start: PlaneMap) -> NDArray[np.int64]:
        """Indices of the fitted parameters; ``start`` tells which way each axis runs."""
        terms = len(self.powers)
        warp = [
            8 + axis * terms + k
            for axis, (by_x, by_y) in enumerate((start.projective[1:3], start.projective[4:6]))
            for k, power in enumerate(self.powers)
            if not self.bowed or power[0 if abs(by_x) >= abs(by_y) else 1] == 0
        ]
        return np.concatenate([np.arange(8 if self.projective else 6), np.array(warp, dtype=np.int64)])


AFFINE = Model(projective=False, powers=(), lines=0)
SIMPLE = (
    Model(projective=True, powers=(), lines=4),
    Model(projective=True, powers=CURL, lines=4, bowed=True),
    Model(projective=False, powers=QUADRATIC, lines=6),
)
"""What is tried at first beside the affine map."""

RICHER = (
    *SIMPLE,
    Model(projective=True, powers=WAVE, lines=4, bowed=True),
    Model(projective=True, powers=CURL, lines=8),
    Model(projective=False, powers=CUBIC, lines=10),
)
"""Those after the simple ones are tried where a simple one is better than the affine map."""
