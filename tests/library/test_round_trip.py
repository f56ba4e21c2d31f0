"""What is stored comes back exactly, and the same content is the same revision."""

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings

from curvelab.library.library import Library, open_library
from curvelab.records.device import DeviceRecord
from tests.library.devices import breaker, curve, records, said


@pytest.fixture(scope="module")
def shared(tmp_path_factory: pytest.TempPathFactory) -> Library:
    with open_library(tmp_path_factory.mktemp("library") / "shared.sqlite") as library:
        yield library


@settings(max_examples=40, deadline=None, suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large])
@given(record=records)
def test_any_device_comes_back_bit_for_bit(tmp_path_factory: pytest.TempPathFactory, record: DeviceRecord) -> None:
    with open_library(tmp_path_factory.mktemp("library") / "one.sqlite") as library:
        (stored,) = library.store(record)
        assert (stored.key, stored.revision, stored.changed) == (record.nameplate.key, 1, True)
        found = library.record(record.nameplate.key)
        assert said(found) == said(record)
        assert (found.revision, found.state) == (1, "draft")
        (again,) = library.store(found)
        assert (again.revision, again.changed) == (1, False)


def test_sharing_a_curve_changes_no_number(shared: Library) -> None:
    line = curve()
    shared.store([breaker(f"share-{rating}", line, rated_current_a=float(rating)) for rating in (6, 10, 16)])
    assert {said(shared.record(f"share-{rating}"))[1] for rating in (6, 10, 16)} == {said(breaker("x", line))[1]}


def test_unknown_uncertainty_is_null_in_the_file_and_nan_in_the_record(shared: Library) -> None:
    shared.store(breaker("unknown", curve()))
    (part,) = shared.record("unknown").curves[0].parts
    assert np.all(np.isnan(part.sd_value))
    rows = shared.open().execute("SELECT sd_current, sd_time, sd_common FROM trip_points WHERE device_key = 'unknown'")
    assert set(rows) == {(None, None, None)}


def test_a_device_that_can_be_asked(shared: Library) -> None:
    shared.store(breaker("asked", curve(), rated_current_a=32.0))
    assert shared.device("asked").trip_time(96.0).slow.value == pytest.approx(60.0, rel=1e-12)
