"""``toewright check`` as a gate: targets in the file."""

from __future__ import annotations

import json
from pathlib import Path

import pytest
from command_line import Cli
from corners import HARDPOINTS

FRONT = HARDPOINTS / "marten_front.toml"


def with_targets(folder: Path, text: str) -> Path:
    (folder / "marten_rear.toml").write_text((HARDPOINTS / "marten_rear.toml").read_text())
    (folder / "car.toml").write_text(f"{FRONT.read_text()}\n[targets]\n{text}\n")
    return folder / "car.toml"


def test_a_missed_target_is_exit_1(cli: Cli, tmp_path: Path) -> None:
    file = with_targets(
        tmp_path, "bump_steer = {over_travel = [-25, 25], within = 0.05}\nscrub_radius = {between = [10, 30]}"
    )
    result = cli("check", file)
    assert result.code == 1
    assert "Targets of the file: 1 of 2 kept" in result.out
    assert (
        "- MISSED bump steer (toe-in +) over wheel travel -25 to +25 mm: within 0.05 deg either way; worst "
        in result.out
    )
    assert "- kept   scrub radius" in result.out
    found = json.loads(cli("check", file, "--json").out)
    assert [t["kept"] for t in found[0]["targets"]] == [False, True]


def test_kept_targets_are_exit_0(cli: Cli, tmp_path: Path) -> None:
    result = cli("check", with_targets(tmp_path, "ackermann_percent = {at_steer = 20, between = [-20, 80]}"))
    assert result.code == 0
    assert "1 of 1 kept" in result.out


def test_no_targets_no_words(cli: Cli) -> None:
    result = cli("check", FRONT)
    assert result.code == 0
    assert "Targets" not in result.out


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("bump_steer = {within = -1}", "must be above 0"),
        ("bumpsteer = {within = 1}", "did you mean 'bump_steer'"),
        ("camber = {within = 1, at_stear = 3}", "did you mean 'at_steer'"),
        ("camber = 3", "write limits such as"),
    ],
)
def test_bad_targets_are_exit_2(cli: Cli, tmp_path: Path, text: str, words: str) -> None:
    result = cli("check", with_targets(tmp_path, text))
    assert result.code == 2
    assert words in result.complaint
