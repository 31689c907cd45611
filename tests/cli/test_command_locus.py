from __future__ import annotations

import csv
import json
from pathlib import Path

import pytest
from command_line import Cli
from corners import HARDPOINTS, SAMPLES

FRONT = HARDPOINTS / "marten_front.toml"


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda p: p.stem)
def test_every_sample_has_a_locus(cli: Cli, sample: Path) -> None:
    result = cli("locus", sample, "--side", "right")
    assert result.code == 0
    for words in (
        "Now, at x = ",
        "deg per wheel",
        "all centres lie on a line",
        "Best z for each y",
        "tighten, and measure",
    ):
        assert words in result.out


def test_files_and_picture(cli: Cli, tmp_path: Path) -> None:
    result = cli(
        "locus", FRONT, "--rack", "0,20", "--plane", "top", "--out", tmp_path / "a.csv", "--plot", tmp_path / "a.png"
    )
    assert result.code == 0
    rows = list(csv.reader((tmp_path / "a.csv").read_text().splitlines()))
    assert rows[0] == ["tie_rod_inner_y", "tie_rod_inner_x", "bump_steer_most_rack_0", "bump_steer_most_rack_20"]
    assert len(rows) == 1 + 61 * 61
    assert (tmp_path / "a.png").read_bytes().startswith(b"\x89PNG")
    assert cli("locus", FRONT, "--out", tmp_path / "a.nc").code == 0
    assert json.loads(cli("locus", FRONT, "--json").out)["limit_deg"] == 0.05


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (["--limit", "0"], "above 0"),
        (["--reach", "-3"], "above 0"),
        (["--plot", "x.bmp"], "is unknown"),
        (["--travel", "400"], "can't be held"),
        (["--rack", "2,1"], "does not ascend"),
        (["--plane", "side"], "front"),
    ],
)
def test_refusals_are_one_sentence(cli: Cli, arguments: list[str], words: str) -> None:
    result = cli("locus", FRONT, *arguments)
    assert result.code == 2
    assert words in result.complaint
