"""No wrong assembly, no silent failure: against a walk of tiny steps in another formulation."""

from __future__ import annotations

import numpy as np
import pytest
from corners import HARDPOINTS, SAMPLES, make_axle, scatter
from hypothesis import given, settings
from hypothesis import strategies as st
from second_opinion import PointModel

import toewright as tw
from toewright.core import layout
from toewright.kinematics.batch import solve_batch, solve_poses
from toewright.kinematics.design import design_vectors

KINDS = st.sampled_from(["double-wishbone", "strut"])


@settings(max_examples=300)
@given(KINDS, st.integers(0, 100_000), st.floats(-45.0, 45.0), st.floats(-70.0, 70.0))
def test_pose_is_the_one_reached_by_continuity(kind, seed, rack, travel):
    axle = make_axle(scatter(kind, 12.0, seed), kind)
    maps = tw.sweep(axle, [rack], [travel], sides=["left"])
    status = int(maps.status[0, 0, 0])
    values = np.array([maps[name][0, 0, 0] for name in maps.scalars])
    assert np.isnan(values).all() if status else np.isfinite(values).all()
    model = PointModel(axle, "left")
    walked = None
    for rack_first in (True, False):
        try:
            walked = model.walk(rack, travel, rack_first=rack_first)
            break
        except (ArithmeticError, np.linalg.LinAlgError):
            continue
    if walked is None:
        return  # on both ways a toggle is too near for a plain walk: nothing to compare with
    assert status == layout.OK, maps.stops
    centre = walked.reshape(-1, 3)[3]
    assert maps["wheel_centre"][0, 0, 0] == pytest.approx(centre, abs=1e-7)
    assert maps["spin_axis"][0, 0, 0] == pytest.approx(model.spin_axis(walked), abs=1e-9)


@pytest.mark.parametrize("kind", ["double-wishbone", "strut"])
@pytest.mark.parametrize("seed", range(6))
def test_against_scipy_on_point_coordinates(kind, seed):
    axle = make_axle(scatter(kind, 6.0, seed), kind)
    model = PointModel(axle, "left")
    rack, travel = np.linspace(-20.0, 20.0, 3), np.linspace(-25.0, 25.0, 3)
    maps = tw.sweep(axle, rack, travel, sides=["left"])
    for i, r in enumerate(rack):
        for j, t in enumerate(travel):
            found = model.root(model.walk(r, t, 2.0), r, t)
            assert np.max(np.abs(model.equations(found, r, t))) < 1e-6  # mm^2
            assert maps["wheel_centre"][0, i, j] == pytest.approx(found.reshape(-1, 3)[3], abs=1e-7)
            assert maps.joints[0]["tie_rod_outer"][i, j] == pytest.approx(found.reshape(-1, 3)[2], abs=1e-7)


@pytest.mark.parametrize("kind", ["double-wishbone", "strut"])
@pytest.mark.parametrize("travel_at", ["wheel-centre", "contact-point"])
def test_extreme_grid_agrees_with_the_walker(kind, travel_at):
    # far over both locks and both ends of travel, in coarse steps, on scattered designs: the lanes must not jump
    designs = np.concatenate(
        [design_vectors(make_axle(scatter(kind, 6.0, seed), kind), ["left"]) for seed in range(60)]
    )
    rack, travel = np.linspace(-60.0, 60.0, 13), np.linspace(-110.0, 110.0, 13)
    grid = solve_batch(designs, rack, travel, travel_at=travel_at, columns=("steer_angle", "residual"))
    alone = solve_poses(
        designs, np.repeat(rack, 13), np.tile(travel, 13), travel_at=travel_at, columns=("steer_angle",)
    )
    status = grid.status.reshape(60, -1)
    assert np.array_equal(status, alone.status)
    ok = status == layout.OK
    assert 0.5 < ok.mean() <= 1.0
    assert np.max(np.abs(grid.poses.reshape(60, -1, 6) - alone.poses)[ok]) < 1e-9
    assert np.nanmax(grid["residual"]) < 1e-9


def test_lock_is_found_and_named():
    axle = make_axle(scatter("double-wishbone", 0.0, 0))
    maps = tw.sweep(axle, np.linspace(-100.0, 100.0, 41), [0.0], sides=["left"])
    assert set(maps.status_names.ravel()) == {"ok", "locked"}
    low, high = sorted(stop.rack_travel for stop in maps.stops)
    assert -60.0 < low < -50.0 < 70.0 < high < 90.0
    reached = maps.rack_travel[maps.status[0, :, 0] == 0]
    assert low <= reached.min()
    assert reached.max() <= high
    assert "come into line" in maps.stops[0].sentence
    # just short of the stop the rod and the arm are nearly in line, just beyond there is no pose
    edge = tw.sweep(axle, [low - 1e-3, low + 1e-3], [0.0], sides=["left"])
    assert edge.status[0, :, 0].tolist() == [2, 0]
    assert min(edge["transmission_angle"][0, 1, 0], 180.0 - edge["transmission_angle"][0, 1, 0]) < 3.0


def in_line_angle(axle, stop):
    """How far (deg) tie rod and arm are from being in line at a stop, seen along the steering axis.

    From three poses short of it, as towards a fold everything goes by a root; signed there, as the rod may swing past the arm.
    """
    for short in (1e-4, 1e-3, 1e-2, 0.03, 0.1, 0.3):
        away = -np.sign(stop.requested) * short * np.array([1.0, 4.0, 9.0])
        order = np.argsort(away)
        grid = [[stop.rack_travel], [stop.wheel_travel]]
        grid[stop.along == "wheel_travel"] = getattr(stop, stop.along) + away[order]
        maps = tw.sweep(axle, *grid, sides=[stop.side])
        if np.any(maps.status != layout.OK):
            continue
        joints = {name: places.reshape(-1, 3)[np.argsort(order)] for name, places in maps.joints[0].items()}
        k = maps["steering_axis"].reshape(-1, 3)[np.argsort(order)]
        rod, arm = (
            joints["tie_rod_inner"] - joints["tie_rod_outer"],
            joints["lower_ball_joint"] - joints["tie_rod_outer"],
        )
        sine = np.sum(k * np.cross(rod, arm), axis=1)
        cosine = np.sum(rod * arm, axis=1) - np.sum(rod * k, axis=1) * np.sum(arm * k, axis=1)
        angle = np.degrees(np.unwrap(np.arctan2(sine, cosine))) @ [3.0, -3.0, 1.0]
        return abs((angle + 90.0) % 180.0 - 90.0)
    raise AssertionError(f"no pose within 2.7 mm of {stop.place}")


def all_stops(axle, side):
    """Stops far beyond any use: of the rack at zero travel, of travel straight ahead and of travel at a turned rack."""
    rack = [0.0] if axle.rack is None else np.linspace(-180.0, 180.0, 61)
    turned = [0.0] if axle.rack is None else [20.0]
    far = np.linspace(-500.0, 500.0, 101)
    grids = ((rack, [0.0]), ([0.0], far), (turned, far))
    return [stop for at in grids for stop in tw.sweep(axle, *at, sides=[side]).stops]


@pytest.mark.parametrize("kind", ["double-wishbone", "strut", "samples"])
def test_a_stop_is_called_locked_exactly_where_rod_and_arm_are_in_line(kind):
    scattered = [make_axle(scatter(kind, 12.0, seed), kind) for seed in range(24)] if kind != "samples" else []
    names = []
    for axle in scattered or [tw.load(path) for path in SAMPLES]:
        for side in ("left",) if scattered else ("left", "right"):
            for stop in all_stops(axle, side):
                off = in_line_angle(axle, stop)
                if abs(off - layout.LOCK_MARGIN) > 1.0:  # nearer to the border three poses are not exact enough
                    assert stop.status == ("locked" if off < layout.LOCK_MARGIN else "out-of-reach"), (stop, off)
                    assert ("come into line" in stop.cause) == (off < layout.LOCK_MARGIN)
                names.append((stop.along, stop.status))
    assert names.count(("wheel_travel", "out-of-reach")) > 8
    assert names.count(("rack_travel", "locked")) > 8


def test_end_of_travel_is_out_of_reach():
    # the arms of the sample stretch out over 250 mm down and 312 mm up, where rod and arm stand nearly square
    maps = tw.sweep(tw.load(HARDPOINTS / "marten_front.toml"), [0.0], np.linspace(-330.0, 330.0, 221), sides=["left"])
    assert set(maps.status_names.ravel()) == {"ok", "out-of-reach"}
    assert {stop.status for stop in maps.stops} == {"out-of-reach"}
    assert len(maps.stops) == 2
    ends = [stop.wheel_travel for stop in maps.stops]
    assert 310.0 < max(ends) < 315.0
    assert -255.0 < min(ends) < -250.0
    assert all("end of their reach" in stop.sentence for stop in maps.stops)
    reached = maps["transmission_angle"][0, 0][maps.status[0, 0] == layout.OK]
    assert 70.0 < reached[0] < 110.0
    assert 85.0 < reached[-1] < 95.0


def test_beyond_a_lock_the_other_path_is_tried():
    # at this rack the walk along the rack at zero travel locks, but with the wheel in bump the rack gets there
    axle = make_axle(scatter("double-wishbone", 0.0, 0))
    rack = np.array([-57.0])
    bump = tw.sweep(axle, rack, np.linspace(-60.0, 60.0, 13), sides=["left"])
    zero = tw.sweep(axle, rack, [0.0], sides=["left"])
    assert zero.status[0, 0, 0] == layout.LOCKED
    there = bump.status[0, 0] == layout.OK
    assert np.all(np.isfinite(bump["steer_angle"][0, 0][there]))
    assert np.all(np.isnan(bump["steer_angle"][0, 0][~there]))


def test_linkage_that_stands_at_its_toggle():
    points = scatter("double-wishbone", 0.0, 0)
    lower, upper = points["lower_ball_joint"], points["upper_ball_joint"]
    inner = points["tie_rod_inner"]
    on_axis = lower + (upper - lower) * 0.2
    points["tie_rod_outer"] = inner + 0.75 * (on_axis - inner)  # on the line from the inner joint to the axis
    maps = tw.sweep(make_axle(points), [-1.0, 0.0, 1.0], [-1.0, 0.0, 1.0], sides=["left"])
    locked = maps.status == layout.LOCKED
    assert locked.any()
    assert np.nanmax(maps.residual) < 1e-9
    for name in maps.scalars:
        assert np.array_equal(np.isnan(maps[name]), maps.status != layout.OK), name


def test_linkage_without_any_grip_is_locked_everywhere():
    # wheel centre on the steering axis, rod and arm exactly in line: the rows are dependent where the drawing stands
    points = {n: np.array(p) for n, p in scatter("double-wishbone", 0.0, 0).items()}
    points["lower_ball_joint"], points["upper_ball_joint"] = (
        np.array([0.0, 560.0, 120.0]),
        np.array([0.0, 560.0, 312.0]),
    )
    points["wheel_centre"] = np.array([0.0, 560.0, 228.0])
    points["tie_rod_outer"], points["tie_rod_inner"] = np.array([0.0, 480.0, 160.0]), np.array([0.0, 228.0, 160.0])
    maps = tw.sweep(make_axle(points), [-1.0, 0.0, 1.0], [-1.0, 0.0, 1.0], sides=["left"])
    assert np.all(maps.status == layout.LOCKED)
    assert all(np.isnan(maps[name]).all() for name in maps.scalars)
    assert tw.sweep(make_axle(points), [0.0], [0.0], sides=["left"]).status[0, 0, 0] == layout.LOCKED
    assert solve_poses(design_vectors(make_axle(points), ["left"]), [0.0, 1.0], [0.0, 0.0]).status.tolist() == [[2, 2]]
