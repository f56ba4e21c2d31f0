"""Training of the network: stochastic descent with adapted steps (Adam; Kingma and Ba, 2015) in NumPy."""

from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from curvelab.lettering.network import CLASSES
from curvelab.lettering.segments import FEATURES

SIZES = (FEATURES, 192, 96, len(CLASSES) + 1)
BATCH = 256
NOISE = 0.04

Layers = list[list[NDArray[np.float32]]]


def trained_layers(
    features: NDArray[np.float16], classes: NDArray[np.int16], passes: int, seed: int, size: tuple[int, ...] = SIZES
) -> Layers:
    """Weights and offsets of each layer after so many passes over the samples; the step falls to nothing (cosine)."""
    rng = np.random.default_rng(seed)
    layers: Layers = [
        [rng.normal(0, np.sqrt(2 / a), (a, b)).astype(np.float32), np.zeros(b, dtype=np.float32)]
        for a, b in pairwise(size)
    ]
    flat = [array for layer in layers for array in layer]
    first, second = [np.zeros_like(a) for a in flat], [np.zeros_like(a) for a in flat]
    steps = passes * (len(classes) // BATCH)
    step = 0
    for _ in range(passes):
        order = rng.permutation(len(classes))
        for at in range(0, len(order) - BATCH + 1, BATCH):
            rows = order[at : at + BATCH]
            inputs = features[rows].astype(np.float32)
            inputs += rng.normal(0, NOISE, inputs.shape).astype(np.float32)
            slopes = _slopes(layers, inputs, classes[rows])
            step += 1
            rate = 1.5e-3 * 0.5 * (1 + np.cos(np.pi * step / (steps + 1)))
            for number, slope in enumerate(slopes):
                first[number] += 0.1 * (slope - first[number])
                second[number] += 0.001 * (slope * slope - second[number])
                mean, spread = first[number] / (1 - 0.9**step), np.sqrt(second[number] / (1 - 0.999**step))
                flat[number] -= rate * (mean / (spread + 1e-8) + 1e-3 * flat[number])
    return layers


def _slopes(layers: Layers, inputs: NDArray[np.float32], classes: NDArray[np.int16]) -> list[NDArray[np.float32]]:
    """Gradients of the cross-entropy, labels softened by 2 %."""
    values = [inputs]
    for number, (weights, offsets) in enumerate(layers):
        out = values[-1] @ weights + offsets
        values.append(np.maximum(out, 0) if number < len(layers) - 1 else out)
    scores = np.exp(values[-1] - values[-1].max(axis=1, keepdims=True))
    scores /= scores.sum(axis=1, keepdims=True)
    soft = np.full_like(scores, 0.02 / scores.shape[1])
    soft[np.arange(len(classes)), classes] += 0.98
    delta = (scores - soft) / len(classes)
    slopes: list[NDArray[np.float32]] = []
    for number in range(len(layers) - 1, -1, -1):
        slopes = [values[number].T @ delta, delta.sum(axis=0), *slopes]
        if number:
            delta = (delta @ layers[number][0].T) * (values[number] > 0)
    return slopes
