"""Bump, roll, single wheel: roll centres, swing arms, anti figures against constructions and identities."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from corners import HARDPOINTS, PLAIN, SAMPLES, make_axle, scatter
from test_outside import planar_corner

import toewright as tw
from toewright.kinematics.batch import solve_poses
from toewright.kinematics.design import design_vectors
from toewright.kinematics.road import contact_on, roll_axle
from toewright.model.axle import Vehicle


def planar_axle():
    """Exact construction, (y, z) in m: upper arm (0.35, 0.42)-(0.62, 0.46), lower arm (0.25, 0.18)-(0.66, 0.15), contact (0.75, 0)."""
    return planar_corner((0.35, 0.42), (0.62, 0.46), (0.25, 0.18), (0.66, 0.15), (0.75, 0.30), radius=300.0)


def test_planar_roll_centre():
    # instant centre (-18803/24500, 3117/12250) m, roll-centre height 9351/74356 m = 0.1257598580 (exact construction)
    ridden = tw.ride(planar_axle(), ["bump"], travel=[0.0])
    assert ridden["roll_centre_z"][0] == pytest.approx(1000.0 * 9351.0 / 74356.0, abs=1e-9)
    assert ridden["roll_centre_y"][0] == pytest.approx(0.0, abs=1e-9)
    assert ridden["swing_arm_left"][0] == pytest.approx(750.0 + 1000.0 * 18803.0 / 24500.0, abs=1e-8)


def test_instant_centre_and_contact_path_agree_in_the_plane():
    # the line from contact to instant centre is the normal of the contact path; half-track change per travel = height / half track
    ridden = tw.ride(planar_axle(), ["bump"], travel=[-30.0, 0.0, 30.0])
    maps = tw.sweep(planar_axle(), [0.0], [-30.0, 0.0, 30.0], sides=["left"])
    slope = maps["contact_travel_slope"][0, 0]
    half = maps["contact_y"][0, 0]
    assert ridden["roll_centre_z"] / half == pytest.approx(slope[:, 1] / slope[:, 2], abs=1e-12)


def test_level_equal_arms_have_their_roll_centre_on_the_road():
    axle = planar_corner((0.30, 0.40), (0.65, 0.40), (0.30, 0.20), (0.65, 0.20), (0.75, 0.30))
    ridden = tw.ride(axle, ["bump"], travel=[0.0])
    assert ridden["roll_centre_z"][0] == pytest.approx(0.0, abs=1e-9)
    assert np.isinf(ridden["swing_arm_left"][0]) or abs(ridden["swing_arm_left"][0]) > 1e9


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.stem)
def test_bump_is_the_sweep(path):
    axle = tw.load(path)
    travel = np.linspace(-24, 24, 9)
    ridden, maps = tw.ride(axle, ["bump"], travel=travel), tw.sweep(axle, [0.0], travel)
    for s, side in enumerate(("left", "right")):
        assert np.array_equal(ridden[f"toe_in_{side}"], maps["toe_in"][s, 0])  # to machine precision
        assert np.array_equal(ridden[f"camber_{side}"], maps["camber"][s, 0])
        assert np.array_equal(ridden[f"bump_steer_rate_{side}"], maps["bump_steer_rate"][s, 0])
        assert ridden[f"recession_{side}"] == pytest.approx(
            -maps["wheel_centre_x"][s, 0] + maps["wheel_centre_x"][s, 0, 4], abs=1e-12
        )


def test_single_leaves_the_other_wheel():
    axle = tw.load(HARDPOINTS / "marten_front.toml")
    ridden = tw.ride(axle, ["single"], travel=[-20.0, 0.0, 20.0], side="right")
    assert np.all(ridden["wheel_travel_left"] == 0.0)
    assert np.all(ridden["toe_in_left"] == ridden["toe_in_left"][1])
    assert ridden["toe_in_right"][2] != ridden["toe_in_right"][1]
    assert ridden.moving_side == "right"


def rolled(axle, phi):
    """Body turned by phi about x (right side down +) with all solved points, seen from a level road."""
    found = roll_axle(axle, np.array([phi]), np.zeros(1))
    a = np.radians(phi)
    rotation = np.array([[1.0, 0.0, 0.0], [0.0, np.cos(a), -np.sin(a)], [0.0, np.sin(a), np.cos(a)]])
    return found, rotation


@pytest.mark.parametrize("kind", ["double-wishbone", "strut"])
@pytest.mark.parametrize("phi", [-2.0, 1.5])
def test_turning_the_road_is_turning_the_body(kind, phi):
    axle = make_axle(PLAIN[kind], kind)
    found, rotation = rolled(axle, phi)
    poses, radius = found.poses, axle.wheel.loaded_radius
    ridden = tw.ride(axle, ["roll"], roll=[phi])
    lows = []
    for s, side in enumerate(("left", "right")):
        centre = rotation @ [poses[f"wheel_centre_{c}"][s, 0] for c in "xyz"]
        spin = rotation @ [poses[f"spin_axis_{c}"][s, 0] for c in "xyz"]
        down = spin[2] * spin - [0.0, 0.0, 1.0]
        lows.append(centre + radius * down / np.linalg.norm(down))
        sign = 1.0 if side == "left" else -1.0
        assert ridden[f"camber_road_{side}"][0] == pytest.approx(-sign * np.degrees(np.arcsin(spin[2])), abs=1e-10)
    assert lows[0][2] == pytest.approx(lows[1][2], abs=1e-8)  # both tyres stand on one level road
    design = 2.0 * tw.design_pose(axle)["contact_y"][0, 0, 0]
    assert ridden["track_change"][0] == pytest.approx(lows[0][1] - lows[1][1] - design, abs=1e-8)


@pytest.mark.parametrize("phi", [-1.5, 0.0, 2.0])
def test_roll_centre_by_differences_on_a_level_road(phi):
    # each wheel moved alone by a hair, the body held where it rolled to, contact points on the level road's direction
    axle = make_axle(scatter("double-wishbone", 4.0, 3))
    found, rotation = rolled(axle, phi)
    h = 1e-3
    lines = []
    for side in ("left", "right"):
        at = (-1.0 if side == "left" else 1.0) * found.travel[0]
        moved = solve_poses(design_vectors(axle, [side]), np.zeros(3), at + np.array([-h, 0.0, h]))
        contact = contact_on(moved, axle.wheel.loaded_radius, np.full(3, phi)).point[0] @ rotation.T
        path = (contact[2] - contact[0]) / (2 * h)
        lines.append((contact[1], path))
    (c1, p1), (c2, p2) = lines
    meet = np.linalg.solve([p1[1:], p2[1:]], [c1[1:] @ p1[1:], c2[1:] @ p2[1:]])
    ridden = tw.ride(axle, ["roll"], roll=[phi])
    assert ridden["roll_centre_z"][0] == pytest.approx(meet[1] - c1[2], abs=1e-5)
    a = np.radians(phi)
    where_plane_meets_road = -c1[2] * np.tan(a)  # the centre plane is the line (-z sin, z cos)
    assert ridden["roll_centre_y"][0] == pytest.approx(meet[0] - where_plane_meets_road, abs=2e-5)


def test_roll_is_antisymmetric():
    axle = tw.load(HARDPOINTS / "linnet_front.toml")
    ridden = tw.ride(axle, ["roll"], roll=[-2.0, 0.0, 2.0])
    assert (
        ridden["wheel_travel_right"][2] > 0.0 > ridden["wheel_travel_left"][2]
    )  # right side down: right wheel in bump
    assert ridden["toe_in_left"] == pytest.approx(ridden["toe_in_right"][::-1], abs=1e-9)
    assert ridden["axle_steer"] == pytest.approx(-ridden["axle_steer"][::-1], abs=1e-9)
    assert ridden["roll_centre_y"] == pytest.approx(-ridden["roll_centre_y"][::-1], abs=1e-7)
    assert ridden["roll_centre_z"] == pytest.approx(ridden["roll_centre_z"][::-1], abs=1e-7)


def test_rates_are_slopes():
    axle = make_axle(scatter("strut", 4.0, 8), "strut")
    h = 0.01
    roll = tw.ride(axle, ["roll"], roll=[1.0 - h, 1.0, 1.0 + h])
    assert roll["roll_steer"][1] == pytest.approx((roll["axle_steer"][2] - roll["axle_steer"][0]) / (2 * h), rel=1e-6)
    assert np.isnan(roll["axle_steer_rate"]).all()
    single = tw.ride(axle, ["single"], travel=[5.0 - h, 5.0, 5.0 + h])
    slope = (single["axle_steer"][2] - single["axle_steer"][0]) / (2 * h)
    assert single["axle_steer_rate"][1] == pytest.approx(slope, rel=1e-6)


def anti_axle(**changes):
    vehicle = Vehicle(wheelbase=2600.0, cg_height=500.0, brake_share=0.6, brakes="outboard")
    tilted = dict(PLAIN["double-wishbone"])
    tilted["upper_pivot_front"] = [118.0, 262.0, 281.0]
    tilted["upper_pivot_rear"] = [-126.0, 268.0, 301.0]
    return make_axle(tilted, vehicle=replace(vehicle, **changes))


def test_anti_dive_by_the_upright_point():
    axle = anti_axle()
    ridden = tw.ride(axle, ["bump"], travel=[-1e-3, 0.0, 1e-3])
    maps = tw.sweep(axle, [0.0], [-1e-3, 0.0, 1e-3], sides=["left"])
    # the point fixed to the upright at the contact: carried by the rotation from the middle pose
    from toewright.kinematics.joints import rotation_matrices

    rotation = rotation_matrices(maps.poses[0, 0])
    arm = rotation[1].T @ (maps["contact_point"][0, 0, 1] - maps["wheel_centre"][0, 0, 1])
    carried = maps["wheel_centre"][0, 0] + rotation @ arm
    outboard = (carried[2, 0] - carried[0, 0]) / (carried[2, 2] - carried[0, 2])
    centre = maps["wheel_centre"][0, 0]
    inboard = (centre[2, 0] - centre[0, 0]) / (centre[2, 2] - centre[0, 2])
    assert ridden["anti_dive_left"][1] == pytest.approx(100 * 0.6 * outboard * 2600.0 / 500.0, rel=1e-5)
    in_body = tw.ride(anti_axle(brakes="inboard"), ["bump"], travel=[0.0])
    assert in_body["anti_dive_left"][0] == pytest.approx(100 * 0.6 * inboard * 2600.0 / 500.0, rel=1e-5)
    # the slope of the geometric contact point lacks the caster change and is another figure
    geometric = maps["contact_travel_slope"][0, 0, 1]
    assert abs(geometric[0] / geometric[2] - outboard) > 0.005


def test_rear_signs():
    # braking: the force on the wheel is rearward; a rear contact that goes rearward in bump resists the lift
    rear = tw.ride(anti_axle(axle="rear", drive="inboard"), ["bump"], travel=[0.0])
    front = tw.ride(anti_axle(), ["bump"], travel=[0.0])
    assert rear["anti_lift_left"][0] == pytest.approx(-front["anti_dive_left"][0])
    assert np.isnan(rear["anti_dive_left"][0])
    assert np.isfinite(rear["anti_squat_left"][0])
    missing = tw.ride(anti_axle(cg_height=None), ["bump"], travel=[0.0])
    assert np.isnan(missing["anti_dive_left"][0])
    assert "cg_height" in missing.notes[0]


def test_roll_beyond_reach_is_not_ok():
    ridden = tw.ride(make_axle(PLAIN["double-wishbone"]), ["roll"], roll=[0.0, 40.0])
    assert ridden.status[0] == 0
    assert ridden.status[1] != 0
    assert np.isnan(ridden["toe_in_left"][1])


def test_bad_requests():
    axle = make_axle(PLAIN["double-wishbone"])
    with pytest.raises(ValueError, match="bump, roll, single"):
        tw.ride(axle, ["heave"])
    with pytest.raises(ValueError, match="'left' and 'right'"):
        tw.ride(axle, side="both")
    with pytest.raises(ValueError, match="ascend"):
        tw.ride(axle, travel=[3.0, 1.0])


def test_limits_name_the_lock():
    found = tw.limits(tw.load(HARDPOINTS / "marten_front.toml"))
    assert found.inside == ()
    assert {stop.status for stop in found.stops} == {"locked"}
    assert len(found.stops) == 4
    assert all(abs(stop.rack_travel) > found.stroke for stop in found.stops)
    assert found.largest_steer is not None
    assert abs(found.largest_steer.value) > 25.0
    tight = replace(tw.load(HARDPOINTS / "marten_front.toml"))
    tight = replace(tight, rack=replace(tight.rack, stroke=70.0))
    assert any(abs(stop.rack_travel) < 70.0 for stop in tw.limits(tight).inside)
    rear = tw.limits(tw.load(HARDPOINTS / "marten_rear.toml"))
    assert rear.stroke is None
    assert rear.stops == ()


@pytest.mark.parametrize("kind", ["double-wishbone", "strut"])
@pytest.mark.parametrize("seed", range(3))
def test_large_rolls_are_those_reached_from_upright(kind, seed):
    # by a scan over wheel travel: the first travel from zero outward that puts both tyres on one road, or none within reach
    axle = make_axle(scatter(kind, 12.0, seed), kind)
    roll = np.concatenate([-np.arange(9.0, 44.0, 5.0), np.arange(7.0, 44.0, 5.0)])
    rolled = roll_axle(axle, roll, np.full(roll.size, 20.0))
    half = axle.left.points["wheel_centre"][1]
    reached = 0
    for k, angle in enumerate(roll):
        travel = np.linspace(0.0, 1.2 * half * np.tan(np.radians(angle)), 241)
        poses = solve_poses(design_vectors(axle), np.full(travel.size, 20.0), np.stack([-travel, travel]))
        height = contact_on(poses, axle.wheel.loaded_radius, np.full(travel.size, angle)).height
        gap = (height[0] - height[1])[np.cumsum(np.any(poses.status != 0, axis=0)) == 0]
        turns = np.flatnonzero(np.diff(np.sign(gap)) != 0.0)
        assert (rolled.status[k] == 0) == bool(turns.size), angle
        if turns.size:
            low, high = sorted(travel[[turns[0], turns[0] + 1]])
            assert low <= rolled.travel[k] <= high, angle
            reached += 1
    assert 4 <= reached < roll.size
