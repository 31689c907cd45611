from __future__ import annotations

import dataclasses
import hashlib
from itertools import product
from pathlib import Path

import numpy as np
import pytest
from corners import PLAIN, SAMPLES
from files_for_tests import RADIUS, changed, file_text

from toewright.model import POINT_NAMES, Axle, InputError, load, loads

KINDS = ("double-wishbone", "strut")
TWINS = [pair for pair in product(("iso-8855", "sae-j670"), ("mm", "m", "in")) if pair != ("iso-8855", "mm")]


def assert_same(one: Axle, other: Axle, tolerance: float) -> None:
    for side in ("left", "right"):
        assert one.corner(side).kind == other.corner(side).kind
        for name, point in one.corner(side).points.items():
            np.testing.assert_allclose(other.corner(side).points[name], point, rtol=0.0, atol=tolerance)
    for part in ("vehicle", "wheel", "setup"):
        for key, value in dataclasses.asdict(getattr(one, part)).items():
            expected = pytest.approx(value, rel=1e-12) if isinstance(value, float) else value
            assert getattr(getattr(other, part), key) == expected, (part, key)
    assert (one.rack is None) == (other.rack is None)
    if one.rack is not None and other.rack is not None:
        np.testing.assert_array_equal(one.rack.axis, other.rack.axis)
        assert other.rack.stroke == pytest.approx(one.rack.stroke, rel=1e-12)
        assert other.rack.travel_per_turn == pytest.approx(one.rack.travel_per_turn, rel=1e-12)


@pytest.mark.parametrize("kind", KINDS)
def test_points_arrive_as_written(kind: str) -> None:
    axle = loads(file_text(kind))
    assert axle.title == "Polecat 2, front axle"
    assert tuple(axle.left.points) == POINT_NAMES[kind]
    for name, point in PLAIN[kind].items():
        np.testing.assert_array_equal(axle.left.points[name], point)
    assert axle.wheel.loaded_radius == RADIUS[kind]
    assert axle.remarks == ()


@pytest.mark.parametrize(("axes", "unit"), TWINS)
@pytest.mark.parametrize("kind", KINDS)
def test_other_axes_and_units_are_the_same_axle(kind: str, axes: str, unit: str) -> None:
    # 1e-9 mm: a division and a multiplication by 25.4 or 1000 cost a few units in the last place of about 1e-13 mm
    assert_same(loads(file_text(kind)), loads(file_text(kind, axes, unit)), 1e-9)
    assert_same(loads(file_text(kind, right=True)), loads(file_text(kind, axes, unit, right=True)), 1e-9)


def test_right_left_out_is_the_mirror_image() -> None:
    axle, both = loads(file_text()), loads(file_text(right=True))
    assert axle.symmetric
    assert not both.symmetric
    for name, point in axle.left.points.items():
        np.testing.assert_array_equal(axle.right.points[name], point * [1.0, -1.0, 1.0])
    assert_same(axle, both, 0.0)
    assert (axle.left.sign, axle.right.sign) == (1.0, -1.0)


def test_sae_signs_by_hand() -> None:
    text = changed(file_text(axes="sae-j670"), "wheel_centre", "wheel_centre = [3.0, -602.0, -228.0]")
    np.testing.assert_array_equal(loads(text).left.points["wheel_centre"], [3.0, 602.0, 228.0])


def test_no_rack_is_a_toe_link_and_the_axis_is_made_a_unit_vector() -> None:
    assert loads(file_text(rack=False)).rack is None
    rack = loads(changed(file_text(), "axis", "axis = [0, 3, 4]")).rack
    assert rack is not None
    np.testing.assert_allclose(rack.axis, [0.0, 0.6, 0.8], atol=1e-15)
    default = loads(changed(file_text(axes="sae-j670"), "axis", "")).rack
    assert default is not None
    np.testing.assert_array_equal(default.axis, [0.0, 1.0, 0.0])


def test_smallest_file_and_whole_numbers() -> None:
    points = ", ".join(f"{name} = {[int(v) for v in point]}" for name, point in PLAIN["double-wishbone"].items())
    axle = loads(f'wheel = {{loaded_radius = 228}}\nleft = {{type = "double-wishbone", points = {{{points}}}}}\n')
    assert (axle.title, axle.vehicle.axle, axle.setup.toe_in, axle.rack) == ("untitled axle", "front", 0.0, None)


def test_extra_tables_are_kept_as_they_are() -> None:
    axle = loads(
        file_text() + '\n[targets.bump_steer]\nabove = -0.1\n[tolerance]\ndefault = "0.5"\n[adjusters]\nshim = [1, 2]\n'
    )
    assert axle.extra == {
        "targets": {"bump_steer": {"above": -0.1}},
        "tolerance": {"default": "0.5"},
        "adjusters": {"shim": [1, 2]},
    }


def test_file_has_path_hash_and_title(tmp_path: Path) -> None:
    path = tmp_path / "stoat.toml"
    raw = b"\xef\xbb\xbf" + changed(file_text(), "title", "").replace("\n", "\r\n").encode()
    path.write_bytes(raw)
    axle = load(path)
    assert (axle.title, axle.path, axle.sha256) == ("stoat", path, hashlib.sha256(raw).hexdigest())
    assert load(str(path)).title == "stoat"


def test_other_axle_counts_from_the_files_folder(tmp_path: Path) -> None:
    path = tmp_path / "front.toml"
    path.write_text(changed(file_text(), "wheelbase", 'wheelbase = 1550.0\nother_axle = "rear.toml"'))
    axle = load(path)
    assert axle.vehicle.other_axle == tmp_path / "rear.toml"
    assert len(axle.remarks) == 1
    assert "other_axle" in axle.remarks[0]
    (tmp_path / "rear.toml").write_text(file_text())
    assert load(path).remarks == ()


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda path: path.stem)
def test_samples_load_without_remarks(sample: Path) -> None:
    assert load(sample).remarks == ()


def test_with_points_moves_both_sides_of_a_symmetric_axle() -> None:
    axle = loads(file_text())
    moved = axle.with_points({("left", "tie_rod_outer"): np.array([70.0, 540.0, 150.0])})
    np.testing.assert_array_equal(moved.right.points["tie_rod_outer"], [70.0, -540.0, 150.0])
    assert moved.symmetric
    one = axle.with_points({("right", "tie_rod_outer"): np.array([70.0, -540.0, 150.0])})
    assert not one.symmetric
    np.testing.assert_array_equal(one.left.points["tie_rod_outer"], axle.left.points["tie_rod_outer"])
    with pytest.raises(KeyError, match="strut_top_mount"):
        axle.left.replace_points({"strut_top_mount": np.zeros(3)})
    with pytest.raises(ValueError, match="'both'"):
        axle.corner("both")


def test_input_error_is_a_value_error() -> None:
    assert issubclass(InputError, ValueError)
