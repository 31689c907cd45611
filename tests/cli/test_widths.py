"""Tables on a terminal of 80 columns: no number is cut, and lines stay within the width where the tool's own samples are shown."""

from __future__ import annotations

import os
from pathlib import Path

import pytest
from command_line import Cli
from corners import HARDPOINTS, SAMPLES

from toewright_cli.console import print_table

WIDTH = 80
UNITS = ("deg", "mm", "in", "min")
FRONT = HARDPOINTS / "marten_front.toml"


def tables_of(text: str) -> list[str]:
    """The lines of tables: those that begin with a space and are no sentence about a file."""
    return [line for line in text.splitlines() if line.startswith(" ") and ".toml: " not in line]


@pytest.fixture
def narrow(cli: Cli, monkeypatch: pytest.MonkeyPatch) -> Cli:
    """The command line on 80 columns."""
    monkeypatch.setitem(os.environ, "COLUMNS", str(WIDTH))
    return cli


@pytest.mark.parametrize("unit", UNITS)
@pytest.mark.parametrize("sample", SAMPLES, ids=lambda p: p.stem)
def test_toe_tables_fit_in_every_unit(narrow: Cli, sample: Path, unit: str) -> None:
    for arguments in (["sweep", sample], ["sweep", sample, "--toe-total"], ["ride", sample]):
        result = narrow(*arguments, "--toe-unit", unit)
        assert result.code == 0, result.err
        lines = tables_of(result.out)
        assert len(lines) > 10
        for line in lines:
            assert "…" not in line
            assert len(line) <= WIDTH, line


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda p: p.stem)
def test_other_tables_fit(narrow: Cli, sample: Path) -> None:
    commands = [["check", sample], ["sensitivity", sample], ["compare", sample, FRONT]]
    if "rear" not in sample.stem:
        commands.append(["turn", sample])
    for arguments in commands:
        result = narrow(*arguments)
        assert result.code in (0, 1), result.err
        for line in tables_of(result.out):
            assert "…" not in line
            assert len(line) <= WIDTH, line


def test_a_column_to_spare_is_left_out_by_name(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.setenv("COLUMNS", "24")
    headings, rows = ["rack\nmm", "spare one\nmm", "toe\ndeg"], [["+10.123456", "+77.123456", "0.123456 in"]]
    print_table(headings, rows, right=range(3), spare=[1])
    text = capsys.readouterr().out
    assert "77" not in text
    assert "+10.123456" in text
    assert "0.123456 in" in text
    assert "spare one mm" in text  # said in the line below the table
    print_table(headings, rows, right=range(3))  # nothing to spare: longer lines rather than cut numbers
    text = capsys.readouterr().out
    assert "+10.123456" in text
    assert "+77.123456" in text
    assert "…" not in text
    assert "Left out" not in text
    monkeypatch.setenv("COLUMNS", "60")
    print_table(headings, rows, right=range(3), spare=[1])
    text = capsys.readouterr().out
    assert "+77.123456" in text
    assert "Left out" not in text
