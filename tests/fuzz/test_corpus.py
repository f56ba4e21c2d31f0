"""Every kept file, and some damaged ones of each intake, as ``python -m tests.fuzz`` runs them by the thousand."""

import random
from pathlib import Path

import pytest

from tests.fuzz.attempt import attempt, pristine_library
from tests.fuzz.intakes import INTAKES, Intake

CASES = 12


@pytest.fixture(scope="module")
def library(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return pristine_library(tmp_path_factory.mktemp("library"))


@pytest.mark.parametrize("intake", INTAKES, ids=lambda intake: intake.name)
def test_one_clear_line_or_an_answer(intake: Intake, library: Path) -> None:
    rng = random.Random(7)
    for case in [*intake.once_harmful(), *(intake.case(rng) for _ in range(CASES))]:
        assert attempt(intake, case, library).fault is None
