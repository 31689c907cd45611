from __future__ import annotations

from pathlib import Path

import pytest
from command_line import Cli

from toewright.model import load
from toewright.model.starters import STARTERS, starter_text


@pytest.mark.parametrize("kind", STARTERS)
def test_writes_a_file_that_check_takes(cli: Cli, tmp_path: Path, kind: str) -> None:
    path = tmp_path / "mine.toml"
    made = cli("new", kind, "-o", path)
    assert (made.code, made.err) == (0, "")
    assert f"toewright check {path}" in made.out
    assert path.read_text(encoding="utf-8") == starter_text(kind)
    assert load(path).left.kind == kind
    assert cli("check", path).code == 0
    assert list(tmp_path.iterdir()) == [path]


def test_refusals(cli: Cli, tmp_path: Path) -> None:
    path = tmp_path / "mine.toml"
    path.write_text("mine")
    for arguments, parts in (
        (("new", "strut", "-o", path), ("mine.toml: exists already", "--force")),
        (("new", "strut", "-o", tmp_path / "mine.txt"), ("mine.txt", "'.txt' is unknown", ".toml")),
        (("new", "strut", "-o", tmp_path / "none" / "mine.toml"), ("none does not exist", "make it first")),
        (("new", "strut", "-o", tmp_path / "mine"), ("no extension", ".toml")),
        (("new", "beam", "-o", tmp_path / "a.toml"), ("beam", "double-wishbone", "strut")),
        (("new", "strut"), ("missing option", "--out")),
    ):
        found = cli(*arguments)
        assert found.code == 2
        for part in parts:
            assert part in found.complaint
    assert path.read_text() == "mine"
    assert list(tmp_path.iterdir()) == [path]
    assert cli("new", "strut", "-o", path, "--force").code == 0
    assert load(path).left.kind == "strut"
