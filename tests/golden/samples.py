"""Write the sample outputs under reports/samples anew: python -m tests.golden.samples."""

from __future__ import annotations

import re
from pathlib import Path

import fatigue
import reports
from reports.provenance import theory_text

SAMPLES = Path(__file__).parents[2] / "reports" / "samples"
KEPT = ("critical_row.png", "report.html", "rows.csv")


def comparable(page: str) -> str:
    """Return a report page without its drawings, versions and file hash, which may differ from machine to machine."""
    text = re.sub(r"<svg.*?</svg>", "<svg/>", page, flags=re.S)
    return re.sub(r"<p class=\"quiet\">Case SHA-256.*?</p>", "", text, flags=re.S)


def build(folder: Path) -> None:
    """Write the demo's outputs into a folder."""
    reports.write(fatigue.estimate(fatigue.read_case(fatigue.demo_case())), folder)


def main() -> None:
    """Replace the samples by what the code gives now."""
    import tempfile

    SAMPLES.mkdir(exist_ok=True)
    with tempfile.TemporaryDirectory() as temporary:
        build(Path(temporary))
        for name in KEPT:
            (SAMPLES / name).write_bytes((Path(temporary) / name).read_bytes())
            print(f"wrote {SAMPLES / name}")
    (SAMPLES / "theory.md").write_text(theory_text(), encoding="utf-8")


if __name__ == "__main__":
    main()
