from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest
from command_line import Cli
from corners import HARDPOINTS, SAMPLES

import toewright as tw
from toewright.model.glossary import quantity

FRONT = HARDPOINTS / "marten_front.toml"
REAR = HARDPOINTS / "marten_rear.toml"
VAN = HARDPOINTS / "linnet_front.toml"
UNEQUAL = HARDPOINTS / "ibex_front.toml"


def row(text: str, label: str) -> str:
    """The first line of a table that begins with this label."""
    return next(line for line in text.splitlines() if line.strip().startswith(label))


def without(text: str, *keys: str) -> str:
    """A hardpoint file without the lines that begin with these keys."""
    return "\n".join(line for line in text.splitlines() if not line.startswith(keys))


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda p: p.stem)
def test_every_sample_passes_and_every_signed_figure_has_unit_and_sign(cli: Cli, sample: Path) -> None:
    result = cli("check", sample)
    assert result.code == 0
    for name in ("kingpin_inclination", "caster", "scrub_radius", "mechanical_trail", "transmission_angle"):
        entry = quantity(name)
        assert f"{entry.unit}, {entry.sign}" in row(result.out, entry.label)
    assert "deg/m per wheel, toe-in with bump +" in row(result.out, "bump-steer rate")
    assert "tie rod" in result.out
    assert "Remarks" in result.out


def test_toe_is_never_bare(cli: Cli) -> None:
    result = cli("check", FRONT)
    lines = result.out.splitlines()
    static = lines.index(row(result.out, "static toe"))
    assert lines[static].split()[2:] == ["-0.10", "deg", "per", "wheel,", "toe-in", "+"]
    assert lines[static + 1].split() == "as measured 0.44 out mm per wheel across the 254 mm rim".split()
    rate = lines.index(row(result.out, "bump-steer rate"))
    assert lines[rate + 1].split() == "over 25 mm of bump 0.62 in mm per wheel across the 254 mm rim".split()


@pytest.mark.parametrize(
    ("options", "words"),
    [
        (["--toe-unit", "min"], "6.0 out min of arc per wheel"),
        (["--toe-diameter", "600"], "1.05 out mm per wheel across 600 mm"),
        (["--toe-total"], "0.89 out mm total of both wheels across the 254 mm rim"),
        (["--toe-unit", "in"], "0.0175 toe-out inch per wheel across the 254 mm rim"),
    ],
)
def test_the_workshop_can_have_its_unit(cli: Cli, options: list[str], words: str) -> None:
    result = cli("check", FRONT, *options)
    assert words in " ".join(row(result.out, "as measured").split())


def test_without_a_rim_the_workshop_figure_is_in_minutes(cli: Cli, tmp_path: Path) -> None:
    file = tmp_path / "bare.toml"
    file.write_text(without(FRONT.read_text(), "rim_diameter", "other_axle"))
    assert "min of arc per wheel" in row(cli("check", file).out, "as measured")
    refused = cli("check", file, "--toe-unit", "mm")
    assert refused.code == 2
    assert "wheel.rim_diameter is missing" in refused.complaint


def test_mirror_images_get_one_column_and_unequal_sides_two(cli: Cli) -> None:
    assert "mirror images: one column" in cli("check", FRONT).out
    result = cli("check", UNEQUAL)
    assert "The sides differ" in result.out
    assert row(result.out, "design position").split()[2:4] == ["left", "right"]
    assert "434.12" in row(result.out, "upper arm, front leg")
    assert "456.26" in row(result.out, "upper arm, front leg")


def test_a_right_corner_that_mirrors_the_left_is_recognised(cli: Cli, tmp_path: Path) -> None:
    text = FRONT.read_text()
    left = text[text.index("[left]") : text.index("# What the workshop")]
    right = left.replace("[left", "[right")
    for number in ("262.0", "268.0", "528.0", "214.0", "221.0", "561.0", "228.0, 148.0", "548.0", "602.0"):
        right = right.replace(f" {number}", f" -{number}", 1)
    file = tmp_path / "both.toml"
    file.write_text(without(text, "other_axle") + "\n" + right)
    assert not tw.load(file).symmetric
    assert "mirror images: one column" in cli("check", file).out


def test_a_rear_axle_without_rack_has_no_steer_rate(cli: Cli) -> None:
    result = cli("check", REAR)
    assert "no rack (toe links)" in result.out
    assert "steer rate" not in result.out.replace("bump-steer rate", "")


@pytest.mark.parametrize(
    ("sample", "words"),
    [
        (FRONT, "68.6 mm ahead of the steering axis and 6.9 mm inboard of it"),
        (VAN, "139.5 mm behind the steering axis and 17.1 mm inboard of it"),
    ],
)
def test_the_tie_rod_is_placed_in_words(cli: Cli, sample: Path, words: str) -> None:
    assert words in cli("check", sample).out


def test_uncommon_angles_are_remarked_as_common_practice_once_for_both_sides(cli: Cli, tmp_path: Path) -> None:
    file = tmp_path / "leaning.toml"
    text = without(FRONT.read_text(), "other_axle").replace("[-9.0, 528.0, 312.0]", "[-69.0, 528.0, 312.0]")
    file.write_text(text)
    result = cli("check", file)
    assert result.code == 0
    remarks = [line for line in result.out.splitlines() if "caster" in line and line.startswith("- ")]
    assert len(remarks) == 1
    assert remarks[0].startswith("- both sides: caster +20.")
    assert "passenger cars commonly steer with +3 to +8 deg (common practice, not a rule)" in remarks[0]


def test_json_holds_the_figures_of_the_library(cli: Cli) -> None:
    result = cli("check", FRONT, UNEQUAL, "--json")
    assert result.code == 0
    documents = json.loads(result.out)
    assert [Path(d["file"]).name for d in documents] == ["marten_front.toml", "ibex_front.toml"]
    assert [d["mirror_images"] for d in documents] == [True, False]
    for document, path in zip(documents, (FRONT, UNEQUAL), strict=True):
        axle = tw.load(path)
        pose = tw.design_pose(axle)
        assert document["sha256"] == axle.sha256
        for s, corner in enumerate(document["corners"]):
            assert corner["side"] == ("left", "right")[s]
            for name in ("caster", "scrub_radius", "bump_steer_rate", "steer_rate", "camber_gain"):
                assert corner[name] == pose[name][s, 0, 0]
            points = axle.corner(corner["side"]).points
            rod = np.linalg.norm(points["tie_rod_outer"] - points["tie_rod_inner"])
            assert corner["lengths_mm"]["tie rod"] == pytest.approx(rod, abs=1e-12)
        assert document["quantities"]["caster"] == {"unit": "deg", "sign": "top rearward +"}


def test_all_files_are_checked_and_one_at_fault_makes_it_2(cli: Cli, tmp_path: Path) -> None:
    missing, broken = tmp_path / "missing.toml", tmp_path / "broken.toml"
    broken.write_text("schema = \n")
    result = cli("check", missing, FRONT, broken)
    assert result.code == 2
    assert "Marten 04, front axle" in result.out
    complaints = result.err.splitlines()
    assert len(complaints) == 2
    assert all(c.startswith(f"toewright: {p}: ") for c, p in zip(complaints, (missing, broken), strict=True))
    documents = json.loads(cli("check", missing, FRONT, "--json").out)
    assert "there is no such file" in documents[0]["error"]
    assert "corners" in documents[1]


def test_a_linkage_that_is_locked_as_drawn_is_refused(cli: Cli, tmp_path: Path) -> None:
    """The inner joint on the line through the outer one and the steering axis, level with the arm: tie rod and arm in line."""
    axle = tw.load(FRONT)
    points = axle.left.points
    lower, upper, outer = (points[n] for n in ("lower_ball_joint", "upper_ball_joint", "tie_rod_outer"))
    axis = (upper - lower) / np.linalg.norm(upper - lower)
    foot = lower + axis * ((outer - lower) @ axis)
    inner = outer + (foot - outer) * 3.0
    file = tmp_path / "locked.toml"
    text = without(FRONT.read_text(), "other_axle").replace("[62.0, 228.0, 148.0]", str([float(v) for v in inner]))
    file.write_text(text)
    for arguments in (["check", file], ["sweep", file]):
        result = cli(*arguments)
        assert result.code == 2
        assert str(file) in result.complaint


def test_explain_defines_what_is_shown(cli: Cli) -> None:
    text = " ".join(cli("check", FRONT, "--explain").out.split())
    assert "Definitions" in text
    assert "kingpin offset at ground" in text
    assert "d toe_in / d wheel_travel at fixed rack" in text


def test_brackets_in_a_title_are_shown_as_they_are(cli: Cli, tmp_path: Path) -> None:
    file = tmp_path / "title.toml"
    text = without(FRONT.read_text(), "other_axle").replace("Marten 04, front axle", "[bold red]Marten[/] :smile:")
    file.write_text(text)
    assert "[bold red]Marten[/] :smile:" in cli("check", file).out
    assert "[bold red]Marten[/] :smile:" in cli("sweep", file).out
