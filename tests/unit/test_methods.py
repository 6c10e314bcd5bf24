"""The registry of methods: every method has its code, its sources and, where there are any, its published checks."""

from importlib import import_module

import pytest

from fatigue.references import methods, references
from reports.evidence import all_checks

SUBJECTS = {check.subject for check in all_checks()}


@pytest.mark.parametrize("method", methods(), ids=lambda method: method.name)
def test_method(method):
    module, _, name = method.code.rpartition(".")
    found = getattr(import_module(module), name)
    assert found.__doc__
    assert method.keys
    assert all(key in references() for key in method.keys)
    assert method.evidence in {"", *SUBJECTS}


def test_every_subject_of_the_evidence_belongs_to_a_method_or_is_listed_here():
    others = {"gust programme", "strain life", "mean stress", "fits", "whole chain"}
    assert {method.evidence for method in methods()} | others >= SUBJECTS
