"""The calculators' commands end to end from typed worksheets: hand-worked cases of an invented pumping station."""

import json
from pathlib import Path

import pytest

from curvelab.cli.main import run

SITE = "handbook of an invented pumping station"


def curve(edge: str, points: list[list[float]], **words: str) -> str:
    """One typed curve of a worksheet; a word that is no text is given as TOML, as ``at="{ tr = 8 }"``."""
    told = {"edge": edge, "points": points, "source": SITE, **words}
    lines = [f"{key} = {value}" if key in ("points", "at") else f'{key} = "{value}"' for key, value in told.items()]
    return "\n".join(["[[curves]]", *lines])


def worksheet(plate: str, *curves: str, axis: str = "") -> str:
    """A worksheet of typed curves, its currents or energies in the unit of one axis."""
    return "\n".join(["format = 1", axis, *curves, "[[devices]]", plate])


IN_RATED, IN_RESIDUAL = (f'[axes.current]\nunit = "{unit}"' for unit in ("xIn", "xIdn"))
IN_A2S = '[axes.let_through]\nunit = "A2s"'

B32 = """
key = "hall-b32"
kind = "mcb"
characteristic = "B"
standard = "IEC 60898-1"
rated_current_a = 32
"""
C20 = B32.replace("b32", "c20").replace('"B"', '"C"').replace("= 32", "= 20")
C16 = C20.replace("c20", "c16").replace("= 20", "= 16")
C16 += 'breaking = [ { quantity = "Icn", value_a = 10000, voltage_v = 230 } ]'
RCD = """
key = "hall-rcd30"
kind = "rcd"
standard = "IEC 61008-1"
rated_current_a = 40
rated_residual_current_a = 0.03
"""
GG100 = """
key = "hall-gg100"
kind = "fuse"
characteristic = "gG"
standard = "IEC 60269-2"
rated_current_a = 100
tolerance_current = [-0.1, 0.1]
breaking = [ { quantity = "Icu", value_a = 80000, voltage_v = 400 } ]
"""
MCCB = """
key = "hall-q250"
kind = "mccb"
rated_current_a = 250
breaking = [ { quantity = "Icu", value_a = 36000 } ]
[devices.settings]
ir = { from = 0.4, to = 1.0, base = "xIn" }
tr = { steps = [2, 4, 8] }
ii = { from = 2, to = 10, base = "xIn", off = true }
"""
SWITCH = """
key = "hall-isolator"
kind = "switch"
rated_current_a = 63
"""
C_FAST = curve("fast", [[1.13, 9000], [2.55, 10], [5, 2], [5, 0.01], [500, 0.008]], meaning="clearing")
C_SLOW = curve("slow", [[1.45, 3500], [2.55, 60], [10, 3], [10, 0.05], [500, 0.02]], meaning="clearing")
LONG_TIME = {"meaning": "clearing", "element": "overload", "base": "xIr", "at": "{ tr = 8 }"}
AT_ONCE = {"meaning": "clearing", "element": "instantaneous", "base": "xIi"}

SHEETS = {
    "b32": worksheet(
        B32,
        curve("fast", [[36.2, 9000], [64, 20], [96, 5], [96, 0.01], [1000, 0.008]], meaning="clearing"),
        curve("slow", [[44.8, 7000], [64, 110], [160, 9], [160, 0.09], [1000, 0.02]], meaning="clearing"),
    ),
    "c20": worksheet(C20, C_FAST, C_SLOW, axis=IN_RATED),
    "c16": worksheet(C16, C_FAST, C_SLOW, axis=IN_RATED),
    "c16-let-through": worksheet(C16, curve("slow", [[100, 300], [10_000, 30_000]], meaning="clearing"), axis=IN_A2S),
    "rcd": worksheet(
        RCD,
        curve("fast", [[0.5, 0.3], [0.5, 0.02], [500, 0.01]], element="residual"),
        curve("slow", [[1, 0.3], [2, 0.15], [5, 0.04], [500, 0.04]], element="residual"),
        axis=IN_RESIDUAL,
    ),
    "switch": worksheet(SWITCH),
    "gg100": worksheet(GG100, curve("mean", [[500, 1.6], [1000, 0.1], [1200, 0.0482253086]], meaning="pre_arcing")),
    "gg100-energy": worksheet(
        GG100, curve("mean", [[1000, 12_000], [80_000, 12_000]], meaning="pre_arcing"), axis=IN_A2S
    ),
    "q250": worksheet(
        MCCB,
        curve("fast", [[1.05, 7000], [6, 6], [12, 1.5]], **LONG_TIME),
        curve("slow", [[1.2, 7000], [6, 8], [12, 2]], **LONG_TIME),
        curve("fast", [[0.8, 1], [0.8, 0.01], [40, 0.01]], **AT_ONCE),
        curve("slow", [[1.2, 1], [1.2, 0.04], [40, 0.04]], **AT_ONCE),
    ),
}


@pytest.fixture(scope="module")
def library(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A library that holds every device of the station."""
    folder = tmp_path_factory.mktemp("station")
    files = [folder / f"{name}.toml" for name in SHEETS]
    for file, text in zip(files, SHEETS.values(), strict=True):
        file.write_text(text, encoding="utf-8")
    assert run(["store", *map(str, files), "--library", str(folder / "firm.sqlite")]) == 0
    return folder / "firm.sqlite"


@pytest.fixture
def site(library: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.setenv("CURVELAB_LIBRARY", str(library))
    return library


def answered(capsys: pytest.CaptureFixture[str], words: str) -> tuple[int, dict]:
    """The exit status of a command and the JSON it printed."""
    capsys.readouterr()
    status = run([*words.split(), "--json", "-"])
    return status, json.loads(capsys.readouterr().out)


def printed(capsys: pytest.CaptureFixture[str], words: str) -> str:
    capsys.readouterr()
    run(words.split())
    return capsys.readouterr().out


def refused(capsys: pytest.CaptureFixture[str], words: str) -> str:
    capsys.readouterr()
    assert run(words.split()) == 2
    shown = capsys.readouterr()
    assert not shown.out
    assert shown.err.count("\n") == 1
    return shown.err


@pytest.mark.usefixtures("site")
def test_the_greatest_loop_of_a_b32(capsys):
    status, answer = answered(capsys, "disconnection hall-b32 --voltage 230 --practice bs7671")
    assert status == 0
    assert answer["trips"]["value"] == 160.0
    assert answer["greatest_loop"]["value"] == pytest.approx(1.3656, abs=5e-5)
    assert answer["greatest_measured_loop"]["value"] == pytest.approx(1.09, abs=5e-3)


@pytest.mark.usefixtures("site")
@pytest.mark.parametrize(("loop", "outcome", "status"), [("1.30", "meets", 0), ("1.37", "fails", 1)])
def test_a_given_loop_of_a_b32(capsys, loop, outcome, status):
    words = f"disconnection hall-b32 --voltage 230 --loop-impedance {loop}"
    assert answered(capsys, words)[0] == status
    answer = answered(capsys, words)[1]
    assert answer["outcome"] == outcome
    assert ("Tables print 1.37 ohm" in printed(capsys, words)) == (loop == "1.37")


@pytest.mark.usefixtures("site")
@pytest.mark.parametrize(
    ("practice", "fault_a", "limit_ohm", "outcome"),
    [("asnzs3000", 164.3, 1.53, "meets"), ("bs7671", 156.1, 1.09, "fails")],
)
def test_two_practices_for_a_c20(capsys, practice, fault_a, limit_ohm, outcome):
    status, answer = answered(
        capsys, f"disconnection hall-c20 --voltage 230 --loop-impedance 1.40 --practice {practice}"
    )
    assert (status, answer["outcome"]) == (0 if outcome == "meets" else 1, outcome)
    assert answer["fault_current_a"] == pytest.approx(fault_a, abs=0.05)
    assert answer["greatest_loop"]["value"] == pytest.approx(limit_ohm, abs=5e-3)


@pytest.mark.usefixtures("site")
def test_the_electrode_of_an_rcd(capsys):
    status, answer = answered(capsys, "disconnection hall-rcd30 --voltage 230 --system TT --electrode 1200")
    findings = {finding["rule"]: finding for finding in answer["findings"]}
    assert status == 0
    assert findings["touch-voltage"]["value"] == pytest.approx(36.0)
    assert answer["fault_current_a"] == pytest.approx(0.192, abs=5e-4)
    assert answer["greatest_loop"]["value"] == pytest.approx(1667, abs=0.5)
    text = printed(capsys, "disconnection hall-rcd30 --voltage 230 --system TT --electrode 1200")
    assert "6.39 IΔn" in text
    assert "36 V" in text


@pytest.mark.usefixtures("site")
def test_a_switch_does_not_disconnect_and_the_answer_says_so(capsys):
    words = "disconnection hall-isolator --voltage 230"
    status, answer = answered(capsys, words)
    assert (status, answer["trips"]["status"]) == (1, "not_covered")
    assert "not a protective device" in printed(capsys, words)


@pytest.mark.usefixtures("site")
@pytest.mark.parametrize(
    ("words", "said"),
    [
        ("disconnection hall-b32", "--voltage"),
        ("disconnection hall-b32 --voltage 48", "Give the required time"),
        ("disconnection hall-b32 --voltage 230 --practice best", "bs7671, iec60364, asnzs3000"),
        ("disconnection hall-b32 --voltage 230 --system IT", "IT"),
        ("disconnection hall-b32 --voltage 230 --loop-impedance 0", "loop_ohm"),
        ("disconnection nobody --voltage 230", "nobody"),
        ("disconnection hall-b32 --voltage 230 --set ir=0.8", "no settings"),
    ],
)
def test_bad_questions_take_one_line(capsys, words, said):
    assert said in refused(capsys, words)


@pytest.mark.usefixtures("site")
def test_4_mm2_behind_a_c16_with_its_let_through_sheet(capsys):
    words = "withstand hall-c16 --material copper --insulation pvc70 --area 4 --current 200 6000"
    status, answer = answered(capsys, words)
    assert (status, answer["outcome"]) == (0, "meets")
    assert answer["k2s2_a2s"] == 211_600.0
    # 3 A2s for each ampere: 18 000 A2s at 6 kA.
    assert answer["let_through"]["value"] == pytest.approx(18_000.0)
    assert answer["spans"][0]["way"] == "let_through"
    assert "211.6 x 10^3 A2s" in printed(capsys, words)


@pytest.mark.usefixtures("site")
def test_without_a_let_through_sheet_nothing_is_withstood_below_a_tenth_of_a_second(capsys):
    words = "withstand hall-b32 --material copper --insulation pvc70 --area 4 --current 200 900"
    status, answer = answered(capsys, words)
    assert (status, answer["outcome"]) == (1, "not covered")
    assert "only a let-through sheet" in printed(capsys, words)


@pytest.mark.usefixtures("site")
@pytest.mark.parametrize(
    ("words", "said"),
    [
        ("withstand hall-c16 --material tin --insulation pvc70 --current 200 900", "copper pvc70"),
        ("withstand hall-c16 --material copper --insulation pvc70 --current 900 200", "MIN and MAX"),
        ("withstand hall-c16 --material copper --insulation pvc70 --current 200", "--current"),
        ("withstand hall-c16 --material copper --insulation pvc70 --area 0 --current 200 900", "cross-section"),
    ],
)
def test_bad_conductors_take_one_line(capsys, words, said):
    assert said in refused(capsys, words)


@pytest.mark.usefixtures("site")
def test_overload_from_the_real_band(capsys):
    status, answer = answered(capsys, "overload hall-b32 --capacity 36 --design-current 28")
    assert (status, answer["outcome"]) == (0, "meets")
    # Between 44.8 A at 7000 s and 64 A at 110 s, a straight line in log-log: 3600 s at 47.4 A.
    assert answer["trips"]["value"] == pytest.approx(47.43, abs=0.01)
    assert "I2, surely trips" in printed(capsys, "overload hall-b32 --capacity 36")


@pytest.mark.usefixtures("site")
def test_an_rcd_gives_no_overload_protection_and_says_so(capsys):
    assert answered(capsys, "overload hall-rcd30 --capacity 40")[0] == 1
    assert "residual current only" in printed(capsys, "overload hall-rcd30 --capacity 40")


@pytest.mark.usefixtures("site")
@pytest.mark.parametrize(("prospective", "outcome", "status"), [(9000, "meets", 0), (12_000, "fails", 1)])
def test_breaking_capacity_at_its_voltage(capsys, prospective, outcome, status):
    found = answered(capsys, f"breaking hall-c16 --prospective {prospective} --voltage 230")
    assert (found[0], found[1]["outcome"]) == (status, outcome)


@pytest.mark.usefixtures("site")
def test_a_back_up_device_is_named(capsys):
    words = "breaking hall-c16 --prospective 12000 --voltage 230 --back-up hall-b32"
    status, answer = answered(capsys, words)
    assert (status, answer["back_up"]) == (1, "hall-b32")
    assert "states no breaking capacity at 230 V" in printed(capsys, words)


@pytest.mark.usefixtures("site")
def test_a_gg_fuse_from_its_mean_line_and_tolerance(capsys):
    status, answer = answered(capsys, "query hall-gg100 --current 1000")
    times = answer["answers"][0]
    assert status == 0
    # 0.1 s (0.9 x 1000 / 1000)^4 and (1.1)^4: 0.0656 s to 0.1464 s.
    assert times["fast"]["value"] == pytest.approx(0.0656, abs=5e-5)
    assert times["slow"]["value"] == pytest.approx(0.1464, abs=5e-5)
    currents = answered(capsys, "query hall-gg100 --time 0.1")[1]["answers"][0]
    assert (currents["holds"]["value"], currents["trips"]["value"]) == (pytest.approx(900.0), pytest.approx(1100.0))
    findings = {each["rule"]: each for each in answered(capsys, "check hall-gg100")[1]}
    gates = {rule: each for rule, each in findings.items() if each["time_s"] == 0.1}
    # The gates of gG 100 A at 0.1 s, 820 A and 1450 A, are from memory: advisory.
    assert {each["current"] for each in gates.values()} == {820.0, 1450.0}
    assert {each["outcome"] for each in gates.values()} == {"meets"}


@pytest.mark.usefixtures("site")
def test_a_fuse_over_a_breaker_holds_by_energy(capsys):
    status, answer = answered(capsys, "discrimination hall-gg100 hall-c16")
    (case,) = answer["cases"]
    assert status == 0
    assert case["holds_up_to"]["value"] == pytest.approx(3240.0, rel=1e-6)
    assert case["beyond"] == "fails_by_energy"
    assert "up to 3.24 kA" in printed(capsys, "discrimination hall-gg100 hall-c16")
    assert answered(capsys, "discrimination hall-gg100 hall-c16 --up-to 3000")[0] == 0
    assert answered(capsys, "discrimination hall-gg100 hall-c16 --up-to 4000")[0] == 1


@pytest.mark.usefixtures("site")
def test_an_adjustable_breaker_over_a_breaker_holds_by_current(capsys):
    words = "discrimination hall-q250 hall-c16 --set hall-q250.ir=1 hall-q250.tr=8 hall-q250.ii=5"
    status, answer = answered(capsys, words)
    (case,) = answer["cases"]
    assert (status, case["holds_up_to"]["value"], case["beyond"]) == (0, 1000.0, "undetermined")
    text = printed(capsys, words)
    assert "up to 1 kA" in text
    assert "undetermined: only energy data could tell" in text


@pytest.mark.usefixtures("site")
def test_a_transformer_between_them(capsys):
    status, answer = answered(capsys, "discrimination hall-gg100 hall-c16 --ratio 2 --connection Dyn11")
    assert status == 0
    shares = {case["fault"]: case["upstream_share"] for case in answer["cases"]}
    assert shares == pytest.approx(
        {"three-phase": 0.5, "phase-to-phase": 1 / 3**0.5, "phase-to-earth": 0.5 / 3**0.5}, rel=1e-9
    )


@pytest.mark.usefixtures("site")
@pytest.mark.parametrize(
    ("words", "said"),
    [
        ("discrimination hall-q250 hall-c16", "Its settings"),
        ("discrimination hall-gg100 hall-c16 --ratio 27.5", "Give both, or none"),
        ("discrimination hall-gg100 hall-c16 --ratio 27.5 --connection Abc", "Dyn"),
        ("discrimination hall-gg100 hall-c16 --up-to -5", "positive"),
        ("discrimination hall-gg100", "DOWNSTREAM"),
        ("discrimination hall-q250 hall-c16 --set ir=1", "KEY.NAME"),
    ],
)
def test_bad_pairs_take_one_line(capsys, words, said):
    assert said in refused(capsys, words)


@pytest.mark.usefixtures("site")
def test_500_a_from_line_to_neutral_is_not_seen_by_an_rcd(capsys):
    status, answer = answered(capsys, "query hall-rcd30 --current 500 --path line_to_neutral")
    assert status == 1
    assert answer["answers"][0]["slow"]["status"] == "not_seen"
    assert "residual current only" in printed(capsys, "query hall-rcd30 --current 500 --path line_to_neutral")


@pytest.mark.usefixtures("site")
def test_a_query_at_a_current_shows_the_let_through_energy(capsys):
    status, answer = answered(capsys, "query hall-c16 --current 200 3000")
    assert status == 0
    assert [each["let_through"]["slow"]["value"] for each in answer["answers"]] == pytest.approx([600.0, 9000.0])
    assert answer["answers"][0]["peak"] is None
    assert "let-through slow" in printed(capsys, "query hall-c16 --current 200 3000")


@pytest.mark.usefixtures("site")
def test_currents_are_counted_in_any_base(capsys):
    status, answer = answered(capsys, "query hall-b32 --current 5 --base xIn")
    assert (status, answer["base"], answer["answers"][0]["slow"]["value"]) == (0, "xIn", pytest.approx(9.0))
    assert answered(capsys, "query hall-b32 --time 0.4 --base xIn")[1]["answers"][0]["trips"]["value"] == 5.0
    at_settings = "query hall-q250 --current 6 --base xIr --set ir=0.8 tr=4 ii=10"
    # 8 s at 6 Ir and tr = 8: half of it at tr = 4.
    assert answered(capsys, at_settings)[1]["answers"][0]["slow"]["value"] == pytest.approx(4.0)
    assert "5 xIn" in printed(capsys, "query hall-b32 --time 0.4 --base xIn")
    assert "no rated_residual_current_a" in refused(capsys, "query hall-b32 --current 5 --base xIdn")


@pytest.mark.usefixtures("site")
def test_a_switch_is_not_asked_in_vain_and_says_why(capsys):
    assert answered(capsys, "query hall-isolator --current 100")[0] == 1
    assert "not a protective device" in printed(capsys, "query hall-isolator --current 100")
