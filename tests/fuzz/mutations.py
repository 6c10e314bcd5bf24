"""Case files spoilt on purpose: structure-aware changes of good ones."""

from __future__ import annotations

import re

from hypothesis import strategies as st

NUMBER = re.compile(r"(?<![\w.\"-])-?\d+(?:\.\d+)?(?:e-?\d+)?(?![\w\"])")
NUMBERS = st.one_of(
    st.sampled_from(
        [
            "0",
            "-1",
            "1e-9",
            "1e9",
            "1e300",
            "-1e300",
            "1e-300",
            "5e-324",
            "nan",
            "inf",
            "-inf",
            "0.0",
            "1",
            "2",
            "0.5",
            "99",
            "200",
            "true",
            '"4"',
            "[]",
            "{}",
            "1e5",
            "0.1",
            "1_0",
            "07",
            "12.7",
            "3.9999999999",
        ]
    ),
    st.floats(1e-3, 1e3).map(repr),
    st.floats(0.1, 40).map(lambda v: f"{v:.3g}"),
)
WORDS = st.sampled_from(
    [
        "", "lap", "doubler", "one-strap", "two-strap", "contact", "none", "practice", "\u0000", "\x1b[31m", "=1+1",
        "<script>", "../..", "/dev/zero", "2024-T3 bare sheet", "7075-T6 sheet", "A", "upper skin", "short-hops",
        "long-range", "\u202e", "'", "huth", "swift", "clamped", "strip", "limit", "shallower", "x" * 300,
    ]
)  # fmt: skip
KEYS = st.sampled_from(
    [
        "slack_mm = 0.05", "friction_share = 0.3", "head_fixity = 0.2", "at_mm = 10.0", "pitch_mm = 30.0",
        "edge_mm = 3.0",
        "flexibility_mm_per_N = 1e-5", "to_centre_mm = 5.0", 'role = "main"', 'from_row = "B"', 'to_row = "A"',
        "steps = [ { after_row = 'B', thickness_mm = 0.5 } ]", "scale = 3.0", "cold_expansion_percent = 4.0",
        "squeeze_ratio = 1.6", "fit_percent = -1.0", "friction = 0.3", "unknown = 1", "use_credit = true", "tests = 3",
        'countersink = { sheet = "upper skin", depth_in = 0.03 }', "concentration = 'strip'", 'driven_head = "upper"',
    ]
)  # fmt: skip


@st.composite
def spoilt(draw: st.DrawFn, text: str, most: int = 4) -> str:
    """Draw a case text with a few changes: numbers, words, lines and keys replaced, dropped, doubled or added."""
    for _ in range(draw(st.integers(1, most))):
        kind = draw(st.sampled_from(["number", "number", "number", "word", "drop", "double", "key", "swap", "noise"]))
        lines = text.split("\n")
        at = draw(st.integers(0, len(lines) - 1))
        if kind == "number" and (found := list(NUMBER.finditer(text))):
            match = found[draw(st.integers(0, len(found) - 1))]
            text = text[: match.start()] + draw(NUMBERS) + text[match.end() :]
        elif kind == "word" and (found := list(re.finditer(r'"[^"\n]*"', text))):
            match = found[draw(st.integers(0, len(found) - 1))]
            text = text[: match.start()] + f'"{draw(WORDS)}"' + text[match.end() :]
        elif kind == "drop":
            text = "\n".join(lines[:at] + lines[at + 1 :])
        elif kind == "double":
            text = "\n".join([*lines[:at], lines[at], *lines[at:]])
        elif kind == "key":
            text = "\n".join([*lines[:at], draw(KEYS), *lines[at:]])
        elif kind == "swap":
            other = draw(st.integers(0, len(lines) - 1))
            lines[at], lines[other] = lines[other], lines[at]
            text = "\n".join(lines)
        else:
            place = draw(st.integers(0, len(text)))
            text = text[:place] + draw(st.text(max_size=6)) + text[place:]
    return text
