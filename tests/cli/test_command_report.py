from __future__ import annotations

from pathlib import Path

import pytest
from command_line import Cli
from corners import HARDPOINTS

from toewright.views.browser import find_browser

REAR = HARDPOINTS / "marten_rear.toml"
VAN = HARDPOINTS / "linnet_front.toml"


def test_the_page_gets_the_name_asked_for_or_that_of_the_file(
    cli: Cli, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(tmp_path)
    result = cli("report", REAR)
    assert result.code == 0
    assert result.out == ""
    assert "wrote marten_rear_report.html" in result.err
    assert cli("report", REAR, "--against", VAN, "-o", "review.html").code == 0
    assert sorted(p.name for p in tmp_path.iterdir()) == ["marten_rear_report.html", "review.html"]
    assert "Linnet delivery van" in (tmp_path / "review.html").read_text(encoding="utf-8")


def test_refusals_are_one_sentence_and_write_nothing(cli: Cli, tmp_path: Path) -> None:
    there = tmp_path / "there.html"
    there.write_text("mine", encoding="utf-8")
    assert "use .html or .htm" in cli("report", REAR, "-o", tmp_path / "r.doc").complaint
    assert "exists already" in cli("report", REAR, "-o", there).complaint
    assert "there is no such file" in cli("report", tmp_path / "none.toml", "-o", tmp_path / "r.html").complaint
    assert (
        "there is no such file"
        in cli("report", REAR, "--against", tmp_path / "x.toml", "-o", tmp_path / "r.html").complaint
    )
    assert there.read_text(encoding="utf-8") == "mine"
    assert [p.name for p in tmp_path.iterdir()] == ["there.html"]
    assert cli("report", REAR, "-o", there, "--force").code == 0
    assert there.read_text(encoding="utf-8").startswith("<!DOCTYPE html>")


def test_pdf_without_a_browser_is_refused_before_any_work(
    cli: Cli, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("PATH", str(tmp_path))
    complaint = cli("report", REAR, "-o", tmp_path / "r.html", "--pdf").complaint
    assert "printing needs Chromium" in complaint
    assert "apt install chromium" in complaint
    assert list(tmp_path.iterdir()) == []


@pytest.mark.skipif(find_browser() is None, reason="no Chromium on this machine")
def test_pdf_stands_beside_the_page(cli: Cli, tmp_path: Path) -> None:
    (tmp_path / "taken.pdf").write_text("mine", encoding="utf-8")
    assert "taken.pdf: exists already" in cli("report", REAR, "-o", tmp_path / "taken.html", "--pdf").complaint
    assert cli("report", REAR, "-o", tmp_path / "r.html", "--pdf").code == 0
    assert (tmp_path / "r.pdf").read_bytes().startswith(b"%PDF")
