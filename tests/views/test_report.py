from __future__ import annotations

import base64
import dataclasses
import json
import re
import subprocess
import tomllib
from datetime import UTC, datetime
from functools import cache
from html.parser import HTMLParser
from pathlib import Path

import numpy as np
import pytest
from corners import HARDPOINTS, SAMPLES
from PIL import Image

import toewright as tw
from toewright.model.axle import Axle
from toewright.views.browser import MISSING, browser_command, find_browser, print_pdf
from toewright.views.report import CAUTIONS, section_count, source_text, write_report

FRONT = HARDPOINTS / "marten_front.toml"
MOMENT = datetime(2026, 3, 4, 5, 6, tzinfo=UTC)
HOSTILE = '</title><script>alert(1)</script><img src="http://evil.invalid/x.png" onerror="alert(2)">&amp; {{ 7 * 7 }}'
TARGETS = """
[targets]
bump_steer = {over_travel = [-25, 25], within = 0.05}
scrub_radius = {between = [10, 30]}
"""

needs_browser = pytest.mark.skipif(find_browser() is None, reason="no Chromium on this machine")


class Page(HTMLParser):
    """Tags with attributes in order, and the text of each element."""

    VOID = frozenset({"meta", "link", "img", "br"})

    def __init__(self, text: str) -> None:
        super().__init__()
        self.tags: list[tuple[str, dict[str, str | None]]] = []
        self.open: list[str] = []
        self.text: dict[str, list[str]] = {}
        self.feed(text)
        self.close()
        assert self.open == []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.append((tag, dict(attrs)))
        if tag not in self.VOID:
            self.open.append(tag)

    def handle_endtag(self, tag: str) -> None:
        assert self.open.pop() == tag

    def handle_data(self, data: str) -> None:
        if self.open:
            self.text.setdefault(self.open[-1], []).append(data)

    def all(self, tag: str) -> list[dict[str, str | None]]:
        return [attributes for name, attributes in self.tags if name == tag]


@cache
def report(name: str, against: str | None = None) -> str:
    other = None if against is None else tw.load(HARDPOINTS / against)
    return write_report(tw.load(HARDPOINTS / name), against=other, made=MOMENT)


@pytest.fixture(scope="session")
def hostile_axle(tmp_path_factory: pytest.TempPathFactory) -> Axle:
    """A file whose title, comments and targets' table try to become markup."""
    text = FRONT.read_text(encoding="utf-8").replace('"Marten 04, front axle"', json.dumps(HOSTILE))
    path = tmp_path_factory.mktemp("hostile") / "hostile.toml"
    path.write_text(text + "# </pre><script>alert(3)</script> --> \u202e\n" + TARGETS, encoding="utf-8")
    return tw.load(path)


@pytest.fixture(scope="session")
def hostile_page(hostile_axle: Axle) -> str:
    return write_report(hostile_axle, against=hostile_axle, made=MOMENT)


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda p: p.stem)
def test_every_sample_gives_one_whole_page_below_three_megabytes(sample: Path) -> None:
    text = report(sample.name, FRONT.name if sample.stem == "ibex_front" else None)
    page = Page(text)
    assert len(text.encode()) < 3_000_000
    assert text.startswith("<!DOCTYPE html>")
    titles = page.text["h2"]
    for title in ("Cautions", "At a glance", "The job", "Hardpoints", "The linkage", "Design position", "Bump steer"):
        assert title in titles
    for title in ("Bump and roll", "Turning", "Limits", "Plausibility", "Targets", "Where the numbers come from"):
        assert title in titles
    axle = tw.load(sample)
    assert axle.sha256 is not None
    assert axle.sha256 in text
    assert "2026-03-04 05:06 UTC" in text
    assert f"toewright {tw.__version__}" in text
    for caution in CAUTIONS:
        assert caution in page.text["li"]


def test_nothing_is_fetched_and_nothing_runs() -> None:
    page = Page(report("ibex_front.toml", "marten_front.toml"))
    assert {tag for tag, _ in page.tags}.isdisjoint({"script", "iframe", "object", "embed", "form", "base"})
    for tag, attributes in page.tags:
        for name, value in attributes.items():
            assert not name.startswith("on")
            if name in ("src", "srcset", "href"):
                assert (value or "").startswith(("data:", "#")), (tag, value)
    assert not re.search(r"url\(|@import", "".join(page.text["style"]))
    policy = next(a["content"] for a in page.all("meta") if a.get("http-equiv") == "Content-Security-Policy")
    assert (policy or "").startswith("default-src 'none'")


def test_it_can_be_read_without_seeing_it() -> None:
    page = Page(report("ibex_front.toml", "marten_front.toml"))
    assert page.all("html")[0]["lang"] == "en"
    images = page.all("img")
    assert len(images) >= 5
    assert all(len(image["alt"] or "") > 60 for image in images)
    assert all(cell["scope"] in ("col", "row") for cell in page.all("th"))
    assert len(page.all("caption")) == len(page.all("table")) >= 8
    for landmark in ("header", "nav", "main", "footer"):
        assert len(page.all(landmark)) == 1
    ids = [attributes["id"] for _, attributes in page.tags if "id" in attributes]
    assert len(ids) == len(set(ids))
    for link in page.all("a"):
        assert (link["href"] or "").removeprefix("#") in ids
    assert page.all("a")[0]["href"] == "#content"
    for section in page.all("section"):
        assert section["aria-labelledby"] in ids
    assert all(region["tabindex"] == "0" for region in page.all("div") if region.get("role") == "region")


def test_tables_hold_the_solved_numbers() -> None:
    page = Page(report("marten_front.toml"))
    cells = [cell.replace("\u00a0", " ") for cell in page.text["td"]]
    axle = tw.load(FRONT)
    bump = tw.sweep(axle, [0.0], [25.0])["bump_steer"][0, 0, 0]
    assert f"{bump:.3f} in" in cells
    assert f"{254.0 * np.sin(np.radians(bump)):.2f} in" in cells
    turned = tw.turn(axle, [30.0])
    assert f"{turned['ackermann_error'][0]:+.2f}" in cells
    assert f"{tw.ride(axle, ['bump'], travel=[25.0])['roll_centre_z'][0]:+.1f}" in cells
    assert "548.00" in cells
    headings = [heading.replace("\u00a0", " ") for heading in page.text["th"]]
    assert "bump steer, left (deg per wheel, toe-in +)" in headings
    assert "Ackermann error (deg, inner wheel turns too much +)" in headings


def test_what_changed_is_told_against_another_file() -> None:
    text = report("ibex_front.toml", "marten_front.toml")
    page = Page(text)
    assert "What changed" in page.text["h2"]
    assert "A is Marten 04, front axle (marten_front.toml), B is this report's file." in text.replace("&#39;", "'")
    assert "What changed" not in Page(report("marten_front.toml")).text["h2"]
    assert (tw.load(FRONT).sha256 or "?") in text


def test_titles_and_comments_never_become_markup(hostile_page: str) -> None:
    text = hostile_page
    page = Page(text)
    assert page.all("script") == []
    assert all((image["src"] or "").startswith("data:image/") for image in page.all("img"))
    shown = " ".join(HOSTILE.split())
    assert shown in page.text["h1"]
    assert page.text["title"] == [f"{shown}: steering geometry"]
    assert "alert(3)" in "".join(page.text["pre"])
    assert "\u202e" not in text
    for image in page.all("img"):
        kind, data = (image["src"] or "").split(",", 1)
        if "svg" in kind:
            assert "<script" not in base64.b64decode(data).decode()


def test_targets_are_shown_with_the_worst_place(hostile_page: str) -> None:
    page = Page(hostile_page)
    assert page.text["td"].count("kept") == 1
    assert page.text["td"].count("MISSED") == 1
    assert "Targets: 1 of 2 kept." in page.text["li"]
    bad = dataclasses.replace(tw.load(FRONT), extra=tomllib.loads("[targets]\nscrub = {within = 1}"))
    with pytest.raises(tw.InputError, match=r"targets\.scrub"):
        write_report(bad)


def test_every_step_is_counted_and_the_same_input_gives_the_same_page() -> None:
    steps: list[int] = []
    text = write_report(tw.load(HARDPOINTS / "marten_rear.toml"), made=MOMENT, step=steps.append)
    assert sum(steps) == section_count()
    assert text == report("marten_rear.toml")


def test_an_axle_made_in_memory_shows_no_source() -> None:
    axle = dataclasses.replace(tw.load(HARDPOINTS / "marten_rear.toml"), path=None, sha256=None)
    text = write_report(axle, made=MOMENT)
    assert "made in memory" in text
    assert "<pre" not in text


def test_a_file_that_changed_since_it_was_read_is_not_shown(tmp_path: Path) -> None:
    copy = tmp_path / "copy.toml"
    copy.write_bytes(FRONT.read_bytes())
    axle = tw.load(copy)
    assert source_text(axle) == FRONT.read_text(encoding="utf-8")
    copy.write_text("other", encoding="utf-8")
    assert source_text(axle) is None
    copy.unlink()
    assert source_text(axle) is None


def browse(page: Path, folder: Path, *flags: str) -> tuple[list[str], list[str], Image.Image]:
    """Console lines, addresses that the page asked for, and the screenshot."""
    browser = find_browser()
    assert browser is not None
    log, shot = folder / "net.json", folder / "shot.png"
    command = browser_command(browser, str(folder / "profile"))
    command += [
        *flags,
        "--enable-logging=stderr",
        "--hide-scrollbars",
        "--window-size=1000,5000",
        f"--log-net-log={log}",
        f"--screenshot={shot}",
        page.as_uri(),
    ]
    done = subprocess.run(command, capture_output=True, text=True, check=True, timeout=120)
    console = [line for line in done.stderr.splitlines() if ":CONSOLE" in line]
    text = log.read_text(encoding="utf-8")
    events = json.loads(text if text.rstrip().endswith("}") else text.rstrip().rstrip(",") + "]}")["events"]
    asked = [
        event["params"]["url"]
        for event in events
        if str(event.get("params", {}).get("url", "")).startswith("http")
        and event["params"].get("initiator", "not an origin") != "not an origin"
    ]
    with Image.open(shot) as picture:
        return console, asked, picture.convert("RGB")


@needs_browser
@pytest.mark.parametrize("dark", [False, True], ids=["light", "dark"])
def test_in_a_browser_there_is_no_error_and_no_request_leaves(hostile_page: str, tmp_path: Path, dark: bool) -> None:
    page = tmp_path / "report.html"
    page.write_text(hostile_page, encoding="utf-8")
    flags = ["--blink-settings=preferredColorScheme=0"] if dark else []
    console, asked, picture = browse(page, tmp_path, *flags)
    assert console == []
    assert asked == []
    pixels = np.asarray(picture, dtype=float).mean(axis=2)
    corner = pixels[5, 5]
    assert (corner < 40.0) if dark else (corner > 250.0)
    different = np.abs(pixels - corner) > 40.0
    assert 0.02 < different.mean() < 0.6
    thirds = np.array_split(different, 3)
    assert all(part.mean() > 0.01 for part in thirds)


@needs_browser
def test_the_browser_check_would_see_an_error_and_a_request(tmp_path: Path) -> None:
    page = tmp_path / "bad.html"
    page.write_text(
        '<!DOCTYPE html><title>bad</title><img src="http://evil.invalid/x.png"><script>console.error("seen")</script>',
        encoding="utf-8",
    )
    console, asked, _ = browse(page, tmp_path)
    assert any("seen" in line for line in console)
    assert asked == ["http://evil.invalid/x.png"]


@needs_browser
def test_it_prints(tmp_path: Path) -> None:
    page = tmp_path / "report.html"
    page.write_text(report("marten_front.toml"), encoding="utf-8")
    print_pdf(page, tmp_path / "report.pdf")
    pdf = (tmp_path / "report.pdf").read_bytes()
    assert pdf.startswith(b"%PDF")
    boxes = {tuple(map(float, box.split())) for box in re.findall(rb"/MediaBox \[([^\]]+)\]", pdf)}
    assert boxes
    for _, _, width, height in boxes:
        assert width == pytest.approx(595.0, abs=2.0)
        assert height == pytest.approx(842.0, abs=2.0)
    assert 6 <= len(re.findall(rb"/Type /Page\b", pdf)) <= 16
    assert sorted(p.name for p in tmp_path.iterdir()) == ["report.html", "report.pdf"]


def test_without_a_browser_one_sentence_says_what_to_do(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    monkeypatch.setenv("PATH", str(tmp_path))
    assert find_browser() is None
    with pytest.raises(tw.InputError) as caught:
        print_pdf(tmp_path / "report.html", tmp_path / "report.pdf")
    assert str(caught.value) == MISSING
    assert list(tmp_path.iterdir()) == []


def test_a_browser_that_fails_leaves_nothing(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    program = tmp_path / "chromium"
    program.write_text("#!/bin/sh\nexit 3\n")
    program.chmod(0o755)
    monkeypatch.setenv("PATH", f"{tmp_path}:/usr/bin:/bin")
    with pytest.raises(tw.InputError, match=r"could not print the page \(code 3\)"):
        print_pdf(tmp_path / "report.html", tmp_path / "report.pdf")
    assert [p.name for p in tmp_path.iterdir()] == ["chromium"]
