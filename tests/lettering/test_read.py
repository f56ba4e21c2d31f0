"""Words read from pages in type faces the network was not trained on."""

from pathlib import Path

import matplotlib
import numpy as np
import pytest
from numpy.typing import NDArray
from PIL import Image, ImageDraw, ImageFont

from curvelab.lettering.read import read_words
from curvelab.records.sheet import Pixels, Sheet, Word
from tests.lettering.measured import outcomes
from tests.lettering.printed import printed_sheet

FACES = Path(matplotlib.get_data_path()) / "fonts" / "ttf"


def sheet_of(grey: NDArray[np.uint8], words: tuple[Word, ...] = ()) -> Sheet:
    rows, columns = grey.shape
    pixels = Pixels(grey=grey, colour=None, to_place=np.array([[1.0, 0, 0], [0, 1, 0]]))
    return Sheet(
        file="page.png", sha256="", page=1, pages=1, width=columns, height=rows, unit="px", pixels=pixels, words=words
    )


def written(*labels: tuple[str, tuple[int, int]], size: int = 28, shape: tuple[int, int] = (200, 700)) -> Image.Image:
    image = Image.new("L", (shape[1], shape[0]), 245)
    pen = ImageDraw.Draw(image)
    face = ImageFont.truetype(str(FACES / "DejaVuSans.ttf"), size)
    for text, place in labels:
        pen.text(place, text, fill=20, font=face)
    return image


def texts(image: Image.Image) -> list[str]:
    return [word.text for word in read_words(sheet_of(np.asarray(image))) if word.confidence > 0.3]


def test_numbers_on_a_line_are_words_of_their_own() -> None:
    assert sorted(texts(written(("0.01", (20, 40)), ("0.1", (200, 40)), ("10", (380, 40)), ("500", (540, 40))))) == [
        "0.01",
        "0.1",
        "10",
        "500",
    ]


def test_numbers_with_units_and_close_numbers_stand_apart() -> None:
    assert texts(written(("50 A", (20, 40)), ("100 A", (105, 40)))) == ["50 A", "100 A"]
    assert sorted(texts(written(("100", (20, 40)), ("200", (84, 40))))) == ["100", "200"]


def test_ticks_are_no_ones() -> None:
    image = written(("10", (300, 120)))
    pen = ImageDraw.Draw(image)
    pen.line([(20, 90), (680, 90)], fill=20, width=3)
    for x in range(40, 680, 60):
        pen.line([(x, 78), (x, 90)], fill=20, width=2)
    assert texts(image) == ["10"]


def test_a_title_stays_together_whichever_way_it_is_turned() -> None:
    page = written(("Current in A", (20, 60)))
    assert texts(page) == ["Current in A"]
    upwards = page.rotate(90, expand=True)
    (word,) = [word for word in read_words(sheet_of(np.asarray(upwards))) if word.confidence > 0.3]
    assert (word.text, word.turned_deg) == ("Current in A", 90.0)
    downwards = page.rotate(270, expand=True)
    (word,) = [word for word in read_words(sheet_of(np.asarray(downwards))) if word.confidence > 0.3]
    assert (word.text, word.turned_deg) == ("Current in A", 270.0)


def test_a_raised_exponent_stays_with_its_ten() -> None:
    image = written(("10", (100, 80)))
    face = ImageFont.truetype(str(FACES / "DejaVuSans.ttf"), 20)
    ImageDraw.Draw(image).text((137, 74), "−2", fill=20, font=face)
    assert texts(image) == ["10⁻²"]


def test_the_box_is_where_the_ink_is() -> None:
    (word,) = read_words(sheet_of(np.asarray(written(("2000", (300, 90))))))
    rows, columns = np.nonzero(np.asarray(written(("2000", (300, 90)))) < 130)
    ink = (columns.min(), rows.min(), columns.max(), rows.max())
    assert np.abs(np.array(word.box) - np.array(ink)).max() <= 1.5


def test_a_label_that_touches_a_line_is_read() -> None:
    image = written(("100", (200, 60)))
    _, columns = np.nonzero(np.asarray(image) < 130)
    pen = ImageDraw.Draw(image)
    pen.line([(columns.max() + 1, 0), (columns.max() + 1, 199)], fill=20, width=3)
    assert texts(image) == ["100"]


def test_a_line_between_keeps_the_curve_out_of_the_label() -> None:
    image = written(("10", (200, 60)))
    pen = ImageDraw.Draw(image)
    pen.line([(244, 0), (244, 199)], fill=20, width=3)
    pen.line([(256, 68), (272, 84)], fill=20, width=4)
    assert "10" in texts(image)


def test_areas_limit_what_is_read() -> None:
    sheet = sheet_of(np.asarray(written(("20", (50, 40)), ("5000", (400, 40)))))
    assert [word.text for word in read_words(sheet, areas=((350, 0, 699, 199),))] == ["5000"]
    assert read_words(sheet, areas=()) == ()
    assert read_words(sheet, areas=((-50, -50, -10, -10),)) == ()


def test_a_blank_and_a_black_page_say_nothing() -> None:
    assert read_words(sheet_of(np.full((300, 300), 255, dtype=np.uint8))) == ()
    assert read_words(sheet_of(np.zeros((300, 300), dtype=np.uint8))) == ()


def test_words_of_the_file_come_first_and_are_written_plainly() -> None:
    word = Word(text="10\u2009000", box=(10, 10, 40, 20), height=10)
    minus = Word(text="10⁻²", box=(10, 50, 40, 60), height=10)
    dash = Word(text="\u22125", box=(10, 90, 40, 100), height=10)
    sheet = sheet_of(np.asarray(written(("77", (100, 100)))), words=(word, minus, dash))
    assert [one.text for one in read_words(sheet)] == ["10 000", "10⁻²", "-5"]
    assert [one.text for one in read_words(sheet, areas=((0, 40, 100, 70),))] == ["10⁻²"]


@pytest.mark.parametrize(("quality", "dpi"), [("clean", 200), ("grey", 200), ("bilevel", 300)])
def test_confidence_is_honest(quality: str, dpi: float) -> None:
    """Of numbers read with at least 90 %, fewer than one in thirty is wrong; most are read so."""
    found = [
        one for seed in range(700, 703) for one in outcomes(printed_sheet(seed, quality, dpi)) if not one.truth.title
    ]
    sure = [one for one in found if one.word is not None and one.word.confidence >= 0.9]
    assert len(sure) > 0.5 * len(found)
    assert sum(not one.right for one in sure) <= len(sure) / 30


def test_an_exponent_drawn_apart_belongs_to_its_ten() -> None:
    ten = Word(text="10", box=(10, 50, 32, 62), height=16)
    exponent = Word(text="\u22122", box=(33, 44, 43, 54), height=11)
    beside = Word(text="3", box=(60, 44, 66, 54), height=11)
    level = Word(text="5", box=(33, 52, 39, 62), height=11)
    sheet = sheet_of(np.full((100, 100), 255, dtype=np.uint8), words=(ten, exponent, beside))
    assert sorted(one.text for one in read_words(sheet)) == ["10⁻²", "3"]
    sheet = sheet_of(np.full((100, 100), 255, dtype=np.uint8), words=(ten, level))
    assert sorted(one.text for one in read_words(sheet)) == ["10", "5"]
