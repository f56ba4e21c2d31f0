"""Draw, train and store: ``python -m tests.lettering.training`` writes ``curvelab/lettering/weights.npz``."""

import argparse
from pathlib import Path

import numpy as np

from curvelab.lettering.network import WEIGHTS, Network
from tests.lettering.training.calibrate import confidence_coefficients
from tests.lettering.training.faces import calibration_faces, trained_faces
from tests.lettering.training.learn import trained_layers
from tests.lettering.training.samples import samples


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--pages", type=int, default=300, help="drawn pages of samples")
    parser.add_argument("--passes", type=int, default=12, help="passes over the samples")
    parser.add_argument("--output", type=Path, default=WEIGHTS)
    parser.add_argument("--samples", type=Path, help="keep the samples in this file, or take them from it")
    options = parser.parse_args()
    faces = trained_faces()
    if options.samples and options.samples.exists():
        with np.load(options.samples) as file:
            features, classes = file["features"], file["classes"]
    else:
        features, classes = samples(11, faces, options.pages)
        if options.samples:
            np.savez(options.samples, features=features, classes=classes)
    print(f"{len(classes)} segments from {len(faces)} faces")
    layers = tuple(
        (weights.astype(np.float16), offsets.astype(np.float16))
        for weights, offsets in trained_layers(features, classes, options.passes, seed=5)
    )
    network = Network(
        layers=tuple((w.astype(np.float32), o.astype(np.float32)) for w, o in layers), confidence=np.zeros(5)
    )
    coefficients = confidence_coefficients(network, calibration_faces(), max(12, options.pages // 6), seed=17)
    arrays = {f"weights{n}": weights for n, (weights, _) in enumerate(layers)}
    arrays |= {f"offsets{n}": offsets for n, (_, offsets) in enumerate(layers)}
    np.savez_compressed(options.output, confidence=coefficients, **arrays)
    print(f"{options.output}: {options.output.stat().st_size / 1e3:.0f} kB, confidence {np.round(coefficients, 3)}")


if __name__ == "__main__":
    main()
