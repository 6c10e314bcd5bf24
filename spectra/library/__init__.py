"""Shipped spectra, and one recording; all invented but for a published programme."""

from importlib import resources


def recorded_text() -> str:
    """Return the shipped recording: six invented flights of one strain gauge, with the faults recorders have."""
    return resources.files(__name__).joinpath("recorded-six-flights.csv").read_text(encoding="utf-8")
