from __future__ import annotations

from pathlib import Path

import pytest
from command_line import Cli
from corners import HARDPOINTS

FRONT = HARDPOINTS / "marten_front.toml"
OTHER = HARDPOINTS / "linnet_front.toml"


@pytest.mark.parametrize(("command", "kind"), [("sweep", "png"), ("turn", "svg"), ("ride", "pdf"), ("turn", "png")])
def test_each_command_draws_what_it_prints(cli: Cli, tmp_path: Path, command: str, kind: str) -> None:
    plain = cli(command, FRONT)
    picture = tmp_path / f"picture.{kind}"
    overlay = ["--overlay", OTHER] if kind == "png" else []
    result = cli(command, FRONT, "--plot", picture, *overlay)
    assert result.code == 0
    assert result.out == plain.out
    assert f"wrote {picture}" in result.err
    begins = {"png": b"\x89PNG", "svg": b"<?xml", "pdf": b"%PDF"}[kind]
    assert picture.read_bytes().startswith(begins)


def test_pictures_are_refused_before_any_work(cli: Cli, tmp_path: Path) -> None:
    there = tmp_path / "there.png"
    there.write_text("mine")
    cases = {
        ("--plot", str(tmp_path / "picture.jpeg")): "the extension '.jpeg' is unknown; use .png, .svg or .pdf",
        ("--plot", str(there)): "exists already; give another name, or --force",
        ("--overlay", str(OTHER)): "add --plot FILE.png",
        ("--plot", str(tmp_path / "p.png"), "--overlay", str(tmp_path / "none.toml")): "there is no such file",
    }
    for arguments, words in cases.items():
        result = cli("sweep", FRONT, *arguments)
        assert result.code == 2
        assert words in result.complaint
    assert there.read_text() == "mine"
    assert [p.name for p in tmp_path.iterdir()] == ["there.png"]
    assert cli("sweep", FRONT, "--plot", there, "--force").code == 0
    assert there.read_bytes().startswith(b"\x89PNG")


def test_a_single_pose_is_no_picture(cli: Cli, tmp_path: Path) -> None:
    result = cli("sweep", FRONT, "--rack", "0", "--travel", "0", "--plot", tmp_path / "p.png")
    assert result.code == 2
    assert "make no curve" in result.err
    assert list(tmp_path.iterdir()) == []


def test_an_overlay_without_a_rack_is_refused_where_the_rack_moves(cli: Cli, tmp_path: Path) -> None:
    rear = HARDPOINTS / "marten_rear.toml"
    result = cli("ride", FRONT, "--rack", "5", "--plot", tmp_path / "p.png", "--overlay", rear)
    assert "marten_rear.toml: has no [rack], so --rack 5 means nothing" in result.complaint
    result = cli("turn", FRONT, "--plot", tmp_path / "p.png", "--overlay", rear)
    assert result.code == 2
    assert "marten_rear.toml: has no [rack], so it has no turn to draw" in result.err
    assert list(tmp_path.iterdir()) == []
    assert cli("sweep", FRONT, "--plot", tmp_path / "p.png", "--overlay", rear).code == 0
