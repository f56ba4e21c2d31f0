"""A small network that tells characters apart, trained by ``python -m tests.lettering.training``."""

from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

CLASSES = "0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz.,-+/()[]%Δ=:äöüéè'"
"""Characters told apart; all dashes are ``-`` and the multiplication sign is ``x``. After them: no character."""

_ALIKE = ("1Il[]/", "0Oo", "cC", "kK", "pP", "sS", "uU", "vV", "wW", "xX", "zZ", ".,", "5S", "8B")

LOOK_ALIKES = {
    char: sorted({CLASSES.index(other) for group in _ALIKE if char in group for other in group} | {number})
    for number, char in enumerate(CLASSES)
}
"""Classes that only their neighbours tell from each character, itself among them."""

WEIGHTS = Path(__file__).with_name("weights.npz")

Matrix = NDArray[np.float32]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Network:
    """Dense layers with rectifiers between them; ``confidence`` are the coefficients of the words' confidence."""

    layers: tuple[tuple[Matrix, Matrix], ...]
    confidence: NDArray[np.float64]

    def log_chances(self, features: Matrix) -> Matrix:
        """Log of the chance of each class (columns, the last one no character) for each row of features."""
        values = features
        for number, (weights, offsets) in enumerate(self.layers):
            values = values @ weights + offsets
            if number < len(self.layers) - 1:
                values = np.maximum(values, 0.0)
        values = values - values.max(axis=1, keepdims=True)
        chances: Matrix = values - np.log(np.exp(values).sum(axis=1, keepdims=True))
        return chances


@lru_cache(maxsize=1)
def trained() -> Network:
    """The network shipped with the program."""
    with np.load(WEIGHTS, allow_pickle=False) as file:
        count = sum(name.startswith("weights") for name in file.files)
        layers = tuple(
            (file[f"weights{n}"].astype(np.float32), file[f"offsets{n}"].astype(np.float32)) for n in range(count)
        )
        return Network(layers=layers, confidence=file["confidence"].astype(np.float64))
