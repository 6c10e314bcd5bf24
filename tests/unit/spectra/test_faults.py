"""How faults are told."""

import pytest

from spectra.faults import Fault, InputFaults, did_you_mean, listed, show


def test_all_faults_in_one_message():
    error = InputFaults("a.toml", [Fault("x", "is wrong.", "Mend it."), Fault("", "is odd.")])
    assert str(error) == "a.toml: 2 faults\n  x: is wrong. Mend it.\n  is odd."
    assert str(InputFaults("a.toml", [Fault("x", "is wrong.")])).startswith("a.toml: one fault\n")
    assert isinstance(error, ValueError)


@pytest.mark.parametrize(
    ("names", "text"), [([], ""), (["a"], "a"), (["a", "b"], "a or b"), (["a", "b", "c"], "a, b or c")]
)
def test_listed(names, text):
    assert listed(names) == text


def test_values_are_shown_as_a_file_has_them_on_one_short_line():
    assert show(True) == "true"
    assert show("a  b") == "'a b'"
    assert show(1.5) == "1.5"
    assert len(show("x" * 500)) == 60


def test_did_you_mean():
    assert did_you_mean("pich_mm", ["pitch_mm", "hole_mm"]).startswith("Did you mean pitch_mm")
    assert did_you_mean("PITCH_MM", ["pitch_mm"]) == "Did you mean pitch_mm?"
    assert did_you_mean("zzz", ["pitch_mm", "hole_mm"]) == "Known: pitch_mm or hole_mm."
    assert did_you_mean("zzz", []) == ""
