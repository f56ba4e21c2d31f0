"""Rule tables are validated when loaded; every shipped number agrees with what is published of the standard."""

import pytest

from curvelab.errors import StandardError
from curvelab.records.device import Nameplate
from curvelab.standards.rules import load_rules, rules_beside, rules_in
from curvelab.standards.table import read_table

TABLE = """
format = 1
standard = "Works standard"
[[applies_to]]
kind = "mcb"
standards = ["60898-1"]
[sources]
seen = "Seen in print"
[[rules]]
id = "one"
clause = "1"
characteristics = ["B"]
multiple = 2.0
base = "xIn"
requirement = "trip"
limit_s = 10.0
strict = true
start = "cold"
source = "seen"
confidence = "published"
"""


def written(folder, text):
    file = folder / "works.toml"
    file.write_text(text, encoding="utf-8")
    return file


def test_a_valid_table_is_read(tmp_path):
    (rule,) = read_table(written(tmp_path, TABLE))
    assert (rule.id, rule.limit_s, rule.strict, rule.source, rule.advisory) == (
        "one",
        10.0,
        True,
        "Seen in print",
        False,
    )
    assert rules_in(tmp_path) == (rule,)


@pytest.mark.parametrize("confidence", ["memory", "practice"])
def test_a_rule_that_is_not_published_is_advisory(tmp_path, confidence):
    (rule,) = read_table(written(tmp_path, TABLE.replace("published", confidence)))
    assert rule.advisory


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ("format = 1", "format = 2", "format = 2"),
        ('standard = "Works standard"', "", "standard"),
        ('kind = "mcb"', 'kind = "toaster"', "kind = 'toaster'"),
        ("limit_s = 10.0", "limit_s = -1", "limit_s = -1"),
        ("multiple = 2.0", 'multiple = "2"', "multiple = '2'"),
        ("strict = true", "strict = 1", "strict = 1"),
        ('base = "xIn"', 'base = "xIq"', "base = 'xIq'"),
        ('requirement = "trip"', 'requirement = "perhaps"', "requirement"),
        ('source = "seen"', 'source = "heard"', "source = 'heard'"),
        ('confidence = "published"', 'confidence = "sure"', "confidence"),
        ('start = "cold"', 'start = "warm"', "start = 'warm'"),
        ('characteristics = ["B"]', "characteristics = []", "characteristics"),
        ('clause = "1"', 'claws = "1"', "unknown key 'claws'"),
        ("strict = true", "strict = true\nabove_a = 63\nup_to_a = 32", "above 63 A"),
        ("[[rules]]", "[[rules", "cannot be read"),
    ],
)
def test_a_table_that_is_not_valid_says_which_rule_and_field(tmp_path, old, new, message):
    with pytest.raises(StandardError, match=r"works\.toml") as error:
        read_table(written(tmp_path, TABLE.replace(old, new, 1)))
    assert message in str(error.value)
    assert "\n" not in str(error.value)


def test_two_rules_of_one_name_are_refused(tmp_path):
    with pytest.raises(StandardError, match="'one'"):
        read_table(written(tmp_path, TABLE + TABLE[TABLE.index("[[rules]]") :]))


@pytest.mark.parametrize(
    ("plate", "count"),
    [
        ({"kind": "mcb", "characteristic": "B", "standard": "IEC 60898-1"}, 7),
        ({"kind": "mcb", "characteristic": "B", "standard": "BS EN 60898-1:2019"}, 7),
        ({"kind": "mcb", "characteristic": "C"}, 7),
        # Seven of overcurrent; 0.5, 1 and 2 times the residual current, and 500 A, while that current is not said.
        ({"kind": "rcbo", "characteristic": "C", "standard": "IEC 61009-1"}, 11),
        ({"kind": "mcb", "characteristic": "K"}, 0),
        # Two each for overload, short-time and instantaneous releases; what it lacks is left out when it is checked.
        ({"kind": "mcb", "characteristic": "K", "standard": "IEC 60947-2"}, 6),
        ({"kind": "mcb", "characteristic": "B", "standard": "IEC 60947-2"}, 6),
        # Two conventional currents, four gates, two energies.
        ({"kind": "fuse", "characteristic": "gG"}, 8),
        ({"kind": "fuse", "characteristic": "gG", "standard": "BS 88-2"}, 10),
        ({"kind": "fuse", "standard": "BS 3036"}, 1),
        ({"kind": "fuse", "characteristic": "aM"}, 6),
        ({"kind": "relay", "characteristic": "IEC inverse"}, 16),
        ({"kind": "relay", "characteristic": "class 10"}, 5),
        ({"kind": "switch"}, 0),
    ],
)
def test_a_device_comes_under_the_table_by_kind_standard_and_characteristic(plate, count):
    named = Nameplate(key="x", rated_current_a=32.0, **plate)
    assert sum(rule.is_for(named) for rule in load_rules()) == count


@pytest.mark.parametrize("rating", [6.0, 32.0, 33.0, 63.0, 64.0, 125.0])
def test_every_rating_has_one_of_each_test(rating):
    plate = Nameplate(key="x", kind="mcb", characteristic="D", rated_current_a=rating)
    ids = [rule.id.removesuffix("-le32").removesuffix("-gt32")[:7] for rule in load_rules() if rule.is_for(plate)]
    assert len(ids) == len(set(ids)) == 7
    limit = {rule.id[0]: rule.limit_s for rule in load_rules() if rule.is_for(plate) and rule.id[0] in "ab"}
    assert set(limit.values()) == {3600.0 if rating <= 63 else 7200.0}


FORMS = {
    "currents_a = [[16, 33], [20, 42]]": [("one-16", 33.0, 33.0), ("one-20", 42.0, 42.0)],
    "let_through_a2s = [[16, 4000]]": [("one-16", 20.0, 20.0)],
    # 230 V x 0.95 / 0.445 ohm and / 0.435 ohm: what 0.44 may stand for before rounding.
    'impedances_ohm = [[63, "0.44"]]\nvoltage_v = 230\nfactor = 0.95': [("one-63", 502.299, 491.011)],
}


@pytest.mark.parametrize(("form", "expected"), FORMS.items())
def test_a_limit_may_be_stated_for_each_rating(tmp_path, form, expected):
    text = TABLE.replace('multiple = 2.0\nbase = "xIn"\n', f"{form}\n")
    rules = read_table(written(tmp_path, text))
    assert [(rule.id, round(rule.current, 3), round(rule.current_from, 3)) for rule in rules] == expected
    assert all(rule.base == "A" for rule in rules)
    plate = Nameplate(key="x", kind="mcb", characteristic="B", rated_current_a=float(rules[0].id.split("-")[1]))
    assert [rule.is_for(plate) for rule in rules] == [True] + [False] * (len(rules) - 1)


def test_a_limit_may_be_stated_for_each_multiple(tmp_path):
    text = TABLE.replace("multiple = 2.0", "points = [[2, 10.0], [5, 4.0]]\nfactor = 0.95").replace(
        "limit_s = 10.0\n", ""
    )
    rules = read_table(written(tmp_path, text))
    assert [(rule.id, rule.current, rule.limit_s) for rule in rules] == [("one-2", 2.0, 9.5), ("one-5", 5.0, 3.8)]


@pytest.mark.parametrize(
    ("form", "message"),
    [
        ("currents_a = [[16, 33], [16, 42]]", "16 twice"),
        ("currents_a = [[16, -33]]", "-33"),
        ("currents_a = [16, 33]", "Rows of two"),
        ('impedances_ohm = [[63, "often"]]\nvoltage_v = 230\nfactor = 0.95', "'often'"),
        ("impedances_ohm = [[63, 0.44]]\nvoltage_v = 230\nfactor = 0.95", "0.44"),
        ('multiple = 2.0\nbase = "xIn"\ncurrents_a = [[16, 33]]', "Exactly one of"),
    ],
)
def test_a_limit_stated_wrongly_is_refused(tmp_path, form, message):
    with pytest.raises(StandardError, match=r"rule 'one'") as error:
        read_table(written(tmp_path, TABLE.replace('multiple = 2.0\nbase = "xIn"\n', f"{form}\n")))
    assert message in str(error.value)


ADOPTING = """
format = 1
standard = "Yard standard"
[[applies_to]]
kind = "rcbo"
standards = ["1"]
named = true
[sources]
seen = "Seen elsewhere"
[[adopts]]
table = "works"
source = "seen"
confidence = "memory"
"""


def test_a_table_may_adopt_another_for_its_own_devices(tmp_path):
    written(tmp_path, TABLE)
    file = tmp_path / "yard.toml"
    file.write_text(ADOPTING, encoding="utf-8")
    (rule,) = read_table(file)
    assert (rule.standard, rule.clause, rule.source) == ("Yard standard", "as Works standard, 1", "Seen elsewhere")
    assert rule.advisory
    plate = Nameplate(key="x", kind="rcbo", characteristic="B")
    assert not rule.is_for(plate)
    assert rule.is_for(Nameplate(key="x", kind="rcbo", characteristic="B", standard="Yard 1"))


@pytest.mark.parametrize("name", ["yard", "nowhere", "../works"])
def test_a_table_that_adopts_itself_or_nothing_is_refused(tmp_path, name):
    file = tmp_path / "yard.toml"
    file.write_text(ADOPTING.replace('"works"', f'"{name}"'), encoding="utf-8")
    with pytest.raises(StandardError, match="adopt"):
        read_table(file)


def test_a_firm_keeps_rules_of_its_own_beside_its_library(tmp_path):
    assert rules_beside(tmp_path / "firm.sqlite") == load_rules()
    (tmp_path / "standards").mkdir()
    written(tmp_path / "standards", TABLE)
    *shipped, own = rules_beside(tmp_path / "firm.sqlite")
    assert tuple(shipped) == load_rules()
    assert (own.standard, own.id) == ("Works standard", "one")


def test_every_shipped_rule_says_where_its_number_is_from():
    assert all(rule.source and rule.clause for rule in load_rules())
    assert all(rule.advisory for rule in load_rules() if rule.confidence != "published")
    assert len({(rule.standard, rule.id) for rule in load_rules()}) == len(load_rules())
