"""Record the demo's numbers anew: python -m tests.golden.record.

These are our own numbers, kept to see that a change of code changes no answer unawares. They validate nothing: what
does stands in tests/validation. Record them anew when an answer is meant to change, and say why in the commit.
"""

from __future__ import annotations

from pathlib import Path

import pandas as pd

import fatigue

RECORDED = Path(__file__).with_name("demo_rows.csv")


def rows_now() -> pd.DataFrame:
    """Return the demo's rows."""
    return fatigue.estimate(fatigue.read_case(fatigue.demo_case())).rows


def main() -> None:
    """Write them to their file."""
    rows_now().to_csv(RECORDED, index=False, float_format="%.12g", lineterminator="\n")
    print(f"wrote {RECORDED}")


if __name__ == "__main__":
    main()
