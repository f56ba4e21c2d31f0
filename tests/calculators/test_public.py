"""The calculators from Python by the package's own names: the hand-worked cases of an invented pumping station."""

import numpy as np
import pytest

import curvelab
from curvelab.devices.device import Device
from curvelab.records.device import DeviceRecord, Nameplate
from tests.calculators.test_discrimination import LET_THROUGH, PRE_ARCING, breaker, fuse
from tests.devices.made import b32, moulded_case, rcd


def test_every_public_name_is_there():
    for name in curvelab.__all__:
        assert getattr(curvelab, name)


def test_1_a_b32():
    answer = curvelab.disconnection(b32(), curvelab.Circumstances(voltage_v=230.0, practice="bs7671"))
    assert answer.greatest_loop.value == pytest.approx(1.3656, abs=5e-5)
    assert answer.greatest_measured_loop.value == pytest.approx(1.09, abs=5e-3)


def test_2_a_c20_by_two_practices():
    c20 = breaker(key="c20", rated_a=20.0, characteristic="C")
    outcomes = [
        curvelab.disconnection(c20, curvelab.Circumstances(voltage_v=230.0, practice=practice, loop_ohm=1.40)).findings[
            0
        ]
        for practice in ("asnzs3000", "bs7671")
    ]
    assert [each.outcome for each in outcomes] == ["meets", "fails"]
    assert [each.limit for each in outcomes] == pytest.approx([164.3, 156.1], abs=0.05)


def test_3_a_gg_100_from_its_mean_line():
    times = fuse().trip_time([1000.0])
    np.testing.assert_allclose([times.fast.value[0], times.slow.value[0]], [0.0656, 0.1464], atol=5e-5)
    currents = fuse().trip_current(0.1)
    assert 820 < currents.holds.value == pytest.approx(900.0)
    assert 1450 > currents.trips.value == pytest.approx(1100.0)


def test_4_an_rcd_in_a_tt_system():
    asked = curvelab.Circumstances(voltage_v=230.0, system="TT", loop_ohm=1200.0)
    answer = curvelab.disconnection(rcd(), asked)
    assert answer.findings[1].value == pytest.approx(36.0)
    assert answer.greatest_loop.value == pytest.approx(1667, abs=0.5)
    assert rcd().trip_time(500.0, path="line_to_neutral").slow.status == "not_seen"


def test_5_4_mm2_of_copper():
    assert curvelab.conductor_of("copper", "pvc70").withstands_a2s(4.0) == 211_600.0
    answer = curvelab.withstand(
        breaker(LET_THROUGH),
        curvelab.conductor_of("copper", "pvc70"),
        curvelab.Faults(least_a=170, greatest_a=6000),
        4.0,
    )
    assert answer.findings[0].outcome == "meets"


def test_6_devices_in_series():
    by_energy = curvelab.discrimination(fuse(PRE_ARCING), breaker(LET_THROUGH)).cases[0]
    assert by_energy.holding.up_to.value == pytest.approx(3240.0)
    by_current = curvelab.discrimination(moulded_case().at(ir=1.0, tr=8, ii=5), breaker()).cases[0]
    assert by_current.holding.up_to.value == 1000.0


def test_a_switch_is_refused_in_every_question():
    switch = Device(DeviceRecord(nameplate=Nameplate(key="isolator", kind="switch", rated_current_a=63.0)))
    assert not curvelab.disconnection(switch, curvelab.Circumstances(voltage_v=230.0)).trips.is_known
    assert curvelab.overload(switch, curvelab.Load(capacity_a=80.0)).refusal
    assert not curvelab.breaking(switch, curvelab.ShortCircuit(prospective_a=1e3, voltage_v=230.0)).capacity.is_known
    assert curvelab.discrimination(switch, breaker()).cases[0].holding.from_a is None
