"""Checks of concentration factors, the pin's contact and the making of a hole."""

from __future__ import annotations

import csv
from functools import cache, partial
from importlib import resources

import numpy as np

from fatigue.hole import concentration
from fatigue.hole.contact import Pin, PinInHole
from fatigue.hole.countersink import countersink_factor
from fatigue.hole.edge import pin_in_hole
from fatigue.hole.expansion import LARGEST_ZONE, REVERSE_ZONE, nadai_1943
from fatigue.hole.sheet import Edge, sheet_edge, wide_sheet
from reports.evidence.check import Check, Checks

SHEET = 72e3, 0.33
PINS = {"aluminium": Pin(72e3, 0.33), "titanium": Pin(110e3, 0.31), "steel": Pin(205e3, 0.30)}
STRIP = ((0.1, "3.03"), (0.2, "3.14"), (0.3, "3.36"), (0.5, "4.32"))
ROW = ((0.2, "3.011"), (0.25, "3.021"), (0.3, "3.039"), (0.5, "3.249"))
SINK = {
    0.5: {0.25: "1.475", 0.50: "1.294", 0.75: "1.111"},
    1.0: {0.25: "1.309", 0.50: "1.214", 0.75: "1.085"},
    1.67: {0.25: "1.215", 0.50: "1.164", 0.75: "1.069"},
    2.5: {0.25: "1.155", 0.50: "1.126", 0.75: "1.056"},
}
"""Ratio to the plain hole by r/t and b/t, 100 deg."""
EXPANSION = (
    (1.1, "0.6872", "-0.2271"),
    (1.2, "0.7862", "-0.4468"),
    (1.3, "0.8749", "-0.6598"),
    (1.4, "0.9540", "-0.8676"),
)
KEPT = (("aluminium", "1.7500", "1.2500"), ("titanium", "1.5611", "1.4389"), ("steel", "1.3361", "1.6639"))


def fit_for(pin: Pin, pressure: float) -> float:
    """Return the diametral interference that presses so hard, Lame."""
    return pressure * ((1 + SHEET[1]) / SHEET[0] + (1 - pin.poisson) / pin.modulus)


def _wide(pin: Pin) -> PinInHole:
    return PinInHole(wide_sheet(SHEET[1]), SHEET[0], pin)


def _range_factor(pin: Pin, needed: float) -> float:
    hoop = _wide(pin).solve([0.0, 100.0], 0.0, fit_for(pin, 1.01 * needed * 100.0)).hoop
    return float(hoop[1, 90] - hoop[0, 90]) / 100.0


def _separation(pin: Pin) -> float:
    """Return the fit pressure over S at which contact is just kept all round, by halving."""
    low, high = 0.5, 3.0
    ready = _wide(pin)
    for _ in range(18):
        middle = (low + high) / 2
        closed = bool(ready.solve(100.0, 0.0, fit_for(pin, middle * 100.0)).closed.all())
        low, high = (low, middle) if closed else (middle, high)
    return high


@cache
def elements() -> tuple[dict[str, str], ...]:
    """Return the stored finite-element results of pins in holes."""
    file = resources.files("reports.evidence").joinpath("data/pin_in_hole_elements.csv")
    return tuple(csv.DictReader(file.read_text(encoding="utf-8").splitlines()))


@cache
def solved_peaks() -> tuple[np.ndarray, np.ndarray]:
    """Return the largest hoop stress of every stored case, by elements and by the contact solution [MPa]."""
    own = []
    for row in elements():
        x, end = float(row["width_ratio"]), float(row["end_ratio"])
        edge: Edge = "row" if row["edge"] == "row" else "strip"
        bypass, bearing = float(row["bypass_MPa"]), float(row["bearing_MPa"])
        if row["fit"] == "open":
            own.append(bypass * sheet_edge(edge, x, end, SHEET[1]).open_factor)
        else:
            pin = PINS[row["pin"]]
            hole = pin_in_hole(edge, x, end, *SHEET, pin.modulus, pin.poisson)
            own.append(float(hole.solve(bypass, bearing, float(row["fit"])).hoop.max()))
    return np.array([float(row["peak_MPa"]) for row in elements()]), np.array(own)


def _largest_miss(width_ratio: float) -> float:
    theirs, own = solved_peaks()
    chosen = np.array([float(row["width_ratio"]) == width_ratio for row in elements()])
    return float(np.abs(100 * (own / theirs - 1))[chosen].max())


def _snug(edge: Edge, x: float) -> float:
    pin = PINS["aluminium"]
    hole = pin_in_hole(edge, x, np.inf, *SHEET, pin.modulus, pin.poisson)
    return float(hole.solve(1.0, 0.0, 0.0).hoop.max())


def checks() -> list[Check]:
    """Return the checks of holes."""
    found = Checks()
    add = found.add

    factor = "concentration"
    add(factor, "open hole, wide sheet", "3", lambda: float(concentration.row_of_holes(0.0)), "kirsch-1898", how="read",
        within=1e-9, reason="exact")  # fmt: skip
    for x, printed in STRIP:
        value = float(printed)
        add(factor, f"hole in a strip, d/W {x:g}, Heywood's form", printed, partial(_strip, x), "howland-1930",
            how="memory", within=0.02 * value, reason="the form is good to 2 %")  # fmt: skip
        add(factor, f"hole in a strip, d/W {x:g}, by collocation", printed, partial(_open, "strip", x), "howland-1930",
            how="memory", within=0.007 * value, reason="as recalled, that much under elements")  # fmt: skip
    for x, printed in ROW:
        add(factor, f"row of holes, d/pitch {x:g}, by collocation", printed, partial(_open, "row", x), "row-of-holes",
            how="elements", within=0.003 * float(printed),
            reason="the elements held the sheet's contraction over a finite length")  # fmt: skip
    add(factor, "cosine bearing pressure, wide sheet, 90 deg", "0.8106",
        lambda: float(wide_sheet(0.33).cosine_bearing_factor), "cosine-bearing")  # fmt: skip
    for nu, printed in ((0.33, "1.7988"), (0.30, "1.7879")):
        add(factor, f"bending of a thin sheet, nu {nu:g}", printed, partial(_thin, nu), "reissner-1945", how="memory")
    for r_t, line in SINK.items():
        for b_t, printed in line.items():
            add(factor, f"countersunk 100 deg, r/t {r_t:g}, b/t {b_t:g}", printed, partial(_sink, b_t, r_t),
                "countersink", how="elements", within=0.0205 * float(printed),
                reason="the fitted form is good to 2 %")  # fmt: skip

    contact = "pin contact"
    for name, printed, needed in KEPT:
        pin = PINS[name]
        add(contact, f"{name} pin, contact kept: range factor at 90 deg", printed,
            partial(_range_factor, pin, float(needed)), "pin-contact")  # fmt: skip
        add(contact, f"{name} pin: fit pressure over S that keeps contact", needed, partial(_separation, pin),
            "pin-contact", within=5e-4, reason="contact is looked at every degree")  # fmt: skip
    for name, printed in (("aluminium", "180.00"), ("steel", "228.45")):
        add(contact, f"{name} pin, 0.5 % interference: pressure", printed, partial(_pressure, PINS[name]),
            "pin-contact", unit="MPa")  # fmt: skip
    add(contact, "very loose pin: open hole", "3", lambda: _wide(PINS["steel"]).solve(1.0, 0.0, -0.05).hoop.max(),
        "kirsch-1898", how="read", within=1e-9, reason="exact")  # fmt: skip
    for x in (0.2, 0.3, 0.5):
        add(contact, f"plane-stress elements, d/W {x:g}: largest difference of the peak", "0",
            partial(_largest_miss, x), "pin-contact", how="elements", unit="%", within=1.0,
            reason="186 pins, fits, loads and end distances each")  # fmt: skip
    add(contact, "snug pin in a strip, d/W 0.2: peak over bypass", "2.82", partial(_snug, "strip", 0.2), "pin-contact",
        how="elements", within=0.005, reason="half a unit in the last digit")  # fmt: skip

    making = "expansion"
    for zone, pressure, residual in EXPANSION:
        add(making, f"plastic zone c/a {zone:g}: pressure over yield", pressure, partial(_nadai, zone, "pressure"),
            "nadai-1943")  # fmt: skip
        add(making, f"plastic zone c/a {zone:g}: residual hoop over yield", residual,
            partial(_nadai, zone, "residual_hoop"), "nadai-1943")  # fmt: skip
    add(making, "reverse yield begins: c/a", "1.4645", lambda: float(REVERSE_ZONE), "nadai-1943")
    add(making, "largest plastic zone: c/a", "1.7512", lambda: float(LARGEST_ZONE), "nadai-1943")
    return found


def _strip(x: float) -> float:
    return float(concentration.isolated_strip(x))


def _open(edge: Edge, x: float) -> float:
    return sheet_edge(edge, x, np.inf, 0.33).open_factor


def _thin(nu: float) -> float:
    return float(concentration.bending_thin_sheet(nu))


def _sink(b_t: float, r_t: float) -> float:
    return float(countersink_factor(1 - b_t, 1.0, r_t))


def _pressure(pin: Pin) -> float:
    return float(_wide(pin).solve(0.0, 0.0, 0.005).pressure[0, 90])


def _nadai(zone: float, name: str) -> float:
    return float(getattr(nadai_1943(zone), name))
