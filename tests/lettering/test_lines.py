"""How pieces of ink become lines of lettering."""

import numpy as np

from curvelab.lettering.ink import Boxes, Ink
from curvelab.lettering.lines import text_lines


def ink_of(boxes: list[tuple[int, int, int, int]], upright_line: int | None = None) -> Ink:
    blank = np.zeros((300, 600), dtype=np.uint8)
    upright = blank.copy()
    if upright_line is not None:
        upright[:, upright_line] = 1
    pieces: Boxes = np.array(boxes, dtype=np.int64).reshape(-1, 4)
    return Ink(contrast=blank, mask=blank, boxes=pieces, level_lines=blank, upright_lines=upright)


def row_of(
    count: int, x: int, y: int, width: int = 12, height: int = 20, gap: int = 4
) -> list[tuple[int, int, int, int]]:
    return [(x + k * (width + gap), y, x + k * (width + gap) + width, y + height) for k in range(count)]


def sizes(ink: Ink) -> list[int]:
    return sorted(len(line.boxes) for line in text_lines(ink))


def test_near_pieces_are_one_line_and_far_ones_are_not() -> None:
    assert sizes(ink_of(row_of(4, 20, 50) + row_of(3, 200, 50))) == [3, 4]


def test_a_raised_smaller_piece_and_a_dot_belong_to_the_line() -> None:
    pieces = row_of(2, 20, 50)
    pieces += [(53, 44, 61, 58), (63, 67, 66, 70)]
    assert sizes(ink_of(pieces)) == [4]


def test_letters_above_one_another_are_an_upright_line() -> None:
    turned = [(y, x, bottom, right) for x, y, right, bottom in row_of(6, 20, 50)]
    (line,) = text_lines(ink_of(turned))
    assert line.upright
    assert len(line.boxes) == 6


def test_two_lines_of_a_paragraph_stay_level() -> None:
    lines = text_lines(ink_of(row_of(8, 20, 50) + row_of(8, 20, 82)))
    assert [line.upright for line in lines] == [False, False]


def test_a_printed_line_between_two_pieces_keeps_them_apart() -> None:
    pieces = row_of(2, 20, 50, gap=12)
    assert sizes(ink_of(pieces)) == [2]
    assert sizes(ink_of(pieces, upright_line=38)) == [1, 1]


def test_no_pieces_are_no_lines() -> None:
    assert text_lines(ink_of([])) == []
