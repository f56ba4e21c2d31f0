"""Coefficients that turn a word's evidence into the chance that it is right, by logistic regression on drawn pages."""

from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from curvelab.lettering.decode import decode
from curvelab.lettering.ink import find_ink
from curvelab.lettering.network import Network
from curvelab.lettering.page import cut_ways
from curvelab.lettering.words import box_of, evidence, parts_of
from tests.lettering.training.drawn import Page, Printed, page


def same_text(one: str, other: str) -> bool:
    """Whether two texts agree to the last character, spaces and the sign of multiplication apart."""
    return _plain(one) == _plain(other)


def _plain(text: str) -> str:
    return "".join(text.replace("×", "x").replace("°", "").split())


def label_at(drawn: Page, box: tuple[float, float, float, float]) -> Printed | None:
    """The label whose middle lies in a box and whose own box has the box's middle."""
    x, y = (box[0] + box[2]) / 2, (box[1] + box[3]) / 2
    for label in drawn.labels:
        boxes = np.array([one for _, one in label.characters])
        (x0, y0), (x1, y1) = boxes[:, :2].min(axis=0), boxes[:, 2:].max(axis=0)
        if x0 - 2 <= x <= x1 + 2 and y0 - 2 <= y <= y1 + 2 and box[0] <= (x0 + x1) / 2 <= box[2]:
            return label
    return None


def confidence_coefficients(network: Network, faces: list[Path], pages: int, seed: int) -> NDArray[np.float64]:
    """Coefficients of `curvelab.lettering.words.evidence`."""
    rng = np.random.default_rng(seed)
    rows, right = [], []
    for _ in range(pages):
        drawn = page(rng, faces[rng.integers(len(faces))], sensible=True)
        for ways in cut_ways(find_ink(drawn.grey)):
            if len(ways) != 1 or not (readings := decode(ways[0], network.log_chances(ways[0].features))):
                continue
            strip = ways[0].strip
            for part in parts_of(readings):
                box = strip.page_box(box_of(part.characters))
                if _at_edge(box, drawn.grey.shape):
                    continue
                rows.append(evidence(part, strip))
                label = label_at(drawn, box)
                right.append(label is not None and same_text(label.text, part.text))
    return _logistic(np.array(rows), np.array(right, dtype=float))


def _at_edge(box: tuple[float, float, float, float], shape: tuple[int, ...]) -> bool:
    """Whether a word may be cut off by the page's edge."""
    near = 12.0
    return box[0] < near or box[1] < near or box[2] > shape[1] - near or box[3] > shape[0] - near


def _logistic(rows: NDArray[np.float64], right: NDArray[np.float64]) -> NDArray[np.float64]:
    """Maximum likelihood by Newton's steps, with a little shrinkage."""
    coefficients = np.zeros(rows.shape[1])
    for _ in range(30):
        chances = 1.0 / (1.0 + np.exp(-np.clip(rows @ coefficients, -30, 30)))
        slope = rows.T @ (right - chances) - 1e-2 * coefficients
        curvature = (rows * (chances * (1 - chances))[:, None]).T @ rows + 1e-2 * np.eye(rows.shape[1])
        coefficients = coefficients + np.linalg.solve(curvature, slope)
    return coefficients
