import pytest

from curvelab.errors import WorksheetError
from curvelab.worksheets.read import LARGEST_BYTES, parse_worksheet, read_worksheet
from tests.worksheets.examples import BREAKER, SWITCH, TYPED

POINTS = "points = [[160, 0.1], [160, 5.0]]"
MARKS = "marks = [{at = [1, 2], value = 3}]"

CHANGES = [
    # (name, text, (old, new), fragments the one line must have)
    ("misspelt key", BREAKER, ("colour =", "colr ="), ["[[curves]] 1", "'colr'", "'colour'"]),
    ("second curve", BREAKER, ("tolerance_current", "tolerence_current"), ["[[curves]] 2", "'tolerance_current'"]),
    ("misspelt heading", BREAKER, ("[[accepted]]", "[[acepted]]"), ["'acepted'", "'accepted'"]),
    ("misspelt axis", BREAKER, ("[axes.time]", "[axes.tiem]"), ["[axes]", "'tiem'", "'time'"]),
    ("misspelt mark key", BREAKER, ("value = 1000", "valu = 1000"), ["[axes.current] marks 2", "'value'"]),
    ("misspelt setting key", BREAKER, ("off = true", "of = true"), ["[[devices]] 2 settings ii", "'off'"]),
    ("misspelt breaking key", BREAKER, ("value_a =", "value ="), ["[[devices]] 1 breaking 1", "'value_a'"]),
    ("nothing near", BREAKER, ("page = 1", "zzz = 1"), ["[sheet]", "'zzz'", "Known here: file, page"]),
    ("wrong word", BREAKER, ('"slow"', '"slwo"'), ["edge = 'slwo'", "fast, slow, mean", "Did you mean 'slow'?"]),
    ("wrong kind", BREAKER, ('"mccb"', '"breaker"'), ["kind = 'breaker'", "fuse, mcb, mccb"]),
    ("wrong unit", BREAKER, ('unit = "s"', 'unit = "sec"'), ["[axes.time]", "unit = 'sec'", "ms, s, min, h"]),
    ("unit of another axis", BREAKER, ('unit = "xIn"', 'unit = "min"'), ["[axes.current]", "xIdn"]),
    ("number as text", BREAKER, ("voltage_v = 230\nambient", 'voltage_v = "230"\nambient'), ["voltage_v = '230'"]),
    ("true as number", BREAKER, ("voltage_v = 230\nambient", "voltage_v = true\nambient"), ["voltage_v = True"]),
    ("nan", BREAKER, ("ambient_c = -5", "ambient_c = nan"), ["ambient_c = nan", "finite"]),
    ("infinite place", BREAKER, ("[430, 300]", "[430, inf]"), ["through 1", "inf"]),
    ("too large a number", BREAKER, ("ambient_c = -5", "ambient_c = 1" + "0" * 400), ["ambient_c", "finite"]),
    ("three coordinates", BREAKER, ("[700, 810]", "[700, 810, 1]"), ["through 2", "[700, 810, 1]"]),
    ("empty rectangle", BREAKER, ("[20, 30, 10, 5]", "[20, 30, 20, 5]"), ["avoid", "corners"]),
    ("mark below zero", BREAKER, ("value = 10 }", "value = -10 }"), ["marks 1", "value = -10", "above 0", "linear"]),
    ("mark without place", BREAKER, ("at = [412.0, 1730.5], ", ""), ["marks 1", "'at' is missing"]),
    ("factor zero", BREAKER, ("factor = 10", "factor = 0"), ["factor = 0", "above 0"]),
    ("both axes along x", BREAKER, ('unit = "s"', 'unit = "s"\ndirection = "x"'), ["both run along 'x'"]),
    ("two second axes", BREAKER, ("[axes.time]", "[axes.peak]\n[axes.time]"), ["[axes.time] and [axes.peak]"]),
    ("page zero", BREAKER, ("page = 1", "page = 0"), ["[sheet]", "page = 0", "from 1"]),
    ("page 1.5", BREAKER, ("page = 1", "page = 1.5"), ["page = 1.5", "whole"]),
    ("short hash", BREAKER, ('"AB12', '"B12'), ["sha256", "64"]),
    ("no file", BREAKER, ('file = "sheets/breaker.png"\n', ""), ["[sheet]", "'file' is missing"]),
    ("colour name", BREAKER, ('"#b02020"', '"red"'), ["colour = 'red'", "#b02020"]),
    ("setting as text", BREAKER, ("ir = 1.0 }", 'ir = "1.0" }'), ["[[curves]] 1 at", "ir = '1.0'"]),
    ("unknown device", BREAKER, ('"moor"]', '"mooor"]'), ["[[curves]] 2", "'mooor'", "'moor'"]),
    ("device twice", BREAKER, ('key = "moor"', 'key = "riverside-b10"'), ["[[devices]] 2", "'riverside-b10'", "twice"]),
    ("device and devices", BREAKER, ("through = [[1, 2]]", 'device = "moor"\nthrough = [[1, 2]]'), ["'devices'"]),
    ("limits the wrong way", BREAKER, ("[-0.10, 0.10]", "[0.10, -0.10]"), ["tolerance_current", "lower limit first"]),
    ("limits in per cent", BREAKER, ("[-0.10, 0.10]", "[-10, 10]"), ["tolerance_current", "0.1 is 10 %"]),
    ("key with a space", BREAKER, ('key = "moor"', 'key = "the moor"'), ["key = 'the moor'", "1 to 64"]),
    ("long key", SWITCH, ("isolator-1", "i" * 65), ["key", "1 to 64"]),
    ("series without template", BREAKER, ('key = "riverside-b{rating}"', 'key = "riv"'), ["{rating}", "riverside-b"]),
    ("template without series", SWITCH, ("isolator-1", "i{rating}"), ["{rating}", "ratings ="]),
    ("rating twice", BREAKER, ("[6, 10, 0.5]", "[6, 10, 6]"), ["ratings", "none twice"]),
    ("two kinds of rating", BREAKER, ("ratings = [6", "rated_current_a = 6\nratings = [6"), ["'rated_current_a'"]),
    ("range and steps", BREAKER, ("steps = [2,", "from = 1, steps = [2,"), ["settings tr", "either"]),
    ("half a range", BREAKER, ("to = 1.0, ", ""), ["settings ir", "either"]),
    ("range the wrong way", BREAKER, ("from = 0.4", "from = 4"), ["settings ir", "from = 4", "to = 1"]),
    ("acceptance without code", BREAKER, ('code = "label_doubtful"\n', ""), ["[[accepted]] 1", "'code'"]),
    ("table for list", SWITCH, ("[[devices]]", "[devices]"), ["'devices' is not a list", "[[devices]]"]),
    ("list for table", SWITCH, ("format = 1", "format = 1\nsheet = 3"), ["[sheet]", "3", "table"]),
    ("typed and traced", TYPED, ("source =", "through = [[1, 2]]\nsource ="), ["'points'", "'through'"]),
    ("neither typed nor traced", TYPED, (POINTS, ""), ["through = [[x, y]]"]),
    ("no sheet to trace on", TYPED, (f"{POINTS}\nsource", "through = [[1, 2]]\n# source"), ["no [sheet]"]),
    ("marks on nothing", TYPED, ("[[curves]]", f"[axes.time]\n{MARKS}\n[[curves]]"), ["marks", "no [sheet]"]),
    ("source of a traced curve", BREAKER, ("[[1, 2]]", '[[1, 2]]\nsource = "a table"'), ["source", "typed"]),
    ("point at zero", TYPED, ("[160, 0.1]", "[160, 0]"), ["points 1", "[160, 0]", "above 0"]),
    ("point of three", TYPED, ("[160, 0.1]", "[160, 0.1, 3]"), ["points 1", "pairs"]),
    ("base of a traced curve", BREAKER, ("through = [[1, 2]]", 'base = "A"\nthrough = [[1, 2]]'), ["base", "typed"]),
    ("unknown base", TYPED, ("source =", 'base = "In"\nsource ='), ["base = 'In'", "xIn"]),
    ("no format", SWITCH, ("format = 1", ""), ["no format", "format = 1"]),
    ("newer format", SWITCH, ("format = 1", "format = 2\nnews = 1"), ["format = 2", "newer", "Update"]),
    ("format as text", SWITCH, ("format = 1", 'format = "1"'), ["format = '1'"]),
    ("format true", SWITCH, ("format = 1", "format = true"), ["format = True"]),
    ("syntax", SWITCH, ("rated_current_a = 100", "rated_current_a ="), ["line 6", "not valid TOML"]),
    ("key twice", SWITCH, ('kind = "switch"', 'kind = "switch"\nkind = "mcb"'), ["line 6", "not valid TOML"]),
    ("open text", SWITCH, ('"switch"', '"switch'), ["line 5", "not valid TOML"]),
]


@pytest.mark.parametrize(("text", "change", "fragments"), [case[1:] for case in CHANGES], ids=[c[0] for c in CHANGES])
def test_what_is_wrong_is_refused_in_one_line_with_its_place(text, change, fragments):
    assert change[0] in text
    with pytest.raises(WorksheetError) as refused:
        parse_worksheet(text.replace(*change, 1), "works.toml")
    message = str(refused.value)
    assert "\n" not in message
    assert message.startswith("works.toml")
    for fragment in fragments:
        assert fragment in message


@pytest.mark.parametrize(
    "text", ["[" * 50_000, "format = 1\na = " + "[" * 50_000, "a = " + "9" * 5_000, "\0", "a = '\ud800'"]
)
def test_hostile_text_is_refused_without_a_traceback_of_its_own(text):
    with pytest.raises(WorksheetError):
        parse_worksheet(text)


def test_a_long_wrong_value_is_shortened():
    with pytest.raises(WorksheetError) as refused:
        parse_worksheet(SWITCH.replace('"switch"', f'"{"x" * 5000}"'))
    assert len(str(refused.value)) < 300


def test_an_unreadable_file_is_named(tmp_path):
    with pytest.raises(WorksheetError, match=r"absent\.toml"):
        read_worksheet(tmp_path / "absent.toml")
    with pytest.raises(WorksheetError, match="cannot be read"):
        read_worksheet(tmp_path)
    with pytest.raises(WorksheetError, match="cannot be read"):
        read_worksheet("a\0b.toml")


def test_bytes_that_are_no_text_are_refused(tmp_path):
    path = tmp_path / "picture.toml"
    path.write_bytes(b"format = 1\n\xff\xfe")
    with pytest.raises(WorksheetError, match="byte 12"):
        read_worksheet(path)


def test_a_file_too_large_to_be_typed_is_refused(tmp_path):
    path = tmp_path / "large.toml"
    path.write_bytes(b"#" * (LARGEST_BYTES + 1))
    with pytest.raises(WorksheetError, match="4 MB"):
        read_worksheet(path)
