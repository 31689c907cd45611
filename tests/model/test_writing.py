from __future__ import annotations

from pathlib import Path

import pytest

from toewright.model import InputError
from toewright.model.writing import check_target, write_safely, write_text


def test_writes_and_refuses_what_exists(tmp_path: Path) -> None:
    path = tmp_path / "a.toml"
    write_text(path, "one\n")
    with pytest.raises(InputError, match=r"a\.toml: exists already; .*--force"):
        write_text(path, "two\n")
    assert path.read_text() == "one\n"
    write_text(path, "two\r\n", force=True)
    assert path.read_bytes() == b"two\r\n"
    assert list(tmp_path.iterdir()) == [path]


def test_refuses_folders_and_missing_folders(tmp_path: Path) -> None:
    with pytest.raises(InputError, match="is a folder; give a file name"):
        check_target(tmp_path, True)
    with pytest.raises(InputError, match=r"the folder .*none does not exist; make it first"):
        write_text(tmp_path / "none" / "a.toml", "one")
    (tmp_path / "file").write_text("x")
    with pytest.raises(InputError, match="does not exist"):
        check_target(tmp_path / "file" / "a.toml", False)


def test_nothing_half_written_when_writing_fails(tmp_path: Path) -> None:
    path = tmp_path / "a.csv"
    path.write_text("whole")

    def breaks(place: Path) -> None:
        assert place.suffix == ".csv"
        place.write_text("half")
        raise OSError(28, "No space left on device")

    with pytest.raises(InputError, match=r"a\.csv: can't be written \(No space left on device\)"):
        write_safely(path, breaks, force=True)
    assert path.read_text() == "whole"
    assert list(tmp_path.iterdir()) == [path]

    def bug(place: Path) -> None:
        place.write_text("half")
        raise RuntimeError

    with pytest.raises(RuntimeError):
        write_safely(path, bug, force=True)
    assert list(tmp_path.iterdir()) == [path]


def test_rights_are_those_of_a_new_file(tmp_path: Path) -> None:
    write_text(tmp_path / "a.toml", "one")
    (tmp_path / "b.toml").write_text("one")
    assert (tmp_path / "a.toml").stat().st_mode == (tmp_path / "b.toml").stat().st_mode
