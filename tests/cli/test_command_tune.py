from __future__ import annotations

import json
from pathlib import Path

import pytest
from command_line import Cli
from corners import HARDPOINTS

import toewright as tw

FRONT = HARDPOINTS / "marten_front.toml"
FLAT = ("--free", "tie_rod_inner.z=-10:10", "--toward", "bump_steer over -25:25 = 0")


def test_a_new_file_with_comments_kept(cli: Cli, tmp_path: Path) -> None:
    new = tmp_path / "new.toml"
    result = cli("tune", FRONT, *FLAT, "-o", new)
    assert result.code == 0
    for words in (
        "before ",
        "after  ",
        "No bound binds.",
        "How sure",
        "All starts led to this one answer",
        "verify on the vehicle",
    ):
        assert words in result.out
    assert "# rack end joint" in new.read_text()
    changed = [
        (a, b) for a, b in zip(FRONT.read_text().splitlines(), new.read_text().splitlines(), strict=True) if a != b
    ]
    assert len(changed) == 1
    (tmp_path / "marten_rear.toml").write_text((HARDPOINTS / "marten_rear.toml").read_text())
    assert tw.load(new).left.points["tie_rod_inner"][2] == pytest.approx(150.2, abs=0.2)


def test_the_old_file_is_kept(cli: Cli, tmp_path: Path) -> None:
    new = tmp_path / "new.toml"
    new.write_text("mine")
    result = cli("tune", FRONT, *FLAT, "-o", new)
    assert result.code == 2
    assert "--force" in result.complaint
    assert new.read_text() == "mine"


def test_keep_trade_grid_and_json(cli: Cli) -> None:
    result = cli(
        "tune", FRONT, *FLAT, "--free", "tie_rod_outer.z=-5:5", "--toward", "bump_steer over -25:25 rack 20 = 0",
        "--keep", "steer_rate", "--keep", "camber in -3:0", "--grid", "0.5", "--trade", "--starts", "2", "--json",
    )  # fmt: skip
    assert result.code == 0
    found = json.loads(result.out)
    assert len(found["after"]) == 4
    assert len(found["trade"]["weights"]) == 9
    place = found["free"][0]["present"] + found["answers"][0]["moves_mm"]["tie_rod_inner.z"]
    assert place == pytest.approx(round(2 * place) / 2, abs=1e-9)


def test_without_output_nothing_is_written(cli: Cli) -> None:
    assert "Nothing is written" in cli("tune", FRONT, *FLAT, "--starts", "1").out


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        ([], "nothing is free"),
        (["--free", "tie_rod_inner.z=-1:1"], "there is no goal"),
        (["--free", "tie_rod_inner.z=3:1", *FLAT[2:]], "lower bound first"),
        (["--free", "tie_rod.z=-1:1", *FLAT[2:]], "is not a coordinate"),
        ([*FLAT[:2], "--toward", "bump_ster over -5:5 = 0"], "did you mean 'bump_steer'"),
        ([*FLAT[:2], "--toward", "bump_steer over -900:900 = 0"], "as drawn"),
        ([*FLAT, "--starts", "0"], "--starts 0"),
        ([*FLAT, "--grid", "0"], "--grid 0"),
        ([*FLAT, "--trade"], "needs two goals"),
        ([*FLAT, "--keep", "scrub"], "no figure"),
    ],
)
def test_refusals_are_one_sentence(cli: Cli, arguments: list[str], words: str) -> None:
    result = cli("tune", FRONT, *arguments)
    assert result.code == 2
    assert words in result.complaint
