from __future__ import annotations

import dataclasses
from pathlib import Path

import numpy as np
import pytest
from corners import PLAIN, SAMPLES
from files_for_tests import MM, SIGNS, changed, file_text
from hypothesis import given, settings
from hypothesis import strategies as st

from toewright.model import Axle, InputError, dumps, load, loads, save, save_points, set_points

RIGHT_WHEEL = ("right", "wheel_centre")
MOVED = {("left", "tie_rod_outer"): [71.0, 549.25, 153.0]}


def assert_same_points(one: Axle, other: Axle, tolerance: float) -> None:
    for side in ("left", "right"):
        for name, point in one.corner(side).points.items():
            np.testing.assert_allclose(other.corner(side).points[name], point, rtol=0.0, atol=tolerance)


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda path: path.stem)
def test_edit_changes_the_numbers_and_nothing_else(sample: Path) -> None:
    text = sample.read_text(encoding="utf-8")
    point = load(sample).left.points["tie_rod_outer"] + [0.0, 1.5, 0.0]
    line = next(row for row in text.splitlines() if row.startswith("tie_rod_outer"))
    old = line[line.index("[") :].split(",")[1].strip()
    expected = text.replace(line, line.replace(old, repr(float(point[1]))), 1)
    assert set_points(sample, {("left", "tie_rod_outer"): point}) == expected
    assert expected != text


def test_numbers_that_stay_keep_their_spelling() -> None:
    text = changed(file_text(), "tie_rod_outer", "tie_rod_outer = [ 71, 5.480e2,152.00 ]   # steering arm")
    found = set_points(text, {("left", "tie_rod_outer"): [71.0, 548.0, 152.5]})
    assert found == text.replace("152.00", "152.5")
    assert set_points(text, {("left", "tie_rod_outer"): [71.0, 548.0, 152.0]}) == text
    assert set_points(text, {}) == text


SHAPES = {
    "comments inside": "[left.points]\ntie_rod_outer = [\n  71.0, # ahead\n  548.0,\n  152.0 # up\n]",
    "windows line ends": "[left.points]\r\ntie_rod_outer = [71.0, 548.0, 152.0]\r",
    "tabs": "[ left . points ]\n\ttie_rod_outer\t=\t[71.0,548.0,\t152.0]",
    "quoted keys": '[left."points"]\n"tie_rod_outer" = [71.0, 548.0, 152.0]',
}


@pytest.mark.parametrize("shape", SHAPES.values(), ids=SHAPES.keys())
def test_shapes_of_files_stay(shape: str) -> None:
    text = changed(file_text(), "tie_rod_outer", "").replace("[left.points]", shape)
    expected = text.replace("548.0", "549.25", 1).replace("152.0", "153.0", 1)
    found = set_points(text, MOVED)
    assert found == expected
    np.testing.assert_array_equal(loads(found).left.points["tie_rod_outer"], [71.0, 549.25, 153.0])


@pytest.mark.parametrize("layout", ["inline", "dotted", "out of order"])
def test_other_layouts(layout: str) -> None:
    points = {name: str(point) for name, point in PLAIN["double-wishbone"].items()}
    if layout == "inline":
        inner = ", ".join(f"{name} = {point}" for name, point in points.items())
        text = (
            f'wheel = {{ loaded_radius = 228 }} # r\nleft = {{type = "double-wishbone", points = {{ {inner} }} }} # l\n'
        )
    elif layout == "dotted":
        rows = "\n".join(f"left.points.{name} = {point}" for name, point in points.items())
        text = f'wheel.loaded_radius = 228\nleft.type = "double-wishbone"\n{rows}\n'
    else:
        rows = "\n".join(f"{name} = {point}" for name, point in points.items())
        text = f'[left.points]\n{rows}\n[wheel] # r\nloaded_radius = 228\n[left]\ntype = "double-wishbone"\n'
    assert set_points(text, MOVED) == text.replace("[71.0, 548.0, 152.0]", "[71.0, 549.25, 153.0]")


@pytest.mark.parametrize("axes", SIGNS)
@pytest.mark.parametrize("unit", MM)
@settings(max_examples=10)
@given(shift=st.tuples(*[st.floats(-5.0, 5.0)] * 3))
def test_points_come_back_in_any_axes_and_unit(axes: str, unit: str, shift: tuple[float, float, float]) -> None:
    text = file_text("strut", axes, unit, right=True)
    axle = loads(text)
    moved = {
        ("left", "strut_top_mount"): axle.left.points["strut_top_mount"] + np.array(shift),
        RIGHT_WHEEL: axle.right.points["wheel_centre"] + np.array(shift),
    }
    # 1e-9 mm is the last decimal that is written
    assert_same_points(axle.with_points(moved), loads(set_points(text, moved)), 1e-9)


def test_refusals(tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"right\.points\.wheel_centre: the right side is left out .* move the left"):
        set_points(file_text(), {RIGHT_WHEEL: [0, -600, 228]})
    for where in (("left", "strut_top_mount"), ("middle", "wheel_centre"), ("left", "type")):
        with pytest.raises(InputError, match=f"{where[0]}.points.{where[1]}: there is no such point; check"):
            set_points(file_text(), {where: [0, 600, 228]})
    for values in ([0.0, np.nan, 1.0], [0.0, 1.0]):
        with pytest.raises(InputError, match="give three finite numbers"):
            set_points(file_text(), {("left", "wheel_centre"): values})
    path = tmp_path / "polecat.toml"
    path.write_text(file_text())
    with pytest.raises(InputError, match=r"polecat\.toml with the points moved: left\.points\.wheel_centre"):
        save_points(path, {("left", "wheel_centre"): [0, -600, 228]}, path, force=True)
    assert path.read_text() == file_text()
    assert list(tmp_path.iterdir()) == [path]


def test_save_points(tmp_path: Path) -> None:
    path, out = tmp_path / "one.toml", tmp_path / "two.toml"
    path.write_bytes(file_text().replace("\n", "\r\n").encode())
    axle = save_points(path, MOVED, out)
    assert out.read_bytes() == path.read_bytes().replace(b"548.0, 152.0", b"549.25, 153.0")
    assert_same_points(axle, load(out), 0.0)
    with pytest.raises(InputError, match=r"two\.toml: exists already"):
        save_points(path, MOVED, out)
    save_points(path, MOVED, path, force=True)
    assert path.read_bytes() == out.read_bytes()


def comparable(axle: Axle) -> dict[str, object]:
    kept = {name: dataclasses.asdict(getattr(axle, name)) for name in ("vehicle", "wheel", "setup")}
    rack = None if axle.rack is None else (axle.rack.axis.tolist(), axle.rack.stroke, axle.rack.travel_per_turn)
    kinds = (axle.left.kind, axle.right.kind)
    return kept | {"rack": rack, "kinds": kinds, "title": axle.title, "symmetric": axle.symmetric, "extra": axle.extra}


@pytest.mark.parametrize("hints", [False, True])
@pytest.mark.parametrize("sample", SAMPLES, ids=lambda path: path.stem)
def test_dumps_holds_the_whole_axle(sample: Path, hints: bool) -> None:
    axle = load(sample)
    again = loads(dumps(axle, heading=("by hand",), hints=hints))
    assert_same_points(axle, again, 0.0)
    assert comparable(again) == comparable(axle)


def test_dumps_of_every_key(tmp_path: Path) -> None:
    extra = '\n[targets.bump_steer]\nabove = -0.1\n[adjusters]\nshim = ["a", {b = 1}]\n'
    text = changed(file_text(axes="sae-j670", unit="in", right=True), "title", r'title = "Pole\"cat \\ äöü"') + extra
    text = changed(text, "axis", "axis = [0.1, -1.0, 0.2]")
    text = changed(text, "brakes", 'brakes = "inboard"\nother_axle = "sub/rear.toml"')
    folder = tmp_path / "cars"
    folder.mkdir()
    path = folder / "front.toml"
    path.write_text(text, encoding="utf-8")
    axle = load(path)
    save(axle, tmp_path / "copy.toml")
    again = load(tmp_path / "copy.toml")
    # 1e-9 mm is the last decimal that is written
    assert_same_points(axle, again, 1e-9)
    assert 'other_axle = "cars/sub/rear.toml"' in (tmp_path / "copy.toml").read_text(encoding="utf-8")
    one, other = comparable(axle), comparable(again)
    assert other["title"] == one["title"] == 'Pole"cat \\ äöü'
    assert (again.axes, again.length_unit) == (axle.axes, axle.length_unit) == ("sae-j670", "in")  # extra is in these
    for key in ("kinds", "symmetric", "extra"):
        assert other[key] == one[key], key
    assert axle.rack is not None
    assert again.rack is not None
    np.testing.assert_allclose(again.rack.axis, axle.rack.axis, rtol=0.0, atol=1e-15)  # made a unit vector once more
    with pytest.raises(InputError, match="exists already"):
        save(axle, tmp_path / "copy.toml")
