from __future__ import annotations

import csv
import json
from pathlib import Path

import pytest
from command_line import Cli
from corners import HARDPOINTS

FRONT = HARDPOINTS / "marten_front.toml"


def test_tables_cautions_and_sheet(cli: Cli, tmp_path: Path) -> None:
    result = cli("shims", FRONT, "--sheet", tmp_path / "sheet.html", "--out", tmp_path / "table.csv")
    assert result.code == 0
    for words in (
        "rack_height: ",
        "toe_turns: ",
        "Least bump steer in this table",
        "Steering can kill",
        "mm per wheel across the 254 mm rim",
    ):
        assert words in result.out
    rows = list(csv.reader((tmp_path / "table.csv").read_text().splitlines()))
    assert rows[0][:4] == ["adjuster", "adjustment", "status", "toe_before"]
    assert len(rows) == 1 + 4 * 7
    assert "Workshop table: Marten 04, front axle" in (tmp_path / "sheet.html").read_text()


def test_json_and_netcdf(cli: Cli, tmp_path: Path) -> None:
    found = json.loads(cli("shims", FRONT, "--json", "--out", tmp_path / "t.nc").out)
    assert found["adjusters"][0]["unit"] == "mm"
    assert len(found["bump_steer_most"]) == 28
    assert found["cautions"]


@pytest.mark.parametrize("width", [80, 100])
def test_tables_keep_to_the_width(cli: Cli, monkeypatch: pytest.MonkeyPatch, width: int) -> None:
    monkeypatch.setenv("COLUMNS", str(width))
    lines = [line for line in cli("shims", FRONT, "--toe-unit", "deg").out.splitlines() if line.startswith(" ")]
    assert max(map(len, lines)) <= width
    assert not any("…" in line for line in lines)


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        ([HARDPOINTS / "linnet_front.toml"], "has no [adjusters]"),
        ([FRONT, "--ride-height", "900"], "ride height"),
        ([FRONT, "--sheet", "x.doc"], "is unknown"),
        ([FRONT, "--travel", "3,1"], "does not ascend"),
    ],
)
def test_refusals_are_one_sentence(cli: Cli, arguments: list[str], words: str) -> None:
    result = cli("shims", *arguments)
    assert result.code == 2
    assert words in result.complaint


def test_sheet_as_pdf(cli: Cli, tmp_path: Path) -> None:
    from toewright.views.browser import find_browser

    if find_browser() is None:
        pytest.skip("no Chromium on this machine")
    assert cli("shims", FRONT, "--sheet", tmp_path / "sheet.pdf").code == 0
    assert (tmp_path / "sheet.pdf").read_bytes().startswith(b"%PDF")
