"""Files are written whole or not at all."""

import os

import pytest

from reports.writing import write_files, write_text
from spectra.faults import InputFaults


def fill_two(place):
    (place / "a.txt").write_text("new a", encoding="utf-8")
    (place / "b.txt").write_text("new b", encoding="utf-8")


def names(folder):
    return sorted(path.name for path in folder.iterdir())


def test_folders_are_made_and_only_the_files_are_left(tmp_path):
    written = write_files(tmp_path / "deep" / "out", fill_two)
    assert [path.name for path in written] == ["a.txt", "b.txt"]
    assert names(tmp_path / "deep" / "out") == ["a.txt", "b.txt"]


def test_files_are_replaced_and_strangers_stay(tmp_path):
    (tmp_path / "a.txt").write_text("old a", encoding="utf-8")
    (tmp_path / "mine.txt").write_text("mine", encoding="utf-8")
    write_files(tmp_path, fill_two)
    assert (tmp_path / "a.txt").read_text(encoding="utf-8") == "new a"
    assert names(tmp_path) == ["a.txt", "b.txt", "mine.txt"]


@pytest.mark.parametrize("error", [OSError(28, "No space left on device"), RuntimeError("a bug")])
def test_failing_half_way_leaves_what_was_there(tmp_path, error):
    (tmp_path / "a.txt").write_text("old a", encoding="utf-8")

    def fill(place):
        (place / "a.txt").write_text("half", encoding="utf-8")
        raise error

    with pytest.raises(InputFaults if isinstance(error, OSError) else RuntimeError) as caught:
        write_files(tmp_path, fill)
    if isinstance(error, OSError):
        assert "cannot be written to (No space left on device). Name another with --out." in str(caught.value)
    assert names(tmp_path) == ["a.txt"]
    assert (tmp_path / "a.txt").read_text(encoding="utf-8") == "old a"


def test_a_file_in_the_way_of_the_folder(tmp_path):
    (tmp_path / "out").write_text("a file", encoding="utf-8")
    with pytest.raises(InputFaults, match="the output folder cannot be written to"):
        write_files(tmp_path / "out", fill_two)
    assert (tmp_path / "out").read_text(encoding="utf-8") == "a file"


def test_a_folder_in_the_way_of_the_second_file_leaves_the_first_as_it_was(tmp_path):
    (tmp_path / "a.txt").write_text("old a", encoding="utf-8")
    (tmp_path / "b.txt").mkdir()
    with pytest.raises(InputFaults, match="the output folder cannot be written to"):
        write_files(tmp_path, fill_two)
    assert names(tmp_path) == ["a.txt", "b.txt"]
    assert (tmp_path / "a.txt").read_text(encoding="utf-8") == "old a"


@pytest.mark.skipif(hasattr(os, "geteuid") and os.geteuid() == 0, reason="root may write anywhere")
def test_folder_not_writable(tmp_path):
    tmp_path.chmod(0o500)
    try:
        with pytest.raises(InputFaults, match="Permission denied"):
            write_files(tmp_path, fill_two)
    finally:
        tmp_path.chmod(0o700)


def test_text_is_whole_or_not_there(tmp_path):
    write_text(tmp_path / "case.toml", "one")
    write_text(tmp_path / "case.toml", "two")
    assert (tmp_path / "case.toml").read_text(encoding="utf-8") == "two"
    with pytest.raises(InputFaults, match="cannot be written"):
        write_text(tmp_path / "none" / "case.toml", "three")
    (tmp_path / "folder").mkdir()
    with pytest.raises(InputFaults, match="cannot be written"):
        write_text(tmp_path / "folder", "four")
    assert names(tmp_path) == ["case.toml", "folder"]
