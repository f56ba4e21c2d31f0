"""The example a firm copies its own rule file from is valid."""

import re
from pathlib import Path

from curvelab.standards.table import read_table

README = Path(__file__).parents[2] / "database" / "standards" / "README.md"


def test_the_example_of_the_readme_is_a_valid_table(tmp_path):
    text = README.read_text(encoding="utf-8")
    (example,) = re.findall(r"```toml\n(.*?)```", text, flags=re.DOTALL)
    file = tmp_path / "works.toml"
    file.write_text(example, encoding="utf-8")
    (rule,) = read_table(file)
    assert (rule.id, rule.requirement, rule.current, rule.base, rule.limit_s) == ("inrush", "hold", 8.0, "xIn", 0.01)
    assert not rule.advisory
