"""Characters become words: what belongs together and what is raised."""

from curvelab.sheets.characters import Character, words_of


def typed(text: str, x: float, y: float, size: float = 10.0, turned_deg: float = 0.0) -> list[Character]:
    """Characters half as wide as their size, one after another."""
    step = size / 2
    if turned_deg == 90:
        return [
            Character(
                text=one,
                origin=(x, y - k * step),
                box=(x - 0.7 * size, y - (k + 1) * step, x, y - k * step),
                size=size,
                turned_deg=90,
            )
            for k, one in enumerate(text)
        ]
    return [
        Character(
            text=one,
            origin=(x + k * step, y),
            box=(x + k * step, y - 0.7 * size, x + (k + 1) * step, y),
            size=size,
            turned_deg=0,
        )
        for k, one in enumerate(text)
    ]


def texts(characters: list[Character]) -> list[str]:
    return [word.text for word in words_of(characters)]


def test_a_space_that_was_written_keeps_a_run_together() -> None:
    assert texts(typed("Current in A", 0, 0)) == ["Current in A"]
    assert texts(typed("1 000", 0, 0)) == ["1 000"]


def test_labels_side_by_side_stay_apart() -> None:
    assert texts(typed("8", 0, 0) + typed("9", 12, 0) + typed("10", 24, 0)) == ["8", "9", "10"]
    assert texts(typed("1     10", 0, 0)) == ["1", "10"]


def test_labels_above_each_other_stay_apart() -> None:
    assert texts(typed("10", 0, 0) + typed("1", 5, 12) + typed("0.1", 0, 24)) == ["10", "1", "0.1"]


def test_a_raised_smaller_figure_is_an_exponent() -> None:
    assert texts(typed("10", 0, 0) + typed("-3", 10, -4, size=7)) == ["10⁻³"]
    assert texts(typed("10", 0, 0) + typed("−3", 10, -4, size=7)) == ["10⁻³"]


def test_a_lowered_smaller_letter_is_none() -> None:
    assert texts(typed("x I", 0, 0) + typed("n", 15, 2, size=7)) == ["x In"]


def test_upwards_text_with_an_exponent() -> None:
    (word,) = words_of(typed("10", 50, 100, turned_deg=90) + typed("2", 46, 90, size=7, turned_deg=90))
    assert (word.text, word.turned_deg, word.height) == ("10²", 90, 10)
    assert word.box == (41.1, 86.5, 50, 100)


def test_another_direction_starts_another_word() -> None:
    assert texts(typed("10", 0, 0) + typed("Time", 10, 0, turned_deg=90)) == ["10", "Time"]
