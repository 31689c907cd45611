from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from command_line import Cli
from corners import HARDPOINTS, PLAIN, SAMPLES

from toewright.model import load, points_to_csv

MARTEN = load(HARDPOINTS / "marten_front.toml")
IBEX = load(HARDPOINTS / "ibex_front.toml")


def arm_table(mark: str = ";", comma: bool = True, words: str = "") -> str:
    """The left corner of the small car as a measuring arm gives it: x right, y forward, z up from a bench, in inches."""
    lines = [mark.join(("Point", "X [in]", "Y [in]", "Z [in]"))]
    for name, (x, y, z) in MARTEN.left.points.items():
        numbers = (repr(float(v) / 25.4) for v in (-y, x, z - 310.0))
        label = words + name.replace("_", " ")
        lines.append(mark.join([label, *(n.replace(".", ",") if comma else n for n in numbers)]))
    return "\n".join(lines) + "\n"


def assert_marten(path: Path) -> None:
    axle = load(path)
    assert axle.symmetric
    for name, point in MARTEN.left.points.items():
        np.testing.assert_array_equal(axle.left.points[name], point)


def test_whole_options(cli: Cli, tmp_path: Path) -> None:
    table, out = tmp_path / "arm.csv", tmp_path / "car.toml"
    table.write_text(arm_table())
    made = cli(
        "import", table, "-o", out, "--loaded-radius", 228, "--unit", "in", "--axes=y,-x,z", f"--origin=0,0,{-310 / 25.4!r}",
        "--side", "left", "--type", "double-wishbone", "--stroke", 30, "--wheelbase", 1550, "--toe-in=-0.1", "--camber=-1.5",
        "--title", "Marten by arm", "--axle", "front",
    )  # fmt: skip
    assert (made.code, made.err) == (0, "")
    assert_marten(out)
    axle = load(out)
    assert axle.rack is not None
    assert (axle.rack.stroke, axle.vehicle.wheelbase, axle.title) == (30.0, 1550.0, "Marten by arm")
    assert (axle.setup.toe_in, axle.setup.camber, axle.wheel.loaded_radius) == (-0.1, -1.5, 228.0)
    assert "Nothing had to be concluded" in made.out
    assert "Axes y,-x,z, unit in, the car's origin at 0, 0, -12.2047 in the table." in made.out
    assert max(len(line) for line in made.out.splitlines() if "─" in line or "mm" in line) <= 100
    assert "ODD" not in made.out
    assert cli("check", out).code == 0


def test_concluded_from_header_names_and_origin(cli: Cli, tmp_path: Path) -> None:
    table, out = tmp_path / "arm.csv", tmp_path / "car.toml"
    table.write_text(arm_table(",", comma=False, words="Left "))
    made = cli("import", table, "-o", out, "--loaded-radius", 228, "--origin=under-wheel")
    assert made.code == 0, made.err
    assert_marten(out)
    concluded = next(line for line in made.out.splitlines() if line.startswith("Concluded: "))
    for part in ("axes y,-x,z", "unit in (from the header)", "side left (from the names)", "type double-wishbone"):
        assert part in concluded
    assert "left corner, double-wishbone" in made.out
    assert "no [rack]" in made.out


def test_both_sides(cli: Cli, tmp_path: Path) -> None:
    table, out = tmp_path / "ibex.csv", tmp_path / "car.toml"
    table.write_text(points_to_csv(IBEX))
    made = cli("import", table, "-o", out, "--loaded-radius", 395)
    assert made.code == 0, made.err
    left, right = tmp_path / "l.csv", tmp_path / "r.csv"
    left.write_text(points_to_csv(IBEX, "left"))
    right.write_text(points_to_csv(IBEX, "right"))
    two = cli(
        "import", left, "--right", right, "-o", tmp_path / "two.toml", "--loaded-radius", 395, "--axes", "iso-8855"
    )
    assert two.code == 0, two.err
    for path in (out, tmp_path / "two.toml"):
        axle = load(path)
        assert not axle.symmetric
        for side in ("left", "right"):
            for name, point in IBEX.corner(side).points.items():
                np.testing.assert_array_equal(axle.corner(side).points[name], point)
    assert "centre plane midway between the wheels" in made.out
    assert "left corner, double-wishbone" in two.out
    assert "right corner, double-wishbone" in two.out


def test_right_corner_is_mirrored_and_said(cli: Cli, tmp_path: Path) -> None:
    table, out = tmp_path / "r.csv", tmp_path / "car.toml"
    table.write_text(points_to_csv(MARTEN, "right"))
    made = cli("import", table, "-o", out, "--loaded-radius", 228, "--side", "right")
    assert made.code == 0
    assert_marten(out)
    assert "mirror image" in made.out


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda path: path.stem)
def test_points_of_every_sample_come_back(cli: Cli, tmp_path: Path, sample: Path) -> None:
    axle = load(sample)
    table, out = tmp_path / "points.csv", tmp_path / "car.toml"
    table.write_text(points_to_csv(axle))
    assert cli("import", table, "-o", out, "--loaded-radius", axle.wheel.loaded_radius).code == 0
    for side in ("left", "right"):
        for name, point in axle.corner(side).points.items():
            np.testing.assert_array_equal(load(out).corner(side).points[name], point)


def test_name_maps(cli: Cli, tmp_path: Path) -> None:
    table, out, names = tmp_path / "arm.csv", tmp_path / "car.toml", tmp_path / "names.toml"
    table.write_text(points_to_csv(MARTEN, "left").replace("wheel_centre", "hub").replace("upper_ball_joint", "P 1"))
    names.write_text('"P 1" = "upper_ball_joint"\n')
    common = ("import", table, "-o", out, "--loaded-radius", 228, "--side", "left")
    refused = cli(*common)
    assert refused.code == 2
    assert "upper_ball_joint, wheel_centre not found" in refused.complaint
    assert not out.exists()
    made = cli(*common, "--names", "hub=wheel_centre", "--names", names)
    assert made.code == 0, made.err
    assert "By --names: 'P 1' is upper_ball_joint, 'hub' is wheel_centre." in made.out
    assert_marten(out)


def test_corner_letters_give_side_and_axle(cli: Cli, tmp_path: Path) -> None:
    table, out = tmp_path / "car.csv", tmp_path / "car.toml"
    rows = [f"{word} {name},{x!r},{y!r},{z!r}" for word, side in (("RL", "left"), ("RR", "right")) for name, (x, y, z) in
            ((n, map(float, p)) for n, p in IBEX.corner(side).points.items())]  # fmt: skip
    table.write_text("\n".join(["name,x [mm],y [mm],z [mm]", *rows]) + "\n")
    refused = cli("import", table, "-o", out, "--loaded-radius", 395, "--axle", "front")
    assert refused.code == 2
    assert "--axle front: but the names say rear" in refused.complaint
    assert not out.exists()
    made = cli("import", table, "-o", out, "--loaded-radius", 395)
    assert made.code == 0, made.err
    assert "Concluded: rear axle (from the names)." in made.out
    axle = load(out)
    assert axle.vehicle.axle == "rear"
    for side in ("left", "right"):
        for name, point in IBEX.corner(side).points.items():
            np.testing.assert_array_equal(axle.corner(side).points[name], point)


def test_heights_from_the_radius_are_said(cli: Cli, tmp_path: Path) -> None:
    table, out = tmp_path / "arm.csv", tmp_path / "car.toml"
    table.write_text(arm_table())
    made = cli("import", table, "-o", out, "--loaded-radius", 228, "--side", "left", "--origin", "under-wheel")
    assert made.code == 0, made.err
    assert "the road was put 228 mm below the wheel centre, so the points are taken to be at ride height" in made.out


def test_title_lines_above_the_header_are_named(cli: Cli, tmp_path: Path) -> None:
    table, out = tmp_path / "arm.csv", tmp_path / "car.toml"
    table.write_text("Front suspension\nrevision B\n" + points_to_csv(MARTEN, "left"))
    refused = cli("import", table, "-o", out, "--loaded-radius", 228)
    assert refused.code == 2
    assert "line 1" in refused.complaint
    assert "remove title lines above the header" in refused.complaint


def test_odd_points_are_shown_but_written(cli: Cli, tmp_path: Path) -> None:
    table, out = tmp_path / "arm.csv", tmp_path / "car.toml"
    table.write_text(points_to_csv(MARTEN, "left").replace("131.0,214.0,124.0", "131.0,214.0,424.0"))
    made = cli("import", table, "-o", out, "--loaded-radius", 228, "--side", "left", "--axes=x,y,z")
    assert made.code == 0, made.err
    assert any("lower arm near level, not at full droop" in line and "ODD" in line for line in made.out.splitlines())
    assert "remark: left.points.lower_ball_joint" in made.err


def test_refusals_write_nothing(cli: Cli, tmp_path: Path) -> None:
    table, broken, empty = tmp_path / "t.csv", tmp_path / "broken.csv", tmp_path / "empty.csv"
    table.write_text(points_to_csv(MARTEN, "left"))
    broken.write_text(points_to_csv(MARTEN, "left").replace("118.0", "118.0.0"))
    empty.write_text("")
    taken, out = tmp_path / "taken.toml", tmp_path / "car.toml"
    taken.write_text("mine")
    before = sorted(tmp_path.iterdir())
    whole = ("-o", out, "--loaded-radius", 228)
    cases: list[tuple[tuple[object, ...], tuple[str, ...]]] = [
        ((table, *whole), ("t.csv: more than one reading fits", "x,y,z --unit mm --side left", "--axes=x,-y,z --unit mm --side right")),
        ((table, *whole, "--side", "right"), ("left-handed", "--axes=x,-y,z", "--side left")),
        ((table, *whole, "--side", "left", "--unit", "m"), ("t.csv: no reading", "--unit m", "give --axes")),
        ((table, *whole, "--side", "left", "--unit", "cm"), ("cm", "mm")),
        ((table, *whole, "--axes=x,y"), ("--axes x,y: is no axis map", "--axes=-y,x,z")),
        ((table, *whole, "--origin=0,0"), ("--origin 0,0: is not three numbers", "under-wheel")),
        ((table, *whole, "--origin=0,0,nan"), ("--origin 0,0,nan",)),
        ((table, *whole, "--side", "left", "--origin=0,0,200"), ("no reading", "--origin")),
        ((table, "-o", out, "--loaded-radius", "300", "--side", "left"), ("228.0 mm above z = 0", "is 300.0 mm", "--origin X,Y,Z")),
        ((table, "-o", out, "--loaded-radius", "0"), ("--loaded-radius 0: must be a length above 0 mm",)),
        ((table, "-o", out, "--loaded-radius", "nan"), ("--loaded-radius nan",)),
        ((table, "-o", out), ("missing option", "--loaded-radius")),
        ((table, *whole, "--side", "left", "--toe-in", "45"), ("setup.toe_in = 45", "below 20")),
        ((table, *whole, "--side", "left", "--wheelbase", "1.55"), ("vehicle.wheelbase = 1.55", "looks like m")),
        ((table, *whole, "--side", "right", "--right", table), ("--side right", "leave --side out")),
        ((table, *whole, "--names", "hub"), ("--names hub: is no pair",)),
        ((table, *whole, "--type", "strut"), ("strut_top_mount", "not found for a strut corner")),
        ((broken, *whole), ("broken.csv: line 2: '118.0.0' is not a number",)),
        ((empty, *whole), ("empty.csv: has no rows",)),
        ((tmp_path / "none.csv", *whole), ("none.csv: there is no such file",)),
        ((table, "-o", taken, "--loaded-radius", 228, "--side", "left"), ("taken.toml: exists already", "--force")),
        ((table, "-o", tmp_path / "car.csv", "--loaded-radius", 228), ("'.csv' is unknown", ".toml")),
    ]  # fmt: skip
    for arguments, parts in cases:
        found = cli("import", *arguments)
        assert found.code == 2, arguments
        for part in parts:
            assert part in found.complaint, found.complaint
        assert sorted(tmp_path.iterdir()) == before
    assert taken.read_text() == "mine"


def test_help_says_what_the_axis_map_means(cli: Cli) -> None:
    text = " ".join(cli("import", "--help").out.replace("│", " ").split())
    for part in (
        "car x = minus column y",
        "car y = column x",
        "car z = column z",
        "subtracted before the axes are turned",
    ):
        assert part in text


def test_the_plain_strut_as_a_spaced_table(cli: Cli, tmp_path: Path) -> None:
    table, out = tmp_path / "strut.txt", tmp_path / "car.toml"
    table.write_text(
        "\n".join(
            f"{name.replace('_', ' '):<20} {x:8.2f} {-y:8.2f} {-z:8.2f}" for name, (x, y, z) in PLAIN["strut"].items()
        )
    )
    made = cli("import", table, "-o", out, "--loaded-radius", 302, "--axes=sae-j670")
    assert made.code == 0, made.err
    for name, point in PLAIN["strut"].items():
        np.testing.assert_array_equal(load(out).left.points[name], point)
    assert "side left (from the axes)" in made.out
