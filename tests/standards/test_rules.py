"""Rule tables are validated when loaded; every shipped number agrees with what is published of the standard."""

import pytest

from curvelab.errors import StandardError
from curvelab.records.device import Nameplate
from curvelab.standards.rules import load_rules, read_table

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
    assert load_rules(tmp_path) == (rule,)


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
        ("strict = true", "strict = true\nabove_a = 63\nup_to_a = 32", "above_a = 63"),
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
        ({"kind": "rcbo", "characteristic": "C", "standard": "IEC 61009-1"}, 7),
        ({"kind": "mcb", "characteristic": "K", "standard": "IEC 60947-2"}, 0),
        ({"kind": "mcb", "characteristic": "B", "standard": "IEC 60947-2"}, 0),
        ({"kind": "fuse", "characteristic": "gG"}, 0),
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
