from __future__ import annotations

import csv
import json
from pathlib import Path

import pytest
import xarray as xr
from command_line import Cli
from corners import HARDPOINTS, SAMPLES

FRONT = HARDPOINTS / "marten_front.toml"
ONE = ("--figure", "bump_steer travel 25")


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda p: p.stem)
def test_every_sample_ranks_its_points(cli: Cli, sample: Path) -> None:
    result = cli("sensitivity", sample, "--top", "3")
    assert result.code == 0
    for words in ("bump steer at wheel travel", "deg per mm", "change at", "verify on the vehicle"):
        assert words in result.out


def test_files_and_picture(cli: Cli, tmp_path: Path) -> None:
    result = cli("sensitivity", FRONT, *ONE, "--plot", tmp_path / "s.svg", "--out", tmp_path / "s.csv")
    assert result.code == 0
    rows = list(csv.reader((tmp_path / "s.csv").read_text().splitlines()))
    assert rows[0][:5] == ["figure", "unit", "present", "coordinate", "slope_per_mm"]
    assert len(rows) == 1 + 27
    assert "<svg" in (tmp_path / "s.svg").read_text()
    assert cli("sensitivity", FRONT, *ONE, "--out", tmp_path / "s.nc").code == 0
    with xr.open_dataset(tmp_path / "s.nc", engine="scipy") as data:
        assert data["slope"].shape == (1, 27)


def test_json_and_as_built(cli: Cli) -> None:
    found = json.loads(cli("sensitivity", FRONT, *ONE, "--as-built", "--json").out)
    assert found["as_built"] is True
    assert found["figures"][0]["ranked"][0] in ("tie_rod_inner.z", "tie_rod_outer.z")


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (["--figure", "bump_steer over -5:5"], "several places"),
        (["--figure", "bumpsteer"], "did you mean"),
        (["--range", "0"], "above 0"),
        (["--top", "0"], "--top 0"),
        (["--as-built", "--figure", "roll_centre_z"], "no figure of one wheel"),
        (["--plot", "x.tiff"], "is unknown"),
    ],
)
def test_refusals_are_one_sentence(cli: Cli, arguments: list[str], words: str) -> None:
    result = cli("sensitivity", FRONT, *arguments)
    assert result.code == 2
    assert words in result.complaint
