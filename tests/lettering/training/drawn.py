"""Small pages of labels in one face, printed and scanned badly, with the true box of every character."""

from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

import cv2
import numpy as np
from numpy.typing import NDArray
from PIL import Image, ImageDraw, ImageFont

from tests.lettering.training.labels import label

SHAPE = (420, 900)
DASHES = ("-", "−", "–")


@dataclass(frozen=True, kw_only=True, slots=True)
class Printed:
    """One label: its text (exponents as superscripts) and its characters with boxes (x0, y0, x1, y1) in pixels."""

    text: str
    characters: tuple[tuple[str, tuple[float, float, float, float]], ...]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Page:
    """Grey pixels, labels, and the printed height of capitals in pixels."""

    grey: NDArray[np.uint8]
    labels: tuple[Printed, ...]
    capital_px: float


RAISED = str.maketrans("0123456789-", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻")
FINE = 2
"""Pages are drawn this much larger, then averaged down, so that characters fall anywhere between pixels."""


@lru_cache(maxsize=64)
def _face(path: Path, size: int) -> ImageFont.FreeTypeFont:
    return ImageFont.truetype(str(path), size)


@lru_cache(maxsize=8192)
def _ink_box(path: Path, size: int, char: str) -> tuple[int, int, int, int]:
    """The box of a character's ink relative to where it is written; its advance does not count."""
    mask, (across, down) = _face(path, size).getmask2(char, mode="L")
    left, upper, right, lower = mask.getbbox() or (0, 0, 0, 0)
    return left + across, upper + down, right + across, lower + down


def page(rng: np.random.Generator, face: Path, *, sensible: bool = False) -> Page:
    """A page of labels of one size.

    Every other one has lines and strokes that are not lettering, one in ten of the sensible ones, which stand for the
    margins of a plot.
    """
    capital = float(np.exp(rng.uniform(np.log(7.5), np.log(45.0))))
    size = max(6, round(FINE * capital / 0.72))
    rows, columns = SHAPE
    image = Image.new("L", (columns * FINE, rows * FINE), 255)
    pen = ImageDraw.Draw(image)
    if rng.random() < (0.1 if sensible else 0.5):
        _strokes(pen, rng, image.size)
    printed = []
    y = 0.6 * size
    while y < image.height - 2.2 * size and len(printed) < 160:
        x = rng.uniform(0.5, 2.0) * size
        while x < image.width - 3.0 * size:
            text, exponent = label(rng, sensible=sensible)
            drawn = _write(pen, rng, face, size, (x, y), text, exponent)
            if not drawn.characters:
                continue
            end = drawn.characters[-1][1][2]
            printed.append(drawn)
            x = end + rng.uniform(1.3, 3.0) * size
        y += rng.uniform(1.9, 2.4) * size
    levels, turn = _warped(np.asarray(image, dtype=np.float32), rng)
    moved = tuple(
        Printed(text=one.text, characters=tuple((char, _box(box, turn)) for char, box in one.characters))
        for one in printed
    )
    return Page(grey=_exposed(levels, rng, capital), labels=moved, capital_px=capital)


def _write(
    pen: ImageDraw.ImageDraw,
    rng: np.random.Generator,
    path: Path,
    size: int,
    at: tuple[float, float],
    text: str,
    exponent: str,
) -> Printed:
    """Characters one by one along a line, the exponent smaller and raised."""
    characters = []
    x, y = at
    spacing = rng.uniform(-0.02, 0.05) * size if rng.random() < 0.4 else 0.0
    ink = int(rng.choice([0, 0, 0, 40, 80]))
    small = round(size * rng.uniform(0.6, 0.78))
    raised = y + size * rng.uniform(-0.12, 0.06)
    times = str(rng.choice(["x", "×"]))
    dash = str(rng.choice(DASHES))
    pieces = [(char, size, y) for char in text] + [(char, small, raised) for char in exponent]
    for char, points, top in pieces:
        face = _face(path, points)
        shown = {"-": dash, "x": times if "10" in text or "In" in text else "x"}.get(char, char)
        if not char.isspace():
            left, upper, right, lower = _ink_box(path, points, shown)
            if right > left and lower > upper:
                pen.text((x, top), shown, fill=ink, font=face)
                plain = {"²": "2", "³": "3", "°": ""}.get(char, char)
                characters.append((plain, (x + left, top + upper, x + right, top + lower)))
        x += face.getlength(shown) * (rng.uniform(0.5, 1.0) if char.isspace() else 1.0) + spacing
    return Printed(text=text + exponent.translate(RAISED), characters=tuple(characters))


def _strokes(pen: ImageDraw.ImageDraw, rng: np.random.Generator, size: tuple[int, int]) -> None:
    """Grid lines, pieces of curves, dashes and dots."""
    width, height = size
    for _ in range(rng.integers(4, 30)):
        x, y = rng.uniform(0, width), rng.uniform(0, height)
        ink = int(rng.integers(0, 150))
        thick = int(rng.integers(1, 7))
        length = rng.uniform(5, 160)
        angle = rng.uniform(0, np.pi) if rng.random() < 0.6 else rng.choice([0, np.pi / 2])
        bend = rng.normal(0, 0.15)
        steps = np.linspace(0, 1, 8)
        turns = angle + bend * steps * 4
        xs, ys = x + np.cumsum(np.cos(turns)) * length / 8, y + np.cumsum(np.sin(turns)) * length / 8
        pen.line(list(zip(xs.tolist(), ys.tolist(), strict=True)), fill=ink, width=thick)
    for _ in range(rng.integers(0, 5)):
        _dashes(pen, rng, size)
    for _ in range(rng.integers(0, 4)):
        at = rng.uniform(0, height)
        pen.line([(0, at), (width, at)], fill=int(rng.integers(0, 180)), width=int(rng.integers(1, 6)))
        at = rng.uniform(0, width)
        pen.line([(at, 0), (at, height)], fill=int(rng.integers(0, 180)), width=int(rng.integers(1, 6)))


def _dashes(pen: ImageDraw.ImageDraw, rng: np.random.Generator, size: tuple[int, int]) -> None:
    """A dashed or dotted curve."""
    on, off, thick = rng.uniform(3, 60), rng.uniform(4, 30), rng.uniform(2, 12)
    place = np.array([rng.uniform(0, size[0]), rng.uniform(0, size[1])])
    angle, bend = rng.uniform(0, 2 * np.pi), rng.normal(0, 0.03)
    ink = int(rng.integers(0, 120))
    for _ in range(rng.integers(5, 40)):
        along = np.array([np.cos(angle), np.sin(angle)])
        across = np.array([-along[1], along[0]]) * thick / 2
        end = place + along * on
        corners = (place - across, end - across, end + across, place + across)
        pen.polygon([(float(x), float(y)) for x, y in corners], fill=ink)
        place = end + along * off
        angle += bend


def _warped(levels: NDArray[np.float32], rng: np.random.Generator) -> tuple[NDArray[np.float32], NDArray[np.float64]]:
    """The page turned a little and averaged down, and the (2, 3) map of its places."""
    rows, columns = SHAPE
    angle = np.deg2rad(rng.uniform(-5, 5) if rng.random() < 0.5 else rng.normal(0, 0.5))
    stretch = rng.uniform(0.9, 1.12)
    square = np.array([[np.cos(angle) * stretch, -np.sin(angle)], [np.sin(angle) * stretch, np.cos(angle)]])
    centre = np.array([columns * FINE, rows * FINE]) / 2
    shift = centre - square @ centre + rng.uniform(-1, 1, 2)
    matrix = np.column_stack([square, shift])
    moved = cv2.warpAffine(levels, matrix, (columns * FINE, rows * FINE), flags=cv2.INTER_LINEAR, borderValue=255)
    small = cv2.resize(moved, (columns, rows), interpolation=cv2.INTER_AREA)
    return small, matrix / FINE


def _box(box: tuple[float, float, float, float], turn: NDArray[np.float64]) -> tuple[float, float, float, float]:
    """The box after the map: moved by its middle, its size stretched."""
    x0, y0, x1, y1 = box
    x, y = turn[:, :2] @ ((x0 + x1) / 2, (y0 + y1) / 2) + turn[:, 2]
    half_width, half_height = (x1 - x0) / 2 * np.hypot(*turn[:, 0]), (y1 - y0) / 2 * np.hypot(*turn[:, 1])
    return x - half_width, y - half_height, x + half_width, y + half_height


def _exposed(levels: NDArray[np.float32], rng: np.random.Generator, capital: float) -> NDArray[np.uint8]:
    """Ink spread, blur, noise, threshold and compression, each on some pages only."""
    ink = 255.0 - levels
    spread = rng.random()
    if spread < 0.12 and capital > 14:
        ink = cv2.dilate(ink, np.ones((2, 2)))
    elif spread < 0.2 and capital > 22:
        ink = cv2.erode(ink, np.ones((2, 2)))
    blur = rng.uniform(0.3, 0.05 * capital + 0.35) if rng.random() < 0.7 else 0.0
    if blur:
        ink = cv2.GaussianBlur(ink, (0, 0), min(blur, 1.6))
    paper, dark = rng.uniform(215, 255), rng.uniform(0, 70)
    grey = paper - (paper - dark) * ink / 255.0 + rng.normal(0, rng.uniform(0, 9), ink.shape)
    grey = np.clip(np.rint(grey), 0, 255).astype(np.uint8)
    kind = rng.random()
    if kind < 0.22:
        return np.where(grey < dark + (paper - dark) * rng.uniform(0.45, 0.72), 0, 255).astype(np.uint8)
    if kind < 0.55:
        _, code = cv2.imencode(".jpg", grey, [cv2.IMWRITE_JPEG_QUALITY, int(rng.integers(35, 95))])
        return np.asarray(cv2.imdecode(code, cv2.IMREAD_GRAYSCALE))
    return grey
