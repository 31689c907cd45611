from __future__ import annotations

import csv
import json
from pathlib import Path

import pytest
from command_line import Cli
from corners import HARDPOINTS

FRONT = HARDPOINTS / "marten_front.toml"
FEW = ("--builds", "2000")


def test_bands_shares_picture_and_files(cli: Cli, tmp_path: Path) -> None:
    result = cli("tolerance", FRONT, *FEW, "--plot", tmp_path / "t.png", "--out", tmp_path / "t.csv")
    assert result.code == 0
    for words in (
        "2,000 builds asked for",
        "seed 1",
        "5, 50 and 95 %",
        "What makes the spread",
        "shared rack_height",
        "no [targets]",
    ):
        assert words in result.out
    rows = list(csv.reader((tmp_path / "t.csv").read_text().splitlines()))
    assert rows[0][:3] == ["wheel", "wheel_travel", "drawn"]
    assert len(rows) == 1 + 3 * 21
    assert (tmp_path / "t.png").read_bytes().startswith(b"\x89PNG")


def test_yields_of_targets(cli: Cli, tmp_path: Path) -> None:
    (tmp_path / "marten_rear.toml").write_text((HARDPOINTS / "marten_rear.toml").read_text())
    car = tmp_path / "car.toml"
    car.write_text(f"{FRONT.read_text()}\n[targets]\nbump_steer = {{over_travel = [-20, 20], within = 0.12}}\n")
    result = cli("tolerance", car, *FEW)
    assert "Yield of the file's targets" in result.out
    found = json.loads(cli("tolerance", car, *FEW, "--json", "--out", tmp_path / "t.nc").out)
    target = found["targets"][0]
    assert target["yield_95_percent_interval"][0] < target["yield"] < target["yield_95_percent_interval"][1]


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        ([HARDPOINTS / "linnet_front.toml"], "has no [tolerance]"),
        ([FRONT, "--builds", "2"], "builds 2"),
        ([FRONT, "--seed", "-1"], "--seed -1"),
        ([FRONT, "--plot", "x.bmp"], "is unknown"),
        ([FRONT, *FEW, "--travel", "900"], "no build reaches"),
    ],
)
def test_refusals_are_one_sentence(cli: Cli, arguments: list[str], words: str) -> None:
    result = cli("tolerance", *arguments)
    assert result.code == 2
    assert words in result.complaint
