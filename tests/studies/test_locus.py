"""The place of the inner tie rod joint: direct construction against exact solves."""

from __future__ import annotations

import numpy as np
import pytest
import scipy.optimize
from corners import HARDPOINTS, PLAIN, make_axle

import toewright as tw
from toewright.model.errors import InputError
from toewright.studies.locus import held_path, locus

FRONT = tw.load(HARDPOINTS / "marten_front.toml")
TRAVEL = np.linspace(-25.0, 25.0, 11)


def worst_bump_steer(axle, inner, rack=0.0):
    moved = axle.with_points({("left", "tie_rod_inner"): inner})
    return float(np.max(np.abs(tw.sweep(moved, [rack], TRAVEL, sides=["left"])["bump_steer"])))


def test_the_toe_is_held():
    path = held_path(FRONT, "left", TRAVEL)
    maps = tw.sweep(FRONT, path.rack[:1], [TRAVEL[0]], sides=["left"])
    assert maps["steer_angle"][0, 0, 0] == pytest.approx(tw.design_pose(FRONT)["steer_angle"][0, 0, 0], abs=1e-9)
    assert path.outer[5] == pytest.approx(FRONT.left.points["tie_rod_outer"], abs=1e-9)


def test_an_arc_is_found_exactly():
    # equal parallel arms and a parallel rod: the outer joint goes along a circle whose centres are where equal rods begin
    arm = np.array([0.0, 300.0, 20.0])
    points = {"wheel_centre": [0.0, 640.0, 230.0], "tie_rod_inner": [-80.0, 285.0, 190.0]}
    for name, z in (("upper", 320.0), ("lower", 120.0)):
        points[f"{name}_pivot_front"], points[f"{name}_pivot_rear"] = [130.0, 280.0, z], [-130.0, 280.0, z]
        points[f"{name}_ball_joint"] = np.array([0.0, 280.0, z]) + arm
    points["tie_rod_outer"] = np.array([-80.0, 285.0, 180.0]) + arm
    path = held_path(make_axle(points), "left", TRAVEL)
    assert path.misfit[0] < 1e-9
    assert np.abs(path.direction) == pytest.approx([1.0, 0.0, 0.0], abs=1e-6)
    assert path.point[1:] == pytest.approx([285.0, 180.0], abs=1e-5)
    assert worst_bump_steer(make_axle(points), np.array([-80.0, 285.0, 180.0])) < 1e-10


def test_the_line_of_centres_nearly_ends_bump_steer():
    path = held_path(FRONT, "left", TRAVEL)
    joint = FRONT.left.points["tie_rod_inner"]
    on_line = path.point + path.direction * (joint[0] - path.point[0]) / path.direction[0]
    assert worst_bump_steer(FRONT, on_line) < 0.05 * worst_bump_steer(FRONT, joint)


def test_places_are_solved_exactly():
    found = locus(FRONT, travel=TRAVEL, reach=20.0, places=9)
    for n, m in ((0, 0), (4, 4), (8, 2)):
        inner = np.array([found.joint[0], found.first[n], found.second[m]])
        assert found.worst[0, n, m] == pytest.approx(worst_bump_steer(FRONT, inner), abs=1e-10)
    assert found.present[0] == pytest.approx(worst_bump_steer(FRONT, found.joint), abs=1e-10)
    assert found.worst[0, 4, 4] == pytest.approx(found.present[0], abs=1e-10)


def test_best_height_is_the_minimum():
    found = locus(FRONT, travel=TRAVEL, reach=40.0, places=61)
    middle = 30
    exact = scipy.optimize.minimize_scalar(
        lambda z: worst_bump_steer(FRONT, np.array([found.joint[0], found.first[middle], z])),
        bounds=(found.joint[2] - 30.0, found.joint[2] + 30.0),
        method="bounded",
        options={"xatol": 1e-6},
    )
    assert found.best[middle] == pytest.approx(exact.x, abs=0.05)
    assert found.best_worst[middle] == pytest.approx(exact.fun, abs=2e-3)
    assert found.low[middle] < found.best[middle] < found.high[middle]
    for edge in (found.low[middle], found.high[middle]):
        inner = np.array([found.joint[0], found.first[middle], edge])
        assert worst_bump_steer(FRONT, inner) == pytest.approx(found.limit, abs=2e-3)


def test_at_steer_and_from_the_top():
    found = locus(FRONT, plane="top", rack=[0.0, 20.0], travel=TRAVEL, reach=15.0, places=7)
    assert found.worst.shape == (2, 7, 7)
    inner = np.array([found.second[5], found.first[2], found.joint[2]])
    assert found.worst[1, 2, 5] == pytest.approx(worst_bump_steer(FRONT, inner, 20.0), abs=1e-10)


def test_right_side_and_toe_links():
    rear = tw.load(HARDPOINTS / "marten_rear.toml")
    found = locus(rear, side="right", travel=TRAVEL, reach=10.0, places=5)
    left = locus(rear, side="left", travel=TRAVEL, reach=10.0, places=5)
    assert found.worst[0] == pytest.approx(left.worst[0, ::-1], abs=1e-9)


def test_refusals():
    with pytest.raises(InputError, match="plane"):
        locus(FRONT, plane="side")
    with pytest.raises(InputError, match="above 0"):
        locus(FRONT, limit=0.0)
    with pytest.raises(InputError, match="toe can't be held"):
        held_path(make_axle(PLAIN["double-wishbone"]), "left", np.array([-400.0, 0.0, 400.0]))
