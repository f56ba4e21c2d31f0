from collections.abc import Iterator
from pathlib import Path

import pytest
from starlette.testclient import TestClient

from tests.workbench.browser import bench, chromium, served
from tests.workbench.served import workbench

__all__ = ["bench", "chromium", "served"]


@pytest.fixture
def client(tmp_path: Path) -> Iterator[TestClient]:
    with workbench(tmp_path / "firm.sqlite") as served:
        yield served
