"""One table of names holds columns and documents together."""

import re
from pathlib import Path

import fatigue

DEVELOPERS = Path(__file__).parents[2] / "DEVELOPERS.md"


def test_every_column_of_rows_is_in_the_table_and_every_column_there_is_written():
    table = DEVELOPERS.read_text(encoding="utf-8").split("## Nomenclature")[1].split("\n## ")[0]
    named = {
        name
        for line in table.splitlines()
        if line.startswith("| `")
        for name in re.findall(r"`([^`]+)`", line.split("|")[1])
    }
    written = set(fatigue.estimate(fatigue.read_case(fatigue.demo_case())).rows.columns)
    assert named == written
