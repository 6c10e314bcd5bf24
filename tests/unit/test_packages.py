"""The three packages are ours, complete with their data, and every source is used."""

import ast
import re
import tomllib
from importlib import import_module, resources
from importlib.metadata import files, packages_distributions
from pathlib import Path

import pytest

from fatigue.references import methods, references

ROOT = Path(__file__).parents[2]
PACKAGES = ("spectra", "fatigue", "reports")
SETTINGS = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))
LISTED = SETTINGS["tool"]["setuptools"]["packages"]


@pytest.mark.parametrize("name", PACKAGES)
def test_the_import_name_is_ours(name):
    assert Path(import_module(name).__file__).parent == ROOT / name
    assert set(packages_distributions().get(name, ["faying"])) == {"faying"}


def test_every_package_is_listed():
    found = {
        ".".join(path.parent.relative_to(ROOT).parts)
        for name in PACKAGES
        for path in (ROOT / name).rglob("__init__.py")
    }
    assert set(LISTED) == found


def test_every_data_file_goes_into_the_wheel():
    patterns = SETTINGS["tool"]["setuptools"]["package-data"]["*"]
    for name in PACKAGES:
        for path in (ROOT / name).rglob("*"):
            inside = ".".join(path.parent.relative_to(ROOT).parts)
            if inside in LISTED and path.is_file() and path.suffix not in (".py", ".pyc"):
                assert any(path.match(pattern) for pattern in patterns), f"{path.relative_to(ROOT)} would be left out"


@pytest.mark.parametrize(
    ("package", "file"),
    [
        ("fatigue", "references.toml"),
        ("fatigue", "methods.toml"),
        ("fatigue.case.cases", "starter.toml"),
        ("fatigue.hole", "kinds.toml"),
        ("fatigue.material.data", "materials.toml"),
        ("spectra.library", "short-hops.toml"),
        ("reports.templates", "report.html"),
        ("reports.evidence.data", "pin_in_hole_elements.csv"),
    ],
)
def test_data_is_read_as_a_resource(package, file):
    assert resources.files(package).joinpath(file).read_text(encoding="utf-8").strip()


def keys_in_sources():
    """Return the keys that docstrings and evidence name, with the file that does."""
    found = {}
    for name in PACKAGES:
        for path in (ROOT / name).rglob("*.py"):
            text = path.read_text(encoding="utf-8")
            for node in ast.walk(ast.parse(text)):
                if isinstance(node, ast.Constant) and isinstance(node.value, str):
                    for told in re.findall(r"\b[Kk]eys?\s+((?:``[\w-]+``[,;]?\s*(?:and\s+)?)+)", node.value):
                        for key in re.findall(r"``([\w-]+)``", told):
                            found.setdefault(key, path.name)
    return found


def test_every_key_a_docstring_names_is_in_the_bibliography():
    missing = {key: where for key, where in keys_in_sources().items() if key not in references()}
    assert not missing


def test_every_key_of_a_method_is_in_the_bibliography():
    assert not {key for method in methods() for key in method.keys} - set(references())


def test_every_entry_of_the_bibliography_is_used():
    used = {key for method in methods() for key in method.keys} | set(keys_in_sources())
    text = "".join(
        path.read_text(encoding="utf-8")
        for name in (*PACKAGES, "tests")
        for path in (ROOT / name).rglob("*")
        if path.suffix in (".py", ".toml") and path.name != "references.toml"
    )
    unused = [
        key for key in references() if key not in used and not re.search(rf"(?<![\w-]){re.escape(key)}(?![\w-])", text)
    ]
    assert not unused


def test_every_entry_says_how_it_was_obtained():
    ways = {"read", "read second-hand", "memory", "derived", "practice"}
    assert {entry.obtained for entry in references().values()} <= ways


def test_the_command_is_installed():
    scripts = SETTINGS["project"]["scripts"]
    module, _, name = scripts["faying"].partition(":")
    assert callable(getattr(import_module(module), name))
    assert files("faying")
