import pytest

from curvelab.records.axes import Mark
from curvelab.records.curve import Conditions
from curvelab.records.device import Breaking, Derating, Setting, Tolerance
from curvelab.worksheets.read import parse_worksheet, read_worksheet
from curvelab.worksheets.series import device_keys
from tests.worksheets.examples import BREAKER, SWITCH, TYPED


def test_everything_the_format_has_is_read():
    sheet = parse_worksheet(BREAKER, "breaker.toml")
    assert sheet.document.title.startswith("Riverside")
    assert sheet.document.date == "2026-03-01"
    assert (sheet.sheet.file, sheet.sheet.page, sheet.sheet.plot) == ("sheets/breaker.png", 1, 2)
    assert sheet.sheet.sha256 == "ab12" * 16
    assert (sheet.current.quantity, sheet.current.unit, sheet.current.factor) == ("current", "xIn", 10)
    assert sheet.current.marks[0] == Mark(at=(412.0, 1730.5), value=10)
    assert sheet.value.scale is None
    assert sheet.value.marks[1].unit == "min"
    assert sheet.text == BREAKER


def test_curves_carry_places_conditions_and_limits():
    slow, mean = parse_worksheet(BREAKER).curves
    assert (slow.edge, slow.meaning, slow.element) == ("slow", "clearing", "whole")
    assert slow.devices == ("riverside-b{rating}",)
    assert slow.through == ((430, 300), (700, 810))
    assert slow.avoid == ((10, 5, 20, 30),)
    assert dict(slow.at) == {"ir": 1.0}
    assert slow.conditions == Conditions(
        start="cold", time_kind="real", supply="ac", voltage_v=230, ambient_c=-5, poles_loaded=1
    )
    assert mean.devices == ("riverside-b6", "moor")
    assert mean.tolerance == Tolerance(current=(-0.1, 0.1))


def test_devices_carry_series_settings_and_capacities():
    series, moor = parse_worksheet(BREAKER).devices
    assert device_keys(series) == ("riverside-b6", "riverside-b10", "riverside-b0_5")
    assert series.nameplate.breaking == (Breaking(quantity="Icn", value_a=6000, voltage_v=230, supply="ac"),)
    ir, tr, ii = moor.nameplate.settings
    assert ir == Setting(name="ir", from_value=0.4, to_value=1.0, base="xIn")
    assert tr == Setting(name="tr", steps=(2, 4, 8, 16), at="6 Ir")
    assert ii.can_be_off
    assert moor.tolerance == Tolerance(time=(-0.2, 0.2), time_s=(-0.01, 0.01))
    assert moor.nameplate.derating == (Derating(ambient_c=50, factor=0.9, element="overload"),)


def test_typed_points_need_no_sheet():
    worksheet = parse_worksheet(TYPED)
    assert worksheet.sheet is None
    assert worksheet.curves[0].points == ((160, 0.1), (160, 5.0))
    assert worksheet.curves[0].base == "A"


def test_typed_points_are_in_what_the_axes_print():
    axes = '[axes.current]\nunit = "kA"\nfactor = 10\n[axes.let_through]\nunit = "kA2s"\n[[curves]]'
    worksheet = parse_worksheet(TYPED.replace("[[curves]]", axes))
    assert worksheet.value.quantity == "let_through"
    assert worksheet.curves[0].base == "A"
    assert worksheet.curves[0].points[0] == pytest.approx((1.6e6, 1e5), rel=1e-12)


def test_typed_points_with_a_base_are_in_base_units_whatever_the_axes_say():
    text = TYPED.replace("[[curves]]", '[axes.time]\nunit = "min"\n[[curves]]\nbase = "xIn"')
    curve = parse_worksheet(text).curves[0]
    assert (curve.base, curve.points[0]) == ("xIn", (160, 0.1))


def test_multiples_on_the_axis_become_the_base_of_typed_points():
    curve = parse_worksheet(TYPED.replace("[[curves]]", '[axes.current]\nunit = "xIdn"\n[[curves]]')).curves[0]
    assert curve.base == "xIdn"


def test_a_switch_has_neither_sheet_nor_curves():
    worksheet = parse_worksheet(SWITCH)
    assert (worksheet.sheet, worksheet.curves) == (None, ())
    assert worksheet.devices[0].nameplate.kind == "switch"


def test_an_unknown_standard_or_characteristic_is_kept_as_written():
    text = SWITCH + 'characteristic = "Q7"\nstandard = "Works norm 12"\n'
    plate = parse_worksheet(text).devices[0].nameplate
    assert (plate.characteristic, plate.standard) == ("Q7", "Works norm 12")


def test_a_linear_axis_may_start_at_zero():
    text = BREAKER.replace('scale = "log"', 'scale = "linear"').replace("value = 10 }", "value = 0 }")
    assert parse_worksheet(text).current.marks[0].value == 0


def test_a_file_with_a_byte_order_mark_and_windows_line_ends_is_read(tmp_path):
    path = tmp_path / "switch.toml"
    path.write_bytes(b"\xef\xbb\xbf" + SWITCH.replace("\n", "\r\n").encode())
    assert read_worksheet(path).devices[0].nameplate.key == "isolator-1"
