"""Identities that hold for every corner, on random ones."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from corners import SAMPLES, make_axle, scatter
from hypothesis import given
from hypothesis import strategies as st

import toewright as tw
from toewright.kinematics.batch import solve_poses
from toewright.kinematics.design import design_vectors

RACK, TRAVEL = np.linspace(-18.0, 18.0, 5), np.linspace(-24.0, 24.0, 5)
KINDS = st.sampled_from(["double-wishbone", "strut"])
SEEDS = st.integers(0, 10_000)
UNSIGNED = (
    "toe_in",
    "camber",
    "caster",
    "kingpin_inclination",
    "scrub_radius",
    "mechanical_trail",
    "transmission_angle",
)


def corner(kind, seed, size=8.0):
    return make_axle(scatter(kind, size, seed), kind, toe_in=0.2, camber=-0.8)


@given(KINDS, SEEDS)
def test_distances_on_the_upright_stay(kind, seed):
    axle = corner(kind, seed)
    maps = tw.sweep(axle, RACK, TRAVEL, sides=["left"])
    ok = maps.status[0] == 0
    assert ok.any()
    names = [
        n
        for n in ("upper_ball_joint", "strut_axis_point", "lower_ball_joint", "tie_rod_outer")
        if n in axle.left.points
    ]
    for name in names:
        before = np.linalg.norm(axle.left.points[name] - axle.left.points["wheel_centre"])
        now = np.linalg.norm(maps.joints[0][name] - maps["wheel_centre"][0], axis=-1)
        assert np.max(np.abs(now - before)[ok]) < 1e-9  # mm
    assert np.max(np.abs(np.linalg.norm(maps["spin_axis"][0], axis=-1) - 1.0)[ok]) < 1e-13


@given(KINDS, SEEDS)
def test_twist_is_reciprocal_to_every_link(kind, seed):
    # at fixed rack no link changes its length: the velocity of its outer joint is normal to it
    axle = corner(kind, seed)
    maps = tw.sweep(axle, RACK, TRAVEL, sides=["left"])
    ok = maps.status[0] == 0
    centre, velocity, spin = maps["wheel_centre"][0], maps["wheel_centre_travel_slope"][0], maps["twist_travel"][0]
    links = [("lower_pivot_front", "lower_ball_joint"), ("lower_pivot_rear", "lower_ball_joint")]
    links.append(("tie_rod_inner", "tie_rod_outer"))
    if kind == "double-wishbone":
        links.append(("upper_pivot_front", "upper_ball_joint"))
    for inner, outer in links:
        joint = maps.joints[0][outer]
        speed = velocity + np.cross(spin, joint - centre)
        link = joint - maps.joints[0][inner]
        power = np.einsum("...i,...i->...", speed, link / np.linalg.norm(link, axis=-1, keepdims=True))
        assert np.max(np.abs(power[ok])) < 1e-11  # mm/mm


@given(KINDS, SEEDS)
def test_mirror_image(kind, seed):
    axle = corner(kind, seed)
    maps = tw.sweep(axle, RACK, TRAVEL)
    left, right = maps.side_index("left"), maps.side_index("right")
    assert np.array_equal(maps.status[left], maps.status[right, ::-1])
    assert np.allclose(maps["steer_angle"][left], -maps["steer_angle"][right, ::-1], rtol=0, atol=1e-10, equal_nan=True)
    for name in UNSIGNED:
        assert np.allclose(maps[name][left], maps[name][right, ::-1], rtol=0, atol=1e-9, equal_nan=True), name


@given(KINDS, SEEDS, st.sampled_from([0.1, 0.5, 3.0]))
def test_scale(kind, seed, k):
    axle = corner(kind, seed)
    points = {name: k * p for name, p in axle.left.points.items()}
    larger = make_axle(points, kind, toe_in=0.2, camber=-0.8, radius=k * axle.wheel.loaded_radius)
    one = tw.sweep(axle, RACK, TRAVEL, sides=["left"])
    two = tw.sweep(larger, k * RACK, k * TRAVEL, sides=["left"])
    both = (one.status == 0) & (two.status == 0)
    assert np.array_equal(one.status, two.status)
    for name, power in (("steer_angle", 0), ("camber", 0), ("caster", 0), ("scrub_radius", 1), ("bump_steer_rate", -1)):
        a, b = one[name][both], two[name][both] * k ** (-power)
        assert np.max(np.abs(a - b)) < 1e-8, name


@given(KINDS, SEEDS, st.floats(-180.0, 180.0))
def test_turning_and_shifting_the_body(kind, seed, heading):
    axle = corner(kind, seed)
    turn = np.radians(heading)
    rotation = np.array([[np.cos(turn), -np.sin(turn), 0.0], [np.sin(turn), np.cos(turn), 0.0], [0.0, 0.0, 1.0]])
    shift = np.array([310.0, -45.0, 120.0])
    one = tw.sweep(axle, RACK, TRAVEL, sides=["left"])
    # the static angles turn with the body: the declared toe-in is minus the steer angle of the left wheel
    moved = make_axle(
        {n: rotation @ p + shift for n, p in axle.left.points.items()},
        kind,
        toe_in=0.2 - heading,
        camber=-0.8,
        rack_axis=tuple(rotation @ [0.0, 1.0, 0.0]),
    )
    two = tw.sweep(moved, RACK, TRAVEL, sides=["left"])
    ok = (one.status == 0) & (two.status == 0)
    assert np.array_equal(one.status, two.status)
    assert np.max(np.abs((one["wheel_centre"] @ rotation.T + shift - two["wheel_centre"])[ok])) < 1e-9
    difference = (two["steer_angle"] - one["steer_angle"] - heading + 180.0) % 360.0 - 180.0
    assert np.max(np.abs(difference[ok])) < 1e-9
    for name in ("camber", "scrub_radius", "mechanical_trail", "bump_steer_rate"):
        assert np.max(np.abs((one[name] - two[name])[ok])) < 1e-8, name


@given(KINDS, SEEDS)
def test_path_independence(kind, seed):
    # the grid walks along one line after another; the walker goes to each pose on its own
    axle = corner(kind, seed)
    maps = tw.sweep(axle, RACK, TRAVEL, sides=["left"])
    rack, travel = np.repeat(RACK, TRAVEL.size), np.tile(TRAVEL, RACK.size)
    alone = solve_poses(design_vectors(axle, ["left"]), rack, travel)
    assert np.array_equal(alone.status[0], maps.status[0].ravel())
    ok = alone.status[0] == 0
    assert np.max(np.abs(alone.poses[0] - maps.poses[0].reshape(-1, 6))[ok]) < 1e-9


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.stem)
def test_back_at_zero_stands_the_design_position(path):
    axle = tw.load(path)
    rack = [0.0] if axle.rack is None else [-7.0, 0.0, 5.0]
    maps = tw.sweep(axle, rack, [-11.0, 0.0, 9.0])
    at = (rack.index(0.0), 1)
    for s, side in enumerate(maps.sides):
        for name, joint in maps.joints[s].items():
            assert joint[at] == pytest.approx(axle.corner(side).points[name], abs=1e-11)
        assert maps["toe_in"][(s, *at)] == pytest.approx(axle.setup.toe_in, abs=1e-12)
        assert maps["camber"][(s, *at)] == pytest.approx(axle.setup.camber, abs=1e-12)


def test_equal_parallel_links_translate_the_upright():
    # parallel equal arms and an equal parallel tie rod: all angles stay, whatever the rack held at zero
    arm = np.array([0.0, 300.0, 20.0])
    inner = {"upper": np.array([0.0, 280.0, 320.0]), "lower": np.array([0.0, 280.0, 120.0])}
    along = np.array([130.0, 0.0, 0.0])
    points = {"wheel_centre": [0.0, 640.0, 230.0]}
    for name, place in inner.items():
        points[f"{name}_pivot_front"], points[f"{name}_pivot_rear"] = place + along, place - along
        points[f"{name}_ball_joint"] = place + arm
    points["tie_rod_inner"] = [-80.0, 285.0, 180.0]
    points["tie_rod_outer"] = np.array([-80.0, 285.0, 180.0]) + arm
    maps = tw.sweep(make_axle(points), [0.0], np.linspace(-80, 80, 33), sides=["left"])
    for name in ("toe_in", "camber", "caster", "kingpin_inclination"):
        assert np.max(np.abs(maps[name] - maps[name][0, 0, 16])) < 1e-11, name


def test_contact_drive_holds_the_contact_point():
    axle = corner("double-wishbone", 3)
    maps = tw.sweep(axle, RACK, TRAVEL, travel_at="contact-point", sides=["left"])
    design = tw.design_pose(axle, sides=["left"])["contact_z"][0, 0, 0]
    assert np.max(np.abs(maps["contact_z"][0] - design - TRAVEL)) < 1e-10


def test_rates_are_slopes_of_the_map():
    axle = replace(corner("strut", 5))
    h = 0.01
    maps = tw.sweep(axle, [-h, 0.0, h], [-h, 0.0, h], sides=["left"])
    toe, steer, camber = maps["toe_in"][0], maps["steer_angle"][0], maps["camber"][0]
    assert maps["bump_steer_rate"][0, 1, 1] == pytest.approx((toe[1, 2] - toe[1, 0]) / (2 * h), abs=1e-8)
    assert maps["steer_rate"][0, 1, 1] == pytest.approx((steer[2, 1] - steer[0, 1]) / (2 * h), abs=1e-7)
    assert maps["camber_gain"][0, 1, 1] == pytest.approx((camber[1, 2] - camber[1, 0]) / (2 * h), abs=1e-8)
